//! The order in which free nodes are numbered: along a space-filling curve, so that neighbours in the plane are
//! neighbours in memory whatever order the mesh came in. Assembly, products and the elimination order gain by it.

use rayon::prelude::*;

/// Bits of each coordinate.
const BITS: u32 = 24;

/// Places of points along Hilbert's curve through the square that holds them all; the curve's own order, not a
/// distance. Coordinates must be finite. Published source: Hilbert, Math. Ann. 38 (1891).
pub(super) fn along_curve(
    r: impl Fn(usize) -> f64 + Sync,
    z: impl Fn(usize) -> f64 + Sync,
    count: usize,
) -> Vec<u64> {
    let span = |x: &(dyn Fn(usize) -> f64 + Sync)| {
        (0..count).into_par_iter().map(|i| (x(i), x(i))).reduce(
            || (f64::INFINITY, f64::NEG_INFINITY),
            |a, b| (a.0.min(b.0), a.1.max(b.1)),
        )
    };
    let ((r0, r1), (z0, z1)) = (span(&r), span(&z));
    let side = (r1 - r0).max(z1 - z0);
    let scale = if side > 0.0 {
        f64::from((1u32 << BITS) - 1) / side
    } else {
        0.0
    };
    (0..count)
        .into_par_iter()
        .map(|i| hilbert(((r(i) - r0) * scale) as u32, ((z(i) - z0) * scale) as u32))
        .collect()
}

/// Place of the cell (x, y) along the curve through 2^24 by 2^24 cells: quadrant by quadrant, turned and mirrored
/// so that the end of each joins the beginning of the next.
fn hilbert(mut x: u32, mut y: u32) -> u64 {
    let mut place = 0u64;
    for bit in (0..BITS).rev() {
        let (right, upper) = (x >> bit & 1, y >> bit & 1);
        place = place << 2 | u64::from((3 * right) ^ upper);
        if upper == 0 {
            if right == 1 {
                let all = (1 << BITS) - 1;
                (x, y) = (all - x, all - y);
            }
            (x, y) = (y, x);
        }
    }
    place
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cells_next_to_each_other_on_the_curve_touch_in_the_plane() {
        // The lowest 64 by 64 cells are the first 4096 places of the curve, in some order without gaps.
        let side = 64u32;
        let mut cells: Vec<(u64, u32, u32)> = (0..side)
            .flat_map(|x| (0..side).map(move |y| (hilbert(x, y), x, y)))
            .collect();
        cells.sort_unstable();
        for (k, pair) in cells.windows(2).enumerate() {
            assert_eq!(pair[0].0, k as u64);
            assert_eq!(pair[0].1.abs_diff(pair[1].1) + pair[0].2.abs_diff(pair[1].2), 1);
        }
    }

    #[test]
    fn a_single_place_is_no_trouble() {
        assert_eq!(along_curve(|_| 1.0, |_| -3.0, 3), vec![0; 3]);
        assert!(along_curve(|_| 1.0, |_| -3.0, 0).is_empty());
    }
}
