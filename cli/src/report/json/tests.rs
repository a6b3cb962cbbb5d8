use serde_json::Value;

use super::*;
use crate::{caution, sample};

fn report() -> Report {
    let (case, solution) = (sample::case(), sample::solution());
    let cautions = caution::all(&case, &solution);
    Report::of(
        &case,
        &solution,
        cautions,
        Clock {
            read_s: 0.01,
            output_s: 0.02,
            total_s: 0.7,
        },
    )
}

#[test]
fn has_the_documented_shape() {
    let text = report().to_json().unwrap();
    assert!(text.ends_with("}\n"));
    let value: Value = serde_json::from_str(&text).unwrap();
    let keys: Vec<&str> = value.as_object().unwrap().keys().map(String::as_str).collect();
    let expected = [
        "title", "regime", "version", "given", "mesh", "accuracy", "results", "cautions", "timing_s",
    ];
    assert_eq!(keys, expected);
    let outcome = &value["results"][0];
    let inductance = &outcome["inductance_h"]["main"]["main"];
    assert_eq!(inductance["value"], 0.012337);
    assert_eq!(inductance["bound"], "estimated");
    assert!(inductance["low"].as_f64() < inductance["high"].as_f64());
    assert_eq!(outcome["windings"]["main"]["turns"]["bound"], "exact");
    assert_eq!(outcome["regions"]["coil"]["material"], "copper");
    assert_eq!(outcome["traverses"]["axis"][1]["region"], "plunger");
    assert_eq!(
        value["given"]["gap"],
        serde_json::json!({"text": "1.5 mm", "si": 0.0015, "unit": "m"})
    );
    assert_eq!(value["mesh"]["triangles"], 2 * 96 * 96);
    assert!((value["mesh"]["smallest_angle_deg"].as_f64().unwrap() - 26.565).abs() < 0.001);
}

#[test]
fn leaves_out_what_does_not_apply() {
    let value: Value = serde_json::from_str(&report().to_json().unwrap()).unwrap();
    let outcome = &value["results"][0];
    assert!(outcome.get("dipole_moment_am2").is_none());
    assert!(outcome["windings"]["main"].get("magnet_linkage_wb").is_none());
    assert!(outcome["traverses"]["axis"][0].get("region").is_none());
    assert!(
        outcome["regions"]["plunger"]
            .get("permeance_coefficient")
            .is_none()
    );
    assert!(value["accuracy"].get("why_not").is_none());
}

#[test]
fn never_writes_a_number_that_is_not_finite() {
    for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        let mut report = report();
        report.results[0].movers.0[0].1.force_n.as_mut().unwrap().high = bad;
        let error = report.to_json().unwrap_err();
        assert_eq!(error.path, ".results[0].movers.plunger.force_n.high");
    }
}

#[test]
fn an_empty_device_still_reports() {
    let (case, mut solution) = (sample::case(), sample::solution());
    solution.quantities.windings.clear();
    solution.quantities.inductance_h.clear();
    solution.quantities.coupling.clear();
    let report = Report::of(&case, &solution, Vec::new(), Clock::default());
    let value: Value = serde_json::from_str(&report.to_json().unwrap()).unwrap();
    assert!(value["results"][0].get("inductance_h").is_none());
    assert!(value["results"][0]["at"].as_object().unwrap().is_empty());
}
