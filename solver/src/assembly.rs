//! The stiffness matrix over the free nodes. Each row is gathered by its own node from the triangles around it,
//! in ascending order: no two threads write to one place, and the sums do not depend on their number.

use nalgebra_sparse::CsrMatrix;
use nalgebra_sparse::pattern::SparsityPattern;
use rayon::prelude::*;

use crate::linear::{LowRank, Matrix};
use crate::space::{FIXED, Space};

/// What corners i and j of triangle t share in the matrix.
pub type Entry<'e> = dyn Fn(usize, usize, usize) -> f64 + Sync + 'e;

/// Rows that one task takes.
const ROWS_PER_TASK: usize = 4096;

/// Which free nodes meet in a triangle: rows and columns are free numbers, both halves are stored.
pub fn pattern(space: &Space) -> SparsityPattern {
    let n = space.free_nodes.len();
    let tasks: Vec<(Vec<usize>, Vec<usize>)> = space
        .free_nodes
        .par_chunks(ROWS_PER_TASK)
        .map(|nodes| {
            let (mut lengths, mut columns) = (Vec::with_capacity(nodes.len()), Vec::new());
            let mut row: Vec<u32> = Vec::new();
            for &node in nodes {
                row.clear();
                for &t in space.fan(node as usize) {
                    row.extend(space.triangles[t as usize].map(|corner| space.free[corner as usize]));
                }
                row.sort_unstable();
                row.dedup();
                // FIXED is the largest number, so it stands last if at all.
                row.pop_if(|number| *number == FIXED);
                lengths.push(row.len());
                columns.extend(row.iter().map(|&number| number as usize));
            }
            (lengths, columns)
        })
        .collect();
    let mut offsets = Vec::with_capacity(n + 1);
    let mut indices = Vec::with_capacity(tasks.iter().map(|(_, columns)| columns.len()).sum());
    offsets.push(0);
    for (lengths, columns) in tasks {
        for length in lengths {
            offsets.push(offsets[offsets.len() - 1] + length);
        }
        indices.extend(columns);
    }
    debug_assert_eq!(indices.len(), offsets[n]);
    match SparsityPattern::try_from_offsets_and_indices(n, n, offsets, indices) {
        Ok(pattern) => pattern,
        // Invariant: offsets count up from 0, rows are sorted without repetition, columns are below n.
        Err(why) => unreachable!("rows gathered from fans are a pattern: {why}"),
    }
}

/// The interior's matrix on that pattern; `entry(t, i, j)` is what corners i and j of triangle t share in it, the same
/// to the last bit as (j, i).
pub fn interior(space: &Space, pattern: SparsityPattern, entry: &Entry<'_>) -> CsrMatrix<f64> {
    let mut values = vec![0.0; pattern.nnz()];
    let offsets = pattern.major_offsets();
    let mut tasks = Vec::with_capacity(space.free_nodes.len() / ROWS_PER_TASK + 1);
    let mut rest = values.as_mut_slice();
    for first in (0..space.free_nodes.len()).step_by(ROWS_PER_TASK) {
        let last = (first + ROWS_PER_TASK).min(space.free_nodes.len());
        let (mine, others) = rest.split_at_mut(offsets[last] - offsets[first]);
        tasks.push((first, last, mine));
        rest = others;
    }
    tasks.into_par_iter().for_each(|(first, last, values)| {
        for row in first..last {
            let columns = pattern.lane(row);
            let values = &mut values[offsets[row] - offsets[first]..][..columns.len()];
            gather_row(space, entry, row, columns, values);
        }
    });
    match CsrMatrix::try_from_pattern_and_values(pattern, values) {
        Ok(matrix) => matrix,
        // Invariant: `values` was made with the pattern's length.
        Err(why) => unreachable!("as many values as pattern entries: {why}"),
    }
}

fn gather_row(space: &Space, entry: &Entry<'_>, row: usize, columns: &[usize], values: &mut [f64]) {
    let node = space.free_nodes[row];
    for &t in space.fan(node as usize) {
        let t = t as usize;
        let corners = space.triangles[t];
        // Invariant: a triangle of the node's fan has the node as a corner.
        let i = if corners[0] == node {
            0
        } else {
            1 + usize::from(corners[2] == node)
        };
        for (j, corner) in corners.into_iter().enumerate() {
            let column = space.free[corner as usize];
            if column == FIXED {
                continue;
            }
            if let Some(place) = columns.iter().position(|&c| c == column as usize) {
                values[place] += entry(t, i, j);
            }
        }
    }
}

/// The exterior as low rank on the free numbers: sum over the orders of w_n p_n p_n^T.
pub fn exterior(space: &Space) -> LowRank {
    let Some(exterior) = &space.exterior else {
        return LowRank::default();
    };
    let mut kept: Vec<(usize, usize)> = exterior
        .nodes
        .iter()
        .enumerate()
        .filter(|(_, node)| space.free[**node as usize] != FIXED)
        .map(|(k, &node)| (space.free[node as usize] as usize, k))
        .collect();
    kept.sort_unstable();
    let rows = kept.iter().map(|&(row, _)| row).collect();
    let vectors = exterior
        .weights
        .iter()
        .enumerate()
        .map(|(order, weight)| {
            let p = exterior.projection_row(order);
            kept.iter().map(|&(_, k)| weight.sqrt() * p[k]).collect()
        })
        .collect();
    LowRank { rows, vectors }
}

/// The whole system: interior and exterior.
pub fn system(space: &Space, pattern: SparsityPattern, entry: &Entry<'_>) -> Matrix {
    Matrix {
        sparse: interior(space, pattern, entry),
        low_rank: exterior(space),
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
