//! From a section and its physics to bracketed quantities: nested pairs of meshes until the goal is met.

use std::time::{Duration, Instant};

use mesher::{Mesh, MeshOptions, Section};
use rayon::prelude::*;

use crate::accuracy;
use crate::bracket::{Bracket, Pairing};
use crate::field::Recovered;
use crate::nested::prolong;
use crate::newton::Course;
use crate::operating::Operating;
use crate::problem::Problem;
use crate::quantity::force::{self, Hold};
use crate::quantity::{Quantities, combine, read};
use crate::space::Space;

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
    /// Fineness of the first mesh, usually [`USUAL_FINENESS`]: twice as much halves all sizes.
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

/// Seconds spent in each stage on the fine meshes (all levels together; the coarse partner is solved meanwhile).
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
#[derive(Clone, Debug, Default)]
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
    /// How Newton's method went; `None` with linear material.
    pub newton: Option<Newton>,
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

/// Tells of progress and keeps the time of each stage.
pub struct Clock<'p> {
    progress: &'p dyn Progress,
    level: usize,
    running: Option<(Stage, Instant)>,
    timing: Timing,
}

impl<'p> Clock<'p> {
    /// A clock that has not begun.
    pub fn new(progress: &'p dyn Progress) -> Self {
        Self::at(progress, 1)
    }

    /// A clock that has not begun, for a mesh pair of this number (from 1).
    pub fn at(progress: &'p dyn Progress, level: usize) -> Self {
        Self {
            progress,
            level,
            running: None,
            timing: Timing::default(),
        }
    }

    /// Ends the running stage and begins another.
    pub fn begin(&mut self, stage: Stage, nodes: usize) {
        self.end();
        self.progress.stage(stage, self.level, nodes);
        self.running = Some((stage, Instant::now()));
    }

    fn end(&mut self) {
        let Some((stage, since)) = self.running.take() else {
            return;
        };
        let spent = since.elapsed().as_secs_f64();
        match stage {
            Stage::Mesh => self.timing.mesh_s += spent,
            Stage::Assembly => self.timing.assembly_s += spent,
            Stage::Solve => self.timing.solve_s += spent,
            Stage::Quantities => self.timing.quantities_s += spent,
        }
    }
}

/// Fineness at which a plain coil or magnet comes out within 0.2 % in inductance and field.
pub const USUAL_FINENESS: f64 = 2.0;

/// Most pairs of meshes tried on the way to a goal.
pub(crate) const MOST_LEVELS: usize = 8;

/// Solves a section with its physics: pairs of nested meshes, each pair finer than the one before, until the goal
/// is met or a limit is reached (then [`Accuracy::met`] is false and the last pair's numbers are returned).
///
/// # Errors
/// The section cannot be meshed; a winding under voltage has no resistance; the linear system cannot be solved
/// accurately; a result is not a finite number.
pub fn solve(
    section: &Section,
    problem: &Problem,
    settings: &Settings,
    progress: &dyn Progress,
) -> Result<Solution, SolveError> {
    let started = Instant::now();
    let mut clock = Clock::new(progress);
    let mut fineness = settings.fineness;
    let mut done: Option<Solution> = None;
    loop {
        let begun = Instant::now();
        let mut solution = match solve_pair(section, problem, settings, fineness, &mut clock) {
            Ok(solution) => solution,
            // A finer pair that cannot be had leaves the one before standing.
            Err(SolveError::Mesh(_)) if done.is_some() => break,
            Err(error) => return Err(error),
        };
        solution.levels = clock.level;
        let pair = Spent {
            pair: begun.elapsed(),
            whole: started.elapsed(),
        };
        let triangles = solution.mesh.triangles.len();
        let next = next_fineness(&mut solution.accuracy, triangles, settings, &pair);
        done = Some(solution);
        match next {
            Some(factor) if clock.level < MOST_LEVELS => fineness *= factor,
            _ => break,
        }
        clock.level += 1;
    }
    clock.end();
    let Some(mut solution) = done else {
        unreachable!("the loop ends only with a solution or an error")
    };
    solution.timing = clock.timing;
    Ok(solution)
}

