//! Delaunay refinement until sizes, gaps and angles are as wanted (after Ruppert, J. Algorithms 18, 1995, and
//! Chew, 9th Symp. Comput. Geom., 1993: circumcentres, but never beyond or too near to a segment, which is split
//! instead; off-centres after Üngör, LATIN 2004).

use std::collections::VecDeque;

use crate::arrange::{Arrangement, Boundary, OUTSIDE};
use crate::chords::share_at_distance;
use crate::curve::Point;
use crate::error::MeshError;
use crate::mesh::{doubled_area, doubled_area_in_s};
use crate::piece;
use crate::size::{GROWTH, SizePlan};
use crate::triangulate::{EdgeTicket, Face, On, Reached, Site, Triangulation, encroaches};

/// Sizes at both sides of a gap are its width over this: two to three layers of triangles.
const GAP_LAYERS: f64 = 2.0;

/// The same for gaps so thin that their triangles make up most of the mesh. Two layers are kept by a rule of their
/// own; the field in such a gap hardly varies across it.
const THIN_GAP_LAYERS: f64 = 1.0;

/// A gap below this share of the size of the drawing is thin.
const THIN_GAP: f64 = 2e-3;

/// Triangles with a smaller angle are split while that can be done, degrees.
const ANGLE_DEG: f64 = 29.0;

/// A triangle is too large when its circumcircle is that of an equilateral triangle with edges of this many
/// wanted sizes; the edges of a refined mesh are then as long as wanted on average.
const LARGEST: f64 = 1.35;

/// A segment is too long beyond this many wanted sizes.
const LONGEST: f64 = 1.35;

/// For the sake of angles no edge is made shorter than this share of the wanted size: with sizes bounded from
/// below this is what ends the refinement for certain.
const SHORTEST: f64 = 0.03;

/// A triangle has to keep at least this share of its area (times 2 r) in (r², z), where the elements live.
const UPRIGHT: f64 = 0.2;

/// Segments that wait for others to be split before them.
const DEEPEST: usize = 60;

/// Worst first: triangles are queued by the powers of two of their excess size.
const SIZE_CLASSES: usize = 16;

/// Refines until nothing is left to be done.
///
/// Errors: more than `max_triangles`, or a drawing that cannot be followed in double precision.
pub(crate) fn refine(
    drawing: &Arrangement,
    plan: &SizePlan,
    unit_m: f64,
    triangulation: Triangulation,
    max_triangles: usize,
) -> Result<Triangulation, MeshError> {
    let mut refiner = Refiner::new(drawing, plan, unit_m, triangulation, max_triangles);
    refiner.relax_all();
    refiner.follow_drawing()?;
    refiner.fill()?;
    Ok(refiner.mesh)
}

/// What is wrong with a triangle, worst class first.
#[derive(Clone, Copy, PartialEq)]
enum Fault {
    Size(usize),
    Shape,
}

struct Refiner<'a> {
    drawing: &'a Arrangement,
    plan: &'a SizePlan,
    unit_m: f64,
    mesh: Triangulation,
    max_triangles: usize,
    /// Whether faces are refined already.
    filling: bool,
    /// Segments that may be too long or encroached.
    segments: VecDeque<u32>,
    /// Faces that may span a gap.
    gaps: VecDeque<Face>,
    /// Faces too large, by excess; then faces of bad shape.
    large: Vec<Vec<Face>>,
    shape: Vec<Face>,
    lowered: Vec<u32>,
    around: Vec<Face>,
    ring: Vec<(u32, f64, f64)>,
    found: Vec<u32>,
    tickets: Vec<EdgeTicket>,
    /// Squared ratio of circumradius to shortest edge at [`ANGLE_DEG`].
    largest_ratio2: f64,
}

