//! Cutting drawn curves at nodes that lie on them.

use crate::arrange::{Boundary, OuterCircle};
use crate::curve::{Curve, Point};

/// The node at share `t` of a curve with that boundary kind: on the outer circle z counts and r follows from it.
pub(crate) fn node_on(curve: &Curve, t: f64, boundary: Boundary, circle: Option<&OuterCircle>) -> Point {
    let point = curve.at(t);
    match (curve, circle) {
        (Curve::Arc { .. }, Some(circle)) if boundary == Boundary::Circle => on_circle(circle, point.z),
        // Lines along the axis or the mirror keep their constant coordinate to the last bit.
        (Curve::Line { from, to }, _) => Point {
            r: if from.r == to.r { from.r } else { point.r },
            z: if from.z == to.z { from.z } else { point.z },
        },
        _ => point,
    }
}

/// The node of the outer circle at height `z`.
pub(crate) fn on_circle(circle: &OuterCircle, z: f64) -> Point {
    let height = z - circle.centre_z_m;
    Point::new(
        ((circle.radius_m - height) * (circle.radius_m + height))
            .max(0.0)
            .sqrt(),
        z,
    )
}

/// The two parts of a curve cut at `point`, which lies at share `t`; their ends are exact.
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
