//! Places for texts outside the chip: close beside a box first, then row by row further out with a leader.

use crate::figure::chip::labels::Placing;
use crate::figure::chip::scenery;
use crate::figure::chip::stretch::Frame;
use crate::figure::chip::style;
use crate::figure::chip::texts::Wording;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;
use crate::figure::scene::Segment;

/// Free space between a box and a text beside it, in mm.
const BESIDE_MM: f64 = 0.9;

/// Free space between a box and a text above it, in mm; below there is a little more, for the text's own tails.
const ABOVE_MM: f64 = 1.1;

/// Distance of the rows of texts further out, in mm.
const ROW_MM: f64 = 1.6;

/// Texts nearer than this need no leader, in mm.
const CLOSE_MM: f64 = 1.6;

impl Placing<'_> {
    /// Puts a text outside the chip next to a box; none where no place is free. Gives the box that the text fills.
    pub fn beside(&mut self, frame: Frame, text: &Wording) -> Option<Frame> {
        self.first_free(places(frame, text), text)
    }

    /// Puts a text straight above or below another one.
    pub fn stacked(&mut self, frame: Frame, text: &Wording) -> Option<Frame> {
        self.first_free([-1.0, 1.0].map(|sign| row(frame, text, (sign, 0.0, 0.0))), text)
    }

    /// Puts a text close on the right or left of a box.
    pub fn flanking(&mut self, frame: Frame, text: &Wording) -> Option<Frame> {
        self.first_free([1.0, -1.0].map(|sign| sideways(frame, text, sign)), text)
    }

    fn first_free(&mut self, places: impl IntoIterator<Item = Place>, text: &Wording) -> Option<Frame> {
        let place = places.into_iter().find(|place| self.is_free(place, text))?;
        if let Some((from, to)) = place.leader {
            let moves = vec![Segment::Move(from), Segment::Line(to)];
            self.done.marks.push(scenery::path(moves, Some(style::pen(style::RIM, 0.15)), None));
            self.obstacles.add_stroke(((from, to), 0.1));
        }
        self.put(text, place.at);
        Some(text.frame(place.at))
    }

    fn is_free(&self, place: &Place, text: &Wording) -> bool {
        let taken = text.frame(place.at);
        // The leader begins at its own contact, which does not count.
        let beyond = |(from, to): (At, At)| (add(from, times(direction(from, to), 0.5)), to);
        self.obstacles.leave(taken)
            && taken.is_outside(self.sketch.chip)
            && place.leader.is_none_or(|leader| self.obstacles.leave_line(beyond(leader)))
    }
}

/// A place for a text beside a box, and the leader to it.
struct Place {
    at: At,
    leader: Option<(At, At)>,
}

/// Places around a box, the nearest first.
fn places(frame: Frame, text: &Wording) -> Vec<Place> {
    let near = [sideways(frame, text, 1.0), sideways(frame, text, -1.0)];
    let upright = [-1.0, 1.0].map(|sign| row(frame, text, (sign, 0.0, 0.0)));
    let mut places: Vec<Place> = near.into_iter().chain(upright).collect();
    for shift in [0.0, 0.5, -0.5, 1.0, -1.0] {
        for rows in 0..10 {
            places.extend([-1.0, 1.0].map(|sign| row(frame, text, (sign, f64::from(rows), shift))));
        }
    }
    places
}

fn sideways(frame: Frame, text: &Wording, sign: f64) -> Place {
    let edge = if sign > 0.0 { frame.right } else { frame.left };
    Place { at: (edge + sign * (BESIDE_MM + text.width() / 2.0), frame.centre().1), leader: None }
}

/// A place above (−1) or below (1) a box, so many rows out, shifted by a share of half the text's width.
fn row(frame: Frame, text: &Wording, (sign, rows, shift): (f64, f64, f64)) -> Place {
    let half_height = text.height() / 2.0;
    let (edge, tail) = if sign > 0.0 { (frame.bottom, 0.0) } else { (frame.top, 0.4) };
    let x = frame.centre().0;
    let at = (x + shift * text.width() / 2.0, edge + sign * (ABOVE_MM + tail + rows * ROW_MM + half_height));
    let leader = ((x, edge), (x, at.1 - sign * (half_height + 0.6) + if sign < 0.0 { 0.5 } else { 0.0 }));
    Place { at, leader: Some(leader).filter(|&(from, to)| length(sub(to, from)) >= CLOSE_MM) }
}
