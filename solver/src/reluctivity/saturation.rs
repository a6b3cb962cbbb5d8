//! B = mu0 H + Js H / (H + Hs): Froehlich's law of saturation with the air term kept (Froehlich 1881; Kennelly,
//! Trans. AIEE 8, 1891).

use super::State;
use crate::MU0;

/// The law's two numbers.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Saturation {
    /// Saturation polarisation Js, T; positive.
    pub polarization_t: f64,
    /// Field strength at which half of it is reached, A/m; positive.
    pub half_field_a_per_m: f64,
}

impl Saturation {
    /// State at |B| = `b`, exact: H solves mu0 H² + (mu0 Hs + Js - B) H - B Hs = 0.
    pub fn at(&self, b: f64) -> State {
        let (js, hs) = (self.polarization_t, self.half_field_a_per_m);
        let p = MU0 * hs + js - b;
        let root = (p * p + 4.0 * MU0 * b * hs).sqrt();
        // The form without cancellation for either sign of p.
        let h = if p >= 0.0 {
            2.0 * b * hs / (p + root)
        } else {
            (root - p) / (2.0 * MU0)
        };
        let x = h / hs;
        let permeability = MU0 + js / hs / ((1.0 + x) * (1.0 + x));
        let coenergy = 0.5 * MU0 * h * h + js * hs * x_minus_ln(x);
        State {
            h,
            slope: 1.0 / permeability,
            energy: b * h - coenergy,
        }
    }

    /// Flux density by which the knee is surely passed.
    pub(super) fn knee_search_end(&self) -> f64 {
        let h = 20.0 * self.half_field_a_per_m;
        MU0 * h + self.polarization_t * 20.0 / 21.0
    }
}

/// x - ln(1 + x) without cancellation at small x.
fn x_minus_ln(x: f64) -> f64 {
    if x > 0.05 {
        return x - x.ln_1p();
    }
    // x²/2 - x³/3 + x⁴/4 - ...; twelve terms leave less than 1e-17 of the first at x = 0.05.
    let (mut sum, mut power) = (0.0, x * x);
    for k in 2..14 {
        sum += if k % 2 == 0 { power } else { -power } / f64::from(k);
        power *= x;
    }
    sum
}
