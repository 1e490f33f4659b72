//! Texts inside regions: filling factors, and names of gates that have no room around.

use crate::figure::chip::area::Area;
use crate::figure::chip::labels::Placing;
use crate::figure::chip::style;
use crate::figure::chip::texts::Wording;
use crate::figure::chip::texts::number;
use crate::figure::fonts::Face;
use crate::figure::scene::At;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;

impl Placing<'_> {
    /// The filling factor of every region that has room for it, where most space is left around it.
    pub fn fillings(&mut self) {
        let faces = self.sketch.drawing.layout.topology.faces.iter().zip(self.sketch.drawing.fillings);
        for (face, (label, filling)) in faces.enumerate() {
            if !matches!(label, FaceLabel::Mesa(_)) {
                continue;
            }
            let area = Area::of(self.sketch.drawing.layout, self.sketch.chains, |at, _| at == FaceIdx(face));
            let sizes = [style::FILLING_PT, 8.0, style::SMALL_PT];
            let wordings = sizes.map(|size_pt| Wording::new(number(filling), Face::Bold, size_pt, style::DARK));
            let found = wordings.iter().find_map(|text| Some((text, self.roomiest(&area, text)?)));
            if let Some((text, at)) = found {
                self.put(text, at);
            }
        }
    }

    /// The free place for a text inside an area that has most space around it; of equal ones the nearest to the middle.
    pub fn roomiest(&self, area: &Area, text: &Wording) -> Option<At> {
        const GRID: usize = 20;
        let frame = area.frame()?;
        let centre = frame.centre();
        let share = |at: usize| at as f64 / GRID as f64;
        let points = (0..=GRID * GRID + 2 * GRID).map(|at| {
            let (column, row) = (at % (GRID + 1), at / (GRID + 1));
            (frame.left + share(column) * frame.width(), frame.top + share(row) * frame.height())
        });
        let inside = |point: At| {
            let taken = text.frame(point);
            area.holds(point) && self.obstacles.leave(taken) && !area.sides().any(|side| taken.is_met_by(side))
        };
        let worth = |point: At| {
            let away = libm::hypot(point.0 - centre.0, point.1 - centre.1);
            self.obstacles.room_mm(point) - 0.25 * away
        };
        let free = points.filter(|&point| inside(point)).map(|point| (worth(point), point));
        free.reduce(|best, next| if next.0 > best.0 + 1e-6 { next } else { best }).map(|(_, point)| point)
    }
}
