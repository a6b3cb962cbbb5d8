//! Integrals over one triangle in the plane (s, z), s = r². Everything is per radian of azimuth: the device's
//! value is 2 pi times it. A hat is affine in (s, z), 1 at its own corner and 0 at the two others.
//!
//! psi linear in (r², z): Melissen & Simkin, IEEE Trans. Magn. 26 (1990); Henrotte et al., IEEE Trans. Magn. 29
//! (1993).

/// Gradients of the three hats and the two integrals the energy needs, on one triangle.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Element {
    /// d hat_i / ds, 1/m².
    pub b: [f64; 3],
    /// d hat_i / dz, 1/m.
    pub c: [f64; 3],
    /// Integral of ds dz, m³ (with the bulge, where an edge lies on the outer circle).
    pub area: f64,
    /// Integral of ds dz / s, m (likewise); 0 on a triangle with an edge on the axis, where psi_z = 0.
    pub over_s: f64,
}

impl Element {
    /// The straight triangle with corners `s` (m²) and `z` (m); `None` unless it runs counter-clockwise with a
    /// finite positive area.
    pub fn straight(s: [f64; 3], z: [f64; 3]) -> Option<Self> {
        let area = straight_area(s, z);
        if !(area > 0.0 && area.is_finite()) {
            return None;
        }
        let twice = 2.0 * area;
        let b = [
            (z[1] - z[2]) / twice,
            (z[2] - z[0]) / twice,
            (z[0] - z[1]) / twice,
        ];
        let c = [
            (s[2] - s[1]) / twice,
            (s[0] - s[2]) / twice,
            (s[1] - s[0]) / twice,
        ];
        Some(Self {
            b,
            c,
            area,
            over_s: area * mean_over_s(s),
        })
    }

    /// (psi_s, psi_z) of the function with these corner values, Wb/(rad m²) and Wb/(rad m).
    pub fn gradient(&self, u: [f64; 3]) -> [f64; 2] {
        let dot = |g: &[f64; 3]| g[0] * u[0] + g[1] * u[1] + g[2] * u[2];
        [dot(&self.b), dot(&self.c)]
    }

    /// Entry (i, j) of the stiffness matrix: int nu (2 hat_i,s hat_j,s + hat_i,z hat_j,z / (2 s)) ds dz, with the
    /// reluctivity `nu` in m/H. Symmetric to the last bit.
    pub fn stiffness(&self, nu: f64, i: usize, j: usize) -> f64 {
        nu * (2.0 * self.area * (self.b[i] * self.b[j]) + 0.5 * self.over_s * (self.c[i] * self.c[j]))
    }

    /// int nu grad u . D grad v of two functions given by their gradients (psi_s, psi_z), J/rad: twice the energy
    /// when u = v.
    pub fn stored(&self, nu: f64, u: [f64; 2], v: [f64; 2]) -> f64 {
        nu * (2.0 * self.area * (u[0] * v[0]) + 0.5 * self.over_s * (u[1] * v[1]))
    }
}

/// Area of the straight triangle, m³; negative when it runs clockwise.
pub fn straight_area(s: [f64; 3], z: [f64; 3]) -> f64 {
    0.5 * ((s[1] - s[0]) * (z[2] - z[0]) - (s[2] - s[0]) * (z[1] - z[0]))
}

/// Mean of 1/s over the straight triangle with corner values `s` >= 0 (any order), 1/m²; 0 by agreement when an
/// edge lies on the axis (psi_z vanishes there, and the integral has no meaning).
///
/// It is 2 g\[s0, s1, s2\], the second divided difference of g = s ln s (Hermite-Genocchi); where the three values
/// are close, its power series about their mean, which loses no digits.
pub fn mean_over_s(mut s: [f64; 3]) -> f64 {
    s.sort_by(f64::total_cmp);
    if s[1] <= 0.0 {
        0.0
    } else if s[0] <= 0.0 {
        2.0 * mean_reciprocal(s[1], s[2])
    } else if s[2] > 1.3 * s[0] {
        // Scaled by the middle value: g is then 0 there and no large logarithms cancel.
        let (low, high) = (s[0] / s[1], s[2] / s[1]);
        let below = low.ln() + mean_reciprocal(low, 1.0);
        let above = high * mean_reciprocal(1.0, high);
        2.0 * (above - below) / ((high - low) * s[1])
    } else {
        mean_over_s_series(s)
    }
}

/// Mean of 1/x over [a, b], 0 < a <= b.
fn mean_reciprocal(a: f64, b: f64) -> f64 {
    let d = b - a;
    if d > 0.0 { (d / a).ln_1p() / d } else { 1.0 / a }
}

/// sum (-1)^k 2 h_k / ((k+1)(k+2)) / mean, h_k the complete homogeneous polynomials of the three relative
/// deviations from the mean (they add up to 0, which leaves a recurrence of two terms).
fn mean_over_s_series(s: [f64; 3]) -> f64 {
    let mean = (s[0] + s[1] + s[2]) / 3.0;
    let d = s.map(|x| (x - mean) / mean);
    let pairs = d[0] * d[1] + d[0] * d[2] + d[1] * d[2];
    let triple = d[0] * d[1] * d[2];
    let largest = d[0].abs().max(d[2].abs());
    let (mut h, mut bound, mut sum) = ([1.0, 0.0, 0.0], 1.0, 1.0);
    for k in 1..40 {
        // h = [h_{k-1}, h_{k-2}, h_{k-3}]; |h_k| <= (k+1)(k+2)/2 largest^k bounds each term by largest^k.
        let next = -pairs * h[1] + triple * h[2];
        h = [next, h[0], h[1]];
        let sign = if k % 2 == 0 { 2.0 } else { -2.0 };
        sum += sign * next / f64::from((k + 1) * (k + 2));
        bound *= largest;
        if bound < 1e-18 {
            break;
        }
    }
    sum / mean
}

/// int hat_i / (2 sqrt s) ds dz of the three hats over the straight triangle with corner radii `r` (m) and area
/// `area` in (s, z), m³; in m². Times J this is the load of a constant current density; the three add up to the
/// triangle's section in (r, z). All terms are positive: no digits are lost.
pub fn load_moments(r: [f64; 3], area: f64) -> [f64; 3] {
    let moment = |a: f64, b: f64, c: f64| {
        let shared = 4.0 / 15.0 * area;
        if b == 0.0 && c == 0.0 {
            return shared / a;
        }
        if a == 0.0 && (b == 0.0 || c == 0.0) {
            return shared * 2.0 / (b + c);
        }
        let top = a * a * a * (b + c)
            + 2.0 * a * a * (b * b + c * c)
            + 4.0 * a * b * c * (a + b + c)
            + 2.0 * b * b * c * c;
        shared * top / ((a + b) * (a + b) * (a + c) * (a + c) * (b + c))
    };
    [
        moment(r[0], r[1], r[2]),
        moment(r[1], r[2], r[0]),
        moment(r[2], r[0], r[1]),
    ]
}

/// Mean of 1/(2 sqrt s) over the straight triangle with corner radii `r`, 1/m.
pub fn mean_over_2r(r: [f64; 3]) -> f64 {
    let [a, b, c] = r;
    let largest = a.max(b).max(c);
    if a + b + c == largest {
        return 4.0 / (3.0 * largest);
    }
    4.0 / 3.0 * (a * b + b * c + c * a) / ((a + b) * (b + c) * (c + a))
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
