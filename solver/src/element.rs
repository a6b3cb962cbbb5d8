//! Integrals over one triangle in (s, z), s = r², all per radian of azimuth.

/// Gradients of the three hats and the two integrals the energy needs, on one triangle. All per radian.
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
    /// (psi_s, psi_z) of a function with these corner values: Wb/(rad m²), Wb/(rad m).
    pub fn gradient(&self, u: [f64; 3]) -> [f64; 2] {
        let dot = |g: &[f64; 3]| g[0] * u[0] + g[1] * u[1] + g[2] * u[2];
        [dot(&self.b), dot(&self.c)]
    }
}
