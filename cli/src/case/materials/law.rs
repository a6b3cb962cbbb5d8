//! The magnetic law of a material of the case's own.

use super::reader::Reader;
use crate::case::expression::Dimension;
use crate::case::model::located::Located;
use crate::case::model::material::Saturation;
use crate::case::model::quantity::{Amount, OneOrMany};
use crate::stock::Law;

/// A key that is there, and where.
type Found = (&'static str, std::ops::Range<usize>);

impl Reader<'_> {
    /// The one magnetic law: given here, or copied.
    pub(super) fn law(&mut self, copied: Option<Law>) -> Option<Law> {
        match self.laws_given().as_slice() {
            [] => self.copied_law(copied),
            [(key, _)] => self.own_law(key),
            given @ [_, (_, second), ..] => {
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

    fn laws_given(&self) -> Vec<Found> {
        let entry = self.entry;
        let keys = [
            (
                "relative_permeability",
                entry.relative_permeability.as_ref().map(|a| &a.span),
            ),
            ("curve", entry.curve.as_ref().map(|a| &a.span)),
            ("curve_file", entry.curve_file.as_ref().map(|a| &a.span)),
            ("saturation", entry.saturation.as_ref().map(|a| &a.span)),
            ("remanence", entry.remanence.as_ref().map(|a| &a.span)),
            ("demag_curve", entry.demag_curve.as_ref().map(|a| &a.span)),
        ];
        keys.into_iter()
            .filter_map(|(key, span)| Some((key, span?.clone())))
            .collect()
    }

    /// No law of its own: the copied one, with such of its numbers as are given anew.
    fn copied_law(&mut self, copied: Option<Law>) -> Option<Law> {
        let Some(mut law) = copied else {
            if self.entry.like.is_none() {
                let message = format!("the material `{}` has no magnetic law", self.name.value);
                let help = "give one; for a non-magnetic material write relative_permeability = 1";
                self.values.fault_with_help(&self.name.span, message, help);
            }
            return None;
        };
        match &mut law {
            Law::Magnet {
                recoil_permeability: recoil,
                remanence_temperature_coefficient_per_k: coefficient,
                ..
            } => {
                *recoil = self.recoil()?.unwrap_or(*recoil);
                *coefficient = self.remanence_coefficient()?.unwrap_or(*coefficient);
                self.misplaced_loss();
            }
            Law::Demagnetization {
                recoil_permeability: recoil,
                remanence_temperature_coefficient_per_k: coefficient,
                ..
            } => {
                *recoil = self.recoil()?.or(*recoil);
                *coefficient = self.remanence_coefficient()?.unwrap_or(*coefficient);
                self.misplaced_loss();
            }
            Law::Linear {
                relative_permeability_loss: loss,
                ..
            } => {
                self.magnet_keys_misplaced();
                *loss = self.loss_part()?.unwrap_or(*loss);
            }
            Law::Saturation { .. } | Law::Curve(_) => {
                self.magnet_keys_misplaced();
                self.misplaced_loss();
            }
        }
        Some(law)
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
            "relative_permeability" => self.linear(entry.relative_permeability.as_ref()?),
            "remanence" => self.magnet(entry.remanence.as_ref()?),
            "saturation" => self.saturation(entry.saturation.as_ref()?),
            "curve_file" => self.curve_file(entry.curve_file.as_ref()?),
            "curve" => self.curve(entry.curve.as_ref()?),
            _ => self.demag_curve(entry.demag_curve.as_ref()?),
        }
    }

    fn linear(&mut self, keys: &Located<OneOrMany>) -> Option<Law> {
        let amount = match &keys.value {
            OneOrMany::One(quantity) => Amount {
                value: quantity.clone(),
                span: keys.span.clone(),
            },
            OneOrMany::Many(_) => {
                let message = format!(
                    "a list under relative_permeability would make `{}` anisotropic, which this version does not solve",
                    self.name.value
                );
                let help = "give one number, for example that of the direction most flux takes";
                self.values.fault_with_help(&keys.span, message, help);
                return None;
            }
        };
        let relative_permeability =
            self.values
                .positive(&amount, "relative_permeability", Dimension::NUMBER)?;
        Some(Law::Linear {
            relative_permeability,
            relative_permeability_loss: self.loss_part()?.unwrap_or(0.0),
        })
    }

    fn magnet(&mut self, remanence: &Amount) -> Option<Law> {
        let remanence_t = self
            .values
            .positive(remanence, "remanence", Dimension::FLUX_DENSITY);
        let coefficient = self.remanence_coefficient();
        if self.entry.recoil_permeability.is_none() {
            let message = format!("the magnet `{}` has no recoil_permeability", self.name.value);
            self.values.fault_with_help(
                &remanence.span,
                message,
                "give it beside remanence, for example 1.05",
            );
            return None;
        }
        Some(Law::Magnet {
            recoil_permeability: self.recoil()??,
            remanence_t: remanence_t?,
            remanence_temperature_coefficient_per_k: coefficient?.unwrap_or(0.0),
        })
    }

    /// The recoil permeability, if given; outer `None` after a fault.
    #[expect(
        clippy::option_option,
        reason = "a fault and an absent key are different things"
    )]
    pub(super) fn recoil(&mut self) -> Option<Option<f64>> {
        let Some(amount) = &self.entry.recoil_permeability else {
            return Some(None);
        };
        self.values
            .positive(amount, "recoil_permeability", Dimension::NUMBER)
            .map(Some)
    }

    /// The temperature coefficient of the remanence, if given; outer `None` after a fault.
    #[expect(
        clippy::option_option,
        reason = "a fault and an absent key are different things"
    )]
    pub(super) fn remanence_coefficient(&mut self) -> Option<Option<f64>> {
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
        Some(Law::Saturation {
            polarization_t: polarization?,
            half_field_a_per_m: half_field?,
        })
    }
}
