//! Pictures of a case as SVG: the half section mirrored to a full one, parts named on the drawing, one hue from light
//! to dark for |B|, flux lines with their values, a scale bar.

mod beyond;
mod flux_lines;
mod flux_values;
mod furniture;
mod marks;
mod mask;
mod names;
mod outline;
mod page;
mod shade;
mod sheet;
pub(crate) mod svg;
#[cfg(test)]
mod tests;
pub(crate) mod tint;
mod view;

use mesher::MeshError;
use mesher::arrange::{Arrangement, arrange};
use solver::Solution;
use solver::problem::{MagneticLaw, Turns};

use crate::case::Case;
use crate::notation::{Unit, bracket, significant};

use self::mask::Mask;
use self::names::Label;
use self::outline::PartShape;
use self::page::{Beside, Page};
use self::view::View;

/// What both pictures begin with.
struct Scene {
    arrangement: Arrangement,
    parts: Vec<PartShape>,
    view: View,
    mask: Mask,
}

impl Scene {
    fn of(case: &Case) -> Result<Self, MeshError> {
        let arrangement = arrange(&case.section)?;
        let parts = outline::parts(&arrangement);
        let view = View::of(&case.section, outline::bounds(&parts));
        let mask = Mask::of(&parts, &view);
        Ok(Self {
            arrangement,
            parts,
            view,
            mask,
        })
    }

    /// One label for each region that shows, the first region of each winding with what drives it.
    fn labels(&self, case: &Case, detail: impl Fn(usize) -> Option<String>) -> Vec<Label> {
        let shows = |region: &usize| self.parts.iter().any(|part| part.region == *region);
        let regions = (0..case.problem.regions.len()).filter(shows);
        regions
            .map(|region| {
                let mut lines = vec![case.problem.regions[region].name.clone()];
                lines.extend(detail(region));
                Label { region, lines }
            })
            .collect()
    }
}

/// Terminal turns of a winding.
fn turns(turns: &Turns) -> f64 {
    match turns {
        Turns::Total(turns) => *turns,
        Turns::PerRegion(turns) => turns.iter().sum(),
    }
}

/// The winding that a region is the first coil side of.
fn leads(case: &Case, region: usize) -> Option<usize> {
    case.problem
        .windings
        .iter()
        .position(|winding| winding.regions.first() == Some(&region))
}

/// The solved section: |B|, flux lines, parts, windings with their ampere-turns, key numbers.
///
/// # Errors
/// The drawing cannot be made planar (then it could not have been meshed either).
pub fn of_solution(case: &Case, solution: &Solution) -> Result<String, MeshError> {
    let scene = Scene::of(case)?;
    let view = &scene.view;
    let windings = &solution.quantities.windings;
    let currents: Vec<f64> = windings.iter().map(|winding| winding.current_a.value).collect();
    let marks = marks::marks(&case.problem, &currents, false, &scene.parts, &scene.mask, view);
    let mut taken = marks::covered(&marks);
    let labels = scene.labels(case, |region| {
        let winding = windings.get(leads(case, region)?)?;
        let turns = significant(winding.turns.value, Unit::NUMBER, 6);
        let current = significant(winding.current_a.value, Unit::AMPERE, 3);
        let product = significant(winding.ampere_turns_a.value, Unit::AMPERE, 3);
        Some(format!("{turns} turns × {current} = {product}"))
    });
    let names = names::place(labels, &scene.parts, &scene.mask, view, &taken);
    taken.extend(names::covered(&names, view));
    taken.extend(furniture::covered(view));

    let sheet = sheet::Sheet::of(case, solution, view);
    let shade = shade::shade(&sheet, view);
    let lines = flux_lines::flux_lines(&sheet, view);
    let mut page = Page::new(case, view);
    page.field(shade.as_ref(), lines.as_ref().map(flux_lines::path));
    page.outlines(&outline::lines(&scene.arrangement, view));
    page.over(&furniture::axes(view));
    page.over(&marks::draw(&marks, &case.problem, view));
    page.over(&names::draw(&names, view));
    if let Some(lines) = &lines {
        let room = flux_values::Room {
            width: view.half_width(),
            height: view.described_height(),
            taken: &taken,
        };
        page.over(&flux_values::draw(
            lines,
            &outline::borders(&scene.parts, view),
            &room,
        ));
        page.say(format!(
            "{} from one flux line to the next.",
            significant(lines.step_wb, Unit::WEBER, 3)
        ));
    }
    for words in key_numbers(solution) {
        page.say(words);
    }
    page.subtitle(subtitle(case, solution));
    Ok(page.finish(
        Beside {
            left: names::column_width(&names),
            right: 0.0,
            bottom: names::bottom(&names),
        },
        shade.map(|shade| shade.top_t),
    ))
}

