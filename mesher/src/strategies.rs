//! Random sections for property tests (cargo feature `strategies`): overlapping, nested, touching and partly
//! shared shapes, some on the axis, some with drawing noise.
//!
//! Most coordinates come from a coarse lattice, so that shapes often share edges, corners, centres and tangents;
//! the others are arbitrary.

use proptest::prelude::*;
use std::f64::consts::TAU;

use crate::curve::{Bounds, Point};
use crate::section::{PaintedRegion, Section, SpaceEdge};
use crate::shape::{Outline, Step};

/// Sections of `1..=most` regions, with half circle, wall or mirror. Lengths from millimetres to metres; drawing
/// noise of a ten-millionth of the drawing's size.
pub fn sections(most: usize) -> impl Strategy<Value = Section> {
    noisy_sections(most, 1e-7)
}

/// The same with noise of at most `noise_share` of the drawing's size.
pub fn noisy_sections(most: usize, noise_share: f64) -> impl Strategy<Value = Section> {
    sections_of(shapes(), most, noise_share)
}

fn sections_of(
    shapes: impl Strategy<Value = Shape>,
    most: usize,
    noise_share: f64,
) -> impl Strategy<Value = Section> {
    let regions = prop::collection::vec(copies(shapes), 1..=most);
    let scale = prop::sample::select(vec![1e-3, 0.01, 0.37]);
    (regions, edges(), scale).prop_filter_map("within the half plane", move |(regions, edge, scale)| {
        section(&regions, edge, scale, noise_share)
    })
}

/// The same as [`sections`], but a third of the shapes have sides that are arcs rising by 1e-6 to 1 of a lattice
/// step: nearly straight, with centres far away, and slivers between them and straight sides.
pub fn shallow_sections(most: usize) -> impl Strategy<Value = Section> {
    let rise =
        (-6.0..0.0, prop::sample::select(vec![-1.0, 1.0])).prop_map(|(e, sign)| sign * 10.0_f64.powf(e));
    sections_of(prop_oneof![2 => shapes(), 1 => vaults(rise)], most, 1e-7)
}

/// A shape on the lattice of [`outlines`], and how many copies stand one above the other.
#[derive(Clone, Debug)]
struct Drawing {
    shape: Shape,
    /// Moved by this share of the largest drawing noise.
    noise: (f64, f64),
    copies: u32,
    pitch: f64,
}

/// How space ends.
#[derive(Clone, Copy, Debug)]
enum Edge {
    Open,
    Mirror,
    Wall { margin: f64 },
    WallOnMirror,
}

#[derive(Clone, Debug)]
enum Shape {
    Rect {
        r: [f64; 2],
        z: [f64; 2],
        fillet: f64,
    },
    Circle {
        centre: Point,
        radius: f64,
    },
    /// Corners at these directions (turns, rising) and distances around a centre.
    Polygon {
        centre: Point,
        corners: Vec<(f64, f64)>,
    },
    /// A sector of a ring: radii, and the directions (turns) it runs between.
    Sector {
        centre: Point,
        radii: [f64; 2],
        turns: [f64; 2],
    },
    /// A slab whose upper side is an arc.
    Vault {
        r: [f64; 2],
        z: [f64; 2],
        rise: f64,
    },
}

fn edges() -> impl Strategy<Value = Edge> {
    prop_oneof![
        5 => Just(Edge::Open),
        2 => Just(Edge::Mirror),
        2 => prop::sample::select(vec![0.0, 1.0, 2.5]).prop_map(|margin| Edge::Wall { margin }),
        1 => Just(Edge::WallOnMirror),
    ]
}

/// A coordinate: mostly on the lattice.
fn coordinate(low: i32, high: i32) -> impl Strategy<Value = f64> {
    prop_oneof![
        4 => (low..=high).prop_map(f64::from),
        1 => (2 * low..=2 * high).prop_map(|half| 0.5 * f64::from(half)),
        1 => f64::from(low)..f64::from(high),
    ]
}

fn interval(low: i32, high: i32) -> impl Strategy<Value = [f64; 2]> {
    (coordinate(low, high), coordinate(low, high)).prop_map(|(a, b)| [a, b])
}

fn shapes() -> impl Strategy<Value = Shape> {
    let point = || (coordinate(0, 6), coordinate(-5, 5)).prop_map(|(r, z)| Point::new(r, z));
    let fillet = prop::sample::select(vec![0.0, 0.0, 0.25, 0.5]);
    let rect = (interval(0, 6), interval(-5, 5), fillet);
    let corner = (0.02..0.33_f64, 0.3..2.5_f64);
    prop_oneof![
        4 => rect.prop_map(|(r, z, fillet)| Shape::Rect { r, z, fillet }),
        2 => (point(), coordinate(0, 3)).prop_map(|(centre, radius)| Shape::Circle { centre, radius }),
        2 => (point(), prop::collection::vec(corner, 3..8))
            .prop_map(|(centre, corners)| Shape::Polygon { centre, corners }),
        2 => (point(), interval(1, 3), (0.0..1.0, 0.05..0.9)).prop_map(|(centre, radii, (from, span))| {
            Shape::Sector { centre, radii, turns: [from, from + span] }
        }),
        1 => vaults(-1.0..1.0),
    ]
}

