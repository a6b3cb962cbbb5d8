//! The JSON Schema of the case file, for editors and for the check of the form.

use schemars::generate::SchemaSettings;
use serde_json::Value;

use super::model::CaseFile;

/// The JSON Schema (draft 2020-12) of the case file.
pub fn schema() -> Value {
    let generator = SchemaSettings::draft2020_12().for_deserialize().into_generator();
    let mut schema = generator.into_root_schema_for::<CaseFile>().to_value();
    without_null(&mut schema);
    schema
}

/// TOML knows no null: an optional key is absent. Removes `null` from types and alternatives.
fn without_null(schema: &mut Value) {
    match schema {
        Value::Array(items) => items.iter_mut().for_each(without_null),
        Value::Object(keys) => {
            keys.values_mut().for_each(without_null);
            if let Some(Value::Array(types)) = keys.get_mut("type") {
                types.retain(|name| name != "null");
                if types.len() == 1 {
                    let only = types[0].clone();
                    keys.insert("type".to_owned(), only);
                }
            }
            if keys.get("default").is_some_and(Value::is_null) {
                keys.remove("default");
            }
            if let Some(Value::Array(choices)) = keys.get_mut("anyOf") {
                choices.retain(|choice| choice["type"] != "null");
                if choices.len() == 1
                    && let Some(Value::Object(only)) = choices.pop()
                {
                    keys.remove("anyOf");
                    for (key, value) in only {
                        keys.entry(key).or_insert(value);
                    }
                }
            }
        }
        _ => {}
    }
}
