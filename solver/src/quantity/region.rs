//! Flux density statistics of regions and the operating points of magnets.

use std::f64::consts::TAU;

use mesher::Point;
use rayon::prelude::*;

use super::{MagnetResult, RegionResult, SaturationResult};
use crate::MU0;
use crate::field::Recovered;
use crate::operating::Operating;
use crate::problem::{Conductor, MagneticLaw};
use crate::winding::section_m2;

/// Share of a region's volume left out of its extremes: a corner's peak need not converge.
const EXTREME_SHARE: f64 = 1e-3;

/// One triangle's part in the statistics.
#[derive(Clone, Copy)]
struct Cell {
    /// Volume per radian (= int ds dz / 2), m³.
    volume: f64,
    /// Recovered flux density at its middle, T.
    b: [f64; 2],
    /// Its middle.
    at: Point,
}

/// One result per region.
pub fn regions(op: &Operating<'_>, recovered: &Recovered) -> Vec<RegionResult<f64>> {
    let mut triangles: Vec<Vec<u32>> = vec![Vec::new(); op.problem.regions.len()];
    for t in 0..op.mesh.triangles.len() {
        if let Some(region) = op.region_of(t) {
            triangles[region].push(t as u32);
        }
    }
    triangles
        .into_iter()
        .enumerate()
        .map(|(r, list)| one(op, recovered, r, &list))
        .collect()
}

fn one(op: &Operating<'_>, recovered: &Recovered, region: usize, triangles: &[u32]) -> RegionResult<f64> {
    let physics = &op.problem.regions[region];
    let cells: Vec<Cell> = triangles
        .par_iter()
        .map(|&t| cell(op, recovered, t as usize))
        .collect();
    let size = |c: &Cell| c.b[0].hypot(c.b[1]);
    let (b_max_t, b_max_at) = extreme(&cells, size);
    let volume: f64 = cells.iter().map(|c| c.volume).sum();
    let mean = cells.iter().map(|c| c.volume * size(c)).sum::<f64>() / volume;
    let r_moment: f64 = op
        .mesh
        .parts
        .iter()
        .filter(|p| p.region == Some(region))
        .map(|p| p.r_moment_m3)
        .sum();
    let volume_m3 = op.whole_device() * TAU * r_moment;
    RegionResult {
        name: physics.name.clone(),
        volume_m3,
        mass_kg: mass(op, region, volume_m3),
        b_max_t,
        b_max_at,
        b_mean_t: mean,
        saturation: match &physics.law {
            MagneticLaw::Saturable(law) => Some(saturation(&cells, law.knee_t(), volume)),
            _ => None,
        },
        magnet: match &physics.law {
            MagneticLaw::Magnet { remanence_t, .. } => magnet(op, &cells, triangles, *remanence_t, None),
            MagneticLaw::DemagnetisedMagnet { curve, direction, .. } => {
                let remanence = direction.map(|d| d * curve.remanence_t());
                magnet(
                    op,
                    &cells,
                    triangles,
                    remanence,
                    Some(curve.knee_t()).filter(|k| k.is_finite()),
                )
            }
            _ => None,
        },
    }
}

fn cell(op: &Operating<'_>, recovered: &Recovered, t: usize) -> Cell {
    let (part, corners) = (op.mesh.part_of[t], op.mesh.triangles[t]);
    let mut b = [0.0; 2];
    let mut at = Point { r: 0.0, z: 0.0 };
    for n in corners {
        let [b_r, b_z] = recovered.seen_from(op, n as usize, part);
        b = [b[0] + b_r / 3.0, b[1] + b_z / 3.0];
        at.r += op.mesh.nodes[n as usize].r / 3.0;
        at.z += op.mesh.nodes[n as usize].z / 3.0;
    }
    Cell {
        volume: 0.5 * op.space.elements[t].area,
        b,
        at,
    }
}

