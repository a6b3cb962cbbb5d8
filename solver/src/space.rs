//! The discretisation on a mesh: s = r² and z of each node, the element integrals, which nodes are free.

use mesher::Mesh;
use mesher::arrange::{Boundary, OuterCircle};
use rayon::prelude::*;

use crate::element::Element;
use crate::exterior::{Arc, Exterior, with_bulge};
use crate::problem::MirrorCurrents;

mod numbering;

/// In [`Space::free`]: the node is fixed at psi = 0.
pub const FIXED: u32 = u32::MAX;

/// The discretisation on a mesh.
#[derive(Clone, Debug)]
pub struct Space {
    /// r² of each node, m² (on the outer circle R² - (z - zc)²; 0 on the axis).
    pub s: Vec<f64>,
    /// z of each node, m.
    pub z: Vec<f64>,
    /// Corners of each triangle, counter-clockwise in (s, z), in the mesh's order.
    pub triangles: Vec<[u32; 3]>,
    /// Integrals of each triangle.
    pub elements: Vec<Element>,
    /// Number of each node among the free ones, or [`FIXED`] (psi = 0: axis, wall, mirror with opposite currents).
    pub free: Vec<u32>,
    /// Node of each free number; numbers run along a space-filling curve.
    pub free_nodes: Vec<u32>,
    /// The unbounded surroundings; `None` with a wall.
    pub exterior: Option<Exterior>,
    /// Currents of the mirror image, where there is a mirror.
    pub mirror: Option<MirrorCurrents>,
    fans: Fans,
}

/// Triangles around each node: those of node i stand at `start[i]..start[i + 1]`, ascending.
#[derive(Clone, Debug)]
struct Fans {
    start: Vec<u32>,
    triangles: Vec<u32>,
}

impl Space {
    /// Lays the element over a mesh. `mirror` must be given just where the mesh has a mirror.
    ///
    /// Errors: a triangle that is flat or inverted in (s, z); a mirror on one side only; an outer circle that the
    /// mesh does not follow from pole to pole, or with two edges in one triangle.
    pub fn new(mesh: &Mesh, mirror: Option<MirrorCurrents>) -> Result<Self, SpaceError> {
        if mesh.mirror_z_m.is_some() != mirror.is_some() {
            return Err(SpaceError::MirrorMismatch {
                in_mesh: mesh.mirror_z_m.is_some(),
            });
        }
        let z: Vec<f64> = mesh.nodes.par_iter().map(|p| p.z).collect();
        let s = squared_radii(mesh);
        let mut elements = straight_elements(&mesh.triangles, &s, &z)?;
        let fans = Fans::new(mesh.nodes.len(), &mesh.triangles);
        let exterior = match mesh.circle {
            None => None,
            Some(circle) => {
                let arcs = arcs(mesh, circle, &fans, &elements)?;
                for arc in &arcs {
                    let ends = [arc.nodes[1] as usize, arc.nodes[2] as usize];
                    let element = &mut elements[arc.triangle as usize];
                    *element = with_bulge(*element, ends.map(|n| s[n]), ends.map(|n| z[n]));
                }
                Some(Exterior::new(circle.centre_z_m, circle.radius_m, mirror, arcs))
            }
        };
        let (free, free_nodes) = number_free_nodes(mesh, mirror);
        let triangles = mesh.triangles.clone();
        Ok(Self {
            s,
            z,
            triangles,
            elements,
            free,
            free_nodes,
            exterior,
            mirror,
            fans,
        })
    }

    /// Triangles around a node, ascending.
    pub fn fan(&self, node: usize) -> &[u32] {
        &self.fans.triangles[self.fans.start[node] as usize..self.fans.start[node + 1] as usize]
    }

    /// Corner values of a nodal vector on a triangle.
    pub fn corners(&self, triangle: usize, psi: &[f64]) -> [f64; 3] {
        self.triangles[triangle].map(|node| psi[node as usize])
    }

    /// r of each corner of a triangle, m.
    pub fn radii(&self, triangle: usize) -> [f64; 3] {
        self.corners(triangle, &self.s).map(f64::sqrt)
    }

    /// Number of nodes.
    pub fn nodes(&self) -> usize {
        self.s.len()
    }
}

impl Fans {
    fn new(nodes: usize, triangles: &[[u32; 3]]) -> Self {
        let mut start = vec![0u32; nodes + 1];
        for &node in triangles.iter().flatten() {
            start[node as usize + 1] += 1;
        }
        for i in 0..nodes {
            start[i + 1] += start[i];
        }
        let mut next = start.clone();
        let mut around = vec![0u32; 3 * triangles.len()];
        for (t, corners) in triangles.iter().enumerate() {
            for &node in corners {
                let place = &mut next[node as usize];
                around[*place as usize] = t as u32;
                *place += 1;
            }
        }
        Self {
            start,
            triangles: around,
        }
    }
}

/// r² of each node; on the outer circle R² - (z - zc)², so that the bulges close exactly.
fn squared_radii(mesh: &Mesh) -> Vec<f64> {
    let mut s: Vec<f64> = mesh.nodes.par_iter().map(|p| p.r * p.r).collect();
    let Some(circle) = mesh.circle else { return s };
    for edge in mesh
        .curve_edges
        .iter()
        .filter(|edge| edge.boundary == Boundary::Circle)
    {
        for node in edge.nodes.map(|n| n as usize) {
            let point = mesh.nodes[node];
            if point.r > 0.0 {
                let height = point.z - circle.centre_z_m;
                s[node] = (circle.radius_m - height) * (circle.radius_m + height);
            }
        }
    }
    s
}

