//! Givens and `--set`.

use super::{COIL, faults, good, read_text, refused, with};

fn with_sets(sets: &[&str]) -> String {
    match read_text(COIL, sets) {
        Ok(_) => String::new(),
        Err(faults) => faults.to_string(),
    }
}

#[test]
fn givens_are_read_in_any_order() {
    let case = good(
        &with(
            "outer = \"30 mm\"",
            "outer = \"inner + wall\"\ninner = 20\nwall = \"2*five\"\nfive = \"5 mm\"",
        )
        .replace("\"inner + wall\"", "\"inner*1 mm + wall\""),
    );
    let values: Vec<(&str, f64, &str)> = case
        .givens
        .iter()
        .map(|given| (given.name.as_str(), given.si, given.unit.as_str()))
        .collect();
    assert_eq!(
        values,
        [
            ("outer", 0.03, "m"),
            ("inner", 20.0, ""),
            ("wall", 0.01, "m"),
            ("five", 0.005, "m"),
            ("n", 100.0, "")
        ]
    );
    assert_eq!(case.givens[0].text, "inner*1 mm + wall");
}

#[test]
fn set_replaces_the_text_and_the_last_wins() {
    let case = read_text(COIL, &["outer=28 mm", "n=7", "outer=29 mm"]).expect("right");
    assert_eq!(case.givens[0].si, 0.029);
    assert_eq!(case.givens[0].text, "29 mm");
    assert_eq!(case.section.regions[0].copies[0].bounds().high.r, 0.029);
    assert_eq!(case.problem.windings[0].turns, solver::problem::Turns::Total(7.0));
    // A bare number is read as the key reads it.
    let case = read_text(COIL, &["outer=29"]).expect("right");
    assert_eq!(case.section.regions[0].copies[0].bounds().high.r, 0.029);
}

#[test]
fn wrong_sets_are_refused() {
    assert!(with_sets(&["outr=3"]).contains("did you mean `outer`"));
    assert!(with_sets(&["outer"]).contains("NAME=VALUE"));
    assert!(
        with_sets(&["outer=2 mm + 3 A"]).contains("--set outer:1:12"),
        "{}",
        with_sets(&["outer=2 mm + 3 A"])
    );
    assert!(with_sets(&["outer=31 kg"]).contains("expects a length, but this is a mass"));
    assert!(with_sets(&["n=0"]).contains("zero turns"));
    assert!(with_sets(&["outer="]).contains("empty"));
}

#[test]
fn circles_are_named_in_a_chain() {
    refused(
        &with(
            "outer = \"30 mm\"",
            "outer = »\"b + 1 mm\"\nb = \"c\"\nc = \"outer\"",
        ),
        &["outer -> b -> c -> outer"],
    );
    refused(&with("n = 100", "n = »\"2*n\""), &["n -> n"]);
}

#[test]
fn a_given_may_not_hide_a_unit_a_function_or_a_constant() {
    for (name, what) in [
        ("mm", "a unit"),
        ("min", "a function"),
        ("pi", "a constant"),
        ("sqrt", "a function"),
        ("h", "a unit"),
    ] {
        refused(
            &with("n = 100", &format!("n = 100\n»{name} = 3")),
            &[what, "hide"],
        );
    }
    refused(&with("n = 100", "n = 100\n»Gap = 3"), &["lower-case"]);
    refused(&with("n = 100", "n = 100\n»air-gap = 3"), &["lower-case"]);
}

#[test]
fn a_wrong_given_is_said_once_however_often_it_is_used() {
    let text = with("outer = \"30 mm\"", "outer = \"30 mm + 1 A\"\nhalf = \"outer/2\"");
    assert_eq!(faults(&text).len(), 1);
}

#[test]
fn vary_is_passed_over_but_its_names_are_checked() {
    let vary = "\n[[vary]]\nname = \"outer\"\nvalues = [\"0.5 mm\", \"1 mm\"]\n[[vary]]\nname = \"n\"\nvalues = { from = 1, to = 9, points = 3 }\ntogether = true\n";
    assert!(read_text(&format!("{COIL}{vary}"), &["outer=28 mm"]).is_ok());
    refused(
        &format!("{COIL}{}", vary.replacen("\"outer\"", "»\"outr\"", 1)),
        &["no given `outr` to vary", "`outer`"],
    );
}