/// Time spent so far.
pub(crate) struct Spent {
    /// On the last pair of meshes.
    pub pair: Duration,
    /// On all of them.
    pub whole: Duration,
}

/// By how much finer the next pair should be; `None` when the goal is met or a limit stands in the way (said in
/// `why_not`). The error is taken to fall like the square of the size.
pub(crate) fn next_fineness(
    accuracy: &mut Accuracy,
    triangles: usize,
    settings: &Settings,
    spent: &Spent,
) -> Option<f64> {
    if accuracy.met {
        return None;
    }
    let wanted = (1.5 * accuracy.reached / accuracy.goal).sqrt().clamp(1.3, 4.0);
    let room = (settings.max_triangles as f64 / triangles as f64).sqrt();
    let time_room = settings.max_time.map_or(f64::INFINITY, |most| {
        (most.saturating_sub(spent.whole).as_secs_f64() / spent.pair.as_secs_f64()).sqrt()
    });
    let factor = wanted.min(0.95 * room).min(0.9 * time_room);
    if factor >= 1.2 {
        return Some(factor);
    }
    let limit = if 0.95 * room < 0.9 * time_room {
        "accuracy.max_triangles"
    } else {
        "accuracy.max_time"
    };
    if let Some(why) = &mut accuracy.why_not {
        *why = format!("{why}; `{limit}` allows no finer mesh");
    }
    None
}

fn solve_pair(
    section: &Section,
    problem: &Problem,
    settings: &Settings,
    fineness: f64,
    clock: &mut Clock<'_>,
) -> Result<Solution, SolveError> {
    clock.begin(Stage::Mesh, 0);
    let options = MeshOptions {
        fineness,
        max_triangles: settings.max_triangles / 4,
    };
    let coarse_mesh = Mesh::of(section, &options)?;
    let fine_mesh = coarse_mesh.refined()?;
    let coarse_holds: Vec<Hold> = problem
        .movers
        .iter()
        .map(|m| force::hold(&coarse_mesh, problem, m))
        .collect();
    let fine_holds: Vec<Hold> = coarse_holds
        .iter()
        .map(|h| force::refine(h, &coarse_mesh, &fine_mesh))
        .collect();
    let (coarse, start) = {
        let space = Space::new(&coarse_mesh, problem.mirror)?;
        let op = Operating::solve(&coarse_mesh, &space, problem, None, clock)?;
        let start = prolong(&op.rest, &coarse_mesh, &fine_mesh);
        (OneMesh::read(&op, &Recovered::new(&op), &coarse_holds), start)
    };
    drop(coarse_mesh);
    clock.begin(Stage::Assembly, fine_mesh.nodes.len());
    let space = Space::new(&fine_mesh, problem.mirror)?;
    let op = Operating::solve(&fine_mesh, &space, problem, Some(start), clock)?;
    let recovered = Recovered::new(&op);
    let fine = OneMesh::read(&op, &recovered, &fine_holds);
    let field = FieldData::of(op, &recovered);
    let pairing = Pairing {
        energy_drift: drift(&coarse, &fine),
    };
    let newton = Newton::of(&coarse, &fine);
    let (coarse, fine) = (coarse.quantities, fine.quantities);
    let scale = fine.energy_j.map_or(0.0, |w| w / largest_dimension(&fine_mesh));
    let quantities = combine(&pairing, &coarse, &fine, scale);
    if let Some(name) = accuracy::first_unsound(&quantities) {
        return Err(SolveError::NotFinite { quantity: name });
    }
    let mut accuracy = accuracy::measure(&quantities, settings, scale);
    if newton.as_ref().is_some_and(|n| !n.converged) {
        accuracy.met = false;
        accuracy.why_not = Some("Newton's method did not settle: no number here is good".into());
    }
    Ok(Solution {
        mesh: fine_mesh,
        field,
        newton,
        quantities,
        accuracy,
        levels: 1,
        timing: Timing::default(),
    })
}

/// What one mesh of a pair says.
struct OneMesh {
    quantities: Quantities<f64>,
    rest_energy: f64,
    course: Option<Course>,
}

