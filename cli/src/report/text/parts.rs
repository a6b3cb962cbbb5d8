//! The sections of the report.

use solver::problem::MirrorCurrents;

use super::page::Page;
use crate::case::Case;
use crate::notation::{Shown, Unit, plain, significant, with_range};
use crate::report::json::{Number, Outcome, Place, Region, Report, Winding};

/// Number with range for people.
fn shown(number: &Number, unit: Unit) -> Shown {
    with_range(number.value, number.low, number.high, unit)
}

fn row(page: &mut Page, what: &str, number: &Number, unit: Unit) {
    page.row(what, &shown(number, unit));
}

fn optional_row(page: &mut Page, what: &str, number: Option<&Number>, unit: Unit) {
    if let Some(number) = number {
        row(page, what, number, unit);
    }
}

/// A place in the case's own length unit.
fn place(case: &Case, of: Place) -> String {
    let unit = &case.length_unit;
    let length = |metres: f64| significant(metres / unit.metres, Unit::NUMBER, 4);
    format!(
        "r = {0} {2}, z = {1} {2}",
        length(of.r_m),
        length(of.z_m),
        unit.name
    )
}

pub fn solved(page: &mut Page, case: &Case, report: &Report) {
    page.section("What was solved");
    let space = match case.section.edge {
        mesher::section::SpaceEdge::HalfCircle => "unbounded surroundings",
        mesher::section::SpaceEdge::Wall(_) => "inside a wall that keeps the flux in",
    };
    page.remark("space", space);
    if let Some(z) = case.section.mirror_z_m {
        let height = significant(z / case.length_unit.metres, Unit::NUMBER, 5);
        let currents = match case.problem.mirror {
            Some(MirrorCurrents::Opposite) => "opposite",
            _ => "the same",
        };
        page.remark(
            "mirror",
            &format!(
                "at z = {height} {}, currents {currents}; results are those of the whole device",
                case.length_unit.name
            ),
        );
    }
    if case.problem.ambient_b_t != 0.0 {
        page.remark(
            "ambient field",
            &format!("{} along the axis", plain(case.problem.ambient_b_t, Unit::TESLA)),
        );
    }
    for (name, given) in report.given.iter() {
        page.remark("given", &format!("{name} = {}", given.text));
    }
    let mesh = &report.mesh;
    page.remark(
        "mesh",
        &format!(
            "{} nodes, {} triangles, smallest angle {:.1}°, {}",
            mesh.nodes,
            mesh.triangles,
            mesh.smallest_angle_deg,
            count(mesh.levels, "pair of meshes", "pairs of meshes")
        ),
    );
    if let Some(newton) = &mesh.newton {
        let verdict = if newton.converged { "" } else { ": NOT CONVERGED" };
        page.remark(
            "Newton steps",
            &format!(
                "{} on the coarse mesh, {} more on the fine one, residual {:.0e}{verdict}",
                newton.coarse_steps, newton.fine_steps, newton.residual
            ),
        );
    }
    page.remark("time", &plain_time(report.timing_s.total));
}

fn plain_time(seconds: f64) -> String {
    significant(seconds, Unit::SECOND, 2)
}

fn count(number: usize, one: &str, many: &str) -> String {
    if number == 1 {
        format!("1 {one}")
    } else {
        format!("{number} {many}")
    }
}

pub fn windings(page: &mut Page, case: &Case, outcome: &Outcome) {
    let mirrored = case.section.mirror_z_m.is_some();
    page.section(if mirrored {
        "Windings (turns and sections of the described half)"
    } else {
        "Windings"
    });
    for (name, winding) in outcome.windings.iter() {
        page.heading(name);
        winding_rows(page, winding);
    }
}

fn winding_rows(page: &mut Page, winding: &Winding) {
    row(page, "  turns", &winding.turns, Unit::TURNS);
    row(page, "  current", &winding.current_a, Unit::AMPERE);
    row(page, "  ampere-turns", &winding.ampere_turns_a, Unit::AMPERE);
    row(page, "  flux linkage", &winding.flux_linkage_wb, Unit::WEBER);
    optional_row(
        page,
        "  of it by magnets",
        winding.magnet_linkage_wb.as_ref(),
        Unit::WEBER,
    );
    optional_row(page, "  resistance", winding.resistance_ohm.as_ref(), Unit::OHM);
    optional_row(page, "  voltage", winding.voltage_v.as_ref(), Unit::VOLT);
    optional_row(page, "  copper loss", winding.copper_loss_w.as_ref(), Unit::WATT);
    optional_row(
        page,
        "  supply power",
        winding.supply_power_w.as_ref(),
        Unit::WATT,
    );
    optional_row(
        page,
        "  time constant",
        winding.time_constant_s.as_ref(),
        Unit::SECOND,
    );
    optional_row(
        page,
        "  current density",
        winding.current_density_a_per_m2.as_ref(),
        Unit::CURRENT_DENSITY,
    );
    optional_row(
        page,
        "  space filled by turns",
        winding.fill_factor.as_ref(),
        Unit::PER_CENT,
    );
    optional_row(
        page,
        "  space filled by metal",
        winding.conductor_fill_factor.as_ref(),
        Unit::PER_CENT,
    );
    optional_row(page, "  wire length", winding.wire_length_m.as_ref(), Unit::METRE);
    optional_row(
        page,
        "  conductor mass",
        winding.copper_mass_kg.as_ref(),
        Unit::MASS,
    );
    row(
        page,
        "  mean length of a turn",
        &winding.mean_turn_length_m,
        Unit::METRE,
    );
    row(page, "  section", &winding.section_m2, Unit::SECTION);
}

