//! How fine where. Sizes are wanted edge lengths in metres. They follow from the drawing alone: extents of the
//! parts, curvature, corners, short edges; gaps are found later, on the triangulation (`refine`).

use crate::arrange::{Arrangement, Boundary, OUTSIDE, PartId, PlanarEdge};
use crate::curve::{Bounds, Curve, Point};
use crate::mesh::MeshOptions;

/// Edges across a part of square shape. A coil section resolved into about this many layers is 1 % from its
/// limit, and the nested pair gains two more digits.
const EDGES_ACROSS_PART: f64 = 12.0;

/// Edges along the radius of the outer circle: the exterior beyond it is exact, and the field is smooth there.
const EDGES_ALONG_CIRCLE_RADIUS: f64 = 12.0;

/// Edges across what is drawn (the square root of the area of its box, from the axis on): air within and around a
/// device, in the bore of a coil say, is where its field is asked for.
const EDGES_ACROSS_DEVICE: f64 = 24.0;

/// Sizes grow by at most this much per distance, so neighbouring edges by about 1.3.
pub(crate) const GROWTH: f64 = 0.3;

/// Size at a corner of the drawing, as a share of the size of the parts that meet there: fields are singular at
/// corners of permeable parts (the mesher cannot know which those are).
const CORNER_SHARE: f64 = 0.3;

/// A turn of the outline by more than this is a corner.
const CORNER_TURN_DEG: f64 = 20.0;

/// A corner of the drawing sharper than this is split on circles around it, so that neighbours do not encroach on
/// each other forever (Ruppert, J. Algorithms 18, 1995).
const SHARP_DEG: f64 = 80.0;

/// Largest turn of an arc per edge: its chords then deviate by 1.6 % of their length.
const ARC_STEP_DEG: f64 = 7.5;

/// The same in drawings with many arcs (bundles of round wires), where each counts for less: 3.3 %.
const ARC_STEP_MANY_DEG: f64 = 15.0;

/// However coarse the mesh, arcs turn by no more than this per edge.
const COARSEST_ARC_STEP_DEG: f64 = 45.0;

/// Full turns of arc in a drawing from which on the step grows.
const FEW_TURNS: f64 = 6.0;

/// Largest change of a part's volume by straightening its slanted edges in (r², z), relative.
const VOLUME_TOLERANCE: f64 = 1e-5;

/// Wanted sizes, before gaps are known.
#[derive(Clone, Debug)]
pub(crate) struct SizePlan {
    /// Upper limit in each part, m.
    pub(crate) part: Vec<f64>,
    /// Upper limit along each planar edge, m.
    edge: Vec<f64>,
    /// Whether air lies beside it.
    in_air: Vec<bool>,
    /// Upper limit in air within and near the device.
    device: DeviceLimit,
    /// Longest segments along each planar edge that keep the volumes, m.
    pub(crate) longest: Vec<f64>,
    /// Size at each vertex of the drawing, m.
    pub(crate) vertex: Vec<f64>,
    /// Smallest angle between two curves there, degrees.
    pub(crate) sharpest_deg: Vec<f64>,
    /// Largest turn of an arc per edge, rad.
    pub(crate) arc_step: f64,
}

impl SizePlan {
    /// Sizes for a drawing.
    pub(crate) fn of(drawing: &Arrangement, options: &MeshOptions) -> Self {
        let part = part_limits(drawing, options.fineness);
        let device = DeviceLimit::of(drawing, options.fineness);
        let arc_step = (arc_step(drawing) / options.fineness).min(COARSEST_ARC_STEP_DEG.to_radians());
        let longest = volume_limits(drawing);
        let edge: Vec<f64> = drawing
            .edges
            .iter()
            .zip(&longest)
            .map(|(edge, &by_volume)| {
                let by_turn = if edge.boundary == Boundary::Circle {
                    f64::INFINITY
                } else {
                    edge.curve.radius_m() * arc_step
                };
                by_volume.min(by_turn).min(beside(edge, &part))
            })
            .collect();
        let in_air: Vec<bool> = drawing
            .edges
            .iter()
            .map(|e| e.left == AIR || e.right == AIR)
            .collect();
        let spokes = spokes(drawing);
        let mut vertex = Vec::with_capacity(drawing.vertices.len());
        let mut sharpest = Vec::with_capacity(drawing.vertices.len());
        for (around, &at) in spokes.iter().zip(&drawing.vertices) {
            let base = around
                .iter()
                .map(|spoke| {
                    edge[spoke.edge as usize].min(drawing.edges[spoke.edge as usize].curve.length_m())
                })
                .fold(f64::INFINITY, f64::min);
            let parts = around
                .iter()
                .map(|spoke| beside(&drawing.edges[spoke.edge as usize], &part))
                .fold(f64::INFINITY, f64::min);
            let corner = if is_corner(drawing, around) {
                CORNER_SHARE * parts
            } else {
                f64::INFINITY
            };
            let in_air = around.iter().any(|spoke| in_air[spoke.edge as usize]);
            let air = if in_air { device.at(at) } else { f64::INFINITY };
            vertex.push(base.min(corner).min(air));
            sharpest.push(sharpest_deg(around));
        }
        Self {
            part,
            edge,
            in_air,
            device,
            longest,
            vertex,
            sharpest_deg: sharpest,
            arc_step,
        }
    }

