//! Dependencies go one way: the mesher knows no physics, the solver no files or text, nothing but checks knows
//! the program.

use std::collections::BTreeSet;

use crate::licences::packages;

/// What a workspace package needs when it runs.
fn needs(name: &str) -> BTreeSet<String> {
    let packages = packages();
    let package = packages.iter().find(|package| package["name"] == name).unwrap();
    let dependencies = package["dependencies"].as_array().unwrap().iter();
    dependencies
        .filter(|d| d["kind"].is_null())
        .map(|d| d["name"].as_str().unwrap().to_string())
        .collect()
}

#[test]
fn the_libraries_know_neither_files_nor_the_command_line() {
    for library in ["coilwright-mesher", "coilwright-solver"] {
        let needs = needs(library);
        for upward in [
            "coilwright",
            "clap",
            "serde",
            "serde_json",
            "toml",
            "miette",
            "indicatif",
        ] {
            assert!(!needs.contains(upward), "{library} needs {upward}");
        }
    }
    assert!(!needs("coilwright-mesher").contains("coilwright-solver"));
    assert!(needs("coilwright-solver").contains("coilwright-mesher"));
}

#[test]
fn only_the_mesher_triangulates_and_only_the_solver_factors() {
    assert!(!needs("coilwright-solver").contains("spade"));
    for package in ["coilwright", "coilwright-mesher"] {
        assert!(!needs(package).contains("faer"), "{package}");
    }
}
