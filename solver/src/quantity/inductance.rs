//! Linkages, the inductance matrix, coupling, energy, and what follows for each winding.

use std::f64::consts::TAU;

use rayon::prelude::*;

use super::WindingResult;
use crate::law::evaluate;
use crate::operating::Operating;
use crate::problem::Conductor;

fn dot(a: &[f64], b: &[f64]) -> f64 {
    // Fixed chunks summed in order: the same number whatever the number of threads.
    const CHUNK: usize = 1 << 14;
    let parts: Vec<f64> = a
        .par_chunks(CHUNK)
        .zip(b.par_chunks(CHUNK))
        .map(|(x, y)| x.iter().zip(y).map(|(p, q)| p * q).sum())
        .collect();
    parts.iter().sum()
}

/// Flux linkage of a winding with a field psi (all nodes), Wb, whole device.
pub fn linkage(op: &Operating<'_>, winding: usize, psi: &[f64]) -> f64 {
    op.whole_device() * TAU * dot(&op.unit_load[winding], psi)
}

/// Inductance matrix, H, symmetric to the last bit (both halves are the same integral; round-off and the
/// residual of the solve are averaged away).
pub fn matrix(op: &Operating<'_>) -> Vec<Vec<f64>> {
    symmetric(op, &op.unit_psi)
}

fn symmetric(op: &Operating<'_>, psi: &[Vec<f64>]) -> Vec<Vec<f64>> {
    let n = op.laid.len();
    let raw: Vec<Vec<f64>> = (0..n)
        .map(|j| (0..n).map(|k| linkage(op, j, &psi[k])).collect())
        .collect();
    (0..n)
        .map(|j| (0..n).map(|k| 0.5 * (raw[j][k] + raw[k][j])).collect())
        .collect()
}

/// Coupling factors of an inductance matrix.
pub fn coupling(matrix: &[Vec<f64>]) -> Vec<Vec<f64>> {
    let n = matrix.len();
    let entry = |j: usize, k: usize| {
        if j == k {
            1.0
        } else {
            matrix[j][k] / (matrix[j][j] * matrix[k][k]).sqrt()
        }
    };
    (0..n).map(|j| (0..n).map(|k| entry(j, k)).collect()).collect()
}

/// Field energy int int H dB dV over all space, J, whole device; `None` with an ambient field (infinite).
/// With magnets nu |B - Br|² / 2, so that it is never negative.
pub fn energy(op: &Operating<'_>) -> Option<f64> {
    if op.problem.ambient_b_t != 0.0 {
        return None;
    }
    // r dr dz = ds dz / 2.
    let inside: f64 = evaluate(op.mesh, op.space, &op.laws, &op.gradient)
        .iter()
        .zip(&op.space.elements)
        .map(|(point, element)| 0.5 * element.area * point.energy)
        .sum();
    let outside = op
        .space
        .exterior
        .as_ref()
        .map_or(0.0, |e| 0.5 * e.stored(&op.psi, &op.psi));
    Some(op.whole_device() * TAU * (inside + outside))
}

/// Incremental inductance matrix, d linkage / d current at the operating point, H; `None` with linear material.
pub fn incremental(op: &Operating<'_>) -> Option<Vec<Vec<f64>>> {
    op.incremental_psi.as_ref().map(|psi| symmetric(op, psi))
}

/// One result per winding.
pub fn windings(op: &Operating<'_>, matrix: &[Vec<f64>]) -> Vec<WindingResult<f64>> {
    (0..op.laid.len()).map(|k| one(op, k, matrix[k][k])).collect()
}

fn one(op: &Operating<'_>, k: usize, own_inductance: f64) -> WindingResult<f64> {
    let (laid, winding) = (&op.laid[k], &op.problem.windings[k]);
    let current = laid.current_a;
    let total_ohm = laid.resistance_ohm.map(|own| own + winding.lead_resistance_ohm);
    let count: f64 = laid.sides.iter().map(|s| s.turns.abs()).sum();
    let wire = match winding.conductor {
        Some(Conductor::Wire {
            copper_area_m2,
            outside_area_m2,
            density_kg_per_m3,
            ..
        }) => Some((copper_area_m2, outside_area_m2, density_kg_per_m3)),
        _ => None,
    };
    WindingResult {
        name: winding.name.clone(),
        turns: laid.turns,
        current_a: current,
        ampere_turns_a: laid.turns * current,
        resistance_ohm: laid.resistance_ohm,
        flux_linkage_wb: linkage(op, k, &op.psi),
        magnet_linkage_wb: op.given_psi.as_ref().map(|psi| linkage(op, k, psi)),
        voltage_v: total_ohm.map(|r| r * current),
        copper_loss_w: laid.resistance_ohm.map(|r| r * current * current),
        supply_power_w: total_ohm.map(|r| r * current * current),
        time_constant_s: total_ohm.filter(|&r| r > 0.0).map(|r| own_inductance / r),
        current_density_a_per_m2: wire.map(|(copper, ..)| current.abs() / copper),
        fill_factor: wire.map(|(_, outside, _)| count * outside / laid.section_m2),
        conductor_fill_factor: wire.map(|(copper, ..)| count * copper / laid.section_m2),
        wire_length_m: wire.map(|_| laid.wire_length_m),
        copper_mass_kg: wire.and_then(|(copper, _, density)| Some(density? * copper * laid.wire_length_m)),
        mean_turn_length_m: laid.mean_turn_length_m,
        section_m2: laid.section_m2,
    }
}
