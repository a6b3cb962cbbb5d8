//! A permeable sphere in a uniform field.

use std::f64::consts::PI;

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "Jackson, Classical Electrodynamics §5.11-5.12, permeable sphere in a uniform field";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let (radius, ambient) = (0.03, 0.01);
    let mut rows = Vec::new();
    for mu_r in [10.0, 100.0, 1000.0] {
        let text = CaseText::new("permeable sphere")
            .iron("soft", mu_r)
            .ball("ball", "soft", radius, "")
            .ambient(ambient)
            .point("centre", 0.0, 0.0)
            .point("within", 0.02, 0.01)
            .point("above", 0.0, 0.06)
            .search_coil("equator", radius, 0.0);
        let solved = Solved::new(&text)?;
        let inside = 3.0 * mu_r / (mu_r + 2.0) * ambient;
        let moment = 4.0 * PI / MU0 * radius.powi(3) * (mu_r - 1.0) / (mu_r + 2.0) * ambient;
        let mut add = |what: &str, unit, published, ours| {
            rows.push(Row {
                source: SOURCE,
                quantity: format!("{what}, mu_r {mu_r}, radius 30 mm in 10 mT"),
                unit,
                published,
                ours,
                tolerance: Tolerance::Field,
            });
        };
        add("B at the centre", "T", inside, solved.point("centre")?.b_z_t);
        add("B at (20, 10) mm", "T", inside, solved.point("within")?.b_z_t);
        let above = ambient + MU0 * moment / (2.0 * PI * 0.06f64.powi(3));
        add("B on the axis at 60 mm", "T", above, solved.point("above")?.b_z_t);
        add("dipole moment", "A m²", moment, solved.moment()?);
        add(
            "flux through the equator",
            "Wb",
            inside * PI * radius * radius,
            solved.flux("equator")?,
        );
    }
    Ok(rows)
}
