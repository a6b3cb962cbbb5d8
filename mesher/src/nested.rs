//! The nested finer mesh: every triangle cut into four at the middles of its edges.

use crate::arrange::Boundary;
use crate::curve::{Curve, Point};
use crate::error::MeshError;
use crate::mesh::{CurveEdge, Mesh, doubled_area, doubled_area_in_s};
use crate::piece;
use crate::topology::Edges;

/// How far a new node is moved from the chord's middle towards the drawn curve when the full way would turn a
/// triangle over: tried in this order. Only slivers at the drawing's own sharp corners ever need less than 1.
const WAYS: [f64; 4] = [1.0, 0.5, 0.25, 0.0];

impl Mesh {
    /// The nested finer mesh: every triangle cut into four at the middles of its edges, new nodes moved onto the
    /// drawn curves (on the outer circle exactly). The nodes of this mesh come first, in the same order; the
    /// children of triangle t are 4 t .. 4 t + 3, the middle one last.
    ///
    /// Errors: a triangle so thin that a child cannot be kept upright in (r², z).
    pub fn refined(&self) -> Result<Self, MeshError> {
        let edges = Edges::of(&self.triangles, self.nodes.len());
        let mut nodes = self.nodes.clone();
        nodes.extend(
            edges
                .nodes
                .iter()
                .map(|&[a, b]| middle(self.nodes[a as usize], self.nodes[b as usize])),
        );
        let first_new = self.nodes.len() as u32;

        let drawn: Vec<u32> = self
            .curve_edges
            .iter()
            .map(|e| {
                edges
                    .between(e.nodes[0], e.nodes[1])
                    .ok_or(MeshError::EdgeMissing { nodes: e.nodes })
            })
            .collect::<Result<_, _>>()?;
        let mut way = vec![0_u8; self.curve_edges.len()];
        for (edge, &number) in self.curve_edges.iter().zip(&drawn) {
            nodes[(first_new + number) as usize] = self.middle_on(edge, WAYS[0]);
        }
        let children = |t: usize| children(self.triangles[t], edges.of_triangle[t].map(|e| first_new + e));
        let triangles: Vec<[u32; 3]> = (0..self.triangles.len()).flat_map(children).collect();

        self.keep_upright(&edges, &drawn, &triangles, &mut nodes, &mut way)?;

        let part_of = self.part_of.iter().flat_map(|&part| [part; 4]).collect();
        let curve_edges = self
            .curve_edges
            .iter()
            .zip(&drawn)
            .zip(&way)
            .flat_map(|((edge, &number), &way)| halves(edge, first_new + number, &nodes, way == 0))
            .collect();
        Ok(Self {
            nodes,
            triangles,
            part_of,
            parts: self.parts.clone(),
            curve_edges,
            circle: self.circle,
            mirror_z_m: self.mirror_z_m,
            welds: self.welds.clone(),
        })
    }

    /// The new node of a drawn edge: `way` 1 on the curve, 0 on the chord.
    fn middle_on(&self, edge: &CurveEdge, way: f64) -> Point {
        let on_curve = piece::node_on(&edge.curve, 0.5, edge.boundary, self.circle.as_ref());
        if way == 1.0 {
            return on_curve;
        }
        let on_chord = middle(edge.curve.start(), edge.curve.end());
        Point {
            r: on_chord.r + way * (on_curve.r - on_chord.r),
            z: on_chord.z + way * (on_curve.z - on_chord.z),
        }
    }

    /// Moves nodes of drawn edges back towards their chords where a child would be turned over.
    fn keep_upright(
        &self,
        edges: &Edges,
        drawn: &[u32],
        triangles: &[[u32; 3]],
        nodes: &mut [Point],
        way: &mut [u8],
    ) -> Result<(), MeshError> {
        let first_new = self.nodes.len();
        let mut fallen: Vec<usize> = (0..triangles.len())
            .filter(|&t| !upright(triangles[t], nodes))
            .collect();
        let mut drawn_number = vec![u32::MAX; if fallen.is_empty() { 0 } else { edges.nodes.len() }];
        if !fallen.is_empty() {
            for (index, &number) in drawn.iter().enumerate() {
                drawn_number[number as usize] = index as u32;
            }
        }
        while let Some(&child) = fallen.first() {
            let mut moved = false;
            for &child in &fallen {
                for edge in edges.of_triangle[child / 4] {
                    let index = drawn_number[edge as usize] as usize;
                    let movable = index < way.len() && self.curve_edges[index].boundary != Boundary::Circle;
                    if movable && usize::from(way[index]) + 1 < WAYS.len() {
                        way[index] += 1;
                        nodes[first_new + edge as usize] =
                            self.middle_on(&self.curve_edges[index], WAYS[usize::from(way[index])]);
                        moved = true;
                    }
                }
            }
            if !moved {
                let corners = self.triangles[child / 4].map(|n| self.nodes[n as usize]);
                return Err(MeshError::TurnedOver {
                    at: corners[0],
                    part: self.part_name(self.part_of[child / 4]),
                });
            }
            fallen = (0..triangles.len())
                .filter(|&t| !upright(triangles[t], nodes))
                .collect();
        }
        Ok(())
    }
}

