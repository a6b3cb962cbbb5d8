//! Is a mesh what it claims to be? Used in tests, and by whoever builds a mesh by hand.

use thiserror::Error;

use crate::arrange::Boundary;
use crate::mesh::{Mesh, doubled_area, doubled_area_in_s};
use crate::topology::{Edges, NO_TRIANGLE};

/// A promise of [`Mesh`] that is broken.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum MeshFault {
    /// The lists do not belong together.
    #[error("{what}: length {found}, expected {expected}")]
    Length {
        /// Which list.
        what: &'static str,
        /// Its length.
        found: usize,
        /// What it should be.
        expected: usize,
    },
    /// A number points at nothing.
    #[error("{what} {number} does not exist (triangle or edge {place})")]
    Index {
        /// What is missing: node or part.
        what: &'static str,
        /// Its number.
        number: u32,
        /// The triangle or curve edge that refers to it.
        place: usize,
    },
    /// A triangle lies on its back.
    #[error("triangle {triangle} is turned over in {plane}: twice its area is {doubled_area:e}")]
    TurnedOver {
        /// Its number.
        triangle: usize,
        /// (r, z) or (r², z).
        plane: &'static str,
        /// Signed.
        doubled_area: f64,
    },
    /// Something about a node.
    #[error("node {node} at r = {r} m, z = {z} m: {what}")]
    Node {
        /// Its number.
        node: usize,
        /// Where, m.
        r: f64,
        /// Where, m.
        z: f64,
        /// What is wrong.
        what: &'static str,
    },
    /// Something about an edge.
    #[error("edge between nodes {a} and {b}: {what}")]
    Edge {
        /// One node.
        a: u32,
        /// The other.
        b: u32,
        /// What is wrong.
        what: &'static str,
    },
    /// Nodes - edges + triangles is not that of a disc.
    #[error("nodes - edges + triangles = {found}, but a surface without holes has 1")]
    Euler {
        /// The sum.
        found: i64,
    },
}

impl Mesh {
    /// Checks lengths, indices, orientation in (r, z) and (r², z), conformity, tags, axis, mirror and circle nodes,
    /// and that the mesh is one piece without holes. Returns the first fault.
    pub fn check(&self) -> Result<(), MeshFault> {
        self.check_numbers()?;
        self.check_orientation()?;
        let edges = Edges::of(&self.triangles, self.nodes.len());
        self.check_edges(&edges)?;
        self.check_nodes()?;
        let found = self.nodes.len() as i64 - edges.nodes.len() as i64 + self.triangles.len() as i64;
        if found == 1 {
            Ok(())
        } else {
            Err(MeshFault::Euler { found })
        }
    }

    fn check_numbers(&self) -> Result<(), MeshFault> {
        if self.part_of.len() != self.triangles.len() {
            let (found, expected) = (self.part_of.len(), self.triangles.len());
            return Err(MeshFault::Length {
                what: "part_of",
                found,
                expected,
            });
        }
        let nodes = self.nodes.len() as u32;
        for (place, &part) in self.part_of.iter().enumerate() {
            if part as usize >= self.parts.len() {
                return Err(MeshFault::Index {
                    what: "part",
                    number: part,
                    place,
                });
            }
        }
        let missing = |list: &[u32]| list.iter().copied().find(|&n| n >= nodes);
        for (place, corners) in self.triangles.iter().enumerate() {
            if let Some(number) = missing(corners) {
                return Err(MeshFault::Index {
                    what: "node",
                    number,
                    place,
                });
            }
        }
        for (place, edge) in self.curve_edges.iter().enumerate() {
            if let Some(number) = missing(&edge.nodes) {
                return Err(MeshFault::Index {
                    what: "node",
                    number,
                    place,
                });
            }
        }
        Ok(())
    }

    fn check_orientation(&self) -> Result<(), MeshFault> {
        for (triangle, corners) in self.triangles.iter().enumerate() {
            let [a, b, c] = corners.map(|n| self.nodes[n as usize]);
            let planes = [
                ("(r, z)", doubled_area(a, b, c)),
                ("(r², z)", doubled_area_in_s(a, b, c)),
            ];
            for (plane, doubled_area) in planes {
                if doubled_area <= 0.0 || doubled_area.is_nan() {
                    return Err(MeshFault::TurnedOver {
                        triangle,
                        plane,
                        doubled_area,
                    });
                }
            }
        }
        Ok(())
    }

