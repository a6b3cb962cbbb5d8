//! Lines of constant flux at equal steps, and where their values are written.

use std::collections::{BTreeMap, HashMap};

use mesher::Point;

use super::sheet::Sheet;
use super::svg::PathData;
use super::view::View;

/// Steps wanted between the smallest and the largest flux.
const WANTED_STEPS: f64 = 13.0;
/// Deviation allowed when a line is written with fewer points, page units.
const SIMPLE: f64 = 0.08;
/// A turn of a line sharper than this stays a corner (refraction at iron), rad.
const CORNER: f64 = 0.5;

/// One line.
#[derive(Clone, Debug, PartialEq)]
pub struct FluxLine {
    /// How many steps its flux is.
    pub steps: i64,
    /// Points on the page (right of the axis).
    pub points: Vec<[f64; 2]>,
    /// Whether it returns to where it began.
    pub closed: bool,
}

/// All lines of a picture.
#[derive(Clone, Debug, PartialEq)]
pub struct FluxLines {
    /// Flux between neighbouring lines, Wb.
    pub step_wb: f64,
    /// The lines, by flux.
    pub lines: Vec<FluxLine>,
}

/// Draws the lines of the described half section; `None` when there is no flux.
pub fn flux_lines(sheet: &Sheet, view: &View) -> Option<FluxLines> {
    let seen = sheet
        .triangles
        .iter()
        .flatten()
        .map(|&node| sheet.flux_wb[node as usize]);
    let (low, high) = seen.fold((0.0f64, 0.0f64), |(low, high), flux| {
        (low.min(flux), high.max(flux))
    });
    let range = high - low;
    if range.is_nan() || range <= 0.0 {
        return None;
    }
    let step_wb = round_step(range / WANTED_STEPS);
    // The axis itself carries no flux; elsewhere its line tells something only where the flux changes sign.
    let both_signs = low.abs().min(high.abs()) > step_wb;
    let mut levels: BTreeMap<i64, Crossings> = BTreeMap::new();
    for (corners, b_t) in sheet.triangles.iter().zip(&sheet.corner_b_t) {
        cross(sheet, view, (*corners, *b_t), step_wb, both_signs, &mut levels);
    }
    let lines = levels
        .into_iter()
        .flat_map(|(steps, crossings)| crossings.chain(steps))
        .collect();
    Some(FluxLines { step_wb, lines })
}

/// A step of 1, 2 or 5 times a power of ten.
fn round_step(wanted: f64) -> f64 {
    let decade = 10f64.powf(wanted.log10().floor());
    let over = wanted / decade;
    decade
        * if over < 1.4 {
            1.0
        } else if over < 3.2 {
            2.0
        } else if over < 7.1 {
            5.0
        } else {
            10.0
        }
}

/// A mesh edge.
type Edge = (u32, u32);

/// Where one level crosses mesh edges.
#[derive(Debug, Default)]
struct Crossings {
    /// Pairs of edges that are crossed within one triangle.
    segments: Vec<[Edge; 2]>,
    /// Where each edge is crossed, on the page.
    at: HashMap<Edge, [f64; 2]>,
}

/// Adds the crossings of a triangle to all levels that cross it.
fn cross(
    sheet: &Sheet,
    view: &View,
    (corners, b_t): ([u32; 3], [[f32; 2]; 3]),
    step_wb: f64,
    zero: bool,
    levels: &mut BTreeMap<i64, Crossings>,
) {
    let flux = corners.map(|node| sheet.flux_wb[node as usize] / step_wb);
    let low = flux.iter().copied().fold(f64::INFINITY, f64::min).ceil() as i64;
    let high = flux.iter().copied().fold(f64::NEG_INFINITY, f64::max).floor() as i64;
    for level in (low..=high).filter(|&level| level != 0 || zero) {
        let above = flux.map(|flux| flux >= level as f64);
        let mut ends = Vec::with_capacity(2);
        for k in 0..3 {
            let (a, b) = (k, (k + 1) % 3);
            if above[a] != above[b] {
                // The same way round from both sides, so that both find the same point.
                let (a, b) = if corners[a] < corners[b] { (a, b) } else { (b, a) };
                let (p, q) = (sheet.nodes[corners[a] as usize], sheet.nodes[corners[b] as usize]);
                let slopes = [a, b].map(|k| slope_along(p, q, corners[k], sheet, b_t[k]) / step_wb);
                let t = crossing([flux[a], flux[b]], slopes, level as f64);
                // The flux is linear in r², not in r.
                let s = p.r * p.r + t * (q.r * q.r - p.r * p.r);
                let point = Point::new(s.max(0.0).sqrt(), p.z + t * (q.z - p.z));
                ends.push(((corners[a], corners[b]), view.page(point)));
            }
        }
        if let [(first, at_first), (second, at_second)] = ends[..] {
            // Along the axis the flux is nothing but round-off.
            if level == 0 && at_first[0] < 1e-9 && at_second[0] < 1e-9 {
                continue;
            }
            let crossings = levels.entry(level).or_default();
            crossings.segments.push([first, second]);
            crossings.at.insert(first, at_first);
            crossings.at.insert(second, at_second);
        }
    }
}