impl<'a> Refiner<'a> {
    fn new(
        drawing: &'a Arrangement,
        plan: &'a SizePlan,
        unit_m: f64,
        mesh: Triangulation,
        max_triangles: usize,
    ) -> Self {
        let ratio = 0.5 / ANGLE_DEG.to_radians().sin();
        Self {
            drawing,
            plan,
            unit_m,
            mesh,
            max_triangles,
            filling: false,
            segments: VecDeque::new(),
            gaps: VecDeque::new(),
            large: vec![Vec::new(); SIZE_CLASSES],
            shape: Vec::new(),
            lowered: Vec::new(),
            around: Vec::new(),
            ring: Vec::new(),
            found: Vec::new(),
            tickets: Vec::new(),
            largest_ratio2: ratio * ratio,
        }
    }

    /// First the drawing alone: segments as short as sizes, curvature and gaps ask, before the faces are filled.
    fn follow_drawing(&mut self) -> Result<(), MeshError> {
        self.segments.clear();
        self.segments.extend(0..self.mesh.segments.len() as u32);
        self.gaps.extend(self.mesh.faces());
        while self.treat_drawing()? {}
        Ok(())
    }

    fn fill(&mut self) -> Result<(), MeshError> {
        self.filling = true;
        let faces: Vec<Face> = self.mesh.faces().collect();
        for face in faces {
            self.queue_face(face);
        }
        loop {
            if self.treat_drawing()? {
                continue;
            }
            let Some(face) = self.next_face() else {
                return Ok(());
            };
            self.treat_face(face)?;
        }
    }

    /// One step on segments and gaps; false when there is none to do.
    fn treat_drawing(&mut self) -> Result<bool, MeshError> {
        if 2 * self.mesh.vertex_count() > self.max_triangles {
            return Err(self.too_many());
        }
        if let Some(segment) = self.segments.pop_front() {
            self.treat_segment(segment)?;
        } else if let Some(face) = self.gaps.pop_front() {
            self.measure_gaps(face);
        } else {
            return Ok(false);
        }
        Ok(true)
    }

    fn too_many(&self) -> MeshError {
        let smallest = (4..self.mesh.vertex_count() as u32)
            .map(|v| self.mesh.site(v))
            .min_by(|a, b| a.size.total_cmp(&b.size));
        MeshError::TooManyTriangles {
            limit: self.max_triangles,
            smallest_m: smallest.map_or(f64::NAN, |site| site.size),
            at: smallest.map_or(Point::default(), |site| site.at),
        }
    }

    fn next_face(&mut self) -> Option<Face> {
        (0..SIZE_CLASSES)
            .rev()
            .find_map(|class| self.large[class].pop())
            .or_else(|| self.shape.pop())
    }

    fn queue_face(&mut self, face: Face) {
        if !self.filling {
            return;
        }
        match self.fault(face) {
            Some(Fault::Size(class)) => self.large[class].push(face),
            Some(Fault::Shape) => self.shape.push(face),
            None => {}
        }
    }

    fn queue_star(&mut self, vertex: u32) {
        if !self.filling {
            return;
        }
        let faces: Vec<Face> = self.mesh.star(vertex).collect();
        for face in faces {
            self.queue_face(face);
        }
    }
}

