//! The uniformly magnetised sphere: 2/3 of the remanence inside, a pure dipole outside.

use std::f64::consts::PI;

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Jackson, Classical Electrodynamics §5.10, uniformly magnetised sphere";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let (radius, remanence) = (0.01, 1.2);
    let text = CaseText::new("magnetised sphere")
        .magnet_stock("hard", remanence)
        .ball("ball", "hard", radius, "magnetized = [0, 1]")
        .point("centre", 0.0, 0.0)
        .point("within", 0.006, 0.004)
        .point("above", 0.0, 0.02)
        .point("beside", 0.02, 0.0)
        .point("aslant", 0.012, 0.016)
        .search_coil("equator", radius, 0.0);
    let solved = Solved::new(&text)?;
    let moment = remanence / MU0 * 4.0 / 3.0 * PI * radius.powi(3);
    let axis = MU0 * moment / (2.0 * PI * 0.02f64.powi(3));
    let row = |quantity: &str, unit, published, ours| Row {
        source: SOURCE,
        quantity: format!("{quantity}, radius 10 mm, Br 1.2 T"),
        unit,
        published,
        ours,
        tolerance: Tolerance::Field,
    };
    let magnet = solved.magnet("ball")?;
    // At (12, 16) mm: distance 20 mm, cos = 0.8, sin = 0.6; B_r = 3/2 sin cos, B_z = (3 cos² - 1)/2 of the axis field.
    Ok(vec![
        row(
            "B at the centre",
            "T",
            2.0 / 3.0 * remanence,
            solved.point("centre")?.b_z_t,
        ),
        row(
            "B at (6, 4) mm",
            "T",
            2.0 / 3.0 * remanence,
            solved.point("within")?.b_z_t,
        ),
        row("mean B along", "T", 2.0 / 3.0 * remanence, magnet.mean_b_along_t),
        row(
            "mean H along",
            "A/m",
            -remanence / (3.0 * MU0),
            magnet.mean_h_along_a_per_m,
        ),
        row("dipole moment", "A m²", moment, solved.moment()?),
        row(
            "B_z on the axis at 20 mm",
            "T",
            axis,
            solved.point("above")?.b_z_t,
        ),
        row(
            "B_z on the equator at 20 mm",
            "T",
            -0.5 * axis,
            solved.point("beside")?.b_z_t,
        ),
        row(
            "B_r at (12, 16) mm",
            "T",
            1.5 * 0.6 * 0.8 * axis,
            solved.point("aslant")?.b_r_t,
        ),
        row(
            "B_z at (12, 16) mm",
            "T",
            0.5 * (3.0 * 0.64 - 1.0) * axis,
            solved.point("aslant")?.b_z_t,
        ),
        row(
            "flux through the equator",
            "Wb",
            2.0 / 3.0 * remanence * PI * radius * radius,
            solved.flux("equator")?,
        ),
    ])
}
