//! From a section and its physics to bracketed quantities: nested pairs of meshes until the goal is met.

use std::time::Duration;

use mesher::{Mesh, Section};

use crate::bracket::Bracket;
use crate::problem::Problem;
use crate::quantity::Quantities;

/// Kinds of quantity an accuracy goal can be set for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Kind {
    /// Inductance matrix.
    Inductance,
    /// Flux linkages of windings and search coils.
    Linkage,
    /// Energy and co-energy.
    Energy,
    /// Forces on movers.
    Force,
    /// Coupling factors.
    Coupling,
    /// Fields along traverses.
    Traverse,
}

/// What accuracy is wanted, and the limits of the effort.
#[derive(Clone, Debug)]
pub struct Settings {
    /// Wanted half width of each bracket over its value (0.01 is 1 %).
    pub goal: f64,
    /// Which kinds the goal is for.
    pub of: Vec<Kind>,
    /// Most triangles one mesh may have.
    pub max_triangles: usize,
    /// Most time one solve may take, s; `None` for no limit.
    pub max_time: Option<Duration>,
    /// Fineness of the first mesh: 1 by default, 2 halves all sizes.
    pub fineness: f64,
}

/// How accurate the result is.
#[derive(Clone, Debug)]
pub struct Accuracy {
    /// The goal.
    pub goal: f64,
    /// The worst of the wanted quantities (same measure as the goal).
    pub reached: f64,
    /// Whether every wanted quantity met the goal.
    pub met: bool,
    /// Why not, in words, with the name of the worst quantity.
    pub why_not: Option<String>,
}

/// Stages of the work, for progress and timing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Stage {
    /// Making the mesh.
    Mesh,
    /// Element integrals and the matrix.
    Assembly,
    /// Factorisation and solution.
    Solve,
    /// Reading quantities off the field.
    Quantities,
}

/// Seconds spent in each stage (all levels together).
#[derive(Clone, Copy, Debug, Default)]
pub struct Timing {
    /// Making meshes.
    pub mesh_s: f64,
    /// Assembly.
    pub assembly_s: f64,
    /// Factorisation and solution.
    pub solve_s: f64,
    /// Quantities.
    pub quantities_s: f64,
}

/// The solved field on the finest mesh, ready for pictures and files. With an ambient field, everything here is
/// the total field.
#[derive(Clone, Debug)]
pub struct FieldData {
    /// psi = r A_phi at the nodes, Wb/rad.
    pub psi_wb_per_rad: Vec<f64>,
    /// Recovered flux density (r, z) at the nodes, T (averaged over the parts that meet there).
    pub node_b_t: Vec<[f64; 2]>,
    /// Flux density (r, z) of each triangle, T.
    pub cell_b_t: Vec<[f64; 2]>,
    /// Field strength (r, z) of each triangle, A/m.
    pub cell_h_a_per_m: Vec<[f64; 2]>,
    /// Current density along phi of each triangle, A/m².
    pub cell_j_a_per_m2: Vec<f64>,
    /// Energy density of each triangle, J/m³.
    pub cell_energy_j_per_m3: Vec<f64>,
}

/// A finished solve.
#[derive(Clone, Debug)]
pub struct Solution {
    /// The finest mesh.
    pub mesh: Mesh,
    /// The field on it.
    pub field: FieldData,
    /// The quantities, with brackets.
    pub quantities: Quantities<Bracket>,
    /// How accurate they are.
    pub accuracy: Accuracy,
    /// Mesh pairs solved.
    pub levels: usize,
    /// Where the time went.
    pub timing: Timing,
}

/// Hears of progress. Implementations must be cheap.
pub trait Progress: Sync {
    /// A stage begins on a mesh of so many nodes (0 where not yet known) at this level (from 1).
    fn stage(&self, stage: Stage, level: usize, nodes: usize);
}

/// Solves a section with its physics.
pub fn solve(
    _section: &Section,
    _problem: &Problem,
    _settings: &Settings,
    _progress: &dyn Progress,
) -> Result<Solution, SolveError> {
    todo!("contract only; being written")
}

/// Why no solution could be found.
#[derive(Debug, thiserror::Error)]
pub enum SolveError {
    /// The section could not be meshed.
    #[error(transparent)]
    Mesh(#[from] mesher::MeshError),
}
