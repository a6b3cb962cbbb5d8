//! How long each stage of a solve takes, on the drip-line valve at about 10 thousand, 100 thousand and a million
//! nodes: `cargo run --release -p coilwright-validation --bin pace [-- NODES...]`.
//!
//! For each size, in a process of its own: the whole solve as `coilwright solve --out` does it (case read, coarse
//! partner and its refinement, all quantities, all files written), its stages, its peak memory, and, in the same
//! run, faer's order + symbolic + numeric factorisation of the same matrix by faer's own simple door. The exterior's
//! low-rank part is left out of faer's share, which makes the ratio harder to meet, not easier.

use std::error::Error;
use std::io::Write as _;
use std::path::PathBuf;
use std::process::Command;
use std::time::Instant;

use coilwright::case::{self, Case, Source};
use coilwright::files::OutputFolder;
use coilwright::report::json::{Clock, Report};
use coilwright::report::{table, text};
use coilwright::{caution, picture};
use faer::Side;
use faer::sparse::linalg::solvers::{Llt, SymbolicLlt};
use faer::sparse::{SparseColMat, SymbolicSparseColMat};
use mesher::{Mesh, MeshOptions};
use solver::linear::{Cholesky, Matrix, Symbolic};
use solver::problem::MagneticLaw;
use solver::solve::{Progress, Stage};
use solver::space::Space;
use solver::{Solution, assembly};

const CASE: &str = include_str!("../../../cases/drip-line-valve.toml");
const SIZES: [usize; 3] = [10_000, 100_000, 1_000_000];

type Outcome<T> = Result<T, Box<dyn Error>>;

struct Silent;

impl Progress for Silent {
    fn stage(&self, _: Stage, _: usize, _: usize) {}
}

fn main() -> Outcome<()> {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    if let [flag, nodes] = arguments.as_slice()
        && flag == "--one"
    {
        return one_size(nodes.parse()?);
    }
    let sizes = match arguments.is_empty() {
        true => SIZES.to_vec(),
        false => arguments
            .iter()
            .map(|size| size.parse())
            .collect::<Result<_, _>>()?,
    };
    for size in sizes {
        let status = Command::new(std::env::current_exe()?)
            .args(["--one", &size.to_string()])
            .status()?;
        if !status.success() {
            return Err(format!("{size} nodes: {status}").into());
        }
    }
    Ok(())
}

fn one_size(wanted: usize) -> Outcome<()> {
    let fineness = fineness_for(&read()?, wanted)?;
    let whole = Instant::now();
    let (read_s, mut case) = timed(read);
    let case_ref = case.as_mut().map_err(|error| error.to_string())?;
    case_ref.accuracy.fineness = fineness;
    // One pair of meshes, whatever it reaches.
    case_ref.accuracy.goal = 1.0;
    case_ref.accuracy.max_triangles = 20 * wanted;
    let case = case?;
    let solution = solver::solve(&case.section, &case.problem, &case.accuracy, &Silent)?;
    let (output_s, bytes) = timed(|| write(&case, &solution));
    let (bytes, whole_s) = (bytes?, whole.elapsed().as_secs_f64());
    let peak = peak_megabytes()?;

    let parts = parts(&case, &solution.mesh)?;
    let reference = faer_alone(&parts.matrix)?;
    let t = &solution.timing;
    let mut out = std::io::stdout().lock();
    writeln!(
        out,
        "{} nodes, {} triangles, one pair of meshes",
        solution.mesh.nodes.len(),
        solution.mesh.triangles.len()
    )?;
    writeln!(
        out,
        "  whole solve {whole_s:.3} s: read {read_s:.3}, mesh {:.3}, assemble {:.3}, factor and solve {:.3}, quantities {:.3}, output {output_s:.3} ({:.0} MB)",
        t.mesh_s,
        t.assembly_s,
        t.solve_s,
        t.quantities_s,
        bytes as f64 / 1e6
    )?;
    writeln!(
        out,
        "  the fine mesh alone: assemble {:.3}, order and analyse {:.3}, factor {:.3}, solve one load {:.3} s",
        parts.assemble_s, parts.analyse_s, parts.factor_s, parts.solve_s
    )?;
    writeln!(
        out,
        "  faer's order + symbolic + numeric of the same matrix: {reference:.3} s"
    )?;
    writeln!(
        out,
        "  whole solve / faer: {:.2} (goal 3); peak memory {peak:.0} MB (goal 4000)",
        whole_s / reference
    )?;
    Ok(())
}

fn timed<T>(work: impl FnOnce() -> T) -> (f64, T) {
    let begun = Instant::now();
    let result = work();
    (begun.elapsed().as_secs_f64(), result)
}

fn read() -> Outcome<Case> {
    let source = Source::Text {
        name: "drip-line-valve".into(),
        text: CASE.into(),
        folder: PathBuf::from("."),
    };
    case::read(&source, &[]).map_err(|faults| faults.to_string().into())
}

