//! Flux linkage of a winding over its current: one drawing, one pair of meshes, many operating points.
//!
//! On the coarse mesh Newton's method goes from each current to the next, starting on the tangent of the curve (the
//! last field plus the change of current times the change of field per ampere); on the fine mesh every current starts
//! from its own coarse field, several at once.

use std::time::Instant;

use mesher::{Mesh, MeshOptions, Section};

use crate::accuracy::{self, Judged};
use crate::bracket::{Bracket, Pairing};
use crate::crew;
use crate::nested::prolong;
use crate::operating::Operating;
use crate::problem::{Drive, Problem};
use crate::quantity::inductance;
use crate::solve::{
    Accuracy, Clock, MOST_LEVELS, Progress, Settings, SolveError, Spent, Stage, next_fineness,
};
use crate::space::Space;

/// What the coil's driver sees at one current.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LinkagePoint<N> {
    /// Terminal current of the winding, A.
    pub current_a: f64,
    /// Flux linkage from everything, Wb.
    pub flux_linkage_wb: N,
    /// Apparent inductance (reluctivity frozen at this point, the winding alone driven), H.
    pub inductance_h: N,
    /// Incremental inductance, d linkage / d current, H.
    pub incremental_inductance_h: N,
}

/// Linkage of a winding over its current.
#[derive(Clone, Debug)]
pub struct LinkageCurve {
    /// Index of the winding.
    pub winding: usize,
    /// One point per current, in the order asked for.
    pub points: Vec<LinkagePoint<Bracket>>,
    /// The worst of all points: linkage and both inductances.
    pub accuracy: Accuracy,
    /// Pairs of meshes solved.
    pub levels: usize,
    /// Most Newton steps that a point took on a mesh; 0 with linear material.
    pub most_newton_steps: usize,
}

/// What to find.
#[derive(Clone, Copy, Debug)]
pub struct Request<'r> {
    /// The drawing.
    pub section: &'r Section,
    /// The physics; the drive of the winding is replaced by each current.
    pub problem: &'r Problem,
    /// Accuracy and limits. The goal is for the curve whatever `of` says.
    pub settings: &'r Settings,
    /// Index of the winding.
    pub winding: usize,
    /// Its currents, A.
    pub currents_a: &'r [f64],
}

/// Finds the curve, with finer meshes until the goal is met or a limit is reached.
///
/// # Errors
/// As [`crate::solve::solve`].
pub fn curve(request: &Request<'_>, progress: &dyn Progress) -> Result<LinkageCurve, SolveError> {
    let started = Instant::now();
    let mut fineness = request.settings.fineness;
    let mut done: Option<LinkageCurve> = None;
    for level in 1..=MOST_LEVELS {
        let begun = Instant::now();
        let (mut found, triangles) = match on_pair(request, fineness, level, progress) {
            Ok(found) => found,
            // A finer pair that cannot be had leaves the one before standing.
            Err(SolveError::Mesh(_)) if done.is_some() => break,
            Err(error) => return Err(error),
        };
        let spent = Spent {
            pair: begun.elapsed(),
            whole: started.elapsed(),
        };
        let next = next_fineness(&mut found.accuracy, triangles, request.settings, &spent);
        done = Some(found);
        match next {
            Some(factor) => fineness *= factor,
            None => break,
        }
    }
    let Some(found) = done else {
        unreachable!("the first level ends with a curve or an error")
    };
    Ok(found)
}

/// What one mesh says about one current.
struct Reading {
    linkage: f64,
    apparent: f64,
    incremental: f64,
    rest_energy: f64,
    converged: bool,
    steps: usize,
}

impl Reading {
    fn of(op: &Operating<'_>, winding: usize) -> Self {
        let apparent = inductance::matrix(op);
        let incremental = inductance::incremental(op);
        let own = apparent[winding][winding];
        Self {
            linkage: inductance::linkage(op, winding, &op.psi),
            apparent: own,
            incremental: incremental.map_or(own, |l| l[winding][winding]),
            rest_energy: op.rest_energy_j_per_rad,
            converged: op.course.as_ref().is_none_or(|c| c.converged),
            steps: op.course.as_ref().map_or(0, |c| c.steps()),
        }
    }
}