    /// Whether two curves meet at a vertex at less than [`SHARP_DEG`].
    pub(crate) fn is_sharp(&self, vertex: u32) -> bool {
        self.sharpest_deg[vertex as usize] < SHARP_DEG
    }

    /// Upper limit at a point of a part, m; no limit outside.
    pub(crate) fn in_part(&self, part: PartId, at: Point) -> f64 {
        let limit = self.part.get(part as usize).copied().unwrap_or(f64::INFINITY);
        if part == AIR {
            limit.min(self.device.at(at))
        } else {
            limit
        }
    }

    /// Upper limit at a point of a planar edge, m.
    pub(crate) fn on_edge(&self, edge: u32, at: Point) -> f64 {
        let limit = self.edge[edge as usize];
        if self.in_air[edge as usize] {
            limit.min(self.device.at(at))
        } else {
            limit
        }
    }
}

/// Air is the first part.
const AIR: PartId = 0;

/// Upper limit of sizes in air: constant within the box of what is drawn, growing away from it.
#[derive(Clone, Copy, Debug)]
struct DeviceLimit {
    drawn: Bounds,
    within_m: f64,
}

impl DeviceLimit {
    fn of(drawing: &Arrangement, fineness: f64) -> Self {
        let inner = drawing.edges.iter().filter(|e| e.boundary == Boundary::None);
        let mut drawn = inner.fold(Bounds::EMPTY, |b, e| b.union(e.curve.bounds()));
        drawn.low.r = drawn.low.r.min(0.0);
        let area = (drawn.high.r - drawn.low.r) * (drawn.high.z - drawn.low.z);
        let within_m = if area > 0.0 && area.is_finite() {
            area.sqrt() / (EDGES_ACROSS_DEVICE * fineness)
        } else {
            f64::INFINITY
        };
        Self { drawn, within_m }
    }

    fn at(&self, point: Point) -> f64 {
        let beyond = |x: f64, low: f64, high: f64| (low - x).max(x - high).max(0.0);
        let dr = beyond(point.r, self.drawn.low.r, self.drawn.high.r);
        let dz = beyond(point.z, self.drawn.low.z, self.drawn.high.z);
        self.within_m + GROWTH * (dr * dr + dz * dz).sqrt()
    }
}

/// The smaller limit of the two parts beside an edge.
fn beside(edge: &PlanarEdge, part: &[f64]) -> f64 {
    let limit = |id: PartId| {
        if id == OUTSIDE {
            f64::INFINITY
        } else {
            part[id as usize]
        }
    };
    limit(edge.left).min(limit(edge.right))
}

fn part_limits(drawing: &Arrangement, fineness: f64) -> Vec<f64> {
    let whole: f64 = drawing.parts.iter().map(|p| p.area_m2).sum();
    let far = drawing.circle.map_or(whole.sqrt(), |circle| circle.radius_m) / EDGES_ALONG_CIRCLE_RADIUS;
    drawing
        .parts
        .iter()
        .enumerate()
        .map(|(id, part)| {
            let own = if id == 0 {
                far
            } else {
                (part.area_m2.sqrt() / EDGES_ACROSS_PART).min(far)
            };
            part.mesh_size_m.unwrap_or(f64::INFINITY).min(own) / fineness
        })
        .collect()
}

fn arc_step(drawing: &Arrangement) -> f64 {
    let inner = drawing.edges.iter().filter(|e| e.boundary != Boundary::Circle);
    let turns: f64 = inner.map(|e| e.curve.sweep().abs()).sum::<f64>() / std::f64::consts::TAU;
    let step = ARC_STEP_DEG * (turns / FEW_TURNS).max(1.0).sqrt();
    step.min(ARC_STEP_MANY_DEG).to_radians()
}

