//! The planar graph of parts.

use crate::curve::{Curve, Point};

/// Index of a part; 0 is air.
pub type PartId = u32;

/// The label of what lies outside the meshed space.
pub const OUTSIDE: PartId = u32::MAX;

/// One connected painting: air, or one copy of a region.
#[derive(Clone, Debug, PartialEq)]
pub struct Part {
    /// Index into [`crate::section::Section::regions`]; `None` for air.
    pub region: Option<usize>,
    /// Which copy of a repeated region, from 0.
    pub copy: usize,
    /// Visible area of the half section after painting, m², exact for the drawn curves.
    pub area_m2: f64,
    /// Integral of r over that area, m³ (volume = 2 pi times it; mean radius = it / area), exact likewise.
    pub r_moment_m3: f64,
    /// Upper limit of the triangle size, m.
    pub mesh_size_m: Option<f64>,
}

/// What kind of boundary of the meshed space an edge lies on.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Boundary {
    /// Inside: an interface between parts (or a drawn line within one).
    None,
    /// On r = 0.
    Axis,
    /// On the outer half circle.
    Circle,
    /// On the drawn wall (not where the wall runs along the axis or the mirror).
    Wall,
    /// On the symmetry plane.
    Mirror,
}

/// An edge of the planar graph: a piece of drawn curve between two vertices that no other edge crosses.
#[derive(Clone, Copy, Debug)]
pub struct PlanarEdge {
    /// Vertex at the start of the curve.
    pub start: u32,
    /// Vertex at its end.
    pub end: u32,
    /// The curve from start to end; its end points are the vertices' points to the last bit.
    pub curve: Curve,
    /// Part on the left of the direction of travel ([`OUTSIDE`] beyond the edge of space).
    pub left: PartId,
    /// Part on the right.
    pub right: PartId,
    /// Boundary kind.
    pub boundary: Boundary,
}

/// Nearly coincident drawing elements that were made one.
#[derive(Clone, Debug, PartialEq)]
pub struct Weld {
    /// Where, m.
    pub at: Point,
    /// How far the drawing was moved there, m.
    pub moved_m: f64,
    /// Names of the regions involved.
    pub regions: Vec<String>,
}

/// The outer half circle.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OuterCircle {
    /// Height of the centre on the axis, m.
    pub centre_z_m: f64,
    /// Radius, m.
    pub radius_m: f64,
}

/// A planar graph of curves whose faces belong to parts.
#[derive(Clone, Debug)]
pub struct Arrangement {
    /// Vertices, m. Vertices on the axis have r = 0 exactly; on the mirror z = mirror exactly.
    pub vertices: Vec<Point>,
    /// Edges; each pair of vertices may be joined by several different curves.
    pub edges: Vec<PlanarEdge>,
    /// Parts; index 0 is air.
    pub parts: Vec<Part>,
    /// The outer half circle, when the boundary is open.
    pub circle: Option<OuterCircle>,
    /// Height of the symmetry plane, m.
    pub mirror_z_m: Option<f64>,
    /// What was welded.
    pub welds: Vec<Weld>,
}
