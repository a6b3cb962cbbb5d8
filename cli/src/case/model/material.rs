//! `[stock.NAME]`: a material of the case's own.

use schemars::JsonSchema;
use serde::Deserialize;

use super::located::Located;
use super::quantity::{Amount, OneOrMany, Pair};

/// A material of the case's own.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct StockEntry {
    /// Name of a material whose data are copied first; a magnetic law given here replaces the copied one.
    pub like: Option<Located<String>>,
    /// Magnetic law: constant relative permeability, one number (a list, anisotropic, is not solved).
    pub relative_permeability: Option<Located<OneOrMany>>,
    /// Loss part mu'' of the relative permeability mu' - j mu'' (alternating regime).
    pub relative_permeability_loss: Option<Amount>,
    /// Magnetic law: points [H in A/m, B in T] of the magnetisation curve.
    pub curve: Option<Located<Vec<Pair>>>,
    /// Magnetic law: a CSV file with the magnetisation curve, relative to the case; its header tells the units, such
    /// as `H (A/m), B (T)`.
    pub curve_file: Option<Located<String>>,
    /// Magnetic law: B = mu0 H + Js H / (H + Hs).
    pub saturation: Option<Located<Saturation>>,
    /// Magnetic law of a magnet: remanence, with recoil_permeability.
    pub remanence: Option<Amount>,
    /// Relative permeability of a magnet's recoil line; beside demag_curve that across the magnetisation (as the curve
    /// has at remanence, unless said).
    pub recoil_permeability: Option<Amount>,
    /// Magnetic law of a magnet: points [H in A/m, B in T] of the demagnetisation curve in the second quadrant, with
    /// the one at H = 0, in either order.
    pub demag_curve: Option<Located<Vec<Pair>>>,
    /// Electric conductivity at the reference temperature.
    pub conductivity: Option<Amount>,
    /// Temperature coefficient of the resistivity at the reference temperature.
    pub temperature_coefficient: Option<Amount>,
    /// Temperature at which the data hold; 20 degC unless said.
    pub reference_temperature: Option<Amount>,
    /// Temperature coefficient of the remanence. A demag_curve shrinks with its remanence, B and H alike; a real
    /// coercivity may fall faster, so give the curve at the working temperature where that matters.
    pub remanence_temperature_coefficient: Option<Amount>,
    /// Density.
    pub density: Option<Amount>,
    /// Core loss density k f^alpha B^beta in W/m3, f in Hz, peak B in T (Steinmetz).
    pub core_loss: Option<Located<CoreLossKeys>>,
}

/// A saturable law, B = mu0 H + Js H / (H + Hs).
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Saturation {
    /// Saturation polarisation Js.
    pub polarization: Amount,
    /// Field strength Hs at which half of it is reached.
    pub half_field: Amount,
}

/// Core loss density k f^alpha B^beta in W/m3, f in Hz, peak B in T (Steinmetz).
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct CoreLossKeys {
    /// Factor, W/m3 at 1 Hz and 1 T.
    pub k: Amount,
    /// Exponent of the frequency.
    pub alpha: Amount,
    /// Exponent of the flux density.
    pub beta: Amount,
}
