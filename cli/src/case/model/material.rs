//! `[stock.NAME]`: a material of the case's own.

use schemars::JsonSchema;
use serde::Deserialize;

use super::located::Located;
use super::quantity::{Amount, Pair};

/// A material of the case's own.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct StockEntry {
    /// Name of a material whose data are copied first; a magnetic law given here replaces the copied one.
    pub like: Option<Located<String>>,
    /// Magnetic law: constant relative permeability.
    pub relative_permeability: Option<Amount>,
    /// Loss part mu'' of the relative permeability mu' - j mu'' (alternating regime).
    pub relative_permeability_loss: Option<Amount>,
    /// Magnetic law: points [H in A/m, B in T] of the magnetisation curve.
    pub curve: Option<Located<Vec<Pair>>>,
    /// Magnetic law: a CSV file with the magnetisation curve, relative to the case.
    pub curve_file: Option<Located<String>>,
    /// Magnetic law: B = mu0 H + Js H / (H + Hs).
    pub saturation: Option<Located<Saturation>>,
    /// Magnetic law of a magnet: remanence, with recoil_permeability.
    pub remanence: Option<Amount>,
    /// Relative permeability of a magnet's recoil line.
    pub recoil_permeability: Option<Amount>,
    /// Magnetic law of a magnet: points [H in A/m, B in T] of the demagnetisation curve in the second quadrant.
    pub demag_curve: Option<Located<Vec<Pair>>>,
    /// Electric conductivity at the reference temperature.
    pub conductivity: Option<Amount>,
    /// Temperature coefficient of the resistivity at the reference temperature.
    pub temperature_coefficient: Option<Amount>,
    /// Temperature at which the data hold; 20 degC unless said.
    pub reference_temperature: Option<Amount>,
    /// Temperature coefficient of the remanence.
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
