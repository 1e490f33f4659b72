//! The search for a drawing that fits: to scale where lines and labels have room, in a stretched plane otherwise; pitch,
//! room for names and margins are tried from the most generous on.

use std::collections::BTreeSet;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::area::Area;
use crate::figure::chip::arrows::arrows;
use crate::figure::chip::chains::Chains;
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
use crate::figure::chip::lanes::Laid;
use crate::figure::chip::pitches::Side;
use crate::figure::chip::scan::Along;
use crate::figure::chip::scan::Gap;
use crate::figure::chip::scenery;
use crate::figure::chip::stretch::Frame;
use crate::figure::chip::stretch::Plane;
use crate::figure::chip::strokes::mixing_areas;
use crate::figure::chip::strokes::mixing_bundles;
use crate::figure::chip::strokes::reaches;
use crate::figure::chip::strokes::stroke;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::walls::Walls;
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

/// A drawing to scale is not even tried where the lines at a contact would be closer than this, in mm.
const LEAST_DOOR_MM: f64 = 0.3;

/// A drawing to scale is kept when its narrowest lines are at least so far apart, in mm, or its lines on average not much
/// closer than a stretched plane would have them.
#[derive(Clone, Copy)]
struct Worth {
    least_mm: f64,
    share: f64,
}

/// Of a chip about as wide as high; stretching shows nothing better there.
const COMPACT: Worth = Worth { least_mm: 0.5, share: 0.6 };

/// Of a long one, which gains most by being shortened.
const LONG: Worth = Worth { least_mm: 0.85, share: 0.9 };

/// A chip is long when it is so many times as long as wide.
const ASPECT: f64 = 1.8;

/// A straight stretch of border is at least so many pitches long, so that lines are seen to run along it.
const LEAST_RUN: f64 = 0.8;

/// Margins that are tried, in mm: above the chip, below it, at its sides.
const MARGINS_MM: [Margins; 4] = [(5.0, 5.0, 0.8), (8.0, 8.0, 1.5), (12.0, 11.0, 4.0), (16.0, 14.0, 8.0)];

type Margins = (f64, f64, f64);

/// Whether contacts and gates are made large enough for their labels.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Names {
    Inside,
    Anywhere,
    /// Contacts and gaps may be as narrow as their lines allow.
    Squeezed,
}

