//! A sphere of saturating material in a uniform field: whatever the law, B, H and M are uniform inside, and
//! H + M / 3 = B0 / mu0.

use std::f64::consts::PI;

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str =
    "Osborn, Phys. Rev. 67 (1945) 351, demagnetising factor 1/3, with B = mu0 H + Js H/(H+Hs) (from memory)";

/// Saturation polarisation, T, and field of half of it, A/m.
const LAW: [f64; 2] = [2.0, 400.0];
const RADIUS_M: f64 = 0.02;

/// H inside for an ambient field, A/m: mu0 H² + (mu0 Hs + Js/3 - B0) H - B0 Hs = 0.
fn field_inside(ambient_t: f64) -> f64 {
    let [js, hs] = LAW;
    let p = MU0 * hs + js / 3.0 - ambient_t;
    let root = (p * p + 4.0 * MU0 * ambient_t * hs).sqrt();
    // The form without cancellation for either sign of p.
    if p > 0.0 {
        2.0 * ambient_t * hs / (p + root)
    } else {
        (root - p) / (2.0 * MU0)
    }
}

/// The rows of this source: from far below the knee to far beyond it.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let [js, hs] = LAW;
    let mut rows = Vec::new();
    for ambient in [0.05, 0.2, 0.5, 0.6, 0.7, 1.0, 2.0] {
        let text = CaseText::new("saturating sphere")
            .saturating("soft", js, hs)
            .ball("ball", "soft", RADIUS_M, "")
            .ambient(ambient)
            .point("centre", 0.0, 0.0)
            .point("within", 0.012, 0.009)
            .point("above", 0.0, 0.04)
            .search_coil("equator", RADIUS_M, 0.0);
        let solved = Solved::new(&text)?;
        let h = field_inside(ambient);
        let polarization = js * h / (h + hs);
        let inside = MU0 * h + polarization;
        let moment = polarization / MU0 * 4.0 / 3.0 * PI * RADIUS_M.powi(3);
        let mut add = |what: &str, unit, published, ours| {
            rows.push(Row {
                source: SOURCE,
                quantity: format!("{what}, Js {js} T, Hs {hs} A/m, radius 20 mm in {ambient} T"),
                unit,
                published,
                ours,
                tolerance: Tolerance::Field,
            });
        };
        add("B at the centre", "T", inside, solved.point("centre")?.b_z_t);
        add("B at (12, 9) mm", "T", inside, solved.point("within")?.b_z_t);
        let above = ambient + MU0 * moment / (2.0 * PI * 0.04f64.powi(3));
        add("B on the axis at 40 mm", "T", above, solved.point("above")?.b_z_t);
        add("dipole moment", "A m²", moment, solved.moment()?);
        let flux = inside * PI * RADIUS_M * RADIUS_M;
        add("flux through the equator", "Wb", flux, solved.flux("equator")?);
    }
    Ok(rows)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_field_inside_solves_its_equation() {
        let [js, hs] = LAW;
        for ambient in [1e-6, 0.05, 0.6, 0.67, 0.7, 2.0] {
            let h = field_inside(ambient);
            let left = h + js * h / (h + hs) / (3.0 * MU0);
            assert!((left * MU0 / ambient - 1.0).abs() < 1e-12, "{ambient}");
        }
    }
}
