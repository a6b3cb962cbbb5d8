//! Sparse symmetric positive definite systems with a few rank-one terms: the only door to faer.
//!
//! Nothing that comes back from a factorisation or a solve is believed: pivots, finiteness and the residual are
//! checked every time.

mod cholesky;
mod matrix;
mod symbolic;

pub use cholesky::Cholesky;
pub use matrix::{LowRank, Matrix};
pub use symbolic::Symbolic;

/// Why a linear system could not be solved.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum LinearError {
    /// A pivot is not positive, or vanishes beside its diagonal entry.
    #[error(
        "the system matrix is not positive definite: pivot {pivot:e} in row {row} with diagonal entry {diagonal:e}"
    )]
    NotPositiveDefinite {
        /// The row.
        row: usize,
        /// Its pivot.
        pivot: f64,
        /// The matrix's diagonal entry there.
        diagonal: f64,
    },
    /// An entry of the matrix, a load or a solution is infinite or not a number.
    #[error("{what} has an entry that is infinite or not a number at {index}")]
    NotFinite {
        /// What has it.
        what: &'static str,
        /// Where.
        index: usize,
    },
    /// The residual of a solution stayed too large.
    #[error(
        "the linear system was solved only to a relative residual of {residual:e}; {limit:e} is the limit"
    )]
    Inaccurate {
        /// 2-norm of the residual over that of the right side.
        residual: f64,
        /// The most that is accepted.
        limit: f64,
    },
    /// A vector or pattern does not fit.
    #[error("{what} has length {given}; {wanted} is needed")]
    Length {
        /// What does not fit.
        what: &'static str,
        /// Its length.
        given: usize,
        /// The length needed.
        wanted: usize,
    },
    /// The factor has no room in memory or in its index type.
    #[error("no room for the factor of a system with {unknowns} unknowns")]
    NoRoom {
        /// Number of unknowns.
        unknowns: usize,
    },
}