    fn check_edges(&self, edges: &Edges) -> Result<(), MeshFault> {
        let fault = |[a, b]: [u32; 2], what| Err(MeshFault::Edge { a, b, what });
        let mut sides = vec![0_u8; edges.nodes.len()];
        for &edge in edges.of_triangle.iter().flatten() {
            sides[edge as usize] = sides[edge as usize].saturating_add(1);
        }
        if let Some(edge) = sides.iter().position(|&n| n > 2) {
            return fault(edges.nodes[edge], "has more than two triangles");
        }
        let mut tag = vec![None; edges.nodes.len()];
        for edge in &self.curve_edges {
            let Some(number) = edges.between(edge.nodes[0], edge.nodes[1]) else {
                return fault(edge.nodes, "is a curve edge but no triangle has it");
            };
            if tag[number as usize].replace(edge.boundary).is_some() {
                return fault(edge.nodes, "is listed twice as a curve edge");
            }
            let ends = edge.nodes.map(|n| self.nodes[n as usize]);
            if ends != [edge.curve.start(), edge.curve.end()] {
                return fault(edge.nodes, "its curve ends elsewhere");
            }
        }
        for (number, &[one, other]) in edges.triangles.iter().enumerate() {
            let at_boundary = other == NO_TRIANGLE;
            let what = match tag[number] {
                None if at_boundary => "lies on the boundary but carries no boundary kind",
                Some(Boundary::None) if at_boundary => "lies on the boundary but is tagged as inside",
                Some(kind) if kind != Boundary::None && !at_boundary => {
                    "is tagged as boundary but lies inside"
                }
                None if self.part_of[one as usize] != self.part_of[other as usize] => {
                    "parts meet off a curve"
                }
                _ => continue,
            };
            return fault(edges.nodes[number], what);
        }
        self.check_circle_edges(edges, &tag)
    }

    fn check_circle_edges(&self, edges: &Edges, tag: &[Option<Boundary>]) -> Result<(), MeshFault> {
        for (corners, sides) in self.triangles.iter().zip(&edges.of_triangle) {
            let on_circle = sides
                .iter()
                .filter(|&&e| tag[e as usize] == Some(Boundary::Circle))
                .count();
            if on_circle > 1 {
                let what = "its triangle has two edges on the outer circle";
                return Err(MeshFault::Edge {
                    a: corners[0],
                    b: corners[1],
                    what,
                });
            }
        }
        Ok(())
    }

    fn check_nodes(&self) -> Result<(), MeshFault> {
        let mut used = vec![false; self.nodes.len()];
        self.triangles
            .iter()
            .flatten()
            .for_each(|&n| used[n as usize] = true);
        let fault = |node: usize, what| {
            let point = self.nodes[node];
            Err(MeshFault::Node {
                node,
                r: point.r,
                z: point.z,
                what,
            })
        };
        for (node, point) in self.nodes.iter().enumerate() {
            if !(point.r.is_finite() && point.z.is_finite() && point.r >= 0.0) {
                return fault(node, "lies at r < 0 or is not finite");
            }
            if !used[node] {
                return fault(node, "belongs to no triangle");
            }
        }
        for edge in &self.curve_edges {
            for node in edge.nodes.map(|n| n as usize) {
                let point = self.nodes[node];
                match edge.boundary {
                    Boundary::Axis if point.r != 0.0 => return fault(node, "is on the axis with r not 0"),
                    Boundary::Mirror if Some(point.z) != self.mirror_z_m => {
                        return fault(node, "is off the mirror");
                    }
                    Boundary::Circle => match self.circle {
                        None => return fault(node, "is on a circle that does not exist"),
                        Some(circle) if !circle.holds(point) => {
                            return fault(node, "is off the outer circle");
                        }
                        Some(_) => {}
                    },
                    _ => {}
                }
            }
        }
        Ok(())
    }
}

impl crate::arrange::OuterCircle {
    /// Whether a point lies on the circle, to round-off.
    pub(crate) fn holds(&self, point: crate::curve::Point) -> bool {
        // A few roundings of squares of R.
        let slack = 8.0 * f64::EPSILON * self.radius_m * self.radius_m;
        let height = point.z - self.centre_z_m;
        (point.r * point.r + height * height - self.radius_m * self.radius_m).abs() <= slack
    }
}
