//! Static fields with a constant reluctivity in each triangle. Everything per radian: times 2 pi for the device
//! (times 4 pi, with a mirror).

use crate::linear::LinearError;
use crate::space::Space;

/// A factored stiffness matrix, ready for any number of loads.
pub struct Factored<'s> {
    space: &'s Space,
}

impl<'s> Factored<'s> {
    /// Assembles and factors; `nu` is the reluctivity of each triangle, m/H.
    pub fn new(_space: &'s Space, _nu: &[f64]) -> Result<Self, LinearError> {
        todo!("being written")
    }

    /// psi at all nodes (0 at fixed ones) for each load (all nodes; entries of fixed nodes are ignored).
    pub fn solve(&self, _loads: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, LinearError> {
        let _ = self.space;
        todo!("being written")
    }
}

/// Load of a current density along phi, A/m², constant (in J) on each triangle.
pub fn current_load(_space: &Space, _j: &[f64]) -> Vec<f64> {
    todo!("being written")
}

/// Load of magnets: remanence (r, z) of each triangle, T, behind the recoil reluctivity `nu`.
pub fn magnet_load(_space: &Space, _nu: &[f64], _remanence: &[[f64; 2]]) -> Vec<f64> {
    todo!("being written")
}

/// Load of a uniform axial flux density b0, T, for the field without it: psi = b0 s / 2 + solution.
pub fn ambient_load(_space: &Space, _nu: &[f64], _b0: f64) -> Vec<f64> {
    todo!("being written")
}

/// a(psi_a, psi_b) over all space, J/rad: energy per radian is half of a(psi, psi).
pub fn stored(_space: &Space, _nu: &[f64], _psi_a: &[f64], _psi_b: &[f64]) -> f64 {
    todo!("being written")
}

/// The share of one triangle in a(psi_a, psi_b).
pub fn stored_in(_space: &Space, _nu: &[f64], _triangle: usize, _psi_a: &[f64], _psi_b: &[f64]) -> f64 {
    todo!("being written")
}

/// (psi_s, psi_z) on each triangle.
pub fn gradients(_space: &Space, _psi: &[f64]) -> Vec<[f64; 2]> {
    todo!("being written")
}

/// (B_r, B_z) of each triangle at its centroid in (s, z), T.
pub fn centroid_b(_space: &Space, _psi: &[f64]) -> Vec<[f64; 2]> {
    todo!("being written")
}
