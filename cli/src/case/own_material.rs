//! One material of the case's own: its magnetic law, and its other data on top of what it copies.

use std::path::Path;

use super::expression::Dimension;
use super::model::located::Located;
use super::model::material::{CoreLossKeys, Saturation, StockEntry};
use super::model::quantity::{Amount, Pair};
use super::values::Values;
use crate::stock::{CoreLoss, Law, Material};

/// Reference temperature of data that do not say one, °C.
const USUAL_REFERENCE_C: f64 = 20.0;

/// Reads one material of the case's own.
pub(super) struct OwnMaterial<'a> {
    pub name: &'a Located<String>,
    pub entry: &'a StockEntry,
    pub folder: &'a Path,
    pub values: &'a mut Values,
}

impl OwnMaterial<'_> {
    /// Reads it on top of what it copies; `None` if something is wrong, and that is noted.
    pub fn read(mut self, base: Option<Material>) -> Option<Material> {
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

    /// The one magnetic law: given here, or copied.
    fn law(&mut self, copied: Option<Law>) -> Option<Law> {
        let entry = self.entry;
        let mut given = Vec::new();
        let mut note = |key: &'static str, span: Option<&std::ops::Range<usize>>| {
            given.extend(span.map(|span| (key, span.clone())));
        };
        note(
            "relative_permeability",
            entry.relative_permeability.as_ref().map(|a| &a.span),
        );
        note("curve", entry.curve.as_ref().map(|a| &a.span));
        note("curve_file", entry.curve_file.as_ref().map(|a| &a.span));
        note("saturation", entry.saturation.as_ref().map(|a| &a.span));
        note("remanence", entry.remanence.as_ref().map(|a| &a.span));
        note("demag_curve", entry.demag_curve.as_ref().map(|a| &a.span));
        match given.as_slice() {
            [] => self.copied_law(copied),
            [(key, _)] => self.own_law(key),
            [_, (_, second), ..] => {
                let keys: Vec<String> = given.iter().map(|(key, _)| format!("`{key}`")).collect();
                let message = format!(
                    "the material `{}` has more than one magnetic law: {}",
                    self.name.value,
                    keys.join(", ")
                );
                let second = self.values.with_key(second);
                self.values.fault_with_help(&second, message, "give exactly one");
                None
            }
        }
    }

    /// No law of its own: the copied one, with such of its numbers as are given anew.
    fn copied_law(&mut self, copied: Option<Law>) -> Option<Law> {
        let entry = self.entry;
        match copied {
            None if entry.like.is_some() => None,
            None => {
                let message = format!("the material `{}` has no magnetic law", self.name.value);
                let help = "give one; for a non-magnetic material write relative_permeability = 1";
                self.values.fault_with_help(&self.name.span, message, help);
                None
            }
            Some(Law::Magnet {
                remanence_t,
                recoil_permeability,
                remanence_temperature_coefficient_per_k: old,
            }) => {
                let recoil = match &entry.recoil_permeability {
                    Some(recoil) => self
                        .values
                        .positive(recoil, "recoil_permeability", Dimension::NUMBER)?,
                    None => recoil_permeability,
                };
                self.misplaced_loss();
                Some(Law::Magnet {
                    remanence_t,
                    recoil_permeability: recoil,
                    remanence_temperature_coefficient_per_k: self.remanence_coefficient()?.unwrap_or(old),
                })
            }
            Some(Law::Linear {
                relative_permeability,
                relative_permeability_loss: old,
            }) => {
                self.magnet_keys_misplaced();
                Some(Law::Linear {
                    relative_permeability,
                    relative_permeability_loss: self.loss_part()?.unwrap_or(old),
                })
            }
            Some(other) => Some(other),
        }
    }

    fn own_law(&mut self, key: &str) -> Option<Law> {
        let entry = self.entry;
        if key != "remanence" && key != "demag_curve" {
            self.magnet_keys_misplaced();
        }
        if key != "relative_permeability" {
            self.misplaced_loss();
        }
        match key {
            "relative_permeability" => {
                let amount = entry.relative_permeability.as_ref()?;
                let relative_permeability = self.values.positive(amount, key, Dimension::NUMBER)?;
                Some(Law::Linear {
                    relative_permeability,
                    relative_permeability_loss: self.loss_part()?.unwrap_or(0.0),
                })
            }
            "remanence" => self.magnet(entry.remanence.as_ref()?),
            "saturation" => self.saturation(entry.saturation.as_ref()?),
            "curve_file" => self.curve_file(entry.curve_file.as_ref()?),
            "curve" => self.curve(entry.curve.as_ref()?, key),
            _ => self.curve(entry.demag_curve.as_ref()?, key),
        }
    }

    fn magnet(&mut self, remanence: &Amount) -> Option<Law> {
        let remanence_t = self
            .values
            .positive(remanence, "remanence", Dimension::FLUX_DENSITY);
        let coefficient = self.remanence_coefficient();
        let Some(recoil) = &self.entry.recoil_permeability else {
            let message = format!("the magnet `{}` has no recoil_permeability", self.name.value);
            self.values.fault_with_help(
                &remanence.span,
                message,
                "give it beside remanence, for example 1.05",
            );
            return None;
        };
        let recoil_permeability = self
            .values
            .positive(recoil, "recoil_permeability", Dimension::NUMBER)?;
        Some(Law::Magnet {
            remanence_t: remanence_t?,
            recoil_permeability,
            remanence_temperature_coefficient_per_k: coefficient?.unwrap_or(0.0),
        })
    }

    /// The temperature coefficient of the remanence, if given; outer `None` after a fault.
    #[expect(
        clippy::option_option,
        reason = "a fault and an absent key are different things"
    )]
    fn remanence_coefficient(&mut self) -> Option<Option<f64>> {
        let Some(amount) = &self.entry.remanence_temperature_coefficient else {
            return Some(None);
        };
        self.values
            .amount(amount, "remanence_temperature_coefficient", Dimension::PER_KELVIN)
            .map(Some)
    }

    /// The loss part of the permeability, if given; outer `None` after a fault.
    #[expect(
        clippy::option_option,
        reason = "a fault and an absent key are different things"
    )]
    fn loss_part(&mut self) -> Option<Option<f64>> {
        let Some(amount) = &self.entry.relative_permeability_loss else {
            return Some(None);
        };
        if let Some(core_loss) = &self.entry.core_loss {
            let message = "core_loss and relative_permeability_loss would count the same loss twice";
            self.values
                .fault_with_help(&core_loss.span, message, "give one of them");
        }
        self.values
            .not_negative(amount, "relative_permeability_loss", Dimension::NUMBER)
            .map(Some)
    }

    fn misplaced_loss(&mut self) {
        if let Some(loss) = &self.entry.relative_permeability_loss {
            self.values.fault(
                &loss.span,
                "relative_permeability_loss goes with relative_permeability only",
            );
        }
    }

    fn magnet_keys_misplaced(&mut self) {
        let keys = [
            (&self.entry.recoil_permeability, "recoil_permeability"),
            (
                &self.entry.remanence_temperature_coefficient,
                "remanence_temperature_coefficient",
            ),
        ];
        for (amount, key) in keys {
            if let Some(amount) = amount {
                self.values.fault(
                    &amount.span,
                    format!("`{key}` is for magnets, but this material has no remanence"),
                );
            }
        }
    }

    fn saturation(&mut self, keys: &Located<Saturation>) -> Option<Law> {
        let polarization =
            self.values
                .positive(&keys.value.polarization, "polarization", Dimension::FLUX_DENSITY);
        let half_field =
            self.values
                .positive(&keys.value.half_field, "half_field", Dimension::FIELD_STRENGTH);
        self.values
            .not_solved_yet(&keys.span, "`saturation`, a saturable law");
        Some(Law::Saturation {
            polarization_t: polarization?,
            half_field_a_per_m: half_field?,
        })
    }

    fn curve(&mut self, points: &Located<Vec<Pair>>, key: &str) -> Option<Law> {
        let mut read = Vec::with_capacity(points.value.len());
        for pair in &points.value {
            let field = self.values.amount(&pair[0], key, Dimension::FIELD_STRENGTH);
            let density = self.values.amount(&pair[1], key, Dimension::FLUX_DENSITY);
            if let (Some(field), Some(density)) = (field, density) {
                read.push([field, density]);
            }
        }
        if points.value.len() < 2 {
            self.values.fault(
                &points.span,
                format!("`{key}` needs at least two points, not {}", points.value.len()),
            );
            return None;
        }
        self.values
            .not_solved_yet(&points.span, &format!("`{key}`, a saturable law"));
        if key == "curve" {
            return Some(Law::Curve(read));
        }
        let coefficient = self.remanence_coefficient()?.unwrap_or(0.0);
        Some(Law::Demagnetization {
            points: read,
            remanence_temperature_coefficient_per_k: coefficient,
        })
    }

    fn curve_file(&mut self, path: &Located<String>) -> Option<Law> {
        let full = self.folder.join(&path.value);
        match std::fs::File::open(&full) {
            Err(error) => {
                self.values.fault_with_help(
                    &path.span,
                    format!("the curve file `{}` cannot be opened: {error}", full.display()),
                    "paths are relative to the case file",
                );
            }
            Ok(_) => self
                .values
                .not_solved_yet(&path.span, "`curve_file`, a saturable law"),
        }
        None
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
