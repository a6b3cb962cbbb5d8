//! From a solved case to the report's shape.

use solver::quantity::{
    MagnetResult, MoverResult, Quantities, RegionResult, StrayResult, TraversePoint as FieldPoint,
    WindingResult,
};
use solver::{Bound, Bracket, Solution};

use super::{
    Accuracy, CoilSide, Given, MeshNumbers, Mover, Named, Newton, NotFinite, Number, OperatingPoint, Outcome,
    Place, Region, Report, SearchCoil, Stray, TimingSeconds, TraversePoint, Welded, Winding, finite,
};
use crate::case::Case;
use crate::caution::Caution;

/// Times that the solver does not know.
#[derive(Clone, Copy, Debug, Default)]
pub struct Clock {
    /// Reading the case, s.
    pub read_s: f64,
    /// Pictures and files, s.
    pub output_s: f64,
    /// From the start of the program, s.
    pub total_s: f64,
}

impl Report {
    /// The report on a solved case.
    pub fn of(case: &Case, solution: &Solution, cautions: Vec<Caution>, clock: Clock) -> Self {
        let timing = &solution.timing;
        Self {
            title: case.title.clone(),
            regime: "static",
            version: env!("CARGO_PKG_VERSION"),
            given: case
                .givens
                .iter()
                .map(|given| {
                    let entry = Given {
                        text: given.text.clone(),
                        si: given.si,
                        unit: given.unit.clone(),
                    };
                    (given.name.clone(), entry)
                })
                .collect(),
            mesh: mesh_numbers(solution),
            accuracy: solution.accuracy.clone().into(),
            results: vec![outcome(case, &solution.quantities)],
            shown: 0,
            travel: None,
            linkage: None,
            cautions,
            timing_s: TimingSeconds {
                read: clock.read_s,
                mesh: timing.mesh_s,
                assembly: timing.assembly_s,
                solve: timing.solve_s,
                quantities: timing.quantities_s,
                output: clock.output_s,
                total: clock.total_s,
            },
        }
    }

    /// The text of `report.json`, with a line feed at its end.
    ///
    /// # Errors
    /// A number that is not finite, by the path of its key.
    pub fn to_json(&self) -> Result<String, NotFinite> {
        // Serialising plain data fails only on maps whose keys are not strings; there are none.
        let value = serde_json::to_value(self).unwrap_or_default();
        finite::check(&value)?;
        Ok(format!("{value:#}\n"))
    }
}

impl From<solver::solve::Accuracy> for Accuracy {
    fn from(of: solver::solve::Accuracy) -> Self {
        Self {
            goal: of.goal,
            reached: of.reached,
            met: of.met,
            why_not: of.why_not,
        }
    }
}

impl From<Bracket> for Number {
    fn from(bracket: Bracket) -> Self {
        let bound = match bracket.bound {
            Bound::Guaranteed => "guaranteed",
            Bound::Estimated => "estimated",
            Bound::Exact => "exact",
        };
        // Adding 0 makes a negative zero plain.
        Self {
            value: bracket.value + 0.0,
            low: bracket.low + 0.0,
            high: bracket.high + 0.0,
            bound,
        }
    }
}

fn mesh_numbers(solution: &Solution) -> MeshNumbers {
    let mesh = &solution.mesh;
    let quality = mesh.quality();
    MeshNumbers {
        nodes: mesh.nodes.len(),
        triangles: mesh.triangles.len(),
        smallest_angle_deg: quality.smallest_angle_deg,
        sharpest_corner_deg: quality.sharpest_corner_deg,
        levels: solution.levels,
        welded: mesh
            .welds
            .iter()
            .map(|weld| Welded {
                r_m: weld.at.r,
                z_m: weld.at.z,
                moved_m: weld.moved_m,
                regions: weld.regions.clone(),
            })
            .collect(),
        newton: solution.newton.as_ref().map(|newton| Newton {
            coarse_steps: newton.coarse_steps,
            fine_steps: newton.fine_steps,
            residual: newton.residual,
            converged: newton.converged,
        }),
    }
}

pub(super) fn outcome(case: &Case, quantities: &Quantities<Bracket>) -> Outcome {
    let names: Vec<&str> = quantities
        .windings
        .iter()
        .map(|winding| winding.name.as_str())
        .collect();
    let optional = |number: Option<Bracket>| number.map(Number::from);
    Outcome {
        at: OperatingPoint::default(),
        windings: quantities
            .windings
            .iter()
            .map(|of| (of.name.clone(), winding(of)))
            .collect(),
        inductance_h: pairs(&names, &quantities.inductance_h),
        incremental_inductance_h: quantities
            .incremental_inductance_h
            .as_ref()
            .map(|matrix| pairs(&names, matrix))
            .unwrap_or_default(),
        coupling: pairs(&names, &quantities.coupling),
        energy_j: optional(quantities.energy_j),
        coenergy_j: optional(quantities.coenergy_j),
        dipole_moment_am2: optional(quantities.dipole_moment_am2),
        movers: quantities
            .movers
            .iter()
            .map(|of| (of.name.clone(), mover(of)))
            .collect(),
        coil_sides: quantities
            .coil_sides
            .iter()
            .map(|of| {
                (
                    of.region.clone(),
                    CoilSide {
                        force_n: of.force_n.into(),
                    },
                )
            })
            .collect(),
        regions: quantities
            .regions
            .iter()
            .enumerate()
            .map(|(index, of)| (of.name.clone(), region(case, index, of)))
            .collect(),
        search_coils: quantities
            .search_coils
            .iter()
            .map(|of| {
                let coil = SearchCoil {
                    flux_wb: of.flux_wb.into(),
                    flux_linkage_wb: of.flux_linkage_wb.into(),
                };
                (of.name.clone(), coil)
            })
            .collect(),
        traverses: quantities
            .traverses
            .iter()
            .map(|of| {
                (
                    of.name.clone(),
                    of.points
                        .iter()
                        .map(|point| traverse_point(case, point))
                        .collect(),
                )
            })
            .collect(),
        stray: quantities.stray.as_ref().map(stray),
    }
}

