//! The resolved case: the file's own text with every given replaced by its value.

use std::ops::Range;

use super::source::SourceText;
use super::values::Values;

/// The text of `source` in which each given's text, and each expression that uses givens, is its SI value. What
/// uses no given stays as it was written, comments too.
pub fn write(source: &SourceText, values: &Values) -> String {
    let mut replacements: Vec<(Range<usize>, String)> = values
        .givens
        .replacements()
        .chain(values.replacements.iter().cloned())
        .collect();
    replacements.sort_by_key(|(span, _)| span.start);
    replacements.dedup_by_key(|(span, _)| span.start);
    let mut text = format!(
        "# Resolved by coilwright {} from {}: every given is replaced by its value in SI units.\n",
        env!("CARGO_PKG_VERSION"),
        one_line(&source.name)
    );
    let mut at = 0;
    for (span, value) in replacements {
        text.push_str(source.text.get(at..span.start).unwrap_or_default());
        text.push_str(&value);
        at = span.end;
    }
    text.push_str(source.text.get(at..).unwrap_or_default());
    text
}

/// A name without what would end a comment.
fn one_line(name: &str) -> String {
    name.chars()
        .map(|c| if c.is_control() { ' ' } else { c })
        .collect()
}
