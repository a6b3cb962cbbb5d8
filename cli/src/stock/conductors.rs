//! Air and conductors.

use super::{Entry, Law};

/// B = mu0 mu_r H.
const fn linear(relative_permeability: f64) -> Law {
    Law::Linear {
        relative_permeability,
        relative_permeability_loss: 0.0,
    }
}

/// Air and conductors.
pub(super) const TABLE: &[Entry] = &[
    Entry {
        name: "air",
        about: "air, at room conditions",
        law: linear(1.0),
        density_kg_per_m3: Some(1.2),
        source: "from memory",
        ..Entry::NOTHING
    },
    Entry {
        name: "vacuum",
        about: "empty space",
        law: linear(1.0),
        density_kg_per_m3: Some(0.0),
        source: "by definition",
        ..Entry::NOTHING
    },
    Entry {
        name: "copper",
        about: "annealed copper for conductors",
        law: linear(1.0),
        conductivity_s_per_m: 58.0e6,
        temperature_coefficient_per_k: 0.003_93,
        density_kg_per_m3: Some(8890.0),
        source: "IEC 60028, from memory",
    },
    Entry {
        name: "aluminium",
        about: "aluminium for conductors",
        law: linear(1.0),
        conductivity_s_per_m: 35.4e6,
        temperature_coefficient_per_k: 0.004_03,
        density_kg_per_m3: Some(2703.0),
        source: "from memory",
    },
    Entry {
        name: "brass",
        about: "brass with about 37 % zinc",
        law: linear(1.0),
        conductivity_s_per_m: 15.0e6,
        temperature_coefficient_per_k: 0.0016,
        density_kg_per_m3: Some(8440.0),
        source: "from memory",
    },
    Entry {
        name: "bronze",
        about: "tin bronze with about 6 % tin",
        law: linear(1.0),
        conductivity_s_per_m: 9.0e6,
        temperature_coefficient_per_k: 0.000_65,
        density_kg_per_m3: Some(8800.0),
        source: "from memory",
    },
    Entry {
        name: "stainless",
        about: "austenitic stainless steel, annealed",
        law: linear(1.005),
        conductivity_s_per_m: 1.37e6,
        temperature_coefficient_per_k: 0.001,
        density_kg_per_m3: Some(7900.0),
        source: "from memory",
    },
    Entry {
        name: "solder",
        about: "lead-free soft solder, mostly tin",
        law: linear(1.0),
        conductivity_s_per_m: 7.7e6,
        temperature_coefficient_per_k: 0.004,
        density_kg_per_m3: Some(7400.0),
        source: "from memory",
    },
];
