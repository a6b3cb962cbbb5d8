//! A winding as laid in the section: turn density, wire length, resistance, direct current.

use std::f64::consts::TAU;

use mesher::Mesh;

use crate::element::mean_over_2r;
use crate::problem::{Conductor, Drive, Problem, Turns, Winding};
use crate::solve::SolveError;
use crate::space::Space;

/// What the drawing and the data fix of a winding, before any field is known. Whole device, where a mirror
/// doubles it, except turns and section.
#[derive(Clone, Debug)]
pub struct Laid {
    /// Parts of the mesh that are its coil sides, with the signed turns in each.
    pub sides: Vec<Side>,
    /// Signed sum of turns of the described half.
    pub turns: f64,
    /// Visible section of the described half, m².
    pub section_m2: f64,
    /// Mean length of a turn, m.
    pub mean_turn_length_m: f64,
    /// Length of wire, m.
    pub wire_length_m: f64,
    /// Own resistance, ohm, where the case says what it is made of.
    pub resistance_ohm: Option<f64>,
    /// Terminal current, A.
    pub current_a: f64,
}

/// One coil side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Side {
    /// Part of the mesh.
    pub part: usize,
    /// Signed turns in it.
    pub turns: f64,
}

/// Lays every winding of a problem into the parts of a mesh.
///
/// # Errors
/// A voltage drive on a winding whose resistance is not known.
pub fn lay(mesh: &Mesh, problem: &Problem) -> Result<Vec<Laid>, SolveError> {
    problem
        .windings
        .iter()
        .map(|w| lay_one(mesh, problem, w))
        .collect()
}

fn lay_one(mesh: &Mesh, problem: &Problem, winding: &Winding) -> Result<Laid, SolveError> {
    let sides = sides(mesh, winding);
    let whole = if problem.mirror.is_some() { 2.0 } else { 1.0 };
    let (mut section_m2, mut wire_length_m, mut count) = (0.0, 0.0, 0.0);
    for side in &sides {
        let part = &mesh.parts[side.part];
        section_m2 += part.area_m2;
        wire_length_m += whole * side.turns.abs() * TAU * part.r_moment_m3 / part.area_m2;
        count += whole * side.turns.abs();
    }
    let resistance_ohm = winding.conductor.map(|c| match c {
        Conductor::Wire {
            copper_area_m2,
            resistivity_ohm_m,
            ..
        } => resistivity_ohm_m * wire_length_m / copper_area_m2,
        Conductor::Measured(ohm) => ohm,
    });
    let current_a = match winding.drive {
        Drive::Current(a) => a,
        Drive::Passive => 0.0,
        Drive::Voltage(v) => match resistance_ohm {
            Some(own) if own + winding.lead_resistance_ohm > 0.0 => v / (own + winding.lead_resistance_ohm),
            _ => {
                return Err(SolveError::NoResistance {
                    winding: winding.name.clone(),
                });
            }
        },
    };
    Ok(Laid {
        turns: sides.iter().map(|s| s.turns).sum(),
        sides,
        section_m2,
        mean_turn_length_m: wire_length_m / count,
        wire_length_m,
        resistance_ohm,
        current_a,
    })
}

/// Turns are shared by visible area.
fn sides(mesh: &Mesh, winding: &Winding) -> Vec<Side> {
    let parts_of = |region: usize| {
        (0..mesh.parts.len())
            .filter(move |&p| mesh.parts[p].region == Some(region) && mesh.parts[p].area_m2 > 0.0)
    };
    let area = |parts: &[usize]| parts.iter().map(|&p| mesh.parts[p].area_m2).sum::<f64>();
    let share = |parts: Vec<usize>, turns: f64| {
        let total = area(&parts);
        parts.into_iter().map(move |part| Side {
            part,
            turns: turns * mesh.parts[part].area_m2 / total,
        })
    };
    match &winding.turns {
        Turns::Total(turns) => share(
            winding.regions.iter().flat_map(|&r| parts_of(r)).collect(),
            *turns,
        )
        .collect(),
        Turns::PerRegion(each) => winding
            .regions
            .iter()
            .zip(each)
            .flat_map(|(&r, &turns)| share(parts_of(r).collect(), turns))
            .collect(),
    }
}

impl Laid {
    /// Turns per m² of each triangle, so that the mesh carries exactly the turns of each side: the section is
    /// summed with the same element integrals as the load.
    pub fn turn_density(&self, mesh: &Mesh, space: &Space) -> Vec<f64> {
        let mut section = vec![0.0; mesh.parts.len()];
        for (t, &part) in mesh.part_of.iter().enumerate() {
            section[part as usize] += section_m2(space, t);
        }
        let mut density = vec![0.0; mesh.parts.len()];
        for side in &self.sides {
            density[side.part] = side.turns / section[side.part];
        }
        mesh.part_of.iter().map(|&part| density[part as usize]).collect()
    }
}

/// Section of a triangle in (r, z), int dr dz = int ds dz / (2 sqrt s), m², by the integral the load uses.
pub fn section_m2(space: &Space, triangle: usize) -> f64 {
    mean_over_2r(space.radii(triangle)) * space.elements[triangle].area
}
