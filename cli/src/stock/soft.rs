//! Soft-magnetic materials. Curves and laws are typical of a class, good for a first design: a maker's data belong in
//! the case. Those named `-linear` have a constant permeability, sound only well below the knee.

use std::borrow::Cow;

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

/// B = mu0 H + Js H / (H + Hs).
const fn saturation(polarization_t: f64, half_field_a_per_m: f64) -> Law {
    Law::Saturation {
        polarization_t,
        half_field_a_per_m,
    }
}

/// Points (H in A/m, B in T).
const fn curve(points: &'static [[f64; 2]]) -> Law {
    Law::Curve(Cow::Borrowed(points))
}

const IRON: &[[f64; 2]] = &[
    [0.0, 0.0],
    [25.0, 0.06],
    [50.0, 0.30],
    [75.0, 0.65],
    [100.0, 0.90],
    [150.0, 1.15],
    [200.0, 1.27],
    [300.0, 1.38],
    [500.0, 1.47],
    [1000.0, 1.56],
    [2500.0, 1.65],
    [5000.0, 1.73],
    [10e3, 1.83],
    [20e3, 1.96],
    [50e3, 2.12],
    [100e3, 2.24],
    [200e3, 2.39],
];

const STEEL: &[[f64; 2]] = &[
    [0.0, 0.0],
    [100.0, 0.12],
    [200.0, 0.40],
    [300.0, 0.68],
    [400.0, 0.90],
    [500.0, 1.05],
    [700.0, 1.22],
    [1000.0, 1.36],
    [1500.0, 1.46],
    [2500.0, 1.56],
    [4000.0, 1.63],
    [6000.0, 1.69],
    [10e3, 1.77],
    [20e3, 1.90],
    [50e3, 2.07],
    [100e3, 2.19],
    [200e3, 2.34],
];

const CAST_IRON: &[[f64; 2]] = &[
    [0.0, 0.0],
    [200.0, 0.08],
    [400.0, 0.20],
    [800.0, 0.37],
    [1200.0, 0.46],
    [2000.0, 0.56],
    [4000.0, 0.70],
    [8000.0, 0.87],
    [16e3, 1.06],
    [30e3, 1.24],
    [60e3, 1.42],
    [120e3, 1.57],
    [200e3, 1.69],
];

const SILICON_STEEL: &[[f64; 2]] = &[
    [0.0, 0.0],
    [25.0, 0.15],
    [40.0, 0.40],
    [60.0, 0.70],
    [80.0, 0.88],
    [100.0, 1.00],
    [150.0, 1.15],
    [250.0, 1.27],
    [500.0, 1.38],
    [1000.0, 1.46],
    [2500.0, 1.55],
    [5000.0, 1.64],
    [10e3, 1.76],
    [20e3, 1.88],
    [50e3, 2.02],
    [100e3, 2.11],
    [200e3, 2.25],
];

const NICKEL_IRON: &[[f64; 2]] = &[
    [0.0, 0.0],
    [2.0, 0.02],
    [5.0, 0.15],
    [8.0, 0.40],
    [12.0, 0.65],
    [20.0, 0.90],
    [40.0, 1.15],
    [80.0, 1.30],
    [200.0, 1.42],
    [500.0, 1.48],
    [2000.0, 1.53],
    [10e3, 1.57],
    [50e3, 1.64],
    [100e3, 1.71],
];

const FERRITE_MNZN: &[[f64; 2]] = &[
    [0.0, 0.0],
    [10.0, 0.029],
    [30.0, 0.095],
    [60.0, 0.195],
    [100.0, 0.29],
    [150.0, 0.35],
    [250.0, 0.405],
    [500.0, 0.45],
    [1200.0, 0.485],
    [4000.0, 0.50],
    [20e3, 0.53],
];

/// Soft-magnetic materials.
pub(super) const TABLE: &[Entry] = &[
    Entry {
        name: "iron",
        about: "pure iron, annealed",
        law: curve(IRON),
        conductivity_s_per_m: 10.0e6,
        temperature_coefficient_per_k: 0.006,
        density_kg_per_m3: Some(7870.0),
        source: MEMORY,
    },
    Entry {
        name: "steel",
        about: "low-carbon steel (about 0.1 % carbon), annealed",
        law: curve(STEEL),
        conductivity_s_per_m: 5.9e6,
        temperature_coefficient_per_k: 0.005,
        density_kg_per_m3: Some(7850.0),
        source: MEMORY,
    },
    Entry {
        name: "cast-iron",
        about: "grey cast iron",
        law: curve(CAST_IRON),
        conductivity_s_per_m: 1.3e6,
        temperature_coefficient_per_k: 0.002,
        density_kg_per_m3: Some(7200.0),
        source: MEMORY,
    },
    Entry {
        name: "silicon-steel",
        about: "steel with about 3 % silicon, grains without direction",
        law: curve(SILICON_STEEL),
        conductivity_s_per_m: 2.1e6,
        temperature_coefficient_per_k: 0.001,
        density_kg_per_m3: Some(7650.0),
        source: MEMORY,
    },
    Entry {
        name: "nickel-iron",
        about: "iron with about 50 % nickel, annealed",
        law: curve(NICKEL_IRON),
        conductivity_s_per_m: 2.2e6,
        temperature_coefficient_per_k: 0.004,
        density_kg_per_m3: Some(8200.0),
        source: MEMORY,
    },
    Entry {
        name: "ferrite-mnzn",
        about: "manganese-zinc power ferrite at room temperature (at 100 °C it holds a quarter less)",
        law: curve(FERRITE_MNZN),
        conductivity_s_per_m: 0.2,
        density_kg_per_m3: Some(4800.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
    Entry {
        name: "ferrite-nizn",
        about: "nickel-zinc ferrite of permeability 250",
        law: saturation(0.33, 1055.0),
        conductivity_s_per_m: 1e-5,
        density_kg_per_m3: Some(4800.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
    Entry {
        name: "iron-powder",
        about: "pressed iron powder with insulated grains, of permeability 60",
        law: saturation(1.2, 16.2e3),
        density_kg_per_m3: Some(6500.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
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
        name: "ferrite-mnzn-linear",
        about: "manganese-zinc power ferrite at small signal (under about 0.2 T)",
        law: linear(2300.0),
        conductivity_s_per_m: 0.2,
        density_kg_per_m3: Some(4800.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
    Entry {
        name: "ferrite-nizn-linear",
        about: "nickel-zinc ferrite at small signal (under about 0.15 T)",
        law: linear(250.0),
        conductivity_s_per_m: 1e-5,
        density_kg_per_m3: Some(4800.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
    Entry {
        name: "iron-powder-linear",
        about: "pressed iron powder with insulated grains at small signal (under about 0.2 T)",
        law: linear(60.0),
        density_kg_per_m3: Some(6500.0),
        source: MEMORY,
        ..Entry::NOTHING
    },
];
