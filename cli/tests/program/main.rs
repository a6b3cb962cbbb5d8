//! The built `coilwright` program, run as a person or a script runs it.

#![allow(clippy::unwrap_used, clippy::panic, reason = "tests")]

mod bad_input;
mod demo_cases;
mod exit_status;
mod harness;
mod json;
mod limits_of_the_machine;
mod travel;
