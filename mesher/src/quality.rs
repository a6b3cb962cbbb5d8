//! Quality numbers of a mesh: angles, sizes, counts.

use crate::curve::{Curve, Point};
use crate::mesh::Mesh;

/// The angle that 99 % of the triangles should reach, degrees.
pub const GOOD_ANGLE_DEG: f64 = 28.0;

/// How good a mesh is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Quality {
    /// Number of nodes.
    pub nodes: usize,
    /// Number of triangles.
    pub triangles: usize,
    /// Smallest angle of any triangle in (r, z), degrees. It cannot exceed the sharpest corner of the drawing.
    pub smallest_angle_deg: f64,
    /// Share (0..1) of triangles with an angle below [`GOOD_ANGLE_DEG`].
    pub share_below_good: f64,
    /// Shortest and longest edge, m.
    pub edge_m: [f64; 2],
    /// The sharpest angle between drawn curves, axis, mirror, wall and outer circle where they meet, degrees.
    pub sharpest_corner_deg: f64,
}

impl Mesh {
    /// Quality numbers of this mesh. A mesh without triangles has NaN in place of angles and sizes.
    pub fn quality(&self) -> Quality {
        let mut smallest = f64::INFINITY;
        let mut below = 0_usize;
        let mut edge_m = [f64::INFINITY, 0.0_f64];
        for &corners in &self.triangles {
            let p = corners.map(|n| self.nodes[n as usize]);
            let angle = smallest_angle_deg(p);
            smallest = smallest.min(angle);
            below += usize::from(angle < GOOD_ANGLE_DEG);
            for k in 0..3 {
                let length = distance(p[k], p[(k + 1) % 3]);
                edge_m = [edge_m[0].min(length), edge_m[1].max(length)];
            }
        }
        let empty = self.triangles.is_empty();
        let or_nan = |value: f64| if empty { f64::NAN } else { value };
        Quality {
            nodes: self.nodes.len(),
            triangles: self.triangles.len(),
            smallest_angle_deg: or_nan(smallest),
            share_below_good: below as f64 / self.triangles.len() as f64,
            edge_m: edge_m.map(or_nan),
            sharpest_corner_deg: self.sharpest_corner_deg(),
        }
    }

    fn sharpest_corner_deg(&self) -> f64 {
        let mut spokes: Vec<(u32, f64)> = Vec::with_capacity(2 * self.curve_edges.len());
        for edge in &self.curve_edges {
            let [out, back] = directions_rad(&edge.curve);
            spokes.push((edge.nodes[0], out));
            spokes.push((edge.nodes[1], back));
        }
        spokes.sort_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)));
        let mut sharpest = f64::INFINITY;
        for fan in spokes.chunk_by(|a, b| a.0 == b.0).filter(|fan| fan.len() > 1) {
            let around = fan[0].1 + std::f64::consts::TAU - fan[fan.len() - 1].1;
            sharpest = fan
                .windows(2)
                .map(|pair| pair[1].1 - pair[0].1)
                .fold(sharpest.min(around), f64::min);
        }
        if sharpest.is_finite() {
            sharpest.to_degrees()
        } else {
            f64::NAN
        }
    }
}

/// Directions in which a curve leaves its start, and its end backwards, rad.
fn directions_rad(curve: &Curve) -> [f64; 2] {
    let angle = |dr: f64, dz: f64| dz.atan2(dr);
    match *curve {
        Curve::Line { from, to } => [
            angle(to.r - from.r, to.z - from.z),
            angle(from.r - to.r, from.z - to.z),
        ],
        Curve::Arc {
            from,
            to,
            centre,
            sweep,
        } => {
            let turn = sweep.signum();
            let along = |p: Point, sense: f64| angle(-(p.z - centre.z) * sense, (p.r - centre.r) * sense);
            [along(from, turn), along(to, -turn)]
        }
    }
}

pub(crate) fn distance(a: Point, b: Point) -> f64 {
    (a.r - b.r).hypot(a.z - b.z)
}

/// Smallest angle of a triangle, degrees.
pub fn smallest_angle_deg(p: [Point; 3]) -> f64 {
    let angle = |a: Point, b: Point, c: Point| {
        let (ur, uz, vr, vz) = (b.r - a.r, b.z - a.z, c.r - a.r, c.z - a.z);
        (ur * vz - uz * vr).abs().atan2(ur * vr + uz * vz).to_degrees()
    };
    angle(p[0], p[1], p[2])
        .min(angle(p[1], p[2], p[0]))
        .min(angle(p[2], p[0], p[1]))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(r: f64, z: f64) -> Point {
        Point { r, z }
    }

    #[test]
    fn angles_of_known_triangles() {
        assert!((smallest_angle_deg([at(0.0, 0.0), at(1.0, 0.0), at(0.0, 1.0)]) - 45.0).abs() < 1e-12);
        let flat = [at(0.0, 0.0), at(2.0, 0.0), at(1.0, 30_f64.to_radians().tan())];
        assert!((smallest_angle_deg(flat) - 30.0).abs() < 1e-12);
    }

    #[test]
    fn an_arc_leaves_along_its_tangent() {
        let arc = Curve::Arc {
            from: at(1.0, 0.0),
            to: at(0.0, 1.0),
            centre: at(0.0, 0.0),
            sweep: std::f64::consts::FRAC_PI_2,
        };
        let [out, back] = directions_rad(&arc);
        assert!(
            (out - std::f64::consts::FRAC_PI_2).abs() < 1e-12,
            "up from (1, 0): {out}"
        );
        assert!(back.abs() < 1e-12, "backwards from (0, 1) to the right: {back}");
    }
}
