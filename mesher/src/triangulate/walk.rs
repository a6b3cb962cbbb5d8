//! Walks through the triangulation: which face holds a point, what lies in the way, what it would encroach on.

use super::{
    Edge, Face, FaceOf, FixedDirectedEdgeHandle, Point2, SpadeTriangulation as _, Triangulation, segment_on,
};
use crate::curve::Point;
use crate::site::{encroaches, in_circle};

/// Where a walk through the faces ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Reached {
    /// In this face (or on one of its free edges).
    Face(Face),
    /// Before (or on) this segment.
    Segment(u32),
    /// At a vertex that is already there, or nowhere.
    Nowhere,
}

/// Steps after which a walk gives up: longer than any walk in a graded mesh, short enough never to hang.
const LONGEST_WALK: usize = 10_000;

/// Edges after which the search for encroached segments gives up.
const LARGEST_CAVITY: usize = 1_000;

/// An edge on a work list of [`Triangulation::encroached`].
#[derive(Clone, Copy)]
pub(crate) struct EdgeTicket(FixedDirectedEdgeHandle);

impl Triangulation {
    /// Walks straight from a point of a face to the face that holds `target`, but through no segment.
    pub(crate) fn walk(&self, origin: Point, face: Face, target: Point) -> Reached {
        self.walk_from(origin, face, None, target)
    }

    fn walk_from(
        &self,
        origin: Point,
        face: Face,
        mut entry: Option<FixedDirectedEdgeHandle>,
        target: Point,
    ) -> Reached {
        let to = Point2::new(target.r, target.z);
        let mut face = self.cdt.face(face);
        for _ in 0..LONGEST_WALK {
            let mut exit: Option<Edge<'_>> = None;
            for edge in face.adjacent_edges() {
                if Some(edge.fix()) == entry || !edge.side_query(to).is_on_right_side() {
                    continue;
                }
                exit = match exit {
                    None => Some(edge),
                    Some(other) => Some(straighter(origin, target, other, edge)),
                };
            }
            let Some(exit) = exit else {
                return arrived(face, target);
            };
            if let Some(segment) = segment_on(&exit) {
                return Reached::Segment(segment);
            }
            let across = exit.rev();
            entry = Some(across.fix());
            match across.face().as_inner() {
                Some(next) => face = next,
                None => return Reached::Nowhere,
            }
        }
        Reached::Nowhere
    }

    /// Collects the segments that a new vertex at `target`, which lies in `face`, would see and encroach on.
    pub(crate) fn encroached(
        &self,
        face: Face,
        target: Point,
        found: &mut Vec<u32>,
        stack: &mut Vec<EdgeTicket>,
    ) {
        found.clear();
        stack.clear();
        stack.extend(
            self.cdt
                .face(face)
                .adjacent_edges()
                .map(|edge| EdgeTicket(edge.fix())),
        );
        for _ in 0..LARGEST_CAVITY {
            let Some(EdgeTicket(edge)) = stack.pop() else {
                return;
            };
            let edge = self.cdt.directed_edge(edge);
            let (a, b) = (edge.from().data().at, edge.to().data().at);
            if let Some(segment) = segment_on(&edge) {
                if encroaches(target, a, b) {
                    found.push(segment);
                }
                continue;
            }
            let across = edge.rev();
            let apex = across.next().to().data().at;
            if in_circle(b, a, apex, target) {
                stack.extend([EdgeTicket(across.next().fix()), EdgeTicket(across.prev().fix())]);
            }
        }
    }

    /// The segment that lies between the chord of a segment and a point beside it, if any.
    pub(crate) fn obstacle(&self, number: u32, target: Point) -> Option<u32> {
        let chord = self
            .cdt
            .undirected_edge(self.edges[number as usize])
            .as_directed();
        let to = Point2::new(target.r, target.z);
        let side = chord.side_query(to);
        if side.is_on_line() {
            return None;
        }
        let beside = if side.is_on_left_side() {
            chord
        } else {
            chord.rev()
        };
        let face = beside.face().as_inner()?.fix();
        let middle = beside.from().data().at.middle(beside.to().data().at);
        match self.walk_from(middle, face, Some(beside.fix()), target) {
            Reached::Segment(other) if other != number => Some(other),
            _ => None,
        }
    }
}

/// Of two edges of one face beyond which the target lies, the one that the straight line from `origin` crosses.
fn straighter<'a>(origin: Point, target: Point, one: Edge<'a>, other: Edge<'a>) -> Edge<'a> {
    let (first, second) = if one.to().fix() == other.from().fix() {
        (one, other)
    } else {
        (other, one)
    };
    let shared = first.to().data().at;
    // The shared corner lies left of the line: the line leaves through the edge that ends... to its right.
    if (target - origin).cross(shared - origin) > 0.0 {
        first
    } else {
        second
    }
}

fn arrived(face: FaceOf<'_>, target: Point) -> Reached {
    if face.vertices().iter().any(|v| v.data().at == target) {
        return Reached::Nowhere;
    }
    let to = Point2::new(target.r, target.z);
    for edge in face.adjacent_edges() {
        if let Some(segment) = segment_on(&edge)
            && edge.side_query(to).is_on_line()
        {
            return Reached::Segment(segment);
        }
    }
    Reached::Face(face.fix())
}