// Sizes.
impl Refiner<'_> {
    /// Lowers a vertex's size, and with it those of its neighbours so far as the limit on growth asks.
    fn lower(&mut self, vertex: u32, size: f64) {
        if self.mesh.site(vertex).size <= size {
            return;
        }
        self.mesh.set_size(vertex, size);
        self.lowered.push(vertex);
        self.relax();
    }

    fn relax_all(&mut self) {
        self.lowered.extend(4..self.mesh.vertex_count() as u32);
        self.relax();
    }

    fn relax(&mut self) {
        while let Some(vertex) = self.lowered.pop() {
            let (at, size) = (self.mesh.site(vertex).at, self.mesh.site(vertex).size);
            let neighbours: Vec<u32> = self.mesh.neighbours(vertex).collect();
            for next in neighbours {
                let site = self.mesh.site(next);
                let allowed = size + GROWTH * distance(site.at, at);
                if site.size > allowed * (1.0 + 1e-9) && site.on != On::Frame {
                    self.mesh.set_size(next, allowed);
                    self.lowered.push(next);
                }
            }
            self.queue_around(vertex);
        }
    }

    /// After a size changed.
    fn queue_around(&mut self, vertex: u32) {
        let segments: Vec<u32> = self.mesh.segments_at(vertex).collect();
        self.segments.extend(segments);
        self.queue_star(vertex);
    }

    /// Gives a new vertex the size that its neighbours and the limit allow, and lowers neighbours that are too
    /// large beside it.
    fn settle(&mut self, vertex: u32, limit: f64) {
        let at = self.mesh.site(vertex).at;
        let mut ring = std::mem::take(&mut self.ring);
        ring.clear();
        ring.extend(self.mesh.neighbours(vertex).filter_map(|next| {
            let site = self.mesh.site(next);
            (site.on != On::Frame).then(|| (next, site.size, GROWTH * distance(site.at, at)))
        }));
        let size = ring
            .iter()
            .map(|(_, size, growth)| size + growth)
            .fold(limit, f64::min);
        self.mesh.set_size(vertex, size);
        for &(next, old, growth) in &ring {
            if old > (size + growth) * (1.0 + 1e-9) {
                self.mesh.set_size(next, size + growth);
                self.lowered.push(next);
            }
        }
        self.ring = ring;
        self.relax();
    }

    /// Finds features that face each other across a triangle, and lowers the sizes at both sides.
    fn measure_gaps(&mut self, face: Face) {
        if self.mesh.label(face) == OUTSIDE {
            return;
        }
        let corners = self.mesh.corners(face);
        let sites = self.mesh.corner_sites(face);
        let segments = self.mesh.edge_segments(face);
        for k in 0..3 {
            let (i, j) = ((k + 1) % 3, (k + 2) % 3);
            if let Some(segment) = segments[k] {
                if !self.faces_across(sites[k].on, On::Curve(self.mesh.segments[segment as usize].edge)) {
                    continue;
                }
                let chord = sites[j].at - sites[i].at;
                let share = (sites[k].at - sites[i].at).dot(chord) / chord.dot(chord);
                if !(0.0..=1.0).contains(&share) {
                    continue;
                }
                let foot = sites[i].at + chord * share;
                let size = self.size_in_gap(foot.distance(sites[k].at));
                self.lower(corners[k], size);
                for end in [i, j] {
                    self.lower(corners[end], size + GROWTH * foot.distance(sites[end].at));
                }
            } else if self.faces_across(sites[i].on, sites[j].on) {
                let size = self.size_in_gap(sites[i].at.distance(sites[j].at));
                self.lower(corners[i], size);
                self.lower(corners[j], size);
            }
        }
    }

    fn size_in_gap(&self, width: f64) -> f64 {
        width
            / if width < THIN_GAP * self.unit_m {
                THIN_GAP_LAYERS
            } else {
                GAP_LAYERS
            }
    }

    /// Whether two places on the drawing are sides of a gap: on different curves that do not meet.
    fn faces_across(&self, one: On, other: On) -> bool {
        let ends = |edge: u32| {
            [
                self.drawing.edges[edge as usize].start,
                self.drawing.edges[edge as usize].end,
            ]
        };
        match (one, other) {
            (On::Curve(a), On::Curve(b)) => a != b && !ends(a).iter().any(|v| ends(b).contains(v)),
            (On::Drawn(v), On::Curve(e)) | (On::Curve(e), On::Drawn(v)) => !ends(e).contains(&v),
            (On::Drawn(a), On::Drawn(b)) => a != b,
            _ => false,
        }
    }
}

