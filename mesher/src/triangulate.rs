//! The constrained Delaunay triangulation under the mesh. The only file that knows spade.
//!
//! Constraints ("segments") are chords of drawn curves. Every face carries the part it belongs to: faces are only
//! ever changed within one part, so the labels survive insertions without being searched for again.

mod walk;

use spade::handles::{DirectedEdgeHandle, InnerTag};
use spade::handles::{
    FixedDirectedEdgeHandle, FixedFaceHandle, FixedUndirectedEdgeHandle, FixedVertexHandle,
};
use spade::{
    ConstrainedDelaunayTriangulation, HasPosition, LastUsedVertexHintGenerator, Point2,
    Triangulation as SpadeTriangulation,
};

use crate::arrange::{OUTSIDE, PartId};
use crate::curve::Point;
use crate::error::MeshError;
use crate::piece;
use crate::site::{On, Segment, Site};
pub(crate) use walk::{EdgeTicket, Reached};

impl HasPosition for Site {
    type Scalar = f64;
    fn position(&self) -> Point2<f64> {
        Point2::new(self.at.r, self.at.z)
    }
}

/// Number of the segment on an edge of the triangulation; the default is "none".
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
struct OnSegment(u32);

impl Default for OnSegment {
    fn default() -> Self {
        Self(u32::MAX)
    }
}

type Cdt = ConstrainedDelaunayTriangulation<Site, (), OnSegment, (), LastUsedVertexHintGenerator>;
/// A triangle of the triangulation. After changes the same handle may be another triangle.
pub(crate) type Face = FixedFaceHandle<InnerTag>;
type FaceOf<'a> = spade::handles::FaceHandle<'a, InnerTag, Site, (), spade::CdtEdge<OnSegment>, ()>;
type Edge<'a> = DirectedEdgeHandle<'a, Site, (), spade::CdtEdge<OnSegment>, ()>;

/// One of the edges that leave a vertex.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Spoke {
    /// The vertex it leads to.
    pub(crate) to: u32,
    /// That vertex's data.
    pub(crate) site: Site,
    /// The face on its left, between it and the next spoke, where that is meshed.
    pub(crate) face: Option<Face>,
    /// The segment that bounds this face on the far side, if one does.
    pub(crate) facing: Option<u32>,
}

/// Four corners of the frame come first among the vertices.
const FRAME: usize = 4;

/// The triangulation, its segments and the labels of its faces.
pub(crate) struct Triangulation {
    cdt: Cdt,
    /// All segments; the numbers stay valid, a split one keeps its number for its first half.
    pub(crate) segments: Vec<Segment>,
    /// The edge of each segment.
    edges: Vec<FixedUndirectedEdgeHandle>,
    labels: Vec<PartId>,
}

impl Triangulation {
    /// Triangulates `sites` (which become vertices 4, 5, ...; 0 to 3 are a frame around everything) with all
    /// segments, whose ends count `sites` from 0 and are renumbered here.
    ///
    /// Errors: segments that cross each other (their numbers), or coordinates out of range.
    pub(crate) fn new(sites: &[Site], mut segments: Vec<Segment>) -> Result<Self, Unmeshable> {
        let mut vertices = frame_around(sites);
        vertices.extend_from_slice(sites);
        let count = vertices.len();
        for segment in &mut segments {
            segment.ends = segment.ends.map(|end| end + FRAME as u32);
        }
        let edges = segments.iter().map(|s| s.ends.map(|end| end as usize)).collect();
        let mut crossing = Vec::new();
        let cdt = Cdt::try_bulk_load_cdt(vertices, edges, |ends| crossing.push(ends.map(|end| end as u32)))
            .map_err(|_| Unmeshable::Coordinates)?;
        if cdt.num_vertices() != count {
            return Err(Unmeshable::Coordinates);
        }
        let edges = cdt
            .fixed_undirected_edges()
            .next()
            .into_iter()
            .cycle()
            .take(segments.len())
            .collect();
        let mut this = Self {
            labels: vec![OUTSIDE; cdt.num_all_faces()],
            cdt,
            segments,
            edges,
        };
        let mut lost = this.register_segments();
        if !crossing.is_empty() || !lost.is_empty() {
            lost.extend((0..this.segments.len() as u32).filter(|&s| {
                let ends = this.segments[s as usize].ends;
                crossing.iter().any(|c| *c == ends || *c == [ends[1], ends[0]])
            }));
            lost.sort_unstable();
            lost.dedup();
            return Err(Unmeshable::Crossing(lost));
        }
        this.label_faces()?;
        Ok(this)
    }

