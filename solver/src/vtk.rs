//! The solved field as a VTK unstructured grid (`.vtu`), for any viewer that reads it.
//!
//! Axes: the file's x is r, its y is z, its third axis is unused, so that a viewer shows the half section upright.
//! A vector (r, z) becomes (r, z, 0). That x-y-third frame is right-handed, hence its third axis points along
//! -phi, out of the page; quantities along phi are written as scalars, positive along +phi (into the page).
//! Names carry the SI unit. `docs/field-file.md` lists them for users.

use thiserror::Error;
use vtkio::model::{
    Attribute, Attributes, ByteOrder, CellType, Cells, DataArray, DataSet, IOBuffer, UnstructuredGridPiece,
    Version, VertexNumbers, Vtk,
};
use vtkio::xml::Compressor;

use crate::solve::Solution;

/// Why the field could not be put into a file.
#[derive(Debug, Error)]
pub enum VtkError {
    /// The mesh has no nodes or no triangles; readers refuse such files.
    #[error("the mesh is empty, so there is no field to write")]
    Empty,
    /// An array does not have one entry per node or triangle.
    #[error("array `{name}` has {found} entries where {expected} were expected")]
    WrongLength {
        /// The array's name in the file.
        name: &'static str,
        /// Entries found.
        found: usize,
        /// Entries expected.
        expected: usize,
    },
    /// A number is infinite or not a number.
    #[error("array `{name}` holds a number that is not finite, at entry {at}")]
    NotFinite {
        /// The array's name in the file.
        name: &'static str,
        /// Index of the entry.
        at: usize,
    },
    /// The writer failed.
    #[error("the VTK writer failed: {0}")]
    Writer(String),
}

/// The field of a solution as the bytes of a `.vtu` file (inline binary, little-endian, LZ4). Measured at a
/// million nodes with random fields: LZ4 1.0 s and 147 MB, no compression 2.4 s and 248 MB, for the library's
/// escaping of the text costs more than the compression.
///
/// Points: `psi_Wb_per_rad`, `A_phi_Wb_per_m`, `B_T` (recovered). Cells: `B_T`, `H_A_per_m`, `J_phi_A_per_m2`,
/// `region` (0 is air, n the n-th region of the case), `energy_J_per_m3`. Single precision, except points and psi.
///
/// The bytes are returned rather than written, so that the caller notices a full disk: the library's own file
/// writer ignores short writes.
pub fn vtu(solution: &Solution) -> Result<Vec<u8>, VtkError> {
    let nodes = solution.mesh.nodes.len();
    let triangles = solution.mesh.triangles.len();
    if nodes == 0 || triangles == 0 {
        return Err(VtkError::Empty);
    }
    let (points, (cells, data)) = rayon::join(
        || coordinates(solution),
        || (connectivity(solution), attributes(solution)),
    );
    let piece = UnstructuredGridPiece {
        points,
        cells,
        data: data?,
    };
    let grid = Vtk {
        version: Version::new_xml(1, 0),
        title: String::new(),
        byte_order: ByteOrder::LittleEndian,
        data: DataSet::inline(piece),
        file_path: None,
    };
    let file = grid
        .try_into_xml_format(Compressor::LZ4, 1)
        .map_err(|error| VtkError::Writer(error.to_string()))?;
    // At most about 75 bytes a triangle; one allocation instead of many doublings.
    let mut bytes = Vec::with_capacity(80 * triangles + 4096);
    file.write(&mut bytes)
        .map_err(|error| VtkError::Writer(error.to_string()))?;
    Ok(bytes)
}

fn coordinates(solution: &Solution) -> IOBuffer {
    IOBuffer::F64(
        solution
            .mesh
            .nodes
            .iter()
            .flat_map(|node| [node.r, node.z, 0.0])
            .collect(),
    )
}

fn connectivity(solution: &Solution) -> Cells {
    let triangles = &solution.mesh.triangles;
    Cells {
        cell_verts: VertexNumbers::XML {
            connectivity: triangles.iter().flatten().map(|&node| u64::from(node)).collect(),
            offsets: (1..=triangles.len() as u64).map(|count| 3 * count).collect(),
        },
        types: vec![CellType::Triangle; triangles.len()],
    }
}

