//! faer's sparse factorisation L D L^T of a bordered system.
//!
//! K + V V^T is not formed (V has some 40 columns over all nodes at the outer circle: a clique of hundreds or
//! thousands of rows). With y = V^T x the same system reads [K V; V^T -I]; its border is eliminated last, so the
//! pivots of K must be positive and those of the border negative, which is checked one by one.

use std::sync::Arc;

use faer::dyn_stack::{MemBuffer, MemStack};
use faer::linalg::cholesky::ldlt::factor::LdltRegularization;
use faer::perm::PermRef;
use faer::sparse::linalg::amd;
use faer::sparse::linalg::cholesky::{
    CholeskySymbolicParams, LdltRef, SymbolicCholesky, SymbolicCholeskyRaw, SymmetricOrdering,
    factorize_symbolic_cholesky,
};
use faer::sparse::linalg::{SupernodalThreshold, SymbolicSupernodalParams};
use faer::sparse::{SparseColMatRef, SymbolicSparseColMatRef};
use faer::{Conj, MatMut, Par, Side};
use nalgebra_sparse::pattern::SparsityPattern;
use rayon::prelude::*;

use super::LinearError;
use super::matrix::{LowRank, Matrix, check_finite, norm};

/// Refinement stops when the residual is under this share of the right side, or no longer halves.
const WANTED_RESIDUAL: f64 = 1e-12;
/// A larger residual after refinement is an error.
const LARGEST_RESIDUAL: f64 = 1e-8;
/// Corrections at most.
const MOST_REFINEMENTS: usize = 4;
/// A pivot under this share of its diagonal entry counts as zero: round-off of its own elimination.
const SMALLEST_PIVOT_SHARE: f64 = 1e-14;
/// Right sides solved together by one thread.
const LOADS_PER_TASK: usize = 2;

/// The analysis of a pattern: elimination order and where the factor has entries. It serves every matrix on the
/// pattern.
#[derive(Clone, Debug)]
pub struct Symbolic {
    unknowns: usize,
    border: usize,
    column_starts: Vec<u32>,
    row_indices: Vec<u32>,
    factor: Arc<SymbolicCholesky<u32>>,
}

/// A factored matrix.
#[derive(Debug)]
pub struct Cholesky {
    symbolic: Symbolic,
    matrix: Matrix,
    values: Vec<f64>,
}

impl Symbolic {
    /// Analyses a symmetric pattern (both halves) with low-rank terms on it.
    ///
    /// Errors: [`LinearError::NoRoom`].
    pub fn new(pattern: &SparsityPattern, low_rank: &LowRank) -> Result<Self, LinearError> {
        let unknowns = pattern.major_dim();
        let border = low_rank.vectors.len();
        let no_room = || LinearError::NoRoom { unknowns };
        let size = unknowns + border;
        // faer's indices are signed inside.
        if size >= i32::MAX as usize || pattern.nnz() >= i32::MAX as usize {
            return Err(no_room());
        }
        let (column_starts, row_indices) = bordered_lower_half(pattern, low_rank);
        let forward = elimination_order(pattern, border).map_err(|()| no_room())?;
        let mut inverse = vec![0u32; size];
        for (place, &row) in forward.iter().enumerate() {
            inverse[row as usize] = place as u32;
        }
        let view = SymbolicSparseColMatRef::new_checked(size, size, &column_starts, None, &row_indices);
        let params = CholeskySymbolicParams {
            supernodal_flop_ratio_threshold: SupernodalThreshold::FORCE_SUPERNODAL,
            supernodal_params: SymbolicSupernodalParams { ..Default::default() },
            ..Default::default()
        };
        let order = SymmetricOrdering::Custom(PermRef::new_checked(&forward, &inverse, size));
        let factor = factorize_symbolic_cholesky(view, Side::Lower, order, params).map_err(|_| no_room())?;
        Ok(Self {
            unknowns,
            border,
            column_starts,
            row_indices,
            factor: Arc::new(factor),
        })
    }

    /// Entries of the factor (8 bytes each).
    pub fn factor_entries(&self) -> usize {
        self.factor.len_val()
    }

    fn size(&self) -> usize {
        self.unknowns + self.border
    }

    fn view(&self) -> SymbolicSparseColMatRef<'_, u32> {
        let size = self.size();
        SymbolicSparseColMatRef::new_checked(size, size, &self.column_starts, None, &self.row_indices)
    }
}

