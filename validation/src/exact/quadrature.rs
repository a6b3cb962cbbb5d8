//! Gauss-Legendre rules, their nodes found by Newton's method on the Legendre polynomial.

/// Nodes and weights of the rule with `n` points on (a, b).
pub fn gauss(n: usize, a: f64, b: f64) -> Vec<(f64, f64)> {
    let (middle, half) = (0.5 * (a + b), 0.5 * (b - a));
    (0..n)
        .map(|i| {
            let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (n as f64 + 0.5)).cos();
            let mut slope = 1.0;
            for _ in 0..100 {
                let (p, d) = legendre(n, x);
                slope = d;
                let step = p / d;
                x -= step;
                if step.abs() < 1e-15 {
                    break;
                }
            }
            (middle + half * x, half * 2.0 / ((1.0 - x * x) * slope * slope))
        })
        .collect()
}

/// P_n(x) and its derivative, |x| < 1.
fn legendre(n: usize, x: f64) -> (f64, f64) {
    let (mut before, mut p) = (1.0, x);
    for k in 2..=n {
        let k = k as f64;
        (before, p) = (p, ((2.0 * k - 1.0) * x * p - (k - 1.0) * before) / k);
    }
    (p, n as f64 * (x * p - before) / (x * x - 1.0))
}

/// Integral of `f` over (a, b) with `n` points on each of `pieces` equal pieces.
pub fn integrate(a: f64, b: f64, pieces: usize, n: usize, f: impl Fn(f64) -> f64) -> f64 {
    let width = (b - a) / pieces as f64;
    let unit = gauss(n, 0.0, width);
    (0..pieces)
        .flat_map(|piece| unit.iter().map(move |&(x, w)| (a + width * piece as f64 + x, w)))
        .map(|(x, w)| w * f(x))
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_rule_of_n_points_is_exact_to_degree_2n_minus_1() {
        for n in [2usize, 5, 16] {
            let degree = 2 * n as i32 - 1;
            let exact = (2f64.powi(degree + 1) - 1.0) / f64::from(degree + 1);
            let ours = integrate(1.0, 2.0, 1, n, |x| x.powi(degree));
            assert!((ours / exact - 1.0).abs() < 1e-13, "{n}: {ours} {exact}");
        }
    }
}
