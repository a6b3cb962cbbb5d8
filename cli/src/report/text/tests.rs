use super::*;
use crate::report::json::Clock;
use crate::{caution, sample};

fn page() -> String {
    let (case, solution) = (sample::case(), sample::solution());
    let cautions = caution::all(&case, &solution);
    let clock = Clock {
        read_s: 0.01,
        output_s: 0.02,
        total_s: 0.7,
    };
    report(&case, &Report::of(&case, &solution, cautions, clock))
}

#[test]
fn shows_numbers_with_units_and_ranges() {
    let page = page();
    for line in [
        "  turns                  900 turns\n",
        "  main  12.3 mH  (12.2 .. 12.5)\n",
        "  mover plunger    -3.20 N  (-3.24 .. -3.16)\n",
        "    resistance             31 Ω\n",
        "  reached  0.31 %\n",
        "  given  gap = 1.5 mm\n",
    ] {
        assert!(page.contains(line), "{line:?} is missing in\n{page}");
    }
}

#[test]
fn has_no_number_without_a_unit_in_its_rows() {
    for line in page()
        .lines()
        .filter(|line| line.starts_with("  ") && line.contains(" .. "))
    {
        let before = line.split(" (").next().unwrap_or_default().trim_end();
        assert!(
            before.ends_with(|c: char| c.is_alphabetic() || "²³%Ω".contains(c)),
            "{line}"
        );
    }
}

#[test]
fn sections_without_content_are_left_out() {
    let page = page();
    assert!(!page.contains("Magnets"));
    assert!(page.contains("\nSearch coils\n------------\n"));
}

#[test]
fn lines_fit_the_width() {
    assert!(
        page().lines().all(|line| line.chars().count() <= 110),
        "{}",
        page()
    );
}

#[test]
fn names_the_files() {
    let text = files(&["a.out/field.vtu".into(), "a.out/report.json".into()]);
    assert_eq!(text, "\nFiles\n-----\n  a.out/field.vtu\n  a.out/report.json\n");
}
