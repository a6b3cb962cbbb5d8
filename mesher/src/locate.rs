//! Which triangle holds a point: a tree of boxes over the triangles in their own order (which follows a
//! space-filling curve), so that building is linear and looking up logarithmic. Shared freely between threads.

use crate::arrange::Boundary;
use crate::curve::{Curve, Point};
use crate::mesh::{Mesh, doubled_area};
use crate::topology::{Edges, NO_TRIANGLE};

/// Triangles per leaf box: small enough to test them all, large enough to keep the tree small.
const LEAF: usize = 4;

/// Points this far outside every triangle, in barycentric coordinates, still count as inside: round-off only.
const ROUND_OFF: f64 = 1e-10;

/// Finds the triangle of a point. Holds no reference to the mesh; give it the one it was made from.
#[derive(Clone, Debug)]
pub struct Locator {
    /// Boxes level by level, leaves first; `levels[k]` is where level k begins.
    boxes: Vec<Bounds>,
    levels: Vec<usize>,
    /// Boundary edges on arcs: triangle and arc, for points between chord and arc.
    bulges: Vec<(u32, Curve)>,
}

/// An axis-parallel box.
#[derive(Clone, Copy, Debug)]
struct Bounds {
    low: Point,
    high: Point,
}

impl Bounds {
    const EMPTY: Self = Self {
        low: Point {
            r: f64::INFINITY,
            z: f64::INFINITY,
        },
        high: Point {
            r: f64::NEG_INFINITY,
            z: f64::NEG_INFINITY,
        },
    };

    fn with(self, p: Point) -> Self {
        Self {
            low: Point {
                r: self.low.r.min(p.r),
                z: self.low.z.min(p.z),
            },
            high: Point {
                r: self.high.r.max(p.r),
                z: self.high.z.max(p.z),
            },
        }
    }

    fn holds(&self, p: Point, margin: f64) -> bool {
        p.r >= self.low.r - margin
            && p.r <= self.high.r + margin
            && p.z >= self.low.z - margin
            && p.z <= self.high.z + margin
    }
}

impl Locator {
    /// Builds the tree for a mesh.
    pub fn of(mesh: &Mesh) -> Self {
        let mut boxes: Vec<Bounds> = mesh
            .triangles
            .chunks(LEAF)
            .map(|leaf| {
                leaf.iter()
                    .flatten()
                    .fold(Bounds::EMPTY, |b, &n| b.with(mesh.nodes[n as usize]))
            })
            .collect();
        let mut levels = vec![0, boxes.len()];
        let mut begin = 0;
        while boxes.len() - begin > 1 {
            let end = boxes.len();
            for pair in (begin..end).step_by(2) {
                let other = boxes[(pair + 1).min(end - 1)];
                boxes.push(boxes[pair].with(other.low).with(other.high));
            }
            begin = end;
            levels.push(boxes.len());
        }
        Self {
            boxes,
            levels,
            bulges: bulges(mesh),
        }
    }

    /// The triangle that holds `point`; of several that touch it the one with the smallest number. Points
    /// between a boundary chord and its arc belong to the triangle at that chord. `None` outside the mesh.
    pub fn triangle_at(&self, mesh: &Mesh, point: Point) -> Option<u32> {
        if !(point.r.is_finite() && point.z.is_finite()) {
            return None;
        }
        let mut best: Option<(f64, u32)> = None;
        self.visit(point, |triangle| {
            let worst = barycentric(mesh, triangle, point)
                .into_iter()
                .fold(f64::INFINITY, f64::min);
            if worst >= 0.0 {
                best = match best {
                    Some((w, t)) if w >= 0.0 && t < triangle => Some((w, t)),
                    _ => Some((worst, triangle)),
                };
            } else if worst >= -ROUND_OFF && best.is_none_or(|(w, _)| worst > w) {
                best = Some((worst, triangle));
            }
        });
        best.map(|(_, triangle)| triangle)
            .or_else(|| self.triangle_at_bulge(point))
    }

    fn visit(&self, point: Point, mut leaf_triangle: impl FnMut(u32)) {
        let Some(root) = self.boxes.last() else { return };
        let margin = ROUND_OFF * (root.high.r - root.low.r).max(root.high.z - root.low.z);
        let top = self.levels.len() - 2;
        let mut stack = vec![(top, 0)];
        while let Some((level, index)) = stack.pop() {
            let place = self.levels[level] + index;
            if place >= self.levels[level + 1] || !self.boxes[place].holds(point, margin) {
                continue;
            }
            if level > 0 {
                stack.push((level - 1, 2 * index + 1));
                stack.push((level - 1, 2 * index));
            } else {
                (index * LEAF..(index + 1) * LEAF).for_each(|t| leaf_triangle(t as u32));
            }
        }
    }

    fn triangle_at_bulge(&self, point: Point) -> Option<u32> {
        self.bulges
            .iter()
            .find(|(_, arc)| in_bulge(arc, point))
            .map(|&(triangle, _)| triangle)
    }
}

/// Barycentric coordinates of `point` in triangle number `triangle` (in the (r, z) plane). Triangles beyond the
/// last one hold nothing.
fn barycentric(mesh: &Mesh, triangle: u32, point: Point) -> [f64; 3] {
    let Some(corners) = mesh.triangles.get(triangle as usize) else {
        return [f64::NEG_INFINITY; 3];
    };
    let [a, b, c] = corners.map(|n| mesh.nodes[n as usize]);
    let doubled = doubled_area(a, b, c);
    [
        doubled_area(b, c, point),
        doubled_area(c, a, point),
        doubled_area(a, b, point),
    ]
    .map(|part| part / doubled)
}

/// Boundary edges whose domain reaches beyond the chord.
fn bulges(mesh: &Mesh) -> Vec<(u32, Curve)> {
    let arcs: Vec<_> = mesh
        .curve_edges
        .iter()
        .filter(|e| {
            matches!(e.boundary, Boundary::Circle | Boundary::Wall) && matches!(e.curve, Curve::Arc { .. })
        })
        .collect();
    if arcs.is_empty() {
        return Vec::new();
    }
    let edges = Edges::of(&mesh.triangles, mesh.nodes.len());
    let owner = |nodes: [u32; 2]| {
        let [one, other] = edges.triangles[edges.between(nodes[0], nodes[1])? as usize];
        (other == NO_TRIANGLE).then_some(one)
    };
    arcs.into_iter()
        .filter_map(|e| Some((owner(e.nodes)?, e.curve)))
        .collect()
}

/// Whether a point lies between the chord of an arc and the arc.
fn in_bulge(arc: &Curve, point: Point) -> bool {
    let Curve::Arc {
        from,
        to,
        centre,
        sweep,
    } = *arc
    else {
        return false;
    };
    let radius = (from.r - centre.r).hypot(from.z - centre.z);
    let within = (point.r - centre.r).hypot(point.z - centre.z) <= radius * (1.0 + ROUND_OFF);
    let beyond_chord = doubled_area(from, to, point) * sweep.signum() <= 0.0;
    within && beyond_chord
}
