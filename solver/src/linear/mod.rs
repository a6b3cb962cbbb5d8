//! Sparse symmetric systems: the only door to faer.

/// Why a linear system could not be solved.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum LinearError {
    /// The factorisation broke down.
    #[error("the system matrix is not positive definite (row {row})")]
    NotPositiveDefinite {
        /// Where.
        row: usize,
    },
}
