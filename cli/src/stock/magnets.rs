//! Magnets by the classes of IEC 60404-8-1, each with its recoil line.

use super::{Entry, Law};

const SOURCE: &str = "typical of the class in IEC 60404-8-1, from memory";

/// A recoil line with the temperature coefficient of its remanence.
const fn recoil(remanence_t: f64, recoil_permeability: f64, coefficient_per_k: f64) -> Law {
    Law::Magnet {
        remanence_t,
        recoil_permeability,
        remanence_temperature_coefficient_per_k: coefficient_per_k,
    }
}

/// Magnets.
pub(super) const TABLE: &[Entry] = &[
    Entry {
        name: "hard-ferrite",
        about: "sintered anisotropic hard ferrite",
        law: recoil(0.40, 1.06, -0.002),
        conductivity_s_per_m: 1e-4,
        density_kg_per_m3: Some(4900.0),
        source: SOURCE,
        ..Entry::NOTHING
    },
    Entry {
        name: "alnico",
        about: "cast anisotropic aluminium-nickel-cobalt; its recoil line holds only near the working point",
        law: recoil(1.2, 4.0, -0.0002),
        conductivity_s_per_m: 2.0e6,
        density_kg_per_m3: Some(7300.0),
        source: SOURCE,
        ..Entry::NOTHING
    },
    Entry {
        name: "smco",
        about: "sintered samarium-cobalt",
        law: recoil(1.0, 1.05, -0.0004),
        conductivity_s_per_m: 1.2e6,
        density_kg_per_m3: Some(8300.0),
        source: SOURCE,
        ..Entry::NOTHING
    },
    Entry {
        name: "ndfeb",
        about: "sintered neodymium-iron-boron",
        law: recoil(1.25, 1.05, -0.0011),
        conductivity_s_per_m: 0.65e6,
        density_kg_per_m3: Some(7500.0),
        source: SOURCE,
        ..Entry::NOTHING
    },
];
