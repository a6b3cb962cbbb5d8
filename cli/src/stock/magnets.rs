//! Magnets by the classes of IEC 60404-8-1: with a recoil line where the curve is straight, with a demagnetisation
//! curve where it is not. Numbers are typical of a class; how much of it a magnet may lose by heat or counter-field,
//! the maker's curve at temperature tells.

use std::borrow::Cow;

use super::{Entry, Law};

/// A recoil line with the temperature coefficient of its remanence.
const fn recoil(remanence_t: f64, recoil_permeability: f64, coefficient_per_k: f64) -> Law {
    Law::Magnet {
        remanence_t,
        recoil_permeability,
        remanence_temperature_coefficient_per_k: coefficient_per_k,
    }
}

/// Demagnetisation curve (H in A/m, B in T) of cast anisotropic AlNiCo.
const ALNICO: &[[f64; 2]] = &[
    [-49.5e3, 0.0],
    [-48e3, 0.30],
    [-45e3, 0.62],
    [-40e3, 0.87],
    [-30e3, 1.04],
    [-20e3, 1.12],
    [-10e3, 1.17],
    [0.0, 1.20],
];

/// Magnets.
pub(super) const TABLE: &[Entry] = &[
    Entry {
        name: "hard-ferrite",
        about: "sintered anisotropic hard ferrite",
        law: recoil(0.40, 1.06, -0.002),
        conductivity_s_per_m: 1e-4,
        density_kg_per_m3: Some(4900.0),
        source: "typical of hard ferrite 31/30 and its neighbours in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "hard-ferrite-isotropic",
        about: "sintered isotropic hard ferrite",
        law: recoil(0.21, 1.2, -0.002),
        conductivity_s_per_m: 1e-4,
        density_kg_per_m3: Some(4800.0),
        source: "typical of hard ferrite 7/21 in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "hard-ferrite-bonded",
        about: "plastic-bonded anisotropic hard ferrite",
        law: recoil(0.25, 1.06, -0.002),
        density_kg_per_m3: Some(3600.0),
        source: "typical of hard ferrite 12/21p and its neighbours in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "alnico",
        about: "cast anisotropic aluminium-nickel-cobalt, with its demagnetisation curve; once driven along it, it \
                does not come back",
        law: Law::Demagnetization {
            points: Cow::Borrowed(ALNICO),
            recoil_permeability: Some(4.0),
            remanence_temperature_coefficient_per_k: -0.0002,
        },
        conductivity_s_per_m: 2.0e6,
        density_kg_per_m3: Some(7300.0),
        source: "typical of AlNiCo 37/5 in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "smco",
        about: "sintered samarium-cobalt 2:17",
        law: recoil(1.0, 1.05, -0.0004),
        conductivity_s_per_m: 1.2e6,
        density_kg_per_m3: Some(8300.0),
        source: "typical of RECo 190/70 and its neighbours in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "smco-1-5",
        about: "sintered samarium-cobalt 1:5",
        law: recoil(0.86, 1.05, -0.0004),
        conductivity_s_per_m: 1.8e6,
        density_kg_per_m3: Some(8300.0),
        source: "typical of RECo 140/120 in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "ndfeb",
        about: "sintered neodymium-iron-boron",
        law: recoil(1.25, 1.05, -0.0011),
        conductivity_s_per_m: 0.65e6,
        density_kg_per_m3: Some(7500.0),
        source: "typical of REFeB 290/100 and its neighbours in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "ndfeb-hot",
        about: "sintered neodymium-iron-boron of high coercivity, for warm places",
        law: recoil(1.13, 1.05, -0.0011),
        conductivity_s_per_m: 0.65e6,
        density_kg_per_m3: Some(7500.0),
        source: "typical of REFeB 240/180 and its neighbours in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "ndfeb-bonded",
        about: "plastic-bonded isotropic neodymium-iron-boron",
        law: recoil(0.65, 1.15, -0.0012),
        density_kg_per_m3: Some(6000.0),
        source: "typical of REFeB 65/64p and its neighbours in IEC 60404-8-1, from memory",
        ..Entry::NOTHING
    },
];
