//! Names of one kind: unique, and looked up with help for the misspelt.

use std::collections::HashMap;
use std::ops::Range;

use super::model::located::Located;
use super::nearest::known_names_help;
use super::values::Values;

/// Names of one kind (regions, windings, ...), each with its index.
#[derive(Debug)]
pub struct Roster {
    kind: &'static str,
    indices: HashMap<String, (usize, Range<usize>)>,
    names: Vec<String>,
}

impl Roster {
    /// Registers names in order; an odd or repeated one is a fault.
    pub fn new<'a>(
        kind: &'static str,
        names: impl IntoIterator<Item = &'a Located<String>>,
        values: &mut Values,
    ) -> Self {
        let mut roster = Self {
            kind,
            indices: HashMap::new(),
            names: Vec::new(),
        };
        for name in names {
            roster.add(name, values);
        }
        roster
    }

    fn add(&mut self, name: &Located<String>, values: &mut Values) {
        let allowed = |c: char| c.is_alphanumeric() || matches!(c, '-' | '_');
        let index = self.names.len();
        self.names.push(name.value.clone());
        if name.value.is_empty() || !name.value.chars().all(allowed) {
            let message = format!("`{}` cannot be the name of a {}", name.value, self.kind);
            values.fault_with_help(&name.span, message, "names have letters, digits, `-` and `_`");
        }
        if let Some((_, first)) = self.indices.get(&name.value) {
            let line = values.line(first);
            let message = format!("there is already a {} `{}` in line {line}", self.kind, name.value);
            values.fault(&name.span, message);
        } else {
            self.indices
                .insert(name.value.clone(), (index, name.span.clone()));
        }
    }

    /// The index of a name, if it is known.
    pub fn index(&self, name: &str) -> Option<usize> {
        self.indices.get(name).map(|(index, _)| *index)
    }

    /// The index of a name that the case mentions; noted as a fault if there is none.
    pub fn find(&self, name: &Located<String>, values: &mut Values) -> Option<usize> {
        if let Some((index, _)) = self.indices.get(&name.value) {
            return Some(*index);
        }
        let help = known_names_help(
            &name.value,
            self.names.iter().map(String::as_str),
            &format!("{}s", self.kind),
        );
        values.fault_with_help(
            &name.span,
            format!("there is no {} `{}`", self.kind, name.value),
            help,
        );
        None
    }

    /// Indices of a list of names; unknown and repeated ones are faults, and so is an empty list.
    pub fn find_all(&self, names: &Located<Vec<Located<String>>>, values: &mut Values) -> Vec<usize> {
        if names.value.is_empty() {
            values.fault(&names.span, format!("at least one {} is needed here", self.kind));
        }
        let mut found = Vec::new();
        for name in &names.value {
            match self.find(name, values) {
                Some(index) if found.contains(&index) => {
                    values.fault(
                        &name.span,
                        format!("the {} `{}` is listed twice", self.kind, name.value),
                    );
                }
                Some(index) => found.push(index),
                None => {}
            }
        }
        found
    }
}
