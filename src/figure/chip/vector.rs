//! Plane vectors in millimetres, y down: a turn to the right has a positive cross product.

use crate::figure::scene::At;

/// `a + b`.
pub(super) fn add(a: At, b: At) -> At {
    (a.0 + b.0, a.1 + b.1)
}

/// `a − b`.
pub(super) fn sub(a: At, b: At) -> At {
    (a.0 - b.0, a.1 - b.1)
}

/// `a` times a number.
pub(super) fn times(a: At, factor: f64) -> At {
    (a.0 * factor, a.1 * factor)
}

/// Scalar product.
pub(super) fn dot(a: At, b: At) -> f64 {
    a.0 * b.0 + a.1 * b.1
}

/// Positive when `b` lies to the right of `a`, seen along `a`.
pub(super) fn cross(a: At, b: At) -> f64 {
    a.0 * b.1 - a.1 * b.0
}

/// Length.
pub(super) fn length(a: At) -> f64 {
    dot(a, a).sqrt()
}

/// Direction from `a` to `b`; zero when they are one point.
pub(super) fn direction(a: At, b: At) -> At {
    let along = sub(b, a);
    let length = length(along);
    if length > 0.0 { times(along, 1.0 / length) } else { (0.0, 0.0) }
}

/// The direction on the right hand of `a`.
pub(super) fn right_of(a: At) -> At {
    (-a.1, a.0)
}

/// The point at share `t` of the way from `a` to `b`.
pub(super) fn between(a: At, b: At, t: f64) -> At {
    add(a, times(sub(b, a), t))
}

/// Distance of a point from a straight stretch.
pub(super) fn distance(point: At, (a, b): (At, At)) -> f64 {
    let along = sub(b, a);
    let square = dot(along, along);
    let t = if square > 0.0 { (dot(sub(point, a), along) / square).clamp(0.0, 1.0) } else { 0.0 };
    length(sub(point, between(a, b, t)))
}

/// Whether two straight stretches cross, or touch.
pub(super) fn crosses((a, b): (At, At), (c, d): (At, At)) -> bool {
    let side = |p, q, r| cross(sub(q, p), sub(r, p));
    side(a, b, c) * side(a, b, d) <= 0.0 && side(c, d, a) * side(c, d, b) <= 0.0 && (side(a, b, c) != side(a, b, d))
}

/// Distance of two straight stretches; 0 where they cross.
pub(super) fn gap(s: (At, At), t: (At, At)) -> f64 {
    if crosses(s, t) {
        return 0.0;
    }
    [distance(s.0, t), distance(s.1, t), distance(t.0, s), distance(t.1, s)].into_iter().fold(f64::INFINITY, f64::min)
}