    /// Connects segments and edges; returns the segments that have no edge of their own.
    fn register_segments(&mut self) -> Vec<u32> {
        let mut lost = Vec::new();
        for number in 0..self.segments.len() {
            let [a, b] = self.segments[number].ends;
            let edge = self
                .edge_between(a, b)
                .filter(|edge| self.cdt.directed_edge(*edge).is_constraint_edge());
            let taken = edge.is_some_and(|e| {
                *self.cdt.directed_edge(e).as_undirected().data().data() != OnSegment::default()
            });
            match edge {
                Some(edge) if !taken => self.put_segment(number as u32, edge),
                _ => lost.push(number as u32),
            }
        }
        lost
    }

    fn put_segment(&mut self, number: u32, edge: FixedDirectedEdgeHandle) {
        let handle = edge.as_undirected();
        *self.cdt.undirected_edge_data_mut(handle).data_mut() = OnSegment(number);
        self.edges[number as usize] = handle;
    }

    fn edge_between(&self, a: u32, b: u32) -> Option<FixedDirectedEdgeHandle> {
        self.cdt
            .get_edge_from_neighbors(vertex(a), vertex(b))
            .map(|edge| edge.fix())
    }

    /// Spreads the part labels from the segments' sides over all faces.
    fn label_faces(&mut self) -> Result<(), Unmeshable> {
        let mut known = vec![false; self.labels.len()];
        let mut stack: Vec<(Face, PartId)> = Vec::new();
        for (segment, &edge) in self.segments.iter().zip(&self.edges) {
            let edge = self.cdt.undirected_edge(edge).as_directed();
            let along = edge.from().fix().index() == segment.ends[0] as usize;
            let sides = if along {
                segment.sides
            } else {
                [segment.sides[1], segment.sides[0]]
            };
            for (edge, label) in [(edge, sides[0]), (edge.rev(), sides[1])] {
                if let Some(face) = edge.face().as_inner() {
                    stack.push((face.fix(), label));
                }
            }
        }
        let hull = self
            .cdt
            .convex_hull()
            .filter_map(|edge| edge.rev().face().as_inner());
        stack.extend(hull.map(|face| (face.fix(), OUTSIDE)));
        stack.reverse();
        while let Some((face, label)) = stack.pop() {
            if known[face.index()] {
                if self.labels[face.index()] != label {
                    return Err(Unmeshable::Mixed(self.corner_sites(face).map(|site| site.at)));
                }
                continue;
            }
            known[face.index()] = true;
            self.labels[face.index()] = label;
            for edge in self.cdt.face(face).adjacent_edges() {
                if !edge.is_constraint_edge()
                    && let Some(next) = edge.rev().face().as_inner()
                {
                    stack.push((next.fix(), label));
                }
            }
        }
        Ok(())
    }

    /// Number of vertices, frame included.
    pub(crate) fn vertex_count(&self) -> usize {
        self.cdt.num_vertices()
    }