/// The lower half of [K V; V^T -I] by columns: starts and row numbers.
fn bordered_lower_half(pattern: &SparsityPattern, low_rank: &LowRank) -> (Vec<u32>, Vec<u32>) {
    let n = pattern.major_dim();
    let border = low_rank.vectors.len();
    let mut starts = Vec::with_capacity(n + border + 1);
    let mut rows = Vec::with_capacity(pattern.nnz() / 2 + n + border * (low_rank.rows.len() + 1));
    starts.push(0);
    let mut bordered = low_rank.rows.iter().peekable();
    for column in 0..n {
        let lane = pattern.lane(column);
        let below = lane.partition_point(|&row| row < column);
        rows.extend(lane[below..].iter().map(|&row| row as u32));
        if bordered.next_if_eq(&&column).is_some() {
            rows.extend((n..n + border).map(|row| row as u32));
        }
        starts.push(rows.len() as u32);
    }
    for k in n..n + border {
        rows.push(k as u32);
        starts.push(rows.len() as u32);
    }
    (starts, rows)
}

/// Values of the same entries.
fn bordered_values(matrix: &Matrix, capacity: usize) -> Vec<f64> {
    let (offsets, columns, entries) = matrix.sparse.csr_data();
    let mut values = Vec::with_capacity(capacity);
    let mut bordered = matrix.low_rank.rows.iter().enumerate().peekable();
    for column in 0..matrix.len() {
        let span = offsets[column]..offsets[column + 1];
        let below = columns[span.clone()].partition_point(|&row| row < column);
        values.extend_from_slice(&entries[span][below..]);
        if let Some((k, _)) = bordered.next_if(|(_, row)| **row == column) {
            values.extend(matrix.low_rank.vectors.iter().map(|v| v[k]));
        }
    }
    values.extend(std::iter::repeat_n(-1.0, matrix.low_rank.vectors.len()));
    values
}

/// Approximate minimum degree on K, then the border: unknown at each place.
fn elimination_order(pattern: &SparsityPattern, border: usize) -> Result<Vec<u32>, ()> {
    let n = pattern.major_dim();
    let (starts, rows) = bordered_lower_half(pattern, &LowRank::default());
    let view = SymbolicSparseColMatRef::new_checked(n, n, &starts, None, &rows);
    let mut forward = vec![0u32; n];
    let mut inverse = vec![0u32; n];
    let scratch = amd::order_maybe_unsorted_scratch::<u32>(n, rows.len());
    let mut memory = MemBuffer::try_new(scratch).map_err(|_| ())?;
    let stack = MemStack::new(&mut memory);
    amd::order_maybe_unsorted(&mut forward, &mut inverse, view, amd::Control::default(), stack)
        .map_err(|_| ())?;
    forward.extend((n..n + border).map(|row| row as u32));
    Ok(forward)
}

impl Cholesky {
    /// Factors a matrix on the pattern that was analysed.
    ///
    /// Errors: a matrix that is not finite or not positive definite (singular within round-off included), that does
    /// not fit the analysis, or a factor with no room in memory.
    pub fn new(symbolic: Symbolic, matrix: Matrix) -> Result<Self, LinearError> {
        let entries = symbolic.row_indices.len();
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
        if outcome.is_err() {
            return Err(LinearError::NotPositiveDefinite {
                row: 0,
                pivot: 0.0,
                diagonal: 0.0,
            });
        }
        let factored = Self {
            symbolic,
            matrix,
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
        let diagonal = self.matrix.diagonal();
        let order = self.symbolic.factor.perm();
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
                let row = order.map_or(first + k, |perm| perm.arrays().0[first + k] as usize);
                let (pivot, diagonal) = if row < self.symbolic.unknowns {
                    (pivot, diagonal[row])
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
        let norms: Vec<f64> = loads.iter().map(|load| norm(load)).collect();
        let mut solutions = self.apply_inverse(loads)?;
        let mut last = vec![f64::INFINITY; loads.len()];
        for step in 0..=MOST_REFINEMENTS {
            let mut residuals = Vec::with_capacity(loads.len());
            let mut unfinished = false;
            for (k, (x, load)) in solutions.iter().zip(loads).enumerate() {
                check_finite("a solution", x)?;
                let residual = self.matrix.residual(x, load);
                let size = if norms[k] > 0.0 {
                    norm(&residual) / norms[k]
                } else {
                    norm(&residual)
                };
                unfinished |= size > WANTED_RESIDUAL && size < 0.5 * last[k];
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
        match last.iter().find(|&&size| !(size <= LARGEST_RESIDUAL)) {
            Some(&residual) => Err(LinearError::Inaccurate {
                residual,
                limit: LARGEST_RESIDUAL,
            }),
            None => Ok(solutions),
        }
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
mod tests;
