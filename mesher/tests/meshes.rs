//! Meshes of drawings whose properties are known.

#![allow(clippy::unwrap_used, clippy::panic)]

use coilwright_mesher::arrange::{Arrangement, Boundary, arrange};
use coilwright_mesher::section::{PaintedRegion, SpaceEdge};
use coilwright_mesher::shape::Outline;
use coilwright_mesher::{Mesh, MeshError, MeshOptions, Point, Section};

fn region(name: &str, outline: Outline) -> PaintedRegion {
    PaintedRegion {
        name: name.to_owned(),
        copies: vec![outline],
        mesh_size_m: None,
    }
}

/// A rectangle in millimetres.
fn rect(name: &str, r: [f64; 2], z: [f64; 2]) -> PaintedRegion {
    region(
        name,
        Outline::rect(r.map(|x| x * 1e-3), z.map(|x| x * 1e-3), 0.0).unwrap(),
    )
}

/// A circle in millimetres.
fn circle(name: &str, r: f64, z: f64, radius: f64) -> PaintedRegion {
    region(
        name,
        Outline::circle(Point::new(r * 1e-3, z * 1e-3), radius * 1e-3).unwrap(),
    )
}

fn open(regions: Vec<PaintedRegion>) -> Section {
    Section {
        regions,
        edge: SpaceEdge::HalfCircle,
        mirror_z_m: None,
    }
}

/// A solenoid valve of 40 mm with a working gap of 1.5 mm and a guide gap of 0.2 mm.
fn valve() -> Section {
    open(vec![
        rect("yoke", [4.2, 14.0], [-14.0, 22.0]),
        rect("coil", [5.5, 12.0], [-11.0, 19.0]),
        rect("stop", [0.0, 4.2], [-14.0, 0.0]),
        rect("plunger", [0.0, 4.0], [1.5, 24.0]),
    ])
}

fn meshed(section: &Section) -> (Arrangement, Mesh) {
    let drawing = arrange(section).unwrap();
    let mesh = Mesh::of(section, &MeshOptions::default()).unwrap();
    mesh.check().unwrap();
    (drawing, mesh)
}

fn corners(mesh: &Mesh, triangle: usize) -> [Point; 3] {
    mesh.triangles[triangle].map(|n| mesh.nodes[n as usize])
}

/// Area (m²) and integral of r as the elements see it, straight in (r², z) (m³), of each part.
fn measures(mesh: &Mesh) -> Vec<(f64, f64)> {
    let mut sums = vec![(0.0, 0.0); mesh.parts.len()];
    for (triangle, &part) in mesh.part_of.iter().enumerate() {
        let [a, b, c] = corners(mesh, triangle);
        let s = |p: Point| Point::new(p.r * p.r, p.z);
        let doubled = |a: Point, b: Point, c: Point| (b - a).cross(c - a);
        sums[part as usize].0 += 0.5 * doubled(a, b, c);
        // r dr = ds / 2.
        sums[part as usize].1 += 0.25 * doubled(s(a), s(b), s(c));
    }
    sums
}

#[test]
fn a_valve_has_some_thousand_nodes_and_good_angles() {
    let (_, mesh) = meshed(&valve());
    let quality = mesh.quality();
    assert!((2_000..10_000).contains(&quality.nodes), "{quality:?}");
    assert!(quality.smallest_angle_deg >= 20.0, "{quality:?}");
    assert!(quality.share_below_good <= 0.01, "{quality:?}");
    assert!((quality.sharpest_corner_deg - 90.0).abs() < 1e-6, "{quality:?}");
}

#[test]
fn parts_bounded_by_straight_lines_keep_their_area_and_volume() {
    let cone = |name: &str, points: &[[f64; 2]]| {
        let points: Vec<Point> = points
            .iter()
            .map(|p| Point::new(p[0] * 1e-3, p[1] * 1e-3))
            .collect();
        region(name, Outline::polygon(&points).unwrap())
    };
    let section = open(vec![
        cone("cone", &[[0.0, 0.0], [10.0, 0.0], [0.0, 10.0]]),
        cone("ring", &[[20.0, 0.0], [30.0, 3.0], [27.0, 12.0], [21.0, 5.0]]),
        cone("tip", &[[0.0, 12.0], [6.0, 25.0], [0.0, 25.0]]),
    ]);
    let (drawing, mesh) = meshed(&section);
    for (part, (area, moment)) in drawing.parts.iter().zip(measures(&mesh)).skip(1) {
        assert!(
            (area / part.area_m2 - 1.0).abs() < 1e-12,
            "area {area} of {part:?}"
        );
        let change = moment / part.r_moment_m3 - 1.0;
        // The tolerance is the promise of the sizes; it must also not be met by far too many nodes.
        assert!(change.abs() < 1e-5, "volume changes by {change:e}: {part:?}");
        assert!(change.abs() > 1e-7, "volume changes by {change:e} only: {part:?}");
    }
}

