//! A permeable spherical shell in a uniform field: shielding.

use std::f64::consts::PI;

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Jackson, Classical Electrodynamics §5.12, spherical shell in a uniform field";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let (inner, outer, mu, ambient): (f64, f64, f64, f64) = (0.08, 0.1, 200.0, 0.01);
    let text = CaseText::new("spherical shell")
        .iron("soft", mu)
        .ball("shell", "soft", outer, "")
        .ball("hollow", "air", inner, "")
        .ambient(ambient)
        .point("centre", 0.0, 0.0)
        .point("within", 0.05, 0.03);
    let solved = Solved::new(&text)?;
    let below = (2.0 * mu + 1.0) * (mu + 2.0) - 2.0 * (inner / outer).powi(3) * (mu - 1.0).powi(2);
    let inside = 9.0 * mu / below * ambient;
    let moment =
        4.0 * PI / MU0 * ambient * (2.0 * mu + 1.0) * (mu - 1.0) * (outer.powi(3) - inner.powi(3)) / below;
    let row = |quantity: &str, unit, published, ours| Row {
        source: SOURCE,
        quantity: format!("{quantity}, r 80 to 100 mm, mu_r 200 in 10 mT"),
        unit,
        published,
        ours,
        tolerance: Tolerance::Field,
    };
    Ok(vec![
        row("B at the centre", "T", inside, solved.point("centre")?.b_z_t),
        row("B at (50, 30) mm", "T", inside, solved.point("within")?.b_z_t),
        row("dipole moment", "A m²", moment, solved.moment()?),
    ])
}

#[cfg(test)]
mod tests {
    #[test]
    fn the_stored_value_agrees() {
        let mu = 200.0f64;
        let ratio = 9.0 * mu / ((2.0 * mu + 1.0) * (mu + 2.0) - 2.0 * 0.512 * (mu - 1.0).powi(2));
        assert!((ratio / 0.044_498_748_299_653 - 1.0).abs() < 1e-12);
    }
}