/// Longest pieces of each slanted straight edge with which every part keeps its volume. Cutting an edge into n
/// pieces divides its error E by n²; the fewest pieces for a given sum have n proportional to E^(1/3).
fn volume_limits(drawing: &Arrangement) -> Vec<f64> {
    let error: Vec<f64> = drawing
        .edges
        .iter()
        .map(|e| straightening_error_m3(&e.curve))
        .collect();
    let mut cube_roots = vec![0.0; drawing.parts.len()];
    for (edge, e) in drawing.edges.iter().zip(&error) {
        for part in [edge.left, edge.right]
            .into_iter()
            .filter(|&part| part != OUTSIDE)
        {
            cube_roots[part as usize] += e.cbrt();
        }
    }
    let pieces_per_root = |part: PartId| {
        if part == OUTSIDE {
            return 0.0;
        }
        let budget = VOLUME_TOLERANCE * drawing.parts[part as usize].r_moment_m3;
        (cube_roots[part as usize] / budget).sqrt()
    };
    drawing
        .edges
        .iter()
        .zip(&error)
        .map(|(edge, e)| {
            let pieces = e.cbrt() * pieces_per_root(edge.left).max(pieces_per_root(edge.right));
            if pieces > 1.0 {
                edge.curve.length_m() / pieces
            } else {
                f64::INFINITY
            }
        })
        .collect()
}

/// Integral of r over what lies between a straight line in (r, z) and the chord of its ends in (r², z), m³.
/// Arcs are left to the rule on their turn.
fn straightening_error_m3(curve: &Curve) -> f64 {
    match *curve {
        Curve::Line { from, to } => (to.r - from.r).powi(2) * (to.z - from.z).abs() / 12.0,
        Curve::Arc { .. } => 0.0,
    }
}

/// A curve that leaves a vertex.
#[derive(Clone, Copy, Debug)]
struct Spoke {
    edge: u32,
    /// Unit vector away from the vertex.
    direction: Point,
}

/// The curves around each vertex of the drawing, counter-clockwise.
fn spokes(drawing: &Arrangement) -> Vec<Vec<Spoke>> {
    let mut spokes = vec![Vec::new(); drawing.vertices.len()];
    for (number, edge) in drawing.edges.iter().enumerate() {
        let number = number as u32;
        spokes[edge.start as usize].push(Spoke {
            edge: number,
            direction: edge.curve.tangent(0.0),
        });
        spokes[edge.end as usize].push(Spoke {
            edge: number,
            direction: edge.curve.tangent(1.0) * -1.0,
        });
    }
    for around in &mut spokes {
        around.sort_by(|a, b| angle(a.direction).total_cmp(&angle(b.direction)));
    }
    spokes
}

fn angle(direction: Point) -> f64 {
    direction.z.atan2(direction.r)
}

/// Smallest angle between neighbouring curves at a vertex, degrees.
fn sharpest_deg(around: &[Spoke]) -> f64 {
    let turn = |a: &Spoke, b: &Spoke| {
        let (cross, dot) = (a.direction.cross(b.direction), a.direction.dot(b.direction));
        cross.atan2(dot).abs().to_degrees()
    };
    (0..around.len())
        .filter(|_| around.len() > 1)
        .map(|k| turn(&around[k], &around[(k + 1) % around.len()]))
        .fold(f64::INFINITY, f64::min)
}

/// Whether the outline of some part turns here by more than [`CORNER_TURN_DEG`]. Axis and mirror are seen as what
/// they are, planes of symmetry: a flat face that ends at them squarely has no corner there.
fn is_corner(drawing: &Arrangement, around: &[Spoke]) -> bool {
    let mut directions = Vec::new();
    let mut images = Vec::new();
    for spoke in around {
        let edge = &drawing.edges[spoke.edge as usize];
        match edge.boundary {
            Boundary::Axis => images.push(Point::new(-1.0, 1.0)),
            Boundary::Mirror => images.push(Point::new(1.0, -1.0)),
            _ if edge.left != edge.right => directions.push(spoke.direction),
            _ => {}
        }
    }
    images.dedup();
    if let Some(image) = images.first() {
        let mirrored: Vec<_> = directions
            .iter()
            .map(|d| Point::new(d.r * image.r, d.z * image.z))
            .collect();
        directions.extend(mirrored);
    }
    match directions[..] {
        [] | [_] => false,
        [a, b] => a.dot(b) > -CORNER_TURN_DEG.to_radians().cos(),
        _ => true,
    }
}
