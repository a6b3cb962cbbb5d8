//! Field on the axis of a thick solenoid.

use crate::case_text::CaseText;
use crate::exact::coil::axis_field;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Montgomery, Solenoid Magnet Design (1969); Smythe, Static and Dynamic Electricity";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let coil = Ring {
        r: [0.03, 0.05],
        z: [-0.04, 0.04],
    };
    let turns = 1000.0;
    let places = [0.0, 0.02, 0.04, 0.08, 0.3];
    let mut text = CaseText::new("thick solenoid").coil("coil", coil, turns, 1.0);
    for (index, z) in places.iter().enumerate() {
        text = text.point(&format!("p{index}"), 0.0, *z);
    }
    let solved = Solved::new(&text)?;
    let density = turns / (0.02 * 0.08);
    places
        .iter()
        .enumerate()
        .map(|(index, &z)| {
            Ok(Row {
                source: SOURCE,
                quantity: format!(
                    "B_z on the axis at z = {} mm, coil r 30 to 50, |z| < 40 mm, 1000 A turns",
                    z * 1e3
                ),
                unit: "T",
                published: axis_field(coil, density, z),
                ours: solved.point(&format!("p{index}"))?.b_z_t,
                tolerance: Tolerance::Field,
            })
        })
        .collect()
}
