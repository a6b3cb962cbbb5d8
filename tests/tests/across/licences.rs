//! Every package that the program is built from may be used under the licences that `deny.toml` allows.

use std::collections::BTreeSet;
use std::path::Path;
use std::process::Command;

use serde_json::Value;

/// All packages of the dependency graph, as `cargo metadata` tells them.
pub fn packages() -> Vec<Value> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).parent().unwrap();
    let output = Command::new(env!("CARGO"))
        .args(["metadata", "--format-version", "1", "--locked"])
        .current_dir(root)
        .output()
        .unwrap();
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    let metadata: Value = serde_json::from_slice(&output.stdout).unwrap();
    metadata["packages"].as_array().unwrap().clone()
}

fn allowed() -> BTreeSet<String> {
    let text = std::fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("../deny.toml")).unwrap();
    let table: toml::Table = text.parse().unwrap();
    let list = table["licenses"]["allow"].as_array().unwrap();
    list.iter()
        .map(|name| name.as_str().unwrap().to_string())
        .collect()
}

#[test]
fn all_packages_have_an_allowed_licence() {
    let allowed = allowed();
    let packages = packages();
    assert!(packages.len() > 50, "{}", packages.len());
    let refused: Vec<String> = packages
        .iter()
        .filter(|package| {
            !package["license"]
                .as_str()
                .is_some_and(|licence| met(licence, &allowed))
        })
        .map(|package| {
            format!(
                "{} {}: {}",
                package["name"], package["version"], package["license"]
            )
        })
        .collect();
    assert!(refused.is_empty(), "{refused:#?}");
}

/// Whether a licence expression (SPDX; the old `/` means OR) can be met with the allowed licences alone.
fn met(expression: &str, allowed: &BTreeSet<String>) -> bool {
    let spaced = expression
        .replace('/', " OR ")
        .replace('(', " ( ")
        .replace(')', " ) ");
    let words: Vec<&str> = spaced.split_whitespace().collect();
    let mut at = 0;
    let result = any(&words, &mut at, allowed);
    result && at == words.len()
}

fn any(words: &[&str], at: &mut usize, allowed: &BTreeSet<String>) -> bool {
    let mut result = all(words, at, allowed);
    while words.get(*at) == Some(&"OR") {
        *at += 1;
        result |= all(words, at, allowed);
    }
    result
}

fn all(words: &[&str], at: &mut usize, allowed: &BTreeSet<String>) -> bool {
    let mut result = one(words, at, allowed);
    while words.get(*at) == Some(&"AND") {
        *at += 1;
        result &= one(words, at, allowed);
    }
    result
}

fn one(words: &[&str], at: &mut usize, allowed: &BTreeSet<String>) -> bool {
    let Some(&word) = words.get(*at) else { return false };
    *at += 1;
    if word == "(" {
        let result = any(words, at, allowed);
        *at += 1;
        return result;
    }
    let mut name = word.to_string();
    if words.get(*at) == Some(&"WITH") {
        name = format!("{name} WITH {}", words.get(*at + 1).unwrap_or(&""));
        *at += 2;
    }
    allowed.contains(&name)
}

#[test]
fn licence_expressions_are_understood() {
    let allowed: BTreeSet<String> = ["MIT", "Apache-2.0", "Apache-2.0 WITH LLVM-exception"]
        .map(String::from)
        .into();
    for good in [
        "MIT",
        "GPL-3.0 OR MIT",
        "MIT/Apache-2.0",
        "(GPL-2.0 OR MIT) AND Apache-2.0",
        "Apache-2.0 WITH LLVM-exception",
    ] {
        assert!(met(good, &allowed), "{good}");
    }
    for bad in [
        "GPL-3.0",
        "MIT AND GPL-3.0",
        "",
        "MIT WITH LLVM-exception",
        "MIT MIT",
    ] {
        assert!(!met(bad, &allowed), "{bad}");
    }
}