fn middle(a: Point, b: Point) -> Point {
    Point {
        r: 0.5 * (a.r + b.r),
        z: 0.5 * (a.z + b.z),
    }
}

/// Corner children first, the middle one last; `mid[i]` lies on the edge that faces corner i.
fn children(corner: [u32; 3], mid: [u32; 3]) -> [[u32; 3]; 4] {
    [
        [corner[0], mid[2], mid[1]],
        [mid[2], corner[1], mid[0]],
        [mid[1], mid[0], corner[2]],
        mid,
    ]
}

/// Whether a triangle is counter-clockwise both in (r, z) and in (r², z).
pub(crate) fn upright(corners: [u32; 3], nodes: &[Point]) -> bool {
    let [a, b, c] = corners.map(|n| nodes[n as usize]);
    doubled_area(a, b, c) > 0.0 && doubled_area_in_s(a, b, c) > 0.0
}

/// The two halves of a drawn edge. When the node could not be put on the curve they are straight.
fn halves(edge: &CurveEdge, node: u32, nodes: &[Point], on_curve: bool) -> [CurveEdge; 2] {
    let point = nodes[node as usize];
    let [first, second] = if on_curve {
        piece::cut(&edge.curve, 0.5, point)
    } else {
        let (from, to) = (edge.curve.start(), edge.curve.end());
        [Curve::Line { from, to: point }, Curve::Line { from: point, to }]
    };
    [
        CurveEdge {
            nodes: [edge.nodes[0], node],
            curve: first,
            boundary: edge.boundary,
        },
        CurveEdge {
            nodes: [node, edge.nodes[1]],
            curve: second,
            boundary: edge.boundary,
        },
    ]
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::arrange::{OuterCircle, Part};
    use crate::locate::Locator;

    /// Half of the unit disc as a fan of four triangles around the origin.
    fn half_disc() -> Mesh {
        let circle = OuterCircle {
            centre_z_m: 0.0,
            radius_m: 1.0,
        };
        let heights = [-1.0, -0.5_f64.sqrt(), 0.0, 0.5_f64.sqrt(), 1.0];
        let mut nodes: Vec<Point> = heights.iter().map(|&z| piece::on_circle(&circle, z)).collect();
        nodes.push(Point { r: 0.0, z: 0.0 });
        let edge = |a: u32, b: u32, arc: bool| {
            let (from, to) = (nodes[a as usize], nodes[b as usize]);
            let sweep = std::f64::consts::FRAC_PI_4;
            if arc {
                let curve = Curve::Arc {
                    from,
                    to,
                    centre: Point::default(),
                    sweep,
                };
                CurveEdge {
                    nodes: [a, b],
                    curve,
                    boundary: Boundary::Circle,
                }
            } else {
                CurveEdge {
                    nodes: [a, b],
                    curve: Curve::Line { from, to },
                    boundary: Boundary::Axis,
                }
            }
        };
        let mut curve_edges: Vec<CurveEdge> = (0..4).map(|k| edge(k, k + 1, true)).collect();
        curve_edges.extend([edge(4, 5, false), edge(5, 0, false)]);
        let air = Part {
            region: None,
            copy: 0,
            area_m2: std::f64::consts::FRAC_PI_2,
            r_moment_m3: 2.0 / 3.0,
            mesh_size_m: None,
        };
        Mesh {
            triangles: (0..4).map(|k| [5, k, k + 1]).collect(),
            part_of: vec![0; 4],
            parts: vec![air],
            curve_edges,
            circle: Some(circle),
            mirror_z_m: None,
            welds: Vec::new(),
            nodes,
        }
    }

    fn area(mesh: &Mesh) -> f64 {
        let part = |c: &[u32; 3]| {
            let [a, b, c] = c.map(|n| mesh.nodes[n as usize]);
            0.5 * doubled_area(a, b, c)
        };
        mesh.triangles.iter().map(part).sum()
    }

    #[test]
    fn refining_a_half_disc_keeps_all_promises_and_its_area_tends_to_that_of_the_disc_with_order_two() {
        let mut mesh = half_disc();
        mesh.check().unwrap();
        let missing = |m: &Mesh| std::f64::consts::FRAC_PI_2 - area(m);
        let mut before = missing(&mesh);
        for _ in 0..5 {
            let finer = mesh.refined().unwrap();
            finer.check().unwrap();
            assert_eq!(finer.nodes[..mesh.nodes.len()], mesh.nodes);
            assert_eq!(finer.triangles.len(), 4 * mesh.triangles.len());
            assert_eq!(finer.curve_edges.len(), 2 * mesh.curve_edges.len());
            let now = missing(&finer);
            // The polygon's error is h^2 (1 + O(h^2)).
            assert!((before / now - 4.0).abs() < 0.2, "ratio {}", before / now);
            before = now;
            mesh = finer;
        }
    }

    #[test]
    fn every_triangle_is_found_at_its_centroid_corners_belong_somewhere_and_bulges_are_inside() {
        let mesh = half_disc().refined().unwrap().refined().unwrap();
        let locator = Locator::of(&mesh);
        for (t, corners) in mesh.triangles.iter().enumerate() {
            let [a, b, c] = corners.map(|n| mesh.nodes[n as usize]);
            let centroid = Point {
                r: (a.r + b.r + c.r) / 3.0,
                z: (a.z + b.z + c.z) / 3.0,
            };
            assert_eq!(locator.triangle_at(&mesh, centroid), Some(t as u32));
            for corner in [a, b, c] {
                let found = locator.triangle_at(&mesh, corner).unwrap() as usize;
                assert!(
                    mesh.triangles[found]
                        .iter()
                        .any(|&n| mesh.nodes[n as usize] == corner)
                );
            }
        }
        let angle = 0.5 * std::f64::consts::PI / 32.0;
        let bulge = Point {
            r: 0.9999 * angle.cos(),
            z: 0.9999 * angle.sin(),
        };
        let found = locator.triangle_at(&mesh, bulge).expect("inside the circle");
        assert!(mesh.triangles[found as usize].iter().filter(|&&n| n != 5).count() >= 2);
        assert_eq!(locator.triangle_at(&mesh, Point { r: 1.001, z: 0.0 }), None);
        assert_eq!(locator.triangle_at(&mesh, Point { r: -1e-3, z: 0.0 }), None);
        assert_eq!(locator.triangle_at(&mesh, Point { r: f64::NAN, z: 0.0 }), None);
    }

    #[test]
    fn a_node_that_would_turn_a_sliver_over_stays_nearer_to_the_chord() {
        // One triangle whose bottom edge is an arc that rises to its full height.
        let (a, b, c) = (
            Point { r: 1.0, z: 0.0 },
            Point { r: 2.0, z: 0.0 },
            Point { r: 1.5, z: 0.06 },
        );
        let centre = Point { r: 1.5, z: -1.0 };
        let sweep = -2.0 * 0.5_f64.atan2(1.0);
        let line = |from, to| Curve::Line { from, to };
        let curves = [
            Curve::Arc {
                from: a,
                to: b,
                centre,
                sweep,
            },
            line(b, c),
            line(c, a),
        ];
        let curve_edges = (0..3)
            .map(|k: u32| CurveEdge {
                nodes: [k, (k + 1) % 3],
                curve: curves[k as usize],
                boundary: Boundary::Wall,
            })
            .collect();
        let part = Part {
            region: None,
            copy: 0,
            area_m2: 0.03,
            r_moment_m3: 0.045,
            mesh_size_m: None,
        };
        let mesh = Mesh {
            nodes: vec![a, b, c],
            triangles: vec![[0, 1, 2]],
            part_of: vec![0],
            parts: vec![part],
            curve_edges,
            circle: None,
            mirror_z_m: None,
            welds: Vec::new(),
        };
        mesh.check().unwrap();
        assert!(curves[0].at(0.5).z > 0.06, "the arc would pass the apex");
        mesh.refined().unwrap().check().unwrap();
    }
}
