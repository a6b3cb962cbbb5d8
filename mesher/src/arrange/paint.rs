//! Faces given to parts by painting order, and what is an error about that.

use super::frame::Frame;
use super::graph::{Arrangement, Boundary, OUTSIDE, Part, PartId, PlanarEdge, Weld};
use crate::curve::{Curve, Point};
use crate::error::MeshError;
use crate::planar::{GraphEdge, PlanarGraph, Windings};
use crate::section::{Section, SpaceEdge};
use crate::shape::Outline;

/// What was painted. Loop 0 of the graph is the frame, loop k the k-th painted outline, which is part k.
pub(super) struct Painting<'a> {
    pub section: &'a Section,
    /// (region, copy, outline) in painting order.
    pub painted: &'a [(usize, usize, &'a Outline)],
    pub frame: &'a Frame,
    pub weld_m: f64,
}

/// An arrangement and, for each of its edges, the drawn curves it is a piece of.
pub(super) struct Drawn {
    pub graph: Arrangement,
    pub drawn: Vec<Vec<u32>>,
}

impl Painting<'_> {
    pub fn arrangement(&self, graph: PlanarGraph) -> Result<Drawn, MeshError> {
        self.refuse_beyond_wall(&graph)?;
        let labels: Vec<PartId> = graph
            .faces
            .iter()
            .map(|face| self.part_of(&face.windings))
            .collect();
        self.refuse_vanished(&graph, &labels)?;
        let (mut edges, mut drawn) = (Vec::new(), Vec::new());
        for edge in &graph.edges {
            let [left, right] = edge.faces.map(|face| labels[face as usize]);
            if left != right {
                let boundary = self.boundary(edge, &graph.vertices, left == OUTSIDE || right == OUTSIDE);
                let GraphEdge {
                    start, end, curve, ..
                } = *edge;
                edges.push(PlanarEdge {
                    start,
                    end,
                    curve,
                    left,
                    right,
                    boundary,
                });
                drawn.push(edge.drawn.clone());
            }
        }
        let parts = self.parts(&edges);
        let welds = self.welds(&graph);
        let graph = Arrangement {
            vertices: graph.vertices,
            edges,
            parts,
            circle: self.frame.circle,
            mirror_z_m: self.section.mirror_z_m,
            welds,
        };
        Ok(Drawn { graph, drawn })
    }

    /// The part of a face: the outline painted last among those around it.
    fn part_of(&self, windings: &Windings) -> PartId {
        let inside = |looped: u32| windings.iter().any(|entry| entry.0 == looped && entry.1 > 0);
        if !inside(0) {
            return OUTSIDE;
        }
        windings
            .iter()
            .rev()
            .find(|entry| entry.1 > 0)
            .map_or(0, |entry| entry.0)
    }

    fn boundary(&self, edge: &GraphEdge, vertices: &[Point], outer: bool) -> Boundary {
        if !outer {
            return Boundary::None;
        }
        let ends = [edge.start, edge.end].map(|vertex| vertices[vertex as usize]);
        let straight = matches!(edge.curve, Curve::Line { .. });
        if straight && ends.iter().all(|point| point.r == 0.0) {
            Boundary::Axis
        } else if straight && ends.iter().all(|point| Some(point.z) == self.section.mirror_z_m) {
            Boundary::Mirror
        } else if self.frame.circle.is_some() {
            Boundary::Circle
        } else {
            Boundary::Wall
        }
    }

    fn region_name(&self, looped: u32) -> Option<&str> {
        let (region, ..) = self.painted.get((looped as usize).checked_sub(1)?)?;
        Some(&self.section.regions[*region].name)
    }

    /// Refuses a region that reaches out of the space by more than drawing noise.
    fn refuse_beyond_wall(&self, graph: &PlanarGraph) -> Result<(), MeshError> {
        let SpaceEdge::Wall(wall) = &self.section.edge else {
            return Ok(());
        };
        let distance = |point: Point| {
            wall.curves()
                .iter()
                .map(|curve| curve.distance_m(point))
                .fold(f64::INFINITY, f64::min)
        };
        let beyond = |face: u32| {
            let windings = &graph.faces[face as usize].windings;
            let outside = !windings.iter().any(|entry| entry.0 == 0 && entry.1 > 0);
            windings
                .iter()
                .find(|entry| outside && entry.0 > 0 && entry.1 > 0)
                .map(|entry| entry.0)
        };
        let mut worst: Option<(u32, Point, f64)> = None;
        for edge in &graph.edges {
            let Some(looped) = edge.faces.iter().find_map(|face| beyond(*face)) else {
                continue;
            };
            for at in [edge.curve.start(), edge.curve.midpoint(), edge.curve.end()] {
                let by_m = distance(at);
                if by_m > 3.0 * self.weld_m && worst.is_none_or(|(_, _, most)| by_m > most) {
                    worst = Some((looped, at, by_m));
                }
            }
        }
        match worst.and_then(|(looped, at, by_m)| Some((self.region_name(looped)?, at, by_m))) {
            Some((name, at, by_m)) => Err(MeshError::BeyondWall {
                region: name.to_owned(),
                at,
                by_m,
            }),
            None => Ok(()),
        }
    }

    /// Refuses a region without a face of its own, naming what covers it.
    fn refuse_vanished(&self, graph: &PlanarGraph, labels: &[PartId]) -> Result<(), MeshError> {
        let mut visible = vec![false; self.section.regions.len()];
        let region = |part: PartId| {
            self.painted
                .get((part as usize).wrapping_sub(1))
                .map(|entry| entry.0)
        };
        for &label in labels {
            if let Some(k) = region(label) {
                visible[k] = true;
            }
        }
        let Some(lost) = visible.iter().position(|seen| !seen) else {
            return Ok(());
        };
        let mut covering: Vec<usize> = Vec::new();
        for (face, &label) in graph.faces.iter().zip(labels) {
            let here = face
                .windings
                .iter()
                .any(|entry| entry.1 > 0 && region(entry.0) == Some(lost));
            if let Some(k) = region(label).filter(|_| here) {
                covering.push(k);
            }
        }
        covering.sort_unstable();
        covering.dedup();
        Err(MeshError::RegionVanished {
            region: self.section.regions[lost].name.clone(),
            covered_by: covering
                .into_iter()
                .map(|k| self.section.regions[k].name.clone())
                .collect(),
        })
    }

    /// The parts with their exact areas and moments: boundary integrals, by Green's theorem.
    fn parts(&self, edges: &[PlanarEdge]) -> Vec<Part> {
        let part = |region, copy, mesh_size_m| Part {
            region,
            copy,
            area_m2: 0.0,
            r_moment_m3: 0.0,
            mesh_size_m,
        };
        let mut parts = vec![part(None, 0, None)];
        parts.extend(
            self.painted
                .iter()
                .map(|&(region, copy, _)| part(Some(region), copy, self.section.regions[region].mesh_size_m)),
        );
        for edge in edges {
            let (area, moment) = (edge.curve.area_term_m2(), edge.curve.moment_term_m3());
            for (label, sense) in [(edge.left, 1.0), (edge.right, -1.0)] {
                if let Some(part) = parts.get_mut(label as usize) {
                    part.area_m2 += sense * area;
                    part.r_moment_m3 += sense * moment;
                }
            }
        }
        parts
    }

    /// What was welded, one entry per place.
    fn welds(&self, graph: &PlanarGraph) -> Vec<Weld> {
        let mut welds: Vec<(Point, f64, Vec<u32>)> = Vec::new();
        let mut places = std::collections::HashMap::new();
        for one in &graph.moves {
            let key = (one.at.r.to_bits(), one.at.z.to_bits());
            let k = *places.entry(key).or_insert_with(|| {
                welds.push((one.at, 0.0, Vec::new()));
                welds.len() - 1
            });
            welds[k].1 = welds[k].1.max(one.by_m);
            welds[k].2.extend(&one.loops);
        }
        // The loops that meet there now took part, moved or not.
        for edge in &graph.edges {
            for vertex in [edge.start, edge.end] {
                let at = graph.vertices[vertex as usize];
                if let Some(&k) = places.get(&(at.r.to_bits(), at.z.to_bits())) {
                    welds[k].2.extend(edge.loops.iter().map(|entry| entry.0));
                }
            }
        }
        welds
            .into_iter()
            .map(|(at, moved_m, mut loops)| {
                loops.sort_unstable();
                let mut regions: Vec<String> = loops
                    .iter()
                    .filter_map(|looped| self.region_name(*looped))
                    .map(str::to_owned)
                    .collect();
                regions.dedup();
                Weld { at, moved_m, regions }
            })
            .collect()
    }
}
