//! Every file in `cases/` is solved, and the physics a designer would check by hand holds.

use std::path::Path;

use serde_json::Value;

use crate::harness::{Room, number};

fn cases() -> Vec<(String, String)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../cases");
    let mut cases: Vec<_> = std::fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| path.extension().is_some_and(|ending| ending == "toml"))
        .map(|path| {
            (
                path.file_stem().unwrap().to_string_lossy().into_owned(),
                std::fs::read_to_string(path).unwrap(),
            )
        })
        .collect();
    cases.sort();
    cases
}

fn solve(name: &str, more: &[&str]) -> Value {
    let (_, text) = cases().into_iter().find(|(case, _)| case == name).unwrap();
    Room::with_case(&text).solve_json(more)
}

#[test]
fn all_are_solved_to_their_goal() {
    let cases = cases();
    assert!(cases.len() >= 7);
    for (name, text) in cases {
        let json = Room::with_case(&text).solve_json(&[]);
        assert_eq!(json["accuracy"]["met"], true, "{name}: {}", json["accuracy"]);
        // A whole stroke is many solves; the machine may be busy.
        assert!(number(&json, "/timing_s/total") < 60.0, "{name}");
        if let Some(newton) = json["mesh"].get("newton") {
            assert_eq!(newton["converged"], true, "{name}");
            let steps = newton["coarse_steps"]
                .as_u64()
                .unwrap()
                .max(newton["fine_steps"].as_u64().unwrap());
            assert!(steps <= 10, "{name}: {newton}");
        }
    }
}

#[test]
fn the_valve_pulls_harder_the_nearer_the_plunger_until_it_is_full() {
    let at = |drive: &str| solve("drip-line-valve", &["--set", "places=3", "--set", drive]);
    let force =
        |json: &Value, place: usize| number(json, &format!("/results/{place}/movers/plunger/force_n/value"));
    let (single, double) = (at("drive=0.5 A"), at("drive=1 A"));
    assert!(force(&single, 2) < 5.0 * force(&single, 0) && force(&single, 0) < 0.0);
    // Twice the current: nearly four times the pull where air decides, far less where the plunger is full.
    let gain = |place| force(&double, place) / force(&single, place);
    assert!(
        (3.8..4.0).contains(&gain(0)) && gain(2) < 2.5,
        "{} {}",
        gain(0),
        gain(2)
    );
    // Full steel takes up little more flux: the incremental inductance falls far under the apparent one.
    let incremental = number(&double, "/results/2/incremental_inductance_h/main/main/value");
    let apparent = number(&double, "/results/2/inductance_h/main/main/value");
    assert!(incremental < 0.3 * apparent, "{incremental} {apparent}");
    assert!(number(&double, "/results/2/regions/plunger/b_max_over_knee/value") > 1.2);
}

#[test]
fn the_latch_holds_without_current_and_a_measured_pulse_lets_go() {
    let force = |sets: &[&str]| {
        let sets: Vec<&str> = sets.iter().flat_map(|set| ["--set", set]).collect();
        let json = solve("latching-valve", &sets);
        let magnet = "/results/0/regions/magnet";
        let lowest = number(&json, &format!("{magnet}/lowest_b_along_t/value"));
        assert!(lowest > number(&json, &format!("{magnet}/knee_b_along_t/value")));
        number(&json, "/results/0/movers/plunger/force_n/value")
    };
    let (held, out, pulled) = (
        force(&[]),
        force(&["gap=2 mm"]),
        force(&["gap=2 mm", "pulse=2 A"]),
    );
    let (eased, reversed) = (force(&["pulse=-0.4 A"]), force(&["pulse=-2 A"]));
    assert!(held < 20.0 * out && out < 0.0, "{held} {out}");
    assert!(pulled < 10.0 * out, "{pulled} {out}");
    assert!(eased > 0.3 * held && reversed < held, "{eased} {reversed}");
}

#[test]
fn the_holding_magnet_pulls_about_what_the_gap_formula_says() {
    let json = solve("gate-holding-magnet", &[]);
    let force = number(&json, "/results/0/movers/armature/force_n/value");
    let turns = number(&json, "/results/0/windings/hold/ampere_turns_a/value");
    // B²A/(2 mu0) on the pole and the rim with all ampere-turns in the two gaps and none in the steel: an upper
    // bound up to fringing.
    let (pole, rim) = (0.01f64.powi(2), 0.024f64.powi(2) - 0.02f64.powi(2));
    let (mu0, pi) = (4e-7 * std::f64::consts::PI, std::f64::consts::PI);
    let reluctance = 2e-4 / (mu0 * pi) * (1.0 / pole + 1.0 / rim);
    let flux = turns / reluctance;
    let ideal = flux * flux / (2.0 * mu0 * pi) * (1.0 / pole + 1.0 / rim);
    assert!(-force < ideal && -force > 0.5 * ideal, "{force} {ideal}");
}

#[test]
fn ferrite_discs_raise_coupling_and_inductance() {
    let (air, ferrite) = (
        solve("charging-pair-air", &[]),
        solve("charging-pair-ferrite", &[]),
    );
    let k = "/results/0/coupling/lid/sensor/value";
    let l = "/results/0/inductance_h/sensor/sensor/value";
    assert!(number(&ferrite, k) > number(&air, k));
    assert!(number(&ferrite, l) > 1.5 * number(&air, l));
}

#[test]
fn the_choke_exceeds_the_handbook_formula_by_its_fringing() {
    let json = solve("line-choke", &[]);
    let l = number(&json, "/results/0/inductance_h/choke/choke/value");
    let handbook =
        4e-7 * std::f64::consts::PI * 80.0f64.powi(2) * std::f64::consts::PI * 0.008f64.powi(2) / 1.2e-3;
    assert!(l > handbook && l < 1.6 * handbook, "{l} {handbook}");
}

#[test]
fn the_float_is_drawn_down_the_harder_the_nearer_and_links_more_flux_towards_the_coil() {
    let [near, inside] = ["lift=2 mm", "lift=6 mm"].map(|lift| solve("magnet-pickup", &["--set", lift]));
    let force = "/results/0/movers/float/force_n/value";
    assert!(number(&near, force) < 5.0 * number(&inside, force) && number(&inside, force) < 0.0);
    let linkage = "/results/0/windings/pickup/flux_linkage_wb/value";
    assert!(number(&inside, linkage) > 1.2 * number(&near, linkage));
}
