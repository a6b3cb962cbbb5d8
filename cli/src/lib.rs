//! The `coilwright` command line: case file -> problem -> solver -> report, picture, files.

pub mod args;
pub mod case;
pub mod caution;
pub mod files;
pub mod notation;
pub mod picture;
pub mod plot;
pub mod progress;
pub mod report;
pub mod run;
#[cfg(test)]
mod sample;
pub mod status;
pub mod stock;
pub mod terminal_plot;
