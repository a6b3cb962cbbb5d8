//! A mover's stroke: the same device with the mover at one place after another, and what its forces and co-energies
//! add up to.
//!
//! At constant currents the force is the derivative of the co-energy along the stroke (energy method of every
//! textbook on electromechanics; Woodson & Melcher, Electromechanical Dynamics, part I, 1968, from memory), so the
//! work done on the mover equals the change of co-energy. Both are computed from different numbers here: the forces
//! from the field around the mover on one mesh, the co-energies from the whole field on two meshes that have nothing
//! in common. That makes them a check of each other.

use mesher::Section;

use crate::bracket::{Bound, Bracket};
use crate::crew;
use crate::problem::Problem;
use crate::quantity::Quantities;
use crate::solve::{Progress, Settings, Solution, SolveError, solve};

/// Solves the sections one by one, several at once, each meshed anew with its own accuracy; `keep` turns each solution
/// into what is wanted of it, so that not all fields need be in memory. `progress` is asked for the listener of each.
///
/// # Errors
/// The first section that could not be solved, by its number.
pub fn each_place<P: Progress, T: Send>(
    sections: &[Section],
    problem: &Problem,
    settings: &Settings,
    progress: impl Fn(usize) -> P + Sync,
    keep: impl Fn(usize, Solution) -> T + Sync,
) -> Result<Vec<T>, (usize, SolveError)> {
    crew::each(sections.len(), |index| {
        let solution = solve(&sections[index], problem, settings, &progress(index))?;
        Ok(keep(index, solution))
    })
}

/// What one place says about the stroke.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Station {
    /// Place along z, m.
    pub at_m: f64,
    /// Force on the mover, N; absent where it touches the mirror.
    pub force_n: Option<Bracket>,
    /// Co-energy that goes with the force (with a mirror half that of the whole device), J; absent with an ambient
    /// field.
    pub coenergy_j: Option<Bracket>,
}

impl Station {
    /// What a solved place says about a mover (by its index in `problem.movers`).
    pub fn of(at_m: f64, problem: &Problem, quantities: &Quantities<Bracket>, mover: usize) -> Self {
        // The image's mover moves too: the whole device does twice the work.
        let share = if problem.mirror.is_some() { 0.5 } else { 1.0 };
        Self {
            at_m,
            force_n: quantities.movers.get(mover).and_then(|m| m.force_n),
            coenergy_j: quantities.coenergy_j.map(|w| w.scaled(share)),
        }
    }
}

/// What a stroke adds up to. Places must differ and go one way.
#[derive(Clone, Debug, PartialEq)]
pub struct Stroke {
    /// Work of the field on the mover from the first place to each place, J; empty where a force is missing or there
    /// is one place only.
    pub work_j: Vec<Bracket>,
    /// Change of co-energy from the first place to each place, J; empty where one is missing.
    pub coenergy_change_j: Vec<Bracket>,
    /// Force from the differences of the co-energies of neighbouring places, N; empty where one is missing or there
    /// is one place only.
    pub force_by_coenergy_n: Vec<Bracket>,
}

impl Stroke {
    /// Adds up the stations in the order they are passed.
    pub fn along(stations: &[Station]) -> Self {
        let at: Vec<f64> = stations.iter().map(|s| s.at_m).collect();
        let forces: Option<Vec<Bracket>> = stations.iter().map(|s| s.force_n).collect();
        let energies: Option<Vec<Bracket>> = stations.iter().map(|s| s.coenergy_j).collect();
        let several = at.len() > 1;
        Self {
            work_j: forces
                .as_ref()
                .filter(|_| several)
                .map_or(vec![], |f| work(&at, f)),
            coenergy_change_j: energies
                .as_ref()
                .map_or(vec![], |w| w.iter().map(|w_k| difference(w_k, &w[0])).collect()),
            force_by_coenergy_n: energies.filter(|_| several).map_or(vec![], |w| {
                (0..at.len())
                    .map(|k| slope(&at, &w, forces.as_deref(), k))
                    .collect()
            }),
        }
    }
}

/// `b - a` of two numbers whose errors may have any sign.
fn difference(b: &Bracket, a: &Bracket) -> Bracket {
    if std::ptr::eq(a, b) {
        return Bracket::exact(0.0);
    }
    Bracket {
        value: b.value - a.value,
        low: b.low - a.high,
        high: b.high - a.low,
        bound: Bound::Estimated,
    }
}

fn around(value: f64, half: f64) -> Bracket {
    Bracket {
        value,
        low: value - half,
        high: value + half,
        bound: Bound::Estimated,
    }
}

