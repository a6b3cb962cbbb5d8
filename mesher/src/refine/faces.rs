//! Faces: what is wrong with a triangle, and the vertex that cures it.

use super::{Fault, Refiner, SHORTEST, SIZE_CLASSES};
use crate::arrange::{Boundary, OUTSIDE};
use crate::curve::Point;
use crate::error::MeshError;
use crate::mesh::doubled_area_in_s;
use crate::site::{On, Site};
use crate::triangulate::{Face, Reached};

/// Triangles with a smaller angle are split while that can be done, degrees.
pub(super) const ANGLE_DEG: f64 = 29.0;

/// Angle at the new vertex in the triangle of an off-centre with the shortest edge, degrees: a little more than
/// asked for, so that it is not split again.
pub(super) const OFF_CENTRE_DEG: f64 = ANGLE_DEG + 1.0;

/// A triangle is too large when its circumcircle is that of an equilateral triangle with edges of this many
/// wanted sizes; the edges of a refined mesh are then as long as wanted on average.
const LARGEST: f64 = 1.35;

/// A triangle has to keep at least this share of its area (times 2 r) in (r², z), where the elements live.
const UPRIGHT: f64 = 0.2;

impl Refiner<'_> {
    pub(super) fn fault(&self, face: Face) -> Option<Fault> {
        self.fault_of(face, self.mesh.corner_sites(face))
    }

    /// What is wrong with a face whose corners are known, in any cyclic order.
    pub(super) fn fault_of(&self, face: Face, sites: [Site; 3]) -> Option<Fault> {
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
        let drawn = sites.iter().filter(|site| site.on != On::Nothing).count();
        if leans(a, b, c, area2) || (drawn > 1 && self.lies_badly(face)) {
            return Some(Fault::Shape);
        }
        let sharp = radius2 > self.largest_ratio2 * shortest2;
        (sharp && !self.must_keep(face)).then_some(Fault::Shape)
    }

    /// A free edge leads straight from one side of a gap to the other (one layer only), or two edges lie on the
    /// outer circle.
    fn lies_badly(&self, face: Face) -> bool {
        let on = self.mesh.corner_sites(face).map(|site| site.on);
        let segments = self.mesh.edge_segments(face);
        let on_circle = |s: &u32| self.mesh.segments[*s as usize].boundary == Boundary::Circle;
        let spans = |k: usize| segments[k].is_none() && self.faces_across(on[(k + 1) % 3], on[(k + 2) % 3]);
        (0..3).any(spans) || segments.iter().flatten().filter(|s| on_circle(s)).count() > 1
    }

    /// Small angles that are the drawing's own, or that would need edges shorter than wanted by far.
    fn must_keep(&self, face: Face) -> bool {
        let sites = self.mesh.corner_sites(face);
        let edges2 = squared_edges(sites.map(|site| site.at));
        let [i, j, k] = shortest_edge(edges2);
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

    pub(super) fn treat_face(&mut self, face: Face) -> Result<(), MeshError> {
        if self.mesh.label(face) == OUTSIDE {
            return Ok(());
        }
        let sites = self.mesh.corner_sites(face);
        let Some(fault) = self.fault_of(face, sites) else {
            return Ok(());
        };
        let corners = sites.map(|site| site.at);
        let target = self.new_vertex(corners);
        if !(target.r.is_finite() && target.z.is_finite()) {
            return Ok(());
        }
        let centre = (corners[0] + corners[1] + corners[2]) * (1.0 / 3.0);
        match self.mesh.walk(centre, face, target) {
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
    fn new_vertex(&self, p: [Point; 3]) -> Point {
        let edges2 = squared_edges(p);
        let (u, v) = (p[1] - p[0], p[2] - p[0]);
        let (across, scale) = (u * edges2[1] - v * edges2[2], 0.5 / u.cross(v));
        let centre = p[0] + Point::new(-across.z, across.r) * scale;
        let [i, j, k] = shortest_edge(edges2);
        let middle = p[i].middle(p[j]);
        let towards = centre - middle;
        let (farthest2, distance2) = (self.off_centre2 * edges2[k], towards.dot(towards));
        if distance2 > farthest2 {
            middle + towards * (farthest2 / distance2).sqrt()
        } else {
            centre
        }
    }
}

/// Squared lengths of the edges that face each corner.
fn squared_edges(p: [Point; 3]) -> [f64; 3] {
    [p[2] - p[1], p[0] - p[2], p[1] - p[0]].map(|edge| edge.dot(edge))
}

/// The two corners of the shortest edge, and the one that faces it.
fn shortest_edge(edges2: [f64; 3]) -> [usize; 3] {
    if edges2[0] <= edges2[1] && edges2[0] <= edges2[2] {
        [1, 2, 0]
    } else if edges2[1] <= edges2[2] {
        [2, 0, 1]
    } else {
        [0, 1, 2]
    }
}

/// Whether a triangle with that doubled area loses most of it in (r², z).
fn leans(a: Point, b: Point, c: Point, area2: f64) -> bool {
    doubled_area_in_s(a, b, c) < UPRIGHT * 2.0 * (a.r + b.r + c.r) / 3.0 * area2
}

/// Whole powers of two in the excess size, whose square is given (at least 1).
fn size_class(excess2: f64) -> usize {
    // The exponent field of a double is biased by 1023.
    let exponent = (excess2.to_bits() >> 52).saturating_sub(1023);
    (exponent as usize / 2).min(SIZE_CLASSES - 1)
}
