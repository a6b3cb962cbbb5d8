//! The case file: TOML in, a checked case in SI units out. Raw text mirror -> givens resolved -> checked case.

mod build;
mod curves;
pub mod expression;
pub mod fault;
mod form;
mod givens;
mod later;
mod materials;
pub mod model;
mod nearest;
mod places;
mod readings;
mod regions;
mod render;
mod resolved;
mod roster;
mod schema;
mod shapes;
pub mod source;
mod space;
mod syntax;
mod travel;
mod values;
mod windings;

pub use fault::{Fault, Faults, Look, Place};
pub use places::Places;
pub use schema::schema;
pub use source::Source;
pub use values::length_text;

/// A checked case, everything in SI units: all that one solve needs.
#[derive(Clone, Debug)]
pub struct Case {
    /// Name for files: the case file's stem, or `case` for standard input.
    pub name: String,
    /// Title for the report; the name when the file has none.
    pub title: String,
    /// Metres in one length unit of the case (reports and pictures use it).
    pub length_unit: LengthUnit,
    /// Working temperature, °C.
    pub temperature_c: f64,
    /// Givens with their texts after `--set`, in file order.
    pub givens: Vec<Given>,
    /// The drawing.
    pub section: mesher::Section,
    /// The physics; `problem.regions` goes with `section.regions`.
    pub problem: solver::Problem,
    /// What a person should know about each region for pictures and reports, index as `section.regions`.
    pub region_notes: Vec<RegionNote>,
    /// Places along which a mover travels, if one does.
    pub travel: Option<Travel>,
    /// The linkage curve wanted, if one is.
    pub linkage: Option<Linkage>,
    /// Accuracy wanted.
    pub accuracy: solver::solve::Settings,
    /// Cautions that the reading alone raised (assumptions made, data stretched).
    pub cautions: Vec<crate::caution::Caution>,
    /// The case with every given replaced by its value, enough to repeat the run.
    pub resolved_toml: String,
    /// Where the drawing stands in the case file.
    pub places: Places,
}

/// Places of a mover along its stroke.
#[derive(Clone, Debug, PartialEq)]
pub struct Travel {
    /// Index of the mover in `problem.movers`.
    pub mover: usize,
    /// The places, m, counted from the drawn one, + is up: at least one, all different, going one way.
    pub offsets_m: Vec<f64>,
}

/// The currents at which a winding's linkage is wanted.
#[derive(Clone, Debug, PartialEq)]
pub struct Linkage {
    /// Index of the winding in `problem.windings`.
    pub winding: usize,
    /// The currents, A: at least one.
    pub currents_a: Vec<f64>,
}

/// A length unit the case may use.
#[derive(Clone, Debug, PartialEq)]
pub struct LengthUnit {
    /// As written, e.g. `mm`.
    pub name: String,
    /// Metres in one.
    pub metres: f64,
}

/// One given.
#[derive(Clone, Debug, PartialEq)]
pub struct Given {
    /// Its name.
    pub name: String,
    /// Its text as written or set.
    pub text: String,
    /// Its value in SI.
    pub si: f64,
    /// SI unit of the value, empty for a pure number.
    pub unit: String,
}

/// What a person should know about a region.
#[derive(Clone, Debug, PartialEq)]
pub struct RegionNote {
    /// Name of its material in the stock.
    pub material: String,
    /// The winding it is a coil side of.
    pub winding: Option<usize>,
}

/// Reads a case: the text of `source` with each `NAME=VALUE` of `sets` in place of the given's own text (the last
/// wins).
///
/// # Errors
/// Everything that is wrong with the text, where possible all at once.
pub fn read(source: &Source, sets: &[String]) -> Result<Case, Faults> {
    build::read(source, sets)
}

#[cfg(test)]
mod tests;
