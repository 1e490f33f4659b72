//! Which borders a line must not cross: those of the union of its regions and the two contacts at its ends.

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::courses::holds;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;

/// For every course, for every piece, whether it stops its lines.
pub(super) struct Walls(Vec<Vec<bool>>);

impl Walls {
    /// The walls of all courses.
    pub fn new(drawing: &ChipDrawing<'_>) -> Self {
        let topology = &drawing.layout.topology;
        let of_course = |course: &crate::network::Course| {
            let inside = |face: FaceIdx| match topology.faces[face.0] {
                FaceLabel::Contact(contact) => {
                    course.ends.is_some_and(|ends| contact == ends.from || contact == ends.to)
                }
                _ => holds(drawing, course.band, face),
            };
            topology.pieces.iter().map(|piece| inside(piece.left) != inside(piece.right)).collect()
        };
        Self(drawing.channels.courses.iter().map(of_course).collect())
    }

    /// Whether a piece stops the lines of a course.
    pub fn stop(&self, course: usize, piece: usize) -> bool {
        self.0[course][piece]
    }
}
