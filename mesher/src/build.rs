//! From a planar graph of curves to the finished mesh.

use crate::arrange::{Arrangement, PartId};
use crate::chords::triangulated;
use crate::curve::Bounds;
use crate::error::MeshError;
use crate::mesh::{CurveEdge, Mesh, MeshOptions};
use crate::nested::upright;
use crate::order::hilbert_key;
use crate::refine::refine;
use crate::section::Section;
use crate::size::SizePlan;
use crate::triangulate::Triangulation;

impl Mesh {
    /// Meshes a section.
    ///
    /// Errors: what [`crate::arrange::arrange`] finds wrong with the drawing; a region without a triangle; more
    /// triangles than `options` allow.
    pub fn of(section: &Section, options: &MeshOptions) -> Result<Self, MeshError> {
        let drawing = crate::arrange::arrange(section)?;
        Self::of_arrangement(&drawing, options).map_err(|error| match error {
            MeshError::PartVanished { region } => {
                let region = section.regions[region].name.clone();
                MeshError::RegionVanished {
                    region,
                    covered_by: Vec::new(),
                }
            }
            other => other,
        })
    }

    /// Meshes a planar graph of curves.
    pub fn of_arrangement(drawing: &Arrangement, options: &MeshOptions) -> Result<Self, MeshError> {
        if !(options.fineness.is_finite() && options.fineness > 0.0) {
            return Err(MeshError::Fineness {
                fineness: options.fineness,
            });
        }
        let plan = SizePlan::of(drawing, options);
        let bounds = drawing.vertices.iter().fold(Bounds::EMPTY, |b, &v| b.with(v));
        let unit_m = (bounds.high.r - bounds.low.r).max(bounds.high.z - bounds.low.z);
        let start = triangulated(drawing, &plan)?;
        let refined = refine(drawing, &plan, unit_m, start, options.max_triangles)?;
        finished(drawing, &refined, bounds)
    }
}

/// Keeps the meshed faces; nodes get numbers along a space-filling curve, triangles follow their smallest node.
fn finished(drawing: &Arrangement, from: &Triangulation, bounds: Bounds) -> Result<Mesh, MeshError> {
    let mut used = vec![false; from.vertex_count()];
    for vertex in from.faces().flat_map(|face| from.corners(face)) {
        used[vertex as usize] = true;
    }
    let mut order: Vec<(u64, u32)> = (0..from.vertex_count() as u32)
        .filter(|&vertex| used[vertex as usize])
        .map(|vertex| (hilbert_key(from.site(vertex).at, bounds), vertex))
        .collect();
    order.sort_unstable();
    let mut number = vec![u32::MAX; from.vertex_count()];
    for (new, &(_, vertex)) in order.iter().enumerate() {
        number[vertex as usize] = new as u32;
    }
    let (triangles, part_of) = triangles_by_smallest_node(from, &number, order.len());
    let mesh = Mesh {
        nodes: order.iter().map(|&(_, vertex)| from.site(vertex).at).collect(),
        triangles,
        part_of,
        parts: drawing.parts.clone(),
        curve_edges: from
            .segments
            .iter()
            .map(|s| CurveEdge {
                nodes: s.ends.map(|v| number[v as usize]),
                curve: s.curve,
                boundary: s.boundary,
            })
            .collect(),
        circle: drawing.circle,
        mirror_z_m: drawing.mirror_z_m,
        welds: drawing.welds.clone(),
    };
    sound(&mesh)?;
    Ok(mesh)
}

/// All meshed faces with new node numbers, and their parts: a counting sort by smallest node.
fn triangles_by_smallest_node(
    from: &Triangulation,
    number: &[u32],
    node_count: usize,
) -> (Vec<[u32; 3]>, Vec<PartId>) {
    let found: Vec<([u32; 3], PartId)> = from
        .faces()
        .map(|face| {
            (
                smallest_first(from.corners(face).map(|v| number[v as usize])),
                from.label(face),
            )
        })
        .collect();
    let mut next = vec![0_usize; node_count + 1];
    for (corners, _) in &found {
        next[corners[0] as usize + 1] += 1;
    }
    for node in 0..node_count {
        next[node + 1] += next[node];
    }
    let mut triangles = vec![[0; 3]; found.len()];
    let mut part_of = vec![0; found.len()];
    for (corners, part) in found {
        let place = &mut next[corners[0] as usize];
        (triangles[*place], part_of[*place]) = (corners, part);
        *place += 1;
    }
    (triangles, part_of)
}

/// The same triangle with its smallest node in front.
fn smallest_first([a, b, c]: [u32; 3]) -> [u32; 3] {
    if a < b && a < c {
        [a, b, c]
    } else if b < c {
        [b, c, a]
    } else {
        [c, a, b]
    }
}

/// Every part has triangles, and none of them is turned over.
fn sound(mesh: &Mesh) -> Result<(), MeshError> {
    let mut found = vec![false; mesh.parts.len()];
    for (corners, &part) in mesh.triangles.iter().zip(&mesh.part_of) {
        found[part as usize] = true;
        if !upright(*corners, &mesh.nodes) {
            let at = mesh.nodes[corners[0] as usize];
            return Err(MeshError::TurnedOver {
                at,
                part: mesh.part_name(part),
            });
        }
    }
    // A copy that others cover has no area, and needs no triangle.
    let visible = |part: &usize| mesh.parts[*part].area_m2 > 0.0;
    let vanished = (1..mesh.parts.len()).filter(visible).find(|&part| !found[part]);
    match vanished.and_then(|part| mesh.parts[part].region) {
        Some(region) => Err(MeshError::PartVanished { region }),
        None => Ok(()),
    }
}
