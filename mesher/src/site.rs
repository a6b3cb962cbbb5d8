//! Vertices and segments of the triangulation, and the two tests between them that need no exactness.

use crate::arrange::{Boundary, PartId};
use crate::curve::{Curve, Point};

/// What a vertex lies on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum On {
    /// Free: inside a part.
    Nothing,
    /// On a drawn curve (number of the planar edge), not at its ends.
    Curve(u32),
    /// A vertex of the drawing (its number).
    Drawn(u32),
    /// A corner of the frame far around everything.
    Frame,
}

/// A vertex of the triangulation.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Site {
    /// Where, m.
    pub(crate) at: Point,
    /// Wanted edge length around it, m.
    pub(crate) size: f64,
    /// What it lies on.
    pub(crate) on: On,
}

/// A chord of a drawn curve.
#[derive(Clone, Debug)]
pub(crate) struct Segment {
    /// Vertices at start and end.
    pub(crate) ends: [u32; 2],
    /// The piece of curve between them.
    pub(crate) curve: Curve,
    /// The planar edge it is part of.
    pub(crate) edge: u32,
    /// Boundary kind.
    pub(crate) boundary: Boundary,
    /// Parts on the left and right of the direction of travel.
    pub(crate) sides: [PartId; 2],
}

/// Whether a vertex is too close to a segment: it sees it under more than 120 degrees (diametral lens; Shewchuk,
/// Comput. Geom. 22, 2002).
pub(crate) fn encroaches(p: Point, a: Point, b: Point) -> bool {
    let (u, v) = (a - p, b - p);
    let dot = u.dot(v);
    dot < 0.0 && dot * dot > 0.25 * u.dot(u) * v.dot(v)
}

/// Whether `p` lies in the circle through the counter-clockwise triangle `a`, `b`, `c`; not exact.
pub(crate) fn in_circle(a: Point, b: Point, c: Point, p: Point) -> bool {
    let (a, b, c) = (a - p, b - p, c - p);
    a.dot(a) * b.cross(c) + b.dot(b) * c.cross(a) + c.dot(c) * a.cross(b) > 0.0
}
