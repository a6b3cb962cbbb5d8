//! The resolved case repeats the run.

use proptest::prelude::*;

use super::{COIL, and, read_text};
use crate::case::Case;

/// Everything that the solver sees; equal texts are equal bits, since Rust writes the shortest text that reads back.
fn seen_by_the_solver(case: &Case) -> String {
    format!(
        "{:?} {:?} {:?} {} {:?}",
        case.section, case.problem, case.accuracy, case.temperature_c, case.title
    )
}

fn assert_repeats(text: &str, sets: &[&str]) {
    let first = read_text(text, sets).unwrap_or_else(|faults| panic!("{faults}"));
    let again = read_text(&first.resolved_toml, &[])
        .unwrap_or_else(|faults| panic!("{faults}\n{}", first.resolved_toml));
    assert_eq!(
        seen_by_the_solver(&first),
        seen_by_the_solver(&again),
        "{}",
        first.resolved_toml
    );
    let values = |case: &Case| {
        case.givens
            .iter()
            .map(|given| (given.name.clone(), given.si.to_bits()))
            .collect::<Vec<_>>()
    };
    assert_eq!(values(&first), values(&again));
    assert_eq!(
        seen_by_the_solver(&again),
        seen_by_the_solver(&read_text(&again.resolved_toml, &[]).expect("right"))
    );
}

const MANY: &str = r#"
length_unit = "in"
temperature = "warm"   # a comment stays
[given]
warm = "-12 degC"
gap = "1/3"            # inches, since bare
third = "2.54 cm/3 + 1 mil"
n = "floor(1e3/7)"
drive = "sqrt(2)*0.7 A"
slope = "0.2 %/K"
odd = "3 kg*m/s^4"
[stock.tube]
like = "brass"
temperature_coefficient = "slope"
[[region]]
name = "coil"
material = "copper"
rect = { r = ["gap", "30 mm + third"], z = ["-gap", 'third*2 + 1 mil'] }
[[region]]
name = "tube"
material = "tube"
polygon = [[0, "gap/2"], ["gap / 2", 0.3], [0.1, "third - 2.5 cm"]]
[[winding]]
name = "main"
regions = ["coil"]
turns = ["n + 0.5"]
current = "drive"
wire = { awg = 24 }
"#;

#[test]
fn reading_it_again_gives_the_same_bits() {
    assert_repeats(COIL, &[]);
    assert_repeats(MANY, &[]);
    assert_repeats(
        MANY,
        &[
            "gap=0.1",
            "third=(1 + 1e-9)*7 mm",
            "warm=400 K",
            "n=round(2.4)*50",
        ],
    );
    assert_repeats(
        &and("[space]\nmirror = \"-outer/2 - 1 um\"\nmirror_currents = \"same\""),
        &["outer=29.7 mm"],
    );
}

#[test]
fn givens_are_gone_from_expressions_and_the_version_stands_in_it() {
    let case = read_text(COIL, &["outer=28 mm"]).expect("right");
    assert!(
        case.resolved_toml
            .starts_with(&format!("# Resolved by coilwright {}", env!("CARGO_PKG_VERSION")))
    );
    assert!(
        case.resolved_toml
            .contains("rect = { r = [20, \"0.028 m\"], z = [-5, 5] }"),
        "{}",
        case.resolved_toml
    );
    assert!(
        case.resolved_toml.contains("outer = \"0.028 m\""),
        "{}",
        case.resolved_toml
    );
    assert!(
        case.resolved_toml.contains("turns = 100.0"),
        "{}",
        case.resolved_toml
    );
}

proptest! {
    #[test]
    fn any_numbers_survive(outer in 20.1f64..1e4, n in 1.0f64..1e6, amps in -1e3f64..1e3) {
        let text = COIL.replace("\"1 A\"", "\"n*1 A/7 - 3*n*1 mA\"").replace("n = 100", &format!("n = {n}"));
        let text = text.replace("\"30 mm\"", &format!("\"{outer} mm*(1 + {amps}^2*1e-9)\""));
        assert_repeats(&text, &[]);
    }

    #[test]
    fn arbitrary_text_never_panics(text in any::<String>()) {
        let _ = read_text(&text, &[]);
    }

    #[test]
    fn a_case_with_pieces_cut_or_doubled_never_panics(from in 0usize..MANY.len(), to in 0usize..MANY.len(), at in 0usize..MANY.len()) {
        let (from, to) = (from.min(to), from.max(to));
        if MANY.is_char_boundary(from) && MANY.is_char_boundary(to) && MANY.is_char_boundary(at) {
            let cut = format!("{}{}", &MANY[..from], &MANY[to..]);
            let doubled = format!("{}{}{}", &MANY[..at], &MANY[from..to], &MANY[at..]);
            for text in [cut, doubled] {
                if let Err(faults) = read_text(&text, &[]) {
                    let _ = faults.render(super::LOOK);
                }
            }
        }
    }
}
