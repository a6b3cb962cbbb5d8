//! Which part shows at each place of the page, on a coarse grid: what the placing of words and marks goes by.

use super::outline::{PartShape, polygons};
use super::view::View;

/// Side of a cell, page units.
pub const CELL: f64 = 3.0;

/// The part at each cell of the described half section.
#[derive(Debug)]
pub struct Mask {
    /// Cells across.
    pub columns: usize,
    /// Cells down.
    pub rows: usize,
    /// Index of the part plus one; 0 for air.
    cells: Vec<u32>,
}

impl Mask {
    /// Paints the parts by scan lines (even-odd).
    pub fn of(parts: &[PartShape], view: &View) -> Self {
        let columns = (view.half_width() / CELL).floor().max(1.0) as usize;
        let rows = (view.described_height() / CELL).floor().max(1.0) as usize;
        let mut mask = Self {
            columns,
            rows,
            cells: vec![0; columns * rows],
        };
        for (index, part) in parts.iter().enumerate() {
            let on_page = |p: &[f64; 2]| view.page(mesher::Point::new(p[0], p[1]));
            let loops: Vec<Vec<[f64; 2]>> = polygons(part)
                .iter()
                .map(|points| points.iter().map(on_page).collect())
                .collect();
            for row in 0..rows {
                mask.paint_row(row, &loops, index as u32 + 1);
            }
        }
        mask
    }

    fn paint_row(&mut self, row: usize, loops: &[Vec<[f64; 2]>], mark: u32) {
        let y = (row as f64 + 0.5) * CELL;
        let mut crossings = Vec::new();
        for points in loops {
            for (a, b) in points.iter().zip(points.iter().cycle().skip(1)) {
                if (a[1] <= y) != (b[1] <= y) {
                    crossings.push(a[0] + (y - a[1]) / (b[1] - a[1]) * (b[0] - a[0]));
                }
            }
        }
        crossings.sort_by(f64::total_cmp);
        for pair in crossings.chunks_exact(2) {
            let first = (pair[0] / CELL - 0.5).ceil().max(0.0) as usize;
            let last = (pair[1] / CELL - 0.5).floor();
            if last >= 0.0 {
                for column in first..=(last as usize).min(self.columns - 1) {
                    self.cells[row * self.columns + column] = mark;
                }
            }
        }
    }

    /// The part at a cell.
    pub fn part(&self, column: usize, row: usize) -> Option<usize> {
        (self.cells[row * self.columns + column] as usize).checked_sub(1)
    }

    /// Middle of a cell on the page, right of the axis.
    pub fn middle(column: usize, row: usize) -> [f64; 2] {
        [(column as f64 + 0.5) * CELL, (row as f64 + 0.5) * CELL]
    }

    /// The cell of a part farthest from its edge, and how far that is on the page (a square's half side).
    pub fn heart(&self, part: usize) -> Option<([f64; 2], f64)> {
        // Side of the largest square of the part whose lower right cell is this one.
        let mut side = vec![0u32; self.cells.len()];
        let mut best = (0u32, 0usize, 0usize);
        for row in 0..self.rows {
            for column in 0..self.columns {
                if self.part(column, row) != Some(part) {
                    continue;
                }
                let at = |c: usize, r: usize| side[r * self.columns + c];
                let grown = match (column, row) {
                    (0, _) | (_, 0) => 0,
                    _ => at(column - 1, row)
                        .min(at(column, row - 1))
                        .min(at(column - 1, row - 1)),
                };
                side[row * self.columns + column] = grown + 1;
                if grown + 1 > best.0 {
                    best = (grown + 1, column, row);
                }
            }
        }
        let (side_of_best, column, row) = best;
        (side_of_best > 0).then(|| {
            let half = 0.5 * f64::from(side_of_best) * CELL;
            // Long parts have many such squares; take the one in the middle of them along the longer side.
            let same: Vec<(usize, usize)> = (0..self.cells.len())
                .filter(|&at| side[at] == side_of_best)
                .map(|at| (at % self.columns, at / self.columns))
                .filter(|&(c, r)| c == column || r == row)
                .collect();
            let (c, r) = same.get(same.len() / 2).copied().unwrap_or((column, row));
            (
                [(c as f64 + 1.0) * CELL - half, (r as f64 + 1.0) * CELL - half],
                half,
            )
        })
    }
}
