//! Self-inductance of coils of rectangular section with evenly spread current.

use crate::case_text::CaseText;
use crate::exact::coil::self_inductance;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Grover, Inductance Calculations (1946); integral: Conway, IEEE Trans. Magn. 43 (2007)";
const BROOKS: &str = "Brooks, J. Res. NBS 7 (1931), printed to 5 digits (from memory)";
const DODD: &str = "Dodd & Deeds, J. Appl. Phys. 39, 2829 (1968), coil in air";

/// Name, inner radius, outer radius, length (m) and turns.
const COILS: [(&str, f64, f64, f64, f64, &str); 4] = [
    ("square-section (Brooks) coil", 0.02, 0.04, 0.02, 1.0, SOURCE),
    ("long thin coil", 0.0195, 0.0205, 0.2, 1.0, SOURCE),
    ("pancake", 0.01, 0.05, 0.001, 1.0, SOURCE),
    ("probe coil of 500 turns", 0.005, 0.01, 0.004, 500.0, DODD),
];

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let mut rows = Vec::new();
    for (name, r1, r2, length, turns, source) in COILS {
        let ring = Ring {
            r: [r1, r2],
            z: [-0.5 * length, 0.5 * length],
        };
        let solved = Solved::new(&CaseText::new(name).coil("coil", ring, turns, 1.0))?;
        let ours = solved.inductance("coil", "coil")?;
        let data = format!(
            "L, {name}, r {} to {} mm, length {} mm",
            r1 * 1e3,
            r2 * 1e3,
            length * 1e3
        );
        let published = turns * turns * self_inductance(ring);
        rows.push(Row {
            source,
            quantity: data.clone(),
            unit: "H",
            published,
            ours,
            tolerance: Tolerance::Field,
        });
        if r2 == 2.0 * r1 && length == r1 {
            // The rule as printed: L = 1.6994e-6 x mean radius x turns².
            let published = 1.6994e-6 * 1.5 * r1;
            rows.push(Row {
                source: BROOKS,
                quantity: data,
                unit: "H",
                published,
                ours,
                tolerance: Tolerance::Field,
            });
        }
    }
    Ok(rows)
}
