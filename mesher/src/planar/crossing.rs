//! Where two curves cross or touch.

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

/// Crossings of two curves, and touches: where their circles or lines are tangent within `tolerance_m` m. Near a
/// touch the crossings, if any, are not listed: between them the curves are nearer than the tolerance. Overlaps
/// (along one line or one circle) give no meeting; their ends are vertices near a curve.
pub(crate) fn meetings(a: &Curve, b: &Curve, tolerance_m: f64) -> Vec<Meeting> {
    match (a, b) {
        (Curve::Line { .. }, Curve::Line { .. }) => lines(a, b, tolerance_m).into_iter().collect(),
        (Curve::Line { .. }, Curve::Arc { .. }) => line_and_arc(a, b, tolerance_m),
        (Curve::Arc { .. }, Curve::Line { .. }) => line_and_arc(b, a, tolerance_m)
            .into_iter()
            .map(|meeting| Meeting {
                shares: [meeting.shares[1], meeting.shares[0]],
                ..meeting
            })
            .collect(),
        (Curve::Arc { .. }, Curve::Arc { .. }) => arcs(a, b, tolerance_m),
    }
}

/// How far two curves that meet at the shares `from` and `to` of the first are apart in between, m.
pub(crate) fn depth_between(a: &Curve, b: &Curve, from: f64, to: f64) -> f64 {
    b.distance_m(a.at(0.5 * (from + to)))
}

fn lines(a: &Curve, b: &Curve, tolerance_m: f64) -> Option<Meeting> {
    let (along_a, along_b) = (a.end() - a.start(), b.end() - b.start());
    let cross = along_a.cross(along_b);
    // Parallel to round-off, or the shorter one all along as near to the other's line as at the crossing: they
    // overlap or are apart.
    let (longer, shorter) = (
        along_a.norm().max(along_b.norm()),
        along_a.norm().min(along_b.norm()),
    );
    if cross.abs() <= longer * (0.01 * tolerance_m).max(1e-14 * shorter) {
        return None;
    }
    let between = b.start() - a.start();
    let shares = [between.cross(along_b) / cross, between.cross(along_a) / cross];
    let inside = shares.iter().all(|t| (0.0..=1.0).contains(t));
    inside.then(|| Meeting {
        at: a.at(shares[0]),
        shares,
        tangent: None,
    })
}

/// Meetings of the line `a` with the arc `b`.
fn line_and_arc(a: &Curve, b: &Curve, tolerance_m: f64) -> Vec<Meeting> {
    let Curve::Arc { centre, .. } = *b else {
        return Vec::new();
    };
    let radius = b.radius_m();
    let length = a.length_m();
    let along = a.tangent(0.0);
    let from_start = centre - a.start();
    let (foot, height) = (along.dot(from_start), along.cross(from_start).abs());
    if height > radius + tolerance_m {
        return Vec::new();
    }
    let at = |distance: f64| {
        let point = a.start() + along * distance;
        let share = b.share_at_direction(point)?;
        let inside = (0.0..=length).contains(&distance);
        inside.then_some(Meeting {
            at: point,
            shares: [distance / length, share],
            tangent: None,
        })
    };
    if (height - radius).abs() <= tolerance_m
        && let Some(touch) = at(foot)
    {
        return vec![Meeting {
            tangent: Some(along),
            ..touch
        }];
    }
    let half_square = (radius - height) * (radius + height);
    if half_square <= 0.0 {
        return Vec::new();
    }
    let half = half_square.sqrt();
    [foot - half, foot + half]
        .into_iter()
        .filter_map(at)
        .map(|found| polished(a, b, found))
        .collect()
}

fn arcs(a: &Curve, b: &Curve, tolerance_m: f64) -> Vec<Meeting> {
    let (Curve::Arc { centre: centre_a, .. }, Curve::Arc { centre: centre_b, .. }) = (*a, *b) else {
        return Vec::new();
    };
    let (radius_a, radius_b) = (a.radius_m(), b.radius_m());
    let distance = centre_a.distance(centre_b);
    let difference = radius_a - radius_b;
    if distance + difference.abs() <= tolerance_m {
        return Vec::new(); // one circle
    }
    if distance > radius_a + radius_b + tolerance_m || distance < difference.abs() - tolerance_m {
        return Vec::new();
    }
    let towards = (centre_b - centre_a) * distance.recip();
    let meeting = |at: Point, tangent: Option<Point>| {
        Some(Meeting {
            at,
            shares: [a.share_at_direction(at)?, b.share_at_direction(at)?],
            tangent,
        })
    };
    // On the line of centres: side by side (outside), or one within the other (inside).
    let outside = (distance - radius_a - radius_b, 1.0, -1.0);
    let inside = (
        difference.abs() - distance,
        difference.signum(),
        difference.signum(),
    );
    for (gap, side_a, side_b) in [outside, inside] {
        if gap.abs() > tolerance_m {
            continue;
        }
        let near = centre_a + towards * (side_a * radius_a);
        let touch = near.middle(centre_b + towards * (side_b * radius_b));
        if let Some(touch) = meeting(touch, Some(towards.left_normal())) {
            return vec![touch];
        }
    }
    let along = 0.5 * (distance + difference * (radius_a + radius_b) / distance);
    let half_square = (radius_a - along) * (radius_a + along);
    if half_square <= 0.0 {
        return Vec::new();
    }
    let foot = centre_a + towards * along;
    let half = towards.left_normal() * half_square.sqrt();
    [foot + half, foot - half]
        .into_iter()
        .filter_map(|at| meeting(at, None))
        .map(|found| polished(a, b, found))
        .collect()
}

/// A crossing made accurate by two Newton steps between the curves' tangents: the formulas above lose digits
/// where a radius is much larger than the arc.
fn polished(a: &Curve, b: &Curve, mut meeting: Meeting) -> Meeting {
    for _ in 0..2 {
        let (near_a, near_b) = (a.nearest(meeting.at), b.nearest(meeting.at));
        let (along_a, along_b) = (a.tangent(near_a.t), b.tangent(near_b.t));
        let sine = along_a.cross(along_b);
        if sine.abs() < 1e-9 {
            break;
        }
        let step = (near_b.point - near_a.point).cross(along_b) / sine;
        let at = near_a.point + along_a * step;
        meeting.at = at;
        meeting.shares = [a.nearest(at).t, b.nearest(at).t];
    }
    meeting
}