    /// All meshed faces.
    pub(crate) fn faces(&self) -> impl Iterator<Item = Face> + '_ {
        self.cdt
            .fixed_inner_faces()
            .filter(|face| self.labels[face.index()] != OUTSIDE)
    }

    /// The vertex data.
    pub(crate) fn site(&self, vertex_number: u32) -> Site {
        *self.cdt.vertex(vertex(vertex_number)).data()
    }

    /// Changes the wanted size at a vertex.
    pub(crate) fn set_size(&mut self, vertex_number: u32, size: f64) {
        self.cdt.vertex_data_mut(vertex(vertex_number)).size = size;
    }

    /// Part of a face.
    pub(crate) fn label(&self, face: Face) -> PartId {
        self.labels[face.index()]
    }

    /// Corners of a face, counter-clockwise.
    pub(crate) fn corners(&self, face: Face) -> [u32; 3] {
        self.cdt.face(face).vertices().map(|v| v.fix().index() as u32)
    }

    /// Data of its corners.
    pub(crate) fn corner_sites(&self, face: Face) -> [Site; 3] {
        self.cdt.face(face).vertices().map(|v| *v.data())
    }

    /// The segments on the edges of a face; entry `i` is the edge that faces corner `i`.
    pub(crate) fn edge_segments(&self, face: Face) -> [Option<u32>; 3] {
        // Edge k of a face runs from corner k to corner k + 1.
        let [e0, e1, e2] = self.cdt.face(face).adjacent_edges();
        debug_assert_eq!(e0.from().fix(), self.cdt.face(face).vertices()[0].fix());
        [segment_on(&e1), segment_on(&e2), segment_on(&e0)]
    }

    /// The vertices that face a segment from its two sides, where those are meshed.
    pub(crate) fn apexes(&self, segment: u32) -> [Option<u32>; 2] {
        let edge = self
            .cdt
            .undirected_edge(self.edges[segment as usize])
            .as_directed();
        [edge, edge.rev()].map(|side| {
            let face = side.face().as_inner()?.fix().index();
            (self.labels[face] != OUTSIDE).then(|| side.next().to().fix().index() as u32)
        })
    }

    /// Neighbours of a vertex, in the triangulation's order.
    pub(crate) fn neighbours(&self, vertex_number: u32) -> impl Iterator<Item = u32> + '_ {
        self.cdt
            .vertex(vertex(vertex_number))
            .out_edges()
            .map(|edge| edge.to().fix().index() as u32)
    }

    /// Meshed faces around a vertex.
    pub(crate) fn star(&self, vertex_number: u32) -> impl Iterator<Item = Face> + '_ {
        self.cdt
            .vertex(vertex(vertex_number))
            .out_edges()
            .filter_map(|edge| edge.face().as_inner())
            .map(|face| face.fix())
            .filter(|&face| self.labels[face.index()] != OUTSIDE)
    }

    /// Segments that end at a vertex.
    pub(crate) fn segments_at(&self, vertex_number: u32) -> impl Iterator<Item = u32> + '_ {
        self.cdt
            .vertex(vertex(vertex_number))
            .out_edges()
            .filter_map(|edge| segment_on(&edge))
    }

    /// Collects what lies around a vertex, counter-clockwise.
    pub(crate) fn surroundings(&self, vertex_number: u32, found: &mut Vec<Spoke>) {
        found.clear();
        found.extend(self.cdt.vertex(vertex(vertex_number)).out_edges().map(|edge| {
            let to = edge.to();
            let face = edge.face().as_inner().map(|face| face.fix());
            let face = face.filter(|face| self.labels[face.index()] != OUTSIDE);
            debug_assert!(face.is_none() || edge.next().to() == edge.ccw().to());
            Spoke {
                to: to.fix().index() as u32,
                site: *to.data(),
                face,
                facing: face.and_then(|_| segment_on(&edge.next())),
            }
        }));
    }

    /// Inserts a free vertex into `face` (found by [`Self::walk`]) and returns its number.
    pub(crate) fn insert(&mut self, face: Face, site: Site) -> Result<u32, MeshError> {
        let label = self.labels[face.index()];
        let number = self.insert_near(self.corners(face)[0], site)?;
        self.label_star(number, label);
        Ok(number)
    }

    fn insert_near(&mut self, hint: u32, site: Site) -> Result<u32, MeshError> {
        let expected = self.cdt.num_vertices();
        let handle = self
            .cdt
            .insert_with_hint(site, vertex(hint))
            .map_err(|_| MeshError::Coordinates { at: site.at })?;
        self.labels.resize(self.cdt.num_all_faces(), OUTSIDE);
        if handle.index() == expected {
            Ok(expected as u32)
        } else {
            Err(MeshError::TooClose { at: site.at })
        }
    }

    fn label_star(&mut self, number: u32, label: PartId) {
        for edge in self.cdt.vertex(vertex(number)).out_edges() {
            if let Some(face) = edge.face().as_inner() {
                self.labels[face.fix().index()] = label;
            }
        }
    }

    /// Splits a segment at share `t` of its curve by a vertex on the curve; returns the vertex and the number of
    /// the new segment (the second half).
    pub(crate) fn split(&mut self, number: u32, t: f64, site: Site) -> Result<(u32, u32), MeshError> {
        let old = self.segments[number as usize].clone();
        let [a, b] = old.ends;
        let middle = self.insert_near(a, site)?;
        let chord_left = self
            .edge_between(a, b)
            .filter(|&e| self.cdt.directed_edge(e).is_constraint_edge());
        let off_chord = chord_left.is_some();
        if let Some(chord) = chord_left {
            self.move_constraint(chord, [a, b], middle, &old)?;
        }
        let [first, second] = piece::cut(&old.curve, t, site.at);
        let new = self.segments.len() as u32;
        self.segments[number as usize].curve = first;
        self.segments[number as usize].ends = [a, middle];
        self.segments.push(Segment {
            ends: [middle, b],
            curve: second,
            ..old.clone()
        });
        self.edges.push(self.edges[number as usize]);
        for (number, ends) in [(number, [a, middle]), (new, [middle, b])] {
            let edge = self
                .edge_between(ends[0], ends[1])
                .ok_or(MeshError::Entangled { at: site.at })?;
            self.put_segment(number, edge);
        }
        if !off_chord {
            self.label_both_sides(middle, b, old.sides);
        }
        Ok((middle, new))
    }

    /// The new vertex lies beside the chord, and nothing lies between: the triangle on the chord becomes part of
    /// the other side, the two new chords become constraints and the old chord a free edge.
    fn move_constraint(
        &mut self,
        chord: FixedDirectedEdgeHandle,
        [a, b]: [u32; 2],
        middle: u32,
        old: &Segment,
    ) -> Result<(), MeshError> {
        let at = self.site(middle).at;
        let beside = self.cdt.directed_edge(chord);
        let facing = |edge: &Edge<'_>| edge.next().to().fix().index() == middle as usize;
        // Directed a to b: its face lies on the left.
        let (face, here, beyond) = if facing(&beside) {
            (beside.face(), old.sides[0], old.sides[1])
        } else if facing(&beside.rev()) {
            (beside.rev().face(), old.sides[1], old.sides[0])
        } else {
            return Err(MeshError::Entangled { at });
        };
        let face = face.as_inner().ok_or(MeshError::Entangled { at })?.fix().index();
        self.label_star(middle, here);
        self.labels[face] = beyond;
        for (from, to) in [(a, middle), (middle, b)] {
            if self.cdt.try_add_constraint(vertex(from), vertex(to)).len() != 1 {
                return Err(MeshError::Entangled { at });
            }
        }
        let chord = chord.as_undirected();
        *self.cdt.undirected_edge_data_mut(chord).data_mut() = OnSegment::default();
        self.cdt.remove_constraint_edge(chord);
        Ok(())
    }

    /// Labels the star of a vertex on a straight segment that leads on to vertex `b`.
    fn label_both_sides(&mut self, middle: u32, b: u32, sides: [PartId; 2]) {
        let Some(first) = self.edge_between(middle, b) else {
            return;
        };
        let mut edge = self.cdt.directed_edge(first);
        let mut side = 0;
        loop {
            if let Some(face) = edge.face().as_inner() {
                self.labels[face.fix().index()] = sides[side];
            }
            edge = edge.ccw();
            if edge.fix() == first {
                return;
            }
            if edge.is_constraint_edge() {
                side = 1;
            }
        }
    }
}

