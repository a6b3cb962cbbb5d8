//! Least-squares fits of psi to a handful of scattered nodal values: how B is read at a point.
//!
//! A first-order element's own gradient is off by several per cent near the axis; a local polynomial through
//! the nodal values around the point is not (polynomial-preserving recovery: Zhang & Naga, SIAM J. Sci. Comput.
//! 26, 2005).

/// psi and its derivatives at a point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Reading {
    /// psi, Wb/rad.
    pub psi: f64,
    /// (B_r, B_z), T.
    pub b: [f64; 2],
}

/// One nodal value, in coordinates relative to the point: (r², z - z0, psi).
#[derive(Clone, Copy, Debug)]
pub struct Sample {
    /// r² of the node, m².
    pub s: f64,
    /// z of the node, m.
    pub z: f64,
    /// psi there, Wb/rad.
    pub psi: f64,
}

/// Most unknowns a fit has.
const MOST: usize = 13;

/// Samples that determine an unknown worse than this (a regular ring leaves 0.01 and more) say nothing about it.
const SMALLEST_PIVOT: f64 = 1e-5;

/// Normal equations of a weighted least-squares problem with up to [`MOST`] unknowns.
struct Normal {
    n: usize,
    matrix: [[f64; MOST]; MOST],
    right: [f64; MOST],
}

impl Normal {
    fn new(n: usize) -> Self {
        Self {
            n,
            matrix: [[0.0; MOST]; MOST],
            right: [0.0; MOST],
        }
    }

    fn add(&mut self, row: &[f64], value: f64, weight: f64) {
        for i in 0..self.n {
            self.right[i] += weight * row[i] * value;
            for j in 0..=i {
                self.matrix[i][j] += weight * row[i] * row[j];
            }
        }
    }

    /// Cholesky on the diagonally scaled matrix; `None` where the samples do not determine the unknowns.
    #[expect(clippy::needless_range_loop, reason = "elimination reads best by its indices")]
    fn solve(mut self) -> Option<[f64; MOST]> {
        let n = self.n;
        let mut scale = [0.0; MOST];
        for i in 0..n {
            let d = self.matrix[i][i];
            if d.is_nan() || d <= 0.0 {
                return None;
            }
            scale[i] = 1.0 / d.sqrt();
        }
        for i in 0..n {
            for j in 0..=i {
                let mut x = self.matrix[i][j] * scale[i] * scale[j];
                for k in 0..j {
                    x -= self.matrix[i][k] * self.matrix[j][k];
                }
                if i == j {
                    // The scaled diagonal is 1: what elimination leaves of it tells how dependent the columns are.
                    if x.is_nan() || x < SMALLEST_PIVOT {
                        return None;
                    }
                    self.matrix[i][i] = x.sqrt();
                } else {
                    self.matrix[i][j] = x / self.matrix[j][j];
                }
            }
        }
        let mut y = [0.0; MOST];
        for i in 0..n {
            let mut x = self.right[i] * scale[i];
            for k in 0..i {
                x -= self.matrix[i][k] * y[k];
            }
            y[i] = x / self.matrix[i][i];
        }
        for i in (0..n).rev() {
            let mut x = y[i];
            for k in i + 1..n {
                x -= self.matrix[k][i] * y[k];
            }
            y[i] = x / self.matrix[i][i];
        }
        for i in 0..n {
            y[i] *= scale[i];
        }
        Some(y)
    }
}

/// Quadratic in (s, z) through samples around (s0, z0), s0 > 0: for any material.
pub fn quadratic(samples: &[Sample], s0: f64, z0: f64) -> Option<Reading> {
    let (hs, hz) = spread(samples, s0, z0);
    let row = |s: f64, z: f64| {
        let (x, y) = ((s - s0) / hs, (z - z0) / hz);
        [1.0, x, y, x * x, x * y, y * y]
    };
    let mut normal = Normal::new(6);
    for p in samples {
        normal.add(&row(p.s, p.z), p.psi, 1.0);
    }
    let a = normal.solve()?;
    Some(Reading {
        psi: a[0],
        b: [-a[2] / hz / s0.sqrt(), 2.0 * a[1] / hs],
    })
}

