//! Axisymmetric magnetic fields by finite elements: psi = r A_phi linear in (r², z) on each triangle, the
//! unbounded exterior by multipoles, and the quantities a designer reads, each as a bracket. SI units
//! throughout; this crate knows nothing of files, text or terminals.
//!
//! One way only: [`problem::Problem`] on a [`mesher::Mesh`] → [`space`] (elements) → [`magnetostatic`] (psi) →
//! [`field`] (B, H at a point) → [`quantity`] → [`mod@solve`] (pairs of nested meshes, brackets).

pub mod accuracy;
pub mod assembly;
pub mod bracket;
pub mod crew;
pub mod element;
pub mod exterior;
pub mod field;
pub mod fit;
pub mod law;
pub mod linear;
pub mod linkage;
pub mod magnetostatic;
pub mod nested;
pub mod newton;
pub mod operating;
pub mod problem;
pub mod quadrature;
pub mod quantity;
pub mod reluctivity;
pub mod solve;
pub mod space;
pub mod statics;
pub mod stroke;
#[cfg(test)]
pub(crate) mod test_meshes;
pub mod vtk;
pub mod winding;

pub use bracket::{Bound, Bracket};
pub use problem::Problem;
pub use quantity::Quantities;
pub use solve::{Solution, solve};

/// Magnetic constant, H/m: 4 pi 1e-7 (CODATA 2018 is larger by 5.5e-10 relative).
pub const MU0: f64 = 4e-7 * std::f64::consts::PI;