/// Why a first triangulation failed.
pub(crate) enum Unmeshable {
    /// These segments cross others or coincide with them.
    Crossing(Vec<u32>),
    /// Two parts claim the face here.
    Mixed([Point; 3]),
    /// Coordinates out of the range of exact predicates, or two vertices in one place.
    Coordinates,
}

fn vertex(number: u32) -> FixedVertexHandle {
    FixedVertexHandle::from_index(number as usize)
}

fn segment_on(edge: &Edge<'_>) -> Option<u32> {
    let OnSegment(number) = *edge.as_undirected().data().data();
    (number != u32::MAX).then_some(number)
}

/// Four vertices far enough around everything never to disturb it.
fn frame_around(sites: &[Site]) -> Vec<Site> {
    let bounds = sites
        .iter()
        .fold(crate::curve::Bounds::EMPTY, |b, site| b.with(site.at));
    let size = (bounds.high.r - bounds.low.r).max(bounds.high.z - bounds.low.z);
    let wide = bounds.widened(size);
    [
        (wide.low.r, wide.low.z),
        (wide.high.r, wide.low.z),
        (wide.high.r, wide.high.z),
        (wide.low.r, wide.high.z),
    ]
    .map(|(r, z)| Site {
        at: Point::new(r, z),
        size,
        on: On::Frame,
    })
    .to_vec()
}
