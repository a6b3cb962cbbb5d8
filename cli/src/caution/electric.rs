//! Voltage, stored energy, heat in windings.

use solver::{Bracket, Quantities};

use super::{COMMON_PRACTICE, Caution};
use crate::notation::{Unit, significant};

/// Direct voltage above which touching is no longer held harmless, V (IEC 61140, from memory).
const TOUCH_DIRECT_V: f64 = 120.0;
/// Energy released on opening above which contacts arc and people are startled, J.
const ARCING_J: f64 = 0.01;
/// Energy released on opening above which a shock is dangerous, J.
const DANGEROUS_J: f64 = 5.0;
/// Current density that free air cools without special care, A/m².
const FREE_AIR_A_PER_M2: f64 = 5e6;

/// The larger of the magnitudes of a number's ends.
fn largest(number: &Bracket) -> f64 {
    number.low.abs().max(number.high.abs())
}

pub(super) fn touch_voltage(quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let above = quantities.windings.iter().filter_map(|winding| {
        let volts = winding.voltage_v.as_ref().map(largest)?;
        (volts > TOUCH_DIRECT_V).then(|| {
            Caution::safety(
                &winding.name,
                format!(
                    "The voltage at the terminals, {}, is beyond extra-low voltage ({TOUCH_DIRECT_V} V direct): bare \
                     parts must not be touched.",
                    significant(volts, Unit::VOLT, 3)
                ),
                "IEC 61140, limit of extra-low voltage, from memory",
            )
        })
    });
    above.collect()
}

/// Energy that the currents alone store, J: half the sum of apparent inductance times currents.
fn energy_of_currents(quantities: &Quantities<Bracket>) -> f64 {
    let currents: Vec<f64> = quantities
        .windings
        .iter()
        .map(|winding| winding.current_a.value)
        .collect();
    let rows = quantities.inductance_h.iter().zip(&currents);
    rows.map(|(row, i)| {
        row.iter()
            .zip(&currents)
            .map(|(l, j)| 0.5 * l.value * i * j)
            .sum::<f64>()
    })
    .sum()
}

pub(super) fn stored_energy(quantities: &Quantities<Bracket>) -> Option<Caution> {
    let energy = energy_of_currents(quantities);
    if energy < ARCING_J {
        return None;
    }
    let danger = if energy < DANGEROUS_J {
        "contacts arc, and whoever holds the wires is shocked"
    } else {
        "the shock can be dangerous to life, and the arc burns"
    };
    Some(Caution::safety(
        "stored energy",
        format!(
            "The currents store {}. When the circuit opens, the voltage rises far beyond the supply's: {danger}. Give \
             the current another path, such as a diode or a clamp, before the circuit is opened.",
            significant(energy, Unit::JOULE, 2)
        ),
        COMMON_PRACTICE,
    ))
}

pub(super) fn current_density(quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let above = quantities.windings.iter().filter_map(|winding| {
        let density = winding.current_density_a_per_m2.as_ref().map(largest)?;
        (density > FREE_AIR_A_PER_M2).then(|| {
            Caution::safety(
                &winding.name,
                format!(
                    "The current density, {}, is more than free air can cool for long ({}): the winding may burn. \
                     Use it for short pulses, cool it, or use thicker wire.",
                    significant(density, Unit::CURRENT_DENSITY, 3),
                    significant(FREE_AIR_A_PER_M2, Unit::CURRENT_DENSITY, 3)
                ),
                COMMON_PRACTICE,
            )
        })
    });
    above.collect()
}
