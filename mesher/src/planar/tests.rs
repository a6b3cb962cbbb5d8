use proptest::prelude::*;

use super::*;

fn p(r: f64, z: f64) -> Point {
    Point::new(r, z)
}

fn tolerance() -> Tolerance {
    Tolerance {
        weld_m: 2e-6,
        round_off_m: 1e-12,
        mirror_z_m: None,
    }
}

fn polygon(corners: &[(f64, f64)]) -> Vec<Curve> {
    let next = corners.iter().cycle().skip(1);
    corners
        .iter()
        .zip(next)
        .map(|(a, b)| Curve::line(p(a.0, a.1), p(b.0, b.1)))
        .collect()
}

#[test]
fn lines_and_arcs_cross_where_they_should() {
    let line = Curve::line(p(0.0, 0.5), p(3.0, 0.5));
    let arc = Curve::arc(p(1.0, 0.0), p(0.0, 1.0), 0.5 * std::f64::consts::PI);
    let found = meetings(&line, &arc, 1e-9);
    assert_eq!(found.len(), 1);
    assert!(found[0].at.distance(p(0.75_f64.sqrt(), 0.5)) < 1e-15);
    assert!((found[0].shares[1] - 1.0 / 3.0).abs() < 1e-15);
    let turned = meetings(&arc, &line, 1e-9);
    assert_eq!(turned[0].shares, [found[0].shares[1], found[0].shares[0]]);
}

#[test]
fn a_touch_is_one_meeting_on_the_line_with_its_direction() {
    let arc = Curve::arc(p(1.0, -1.0), p(1.0, 1.0), std::f64::consts::PI);
    for gap in [-1e-7, 0.0, 1e-7] {
        let line = Curve::line(p(2.0 + gap, -1.0), p(2.0 + gap, 2.0));
        let found = meetings(&line, &arc, 1e-6);
        assert_eq!(found.len(), 1);
        assert!(found[0].at.distance(p(2.0 + gap, 0.0)) < 1e-12);
        assert_eq!(found[0].tangent, Some(p(0.0, 1.0)));
    }
    // Deeper than the tolerance they cross twice.
    let line = Curve::line(p(2.0 - 1e-5, -1.0), p(2.0 - 1e-5, 2.0));
    assert_eq!(meetings(&line, &arc, 1e-6).len(), 2);
}

#[test]
fn nothing_is_entangled_by_turning_nothing_into_something() {
    assert!(planar_graph(&[], tolerance()).unwrap().edges.is_empty());
    // A loop that runs forth and back bounds nothing.
    let spike = polygon(&[(1.0, 0.0), (2.0, 0.0)]);
    assert!(planar_graph(&[&spike], tolerance()).unwrap().edges.is_empty());
}

#[test]
fn faces_know_how_often_each_loop_turns_around_them() {
    let outer = polygon(&[(1.0, 0.0), (4.0, 0.0), (4.0, 3.0), (1.0, 3.0)]);
    let inner = polygon(&[(2.0, 1.0), (2.0, 2.0), (3.0, 2.0), (3.0, 1.0)]); // clockwise
    let graph = planar_graph(&[&outer, &inner], tolerance()).unwrap();
    let mut windings: Vec<Windings> = graph.faces.iter().map(|face| face.windings.clone()).collect();
    windings.sort();
    assert_eq!(
        windings,
        [vec![], vec![(0, 1)], vec![(0, 1)], vec![(0, 1), (1, -1)]]
    );
}

#[test]
fn a_tiny_triangle_with_sides_of_the_tolerance_comes_to_an_end() {
    // Each corner is nearer to the opposite side than corners may be to each other.
    let side = 2.01e-6;
    let triangle = polygon(&[(1.0, 0.0), (1.0 + side, 0.0), (1.0 + 0.5 * side, 0.866 * side)]);
    let graph = planar_graph(&[&triangle], tolerance()).unwrap();
    assert_eq!(graph.edges.len(), 3);
}

#[test]
fn a_line_continued_through_a_crossing_is_not_crossed_again() {
    // The upper side of the box is bent onto the tip; the other side of the tip runs along it to 1e-12.
    let square = polygon(&[(0.0, -4.0), (4.0, -4.0), (4.0, -1.0 - 1e-6), (0.0, -1.0 - 1e-6)]);
    let tip = polygon(&[(1.1, -0.7), (0.7, -1.05), (2.56, -1.0)]);
    let graph = planar_graph(
        &[&square, &tip],
        Tolerance {
            weld_m: 1e-5,
            ..tolerance()
        },
    )
    .unwrap();
    assert!(!graph.moves.is_empty());
    for one in &graph.moves {
        assert!(one.at == p(2.56, -1.0) && one.by_m < 1.001e-6, "{one:?}");
    }
}

/// Crossings of two curves by walking along both in small steps, without the module's formulas.
fn crossings_by_walking(a: &Curve, b: &Curve) -> usize {
    const STEPS: usize = 300;
    let walk =
        |curve: &Curve| -> Vec<Point> { (0..=STEPS).map(|k| curve.at(k as f64 / STEPS as f64)).collect() };
    let (walk_a, walk_b) = (walk(a), walk(b));
    let side = |from: Point, to: Point, point: Point| (to - from).cross(point - from) > 0.0;
    let mut count = 0;
    for s in walk_a.windows(2) {
        for t in walk_b.windows(2) {
            let apart_a = side(s[0], s[1], t[0]) != side(s[0], s[1], t[1]);
            let apart_b = side(t[0], t[1], s[0]) != side(t[0], t[1], s[1]);
            count += usize::from(apart_a && apart_b);
        }
    }
    count
}

fn curves() -> impl Strategy<Value = Curve> {
    let sweep = prop_oneof![
        Just(0.0),
        -1.5..1.5_f64,
        (-5.0..0.0_f64).prop_map(|e| 10.0_f64.powf(e)),
    ];
    (0.0..1.0, 0.0..1.0, 0.0..1.0, 0.0..1.0, sweep).prop_filter_map("longer", |(r0, z0, r1, z1, sweep)| {
        let (from, to) = (p(r0, z0), p(r1, z1));
        let curve = if sweep == 0.0 {
            Curve::line(from, to)
        } else {
            Curve::arc(from, to, sweep)
        };
        (from.distance(to) > 0.1).then_some(curve)
    })
}

proptest! {
    #[test]
    fn meetings_lie_on_both_curves_and_none_is_missed(a in curves(), b in curves()) {
        let found = meetings(&a, &b, 0.0);
        for meeting in &found {
            prop_assert!(a.distance_m(meeting.at) < 1e-14);
            // A circle of curvature k through the found point: round-off of the quadratic over its slope.
            prop_assert!(b.distance_m(meeting.at) < 1e-12, "{meeting:?}");
            prop_assert!(a.at(meeting.shares[0]).distance(meeting.at) < 1e-14);
            prop_assert!(b.at(meeting.shares[1]).distance(meeting.at) < 1e-12);
        }
        // Walking misses pairs of crossings within a step and errs at ends: compared where neither is near.
        let close = |point: Point| {
            [a.start(), a.end()].iter().any(|end| b.distance_m(*end) < 1e-4)
                || [b.start(), b.end()].iter().any(|end| a.distance_m(*end) < 1e-4)
                || found.iter().filter(|other| other.at.distance(point) < 0.05).count() > 1
        };
        if !close(Point::default()) && !found.iter().any(|meeting| close(meeting.at)) {
            let touching = meetings(&a, &b, 1e-3).iter().any(|meeting| meeting.tangent.is_some());
            prop_assert!(touching || crossings_by_walking(&a, &b) == found.len());
        }
    }
}
