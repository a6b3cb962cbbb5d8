//! The edge of the meshed space: a half circle (a quarter above a mirror) or the drawn wall.

use std::f64::consts::{FRAC_PI_2, PI};

use super::graph::OuterCircle;
use crate::curve::{Curve, Point};
use crate::error::MeshError;
use crate::section::{Section, SpaceEdge};

/// Radius of the half circle over that of the smallest one around everything painted.
const ROOM: f64 = 1.25;

/// The closed outline of the meshed space.
pub(super) struct Frame {
    /// Counter-clockwise.
    pub curves: Vec<Curve>,
    /// The half circle, where there is no wall.
    pub circle: Option<OuterCircle>,
}

impl Frame {
    pub fn of(section: &Section) -> Result<Self, MeshError> {
        if let Some(z_m) = section.mirror_z_m.filter(|z| !z.is_finite()) {
            return Err(MeshError::MirrorNotFinite { z_m });
        }
        if let SpaceEdge::Wall(outline) = &section.edge {
            return Ok(Self {
                curves: outline.curves().to_vec(),
                circle: None,
            });
        }
        let painted: Vec<Curve> = section
            .regions
            .iter()
            .flat_map(|region| &region.copies)
            .flat_map(|outline| outline.curves().iter().copied())
            .collect();
        let centre_z_m = section.mirror_z_m.unwrap_or_else(|| best_centre(&painted));
        let radius_m = ROOM * farthest(&painted, Point::new(0.0, centre_z_m)).1;
        let circle = OuterCircle { centre_z_m, radius_m };
        Ok(Self {
            curves: around(circle, section.mirror_z_m.is_some()),
            circle: Some(circle),
        })
    }
}

/// The outline of the half disc, or of its upper half.
fn around(circle: OuterCircle, mirrored: bool) -> Vec<Curve> {
    let OuterCircle {
        centre_z_m: z,
        radius_m: radius,
    } = circle;
    let centre = Point::new(0.0, z);
    let top = Point::new(0.0, z + radius);
    if mirrored {
        let side = Point::new(radius, z);
        let arc = Curve::Arc {
            from: side,
            to: top,
            centre,
            sweep: FRAC_PI_2,
        };
        return vec![Curve::line(centre, side), arc, Curve::line(top, centre)];
    }
    let bottom = Point::new(0.0, z - radius);
    vec![
        Curve::Arc {
            from: bottom,
            to: top,
            centre,
            sweep: PI,
        },
        Curve::line(top, bottom),
    ]
}

/// Height of the axis point from which the farthest painted point is nearest. The farthest distance is a convex
/// function of the height, falling towards the height of the farthest point: bisection.
fn best_centre(painted: &[Curve]) -> f64 {
    let bounds = painted.iter().fold(crate::curve::Bounds::EMPTY, |all, curve| {
        all.union(curve.bounds())
    });
    let (mut low, mut high) = (bounds.low.z, bounds.high.z);
    let middle = 0.5 * (low + high);
    for _ in 0..60 {
        let z = 0.5 * (low + high);
        if z <= low || z >= high {
            break;
        }
        if farthest(painted, Point::new(0.0, z)).0.z > z {
            low = z;
        } else {
            high = z;
        }
    }
    let best = 0.5 * (low + high);
    // A symmetric drawing gets exactly its middle, not a neighbour of it.
    let gain = farthest(painted, Point::new(0.0, middle)).1 - farthest(painted, Point::new(0.0, best)).1;
    if gain <= 1e-9 * bounds.size() {
        middle
    } else {
        best
    }
}

/// The point of the curves farthest from `centre`, and its distance, m.
fn farthest(curves: &[Curve], centre: Point) -> (Point, f64) {
    let mut best = (centre, 0.0);
    for curve in curves {
        let mut candidates = [Some(curve.start()), Some(curve.end()), None];
        if let Curve::Arc { centre: middle, .. } = *curve {
            let away = middle - centre;
            let norm = away.norm();
            if norm > 0.0 {
                let tip = middle + away * (curve.radius_m() / norm);
                candidates[2] = curve.share_at_direction(tip).map(|_| tip);
            }
        }
        for point in candidates.into_iter().flatten() {
            let distance = point.distance(centre);
            if distance > best.1 {
                best = (point, distance);
            }
        }
    }
    best
}

/// Refuses what reaches below the mirror by more than drawing noise.
pub(super) fn refuse_below_mirror(section: &Section, noise_m: f64) -> Result<(), MeshError> {
    let Some(mirror_z_m) = section.mirror_z_m else {
        return Ok(());
    };
    if let SpaceEdge::Wall(outline) = &section.edge {
        let lowest_z_m = outline.bounds().low.z;
        if lowest_z_m < mirror_z_m - noise_m {
            return Err(MeshError::WallBelowMirror {
                lowest_z_m,
                mirror_z_m,
            });
        }
    }
    for region in &section.regions {
        let lowest_z_m = region
            .copies
            .iter()
            .map(|outline| outline.bounds().low.z)
            .fold(f64::INFINITY, f64::min);
        if lowest_z_m < mirror_z_m - noise_m {
            return Err(MeshError::BelowMirror {
                region: region.name.clone(),
                lowest_z_m,
                mirror_z_m,
            });
        }
    }
    Ok(())
}
