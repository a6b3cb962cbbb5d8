//! faer's sparse factorisation L D L^T of a bordered system.
//!
//! K + V V^T is not formed (V has some 40 columns over all nodes at the outer circle: a clique of hundreds or
//! thousands of rows). With y = V^T x the same system reads [K V; V^T -I]; its border is eliminated last, so the
//! pivots of K must be positive and those of the border negative, which is checked one by one.

use faer::dyn_stack::{MemBuffer, MemStack};
use faer::linalg::cholesky::ldlt::factor::{LdltError, LdltRegularization};
use faer::sparse::SparseColMatRef;
use faer::sparse::linalg::cholesky::{LdltRef, SymbolicCholeskyRaw};
use faer::{Conj, MatMut, Par, Side};
use rayon::prelude::*;

use super::LinearError;
use super::matrix::{Matrix, check_finite, norm};
use super::symbolic::{Symbolic, bordered_values};

/// Refinement stops when the residual is under this share of the right side, or within the round-off of its own
/// evaluation, or no longer halves.
const WANTED_RESIDUAL: f64 = 1e-12;
/// A larger residual after refinement is an error.
const LARGEST_RESIDUAL: f64 = 1e-8;
/// Corrections at most.
const MOST_REFINEMENTS: usize = 4;
/// A pivot under this share of its diagonal entry counts as zero: round-off of its own elimination.
const SMALLEST_PIVOT_SHARE: f64 = 1e-14;
/// Right sides solved together by one thread.
const LOADS_PER_TASK: usize = 2;

/// A factored matrix.
#[derive(Debug)]
pub struct Cholesky {
    symbolic: Symbolic,
    matrix: Matrix,
    diagonal: Vec<f64>,
    values: Vec<f64>,
}

impl Cholesky {
    /// Factors a matrix on the pattern that was analysed.
    ///
    /// Errors: a matrix that is not finite or not positive definite (singular within round-off included), that does
    /// not fit the analysis, or a factor with no room in memory.
    pub fn new(symbolic: Symbolic, matrix: Matrix) -> Result<Self, LinearError> {
        let entries = symbolic.entries();
        let values = bordered_values(&matrix, entries);
        if values.len() != entries || matrix.len() != symbolic.unknowns {
            return Err(LinearError::Length {
                what: "the matrix",
                given: values.len(),
                wanted: entries,
            });
        }
        check_finite("the system matrix", &values)?;
        let no_room = || LinearError::NoRoom {
            unknowns: symbolic.unknowns,
        };
        let mut factor = Vec::new();
        factor
            .try_reserve_exact(symbolic.factor.len_val())
            .map_err(|_| no_room())?;
        factor.resize(symbolic.factor.len_val(), 0.0);
        let par = Par::rayon(0);
        let scratch = symbolic
            .factor
            .factorize_numeric_ldlt_scratch::<f64>(par, Default::default());
        let mut memory = MemBuffer::try_new(scratch).map_err(|_| no_room())?;
        let outcome = symbolic.factor.factorize_numeric_ldlt(
            &mut factor,
            SparseColMatRef::new(symbolic.view(), &values),
            Side::Lower,
            LdltRegularization::default(),
            par,
            MemStack::new(&mut memory),
            Default::default(),
        );
        drop(memory);
        if let Err(LdltError::ZeroPivot { index }) = outcome {
            let row = symbolic.row_at(index);
            let diagonal = matrix.diagonal().get(row).map_or(1.0, |d| *d);
            return Err(LinearError::NotPositiveDefinite {
                row,
                pivot: 0.0,
                diagonal,
            });
        }
        let diagonal = matrix.diagonal();
        let factored = Self {
            symbolic,
            matrix,
            diagonal,
            values: factor,
        };
        factored.check_pivots()?;
        Ok(factored)
    }

    /// The matrix that was factored.
    pub fn matrix(&self) -> &Matrix {
        &self.matrix
    }

    /// The analysis, for the next matrix on the same pattern.
    pub fn symbolic(&self) -> &Symbolic {
        &self.symbolic
    }