// Segments.
impl Refiner<'_> {
    fn treat_segment(&mut self, number: u32) -> Result<(), MeshError> {
        let segment = &self.mesh.segments[number as usize];
        let [a, b] = segment.ends.map(|v| self.mesh.site(v));
        let length = a.at.distance(b.at);
        let wanted = 0.5 * (a.size + b.size);
        let too_long = length > LONGEST * wanted || length > self.plan.longest[segment.edge as usize];
        // What lies on both sides of a short drawn edge gets two layers between.
        let undivided = matches!((a.on, b.on), (On::Drawn(_), On::Drawn(_)));
        let too_curved =
            segment.boundary != Boundary::Circle && segment.curve.sweep().abs() > 1.5 * self.plan.arc_step;
        if too_long || too_curved || undivided || (self.may_shrink(number) && self.is_encroached(number)) {
            self.split(number)?;
        }
        Ok(())
    }

    fn may_shrink(&self, number: u32) -> bool {
        let [a, b] = self.mesh.segments[number as usize]
            .ends
            .map(|v| self.mesh.site(v));
        a.at.distance(b.at) > 2.0 * SHORTEST * a.size.min(b.size)
    }

    fn is_encroached(&self, number: u32) -> bool {
        let [a, b] = self.mesh.segments[number as usize]
            .ends
            .map(|v| self.mesh.site(v).at);
        self.mesh
            .apexes(number)
            .into_iter()
            .flatten()
            .any(|apex| encroaches(self.mesh.site(apex).at, a, b))
    }

    fn split(&mut self, number: u32) -> Result<(), MeshError> {
        self.split_clear(number, 0)
    }

    /// Splits a segment; first those that lie between its chord and its curve (they run closely beside it, and were
    /// not cut as finely yet).
    fn split_clear(&mut self, number: u32, depth: usize) -> Result<(), MeshError> {
        let segment = self.mesh.segments[number as usize].clone();
        let t = self.share(number);
        let at = piece::node_on(&segment.curve, t, segment.boundary, self.drawing.circle.as_ref());
        while let Some(other) = self.mesh.obstacle(number, at) {
            if depth > DEEPEST {
                return Err(MeshError::Entangled { at });
            }
            self.split_clear(other, depth + 1)?;
            if self.mesh.segments[number as usize].ends != segment.ends {
                return Ok(());
            }
        }
        let limit = self.plan.on_edge(segment.edge, at);
        let site = Site {
            at,
            size: limit,
            on: On::Curve(segment.edge),
        };
        let (vertex, second) = self.mesh.split(number, t, site)?;
        self.segments.extend([number, second]);
        self.after_insertion(vertex, limit);
        Ok(())
    }

    /// Where to split: in the middle, but on one of the circles around a sharp corner, whose radii are powers of
    /// two, so that both sides of the corner are split at equal distances.
    fn share(&self, number: u32) -> f64 {
        let segment = &self.mesh.segments[number as usize];
        let sharp = segment.ends.map(|v| match self.mesh.site(v).on {
            On::Drawn(vertex) => self.plan.is_sharp(vertex),
            _ => false,
        });
        if sharp[0] == sharp[1] {
            return 0.5;
        }
        let chord = segment.curve.start().distance(segment.curve.end());
        let distance = self.unit_m * (0.5 * chord / self.unit_m).log2().round().exp2();
        let share = share_at_distance(&segment.curve, distance).clamp(0.25, 0.75);
        if sharp[0] { share } else { 1.0 - share }
    }

    fn after_insertion(&mut self, vertex: u32, limit: f64) {
        self.settle(vertex, limit);
        let on_curve = self.mesh.site(vertex).on != On::Nothing;
        let mut faces = std::mem::take(&mut self.around);
        self.mesh.surroundings(vertex, &mut faces, &mut self.segments);
        for &face in &faces {
            if on_curve {
                self.gaps.push_back(face);
            }
            self.queue_face(face);
        }
        self.around = faces;
    }
}