#[test]
fn a_gap_of_a_fiftieth_of_a_millimetre_in_a_device_of_200_mm() {
    let half_gap = 0.01;
    let section = open(vec![
        rect("lower", [0.0, 100.0], [-100.0, -half_gap]),
        rect("upper", [0.0, 100.0], [half_gap, 100.0]),
    ]);
    let (drawing, mesh) = meshed(&section);
    let quality = mesh.quality();
    // The gap alone has 5,000 widths; two layers of it and what grows from it to both sides.
    assert!((15_000..100_000).contains(&quality.nodes), "{quality:?}");
    assert!(quality.smallest_angle_deg >= 20.0, "{quality:?}");
    let (area, _) = measures(&mesh)[1];
    assert!((area / drawing.parts[1].area_m2 - 1.0).abs() < 1e-12);
    // Two layers: no triangle reaches from one side of the gap to the other.
    let inside = half_gap * 1e-3;
    let on = |p: Point, z: f64| p.z == z && p.r < 0.1;
    for triangle in 0..mesh.triangles.len() {
        let p = corners(&mesh, triangle);
        let both = p.iter().any(|p| on(*p, inside)) && p.iter().any(|p| on(*p, -inside));
        assert!(!both, "triangle {triangle} at {} spans the gap", p[0]);
    }
}

#[test]
fn nodes_lie_on_circle_axis_and_mirror_to_the_last_bit() {
    let mirror = 0.1e-3;
    let section = Section {
        regions: vec![
            rect("coil", [10.0, 20.0], [0.1, 5.0]),
            circle("ball", 0.0, 8.0, 3.0),
        ],
        edge: SpaceEdge::HalfCircle,
        mirror_z_m: Some(mirror),
    };
    let (_, mesh) = meshed(&section);
    for mesh in [mesh.refined().unwrap(), mesh] {
        mesh.check().unwrap();
        let outer = mesh.circle.unwrap();
        let mut seen = [0_usize; 5];
        for edge in &mesh.curve_edges {
            for p in edge.nodes.map(|n| mesh.nodes[n as usize]) {
                let height = p.z - outer.centre_z_m;
                match edge.boundary {
                    Boundary::Axis => assert_eq!(p.r, 0.0),
                    Boundary::Mirror => assert_eq!(p.z, mirror),
                    Boundary::Circle => {
                        let r = (outer.radius_m * outer.radius_m - height * height)
                            .max(0.0)
                            .sqrt();
                        // Both ways of rounding the same root.
                        assert!((p.r * p.r - r * r).abs() <= 4.0 * f64::EPSILON * outer.radius_m.powi(2));
                    }
                    Boundary::Wall | Boundary::None => continue,
                }
                seen[edge.boundary as usize] += 1;
            }
        }
        let [_, axis, circle, _, mirror] = seen;
        assert!(axis > 2 && circle > 2 && mirror > 2, "{seen:?}");
    }
}

#[test]
fn a_size_given_for_a_region_is_an_upper_limit_there() {
    let mut section = valve();
    section.regions[1].mesh_size_m = Some(0.3e-3);
    let (_, mesh) = meshed(&section);
    let longest = |triangle: usize| {
        let p = corners(&mesh, triangle);
        (0..3).map(|k| p[k].distance(p[(k + 1) % 3])).fold(0.0, f64::max)
    };
    let in_coil = (0..mesh.triangles.len()).filter(|&t| mesh.part_of[t] == 2);
    let lengths: Vec<f64> = in_coil.map(longest).collect();
    let mean = lengths.iter().sum::<f64>() / lengths.len() as f64;
    assert!(mean < 0.3e-3 * 1.2, "mean longest edge {mean}");
    // A circumcircle limits edges to its diameter: 2 / sqrt(3) of the largest equilateral edge allowed.
    assert!(lengths.iter().all(|&l| l < 0.3e-3 * 1.35 * 2.0 / 3_f64.sqrt()));
}