    /// Positive pivots for the matrix, negative ones for the border, none lost to round-off.
    fn check_pivots(&self) -> Result<(), LinearError> {
        let SymbolicCholeskyRaw::Supernodal(structure) = self.symbolic.factor.raw() else {
            // Invariant: the analysis asks for supernodes whatever the size.
            unreachable!("the supernodal form was forced");
        };
        for s in 0..structure.n_supernodes() {
            let first = structure.supernode_begin()[s] as usize;
            let columns = structure.supernode_end()[s] as usize - first;
            let block = structure.col_ptr_for_val()[s] as usize;
            let rows = columns + structure.supernode(s).pattern().len();
            for k in 0..columns {
                let pivot = self.values[block + k * rows + k];
                let row = self.symbolic.row_at(first + k);
                let (pivot, diagonal) = if row < self.symbolic.unknowns {
                    (pivot, self.diagonal[row])
                } else {
                    (-pivot, 1.0)
                };
                if !(pivot.is_finite() && pivot > SMALLEST_PIVOT_SHARE * diagonal) {
                    return Err(LinearError::NotPositiveDefinite { row, pivot, diagonal });
                }
            }
        }
        Ok(())
    }

    /// Solves for several loads (each of length n) with iterative refinement.
    ///
    /// Errors: a load of wrong length or not finite; a solution that is not finite or whose residual stays above
    /// 1e-8 of the load.
    pub fn solve(&self, loads: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, LinearError> {
        for load in loads {
            let wanted = self.symbolic.unknowns;
            if load.len() != wanted {
                return Err(LinearError::Length {
                    what: "a load",
                    given: load.len(),
                    wanted,
                });
            }
            check_finite("a load", load)?;
        }
        let tasks: Vec<_> = loads
            .par_chunks(LOADS_PER_TASK)
            .map(|loads| self.solve_few(loads))
            .collect();
        let mut solutions = Vec::with_capacity(loads.len());
        for task in tasks {
            solutions.extend(task?);
        }
        Ok(solutions)
    }

    fn solve_few(&self, loads: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, LinearError> {
        let sizes: Vec<f64> = loads.iter().map(|load| norm(load)).collect();
        let mut solutions = self.apply_inverse(loads)?;
        let mut last = vec![f64::INFINITY; loads.len()];
        for step in 0..=MOST_REFINEMENTS {
            let mut residuals = Vec::with_capacity(loads.len());
            let mut unfinished = false;
            for (k, (x, load)) in solutions.iter().zip(loads).enumerate() {
                check_finite("a solution", x)?;
                let residual = self.matrix.residual(x, load);
                let size = norm(&residual);
                let wanted = (WANTED_RESIDUAL * sizes[k]).max(self.round_off(x));
                unfinished |= size > wanted && size < 0.5 * last[k];
                last[k] = size;
                residuals.push(residual);
            }
            if !unfinished || step == MOST_REFINEMENTS {
                break;
            }
            for (x, correction) in solutions.iter_mut().zip(self.apply_inverse(&residuals)?) {
                x.iter_mut().zip(correction).for_each(|(x, d)| *x += d);
            }
        }
        for (&residual, &size) in last.iter().zip(&sizes) {
            // The solution is finite, but its residual may have overflowed.
            if residual.is_nan() || residual > LARGEST_RESIDUAL * size {
                return Err(LinearError::Inaccurate {
                    residual: residual / size,
                    limit: LARGEST_RESIDUAL,
                });
            }
        }
        Ok(solutions)
    }

    /// What the residual of `x` cannot be told from: the round-off of its terms, of the size of diagonal times x.
    fn round_off(&self, x: &[f64]) -> f64 {
        let terms: Vec<f64> = x.par_iter().zip(&self.diagonal).map(|(x, d)| x * d).collect();
        f64::EPSILON * norm(&terms)
    }

    /// One pass through the factor, without checks.
    fn apply_inverse(&self, loads: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, LinearError> {
        let (n, size) = (self.symbolic.unknowns, self.symbolic.size());
        let mut block = vec![0.0; size * loads.len()];
        for (column, load) in block.chunks_exact_mut(size.max(1)).zip(loads) {
            column[..n].copy_from_slice(load);
        }
        let scratch = self
            .symbolic
            .factor
            .solve_in_place_scratch::<f64>(loads.len(), Par::Seq);
        let mut memory = MemBuffer::try_new(scratch).map_err(|_| LinearError::NoRoom { unknowns: n })?;
        LdltRef::new(&self.symbolic.factor, &self.values).solve_in_place_with_conj(
            Conj::No,
            MatMut::from_column_major_slice_mut(&mut block, size, loads.len()),
            Par::Seq,
            MemStack::new(&mut memory),
        );
        Ok(block
            .chunks_exact(size.max(1))
            .map(|column| column[..n].to_vec())
            .collect())
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