/// Work up to each place: the integral of the piecewise cubic through the forces. Its half width is the integral of
/// the forces' own half widths, and how far the cubic through every second place (or, with few places, the straight
/// line through all) goes astray, summed over the stroke so far.
fn work(at: &[f64], forces: &[Bracket]) -> Vec<Bracket> {
    let values: Vec<f64> = forces.iter().map(|f| f.value).collect();
    let fine = cubic_integrals(at, &values);
    let coarse = every_second(at, &values);
    let (mut sum, mut half) = (0.0, 0.0);
    let mut found = vec![Bracket::exact(0.0)];
    for k in 0..at.len() - 1 {
        let step = at[k + 1] - at[k];
        sum += fine[k];
        half += 0.5 * step.abs() * (forces[k].half_width() + forces[k + 1].half_width());
        half += (fine[k] - coarse[k]).abs();
        if at.len() == 2 {
            // Nothing but the two ends is known: any force between them is possible.
            half += 0.5 * (step * (values[1] - values[0])).abs();
        }
        found.push(around(sum, half));
    }
    found
}

/// Integral over each interval of the piecewise cubic with the slopes of parabolas through neighbouring points.
fn cubic_integrals(at: &[f64], f: &[f64]) -> Vec<f64> {
    let slopes: Vec<f64> = (0..at.len()).map(|k| parabola_slope(at, f, k)).collect();
    (0..at.len() - 1)
        .map(|k| {
            let h = at[k + 1] - at[k];
            h * (0.5 * (f[k] + f[k + 1]) + h / 12.0 * (slopes[k] - slopes[k + 1]))
        })
        .collect()
}

/// A coarser integral over each interval: that of the cubic through every second point, shared among its two intervals
/// as the finer one is; of the straight line where there are too few points.
fn every_second(at: &[f64], f: &[f64]) -> Vec<f64> {
    let last = at.len() - 1;
    let straight = |k: usize| 0.5 * (at[k + 1] - at[k]) * (f[k] + f[k + 1]);
    if last < 4 {
        return (0..last).map(straight).collect();
    }
    let fine = cubic_integrals(at, f);
    let chosen: Vec<usize> = (0..last).step_by(2).chain([last]).collect();
    let pick = |of: &[f64]| chosen.iter().map(|&k| of[k]).collect::<Vec<f64>>();
    let coarse = cubic_integrals(&pick(at), &pick(f));
    let mut shared = fine.clone();
    for (pair, whole) in chosen.windows(2).zip(coarse) {
        let inside = pair[0]..pair[1];
        let error = (whole - fine[inside.clone()].iter().sum::<f64>()) / inside.len() as f64;
        inside.for_each(|k| shared[k] += error);
    }
    shared
}

/// Numbers of the three points whose parabola is used at point `k`.
fn three(count: usize, k: usize) -> [usize; 3] {
    let middle = k.clamp(1, count - 2);
    [middle - 1, middle, middle + 1]
}

/// Slope at point `k` of the parabola through it and its neighbours; of the straight line with two points.
fn parabola_slope(at: &[f64], f: &[f64], k: usize) -> f64 {
    slope_weights(at, k)
        .iter()
        .map(|&(point, weight)| weight * f[point])
        .sum()
}

/// The slope at point `k` as a weighted sum of the values of some points.
fn slope_weights(at: &[f64], k: usize) -> Vec<(usize, f64)> {
    if at.len() == 2 {
        let h = at[1] - at[0];
        return vec![(0, -1.0 / h), (1, 1.0 / h)];
    }
    let points = three(at.len(), k);
    points
        .iter()
        .map(|&i| {
            let others = points.iter().filter(|&&j| j != i);
            let below: f64 = others.clone().map(|&j| at[i] - at[j]).product();
            // Derivative of the product of (x - x_j) over the two others at x_k.
            let above: f64 = others.map(|&j| at[k] - at[j]).sum();
            (i, above / below)
        })
        .collect()
}

