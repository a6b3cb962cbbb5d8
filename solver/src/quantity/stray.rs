//! The field far away: its largest value at a distance, and how far a limit reaches.

use mesher::Point;

use super::StrayResult;
use crate::exterior::Series;
use crate::operating::Operating;
use crate::problem::Stray;

/// Directions from the pole to the pole at which a sphere is sampled before its largest value is closed in on.
const DIRECTIONS: usize = 180;

/// Reads the stray field beyond the outer circle, without the uniform ambient field; `None` with a wall.
pub fn stray(op: &Operating<'_>, wanted: &Stray) -> Option<StrayResult<f64>> {
    let (series, exterior) = (op.series.as_ref()?, op.space.exterior.as_ref()?);
    let (centre, radius) = (exterior.centre_z_m, exterior.radius_m);
    let at = |rho: f64| largest(series, centre, rho);
    Some(StrayResult {
        distance_m: wanted.distance_m,
        b_t: at(radius + wanted.distance_m),
        limit_t: wanted.limit_t,
        reach_of_limit_m: reach(&at, radius, wanted.limit_t),
    })
}

/// Largest |B| on the sphere of radius `rho` around the centre.
fn largest(series: &Series, centre: f64, rho: f64) -> f64 {
    let b = |theta: f64| {
        let [r, z] = series.b(Point {
            r: rho * theta.sin().max(0.0),
            z: centre + rho * theta.cos(),
        });
        r.hypot(z)
    };
    let step = std::f64::consts::PI / DIRECTIONS as f64;
    let best = (0..=DIRECTIONS)
        .map(|i| step * i as f64)
        .max_by(|x, y| b(*x).total_cmp(&b(*y)))
        .unwrap_or(0.0);
    // Golden section between the neighbours of the best sample.
    let (mut low, mut high) = ((best - step).max(0.0), (best + step).min(std::f64::consts::PI));
    let ratio = 0.5 * (5f64.sqrt() - 1.0);
    for _ in 0..40 {
        let (x, y) = (high - ratio * (high - low), low + ratio * (high - low));
        if b(x) > b(y) { high = y } else { low = x }
    }
    b(best).max(b(0.5 * (low + high)))
}

/// Beyond the sources the largest |B| on a sphere falls with its radius: bisect for the limit.
fn reach(at: &impl Fn(f64) -> f64, radius: f64, limit: f64) -> Option<f64> {
    if at(radius) <= limit {
        return None;
    }
    let (mut low, mut high) = (radius, 2.0 * radius);
    while at(high) > limit {
        (low, high) = (high, 2.0 * high);
    }
    for _ in 0..50 {
        let middle = 0.5 * (low + high);
        if at(middle) > limit {
            low = middle
        } else {
            high = middle
        }
    }
    Some(high)
}