/// The value exceeded in [`EXTREME_SHARE`] of the volume, and where the largest value sits. The middle of each
/// cell stands for all of it: the share is met by interpolation between the two cells around it.
fn extreme(cells: &[Cell], of: impl Fn(&Cell) -> f64) -> (f64, Point) {
    let mut order: Vec<(f64, f64, Point)> = cells.iter().map(|c| (of(c), c.volume, c.at)).collect();
    order.sort_by(|x, y| y.0.total_cmp(&x.0));
    let Some(&(top, _, at)) = order.first() else {
        return (0.0, Point::default());
    };
    let limit = EXTREME_SHARE * order.iter().map(|o| o.1).sum::<f64>();
    let (mut passed, mut before) = (0.0, (0.0, top));
    for &(value, volume, _) in &order {
        let middle = passed + 0.5 * volume;
        if middle >= limit {
            let span = middle - before.0;
            let share = if span > 0.0 {
                (limit - before.0) / span
            } else {
                1.0
            };
            return (before.1 + share * (value - before.1), at);
        }
        passed += volume;
        before = (middle, value);
    }
    (before.1, at)
}

/// Mass, kg: solid regions by their density; a wire winding's region by the conductor of its turns.
fn mass(op: &Operating<'_>, region: usize, volume_m3: f64) -> Option<f64> {
    let wound = op
        .problem
        .windings
        .iter()
        .zip(&op.laid)
        .find(|(w, _)| w.regions.contains(&region));
    let Some((winding, laid)) = wound else {
        return Some(op.problem.regions[region].density_kg_per_m3? * volume_m3);
    };
    let Some(Conductor::Wire {
        copper_area_m2,
        density_kg_per_m3,
        ..
    }) = winding.conductor
    else {
        return None;
    };
    let length: f64 = laid
        .sides
        .iter()
        .map(|s| (s, &op.mesh.parts[s.part]))
        .filter(|(_, part)| part.region == Some(region))
        .map(|(s, part)| op.whole_device() * s.turns.abs() * TAU * part.r_moment_m3 / part.area_m2)
        .sum();
    Some(density_kg_per_m3? * copper_area_m2 * length)
}

fn saturation(cells: &[Cell], knee_t: f64, volume: f64) -> SaturationResult<f64> {
    let beyond: f64 = cells
        .iter()
        .filter(|c| c.b[0].hypot(c.b[1]) > knee_t)
        .map(|c| c.volume)
        .sum();
    SaturationResult {
        knee_t,
        saturated_share: beyond / volume,
    }
}

fn magnet(
    op: &Operating<'_>,
    cells: &[Cell],
    triangles: &[u32],
    remanence: [f64; 2],
    knee_t: Option<f64>,
) -> Option<MagnetResult<f64>> {
    let size = remanence[0].hypot(remanence[1]);
    if size == 0.0 {
        return None;
    }
    let m = [remanence[0] / size, remanence[1] / size];
    let along = |b: [f64; 2]| b[0] * m[0] + b[1] * m[1];
    let law = op.law_of(*triangles.first()? as usize);
    let h_along = |b_along: f64| along(law.at([b_along * m[0], b_along * m[1]]).h);
    // Volume means of the discrete field: B_z = 2 psi_s, B_r = -psi_z / r; H by the law at each triangle's mean B.
    let (mut b_sum, mut h_sum, mut volume) = (0.0, 0.0, 0.0);
    for &t in triangles {
        let t = t as usize;
        let [psi_s, psi_z] = op.gradient[t];
        let share = 0.5 * op.space.elements[t].area;
        let mean = [-psi_z * section_m2(op.space, t) / share, 2.0 * psi_s];
        b_sum += share * along(mean);
        h_sum += share * along(law.at(mean).h);
        volume += share;
    }
    let (mean_b, mean_h) = (b_sum / volume, h_sum / volume);
    let (highest_negative, lowest_at) = extreme(cells, |c| -along(c.b));
    let lowest = -highest_negative;
    Some(MagnetResult {
        mean_b_along_t: mean_b,
        mean_h_along_a_per_m: mean_h,
        lowest_b_along_t: lowest,
        lowest_h_along_a_per_m: h_along(lowest),
        lowest_at,
        permeance_coefficient: (mean_h.abs() > 1e-9 * size / MU0).then(|| -mean_b / (MU0 * mean_h)),
        knee_t,
    })
}
