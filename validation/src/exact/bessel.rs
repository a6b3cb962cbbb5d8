//! Bessel functions J0 and J1 of real positive argument, to about 1e-13.

use std::f64::consts::PI;

/// Where the asymptotic series takes over: its smallest term there is below 1e-17.
const ASYMPTOTIC_FROM: f64 = 25.0;

/// J_n(x) for n = 0 or 1 and x >= 0.
pub fn j(n: u8, x: f64) -> f64 {
    if x < ASYMPTOTIC_FROM {
        integral(n, x)
    } else {
        asymptotic(n, x)
    }
}

/// Bessel's integral (DLMF 10.9.2); the trapezoidal rule converges faster than any power here.
fn integral(n: u8, x: f64) -> f64 {
    const POINTS: usize = 64;
    let sum: f64 = (0..2 * POINTS)
        .map(|i| PI * i as f64 / POINTS as f64)
        .map(|t| (f64::from(n) * t - x * t.sin()).cos())
        .sum();
    sum / (2 * POINTS) as f64
}

/// Hankel's expansion (DLMF 10.17.3).
fn asymptotic(n: u8, x: f64) -> f64 {
    let mu = 4.0 * f64::from(n) * f64::from(n);
    let (mut p, mut q, mut term) = (0.0, 0.0, 1.0);
    for k in 0..20u32 {
        match k % 4 {
            0 => p += term,
            1 => q += term,
            2 => p -= term,
            _ => q -= term,
        }
        let odd = f64::from(2 * k + 1);
        term *= (mu - odd * odd) / (f64::from(k + 1) * 8.0 * x);
    }
    let phase = x - 0.5 * f64::from(n) * PI - 0.25 * PI;
    (2.0 / (PI * x)).sqrt() * (p * phase.cos() - q * phase.sin())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_zeros_are_zeros() {
        // First zeros of J0 and J1, DLMF table 10.21(vii); a far one where the other branch is used.
        assert!(j(0, 2.404_825_557_695_773).abs() < 1e-14);
        assert!(j(1, 3.831_705_970_207_512).abs() < 1e-14);
        assert!(j(0, 30.634_606_468_431_976).abs() < 1e-14);
    }

    #[test]
    fn both_branches_agree_where_they_meet() {
        for n in [0, 1] {
            assert!((integral(n, 26.0) - asymptotic(n, 26.0)).abs() < 1e-14);
        }
    }
}
