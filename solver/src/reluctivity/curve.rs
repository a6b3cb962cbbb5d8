//! A magnetisation curve given by points: monotone C1 interpolation of H(B), carried on beyond the last point with
//! the slope going to that of air.

use super::State;
use super::pchip::Pchip;
use crate::MU0;

/// No material is more permeable than this (relative 1e7): keeps Newton's matrix regular, changes no field.
const SMALLEST_SLOPE: f64 = 1e-7 / MU0;

/// A checked magnetisation curve.
#[derive(Clone, Debug, PartialEq)]
pub struct Curve {
    inner: Pchip,
    /// State at the last point.
    last: State,
    last_b: f64,
    /// Flux density over which the slope beyond the last point approaches 1/mu0, T.
    fade_t: f64,
}

/// Why points are not a magnetisation curve. Rows count from 1, as given.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum CurveError {
    /// Fewer than two points besides the origin.
    #[error("a curve needs at least two points besides the origin, this one has {points}")]
    TooFew {
        /// How many there are.
        points: usize,
    },
    /// A number that is not finite or is negative.
    #[error("row {row}: H = {h} A/m, B = {b} T: both must be finite and not negative")]
    NotANumber {
        /// Row.
        row: usize,
        /// H there.
        h: f64,
        /// B there.
        b: f64,
    },
    /// B or H does not rise.
    #[error("row {row}: {what} does not rise ({before} to {here})")]
    Falling {
        /// Row.
        row: usize,
        /// `B` or `H`.
        what: &'static str,
        /// Value in the row before.
        before: f64,
        /// Value in this row.
        here: f64,
    },
    /// A point of a demagnetisation curve outside H <= 0.
    #[error("row {row}: H = {h} A/m, B = {b} T: a demagnetisation curve has finite numbers and H <= 0")]
    NotInSecondQuadrant {
        /// Row.
        row: usize,
        /// H there.
        h: f64,
        /// B there.
        b: f64,
    },
    /// A demagnetisation curve that does not reach H = 0.
    #[error("no point at H = 0: the remanence is missing")]
    NoRemanence,
    /// dB/dH under that of air.
    #[error("row {row}: B rises by less than mu0 times H from the row before; no material does that")]
    UnderAir {
        /// Row.
        row: usize,
    },
}

impl Curve {
    /// From points (H in A/m, B in T), rising; the origin may be left out.
    ///
    /// # Errors
    /// Points that no material could have, with their row.
    pub fn new(points: &[[f64; 2]]) -> Result<Self, CurveError> {
        check(points)?;
        let mut b: Vec<f64> = points.iter().map(|p| p[1]).collect();
        let mut h: Vec<f64> = points.iter().map(|p| p[0]).collect();
        if b[0] > 0.0 {
            b.insert(0, 0.0);
            h.insert(0, 0.0);
        }
        let inner = Pchip::new(b, h);
        let (_, last_b) = inner.range();
        let end = inner.at(last_b);
        // Never steeper than air, so that the way beyond stays convex.
        let slope = end.slope.clamp(f64::MIN_POSITIVE, 1.0 / MU0);
        let curvature = inner.last_curvature();
        let missing = 1.0 / MU0 - slope;
        let fade_t = if curvature > 0.0 {
            (missing / curvature).clamp(0.02 * last_b, last_b)
        } else {
            0.1 * last_b
        };
        Ok(Self {
            last: State {
                h: end.y,
                slope,
                energy: end.integral,
            },
            inner,
            last_b,
            fade_t,
        })
    }

    /// State at |B| = `b`.
    pub fn at(&self, b: f64) -> State {
        if b <= self.last_b {
            let v = self.inner.at(b);
            return State {
                h: v.y,
                slope: v.slope.max(SMALLEST_SLOPE),
                energy: v.integral,
            };
        }
        // dH/dB = 1/mu0 - (1/mu0 - slope) exp(-x / fade).
        let (x, missing, tau) = (b - self.last_b, 1.0 / MU0 - self.last.slope, self.fade_t);
        let faded = -(-x / tau).exp_m1();
        State {
            h: self.last.h + x / MU0 - missing * tau * faded,
            slope: 1.0 / MU0 - missing * (1.0 - faded),
            energy: self.last.energy + self.last.h * x + 0.5 * x * x / MU0
                - missing * tau * (x - tau * faded),
        }
    }

    /// Flux density of the last point, T.
    pub fn last_b(&self) -> f64 {
        self.last_b
    }
}

fn check(points: &[[f64; 2]]) -> Result<(), CurveError> {
    let origin = usize::from(points.first() == Some(&[0.0, 0.0]));
    if points.len() < 2 + origin {
        return Err(CurveError::TooFew {
            points: points.len() - origin.min(points.len()),
        });
    }
    let mut before = [0.0, 0.0];
    for (k, &[h, b]) in points.iter().enumerate() {
        let row = k + 1;
        if !(h.is_finite() && b.is_finite() && h >= 0.0 && b >= 0.0) {
            return Err(CurveError::NotANumber { row, h, b });
        }
        if k == 0 && [h, b] == [0.0, 0.0] {
            continue;
        }
        if b <= before[1] {
            return Err(CurveError::Falling {
                row,
                what: "B",
                before: before[1],
                here: b,
            });
        }
        if h <= before[0] {
            return Err(CurveError::Falling {
                row,
                what: "H",
                before: before[0],
                here: h,
            });
        }
        // A millionth is left for numbers printed with few digits.
        if b - before[1] < MU0 * (h - before[0]) * (1.0 - 1e-6) {
            return Err(CurveError::UnderAir { row });
        }
        before = [h, b];
    }
    Ok(())
}
