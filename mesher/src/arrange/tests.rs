use std::f64::consts::PI;

use super::*;
use crate::curve::Point;
use crate::section::{PaintedRegion, SpaceEdge};

fn p(r: f64, z: f64) -> Point {
    Point::new(r, z)
}

fn region(name: &str, outline: Outline) -> PaintedRegion {
    PaintedRegion {
        name: name.to_owned(),
        copies: vec![outline],
        mesh_size_m: None,
    }
}

fn rect(r: [f64; 2], z: [f64; 2]) -> Outline {
    Outline::rect(r, z, 0.0).unwrap()
}

fn disc(r: f64, z: f64, radius: f64) -> Outline {
    Outline::circle(p(r, z), radius).unwrap()
}

fn open(regions: Vec<PaintedRegion>) -> Section {
    Section {
        regions,
        edge: SpaceEdge::HalfCircle,
        mirror_z_m: None,
    }
}

fn named(outlines: Vec<Outline>) -> Section {
    open(
        outlines
            .into_iter()
            .enumerate()
            .map(|(k, outline)| region(&format!("part {}", k + 1), outline))
            .collect(),
    )
}

fn arranged(section: &Section) -> Arrangement {
    let arrangement = arrange(section).unwrap();
    arrangement.check().unwrap();
    arrangement
}

/// Areas of the painted parts, air left out.
fn areas(arrangement: &Arrangement) -> Vec<f64> {
    arrangement.parts[1..].iter().map(|part| part.area_m2).collect()
}

fn assert_areas(arrangement: &Arrangement, expected: &[f64]) {
    let found = areas(arrangement);
    assert_eq!(found.len(), expected.len());
    for (area, want) in found.iter().zip(expected) {
        assert!((area - want).abs() < 1e-12, "{found:?} instead of {expected:?}");
    }
}

#[test]
fn a_single_coil_stands_in_a_half_disc_of_air() {
    let arrangement = arranged(&named(vec![rect([1.0, 2.0], [-1.0, 1.0])]));
    assert_areas(&arrangement, &[2.0]);
    let circle = arrangement.circle.unwrap();
    assert_eq!(circle.centre_z_m, 0.0);
    assert!((circle.radius_m - 1.25 * 5.0_f64.sqrt()).abs() < 1e-15);
    let air = &arrangement.parts[0];
    assert!((air.area_m2 + 2.0 - 0.5 * PI * circle.radius_m.powi(2)).abs() < 1e-14);
    assert!((arrangement.parts[1].r_moment_m3 - 3.0).abs() < 1e-14);
    let of_kind = |kind| {
        arrangement
            .edges
            .iter()
            .filter(|edge| edge.boundary == kind)
            .count()
    };
    assert_eq!(
        (
            of_kind(Boundary::Axis),
            of_kind(Boundary::Circle),
            of_kind(Boundary::None)
        ),
        (1, 2, 4)
    );
    assert_eq!(arrangement.vertices.len(), 7);
    assert!(arrangement.welds.is_empty());
}

#[test]
fn what_is_painted_later_covers() {
    // Overlapping, nested, and crossing a circle.
    let arrangement = arranged(&named(vec![
        rect([1.0, 4.0], [0.0, 3.0]),
        rect([2.0, 3.0], [1.0, 2.0]),
        rect([3.5, 5.0], [-1.0, 1.0]),
        disc(1.0, 3.0, 0.5),
    ]));
    let quarter = PI / 16.0;
    assert_areas(
        &arrangement,
        &[9.0 - 1.0 - 0.5 - quarter, 1.0, 3.0, 4.0 * quarter],
    );
}

#[test]
fn edges_may_be_shared_in_part() {
    let arrangement = arranged(&named(vec![
        rect([1.0, 2.0], [0.0, 2.0]),
        rect([2.0, 3.0], [0.5, 1.0]),
        rect([2.0, 4.0], [1.0, 3.0]),
        rect([0.0, 1.0], [-1.0, 5.0]),
    ]));
    assert_areas(&arrangement, &[2.0, 0.5, 4.0, 6.0]);
    assert!(arrangement.welds.is_empty(), "{:?}", arrangement.welds);
}

#[test]
fn regions_may_touch_in_a_point_or_along_nothing() {
    let arrangement = arranged(&named(vec![
        rect([1.0, 2.0], [0.0, 1.0]),
        rect([2.0, 3.0], [1.0, 2.0]),
        disc(1.0, 3.0, 1.0), // touches the axis and the line below
        disc(2.5, 3.5, 0.6),
    ]));
    let found = areas(&arrangement);
    assert!((found[0] - 1.0).abs() < 1e-12 && (found[1] - 1.0).abs() < 1e-12);
    let on_axis = arrangement.vertices.iter().any(|v| *v == p(0.0, 3.0));
    assert!(on_axis, "the circle touches the axis there");
}

#[test]
fn tangent_circles_share_one_vertex() {
    let angle: f64 = 0.3;
    let (sin, cos) = angle.sin_cos();
    let outside = arranged(&named(vec![
        disc(2.0, 0.0, 1.0),
        disc(2.0 + 1.5 * cos, 1.5 * sin, 0.5),
    ]));
    assert_areas(&outside, &[PI, 0.25 * PI]);
    let inside = arranged(&named(vec![
        disc(2.0, 0.0, 1.0),
        disc(2.0 + 0.5 * cos, 0.5 * sin, 0.5),
    ]));
    assert_areas(&inside, &[0.75 * PI, 0.25 * PI]);
    for arrangement in [outside, inside] {
        let touch = p(2.0 + cos, sin);
        assert_eq!(
            arrangement
                .vertices
                .iter()
                .filter(|v| v.distance(touch) < 1e-3)
                .count(),
            1
        );
        assert!(arrangement.welds.is_empty(), "{:?}", arrangement.welds);
    }
}

#[test]
fn overlapping_arcs_of_one_circle_become_one() {
    // Two sectors of the same ring side by side, the second noisy by 1e-7 of the size.
    let noise = 3e-7;
    let half = |from: f64, to: f64, noise: f64| {
        let on = |radius: f64, angle: f64| p(4.0 + radius * angle.cos(), radius * angle.sin());
        let middle = 0.5 * (from + to);
        let steps = [
            crate::shape::Step::Arc {
                to: on(2.0 + noise, to),
                through: on(2.0 + noise, middle),
            },
            crate::shape::Step::Line { to: on(1.0, to) },
            crate::shape::Step::Arc {
                to: on(1.0, from),
                through: on(1.0, middle),
            },
        ];
        Outline::path(on(2.0 + noise, from), &steps).unwrap()
    };
    let arrangement = arranged(&named(vec![half(0.0, 2.0, 0.0), half(1.0, 3.0, noise)]));
    let found = areas(&arrangement);
    // Areas may change by the noise along the outline.
    assert!(
        (found[0] - 1.5).abs() < 10.0 * noise && (found[1] - 3.0).abs() < 10.0 * noise,
        "{found:?}"
    );
    assert!(!arrangement.welds.is_empty());
    assert!(
        arrangement.welds.iter().all(|weld| weld.moved_m < 1.1 * noise),
        "{:?}",
        arrangement.welds
    );
    assert!(arrangement.edges.len() < 20, "{}", arrangement.edges.len());
}
