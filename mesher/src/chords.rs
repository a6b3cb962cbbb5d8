//! The drawing as chords: arcs cut so finely that every chord runs as its curve does, on the right side of
//! everything else.
//!
//! A chord and its arc enclose a sliver. When no two slivers meet (but in shared ends, where the chords leave in
//! the order of the curves), replacing all curves by chords changes nothing in how parts lie to each other, and
//! cutting any curve further keeps that so.

use crate::arrange::Arrangement;
use crate::curve::{Bounds, Curve, Point};
use crate::error::MeshError;
use crate::piece;
use crate::site::{On, Segment, Site};
use crate::size::SizePlan;
use crate::triangulate::{Triangulation, Unmeshable};

/// Rounds of cutting; each halves what is too long, so this many reach the limits of double precision.
const ROUNDS: usize = 48;

/// More chords than this for the drawing alone means that curves run too close to each other.
const MOST_CHORDS: usize = 300_000;

/// Curves that leave a vertex at less than this angle are cut at equal distances from it, degrees.
const TOUCHING_DEG: f64 = 20.0;

/// Triangulates the drawing.
///
/// Errors: coordinates out of range; curves that run too close to each other to be told apart.
pub(crate) fn triangulated(drawing: &Arrangement, plan: &SizePlan) -> Result<Triangulation, MeshError> {
    let mut chords = Chords::of(drawing, plan);
    let mut doubtful = drawing.vertices.first().copied().unwrap_or_default();
    for _ in 0..ROUNDS {
        chords.separate()?;
        let marked = match Triangulation::new(&chords.sites, chords.segments.clone()) {
            Ok(triangulation) => return Ok(triangulation),
            Err(Unmeshable::Coordinates) => return Err(MeshError::Coordinates { at: doubtful }),
            Err(Unmeshable::Mixed(corners)) => {
                doubtful = corners[0];
                let bounds = corners.iter().fold(Bounds::EMPTY, |b, &p| b.with(p));
                chords.arcs_near(&[bounds])
            }
            Err(Unmeshable::Crossing(crossing)) => {
                let bounds: Vec<Bounds> = crossing
                    .iter()
                    .map(|&s| chords.segments[s as usize].curve.bounds())
                    .collect();
                doubtful = crossing
                    .first()
                    .map_or(doubtful, |&s| chords.segments[s as usize].curve.start());
                chords.arcs_near(&bounds)
            }
        };
        if !marked.contains(&true) {
            break;
        }
        chords.halve(&marked);
    }
    Err(MeshError::Entangled { at: doubtful })
}

struct Chords<'a> {
    drawing: &'a Arrangement,
    plan: &'a SizePlan,
    /// Vertices of the drawing first, in its order.
    sites: Vec<Site>,
    segments: Vec<Segment>,
    /// Whether curves touch at a vertex of the drawing.
    touching: Vec<bool>,
}

impl<'a> Chords<'a> {
    /// Equal pieces that turn by no more than planned.
    fn of(drawing: &'a Arrangement, plan: &'a SizePlan) -> Self {
        let sites = drawing
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
        let touching = plan
            .sharpest_deg
            .iter()
            .map(|&angle| angle < TOUCHING_DEG)
            .collect();
        let mut this = Self {
            drawing,
            plan,
            sites,
            segments: Vec::new(),
            touching,
        };
        for (number, edge) in drawing.edges.iter().enumerate() {
            this.segments.push(Segment {
                ends: [edge.start, edge.end],
                curve: edge.curve,
                edge: number as u32,
                boundary: edge.boundary,
                sides: [edge.left, edge.right],
            });
            let pieces = (edge.curve.sweep().abs() / plan.arc_step).ceil().max(1.0) as u32;
            for left in (2..=pieces).rev() {
                this.cut(this.segments.len() - 1, 1.0 / f64::from(left));
            }
        }
        this
    }

    /// Cuts a segment at a share of its length; the second part goes to the end of the list.
    fn cut(&mut self, number: usize, t: f64) {
        let old = self.segments[number].clone();
        let at = piece::node_on(&old.curve, t, old.boundary, self.drawing.circle.as_ref());
        let [first, second] = piece::cut(&old.curve, t, at);
        let middle = self.sites.len() as u32;
        let size = self.plan.on_edge(old.edge, at);
        self.sites.push(Site {
            at,
            size,
            on: On::Curve(old.edge),
        });
        self.segments[number].curve = first;
        self.segments[number].ends[1] = middle;
        self.segments.push(Segment {
            ends: [middle, old.ends[1]],
            curve: second,
            ..old
        });
    }

    fn halve(&mut self, marked: &[bool]) {
        for (number, _) in marked.iter().enumerate().filter(|(_, marked)| **marked) {
            self.cut(number, 0.5);
        }
    }

    /// Arcs whose box meets one of these.
    fn arcs_near(&self, places: &[Bounds]) -> Vec<bool> {
        let near = |curve: &Curve| {
            let bounds = curve.bounds();
            curve.sweep() != 0.0 && places.iter().any(|place| place.meets(bounds))
        };
        self.segments.iter().map(|s| near(&s.curve)).collect()
    }

    /// Cuts arcs until no sliver meets another.
    fn separate(&mut self) -> Result<(), MeshError> {
        if self.segments.iter().all(|s| s.curve.sweep() == 0.0) {
            return Ok(());
        }
        let mut last = self.sites.first().map_or(Point::default(), |site| site.at);
        for _ in 0..ROUNDS {
            self.level_touching();
            let marked = self.meeting();
            let Some(first) = marked.iter().position(|&m| m) else {
                return Ok(());
            };
            last = self.segments[first].curve.start();
            if self.segments.len() > MOST_CHORDS {
                break;
            }
            self.halve(&marked);
        }
        Err(MeshError::Entangled { at: last })
    }

