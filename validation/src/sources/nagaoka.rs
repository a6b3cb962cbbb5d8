//! Nagaoka's coefficient of a cylindrical current sheet, in two ways.
//!
//! A magnet of recoil permeability 1, magnetised along its axis, *is* a current sheet of Br/mu0 amperes per metre.
//! The linkage of that sheet is the volume integral of B_z over the magnet, so that K = mean B_z / Br without any
//! thickness to correct for. Beside it, a thin coil: its thickness (1/400 of the radius) lowers L by a part that is
//! taken from the exact integral for the rectangular section.

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::exact::coil::{nagaoka, self_inductance};
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved, times};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Nagaoka, J. Coll. Sci. Tokyo 27 (1909); Lorenz (1879)";
const RADIUS: f64 = 0.02;
const REMANENCE: f64 = 1.0;

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let mut rows = Vec::new();
    for ratio in [0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 10.0] {
        let half = RADIUS / ratio;
        let text = CaseText::new("magnet as a current sheet")
            .magnet_stock("sheet-magnet", REMANENCE)
            .rect(
                "magnet",
                "sheet-magnet",
                Ring {
                    r: [0.0, RADIUS],
                    z: [-half, half],
                },
                "magnetized = [0, 1]",
            );
        let solved = Solved::new(&text)?;
        rows.push(Row {
            source: SOURCE,
            quantity: format!("K at diameter/length {ratio}, magnet as a current sheet"),
            unit: "",
            published: nagaoka(ratio),
            ours: times(solved.magnet("magnet")?.mean_b_along_t, 1.0 / REMANENCE),
            tolerance: Tolerance::Field,
        });
    }
    for ratio in [0.5, 1.0, 2.0] {
        let (half, thin) = (RADIUS / ratio, RADIUS / 800.0);
        let ring = Ring {
            r: [RADIUS - thin, RADIUS + thin],
            z: [-half, half],
        };
        let solved = Solved::new(&CaseText::new("thin solenoid").coil("coil", ring, 1.0, 1.0))?;
        let infinite = MU0 * std::f64::consts::PI * RADIUS * RADIUS / (2.0 * half);
        let thickness = nagaoka(ratio) - self_inductance(ring) / infinite;
        let ours = times(solved.inductance("coil", "coil")?, 1.0 / infinite);
        rows.push(Row {
            source: SOURCE,
            quantity: format!(
                "K at diameter/length {ratio}, thin coil ({:.4} % added for its thickness)",
                100.0 * thickness / nagaoka(ratio)
            ),
            unit: "",
            published: nagaoka(ratio),
            ours: solver::Bracket {
                value: ours.value + thickness,
                low: ours.low + thickness,
                high: ours.high + thickness,
                bound: ours.bound,
            },
            tolerance: Tolerance::Field,
        });
    }
    Ok(rows)
}
