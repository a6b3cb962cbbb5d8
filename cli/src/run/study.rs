//! Everything a case asks to be solved: its one operating point, or every place of a travel; and the linkage curve.

use std::time::Instant;

use solver::linkage::{self, Request};
use solver::solve::{SolveError, Timing};
use solver::stroke::each_place;
use solver::{Solution, linkage::LinkageCurve};

use super::wrong_case;
use crate::case::{Case, Faults, Travel, length_text};
use crate::caution::{self, Caution};
use crate::progress::ProgressLine;
use crate::report::json::{Clock, PlaceResult, Report};
use crate::status::Failure;

/// A solved case.
pub struct Study {
    /// The solution that pictures and field files show.
    pub solution: Solution,
    /// The case as it is drawn in them: with the travelling mover at the place shown.
    pub case: Case,
    /// The report on everything.
    pub report: Report,
}

impl Study {
    /// Solves everything.
    pub fn of(case: &Case, progress: &ProgressLine, read_s: f64, begun: Instant) -> Result<Self, Failure> {
        let mut study = match &case.travel {
            Some(travel) => along(case, travel, progress, read_s)?,
            None => {
                let solution = solver::solve(&case.section, &case.problem, &case.accuracy, progress)
                    .map_err(|error| failure(&error, |mesh| case.mesh_faults(mesh)))?;
                let cautions = caution::all(case, &solution);
                let report = Report::of(case, &solution, cautions, clock(read_s));
                Self {
                    solution,
                    case: case.clone(),
                    report,
                }
            }
        };
        if let Some(curve) = linkage_curve(case, progress)? {
            study.report.set_linkage(case, &curve);
        }
        study.report.timing_s.total = begun.elapsed().as_secs_f64();
        Ok(study)
    }
}

fn clock(read_s: f64) -> Clock {
    Clock {
        read_s,
        ..Clock::default()
    }
}

/// What is kept of a place.
struct Kept {
    result: PlaceResult,
    cautions: Vec<Caution>,
    timing: Timing,
    /// The whole solution, of the place shown only.
    solution: Option<Solution>,
}

fn along(case: &Case, travel: &Travel, progress: &ProgressLine, read_s: f64) -> Result<Study, Failure> {
    let count = travel.offsets_m.len();
    let sections: Result<Vec<_>, _> = travel
        .offsets_m
        .iter()
        .map(|&offset| case.section_at(offset))
        .collect();
    let sections = sections.map_err(|error| Failure::wrong(error.to_string()))?;
    let shown = travel.shown();
    let kept = each_place(
        &sections,
        &case.problem,
        &case.accuracy,
        |index| progress.part(format!("place {} of {count}", index + 1)),
        |index, solution| Kept {
            result: PlaceResult::of(case, travel, index, &solution.quantities, &solution.accuracy),
            cautions: caution::all(case, &solution),
            timing: solution.timing,
            solution: (index == shown).then_some(solution),
        },
    )
    .map_err(|(index, error)| failure(&error, |mesh| case.mesh_faults_at(mesh, travel.offsets_m[index])))?;
    let mut case = case.clone();
    case.section = sections[shown].clone();
    let cautions = of_all_places(&case, travel, &kept);
    let (mut results, mut timing, mut solution) = (Vec::with_capacity(count), Timing::default(), None);
    for place in kept {
        timing.mesh_s += place.timing.mesh_s;
        timing.assembly_s += place.timing.assembly_s;
        timing.solve_s += place.timing.solve_s;
        timing.quantities_s += place.timing.quantities_s;
        results.push(place.result);
        solution = solution.or(place.solution);
    }
    let Some(mut solution) = solution else {
        unreachable!("the place shown is one of the places")
    };
    solution.timing = timing;
    let mut report = Report::of(&case, &solution, cautions, clock(read_s));
    report.set_travel(&case, travel, results, shown);
    Ok(Study {
        solution,
        case,
        report,
    })
}

/// Cautions of all places, each once: where they differ by their numbers alone or are not raised everywhere, the first
/// stands for the others and says so.
fn of_all_places(case: &Case, travel: &Travel, kept: &[Kept]) -> Vec<Caution> {
    // The wording without its numbers tells which cautions are the same.
    let kind = |caution: &Caution| -> (String, String, String) {
        let wording = caution
            .text
            .split_whitespace()
            .filter(|word| !word.contains(|c: char| c.is_ascii_digit()));
        (
            caution.about.clone(),
            caution.source.clone(),
            wording.collect::<Vec<_>>().join(" "),
        )
    };
    let all: Vec<(f64, &Caution)> = travel
        .offsets_m
        .iter()
        .zip(kept)
        .flat_map(|(&offset, place)| place.cautions.iter().map(move |caution| (offset, caution)))
        .collect();
    let mut seen = Vec::new();
    let mut merged = Vec::new();
    for &(offset, caution) in &all {
        let own = kind(caution);
        if seen.contains(&own) {
            continue;
        }
        let same: Vec<&Caution> = all
            .iter()
            .map(|(_, other)| *other)
            .filter(|other| kind(other) == own)
            .collect();
        seen.push(own);
        let everywhere = same.len() >= kept.len() && same.iter().all(|other| other.text == caution.text);
        let mut caution = caution.clone();
        if !everywhere {
            let at = length_text(offset, &case.length_unit);
            let others = match same.len() - 1 {
                0 => "only".to_owned(),
                more => format!("and {more} more of {} places", kept.len()),
            };
            caution.text = format!("At travel = {at} ({others}): {}", caution.text);
        }
        merged.push(caution);
    }
    merged
}

fn linkage_curve(case: &Case, progress: &ProgressLine) -> Result<Option<LinkageCurve>, Failure> {
    let Some(wanted) = &case.linkage else {
        return Ok(None);
    };
    let request = Request {
        section: &case.section,
        problem: &case.problem,
        settings: &case.accuracy,
        winding: wanted.winding,
        currents_a: &wanted.currents_a,
    };
    let name = &case.problem.windings[wanted.winding].name;
    let curve = linkage::curve(&request, &progress.part(format!("linkage of {name}")))
        .map_err(|error| failure(&error, |mesh| case.mesh_faults(mesh)))?;
    Ok(Some(curve))
}

/// What a solve that found nothing means for the exit status.
fn failure(error: &SolveError, faults: impl Fn(&mesher::MeshError) -> Faults) -> Failure {
    match error {
        SolveError::Mesh(error) => wrong_case(&faults(error)),
        SolveError::NoResistance { .. } => Failure::wrong(error.to_string()),
        SolveError::Space(_) | SolveError::Linear(_) | SolveError::NotFinite { .. } => {
            Failure::unexpected(error.to_string())
        }
    }
}
