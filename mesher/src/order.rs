//! Places along a space-filling curve: nodes and triangles that are near in the plane get near numbers.

use crate::curve::{Bounds, Point};

/// Bits per coordinate: fine enough to tell the layers of a gap of 1e-8 of the drawing apart.
const BITS: u32 = 30;

/// Place of a point along the Hilbert curve through a box.
pub(crate) fn hilbert_key(point: Point, bounds: Bounds) -> u64 {
    let extent = (bounds.high.r - bounds.low.r).max(bounds.high.z - bounds.low.z);
    let cells = f64::from(1_u32 << BITS);
    let cell = |offset: f64| ((offset / extent * cells).max(0.0) as u64).min((1 << BITS) - 1);
    let (mut x, mut y) = (cell(point.r - bounds.low.r), cell(point.z - bounds.low.z));
    let mut key = 0_u64;
    for bit in (0..BITS).rev() {
        let (rx, ry) = ((x >> bit) & 1, (y >> bit) & 1);
        key = (key << 2) | ((3 * rx) ^ ry);
        if ry == 0 {
            if rx == 1 {
                let all = (1 << BITS) - 1;
                (x, y) = (all - x, all - y);
            }
            (x, y) = (y, x);
        }
    }
    key
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn consecutive_places_are_neighbours() {
        let bounds = Bounds {
            low: Point::new(0.0, 0.0),
            high: Point::new(1.0, 1.0),
        };
        let mut cells: Vec<(u64, i32, i32)> = Vec::new();
        for i in 0..16 {
            for j in 0..16 {
                let point = Point::new((f64::from(i) + 0.5) / 16.0, (f64::from(j) + 0.5) / 16.0);
                cells.push((hilbert_key(point, bounds), i, j));
            }
        }
        cells.sort_unstable();
        for pair in cells.windows(2) {
            assert_eq!(
                (pair[0].1 - pair[1].1).abs() + (pair[0].2 - pair[1].2).abs(),
                1,
                "{pair:?}"
            );
        }
    }
}
