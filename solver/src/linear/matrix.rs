//! A symmetric matrix as sparse rows and a few rank-one terms.

use nalgebra_sparse::CsrMatrix;
use rayon::prelude::*;

use super::LinearError;

/// Rows that one task takes; fixed, so that sums do not depend on the number of threads.
const ROWS_PER_TASK: usize = 8192;

/// sum of v v^T over a few vectors that are zero outside some rows.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct LowRank {
    /// Rows where the vectors may differ from zero, ascending.
    pub rows: Vec<usize>,
    /// The vectors, each as long as `rows`.
    pub vectors: Vec<Vec<f64>>,
}

/// A symmetric matrix: `sparse` (both halves stored) plus `low_rank`.
#[derive(Clone, Debug, PartialEq)]
pub struct Matrix {
    /// The sparse part, n by n.
    pub sparse: CsrMatrix<f64>,
    /// The rank-one terms.
    pub low_rank: LowRank,
}

impl LowRank {
    /// y += (sum of v v^T) x.
    fn add_product(&self, x: &[f64], y: &mut [f64]) {
        let mut added = vec![0.0; self.rows.len()];
        for v in &self.vectors {
            let share: f64 = v.iter().zip(&self.rows).map(|(v, &row)| v * x[row]).sum();
            for (sum, v) in added.iter_mut().zip(v) {
                *sum += share * v;
            }
        }
        for (sum, &row) in added.iter().zip(&self.rows) {
            y[row] += sum;
        }
    }
}

impl Matrix {
    /// Number of rows.
    pub fn len(&self) -> usize {
        self.sparse.nrows()
    }

    /// Whether there are no rows.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }

    /// The product with a vector of length n.
    pub fn product(&self, x: &[f64]) -> Vec<f64> {
        let (offsets, columns, values) = self.sparse.csr_data();
        let mut y = vec![0.0; self.len()];
        y.par_chunks_mut(ROWS_PER_TASK).enumerate().for_each(|(task, y)| {
            for (k, y) in y.iter_mut().enumerate() {
                let row = task * ROWS_PER_TASK + k;
                let span = offsets[row]..offsets[row + 1];
                *y = columns[span.clone()]
                    .iter()
                    .zip(&values[span])
                    .map(|(&c, v)| v * x[c])
                    .sum();
            }
        });
        self.low_rank.add_product(x, &mut y);
        y
    }

    /// load - matrix x.
    pub fn residual(&self, x: &[f64], load: &[f64]) -> Vec<f64> {
        let mut r = self.product(x);
        r.par_iter_mut().zip(load).for_each(|(r, b)| *r = b - *r);
        r
    }

    /// The diagonal of the whole matrix.
    pub fn diagonal(&self) -> Vec<f64> {
        let mut diagonal: Vec<f64> = (0..self.len())
            .into_par_iter()
            .map(|row| {
                let row_view = self.sparse.row(row);
                let at = row_view.col_indices().binary_search(&row);
                at.map_or(0.0, |k| row_view.values()[k])
            })
            .collect();
        for v in &self.low_rank.vectors {
            for (v, &row) in v.iter().zip(&self.low_rank.rows) {
                diagonal[row] += v * v;
            }
        }
        diagonal
    }
}

/// 2-norm, summed in fixed order.
pub(super) fn norm(x: &[f64]) -> f64 {
    let parts: Vec<f64> = x
        .par_chunks(ROWS_PER_TASK)
        .map(|part| part.iter().map(|x| x * x).sum::<f64>())
        .collect();
    parts.iter().sum::<f64>().sqrt()
}

/// An error naming the first entry that is infinite or not a number.
pub(super) fn check_finite(what: &'static str, x: &[f64]) -> Result<(), LinearError> {
    match x.par_iter().position_first(|x| !x.is_finite()) {
        Some(index) => Err(LinearError::NotFinite { what, index }),
        None => Ok(()),
    }
}