    /// Where curves touch, cuts the arcs at the distance of the nearest other end, so that their chords leave in
    /// the order of their curvatures.
    fn level_touching(&mut self) {
        let mut nearest = vec![f64::INFINITY; self.drawing.vertices.len()];
        let chord = |s: &Segment| s.curve.start().distance(s.curve.end());
        for segment in &self.segments {
            for end in segment.ends {
                if let Some(least) = nearest.get_mut(end as usize) {
                    *least = least.min(chord(segment));
                }
            }
        }
        for number in 0..self.segments.len() {
            for end in 0..2 {
                let segment = &self.segments[number];
                let vertex = segment.ends[end] as usize;
                let arc = segment.curve.sweep() != 0.0;
                if !arc || vertex >= nearest.len() || !self.touching[vertex] {
                    continue;
                }
                if chord(segment) > nearest[vertex] * (1.0 + 1e-9) {
                    let t = share_at_distance(&segment.curve, nearest[vertex]);
                    self.cut(number, if end == 0 { t } else { 1.0 - t });
                    if end == 0 {
                        // The far end of the old segment now belongs to the new one.
                        break;
                    }
                }
            }
        }
    }

    /// Marks arcs whose slivers meet others; of two the one that rises higher.
    fn meeting(&self) -> Vec<bool> {
        let bounds: Vec<Bounds> = self.segments.iter().map(|s| s.curve.bounds()).collect();
        let mut order: Vec<usize> = (0..self.segments.len()).collect();
        order.sort_by(|&a, &b| bounds[a].low.z.total_cmp(&bounds[b].low.z).then(a.cmp(&b)));
        let mut marked = vec![false; self.segments.len()];
        let mut open: Vec<usize> = Vec::new();
        for &number in &order {
            let own = bounds[number];
            open.retain(|&other| bounds[other].high.z >= own.low.z);
            for &other in &open {
                if bounds[other].low.r <= own.high.r && own.low.r <= bounds[other].high.r {
                    self.mark_meeting(number, other, &mut marked);
                }
            }
            open.push(number);
        }
        marked
    }

    fn mark_meeting(&self, one: usize, other: usize, marked: &mut [bool]) {
        let (a, b) = (&self.segments[one], &self.segments[other]);
        if a.curve.sweep() == 0.0 && b.curve.sweep() == 0.0 {
            return;
        }
        let shared = a.ends.iter().filter(|v| b.ends.contains(v)).count();
        if shared == 0 {
            if hulls_meet(&hull(&a.curve), &hull(&b.curve)) {
                marked[if a.curve.rise_m() >= b.curve.rise_m() {
                    one
                } else {
                    other
                }] = true;
            }
            return;
        }
        if shared == 2 {
            // Two ways between the same vertices: their chords would be one.
            marked[if a.curve.rise_m() >= b.curve.rise_m() {
                one
            } else {
                other
            }] = true;
            return;
        }
        for (number, segment, against) in [(one, a, b), (other, b, a)] {
            let far = against.ends.into_iter().find(|v| !segment.ends.contains(v));
            if far.is_some_and(|v| in_sliver(&segment.curve, self.sites[v as usize].at)) {
                marked[number] = true;
            }
        }
    }
}

/// Share of the length of a curve at which its distance from its start is `distance`.
pub(crate) fn share_at_distance(curve: &Curve, distance: f64) -> f64 {
    let share = match *curve {
        Curve::Line { from, to } => distance / from.distance(to),
        Curve::Arc { sweep, .. } => 2.0 * (0.5 * distance / curve.radius_m()).min(1.0).asin() / sweep.abs(),
    };
    share.clamp(0.05, 0.95)
}

/// Whether a point lies between an arc (of at most a half turn) and its chord.
fn in_sliver(curve: &Curve, point: Point) -> bool {
    let Curve::Arc {
        from,
        to,
        centre,
        sweep,
    } = *curve
    else {
        return false;
    };
    let within = point.distance(centre) <= curve.radius_m();
    within && (to - from).cross(point - from) * sweep.signum() <= 0.0
}

/// A triangle around an arc of less than a half turn (chord and tangents at its ends), a degenerate one for a line.
fn hull(curve: &Curve) -> [Point; 3] {
    let (from, to) = (curve.start(), curve.end());
    match *curve {
        Curve::Line { .. } => [from, from.middle(to), to],
        Curve::Arc { sweep, .. } => {
            let height = -0.5 * (0.5 * sweep).tan();
            [from, from.middle(to) + (to - from).left_normal() * height, to]
        }
    }
}

/// Whether two convex figures meet: no side of either separates them.
fn hulls_meet(a: &[Point; 3], b: &[Point; 3]) -> bool {
    let separates = |p: Point, q: Point| {
        let normal = (q - p).left_normal();
        let reach = |hull: &[Point; 3]| {
            hull.iter()
                .map(|v| normal.dot(*v - p))
                .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), x| {
                    (low.min(x), high.max(x))
                })
        };
        let ((low_a, high_a), (low_b, high_b)) = (reach(a), reach(b));
        high_a < low_b || high_b < low_a
    };
    let sides = |hull: &[Point; 3]| [[hull[0], hull[1]], [hull[1], hull[2]], [hull[2], hull[0]]];
    let ends = |hull: &[Point; 3]| {
        // For figures without width: the direction along them separates too.
        let along = hull[2] - hull[0];
        [
            [hull[0], hull[0] + along.left_normal()],
            [hull[2], hull[2] + along.left_normal()],
        ]
    };
    let all = sides(a).into_iter().chain(sides(b)).chain(ends(a)).chain(ends(b));
    !all.into_iter().any(|[p, q]| separates(p, q))
}
