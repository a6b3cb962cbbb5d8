//! B over H as points: read from a file, judged, and repaired where the trade does so.

mod file;
mod judge;
#[cfg(test)]
mod tests;

pub use file::CurveFile;
pub use judge::{Judged, Quadrant, Unfit, judge};

/// A point of a curve with the row it was given in, from 1.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RowPoint {
    /// Row of the file, or place in the list.
    pub row: usize,
    /// Field strength, A/m.
    pub h_a_per_m: f64,
    /// Flux density, T.
    pub b_t: f64,
}
