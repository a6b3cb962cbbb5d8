//! What the program does, from the words of the command line to the exit status.

mod fault_words;
mod material_curve;
mod materials;
mod show;
mod solving;
mod study;
#[cfg(test)]
mod tests;

use std::ffi::OsString;
use std::io::{self, IsTerminal, Write};
use std::time::Instant;

use clap::Parser;

use crate::args::{CaseArgs, Command, CommandLine};
use crate::case::{self, Case, Faults, Look, Source};
use crate::status::{Failure, Status};

/// Runs the program with these words (the first is its own name). Everything it has to say is said on standard
/// output and standard error.
pub fn program<I, W>(words: I) -> Status
where
    I: IntoIterator<Item = W>,
    W: Into<OsString> + Clone,
{
    let begun = Instant::now();
    let line = match CommandLine::try_parse_from(words) {
        Ok(line) => line,
        Err(error) => {
            // Help and version come this way too. A reader that has gone is no trouble.
            let _ = error.print();
            return if error.exit_code() == 0 {
                Status::Done
            } else {
                Status::Wrong
            };
        }
    };
    let ended = fault_words::caught(|| obey(line.command, begun));
    match ended {
        Ok(status) => status,
        Err(failure) => {
            complain(&failure.message);
            failure.status
        }
    }
}

fn obey(command: Command, begun: Instant) -> Result<Status, Failure> {
    match command {
        Command::Solve(args) => solving::solve(&args, begun),
        Command::Draw(args) => show::draw(&args),
        Command::Sweep(_) => Err(not_yet("sweep")),
        Command::Gather(_) => Err(not_yet("gather")),
        Command::Stock(args) => show::stock(args.name.as_deref()),
        Command::Schema => show::schema(),
        Command::Completions(args) => show::completions(args.shell),
    }
}

fn not_yet(command: &str) -> Failure {
    Failure::wrong(format!(
        "this version does not do `{command}` yet; until then, a shell loop over `coilwright solve --set NAME=VALUE \
         --json` does the same"
    ))
}

/// Reads the case of a command.
fn read_case(args: &CaseArgs) -> Result<(Source, Case), Failure> {
    let source = Source::from_argument(&args.case);
    match case::read(&source, &args.sets) {
        Ok(case) => Ok((source, case)),
        Err(faults) => Err(wrong_case(&faults)),
    }
}

/// What is wrong with a case, drawn for whoever wrote it.
fn wrong_case(faults: &Faults) -> Failure {
    Failure::wrong(format!("the case cannot be used\n{}", faults.render(look())))
}

/// How faults may be drawn on standard error.
fn look() -> Look {
    let terminal = io::stderr().is_terminal();
    let wants_none = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
    let columns = std::env::var("COLUMNS")
        .ok()
        .and_then(|columns| columns.parse().ok());
    Look {
        colour: terminal && !wants_none,
        unicode: terminal,
        width: columns.unwrap_or(100),
    }
}

/// Writes to standard output. A reader that has gone (`| head`) is no trouble.
fn say(text: &[u8]) -> Result<(), Failure> {
    let mut out = io::stdout().lock();
    match out.write_all(text).and_then(|()| out.flush()) {
        Err(error) if error.kind() != io::ErrorKind::BrokenPipe => Err(Failure::unexpected(format!(
            "standard output cannot be written: {error}"
        ))),
        _ => Ok(()),
    }
}

/// Writes a message to standard error, where there is one.
fn complain(message: &str) {
    let message = message.trim_end();
    let _ = writeln!(io::stderr().lock(), "coilwright: {message}");
}