fn attributes(solution: &Solution) -> Result<Attributes, VtkError> {
    let mesh = &solution.mesh;
    let field = &solution.field;
    let (nodes, triangles) = (mesh.nodes.len(), mesh.triangles.len());
    check_length("part_of", mesh.part_of.len(), triangles)?;
    check_length("psi_Wb_per_rad", field.psi_wb_per_rad.len(), nodes)?;
    if let Some(at) = field.psi_wb_per_rad.iter().position(|psi| !psi.is_finite()) {
        return Err(VtkError::NotFinite {
            name: "psi_Wb_per_rad",
            at,
        });
    }
    let psi = Attribute::DataArray(
        DataArray::scalars("psi_Wb_per_rad", 1).with_data(IOBuffer::F64(field.psi_wb_per_rad.clone())),
    );
    // On the axis A_phi vanishes with r.
    let a_phi: Vec<f64> = mesh
        .nodes
        .iter()
        .zip(&field.psi_wb_per_rad)
        .map(|(node, &psi)| if node.r > 0.0 { psi / node.r } else { 0.0 })
        .collect();
    let point = vec![
        psi,
        scalars("A_phi_Wb_per_m", &a_phi, nodes)?,
        vectors("B_T", &field.node_b_t, nodes)?,
    ];
    let cell = vec![
        vectors("B_T", &field.cell_b_t, triangles)?,
        vectors("H_A_per_m", &field.cell_h_a_per_m, triangles)?,
        scalars("J_phi_A_per_m2", &field.cell_j_a_per_m2, triangles)?,
        scalars("energy_J_per_m3", &field.cell_energy_j_per_m3, triangles)?,
        Attribute::DataArray(
            DataArray::scalars("region", 1).with_data(IOBuffer::I32(region_numbers(solution))),
        ),
    ];
    Ok(Attributes { point, cell })
}

/// 0 for air, n for the n-th region of the case.
fn region_numbers(solution: &Solution) -> Vec<i32> {
    let of_part: Vec<i32> = solution
        .mesh
        .parts
        .iter()
        .map(|part| part.region.map_or(0, |region| region as i32 + 1))
        .collect();
    solution
        .mesh
        .part_of
        .iter()
        .map(|&part| of_part.get(part as usize).copied().unwrap_or_default())
        .collect()
}

fn scalars(name: &'static str, values: &[f64], expected: usize) -> Result<Attribute, VtkError> {
    check_length(name, values.len(), expected)?;
    let single: Vec<f32> = values.iter().map(|&value| value as f32).collect();
    check_finite(name, &single)?;
    Ok(Attribute::DataArray(
        DataArray::scalars(name, 1).with_data(IOBuffer::F32(single)),
    ))
}

fn vectors(name: &'static str, values: &[[f64; 2]], expected: usize) -> Result<Attribute, VtkError> {
    check_length(name, values.len(), expected)?;
    let single: Vec<f32> = values
        .iter()
        .flat_map(|&[r, z]| [r as f32, z as f32, 0.0])
        .collect();
    check_finite(name, &single).map_err(|error| match error {
        VtkError::NotFinite { name, at } => VtkError::NotFinite { name, at: at / 3 },
        other => other,
    })?;
    Ok(Attribute::DataArray(
        DataArray::vectors(name).with_data(IOBuffer::F32(single)),
    ))
}

fn check_length(name: &'static str, found: usize, expected: usize) -> Result<(), VtkError> {
    if found == expected {
        Ok(())
    } else {
        Err(VtkError::WrongLength {
            name,
            found,
            expected,
        })
    }
}

fn check_finite(name: &'static str, values: &[f32]) -> Result<(), VtkError> {
    match values.iter().position(|value| !value.is_finite()) {
        None => Ok(()),
        Some(at) => Err(VtkError::NotFinite { name, at }),
    }
}

#[cfg(test)]
#[path = "vtk_tests.rs"]
mod tests;
