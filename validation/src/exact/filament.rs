//! Two coaxial circular filaments: Maxwell, A Treatise on Electricity and Magnetism, vol. 2, §701; Rosa & Grover,
//! NBS Scientific Paper 169 (1912), formula 1.

use super::MU0;
use super::elliptic::complete;
use super::quadrature::gauss;

/// Mutual inductance, H, of filaments of radii `a` and `b` at axial distance `d`, m.
pub fn mutual(a: f64, b: f64, d: f64) -> f64 {
    let far = (a + b).powi(2) + d * d;
    let k = (4.0 * a * b / far).sqrt();
    let (big_k, big_e) = complete(((a - b).powi(2) + d * d) / far);
    MU0 * (a * b).sqrt() * ((2.0 / k - k) * big_k - 2.0 / k * big_e)
}

/// Its derivative in `d`, H/m: the axial force per ampere squared on the filament at +d, negative where it is
/// pulled back.
pub fn mutual_slope(a: f64, b: f64, d: f64) -> f64 {
    let far = (a + b).powi(2) + d * d;
    let k2 = 4.0 * a * b / far;
    let m1 = ((a - b).powi(2) + d * d) / far;
    let (big_k, big_e) = complete(m1);
    MU0 * d * k2.sqrt() / (2.0 * (a * b).sqrt()) * (big_k - (2.0 - k2) / (2.0 * m1) * big_e)
}

/// A ring of rectangular section, its current spread evenly.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ring {
    /// Inner and outer radius, m.
    pub r: [f64; 2],
    /// Lower and upper face, m.
    pub z: [f64; 2],
}

impl Ring {
    /// A square ring of side `side` around a filament of radius `a` at height `z`.
    pub fn around(a: f64, z: f64, side: f64) -> Self {
        let h = 0.5 * side;
        Self {
            r: [a - h, a + h],
            z: [z - h, z + h],
        }
    }

    fn points(&self, n: [usize; 2]) -> Vec<(f64, f64, f64)> {
        let area = (self.r[1] - self.r[0]) * (self.z[1] - self.z[0]);
        let along = gauss(n[1], self.z[0], self.z[1]);
        gauss(n[0], self.r[0], self.r[1])
            .into_iter()
            .flat_map(|(r, wr)| along.iter().map(move |&(z, wz)| (r, z, wr * wz / area)))
            .collect()
    }
}

/// Mean of a filament formula `f(a, b, d)` over the sections of two separate rings: the mutual inductance (or its
/// slope) of one turn each. `n` points radially and axially in each section.
pub fn mean_over(one: Ring, two: Ring, n: [usize; 2], f: impl Fn(f64, f64, f64) -> f64) -> f64 {
    let second = two.points(n);
    one.points(n)
        .iter()
        .map(|&(a, za, wa)| {
            wa * second
                .iter()
                .map(|&(b, zb, wb)| wb * f(a, b, zb - za))
                .sum::<f64>()
        })
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stored_values_agree_to_ten_digits() {
        for (a, b, d, m, slope) in [
            (0.25, 0.25, 0.2, 1.670_857_836_47e-7, -1.050_907_100_818e-6),
            (0.25, 0.2, 0.1, 2.487_873_590_42e-7, -1.850_904_716_241e-6),
            (0.08, 0.06, 0.03, 7.423_293_403_09e-8, -1.633_433_312_204e-6),
        ] {
            assert!((mutual(a, b, d) / m - 1.0).abs() < 1e-11);
            assert!((mutual_slope(a, b, d) / slope - 1.0).abs() < 1e-11);
        }
    }

    #[test]
    fn the_mean_over_small_squares_differs_by_the_known_second_order_term() {
        // For a square of side w the mean of M changes by w²/24 (M_bb + M_dd) = w²/24 M_b / b.
        let (a, b, d, w) = (0.08, 0.06, 0.03, 0.002);
        let slope = |x: f64, y: f64| (mutual(x + 1e-6, y, d) - mutual(x - 1e-6, y, d)) / 2e-6;
        let expected = w * w / 24.0 * (slope(a, b) / a + slope(b, a) / b);
        let mean = mean_over(Ring::around(a, 0.0, w), Ring::around(b, d, w), [4, 4], mutual);
        let found = mean - mutual(a, b, d);
        // The next term is of order (w / d)² smaller.
        assert!(
            (found / expected - 1.0).abs() < (w / d).powi(2) * 4.0,
            "{found} {expected}"
        );
    }
}
