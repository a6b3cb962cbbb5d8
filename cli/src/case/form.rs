//! Checks the form of a case against its schema: unknown keys, missing keys, kinds of value. All at once.

use std::ops::Range;
use std::sync::Arc;

use serde_json::Value as Json;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::fault::{Fault, Place};
use super::nearest::{known_names_help, nearest};
use super::source::SourceText;

/// Most unknown keys that are told one by one.
const MOST_FAULTS: usize = 1000;

/// What the check of the form found.
pub struct Findings {
    /// All faults.
    pub faults: Vec<Fault>,
    /// Whether, with the unknown keys gone, the table still has the form of a case.
    pub readable: bool,
}

/// Checks `table` against the case's schema and removes the keys that it does not know.
pub fn check(table: &mut Spanned<DeTable<'_>>, schema: &Json, source: &Arc<SourceText>) -> Findings {
    let span = 0..source.text.len().min(1);
    let mut form = Form {
        schema,
        source,
        findings: Findings {
            faults: Vec::new(),
            readable: true,
        },
    };
    form.table(
        table.get_mut(),
        schema,
        &Spot {
            name: "the case".to_owned(),
            span,
        },
    );
    form.findings
}

struct Form<'a> {
    schema: &'a Json,
    source: &'a Arc<SourceText>,
    findings: Findings,
}

/// What is being checked, for messages.
struct Spot {
    /// `[[region]]`, `` `wire` ``.
    name: String,
    span: Range<usize>,
}

impl<'a> Form<'a> {
    fn fault(&mut self, span: Range<usize>, message: String, help: Option<String>) {
        let mut fault = Fault::new(
            message,
            Place {
                source: self.source.clone(),
                span,
            },
        );
        fault.help = help;
        self.findings.faults.push(fault);
    }

