//! The strip that shows a difference on a scale from −3 u to +3 u.

use crate::figure::fonts;
use crate::figure::scene::At;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::circle;
use crate::report::Cell;
use crate::report::Strip;
use crate::sheet::grid;
use crate::sheet::page::Page;
use crate::sheet::typeset::Style;

/// Half the length of the scale, in mm.
pub const REACH_MM: f64 = 5.4;
/// Space on both sides for a triangle with its number.
const WING_MM: f64 = 2.6;
/// Whole width.
pub const WIDTH_MM: f64 = 2.0 * (REACH_MM + WING_MM);
/// Radius of the dot of a difference inside the scale.
const DOT_MM: f64 = 0.62;

/// Draws the strip of a cell with its middle at a point.
pub fn draw(page: &mut Page, (x_mm, y_mm): At, cell: &Cell) {
    let Some(strip) = &cell.strip else { return };
    let corner = |dx: f64, dy: f64| (x_mm + dx, y_mm + dy);
    let band = 0.95;
    page.area(
        &[corner(-REACH_MM, -band), corner(REACH_MM, -band), corner(REACH_MM, band), corner(-REACH_MM, band)],
        grid::BAND,
    );
    match &strip.beyond {
        None => {
            page.rule(corner(-REACH_MM - WING_MM, 0.0), WIDTH_MM, 0.1, grid::PALE);
            zero(page, (x_mm, y_mm), band);
            dot(page, corner(strip.at * REACH_MM, 0.0));
        }
        Some(number) => triangle(page, (x_mm, y_mm), strip, (&number.text, cell.odd)),
    }
}

fn zero(page: &mut Page, (x, y): At, band: f64) {
    page.area(&[(x - 0.05, y - band), (x + 0.05, y - band), (x + 0.05, y + band), (x - 0.05, y + band)], grid::GREY);
}

fn dot(page: &mut Page, at: At) {
    page.path(PathMark { segments: circle(at, DOT_MM), stroke: None, fill: Some(grid::INK), role: Role::Plain });
}

/// A triangle that points out of the scale, its number inside the scale; a number too long for that stands in the whole
/// table only. Bold and coloured only where the reading disagrees: within a wider limit it is beyond the scale and right.
fn triangle(page: &mut Page, (x, y): At, strip: &Strip, (number, odd): (&str, bool)) {
    let out = strip.at.signum();
    let tip = (x + out * (REACH_MM + WING_MM), y);
    let foot = tip.0 - out * 1.9;
    page.area(&[tip, (foot, y - 1.0), (foot, y + 1.0)], if odd { grid::ODD } else { grid::INK });
    let bold = Style { colour: grid::ODD, ..Style::bold(grid::LEAST_PT) };
    let style = if odd { bold } else { Style::text(grid::LEAST_PT) };
    let style = if out > 0.0 { style.right() } else { style };
    let base = y + fonts::cap_height_mm(style.face, style.size_pt) / 2.0;
    if style.width_mm(number) <= 2.0 * REACH_MM {
        page.text((foot - out * 0.7, base), style, number);
    }
    if style.width_mm(number) <= REACH_MM {
        // The line stays on the other half, clear of the number.
        page.rule((x - out * (REACH_MM + WING_MM), y), out * WIDTH_MM / 2.0, 0.1, grid::PALE);
        zero(page, (x, y), 0.95);
    }
}
