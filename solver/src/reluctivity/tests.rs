use super::*;
use crate::MU0;

fn saturation() -> Saturation {
    Saturation {
        polarization_t: 2.0,
        half_field_a_per_m: 400.0,
    }
}

fn sampled() -> Curve {
    // Points of the saturation law itself.
    let points: Vec<[f64; 2]> = (0..40)
        .map(|k| {
            let h = 20.0 * (1.25f64.powi(k) - 1.0);
            [h, MU0 * h + 2.0 * h / (h + 400.0)]
        })
        .collect();
    Curve::new(&points).unwrap()
}

/// Slope and energy belong to H, by differences with an error of order step².
fn check_consistent(at: impl Fn(f64) -> State, points: &[f64]) {
    for &b in points {
        let step = 1e-5;
        let (lo, mid, hi) = (at(b - step), at(b), at(b + step));
        let slope = (hi.h - lo.h) / (2.0 * step);
        assert!(
            (slope - mid.slope).abs() < 1e-4 * mid.slope.abs().max(1.0),
            "slope at {b}: {slope} {mid:?}"
        );
        let h = (hi.energy - lo.energy) / (2.0 * step);
        assert!(
            (h - mid.h).abs() < 1e-6 * mid.h.abs().max(100.0),
            "H at {b}: {h} {mid:?}"
        );
    }
}

#[test]
fn the_saturation_law_is_exact_from_zero_to_deep_saturation() {
    let law = saturation();
    for h in [1e-6, 1e-2, 1.0, 400.0, 1e4, 1e6, 1e8] {
        let b = MU0 * h + 2.0 * h / (h + 400.0);
        assert!((law.at(b).h - h).abs() < 1e-9 * h, "{h}");
    }
    assert_eq!(law.at(0.0).energy, 0.0);
    check_consistent(|b| law.at(b), &[0.01, 0.5, 1.5, 1.99, 2.0, 2.5, 4.0]);
}

#[test]
fn a_curve_through_a_laws_points_follows_it_to_third_order() {
    let (law, curve) = (saturation(), sampled());
    check_consistent(|b| curve.at(b), &[0.013, 0.3, 0.77, 1.5, 1.9, 2.2, 3.0]);
    for b in [0.1, 0.5, 1.0, 1.5] {
        assert!((curve.at(b).h / law.at(b).h - 1.0).abs() < 5e-3, "{b}");
    }
}

#[test]
fn beyond_the_last_point_the_slope_goes_to_that_of_air() {
    let curve = sampled();
    let slopes: Vec<f64> = (0..50)
        .map(|k| curve.at(curve.last_b() + 0.1 * f64::from(k)).slope)
        .collect();
    assert!(slopes.windows(2).all(|w| w[0] <= w[1] * (1.0 + 1e-12)));
    assert!((slopes[49] * MU0 - 1.0).abs() < 1e-2);
    assert!(slopes[49] <= (1.0 + 1e-12) / MU0);
}

#[test]
fn impossible_curves_are_refused_with_their_row() {
    let row_of = |points: &[[f64; 2]]| Curve::new(points).unwrap_err();
    assert_eq!(
        row_of(&[[0.0, 0.0], [100.0, 0.5]]),
        CurveError::TooFew { points: 1 }
    );
    assert!(matches!(
        row_of(&[[0.0, 0.0], [100.0, 0.5], [200.0, 0.4]]),
        CurveError::Falling {
            row: 3,
            what: "B",
            ..
        }
    ));
    assert!(matches!(
        row_of(&[[0.0, 0.0], [100.0, 0.5], [1e6, 0.6]]),
        CurveError::UnderAir { row: 3 }
    ));
    assert!(matches!(
        row_of(&[[100.0, f64::NAN], [200.0, 0.4]]),
        CurveError::NotANumber { row: 1, .. }
    ));
}

#[test]
fn a_demagnetisation_curve_has_its_knee_and_an_energy_from_remanence() {
    let points = [
        [0.0, 1.2],
        [-300e3, 0.8],
        [-600e3, 0.4],
        [-700e3, 0.25],
        [-720e3, -0.2],
    ];
    let law = Demagnetisation::new(&points).unwrap();
    check_consistent(|b| law.at(b), &[1.4, 1.1, 0.9, 0.5, 0.1, -0.1, -0.5]);
    // Round-off of numbers of 1e6 A/m.
    assert!(law.at(1.2).h.abs() < 1e-9 * 700e3);
    assert!(law.at(0.8).energy > 0.0 && law.at(1.3).energy > 0.0);
    assert!((0.1..0.35).contains(&law.knee_t()), "{}", law.knee_t());
}
