//! Segments: when they are split, where, and what follows.

use super::{Refiner, SHORTEST};
use crate::arrange::Boundary;
use crate::chords::share_at_distance;
use crate::error::MeshError;
use crate::piece;
use crate::site::{On, Site, encroaches};

/// A segment is too long beyond this many wanted sizes.
const LONGEST: f64 = 1.35;

/// Segments that wait for others to be split before them.
const DEEPEST: usize = 60;

impl Refiner<'_> {
    pub(super) fn treat_segment(&mut self, number: u32) -> Result<(), MeshError> {
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

    pub(super) fn may_shrink(&self, number: u32) -> bool {
        let [a, b] = self.mesh.segments[number as usize]
            .ends
            .map(|v| self.mesh.site(v));
        a.at.distance(b.at) > 2.0 * SHORTEST * a.size.min(b.size)
    }

    pub(super) fn is_encroached(&self, number: u32) -> bool {
        let [a, b] = self.mesh.segments[number as usize]
            .ends
            .map(|v| self.mesh.site(v).at);
        self.mesh
            .apexes(number)
            .into_iter()
            .flatten()
            .any(|apex| encroaches(self.mesh.site(apex).at, a, b))
    }

    pub(super) fn split(&mut self, number: u32) -> Result<(), MeshError> {
        self.split_clear(number, 0)
    }

    /// Splits a segment; first those that lie between its chord and its curve (they run closely beside it, and were
    /// not cut as finely yet).
    pub(super) fn split_clear(&mut self, number: u32, depth: usize) -> Result<(), MeshError> {
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
    pub(super) fn share(&self, number: u32) -> f64 {
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

    /// Sizes and work that follow from a new vertex.
    pub(super) fn after_insertion(&mut self, vertex: u32, limit: f64) {
        let mut spokes = std::mem::take(&mut self.spokes);
        self.mesh.surroundings(vertex, &mut spokes);
        let lowered = self.settle(vertex, limit, &spokes);
        let site = self.mesh.site(vertex);
        for (k, spoke) in spokes.iter().enumerate() {
            let Some(face) = spoke.face else { continue };
            self.segments.extend(spoke.facing);
            if site.on != On::Nothing {
                self.gaps.push_back(face);
            }
            if lowered {
                self.queue_face(face);
            } else if self.filling {
                let next = spokes[(k + 1) % spokes.len()].site;
                self.queue(face, self.fault_of(face, [site, spoke.site, next]));
            }
        }
        self.spokes = spokes;
    }
}
