//! The field outside the outer circle, by its multipoles.

use std::f64::consts::PI;

use mesher::Point;

use super::HIGHEST_ORDER;
use crate::MU0;

/// psi = sum c_n (R/rho)^n (1 - x²) P_n'(x), x = cos theta. With a mirror the orders themselves carry the
/// symmetry, so points below it are as good as those above.
#[derive(Clone, Debug, PartialEq)]
pub struct Series {
    centre_z_m: f64,
    radius_m: f64,
    /// c_1, c_2, ..., Wb/rad.
    coefficients: Vec<f64>,
}

impl Series {
    pub(super) fn new(centre_z_m: f64, radius_m: f64, coefficients: Vec<f64>) -> Self {
        Self {
            centre_z_m,
            radius_m,
            coefficients,
        }
    }

    /// c_1, c_2, ... up to the highest order (0 where a mirror forbids the order), Wb/rad.
    pub fn coefficients(&self) -> &[f64] {
        &self.coefficients
    }

    /// psi at a point on or outside the circle, Wb/rad.
    pub fn psi(&self, at: Point) -> f64 {
        let place = Place::of(self, at);
        let sum: f64 = self.terms(&place).map(|(n, c)| c * place.slopes[n]).sum();
        place.sine * place.sine * sum
    }

    /// (B_r, B_z) at a point on or outside the circle, on the axis too, T.
    ///
    /// B_rho = sum c_n n (n+1) (R/rho)^n P_n / rho², B_theta = sin theta sum c_n n (R/rho)^n P_n' / rho².
    pub fn b(&self, at: Point) -> [f64; 2] {
        let place = Place::of(self, at);
        let (mut outward, mut southward) = (0.0, 0.0);
        for (n, c) in self.terms(&place) {
            outward += c * (n * (n + 1)) as f64 * place.values[n];
            southward += c * n as f64 * place.slopes[n];
        }
        southward *= place.sine;
        let scale = 1.0 / (place.rho * place.rho);
        let (sine, x) = (place.sine, place.x);
        [
            scale * (outward * sine + southward * x),
            scale * (outward * x - southward * sine),
        ]
    }

    /// Axial dipole moment of the whole device, A m²: 4 pi R c_1 / mu0.
    pub fn dipole_moment_am2(&self) -> f64 {
        4.0 * PI * self.radius_m * self.coefficients.first().unwrap_or(&0.0) / MU0
    }

    /// n and c_n (R/rho)^n.
    fn terms<'a>(&'a self, place: &'a Place) -> impl Iterator<Item = (usize, f64)> + 'a {
        let mut power = 1.0;
        self.coefficients.iter().enumerate().map(move |(k, c)| {
            power *= place.ratio;
            (k + 1, c * power)
        })
    }
}

/// Polar place of a point and the Legendre polynomials there.
struct Place {
    rho: f64,
    ratio: f64,
    x: f64,
    sine: f64,
    values: [f64; HIGHEST_ORDER + 1],
    slopes: [f64; HIGHEST_ORDER + 1],
}

impl Place {
    fn of(series: &Series, at: Point) -> Self {
        let height = at.z - series.centre_z_m;
        let rho = at.r.hypot(height);
        let x = height / rho;
        Self {
            rho,
            ratio: series.radius_m / rho,
            x,
            sine: at.r / rho,
            values: legendre_values(x),
            slopes: legendre_slopes(x),
        }
    }
}

/// P_0(x) .. P_40(x) on [-1, 1], by the upward recurrence (stable there; DLMF 18.9.1).
pub(super) fn legendre_values(x: f64) -> [f64; HIGHEST_ORDER + 1] {
    let mut p = [1.0; HIGHEST_ORDER + 1];
    p[1] = x;
    for n in 1..HIGHEST_ORDER {
        let m = n as f64;
        p[n + 1] = ((2.0 * m + 1.0) * x * p[n] - m * p[n - 1]) / (m + 1.0);
    }
    p
}

/// P_0'(x) .. P_40'(x): P_{n+1}' = P_{n-1}' + (2n+1) P_n (DLMF 18.9).
pub(super) fn legendre_slopes(x: f64) -> [f64; HIGHEST_ORDER + 1] {
    let p = legendre_values(x);
    let mut slopes = [0.0; HIGHEST_ORDER + 1];
    slopes[1] = 1.0;
    for n in 1..HIGHEST_ORDER {
        slopes[n + 1] = slopes[n - 1] + (2 * n + 1) as f64 * p[n];
    }
    slopes
}
