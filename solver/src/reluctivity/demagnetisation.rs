//! The demagnetisation curve of a magnet along its magnetisation: second-quadrant points from the lowest field up
//! to remanence, carried on with their end slopes (bounded by that of air).

use super::pchip::Pchip;
use super::{CurveError, State};
use crate::MU0;

/// A checked demagnetisation curve.
#[derive(Clone, Debug, PartialEq)]
pub struct Demagnetisation {
    inner: Pchip,
    remanence_t: f64,
    knee_t: f64,
}

impl Demagnetisation {
    /// From points (H in A/m, B in T) with H <= 0, in either order, the one at H = 0 being the remanence.
    ///
    /// # Errors
    /// Points that no magnet could have, with their row; no point at H = 0.
    pub fn new(points: &[[f64; 2]]) -> Result<Self, CurveError> {
        if points.len() < 2 {
            return Err(CurveError::TooFew { points: points.len() });
        }
        let mut rows: Vec<(usize, f64, f64)> = points
            .iter()
            .enumerate()
            .map(|(k, p)| (k + 1, p[0], p[1]))
            .collect();
        if let Some(&(row, h, b)) = rows
            .iter()
            .find(|(_, h, b)| !(h.is_finite() && b.is_finite() && *h <= 0.0))
        {
            return Err(CurveError::NotInSecondQuadrant { row, h, b });
        }
        rows.sort_by(|x, y| x.1.total_cmp(&y.1));
        for pair in rows.windows(2) {
            let ((_, h0, b0), (row, h1, b1)) = (pair[0], pair[1]);
            if h1 <= h0 {
                return Err(CurveError::Falling {
                    row,
                    what: "H",
                    before: h0,
                    here: h1,
                });
            }
            if b1 <= b0 {
                return Err(CurveError::Falling {
                    row,
                    what: "B",
                    before: b0,
                    here: b1,
                });
            }
            if b1 - b0 < MU0 * (h1 - h0) * (1.0 - 1e-6) {
                return Err(CurveError::UnderAir { row });
            }
        }
        let (_, top_h, remanence_t) = rows[rows.len() - 1];
        if top_h != 0.0 {
            return Err(CurveError::NoRemanence);
        }
        let inner = Pchip::new(
            rows.iter().map(|r| r.2).collect(),
            rows.iter().map(|r| r.1).collect(),
        );
        let knee_t = knee(&inner, remanence_t);
        Ok(Self {
            inner,
            remanence_t,
            knee_t,
        })
    }

    /// State at the signed flux density `b` along the magnetisation; the energy counts from remanence (H = 0).
    pub fn at(&self, b: f64) -> State {
        let (low, high) = self.inner.range();
        let inside = self.inner.at(b.clamp(low, high));
        let slope = inside.slope.clamp(1e-6 / MU0, 1.0 / MU0);
        let beyond = b - b.clamp(low, high);
        let h = inside.y + slope * beyond;
        let from_remanence = inside.integral - self.inner.at(high).integral;
        State {
            h,
            slope,
            energy: from_remanence + beyond * (inside.y + 0.5 * slope * beyond),
        }
    }

    /// Remanence, T.
    pub fn remanence_t(&self) -> f64 {
        self.remanence_t
    }

    /// Flux density of the knee, T: the highest one under which the curve falls more than twice as steeply as it
    /// does at remanence; below the curve where there is none.
    pub fn knee_t(&self) -> f64 {
        self.knee_t
    }
}

fn knee(curve: &Pchip, remanence: f64) -> f64 {
    const STEPS: usize = 2000;
    let (low, high) = curve.range();
    let at = |k: usize| low + (high - low) * k as f64 / STEPS as f64;
    // dB/dH at remanence, read a little below it where the curve is straight.
    let straight = curve.at(low + 0.98 * (remanence - low)).slope;
    (0..=STEPS)
        .rev()
        .map(at)
        .find(|&b| curve.at(b).slope < 0.5 * straight)
        .unwrap_or(f64::NEG_INFINITY)
}
