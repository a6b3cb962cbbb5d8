//! Two coaxial thick coils: self and mutual inductance, coupling, force.

use crate::case_text::CaseText;
use crate::exact::coil::self_inductance;
use crate::exact::filament::{Ring, mean_over, mutual, mutual_slope};
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str =
    "Grover, Inductance Calculations (1946); Maxwell's filament formula averaged over both sections";

/// Name, radii, length, gap (m), turns of each.
const PAIRS: [(&str, [f64; 2], f64, f64, f64); 2] = [
    (
        "two coils r 20 to 30, length 10, gap 10 mm, 100 turns each",
        [0.02, 0.03],
        0.01,
        0.01,
        100.0,
    ),
    (
        "two flat coils r 20 to 45, length 1.5, gap 10 mm, 20 turns each",
        [0.02, 0.045],
        0.0015,
        0.01,
        20.0,
    ),
];

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let mut rows = Vec::new();
    for (name, r, length, gap, turns) in PAIRS {
        let one = Ring { r, z: [0.0, length] };
        let two = Ring {
            r,
            z: [length + gap, 2.0 * length + gap],
        };
        let text = CaseText::new(name)
            .coil("lower", one, turns, 1.0)
            .coil("upper", two, turns, 1.0)
            .mover("upper");
        let solved = Solved::new(&text)?;
        let n2 = turns * turns;
        let own = n2 * self_inductance(one);
        let shared = n2 * mean_over(one, two, [24, 8], mutual);
        let force = n2 * mean_over(one, two, [24, 8], mutual_slope);
        let mut add = |what: &str, unit, published, ours, tolerance| {
            let quantity = format!("{what}, {name}");
            rows.push(Row {
                source: SOURCE,
                quantity,
                unit,
                published,
                ours,
                tolerance,
            });
        };
        add(
            "L of the lower",
            "H",
            own,
            solved.inductance("lower", "lower")?,
            Tolerance::Field,
        );
        add(
            "L of the upper",
            "H",
            own,
            solved.inductance("upper", "upper")?,
            Tolerance::Field,
        );
        add(
            "M",
            "H",
            shared,
            solved.inductance("lower", "upper")?,
            Tolerance::Field,
        );
        add(
            "k",
            "",
            shared / own,
            solved.coupling("lower", "upper")?,
            Tolerance::Field,
        );
        add(
            "force at 1 A by stress",
            "N",
            force,
            solved.mover_force("upper")?,
            Tolerance::Force,
        );
        add(
            "force at 1 A by J x B",
            "N",
            force,
            solved.coil_force("upper")?,
            Tolerance::Force,
        );
    }
    Ok(rows)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stored_pairs_agree_to_nine_digits() {
        let stored = [
            (1.694_782_160_069_3e-8, -1.059_390_575_204_1e-6),
            (3.991_904_446_526_5e-8, -2.059_117_209_701_e-6),
        ];
        for ((_, r, length, gap, _), (m, slope)) in PAIRS.into_iter().zip(stored) {
            let one = Ring { r, z: [0.0, length] };
            let two = Ring {
                r,
                z: [length + gap, 2.0 * length + gap],
            };
            assert!((mean_over(one, two, [24, 8], mutual) / m - 1.0).abs() < 1e-9);
            assert!((mean_over(one, two, [24, 8], mutual_slope) / slope - 1.0).abs() < 1e-9);
        }
    }
}
