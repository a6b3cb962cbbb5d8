use proptest::prelude::*;

use super::*;

struct Given;

impl Names for Given {
    fn value(&self, name: &str, span: Range<usize>) -> Result<Value, Stop> {
        match name {
            "gap" => Ok(Value {
                si: 1.5e-3,
                dimension: Dimension::LENGTH,
                absolute: false,
            }),
            "n" => Ok(Value::number(3.0)),
            _ => Err(Stop::Fault(ExpressionFault::new("no such given", span))),
        }
    }
}

fn value(text: &str) -> Value {
    Expression::parse(text)
        .map_err(Stop::Fault)
        .and_then(|e| e.evaluate(&Given))
        .unwrap_or_else(|e| panic!("{text}: {e:?}"))
}

fn si(text: &str) -> f64 {
    value(text).si
}

fn fault(text: &str) -> ExpressionFault {
    match Expression::parse(text)
        .map_err(Stop::Fault)
        .and_then(|e| e.evaluate(&Given))
    {
        Err(Stop::Fault(fault)) => fault,
        other => panic!("{text}: {other:?}"),
    }
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 4.0 * f64::EPSILON * b.abs()
}

#[test]
fn a_number_and_its_unit_bind_tightest() {
    assert!(close(si("2 mm^2"), 2e-6));
    assert!(close(si("1/2 mm"), 500.0));
    assert_eq!(value("1/2 mm").dimension, Dimension::of(-1, 0, 0, 0, 0));
    assert!(close(si("2 mm^2^2"), 4e-12));
    assert!(close(si("400 A/m"), 400.0));
    assert!(close(si("4 A/mm^2"), 4e6));
    assert!(close(si("2 m^-1"), 2.0));
}

#[test]
fn signs_and_powers_follow_the_grammar() {
    assert_eq!(si("2^3^2"), 512.0);
    assert_eq!(si("-2^2"), -4.0);
    assert_eq!(si("2^-1"), 0.5);
    assert_eq!(si("2*-3"), -6.0);
    assert_eq!(si("8/2/2"), 2.0);
    assert_eq!(si("1 - 2 - 3"), -4.0);
    assert_eq!(si("(1 + 2)*3"), 9.0);
    assert_eq!(si("2^(-n)"), 0.125);
    assert_eq!(si("-n^2"), -9.0);
}

#[test]
fn units_have_their_si_values() {
    for (text, expected) in [
        ("2.5 mm", 2.5e-3),
        ("1 in", 0.0254),
        ("1 mil", 2.54e-5),
        ("10 min", 600.0),
        ("3 kg", 3.0),
        ("58.0 MS/m", 58.0e6),
        ("100 nF", 1e-7),
        ("60 rpm", 1.0),
        ("5 %", 0.05),
        ("180 deg", std::f64::consts::PI),
        ("1 G", 1e-4),
        ("1 Oe", 1000.0 / (4.0 * std::f64::consts::PI)),
        ("1 lbf", 4.448_221_615_260_5),
        ("1 kgf", 9.80665),
        ("7 µm", 7e-6),
        ("20 degC", 293.15),
        ("-2 degC", 271.15),
        ("85 kHz", 85e3),
        ("2 daN", 20.0),
        ("1 kohm", 1e3),
        ("0.5 mWb", 5e-4),
    ] {
        assert!(
            close(si(text), expected),
            "{text}: {} is not {expected}",
            si(text)
        );
    }
}

#[test]
fn a_prefixed_value_is_its_si_value_to_the_last_digit() {
    for (text, expected) in [
        ("2.5 mm", 0.0025f64),
        ("0.28 mm", 0.00028),
        ("1.1 um", 1.1e-6),
        ("37 mm^2", 37e-6),
    ] {
        assert!((si(text) - expected).abs() <= f64::EPSILON * expected, "{text}");
    }
}

#[test]
fn temperatures_in_degc_are_absolute() {
    assert_eq!(si("20 degC - 2 degC"), 18.0);
    assert!(!value("20 degC - 2 degC").absolute);
    assert!(close(si("20 degC + 5 K"), 298.15));
    assert!(
        fault("20 degC + 5 degC")
            .message
            .contains("write the difference in K")
    );
    assert!(fault("2*20 degC").message.contains("degC"));
    assert!(fault("0.004/degC").message.contains("degC needs a number"));
}

#[test]
fn functions_and_constants() {
    assert!(close(si("sqrt(4 mm^2)"), 2e-3));
    assert!(close(si("max(gap, 2 mm)"), 2e-3));
    assert!(close(si("min(gap, 2 mm)"), 1.5e-3));
    assert!(close(si("sin(30 deg)"), 0.5));
    assert!(close(si("ln(exp(2))"), 2.0));
    assert!(close(si("2*pi"), std::f64::consts::TAU));
    assert_eq!(value("mu0").dimension, Dimension::of(1, 1, -2, -2, 0));
    assert_eq!(
        si("round(2.4) + floor(2.9) + ceil(2.1) + abs(-1) + log10(100)"),
        10.0
    );
    assert!(close(si("2*min"), 120.0), "`min` without brackets is a minute");
}

