//! What is refused, and what mirror and wall make of the edge of space.

use std::f64::consts::PI;

use super::tests::{areas, arranged, assert_areas, disc, named, p, rect};
use super::*;
use crate::section::SpaceEdge;

fn walled(mut section: Section, wall: Outline) -> Section {
    section.edge = SpaceEdge::Wall(wall);
    section
}

fn mirrored(mut section: Section, z: f64) -> Section {
    section.mirror_z_m = Some(z);
    section
}

fn length_of(arrangement: &Arrangement, kind: Boundary) -> f64 {
    arrangement
        .edges
        .iter()
        .filter(|edge| edge.boundary == kind)
        .map(|edge| edge.curve.length_m())
        .sum()
}

#[test]
fn a_covered_region_is_refused_and_what_covers_it_is_named() {
    let coil = rect([1.0, 2.0], [0.0, 1.0]);
    let twice = named(vec![coil.clone(), coil.clone()]);
    assert_eq!(
        arrange(&twice).unwrap_err(),
        MeshError::RegionVanished {
            region: "part 1".into(),
            covered_by: vec!["part 2".into()]
        }
    );
    let text = arrange(&twice).unwrap_err().to_string();
    assert_eq!(
        text,
        "region `part 1` has no triangle: it is covered by `part 2`, painted later"
    );
    let by_two = named(vec![
        coil.clone(),
        rect([0.0, 1.5], [-1.0, 2.0]),
        rect([1.5, 3.0], [-1.0, 2.0]),
    ]);
    assert_eq!(
        arrange(&by_two).unwrap_err(),
        MeshError::RegionVanished {
            region: "part 1".into(),
            covered_by: vec!["part 2".into(), "part 3".into()]
        }
    );
    let sliver = named(vec![
        rect([0.5, 1.0], [0.0, 1.0]),
        rect([2.0, 2.0 + 1e-7], [0.0, 1.0]),
    ]);
    let refused = arrange(&sliver).unwrap_err();
    assert_eq!(
        refused,
        MeshError::RegionVanished {
            region: "part 2".into(),
            covered_by: vec![]
        }
    );
    assert!(refused.to_string().ends_with("too thin to be meshed"));
}

#[test]
fn a_copy_may_be_covered_while_another_stands() {
    let mut section = named(vec![rect([1.0, 2.0], [0.0, 1.0]), rect([0.5, 2.5], [-0.5, 1.5])]);
    section.regions[0].copies.push(rect([1.0, 2.0], [5.0, 6.0]));
    let arrangement = arranged(&section);
    assert_areas(&arrangement, &[0.0, 1.0, 4.0]);
    assert_eq!(
        (arrangement.parts[2].region, arrangement.parts[2].copy),
        (Some(0), 1)
    );
    // Copies of one region may overlap: the later one covers.
    let mut section = named(vec![disc(2.0, 0.0, 1.0)]);
    section.regions[0].copies.push(rect([2.0, 4.0], [-2.0, 2.0]));
    assert_areas(&arranged(&section), &[0.5 * PI, 8.0]);
}

#[test]
fn nothing_painted_is_refused() {
    assert_eq!(arrange(&named(vec![])).unwrap_err(), MeshError::NothingPainted);
    let mut hollow = named(vec![rect([1.0, 2.0], [0.0, 1.0])]);
    hollow.regions.push(crate::section::PaintedRegion {
        name: "void".into(),
        copies: vec![],
        mesh_size_m: None,
    });
    assert!(matches!(arrange(&hollow), Err(MeshError::RegionVanished { region, .. }) if region == "void"));
}

#[test]
fn a_mirror_halves_the_space() {
    let arrangement = arranged(&mirrored(
        named(vec![rect([1.0, 2.0], [0.0, 1.0]), disc(0.0, 3.0, 1.0)]),
        0.0,
    ));
    let circle = arrangement.circle.unwrap();
    assert_eq!((circle.centre_z_m, circle.radius_m), (0.0, 5.0));
    let space: f64 = arrangement.parts.iter().map(|part| part.area_m2).sum();
    assert!((space - 0.25 * PI * 25.0).abs() < 1e-12);
    assert!((length_of(&arrangement, Boundary::Mirror) - 5.0).abs() < 1e-14);
    assert!((length_of(&arrangement, Boundary::Axis) - 5.0).abs() < 1e-14);
    assert!((length_of(&arrangement, Boundary::Circle) - 2.5 * PI).abs() < 1e-13);
    // The coil stands on the mirror: its foot is on it.
    assert!(
        arrangement
            .edges
            .iter()
            .any(|e| e.boundary == Boundary::Mirror && (e.left == 1 || e.right == 1))
    );
}

