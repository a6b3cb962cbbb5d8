//! What is to be meshed: painted regions, the edge of the described space, the mirror.

use crate::arrange::PartId;
use crate::curve::Point;
use crate::shape::Outline;

/// A half section. Regions are painted in order: a later one covers an earlier one; what nothing covers is air.
#[derive(Clone, Debug)]
pub struct Section {
    /// Regions in painting order.
    pub regions: Vec<PaintedRegion>,
    /// The edge of the meshed space.
    pub edge: SpaceEdge,
    /// Height of the symmetry plane, m; only what lies above it is described.
    pub mirror_z_m: Option<f64>,
}

/// A named region: one outline, or several copies painted together.
#[derive(Clone, Debug)]
pub struct PaintedRegion {
    /// The name the user gave; errors repeat it.
    pub name: String,
    /// One outline per copy (`repeat`), at least one.
    pub copies: Vec<Outline>,
    /// Upper limit of the triangle size in it, m.
    pub mesh_size_m: Option<f64>,
}

/// The edge of the meshed space.
#[derive(Clone, Debug)]
pub enum SpaceEdge {
    /// A half circle around a point of the axis just outside everything described (centred on the mirror where
    /// there is one); its radius is chosen by the mesher.
    HalfCircle,
    /// A drawn wall.
    Wall(Outline),
}

impl Section {
    /// The part painted at a point: the number of the outline painted last among those around it, counted through
    /// all copies from 1 (as in [`crate::arrange::Arrangement::parts`]), or 0 for air. Looks at every outline, and
    /// not at the edge of space: meant for checks.
    pub fn painted_at(&self, point: Point) -> PartId {
        let outlines = self.regions.iter().flat_map(|region| &region.copies);
        let covering = outlines.zip(1..).filter(|(outline, _)| outline.contains(point));
        covering.last().map_or(0, |(_, part)| part)
    }
}