#[test]
fn wrong_dimensions_are_named_and_marked() {
    let found = fault("3 mm + 1 A");
    assert_eq!(found.message, "a current cannot be added to a length");
    assert_eq!(found.span, 5..10);
    assert!(
        fault("sin(gap)")
            .message
            .contains("takes a pure number, but this is a length")
    );
    assert!(fault("2^gap").message.contains("exponent must be a pure number"));
    assert!(
        fault("max(gap, n)")
            .message
            .contains("compares a length with a pure number")
    );
}

#[test]
fn mistakes_are_marked_at_their_token() {
    for (text, words, span) in [
        ("2 milimetre", "is not a unit", 2..11),
        ("2 3", "a sign is missing", 2..3),
        ("2 gap", "is not a unit", 2..5),
        ("(2", "never closed", 0..1),
        ("2)", "never opened", 1..2),
        ("2 +", "ends where a value is missing", 3..3),
        ("* 2", "stands where a value is missing", 0..1),
        ("2 ** 3", "`**` means nothing", 3..4),
        ("2 $", "means nothing", 2..3),
        ("sqrt 2", "needs brackets", 0..4),
        ("gap(2)", "not a function", 0..3),
        ("1/0", "division by zero", 2..3),
        ("ln(-1)", "no real value", 0..6),
        ("exp(1e9)", "too large", 0..8),
        ("1e999", "too large", 0..5),
        ("2 mm^n", "whole number", 5..6),
        ("atan(1, 2)", "takes one value", 0..10),
        ("", "empty", 0..0),
        ("  ", "empty", 0..2),
    ] {
        let found = fault(text);
        assert!(found.message.contains(words), "{text}: {}", found.message);
        assert_eq!(found.span, span, "{text}: {}", found.message);
    }
}

#[test]
fn deep_nesting_ends_in_a_message() {
    for text in [
        format!("{}1{}", "(".repeat(10_000), ")".repeat(10_000)),
        format!("{}1", "-".repeat(10_000)),
        vec!["2"; 10_000].join("^"),
        format!("{}1{}", "sqrt(".repeat(10_000), ")".repeat(10_000)),
        "(".repeat(10_000),
    ] {
        assert!(
            fault(&text).message.contains("nested more than"),
            "{}",
            &text[..20]
        );
    }
}

#[test]
fn a_long_sum_is_not_a_deep_one() {
    assert_eq!(si(&vec!["1"; 100_000].join("+")), 100_000.0);
    assert_eq!(si(&vec!["1"; 100_000].join("*")), 1.0);
}

#[test]
fn si_values_are_written_so_that_they_read_the_same() {
    for text in [
        "gap",
        "20 degC",
        "0.393 %/K",
        "2 mm^2",
        "7.3 lbf",
        "n",
        "1/3",
        "58 MS/m",
        "2 kg*m/s^4",
        "3 uF*V/m^5",
    ] {
        let first = value(text);
        let again = value(&write_si(first.si, first.dimension));
        assert_eq!((again.si, again.dimension), (first.si, first.dimension), "{text}");
    }
}

proptest! {
    #[test]
    fn arbitrary_text_never_panics(text in any::<String>()) {
        if let Ok(expression) = Expression::parse(&text) {
            let _ = expression.evaluate(&Given);
        }
    }

    #[test]
    fn text_of_likely_pieces_never_panics_and_spans_lie_within(
        pieces in prop::collection::vec(prop::sample::select(vec![
            "1", "2.5", "1e3", "mm", "degC", "gap", "n", "(", ")", "+", "-", "*", "/", "^", ",", "sqrt", "min", "pi",
            "%", " ", "µ", "Ω", "0", "e", "E9", ".", "A",
        ]), 0..40)
    ) {
        let text = pieces.concat();
        match Expression::parse(&text).map_err(Stop::Fault).and_then(|e| e.evaluate(&Given)) {
            Ok(value) => prop_assert!(value.si.is_finite()),
            Err(Stop::Fault(fault)) => {
                prop_assert!(fault.span.end <= text.len() && fault.span.start <= fault.span.end);
                prop_assert!(text.is_char_boundary(fault.span.start) && text.is_char_boundary(fault.span.end));
            }
            Err(Stop::SaidAlready) => prop_assert!(false, "no given was wrong"),
        }
    }

    #[test]
    fn written_si_values_read_back_to_the_same_bits(
        si in prop::num::f64::NORMAL, m in -4i32..5, kg in -2i32..3, s in -4i32..5, a in -2i32..3, k in -1i32..2
    ) {
        let dimension = Dimension::of(m, kg, s, a, k);
        let text = write_si(si, dimension);
        let again = value(&text);
        prop_assert_eq!(again.si.to_bits(), si.to_bits(), "{}", text);
        prop_assert_eq!(again.dimension, dimension, "{}", text);
    }
}