/// The fineness at which the nested pair ends with about so many nodes: four times those of its first mesh.
fn fineness_for(case: &Case, wanted: usize) -> Outcome<f64> {
    let mut fineness = 1.0;
    for _ in 0..4 {
        let options = MeshOptions {
            fineness,
            max_triangles: 20 * wanted,
        };
        let nodes = Mesh::of(&case.section, &options)?.nodes.len();
        fineness *= (wanted as f64 / (4 * nodes) as f64).sqrt();
    }
    Ok(fineness)
}

/// All files of a solve, in a folder that is taken away; returns their size.
fn write(case: &Case, solution: &Solution) -> Outcome<u64> {
    let temporary = tempfile::tempdir()?;
    let folder = OutputFolder::open(&temporary.path().join("out"))?;
    let clock = Clock {
        read_s: 0.0,
        output_s: 0.0,
        total_s: 0.0,
    };
    let report = Report::of(case, solution, caution::all(case, solution), clock);
    let (field, drawing) = rayon::join(
        || solver::vtk::vtu(solution),
        || picture::of_solution(case, solution),
    );
    let mut batch = folder.batch();
    batch.stage("field.vtu", &field?)?;
    batch.stage("picture.svg", drawing?.as_bytes())?;
    for (name, points) in report.results.iter().flat_map(|outcome| outcome.traverses.iter()) {
        batch.stage(&format!("traverse-{name}.csv"), &table::traverse(points)?)?;
    }
    batch.stage("resolved.toml", case.resolved_toml.as_bytes())?;
    batch.stage("report.txt", text::report(case, &report).as_bytes())?;
    batch.stage("report.json", report.to_json()?.as_bytes())?;
    let paths = batch.publish()?;
    Ok(paths
        .iter()
        .map(|path| std::fs::metadata(path).map_or(0, |data| data.len()))
        .sum())
}

/// Highest resident memory of this process so far.
fn peak_megabytes() -> Outcome<f64> {
    let status = std::fs::read_to_string("/proc/self/status")?;
    let line = status
        .lines()
        .find(|line| line.starts_with("VmHWM"))
        .ok_or("no VmHWM on this system")?;
    let kilobytes: f64 = line.split_whitespace().nth(1).ok_or("no number")?.parse()?;
    Ok(kilobytes * 1024.0 / 1e6)
}

struct Parts {
    matrix: Matrix,
    assemble_s: f64,
    analyse_s: f64,
    factor_s: f64,
    solve_s: f64,
}

/// The linear algebra of the fine mesh, step by step.
fn parts(case: &Case, mesh: &Mesh) -> Outcome<Parts> {
    let space = Space::new(mesh, case.problem.mirror)?;
    let nu = reluctivity(case, mesh);
    let (assemble_s, matrix) = timed(|| assembly::system(&space, assembly::pattern(&space), &nu));
    let (analyse_s, symbolic) = timed(|| Symbolic::new(matrix.sparse.pattern(), &matrix.low_rank));
    let (factor_s, cholesky) = timed(|| Cholesky::new(symbolic?, matrix.clone()));
    let cholesky = cholesky?;
    let (solve_s, solution) = timed(|| cholesky.solve(&[vec![1.0; matrix.len()]]));
    solution?;
    Ok(Parts {
        matrix,
        assemble_s,
        analyse_s,
        factor_s,
        solve_s,
    })
}

/// Reluctivity of each triangle, m/H.
fn reluctivity(case: &Case, mesh: &Mesh) -> Vec<f64> {
    let relative = |region: usize| match case.problem.regions[region].law {
        MagneticLaw::Linear {
            relative_permeability,
        } => relative_permeability,
        MagneticLaw::Magnet {
            recoil_permeability, ..
        } => recoil_permeability,
    };
    let of_part: Vec<f64> = mesh
        .parts
        .iter()
        .map(|part| 1.0 / (solver::MU0 * part.region.map_or(1.0, relative)))
        .collect();
    mesh.part_of.iter().map(|&part| of_part[part as usize]).collect()
}

/// Seconds of faer's order + symbolic + numeric factorisation of the sparse part; the better of two runs.
fn faer_alone(matrix: &Matrix) -> Outcome<f64> {
    let (offsets, columns, values) = matrix.sparse.csr_data();
    let small = |list: &[usize]| {
        list.iter()
            .map(|&i| u32::try_from(i))
            .collect::<Result<Vec<u32>, _>>()
    };
    // Symmetric: rows read as columns.
    let pattern =
        SymbolicSparseColMat::new_checked(matrix.len(), matrix.len(), small(offsets)?, None, small(columns)?);
    let sparse = SparseColMat::new(pattern, values.to_vec());
    let mut best = f64::INFINITY;
    for _ in 0..2 {
        let begun = Instant::now();
        let symbolic =
            SymbolicLlt::try_new(sparse.symbolic(), Side::Lower).map_err(|error| format!("{error:?}"))?;
        let factor = Llt::try_new_with_symbolic(symbolic, sparse.as_ref(), Side::Lower)
            .map_err(|error| format!("{error:?}"))?;
        best = best.min(begun.elapsed().as_secs_f64());
        drop(factor);
    }
    Ok(best)
}
