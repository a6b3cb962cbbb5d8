//! `[stock.NAME]` on top of the built-in stock, and what a material is at a temperature.

use std::collections::HashMap;
use std::path::Path;

use super::model::located::{Located, Named};
use super::model::material::StockEntry;
use super::nearest::known_names_help;
use super::values::Values;
use crate::stock::{self, Material};
use reader::Reader;

mod law;
mod points;
mod reader;

/// All materials the case may name.
#[derive(Debug)]
pub struct Materials {
    /// `None` for one of the case's own whose fault has been said.
    known: HashMap<String, Option<Material>>,
    names: Vec<String>,
}

impl Materials {
    /// The built-in stock and the case's own materials; one of the case's own covers a built-in one of its name.
    pub fn read(entries: &Named<StockEntry>, folder: &Path, values: &mut Values) -> Self {
        let mut known: HashMap<String, Option<Material>> = stock::table()
            .into_iter()
            .map(|material| (material.name.to_string(), Some(material)))
            .collect();
        let mut names: Vec<String> = stock::table()
            .iter()
            .map(|material| material.name.to_string())
            .collect();
        let own: HashMap<&str, usize> = entries
            .0
            .iter()
            .enumerate()
            .map(|(index, (name, _))| (name.value.as_str(), index))
            .collect();
        names.extend(entries.0.iter().map(|(name, _)| name.value.clone()));
        for index in copying_order(entries, &own, values) {
            let (name, entry) = &entries.0[index];
            let base = entry
                .like
                .as_ref()
                .and_then(|like| copied(like, &known, &own, &names, values));
            let material = Reader {
                name,
                entry,
                folder,
                values,
            }
            .material(base);
            known.insert(name.value.clone(), material);
        }
        Self { known, names }
    }

    /// The material of this name; noted as a fault if there is none.
    pub fn find(&self, name: &Located<String>, values: &mut Values) -> Option<&Material> {
        match self.known.get(&name.value) {
            Some(material) => material.as_ref(),
            None => {
                let help = known_names_help(&name.value, self.names.iter().map(String::as_str), "materials");
                let help = format!("{help}; `coilwright stock` lists the built-in ones");
                values.fault_with_help(
                    &name.span,
                    format!("there is no material `{}` in the stock", name.value),
                    help,
                );
                None
            }
        }
    }
}

/// The material that `like` names.
fn copied(
    like: &Located<String>,
    known: &HashMap<String, Option<Material>>,
    own: &HashMap<&str, usize>,
    names: &[String],
    values: &mut Values,
) -> Option<Material> {
    match known.get(&like.value) {
        Some(material) => material.clone(),
        // One of the case's own that is not read yet copies this one: said already.
        None if own.contains_key(like.value.as_str()) => None,
        None => {
            let help = known_names_help(&like.value, names.iter().map(String::as_str), "materials");
            values.fault_with_help(
                &like.span,
                format!("there is no material `{}` in the stock", like.value),
                help,
            );
            None
        }
    }
}

/// Indices in an order in which a material comes after the one it copies. One that copies itself, directly or
/// not, is a fault; one of a built-in material's name copies the built-in one.
fn copying_order(entries: &Named<StockEntry>, own: &HashMap<&str, usize>, values: &mut Values) -> Vec<usize> {
    let mut done = vec![false; entries.0.len()];
    let mut order = Vec::new();
    for root in 0..entries.0.len() {
        let mut chain = vec![root];
        while let Some(&index) = chain.last() {
            let (name, entry) = &entries.0[index];
            let base = entry
                .like
                .as_ref()
                .and_then(|like| own.get(like.value.as_str()))
                .copied();
            let ready = done[index];
            match base {
                _ if ready => {}
                Some(base) if base == index && stock::find(&name.value).is_some() => {}
                Some(base) if chain.contains(&base) => {
                    if let Some(like) = &entry.like {
                        let from = chain.iter().position(|&open| open == base).unwrap_or(0);
                        let names: Vec<&str> = chain[from..]
                            .iter()
                            .chain([&base])
                            .map(|&i| entries.0[i].0.value.as_str())
                            .collect();
                        let message =
                            format!("materials copy each other in a circle: {}", names.join(" -> "));
                        values.fault(&like.span, message);
                    }
                }
                Some(base) if !done[base] => {
                    chain.push(base);
                    continue;
                }
                _ => {}
            }
            if !ready {
                done[index] = true;
                order.push(index);
            }
            chain.pop();
        }
    }
    order
}
