//! Checks across crates.

#![allow(clippy::unwrap_used, clippy::panic, reason = "tests")]

mod layers;
mod licences;
mod properties;
