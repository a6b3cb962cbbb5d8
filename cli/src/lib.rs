//! The `coilwright` command line: case file -> problem -> solver -> report, picture, files.

pub mod case;
pub mod caution;
pub mod stock;
