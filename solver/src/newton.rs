//! Newton's method on the convex discrete energy of saturable materials.
//!
//! Unknown is phi = psi - B0 s / 2, the field without the uniform ambient one. Minimised is
//! sum over triangles (area / 2) [w(B) - nu0 B0 . b] + (exterior of phi) / 2 - load . phi, per radian. The step is
//! damped where the slope along it has not fallen to half: for a convex function that is all a line search needs.

use mesher::Mesh;
use rayon::prelude::*;

use crate::MU0;
use crate::law::{Laws, Point, evaluate, rows};
use crate::linear::LinearError;
use crate::magnetostatic::{Factored, gradients};
use crate::space::{FIXED, Space};

/// Limits of the iteration.
#[derive(Clone, Copy, Debug)]
pub struct Limits {
    /// Most steps.
    pub steps: usize,
    /// Converged when the energy decrement and the residual are below this, relative to load . phi and to the load.
    pub relative: f64,
}

impl Default for Limits {
    fn default() -> Self {
        Self {
            steps: 100,
            relative: 1e-10,
        }
    }
}

/// How the iteration went.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    /// Whether both measures fell below the limit.
    pub converged: bool,
    /// Relative residual before each step, and after the last.
    pub residuals: Vec<f64>,
    /// Relative energy decrement of each step.
    pub decrements: Vec<f64>,
}

impl Course {
    /// Newton steps taken.
    pub fn steps(&self) -> usize {
        self.decrements.len()
    }
}

/// A minimum.
pub struct Minimum<'s> {
    /// phi at all nodes, Wb/rad.
    pub phi: Vec<f64>,
    /// The Hessian at (or one step before) the minimum, factored.
    pub hessian: Factored<'s>,
    /// How it was found.
    pub course: Course,
}

/// The problem on one mesh.
pub struct Energy<'a> {
    /// The mesh.
    pub mesh: &'a Mesh,
    /// The discretisation on it.
    pub space: &'a Space,
    /// The laws of its parts.
    pub laws: &'a Laws,
    /// Load of the currents, all nodes, A per radian of psi.
    pub load: &'a [f64],
    /// Uniform ambient flux density, T.
    pub ambient_b_t: f64,
}

/// The energy's derivatives at one phi.
struct Here {
    points: Vec<Point>,
    /// Minus the gradient, all nodes (0 at fixed ones).
    residual: Vec<f64>,
}

