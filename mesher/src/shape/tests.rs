use std::f64::consts::PI;

use super::*;

fn p(r: f64, z: f64) -> Point {
    Point::new(r, z)
}

#[test]
fn areas_and_moments_are_those_of_the_handbook() {
    let rect = Outline::rect([3.0, 1.0], [2.0, 0.0], 0.0).unwrap();
    assert_eq!(rect.area_m2(), 4.0);
    assert_eq!(rect.r_moment_m3(), 8.0);
    let rounded = Outline::rect([1.0, 3.0], [0.0, 2.0], 0.5).unwrap();
    assert!((rounded.area_m2() - (4.0 - (4.0 - PI) * 0.25)).abs() < 1e-14);
    let disc = Outline::circle(p(2.0, 1.0), 0.5).unwrap();
    assert!((disc.area_m2() - 0.25 * PI).abs() < 1e-15);
    assert!((disc.r_moment_m3() - 0.5 * PI).abs() < 1e-14);
    // A ball of radius 2: volume 2 pi (integral of r) = 4/3 pi 8.
    let ball = Outline::circle(p(0.0, 1.0), 2.0).unwrap();
    assert!((2.0 * PI * ball.r_moment_m3() - 32.0 / 3.0 * PI).abs() < 1e-13);
    assert!((ball.area_m2() - 2.0 * PI).abs() < 1e-14);
}

#[test]
fn a_circle_is_clipped_wherever_its_centre_is() {
    // Areas by the segment formula R² acos(-c/R) + c sqrt(R² - c²).
    for c in [-0.9, -0.3, 0.0, 0.4, 0.99] {
        let clipped = Outline::circle(p(c, 0.0), 1.0).unwrap();
        let area = f64::acos(-c) + c * (1.0 - c * c).sqrt();
        assert!((clipped.area_m2() - area).abs() < 1e-13, "{c}");
        assert!(clipped.bounds().low.r >= 0.0);
        assert!(clipped.contains(p(0.05, 0.0)));
    }
    let touching = Outline::circle(p(1.0, 0.0), 1.0).unwrap();
    assert_eq!(touching.curves().len(), 4);
    assert_eq!(touching.bounds().low.r, 0.0);
    assert!(matches!(
        Outline::circle(p(-1.0, 0.0), 1.0),
        Err(ShapeError::CircleBeyondAxis { .. })
    ));
}

#[test]
fn fillets_may_meet_but_not_overlap() {
    let stadium = Outline::rect([1.0, 2.0], [0.0, 4.0], 0.5).unwrap();
    assert_eq!(stadium.curves().len(), 6);
    assert!((stadium.area_m2() - (3.0 + 0.25 * PI)).abs() < 1e-14);
    let round = Outline::rect([1.0, 2.0], [0.0, 1.0], 0.5).unwrap();
    assert_eq!(round.curves().len(), 4);
    let on_axis = Outline::rect([0.0, 1.0], [0.0, 4.0], 1.0).unwrap();
    assert!((on_axis.area_m2() - (4.0 - 2.0 * (1.0 - 0.25 * PI))).abs() < 1e-14);
    let too_large = Outline::rect([1.0, 2.0], [0.0, 4.0], 0.6);
    assert_eq!(
        too_large,
        Err(ShapeError::FilletTooLarge {
            fillet_m: 0.6,
            limit_m: 0.5
        })
    );
    assert_eq!(
        Outline::rect([1.0, 2.0], [0.0, 4.0], -0.1),
        Err(ShapeError::NegativeFillet { fillet_m: -0.1 })
    );
}

#[test]
fn either_sense_gives_the_same_counter_clockwise_outline() {
    let points = [p(1.0, 0.0), p(2.0, 0.0), p(1.5, 1.0)];
    let backwards: Vec<_> = points.iter().rev().copied().collect();
    assert_eq!(Outline::polygon(&points).unwrap().area_m2(), 0.5);
    assert_eq!(Outline::polygon(&backwards).unwrap().area_m2(), 0.5);
}

#[test]
fn a_path_closes_itself() {
    let steps = [Step::Arc {
        to: p(0.0, 1.0),
        through: p(1.0, 0.0),
    }];
    let half = Outline::path(p(0.0, -1.0), &steps).unwrap();
    assert!((half.area_m2() - 0.5 * PI).abs() < 1e-15);
    assert_eq!(half.curves()[1], Curve::line(p(0.0, 1.0), p(0.0, -1.0)));
}

