//! Times the pull curve of the drip-line valve, 21 places at default accuracy, as a person would run it.
//!
//! `cargo bench -p coilwright --bench pull_curve`. The goal is 15 s on two idle cores. Each line is the best of several
//! runs; the last shows where the time goes (summed over places solved side by side).
#![allow(clippy::print_stdout, clippy::unwrap_used)]

use std::process::Command;
use std::time::Instant;

use serde_json::Value;

/// Runs of each; the best counts, because other work on the machine only ever adds.
const RUNS: usize = 3;

fn main() {
    let case = case_with_travel();
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("valve.toml");
    std::fs::write(&path, case).unwrap();
    let solve = |threads: &str| {
        let begun = Instant::now();
        let ran = Command::new(env!("CARGO_BIN_EXE_coilwright"))
            .args(["solve", path.to_str().unwrap(), "--json", "--threads", threads])
            .output()
            .unwrap();
        let seconds = begun.elapsed().as_secs_f64();
        assert!(ran.status.success(), "{}", String::from_utf8_lossy(&ran.stderr));
        (seconds, serde_json::from_slice::<Value>(&ran.stdout).unwrap())
    };
    let mut report = Value::Null;
    for threads in ["1", "2"] {
        let mut best = f64::INFINITY;
        for _ in 0..RUNS {
            let (seconds, found) = solve(threads);
            best = best.min(seconds);
            report = found;
        }
        let places = report["results"].as_array().map_or(0, Vec::len);
        println!("pull curve of {places} places, {threads} threads: {best:.2} s");
    }
    let spent = &report["timing_s"];
    let parts = ["mesh", "assembly", "solve", "quantities"].map(|part| {
        let seconds = spent[part].as_f64().unwrap();
        format!("{part} {seconds:.2} s")
    });
    println!("{}", parts.join(", "));
    println!(
        "accuracy {}, Newton {}",
        report["accuracy"], report["mesh"]["newton"]
    );
}

/// The demo case; with a travel of 21 places of a saturable plunger where it has none of its own.
fn case_with_travel() -> String {
    let path = concat!(env!("CARGO_MANIFEST_DIR"), "/../cases/drip-line-valve.toml");
    let text = std::fs::read_to_string(path).unwrap();
    if text.lines().any(|line| line.starts_with("travel")) {
        return text;
    }
    let steel = "saturation = { polarization = \"2.0 T\", half_field = \"400 A/m\" }";
    let text = text.replace("relative_permeability = 1000", steel);
    let mover = "[[mover]]\nname = \"plunger\"\nregions = [\"plunger\"]\n";
    let travel = "travel = { from = \"-1.3 mm\", to = \"3 mm\", points = 21 }\n";
    assert!(text.contains(mover), "the case has changed");
    text.replace(mover, &format!("{mover}{travel}"))
}
