use super::*;
use proptest::prelude::*;

fn arc(from: (f64, f64), through: (f64, f64), to: (f64, f64)) -> Curve {
    let point = |(r, z)| Point::new(r, z);
    Curve::arc_through(point(from), point(through), point(to)).unwrap()
}

/// Area and moment terms by Gauss's three-point rule on many pieces: error below (1/pieces)^6 times the
/// integrand's sixth derivative, under 1e-12 for 400 pieces and sweeps up to a turn.
fn terms_by_quadrature(curve: &Curve) -> (f64, f64) {
    const PIECES: usize = 400;
    let nodes = [
        (-0.6_f64.sqrt(), 5.0 / 9.0),
        (0.0, 8.0 / 9.0),
        (0.6_f64.sqrt(), 5.0 / 9.0),
    ];
    let width = 1.0 / PIECES as f64;
    let length = curve.length_m();
    let (mut area, mut moment) = (0.0, 0.0);
    for k in 0..PIECES {
        for (x, w) in nodes {
            let t = (k as f64 + 0.5 + 0.5 * x) * width;
            let dz = curve.tangent(t).z * length * width * 0.5 * w;
            let r = curve.at(t).r;
            area += r * dz;
            moment += 0.5 * r * r * dz;
        }
    }
    (area, moment)
}

#[test]
fn an_arc_runs_through_its_three_points() {
    let quarter = arc((1.0, 0.0), (0.5_f64.sqrt(), 0.5_f64.sqrt()), (0.0, 1.0));
    assert!((quarter.sweep() - FRAC_PI_2).abs() < 1e-14);
    assert!(
        quarter
            .midpoint()
            .distance(Point::new(0.5_f64.sqrt(), 0.5_f64.sqrt()))
            < 1e-15
    );
    assert!(quarter.tangent(0.0).distance(Point::new(0.0, 1.0)) < 1e-14);
    let long_way = arc((1.0, 0.0), (-0.5_f64.sqrt(), -0.5_f64.sqrt()), (0.0, 1.0));
    assert!((long_way.sweep() + 1.5 * PI).abs() < 1e-14);
    assert!((long_way.length_m() - 1.5 * PI).abs() < 1e-13);
    assert_eq!(long_way.at(1.0), Point::new(0.0, 1.0));
    assert!(Curve::arc_through(Point::new(0.0, 0.0), Point::new(1.0, 1e-9), Point::new(2.0, 0.0)).is_none());
}

#[test]
fn a_full_turn_has_the_area_and_moment_of_its_disc() {
    let start = Point::new(3.0, 0.5);
    let turn = Curve::Arc {
        from: start,
        to: start,
        centre: Point::new(2.0, 0.5),
        sweep: 2.0 * PI,
    };
    assert!((turn.area_term_m2() - PI).abs() < 1e-14);
    assert!(
        (turn.moment_term_m3() - 2.0 * PI).abs() < 1e-14,
        "{}",
        turn.moment_term_m3()
    );
    let bounds = turn.bounds();
    assert!(bounds.low.distance(Point::new(1.0, -0.5)) < 1e-14);
    assert!(bounds.high.distance(Point::new(3.0, 1.5)) < 1e-14);
}

#[test]
fn series_and_closed_form_meet() {
    for sweep in [0.4999, 0.5001] {
        let curve = Curve::arc(Point::new(1.0, 0.0), Point::new(1.3, 0.4), sweep);
        let (area, moment) = terms_by_quadrature(&curve);
        assert!((curve.area_term_m2() - area).abs() < 1e-14);
        assert!((curve.moment_term_m3() - moment).abs() < 1e-14);
    }
}

proptest! {
    #[test]
    fn integrals_agree_with_quadrature(
        r0 in 0.0..2.0, z0 in -1.0..1.0, r1 in 0.0..2.0, z1 in -1.0..1.0, sweep in -6.0..6.0_f64,
    ) {
        prop_assume!(Point::new(r0, z0).distance(Point::new(r1, z1)) > 0.05 && sweep.abs() > 1e-5);
        let curve = Curve::arc(Point::new(r0, z0), Point::new(r1, z1), sweep);
        let scale = 1.0 + curve.radius_m().min(1e3);
        let (area, moment) = terms_by_quadrature(&curve);
        // Round-off: sums of terms of size scale², scale³.
        prop_assert!((curve.area_term_m2() - area).abs() < 1e-12 * scale.powi(2));
        prop_assert!((curve.moment_term_m3() - moment).abs() < 1e-12 * scale.powi(3));
    }

    #[test]
    fn pieces_lie_on_the_curve_and_add_up(
        r0 in 0.0..2.0, z0 in -1.0..1.0, r1 in 0.0..2.0, z1 in -1.0..1.0, sweep in -6.0..6.0_f64,
        t in 0.01..0.99,
    ) {
        prop_assume!(Point::new(r0, z0).distance(Point::new(r1, z1)) > 0.05 && sweep.abs() > 1e-3);
        let curve = Curve::arc(Point::new(r0, z0), Point::new(r1, z1), sweep);
        let middle = curve.at(t);
        let found = curve.nearest(middle);
        let scale = curve.radius_m();
        prop_assert!(found.distance_m < 1e-12 * (1.0 + scale));
        prop_assert!((found.t - t).abs() < 1e-9);
        let (first, second) = (curve.between(curve.start(), middle), curve.between(middle, curve.end()));
        prop_assert!((first.length_m() + second.length_m() - curve.length_m()).abs() < 1e-11 * scale);
        let sum = first.area_term_m2() + second.area_term_m2();
        prop_assert!((sum - curve.area_term_m2()).abs() < 1e-11 * (1.0 + scale * scale));
        prop_assert!(curve.bounds().widened(1e-12 * (1.0 + scale)).contains(middle));
        prop_assert!(curve.reversed().at(1.0 - t).distance(middle) < 1e-12 * (1.0 + scale));
    }
}
