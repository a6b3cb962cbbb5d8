//! A pot core with an air gap under its lid, against the sum of its reluctances.
//!
//! The tubes of flux that stay in steel and gap alone are a bound from below: walls around them can only take
//! permeance away. To it come the fringing of the gaps (each edge taken wider by one gap length) and the flux
//! that crosses the window from post to rim (as in a slot, a third of the permeance of the window's height); both
//! are rules of thumb, so the estimate is believed to as much as they add.

use std::f64::consts::PI;

use crate::case_text::CaseText;
use crate::exact::MU0;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const SOURCE: &str = "sum of reluctances with fringing and window leakage (common practice, no source)";

/// Saturation polarisation, T, and field of half of it, A/m.
const LAW: [f64; 2] = [2.0, 400.0];
const POST_M: f64 = 10e-3;
const RIM_M: [f64; 2] = [20e-3, 24e-3];
const WINDOW_M: f64 = 20e-3;
const BASE_M: f64 = 5e-3;
const LID_M: f64 = 6e-3;
const TURNS: f64 = 100.0;

/// Inductance without and with fringing and leakage, H.
fn estimate(gap: f64) -> [f64; 2] {
    // Far below the knee, where the law is its initial permeability.
    let mu = MU0 + LAW[0] / LAW[1];
    let ring = |inner: f64, outer: f64| PI * (outer * outer - inner * inner);
    let disc = |thickness: f64| (RIM_M[0] / POST_M).ln() / (2.0 * PI * mu * thickness);
    let steel = WINDOW_M / (mu * ring(0.0, POST_M))
        + WINDOW_M / (mu * ring(RIM_M[0], RIM_M[1]))
        + disc(BASE_M)
        + disc(LID_M);
    let of_gap = |area: f64| gap / (MU0 * area);
    let bare = of_gap(ring(0.0, POST_M)) + of_gap(ring(RIM_M[0], RIM_M[1]));
    let fringed = of_gap(ring(0.0, POST_M + gap)) + of_gap(ring(RIM_M[0] - gap, RIM_M[1] + gap));
    let window = MU0 * 2.0 * PI * WINDOW_M / (3.0 * (RIM_M[0] / POST_M).ln());
    let squared = TURNS * TURNS;
    [
        squared / (steel + bare),
        squared / (steel + fringed) + squared * window,
    ]
}

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let mut rows = Vec::new();
    for gap in [0.2e-3, 0.5e-3, 1e-3] {
        let box_of = |r: [f64; 2], z: [f64; 2]| Ring { r, z };
        let text = CaseText::new("gapped pot core")
            .saturating("soft", LAW[0], LAW[1])
            .rect("post", "soft", box_of([0.0, POST_M], [-WINDOW_M, 0.0]), "")
            .rect("rim", "soft", box_of(RIM_M, [-WINDOW_M, 0.0]), "")
            .rect(
                "base",
                "soft",
                box_of([0.0, RIM_M[1]], [-WINDOW_M - BASE_M, -WINDOW_M]),
                "",
            )
            .rect("lid", "soft", box_of([0.0, RIM_M[1]], [gap, gap + LID_M]), "")
            // A hundredth of an ampere-turn per turn keeps the steel far below its knee.
            .coil("coil", box_of([POST_M, RIM_M[0]], [-WINDOW_M, 0.0]), TURNS, 0.01);
        let ours = Solved::new(&text)?.inductance("coil", "coil")?;
        let [bare, full] = estimate(gap);
        rows.push(Row {
            source: SOURCE,
            quantity: format!("inductance of 100 turns, gap {} mm", 1e3 * gap),
            unit: "H",
            published: full,
            ours,
            tolerance: Tolerance::Estimate(1.0 - bare / full),
        });
    }
    Ok(rows)
}
