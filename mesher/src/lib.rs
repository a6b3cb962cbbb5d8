//! Half sections (r, z) of round devices turned into quality triangle meshes. Lengths are metres; this crate
//! knows no physics.
//!
//! One way only: [`section::Section`] (what is painted) → [`arrange::Arrangement`] (a planar graph of curves
//! whose faces belong to parts) → sized and refined on a constrained Delaunay triangulation → [`mesh::Mesh`].

pub mod arrange;
mod build;
pub mod check;
mod chords;
pub mod curve;
pub mod error;
pub mod locate;
pub mod mesh;
#[cfg(test)]
mod mesh_properties;
mod nested;
mod order;
mod piece;
mod planar;
pub mod quality;
mod refine;
pub mod section;
pub mod shape;
mod site;
mod size;
#[cfg(any(test, feature = "strategies"))]
pub mod strategies;
pub mod topology;
mod triangulate;

pub use curve::{Curve, Point};
pub use error::{MeshError, ShapeError};
pub use mesh::{Mesh, MeshOptions};
pub use section::Section;