/// Derivative of the flux at a corner along the edge from `p` to `q`, by the share of the way in (r², z):
/// dflux = pi B_z d(r²) - 2 pi r B_r dz.
fn slope_along(p: Point, q: Point, corner: u32, sheet: &Sheet, [b_r, b_z]: [f32; 2]) -> f64 {
    let r = sheet.nodes[corner as usize].r;
    let tau = std::f64::consts::TAU;
    0.5 * tau * f64::from(b_z) * (q.r * q.r - p.r * p.r) - tau * r * f64::from(b_r) * (q.z - p.z)
}

/// Where between two nodes (0 to 1) a level is crossed, by the cubic through both values and slopes; by the straight
/// line where the cubic turns back.
fn crossing([from, to]: [f64; 2], slopes: [f64; 2], level: f64) -> f64 {
    let rise = to - from;
    // Sufficient for a cubic without turns (Fritsch & Carlson 1980).
    if slopes.iter().any(|slope| !(0.0..=3.0).contains(&(slope / rise))) {
        return (level - from) / rise;
    }
    let value = |t: f64| {
        let u = 1.0 - t;
        from * u * u * (1.0 + 2.0 * t)
            + to * t * t * (3.0 - 2.0 * t)
            + t * u * (slopes[0] * u - slopes[1] * t)
    };
    let (mut low, mut high) = (0.0, 1.0);
    for _ in 0..40 {
        let t = 0.5 * (low + high);
        if (value(t) < level) == (rise > 0.0) {
            low = t
        } else {
            high = t
        }
    }
    0.5 * (low + high)
}

impl Crossings {
    /// Joins the segments to lines: first those with ends, then the closed ones.
    fn chain(self, steps: i64) -> Vec<FluxLine> {
        let mut at_edge: HashMap<Edge, Vec<usize>> = HashMap::new();
        for (index, segment) in self.segments.iter().enumerate() {
            segment
                .iter()
                .for_each(|edge| at_edge.entry(*edge).or_default().push(index));
        }
        let is_end = |edge: &Edge| at_edge.get(edge).is_none_or(|segments| segments.len() == 1);
        let mut used = vec![false; self.segments.len()];
        let mut lines = Vec::new();
        for ends_only in [true, false] {
            for index in 0..self.segments.len() {
                let [a, b] = self.segments[index];
                let start = if is_end(&a) { a } else { b };
                if used[index] || (ends_only && !is_end(&start)) {
                    continue;
                }
                let edges = self.walk(start, index, &at_edge, &mut used);
                let closed = !ends_only && edges.first() == edges.last();
                let mut points: Vec<[f64; 2]> = edges
                    .iter()
                    .filter_map(|edge| self.at.get(edge).copied())
                    .collect();
                if closed {
                    points.pop();
                }
                lines.push(FluxLine {
                    steps,
                    points: simplified(&points),
                    closed,
                });
            }
        }
        lines
    }

    /// Edges crossed from `start` on through the segment `index`.
    fn walk(
        &self,
        start: Edge,
        index: usize,
        at_edge: &HashMap<Edge, Vec<usize>>,
        used: &mut [bool],
    ) -> Vec<Edge> {
        let (mut edges, mut next) = (vec![start], Some(index));
        while let Some(index) = next {
            used[index] = true;
            let [a, b] = self.segments[index];
            let there = if edges.last() == Some(&a) { b } else { a };
            edges.push(there);
            next = at_edge
                .get(&there)
                .and_then(|segments| segments.iter().copied().find(|&other| !used[other]));
        }
        edges
    }
}

/// Fewer points for the same line (Douglas & Peucker 1973).
fn simplified(points: &[[f64; 2]]) -> Vec<[f64; 2]> {
    if points.len() < 3 {
        return points.to_vec();
    }
    let mut keep = vec![false; points.len()];
    keep[0] = true;
    keep[points.len() - 1] = true;
    let mut spans = vec![(0, points.len() - 1)];
    while let Some((from, to)) = spans.pop() {
        let farthest = (from + 1..to)
            .map(|k| (distance_to(points[k], points[from], points[to]), k))
            .max_by(|a, b| a.0.total_cmp(&b.0));
        if let Some((distance, k)) = farthest.filter(|(distance, _)| *distance > SIMPLE) {
            debug_assert!(distance.is_finite());
            keep[k] = true;
            spans.extend([(from, k), (k, to)]);
        }
    }
    points
        .iter()
        .zip(keep)
        .filter(|(_, keep)| *keep)
        .map(|(point, _)| *point)
        .collect()
}

