//! Force between two equal coaxial magnets.

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::exact::coil::sheet_integral;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "current-sheet model of two magnets, cf. Ravaud et al., PIER 102 (2010)";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let (radius, length, remanence) = (0.01, 0.02, 1.2);
    let mut rows = Vec::new();
    for gap in [0.002, 0.005, 0.01, 0.02] {
        let magnet = |z: f64| Ring {
            r: [0.0, radius],
            z: [z, z + length],
        };
        let text = CaseText::new("two magnets")
            .magnet_stock("hard", remanence)
            .rect("lower", "hard", magnet(0.0), "magnetized = [0, 1]")
            .rect("upper", "hard", magnet(length + gap), "magnetized = [0, 1]")
            .mover("lower")
            .mover("upper");
        let solved = Solved::new(&text)?;
        let q = |s| sheet_integral(radius, s);
        let published = (remanence / MU0).powi(2) * (q(gap + 2.0 * length) - 2.0 * q(gap + length) + q(gap));
        for (name, sign) in [("lower", -1.0), ("upper", 1.0)] {
            rows.push(Row {
                source: SOURCE,
                quantity: format!(
                    "force on the {name} magnet, radius 10, length 20, gap {} mm, Br 1.2 T",
                    gap * 1e3
                ),
                unit: "N",
                published: sign * published,
                ours: solved.mover_force(name)?,
                tolerance: Tolerance::Force,
            });
        }
    }
    Ok(rows)
}
