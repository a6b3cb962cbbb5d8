//! Gauss-Legendre rules, computed to round-off for any number of points.

/// Points and weights of the Gauss-Legendre rule with `points` points on [0, 1]; the weights add up to 1, and
/// polynomials up to degree 2 `points` - 1 are integrated exactly. Points ascend.
///
/// Newton's iteration on the Legendre polynomial from Tricomi's asymptotic roots; weights 2/((1 - x²) P_n'²).
/// Published source: DLMF 3.5(v) and 18.16(vi).
pub fn gauss_legendre(points: usize) -> Vec<[f64; 2]> {
    let n = points as f64;
    let mut rule = vec![[0.0; 2]; points];
    for i in 0..points.div_ceil(2) {
        let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (n + 0.5)).cos();
        let mut slope = 1.0;
        for _ in 0..6 {
            let (value, derivative) = legendre(points, x);
            slope = derivative;
            x -= value / derivative;
        }
        if 2 * i + 1 == points {
            x = 0.0;
            slope = legendre(points, x).1;
        }
        let weight = 1.0 / ((1.0 - x) * (1.0 + x) * slope * slope);
        rule[i] = [0.5 * (1.0 - x), weight];
        rule[points - 1 - i] = [0.5 * (1.0 + x), weight];
    }
    rule
}

/// P_n and its derivative at |x| < 1, for n > 0.
fn legendre(n: usize, x: f64) -> (f64, f64) {
    let (mut before, mut here) = (1.0, x);
    for k in 1..n {
        let k = k as f64;
        (before, here) = (here, ((2.0 * k + 1.0) * x * here - k * before) / (k + 1.0));
    }
    (here, n as f64 * (before - x * here) / ((1.0 - x) * (1.0 + x)))
}

#[cfg(test)]
mod tests {
    use super::gauss_legendre;

    #[test]
    fn monomials_are_exact_up_to_the_promised_degree_and_not_beyond() {
        for points in [1, 2, 5, 10, 16, 26] {
            let rule = gauss_legendre(points);
            let moment = |k: usize| rule.iter().map(|[x, w]| w * x.powi(k as i32)).sum::<f64>();
            for k in 0..2 * points {
                let exact = 1.0 / (k as f64 + 1.0);
                // Each of the weights and powers carries a few roundings.
                assert!(
                    (moment(k) - exact).abs() < 4e-16 * (k as f64 + 4.0),
                    "{points} points, degree {k}"
                );
            }
            let next = 2 * points;
            if points <= 5 {
                assert!((moment(next) - 1.0 / (next as f64 + 1.0)).abs() > 1e-7);
            }
            assert!(rule.windows(2).all(|pair| pair[0][0] < pair[1][0]));
        }
    }
}
