//! The uniformly magnetised cylinder as an equivalent current sheet.

use std::f64::consts::PI;

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "equivalent current sheet of a magnetised cylinder, e.g. Ravaud et al., PIER 102 (2010)";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let (radius, length, remanence) = (0.01, 0.02, 1.2);
    let heights = [
        (0.0, "at the centre"),
        (0.01, "on the face"),
        (0.015, "5 mm above the face"),
        (0.03, "20 mm above the face"),
    ];
    let mut text = CaseText::new("magnetised cylinder")
        .magnet_stock("hard", remanence)
        .rect(
            "magnet",
            "hard",
            Ring {
                r: [0.0, radius],
                z: [-0.5 * length, 0.5 * length],
            },
            "magnetized = [0, 1]",
        );
    for (index, (z, _)) in heights.iter().enumerate() {
        text = text.point(&format!("p{index}"), 0.0, *z);
    }
    let solved = Solved::new(&text)?;
    let sheet = |u: f64| u / u.hypot(radius);
    let axis = |z: f64| 0.5 * remanence * (sheet(z + 0.5 * length) - sheet(z - 0.5 * length));
    let row = |what: &str, unit, published, ours| Row {
        source: SOURCE,
        quantity: format!("{what}, radius 10, length 20 mm, Br 1.2 T"),
        unit,
        published,
        ours,
        tolerance: Tolerance::Field,
    };
    let mut rows = Vec::new();
    for (index, (z, where_)) in heights.iter().enumerate() {
        let ours = solved.point(&format!("p{index}"))?.b_z_t;
        rows.push(row(&format!("B on the axis {where_}"), "T", axis(*z), ours));
    }
    let moment = remanence / MU0 * PI * radius * radius * length;
    rows.push(row("dipole moment", "A m²", moment, solved.moment()?));
    Ok(rows)
}
