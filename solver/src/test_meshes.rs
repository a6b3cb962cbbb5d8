//! Hand-built meshes for tests, independent of the mesher: polar and rectangular grids in a half disc.

use std::f64::consts::{FRAC_PI_2, PI};

use mesher::arrange::{Boundary, OuterCircle, Part};
use mesher::mesh::CurveEdge;
use mesher::{Curve, Mesh, Point};

/// A half disc cut by rings of the given radii (ascending; the last is the outer circle) and rays: `angles` steps
/// from the south pole (or from the equator plane z = 0, as a mirror, with `half`) to the north pole. Triangles
/// within `radii[k]` and beyond `radii[k - 1]` belong to part `part(k)`.
pub(crate) fn polar(radii: &[f64], angles: usize, half: bool, part: impl Fn(usize) -> u32) -> Mesh {
    let mut mesh = empty();
    mesh.nodes.push(Point { r: 0.0, z: 0.0 });
    let from = if half { 0.0 } else { -FRAC_PI_2 };
    for radius in radii {
        for j in 0..=angles {
            let angle = from + (FRAC_PI_2 - from) * j as f64 / angles as f64;
            let pole = j == angles || (j == 0 && !half);
            let r = if pole { 0.0 } else { radius * angle.cos() };
            let z = if pole {
                radius * angle.signum()
            } else {
                radius * angle.sin()
            };
            mesh.nodes.push(Point {
                r,
                z: if half && j == 0 { 0.0 } else { z },
            });
        }
    }
    let at = |k: usize, j: usize| (1 + k * (angles + 1) + j) as u32;
    for k in 0..radii.len() {
        for j in 0..angles {
            let before = mesh.triangles.len();
            if k == 0 {
                mesh.triangles.push([0, at(0, j), at(0, j + 1)]);
            } else {
                let upper = if half { true } else { 2 * j >= angles };
                // Diagonals mirror each other across the equator.
                if upper {
                    mesh.triangles.push([at(k - 1, j), at(k, j), at(k, j + 1)]);
                    mesh.triangles
                        .push([at(k - 1, j), at(k, j + 1), at(k - 1, j + 1)]);
                } else {
                    mesh.triangles.push([at(k - 1, j), at(k, j), at(k - 1, j + 1)]);
                    mesh.triangles.push([at(k, j), at(k, j + 1), at(k - 1, j + 1)]);
                }
            }
            mesh.part_of.resize(mesh.triangles.len(), part(k));
            debug_assert!(mesh.triangles.len() > before);
        }
    }
    let outer = radii.len() - 1;
    for j in 0..angles {
        push_edge(&mut mesh, at(outer, j), at(outer, j + 1), Boundary::Circle);
    }
    if half {
        push_edge(&mut mesh, 0, at(0, 0), Boundary::Mirror);
        for k in 1..radii.len() {
            push_edge(&mut mesh, at(k - 1, 0), at(k, 0), Boundary::Mirror);
        }
        mesh.mirror_z_m = Some(0.0);
    }
    mesh.circle = Some(OuterCircle {
        centre_z_m: 0.0,
        radius_m: radii[outer],
    });
    mesh
}

/// A grid with lines at `r` (from 0, ascending) and `z` (symmetric about 0 is wise), and `layers` layers between
/// it and the half circle of radius `outer` around (0, 0), each `ratio` times as thick as the one before. All of
/// part 0 but cells for which `part` of their middle says otherwise.
pub(crate) fn boxed(
    r: &[f64],
    z: &[f64],
    outer: f64,
    layers: usize,
    ratio: f64,
    part: impl Fn(Point) -> u32,
) -> Mesh {
    let mut mesh = empty();
    let (nr, nz) = (r.len(), z.len());
    let at = |i: usize, j: usize| (i * nz + j) as u32;
    for &r in r {
        mesh.nodes.extend(z.iter().map(|&z| Point { r, z }));
    }
    for i in 0..nr - 1 {
        for j in 0..nz - 1 {
            let middle = Point {
                r: 0.5 * (r[i] + r[i + 1]),
                z: 0.5 * (z[j] + z[j + 1]),
            };
            quad(
                &mut mesh,
                [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)],
                (i + j) % 2 == 0,
            );
            mesh.part_of.resize(mesh.triangles.len(), part(middle));
        }
    }
    // The way round the box from the axis below to the axis above.
    let mut rim: Vec<u32> = (0..nr).map(|i| at(i, 0)).collect();
    rim.extend((1..nz).map(|j| at(nr - 1, j)));
    rim.extend((0..nr - 1).rev().map(|i| at(i, nz - 1)));
    let last = rim.len() - 1;
    let total: f64 = (0..layers).map(|k| ratio.powi(k as i32)).sum();
    let mut inner = rim.clone();
    let mut share = 0.0;
    for layer in 0..layers {
        share += ratio.powi(layer as i32) / total;
        let first = mesh.nodes.len() as u32;
        for (k, &node) in rim.iter().enumerate() {
            let start = mesh.nodes[node as usize];
            let angle = start.z.atan2(start.r);
            let pole = k == 0 || k == last;
            let end = if pole {
                Point {
                    r: 0.0,
                    z: outer * angle.signum(),
                }
            } else {
                Point {
                    r: outer * angle.cos(),
                    z: outer * angle.sin(),
                }
            };
            let point = if layer + 1 == layers {
                end
            } else {
                Point {
                    r: start.r + share * (end.r - start.r),
                    z: start.z + share * (end.z - start.z),
                }
            };
            mesh.nodes.push(point);
        }
        let ring: Vec<u32> = (0..rim.len() as u32).map(|k| first + k).collect();
        for k in 0..last {
            quad(
                &mut mesh,
                [inner[k], ring[k], ring[k + 1], inner[k + 1]],
                k % 2 == 0,
            );
        }
        inner = ring;
    }
    mesh.part_of.resize(mesh.triangles.len(), 0);
    for k in 0..last {
        push_edge(&mut mesh, inner[k], inner[k + 1], Boundary::Circle);
    }
    mesh.circle = Some(OuterCircle {
        centre_z_m: 0.0,
        radius_m: outer,
    });
    mesh
}

