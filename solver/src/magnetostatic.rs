//! Static fields with a constant reluctivity in each triangle. Everything per radian: times 2 pi for the device
//! (times 4 pi, with a mirror). A vector over nodes has one entry for each node of the mesh, fixed ones included.

use rayon::prelude::*;

use crate::MU0;
use crate::assembly::{self, Entry};
use crate::element::{self, load_moments, mean_over_2r};
use crate::linear::{Cholesky, LinearError, Symbolic};
use crate::space::Space;

/// Triangles that one task sums; fixed, so that sums do not depend on the number of threads.
const TRIANGLES_PER_TASK: usize = 8192;

/// A factored stiffness matrix, ready for any number of loads.
#[derive(Debug)]
pub struct Factored<'s> {
    space: &'s Space,
    factor: Cholesky,
}

impl<'s> Factored<'s> {
    /// Assembles and factors; `nu` is the reluctivity of each triangle, m/H.
    ///
    /// Errors: `nu` of wrong length, not finite or not positive; no room in memory.
    pub fn new(space: &'s Space, nu: &[f64]) -> Result<Self, LinearError> {
        check_length("the reluctivity", nu.len(), space.triangles.len())?;
        Self::of(space, &|t, i, j| space.elements[t].stiffness(nu[t], i, j))
    }

    /// Assembles and factors any symmetric positive definite form: `entry(t, i, j)` is what corners i and j of
    /// triangle t share in it.
    ///
    /// Errors: a form that is not finite or not positive definite; no room in memory.
    pub fn of(space: &'s Space, entry: &Entry<'_>) -> Result<Self, LinearError> {
        let pattern = assembly::pattern(space);
        let low_rank = assembly::exterior(space);
        let symbolic = Symbolic::new(&pattern, &low_rank)?;
        let matrix = assembly::system(space, pattern, entry);
        Ok(Self {
            space,
            factor: Cholesky::new(symbolic, matrix)?,
        })
    }

    /// Assembles and factors with another reluctivity, keeping the elimination order.
    ///
    /// Errors: as [`Factored::new`].
    pub fn with_reluctivity(&self, nu: &[f64]) -> Result<Self, LinearError> {
        check_length("the reluctivity", nu.len(), self.space.triangles.len())?;
        self.with(&|t, i, j| self.space.elements[t].stiffness(nu[t], i, j))
    }

    /// Assembles and factors another form, keeping the elimination order.
    ///
    /// Errors: as [`Factored::of`].
    pub fn with(&self, entry: &Entry<'_>) -> Result<Self, LinearError> {
        let pattern = self.factor.matrix().sparse.pattern().clone();
        let matrix = assembly::system(self.space, pattern, entry);
        Ok(Self {
            space: self.space,
            factor: Cholesky::new(self.factor.symbolic().clone(), matrix)?,
        })
    }

