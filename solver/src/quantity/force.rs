//! Axial forces: on movers by virtual displacement of the discrete energy, on coil sides by J x B.
//!
//! The displacement field is g(r, z) along z: 1 on the mover, 0 on everything else, falling smoothly in the air
//! between. The derivative of the discrete energy with respect to the displacement is an integral over the
//! elements where g varies only (Coulomb, IEEE Trans. Magn. 19, 1983).

use std::collections::BinaryHeap;
use std::f64::consts::{PI, TAU};

use mesher::Mesh;
use mesher::arrange::Boundary;

use super::{CoilSideResult, MoverResult};
use crate::MU0;
use crate::nested::prolong;
use crate::operating::Operating;
use crate::problem::{MagneticLaw, Mover, Problem};
use crate::winding::section_m2;

/// How a mover is held in the mesh.
#[derive(Clone, Debug, PartialEq)]
pub enum Hold {
    /// Surrounded by air: g at every node.
    Free(Vec<f64>),
    /// Touches other material.
    Touching,
    /// Touches the mirror: no force is defined.
    OnMirror,
}

/// Which triangles are the mover's, which are passive surroundings (air, or as good as air) and may carry a
/// varying g, and which are other material.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Role {
    Mover,
    Air,
    Other,
}

fn roles(mesh: &Mesh, problem: &Problem, mover: &Mover) -> Vec<Role> {
    let active = |region: usize| {
        let wound = problem.windings.iter().any(|w| w.regions.contains(&region));
        wound
            || problem.regions[region].law
                != MagneticLaw::Linear {
                    relative_permeability: 1.0,
                }
    };
    let of_part: Vec<Role> = mesh
        .parts
        .iter()
        .map(|part| match part.region {
            Some(r) if mover.regions.contains(&r) => Role::Mover,
            Some(r) if active(r) => Role::Other,
            _ => Role::Air,
        })
        .collect();
    mesh.part_of.iter().map(|&p| of_part[p as usize]).collect()
}

/// Lays g over a mesh.
pub fn hold(mesh: &Mesh, problem: &Problem, mover: &Mover) -> Hold {
    let roles = roles(mesh, problem, mover);
    let (mut of_mover, mut of_other) = (vec![false; mesh.nodes.len()], vec![false; mesh.nodes.len()]);
    for (triangle, role) in mesh.triangles.iter().zip(&roles) {
        for &n in triangle {
            of_mover[n as usize] |= *role == Role::Mover;
            of_other[n as usize] |= *role == Role::Other;
        }
    }
    let mut touches_mirror = false;
    for edge in mesh
        .curve_edges
        .iter()
        .filter(|e| !matches!(e.boundary, Boundary::None | Boundary::Axis))
    {
        for n in edge.nodes {
            touches_mirror |= of_mover[n as usize] && edge.boundary == Boundary::Mirror;
            of_other[n as usize] = true;
        }
    }
    if touches_mirror {
        return Hold::OnMirror;
    }
    if of_mover.iter().zip(&of_other).any(|(a, b)| *a && *b) {
        return Hold::Touching;
    }
    fix_circle_triangles(mesh, &of_mover, &mut of_other);
    let (near, far) = (
        distances(mesh, &roles, &of_mover),
        distances(mesh, &roles, &of_other),
    );
    let weight = |n: usize| match (of_mover[n], of_other[n]) {
        (true, _) => 1.0,
        (_, true) => 0.0,
        _ if near[n].is_finite() && far[n].is_finite() => far[n] / (near[n] + far[n]),
        _ => 0.0,
    };
    Hold::Free((0..mesh.nodes.len()).map(weight).collect())
}

/// The curved triangles at the outer circle carry no displacement: the exterior does not move.
fn fix_circle_triangles(mesh: &Mesh, of_mover: &[bool], fixed: &mut [bool]) {
    let mut on_circle = vec![false; mesh.nodes.len()];
    for edge in mesh.curve_edges.iter().filter(|e| e.boundary == Boundary::Circle) {
        edge.nodes.iter().for_each(|&n| on_circle[n as usize] = true);
    }
    for triangle in &mesh.triangles {
        if triangle.iter().filter(|&&n| on_circle[n as usize]).count() == 2 {
            triangle
                .iter()
                .for_each(|&n| fixed[n as usize] |= !of_mover[n as usize]);
        }
    }
}

#[derive(PartialEq)]
struct Reached {
    distance: f64,
    node: u32,
}

impl Eq for Reached {}

impl Ord for Reached {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        other
            .distance
            .total_cmp(&self.distance)
            .then(other.node.cmp(&self.node))
    }
}

