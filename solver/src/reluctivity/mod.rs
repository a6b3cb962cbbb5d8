//! Magnetic laws as convex energies: how H depends on B, its slope, and the energy int H dB.
//!
//! All laws are functions of B, because B is what psi gives; all grow monotonically, so that the energy is convex
//! and Newton's method has one minimum to find. H in A/m, B in T, energies in J/m³.

mod curve;
mod demagnetisation;
mod pchip;
mod saturation;

pub use curve::{Curve, CurveError};
pub use demagnetisation::Demagnetisation;
pub use saturation::Saturation;

/// H, dH/dB and the energy at one flux density.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct State {
    /// Field strength, A/m.
    pub h: f64,
    /// dH/dB, m/H; positive.
    pub slope: f64,
    /// int H dB from H = 0, J/m³; never negative.
    pub energy: f64,
}

/// An isotropic law: H is parallel to B.
#[derive(Clone, Debug, PartialEq)]
pub enum Isotropic {
    /// B = mu0 H + Js H / (H + Hs).
    Saturation(Saturation),
    /// Measured points.
    Curve(Curve),
}

impl Isotropic {
    /// State at |B| = `b` >= 0, T.
    pub fn at(&self, b: f64) -> State {
        match self {
            Self::Saturation(law) => law.at(b),
            Self::Curve(law) => law.at(b),
        }
    }

    /// dH/dB at B = 0, m/H: the initial reluctivity.
    pub fn initial_reluctivity(&self) -> f64 {
        self.at(0.0).slope
    }

    /// Flux density of the knee, T: where the differential permeability has fallen to a tenth of its largest
    /// (common practice, no source: there is no standard definition).
    pub fn knee_t(&self) -> f64 {
        let top = match self {
            Self::Saturation(law) => law.knee_search_end(),
            Self::Curve(law) => law.last_b(),
        };
        const STEPS: usize = 2000;
        let at = |k: usize| top * k as f64 / STEPS as f64;
        let slopes: Vec<f64> = (0..=STEPS).map(|k| self.at(at(k)).slope).collect();
        let (best, smallest) = slopes
            .iter()
            .enumerate()
            .fold((0, f64::INFINITY), |m, (k, &s)| if s < m.1 { (k, s) } else { m });
        (best..=STEPS)
            .find(|&k| slopes[k] >= 10.0 * smallest)
            .map_or(top, at)
    }
}

#[cfg(test)]
mod tests;
