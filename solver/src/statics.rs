//! The static field at an operating point, by one linear solve or by Newton's method; and the field of one ampere
//! in each winding with the material frozen there.

use mesher::Mesh;
use rayon::prelude::*;

use crate::law::{Laws, mean_b};
use crate::magnetostatic::{Factored, ambient_load, gradients, magnet_load};
use crate::newton::{Course, Energy, Limits};
use crate::problem::Problem;
use crate::solve::SolveError;
use crate::space::Space;

/// H = nu (B - Br) of each triangle: the law itself where it is linear, frozen at the operating point elsewhere.
#[derive(Clone, Debug)]
pub struct Materials {
    /// Reluctivity, m/H.
    pub nu: Vec<f64>,
    /// Remanence (r, z), T.
    pub remanence_t: Vec<[f64; 2]>,
}

/// Fields on one mesh, all nodes, Wb/rad; the uniform ambient field is left out of each ("rest").
#[derive(Debug)]
pub struct StaticField {
    /// At the operating point.
    pub rest: Vec<f64>,
    /// Of one ampere in each winding, material frozen (per ampere).
    pub unit: Vec<Vec<f64>>,
    /// Share of magnets and ambient field: `rest` less the windings' own; `None` without either.
    pub given: Option<Vec<f64>>,
    /// Change of the field per ampere in each winding; `None` with linear material, where it is `unit`.
    pub incremental: Option<Vec<Vec<f64>>>,
    /// The frozen material.
    pub materials: Materials,
    /// How Newton's method went; `None` with linear material.
    pub course: Option<Course>,
}

/// What drives a field.
pub struct Sources<'s> {
    /// Load of one ampere in each winding, A per radian of psi.
    pub unit_load: &'s [Vec<f64>],
    /// Current of each winding, A.
    pub currents: &'s [f64],
}

impl StaticField {
    /// Solves. `start` is a guess of `rest` for Newton's method.
    ///
    /// # Errors
    /// A linear system that cannot be solved accurately.
    pub fn solve(
        mesh: &Mesh,
        space: &Space,
        problem: &Problem,
        laws: &Laws,
        sources: &Sources<'_>,
        start: Option<Vec<f64>>,
    ) -> Result<Self, SolveError> {
        if laws.curved {
            saturable(mesh, space, problem, laws, sources, start)
        } else {
            linear(mesh, space, problem, laws, sources)
        }
    }
}

fn linear(
    mesh: &Mesh,
    space: &Space,
    problem: &Problem,
    laws: &Laws,
    sources: &Sources<'_>,
) -> Result<StaticField, SolveError> {
    let materials = frozen(mesh, laws, &vec![[0.0; 2]; mesh.triangles.len()]);
    let given_load = given_load(space, problem, &materials);
    let factored = Factored::new(space, &materials.nu)?;
    let loads: Vec<Vec<f64>> = sources.unit_load.iter().cloned().chain(given_load).collect();
    let mut unit = factored.solve(&loads)?;
    let given = if unit.len() > sources.currents.len() {
        unit.pop()
    } else {
        None
    };
    let start = given.clone().unwrap_or_else(|| vec![0.0; mesh.nodes.len()]);
    let rest = with_currents(start, &unit, sources.currents, 1.0);
    Ok(StaticField {
        rest,
        unit,
        given,
        incremental: None,
        materials,
        course: None,
    })
}

fn saturable(
    mesh: &Mesh,
    space: &Space,
    problem: &Problem,
    laws: &Laws,
    sources: &Sources<'_>,
    start: Option<Vec<f64>>,
) -> Result<StaticField, SolveError> {
    let nothing = vec![0.0; mesh.nodes.len()];
    let load = with_currents(nothing, sources.unit_load, sources.currents, 1.0);
    let energy = Energy {
        mesh,
        space,
        laws,
        load: &load,
        ambient_b_t: problem.ambient_b_t,
    };
    let minimum = energy.minimise(start, &Limits::default())?;
    let rest = minimum.phi;
    let mut gradient = gradients(space, &rest);
    gradient
        .par_iter_mut()
        .for_each(|g| g[0] += 0.5 * problem.ambient_b_t);
    let b: Vec<[f64; 2]> = gradient
        .par_iter()
        .enumerate()
        .map(|(t, &g)| mean_b(space, t, g))
        .collect();
    let materials = frozen(mesh, laws, &b);
    let incremental = minimum.hessian.solve(sources.unit_load)?;
    let unit = minimum
        .hessian
        .with_reluctivity(&materials.nu)?
        .solve(sources.unit_load)?;
    let driven = problem.ambient_b_t != 0.0 || materials.remanence_t.iter().any(|br| *br != [0.0; 2]);
    let given = driven.then(|| with_currents(rest.clone(), &unit, sources.currents, -1.0));
    let course = Some(minimum.course);
    Ok(StaticField {
        rest,
        unit,
        given,
        incremental: Some(incremental),
        materials,
        course,
    })
}

/// `onto` + sign * sum of current times unit.
fn with_currents(mut onto: Vec<f64>, unit: &[Vec<f64>], currents: &[f64], sign: f64) -> Vec<f64> {
    for (unit, &current) in unit.iter().zip(currents).filter(|(_, current)| **current != 0.0) {
        onto.par_iter_mut()
            .zip(unit)
            .for_each(|(x, u)| *x += sign * current * u);
    }
    onto
}

fn frozen(mesh: &Mesh, laws: &Laws, b: &[[f64; 2]]) -> Materials {
    let (nu, remanence_t) = b
        .par_iter()
        .zip(&mesh.part_of)
        .map(|(&b, &part)| laws.of_part[part as usize].frozen(b))
        .unzip();
    Materials { nu, remanence_t }
}

/// One load for magnets and ambient together: they are never wanted apart.
fn given_load(space: &Space, problem: &Problem, materials: &Materials) -> Option<Vec<f64>> {
    let magnets = materials
        .remanence_t
        .iter()
        .any(|br| *br != [0.0; 2])
        .then(|| magnet_load(space, &materials.nu, &materials.remanence_t));
    let ambient =
        (problem.ambient_b_t != 0.0).then(|| ambient_load(space, &materials.nu, problem.ambient_b_t));
    match (magnets, ambient) {
        (Some(m), Some(a)) => Some(m.iter().zip(&a).map(|(x, y)| x + y).collect()),
        (Some(m), None) => Some(m),
        (None, ambient) => ambient,
    }
}
