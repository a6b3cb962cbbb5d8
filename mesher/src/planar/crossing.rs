//! Where two curves cross or touch.
//!
//! Both are seen from near: by a point, a direction and a curvature, never by a centre, which for a nearly straight
//! arc is far away and costs digits. With p, t, n the middle, direction and left normal of a curve and k its signed
//! curvature (0 for a line), its circle is the zero of
//!     g(x) = k |x - p|² / 2 - (x - p) . n,
//! which near it is the distance to the right of the curve, and its points are
//!     x(phi) = p + t sin(phi) / k + n (1 - cos(phi)) / k.
//! Put into the g of the other curve this is a quadratic in sigma = 2 tan(phi / 2) / k (arc length, for a line).

use std::f64::consts::PI;

use crate::curve::{Curve, Point};

/// A common point of two curves.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Meeting {
    /// The point.
    pub at: Point,
    /// Its share of the length of the first and of the second curve.
    pub shares: [f64; 2],
    /// The common tangent (unit vector, either sense) where they touch within the tolerance rather than cross.
    pub tangent: Option<Point>,
}

/// Crossings of two curves (arcs of less than a full turn), and touches: where their circles or lines are tangent
/// within `tolerance_m` m. Near a touch the crossings, if any, are not listed: between them the curves are nearer
/// than the tolerance. A curve that is all along so near to the other's circle or line has no meetings with it:
/// where they overlap, ends of one are near the other.
pub(crate) fn meetings(a: &Curve, b: &Curve, tolerance_m: f64) -> Vec<Meeting> {
    // What touches is put on a straight line where there is one.
    if matches!(b, Curve::Line { .. }) && !matches!(a, Curve::Line { .. }) {
        let swapped = meetings(b, a, tolerance_m).into_iter();
        return swapped
            .map(|m| Meeting {
                shares: [m.shares[1], m.shares[0]],
                ..m
            })
            .collect();
    }
    let (near_a, near_b) = (Near::of(a), Near::of(b));
    if runs_along(a, &near_b, tolerance_m) || runs_along(b, &near_a, tolerance_m) {
        return Vec::new();
    }
    let along = Along::of(&near_a, &near_b);
    let meeting = |phi_or_length: f64, tangent: bool| {
        let share = near_a.share(phi_or_length)?;
        let at = a.at(share);
        let tangent = tangent.then(|| a.tangent(share));
        Some(Meeting {
            at,
            shares: [share, near_b.share_at(at)?],
            tangent,
        })
    };
    for extreme in along.extremes() {
        if along.distance(extreme).abs() <= tolerance_m
            && let Some(touch) = meeting(extreme, true)
        {
            return vec![touch];
        }
    }
    along
        .roots()
        .into_iter()
        .flatten()
        .filter_map(|root| meeting(root, false))
        .collect()
}

/// How far two curves that meet at the shares `from` and `to` of the first are apart in between, m.
pub(crate) fn depth_between(a: &Curve, b: &Curve, from: f64, to: f64) -> f64 {
    b.distance_m(a.at(0.5 * (from + to)))
}

/// Whether a curve is all along within the tolerance of the other's circle or line.
fn runs_along(curve: &Curve, other: &Near, tolerance_m: f64) -> bool {
    [0.0, 1.0, 0.5, 0.25, 0.75]
        .into_iter()
        .all(|t| other.offset(curve.at(t)).abs() <= tolerance_m)
}

/// A curve seen from its middle.
struct Near {
    middle: Point,
    along: Point,
    left: Point,
    curvature: f64,
    /// Signed angle swept; for a line its length.
    extent: f64,
}

impl Near {
    fn of(curve: &Curve) -> Self {
        let along = curve.tangent(0.5);
        let (curvature, extent) = match *curve {
            Curve::Line { .. } => (0.0, curve.length_m()),
            Curve::Arc { sweep, .. } => (sweep.signum() / curve.radius_m(), sweep),
        };
        Self {
            middle: curve.midpoint(),
            along,
            left: along.left_normal(),
            curvature,
            extent,
        }
    }

    /// The function g of the module's head, m.
    fn offset(&self, point: Point) -> f64 {
        let d = point - self.middle;
        0.5 * self.curvature * d.dot(d) - d.dot(self.left)
    }

    /// Share of the length at an angle (for a line: a length) from the middle; `None` beyond the ends.
    fn share(&self, from_middle: f64) -> Option<f64> {
        let share = 0.5 + from_middle / self.extent;
        (0.0..=1.0).contains(&share).then_some(share)
    }

    /// Share of the length at a point of the curve; `None` beyond the ends.
    fn share_at(&self, point: Point) -> Option<f64> {
        let d = point - self.middle;
        let (ahead, aside) = (d.dot(self.along), d.dot(self.left));
        if self.curvature == 0.0 {
            return self.share(ahead);
        }
        self.share((self.curvature * ahead).atan2(1.0 - self.curvature * aside))
    }
}

/// The distance g of the second curve along the first: start + a slope + b bend with a = sin(phi) / k and
/// b = (1 - cos(phi)) / k.
struct Along {
    curvature: f64,
    start: f64,
    slope: f64,
    /// bend times k, which stays finite for a line.
    bend: f64,
}

impl Along {
    fn of(first: &Near, second: &Near) -> Self {
        let d = first.middle - second.middle;
        let (k, other) = (first.curvature, second.curvature);
        Self {
            curvature: k,
            start: second.offset(first.middle),
            slope: other * d.dot(first.along) - first.along.dot(second.left),
            bend: k * (other * d.dot(first.left) - first.left.dot(second.left)) + other,
        }
    }

    /// Where the distance is extreme: angles from the middle (for a line one length).
    fn extremes(&self) -> Vec<f64> {
        if self.curvature == 0.0 {
            return if self.bend == 0.0 {
                Vec::new()
            } else {
                vec![-self.slope / self.bend]
            };
        }
        let phi = (-self.curvature * self.slope / self.bend).atan();
        let opposite = if phi > 0.0 { phi - PI } else { phi + PI };
        vec![phi, opposite]
    }

    fn distance(&self, from_middle: f64) -> f64 {
        if self.curvature == 0.0 {
            return self.start + from_middle * (self.slope + 0.5 * from_middle * self.bend);
        }
        let (sin, half) = (from_middle.sin(), (0.5 * from_middle).sin());
        let k = self.curvature;
        self.start + sin / k * self.slope + 2.0 * half * half / (k * k) * self.bend
    }

    /// Where the distance is zero: angles from the middle (for a line: lengths).
    fn roots(&self) -> [Option<f64>; 2] {
        let k = self.curvature;
        let (c0, c1) = (self.start, self.slope);
        let c2 = 0.25 * k * k * self.start + 0.5 * self.bend;
        let sigmas = if c2 == 0.0 {
            // Two lines; parallel to round-off they overlap or are apart.
            [(c1.abs() > 1e-14).then(|| -c0 / c1), None]
        } else {
            let discriminant = c1 * c1 - 4.0 * c0 * c2;
            if discriminant < 0.0 {
                return [None, None];
            }
            let q = -0.5 * (c1 + discriminant.sqrt().copysign(c1));
            [Some(q / c2), (q != 0.0).then(|| c0 / q)]
        };
        sigmas.map(|sigma| {
            let sigma = sigma.filter(|value| value.is_finite())?;
            Some(if k == 0.0 {
                sigma
            } else {
                2.0 * (0.5 * k * sigma).atan()
            })
        })
    }
}