impl<'a> Energy<'a> {
    /// Finds the minimum, from `start` (all nodes) or from zero.
    ///
    /// # Errors
    /// A Hessian that cannot be factored or solved. Not converging is no error: see [`Course::converged`].
    pub fn minimise(&self, start: Option<Vec<f64>>, limits: &Limits) -> Result<Minimum<'a>, LinearError> {
        let mut phi = start.unwrap_or_else(|| vec![0.0; self.space.nodes()]);
        let mut here = self.at(&phi);
        let scale = self.scale();
        let mut course = Course {
            converged: false,
            residuals: vec![norm(&here.residual) / scale],
            decrements: vec![],
        };
        let mut hessian = self.hessian(&here, None)?;
        loop {
            let step = hessian
                .solve(std::slice::from_ref(&here.residual))?
                .swap_remove(0);
            let decrement = dot(&here.residual, &step);
            let along = self.along(&phi, &step, decrement);
            phi = along.phi;
            here = along.here;
            let work = dot(self.load, &phi)
                .abs()
                .max(self.stored(&here))
                .max(f64::MIN_POSITIVE);
            course.decrements.push(decrement.abs() / work);
            course.residuals.push(norm(&here.residual) / scale);
            let small = |x: Option<&f64>| x.is_some_and(|x| *x <= limits.relative);
            // A step of decrement d leaves one of order d²: the last one need not be below the limit itself.
            let settled = course
                .decrements
                .last()
                .is_some_and(|d| *d <= limits.relative.sqrt());
            course.converged = settled && small(course.residuals.last());
            if course.converged || course.steps() >= limits.steps || scale == 0.0 {
                return Ok(Minimum { phi, hessian, course });
            }
            hessian = self.hessian(&here, Some(&hessian))?;
        }
    }

    /// Norm of everything that drives the field: currents, magnets, ambient.
    fn scale(&self) -> f64 {
        let zero = self.at(&vec![0.0; self.space.nodes()]);
        let driven = norm(&zero.residual);
        if driven > 0.0 { driven } else { 1.0 }
    }

    fn stored(&self, here: &Here) -> f64 {
        here.points
            .iter()
            .zip(&self.space.elements)
            .map(|(p, e)| 0.5 * e.area * p.energy)
            .sum()
    }

    /// Laws and residual at phi.
    fn at(&self, phi: &[f64]) -> Here {
        let half_b0 = 0.5 * self.ambient_b_t;
        let mut gradient = gradients(self.space, phi);
        gradient.par_iter_mut().for_each(|g| g[0] += half_b0);
        let points = evaluate(self.mesh, self.space, self.laws, &gradient);
        let h0 = self.ambient_b_t / MU0;
        let pull: Vec<[f64; 3]> = points
            .par_iter()
            .enumerate()
            .map(|(t, p)| {
                let half_area = 0.5 * self.space.elements[t].area;
                rows(self.space, t).map(|[r, z]| half_area * (p.h[0] * r + (p.h[1] - h0) * z))
            })
            .collect();
        let mut residual = self.load.to_vec();
        for (corners, pull) in self.space.triangles.iter().zip(&pull) {
            for (n, x) in corners.iter().zip(pull) {
                residual[*n as usize] -= x;
            }
        }
        if let Some(exterior) = &self.space.exterior {
            exterior.subtract(phi, &mut residual);
        }
        for (x, free) in residual.iter_mut().zip(&self.space.free) {
            if *free == FIXED {
                *x = 0.0;
            }
        }
        Here { points, residual }
    }

    fn hessian(&self, here: &Here, before: Option<&Factored<'a>>) -> Result<Factored<'a>, LinearError> {
        let space = self.space;
        let entry = |t: usize, i: usize, j: usize| {
            let (rows, [rr, rz, zz]) = (rows(space, t), here.points[t].tangent);
            let ([ri, zi], [rj, zj]) = (rows[i], rows[j]);
            // Summed so that (i, j) and (j, i) agree to the last bit.
            0.5 * space.elements[t].area * (rr * (ri * rj) + rz * (ri * zj + zi * rj) + zz * (zi * zj))
        };
        match before {
            Some(before) => before.with(&entry),
            None => Factored::of(space, &entry),
        }
    }

    /// Goes along a step until the slope has fallen to half or less of what it was.
    fn along(&self, phi: &[f64], step: &[f64], slope: f64) -> Along {
        let go = |share: f64| {
            let phi: Vec<f64> = phi.iter().zip(step).map(|(x, d)| x + share * d).collect();
            let here = self.at(&phi);
            let slope = dot(&here.residual, step);
            (Along { phi, here }, slope)
        };
        let (mut low, mut at_low) = (0.0, slope);
        let (mut best, mut at_best) = go(1.0);
        let (mut high, mut at_high) = (1.0, at_best);
        // The slope falls monotonically: a zero lies between `low` (positive) and `high` (negative).
        for _ in 0..MOST_TRIES {
            if at_best.abs() <= 0.5 * slope || at_best > 0.0 && high == 1.0 {
                break;
            }
            let secant = low + (high - low) * at_low / (at_low - at_high);
            let share = secant.clamp(low + 0.1 * (high - low), high - 0.1 * (high - low));
            (best, at_best) = go(share);
            if at_best > 0.0 {
                (low, at_low) = (share, at_best);
            } else {
                (high, at_high) = (share, at_best);
            }
        }
        best
    }
}

/// Most shares of a step tried.
const MOST_TRIES: usize = 12;

struct Along {
    phi: Vec<f64>,
    here: Here,
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

fn norm(a: &[f64]) -> f64 {
    dot(a, a).sqrt()
}
