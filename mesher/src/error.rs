//! What can go wrong, with the names and numbers a person needs.

use thiserror::Error;

/// Why no mesh could be made.
#[derive(Debug, Error)]
pub enum MeshError {
    /// (variants are added by the rooms that raise them)
    #[error("region `{region}` has no triangle: it is covered by what is painted later, or too thin to be meshed")]
    RegionVanished {
        /// Its name.
        region: String,
    },
}

/// Why a shape cannot be painted. Lengths in m; whoever shows them may change the unit.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum ShapeError {
    /// (variants are added by `shape`)
    #[error("the shape has no area")]
    NoArea,
}