fn straight_elements(triangles: &[[u32; 3]], s: &[f64], z: &[f64]) -> Result<Vec<Element>, SpaceError> {
    triangles
        .par_iter()
        .enumerate()
        .map(|(triangle, corners)| {
            let s = corners.map(|node| s[node as usize]);
            let z = corners.map(|node| z[node as usize]);
            Element::straight(s, z).ok_or(SpaceError::Inverted {
                triangle,
                r_m: s.map(f64::sqrt).iter().sum::<f64>() / 3.0,
                z_m: z.iter().sum::<f64>() / 3.0,
            })
        })
        .collect()
}

/// The mesh's edges on the outer circle with their triangles.
fn arcs(mesh: &Mesh, circle: OuterCircle, fans: &Fans, elements: &[Element]) -> Result<Vec<Arc>, SpaceError> {
    let mut arcs = Vec::new();
    for edge in mesh
        .curve_edges
        .iter()
        .filter(|edge| edge.boundary == Boundary::Circle)
    {
        let [mut low, mut high] = edge.nodes;
        if mesh.nodes[low as usize].z > mesh.nodes[high as usize].z {
            (low, high) = (high, low);
        }
        let around = fans.start[low as usize] as usize..fans.start[low as usize + 1] as usize;
        let found = fans.triangles[around].iter().find_map(|&t| {
            let corners = mesh.triangles[t as usize];
            (0..3)
                .find(|&i| corners[(i + 1) % 3] == low && corners[(i + 2) % 3] == high)
                .map(|i| (t, i))
        });
        let Some((triangle, inner)) = found else {
            return Err(SpaceError::CircleEdge { nodes: [low, high] });
        };
        let corners = mesh.triangles[triangle as usize];
        let b = elements[triangle as usize].b;
        let turned = [inner, (inner + 1) % 3, (inner + 2) % 3];
        let x = [low, high]
            .map(|n| ((mesh.nodes[n as usize].z - circle.centre_z_m) / circle.radius_m).clamp(-1.0, 1.0));
        arcs.push(Arc::new(
            triangle,
            turned.map(|i| corners[i]),
            x,
            turned.map(|i| b[i]),
            circle.radius_m,
        ));
    }
    let covered: f64 = arcs.iter().map(Arc::width).sum();
    let wanted = if mesh.mirror_z_m.is_some() { 1.0 } else { 2.0 };
    if (covered - wanted).abs() > 1e-9 {
        return Err(SpaceError::CircleNotCovered { covered, wanted });
    }
    let mut used: Vec<u32> = arcs.iter().map(|arc| arc.triangle).collect();
    used.sort_unstable();
    if let Some(pair) = used.windows(2).find(|pair| pair[0] == pair[1]) {
        return Err(SpaceError::TwoCircleEdges {
            triangle: pair[0] as usize,
        });
    }
    Ok(arcs)
}

/// (number of each node or FIXED, node of each number).
fn number_free_nodes(mesh: &Mesh, mirror: Option<MirrorCurrents>) -> (Vec<u32>, Vec<u32>) {
    let mut fixed: Vec<bool> = mesh.nodes.par_iter().map(|p| p.r == 0.0).collect();
    for edge in &mesh.curve_edges {
        let holds = match edge.boundary {
            Boundary::Wall | Boundary::Axis => true,
            Boundary::Mirror => mirror == Some(MirrorCurrents::Opposite),
            Boundary::None | Boundary::Circle => false,
        };
        if holds {
            for node in edge.nodes {
                fixed[node as usize] = true;
            }
        }
    }
    let places = numbering::along_curve(|i| mesh.nodes[i].r, |i| mesh.nodes[i].z, fixed.len());
    let mut free_nodes: Vec<u32> = (0..fixed.len() as u32).filter(|&n| !fixed[n as usize]).collect();
    free_nodes.par_sort_unstable_by_key(|&node| (places[node as usize], node));
    let mut free = vec![FIXED; fixed.len()];
    for (number, &node) in free_nodes.iter().enumerate() {
        free[node as usize] = number as u32;
    }
    (free, free_nodes)
}

/// Why a mesh cannot carry the element.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SpaceError {
    /// A triangle is flat or inverted in (s, z).
    #[error("triangle {triangle} at r = {r_m:e} m, z = {z_m:e} m is flat or inverted in (r², z)")]
    Inverted {
        /// Index of the triangle.
        triangle: usize,
        /// Its middle, m.
        r_m: f64,
        /// Its middle, m.
        z_m: f64,
    },
    /// The mesh has a mirror and the currents of the image were not given, or the other way round.
    #[error("{}", if *.in_mesh {
        "the mesh has a mirror, but the sense of the image's currents was not given"
    } else {
        "currents of a mirror image were given, but the mesh has no mirror"
    })]
    MirrorMismatch {
        /// Whether the mesh has the mirror.
        in_mesh: bool,
    },
    /// An edge on the outer circle has no triangle on its inner side.
    #[error("the edge between nodes {} and {} on the outer circle has no triangle inside", .nodes[0], .nodes[1])]
    CircleEdge {
        /// The edge's nodes, lower first.
        nodes: [u32; 2],
    },
    /// The edges on the outer circle do not reach from pole to pole (or from the mirror to the pole).
    #[error("edges on the outer circle span {covered} of {wanted} radii in height")]
    CircleNotCovered {
        /// Height covered over the radius.
        covered: f64,
        /// 2, or 1 with a mirror.
        wanted: f64,
    },
    /// A triangle has two edges on the outer circle.
    #[error("triangle {triangle} has two edges on the outer circle")]
    TwoCircleEdges {
        /// Index of the triangle.
        triangle: usize,
    },
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