    /// The schema behind a reference.
    fn resolved(&self, schema: &'a Json) -> &'a Json {
        match schema
            .get("$ref")
            .and_then(Json::as_str)
            .and_then(|path| path.strip_prefix('#'))
        {
            Some(pointer) => self.schema.pointer(pointer).unwrap_or(schema),
            None => schema,
        }
    }

    fn table(&mut self, table: &mut DeTable<'_>, schema: &'a Json, spot: &Spot) {
        let known = schema.get("properties").and_then(Json::as_object);
        let others = schema.get("additionalProperties");
        if others == Some(&Json::Bool(false)) {
            self.drop_unknown(table, known, spot);
        }
        let required = schema
            .get("required")
            .and_then(Json::as_array)
            .into_iter()
            .flatten();
        for key in required.filter_map(Json::as_str) {
            if !table.contains_key(key) {
                self.findings.readable = false;
                self.fault(
                    spot.span.clone(),
                    format!("{} needs the key `{key}`", spot.name),
                    None,
                );
            }
        }
        for (key, value) in table.iter_mut() {
            let name = key.get_ref();
            let inner = known
                .and_then(|known| known.get(name.as_ref()))
                .or(others.filter(|other| other.is_object()));
            if let Some(inner) = inner {
                self.value(value, inner, name);
            }
        }
    }

    /// Reports and removes keys that the table may not have.
    fn drop_unknown(
        &mut self,
        table: &mut DeTable<'_>,
        known: Option<&'a serde_json::Map<String, Json>>,
        spot: &Spot,
    ) {
        let names: Vec<&str> = known
            .into_iter()
            .flat_map(|known| known.keys())
            .map(String::as_str)
            .collect();
        let unknown: Vec<(String, Range<usize>)> = table
            .iter()
            .filter(|(key, _)| !names.contains(&key.get_ref().as_ref()))
            .map(|(key, _)| (key.get_ref().to_string(), key.span()))
            .collect();
        for (key, span) in unknown {
            table.remove(key.as_str());
            if self.findings.faults.len() >= MOST_FAULTS {
                continue;
            }
            let help = match nearest(&key, names.iter().copied()) {
                Some(near) => format!("did you mean `{near}`?"),
                None => format!("its keys are {}", names.join(", ")),
            };
            self.fault(span, format!("{} has no key `{key}`", spot.name), Some(help));
        }
    }

    fn value(&mut self, value: &mut Spanned<DeValue<'_>>, schema: &'a Json, key: &str) {
        let schema = self.resolved(schema);
        let span = value.span();
        if let Some(words) = words_allowed(schema) {
            self.word(value, &words, key);
            return;
        }
        let choices = self.choices(schema);
        let fitting = choices
            .iter()
            .copied()
            .find(|choice| fits(value.get_ref(), choice));
        let Some(fitting) = fitting else {
            self.findings.readable = false;
            let expected: Vec<String> = choices.iter().map(|choice| describe(choice)).collect();
            let message = format!(
                "`{key}` expects {}, not {}",
                expected.join(" or "),
                what_it_is(value.get_ref())
            );
            self.fault(span, message, bracket_help(value.get_ref(), &choices, key));
            return;
        };
        match value.get_mut() {
            DeValue::Table(table) => self.table(
                table,
                fitting,
                &Spot {
                    name: format!("`{key}`"),
                    span,
                },
            ),
            DeValue::Array(items) => {
                self.check_length(items.len(), fitting, &span, key);
                let Some(inner) = fitting.get("items") else { return };
                let inner_schema = self.resolved(inner);
                for item in items.iter_mut() {
                    let span = item.span();
                    match item.get_mut() {
                        DeValue::Table(table) if inner_schema.get("properties").is_some() => {
                            let name = if self.is_header(&span) {
                                format!("[[{key}]]")
                            } else {
                                format!("`{key}`")
                            };
                            self.table(table, inner_schema, &Spot { name, span });
                        }
                        _ => self.value(item, inner, key),
                    }
                }
            }
            _ => {}
        }
    }

    /// Whether the table at `span` stands under a `[[header]]`.
    fn is_header(&self, span: &Range<usize>) -> bool {
        self.source
            .text
            .get(span.clone())
            .is_some_and(|text| text.starts_with('['))
    }

    /// Alternatives of a schema, each resolved.
    fn choices(&self, schema: &'a Json) -> Vec<&'a Json> {
        match schema.get("anyOf").and_then(Json::as_array) {
            Some(choices) => choices.iter().map(|choice| self.resolved(choice)).collect(),
            None => vec![schema],
        }
    }

    fn check_length(&mut self, length: usize, schema: &Json, span: &Range<usize>, key: &str) {
        let bound = |name: &str| schema.get(name).and_then(Json::as_u64);
        let (least, most) = (bound("minItems"), bound("maxItems"));
        let length = length as u64;
        if least.is_some_and(|least| length < least) || most.is_some_and(|most| length > most) {
            self.findings.readable = false;
            let wanted = match (least, most) {
                (Some(least), Some(most)) if least == most => format!("{least} values"),
                (Some(least), _) => format!("at least {least} value"),
                _ => "fewer values".to_owned(),
            };
            self.fault(
                span.clone(),
                format!("`{key}` expects a list of {wanted}, not of {length}"),
                None,
            );
        }
    }

    /// Checks one of several listed words.
    fn word(&mut self, value: &Spanned<DeValue<'_>>, words: &[&str], key: &str) {
        let listed: Vec<String> = words.iter().map(|word| format!("\"{word}\"")).collect();
        let listed = listed.join(" or ");
        match value.get_ref() {
            DeValue::String(text) if words.contains(&text.as_ref()) => {}
            DeValue::String(text) => {
                self.findings.readable = false;
                let help = known_names_help(text, words.iter().copied(), "words");
                self.fault(value.span(), format!("`{key}` cannot be \"{text}\""), Some(help));
            }
            other => {
                self.findings.readable = false;
                let message = format!("`{key}` expects {listed}, not {}", what_it_is(other));
                self.fault(value.span(), message, None);
            }
        }
    }
}

/// The listed words, where the schema lists words.
fn words_allowed(schema: &Json) -> Option<Vec<&str>> {
    if let Some(words) = schema.get("enum").and_then(Json::as_array) {
        return words.iter().map(Json::as_str).collect();
    }
    let choices = schema.get("oneOf").and_then(Json::as_array)?;
    choices
        .iter()
        .map(|choice| choice.get("const").and_then(Json::as_str))
        .collect()
}

/// Names of the JSON types that a schema allows.
fn types(schema: &Json) -> Vec<&str> {
    match schema.get("type") {
        Some(Json::String(name)) => vec![name],
        Some(Json::Array(names)) => names.iter().filter_map(Json::as_str).collect(),
        _ => Vec::new(),
    }
}

fn fits(value: &DeValue<'_>, schema: &Json) -> bool {
    let name = match value {
        DeValue::String(_) => "string",
        DeValue::Integer(_) | DeValue::Float(_) => "number",
        DeValue::Boolean(_) => "boolean",
        DeValue::Array(_) => "array",
        DeValue::Table(_) => "object",
        DeValue::Datetime(_) => return false,
    };
    types(schema).contains(&name)
}

fn describe(schema: &Json) -> String {
    match types(schema).as_slice() {
        ["number", "string"] => "a number or an expression in quotes".to_owned(),
        ["string"] => "text in quotes".to_owned(),
        ["boolean"] => "true or false".to_owned(),
        ["array"] => "a list [ ... ]".to_owned(),
        ["object"] => match schema.get("properties").and_then(Json::as_object) {
            Some(keys) => format!(
                "a table {{ {} }}",
                keys.keys().map(String::as_str).collect::<Vec<_>>().join(", ")
            ),
            None => "a table".to_owned(),
        },
        other => other.join(" or "),
    }
}

fn what_it_is(value: &DeValue<'_>) -> &'static str {
    match value {
        DeValue::String(_) => "text",
        DeValue::Integer(_) | DeValue::Float(_) => "a number",
        DeValue::Boolean(_) => "true or false",
        DeValue::Datetime(_) => "a date",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a table",
    }
}

/// The commonest slip of TOML: one pair of brackets for a list of tables, or two for a table.
fn bracket_help(value: &DeValue<'_>, choices: &[&Json], key: &str) -> Option<String> {
    let wants = |name: &str| choices.iter().any(|choice| types(choice).contains(&name));
    match value {
        DeValue::Table(_) if wants("array") => {
            Some(format!("its header has two brackets on each side: [[{key}]]"))
        }
        DeValue::Array(items) if wants("object") && items.iter().all(|item| item.get_ref().is_table()) => {
            Some(format!("there is only one: [{key}]"))
        }
        DeValue::String(text) if wants("array") && !wants("string") => {
            Some(format!("in brackets: [\"{text}\"]"))
        }
        _ => None,
    }
}
