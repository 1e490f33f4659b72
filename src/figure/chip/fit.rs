//! The search for a drawing that fits: pitch, room for names and margins are tried from the most generous on.

use std::collections::BTreeSet;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::area::Area;
use crate::figure::chip::arrows::arrows;
use crate::figure::chip::courses::Lines;
use crate::figure::chip::courses::Nests;
use crate::figure::chip::courses::lines;
use crate::figure::chip::demand::Demand;
use crate::figure::chip::demand::Door;
use crate::figure::chip::demand::Needs;
use crate::figure::chip::labels;
use crate::figure::chip::labels::Labelled;
use crate::figure::chip::labels::Sketch;
use crate::figure::chip::lanes::Ground;
use crate::figure::chip::lanes::Lane;
use crate::figure::chip::lanes::are_clear;
use crate::figure::chip::scan::Along;
use crate::figure::chip::scan::Gap;
use crate::figure::chip::scenery;
use crate::figure::chip::stretch::Frame;
use crate::figure::chip::stretch::Plane;
use crate::figure::chip::strokes::mixing_areas;
use crate::figure::chip::strokes::mixing_bundles;
use crate::figure::chip::strokes::reaches;
use crate::figure::chip::strokes::stroke;
use crate::figure::scene::At;
use crate::figure::scene::Mark;
use crate::figure::scene::Scene;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::network::BundleIdx;

/// Distance of neighbouring channel lines where there is room enough, in mm.
pub(super) const WIDEST_PITCH_MM: f64 = 1.15;

/// Distances of neighbouring channel lines that are tried, in mm.
const PITCHES_MM: [f64; 16] =
    [WIDEST_PITCH_MM, 1.05, 0.95, 0.85, 0.75, 0.65, 0.57, 0.5, 0.43, 0.37, 0.32, 0.27, 0.22, 0.17, 0.12, 0.06];

/// Below this pitch names move out of their contacts to give the lines more room.
const LEAST_WITH_NAMES_MM: f64 = 0.5;

/// Margins that are tried, in mm: above the chip, below it, at its sides.
const MARGINS_MM: [(f64, f64, f64); 4] = [(5.0, 5.0, 0.8), (8.0, 8.0, 1.5), (12.0, 11.0, 4.0), (16.0, 14.0, 8.0)];

/// Whether contacts and gates are made large enough for their labels.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Names {
    Inside,
    Anywhere,
    /// Contacts and gaps may be as narrow as their lines allow.
    Squeezed,
    /// The same, and every stretch holds all lines twice: for corners that nearly meet.
    Even,
}

/// The best drawing: the first on which every label has a free place, otherwise the one that lacks fewest.
pub(super) fn best(drawing: &ChipDrawing<'_>) -> Scene {
    let lines = lines(drawing.channels);
    let nests = Nests::new(drawing.channels, &lines, drawing.polarity, drawing.layout.topology.pieces.len());
    let mut nests = vec![nests.complete(), nests.levelled(drawing), nests];
    nests.dedup();
    let needs = [Along::X, Along::Y].map(|along| Needs::new(drawing.layout, along));
    let mixing = mixing_bundles(drawing);
    let fit = Fit { drawing, lines: &lines, nests: &nests, mixing: &mixing, needs: &needs };
    let mut best: Option<(usize, Scene)> = None;
    for margins in MARGINS_MM {
        let Some((scene, lack)) = fit.scene(margins) else { continue };
        // Once more margin gives no label a place, still more would only take room from the lines.
        if best.as_ref().is_some_and(|(least, _)| lack >= *least) {
            break;
        }
        best = Some((lack, scene));
        if lack == 0 {
            break;
        }
    }
    best.map_or(Scene { width_mm: drawing.size_mm.0, height_mm: 0.0, marks: Vec::new() }, |(_, scene)| scene)
}

/// One try.
#[derive(Clone, Copy)]
struct Way<'a> {
    names: Names,
    nests: &'a Nests,
    pitch_mm: f64,
}

