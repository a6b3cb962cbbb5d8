//! Vertices that nothing needs are removed: where an arc was cut for handling, or crossed by what painting hid.

use std::collections::HashSet;
use std::f64::consts::PI;

use super::graph::{Arrangement, PlanarEdge};
use super::paint::Drawn;
use crate::curve::{Curve, Point};

/// Arcs are not joined beyond this sweep: well below a half turn, where chords are still a fair picture of them.
const LONGEST_SWEEP: f64 = 0.75 * PI;

/// Joins the two edges at a vertex where nothing else ends, when they are pieces of one drawn curve and the vertex
/// lies on the joined curve to round-off; then numbers the vertices in use anew, in order.
pub(super) fn remove_needless_vertices(arrangement: &mut Drawn, round_off_m: f64) {
    let count = arrangement.graph.vertices.len();
    let mut at_vertex = vec![Vec::new(); count];
    for (k, edge) in arrangement.graph.edges.iter().enumerate() {
        at_vertex[edge.start as usize].push(k);
        at_vertex[edge.end as usize].push(k);
    }
    let mut gone = HashSet::new();
    for vertex in 0..count {
        let &[a, b] = at_vertex[vertex].as_slice() else {
            continue;
        };
        let Some(joined) = joined(arrangement, a, b, vertex as u32, round_off_m) else {
            continue;
        };
        arrangement.graph.edges[a] = joined;
        let common: Vec<u32> = arrangement.drawn[a]
            .iter()
            .filter(|id| arrangement.drawn[b].contains(id))
            .copied()
            .collect();
        arrangement.drawn[a] = common;
        gone.insert(b);
        for end in [joined.start, joined.end] {
            for k in &mut at_vertex[end as usize] {
                if *k == b {
                    *k = a;
                }
            }
        }
    }
    let keep = |k: &usize| !gone.contains(k);
    let graph = &mut arrangement.graph;
    graph.edges = (0..graph.edges.len())
        .filter(keep)
        .map(|k| graph.edges[k])
        .collect();
    number_anew(graph);
}

/// Edge `a` continued by `b` through `vertex`, in the direction of `a`.
fn joined(arrangement: &Drawn, a: usize, b: usize, vertex: u32, round_off_m: f64) -> Option<PlanarEdge> {
    if a == b
        || !arrangement.drawn[a]
            .iter()
            .any(|id| arrangement.drawn[b].contains(id))
    {
        return None;
    }
    let edges = &arrangement.graph.edges;
    let oriented = |edge: PlanarEdge, arrives: bool| {
        if (edge.end == vertex) == arrives {
            edge
        } else {
            reversed(edge)
        }
    };
    let (first, second) = (oriented(edges[a], true), oriented(edges[b], false));
    let same = first.left == second.left && first.right == second.right && first.boundary == second.boundary;
    if !same || first.start == second.end {
        return None;
    }
    let middle = arrangement.graph.vertices[vertex as usize];
    let curve = joined_curve(&first.curve, &second.curve, middle, round_off_m)?;
    Some(PlanarEdge {
        start: first.start,
        end: second.end,
        curve,
        ..first
    })
}

fn joined_curve(first: &Curve, second: &Curve, middle: Point, round_off_m: f64) -> Option<Curve> {
    let (from, to) = (first.start(), second.end());
    let curve = match (first, second) {
        (Curve::Line { .. }, Curve::Line { .. }) => Curve::line(from, to),
        (Curve::Arc { centre, .. }, Curve::Arc { centre: other, .. }) => {
            let sweep = first.sweep() + second.sweep();
            let one_sense = first.sweep() * second.sweep() > 0.0;
            if !one_sense || sweep.abs() > LONGEST_SWEEP || centre.distance(*other) > 100.0 * round_off_m {
                return None;
            }
            Curve::Arc {
                from,
                to,
                centre: *centre,
                sweep,
            }
        }
        _ => return None,
    };
    let samples = [middle, first.midpoint(), second.midpoint()];
    samples
        .iter()
        .all(|point| curve.distance_m(*point) <= 10.0 * round_off_m)
        .then_some(curve)
}

fn reversed(edge: PlanarEdge) -> PlanarEdge {
    PlanarEdge {
        start: edge.end,
        end: edge.start,
        curve: edge.curve.reversed(),
        left: edge.right,
        right: edge.left,
        boundary: edge.boundary,
    }
}

/// Drops vertices without edges.
fn number_anew(graph: &mut Arrangement) {
    let mut used = vec![false; graph.vertices.len()];
    for edge in &graph.edges {
        used[edge.start as usize] = true;
        used[edge.end as usize] = true;
    }
    let mut number = vec![0; used.len()];
    let mut kept = Vec::new();
    for (vertex, &in_use) in used.iter().enumerate() {
        if in_use {
            number[vertex] = kept.len() as u32;
            kept.push(graph.vertices[vertex]);
        }
    }
    graph.vertices = kept;
    for edge in &mut graph.edges {
        edge.start = number[edge.start as usize];
        edge.end = number[edge.end as usize];
    }
}