#[test]
fn noise_at_the_axis_is_snapped_and_real_crossings_are_refused() {
    let noisy = Outline::rect([-1e-18, 1.0], [0.0, 1.0], 0.0).unwrap();
    assert_eq!(noisy.bounds().low.r, 0.0);
    assert_eq!(
        Outline::polygon(&[p(-0.1, 0.3), p(1.0, 0.0), p(1.0, 1.0)]),
        Err(ShapeError::AcrossAxis { at: p(-0.1, 0.3) })
    );
    let bulging = [
        Step::Arc {
            to: p(0.5, 1.0),
            through: p(-0.1, 0.5),
        },
        Step::Line { to: p(2.0, 0.5) },
    ];
    let Err(ShapeError::AcrossAxis { at }) = Outline::path(p(0.5, 0.0), &bulging) else {
        panic!("an arc beyond the axis must be refused")
    };
    assert!(at.distance(p(-0.1, 0.5)) < 1e-12);
    let rect = Outline::rect([1.0, 2.0], [0.0, 1.0], 0.0).unwrap();
    assert!(matches!(
        rect.shifted(-1.5, 0.0),
        Err(ShapeError::AcrossAxis { .. })
    ));
    assert_eq!(rect.shifted(-1.0, 3.0).unwrap().bounds().low, p(0.0, 3.0));
}

#[test]
fn what_cannot_be_painted_is_refused_with_its_numbers() {
    assert!(matches!(
        Outline::rect([0.0, f64::NAN], [0.0, 1.0], 0.0),
        Err(ShapeError::NotFinite {
            what: "r of the rectangle",
            ..
        })
    ));
    assert_eq!(
        Outline::circle(p(1.0, 0.0), -2.0),
        Err(ShapeError::RadiusNotPositive { radius_m: -2.0 })
    );
    let vast = Outline::circle(p(1.0, 0.0), 1e200);
    assert_eq!(
        vast,
        Err(ShapeError::TooFar {
            what: "the radius",
            value: 1e200,
            limit_m: 1e12
        })
    );
    let minute = Outline::circle(p(1e-200, 0.0), 1e-201);
    assert!(minute.is_err() || minute.is_ok_and(|disc| disc.area_m2() >= 0.0));
    let flat = Outline::polygon(&[p(1.0, 0.0), p(2.0, 0.0), p(3.0, 0.0)]);
    assert!(matches!(flat, Err(ShapeError::NoArea { size_m: 2.0, .. })));
    assert!(matches!(
        Outline::rect([1.0, 1.0], [0.0, 1.0], 0.0),
        Err(ShapeError::NoArea { size_m: 1.0, .. })
    ));
    assert_eq!(
        Outline::polygon(&[p(1.0, 0.0), p(1.0, 0.0), p(2.0, 0.0), p(1.0, 1.0)]),
        Err(ShapeError::NoLength { at: p(1.0, 0.0) })
    );
    assert_eq!(
        Outline::polygon(&[p(1.0, 0.0)]),
        Err(ShapeError::TooFewPoints { given: 1, needed: 3 })
    );
    let straight = [
        Step::Arc {
            to: p(2.0, 0.0),
            through: p(1.5, 0.0),
        },
        Step::Line { to: p(1.0, 1.0) },
    ];
    assert!(matches!(
        Outline::path(p(1.0, 0.0), &straight),
        Err(ShapeError::StraightArc { .. })
    ));
}

#[test]
fn an_outline_may_touch_but_not_cross_itself() {
    let bow_tie = [p(1.0, 0.0), p(2.0, 1.0), p(2.0, 0.0), p(1.0, 1.0)];
    assert_eq!(
        Outline::polygon(&bow_tie),
        Err(ShapeError::SelfCrossing { at: p(1.5, 0.5) })
    );
    // A pentagram turns twice around its middle.
    let tip = |k: i32| {
        let angle = 0.4 * PI * f64::from(2 * k);
        p(3.0 + angle.cos(), angle.sin())
    };
    let pentagram: Vec<_> = (0..5).map(tip).collect();
    assert!(matches!(
        Outline::polygon(&pentagram),
        Err(ShapeError::SelfCrossing { .. })
    ));
    // An arc that dips through the side opposite.
    let dip = [
        Step::Line { to: p(3.0, 0.0) },
        Step::Line { to: p(3.0, 1.0) },
        Step::Arc {
            to: p(1.0, 1.0),
            through: p(2.0, -0.1),
        },
    ];
    let Err(ShapeError::SelfCrossing { at }) = Outline::path(p(1.0, 0.0), &dip) else {
        panic!("the arc crosses the bottom")
    };
    assert!(at.z.abs() < 1e-12 && (at.r - 2.0).abs() < 0.5);
    // A ring cut open along a slit and passed twice.
    let slit = [
        p(1.0, 0.0),
        p(4.0, 0.0),
        p(4.0, 3.0),
        p(1.0, 3.0),
        p(1.0, 0.0),
        p(2.0, 1.0),
        p(2.0, 2.0),
        p(3.0, 2.0),
        p(3.0, 1.0),
        p(2.0, 1.0),
    ];
    assert_eq!(Outline::polygon(&slit).unwrap().area_m2(), 8.0);
}