    /// psi at all nodes (0 at fixed ones), Wb/rad, for each load (all nodes, A m; entries of fixed nodes are
    /// ignored). Finite, and with a relative residual under 1e-8, usually 1e-12.
    ///
    /// Errors: a load of wrong length or not finite; a solution that fails the check.
    pub fn solve(&self, loads: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, LinearError> {
        let nodes = &self.space.free_nodes;
        let mut free_loads = Vec::with_capacity(loads.len());
        for load in loads {
            check_length("a load", load.len(), self.space.nodes())?;
            free_loads.push(nodes.iter().map(|&node| load[node as usize]).collect());
        }
        let spread = |values: Vec<f64>| {
            let mut psi = vec![0.0; self.space.nodes()];
            for (value, &node) in values.iter().zip(nodes) {
                psi[node as usize] = *value;
            }
            psi
        };
        Ok(self.factor.solve(&free_loads)?.into_iter().map(spread).collect())
    }

    /// The factored system over the free nodes.
    pub fn factor(&self) -> &Cholesky {
        &self.factor
    }
}

fn check_length(what: &'static str, given: usize, wanted: usize) -> Result<(), LinearError> {
    if given == wanted {
        Ok(())
    } else {
        Err(LinearError::Length { what, given, wanted })
    }
}

/// int hat_i / (2 sqrt s) ds dz of the three corners of a triangle, m²: what a unit current density loads, and,
/// summed, the triangle's section. Inside the outermost ring of triangles, as all sources are (a bulge at the
/// outer circle is left out).
pub fn unit_moments(space: &Space, triangle: usize) -> [f64; 3] {
    load_moments(space.radii(triangle), straight_area(space, triangle))
}

/// Load of a current density along phi, A/m², constant on each triangle.
pub fn current_load(space: &Space, j: &[f64]) -> Vec<f64> {
    scatter(space, |t| {
        (j[t] != 0.0).then(|| unit_moments(space, t).map(|moment| moment * j[t]))
    })
}

/// Load of magnets: remanence (r, z) of each triangle, T, behind its recoil reluctivity `nu`, m/H.
/// F_i = int nu (Br_z hat_i,s - Br_r hat_i,z / (2 sqrt s)) ds dz.
pub fn magnet_load(space: &Space, nu: &[f64], remanence: &[[f64; 2]]) -> Vec<f64> {
    scatter(space, |t| {
        let [radial, axial] = remanence[t];
        if radial == 0.0 && axial == 0.0 {
            return None;
        }
        let (element, area) = (&space.elements[t], straight_area(space, t));
        let along_s = nu[t] * axial * area;
        let along_z = nu[t] * radial * area * mean_over_2r(space.radii(t));
        Some([0, 1, 2].map(|i| along_s * element.b[i] - along_z * element.c[i]))
    })
}

/// Load of a uniform axial flux density `b0`, T, in which the device sits: the solution is the rest, the whole
/// field psi = b0 s / 2 + solution. F_i = -int (nu - nu0) b0 hat_i,s ds dz.
pub fn ambient_load(space: &Space, nu: &[f64], b0: f64) -> Vec<f64> {
    let nu0 = 1.0 / MU0;
    scatter(space, |t| {
        let excess = nu[t] - nu0;
        // Reluctivities computed as 1/(mu0 mu_r) with mu_r = 1 may miss nu0 by a rounding.
        (excess.abs() > 1e-14 * nu0).then(|| {
            let element = &space.elements[t];
            element.b.map(|b| -excess * b0 * b * element.area)
        })
    })
}

/// Area in (s, z) of the straight triangle, m³: without the bulge at the outer circle.
fn straight_area(space: &Space, triangle: usize) -> f64 {
    element::straight_area(
        space.corners(triangle, &space.s),
        space.corners(triangle, &space.z),
    )
}

/// Adds up the corner loads of those triangles that have any, in the mesh's order.
fn scatter(space: &Space, corner_loads: impl Fn(usize) -> Option<[f64; 3]>) -> Vec<f64> {
    let mut load = vec![0.0; space.nodes()];
    for (t, corners) in space.triangles.iter().enumerate() {
        if let Some(shares) = corner_loads(t) {
            for (&node, share) in corners.iter().zip(shares) {
                load[node as usize] += share;
            }
        }
    }
    load
}

/// a(psi_a, psi_b) over all space, J/rad: the energy per radian is half of a(psi, psi).
pub fn stored(space: &Space, nu: &[f64], psi_a: &[f64], psi_b: &[f64]) -> f64 {
    let count = space.triangles.len();
    let parts: Vec<f64> = (0..count.div_ceil(TRIANGLES_PER_TASK))
        .into_par_iter()
        .map(|task| {
            let first = task * TRIANGLES_PER_TASK;
            let last = (first + TRIANGLES_PER_TASK).min(count);
            (first..last).map(|t| stored_in(space, nu, t, psi_a, psi_b)).sum()
        })
        .collect();
    let outside = space
        .exterior
        .as_ref()
        .map_or(0.0, |exterior| exterior.stored(psi_a, psi_b));
    parts.iter().sum::<f64>() + outside
}

/// The share of one triangle in a(psi_a, psi_b), J/rad.
pub fn stored_in(space: &Space, nu: &[f64], triangle: usize, psi_a: &[f64], psi_b: &[f64]) -> f64 {
    let (a, b) = (space.corners(triangle, psi_a), space.corners(triangle, psi_b));
    let element = &space.elements[triangle];
    element.stored(nu[triangle], element.gradient(a), element.gradient(b))
}

/// (psi_s, psi_z) on each triangle, Wb/(rad m²) and Wb/(rad m).
pub fn gradients(space: &Space, psi: &[f64]) -> Vec<[f64; 2]> {
    space
        .elements
        .par_iter()
        .enumerate()
        .map(|(t, element)| element.gradient(space.corners(t, psi)))
        .collect()
}

/// (B_r, B_z) of each triangle at its centroid in (s, z), T: B_z = 2 psi_s, B_r = -psi_z / r.
pub fn centroid_b(space: &Space, psi: &[f64]) -> Vec<[f64; 2]> {
    space
        .elements
        .par_iter()
        .enumerate()
        .map(|(t, element)| {
            let [psi_s, psi_z] = element.gradient(space.corners(t, psi));
            let [a, b, c] = space.corners(t, &space.s);
            [-psi_z / ((a + b + c) / 3.0).sqrt(), 2.0 * psi_s]
        })
        .collect()
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
