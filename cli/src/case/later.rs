//! What the case file may say, but this version does not solve: checked for form, then answered plainly.

use super::expression::Dimension;
use super::model::located::Located;
use super::model::{CaseFile, Regime};
use super::readings::range;
use super::values::Values;

/// Answers the keys of the other regimes.
pub fn other_regimes(file: &CaseFile, values: &mut Values) {
    match &file.regime {
        Some(Located {
            value: Regime::Alternating,
            span,
        }) => {
            values.not_solved_yet(span, "regime = \"alternating\"");
            if file.alternating.is_none() {
                values.fault(
                    span,
                    "the alternating regime needs [alternating] with its `frequency`",
                );
            }
        }
        Some(Located {
            value: Regime::Transient,
            span,
        }) => values.not_solved_yet(span, "regime = \"transient\""),
        Some(Located {
            value: Regime::Static,
            ..
        })
        | None => {}
    }
    if let Some(alternating) = &file.alternating {
        let frequency = &alternating.value.frequency;
        let frequencies = range(frequency, "frequency", Dimension::FREQUENCY, values).unwrap_or_default();
        if let Some(low) = frequencies.iter().find(|frequency| **frequency <= 0.0) {
            values.fault(
                &frequency.span,
                format!("a frequency must be more than zero, not {low} Hz"),
            );
        }
        values.not_solved_yet(&alternating.span, "[alternating]");
    }
    if let Some(transient) = &file.transient {
        values.not_solved_yet(&transient.span, "[transient]");
    }
}
