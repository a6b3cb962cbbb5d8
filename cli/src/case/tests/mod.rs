//! Whole cases from text: what they become, and what is said of wrong ones.

mod bad;
mod form;
mod givens;
mod magnetic_laws;
mod parts;
mod resolved;
mod schema;
mod travel;

use super::{Case, Fault, Faults, Look, Source, read};

/// A small coil, right in all its parts.
pub const COIL: &str = r#"title = "coil"

[given]
outer = "30 mm"
n = 100

[[region]]
name = "coil"
material = "copper"
rect = { r = [20, "outer"], z = [-5, 5] }

[[winding]]
name = "main"
regions = ["coil"]
turns = "n"
current = "1 A"
wire = { diameter = "0.5 mm", outside = "0.56 mm" }
"#;

/// Reads a text as `case.toml`.
pub fn read_text(text: &str, sets: &[&str]) -> Result<Case, Faults> {
    let sets: Vec<String> = sets.iter().map(|set| (*set).to_owned()).collect();
    let source = Source::Text {
        name: "case.toml".to_owned(),
        text: text.to_owned(),
        folder: "no-such-folder".into(),
    };
    read(&source, &sets)
}

/// A text that must be right.
pub fn good(text: &str) -> Case {
    read_text(text, &[]).unwrap_or_else(|faults| panic!("{}", faults.render(LOOK)))
}

/// The faults of a text that must be wrong.
pub fn faults(text: &str) -> Vec<Fault> {
    match read_text(text, &[]) {
        Ok(_) => panic!("this was read without a fault:\n{text}"),
        Err(faults) => faults.list,
    }
}

/// How tests draw faults.
pub const LOOK: Look = Look {
    colour: false,
    unicode: false,
    width: 100,
};

/// The coil with one piece replaced.
pub fn with(piece: &str, replacement: &str) -> String {
    assert!(COIL.contains(piece), "{piece}");
    COIL.replacen(piece, replacement, 1)
}

/// The coil with more lines.
pub fn and(lines: &str) -> String {
    format!("{COIL}\n{lines}\n")
}

/// Asserts that a text, in which `»` marks the place, has one fault there with these words in message or help.
pub fn refused(marked: &str, words: &[&str]) {
    let (before, after) = marked.split_once('»').expect("a mark");
    let line = before.matches('\n').count() + 1;
    let column = before.rsplit('\n').next().map_or(0, |tail| tail.chars().count()) + 1;
    let found = faults(&format!("{before}{after}"));
    let all = Faults { list: found.clone() }.render(LOOK);
    assert_eq!(found.len(), 1, "{all}");
    assert_eq!(found[0].line_column(), Some((line, column)), "{all}");
    assert!(all.contains(&format!("case.toml:{line}:{column}")), "{all}");
    let said = format!(
        "{} {}",
        found[0].message,
        found[0].help.clone().unwrap_or_default()
    );
    for word in words {
        assert!(said.contains(word), "wanted `{word}` in: {said}");
    }
}
