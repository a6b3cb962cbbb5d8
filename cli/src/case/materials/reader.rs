//! One `[stock.NAME]` on top of what it copies.

use std::path::Path;

use crate::case::expression::Dimension;
use crate::case::model::located::Located;
use crate::case::model::material::{CoreLossKeys, StockEntry};
use crate::case::model::quantity::Amount;
use crate::case::values::Values;
use crate::stock::{CoreLoss, Law, Material};

/// Reference temperature of data that do not say one, °C.
const USUAL_REFERENCE_C: f64 = 20.0;

/// Reads one material of the case's own.
pub(super) struct Reader<'a> {
    pub(super) name: &'a Located<String>,
    pub(super) entry: &'a StockEntry,
    pub(super) folder: &'a Path,
    pub(super) values: &'a mut Values,
}

impl Reader<'_> {
    /// The material; `None` after a fault.
    pub(super) fn material(mut self, base: Option<Material>) -> Option<Material> {
        self.check_name();
        let copied_law = base.as_ref().map(|material| material.law.clone());
        let mut material = base.unwrap_or_else(|| nothing_known(&self.name.value));
        let law = self.law(copied_law);
        let entry = self.entry;
        material.name = self.name.value.clone().into();
        material.about = "of the case's own".into();
        material.source = "the case file".into();
        self.set(
            &entry.conductivity,
            "conductivity",
            Dimension::CONDUCTIVITY,
            |si| {
                material.conductivity_s_per_m = si;
            },
        );
        if let Some(density) = &entry.density
            && let Some(si) = self.values.positive(density, "density", Dimension::DENSITY)
        {
            material.density_kg_per_m3 = Some(si);
        }
        if let Some(coefficient) = &entry.temperature_coefficient
            && let Some(si) =
                self.values
                    .amount(coefficient, "temperature_coefficient", Dimension::PER_KELVIN)
        {
            material.temperature_coefficient_per_k = si;
        }
        if let Some(reference) = &entry.reference_temperature
            && let Some(celsius) = self.values.temperature_c(reference, "reference_temperature")
        {
            material.reference_temperature_c = celsius;
        }
        if let Some(loss) = &entry.core_loss {
            material.core_loss = self.core_loss(loss);
        }
        material.law = law?;
        Some(material)
    }

    fn check_name(&mut self) {
        let allowed = |c: char| c.is_alphanumeric() || matches!(c, '-' | '_');
        if !self.name.value.chars().all(allowed) {
            let message = format!("`{}` cannot be the name of a material", self.name.value);
            self.values.fault_with_help(
                &self.name.span,
                message,
                "names have letters, digits, `-` and `_`",
            );
        }
    }

    /// Sets a value that must not be negative.
    fn set(&mut self, amount: &Option<Amount>, key: &str, dimension: Dimension, put: impl FnOnce(f64)) {
        if let Some(amount) = amount
            && let Some(si) = self.values.not_negative(amount, key, dimension)
        {
            put(si);
        }
    }

    fn core_loss(&mut self, keys: &Located<CoreLossKeys>) -> Option<CoreLoss> {
        let k = self.values.not_negative(&keys.value.k, "k", Dimension::NUMBER);
        let alpha = self
            .values
            .not_negative(&keys.value.alpha, "alpha", Dimension::NUMBER);
        let beta = self
            .values
            .not_negative(&keys.value.beta, "beta", Dimension::NUMBER);
        Some(CoreLoss {
            k: k?,
            alpha: alpha?,
            beta: beta?,
        })
    }
}

/// A material of which nothing is known yet.
fn nothing_known(name: &str) -> Material {
    Material {
        name: name.to_owned().into(),
        about: "".into(),
        law: Law::Linear {
            relative_permeability: 1.0,
            relative_permeability_loss: 0.0,
        },
        conductivity_s_per_m: 0.0,
        temperature_coefficient_per_k: 0.0,
        reference_temperature_c: USUAL_REFERENCE_C,
        density_kg_per_m3: None,
        core_loss: None,
        source: "".into(),
    }
}