#[test]
fn noise_at_the_mirror_is_welded_and_more_is_refused() {
    let noisy = mirrored(named(vec![rect([1.0, 2.0], [-1e-6, 1.0])]), 0.0);
    let arrangement = arranged(&noisy);
    assert!((arrangement.parts[1].area_m2 - 1.0).abs() < 1e-12);
    let welds = &arrangement.welds;
    assert_eq!(welds.len(), 2);
    assert!(
        welds
            .iter()
            .all(|weld| (weld.moved_m - 1e-6).abs() < 1e-12 && weld.regions == ["part 1"])
    );
    let below = mirrored(named(vec![rect([1.0, 2.0], [-0.1, 1.0])]), 0.0);
    assert_eq!(
        arrange(&below).unwrap_err(),
        MeshError::BelowMirror {
            region: "part 1".into(),
            lowest_z_m: -0.1,
            mirror_z_m: 0.0
        }
    );
    let nowhere = mirrored(named(vec![rect([1.0, 2.0], [0.0, 1.0])]), f64::NAN);
    assert!(matches!(arrange(&nowhere), Err(MeshError::MirrorNotFinite { z_m }) if z_m.is_nan()));
}

#[test]
fn a_wall_bounds_the_space_with_axis_and_mirror_where_it_runs_along_them() {
    let coil = rect([1.0, 2.0], [0.0, 1.0]);
    let arrangement = arranged(&mirrored(
        walled(named(vec![coil.clone()]), rect([0.0, 3.0], [0.0, 4.0])),
        0.0,
    ));
    assert!(arrangement.circle.is_none());
    assert!((length_of(&arrangement, Boundary::Axis) - 4.0).abs() < 1e-14);
    assert!((length_of(&arrangement, Boundary::Mirror) - 3.0).abs() < 1e-14);
    assert!((length_of(&arrangement, Boundary::Wall) - 7.0).abs() < 1e-14);
    assert!((arrangement.parts[0].area_m2 - 11.0).abs() < 1e-12);
    // A wall that stands off the axis: no axis edges at all.
    let ring = arranged(&walled(named(vec![coil.clone()]), rect([0.5, 3.0], [-1.0, 4.0])));
    assert_eq!(length_of(&ring, Boundary::Axis), 0.0);
    // A region may fill the wall to the brim.
    let full = arranged(&walled(
        named(vec![rect([0.0, 3.0], [0.0, 4.0])]),
        rect([0.0, 3.0], [0.0, 4.0]),
    ));
    assert_eq!(areas(&full), [12.0]);
    assert_eq!(full.parts[0].area_m2, 0.0);
    let below = mirrored(walled(named(vec![coil]), rect([0.0, 3.0], [-1.0, 4.0])), 0.0);
    assert_eq!(
        arrange(&below).unwrap_err(),
        MeshError::WallBelowMirror {
            lowest_z_m: -1.0,
            mirror_z_m: 0.0
        }
    );
}

#[test]
fn a_region_beyond_the_wall_is_refused_by_name_place_and_excess() {
    let crossing = walled(
        named(vec![disc(2.0, 0.0, 1.0), rect([1.0, 3.5], [0.0, 1.0])]),
        rect([0.0, 3.0], [-2.0, 2.0]),
    );
    let Err(MeshError::BeyondWall { region, at, by_m }) = arrange(&crossing) else {
        panic!("part 2 reaches beyond the wall")
    };
    assert_eq!(region, "part 2");
    assert_eq!(at.r, 3.5);
    assert!((by_m - 0.5).abs() < 1e-12);
    let apart = walled(
        named(vec![rect([5.0, 6.0], [0.0, 1.0])]),
        rect([0.0, 3.0], [-2.0, 2.0]),
    );
    assert!(matches!(arrange(&apart), Err(MeshError::BeyondWall { .. })));
    // Drawing noise beyond the wall is no excess.
    let noisy = walled(
        named(vec![rect([1.0, 3.0 + 1e-6], [0.0, 1.0])]),
        rect([0.0, 3.0], [-2.0, 2.0]),
    );
    assert!((areas(&arranged(&noisy))[0] - 2.0).abs() <= 1.001e-6);
    // The wall itself may be round, and a region may touch it in a point.
    let drum = walled(
        named(vec![disc(0.0, 0.0, 1.0)]),
        Outline::circle(p(0.0, 1.0), 2.0).unwrap(),
    );
    let arrangement = arranged(&drum);
    assert!((arrangement.parts[0].area_m2 - 1.5 * PI).abs() < 1e-12);
    assert!((length_of(&arrangement, Boundary::Wall) - 2.0 * PI).abs() < 1e-12);
}
