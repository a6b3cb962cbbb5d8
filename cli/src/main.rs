//! The `coilwright` program: a thin door to the library.

use std::process::ExitCode;

fn main() -> ExitCode {
    coilwright::run::program(std::env::args_os()).into()
}
