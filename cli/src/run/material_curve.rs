//! B over H of a material of the stock, as rows and as a small plot.

use solver::MU0;
use solver::reluctivity::{Curve, Demagnetisation, Isotropic, Saturation};

use crate::notation::{Unit, significant};
use crate::stock::Law;
use crate::terminal_plot::{Axis, Scale, draw};

/// Field strength up to which soft-magnetic laws are drawn, A/m.
const DRAWN_TO_A_PER_M: f64 = 1e5;
/// Points of a drawn curve.
const POINTS: usize = 500;

/// A saturable law; `None` for others.
fn saturable(law: &Law) -> Option<Isotropic> {
    match law {
        Law::Saturation {
            polarization_t,
            half_field_a_per_m,
        } => Some(Isotropic::Saturation(Saturation {
            polarization_t: *polarization_t,
            half_field_a_per_m: *half_field_a_per_m,
        })),
        // Built-in points are tested to be a curve.
        Law::Curve(points) => Curve::new(points).ok().map(Isotropic::Curve),
        _ => None,
    }
}

/// Flux density of a saturable law's knee, T.
pub fn knee_t(law: &Law) -> Option<f64> {
    saturable(law).map(|law| law.knee_t())
}

/// What else a designer reads off a curve: knee and permeabilities.
pub fn rows(law: &Law) -> Vec<(&'static str, String)> {
    if let Some(law) = saturable(law) {
        let initial = 1.0 / (MU0 * law.initial_reluctivity());
        let knee = law.knee_t();
        // H over B is smallest where a line from the origin touches the curve.
        let smallest = (1..=POINTS)
            .map(|k| 1.5 * knee * k as f64 / POINTS as f64)
            .map(|b| law.at(b).h / b)
            .fold(law.initial_reluctivity(), f64::min);
        return vec![
            (
                "relative permeability at first",
                significant(initial, Unit::NUMBER, 3),
            ),
            ("largest", significant(1.0 / (MU0 * smallest), Unit::NUMBER, 3)),
            ("knee", significant(knee, Unit::TESLA, 3)),
        ];
    }
    match law {
        Law::Demagnetization { points, .. } => match Demagnetisation::new(points) {
            Ok(curve) if curve.knee_t().is_finite() => {
                vec![("knee", significant(curve.knee_t(), Unit::TESLA, 3))]
            }
            _ => Vec::new(),
        },
        _ => Vec::new(),
    }
}

/// A plot of B over H; empty for a law that is a line through the origin.
pub fn plot(law: &Law) -> String {
    if let Some(law) = saturable(law) {
        return magnetisation(&law);
    }
    match law {
        Law::Magnet {
            remanence_t,
            recoil_permeability,
            ..
        } => demagnetisation(*remanence_t, |b| (b - remanence_t) / (MU0 * recoil_permeability)),
        Law::Demagnetization { points, .. } => match Demagnetisation::new(points) {
            Ok(curve) => demagnetisation(curve.remanence_t(), |b| curve.at(b).h),
            Err(_) => String::new(),
        },
        _ => String::new(),
    }
}

fn magnetisation(law: &Isotropic) -> String {
    let top = top_b(law);
    let points: Vec<[f64; 2]> = (1..=POINTS)
        .map(|k| top * k as f64 / POINTS as f64)
        .map(|b| [law.at(b).h, b])
        .collect();
    let first = law.at(0.03 * top).h.log10().floor();
    let last = DRAWN_TO_A_PER_M.log10();
    let decades = (0..=(last - first) as usize).map(|k| 10f64.powf(first + k as f64));
    let x = Axis {
        label: "H, A/m".to_owned(),
        low: 10f64.powf(first),
        high: DRAWN_TO_A_PER_M,
        scale: Scale::Log,
        ticks: decades.map(|h| (h, number(h))).collect(),
    };
    draw(&points, &x, &flux_axis(top))
}

/// B at the end of the drawing, found by halving: H grows with B.
fn top_b(law: &Isotropic) -> f64 {
    let (mut low, mut high) = (0.0, 10.0);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if law.at(middle).h < DRAWN_TO_A_PER_M {
            low = middle;
        } else {
            high = middle;
        }
    }
    low
}

fn demagnetisation(remanence_t: f64, h_of_b: impl Fn(f64) -> f64) -> String {
    let points: Vec<[f64; 2]> = (0..=POINTS)
        .map(|k| remanence_t * k as f64 / POINTS as f64)
        .map(|b| [h_of_b(b), b])
        .collect();
    let coercivity = -points[0][0];
    let step = round_step(coercivity);
    let count = (coercivity / step).ceil();
    let x = Axis {
        label: "H, A/m".to_owned(),
        low: -count * step,
        high: 0.0,
        scale: Scale::Even,
        ticks: (0..=count as usize)
            .map(|k| -(k as f64) * step)
            .map(|h| (h, number(h)))
            .collect(),
    };
    draw(&points, &x, &flux_axis(remanence_t))
}

/// From 0 T to the round number above `top`.
fn flux_axis(top: f64) -> Axis {
    let step = round_step(top);
    let count = (top / step).ceil();
    Axis {
        label: "B, T".to_owned(),
        low: 0.0,
        high: count * step,
        scale: Scale::Even,
        ticks: (0..=count as usize)
            .map(|k| k as f64 * step)
            .map(|b| (b, number(b)))
            .collect(),
    }
}

/// A step of 1, 2 or 5 times a power of ten that goes three to six times into `range`.
fn round_step(range: f64) -> f64 {
    let power = 10f64.powf((range / 3.0).log10().floor());
    [5.0, 2.0, 1.0]
        .into_iter()
        .map(|step| step * power)
        .find(|step| 3.0 * step <= range)
        .unwrap_or(power)
}

fn number(x: f64) -> String {
    significant(x + 0.0, Unit::NUMBER, 3)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::stock;

    #[test]
    fn every_curved_law_of_the_stock_can_be_drawn() {
        for material in stock::table() {
            let drawn = plot(&material.law);
            let line = matches!(material.law, Law::Linear { .. });
            assert_eq!(drawn.is_empty(), line, "{}", material.name);
            assert!(drawn.lines().all(|line| line.chars().count() <= 80), "{drawn}");
        }
    }

    #[test]
    fn knee_and_permeability_of_the_saturation_law_are_those_of_its_formula() {
        let law = Law::Saturation {
            polarization_t: 2.0,
            half_field_a_per_m: 400.0,
        };
        let rows = rows(&law);
        // 1 + Js / (mu0 Hs) = 3980; a tenth of it at H = Hs (sqrt(10) - 1), where B = Js (1 - 1/sqrt(10)).
        assert_eq!(rows[0].1, "3980");
        assert_eq!(rows[1].1, "3980");
        assert_eq!(rows[2].1, "1.37 T");
    }

    #[test]
    fn steps_are_round() {
        assert_eq!([2.1, 0.4, 900e3].map(round_step), [0.5, 0.1, 200e3]);
    }
}
