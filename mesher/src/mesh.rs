//! The mesh: nodes, triangles, the part of each triangle, and which edges lie on which drawn curve.

use crate::arrange::{Boundary, OuterCircle, Part, PartId, Weld};
use crate::curve::{Curve, Point};

/// A conforming triangle mesh of the half section.
#[derive(Clone, Debug)]
pub struct Mesh {
    /// Nodes, m. Nodes on the axis have r = 0 exactly.
    pub nodes: Vec<Point>,
    /// Corners of each triangle, counter-clockwise both in (r, z) and in (r², z).
    pub triangles: Vec<[u32; 3]>,
    /// Part of each triangle (length = number of triangles).
    pub part_of: Vec<PartId>,
    /// Parts; index 0 is air.
    pub parts: Vec<Part>,
    /// Edges that lie on drawn curves or on the boundary of the meshed space.
    pub curve_edges: Vec<CurveEdge>,
    /// The outer half circle, when the boundary is open. No triangle has two edges on it.
    pub circle: Option<OuterCircle>,
    /// Height of the symmetry plane, m.
    pub mirror_z_m: Option<f64>,
    /// What the drawing's noise made necessary to weld.
    pub welds: Vec<Weld>,
}

/// A mesh edge on a drawn curve.
#[derive(Clone, Debug)]
pub struct CurveEdge {
    /// Its nodes, from start to end of `curve`.
    pub nodes: [u32; 2],
    /// The piece of drawn curve between them.
    pub curve: Curve,
    /// Boundary kind.
    pub boundary: Boundary,
}

/// How fine, and how large at most.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MeshOptions {
    /// 1 by default; 2 halves all sizes.
    pub fineness: f64,
    /// More triangles than this is an error.
    pub max_triangles: usize,
}

impl Default for MeshOptions {
    fn default() -> Self {
        Self {
            fineness: 1.0,
            max_triangles: 2_000_000,
        }
    }
}

impl Mesh {
    /// Name of a part's region for messages; "air" for part 0. Names are not part of the mesh, so a region is
    /// called by its number.
    pub(crate) fn part_name(&self, part: PartId) -> String {
        match self.parts.get(part as usize).and_then(|p| p.region) {
            Some(region) => format!("region number {}", region + 1),
            None => "air".to_owned(),
        }
    }
}

/// Twice the signed area of a triangle in the (r, z) plane, m².
pub(crate) fn doubled_area(a: Point, b: Point, c: Point) -> f64 {
    (b.r - a.r) * (c.z - a.z) - (c.r - a.r) * (b.z - a.z)
}

/// Twice the signed area of a triangle in the (r², z) plane, where the elements live, m³.
pub(crate) fn doubled_area_in_s(a: Point, b: Point, c: Point) -> f64 {
    (b.r - a.r) * (b.r + a.r) * (c.z - a.z) - (c.r - a.r) * (c.r + a.r) * (b.z - a.z)
}
