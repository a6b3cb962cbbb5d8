//! Pictures of a case as SVG.

use solver::Solution;

use crate::case::Case;

/// The solved section.
pub fn of_solution(_case: &Case, _solution: &Solution) -> String {
    String::new()
}

/// The drawn section.
pub fn of_drawing(_case: &Case) -> String {
    String::new()
}
