//! Whether an arrangement is what it promises to be: used in tests, cheap enough to be used anywhere.

use thiserror::Error;

use super::graph::{Arrangement, Boundary, OUTSIDE, PartId};
use crate::curve::{Bounds, Curve, Point};
use crate::planar::{depth_between, for_each_close_pair, leaving_in_order, meetings};

/// A promise of [`Arrangement`] that does not hold.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum ArrangementFault {
    /// An edge does not end at its vertices, or a vertex is not where it must be.
    #[error("edge {edge} does not fit its vertices")]
    EndsApart {
        /// Index of the edge.
        edge: usize,
    },
    /// Both sides of an edge belong to one part.
    #[error("edge {edge} bounds nothing")]
    BoundsNothing {
        /// Index of the edge.
        edge: usize,
    },
    /// The parts around a vertex contradict each other.
    #[error("the parts around vertex {vertex} at {at} contradict each other")]
    PartsContradict {
        /// Index of the vertex.
        vertex: usize,
        /// Where it is.
        at: Point,
    },
    /// Two edges cross or touch away from their ends.
    #[error("edges {edges:?} meet at {at}, away from their ends")]
    EdgesMeet {
        /// Indices of the edges.
        edges: [usize; 2],
        /// Where.
        at: Point,
    },
    /// The areas of the parts do not add up to the area of the space, or one is negative.
    #[error("the parts cover {parts_m2} m² of {space_m2} m²")]
    AreasDiffer {
        /// Sum over the parts.
        parts_m2: f64,
        /// Area within the boundary.
        space_m2: f64,
    },
}

impl Arrangement {
    /// The part whose boundary turns around a point; [`OUTSIDE`] beyond the edge of space. Looks at every edge:
    /// meant for checks. On an edge, the part of either side.
    pub fn part_at(&self, point: Point) -> PartId {
        let mut turns = vec![0; self.parts.len()];
        for edge in &self.edges {
            let passes = edge.curve.winding_about(point);
            for (part, sense) in [(edge.left, 1), (edge.right, -1)] {
                if let Some(count) = turns.get_mut(part as usize) {
                    *count += sense * passes;
                }
            }
        }
        turns
            .iter()
            .position(|count| *count > 0)
            .map_or(OUTSIDE, |part| part as PartId)
    }

    /// Checks edges against vertices, the parts around every vertex, that no two edges meet except at their ends,
    /// and that the areas of the parts add up.
    ///
    /// # Errors
    /// The first promise found broken.
    pub fn check(&self) -> Result<(), ArrangementFault> {
        self.check_ends()?;
        self.check_around_vertices()?;
        self.check_apart()?;
        self.check_areas()
    }

    fn check_ends(&self) -> Result<(), ArrangementFault> {
        for (k, edge) in self.edges.iter().enumerate() {
            let (from, to) = (
                self.vertices[edge.start as usize],
                self.vertices[edge.end as usize],
            );
            let on_curve = edge.curve.start() == from && edge.curve.end() == to && from != to;
            let in_place = match edge.boundary {
                Boundary::Axis => from.r == 0.0 && to.r == 0.0,
                Boundary::Mirror => Some(from.z) == self.mirror_z_m && Some(to.z) == self.mirror_z_m,
                _ => from.r >= 0.0 && to.r >= 0.0,
            };
            let outer = edge.left == OUTSIDE || edge.right == OUTSIDE;
            if !on_curve || !in_place || outer != (edge.boundary != Boundary::None) {
                return Err(ArrangementFault::EndsApart { edge: k });
            }
            if edge.left == edge.right {
                return Err(ArrangementFault::BoundsNothing { edge: k });
            }
        }
        Ok(())
    }

    fn check_around_vertices(&self) -> Result<(), ArrangementFault> {
        let ends: Vec<(u32, u32)> = self.edges.iter().map(|edge| (edge.start, edge.end)).collect();
        let leaving = leaving_in_order(&ends, |k| self.edges[k].curve, self.vertices.len());
        for (vertex, around) in leaving.iter().enumerate() {
            let sides = |half: usize| {
                let edge = &self.edges[half / 2];
                if half.is_multiple_of(2) {
                    (edge.left, edge.right)
                } else {
                    (edge.right, edge.left)
                }
            };
            let fits = |k: usize| sides(around[k]).0 == sides(around[(k + 1) % around.len()]).1;
            if around.len() < 2 || !(0..around.len()).all(fits) {
                return Err(ArrangementFault::PartsContradict {
                    vertex,
                    at: self.vertices[vertex],
                });
            }
        }
        Ok(())
    }

    fn check_apart(&self) -> Result<(), ArrangementFault> {
        let boxes: Vec<Bounds> = self.edges.iter().map(|edge| edge.curve.bounds()).collect();
        let size = boxes
            .iter()
            .fold(Bounds::EMPTY, |all, one| all.union(*one))
            .size();
        // Curves that touch at a common end may cross once more in round-off: so near, or with so thin a lens
        // between, that no mesh sees it.
        let (near, thin) = (2e-7 * size, 1e-11 * size);
        let mut fault = None;
        for_each_close_pair(&boxes, |i, j| {
            let (a, b) = (&self.edges[i], &self.edges[j]);
            let ends = [(a.start, 0.0), (a.end, 1.0)];
            let common = || ends.iter().filter(|(v, _)| *v == b.start || *v == b.end);
            let straight = [a, b].iter().all(|edge| matches!(edge.curve, Curve::Line { .. }));
            if straight && common().next().is_some() {
                return; // Two lines meet once; along one line, round-off may claim more.
            }
            for meeting in meetings(&a.curve, &b.curve, 0.0) {
                let at_end = |&(v, share): &(u32, f64)| {
                    self.vertices[v as usize].distance(meeting.at) <= near
                        || depth_between(&a.curve, &b.curve, share, meeting.shares[0]) <= thin
                };
                if !common().any(at_end) && fault.is_none() {
                    fault = Some(ArrangementFault::EdgesMeet {
                        edges: [i, j],
                        at: meeting.at,
                    });
                }
            }
        });
        fault.map_or(Ok(()), Err)
    }

    fn check_areas(&self) -> Result<(), ArrangementFault> {
        let parts_m2: f64 = self.parts.iter().map(|part| part.area_m2).sum();
        let boundary = self.edges.iter().filter(|edge| edge.boundary != Boundary::None);
        let space_m2: f64 = boundary
            .map(|edge| edge.curve.area_term_m2() * if edge.left == OUTSIDE { -1.0 } else { 1.0 })
            .sum();
        let negative = self.parts.iter().any(|part| part.area_m2 < -1e-12 * space_m2);
        if negative || (parts_m2 - space_m2).abs() > 1e-9 * space_m2 {
            return Err(ArrangementFault::AreasDiffer { parts_m2, space_m2 });
        }
        Ok(())
    }
}
