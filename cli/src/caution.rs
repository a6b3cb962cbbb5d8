//! Safety and validity remarks raised from the numbers.
//!
//! Thresholds that rest on a standard name it; those that rest on habit say `common practice, no source`. All
//! standards are cited `from memory`: whoever relies on a limit looks it up.

mod drawing;
mod electric;
mod field;
mod material;
#[cfg(test)]
mod tests;

use solver::Solution;

use crate::case::Case;

/// The sentence that ends every list of cautions.
pub const DEFERRAL: &str = "These remarks are no proof of safety and not complete: the local codes, and people licensed \
                            for such work, decide.";

/// The words that end every caution about safety.
const DEFER: &str = "Local codes and licensed practice decide.";

/// Source of a remark that rests on habit.
const COMMON_PRACTICE: &str = "common practice, no source";

/// Source of a remark that rests on the case alone.
const THIS_CASE: &str = "this case";

/// One remark.
#[derive(Clone, Debug, PartialEq, Eq, serde::Serialize, schemars::JsonSchema)]
pub struct Caution {
    /// What it is about: a winding's, region's or mover's name, or a subject such as `stray field`.
    pub about: String,
    /// The remark, in plain words.
    pub text: String,
    /// The standard it rests on, or `common practice, no source`, with `from memory` where it is.
    pub source: String,
}

impl Caution {
    /// A remark about the safety of people.
    fn safety(about: &str, text: String, source: &str) -> Self {
        Self {
            about: about.to_owned(),
            text: format!("{text} {DEFER}"),
            source: source.to_owned(),
        }
    }

    /// A remark about what the numbers are worth.
    fn validity(about: &str, text: String, source: &str) -> Self {
        Self {
            about: about.to_owned(),
            text,
            source: source.to_owned(),
        }
    }
}

/// All cautions on a solved case: those that reading it raised, then those from the numbers.
pub fn all(case: &Case, solution: &Solution) -> Vec<Caution> {
    let mut cautions = case.cautions.clone();
    cautions.extend(electric::touch_voltage(&solution.quantities));
    cautions.extend(electric::stored_energy(&solution.quantities));
    cautions.extend(electric::current_density(&solution.quantities));
    cautions.extend(field::stray(case, solution));
    cautions.extend(field::strong_field(case, solution));
    cautions.extend(field::strong_magnets(case, &solution.quantities));
    cautions.extend(field::strong_forces(&solution.quantities));
    cautions.extend(field::touching_movers(&solution.quantities));
    cautions.extend(material::saturated_but_linear(case, &solution.quantities));
    cautions.extend(material::beyond_the_curve(case, &solution.quantities));
    cautions.extend(material::demagnetised(case, &solution.quantities));
    cautions.extend(drawing::turns_that_do_not_fit(&solution.quantities));
    cautions.extend(drawing::covered_regions(case, &solution.mesh));
    cautions.extend(drawing::welds(&solution.mesh));
    cautions
}
