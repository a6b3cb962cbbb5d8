//! Fields along traverses and flux through search coils.

use rayon::prelude::*;

use super::{SearchCoilResult, TraversePoint, TraverseResult};
use crate::MU0;
use crate::field::read;
use crate::operating::Operating;
use crate::problem::{SearchCoil, Traverse};

/// Reads every point of a traverse.
pub fn traverse(op: &Operating<'_>, traverse: &Traverse) -> TraverseResult<f64> {
    let points = traverse
        .points
        .par_iter()
        .map(|&at| {
            let field = read(op, at);
            let image = field.b != [0.0; 2] && op.mesh.mirror_z_m.is_some_and(|z| at.z < z);
            let h = match field.triangle {
                Some(t) => h_at(op, t, field.b, image),
                None => field.b.map(|b| b / MU0),
            };
            TraversePoint {
                at,
                region: field.triangle.and_then(|t| op.region_of(t)),
                b_r_t: field.b[0],
                b_z_t: field.b[1],
                b_t: field.b[0].hypot(field.b[1]),
                h_r_a_per_m: h[0],
                h_z_a_per_m: h[1],
                j_a_per_m2: field.current_sign * field.triangle.map_or(0.0, |t| op.cell_j_a_per_m2[t]),
                flux_wb: flux(field.psi),
            }
        })
        .collect();
    TraverseResult {
        name: traverse.name.clone(),
        points,
    }
}

/// H in a triangle's material; below the mirror the image's remanence is turned like B is.
fn h_at(op: &Operating<'_>, triangle: usize, b: [f64; 2], image: bool) -> [f64; 2] {
    use crate::problem::MirrorCurrents::{Opposite, Same};
    let turn = match op.problem.mirror {
        Some(Same) if image => [-1.0, 1.0],
        Some(Opposite) if image => [1.0, -1.0],
        _ => [1.0, 1.0],
    };
    let h = op.h_of(triangle, [turn[0] * b[0], turn[1] * b[1]]);
    [turn[0] * h[0], turn[1] * h[1]]
}

/// Reads one search coil.
pub fn search_coil(op: &Operating<'_>, coil: &SearchCoil) -> SearchCoilResult<f64> {
    let flux_wb = flux(read(op, coil.at).psi);
    SearchCoilResult {
        name: coil.name.clone(),
        flux_wb,
        flux_linkage_wb: coil.turns * flux_wb,
    }
}

/// Flux through the circle of a point, Wb.
fn flux(psi: f64) -> f64 {
    std::f64::consts::TAU * psi
}
