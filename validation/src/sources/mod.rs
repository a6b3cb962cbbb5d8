//! The checks, a file per published source. Each returns its rows, or says why it could not.

use crate::solved::Failure;
use crate::table::Row;

mod coil_in_box;
mod coil_pairs;
mod gapped_pot_core;
mod helmholtz;
mod independent_iron;
mod independent_saturable;
mod magnet_pair;
mod magnetised_cylinder;
mod magnetised_sphere;
mod maxwell_filaments;
mod nagaoka;
mod permeable_sphere;
mod saturating_sphere;
mod section_coils;
mod spherical_shell;
mod thick_solenoid;

/// A source: its short name, and its check.
pub type Check = (&'static str, fn() -> Result<Vec<Row>, Failure>);

/// All checks, in the order of the table.
pub const CHECKS: [Check; 16] = [
    ("filaments", maxwell_filaments::rows),
    ("section coils", section_coils::rows),
    ("coil pairs", coil_pairs::rows),
    ("current sheets", nagaoka::rows),
    ("thick solenoid", thick_solenoid::rows),
    ("Helmholtz pair", helmholtz::rows),
    ("magnetised sphere", magnetised_sphere::rows),
    ("magnetised cylinder", magnetised_cylinder::rows),
    ("magnet pair", magnet_pair::rows),
    ("permeable sphere", permeable_sphere::rows),
    ("spherical shell", spherical_shell::rows),
    ("coil in a box", coil_in_box::rows),
    ("iron, independent", independent_iron::rows),
    ("saturating sphere", saturating_sphere::rows),
    ("gapped pot core", gapped_pot_core::rows),
    ("saturable steel, independent", independent_saturable::rows),
];
