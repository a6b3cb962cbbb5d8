//! The unbounded surroundings of the outer half circle, as multipoles up to order 40. Everything per radian.
//!
//! On the circle x = (z - zc)/R = cos theta. Outside, psi = sum c_n (R/rho)^n (1 - x²) P_n'(x); with
//! p_n = int psi P_n' dx the exterior adds sum w_n p_n² to the energy form, w_n = (2n+1)/(2(n+1) mu0 R).
//! Ideas: Keller & Givoli, J. Comput. Phys. 82 (1989); Chari & Bedrosian, IEEE Trans. Magn. 23 (1987).
//! With a mirror (the circle is centred on it) integrals run over the described half arc, odd orders stand for
//! image currents of the same sense and even ones for the opposite, and their norms halve.

use rayon::prelude::*;

use crate::MU0;
use crate::problem::MirrorCurrents;
use crate::quadrature::gauss_legendre;

pub use series::Series;

mod arc;
mod series;

pub use arc::Arc;
pub(crate) use arc::with_bulge;

/// Highest multipole order.
pub const HIGHEST_ORDER: usize = 40;

/// Points per arc: hat (degree 2 in x) times P_40' (degree 39) is integrated exactly by 21 or more.
const POINTS_PER_ARC: usize = 22;

/// The exterior's quadratic form on the nodes of the triangles at the arc.
#[derive(Clone, Debug)]
pub struct Exterior {
    /// Height of the circle's centre, m.
    pub centre_z_m: f64,
    /// Radius, m.
    pub radius_m: f64,
    /// The mesh's edges on the circle, in the order of `Mesh::curve_edges`.
    pub arcs: Vec<Arc>,
    /// Nodes that the form couples: all corners of the triangles at the arc, the inner ones too; ascending.
    pub nodes: Vec<u32>,
    /// Multipole orders n, ascending.
    pub orders: Vec<usize>,
    /// w_n of each order, 1/H: the form is sum w_n p_n².
    pub weights: Vec<f64>,
    /// p_n of each node's hat, a row of `nodes.len()` numbers for each order.
    projections: Vec<f64>,
    mirrored: bool,
}

impl Exterior {
    /// The form on a circle cut into these arcs, which must cover it (the described half of it, with a mirror).
    pub(crate) fn new(
        centre_z_m: f64,
        radius_m: f64,
        mirror: Option<MirrorCurrents>,
        arcs: Vec<Arc>,
    ) -> Self {
        let orders: Vec<usize> = (1..=HIGHEST_ORDER)
            .filter(|n| match mirror {
                None => true,
                Some(MirrorCurrents::Same) => n % 2 == 1,
                Some(MirrorCurrents::Opposite) => n % 2 == 0,
            })
            .collect();
        let halved = if mirror.is_some() { 2.0 } else { 1.0 };
        let weights = orders
            .iter()
            .map(|&n| halved * (2 * n + 1) as f64 / (2.0 * (n + 1) as f64 * MU0 * radius_m))
            .collect();
        let mut nodes: Vec<u32> = arcs.iter().flat_map(|arc| arc.nodes).collect();
        nodes.sort_unstable();
        nodes.dedup();
        let projections = projections(&arcs, &nodes, &orders);
        Self {
            centre_z_m,
            radius_m,
            arcs,
            nodes,
            orders,
            weights,
            projections,
            mirrored: mirror.is_some(),
        }
    }

    /// p_n of the hats of `nodes`, for the `index`-th order.
    pub fn projection_row(&self, index: usize) -> &[f64] {
        &self.projections[index * self.nodes.len()..][..self.nodes.len()]
    }

    /// p_n of a nodal vector (all nodes of the mesh), one for each order, in its own unit.
    pub fn project(&self, psi: &[f64]) -> Vec<f64> {
        (0..self.orders.len())
            .map(|k| {
                let row = self.projection_row(k);
                row.iter()
                    .zip(&self.nodes)
                    .map(|(p, &node)| p * psi[node as usize])
                    .sum()
            })
            .collect()
    }

    /// The exterior's share of a(psi_a, psi_b), J/rad, multipoles up to the highest order.
    pub fn stored(&self, psi_a: &[f64], psi_b: &[f64]) -> f64 {
        let (a, b) = (self.project(psi_a), self.project(psi_b));
        self.weights
            .iter()
            .zip(a.iter().zip(&b))
            .map(|(w, (a, b))| w * (a * b))
            .sum()
    }

    /// Takes the exterior's share of a(psi, hat_i) off each entry of `residual` (all nodes).
    pub fn subtract(&self, psi: &[f64], residual: &mut [f64]) {
        for (order, (w, p)) in self.weights.iter().zip(self.project(psi)).enumerate() {
            for (&node, hat) in self.nodes.iter().zip(self.projection_row(order)) {
                residual[node as usize] -= w * p * hat;
            }
        }
    }

    /// Upper bound of what the multipoles beyond the highest order would add to `stored(psi, psi)`, J/rad.
    pub fn tail(&self, psi: &[f64]) -> f64 {
        let slopes: f64 = self.arcs.iter().map(|arc| arc.slope_squared(psi)).sum();
        let halved = if self.mirrored { 2.0 } else { 1.0 };
        let resolved: f64 = self
            .project(psi)
            .iter()
            .zip(&self.orders)
            .map(|(p, &n)| halved * 0.5 * (2 * n + 1) as f64 * p * p)
            .sum();
        (slopes - resolved).max(0.0) / ((self.first_missing_order() + 1) as f64 * MU0 * self.radius_m)
    }

    /// Lowest order left out.
    pub fn first_missing_order(&self) -> usize {
        let step = if self.mirrored { 2 } else { 1 };
        self.orders.last().map_or(1, |n| n + step)
    }

    /// The field outside that continues these nodal values (all nodes), Wb/rad.
    pub fn series(&self, psi: &[f64]) -> Series {
        let halved = if self.mirrored { 2.0 } else { 1.0 };
        let mut coefficients = vec![0.0; HIGHEST_ORDER];
        for (p, &n) in self.project(psi).iter().zip(&self.orders) {
            coefficients[n - 1] = halved * (2 * n + 1) as f64 / (2 * n * (n + 1)) as f64 * p;
        }
        Series::new(self.centre_z_m, self.radius_m, coefficients)
    }
}

/// Rows of p_n,i = int hat_i P_n'(x) dx over the arcs.
fn projections(arcs: &[Arc], nodes: &[u32], orders: &[usize]) -> Vec<f64> {
    let rule = gauss_legendre(POINTS_PER_ARC);
    let of_arcs: Vec<Vec<[f64; 3]>> = arcs
        .par_iter()
        .map(|arc| {
            let mut sums = vec![[0.0; 3]; HIGHEST_ORDER + 1];
            for [t, w] in &rule {
                let (x, hats) = arc.at(*t);
                let weight = w * arc.width();
                for (sum, slope) in sums.iter_mut().zip(series::legendre_slopes(x)) {
                    for (sum, hat) in sum.iter_mut().zip(hats) {
                        *sum += weight * slope * hat;
                    }
                }
            }
            sums
        })
        .collect();
    let mut rows = vec![0.0; orders.len() * nodes.len()];
    for (arc, sums) in arcs.iter().zip(&of_arcs) {
        for (i, corner) in arc.nodes.into_iter().enumerate() {
            // Invariant: `nodes` was made from these arcs, so every corner is found.
            let column = nodes.partition_point(|&node| node < corner);
            for (k, &n) in orders.iter().enumerate() {
                rows[k * nodes.len() + column] += sums[n][i];
            }
        }
    }
    rows
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
