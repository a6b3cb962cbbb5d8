//! Random scenes of coils, iron and magnets, written as case files and solved as any case is: shared by the checks
//! across crates.

mod scene;
mod solved;

pub use scene::{Body, Coil, Mirror, Scene};
pub use solved::Solved;
