//! Circles as fine polygons on the grid.

use crate::layout::grid::Cell;
use crate::layout::grid::Grid;
use crate::layout::grid::round_to_cell;

/// Fewest and most corners of a circle. With the most the sides of a rim of 1 mm radius still stay within 10 nm of it, and
/// those of any rim within 10 millionths of the radius: finer corners change no length that a result could show.
const CORNERS: (i64, i64) = (64, 720);

/// The circle of this diameter in nm round the origin, anticlockwise from the x axis; alike in all eight octants.
///
/// A side of a regular polygon with n corners leaves the circle by the sagitta r (1 − cos(π/n)) ≈ π² r/(2 n²), so that
/// n² = π² d/(4 s) keeps it within one pixel s (geometry of the circle); 10 stands for π².
pub(super) fn circle(diameter: i64, grid: Grid) -> Vec<Cell> {
    let wanted = (10 * i128::from(diameter) / (4 * i128::from(grid.snap))).isqrt() as i64 + 1;
    let octant = ((wanted + 7) / 8).clamp(CORNERS.0 / 8, CORNERS.1 / 8);
    let radius = diameter as f64 / (2.0 * grid.snap as f64);
    let turn = std::f64::consts::FRAC_PI_4 / octant as f64;
    let corner = |n: i64| {
        let (sine, cosine) = libm::sincos(n as f64 * turn);
        (round_to_cell(radius * cosine), round_to_cell(radius * sine))
    };
    let first: Vec<Cell> = (0..=octant).map(corner).collect();
    let second = first[1..first.len() - 1].iter().rev().map(|(x, y)| (*y, *x));
    let quarter: Vec<Cell> = first.iter().copied().chain(second).collect();
    let turned = |(x, y): Cell, quarters: usize| [(x, y), (-y, x), (-x, -y), (y, -x)][quarters];
    (0..4).flat_map(|quarters| quarter.iter().map(move |cell| turned(*cell, quarters))).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::layout::grid::doubled_area;

    /// The area of a regular polygon with n corners is (n/2) r² sin(2π/n); rounding to pixels moves a corner by half a
    /// diagonal at most.
    #[test]
    fn a_circle_has_the_area_of_its_polygon() {
        for (diameter, snap, corners) in
            [(200_000, 10, 224), (2_000_000, 10, 712), (90_000_000, 10, 720), (400, 10, 64)]
        {
            let ring = circle(diameter, Grid { snap });
            assert_eq!(ring.len() as i64, corners, "{diameter}");
            let radius = diameter as f64 / 2.0 / snap as f64;
            let n = corners as f64;
            let doubled = n * radius * radius * libm::sin(std::f64::consts::TAU / n);
            let slack = 2.0 * 0.71 * std::f64::consts::TAU * radius;
            assert!((doubled_area(&ring) as f64 - doubled).abs() < slack, "{diameter}");
        }
    }

    #[test]
    fn a_circle_looks_alike_from_all_sides() {
        let ring = circle(123_450, Grid { snap: 10 });
        let mut turned: Vec<Cell> = ring.iter().map(|(x, y)| (-y, *x)).collect();
        let mut mirrored: Vec<Cell> = ring.iter().map(|(x, y)| (*y, *x)).collect();
        let mut ring = ring;
        [&mut ring, &mut turned, &mut mirrored].into_iter().for_each(|cells| cells.sort_unstable());
        assert_eq!(ring, turned);
        assert_eq!(ring, mirrored);
    }
}
