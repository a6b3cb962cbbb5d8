//! Wanted sizes during refinement: the limit on growth, and gaps as they are found.

use std::cmp::Reverse;

use super::Refiner;
use crate::arrange::OUTSIDE;
use crate::curve::Point;
use crate::site::On;
use crate::size::GROWTH;
use crate::triangulate::{Face, Spoke};

/// Sizes at both sides of a gap are its width over this: two to three layers of triangles.
const GAP_LAYERS: f64 = 2.0;

/// The same for gaps so thin that their triangles make up most of the mesh. Two layers are kept by a rule of their
/// own; the field in such a gap hardly varies across it.
const THIN_GAP_LAYERS: f64 = 1.0;

/// A gap below this share of the size of the drawing is thin.
const THIN_GAP: f64 = 2e-3;

impl Refiner<'_> {
    /// Lowers a vertex's size, and with it those of its neighbours so far as the limit on growth asks.
    pub(super) fn lower(&mut self, vertex: u32, size: f64) {
        if self.mesh.site(vertex).size <= size {
            return;
        }
        self.mesh.set_size(vertex, size);
        self.note_lowered(vertex, size);
        self.relax();
    }

    pub(super) fn relax_all(&mut self) {
        for vertex in 4..self.mesh.vertex_count() as u32 {
            self.note_lowered(vertex, self.mesh.site(vertex).size);
        }
        self.relax();
    }

    /// Sizes are positive, so their bits are in their order.
    fn note_lowered(&mut self, vertex: u32, size: f64) {
        self.lowered.push(Reverse((size.to_bits(), vertex)));
    }

    /// Spreads lowered sizes, smallest first: so each vertex passes its final size on, once.
    fn relax(&mut self) {
        while let Some(Reverse((bits, vertex))) = self.lowered.pop() {
            let site = self.mesh.site(vertex);
            if site.size.to_bits() != bits {
                continue;
            }
            let mut ring = std::mem::take(&mut self.relaxed);
            ring.clear();
            ring.extend(self.mesh.neighbours(vertex));
            for &next in &ring {
                let other = self.mesh.site(next);
                let allowed = site.size + GROWTH * distance(other.at, site.at);
                if other.size > allowed * (1.0 + 1e-9) && other.on != On::Frame {
                    self.mesh.set_size(next, allowed);
                    self.note_lowered(next, allowed);
                }
            }
            self.relaxed = ring;
            self.queue_around(vertex);
        }
    }

    /// After a size changed.
    pub(super) fn queue_around(&mut self, vertex: u32) {
        let segments: Vec<u32> = self.mesh.segments_at(vertex).collect();
        self.segments.extend(segments);
        self.queue_star(vertex);
    }

    /// Gives a new vertex the size that its neighbours and the limit allow, and lowers neighbours that are too
    /// large beside it. Returns whether any was.
    pub(super) fn settle(&mut self, vertex: u32, limit: f64, spokes: &[Spoke]) -> bool {
        let at = self.mesh.site(vertex).at;
        let inner = || spokes.iter().filter(|spoke| spoke.site.on != On::Frame);
        let size = inner()
            .map(|spoke| spoke.site.size + GROWTH * distance(spoke.site.at, at))
            .fold(limit, f64::min);
        self.mesh.set_size(vertex, size);
        for spoke in inner().filter(|spoke| spoke.site.size > size) {
            let allowed = size + GROWTH * distance(spoke.site.at, at);
            if spoke.site.size > allowed * (1.0 + 1e-9) {
                self.mesh.set_size(spoke.to, allowed);
                self.note_lowered(spoke.to, allowed);
            }
        }
        let lowered = !self.lowered.is_empty();
        self.relax();
        lowered
    }

    /// Finds features that face each other across a triangle, and lowers the sizes at both sides.
    pub(super) fn measure_gaps(&mut self, face: Face) {
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

    pub(super) fn size_in_gap(&self, width: f64) -> f64 {
        width
            / if width < THIN_GAP * self.unit_m {
                THIN_GAP_LAYERS
            } else {
                GAP_LAYERS
            }
    }

    /// Whether two places on the drawing are sides of a gap: on different curves that do not meet.
    pub(super) fn faces_across(&self, one: On, other: On) -> bool {
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

/// Distance without the guard against overflow: this is called most of all.
fn distance(a: Point, b: Point) -> f64 {
    let d = b - a;
    d.dot(d).sqrt()
}