#[test]
fn twice_the_fineness_is_about_four_times_the_nodes() {
    let section = open(vec![rect("coil", [10.0, 20.0], [-5.0, 5.0])]);
    let nodes = |fineness: f64| {
        let options = MeshOptions {
            fineness,
            ..MeshOptions::default()
        };
        Mesh::of(&section, &options).unwrap().nodes.len() as f64
    };
    let ratio = nodes(8.0) / nodes(4.0);
    assert!((3.4..4.4).contains(&ratio), "{ratio}");
}

#[test]
fn curves_that_touch_are_meshed() {
    for section in [
        open(vec![
            circle("left", 20.0, 0.0, 5.0),
            circle("right", 30.0, 0.0, 5.0),
            rect("floor", [15.0, 35.0], [-10.0, -5.0]),
        ]),
        open(vec![
            circle("ring", 20.0, 0.0, 5.0),
            circle("core", 22.0, 0.0, 3.0),
        ]),
        open(vec![
            circle("on axis", 5.0, 0.0, 5.0),
            circle("within", 4.9, 0.0, 4.9),
        ]),
        open(vec![
            circle("outer", 0.0, 0.0, 10.0),
            circle("inner", 0.0, 0.0, 9.99),
        ]),
    ] {
        let (drawing, mesh) = meshed(&section);
        mesh.refined().unwrap().check().unwrap();
        for (part, (area, _)) in drawing.parts.iter().zip(measures(&mesh)).skip(1) {
            assert!((area / part.area_m2 - 1.0).abs() < 5e-3, "{area} of {part:?}");
        }
    }
}

#[test]
fn a_bundle_of_240_round_wires_has_its_area_and_takes_no_more_than_its_share_of_nodes() {
    let wire = |k: u32| {
        let centre = Point::new(0.02 + f64::from(k % 12) * 1.1e-3, f64::from(k / 12) * 1.1e-3);
        Outline::circle(centre, 0.5e-3).unwrap()
    };
    let bundle = PaintedRegion {
        name: "bundle".to_owned(),
        copies: (0..240).map(wire).collect(),
        mesh_size_m: None,
    };
    let (drawing, mesh) = meshed(&open(vec![bundle]));
    assert_eq!(drawing.parts.len(), 241);
    assert!(mesh.nodes.len() < 300 * 240, "{}", mesh.nodes.len());
    for (part, (area, _)) in drawing.parts.iter().zip(measures(&mesh)).skip(1) {
        // A polygon of 24 corners lacks 1.14 % of its circle.
        assert!((area / part.area_m2 - 1.0).abs() < 0.0115, "{area} of {part:?}");
    }
}

#[test]
fn a_drawing_four_times_as_large_has_the_same_mesh_four_times_as_large() {
    let scaled = |scale: f64| {
        let outline =
            |r: [f64; 2], z: [f64; 2]| Outline::rect(r.map(|x| x * scale), z.map(|x| x * scale), 0.0);
        open(vec![
            region("coil", outline([1.0, 2.0], [-0.5, 0.5]).unwrap()),
            region(
                "ball",
                Outline::circle(Point::new(0.0, scale), 0.3 * scale).unwrap(),
            ),
        ])
    };
    let (_, small) = meshed(&scaled(1.0));
    let (_, large) = meshed(&scaled(4.0));
    assert_eq!(small.triangles, large.triangles);
    let as_large: Vec<Point> = small.nodes.iter().map(|&p| p * 4.0).collect();
    assert_eq!(as_large, large.nodes);
}

#[test]
fn too_many_triangles_and_a_useless_fineness_are_errors_with_numbers() {
    let options = MeshOptions {
        max_triangles: 1_000,
        ..MeshOptions::default()
    };
    let error = Mesh::of(&valve(), &options).unwrap_err();
    let MeshError::TooManyTriangles {
        limit: 1_000,
        smallest_m,
        ..
    } = error
    else {
        panic!("unexpected: {error}")
    };
    assert!(smallest_m > 0.0 && smallest_m < 1e-3);
    for fineness in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        let options = MeshOptions {
            fineness,
            ..MeshOptions::default()
        };
        assert!(matches!(
            Mesh::of(&valve(), &options),
            Err(MeshError::Fineness { .. })
        ));
    }
}