fn subtitle(case: &Case, solution: &Solution) -> String {
    let met = if solution.accuracy.met {
        ""
    } else {
        ", ACCURACY GOAL NOT MET"
    };
    let reached = significant(solution.accuracy.reached, Unit::PER_CENT, 2);
    format!(
        "static field, {} °C, accuracy {reached}{met}, coilwright {}",
        case.temperature_c,
        env!("CARGO_PKG_VERSION")
    )
}

/// The numbers one looks for first.
fn key_numbers(solution: &Solution) -> Vec<String> {
    const MOST: usize = 3;
    let quantities = &solution.quantities;
    let mut words = Vec::new();
    for (k, winding) in quantities.windings.iter().enumerate().take(MOST) {
        if let Some(own) = quantities.inductance_h.get(k).and_then(|row| row.get(k)) {
            words.push(format!(
                "Inductance of {}: {}.",
                winding.name,
                bracket(own, Unit::HENRY)
            ));
        }
    }
    if let [first, second, ..] = quantities.windings.as_slice()
        && let Some(k) = quantities.coupling.first().and_then(|row| row.get(1))
    {
        words.push(format!(
            "Coupling of {} and {}: {}.",
            first.name,
            second.name,
            bracket(k, Unit::NUMBER)
        ));
    }
    for mover in quantities.movers.iter().take(MOST) {
        if let Some(force) = &mover.force_n {
            let way = if force.value < 0.0 { "down" } else { "up" };
            words.push(format!(
                "Force on {}: {} ({way}).",
                mover.name,
                bracket(force, Unit::NEWTON)
            ));
        }
    }
    words
}

/// The drawn section, not solved: parts with their materials, rulers, the sense of windings, magnets and movers.
///
/// # Errors
/// The drawing cannot be made planar, or leaves a region nothing.
pub fn of_drawing(case: &Case) -> Result<String, MeshError> {
    let scene = Scene::of(case)?;
    let view = &scene.view;
    let marks = marks::marks(&case.problem, &[], true, &scene.parts, &scene.mask, view);
    let taken = marks::covered(&marks);
    let labels = scene.labels(case, |region| {
        let material = case.region_notes.get(region).map(|note| note.material.clone());
        match leads(case, region).map(|winding| &case.problem.windings[winding]) {
            Some(winding) => {
                let turns = significant(turns(&winding.turns), Unit::NUMBER, 6);
                Some(format!("winding {}, {turns} turns", winding.name))
            }
            None => material,
        }
    });
    let names = names::place(labels, &scene.parts, &scene.mask, view, &taken);
    let mut page = Page::new(case, view);
    for part in &scene.parts {
        page.part(&outline::filled(part, view), look(case, part.region));
    }
    page.outlines(&outline::lines(&scene.arrangement, view));
    page.over(&furniture::axes(view));
    page.over(&marks::draw(&marks, &case.problem, view));
    page.over(&names::draw(&names, view));
    page.over(&furniture::rulers(view, case));
    page.subtitle(format!(
        "cross-section, not solved, coilwright {}",
        env!("CARGO_PKG_VERSION")
    ));
    page.say("Right of the axis a cross is current into the page, where turns are positive.".to_owned());
    Ok(page.finish(
        Beside {
            left: names::column_width(&names),
            right: 64.0,
            bottom: names::bottom(&names),
        },
        None,
    ))
}

/// How a region looks when it is only drawn: a class of the style sheet.
fn look(case: &Case, region: usize) -> &'static str {
    if case
        .problem
        .windings
        .iter()
        .any(|winding| winding.regions.contains(&region))
    {
        return "part-winding";
    }
    match case.problem.regions.get(region).map(|region| &region.law) {
        Some(MagneticLaw::Magnet { .. }) => "part-magnet",
        Some(MagneticLaw::Linear {
            relative_permeability,
        }) if *relative_permeability > 1.5 => "part-magnetic",
        _ => "part-plain",
    }
}
