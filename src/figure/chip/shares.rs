//! Labels of channels: the share of the source voltage where it is neither all nor nothing, and how many channels a
//! line stands for.

use std::collections::BTreeMap;

use crate::figure::chip::arrows::runs;
use crate::figure::chip::courses::region_of;
use crate::figure::chip::labels::LACK_OF_SHARE;
use crate::figure::chip::labels::Placing;
use crate::figure::chip::strokes::Reach;
use crate::figure::chip::style;
use crate::figure::chip::texts::Wording;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::times;
use crate::figure::fonts::Face;
use crate::figure::scene::At;
use crate::layout::FaceIdx;
use crate::network::BandIdx;
use crate::number::Number;
use crate::quantity::printed;

/// Places the labels of all channels.
pub(super) fn place(placing: &mut Placing<'_>) {
    for (text, reaches) in wordings(placing.sketch.reaches, placing) {
        let text = Wording::new(text, Face::Regular, style::SMALL_PT, style::GREY);
        let found = beside_runs(placing, &reaches, &text);
        placing.done.lack += if found.is_none() { LACK_OF_SHARE } else { 0 };
        if let Some(at) = found {
            placing.put(&text, at);
        }
    }
}

type Pieces = std::collections::BTreeSet<usize>;

/// What is to be written, with the stretches it speaks of: lines side by side with one potential get one label.
fn wordings<'a>(reaches: &'a [Reach<'a>], placing: &Placing<'_>) -> Vec<(String, Vec<&'a Reach<'a>>)> {
    let mut groups: Vec<(Pieces, Option<&Number>, Vec<&Reach<'a>>)> = Vec::new();
    for reach in reaches {
        let pieces = pieces(reach, placing);
        let potential = reach.potential;
        let touches = |held: &Pieces, group: &[&Reach<'a>]| {
            !held.is_disjoint(&pieces) || group.iter().any(|other| other.lane.course == reach.lane.course)
        };
        let (same, others): (Vec<_>, Vec<_>) =
            groups.into_iter().partition(|(held, value, group)| *value == potential && touches(held, group));
        groups = others;
        let mut joined = (pieces, potential, vec![reach]);
        for (pieces, _, reaches) in same {
            joined.0.extend(pieces);
            joined.2.extend(reaches);
        }
        groups.push(joined);
    }
    let between = |value: &&Number| value.to_f64() > 0.0 && value.to_f64() < 1.0;
    let shares =
        groups.into_iter().filter_map(|(_, value, reaches)| Some((printed::share(value.filter(between)?), reaches)));
    let mut all: Vec<(String, Vec<&Reach<'a>>)> = shares.collect();
    all.extend(counts(reaches, placing));
    all
}

fn pieces(reach: &Reach<'_>, placing: &Placing<'_>) -> Pieces {
    let steps = &placing.sketch.drawing.channels.courses[reach.lane.course].steps;
    let parts = reach.bits.iter().filter_map(|bit| match bit.part {
        crate::figure::chip::courses::Part::Step(at) => steps.get(at),
        _ => None,
    });
    parts.map(|step| step.piece.0).collect()
}

/// `×30` beside a line that stands for more than one channel, once for each band and region in which it begins.
fn counts<'a>(reaches: &'a [Reach<'a>], placing: &Placing<'_>) -> Vec<(String, Vec<&'a Reach<'a>>)> {
    let drawing = placing.sketch.drawing;
    let mut groups: BTreeMap<(BandIdx, Option<FaceIdx>), Vec<&Reach<'a>>> = BTreeMap::new();
    for reach in reaches.iter().filter(|reach| reach.lane.weight > 1.0) {
        let course = &drawing.channels.courses[reach.lane.course];
        let region = course.steps.first().map(|step| region_of(drawing, course.band, *step));
        groups.entry((course.band, region)).or_default().push(reach);
    }
    let text = |reaches: &Vec<&Reach<'_>>| format!("×{}", reaches.first().map_or(1.0, |reach| reach.lane.weight));
    groups.into_values().map(|reaches| (text(&reaches), reaches)).collect()
}

/// Half millimetres up to which a label may stand away from its line.
const FURTHEST: u32 = 7;

/// The free place nearest to a straight run of the lines.
fn beside_runs(placing: &Placing<'_>, reaches: &[&Reach<'_>], text: &Wording) -> Option<At> {
    let runs: Vec<(At, At)> = reaches.iter().flat_map(|reach| runs(&reach.bits)).collect();
    for step in 0..FURTHEST {
        let away_mm = 0.5 + 0.5 * f64::from(step);
        for share in [0.5, 0.3, 0.7, 0.15, 0.85] {
            for sign in [1.0, -1.0] {
                let at = runs.iter().map(|&run| next_to(run, (share, sign * away_mm), text));
                let free = at.into_iter().find(|&at| placing.obstacles.leave(text.frame(at)));
                if free.is_some() {
                    return free;
                }
            }
        }
    }
    None
}

/// A place beside a run: at a share of its length, so far from it that the text's box clears the line.
fn next_to((from, to): (At, At), (share, away_mm): (f64, f64), text: &Wording) -> At {
    let side = right_of(direction(from, to));
    let extent = side.0.abs() * text.width() / 2.0 + side.1.abs() * text.height() / 2.0;
    add(between(from, to, share), times(side, away_mm + extent * away_mm.signum()))
}
