//! `solve`: case → solution → report, picture, files.

use std::path::PathBuf;
use std::time::Instant;

use super::study::Study;
use super::{complain, read_case, say};
use crate::args::Solve;
use crate::case::{Case, Source};
use crate::files::OutputFolder;
use crate::picture;
use crate::progress::ProgressLine;
use crate::report::json::Report;
use crate::report::{plots, table, text};
use crate::status::{Failure, Status};

/// Solves a case, tells and writes what was found.
pub fn solve(args: &Solve, begun: Instant) -> Result<Status, Failure> {
    let (source, case) = read_case(&args.case)?;
    let read_s = begun.elapsed().as_secs_f64();
    let folder = match folder_of(args, &source, &case) {
        Some(path) => Some(OutputFolder::open(&path).map_err(|error| Failure::wrong(error.to_string()))?),
        None => None,
    };
    set_threads(args.threads)?;

    let progress = ProgressLine::start(args.quiet);
    let mut study = Study::of(&case, &progress, read_s, begun)?;
    progress.say("writing");
    // A number that is not finite must stop the run before anything is written.
    study
        .report
        .to_json()
        .map_err(|error| Failure::unexpected(error.to_string()))?;

    let page = match &folder {
        Some(folder) => Some(write_files(folder, &mut study, begun)?),
        None => None,
    };
    progress.finish();
    tell(args, &study.report, page.as_deref())
}

/// Where the files go; `None` when none are wanted.
fn folder_of(args: &Solve, source: &Source, case: &Case) -> Option<PathBuf> {
    match &args.out {
        Some(path) => Some(path.clone()),
        None if args.json => None,
        None => Some(beside(source, &format!("{}.out", case.name))),
    }
}

/// A path beside the case file; in the current folder when the case came another way.
pub fn beside(source: &Source, name: &str) -> PathBuf {
    source.folder().join(name)
}

fn set_threads(threads: Option<usize>) -> Result<(), Failure> {
    let Some(threads) = threads else { return Ok(()) };
    rayon::ThreadPoolBuilder::new()
        .num_threads(threads)
        .build_global()
        .map_err(|error| Failure::unexpected(format!("{threads} threads cannot be started: {error}")))
}

/// Everything a folder gets, under its final names only when all of it is on the disk. Returns the report in words.
fn write_files(folder: &OutputFolder, study: &mut Study, begun: Instant) -> Result<String, Failure> {
    let Study {
        solution,
        case,
        report,
    } = study;
    let output = Instant::now();
    let words = |error: &dyn std::fmt::Display| Failure::unexpected(error.to_string());
    let (field, drawing) = rayon::join(
        || solver::vtk::vtu(solution),
        || picture::of_solution(case, solution),
    );
    let mut batch = folder.batch();
    let mut names = Vec::new();
    let mut stage = |name: &str, bytes: &[u8]| {
        names.push(folder.path().join(name));
        batch.stage(name, bytes).map_err(|error| words(&error))
    };
    stage("field.vtu", &field.map_err(|error| words(&error))?)?;
    stage("picture.svg", drawing.map_err(|error| words(&error))?.as_bytes())?;
    let shown = report.results.get(report.shown);
    for (name, points) in shown.iter().flat_map(|outcome| outcome.traverses.iter()) {
        let table = table::traverse(points).map_err(|error| words(&error))?;
        stage(&format!("traverse-{name}.csv"), &table)?;
    }
    for (name, bytes) in series(case, report)? {
        stage(&name, &bytes)?;
    }
    stage("resolved.toml", case.resolved_toml.as_bytes())?;
    report.timing_s.output = output.elapsed().as_secs_f64();
    report.timing_s.total = begun.elapsed().as_secs_f64();
    let json = report.to_json().map_err(|error| words(&error))?;
    stage("report.json", json.as_bytes())?;
    names.push(folder.path().join("report.txt"));
    let page = text::report(case, report) + &text::files(&names);
    batch
        .stage("report.txt", page.as_bytes())
        .map_err(|error| words(&error))?;
    batch.publish().map_err(|error| words(&error))?;
    Ok(page)
}

/// Tables and plots over travel and current.
fn series(case: &Case, report: &Report) -> Result<Vec<(String, Vec<u8>)>, Failure> {
    let words = |error: csv::Error| Failure::unexpected(error.to_string());
    let mut files = Vec::new();
    if let Some(travel) = &report.travel {
        let name = format!("travel-{}", travel.mover);
        let rows = table::travel(report, travel).map_err(words)?;
        files.push((format!("{name}.csv"), rows));
        let plot = plots::travel(case, report, travel);
        files.extend(plot.map(|plot| (format!("{name}.svg"), plot.into_bytes())));
    }
    if let Some(linkage) = &report.linkage {
        let name = format!("linkage-{}", linkage.winding);
        let rows = table::linkage(linkage).map_err(words)?;
        files.push((format!("{name}.csv"), rows));
        files.push((format!("{name}.svg"), plots::linkage(case, linkage).into_bytes()));
    }
    Ok(files)
}

/// What goes to the terminal, and the status. `page`: the report in words.
fn tell(args: &Solve, report: &Report, page: Option<&str>) -> Result<Status, Failure> {
    if args.json {
        let json = report
            .to_json()
            .map_err(|error| Failure::unexpected(error.to_string()))?;
        say(json.as_bytes())?;
    } else if let Some(page) = page.filter(|_| !args.quiet) {
        say(page.as_bytes())?;
    }
    if report.accuracy.met {
        return Ok(Status::Done);
    }
    let why = report
        .accuracy
        .why_not
        .as_deref()
        .unwrap_or("the accuracy goal was not reached");
    complain(&format!("solved, but {why}"));
    Ok(Status::NotReached)
}
