//! The curves of each kind of shape, before they are checked as an outline.

use std::f64::consts::FRAC_PI_2;

use super::{Step, checked};
use crate::curve::{Curve, Point};
use crate::error::ShapeError;

/// A rectangle with rounded corners; those on the axis stay sharp.
pub(super) fn rounded_rect(low: Point, high: Point, fillet_m: f64) -> Result<Vec<Curve>, ShapeError> {
    if fillet_m < 0.0 {
        return Err(ShapeError::NegativeFillet { fillet_m });
    }
    let (width, height) = (high.r - low.r, high.z - low.z);
    if width == 0.0 || height == 0.0 {
        return Err(ShapeError::NoArea {
            area_m2: 0.0,
            size_m: width.max(height),
        });
    }
    let round_off = checked::ROUND_OFF * high.r.abs().max(high.z.abs()).max(low.z.abs());
    let on_axis = low.r.abs() <= round_off;
    // On the axis side nothing is rounded, so the fillet may take the whole width there.
    let limit_m = (0.5 * height).min(if on_axis { width } else { 0.5 * width });
    if fillet_m > limit_m + round_off {
        return Err(ShapeError::FilletTooLarge { fillet_m, limit_m });
    }
    let fillet = fillet_m.min(limit_m);
    let inner = if on_axis { 0.0 } else { fillet };
    let corners = [
        (
            Point::new(low.r, low.z),
            Point::new(0.0, -1.0),
            Point::new(1.0, 0.0),
            inner,
        ),
        (
            Point::new(high.r, low.z),
            Point::new(1.0, 0.0),
            Point::new(0.0, 1.0),
            fillet,
        ),
        (
            Point::new(high.r, high.z),
            Point::new(0.0, 1.0),
            Point::new(-1.0, 0.0),
            fillet,
        ),
        (
            Point::new(low.r, high.z),
            Point::new(-1.0, 0.0),
            Point::new(0.0, -1.0),
            inner,
        ),
    ];
    let mut curves = Vec::with_capacity(8);
    for (k, &(corner, arriving, leaving, radius)) in corners.iter().enumerate() {
        let (from, to) = (corner - arriving * radius, corner + leaving * radius);
        if radius > 0.0 {
            curves.push(Curve::arc(from, to, FRAC_PI_2));
        }
        let (next, next_arriving, _, next_radius) = corners[(k + 1) % 4];
        let side_end = next - next_arriving * next_radius;
        let side = (side_end - to).dot(leaving);
        if side > round_off || radius + next_radius == 0.0 {
            curves.push(Curve::line(to, side_end));
        }
    }
    Ok(joined(curves))
}

/// Makes each curve start where the one before ends, to the last bit.
fn joined(mut curves: Vec<Curve>) -> Vec<Curve> {
    for k in 0..curves.len() {
        let end = curves[(k + 1) % curves.len()].start();
        curves[k] = curves[k].with_ends(curves[k].start(), end);
    }
    curves
}

/// A circle, or what lies of it at r >= 0. Its centre is less than a radius beyond the axis.
pub(super) fn clipped_circle(centre: Point, radius: f64) -> Vec<Curve> {
    let touches = radius * checked::ROUND_OFF;
    if centre.r >= radius - touches {
        // Four quarters from the point nearest the axis, which is on the axis exactly where it touches.
        let left = if centre.r - radius <= touches {
            0.0
        } else {
            centre.r - radius
        };
        let corners = [
            Point::new(left, centre.z),
            Point::new(centre.r, centre.z - radius),
            Point::new(centre.r + radius, centre.z),
            Point::new(centre.r, centre.z + radius),
        ];
        return (0..4)
            .map(|k| {
                let (from, to) = (corners[k], corners[(k + 1) % 4]);
                Curve::Arc {
                    from,
                    to,
                    centre,
                    sweep: FRAC_PI_2,
                }
            })
            .collect();
    }
    let half_height = ((radius - centre.r) * (radius + centre.r)).sqrt();
    let (bottom, top) = (
        Point::new(0.0, centre.z - half_height),
        Point::new(0.0, centre.z + half_height),
    );
    // Half the sweep: the angle between +r and the direction from the centre to `top`.
    let half_sweep = half_height.atan2(-centre.r);
    let arc = Curve::Arc {
        from: bottom,
        to: top,
        centre,
        sweep: 2.0 * half_sweep,
    };
    vec![arc, Curve::line(top, bottom)]
}

/// The curves of a drawn path, closed with a straight line where it does not close itself.
pub(super) fn path(start: Point, steps: &[Step]) -> Result<Vec<Curve>, ShapeError> {
    checked::finite("a coordinate of the outline", &[start.r, start.z])?;
    let mut curves = Vec::with_capacity(steps.len() + 1);
    let mut from = start;
    for step in steps {
        let to = step.to();
        checked::finite("a coordinate of the outline", &[to.r, to.z])?;
        curves.push(match *step {
            Step::Line { .. } => Curve::line(from, to),
            Step::Arc { through, .. } => {
                checked::finite("a coordinate of the outline", &[through.r, through.z])?;
                arc(from, through, to)?
            }
        });
        from = to;
    }
    if from != start {
        curves.push(Curve::line(from, start));
    }
    if curves.len() < 2 {
        return Err(ShapeError::TooFewPoints {
            given: curves.len() + 1,
            needed: 3,
        });
    }
    Ok(curves)
}

fn arc(from: Point, through: Point, to: Point) -> Result<Curve, ShapeError> {
    Curve::arc_through(from, through, to).ok_or(ShapeError::StraightArc { from, through, to })
}