pub fn inductance(page: &mut Page, outcome: &Outcome) {
    page.section("Inductance");
    let names: Vec<&str> = outcome.windings.iter().map(|(name, _)| name).collect();
    let entry = |a: &str, b: &str| outcome.inductance_h.get(a).and_then(|row| row.get(b));
    for name in &names {
        optional_row(page, name, entry(name, name), Unit::HENRY);
    }
    for (i, a) in names.iter().enumerate() {
        for b in &names[i + 1..] {
            optional_row(page, &format!("{a} with {b}"), entry(a, b), Unit::HENRY);
            let coupling = outcome.coupling.get(a).and_then(|row| row.get(b));
            optional_row(page, "  coupling factor", coupling, Unit::NUMBER);
        }
    }
    incremental(page, outcome);
}

/// Incremental inductances, where they differ from the apparent ones.
fn incremental(page: &mut Page, outcome: &Outcome) {
    let names: Vec<&str> = outcome.windings.iter().map(|(name, _)| name).collect();
    for (i, a) in names.iter().enumerate() {
        for b in &names[i..] {
            let entry = outcome.incremental_inductance_h.get(a).and_then(|row| row.get(b));
            let what = if a == b {
                (*a).to_owned()
            } else {
                format!("{a} with {b}")
            };
            optional_row(page, &format!("{what}, for small changes"), entry, Unit::HENRY);
        }
    }
}

pub fn energy(page: &mut Page, outcome: &Outcome) {
    page.section("Energy and moment");
    optional_row(page, "field energy", outcome.energy_j.as_ref(), Unit::JOULE);
    optional_row(page, "co-energy", outcome.coenergy_j.as_ref(), Unit::JOULE);
    optional_row(
        page,
        "magnetic moment",
        outcome.dipole_moment_am2.as_ref(),
        Unit::MOMENT,
    );
}

pub fn forces(page: &mut Page, outcome: &Outcome) {
    page.section("Axial forces");
    for (name, mover) in outcome.movers.iter() {
        match &mover.force_n {
            Some(force) => row(page, &format!("mover {name}"), force, Unit::NEWTON),
            None => page.remark(
                &format!("mover {name}"),
                "touches the mirror, so it has no force of its own",
            ),
        }
    }
    for (name, side) in outcome.coil_sides.iter() {
        row(page, &format!("current in {name}"), &side.force_n, Unit::NEWTON);
    }
}

pub fn regions(page: &mut Page, case: &Case, outcome: &Outcome) {
    page.section("Regions");
    for (name, region) in outcome.regions.iter() {
        page.heading(&format!("{name} ({})", region.material));
        row(page, "  volume", &region.volume_m3, Unit::VOLUME);
        optional_row(page, "  mass", region.mass_kg.as_ref(), Unit::MASS);
        row(page, "  mean B", &region.b_mean_t, Unit::TESLA);
        row(page, "  B exceeded in 0.1 % of it", &region.b_max_t, Unit::TESLA);
        page.remark("  largest B at", &place(case, region.b_max_at));
        optional_row(page, "  knee of its curve", region.knee_t.as_ref(), Unit::TESLA);
        optional_row(
            page,
            "  largest B over the knee",
            region.b_max_over_knee.as_ref(),
            Unit::PER_CENT,
        );
        optional_row(
            page,
            "  volume beyond the knee",
            region.saturated_share.as_ref(),
            Unit::PER_CENT,
        );
    }
}

pub fn magnets(page: &mut Page, case: &Case, outcome: &Outcome) {
    page.section("Magnets (along their magnetisation)");
    for (name, region) in outcome.regions.iter() {
        if region.mean_b_along_t.is_some() {
            page.heading(name);
            magnet_rows(page, case, region);
        }
    }
}

