use super::*;
use crate::test_meshes::{even, polar, reflected, walled};
use mesher::Point;

fn ring(radius: f64, count: usize, half: bool) -> mesher::Mesh {
    let radii: Vec<f64> = even(0.0, radius, count).skip(1).chain([radius]).collect();
    polar(&radii, 3 * count, half, |_| 0)
}

#[test]
fn bulges_close_the_half_disc_exactly() {
    for half in [false, true] {
        let mesh = ring(0.3, 5, half);
        let space = Space::new(&mesh, half.then_some(MirrorCurrents::Same)).unwrap();
        let area: f64 = space.elements.iter().map(|e| e.area).sum();
        // int ds dz = 2 int r dr dz = volume of the ball / pi = 4 R³ / 3.
        let ball = 4.0 / 3.0 * 0.3f64.powi(3) * if half { 0.5 } else { 1.0 };
        assert!((area - ball).abs() < 1e-14 * ball, "{area} {ball}");
        let width: f64 = space.exterior.unwrap().arcs.iter().map(|a| a.width()).sum();
        assert!((width - if half { 1.0 } else { 2.0 }).abs() < 1e-14);
    }
}

#[test]
fn the_bulge_adds_what_independent_quadrature_finds() {
    let mesh = ring(1.0, 4, false);
    let space = Space::new(&mesh, None).unwrap();
    for arc in &space.exterior.as_ref().unwrap().arcs {
        let t = arc.triangle as usize;
        let straight = crate::element::mean_over_s(space.corners(t, &space.s));
        let plain =
            straight * crate::element::straight_area(space.corners(t, &space.s), space.corners(t, &space.z));
        if plain == 0.0 {
            assert_eq!(space.elements[t].over_s, 0.0);
            continue;
        }
        // Midpoint rule in z of ln(s_arc / s_chord), error h² f''/24 with 40,000 steps.
        let steps = 40_000;
        let [low, high] = [arc.nodes[1], arc.nodes[2]].map(|n| (space.s[n as usize], space.z[n as usize]));
        let mut sum = 0.0;
        for k in 0..steps {
            let share = (f64::from(k) + 0.5) / f64::from(steps);
            let z = low.1 + share * (high.1 - low.1);
            sum += ((1.0 - z * z) / (low.0 + share * (high.0 - low.0))).ln();
        }
        let want = plain + sum * (high.1 - low.1) / f64::from(steps);
        assert!(
            (space.elements[t].over_s - want).abs() < 1e-9 * want,
            "{} {want}",
            space.elements[t].over_s
        );
    }
}

#[test]
fn free_nodes_are_those_off_axis_wall_and_opposite_mirror() {
    let open = ring(1.0, 3, false);
    let space = Space::new(&open, None).unwrap();
    let on_axis = open.nodes.iter().filter(|p| p.r == 0.0).count();
    assert_eq!(space.free_nodes.len(), open.nodes.len() - on_axis);
    for (number, &node) in space.free_nodes.iter().enumerate() {
        assert_eq!(space.free[node as usize] as usize, number);
    }
    let wall = Space::new(&walled(open.clone()), None).unwrap();
    // A pole lies on both the axis and the wall.
    assert_eq!(wall.free_nodes.len(), space.free_nodes.len() - (3 * 3 - 1));
    assert!(wall.exterior.is_none());
    let half = ring(1.0, 3, true);
    let same = Space::new(&half, Some(MirrorCurrents::Same)).unwrap();
    let opposite = Space::new(&half, Some(MirrorCurrents::Opposite)).unwrap();
    // Three ring nodes lie on the mirror.
    assert_eq!(same.free_nodes.len(), opposite.free_nodes.len() + 3);
    assert!(same.exterior.unwrap().orders.iter().all(|n| n % 2 == 1));
    assert!(opposite.exterior.unwrap().orders.iter().all(|n| n % 2 == 0));
}

#[test]
fn fans_hold_every_corner_once() {
    let mesh = reflected(&ring(1.0, 3, true));
    let space = Space::new(&mesh, None).unwrap();
    let mut corners = 0;
    for node in 0..space.nodes() {
        for &t in space.fan(node) {
            assert!(space.triangles[t as usize].contains(&(node as u32)));
            corners += 1;
        }
        assert!(space.fan(node).windows(2).all(|pair| pair[0] < pair[1]));
    }
    assert_eq!(corners, 3 * space.triangles.len());
}

#[test]
fn unfit_meshes_are_refused_with_the_place() {
    let good = ring(1.0, 3, false);
    let mut inverted = good.clone();
    inverted.triangles[4].swap(0, 1);
    assert!(matches!(
        Space::new(&inverted, None),
        Err(SpaceError::Inverted { triangle: 4, .. })
    ));
    let message = Space::new(&good, Some(MirrorCurrents::Same))
        .unwrap_err()
        .to_string();
    assert!(message.contains("no mirror"), "{message}");
    let half = ring(1.0, 3, true);
    assert_eq!(
        Space::new(&half, None).unwrap_err(),
        SpaceError::MirrorMismatch { in_mesh: true }
    );
    let mut open = good.clone();
    open.curve_edges.pop();
    assert!(matches!(
        Space::new(&open, None),
        Err(SpaceError::CircleNotCovered { .. })
    ));
    let mut two = good.clone();
    let (a, b) = (two.curve_edges[0].nodes[0], two.curve_edges[1].nodes[1]);
    two.triangles = vec![[two.curve_edges[0].nodes[1], b, a]];
    two.nodes[a as usize] = Point { r: 0.0, z: -1.0 };
    assert!(Space::new(&two, None).is_err());
}
