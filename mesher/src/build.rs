//! From a planar graph of curves to the finished mesh.

use crate::arrange::{Arrangement, PartId};
use crate::curve::{Bounds, Curve, Point};
use crate::error::MeshError;
use crate::mesh::{CurveEdge, Mesh, MeshOptions};
use crate::order::hilbert_key;
use crate::piece;
use crate::refine::refine;
use crate::section::Section;
use crate::size::SizePlan;
use crate::triangulate::{On, Segment, Site, Triangulation, Unmeshable};

/// Rounds in which arcs are cut finer until no chord crosses another: each halves the pieces.
const ROUNDS: usize = 24;

impl Mesh {
    /// Meshes a section.
    ///
    /// Errors: what [`crate::arrange::arrange`] finds wrong with the drawing; a region without a triangle; more
    /// triangles than `options` allow.
    pub fn of(section: &Section, options: &MeshOptions) -> Result<Self, MeshError> {
        let drawing = crate::arrange::arrange(section)?;
        Self::of_arrangement(&drawing, options)
    }

    /// Meshes a planar graph of curves.
    pub fn of_arrangement(drawing: &Arrangement, options: &MeshOptions) -> Result<Self, MeshError> {
        if !(options.fineness.is_finite() && options.fineness > 0.0) {
            return Err(MeshError::Fineness {
                fineness: options.fineness,
            });
        }
        let plan = SizePlan::of(drawing, options);
        let bounds = drawing.vertices.iter().fold(Bounds::EMPTY, |b, &v| b.with(v));
        let unit_m = (bounds.high.r - bounds.low.r).max(bounds.high.z - bounds.low.z);
        let start = first_triangulation(drawing, &plan)?;
        let refined = refine(drawing, &plan, unit_m, start, options.max_triangles)?;
        finished(drawing, &refined, bounds)
    }
}

/// Triangulates the drawing, its arcs cut finely enough that chords touch nothing else.
fn first_triangulation(drawing: &Arrangement, plan: &SizePlan) -> Result<Triangulation, MeshError> {
    let mut pieces: Vec<u32> = drawing
        .edges
        .iter()
        .map(|edge| (edge.curve.sweep().abs() / plan.arc_step).ceil().max(1.0) as u32)
        .collect();
    let mut last = Point::default();
    for _ in 0..ROUNDS {
        let (sites, segments) = chords(drawing, plan, &pieces);
        match Triangulation::new(&sites, segments.clone()) {
            Ok(triangulation) => return Ok(triangulation),
            Err(Unmeshable::Coordinates) => {
                return Err(MeshError::Coordinates {
                    at: drawing.vertices.first().copied().unwrap_or_default(),
                });
            }
            Err(Unmeshable::Mixed(at)) => return Err(MeshError::Entangled { at }),
            Err(Unmeshable::Crossing(crossing)) => {
                let places: Vec<&Segment> = crossing.iter().map(|&s| &segments[s as usize]).collect();
                last = places.first().map_or(last, |s| s.curve.start());
                if !cut_finer(drawing, &segments, &places, &mut pieces) {
                    break;
                }
            }
        }
    }
    Err(MeshError::Entangled { at: last })
}

/// Doubles the pieces of the arcs that come near to the crossing chords; false when there are none.
fn cut_finer(drawing: &Arrangement, segments: &[Segment], places: &[&Segment], pieces: &mut [u32]) -> bool {
    let near = |curve: &Curve| {
        let bounds = curve.bounds();
        places.iter().any(|place| place.curve.bounds().meets(bounds))
    };
    let mut finer = vec![false; pieces.len()];
    for segment in segments.iter().filter(|s| s.curve.sweep() != 0.0) {
        finer[segment.edge as usize] |= near(&segment.curve);
    }
    for (count, _) in pieces.iter_mut().zip(&finer).filter(|(_, finer)| **finer) {
        *count = count.saturating_mul(2);
    }
    debug_assert_eq!(pieces.len(), drawing.edges.len());
    finer.contains(&true)
}

