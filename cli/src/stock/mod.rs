//! The stock: materials built in, each with the source of its data.

use std::borrow::Cow;

/// A material.
#[derive(Clone, Debug, PartialEq)]
pub struct Material {
    /// Its name in the stock.
    pub name: Cow<'static, str>,
    /// What it is, in a few words.
    pub about: Cow<'static, str>,
    /// How B depends on H.
    pub law: Law,
    /// Electric conductivity at the reference temperature, S/m; 0 for an insulator.
    pub conductivity_s_per_m: f64,
    /// Temperature coefficient of the resistivity at the reference temperature, 1/K.
    pub temperature_coefficient_per_k: f64,
    /// Temperature at which the data hold, °C.
    pub reference_temperature_c: f64,
    /// Density, kg/m³, where known.
    pub density_kg_per_m3: Option<f64>,
    /// Core loss (Steinmetz), where known.
    pub core_loss: Option<CoreLoss>,
    /// Where the data come from.
    pub source: Cow<'static, str>,
}

/// How B depends on H.
#[derive(Clone, Debug, PartialEq)]
pub enum Law {
    /// B = mu0 mu_r H; in the alternating regime mu_r = mu' - j mu''.
    Linear {
        /// Relative permeability mu'.
        relative_permeability: f64,
        /// Its loss part mu''.
        relative_permeability_loss: f64,
    },
    /// A magnet's recoil line B = mu0 mu_rec H + Br.
    Magnet {
        /// Remanence at the reference temperature, T.
        remanence_t: f64,
        /// Recoil permeability.
        recoil_permeability: f64,
        /// Temperature coefficient of the remanence, 1/K.
        remanence_temperature_coefficient_per_k: f64,
    },
    /// B = mu0 H + Js H / (H + Hs).
    Saturation {
        /// Saturation polarisation Js, T.
        polarization_t: f64,
        /// Field strength Hs at which half of it is reached, A/m.
        half_field_a_per_m: f64,
    },
    /// Points (H in A/m, B in T) of a magnetisation curve.
    Curve(Vec<[f64; 2]>),
    /// A magnet's demagnetisation curve: points (H in A/m, B in T) in the second quadrant.
    Demagnetization {
        /// The points.
        points: Vec<[f64; 2]>,
        /// Temperature coefficient of the remanence, 1/K.
        remanence_temperature_coefficient_per_k: f64,
    },
}

/// Core loss density k f^alpha B^beta, W/m³, with f in Hz and peak B in T (Steinmetz 1892).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CoreLoss {
    /// Factor.
    pub k: f64,
    /// Exponent of the frequency.
    pub alpha: f64,
    /// Exponent of the flux density.
    pub beta: f64,
}

/// All built-in materials, in the order they are listed to a person.
pub fn table() -> Vec<Material> {
    Vec::new()
}

/// The built-in material of this name.
pub fn find(name: &str) -> Option<Material> {
    table().into_iter().find(|material| material.name == name)
}