fn on_pair(
    request: &Request<'_>,
    fineness: f64,
    level: usize,
    progress: &dyn Progress,
) -> Result<(LinkageCurve, usize), SolveError> {
    progress.stage(Stage::Mesh, level, 0);
    let max_triangles = request.settings.max_triangles / 4;
    let coarse_mesh = Mesh::of(
        request.section,
        &MeshOptions {
            fineness,
            max_triangles,
        },
    )?;
    let fine_mesh = coarse_mesh.refined()?;
    let coarse_space = Space::new(&coarse_mesh, request.problem.mirror)?;
    let coarse = continued(
        request,
        &coarse_mesh,
        &coarse_space,
        &mut Clock::at(progress, level),
    )?;
    let fine_space = Space::new(&fine_mesh, request.problem.mirror)?;
    let fine = crew::each(request.currents_a.len(), |k| {
        let problem = at_current(request, request.currents_a[k]);
        let start = prolong(&coarse[k].1, &coarse_mesh, &fine_mesh);
        let op = Operating::solve(
            &fine_mesh,
            &fine_space,
            &problem,
            Some(start),
            &mut Clock::at(progress, level),
        )?;
        Ok::<_, SolveError>(Reading::of(&op, request.winding))
    })
    .map_err(|(_, error)| error)?;
    let coarse: Vec<Reading> = coarse.into_iter().map(|(reading, _)| reading).collect();
    Ok((joined(request, level, &coarse, &fine)?, fine_mesh.triangles.len()))
}

fn at_current(request: &Request<'_>, current_a: f64) -> Problem {
    let mut problem = request.problem.clone();
    problem.windings[request.winding].drive = Drive::Current(current_a);
    problem
}

/// Each current from the one before, with the field (without the ambient one) of each.
fn continued(
    request: &Request<'_>,
    mesh: &Mesh,
    space: &Space,
    clock: &mut Clock<'_>,
) -> Result<Vec<(Reading, Vec<f64>)>, SolveError> {
    let mut found: Vec<(Reading, Vec<f64>)> = Vec::with_capacity(request.currents_a.len());
    let mut tangent: Option<(f64, Vec<f64>)> = None;
    for &current in request.currents_a {
        let problem = at_current(request, current);
        let last = found.last().map(|(_, rest)| rest);
        // Without current there may be no field at all, which is best found from nothing.
        let start = match (last, &tangent) {
            (Some(rest), Some((from, slope))) if current != 0.0 => Some(
                rest.iter()
                    .zip(slope)
                    .map(|(x, d)| x + (current - from) * d)
                    .collect(),
            ),
            _ => None,
        };
        let op = Operating::solve(mesh, space, &problem, start, clock)?;
        let reading = Reading::of(&op, request.winding);
        tangent = op
            .incremental_psi
            .map(|mut psi| (current, psi.swap_remove(request.winding)));
        found.push((reading, op.rest));
    }
    Ok(found)
}

fn joined(
    request: &Request<'_>,
    levels: usize,
    coarse: &[Reading],
    fine: &[Reading],
) -> Result<LinkageCurve, SolveError> {
    let scale = fine.iter().fold(0.0f64, |m, r| m.max(r.linkage.abs()));
    let points: Vec<LinkagePoint<Bracket>> = request
        .currents_a
        .iter()
        .zip(coarse.iter().zip(fine))
        .map(|(&current_a, (c, f))| {
            let relative = |c: f64, f: f64| if f == 0.0 { 0.0 } else { (f - c).abs() / f.abs() };
            let energy_drift = relative(c.rest_energy, f.rest_energy).max(relative(c.apparent, f.apparent));
            let pairing = Pairing { energy_drift };
            LinkagePoint {
                current_a,
                // The current's own share is the yardstick: magnets may cancel it, and without both there is nothing.
                flux_linkage_wb: pairing.integral(c.linkage, f.linkage, f.apparent * current_a),
                inductance_h: pairing.integral(c.apparent, f.apparent, f.apparent),
                incremental_inductance_h: pairing.integral(c.incremental, f.incremental, f.incremental),
            }
        })
        .collect();
    let name = &request.problem.windings[request.winding].name;
    let judged = points.iter().flat_map(|p| {
        let of = move |what: &str| format!("the {what} of `{name}` at {} A", p.current_a);
        [
            Judged {
                name: of("flux linkage"),
                number: p.flux_linkage_wb,
                scale,
            },
            Judged {
                name: of("inductance"),
                number: p.inductance_h,
                scale: p.inductance_h.value,
            },
            Judged {
                name: of("incremental inductance"),
                number: p.incremental_inductance_h,
                scale: p.inductance_h.value,
            },
        ]
    });
    let judged: Vec<Judged> = judged.collect();
    if let Some(bad) = judged.iter().find(|j| !j.number.is_sound()) {
        return Err(SolveError::NotFinite {
            quantity: bad.name.clone(),
        });
    }
    let mut accuracy = accuracy::worst_of(&judged, request.settings.goal);
    let all = || coarse.iter().chain(fine);
    if all().any(|r| !r.converged) {
        accuracy.met = false;
        accuracy.why_not =
            Some("Newton's method did not settle: no number of the linkage curve is good".into());
    }
    let most_newton_steps = all().map(|r| r.steps).max().unwrap_or(0);
    Ok(LinkageCurve {
        winding: request.winding,
        points,
        accuracy,
        levels,
        most_newton_steps,
    })
}
