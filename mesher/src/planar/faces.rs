//! Faces of the planar graph and how often each loop turns around them.

use std::collections::VecDeque;

use super::rounds::Rounds;
use super::{Entangled, Face, GraphEdge, PlanarGraph, Windings, add_windings};
use crate::curve::{Bounds, Curve, Point};

/// Finds the faces of pieces that meet only at their ends.
pub(super) fn with_faces(rounds: Rounds) -> Result<PlanarGraph, Entangled> {
    let Rounds {
        vertices,
        pieces,
        moves,
        ..
    } = rounds;
    let vertices = vertices.points;
    let mut edges: Vec<GraphEdge> = pieces
        .into_iter()
        .map(|piece| GraphEdge {
            start: piece.start,
            end: piece.end,
            curve: piece.curve,
            loops: piece.loops,
            drawn: piece.drawn,
            faces: [0; 2],
        })
        .collect();
    let mut walks = Walks::of(&mut edges, vertices.len());
    let figures = Figures::of(&edges, &vertices, &walks)?;
    figures.wind(&edges, &vertices, &mut walks)?;
    // Every walk was reached from the outer walk of its figure: each edge joins the walks on its two sides.
    let faces = walks
        .windings
        .into_iter()
        .map(|windings| Face {
            windings: windings.unwrap_or_default(),
        })
        .collect();
    Ok(PlanarGraph {
        vertices,
        edges,
        faces,
        moves,
    })
}

/// Half edge `2 e` runs along edge e, `2 e + 1` against it.
fn origin(edges: &[GraphEdge], half: usize) -> u32 {
    let edge = &edges[half / 2];
    if half.is_multiple_of(2) {
        edge.start
    } else {
        edge.end
    }
}

/// Half edges leaving each vertex, counter-clockwise.
pub(crate) fn leaving_in_order(
    ends: &[(u32, u32)],
    curve: impl Fn(usize) -> Curve,
    count: usize,
) -> Vec<Vec<usize>> {
    let mut leaving = vec![Vec::new(); count];
    for (k, &(start, end)) in ends.iter().enumerate() {
        leaving[start as usize].push(2 * k);
        leaving[end as usize].push(2 * k + 1);
    }
    for around in &mut leaving {
        let chord = |half: &usize| {
            let curve = curve(half / 2);
            curve.start().distance(curve.end())
        };
        // Seen on a circle around the vertex that cuts each of them once: there even tangent ones are apart.
        let radius = 0.75 * around.iter().map(chord).fold(f64::INFINITY, f64::min);
        around.sort_by_cached_key(|&half| {
            let edge = curve(half / 2);
            let outward = if half.is_multiple_of(2) {
                edge
            } else {
                edge.reversed()
            };
            Ordered(direction_at(&outward, radius))
        });
    }
    leaving
}

/// Direction (rad) in which a curve of at most half a turn is at distance `radius` from its start.
fn direction_at(curve: &Curve, radius: f64) -> f64 {
    let chord = curve.end() - curve.start();
    let half = 0.5 * curve.sweep();
    let reached = (radius * half.sin() / chord.norm()).clamp(-1.0, 1.0).asin();
    let angle = chord.z.atan2(chord.r) + reached - half;
    angle.rem_euclid(std::f64::consts::TAU)
}

#[derive(PartialEq)]
struct Ordered(f64);
impl Eq for Ordered {}
impl PartialOrd for Ordered {
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}
impl Ord for Ordered {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        self.0.total_cmp(&other.0)
    }
}

/// Closed walks with the face on the left.
struct Walks {
    area_m2: Vec<f64>,
    windings: Vec<Option<Windings>>,
    /// A half edge of each.
    first: Vec<usize>,
}

impl Walks {
    /// Walks around all faces; tells each edge its two walks.
    fn of(edges: &mut [GraphEdge], vertex_count: usize) -> Self {
        let ends: Vec<(u32, u32)> = edges.iter().map(|edge| (edge.start, edge.end)).collect();
        let leaving = leaving_in_order(&ends, |k| edges[k].curve, vertex_count);
        let mut next = vec![0; 2 * edges.len()];
        for around in &leaving {
            for (k, &half) in around.iter().enumerate() {
                // Arriving by the twin of `half`, the face on the left continues along its clockwise neighbour.
                next[half ^ 1] = around[(k + around.len() - 1) % around.len()];
            }
        }
        let mut walk_of = vec![u32::MAX; 2 * edges.len()];
        let mut walks = Self {
            area_m2: Vec::new(),
            windings: Vec::new(),
            first: Vec::new(),
        };
        for start in 0..next.len() {
            if walk_of[start] != u32::MAX {
                continue;
            }
            let mut area = 0.0;
            let mut half = start;
            while walk_of[half] == u32::MAX {
                walk_of[half] = walks.first.len() as u32;
                let term = edges[half / 2].curve.area_term_m2();
                area += if half.is_multiple_of(2) { term } else { -term };
                half = next[half];
            }
            walks.area_m2.push(area);
            walks.windings.push(None);
            walks.first.push(start);
        }
        for (k, edge) in edges.iter_mut().enumerate() {
            edge.faces = [walk_of[2 * k], walk_of[2 * k + 1]];
        }
        walks
    }
}

