//! Two nested meshes' numbers into brackets, field by field.

use super::{
    CoilSideResult, MagnetResult, MoverResult, Quantities, RegionResult, SearchCoilResult, StrayResult,
    TraversePoint, TraverseResult, WindingResult,
};
use crate::bracket::{Bracket, Pairing};

type Plain<'a, T> = (&'a T, &'a T);

fn exact(fine: f64) -> Bracket {
    Bracket::exact(fine)
}

fn largest(values: impl Iterator<Item = f64>) -> f64 {
    values.fold(0.0, |m, v| m.max(v.abs()))
}

/// Brackets from the numbers of a mesh and of its nested refinement, which must describe the same problem.
/// `force_scale_n` is the size a force has in this device: energy over largest dimension.
pub fn combine(
    pairing: &Pairing,
    coarse: &Quantities<f64>,
    fine: &Quantities<f64>,
    force_scale_n: f64,
) -> Quantities<Bracket> {
    let linkage_scale = largest(fine.windings.iter().map(|w| w.flux_linkage_wb));
    let force_scale = force_scale_n
        .max(largest(fine.movers.iter().filter_map(|m| m.force_n)))
        .max(largest(fine.coil_sides.iter().map(|c| c.force_n)));
    let whole = |(c, f): Plain<f64>| pairing.integral(*c, *f, *f);
    let option = |c: Option<f64>, f: Option<f64>| Some(whole((&c?, &f?)));
    Quantities {
        windings: zip(&coarse.windings, &fine.windings)
            .map(|(c, f)| winding(pairing, c, f, linkage_scale))
            .collect(),
        inductance_h: matrix(
            coarse,
            fine,
            |q, j, k| q.inductance_h[j][k],
            |j, k, c, f| {
                let own = (fine.inductance_h[j][j] * fine.inductance_h[k][k]).abs().sqrt();
                pairing.integral(c, f, own)
            },
        ),
        coupling: matrix(
            coarse,
            fine,
            |q, j, k| q.coupling[j][k],
            |j, k, c, f| {
                if j == k {
                    exact(1.0)
                } else {
                    pairing.integral(c, f, 1.0)
                }
            },
        ),
        energy_j: option(coarse.energy_j, fine.energy_j),
        coenergy_j: match (coarse.coenergy_j, fine.coenergy_j, fine.energy_j) {
            (Some(c), Some(f), Some(scale)) => Some(pairing.integral(c, f, scale)),
            _ => None,
        },
        dipole_moment_am2: option(coarse.dipole_moment_am2, fine.dipole_moment_am2),
        movers: zip(&coarse.movers, &fine.movers)
            .map(|(c, f)| mover(pairing, c, f, force_scale))
            .collect(),
        coil_sides: zip(&coarse.coil_sides, &fine.coil_sides)
            .map(|(c, f)| CoilSideResult {
                region: f.region.clone(),
                force_n: pairing.integral(c.force_n, f.force_n, force_scale),
            })
            .collect(),
        regions: zip(&coarse.regions, &fine.regions)
            .map(|(c, f)| region(pairing, c, f))
            .collect(),
        search_coils: {
            let scale = largest(fine.search_coils.iter().map(|s| s.flux_wb));
            zip(&coarse.search_coils, &fine.search_coils)
                .map(|(c, f)| search_coil(pairing, c, f, scale))
                .collect()
        },
        traverses: zip(&coarse.traverses, &fine.traverses)
            .map(|(c, f)| traverse(pairing, c, f))
            .collect(),
        stray: coarse
            .stray
            .as_ref()
            .zip(fine.stray.as_ref())
            .map(|(c, f)| stray(pairing, c, f)),
    }
}

fn zip<'a, T>(coarse: &'a [T], fine: &'a [T]) -> impl Iterator<Item = Plain<'a, T>> {
    coarse.iter().zip(fine)
}

fn matrix(
    coarse: &Quantities<f64>,
    fine: &Quantities<f64>,
    entry: impl Fn(&Quantities<f64>, usize, usize) -> f64,
    pair: impl Fn(usize, usize, f64, f64) -> Bracket,
) -> Vec<Vec<Bracket>> {
    let n = fine.windings.len();
    (0..n)
        .map(|j| {
            (0..n)
                .map(|k| pair(j, k, entry(coarse, j, k), entry(fine, j, k)))
                .collect()
        })
        .collect()
}

fn winding(
    pairing: &Pairing,
    c: &WindingResult<f64>,
    f: &WindingResult<f64>,
    linkage_scale: f64,
) -> WindingResult<Bracket> {
    let fixed = |x: Option<f64>| x.map(exact);
    WindingResult {
        name: f.name.clone(),
        turns: exact(f.turns),
        current_a: exact(f.current_a),
        ampere_turns_a: exact(f.ampere_turns_a),
        resistance_ohm: fixed(f.resistance_ohm),
        flux_linkage_wb: pairing.integral(c.flux_linkage_wb, f.flux_linkage_wb, linkage_scale),
        magnet_linkage_wb: c
            .magnet_linkage_wb
            .zip(f.magnet_linkage_wb)
            .map(|(c, f)| pairing.integral(c, f, linkage_scale)),
        voltage_v: fixed(f.voltage_v),
        copper_loss_w: fixed(f.copper_loss_w),
        supply_power_w: fixed(f.supply_power_w),
        time_constant_s: c
            .time_constant_s
            .zip(f.time_constant_s)
            .map(|(c, f)| pairing.integral(c, f, f)),
        current_density_a_per_m2: fixed(f.current_density_a_per_m2),
        fill_factor: fixed(f.fill_factor),
        conductor_fill_factor: fixed(f.conductor_fill_factor),
        wire_length_m: fixed(f.wire_length_m),
        copper_mass_kg: fixed(f.copper_mass_kg),
        mean_turn_length_m: exact(f.mean_turn_length_m),
        section_m2: exact(f.section_m2),
    }
}