/// Distance of a point from the line through two others (from the first where they coincide).
fn distance_to(p: [f64; 2], a: [f64; 2], b: [f64; 2]) -> f64 {
    let (along, to) = ([b[0] - a[0], b[1] - a[1]], [p[0] - a[0], p[1] - a[1]]);
    let length = along[0].hypot(along[1]);
    if length < 1e-9 {
        to[0].hypot(to[1])
    } else {
        (along[0] * to[1] - along[1] * to[0]).abs() / length
    }
}

/// The path of all lines, rounded where they do not turn sharply.
pub fn path(lines: &FluxLines) -> String {
    let mut path = PathData::new();
    for line in lines.lines.iter().filter(|line| line.points.len() >= 2) {
        write_line(&mut path, line);
    }
    path.finish()
}

fn write_line(path: &mut PathData, line: &FluxLine) {
    let points = &line.points;
    let count = points.len();
    path.start(points[0]);
    let segments = if line.closed { count } else { count - 1 };
    for k in 0..segments {
        let (from, to) = (points[k], points[(k + 1) % count]);
        let third = (to[0] - from[0]).hypot(to[1] - from[1]) / 3.0;
        match (tangent(line, k), tangent(line, (k + 1) % count)) {
            (None, None) => path.line(to),
            (leave, arrive) => {
                let chord = direction(from, to);
                let (leave, arrive) = (leave.unwrap_or(chord), arrive.unwrap_or(chord));
                path.cubic(
                    [from[0] + third * leave[0], from[1] + third * leave[1]],
                    [to[0] - third * arrive[0], to[1] - third * arrive[1]],
                    to,
                );
            }
        }
    }
    if line.closed {
        path.close();
    }
}

/// Direction of travel at a point; `None` at ends and corners.
fn tangent(line: &FluxLine, k: usize) -> Option<[f64; 2]> {
    let count = line.points.len();
    if count < 3 || (!line.closed && (k == 0 || k + 1 == count)) {
        return None;
    }
    let (before, here, after) = (
        line.points[(k + count - 1) % count],
        line.points[k],
        line.points[(k + 1) % count],
    );
    let (arrive, leave) = (direction(before, here), direction(here, after));
    let turn =
        (arrive[0] * leave[1] - arrive[1] * leave[0]).atan2(arrive[0] * leave[0] + arrive[1] * leave[1]);
    // The shorter neighbour tells more: this is the tangent of the circle through the three points.
    let length = |from: [f64; 2], to: [f64; 2]| (to[0] - from[0]).hypot(to[1] - from[1]);
    let (near, far) = (length(before, here), length(here, after));
    let along = [
        arrive[0] * far + leave[0] * near,
        arrive[1] * far + leave[1] * near,
    ];
    (turn.abs() < CORNER).then(|| direction([0.0; 2], along))
}

fn direction(from: [f64; 2], to: [f64; 2]) -> [f64; 2] {
    let (x, y) = (to[0] - from[0], to[1] - from[1]);
    let length = x.hypot(y).max(1e-12);
    [x / length, y / length]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn steps_are_round() {
        assert_eq!(
            [1.1, 2.5, 6.0, 8.0].map(|step| round_step(step).round()),
            [1.0, 2.0, 5.0, 10.0]
        );
    }

    #[test]
    fn lines_have_equal_steps_and_are_closed_or_end_at_the_edge() {
        let (case, solution) = (crate::sample::case(), crate::sample::solution());
        let arrangement = mesher::arrange::arrange(&case.section).unwrap();
        let parts = super::super::outline::parts(&arrangement);
        let view = View::of(&case.section, super::super::outline::bounds(&parts));
        let sheet = Sheet::of(&case, &solution, &view);
        let lines = flux_lines(&sheet, &view).unwrap();
        assert!((8..60).contains(&lines.lines.len()), "{}", lines.lines.len());
        let outside =
            |[x, y]: [f64; 2]| x > view.half_width() - 8.0 || !(8.0..view.height() - 8.0).contains(&y);
        for line in &lines.lines {
            let ends = [line.points[0], line.points[line.points.len() - 1]];
            assert!(line.closed || ends.iter().all(|end| outside(*end)), "{line:?}");
            assert!(line.steps >= 1);
        }
    }
}
