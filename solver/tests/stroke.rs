//! A saturating plunger along its stroke, and a coil's linkage over its current.

#![allow(clippy::unwrap_used, reason = "tests")]

use coilwright_solver as solver;
use mesher::Section;
use mesher::section::{PaintedRegion, SpaceEdge};
use mesher::shape::Outline;
use solver::linkage::{LinkageCurve, Request};
use solver::problem::{Drive, MagneticLaw, Mover, Problem, RegionPhysics, Turns, Winding};
use solver::reluctivity::{Isotropic, Saturation};
use solver::solve::{Kind, Progress, Settings, Stage};
use solver::stroke::{Station, Stroke, each_place};

struct Silent;

impl Progress for Silent {
    fn stage(&self, _: Stage, _: usize, _: usize) {}
}

const AIR: MagneticLaw = MagneticLaw::Linear {
    relative_permeability: 1.0,
};

fn steel() -> MagneticLaw {
    MagneticLaw::Saturable(Isotropic::Saturation(Saturation {
        polarization_t: 1.8,
        half_field_a_per_m: 500.0,
    }))
}

/// A pot with a fixed core and a plunger above it, `gap` m apart; lengths in m.
fn pot(gap: f64) -> Section {
    let region = |name: &str, r: [f64; 2], z: [f64; 2]| PaintedRegion {
        name: name.into(),
        copies: vec![Outline::rect(r, z, 0.0).unwrap()],
        mesh_size_m: None,
    };
    Section {
        regions: vec![
            region("plunger", [0.0, 5e-3], [gap, gap + 20e-3]),
            region("core", [0.0, 5e-3], [-9e-3, 0.0]),
            region("foot", [0.0, 15e-3], [-12e-3, -9e-3]),
            region("shell", [12.5e-3, 15e-3], [-9e-3, 16e-3]),
            region("collar", [5.5e-3, 15e-3], [14e-3, 16e-3]),
            region("coil", [6e-3, 12e-3], [-8e-3, 12e-3]),
        ],
        edge: SpaceEdge::HalfCircle,
        mirror_z_m: None,
    }
}

fn physics(ampere_turns: f64) -> Problem {
    let names = ["plunger", "core", "foot", "shell", "collar", "coil"];
    Problem {
        regions: names
            .iter()
            .map(|name| RegionPhysics {
                name: (*name).into(),
                law: if *name == "coil" { AIR } else { steel() },
                conductivity_s_per_m: 0.0,
                density_kg_per_m3: None,
            })
            .collect(),
        windings: vec![Winding {
            name: "main".into(),
            regions: vec![5],
            turns: Turns::Total(1000.0),
            drive: Drive::Current(ampere_turns / 1000.0),
            conductor: None,
            lead_resistance_ohm: 0.0,
        }],
        movers: vec![Mover {
            name: "plunger".into(),
            regions: vec![0],
        }],
        mirror: None,
        ambient_b_t: 0.0,
        traverses: vec![],
        search_coils: vec![],
        stray: None,
    }
}

fn settings(goal: f64) -> Settings {
    Settings {
        goal,
        of: vec![Kind::Inductance, Kind::Force],
        max_triangles: 400_000,
        max_time: None,
        fineness: 1.0,
    }
}

fn stations(gaps: &[f64], ampere_turns: f64) -> Vec<Station> {
    let problem = physics(ampere_turns);
    let sections: Vec<Section> = gaps.iter().map(|&gap| pot(gap)).collect();
    each_place(
        &sections,
        &problem,
        &settings(0.01),
        |_| Silent,
        |k, solution| {
            assert!(
                solution.newton.as_ref().is_some_and(|n| n.converged),
                "gap {}",
                gaps[k]
            );
            Station::of(gaps[k], &problem, &solution.quantities, 0)
        },
    )
    .unwrap()
}

#[test]
fn work_over_the_stroke_is_the_change_of_coenergy_within_the_error_bars() {
    let gaps: Vec<f64> = (0..11).map(|k| 0.5e-3 + 0.25e-3 * f64::from(k)).collect();
    // Far below, at and beyond the knee of the steel.
    for ampere_turns in [100.0, 800.0, 2500.0] {
        let stations = stations(&gaps, ampere_turns);
        let stroke = Stroke::along(&stations);
        for (work, change) in stroke.work_j.iter().zip(&stroke.coenergy_change_j) {
            assert!(
                work.low <= change.high && change.low <= work.high,
                "{ampere_turns} A: {work:?} {change:?}"
            );
        }
        // The bars of the co-energies, each within 1 % or so, and of the forces bound the difference of the values.
        let (work, change) = (
            stroke.work_j.last().unwrap(),
            stroke.coenergy_change_j.last().unwrap(),
        );
        assert!(work.value < 0.0 && change.value < 0.0, "the plunger is drawn in");
        assert!(
            (work.value - change.value).abs() <= work.half_width() + change.half_width(),
            "{ampere_turns} A: {work:?} {change:?}"
        );
        assert!(
            work.half_width() < 0.1 * work.value.abs(),
            "{ampere_turns} A: {work:?}"
        );
        for (station, check) in stations.iter().zip(&stroke.force_by_coenergy_n) {
            let force = station.force_n.unwrap();
            assert!(
                force.low <= check.high && check.low <= force.high,
                "{ampere_turns} A at {}: {force:?} {check:?}",
                station.at_m
            );
        }
    }
}

