//! The Helmholtz pair, each coil of 10 mm x 10 mm section.

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::exact::coil::axis_field;
use crate::exact::filament::{Ring, mean_over, mutual};
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Helmholtz pair, (4/5)^1.5 mu0 N I / R (elementary); section: Montgomery (1969)";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let (radius, turns) = (0.1, 100.0);
    let (lower, upper) = (
        Ring::around(radius, -0.05, 0.01),
        Ring::around(radius, 0.05, 0.01),
    );
    let text = CaseText::new("Helmholtz pair")
        .coil("lower", lower, turns, 1.0)
        .coil("upper", upper, turns, 1.0)
        .point("centre", 0.0, 0.0)
        .point("off", 0.0, 0.02);
    let solved = Solved::new(&text)?;
    let density = turns / 1e-4;
    let axis = |z: f64| axis_field(lower, density, z) + axis_field(upper, density, z);
    let row = |quantity: String, unit, published, ours| Row {
        source: SOURCE,
        quantity,
        unit,
        published,
        ours,
        tolerance: Tolerance::Field,
    };
    let thin = 0.8f64.powf(1.5) * MU0 * turns / radius;
    Ok(vec![
        row(
            format!("B at the centre, radius 100 mm, 100 turns of 1 A each (thin limit {thin:.6e} T)"),
            "T",
            axis(0.0),
            solved.point("centre")?.b_z_t,
        ),
        row(
            "B on the axis 20 mm from the centre".into(),
            "T",
            axis(0.02),
            solved.point("off")?.b_z_t,
        ),
        row(
            "M of the two coils".into(),
            "H",
            turns * turns * mean_over(lower, upper, [6, 6], mutual),
            solved.inductance("lower", "upper")?,
        ),
    ])
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stored_values_agree() {
        let (lower, upper) = (Ring::around(0.1, -0.05, 0.01), Ring::around(0.1, 0.05, 0.01));
        let centre = axis_field(lower, 1e6, 0.0) + axis_field(upper, 1e6, 0.0);
        assert!((centre / 8.990_279_075_325e-4 - 1.0).abs() < 1e-11);
        assert!((1e4 * mutual(0.1, 0.1, 0.1) / 4.940_784_630_798e-4 - 1.0).abs() < 1e-11);
    }
}
