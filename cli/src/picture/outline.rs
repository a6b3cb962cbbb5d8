//! Visible outlines of the parts, after painting.

use std::collections::BTreeMap;

use mesher::arrange::{Arrangement, OUTSIDE, PartId};
use mesher::curve::Bounds;
use mesher::{Curve, Point};

use super::svg::PathData;
use super::view::View;

/// One part: a region's copy, as far as it can be seen.
#[derive(Clone, Debug)]
pub struct PartShape {
    /// Index of its region.
    pub region: usize,
    /// Closed loops of curves, the part on their left; holes run the other way.
    pub loops: Vec<Vec<Curve>>,
}

/// The visible outlines of all parts that are not air.
pub fn parts(arrangement: &Arrangement) -> Vec<PartShape> {
    let with_region = arrangement
        .parts
        .iter()
        .enumerate()
        .filter_map(|(id, part)| Some((id, part.region?)));
    with_region
        .map(|(id, region)| PartShape {
            region,
            loops: loops_of(arrangement, id as PartId),
        })
        .filter(|part| !part.loops.is_empty())
        .collect()
}

/// Chains the curves around one part.
fn loops_of(arrangement: &Arrangement, part: PartId) -> Vec<Vec<Curve>> {
    let mut from: BTreeMap<u32, Vec<(u32, Curve)>> = BTreeMap::new();
    for edge in &arrangement.edges {
        match (edge.left == part, edge.right == part) {
            (true, false) => from.entry(edge.start).or_default().push((edge.end, edge.curve)),
            (false, true) => from
                .entry(edge.end)
                .or_default()
                .push((edge.start, edge.curve.reversed())),
            _ => {}
        }
    }
    let mut loops = Vec::new();
    while let Some((&start, _)) = from.iter().find(|(_, out)| !out.is_empty()) {
        let (mut at, mut curves) = (start, Vec::new());
        // As many curves arrive at a vertex as leave it, so the walk ends only where it began.
        while let Some((next, curve)) = from.get_mut(&at).and_then(Vec::pop) {
            curves.push(curve);
            at = next;
        }
        loops.push(curves);
    }
    loops
}

/// Middle and half thickness of a part that fills its box as a rectangle or a circle does, m; `None` for others.
pub fn compact(part: &PartShape) -> Option<(Point, f64)> {
    let [curves] = part.loops.as_slice() else {
        return None;
    };
    let all = curves
        .iter()
        .fold(Bounds::EMPTY, |all, curve| all.union(curve.bounds()));
    let (width, height) = (all.high.r - all.low.r, all.high.z - all.low.z);
    let area: f64 = curves.iter().map(|curve| curve.area_term_m2()).sum();
    (area > 0.75 * width * height).then(|| (all.low.middle(all.high), 0.5 * width.min(height)))
}

/// The box around all parts, m.
pub fn bounds(parts: &[PartShape]) -> Bounds {
    parts
        .iter()
        .flat_map(|part| part.loops.iter().flatten())
        .fold(Bounds::EMPTY, |all, curve| all.union(curve.bounds()))
}

/// The path around a part, for filling by the even-odd rule.
pub fn filled(part: &PartShape, view: &View) -> String {
    let mut path = PathData::new();
    for curves in &part.loops {
        if let Some(first) = curves.first() {
            path.start(view.page(first.start()));
            curves.iter().for_each(|curve| draw(&mut path, curve, view));
            path.close();
        }
    }
    path.finish()
}

/// The lines between parts and around them: each once. The axis, the mirror and the edge of open space are left out.
pub fn lines(arrangement: &Arrangement, view: &View) -> String {
    use mesher::arrange::Boundary;
    let mut path = PathData::new();
    for edge in &arrangement.edges {
        let region = |part: PartId| arrangement.parts.get(part as usize).and_then(|part| part.region);
        let between =
            edge.left != edge.right && (region(edge.left).is_some() || region(edge.right).is_some());
        let drawn = match edge.boundary {
            Boundary::None => between,
            Boundary::Wall => true,
            Boundary::Axis | Boundary::Mirror | Boundary::Circle => false,
        };
        if drawn && (edge.left != OUTSIDE || edge.right != OUTSIDE) {
            path.start(view.page(edge.curve.start()));
            draw(&mut path, &edge.curve, view);
        }
    }
    path.finish()
}

fn draw(path: &mut PathData, curve: &Curve, view: &View) {
    match *curve {
        Curve::Line { to, .. } => path.line(view.page(to)),
        Curve::Arc { to, sweep, .. } => {
            // Two halves: the arc of a whole circle would have no direction.
            let radius = curve.radius_m() * view.scale;
            // Counter-clockwise with z up stays so on the page, whose y runs down and whose picture is upright.
            let clockwise = sweep < 0.0;
            path.arc(radius, false, clockwise, view.page(curve.midpoint()));
            path.arc(radius, false, clockwise, view.page(to));
        }
    }
}

/// Points along the loops of a part, near enough for finding what lies inside, m.
pub fn polygons(part: &PartShape) -> Vec<Vec<[f64; 2]>> {
    part.loops
        .iter()
        .map(|curves| curves.iter().flat_map(along).collect())
        .collect()
}

/// Points along the outlines of all parts, at most this far apart on the page (right of the axis).
pub fn borders(parts: &[PartShape], view: &View) -> Vec<[f64; 2]> {
    const APART: f64 = 3.0;
    let curves = parts.iter().flat_map(|part| part.loops.iter().flatten());
    let on_axis = |curve: &Curve| curve.start().r == 0.0 && curve.end().r == 0.0;
    curves
        .filter(|curve| !on_axis(curve))
        .flat_map(|curve| {
            let steps = (curve.length_m() * view.scale / APART).ceil().clamp(1.0, 1000.0) as usize;
            (0..=steps).map(move |k| view.page(curve.at(k as f64 / steps as f64)))
        })
        .collect()
}

/// The start of a curve and points on it.
fn along(curve: &Curve) -> Vec<[f64; 2]> {
    let steps = match curve {
        Curve::Line { .. } => 1,
        Curve::Arc { sweep, .. } => (sweep.abs() / 0.2).ceil().max(1.0) as usize,
    };
    (0..steps)
        .map(|k| {
            let p = curve.at(k as f64 / steps as f64);
            [p.r, p.z]
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_part_has_its_outline() {
        let case = crate::sample::case();
        let arrangement = mesher::arrange::arrange(&case.section).unwrap();
        let parts = parts(&arrangement);
        assert_eq!(parts.iter().map(|part| part.region).collect::<Vec<_>>(), [0, 1]);
        for part in &parts {
            assert_eq!(part.loops.len(), 1);
            // Counter-clockwise: the area is positive.
            let points = &polygons(part)[0];
            let pairs = points.iter().zip(points.iter().cycle().skip(1));
            let area: f64 = pairs.map(|(a, b)| 0.5 * (a[0] * b[1] - b[0] * a[1])).sum();
            let expected = [56e-6, 100e-6][part.region];
            assert!((area - expected).abs() < 1e-12, "{area}");
        }
        let all = bounds(&parts);
        assert_eq!([all.high.r, all.high.z], [0.010, 0.020]);
    }
}
