//! Soft-magnetic materials of constant permeability: sound only well below the knee, and for the classes of
//! ferrite and powder only as a first guess (a maker's data belong in the case).

use super::{Entry, Law};

const PRACTICE: &str = "common practice, no source";
const MEMORY: &str = "typical of the class, from memory";

/// B = mu0 mu_r H.
const fn linear(relative_permeability: f64) -> Law {
    Law::Linear {
        relative_permeability,
        relative_permeability_loss: 0.0,
    }
}

/// Soft-magnetic materials of constant permeability.
pub(super) const TABLE: &[Entry] = &[
    Entry {
        name: "iron-linear",
        about: "pure iron far below saturation (under about 1.2 T)",
        law: linear(5000.0),
        conductivity_s_per_m: 10.0e6,
        temperature_coefficient_per_k: 0.006,
        density_kg_per_m3: Some(7870.0),
        source: PRACTICE,
    },
    Entry {
        name: "steel-linear",
        about: "low-carbon steel far below saturation (under about 1.2 T)",
        law: linear(1000.0),
        conductivity_s_per_m: 5.9e6,
        temperature_coefficient_per_k: 0.005,
        density_kg_per_m3: Some(7850.0),
        source: PRACTICE,
    },
    Entry {
        name: "cast-iron-linear",
        about: "grey cast iron far below saturation (under about 0.6 T)",
        law: linear(300.0),
        conductivity_s_per_m: 1.3e6,
        temperature_coefficient_per_k: 0.002,
        density_kg_per_m3: Some(7200.0),
        source: PRACTICE,
    },
    Entry {
        name: "silicon-steel-linear",
        about: "steel with about 3 % silicon far below saturation (under about 1.2 T)",
        law: linear(4000.0),
        conductivity_s_per_m: 2.1e6,
        temperature_coefficient_per_k: 0.001,
        density_kg_per_m3: Some(7650.0),
        source: PRACTICE,
    },
    Entry {
        name: "nickel-iron-linear",
        about: "iron with about 50 % nickel far below saturation (under about 1 T)",
        law: linear(30_000.0),
        conductivity_s_per_m: 2.2e6,
        temperature_coefficient_per_k: 0.004,
        density_kg_per_m3: Some(8200.0),
        source: PRACTICE,
    },
    Entry {
        name: "ferrite-mnzn",
        about: "manganese-zinc power ferrite at small signal (under about 0.2 T)",
        law: linear(2300.0),
        conductivity_s_per_m: 0.2,
        density_kg_per_m3: Some(4800.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
    Entry {
        name: "ferrite-nizn",
        about: "nickel-zinc ferrite at small signal (under about 0.15 T)",
        law: linear(250.0),
        conductivity_s_per_m: 1e-5,
        density_kg_per_m3: Some(4800.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
    Entry {
        name: "iron-powder",
        about: "pressed iron powder with insulated grains at small signal (under about 0.5 T)",
        law: linear(60.0),
        density_kg_per_m3: Some(6500.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
];