/// Off the axis, where neither currents nor a change of permeability bend the field: polynomials up to order `degree`
/// around (s0, z0), s0 > 0, that solve 4 s psi_ss + psi_zz = 0 (curl B = 0 in these coordinates): 2 `degree` + 1
/// unknowns, `degree` at most 6.
///
/// With x = (s - s0) / hs and y = (z - z0) / hz the equation reads psi_yy = -(1 + e x) psi_xx, e = hs / s0; a solution
/// is the sum of (-1)^j y^2j / (2j)! L^j x^k, L = (1 + e x) d²/dx², or the same with y^(2j+1) / (2j+1)!.
pub fn curl_free(samples: &[Sample], s0: f64, z0: f64, degree: usize) -> Option<Reading> {
    let degree = degree.min((MOST - 1) / 2);
    let (hs, _) = spread(samples, s0, z0);
    let hz = hs / (2.0 * s0.sqrt());
    let ladders: Vec<Vec<Polynomial>> = (0..=degree).map(|k| ladder(k, hs / s0)).collect();
    let mut normal = Normal::new(2 * degree + 1);
    for p in samples {
        let (x, y) = ((p.s - s0) / hs, (p.z - z0) / hz);
        let mut row = [0.0; MOST];
        for (k, ladder) in ladders.iter().enumerate() {
            let (mut even, mut odd, mut power) = (0.0, 0.0, 1.0);
            for (j, polynomial) in ladder.iter().enumerate() {
                let value = power * polynomial.iter().rev().fold(0.0, |sum, c| sum * x + c);
                even += value;
                odd += value * y / (2 * j + 1) as f64;
                power *= -y * y / ((2 * j + 1) * (2 * j + 2)) as f64;
            }
            row[2 * k] = even;
            if k < degree {
                row[2 * k + 1] = odd;
            }
        }
        normal.add(&row, p.psi, 1.0);
    }
    // Unknowns: 1, y, x, x y, ...
    let a = normal.solve()?;
    Some(Reading {
        psi: a[0],
        b: [-a[1] / hz / s0.sqrt(), 2.0 * a[2] / hs],
    })
}

/// Coefficients of 1, x, x², ...
type Polynomial = [f64; 7];

/// x^k, L x^k, L² x^k, ... until nothing is left.
fn ladder(k: usize, e: f64) -> Vec<Polynomial> {
    let mut rung = Polynomial::default();
    rung[k] = 1.0;
    let mut ladder = Vec::new();
    while rung.iter().any(|c| *c != 0.0) {
        ladder.push(rung);
        let mut next = Polynomial::default();
        for i in 2..rung.len() {
            let twice = (i * (i - 1)) as f64 * rung[i];
            next[i - 2] += twice;
            next[i - 1] += e * twice;
        }
        rung = next;
    }
    ladder
}

/// Near the axis, where neither currents nor a change of permeability bend the field: psi = s q(s, z) with q spanned by
/// the `count` (at most 9) lowest polynomials of a field without curl and divergence,
/// q_m = sum_j (-1)^j m! / (4^j j! (j+1)! (m-2j)!) s^j z^(m-2j). B_z = 2 (q + s q_s), B_r = -r q_z: regular on the axis.
pub fn near_axis(samples: &[Sample], s0: f64, z0: f64, count: usize) -> Option<Reading> {
    let count = count.min(9);
    let size = samples
        .iter()
        .map(|p| p.s.max((p.z - z0).powi(2)))
        .fold(0.0, f64::max)
        .sqrt();
    let mut normal = Normal::new(count);
    for p in samples.iter().filter(|p| p.s > 0.0) {
        let row = axial(p.s / (size * size), (p.z - z0) / size)[0].map(|q| q * p.s);
        // psi / r is A_phi: weighting it evenly keeps the far nodes from ruling the fit.
        normal.add(&row, p.psi, 1.0 / p.s);
    }
    let a = normal.solve()?;
    let [q, q_s, q_z] = axial(s0 / (size * size), 0.0)
        .map(|row| row.iter().zip(&a[..count]).map(|(x, y)| x * y).sum::<f64>());
    Some(Reading {
        psi: s0 * q,
        b: [-s0.sqrt() * q_z / size, 2.0 * (q + s0 * q_s / (size * size))],
    })
}

/// Near the axis in any material: psi = s q(s, z) with q spanned by 1, z, s, z² and s z.
pub fn near_axis_of_any_kind(samples: &[Sample], s0: f64, z0: f64) -> Option<Reading> {
    let size = samples
        .iter()
        .map(|p| p.s.max((p.z - z0).powi(2)))
        .fold(0.0, f64::max)
        .sqrt();
    let mut normal = Normal::new(5);
    for p in samples.iter().filter(|p| p.s > 0.0) {
        let (s, z) = (p.s / (size * size), (p.z - z0) / size);
        normal.add(&[1.0, z, s, z * z, s * z].map(|q| q * p.s), p.psi, 1.0 / p.s);
    }
    let a = normal.solve()?;
    let s = s0 / (size * size);
    let (q, q_s, q_z) = (a[0] + a[2] * s, a[2], a[1] + a[4] * s);
    Some(Reading {
        psi: s0 * q,
        b: [-s0.sqrt() * q_z / size, 2.0 * (q + s0 * q_s / (size * size))],
    })
}

