//! `--json`: exactly the content of report.json on standard output, nothing else there, and no files.

use serde_json::Value;

use crate::harness::{COIL, Room, number};

const SELF: &str = "/results/0/inductance_h/main/main/value";

#[test]
fn it_prints_one_object_and_writes_nothing() {
    let room = Room::with_case(COIL);
    let json = room.solve_json(&[]);
    assert!(number(&json, SELF) > 0.0);
    assert_eq!(room.names(), ["case.toml"]);
}

#[test]
fn with_out_it_prints_what_stands_in_the_file() {
    let room = Room::with_case(COIL);
    let ran = room.run(&["solve", "case.toml", "--json", "--out", "there"]);
    assert_eq!(ran.status, 0, "{}", ran.err);
    let file = std::fs::read_to_string(room.path().join("there/report.json")).unwrap();
    // The time that writing takes is not known before the file is written.
    let without_time = |text: &str| {
        let mut json: Value = serde_json::from_str(text).unwrap();
        json.as_object_mut().unwrap().remove("timing_s");
        json
    };
    assert_eq!(without_time(&ran.out), without_time(&file));
}

#[test]
fn standard_input_is_a_case_too() {
    let room = Room::with_case(COIL);
    let ran = room.run_with_input(&["solve", "-", "--json"], COIL.as_bytes());
    assert_eq!(ran.status, 0, "{}", ran.err);
    let piped: Value = serde_json::from_str(&ran.out).unwrap();
    assert_eq!(number(&piped, SELF), number(&room.solve_json(&[]), SELF));
    assert_eq!(room.names(), ["case.toml"]);
}

#[test]
fn set_replaces_a_given_and_the_last_one_wins() {
    let room = Room::with_case(COIL);
    let plain = number(&room.solve_json(&[]), SELF);
    let json = room.solve_json(&["--set", "turns=7", "--set", "turns=2 * 10"]);
    // L goes with the square of the turns, on the same mesh, to round-off.
    assert!((number(&json, SELF) / (4.0 * plain) - 1.0).abs() < 1e-9);
    assert_eq!(json["given"]["turns"]["text"], "2 * 10");
    assert_eq!(number(&json, "/given/turns/si"), 20.0);
    assert_eq!(number(&json, "/given/outer/si"), 0.03);
    assert_eq!(json["given"]["outer"]["unit"], "m");
}

#[test]
fn every_number_is_a_bracket_and_none_is_null() {
    let text = format!(
        "{COIL}\n[[mover]]\nname = \"whole\"\nregions = [\"coil\"]\n\n[[traverse]]\nname = \"axis\"\nline = {{ from = [0, -20], to = [0, 20], points = 5 }}\n\n[[search_coil]]\nname = \"s\"\nat = [10, 5]\nturns = 100\n\n[stray]\ndistance = \"0.3 m\"\n"
    );
    let json = Room::with_case(&text).solve_json(&[]);
    let mut brackets = 0;
    walk(&json, &mut |value| {
        assert!(!value.is_null());
        if let Some(bound) = value.get("bound") {
            brackets += 1;
            assert!(
                ["guaranteed", "estimated", "exact"].contains(&bound.as_str().unwrap()),
                "{value}"
            );
            let part = |key: &str| value[key].as_f64().unwrap();
            assert!(
                part("low") <= part("value") && part("value") <= part("high"),
                "{value}"
            );
        }
    });
    assert!(brackets > 20, "{brackets}");
    for key in [
        "windings",
        "inductance_h",
        "coupling",
        "energy_j",
        "coenergy_j",
        "movers",
        "coil_sides",
        "regions",
        "search_coils",
        "traverses",
        "stray",
    ] {
        assert!(json["results"][0].get(key).is_some(), "{key}: {json:#}");
    }
    assert_eq!(
        json["results"][0]["traverses"]["axis"].as_array().unwrap().len(),
        5
    );
}

fn walk(value: &Value, visit: &mut impl FnMut(&Value)) {
    visit(value);
    match value {
        Value::Array(list) => list.iter().for_each(|inner| walk(inner, visit)),
        Value::Object(map) => map.values().for_each(|inner| walk(inner, visit)),
        _ => {}
    }
}

#[test]
fn the_number_of_threads_does_not_change_the_numbers() {
    let room = Room::with_case(include_str!("../../../cases/drip-line-valve.toml"));
    let mut one = room.solve_json(&["--set", "places=3", "--threads", "1"]);
    let mut two = room.solve_json(&["--set", "places=3", "--threads", "2"]);
    for json in [&mut one, &mut two] {
        json.as_object_mut().unwrap().remove("timing_s");
    }
    assert_same(&one, &two, "");
}

/// Same structure, strings and counts; numbers within 1e-9 of the larger, or of the largest of its list.
fn assert_same(a: &Value, b: &Value, path: &str) {
    match (a, b) {
        (Value::Object(x), Value::Object(y)) => {
            assert_eq!(
                x.keys().collect::<Vec<_>>(),
                y.keys().collect::<Vec<_>>(),
                "{path}"
            );
            x.iter()
                .for_each(|(key, value)| assert_same(value, &y[key], &format!("{path}/{key}")));
        }
        (Value::Array(x), Value::Array(y)) => {
            assert_eq!(x.len(), y.len(), "{path}");
            x.iter()
                .zip(y)
                .enumerate()
                .for_each(|(i, (v, w))| assert_same(v, w, &format!("{path}/{i}")));
        }
        (Value::Number(x), Value::Number(y)) => {
            let (x, y) = (x.as_f64().unwrap(), y.as_f64().unwrap());
            assert!((x - y).abs() <= 1e-9 * x.abs().max(y.abs()), "{path}: {x} {y}");
        }
        _ => assert_eq!(a, b, "{path}"),
    }
}
