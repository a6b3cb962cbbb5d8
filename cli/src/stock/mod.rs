//! The stock: materials built in, each with the source of its data.

use std::borrow::Cow;

mod conductors;
mod magnets;
mod soft;

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
    Curve(Cow<'static, [[f64; 2]]>),
    /// A magnet's demagnetisation curve: points (H in A/m, B in T) in the second quadrant.
    Demagnetization {
        /// The points, rising to the one at H = 0, the remanence.
        points: Cow<'static, [[f64; 2]]>,
        /// Relative permeability across the magnetisation; as the curve has at remanence where none is given.
        recoil_permeability: Option<f64>,
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

/// A row of the built-in tables.
struct Entry {
    name: &'static str,
    about: &'static str,
    law: Law,
    conductivity_s_per_m: f64,
    temperature_coefficient_per_k: f64,
    density_kg_per_m3: Option<f64>,
    source: &'static str,
}

/// Temperature at which the built-in data hold, °C.
const REFERENCE_C: f64 = 20.0;

impl Entry {
    /// What a row does not say.
    const NOTHING: Self = Self {
        name: "",
        about: "",
        law: Law::Linear {
            relative_permeability: 1.0,
            relative_permeability_loss: 0.0,
        },
        conductivity_s_per_m: 0.0,
        temperature_coefficient_per_k: 0.0,
        density_kg_per_m3: None,
        source: "",
    };

    fn material(&self) -> Material {
        Material {
            name: self.name.into(),
            about: self.about.into(),
            law: self.law.clone(),
            conductivity_s_per_m: self.conductivity_s_per_m,
            temperature_coefficient_per_k: self.temperature_coefficient_per_k,
            reference_temperature_c: REFERENCE_C,
            density_kg_per_m3: self.density_kg_per_m3,
            core_loss: None,
            source: self.source.into(),
        }
    }
}

/// All built-in materials, in the order they are listed to a person.
pub fn table() -> Vec<Material> {
    let rows = conductors::TABLE.iter().chain(soft::TABLE).chain(magnets::TABLE);
    rows.map(Entry::material).collect()
}

/// The built-in material of this name.
pub fn find(name: &str) -> Option<Material> {
    table().into_iter().find(|material| material.name == name)
}

#[cfg(test)]
mod tests {
    use std::collections::HashSet;

    use solver::MU0;
    use solver::reluctivity::{Curve, Demagnetisation};

    use super::*;

    #[test]
    fn names_are_unique_and_every_material_says_what_it_is_and_whence() {
        let mut names = HashSet::new();
        for material in table() {
            assert!(
                names.insert(material.name.clone()),
                "{} stands twice",
                material.name
            );
            assert!(
                !material.about.is_empty() && !material.source.is_empty(),
                "{}",
                material.name
            );
            assert!(
                material.conductivity_s_per_m >= 0.0 && material.density_kg_per_m3.is_some(),
                "{}",
                material.name
            );
        }
    }

    #[test]
    fn laws_are_physical() {
        for material in table() {
            match material.law {
                Law::Linear {
                    relative_permeability,
                    ..
                } => assert!(relative_permeability >= 1.0),
                Law::Saturation {
                    polarization_t,
                    half_field_a_per_m,
                } => {
                    assert!((0.2..2.45).contains(&polarization_t) && half_field_a_per_m > 1.0);
                }
                Law::Curve(ref points) => {
                    let curve = Curve::new(points).unwrap();
                    let [h, b] = points[points.len() - 1];
                    // The last point is saturated, so that what follows is nearly air.
                    assert!(curve.at(b).slope * MU0 > 0.3 && h >= 20e3, "{}", material.name);
                    assert!((0.2..2.45).contains(&(b - MU0 * h)), "{}", material.name);
                }
                Law::Demagnetization { ref points, .. } => {
                    let curve = Demagnetisation::new(points).unwrap();
                    assert!((0.1..1.6).contains(&curve.remanence_t()) && curve.knee_t() > 0.0);
                }
                Law::Magnet {
                    remanence_t,
                    recoil_permeability,
                    remanence_temperature_coefficient_per_k,
                } => {
                    assert!((0.1..1.6).contains(&remanence_t) && recoil_permeability >= 1.0);
                    // Every class loses remanence as it warms.
                    assert!(remanence_temperature_coefficient_per_k < 0.0);
                }
            }
        }
    }

    #[test]
    fn copper_has_the_standard_resistivity() {
        let copper = find("copper").expect("copper");
        // IEC 60028: 1/58 ohm mm²/m.
        assert!((copper.conductivity_s_per_m * 1e-6 / 58.0 - 1.0).abs() < 1e-15);
    }
}
