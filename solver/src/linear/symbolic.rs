//! The analysis of a pattern for the bordered system, and its entries in faer's order.

use std::sync::Arc;

use faer::Side;
use faer::dyn_stack::{MemBuffer, MemStack};
use faer::perm::PermRef;
use faer::sparse::SymbolicSparseColMatRef;
use faer::sparse::linalg::cholesky::{
    CholeskySymbolicParams, SymbolicCholesky, SymmetricOrdering, factorize_symbolic_cholesky,
};
use faer::sparse::linalg::{SupernodalThreshold, amd};
use nalgebra_sparse::pattern::SparsityPattern;

use super::LinearError;
use super::matrix::{LowRank, Matrix};

/// The analysis of a pattern: elimination order and where the factor has entries. It serves every matrix on the
/// pattern.
#[derive(Clone, Debug)]
pub struct Symbolic {
    pub(super) unknowns: usize,
    border: usize,
    column_starts: Arc<[u32]>,
    row_indices: Arc<[u32]>,
    pub(super) factor: Arc<SymbolicCholesky<u32>>,
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
            ..Default::default()
        };
        let order = SymmetricOrdering::Custom(PermRef::new_checked(&forward, &inverse, size));
        let factor = factorize_symbolic_cholesky(view, Side::Lower, order, params).map_err(|_| no_room())?;
        Ok(Self {
            unknowns,
            border,
            column_starts: column_starts.into(),
            row_indices: row_indices.into(),
            factor: Arc::new(factor),
        })
    }

    /// Entries of the factor (8 bytes each).
    pub fn factor_entries(&self) -> usize {
        self.factor.len_val()
    }

    /// Row of the bordered system (border after the unknowns) that is eliminated at this place.
    pub(super) fn row_at(&self, place: usize) -> usize {
        self.factor
            .perm()
            .map_or(place, |perm| perm.arrays().0[place] as usize)
    }

    /// Entries of the lower half of the bordered system.
    pub(super) fn entries(&self) -> usize {
        self.row_indices.len()
    }

    /// Rows of the bordered system.
    pub(super) fn size(&self) -> usize {
        self.unknowns + self.border
    }

    /// Lower half of the bordered system, by columns.
    pub(super) fn view(&self) -> SymbolicSparseColMatRef<'_, u32> {
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
pub(super) fn bordered_values(matrix: &Matrix, capacity: usize) -> Vec<f64> {
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