impl PartialOrd for Reached {
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

/// Distance of every node from the marked ones along edges of air triangles (Dijkstra), m.
fn distances(mesh: &Mesh, roles: &[Role], from: &[bool]) -> Vec<f64> {
    let mut start = vec![0u32; mesh.nodes.len() + 1];
    let air = || {
        mesh.triangles
            .iter()
            .zip(roles)
            .filter(|(_, role)| **role == Role::Air)
            .map(|(t, _)| t)
    };
    air().flatten().for_each(|&n| start[n as usize + 1] += 2);
    for n in 0..mesh.nodes.len() {
        start[n + 1] += start[n];
    }
    let mut fill = start.clone();
    let mut next = vec![0u32; *start.last().unwrap_or(&0) as usize];
    for t in air() {
        for i in 0..3 {
            for j in [1, 2] {
                next[fill[t[i] as usize] as usize] = t[(i + j) % 3];
                fill[t[i] as usize] += 1;
            }
        }
    }
    let mut distance = vec![f64::INFINITY; mesh.nodes.len()];
    let mut queue = BinaryHeap::new();
    for n in (0..mesh.nodes.len()).filter(|&n| from[n]) {
        distance[n] = 0.0;
        queue.push(Reached {
            distance: 0.0,
            node: n as u32,
        });
    }
    while let Some(Reached { distance: d, node }) = queue.pop() {
        if d > distance[node as usize] {
            continue;
        }
        let here = mesh.nodes[node as usize];
        for &other in &next[start[node as usize] as usize..start[node as usize + 1] as usize] {
            let there = mesh.nodes[other as usize];
            let reached = d + (here.r - there.r).hypot(here.z - there.z);
            if reached < distance[other as usize] {
                distance[other as usize] = reached;
                queue.push(Reached {
                    distance: reached,
                    node: other,
                });
            }
        }
    }
    distance
}

/// The same displacement field on the nested refinement: it is linear along every edge.
pub fn refine(hold: &Hold, coarse: &Mesh, fine: &Mesh) -> Hold {
    match hold {
        Hold::Free(g) => Hold::Free(prolong(g, coarse, fine)),
        other => other.clone(),
    }
}

/// Forces on the movers; `holds` in the order of `Problem::movers`.
pub fn movers(op: &Operating<'_>, holds: &[Hold]) -> Vec<MoverResult<f64>> {
    op.problem
        .movers
        .iter()
        .zip(holds)
        .map(|(mover, hold)| MoverResult {
            name: mover.name.clone(),
            force_n: match hold {
                Hold::Free(g) => Some(virtual_displacement(op, g)),
                Hold::Touching => Some(air_film(op, mover)),
                Hold::OnMirror => None,
            },
            touches_other_material: *hold == Hold::Touching,
        })
        .collect()
}

fn virtual_displacement(op: &Operating<'_>, g: &[f64]) -> f64 {
    let mut sum = 0.0;
    for (t, element) in op.space.elements.iter().enumerate() {
        let corner = op.space.corners(t, g);
        if corner[0] == corner[1] && corner[1] == corner[2] {
            continue;
        }
        let [g_s, g_z] = element.gradient(corner);
        let [psi_s, psi_z] = op.gradient[t];
        let area = element.area * (-4.0 * psi_s * psi_z * g_s + 2.0 * psi_s * psi_s * g_z);
        sum += op.materials.nu[t] * (area - 0.5 * element.over_s * psi_z * psi_z * g_z);
    }
    -PI * sum
}

/// Limit of a vanishing air film around a mover that touches other material: the closed surface integral of
/// (B_n²/mu0 - mu0 H_t²) n_z / 2 + B_n H_t t_z, with B_n and H_t averaged from both sides.
fn air_film(op: &Operating<'_>, mover: &Mover) -> f64 {
    let roles = roles(op.mesh, op.problem, mover);
    let mut sum = 0.0;
    for (inside, triangle) in op.mesh.triangles.iter().enumerate() {
        if roles[inside] != Role::Mover {
            continue;
        }
        for i in 0..3 {
            let (a, b) = (triangle[i], triangle[(i + 1) % 3]);
            let Some(outside) = across(op, inside, a, b) else {
                continue;
            };
            if roles[outside] == Role::Mover {
                continue;
            }
            let (p, q) = (op.mesh.nodes[a as usize], op.mesh.nodes[b as usize]);
            let (dr, dz) = (q.r - p.r, q.z - p.z);
            let length = dr.hypot(dz);
            let (t, n) = ([dr / length, dz / length], [dz / length, -dr / length]);
            let r = 0.5 * (p.r + q.r);
            let along = |v: [f64; 2], d: [f64; 2]| v[0] * d[0] + v[1] * d[1];
            let side = |k: usize| {
                let [psi_s, psi_z] = op.gradient[k];
                let b = [-psi_z / r, 2.0 * psi_s];
                (along(b, n), along(op.h_of(k, b), t))
            };
            let ((bn1, ht1), (bn2, ht2)) = (side(inside), side(outside));
            let (bn, ht) = (0.5 * (bn1 + bn2), 0.5 * (ht1 + ht2));
            let pull = 0.5 * (bn * bn / MU0 - MU0 * ht * ht) * n[1] + bn * ht * t[1];
            sum += pull * TAU * r * length;
        }
    }
    sum
}

/// The triangle on the other side of edge a-b.
fn across(op: &Operating<'_>, triangle: usize, a: u32, b: u32) -> Option<usize> {
    op.space
        .fan(a as usize)
        .iter()
        .map(|&t| t as usize)
        .find(|&t| t != triangle && op.mesh.triangles[t].contains(&b))
}

/// Forces on winding regions that carry current: 2 pi int J psi_z dr dz (B_r = -psi_z / r).
pub fn coil_sides(op: &Operating<'_>) -> Vec<CoilSideResult<f64>> {
    let mut force = vec![0.0; op.problem.regions.len()];
    for (t, &j) in op.cell_j_a_per_m2.iter().enumerate() {
        if let (true, Some(region)) = (j != 0.0, op.region_of(t)) {
            force[region] += TAU * j * op.gradient[t][1] * section_m2(op.space, t);
        }
    }
    let carries = |r: usize| {
        op.problem
            .windings
            .iter()
            .zip(&op.laid)
            .any(|(w, l)| l.current_a != 0.0 && w.regions.contains(&r))
    };
    (0..force.len())
        .filter(|&r| carries(r))
        .map(|r| CoilSideResult {
            region: op.problem.regions[r].name.clone(),
            force_n: force[r],
        })
        .collect()
}
