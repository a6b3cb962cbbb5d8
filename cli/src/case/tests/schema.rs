//! The JSON Schema.

use serde_json::Value;

use crate::case::schema;

/// Calls `visit` with the path and schema of every key that a table may have.
fn each_key(schema: &Value, path: &str, visit: &mut dyn FnMut(&str, &Value)) {
    if let Some(keys) = schema.get("properties").and_then(Value::as_object) {
        for (key, inner) in keys {
            let path = format!("{path}.{key}");
            visit(&path, inner);
            each_key(inner, &path, visit);
        }
    }
    for (name, inner) in schema
        .get("$defs")
        .and_then(Value::as_object)
        .into_iter()
        .flatten()
    {
        each_key(inner, &format!("{path}#{name}"), visit);
    }
}

#[test]
fn it_names_its_draft_and_every_key_is_described() {
    let schema = schema();
    assert_eq!(schema["$schema"], "https://json-schema.org/draft/2020-12/schema");
    let mut keys = 0;
    each_key(&schema, "", &mut |path, inner| {
        keys += 1;
        assert!(
            inner["description"].as_str().is_some_and(|text| text.len() > 5),
            "{path} is not described"
        );
    });
    assert!(keys > 90, "only {keys} keys");
}

#[test]
fn quantities_are_numbers_or_texts_and_nothing_is_null() {
    let schema = schema();
    assert_eq!(
        schema["properties"]["temperature"]["type"],
        serde_json::json!(["number", "string"])
    );
    let text = schema.to_string();
    assert!(!text.contains("null"), "TOML knows no null");
    assert!(text.contains("\"minItems\":2,\"maxItems\":2"), "points are pairs");
}

#[test]
fn tables_are_closed() {
    let schema = schema();
    assert_eq!(schema["additionalProperties"], Value::Bool(false));
    for (name, inner) in schema["$defs"].as_object().into_iter().flatten() {
        if inner.get("properties").is_some() {
            assert_eq!(inner["additionalProperties"], Value::Bool(false), "{name}");
        }
    }
}

#[test]
fn every_key_of_the_page_is_there() {
    let mut paths = Vec::new();
    each_key(&schema(), "", &mut |path, _| {
        paths.push(path.rsplit('.').next().unwrap_or_default().to_owned())
    });
    for key in [
        "title",
        "length_unit",
        "regime",
        "temperature",
        "given",
        "stock",
        "like",
        "saturation",
        "polarization",
        "half_field",
        "conductivity",
        "relative_permeability",
        "relative_permeability_loss",
        "curve",
        "curve_file",
        "remanence",
        "recoil_permeability",
        "demag_curve",
        "temperature_coefficient",
        "reference_temperature",
        "remanence_temperature_coefficient",
        "density",
        "core_loss",
        "k",
        "alpha",
        "beta",
        "region",
        "name",
        "material",
        "rect",
        "r",
        "z",
        "fillet",
        "circle",
        "centre",
        "radius",
        "polygon",
        "outline",
        "start",
        "path",
        "line",
        "arc",
        "through",
        "repeat",
        "count",
        "step",
        "magnetized",
        "currents",
        "mesh_size",
        "winding",
        "regions",
        "turns",
        "current",
        "voltage",
        "open",
        "shorted",
        "load",
        "wire",
        "diameter",
        "awg",
        "outside",
        "strands",
        "resistance",
        "one_piece",
        "lead",
        "inductance",
        "capacitance",
        "parallel_capacitance",
        "phase",
        "mover",
        "travel",
        "from",
        "to",
        "points",
        "spacing",
        "space",
        "boundary",
        "wall",
        "mirror",
        "mirror_currents",
        "ambient",
        "axial_b",
        "alternating",
        "frequency",
        "traverse",
        "at",
        "search_coil",
        "stray",
        "distance",
        "limit",
        "accuracy",
        "goal",
        "of",
        "max_triangles",
        "max_time",
        "vary",
        "values",
        "together",
        "linkage",
    ] {
        assert!(paths.iter().any(|path| path == key), "`{key}` is missing");
    }
}