fn mover(
    pairing: &Pairing,
    c: &MoverResult<f64>,
    f: &MoverResult<f64>,
    force_scale: f64,
) -> MoverResult<Bracket> {
    // In contact the force is a surface sum, not a derivative of the energy: it converges less regularly.
    let bracket = |(c, f_n): (f64, f64)| {
        if f.touches_other_material {
            pairing.local(c, f_n, force_scale)
        } else {
            pairing.integral(c, f_n, force_scale)
        }
    };
    MoverResult {
        name: f.name.clone(),
        force_n: c.force_n.zip(f.force_n).map(bracket),
        touches_other_material: f.touches_other_material,
    }
}

fn region(pairing: &Pairing, c: &RegionResult<f64>, f: &RegionResult<f64>) -> RegionResult<Bracket> {
    RegionResult {
        name: f.name.clone(),
        volume_m3: exact(f.volume_m3),
        mass_kg: f.mass_kg.map(exact),
        b_max_t: pairing.local(c.b_max_t, f.b_max_t, f.b_max_t),
        b_max_at: f.b_max_at,
        b_mean_t: pairing.local(c.b_mean_t, f.b_mean_t, f.b_max_t),
        magnet: c
            .magnet
            .as_ref()
            .zip(f.magnet.as_ref())
            .map(|(c, f)| magnet(pairing, c, f)),
    }
}

fn magnet(pairing: &Pairing, c: &MagnetResult<f64>, f: &MagnetResult<f64>) -> MagnetResult<Bracket> {
    let (b, h) = (f.mean_b_along_t, f.mean_h_along_a_per_m);
    MagnetResult {
        mean_b_along_t: pairing.integral(c.mean_b_along_t, f.mean_b_along_t, b),
        mean_h_along_a_per_m: pairing.integral(c.mean_h_along_a_per_m, f.mean_h_along_a_per_m, h),
        lowest_b_along_t: pairing.local(c.lowest_b_along_t, f.lowest_b_along_t, b),
        lowest_h_along_a_per_m: pairing.local(c.lowest_h_along_a_per_m, f.lowest_h_along_a_per_m, h),
        lowest_at: f.lowest_at,
        permeance_coefficient: c
            .permeance_coefficient
            .zip(f.permeance_coefficient)
            .map(|(c, f)| pairing.integral(c, f, f)),
    }
}

fn search_coil(
    pairing: &Pairing,
    c: &SearchCoilResult<f64>,
    f: &SearchCoilResult<f64>,
    scale: f64,
) -> SearchCoilResult<Bracket> {
    let turns = if f.flux_wb != 0.0 {
        f.flux_linkage_wb / f.flux_wb
    } else {
        0.0
    };
    SearchCoilResult {
        name: f.name.clone(),
        flux_wb: pairing.local(c.flux_wb, f.flux_wb, scale),
        flux_linkage_wb: pairing.local(c.flux_linkage_wb, f.flux_linkage_wb, scale * turns),
    }
}

/// Share of a traverse's largest value in the yardstick of each of its points.
const SHARE_OF_LARGEST: f64 = 0.05;

fn traverse(pairing: &Pairing, c: &TraverseResult<f64>, f: &TraverseResult<f64>) -> TraverseResult<Bracket> {
    // A point's own size sets its yardstick; a share of the traverse's largest keeps points near zero honest.
    let b_most = SHARE_OF_LARGEST * largest(f.points.iter().map(|p| p.b_t));
    let h_size = |p: &TraversePoint<f64>| p.h_r_a_per_m.hypot(p.h_z_a_per_m);
    let h_most = SHARE_OF_LARGEST * largest(f.points.iter().map(h_size));
    let flux_most = SHARE_OF_LARGEST * largest(f.points.iter().map(|p| p.flux_wb));
    let point = |(c, f): Plain<TraversePoint<f64>>| {
        let (b, h) = (f.b_t + b_most, h_size(f) + h_most);
        let flux = f.flux_wb.abs() + flux_most;
        let size = pairing.local(c.b_t, f.b_t, b);
        TraversePoint {
            at: f.at,
            region: f.region,
            b_r_t: pairing.local(c.b_r_t, f.b_r_t, b),
            b_z_t: pairing.local(c.b_z_t, f.b_z_t, b),
            b_t: Bracket {
                low: size.low.max(0.0),
                value: size.value.max(0.0),
                ..size
            },
            h_r_a_per_m: pairing.local(c.h_r_a_per_m, f.h_r_a_per_m, h),
            h_z_a_per_m: pairing.local(c.h_z_a_per_m, f.h_z_a_per_m, h),
            j_a_per_m2: exact(f.j_a_per_m2),
            flux_wb: pairing.local(c.flux_wb, f.flux_wb, flux),
        }
    };
    TraverseResult {
        name: f.name.clone(),
        points: zip(&c.points, &f.points).map(point).collect(),
    }
}

fn stray(pairing: &Pairing, c: &StrayResult<f64>, f: &StrayResult<f64>) -> StrayResult<Bracket> {
    StrayResult {
        distance_m: f.distance_m,
        b_t: pairing.local(c.b_t, f.b_t, f.b_t),
        limit_t: f.limit_t,
        reach_of_limit_m: c
            .reach_of_limit_m
            .zip(f.reach_of_limit_m)
            .map(|(c, f)| pairing.local(c, f, f)),
    }
}
