//! Text to the mirror of the case file: TOML's own rules, then the form, then the types.

use std::sync::Arc;

use serde::Deserialize;
use toml::de::DeTable;

use super::fault::{Fault, Place};
use super::form;
use super::model::CaseFile;
use super::source::SourceText;

/// Most names that dots may join: each is a table within a table, and tables nested without end have no use.
const MOST_DOTS: usize = 500;

/// Most faults of TOML that are told: after the first few, the rest tend to follow from them.
const MOST_FAULTS: usize = 100;
/// Bytes of a line that are searched for a likely slip.
const LOOKED_AT: usize = 200;

/// Reads the text as a case file.
///
/// # Errors
/// All faults of TOML, or all faults of the form. With unknown keys only, the file is read without them and the
/// faults come along.
pub fn parse(source: &Arc<SourceText>) -> Result<(CaseFile, Vec<Fault>), Vec<Fault>> {
    if let Some(at) = endless_dots(&source.text) {
        let place = Place {
            source: source.clone(),
            span: at..at + 1,
        };
        return Err(vec![Fault::new(
            format!("more than {MOST_DOTS} names are joined by dots here"),
            place,
        )]);
    }
    let (mut table, errors) = DeTable::parse_recoverable(&source.text);
    if !errors.is_empty() {
        return Err(errors
            .iter()
            .take(MOST_FAULTS)
            .map(|error| toml_fault(error, source))
            .collect());
    }
    let findings = form::check(&mut table, &super::schema(), source);
    if !findings.readable {
        return Err(findings.faults);
    }
    match CaseFile::deserialize(toml::de::Deserializer::from(table)) {
        Ok(file) => Ok((file, findings.faults)),
        Err(error) => {
            let mut faults = findings.faults;
            faults.push(toml_fault(&error, source));
            Err(faults)
        }
    }
}

/// A fault from what the TOML library says.
fn toml_fault(error: &toml::de::Error, source: &Arc<SourceText>) -> Fault {
    let message = error.message().lines().collect::<Vec<_>>().join(", ");
    let message = if message.contains("recursion depth") {
        "lists or tables are nested too deep here".to_owned()
    } else {
        format!("not TOML: {message}")
    };
    let span = error.span().unwrap_or(0..0);
    let fault = Fault::new(
        message,
        Place {
            source: source.clone(),
            span: span.clone(),
        },
    );
    match slip(&source.text, span.start) {
        Some(help) => fault.with_help(help),
        None => fault,
    }
}

/// A likely slip at a place that TOML does not understand.
fn slip(text: &str, at: usize) -> Option<&'static str> {
    let looked_at = text.get(at.saturating_sub(LOOKED_AT)..at)?;
    let line_start = looked_at
        .rfind('\n')
        .map_or(at - looked_at.len(), |newline| at - looked_at.len() + newline + 1);
    let line = text.get(line_start..)?.lines().next()?;
    let (_, value) = line.split_once('=')?;
    let value = value.trim_start();
    let bare =
        value.starts_with(|c: char| c.is_ascii_digit() || c == '-' || c == '.') && !value.contains('"');
    (bare && value.contains(|c: char| c.is_alphabetic()))
        .then_some("values with units are in quotes: \"2.5 mm\"")
}

/// Where a run of dotted names is longer than any case has. The parser nests a table for each, without limit.
fn endless_dots(text: &str) -> Option<usize> {
    let mut dots = 0;
    for (at, byte) in text.bytes().enumerate() {
        match byte {
            b'.' => {
                dots += 1;
                if dots > MOST_DOTS {
                    return Some(at);
                }
            }
            b'=' | b',' | b'\n' | b'\r' | b'[' | b']' | b'{' | b'}' => dots = 0,
            _ => {}
        }
    }
    None
}
