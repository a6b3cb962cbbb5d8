//! The unbounded surroundings of the outer half circle, as multipoles (per radian).

use mesher::Point;

/// The exterior's quadratic form on the nodes of the triangles at the arc.
#[derive(Clone, Debug)]
pub struct Exterior {
    /// Height of the circle's centre, m.
    pub centre_z_m: f64,
    /// Radius, m.
    pub radius_m: f64,
}

impl Exterior {
    /// Multipole coefficients of nodal values psi (all nodes), Wb/rad.
    pub fn series(&self, _psi: &[f64]) -> Series {
        todo!("being written")
    }

    /// Exterior part of a(psi_a, psi_b), J/rad, first N multipoles.
    pub fn stored(&self, _psi_a: &[f64], _psi_b: &[f64]) -> f64 {
        todo!("being written")
    }

    /// Upper bound of what the multipoles beyond N add to `stored(psi, psi)`.
    pub fn tail(&self, _psi: &[f64]) -> f64 {
        todo!("being written")
    }
}

/// The field outside the circle: psi = sum c_n (R/rho)^n sin(theta) P_n^1(cos theta).
#[derive(Clone, Debug)]
pub struct Series {}

impl Series {
    /// psi at a point on or outside the circle, below a mirror too, Wb/rad.
    pub fn psi(&self, _at: Point) -> f64 {
        todo!("being written")
    }

    /// (B_r, B_z) there, T.
    pub fn b(&self, _at: Point) -> [f64; 2] {
        todo!("being written")
    }

    /// Axial dipole moment of the whole device, A m².
    pub fn dipole_moment_am2(&self) -> f64 {
        todo!("being written")
    }
}