fn magnet_rows(page: &mut Page, case: &Case, region: &Region) {
    optional_row(page, "  mean B", region.mean_b_along_t.as_ref(), Unit::TESLA);
    optional_row(
        page,
        "  mean H",
        region.mean_h_along_a_per_m.as_ref(),
        Unit::AMPERE_PER_METRE,
    );
    optional_row(
        page,
        "  permeance coefficient",
        region.permeance_coefficient.as_ref(),
        Unit::NUMBER,
    );
    optional_row(page, "  lowest B", region.lowest_b_along_t.as_ref(), Unit::TESLA);
    optional_row(
        page,
        "  H there",
        region.lowest_h_along_a_per_m.as_ref(),
        Unit::AMPERE_PER_METRE,
    );
    if let Some(at) = region.lowest_at {
        page.remark("  lowest at", &place(case, at));
    }
    optional_row(
        page,
        "  knee of its curve",
        region.knee_b_along_t.as_ref(),
        Unit::TESLA,
    );
}

pub fn stray(page: &mut Page, _case: &Case, outcome: &Outcome) {
    page.section("Stray field");
    let Some(stray) = &outcome.stray else { return };
    let distance = plain(stray.distance_m, Unit::METRE);
    row(
        page,
        &format!("largest B {distance} beyond the modelled circle"),
        &stray.b_t,
        Unit::TESLA,
    );
    let limit = plain(stray.limit_t, Unit::TESLA);
    match &stray.reach_of_limit_m {
        Some(reach) => row(
            page,
            &format!("{limit} reaches, from its centre"),
            reach,
            Unit::METRE,
        ),
        None => page.remark(&limit, "not exceeded beyond that circle"),
    }
}

pub fn traverses(page: &mut Page, case: &Case, outcome: &Outcome) {
    page.section("Traverses");
    for (name, points) in outcome.traverses.iter() {
        match points.as_slice() {
            [] => {}
            [point] => {
                page.heading(&format!(
                    "{name}, at {}",
                    place(
                        case,
                        Place {
                            r_m: point.r_m,
                            z_m: point.z_m
                        }
                    )
                ));
                row(page, "  B", &point.b_t, Unit::TESLA);
                row(page, "  B along r", &point.b_r_t, Unit::TESLA);
                row(page, "  B along z", &point.b_z_t, Unit::TESLA);
            }
            [first, .., last] => {
                let ends = [first, last].map(|point| {
                    place(
                        case,
                        Place {
                            r_m: point.r_m,
                            z_m: point.z_m,
                        },
                    )
                });
                page.heading(&format!(
                    "{name}, {} points from {} to {}",
                    points.len(),
                    ends[0],
                    ends[1]
                ));
                let size = |point: &&crate::report::json::TraversePoint| point.b_t.value;
                let extreme = |most: bool| {
                    let order = |a: &&_, b: &&_| size(a).total_cmp(&size(b));
                    if most {
                        points.iter().max_by(order)
                    } else {
                        points.iter().min_by(order)
                    }
                };
                for (what, point) in [("  largest B", extreme(true)), ("  smallest B", extreme(false))] {
                    if let Some(point) = point {
                        row(page, what, &point.b_t, Unit::TESLA);
                        let at = Place {
                            r_m: point.r_m,
                            z_m: point.z_m,
                        };
                        page.remark("    at", &place(case, at));
                    }
                }
            }
        }
    }
}

pub fn search_coils(page: &mut Page, outcome: &Outcome) {
    page.section("Search coils");
    for (name, coil) in outcome.search_coils.iter() {
        page.heading(name);
        row(page, "  flux", &coil.flux_wb, Unit::WEBER);
        row(page, "  flux linkage", &coil.flux_linkage_wb, Unit::WEBER);
    }
}

pub fn accuracy(page: &mut Page, report: &Report) {
    page.section("Accuracy");
    let accuracy = &report.accuracy;
    let verdict = if accuracy.met { "met" } else { "NOT MET" };
    page.remark(
        "goal",
        &format!("{} ({verdict})", significant(accuracy.goal, Unit::PER_CENT, 3)),
    );
    page.remark("reached", &significant(accuracy.reached, Unit::PER_CENT, 2));
    if let Some(why) = &accuracy.why_not {
        page.entry(why);
    }
    for weld in &report.mesh.welded {
        let moved = significant(weld.moved_m, Unit::METRE, 2);
        page.entry(&format!(
            "The drawing was closed by {moved} between {}.",
            weld.regions.join(" and ")
        ));
    }
}

pub fn cautions(page: &mut Page, report: &Report) {
    page.section("Cautions");
    for caution in &report.cautions {
        page.entry(&format!(
            "{}: {} [{}]",
            caution.about, caution.text, caution.source
        ));
    }
    if !report.cautions.is_empty() {
        page.entry(crate::caution::DEFERRAL);
    }
}
