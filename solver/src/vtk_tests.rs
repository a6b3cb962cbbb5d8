use mesher::arrange::Part;
use mesher::{Mesh, Point};

use super::*;
use crate::MU0;
use crate::quantity::Quantities;
use crate::solve::{Accuracy, FieldData, Timing};

/// A uniform axial field of 0.5 T on an n by n grid over the unit square; the right half is a region.
fn uniform(n: usize) -> Solution {
    let part = |region| Part {
        region,
        copy: 0,
        area_m2: 0.5,
        r_moment_m3: 0.25,
        mesh_size_m: None,
    };
    let step = 1.0 / n as f64;
    let nodes: Vec<Point> = (0..=n)
        .flat_map(|j| {
            (0..=n).map(move |i| Point {
                r: i as f64 * step,
                z: j as f64 * step,
            })
        })
        .collect();
    let mut triangles = Vec::new();
    let mut part_of = Vec::new();
    for j in 0..n {
        for i in 0..n {
            let a = (j * (n + 1) + i) as u32;
            let b = a + n as u32 + 1;
            triangles.extend([[a, a + 1, b + 1], [a, b + 1, b]]);
            part_of.extend([u32::from(2 * i >= n); 2]);
        }
    }
    let b = [0.0, 0.5];
    let field = FieldData {
        psi_wb_per_rad: nodes.iter().map(|p| 0.25 * p.r * p.r).collect(),
        node_b_t: vec![b; nodes.len()],
        cell_b_t: vec![b; triangles.len()],
        cell_h_a_per_m: vec![[0.0, 0.5 / MU0]; triangles.len()],
        cell_j_a_per_m2: vec![0.0; triangles.len()],
        cell_energy_j_per_m3: vec![0.125 / MU0; triangles.len()],
    };
    Solution {
        newton: None,
        mesh: Mesh {
            nodes,
            triangles,
            part_of,
            parts: vec![part(None), part(Some(0))],
            curve_edges: Vec::new(),
            circle: None,
            mirror_z_m: None,
            welds: Vec::new(),
        },
        field,
        quantities: Quantities {
            incremental_inductance_h: None,
            windings: Vec::new(),
            inductance_h: Vec::new(),
            coupling: Vec::new(),
            energy_j: None,
            coenergy_j: None,
            dipole_moment_am2: None,
            movers: Vec::new(),
            coil_sides: Vec::new(),
            regions: Vec::new(),
            search_coils: Vec::new(),
            traverses: Vec::new(),
            stray: None,
        },
        accuracy: Accuracy {
            goal: 0.01,
            reached: 0.001,
            met: true,
            why_not: None,
        },
        levels: 1,
        timing: Timing::default(),
    }
}

#[test]
fn reads_back_what_was_written() {
    let solution = uniform(4);
    let bytes = vtu(&solution).unwrap();
    let back = vtkio::model::Vtk::parse_xml(bytes.as_slice()).unwrap();
    let DataSet::UnstructuredGrid { pieces, .. } = back.data else {
        panic!("not an unstructured grid")
    };
    let piece = pieces
        .into_iter()
        .next()
        .unwrap()
        .into_loaded_piece_data(None)
        .unwrap();
    assert_eq!((piece.num_points(), piece.cells.num_cells()), (25, 32));
    assert_eq!(piece.points.into_vec::<f64>().unwrap()[3..6], [0.25, 0.0, 0.0]);
    let names = |attributes: &[Attribute]| attributes.iter().map(|a| a.name().to_owned()).collect::<Vec<_>>();
    assert_eq!(
        names(&piece.data.point),
        ["psi_Wb_per_rad", "A_phi_Wb_per_m", "B_T"]
    );
    assert_eq!(
        names(&piece.data.cell),
        ["B_T", "H_A_per_m", "J_phi_A_per_m2", "energy_J_per_m3", "region"]
    );
    let values = |attribute: &Attribute| match attribute {
        Attribute::DataArray(array) => array.data.cast_into::<f64>().unwrap(),
        Attribute::Field { .. } => panic!("a field, not an array"),
    };
    assert_eq!(values(&piece.data.point[0])[4], 0.25);
    assert_eq!(
        values(&piece.data.point[1])[..5],
        [0.0, 0.0625, 0.125, 0.1875, 0.25]
    );
    assert_eq!(values(&piece.data.cell[0])[..6], [0.0, 0.5, 0.0, 0.0, 0.5, 0.0]);
    assert_eq!(
        values(&piece.data.cell[4])[..8],
        [0.0, 0.0, 0.0, 0.0, 1.0, 1.0, 1.0, 1.0]
    );
}

#[test]
fn refuses_wrong_lengths_bad_numbers_and_nothing() {
    let mut short = uniform(2);
    short.field.cell_b_t.pop();
    assert!(matches!(
        vtu(&short),
        Err(VtkError::WrongLength {
            name: "B_T",
            found: 7,
            expected: 8
        })
    ));
    let mut bad = uniform(2);
    bad.field.cell_h_a_per_m[3] = [0.0, f64::NAN];
    assert!(matches!(
        vtu(&bad),
        Err(VtkError::NotFinite {
            name: "H_A_per_m",
            at: 3
        })
    ));
    let mut empty = uniform(2);
    empty.mesh.triangles.clear();
    assert!(matches!(vtu(&empty), Err(VtkError::Empty)));
}

/// Writes a file for `validation/check_vtu.py` and tells the time a million nodes take:
/// `VTU_SAMPLE=/tmp/sample.vtu cargo test -p coilwright-solver vtk -- --ignored --nocapture`.
#[test]
#[ignore = "a measurement, not a check"]
#[allow(clippy::print_stdout)]
fn a_million_nodes() {
    let solution = uniform(std::env::var("VTU_CELLS").map_or(1000, |cells| cells.parse().unwrap()));
    let start = std::time::Instant::now();
    let bytes = vtu(&solution).unwrap();
    println!(
        "{} MB in {:.2} s",
        bytes.len() / 1_000_000,
        start.elapsed().as_secs_f64()
    );
    if let Ok(path) = std::env::var("VTU_SAMPLE") {
        std::fs::write(path, bytes).unwrap();
    }
}
