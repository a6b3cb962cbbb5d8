//! The commands that solve nothing: `draw`, `stock`, `schema`, `completions`.

use clap::CommandFactory;
use clap_complete::Shell;

use super::solving::beside;
use super::{materials, read_case, say, wrong_case};
use crate::args::{CommandLine, Draw};
use crate::files::write_whole;
use crate::status::{Failure, Status};
use crate::{case, picture, stock};

/// The cross-section of a case, without a solve.
pub fn draw(args: &Draw) -> Result<Status, Failure> {
    let (source, case) = read_case(&args.case)?;
    let drawing = picture::of_drawing(&case).map_err(|error| wrong_case(&case.mesh_faults(&error)))?;
    let path = match &args.out {
        Some(path) if path.as_os_str() == "-" => {
            say(drawing.as_bytes())?;
            return Ok(Status::Done);
        }
        Some(path) => path.clone(),
        None => beside(&source, &format!("{}.svg", case.name)),
    };
    write_whole(&path, drawing.as_bytes()).map_err(|error| Failure::unexpected(error.to_string()))?;
    say(format!("{}\n", path.display()).as_bytes())?;
    Ok(Status::Done)
}

/// All built-in materials, or one.
pub fn stock(name: Option<&str>) -> Result<Status, Failure> {
    let table = stock::table();
    let text = match name {
        None => materials::list(&table),
        Some(name) => match table.iter().find(|material| material.name == name) {
            Some(material) => materials::sheet(material),
            None => return Err(Failure::wrong(materials::unknown(&table, name))),
        },
    };
    say(text.as_bytes())?;
    Ok(Status::Done)
}

/// The JSON Schema of the case file.
pub fn schema() -> Result<Status, Failure> {
    say(format!("{:#}\n", case::schema()).as_bytes())?;
    Ok(Status::Done)
}

/// A completion script.
pub fn completions(shell: Shell) -> Result<Status, Failure> {
    let mut script = Vec::new();
    clap_complete::generate(shell, &mut CommandLine::command(), "coilwright", &mut script);
    say(&script)?;
    Ok(Status::Done)
}
