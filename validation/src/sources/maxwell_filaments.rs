//! Mutual inductance and force of coaxial circular filaments. A filament has no section, so each is drawn as a
//! thin square ring, and Maxwell's formula is averaged over the squares (it moves by under 2e-4); the row also
//! tells the filament limit.

use crate::case_text::CaseText;
use crate::exact::filament::{Ring, mean_over, mutual, mutual_slope};
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Maxwell, Treatise vol. 2 §701; Rosa & Grover, NBS Sci. Paper 169 (1912) eq. 1";

/// Radii and distance, m.
const PAIRS: [[f64; 3]; 6] = [
    [0.25, 0.25, 0.2],
    [0.25, 0.25, 0.04],
    [0.25, 0.25, 0.01],
    [0.25, 0.2, 0.1],
    [0.05, 0.05, 0.05],
    [0.08, 0.06, 0.03],
];

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let mut rows = Vec::new();
    for [a, b, d] in PAIRS {
        let side = a.min(b).min(d) / 20.0;
        let (one, two) = (Ring::around(a, 0.0, side), Ring::around(b, d, side));
        let text = CaseText::new("two thin rings")
            .coil("lower", one, 1.0, 100.0)
            .coil("upper", two, 1.0, 100.0)
            .mover("upper");
        let solved = Solved::new(&text)?;
        let data = format!(
            "rings of radius {} and {} mm, {} mm apart",
            a * 1e3,
            b * 1e3,
            d * 1e3
        );
        let row = |quantity: String, unit, published, ours, tolerance| Row {
            source: SOURCE,
            quantity,
            unit,
            published,
            ours,
            tolerance,
        };
        let force = 1e4 * mean_over(one, two, [4, 4], mutual_slope);
        rows.push(row(
            format!("M, {data} (filament limit {:.6e} H)", mutual(a, b, d)),
            "H",
            mean_over(one, two, [4, 4], mutual),
            solved.inductance("lower", "upper")?,
            Tolerance::Field,
        ));
        rows.push(row(
            format!(
                "force at 100 A by stress, {data} (filament limit {:.6e} N)",
                1e4 * mutual_slope(a, b, d)
            ),
            "N",
            force,
            solved.mover_force("upper")?,
            Tolerance::Force,
        ));
        rows.push(row(
            format!("force at 100 A by J x B, {data}"),
            "N",
            force,
            solved.coil_force("upper")?,
            Tolerance::Force,
        ));
    }
    Ok(rows)
}