/// The best drawing: the first on which every label has a free place, otherwise the one that lacks fewest.
pub(super) fn best(drawing: &ChipDrawing<'_>) -> Scene {
    let lines = lines(drawing.channels);
    let nests = Nests::new(drawing, &lines);
    let needs =
        (!is_curved(drawing.layout)).then(|| [Along::X, Along::Y].map(|along| Needs::new(drawing.layout, along)));
    let (mixing, walls) = (mixing_bundles(drawing), Walls::new(drawing));
    let fit = Fit { drawing, lines: &lines, nests: &nests, mixing: &mixing, walls: &walls, needs: needs.as_ref() };
    let mut best: Option<(usize, Scene)> = None;
    for margins in MARGINS_MM {
        let Some(placed) = fit.placed(margins) else { continue };
        let (scene, lack) = fit.finished(&placed, margins);
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

/// Slight bends of borders from which a layout counts as curved.
const CURVED: usize = 12;

/// Whether borders bend so slightly and often that they stand for curves: these must not be stretched.
fn is_curved(layout: &Layout) -> bool {
    let step = |a: (i64, i64), b: (i64, i64)| ((b.0 - a.0) as f64, (b.1 - a.1) as f64);
    let is_slight = |corners: &&[(i64, i64)]| {
        let (u, v) = (step(corners[0], corners[1]), step(corners[1], corners[2]));
        let sine = cross(u, v).abs() / (length(u) * length(v));
        sine > 0.02 && sine < 0.45 && dot(u, v) > 0.0
    };
    let bends = layout.positions.pieces.iter().flat_map(|corners| corners.windows(3));
    bends.filter(is_slight).count() >= CURVED
}

/// Whether a gap lies between two devices of a bench.
fn between_devices(layout: &Layout, gap: Gap) -> bool {
    let [one, other] = gap.sides.map(|(piece, _)| layout.part_of(piece));
    one != other
}

struct Fit<'a> {
    drawing: &'a ChipDrawing<'a>,
    lines: &'a [Lines],
    nests: &'a Nests,
    mixing: &'a BTreeSet<BundleIdx>,
    walls: &'a Walls,
    /// What needs room along x and along y; none for curves, which are never stretched.
    needs: Option<&'a [Needs; 2]>,
}

/// A plane with all lines on it.
struct Placed {
    plane: Plane,
    chains: Chains,
    contacts: Vec<Area>,
    chip: Area,
    laid: Laid,
}

impl Fit<'_> {
    /// To scale where that leaves the lines room, otherwise stretched; whichever is better where neither does well.
    fn placed(&self, (above, below, beside): Margins) -> Option<Placed> {
        let (width, height) = self.drawing.size_mm;
        let frame = Frame { left: beside, top: above, right: width - beside, bottom: height - below };
        let plane = Plane::to_scale(self.drawing.layout, frame).filter(|plane| self.has_doors(plane));
        let to_scale = plane.map(|plane| self.laid(plane, WIDEST_PITCH_MM));
        let Worth { least_mm, share } = self.worth();
        let is_good = |placed: &Placed| placed.laid.near == 0 && placed.laid.least_mm >= least_mm;
        if self.needs.is_none() || to_scale.as_ref().is_some_and(is_good) {
            return to_scale;
        }
        let stretched = self.stretched(frame);
        let (Some(first), Some(second)) = (&to_scale, &stretched) else { return to_scale.or(stretched) };
        let faults = |placed: &Placed| (placed.laid.crossings, placed.laid.near);
        let keeps_scale = match faults(first).cmp(&faults(second)) {
            std::cmp::Ordering::Equal => first.laid.mean_mm >= share * second.laid.mean_mm,
            order => order.is_lt(),
        };
        if keeps_scale { to_scale } else { stretched }
    }

    fn worth(&self) -> Worth {
        let points = || self.drawing.layout.positions.pieces.iter().flatten();
        let extent = |of: fn(&(i64, i64)) -> i64| {
            let (low, high) = (points().map(of).min(), points().map(of).max());
            (high.unwrap_or(0) - low.unwrap_or(0)) as f64
        };
        let (wide, high) = (extent(|point| point.0), extent(|point| point.1));
        if wide.max(high) > ASPECT * wide.min(high) { LONG } else { COMPACT }
    }

    /// Whether the edges of contacts are wide enough for their lines on a plane; on curves they must do.
    fn has_doors(&self, plane: &Plane) -> bool {
        let scale = plane.mm_per_nm.unwrap_or(0.0);
        let mut doors = self.needs.into_iter().flatten().flat_map(Needs::doors);
        doors.all(|(nm, door)| nm as f64 * scale >= self.door_mm(door, LEAST_DOOR_MM))
    }

    /// The stretched plane with the widest pitch whose demands a frame can meet. Should lines still cross there, closer
    /// ones are tried.
    fn stretched(&self, frame: Frame) -> Option<Placed> {
        let (plane, pitch_mm) = self.widest(frame, WIDEST_PITCH_MM)?;
        let mut best = self.laid(plane, pitch_mm);
        if best.laid.crossings > 0 {
            let closer = self.widest(frame, pitch_mm / 3.0).map(|(plane, pitch_mm)| self.laid(plane, pitch_mm));
            best = closer.filter(|closer| closer.laid.crossings < best.laid.crossings).unwrap_or(best);
        }
        Some(best)
    }

    /// The stretched plane with the widest pitch up to a limit.
    fn widest(&self, frame: Frame, limit_mm: f64) -> Option<(Plane, f64)> {
        let needs = self.needs?;
        let start = PITCHES_MM.partition_point(|&pitch_mm| pitch_mm > limit_mm).min(PITCHES_MM.len() - 1);
        let generous = PITCHES_MM.partition_point(|&pitch_mm| pitch_mm >= LEAST_WITH_NAMES_MM).max(start);
        let rules = [
            (Names::Inside, &PITCHES_MM[start..generous]),
            (Names::Anywhere, &PITCHES_MM[start..]),
            (Names::Squeezed, &PITCHES_MM[start..]),
        ];
        rules.into_iter().find_map(|(names, pitches_mm)| {
            let plane = |pitch_mm: f64| Plane::new(needs, self.demands(needs, (names, pitch_mm)), frame);
            let first = pitches_mm.partition_point(|&pitch_mm| plane(pitch_mm).is_none());
            let pitch_mm = *pitches_mm.get(first)?;
            Some((plane(pitch_mm)?, pitch_mm))
        })
    }

    fn demands(&self, needs: &[Needs; 2], (names, pitch_mm): (Names, f64)) -> [Vec<Demand>; 2] {
        let layout = self.drawing.layout;
        needs.each_ref().map(|needs| {
            let rooms = |gap| self.room_mm(layout, (names, pitch_mm), gap);
            needs.demands(rooms, |door| self.door_mm(door, pitch_mm), LEAST_RUN * pitch_mm)
        })
    }

    /// How wide the face between two borders must be on the drawing.
    fn room_mm(&self, layout: &Layout, (names, pitch_mm): (Names, f64), gap: Gap) -> f64 {
        let count: usize = gap.sides.iter().map(|&(piece, on_right)| self.count(piece.0, on_right)).sum();
        let for_lines = (count as f64 + 1.0) * pitch_mm;
        let least = match &layout.topology.faces[gap.face.0] {
            _ if names == Names::Squeezed => 0.4,
            FaceLabel::Vacuum if between_devices(layout, gap) => 6.0,
            FaceLabel::Vacuum => 1.2,
            FaceLabel::Contact(contact) => match (names, gap.along) {
                (Names::Inside, Along::X) => labels::room_for_name(&self.drawing.names.contacts[contact.0].name),
                (Names::Inside, Along::Y) => 4.2,
                _ => 1.6,
            },
            FaceLabel::Mesa(cover) => match (names, gap.along) {
                (Names::Inside, Along::X) if !cover.is_empty() => for_lines + 4.0,
                (Names::Inside, _) => 1.0,
                _ => 0.6,
            },
        };
        for_lines.max(least)
    }

    /// How wide an edge of a contact must be for the lines that come and go through it.
    fn door_mm(&self, door: Door, pitch_mm: f64) -> f64 {
        let sides = door.sides.into_iter().flatten();
        let count: usize = sides.map(|(piece, on_right)| self.count(piece.0, on_right)).sum();
        (count as f64 + 1.0) * pitch_mm
    }

    fn count(&self, piece: usize, on_right: bool) -> usize {
        self.nests.count(Side { piece, on_right })
    }

    fn laid(&self, plane: Plane, pitch_mm: f64) -> Placed {
        let layout = self.drawing.layout;
        let chains = Chains::new(layout, &plane);
        let contact = |contact: usize| {
            Area::of(layout, &chains, |_, label| matches!(label, FaceLabel::Contact(at) if at.0 == contact))
        };
        let contacts: Vec<Area> = (0..self.drawing.names.contacts.len()).map(contact).collect();
        let chip = Area::of(layout, &chains, |_, label| !matches!(label, FaceLabel::Vacuum));
        let ground = Ground {
            drawing: self.drawing,
            chains: &chains,
            lines: self.lines,
            nests: self.nests,
            contacts: &contacts,
            walls: self.walls,
            mixing: self.mixing,
            pitch_mm,
        };
        let laid = ground.lanes();
        Placed { plane, chains, contacts, chip, laid }
    }

    fn finished(&self, placed: &Placed, (_, below, _): Margins) -> (Scene, usize) {
        let drawing = self.drawing;
        // Lines that cross would show other channels than were solved: none are better than wrong ones.
        let are_true = placed.laid.crossings == 0;
        let lanes = if are_true { placed.laid.lanes.as_slice() } else { &[] };
        let reaches = reaches(drawing, lanes, self.mixing);
        let arrows = arrows(drawing, &reaches);
        let overlays = scenery::overlays(drawing, &placed.chains);
        let height_mm = placed.plane.covered().bottom + below;
        let sketch = Sketch {
            drawing,
            contacts: &placed.contacts,
            chip: &placed.chip,
            overlays: &overlays,
            chains: &placed.chains,
            mm_per_nm: placed.plane.mm_per_nm,
            channels: if are_true { labels::Channels::Drawn } else { labels::Channels::TooNear },
            reaches: &reaches,
            arrows: &arrows,
            height_mm,
        };
        let Labelled { marks: labels, lack } = labels::labels(&sketch);
        let mut marks: Vec<Mark> = scenery::under(drawing, &placed.chains, &overlays);
        marks.extend(mixing_areas(drawing, &placed.chains, &reaches));
        marks.extend(reaches.iter().map(stroke));
        marks.extend(arrows.into_iter().map(|arrow| arrow.mark));
        marks.extend(scenery::contacts(&placed.contacts));
        marks.extend(labels);
        (Scene { width_mm: drawing.size_mm.0, height_mm, marks }, lack)
    }
}
