//! TOML's own faults, nesting, and how faults are drawn.

use super::{COIL, LOOK, and, faults, read_text, refused, with};
use crate::case::{Faults, Look};

#[test]
fn broken_toml_is_placed_and_quotes_are_suggested() {
    let found = faults(&with("\"1 A\"", "1 A"));
    assert_eq!(
        found[0].line_column().map(|(line, _)| line),
        Some(16),
        "{found:?}"
    );
    assert!(
        found[0]
            .help
            .as_deref()
            .is_some_and(|help| help.contains("in quotes")),
        "{found:?}"
    );
}

#[test]
fn nesting_without_end_is_refused_without_harm() {
    for deep in [
        format!("x = {}{}", "[".repeat(10_000), "]".repeat(10_000)),
        format!("x = {}", "[".repeat(100_000)),
        format!("x = {}1{}", "{ a = ".repeat(10_000), " }".repeat(10_000)),
        format!("{} = 1", vec!["a"; 100_000].join(".")),
        format!("[{}]", vec!["a"; 100_000].join(" . ")),
    ] {
        let found = faults(&and(&deep));
        assert!(!found.is_empty());
        assert!(Faults { list: found }.render(LOOK).len() < 20_000);
    }
    let deep = format!("\"{}1 mm{}\"", "(".repeat(10_000), ")".repeat(10_000));
    let found = faults(&with("\"30 mm\"", &deep));
    assert!(found[0].message.contains("nested more than 64 deep"), "{found:?}");
    assert_eq!(found[0].line_column(), Some((4, 10 + 65)));
}

#[test]
fn a_long_chain_of_givens_is_no_deep_one() {
    let mut chain = String::from("[given]\nx0 = \"1 mm\"\n");
    for link in 1..50_000 {
        chain.push_str(&format!("x{link} = \"x{}\"\n", link - 1));
    }
    assert!(read_text(&COIL.replace("[given]\n", &chain), &[]).is_ok());
}

#[test]
fn required_keys_and_kinds_of_value_are_checked() {
    refused(
        &with("name = \"coil\"\n", "").replace("[[region]]", "»[[region]]"),
        &["[[region]] needs the key `name`"],
    );
    refused(
        &with("[\"coil\"]", "»\"coil\""),
        &["expects a list", "[\"coil\"]"],
    );
    refused(
        &with("\"copper\"", "»3"),
        &["`material` expects text in quotes, not a number"],
    );
    refused(
        &with("z = [-5, 5]", "z = »[-5, 5, 6]"),
        &["list of 2 values, not of 3"],
    );
    refused(&with("title = \"coil\"", "title = »1979-05-27"), &["not a date"]);
    let one_bracket = and("[search_coil]\nname = \"s\"\nat = [1, 1]");
    let found = faults(&one_bracket);
    assert!(
        found[0]
            .help
            .as_deref()
            .is_some_and(|help| help.contains("[[search_coil]]")),
        "{found:?}"
    );
}

#[test]
fn several_faults_come_in_the_order_of_the_text() {
    let text = with("\"copper\"", "\"coper\"")
        .replace("30 mm", "30 mn")
        .replace("0.56 mm", "0.56 V");
    let lines: Vec<usize> = faults(&text)
        .iter()
        .filter_map(|fault| fault.line_column())
        .map(|(line, _)| line)
        .collect();
    assert_eq!(lines, [4, 9, 17]);
}

#[test]
fn faults_are_drawn_with_and_without_line_drawing() {
    let list = faults(&with("\"1 A\"", "\"5 mm\""));
    let plain = Faults { list: list.clone() }.render(LOOK);
    assert!(plain.is_ascii(), "{plain}");
    assert!(
        plain.contains("case.toml:16:11") && plain.contains("current = \"5 mm\""),
        "{plain}"
    );
    let coloured = Faults { list: list.clone() }.render(Look {
        colour: true,
        unicode: true,
        width: 100,
    });
    assert!(
        coloured.contains('\u{1b}') && coloured.contains('│'),
        "{coloured}"
    );
    let fancy = Faults { list }.render(Look {
        colour: false,
        unicode: true,
        width: 100,
    });
    assert!(!fancy.contains('\u{1b}'), "{fancy}");
}

#[test]
fn a_fault_in_a_long_line_is_drawn_with_its_surroundings_only() {
    let long = format!("z = [-5, \"{} + 1 A\"]", vec!["1 mm"; 5_000].join(" + "));
    let drawn = Faults {
        list: faults(&with("z = [-5, 5]", &long)),
    }
    .render(LOOK);
    assert!(drawn.len() < 1_000 && drawn.contains("+ 1 A"), "{drawn}");
}

#[test]
fn an_empty_text_says_what_a_case_needs() {
    let found = faults("");
    assert!(found[0].message.contains("at least one [[region]]"), "{found:?}");
    let _ = Faults { list: found }.render(LOOK);
}

#[test]
fn windows_line_ends_and_a_byte_order_mark_are_read() {
    assert!(read_text(&COIL.replace('\n', "\r\n"), &[]).is_ok());
    assert!(read_text(&format!("\u{feff}{COIL}"), &[]).is_ok());
    refused(
        &with("\"copper\"", "»\"coper\"").replace('\n', "\r\n"),
        &["coper"],
    );
}

#[test]
fn escapes_in_an_expression_do_not_shift_the_mark() {
    refused(&with("\"1 A\"", "»\"1 \\u0041mp\""), &["`Amp`"]);
    refused(&with("\"1 A\"", "'1 »Amp'"), &["`Amp`"]);
    refused(&with("\"1 A\"", "\"\"\"\n1 »Amp\"\"\""), &["`Amp`"]);
}
