//! Cutting drawn curves at points that lie on them.

use crate::arrange::{Boundary, OuterCircle};
use crate::curve::{Curve, Point};

/// First point of a curve.
pub(crate) fn start(curve: &Curve) -> Point {
    match *curve {
        Curve::Line { from, .. } | Curve::Arc { from, .. } => from,
    }
}

/// Last point of a curve.
pub(crate) fn end(curve: &Curve) -> Point {
    match *curve {
        Curve::Line { to, .. } | Curve::Arc { to, .. } => to,
    }
}

/// Length along the curve, m.
pub(crate) fn length(curve: &Curve) -> f64 {
    match *curve {
        Curve::Line { from, to } => (to.r - from.r).hypot(to.z - from.z),
        Curve::Arc {
            from, centre, sweep, ..
        } => (from.r - centre.r).hypot(from.z - centre.z) * sweep.abs(),
    }
}

/// The point at the share `t` (0..1) of the length. On straight lines along the axis or a mirror the constant
/// coordinate is kept to the last bit.
pub(crate) fn point_at(curve: &Curve, t: f64) -> Point {
    match *curve {
        Curve::Line { from, to } => Point {
            r: between(from.r, to.r, t),
            z: between(from.z, to.z, t),
        },
        Curve::Arc {
            from,
            to,
            centre,
            sweep,
        } => {
            // Turned from the nearer end, so that rounding vanishes towards both ends.
            let (base, angle) = if t <= 0.5 {
                (from, sweep * t)
            } else {
                (to, sweep * (t - 1.0))
            };
            let (dr, dz) = (base.r - centre.r, base.z - centre.z);
            // 1 - cos by the half angle: no cancellation on short arcs.
            let (sin, versine) = (angle.sin(), 2.0 * (angle / 2.0).sin().powi(2));
            Point {
                r: base.r - dr * versine - dz * sin,
                z: base.z - dz * versine + dr * sin,
            }
        }
    }
}

fn between(a: f64, b: f64, t: f64) -> f64 {
    if a == b {
        a
    } else if t == 0.5 {
        // Exactly symmetric in the two ends: both neighbours of an edge get the same bits.
        0.5 * (a + b)
    } else {
        a + (b - a) * t
    }
}

/// The point at share `t` of an edge with that boundary kind: on the outer circle z counts and r follows from it.
pub(crate) fn node_on(curve: &Curve, t: f64, boundary: Boundary, circle: Option<&OuterCircle>) -> Point {
    let point = point_at(curve, t);
    match (boundary, circle) {
        (Boundary::Circle, Some(circle)) => on_circle(circle, point.z),
        (Boundary::Axis, _) => Point { r: 0.0, z: point.z },
        _ => point,
    }
}

/// The node of the outer circle at height `z`.
pub(crate) fn on_circle(circle: &OuterCircle, z: f64) -> Point {
    let height = z - circle.centre_z_m;
    Point {
        r: ((circle.radius_m - height) * (circle.radius_m + height))
            .max(0.0)
            .sqrt(),
        z,
    }
}

/// The two parts of a curve cut at `point`, which lies at share `t`.
pub(crate) fn cut(curve: &Curve, t: f64, point: Point) -> [Curve; 2] {
    match *curve {
        Curve::Line { from, to } => [Curve::Line { from, to: point }, Curve::Line { from: point, to }],
        Curve::Arc {
            from,
            to,
            centre,
            sweep,
        } => [
            Curve::Arc {
                from,
                to: point,
                centre,
                sweep: sweep * t,
            },
            Curve::Arc {
                from: point,
                to,
                centre,
                sweep: sweep - sweep * t,
            },
        ],
    }
}