/// All drawn curves, cut into equal pieces.
fn chords(drawing: &Arrangement, plan: &SizePlan, pieces: &[u32]) -> (Vec<Site>, Vec<Segment>) {
    let mut sites: Vec<Site> = drawing
        .vertices
        .iter()
        .zip(&plan.vertex)
        .enumerate()
        .map(|(number, (&at, &size))| Site {
            at,
            size,
            on: On::Drawn(number as u32),
        })
        .collect();
    let mut segments = Vec::new();
    for (number, (edge, &count)) in drawing.edges.iter().zip(pieces).enumerate() {
        let sides = [edge.left, edge.right];
        let segment = |ends, curve| Segment {
            ends,
            curve,
            edge: number as u32,
            boundary: edge.boundary,
            sides,
        };
        let mut rest = edge.curve;
        let mut from = edge.start;
        for done in 1..count {
            let t = 1.0 / f64::from(count - done + 1);
            let at = piece::node_on(&rest, t, edge.boundary, drawing.circle.as_ref());
            let [first, second] = piece::cut(&rest, t, at);
            let to = sites.len() as u32;
            sites.push(Site {
                at,
                size: plan.edge[number],
                on: On::Curve(number as u32),
            });
            segments.push(segment([from, to], first));
            (rest, from) = (second, to);
        }
        segments.push(segment([from, edge.end], rest));
    }
    (sites, segments)
}

/// Keeps the meshed faces; nodes get numbers along a space-filling curve, triangles follow their smallest node.
fn finished(drawing: &Arrangement, from: &Triangulation, bounds: Bounds) -> Result<Mesh, MeshError> {
    let mut used = vec![false; from.vertex_count()];
    for vertex in from.faces().flat_map(|face| from.corners(face)) {
        used[vertex as usize] = true;
    }
    let mut order: Vec<(u64, u32)> = (0..from.vertex_count() as u32)
        .filter(|&vertex| used[vertex as usize])
        .map(|vertex| (hilbert_key(from.site(vertex).at, bounds), vertex))
        .collect();
    order.sort_unstable();
    let mut number = vec![u32::MAX; from.vertex_count()];
    for (new, &(_, vertex)) in order.iter().enumerate() {
        number[vertex as usize] = new as u32;
    }
    let mut triangles: Vec<([u32; 3], PartId)> = from
        .faces()
        .map(|face| {
            (
                smallest_first(from.corners(face).map(|v| number[v as usize])),
                from.label(face),
            )
        })
        .collect();
    triangles.sort_unstable();
    let mesh = Mesh {
        nodes: order.iter().map(|&(_, vertex)| from.site(vertex).at).collect(),
        triangles: triangles.iter().map(|&(corners, _)| corners).collect(),
        part_of: triangles.iter().map(|&(_, part)| part).collect(),
        parts: drawing.parts.clone(),
        curve_edges: from
            .segments
            .iter()
            .map(|s| CurveEdge {
                nodes: s.ends.map(|v| number[v as usize]),
                curve: s.curve,
                boundary: s.boundary,
            })
            .collect(),
        circle: drawing.circle,
        mirror_z_m: drawing.mirror_z_m,
        welds: drawing.welds.clone(),
    };
    sound(&mesh)?;
    Ok(mesh)
}

/// The same triangle with its smallest node in front.
fn smallest_first([a, b, c]: [u32; 3]) -> [u32; 3] {
    if a < b && a < c {
        [a, b, c]
    } else if b < c {
        [b, c, a]
    } else {
        [c, a, b]
    }
}

/// Every part has triangles, every triangle lies on its belly, no triangle has two edges on the circle.
fn sound(mesh: &Mesh) -> Result<(), MeshError> {
    let mut found = vec![false; mesh.parts.len()];
    for (corners, &part) in mesh.triangles.iter().zip(&mesh.part_of) {
        found[part as usize] = true;
        let [a, b, c] = corners.map(|n| mesh.nodes[n as usize]);
        let upright =
            crate::mesh::doubled_area(a, b, c) > 0.0 && crate::mesh::doubled_area_in_s(a, b, c) > 0.0;
        if !upright {
            return Err(MeshError::TurnedOver {
                at: a,
                part: mesh.part_name(part),
            });
        }
    }
    match found.iter().enumerate().skip(1).find(|(_, found)| !**found) {
        Some((part, _)) => Err(MeshError::PartVanished {
            part: mesh.part_name(part as u32),
        }),
        None => Ok(()),
    }
}