/// `from` to `to` in `steps` equal steps, `to` left out.
pub(crate) fn even(from: f64, to: f64, steps: usize) -> impl Iterator<Item = f64> {
    (0..steps).map(move |k| from + (to - from) * k as f64 / steps as f64)
}

/// The mesh with its outer circle made a wall.
pub(crate) fn walled(mut mesh: Mesh) -> Mesh {
    mesh.circle = None;
    for edge in &mut mesh.curve_edges {
        if edge.boundary == Boundary::Circle {
            edge.boundary = Boundary::Wall;
        }
    }
    mesh
}

/// The whole device of a half that ends on the mirror z = 0; its image's triangles follow in the same order.
pub(crate) fn reflected(half: &Mesh) -> Mesh {
    let mut mesh = half.clone();
    mesh.mirror_z_m = None;
    mesh.curve_edges.retain(|edge| edge.boundary != Boundary::Mirror);
    let image: Vec<u32> = half
        .nodes
        .iter()
        .enumerate()
        .map(|(k, p)| {
            if p.z == 0.0 {
                return k as u32;
            }
            mesh.nodes.push(Point { r: p.r, z: -p.z });
            mesh.nodes.len() as u32 - 1
        })
        .collect();
    for &[a, b, c] in &half.triangles {
        mesh.triangles.push([a, c, b].map(|node| image[node as usize]));
    }
    mesh.part_of.extend_from_slice(&half.part_of);
    for edge in half
        .curve_edges
        .iter()
        .filter(|edge| edge.boundary != Boundary::Mirror)
    {
        let [a, b] = edge.nodes.map(|node| image[node as usize]);
        push_edge(&mut mesh, b, a, edge.boundary);
    }
    mesh
}

fn quad(mesh: &mut Mesh, [a, b, c, d]: [u32; 4], rising: bool) {
    if rising {
        mesh.triangles.extend([[a, b, c], [a, c, d]]);
    } else {
        mesh.triangles.extend([[a, b, d], [b, c, d]]);
    }
}

fn push_edge(mesh: &mut Mesh, a: u32, b: u32, boundary: Boundary) {
    let (from, to) = (mesh.nodes[a as usize], mesh.nodes[b as usize]);
    let curve = if boundary == Boundary::Circle {
        let centre = Point { r: 0.0, z: 0.0 };
        let mut sweep = to.z.atan2(to.r) - from.z.atan2(from.r);
        if sweep < -PI {
            sweep += 2.0 * PI;
        }
        Curve::Arc {
            from,
            to,
            centre,
            sweep,
        }
    } else {
        Curve::Line { from, to }
    };
    mesh.curve_edges.push(CurveEdge {
        nodes: [a, b],
        curve,
        boundary,
    });
}

fn empty() -> Mesh {
    let part = Part {
        region: None,
        copy: 0,
        area_m2: 0.0,
        r_moment_m3: 0.0,
        mesh_size_m: None,
    };
    Mesh {
        nodes: Vec::new(),
        triangles: Vec::new(),
        part_of: Vec::new(),
        parts: vec![
            part.clone(),
            Part {
                region: Some(0),
                ..part
            },
        ],
        curve_edges: Vec::new(),
        circle: None,
        mirror_z_m: None,
        welds: Vec::new(),
    }
}
