//! What must hold for the mesh of any drawing.

use proptest::prelude::*;

use crate::arrange::{Arrangement, arrange};
use crate::curve::Point;
use crate::error::MeshError;
use crate::locate::Locator;
use crate::mesh::{Mesh, MeshOptions, doubled_area};
use crate::quality::smallest_angle_deg;
use crate::section::Section;
use crate::size::SizePlan;
use crate::strategies::sections;

/// Angle that every triangle away from sharper corners of the drawing reaches, degrees.
const SMALLEST_DEG: f64 = 20.0;

fn cases() -> u32 {
    std::env::var("MESH_CASES")
        .ok()
        .and_then(|n| n.parse().ok())
        .unwrap_or(64)
}

proptest! {
    #![proptest_config(ProptestConfig { cases: cases(), max_shrink_iters: 400, ..ProptestConfig::default() })]

    #[test]
    fn any_drawing_becomes_a_valid_mesh_or_a_clear_error(section in sections(12)) {
        let Ok(drawing) = arrange(&section) else { return Ok(()) };
        let options = MeshOptions { max_triangles: 400_000, ..MeshOptions::default() };
        match Mesh::of_arrangement(&drawing, &options) {
            Ok(mesh) => {
                valid(&mesh, &drawing)?;
                let finer = mesh.refined();
                prop_assert!(finer.is_ok(), "{}", finer.unwrap_err());
                let check = finer.unwrap().check();
                prop_assert!(check.is_ok(), "finer: {}", check.unwrap_err());
                painted_right(&mesh, &section)?;
                good_angles(&mesh, &drawing)?;
            }
            Err(MeshError::TooManyTriangles { .. }) => {}
            Err(error) => prop_assert!(false, "{error}"),
        }
    }

    #[test]
    fn any_point_of_a_mesh_is_found(section in sections(6), picks in prop::collection::vec(0.0..1.0_f64, 90)) {
        let Ok(mesh) = Mesh::of(&section, &MeshOptions { max_triangles: 100_000, ..MeshOptions::default() }) else {
            return Ok(());
        };
        let locator = Locator::of(&mesh);
        for pick in picks.chunks(3) {
            let triangle = (pick[0] * mesh.triangles.len() as f64) as usize;
            let p = mesh.triangles[triangle].map(|n| mesh.nodes[n as usize]);
            // Every third point on an edge.
            let (u, v) = (pick[1], if pick[2] < 0.3 { 0.0 } else { pick[2] * (1.0 - pick[1]) });
            let point = p[0] * (1.0 - u - v) + p[1] * u + p[2] * v;
            let found = locator.triangle_at(&mesh, point);
            prop_assert!(found.is_some(), "{} of triangle {} is in none", point, triangle);
            let q = mesh.triangles[found.unwrap() as usize].map(|n| mesh.nodes[n as usize]);
            let whole = doubled_area(q[0], q[1], q[2]);
            let least = (0..3).map(|k| doubled_area(q[k], q[(k + 1) % 3], point) / whole).fold(1.0, f64::min);
            prop_assert!(least > -1e-9, "{} lies outside its triangle by {}", point, least);
        }
    }

    #[test]
    fn the_same_drawing_gives_the_same_mesh(section in sections(6)) {
        let Ok(drawing) = arrange(&section) else { return Ok(()) };
        let options = MeshOptions { max_triangles: 200_000, ..MeshOptions::default() };
        let (one, other) = (Mesh::of_arrangement(&drawing, &options), Mesh::of_arrangement(&drawing, &options));
        if let (Ok(one), Ok(other)) = (one, other) {
            prop_assert_eq!(one.nodes, other.nodes);
            prop_assert_eq!(one.triangles, other.triangles);
        }
    }
}

/// Checked, and the parts' areas are those of the drawing up to the segments between chords and arcs.
fn valid(mesh: &Mesh, drawing: &Arrangement) -> Result<(), TestCaseError> {
    let check = mesh.check();
    prop_assert!(check.is_ok(), "{}", check.unwrap_err());
    let mut area = vec![0.0; mesh.parts.len()];
    for (corners, &part) in mesh.triangles.iter().zip(&mesh.part_of) {
        let [a, b, c] = corners.map(|n| mesh.nodes[n as usize]);
        area[part as usize] += 0.5 * doubled_area(a, b, c);
    }
    let whole: f64 = area.iter().sum();
    // An upper bound on what lies between chords and arcs anywhere.
    let bulges: f64 = mesh
        .curve_edges
        .iter()
        .map(|e| e.curve.rise_m() * e.curve.length_m())
        .sum();
    for (part, &area) in drawing.parts.iter().zip(&area) {
        prop_assert!(
            (area - part.area_m2).abs() <= bulges + 1e-9 * whole,
            "{area} for {part:?}"
        );
    }
    Ok(())
}

/// Centroids lie in the part that is painted there, unless a chord has cut off an arc or noise was welded there.
fn painted_right(mesh: &Mesh, section: &Section) -> Result<(), TestCaseError> {
    let rise = mesh
        .curve_edges
        .iter()
        .map(|e| e.curve.rise_m())
        .fold(0.0, f64::max);
    for (corners, &part) in mesh.triangles.iter().zip(&mesh.part_of) {
        let p = corners.map(|n| mesh.nodes[n as usize]);
        let longest = (0..3).map(|k| p[k].distance(p[(k + 1) % 3])).fold(0.0, f64::max);
        let height = doubled_area(p[0], p[1], p[2]) / longest;
        let margin = rise + mesh.welds.iter().map(|w| w.moved_m).fold(0.0, f64::max);
        if height / 3.0 > margin {
            let centroid = (p[0] + p[1] + p[2]) * (1.0 / 3.0);
            prop_assert_eq!(part, section.painted_at(centroid), "at {}", centroid);
        }
    }
    Ok(())
}

/// Small angles only between curves of the drawing that meet at less than 60 degrees (or touch).
fn good_angles(mesh: &Mesh, drawing: &Arrangement) -> Result<(), TestCaseError> {
    let plan = SizePlan::of(drawing, &MeshOptions::default());
    let size = mesh
        .nodes
        .iter()
        .map(|p| p.r.abs().max(p.z.abs()))
        .fold(0.0, f64::max);
    let edges_at = |p: Point| {
        let near = |e: &&crate::arrange::PlanarEdge| e.curve.distance_m(p) < 1e-9 * size;
        drawing.edges.iter().filter(near).collect::<Vec<_>>()
    };
    for corners in &mesh.triangles {
        let p = corners.map(|n| mesh.nodes[n as usize]);
        let angle = smallest_angle_deg(p);
        if angle >= SMALLEST_DEG {
            continue;
        }
        let on = p.map(edges_at);
        let sharp = |v: u32| plan.sharpest_deg[v as usize] < 60.0;
        let in_wedge = (0..3).any(|k| {
            on[k].iter().any(|a| {
                let ends = [b_ends(a)[0], b_ends(a)[1]];
                on[(k + 1) % 3]
                    .iter()
                    .any(|b| b_ends(b).iter().any(|v| ends.contains(v) && sharp(*v)))
            })
        });
        prop_assert!(
            in_wedge,
            "{} degrees at {}, between no curves that meet sharply",
            angle,
            p[0]
        );
    }
    Ok(())
}

fn b_ends(edge: &crate::arrange::PlanarEdge) -> [u32; 2] {
    [edge.start, edge.end]
}
