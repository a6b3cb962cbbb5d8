//! The discretisation on a mesh: s = r² and z of each node, the element integrals, which nodes are free.

use mesher::Mesh;

use crate::element::Element;
use crate::exterior::Exterior;
use crate::problem::MirrorCurrents;

/// In [`Space::free`]: the node is fixed at psi = 0.
pub const FIXED: u32 = u32::MAX;

/// The discretisation on a mesh.
#[derive(Clone, Debug)]
pub struct Space {
    /// r² of each node, m² (on the outer circle R² - (z - zc)²; 0 on the axis).
    pub s: Vec<f64>,
    /// z of each node, m.
    pub z: Vec<f64>,
    /// Corners of each triangle, counter-clockwise in (s, z).
    pub triangles: Vec<[u32; 3]>,
    /// Integrals of each triangle.
    pub elements: Vec<Element>,
    /// Number of each node among the free ones, or [`FIXED`] (psi = 0: axis, wall, mirror with opposite currents).
    pub free: Vec<u32>,
    /// Node of each free number.
    pub free_nodes: Vec<u32>,
    /// The unbounded surroundings; `None` with a wall.
    pub exterior: Option<Exterior>,
    /// Currents of the mirror image, where there is a mirror.
    pub mirror: Option<MirrorCurrents>,
}

impl Space {
    /// Lays the element over a mesh.
    pub fn new(_mesh: &Mesh, _mirror: Option<MirrorCurrents>) -> Result<Self, SpaceError> {
        todo!("being written")
    }

    /// Triangles around a node, counter-clockwise order not promised.
    pub fn fan(&self, _node: usize) -> &[u32] {
        todo!("being written")
    }

    /// Corner values of a nodal vector on a triangle.
    pub fn corners(&self, triangle: usize, psi: &[f64]) -> [f64; 3] {
        self.triangles[triangle].map(|n| psi[n as usize])
    }
}

/// Why a mesh cannot carry the element.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SpaceError {
    /// A triangle is flat or inverted in (s, z).
    #[error("triangle {triangle} at r = {r_m:e} m, z = {z_m:e} m is flat or inverted in (r², z)")]
    Inverted {
        /// Index of the triangle.
        triangle: usize,
        /// Its middle, m.
        r_m: f64,
        /// Its middle, m.
        z_m: f64,
    },
}
