//! `docs/report.md`, made from the comments of the report's types so that the two cannot differ.

use serde_json::Value;

use super::Report;

/// What stands before the table.
const HEAD: &str = "# The report `report.json`

Made from `cli/src/report/json.rs`; do not edit (`COILWRIGHT_WRITE_DOCS=1 cargo test -p coilwright docs` makes it anew).

One shape for all regimes, in SI units. A *number* is an object with four keys:

| key | meaning |
|---|---|
";

/// What stands between them.
const MIDDLE: &str = "
What does not apply is absent: there is no null and no NaN. Places and settings, which the case fixes, are plain values. NAME
stands for a name from the case, A and B for names of windings, [] for each entry of a list. With jq:

    coilwright solve valve.toml --json | jq .results[0].inductance_h.main.main.value

A mover with `travel` gives one entry of `results` per place, and `[linkage]` the block `linkage`. The pull curve:

    coilwright solve valve.toml --json | jq -r '.results[] | [.at.travel_m, .movers.plunger.force_n.value] | @tsv'

Into a folder they are also written as `travel-NAME.csv` and `linkage-NAME.csv`, with low and high in the columns after each
number, and as plots, `travel-NAME.svg` and `linkage-NAME.svg`.

| path | kind | unit | meaning |
|---|---|---|---|
";

/// Units by the ending of a key, longest first where one ends with another.
const UNITS: [(&str, &str); 20] = [
    ("_a_per_m2", "A/m²"),
    ("_a_per_m", "A/m"),
    ("_am2", "A m²"),
    ("_ohm", "ohm"),
    ("_deg", "degree"),
    ("_wb", "Wb"),
    ("_kg", "kg"),
    ("_m3", "m³"),
    ("_m2", "m²"),
    ("_hz", "Hz"),
    ("_m", "m"),
    ("_h", "H"),
    ("_a", "A"),
    ("_v", "V"),
    ("_w", "W"),
    ("_s", "s"),
    ("_t", "T"),
    ("_n", "N"),
    ("_j", "J"),
    ("_k", "K"),
];

/// The document.
fn document() -> String {
    let schema = serde_json::to_value(schemars::schema_for!(Report)).unwrap();
    let number = resolved(&schema, &schema["$defs"]["Number"]);
    let mut text = HEAD.to_owned();
    for (key, property) in number["properties"].as_object().unwrap() {
        text.push_str(&format!("| `{key}` | {} |\n", described(property)));
    }
    text.push_str(MIDDLE);
    walk(&schema, &schema, String::new(), "", &mut text);
    text
}

/// Follows a reference; looks through the alternatives of an optional value.
fn resolved<'a>(schema: &'a Value, of: &'a Value) -> &'a Value {
    if let Some(path) = of.get("$ref").and_then(Value::as_str) {
        return resolved(schema, schema.pointer(path.trim_start_matches('#')).unwrap());
    }
    match of.get("anyOf").and_then(Value::as_array) {
        Some(any) => resolved(
            schema,
            any.iter()
                .find(|one| one.get("type") != Some(&"null".into()))
                .unwrap(),
        ),
        None => of,
    }
}

fn described(property: &Value) -> String {
    property["description"]
        .as_str()
        .unwrap_or_default()
        .split_whitespace()
        .collect::<Vec<_>>()
        .join(" ")
}

/// Adds a line for each key under `path`.
fn walk(schema: &Value, of: &Value, path: String, unit: &str, text: &mut String) {
    let of = resolved(schema, of);
    for (key, property) in of
        .get("properties")
        .and_then(Value::as_object)
        .into_iter()
        .flatten()
    {
        let unit = match UNITS.iter().find(|(ending, _)| key.ends_with(ending)) {
            Some((_, unit)) => unit,
            None if unit == "s" => "s",
            None => "",
        };
        let path = format!("{path}.{key}");
        line(schema, property, &path, unit, &described(property), text);
    }
}

fn line(schema: &Value, property: &Value, path: &str, unit: &str, meaning: &str, text: &mut String) {
    let of = resolved(schema, property);
    if let Some(each) = of.get("additionalProperties").filter(|each| each.is_object()) {
        let inner = resolved(schema, each);
        if let Some(number) = inner.get("additionalProperties").filter(|each| each.is_object()) {
            return line(schema, number, &format!("{path}.A.B"), unit, meaning, text);
        }
        text.push_str(&format!("| `{path}` | by name | | {meaning} |\n"));
        return match inner.get("items") {
            Some(items) => walk(schema, items, format!("{path}.NAME[]"), unit, text),
            None => walk(schema, inner, format!("{path}.NAME"), unit, text),
        };
    }
    if of
        .get("properties")
        .is_some_and(|properties| properties.get("bound").is_some())
    {
        text.push_str(&format!("| `{path}` | number | {unit} | {meaning} |\n"));
        return;
    }
    let kind = match of["type"].as_str() {
        Some("array") => "list",
        Some("object") => "object",
        Some("string") => "text",
        Some("boolean") => "true or false",
        Some("integer") => "whole value",
        Some("number") => "value",
        _ => of["type"]
            .as_array()
            .and_then(|kinds| kinds.first())
            .and_then(Value::as_str)
            .map_or("value", |kind| match kind {
                "string" => "text",
                _ => "value",
            }),
    };
    text.push_str(&format!("| `{path}` | {kind} | {unit} | {meaning} |\n"));
    match of.get("items") {
        Some(items) => walk(schema, items, format!("{path}[]"), unit, text),
        None => walk(schema, of, path.to_owned(), unit, text),
    }
}

#[test]
fn docs_tell_every_key() {
    let path = concat!(env!("CARGO_MANIFEST_DIR"), "/../docs/report.md");
    let document = document();
    if std::env::var_os("COILWRIGHT_WRITE_DOCS").is_some() {
        std::fs::write(path, &document).unwrap();
    }
    let written = std::fs::read_to_string(path).unwrap_or_default();
    assert!(
        written == document,
        "docs/report.md is not up to date: run with COILWRIGHT_WRITE_DOCS=1"
    );
}

#[test]
fn docs_know_the_unit_of_every_number() {
    for line in document().lines().filter(|line| line.contains("| number |")) {
        let pure = [
            "coupling",
            "fill_factor",
            "turns",
            "permeance_coefficient",
            "b_max_over_knee",
            "saturated_share",
        ];
        let has_unit = !line.contains("| number |  |");
        assert!(has_unit || pure.iter().any(|key| line.contains(key)), "{line}");
    }
}