/// Rows of q_m, d q_m / ds and d q_m / dz for m = 0 .. 8.
#[expect(clippy::needless_range_loop, reason = "three rows are filled side by side")]
fn axial(s: f64, z: f64) -> [[f64; MOST]; 3] {
    let mut rows = [[0.0; MOST]; 3];
    for m in 0..9usize {
        let mut c = 1.0;
        for j in 0..=m / 2 {
            let (i, k) = (j as i32, (m - 2 * j) as i32);
            rows[0][m] += c * s.powi(i) * z.powi(k);
            if j > 0 {
                rows[1][m] += c * f64::from(i) * s.powi(i - 1) * z.powi(k);
            }
            if k > 0 {
                rows[2][m] += c * f64::from(k) * s.powi(i) * z.powi(k - 1);
            }
            c *= -f64::from(k * (k - 1)) / f64::from(4 * (i + 1) * (i + 2));
        }
    }
    rows
}

fn spread(samples: &[Sample], s0: f64, z0: f64) -> (f64, f64) {
    let far = |f: &dyn Fn(&Sample) -> f64| samples.iter().map(f).fold(f64::MIN_POSITIVE, f64::max);
    (far(&|p| (p.s - s0).abs()), far(&|p| (p.z - z0).abs()))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn cloud(r0: f64, z0: f64, h: f64, psi: impl Fn(f64, f64) -> f64) -> Vec<Sample> {
        let mut out = Vec::new();
        for i in -2..=2 {
            for j in -2..=2 {
                let (r, z) = (
                    r0 + h * (f64::from(i) + 0.1 * f64::from(j)),
                    z0 + h * f64::from(j),
                );
                if r >= 0.0 {
                    out.push(Sample {
                        s: r * r,
                        z,
                        psi: psi(r * r, z),
                    });
                }
            }
        }
        out
    }

    #[test]
    fn a_quadratic_is_read_exactly() {
        let psi = |s: f64, z: f64| 0.3 + 2.0 * s - 0.7 * z + 0.2 * s * z + s * s - 3.0 * z * z;
        let (r, z) = (0.8, -0.2);
        let got = quadratic(&cloud(r, z, 0.05, psi), r * r, z).unwrap();
        assert!((got.psi - psi(r * r, z)).abs() < 1e-10);
        assert!((got.b[1] - 2.0 * (2.0 + 0.2 * z + 2.0 * r * r)).abs() < 1e-8);
        assert!((got.b[0] + (-0.7 + 0.2 * r * r - 6.0 * z) / r).abs() < 1e-8);
    }

    #[test]
    fn a_dipole_beside_the_axis_is_read_to_fifth_order() {
        // psi of a point dipole at the origin: s / rho³; on the axis B_z = 2 / z³.
        let psi = |s: f64, z: f64| s * (s + z * z).powf(-1.5);
        let error = |h: f64| {
            let got = near_axis(&cloud(0.0, 1.0, h, psi), 0.0, 1.0, 5).unwrap();
            (got.b[1] - 2.0).abs()
        };
        let (a, b) = (error(0.1), error(0.05));
        assert!((a / b).log2() > 3.5, "{a} {b}");
    }

    #[test]
    fn a_dipole_beside_it_is_read_to_third_order() {
        let psi = |s: f64, z: f64| s * (s + z * z).powf(-1.5);
        let error = |h: f64| {
            let got = curl_free(&cloud(1.0, 0.5, h, psi), 1.0, 0.5, 3).unwrap();
            // B_z = (2 z² - r²) / rho^5.
            (got.b[1] - (2.0 * 0.25 - 1.0) * 1.25f64.powf(-2.5)).abs()
        };
        let (a, b) = (error(0.1), error(0.05));
        assert!((a / b).log2() > 2.5, "{a} {b}");
    }

    #[test]
    fn the_curl_free_polynomials_solve_their_equation() {
        // Each basis function, scaled arbitrarily, is reproduced, and so is a sum of them.
        let (s0, z0, r0) = (1.44, 0.3, 1.2);
        let psi = |s: f64, z: f64| {
            let (x, y) = (s - s0, z - z0);
            2.0 + x + 3.0 * y + (x * x - 4.0 * s * y * y) + x.powi(3) - 12.0 * x * s * y * y
                + 8.0 * s * y.powi(4)
                + (x * x * y - 4.0 / 3.0 * s * y.powi(3))
        };
        for degree in 3..=5 {
            let got = curl_free(&cloud(r0, z0, 0.05, psi), s0, z0, degree).unwrap();
            assert!(
                (got.psi - 2.0).abs() < 1e-10 && (got.b[1] - 2.0).abs() < 1e-7,
                "{got:?}"
            );
            assert!((got.b[0] + 3.0 / r0).abs() < 1e-7, "{got:?}");
        }
    }

    #[test]
    fn too_few_samples_are_refused() {
        let few = cloud(0.8, 0.0, 0.1, |s, _| s);
        assert!(quadratic(&few[..4], 0.64, 0.0).is_none());
    }
}