impl Way<'_> {
    /// How wide the face between two borders must be on the drawing.
    fn room_mm(self, layout: &Layout, drawing: &ChipDrawing<'_>, gap: Gap) -> f64 {
        let Way { names, pitch_mm, .. } = self;
        let count: usize = gap.sides.iter().map(|&(piece, on_right)| self.nests.count(piece, on_right)).sum();
        let for_lines = (count as f64 + 1.0) * pitch_mm;
        let least = match &layout.topology.faces[gap.face.0] {
            _ if matches!(names, Names::Squeezed | Names::Even) => 0.4,
            FaceLabel::Vacuum if between_devices(layout, gap) => 6.0,
            FaceLabel::Vacuum => 1.2,
            FaceLabel::Contact(contact) => match (names, gap.along) {
                (Names::Inside, Along::X) => labels::room_for_name(&drawing.names.contacts[contact.0].name),
                (Names::Inside, Along::Y) => 4.2,
                _ => 1.6,
            },
            FaceLabel::Mesa(cover) => match (names, gap.along) {
                (Names::Inside, Along::X) if !cover.is_empty() => (count as f64 + 1.0) * pitch_mm + 4.0,
                (Names::Inside, _) => 1.0,
                _ => 0.6,
            },
        };
        for_lines.max(least)
    }

    /// How wide an edge of a contact must be for the lines that come and go through it.
    fn door_mm(self, door: Door) -> f64 {
        let sides = door.sides.into_iter().flatten();
        let count: usize = sides.map(|(piece, on_right)| self.nests.count(piece, on_right)).sum();
        (count as f64 + 1.0) * self.pitch_mm
    }
}

/// Whether a gap lies between two devices of a bench.
fn between_devices(layout: &Layout, gap: Gap) -> bool {
    let [one, other] = gap.sides.map(|(piece, _)| layout.part_of(piece));
    one != other
}

struct Fit<'a> {
    drawing: &'a ChipDrawing<'a>,
    lines: &'a [Lines],
    /// Ways to nest the lines: the last is the densest, those before give up places for evenness.
    nests: &'a [Nests],
    mixing: &'a BTreeSet<BundleIdx>,
    /// What needs room along x and along y.
    needs: &'a [Needs; 2],
}

/// A plane on which all lines keep clear, with everything drawn on it.
struct Placed {
    plane: Plane,
    contacts: Vec<Area>,
    chip: Area,
    lanes: Vec<Lane>,
    pitch_mm: f64,
}