// Faces.
impl Refiner<'_> {
    fn fault(&self, face: Face) -> Option<Fault> {
        let sites = self.mesh.corner_sites(face);
        let [a, b, c] = sites.map(|site| site.at);
        let (ab, bc, ca) = (b - a, c - b, a - c);
        let edges2 = [bc.dot(bc), ca.dot(ca), ab.dot(ab)];
        let area2 = ab.cross(c - a);
        let shortest2 = edges2[0].min(edges2[1]).min(edges2[2]);
        let radius2 = edges2[0] * edges2[1] * edges2[2] / (4.0 * area2 * area2);
        let size = (sites[0].size + sites[1].size + sites[2].size) / 3.0;
        let longest2 = edges2[0].max(edges2[1]).max(edges2[2]);
        // Flat triangles have a large circumcircle without being large.
        let excess2 = (3.0 * radius2).min(longest2) / (LARGEST * size).powi(2);
        if excess2 > 1.0 {
            return Some(Fault::Size(size_class(excess2)));
        }
        let on = sites.map(|site| site.on);
        if self.leans(a, b, c, area2) || self.lies_badly(face, on) {
            return Some(Fault::Shape);
        }
        let sharp = radius2 > self.largest_ratio2 * shortest2;
        (sharp && !self.must_keep(face, edges2)).then_some(Fault::Shape)
    }

    fn leans(&self, a: Point, b: Point, c: Point, area2: f64) -> bool {
        doubled_area_in_s(a, b, c) < UPRIGHT * 2.0 * (a.r + b.r + c.r) / 3.0 * area2
    }

    /// A free edge leads straight from one side of a gap to the other (one layer only), or two edges lie on the
    /// outer circle.
    fn lies_badly(&self, face: Face, on: [On; 3]) -> bool {
        if on.iter().filter(|on| **on != On::Nothing).count() < 2 {
            return false;
        }
        let segments = self.mesh.edge_segments(face);
        let on_circle = |s: &u32| self.mesh.segments[*s as usize].boundary == Boundary::Circle;
        let spans = |k: usize| segments[k].is_none() && self.faces_across(on[(k + 1) % 3], on[(k + 2) % 3]);
        (0..3).any(spans) || segments.iter().flatten().filter(|s| on_circle(s)).count() > 1
    }

    /// Small angles that are the drawing's own, or that would need edges shorter than wanted by far.
    fn must_keep(&self, face: Face, edges2: [f64; 3]) -> bool {
        let sites = self.mesh.corner_sites(face);
        let k = (0..3)
            .min_by(|&i, &j| edges2[i].total_cmp(&edges2[j]))
            .unwrap_or(0);
        let (i, j) = ((k + 1) % 3, (k + 2) % 3);
        let size = sites.iter().map(|site| site.size).fold(f64::INFINITY, f64::min);
        if edges2[k] < (SHORTEST * size).powi(2) {
            return true;
        }
        // The smallest angle lies between two drawn curves.
        let segments = self.mesh.edge_segments(face);
        if segments[i].is_some() && segments[j].is_some() {
            return true;
        }
        // The shortest edge joins two curves that meet in a sharp corner, at equal distances from it.
        self.shared_sharp_corner(sites[i].on, sites[j].on)
            .is_some_and(|corner| {
                let apex = self.drawing.vertices[corner as usize];
                let (near, far) = (apex.distance(sites[i].at), apex.distance(sites[j].at));
                near.max(far) < 1.5 * near.min(far)
            })
    }

    fn shared_sharp_corner(&self, one: On, other: On) -> Option<u32> {
        let (On::Curve(a), On::Curve(b)) = (one, other) else {
            return None;
        };
        if a == b {
            return None;
        }
        let (a, b) = (&self.drawing.edges[a as usize], &self.drawing.edges[b as usize]);
        [a.start, a.end]
            .into_iter()
            .find(|&v| (v == b.start || v == b.end) && self.plan.is_sharp(v))
    }

    fn treat_face(&mut self, face: Face) -> Result<(), MeshError> {
        if self.mesh.label(face) == OUTSIDE {
            return Ok(());
        }
        let Some(fault) = self.fault(face) else {
            return Ok(());
        };
        let target = self.new_vertex(face);
        if !(target.r.is_finite() && target.z.is_finite()) {
            return Ok(());
        }
        match self.mesh.walk(face, target) {
            Reached::Nowhere => Ok(()),
            Reached::Segment(segment) => {
                if fault != Fault::Shape || self.may_shrink(segment) {
                    self.split(segment)?;
                    self.requeue(face);
                }
                Ok(())
            }
            Reached::Face(place) => self.insert_or_split(face, place, target, fault),
        }
    }

    fn insert_or_split(&mut self, face: Face, place: Face, at: Point, fault: Fault) -> Result<(), MeshError> {
        let mut found = std::mem::take(&mut self.found);
        self.mesh.encroached(place, at, &mut found, &mut self.tickets);
        let result = if found.is_empty() {
            self.insert(place, at)
        } else {
            let mut split_one = false;
            for &segment in &found {
                if fault != Fault::Shape || self.may_shrink(segment) {
                    self.split(segment)?;
                    split_one = true;
                }
            }
            if split_one {
                self.requeue(face);
            }
            Ok(())
        };
        self.found = found;
        result
    }

    /// The face has the same number after a split elsewhere, or it was replaced; either way it is looked at again.
    fn requeue(&mut self, face: Face) {
        if self.mesh.label(face) != OUTSIDE {
            self.queue_face(face);
        }
    }

    fn insert(&mut self, place: Face, at: Point) -> Result<(), MeshError> {
        let limit = self.plan.in_part(self.mesh.label(place), at);
        let vertex = self.mesh.insert(
            place,
            Site {
                at,
                size: limit,
                on: On::Nothing,
            },
        )?;
        self.after_insertion(vertex, limit);
        Ok(())
    }

    /// Circumcentre; for a triangle with a small angle the point nearer to its shortest edge that makes the best
    /// allowed triangle with it (off-centre).
    fn new_vertex(&self, face: Face) -> Point {
        let p = self.mesh.corner_sites(face).map(|site| site.at);
        let edges2 = [p[2] - p[1], p[0] - p[2], p[1] - p[0]].map(|e| e.dot(e));
        let (u, v) = (p[1] - p[0], p[2] - p[0]);
        let doubled = 2.0 * doubled_area(p[0], p[1], p[2]);
        let centre = p[0]
            + Point::new(
                v.z * edges2[2] - u.z * edges2[1],
                u.r * edges2[1] - v.r * edges2[2],
            ) * doubled.recip();
        let k = (0..3)
            .min_by(|&i, &j| edges2[i].total_cmp(&edges2[j]))
            .unwrap_or(0);
        let (i, j) = ((k + 1) % 3, (k + 2) % 3);
        let middle = p[i].middle(p[j]);
        let towards = centre - middle;
        let farthest = 0.5 * edges2[k].sqrt() / (0.5 * OFF_CENTRE_DEG.to_radians()).tan();
        let distance = towards.norm();
        if distance > farthest {
            middle + towards * (farthest / distance)
        } else {
            centre
        }
    }
}

/// Angle at the new vertex in the triangle of an off-centre with the shortest edge, degrees: a little more than
/// asked for, so that it is not split again.
const OFF_CENTRE_DEG: f64 = ANGLE_DEG + 1.0;

/// Whole powers of two in the excess size, whose square is given (at least 1).
fn size_class(excess2: f64) -> usize {
    // The exponent field of a double is biased by 1023.
    let exponent = (excess2.to_bits() >> 52).saturating_sub(1023);
    (exponent as usize / 2).min(SIZE_CLASSES - 1)
}

/// Distance without the guard against overflow: this is called most of all.
fn distance(a: Point, b: Point) -> f64 {
    let d = b - a;
    d.dot(d).sqrt()
}
