//! The checks every outline passes before it may be painted.

use crate::curve::{Bounds, Curve, Point};
use crate::error::ShapeError;
use crate::planar::{Tolerance, planar_graph};

use super::Outline;

/// Differences below this share of the coordinates are round-off of the expressions that gave them.
pub(super) const ROUND_OFF: f64 = 1e-12;

/// Far beyond any device, and far from where squares and cubes of lengths overflow.
const FARTHEST_M: f64 = 1e12;

pub(super) fn finite(what: &'static str, values: &[f64]) -> Result<(), ShapeError> {
    if let Some(&value) = values.iter().find(|value| !value.is_finite()) {
        return Err(ShapeError::NotFinite { what, value });
    }
    match values.iter().find(|value| value.abs() > FARTHEST_M) {
        Some(&value) => Err(ShapeError::TooFar {
            what,
            value,
            limit_m: FARTHEST_M,
        }),
        None => Ok(()),
    }
}

/// Checks a closed chain of curves and turns it counter-clockwise.
pub(super) fn closed_outline(curves: Vec<Curve>) -> Result<Outline, ShapeError> {
    let curves = beside_axis(curves)?;
    let bounds = bounds_of(&curves);
    let round_off = ROUND_OFF * largest_coordinate(bounds);
    if let Some(curve) = curves.iter().find(|curve| curve.length_m() <= round_off) {
        return Err(ShapeError::NoLength { at: curve.start() });
    }
    refuse_self_crossing(&curves, bounds.size(), round_off)?;
    let area_m2: f64 = curves.iter().map(Curve::area_term_m2).sum();
    let size_m = bounds.size();
    if area_m2.abs() <= ROUND_OFF * size_m * largest_coordinate(bounds) {
        return Err(ShapeError::NoArea { area_m2, size_m });
    }
    if area_m2 > 0.0 {
        return Ok(Outline { curves });
    }
    Ok(Outline {
        curves: curves.iter().rev().map(Curve::reversed).collect(),
    })
}

/// Sets r to exactly 0 where it is round-off, and refuses what lies beyond the axis.
pub(super) fn beside_axis(curves: Vec<Curve>) -> Result<Vec<Curve>, ShapeError> {
    let bounds = bounds_of(&curves);
    let round_off = ROUND_OFF * largest_coordinate(bounds);
    if bounds.low.r < -round_off {
        return Err(ShapeError::AcrossAxis {
            at: leftmost(&curves),
        });
    }
    let snapped = |point: Point| Point::new(if point.r <= round_off { 0.0 } else { point.r }, point.z);
    Ok(curves
        .iter()
        .map(|curve| curve.with_ends(snapped(curve.start()), snapped(curve.end())))
        .collect())
}

/// Refuses an outline that turns around some place more than once, or around two places in different senses. It
/// may touch itself, and differences of a millionth of its size are drawing noise here as everywhere.
fn refuse_self_crossing(curves: &[Curve], size_m: f64, round_off_m: f64) -> Result<(), ShapeError> {
    let tolerance = Tolerance {
        weld_m: 1e-6 * size_m,
        round_off_m,
        mirror_z_m: None,
    };
    let graph =
        planar_graph(&[curves], tolerance).map_err(|fault| ShapeError::SelfCrossing { at: fault.at })?;
    let turns: Vec<i32> = graph
        .faces
        .iter()
        .map(|face| face.windings.first().map_or(0, |entry| entry.1))
        .collect();
    let sense = if turns.iter().any(|&turn| turn > 0) { 1 } else { -1 };
    let wrong = |face: u32| turns[face as usize] != 0 && turns[face as usize] != sense;
    let mut degree = vec![0; graph.vertices.len()];
    for edge in &graph.edges {
        degree[edge.start as usize] += 1;
        degree[edge.end as usize] += 1;
    }
    // Around a face turned about wrongly the outline meets itself somewhere.
    let suspects = graph
        .edges
        .iter()
        .filter(|edge| edge.faces.iter().any(|face| wrong(*face)));
    let mut places = suspects.flat_map(|edge| [edge.start, edge.end]);
    match places
        .clone()
        .find(|vertex| degree[*vertex as usize] > 2)
        .or_else(|| places.next())
    {
        Some(vertex) => Err(ShapeError::SelfCrossing {
            at: graph.vertices[vertex as usize],
        }),
        None => Ok(()),
    }
}

fn bounds_of(curves: &[Curve]) -> Bounds {
    curves
        .iter()
        .fold(Bounds::EMPTY, |bounds, curve| bounds.union(curve.bounds()))
}

fn largest_coordinate(bounds: Bounds) -> f64 {
    [bounds.low.r, bounds.low.z, bounds.high.r, bounds.high.z]
        .into_iter()
        .fold(0.0, |m, x| x.abs().max(m))
}

/// The point of the curves with the smallest r.
fn leftmost(curves: &[Curve]) -> Point {
    let mut best = Point::new(f64::INFINITY, 0.0);
    for curve in curves {
        let mut candidates = vec![curve.start(), curve.end()];
        if let Curve::Arc { centre, .. } = curve {
            let extreme = *centre - Point::new(curve.radius_m(), 0.0);
            if curve.share_at_direction(extreme).is_some() {
                candidates.push(extreme);
            }
        }
        for point in candidates {
            if point.r < best.r {
                best = point;
            }
        }
    }
    best
}