/// A matrix as a map of maps.
fn pairs(names: &[&str], matrix: &[Vec<Bracket>]) -> Named<Named<Number>> {
    let row = |numbers: &Vec<Bracket>| {
        names
            .iter()
            .zip(numbers)
            .map(|(name, &number)| ((*name).to_owned(), number.into()))
            .collect()
    };
    names
        .iter()
        .zip(matrix)
        .map(|(name, numbers)| ((*name).to_owned(), row(numbers)))
        .collect()
}

fn winding(of: &WindingResult<Bracket>) -> Winding {
    let optional = |number: Option<Bracket>| number.map(Number::from);
    Winding {
        turns: of.turns.into(),
        current_a: of.current_a.into(),
        ampere_turns_a: of.ampere_turns_a.into(),
        resistance_ohm: optional(of.resistance_ohm),
        flux_linkage_wb: of.flux_linkage_wb.into(),
        magnet_linkage_wb: optional(of.magnet_linkage_wb),
        voltage_v: optional(of.voltage_v),
        copper_loss_w: optional(of.copper_loss_w),
        supply_power_w: optional(of.supply_power_w),
        time_constant_s: optional(of.time_constant_s),
        current_density_a_per_m2: optional(of.current_density_a_per_m2),
        fill_factor: optional(of.fill_factor),
        conductor_fill_factor: optional(of.conductor_fill_factor),
        wire_length_m: optional(of.wire_length_m),
        copper_mass_kg: optional(of.copper_mass_kg),
        mean_turn_length_m: of.mean_turn_length_m.into(),
        section_m2: of.section_m2.into(),
    }
}

fn mover(of: &MoverResult<Bracket>) -> Mover {
    Mover {
        force_n: of.force_n.map(Number::from),
        force_by_coenergy_n: None,
        work_j: None,
        touches_other_material: of.touches_other_material,
    }
}

fn region(case: &Case, index: usize, of: &RegionResult<Bracket>) -> Region {
    let magnet =
        |pick: fn(&MagnetResult<Bracket>) -> Bracket| of.magnet.as_ref().map(|magnet| pick(magnet).into());
    Region {
        material: case
            .region_notes
            .get(index)
            .map(|note| note.material.clone())
            .unwrap_or_default(),
        volume_m3: of.volume_m3.into(),
        mass_kg: of.mass_kg.map(Number::from),
        b_max_t: of.b_max_t.into(),
        b_max_at: place(of.b_max_at),
        b_mean_t: of.b_mean_t.into(),
        knee_t: of.saturation.as_ref().map(|saturation| saturation.knee_t.into()),
        b_max_over_knee: of
            .saturation
            .as_ref()
            .map(|saturation| of.b_max_t.scaled(1.0 / saturation.knee_t.value).into()),
        saturated_share: of
            .saturation
            .as_ref()
            .map(|saturation| saturation.saturated_share.into()),
        mean_b_along_t: magnet(|magnet| magnet.mean_b_along_t),
        mean_h_along_a_per_m: magnet(|magnet| magnet.mean_h_along_a_per_m),
        lowest_b_along_t: magnet(|magnet| magnet.lowest_b_along_t),
        lowest_h_along_a_per_m: magnet(|magnet| magnet.lowest_h_along_a_per_m),
        lowest_at: of.magnet.as_ref().map(|magnet| place(magnet.lowest_at)),
        knee_b_along_t: of
            .magnet
            .as_ref()
            .and_then(|magnet| magnet.knee_t)
            .map(Number::from),
        permeance_coefficient: of
            .magnet
            .as_ref()
            .and_then(|magnet| magnet.permeance_coefficient)
            .map(Number::from),
    }
}

fn place(point: mesher::Point) -> Place {
    Place {
        r_m: point.r,
        z_m: point.z,
    }
}

fn traverse_point(case: &Case, of: &FieldPoint<Bracket>) -> TraversePoint {
    let region = of.region.and_then(|index| case.problem.regions.get(index));
    TraversePoint {
        r_m: of.at.r,
        z_m: of.at.z,
        region: region.map(|region| region.name.clone()),
        b_r_t: of.b_r_t.into(),
        b_z_t: of.b_z_t.into(),
        b_t: of.b_t.into(),
        h_r_a_per_m: of.h_r_a_per_m.into(),
        h_z_a_per_m: of.h_z_a_per_m.into(),
        j_a_per_m2: of.j_a_per_m2.into(),
        flux_wb: of.flux_wb.into(),
    }
}

fn stray(of: &StrayResult<Bracket>) -> Stray {
    Stray {
        distance_m: of.distance_m,
        b_t: of.b_t.into(),
        limit_t: of.limit_t,
        reach_of_limit_m: of.reach_of_limit_m.map(Number::from),
    }
}
