//! A number that is not finite is never written.

use serde_json::Value;
use thiserror::Error;

/// A result is infinite or not a number.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error(
    "the result `{path}` is not a finite number, so the solution cannot be trusted and nothing is written"
)]
pub struct NotFinite {
    /// Path of the key, as jq writes it.
    pub path: String,
}

/// Finds the first number that is not finite. The report has no other nulls: what is absent has no key.
pub(super) fn check(value: &Value) -> Result<(), NotFinite> {
    let mut path = Vec::new();
    if has_null(value, &mut path) {
        path.reverse();
        return Err(NotFinite { path: path.concat() });
    }
    Ok(())
}

/// Whether there is a null inside; then `path` holds the steps to it, last first.
fn has_null(value: &Value, path: &mut Vec<String>) -> bool {
    match value {
        Value::Null => true,
        Value::Array(entries) => entries.iter().enumerate().any(|(index, entry)| {
            let found = has_null(entry, path);
            if found {
                path.push(format!("[{index}]"));
            }
            found
        }),
        Value::Object(entries) => entries.iter().any(|(key, entry)| {
            let found = has_null(entry, path);
            if found {
                path.push(format!(".{key}"));
            }
            found
        }),
        _ => false,
    }
}
