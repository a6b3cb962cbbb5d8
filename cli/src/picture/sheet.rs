//! What the picture of a field is made from: the visible triangles, with flux and B at their corners.

use std::collections::HashMap;

use mesher::Point;
use solver::Solution;

use super::beyond;
use super::view::View;
use crate::case::Case;

/// The visible part of a solution, and the exterior field where the window reaches beyond the mesh.
#[derive(Debug)]
pub struct Sheet {
    /// Nodes, m.
    pub nodes: Vec<Point>,
    /// Flux through the circle of each node, Wb.
    pub flux_wb: Vec<f64>,
    /// Corners of the visible triangles.
    pub triangles: Vec<[u32; 3]>,
    /// (B_r, B_z) at the corners of each, T. At the edge of a part each side has its own.
    pub corner_b_t: Vec<[[f32; 2]; 3]>,
}

/// Marks a node at which several parts meet.
const SEVERAL: u32 = u32::MAX;
/// Marks a node without triangles.
const UNSEEN: u32 = u32::MAX - 1;

impl Sheet {
    /// The visible part of a solution.
    pub fn of(case: &Case, solution: &Solution, view: &View) -> Self {
        let mesh = &solution.mesh;
        let mut nodes = mesh.nodes.clone();
        let mut flux_wb: Vec<f64> = solution
            .field
            .psi_wb_per_rad
            .iter()
            .map(|psi| std::f64::consts::TAU * psi)
            .collect();
        let mut node_b_t = solution.field.node_b_t.clone();
        let (mut triangles, mut part_of, mut cell_b_t) = (Vec::new(), Vec::new(), Vec::new());
        for (index, corners) in mesh.triangles.iter().enumerate() {
            if view.shows(&corners.map(|node| mesh.nodes[node as usize])) {
                triangles.push(*corners);
                part_of.push(mesh.part_of[index]);
                cell_b_t.push(solution.field.cell_b_t[index]);
            }
        }
        if let Some(ring) = beyond::ring(case, solution, view) {
            flux_wb.extend(&ring.flux_wb);
            node_b_t.extend(&ring.node_b_t);
            ring.rim_b_t
                .iter()
                .for_each(|&(node, b)| node_b_t[node as usize] = b);
            nodes.extend(&ring.nodes);
            part_of.resize(part_of.len() + ring.triangles.len(), 0);
            cell_b_t.extend(&ring.cell_b_t);
            triangles.extend(&ring.triangles);
        }
        let corner_b_t = corner_values(&triangles, &part_of, &cell_b_t, &node_b_t);
        Self {
            nodes,
            flux_wb,
            triangles,
            corner_b_t,
        }
    }
}

/// B at the corners: the recovered value inside a part, the mean over the part's own triangles at its edge.
fn corner_values(
    triangles: &[[u32; 3]],
    part_of: &[u32],
    cell_b_t: &[[f64; 2]],
    node_b_t: &[[f64; 2]],
) -> Vec<[[f32; 2]; 3]> {
    let mut part_at = vec![UNSEEN; node_b_t.len()];
    for (corners, &part) in triangles.iter().zip(part_of) {
        for &node in corners {
            let at = &mut part_at[node as usize];
            *at = if *at == UNSEEN || *at == part {
                part
            } else {
                SEVERAL
            };
        }
    }
    let mut sums: HashMap<(u32, u32), [f64; 3]> = HashMap::new();
    for ((corners, &part), b) in triangles.iter().zip(part_of).zip(cell_b_t) {
        for &node in corners.iter().filter(|&&node| part_at[node as usize] == SEVERAL) {
            let sum = sums.entry((node, part)).or_default();
            *sum = [sum[0] + b[0], sum[1] + b[1], sum[2] + 1.0];
        }
    }
    let of_corner = |node: u32, part: u32| match sums.get(&(node, part)) {
        Some([r, z, count]) => [(r / count) as f32, (z / count) as f32],
        None => node_b_t[node as usize].map(|part| part as f32),
    };
    triangles
        .iter()
        .zip(part_of)
        .map(|(corners, &part)| corners.map(|node| of_corner(node, part)))
        .collect()
}