/// Force at place `k` from the co-energies. Its half width: that of the co-energies, and twice the leading term of the
/// formula's own error, W''' = F'' from the forces themselves (twice: the terms after it are unknown).
fn slope(at: &[f64], w: &[Bracket], forces: Option<&[Bracket]>, k: usize) -> Bracket {
    let weights = slope_weights(at, k);
    let value = weights.iter().map(|&(i, weight)| weight * w[i].value).sum();
    let doubt: f64 = weights
        .iter()
        .map(|&(i, weight)| weight.abs() * w[i].half_width())
        .sum();
    let rough: Vec<f64> = match forces {
        Some(forces) => forces.iter().map(|f| f.value).collect(),
        None => {
            let w: Vec<f64> = w.iter().map(|w| w.value).collect();
            (0..at.len()).map(|k| parabola_slope(at, &w, k)).collect()
        }
    };
    let formula = if at.len() == 2 {
        (rough[1] - rough[0]).abs()
    } else {
        let [a, b, c] = three(at.len(), k);
        let (first, second) = (at[b] - at[a], at[c] - at[b]);
        let bend = 2.0 * ((rough[c] - rough[b]) / second - (rough[b] - rough[a]) / first) / (at[c] - at[a]);
        let spans: f64 = [a, b, c]
            .iter()
            .filter(|&&i| i != k)
            .map(|&i| at[k] - at[i])
            .product();
        2.0 * (bend * spans / 6.0).abs()
    };
    around(value, doubt + formula)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A gap closing: W' = 1/(1 + x), F = -1/(1 + x)², with places that are not even.
    fn stations(count: usize, doubt: f64) -> Vec<Station> {
        let about = |x: f64| around(x, doubt * x.abs());
        (0..count)
            .map(|k| {
                let share = k as f64 / (count - 1) as f64;
                let x = 2.0 * share.powf(1.2);
                Station {
                    at_m: x,
                    force_n: Some(about(-(1.0 + x).powi(-2))),
                    coenergy_j: Some(about(1.0 / (1.0 + x))),
                }
            })
            .collect()
    }

    #[test]
    fn work_is_the_change_of_coenergy_within_the_error_bars_and_they_shrink() {
        let exact = 1.0 / 3.0 - 1.0;
        let mut before = f64::INFINITY;
        for count in [2, 3, 4, 5, 6, 11, 12, 21, 41] {
            let stroke = Stroke::along(&stations(count, 0.0));
            let work = stroke.work_j.last().unwrap();
            assert!(work.contains(exact), "{count}: {work:?}");
            // From five places on the yardstick is another, and it falls as places are added.
            if count > 5 {
                assert!(work.half_width() < before, "{count}: {work:?}");
            }
            before = work.half_width();
            assert!((stroke.coenergy_change_j.last().unwrap().value - exact).abs() < 1e-15);
        }
        assert!(before < 1e-4, "{before}");
    }

    #[test]
    fn doubt_of_the_forces_and_coenergies_is_carried_on() {
        let stroke = Stroke::along(&stations(21, 0.01));
        let work = stroke.work_j.last().unwrap();
        assert!(work.half_width() > 0.01 * 2.0 / 3.0, "{work:?}");
        let change = stroke.coenergy_change_j.last().unwrap();
        assert!(
            (change.half_width() - 0.01 * (1.0 + 1.0 / 3.0)).abs() < 1e-12,
            "{change:?}"
        );
        assert!(stroke.force_by_coenergy_n[10].half_width() > 0.01 / 2.0);
    }

    #[test]
    fn the_force_by_coenergy_covers_the_force_at_every_place() {
        for count in [2, 3, 6, 21] {
            let stations = stations(count, 0.0);
            let stroke = Stroke::along(&stations);
            for (station, force) in stations.iter().zip(&stroke.force_by_coenergy_n) {
                let exact = station.force_n.unwrap().value;
                assert!(
                    force.contains(exact),
                    "{count} at {}: {force:?}, {exact}",
                    station.at_m
                );
            }
        }
        // Second order: halving the steps divides the error by four or so.
        let error = |count: usize| {
            let stations = stations(count, 0.0);
            let force = Stroke::along(&stations).force_by_coenergy_n[count / 2];
            (force.value - stations[count / 2].force_n.unwrap().value).abs()
        };
        let ratio = error(21) / error(41);
        assert!(ratio > 3.2 && ratio < 4.8, "{ratio}");
    }

    #[test]
    fn what_is_missing_anywhere_adds_up_to_nothing() {
        let mut stations = stations(5, 0.0);
        stations[3].force_n = None;
        stations[2].coenergy_j = None;
        let stroke = Stroke::along(&stations);
        assert!(stroke.work_j.is_empty() && stroke.coenergy_change_j.is_empty());
        assert!(stroke.force_by_coenergy_n.is_empty());
        let alone = Stroke::along(&stations[..1]);
        assert!(alone.work_j.is_empty() && alone.force_by_coenergy_n.is_empty());
    }
}