impl Fit<'_> {
    /// The drawing with the widest pitch that fits between margins, and how many labels found no place.
    fn scene(&self, margins: (f64, f64, f64)) -> Option<(Scene, usize)> {
        let generous = PITCHES_MM.iter().take_while(|&&pitch_mm| pitch_mm >= LEAST_WITH_NAMES_MM).count();
        let rules = [
            (Names::Inside, &PITCHES_MM[..generous]),
            (Names::Anywhere, &PITCHES_MM),
            (Names::Squeezed, &PITCHES_MM),
            (Names::Even, &PITCHES_MM),
        ];
        let halved = rules.iter().find_map(|&(names, pitches)| self.widest(names, pitches, margins));
        let tried = || {
            let all = rules.iter().flat_map(|&(names, pitches)| pitches.iter().map(move |&pitch_mm| (names, pitch_mm)));
            all.into_iter().find_map(|(names, pitch_mm)| self.nested(names, pitch_mm, margins))
        };
        Some(self.finished(&halved.or_else(tried)?, margins))
    }

    /// The widest pitch that fits, by halving: lines that fit also fit when they lie closer. Should that once not hold,
    /// a narrower pitch is found, or none; what is found has been tried all the same.
    fn widest(&self, names: Names, pitches_mm: &[f64], margins: (f64, f64, f64)) -> Option<Placed> {
        let (mut low, mut high) = (0, pitches_mm.len());
        let mut widest = None;
        while low < high {
            let middle = (low + high) / 2;
            match self.nested(names, pitches_mm[middle], margins) {
                Some(placed) => (widest, high) = (Some(placed), middle),
                None => low = middle + 1,
            }
        }
        widest
    }

    /// Lines at one pitch, nested as densely as possible first.
    fn nested(&self, names: Names, pitch_mm: f64, margins: (f64, f64, f64)) -> Option<Placed> {
        let ways = self.nests.iter().rev().map(|nests| Way { names, nests, pitch_mm });
        ways.into_iter().find_map(|way| self.placed(way, margins))
    }

    fn placed(&self, way: Way<'_>, (above, below, beside): (f64, f64, f64)) -> Option<Placed> {
        let layout = self.drawing.layout;
        let (width, height) = self.drawing.size_mm;
        let frame = Frame { left: beside, top: above, right: width - beside, bottom: height - below };
        let demands = [0, 1].map(|axis| {
            let needs = &self.needs[axis];
            let mut all = needs.demands(|gap| way.room_mm(layout, self.drawing, gap), |door| way.door_mm(door));
            let stretches = (1..needs.coordinates.len()).filter(|_| way.names == Names::Even);
            all.extend(stretches.map(|to| self.even(to, way.pitch_mm)));
            all
        });
        let plane = Plane::new(self.needs, demands, frame)?;
        let contacts: Vec<Area> = (0..self.drawing.names.contacts.len())
            .map(|contact| {
                Area::of(layout, &plane, |_, label| matches!(label, FaceLabel::Contact(at) if at.0 == contact))
            })
            .collect();
        let chip = Area::of(layout, &plane, |_, label| !matches!(label, FaceLabel::Vacuum));
        let (drawing, lines, Way { names: _, nests, pitch_mm }) = (self.drawing, self.lines, way);
        let chains: Vec<Vec<At>> = layout.positions.pieces.iter().map(|piece| plane.chain(piece)).collect();
        let ground =
            Ground { drawing, chains: &chains, lines, nests, contacts: &contacts, mixing: self.mixing, pitch_mm };
        let lanes = ground.lanes()?;
        are_clear(&ground, &lanes, &chip).then_some(())?;
        Some(Placed { plane, contacts, chip, lanes, pitch_mm })
    }

    /// Room for all lines on both sides between two neighbouring coordinates.
    fn even(&self, to: usize, pitch_mm: f64) -> Demand {
        let most = self.lines.iter().map(|lines| lines.end()).max().unwrap_or(0);
        Demand { from: to - 1, to, mm: (2 * most + 1) as f64 * pitch_mm }
    }

    fn finished(&self, placed: &Placed, (_, below, _): (f64, f64, f64)) -> (Scene, usize) {
        let drawing = self.drawing;
        let reaches = reaches(drawing, &placed.lanes, self.mixing);
        let arrows = arrows(drawing, &reaches, placed.pitch_mm);
        let overlays = scenery::overlays(drawing, &placed.plane);
        let height_mm = placed.plane.covered().bottom + below;
        let sketch = Sketch {
            drawing,
            contacts: &placed.contacts,
            chip: &placed.chip,
            overlays: &overlays,
            plane: &placed.plane,
            reaches: &reaches,
            arrows: &arrows,
            pitch_mm: placed.pitch_mm,
            height_mm,
        };
        let Labelled { marks: labels, lack } = labels::labels(&sketch);
        let mut marks: Vec<Mark> = scenery::under(drawing, &placed.plane, &overlays);
        marks.extend(mixing_areas(drawing, &placed.plane, &reaches, placed.pitch_mm));
        marks.extend(reaches.iter().map(|reach| stroke(reach, placed.pitch_mm)));
        marks.extend(arrows.into_iter().map(|arrow| arrow.mark));
        marks.extend(scenery::contacts(&placed.contacts));
        marks.extend(labels);
        (Scene { width_mm: drawing.size_mm.0, height_mm, marks }, lack)
    }
}
