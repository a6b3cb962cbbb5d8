//! Published values against the program: `cargo run --release -p coilwright-validation [-- --markdown] [NAME]...`
//! prints one table and exits with status 1 when a row fails. NAME picks the sources whose short name contains it.

use std::io::Write as _;
use std::process::ExitCode;

mod case_text;
mod exact;
mod solved;
mod sources;
mod table;

fn main() -> ExitCode {
    let mut markdown = false;
    let mut wanted = Vec::new();
    for argument in std::env::args().skip(1) {
        match argument.as_str() {
            "--markdown" => markdown = true,
            _ => wanted.push(argument),
        }
    }
    let (mut rows, mut failures) = (Vec::new(), Vec::new());
    for (name, check) in sources::CHECKS {
        if wanted.is_empty() || wanted.iter().any(|part| name.contains(part.as_str())) {
            match check() {
                Ok(more) => rows.extend(more),
                Err(failure) => failures.push(format!("{name}: {failure}")),
            }
        }
    }
    let text = if markdown {
        table::markdown(&rows)
    } else {
        table::plain(&rows)
    };
    let failed = rows.iter().filter(|row| !row.passes()).count();
    let mut out = std::io::stdout().lock();
    let mut written = out.write_all(text.as_bytes());
    for failure in &failures {
        written = written.and_then(|()| writeln!(out, "\nCould not be checked: {failure}"));
    }
    if !markdown {
        let passed = rows.len() - failed;
        written =
            written.and_then(|()| writeln!(out, "\n{passed} passed, {} failed", failed + failures.len()));
    }
    match written {
        Ok(()) if failed == 0 && failures.is_empty() && !rows.is_empty() => ExitCode::SUCCESS,
        _ => ExitCode::FAILURE,
    }
}
