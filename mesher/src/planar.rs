//! Closed loops of drawn curves made a planar graph: all crossings and touches found, drawing noise welded, and
//! for every face how often each loop turns around it. Knows nothing of regions or parts.
//!
//! The way: curves are cut where they cross, touch, or come within the weld tolerance of a vertex, and moved onto
//! the vertex; pieces that then run side by side between the same vertices become one. This is repeated until
//! nothing changes (snap rounding, after Hobby, Comput. Geom. 13, 1999, here with a tolerance instead of a pixel
//! grid, and with arcs). Moving a curve changes no topology that is not repaired in the next round. What is inside
//! what is then read off the graph alone: each edge remembers how often each loop runs along it, and the winding
//! numbers of neighbouring faces differ by just that. No test point near a curve decides anything.

mod crossing;
mod faces;
mod pairs;
mod piece;
mod rounds;
#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
mod vertices;

use crate::curve::{Curve, Point};

pub(crate) use crossing::{depth_between, meetings};
pub(crate) use faces::leaving_in_order;
pub(crate) use pairs::for_each_close_pair;

/// Lengths below which things are the same.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Tolerance {
    /// Vertices nearer than this are made one, m.
    pub weld_m: f64,
    /// Differences below this are round-off, not drawing noise, m.
    pub round_off_m: f64,
    /// Points this near (within `weld_m`) to the height of the mirror are put on it. The axis always counts so.
    pub mirror_z_m: Option<f64>,
}

impl Tolerance {
    /// Curves nearer than this to a vertex or to each other are made to meet, m. Half the distance that vertices
    /// keep: then cutting a curve at a vertex beside it always leaves shorter pieces, and cutting ends.
    pub fn touch_m(&self) -> f64 {
        0.5 * self.weld_m
    }
}

/// How often each loop runs along an edge, or turns around a face: (loop, times), by loop, never zero times.
pub(crate) type Windings = Vec<(u32, i32)>;

/// An edge of the planar graph.
#[derive(Clone, Debug)]
pub(crate) struct GraphEdge {
    pub start: u32,
    pub end: u32,
    pub curve: Curve,
    /// How often each loop runs along it in its direction (negative: against it).
    pub loops: Windings,
    /// The drawn curves it is a piece of: indices counted through all loops, in order.
    pub drawn: Vec<u32>,
    /// Face on its left and on its right.
    pub faces: [u32; 2],
}

/// A face: a closed walk along edges with the face on the left. Faces with holes have several.
#[derive(Clone, Debug)]
pub(crate) struct Face {
    /// How often each loop turns around it.
    pub windings: Windings,
}

/// A place where the drawing was moved by more than round-off.
#[derive(Clone, Debug)]
pub(crate) struct Move {
    pub at: Point,
    pub by_m: f64,
    pub loops: Vec<u32>,
}

/// Loops made planar.
#[derive(Clone, Debug)]
pub(crate) struct PlanarGraph {
    pub vertices: Vec<Point>,
    pub edges: Vec<GraphEdge>,
    pub faces: Vec<Face>,
    pub moves: Vec<Move>,
}

/// The graph could not be made planar near this point.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Entangled {
    pub at: Point,
}

/// Makes closed loops of curves a planar graph. Earlier loops move less than later ones: where two are welded, the
/// earlier one's curve is kept.
pub(crate) fn planar_graph(loops: &[&[Curve]], tolerance: Tolerance) -> Result<PlanarGraph, Entangled> {
    let mut rounds = rounds::Rounds::of(loops, tolerance);
    rounds.run()?;
    faces::with_faces(rounds)
}

/// Adds `times` runs of each loop of `more` to `sum`, keeping it sorted and free of zeros.
pub(crate) fn add_windings(sum: &mut Windings, more: &[(u32, i32)], times: i32) {
    if times == 0 {
        return;
    }
    for &(looped, count) in more {
        match sum.binary_search_by_key(&looped, |entry| entry.0) {
            Ok(k) => {
                sum[k].1 += times * count;
                if sum[k].1 == 0 {
                    sum.remove(k);
                }
            }
            Err(k) => sum.insert(k, (looped, times * count)),
        }
    }
}
