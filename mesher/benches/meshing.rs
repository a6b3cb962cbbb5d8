//! Times meshing a valve's section against spade's own refinement making as many vertices of the same section.
//!
//! `cargo bench -p coilwright-mesher`. Two ways to N nodes are timed: the mesh itself (`fineness`), and what a solve
//! uses, a mesh of N/4 nodes and its nested refinement. Each line is the best of several runs.
#![allow(clippy::print_stdout, clippy::unwrap_used)]

use std::time::Instant;

use coilwright_mesher::arrange::{Arrangement, arrange};
use coilwright_mesher::section::{PaintedRegion, SpaceEdge};
use coilwright_mesher::shape::Outline;
use coilwright_mesher::{Mesh, MeshOptions, Section};
use spade::{AngleLimit, ConstrainedDelaunayTriangulation, Point2, RefinementParameters, Triangulation};

/// Runs of each at least, and time spent on them; the best counts, because other work on the machine only ever adds.
const RUNS: usize = 3;
const SECONDS: f64 = 1.0;

/// Chords that stand for each arc in spade's input.
const CHORDS: u32 = 24;

fn main() {
    let drawing = arrange(&valve()).unwrap();
    println!(
        "{:>9} {:>22} {:>22} {:>22}",
        "nodes", "mesh, us/node (ratio)", "nested, us/node (ratio)", "spade, us/vertex"
    );
    for fineness in [2.7, 10.5, 34.0] {
        let options = |fineness| MeshOptions {
            fineness,
            max_triangles: 20_000_000,
        };
        let (seconds, mesh) = best(|| Mesh::of_arrangement(&drawing, &options(fineness)).unwrap());
        let direct = seconds / mesh.nodes.len() as f64;
        let (seconds, nested) = best(|| {
            Mesh::of_arrangement(&drawing, &options(0.5 * fineness))
                .unwrap()
                .refined()
                .unwrap()
        });
        let pair = seconds / nested.nodes.len() as f64;
        let spade = spade_seconds_per_vertex(&drawing, mesh.nodes.len());
        println!(
            "{:>9} {:>13.2} ({:>5.2}) {:>14.2} ({:>5.2}) {:>22.2}",
            mesh.nodes.len(),
            direct * 1e6,
            direct / spade,
            pair * 1e6,
            pair / spade,
            spade * 1e6
        );
    }
}

fn best<T>(run: impl Fn() -> T) -> (f64, T) {
    let timed = || {
        let start = Instant::now();
        let result = run();
        (start.elapsed().as_secs_f64(), result)
    };
    let start = Instant::now();
    let mut best = timed();
    let mut runs = 1;
    while runs < RUNS || start.elapsed().as_secs_f64() < SECONDS {
        let next = timed();
        best = if next.0 < best.0 { next } else { best };
        runs += 1;
    }
    best
}

/// Spade's refinement to the same smallest angle and, by its limit on areas, about as many vertices.
fn spade_seconds_per_vertex(drawing: &Arrangement, vertices: usize) -> f64 {
    let whole: f64 = drawing.parts.iter().map(|p| p.area_m2).sum();
    let mut largest = whole / vertices as f64;
    let mut seconds_per_vertex = f64::NAN;
    for _ in 0..RUNS {
        let (seconds, made) = best(|| {
            let mut cdt = spade_input(drawing);
            let limits = RefinementParameters::<f64>::new()
                .with_angle_limit(AngleLimit::from_deg(29.0))
                .with_max_additional_vertices(20 * vertices)
                .with_max_allowed_area(largest);
            assert!(cdt.refine(limits).refinement_complete);
            cdt.num_vertices()
        });
        seconds_per_vertex = seconds / made as f64;
        largest *= made as f64 / vertices as f64;
    }
    seconds_per_vertex
}

fn spade_input(drawing: &Arrangement) -> ConstrainedDelaunayTriangulation<Point2<f64>> {
    let mut points: Vec<Point2<f64>> = drawing.vertices.iter().map(|p| Point2::new(p.r, p.z)).collect();
    let mut edges = Vec::new();
    for edge in &drawing.edges {
        let mut from = edge.start as usize;
        let pieces = if edge.curve.sweep() == 0.0 { 1 } else { CHORDS };
        for k in 1..pieces {
            let at = edge.curve.at(f64::from(k) / f64::from(pieces));
            points.push(Point2::new(at.r, at.z));
            edges.push([from, points.len() - 1]);
            from = points.len() - 1;
        }
        edges.push([from, edge.end as usize]);
    }
    ConstrainedDelaunayTriangulation::bulk_load_cdt(points, edges).unwrap()
}

/// A solenoid valve of 40 mm with a working gap of 1.5 mm and a guide gap of 0.2 mm.
fn valve() -> Section {
    let rect = |name: &str, r: [f64; 2], z: [f64; 2]| {
        let outline = Outline::rect(r.map(|x| x * 1e-3), z.map(|x| x * 1e-3), 0.0).unwrap();
        PaintedRegion {
            name: name.to_owned(),
            copies: vec![outline],
            mesh_size_m: None,
        }
    };
    let regions = vec![
        rect("yoke", [4.2, 14.0], [-14.0, 22.0]),
        rect("coil", [5.5, 12.0], [-11.0, 19.0]),
        rect("stop", [0.0, 4.2], [-14.0, 0.0]),
        rect("plunger", [0.0, 4.0], [1.5, 24.0]),
    ];
    Section {
        regions,
        edge: SpaceEdge::HalfCircle,
        mirror_z_m: None,
    }
}