fn vaults(rise: impl Strategy<Value = f64>) -> impl Strategy<Value = Shape> {
    (interval(0, 6), interval(-5, 5), rise).prop_map(|(r, z, rise)| Shape::Vault { r, z, rise })
}

fn copies(shapes: impl Strategy<Value = Shape>) -> impl Strategy<Value = Drawing> {
    let noise = prop_oneof![3 => Just((0.0, 0.0)), 1 => (-1.0..1.0, -1.0..1.0)];
    let count = prop_oneof![4 => Just(1_u32), 1 => 2..4_u32];
    let shapes = shapes.prop_filter("within the half plane", |shape| shape.outline(1.0).is_some());
    (shapes, noise, count, coordinate(0, 2)).prop_map(|(shape, noise, copies, pitch)| Drawing {
        shape,
        noise,
        copies,
        pitch,
    })
}

/// Single outlines, before scaling: within r = 0..9, z = -8..8.
pub fn outlines() -> impl Strategy<Value = Outline> {
    shapes().prop_filter_map("within the half plane", |shape| shape.outline(1.0))
}

impl Shape {
    fn outline(&self, scale: f64) -> Option<Outline> {
        let scaled = |pair: &[f64; 2]| pair.map(|x| x * scale);
        let around = |centre: &Point, radius: f64, turns: f64| {
            let (sin, cos) = (turns * TAU).sin_cos();
            Point::new(centre.r + radius * cos, centre.z + radius * sin) * scale
        };
        match self {
            Self::Rect { r, z, fillet } => Outline::rect(scaled(r), scaled(z), fillet * scale),
            Self::Circle { centre, radius } => Outline::circle(*centre * scale, radius * scale),
            Self::Polygon { centre, corners } => {
                let total: f64 = corners.iter().map(|corner| corner.0).sum();
                let mut turned = 0.0;
                let points: Vec<Point> = corners
                    .iter()
                    .map(|(turn, radius)| {
                        turned += turn / total;
                        around(centre, *radius, turned)
                    })
                    .collect();
                Outline::polygon(&points)
            }
            Self::Sector {
                centre,
                radii,
                turns: [from, to],
            } => {
                let [inner, outer] = radii;
                let middle = 0.5 * (from + to);
                let arc = |radius: f64, to: f64| Step::Arc {
                    to: around(centre, radius, to),
                    through: around(centre, radius, middle),
                };
                let steps = [
                    arc(*outer, *to),
                    Step::Line {
                        to: around(centre, *inner, *to),
                    },
                    arc(*inner, *from),
                ];
                Outline::path(around(centre, *outer, *from), &steps)
            }
            Self::Vault { r, z, rise } => {
                let (low, high) = (Point::new(r[0], z[0]) * scale, Point::new(r[1], z[1]) * scale);
                let crown = Point::new(0.5 * (low.r + high.r), high.z + rise * scale);
                let steps = [
                    Step::Line {
                        to: Point::new(high.r, low.z),
                    },
                    Step::Line { to: high },
                    Step::Arc {
                        to: Point::new(low.r, high.z),
                        through: crown,
                    },
                ];
                Outline::path(low, &steps)
            }
        }
        .ok()
    }
}

fn section(drawings: &[Drawing], edge: Edge, scale: f64, noise_share: f64) -> Option<Section> {
    let exact: Option<Vec<Outline>> = drawings
        .iter()
        .map(|drawing| drawing.shape.outline(scale))
        .collect();
    let exact = exact?;
    let size = exact
        .iter()
        .fold(Bounds::EMPTY, |all, outline| all.union(outline.bounds()))
        .size();
    let mut regions = Vec::new();
    for (k, (drawing, outline)) in drawings.iter().zip(&exact).enumerate() {
        // Noise never pushes a shape across the axis.
        let noise = Point::new(drawing.noise.0.abs(), drawing.noise.1) * (noise_share * size);
        let copies: Option<Vec<Outline>> = (0..drawing.copies)
            .map(|copy| {
                let up = f64::from(copy) * drawing.pitch * scale;
                outline.shifted(noise.r, noise.z + up).ok()
            })
            .collect();
        regions.push(PaintedRegion {
            name: format!("region {}", k + 1),
            copies: copies?,
            mesh_size_m: None,
        });
    }
    let outlines = regions.iter().flat_map(|region| &region.copies);
    let bounds = outlines.fold(Bounds::EMPTY, |all, outline| all.union(outline.bounds()));
    let wall = |margin: f64, below: f64| {
        let (r, z) = (
            [0.0, bounds.high.r + margin * scale],
            [bounds.low.z - below, bounds.high.z + margin * scale],
        );
        Outline::rect(r, z, 0.0).ok().map(SpaceEdge::Wall)
    };
    let (edge, mirror_z_m) = match edge {
        Edge::Open => (SpaceEdge::HalfCircle, None),
        Edge::Mirror => (SpaceEdge::HalfCircle, Some(bounds.low.z)),
        Edge::Wall { margin } => (wall(margin, margin * scale)?, None),
        Edge::WallOnMirror => (wall(1.0, 0.0)?, Some(bounds.low.z)),
    };
    Some(Section {
        regions,
        edge,
        mirror_z_m,
    })
}