/// Connected figures of edges.
struct Figures {
    /// Figure of each vertex; `u32::MAX` for a vertex without edges.
    of_vertex: Vec<u32>,
    /// The walk around the outside of each.
    outer: Vec<u32>,
    /// A vertex of each.
    vertex: Vec<u32>,
}

impl Figures {
    fn of(edges: &[GraphEdge], vertices: &[Point], walks: &Walks) -> Result<Self, Entangled> {
        let mut neighbours = vec![Vec::new(); vertices.len()];
        for edge in edges {
            neighbours[edge.start as usize].push(edge.end);
            neighbours[edge.end as usize].push(edge.start);
        }
        let mut figures = Self {
            of_vertex: vec![u32::MAX; vertices.len()],
            outer: Vec::new(),
            vertex: Vec::new(),
        };
        let mut excess: Vec<i64> = Vec::new(); // vertices - edges + walks: 2 where the figure is planar
        for seed in 0..vertices.len() {
            if neighbours[seed].is_empty() || figures.of_vertex[seed] != u32::MAX {
                continue;
            }
            let figure = figures.vertex.len() as u32;
            figures.vertex.push(seed as u32);
            figures.outer.push(u32::MAX);
            excess.push(0);
            figures.of_vertex[seed] = figure;
            let mut queue = vec![seed];
            while let Some(vertex) = queue.pop() {
                excess[figure as usize] += 1;
                for &other in &neighbours[vertex] {
                    if figures.of_vertex[other as usize] == u32::MAX {
                        figures.of_vertex[other as usize] = figure;
                        queue.push(other as usize);
                    }
                }
            }
        }
        for edge in edges {
            excess[figures.of_vertex[edge.start as usize] as usize] -= 1;
        }
        for (walk, &first) in walks.first.iter().enumerate() {
            let figure = figures.of_vertex[origin(edges, first) as usize] as usize;
            excess[figure] += 1;
            // The outer walk runs around all others, backwards: its area is the most negative.
            let outer = &mut figures.outer[figure];
            if *outer == u32::MAX || walks.area_m2[walk] < walks.area_m2[*outer as usize] {
                *outer = walk as u32;
            }
        }
        match excess.iter().position(|&count| count != 2) {
            Some(figure) => Err(Entangled {
                at: vertices[figures.vertex[figure] as usize],
            }),
            None => Ok(figures),
        }
    }

    /// Winding numbers of all walks: outside each figure from the other figures around it, then from face to face
    /// across the edges.
    fn wind(&self, edges: &[GraphEdge], vertices: &[Point], walks: &mut Walks) -> Result<(), Entangled> {
        let mut queue = VecDeque::new();
        let boxes: Vec<Bounds> = edges.iter().map(|edge| edge.curve.bounds()).collect();
        for (figure, &outer) in self.outer.iter().enumerate() {
            let point = vertices[self.vertex[figure] as usize];
            let mut windings = Windings::new();
            for (edge, bounds) in edges.iter().zip(&boxes) {
                let beside = point.z < bounds.low.z || point.z > bounds.high.z || point.r > bounds.high.r;
                if !beside && self.of_vertex[edge.start as usize] != figure as u32 {
                    add_windings(&mut windings, &edge.loops, edge.curve.winding_about(point));
                }
            }
            walks.windings[outer as usize] = Some(windings);
            queue.push_back(outer);
        }
        let mut along = vec![Vec::new(); walks.first.len()];
        for (k, edge) in edges.iter().enumerate() {
            along[edge.faces[0] as usize].push(2 * k);
            along[edge.faces[1] as usize].push(2 * k + 1);
        }
        while let Some(walk) = queue.pop_front() {
            let Some(here) = walks.windings[walk as usize].clone() else {
                continue;
            };
            for &half in &along[walk as usize] {
                let edge = &edges[half / 2];
                let forth = half.is_multiple_of(2);
                let mut there = here.clone();
                add_windings(&mut there, &edge.loops, if forth { -1 } else { 1 });
                let beyond = edge.faces[usize::from(forth)] as usize;
                match &walks.windings[beyond] {
                    None => {
                        walks.windings[beyond] = Some(there);
                        queue.push_back(beyond as u32);
                    }
                    Some(known) if *known != there => {
                        return Err(Entangled {
                            at: edge.curve.midpoint(),
                        });
                    }
                    Some(_) => {}
                }
            }
        }
        Ok(())
    }
}