impl OneMesh {
    fn read(op: &Operating<'_>, recovered: &Recovered, holds: &[Hold]) -> Self {
        Self {
            quantities: read(op, recovered, holds),
            rest_energy: op.rest_energy_j_per_rad,
            course: op.course.clone(),
        }
    }
}

/// How Newton's method went on the two meshes of a pair.
#[derive(Clone, Debug, PartialEq)]
pub struct Newton {
    /// Steps from zero on the coarse mesh.
    pub coarse_steps: usize,
    /// Steps from the coarse mesh's field on the fine one.
    pub fine_steps: usize,
    /// Relative residual left on the fine mesh.
    pub residual: f64,
    /// Whether both settled.
    pub converged: bool,
}

impl Newton {
    fn of(coarse: &OneMesh, fine: &OneMesh) -> Option<Self> {
        let (coarse, fine) = (coarse.course.as_ref()?, fine.course.as_ref()?);
        Some(Self {
            coarse_steps: coarse.steps(),
            fine_steps: fine.steps(),
            residual: fine.residuals.last().copied().unwrap_or(0.0),
            converged: coarse.converged && fine.converged,
        })
    }
}

/// Relative difference of the field energies, and of each winding's own field, between the two meshes.
fn drift(coarse: &OneMesh, fine: &OneMesh) -> f64 {
    let relative = |c: f64, f: f64| if f == 0.0 { 0.0 } else { (f - c).abs() / f.abs() };
    let own = |one: &OneMesh, k: usize| one.quantities.inductance_h[k][k];
    let windings = 0..fine.quantities.windings.len();
    windings
        .map(|k| relative(own(coarse, k), own(fine, k)))
        .fold(relative(coarse.rest_energy, fine.rest_energy), f64::max)
}

/// Largest extent of everything that is not air, m.
fn largest_dimension(mesh: &Mesh) -> f64 {
    let (mut r, mut low, mut high) = (0.0f64, f64::INFINITY, f64::NEG_INFINITY);
    for (triangle, part) in mesh.triangles.iter().zip(&mesh.part_of) {
        if *part != 0 {
            for n in triangle {
                let p = mesh.nodes[*n as usize];
                (r, low, high) = (r.max(p.r), low.min(p.z), high.max(p.z));
            }
        }
    }
    (2.0 * r).max(high - low)
}

impl FieldData {
    fn of(op: Operating<'_>, recovered: &Recovered) -> Self {
        let cells = 0..op.mesh.triangles.len();
        Self {
            node_b_t: (0..op.mesh.nodes.len())
                .into_par_iter()
                .map(|n| recovered.at_node(&op, n))
                .collect(),
            cell_h_a_per_m: cells
                .clone()
                .into_par_iter()
                .map(|t| op.h_of(t, op.cell_b_t[t]))
                .collect(),
            cell_energy_j_per_m3: cells
                .into_par_iter()
                .map(|t| op.law_of(t).at(op.cell_b_t[t]).energy)
                .collect(),
            psi_wb_per_rad: op.psi,
            cell_b_t: op.cell_b_t,
            cell_j_a_per_m2: op.cell_j_a_per_m2,
        }
    }
}

/// Why no solution could be found.
#[derive(Debug, thiserror::Error)]
pub enum SolveError {
    /// The section could not be meshed.
    #[error(transparent)]
    Mesh(#[from] mesher::MeshError),
    /// The mesh cannot carry the element.
    #[error(transparent)]
    Space(#[from] crate::space::SpaceError),
    /// The linear system could not be solved accurately.
    #[error(transparent)]
    Linear(#[from] crate::linear::LinearError),
    /// A winding is driven by a voltage but nothing says what its resistance is.
    #[error("winding `{winding}` is driven by a voltage, but neither wire nor resistance is given")]
    NoResistance {
        /// The winding.
        winding: String,
    },
    /// A result is not a finite number.
    #[error("{quantity} did not come out as a finite number: please report this case")]
    NotFinite {
        /// Which.
        quantity: String,
    },
}