#[test]
fn places_are_the_same_whatever_the_number_of_threads() {
    let with = |threads| {
        let pool = rayon::ThreadPoolBuilder::new()
            .num_threads(threads)
            .build()
            .unwrap();
        pool.install(|| stations(&[0.5e-3, 1e-3, 1.5e-3], 800.0))
    };
    let (one, three) = (with(1), with(3));
    for (a, b) in one.iter().zip(&three) {
        let (f, g) = (a.force_n.unwrap().value, b.force_n.unwrap().value);
        assert!((f - g).abs() <= 1e-9 * f.abs(), "{f} {g}");
        let (v, w) = (a.coenergy_j.unwrap().value, b.coenergy_j.unwrap().value);
        assert!((v - w).abs() <= 1e-9 * v.abs(), "{v} {w}");
    }
}

#[test]
fn a_section_that_cannot_be_meshed_is_named_by_its_place() {
    let mut bad = pot(1e-3);
    bad.mirror_z_m = Some(0.0);
    let sections = [pot(1e-3), bad];
    let problem = physics(100.0);
    let error = each_place(&sections, &problem, &settings(0.1), |_| Silent, |_, _| ()).unwrap_err();
    assert_eq!(error.0, 1);
}

fn linkage_curve(currents: &[f64], goal: f64) -> LinkageCurve {
    let (section, problem) = (pot(0.5e-3), physics(0.0));
    let request = Request {
        section: &section,
        problem: &problem,
        settings: &settings(goal),
        winding: 0,
        currents_a: currents,
    };
    solver::linkage::curve(&request, &Silent).unwrap()
}

#[test]
fn incremental_inductance_is_the_slope_of_the_linkage_and_apparent_its_chord() {
    // Pairs of near currents, up, down and with the other sign.
    let step = 0.004;
    let middles = [0.0, 0.1, 0.5, 1.0, 3.0, -0.5];
    let currents: Vec<f64> = middles.iter().flat_map(|i| [i - step, *i, i + step]).collect();
    let curve = linkage_curve(&currents, 0.02);
    for (k, middle) in middles.iter().enumerate() {
        let [before, here, after] = [3 * k, 3 * k + 1, 3 * k + 2].map(|k| curve.points[k]);
        assert_eq!(here.current_a, *middle);
        let slope = (after.flux_linkage_wb.value - before.flux_linkage_wb.value) / (2.0 * step);
        let [a, b, c] = [before, here, after].map(|p| p.incremental_inductance_h.value);
        // Mean of the incremental inductance over the step by Simpson's rule; its error is of fourth order in a step
        // of a hundredth of what bends the curve, so the bound is what rounding and Newton's residual leave.
        let mean = (a + 4.0 * b + c) / 6.0;
        // (At zero the law's slope has a corner, and Simpson's rule does not hold.)
        if *middle != 0.0 {
            assert!((slope - mean).abs() < 1e-5 * mean, "{middle} A: {slope} {mean}");
            let chord = here.flux_linkage_wb.value / middle;
            assert!(
                (chord - here.inductance_h.value).abs() < 1e-6 * chord,
                "{middle} A: {chord}"
            );
        }
    }
    let at = |current: f64| curve.points.iter().find(|p| p.current_a == current).unwrap();
    assert!(at(3.0).incremental_inductance_h.value < 0.3 * at(0.5).incremental_inductance_h.value);
    assert!((at(0.5).flux_linkage_wb.value + at(-0.5).flux_linkage_wb.value).abs() < 1e-8);
    assert_eq!(at(0.0).flux_linkage_wb.value, 0.0);
    assert!(curve.accuracy.met, "{:?}", curve.accuracy);
}

#[test]
fn a_linkage_curve_agrees_with_the_operating_point_alone() {
    let curve = linkage_curve(&[0.2, 0.8], 0.01);
    let alone = solver::solve(&pot(0.5e-3), &physics(800.0), &settings(0.01), &Silent).unwrap();
    let (a, b) = (
        curve.points[1].flux_linkage_wb,
        alone.quantities.windings[0].flux_linkage_wb,
    );
    assert!(a.low <= b.high && b.low <= a.high, "{a:?} {b:?}");
    assert!(curve.most_newton_steps <= 10, "{}", curve.most_newton_steps);
}
