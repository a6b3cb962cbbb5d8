//! A coil in a box on whose wall A_phi vanishes: a Fourier-Bessel series, exact for the finite box.

use crate::case_text::CaseText;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str =
    "Dodd & Deeds, J. Appl. Phys. 39, 2829 (1968), truncated-region form; stored series value";

/// The rows of this source. Inner radius 5, outer 10, z 1 to 5 mm, 500 turns; wall r 60, z -30 to 60 mm.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let ring = Ring {
        r: [0.005, 0.01],
        z: [0.001, 0.005],
    };
    let text = CaseText::new("coil in a box")
        .coil("coil", ring, 500.0, 1.0)
        .lines("[space]\nboundary = \"wall\"\nwall = { rect = { r = [0, 0.06], z = [-0.03, 0.06] } }");
    let solved = Solved::new(&text)?;
    Ok(vec![Row {
        source: SOURCE,
        quantity: "L, coil r 5 to 10, z 1 to 5 mm, 500 turns, wall r 60, z -30 to 60 mm".into(),
        unit: "H",
        published: 0.003_399_745_359_396_69,
        ours: solved.inductance("coil", "coil")?,
        tolerance: Tolerance::Field,
    }])
}
