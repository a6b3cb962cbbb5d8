use std::f64::consts::PI;

use super::*;
use crate::curve::Point;
use crate::section::{PaintedRegion, SpaceEdge};

pub(super) fn p(r: f64, z: f64) -> Point {
    Point::new(r, z)
}

pub(super) fn region(name: &str, outline: Outline) -> PaintedRegion {
    PaintedRegion {
        name: name.to_owned(),
        copies: vec![outline],
        mesh_size_m: None,
    }
}

pub(super) fn rect(r: [f64; 2], z: [f64; 2]) -> Outline {
    Outline::rect(r, z, 0.0).unwrap()
}

pub(super) fn disc(r: f64, z: f64, radius: f64) -> Outline {
    Outline::circle(p(r, z), radius).unwrap()
}

fn open(regions: Vec<PaintedRegion>) -> Section {
    Section {
        regions,
        edge: SpaceEdge::HalfCircle,
        mirror_z_m: None,
    }
}

pub(super) fn named(outlines: Vec<Outline>) -> Section {
    open(
        outlines
            .into_iter()
            .enumerate()
            .map(|(k, outline)| region(&format!("part {}", k + 1), outline))
            .collect(),
    )
}

pub(super) fn arranged(section: &Section) -> Arrangement {
    let arrangement = arrange(section).unwrap();
    arrangement.check().unwrap();
    arrangement
}

/// Areas of the painted parts, air left out.
pub(super) fn areas(arrangement: &Arrangement) -> Vec<f64> {
    arrangement.parts[1..].iter().map(|part| part.area_m2).collect()
}

pub(super) fn assert_areas(arrangement: &Arrangement, expected: &[f64]) {
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

#[test]
fn thin_gaps_and_slivers_survive() {
    // 0.02 mm in 200 mm, and a wedge 1e-4 thick at its thick end.
    let gap = 0.02e-3;
    let arrangement = arranged(&named(vec![
        rect([0.0, 0.05], [-0.1, 0.0]),
        rect([0.0, 0.05], [gap, 0.1]),
        Outline::polygon(&[p(0.05, 0.0), p(0.1, 0.0), p(0.1, 1e-5)]).unwrap(),
    ]));
    assert_areas(&arrangement, &[0.005, 0.05 * (0.1 - gap), 2.5e-7]);
    assert!(arrangement.welds.is_empty());
    assert!(arrangement.vertices.iter().any(|v| *v == p(0.05, gap)));
    // A gap of a hundred thousandth of the drawing is still one.
    let finer = arranged(&named(vec![
        rect([0.0, 0.1], [-0.1, 0.0]),
        rect([0.0, 0.1], [2e-6, 0.1]),
    ]));
    assert!((finer.parts[2].area_m2 - 0.1 * (0.1 - 2e-6)).abs() < 1e-15);
}

#[test]
fn drawing_noise_of_a_millionth_is_welded_and_reported() {
    let noise = 1e-6;
    let size = 1.0;
    // Two halves of a square with a step, a gap and an overlap of noise between them.
    let left = rect([0.2, 0.5], [0.0, size]);
    let right = Outline::polygon(&[
        p(0.5 + noise, 0.0),
        p(0.8, -noise),
        p(0.8, size),
        p(0.5 - noise, size + noise),
    ])
    .unwrap();
    let arrangement = arranged(&named(vec![left, right]));
    assert_eq!(
        arrangement
            .vertices
            .iter()
            .filter(|v| (v.r - 0.5).abs() < 1e-3)
            .count(),
        2
    );
    let interfaces = arrangement
        .edges
        .iter()
        .filter(|e| (e.left, e.right) == (1, 2) || (e.left, e.right) == (2, 1));
    assert_eq!(interfaces.count(), 1);
    assert_eq!(arrangement.welds.len(), 2);
    for weld in &arrangement.welds {
        assert_eq!(weld.regions, ["part 1", "part 2"]);
        assert!(
            weld.moved_m > 0.9 * noise && weld.moved_m < 1.5 * noise,
            "{weld:?}"
        );
    }
}

#[test]
fn arcs_cross_lines_and_arcs() {
    // Two unit circles a unit apart: their lens is 2 pi/3 - sqrt(3)/2.
    let lens = 2.0 * PI / 3.0 - 0.75_f64.sqrt();
    let arrangement = arranged(&named(vec![disc(2.0, 0.0, 1.0), disc(2.0, 1.0, 1.0)]));
    assert_areas(&arrangement, &[PI - lens, PI]);
    // A bar through a circle.
    let chord = arranged(&named(vec![disc(2.0, 0.0, 1.0), rect([0.5, 3.5], [-0.25, 0.25])]));
    let strip = 0.25 * (1.0_f64 - 0.0625).sqrt() * 2.0 + 2.0 * 0.25_f64.asin();
    assert_areas(&chord, &[PI - strip, 1.5]);
}

#[test]
fn nothing_hidden_leaves_a_trace() {
    // A rect wholly under a disc, but for a region's second copy, and a line of it that ends on the disc's arc.
    let mut section = named(vec![rect([1.5, 2.5], [-0.3, 0.3]), disc(2.0, 0.0, 1.0)]);
    section.regions[0].copies.push(rect([2.0, 4.0], [2.0, 3.0]));
    let bare = arranged(&named(vec![rect([2.0, 4.0], [2.0, 3.0]), disc(2.0, 0.0, 1.0)]));
    assert_eq!(arranged(&section).edges.len(), bare.edges.len());
    let crossed = arranged(&named(vec![rect([2.0, 4.0], [-0.1, 0.1]), disc(2.0, 0.0, 1.0)]));
    // Disc: quarter points and two crossings; rect: two corners; frame: poles and the middle of the half circle.
    assert_eq!(crossed.vertices.len(), 4 + 2 + 2 + 3, "{:?}", crossed.vertices);
}

#[test]
fn hundreds_of_turns_are_fast_and_exact() {
    let turn = disc(10.0, 0.0, 0.5);
    let mut section = named(vec![rect([9.0, 60.0], [-1.0, 11.0]), turn.clone()]);
    section.regions[1].copies = (0..40)
        .flat_map(|i| (0..10).map(move |j| (1.1 * f64::from(i), 1.1 * f64::from(j))))
        .map(|(dr, dz)| turn.shifted(dr, dz).unwrap())
        .collect();
    let started = std::time::Instant::now();
    let arrangement = arrange(&section).unwrap();
    let took = started.elapsed();
    arrangement.check().unwrap();
    let found = areas(&arrangement);
    assert_eq!(found.len(), 401);
    assert!(found[1..].iter().all(|area| (area - 0.25 * PI).abs() < 1e-12));
    assert!((found[0] - (51.0 * 12.0 - 100.0 * PI)).abs() < 1e-9);
    // Touching turns: each circle meets four others.
    section.regions[1].copies = (0..40)
        .flat_map(|i| (0..10).map(move |j| (f64::from(i), f64::from(j))))
        .map(|(dr, dz)| turn.shifted(dr, dz).unwrap())
        .collect();
    let touching = arranged(&section);
    assert!(touching.welds.is_empty(), "{:?}", touching.welds);
    assert!(
        areas(&touching)[1..]
            .iter()
            .all(|area| (area - 0.25 * PI).abs() < 1e-12)
    );
    // Generous: 22 ms were measured on a busy machine. Quadratic work on curves would take many times this.
    assert!(took.as_millis() < 200, "{took:?}");
}
