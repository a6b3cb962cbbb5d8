//! The field beyond the outer circle, for the corners of the window: a ring of triangles carried by a few multipoles.

use mesher::Point;
use mesher::arrange::{Boundary, OuterCircle};
use solver::Solution;
use solver::problem::MirrorCurrents;

use super::view::View;
use crate::case::Case;

/// Multipoles; more cannot be seen.
const ORDERS: usize = 24;
/// Most directions in which the ring is cut.
const MOST_DIRECTIONS: usize = 240;

/// Triangles outside the circle. Node numbers follow on from those of the mesh; some are the mesh's own.
#[derive(Debug, Default)]
pub struct Ring {
    pub nodes: Vec<Point>,
    pub flux_wb: Vec<f64>,
    pub node_b_t: Vec<[f64; 2]>,
    pub triangles: Vec<[u32; 3]>,
    pub cell_b_t: Vec<[f64; 2]>,
    /// Nodes of the mesh on the circle, and B there, T: better than what the mesh, on one side only, can tell.
    pub rim_b_t: Vec<(u32, [f64; 2])>,
}

/// The ring; `None` when there is no outer circle or the window lies within it.
pub fn ring(case: &Case, solution: &Solution, view: &View) -> Option<Ring> {
    let circle = solution.mesh.circle?;
    let far = |z: f64| view.reach_m.hypot(z - circle.centre_z_m);
    let farthest = far(view.top_m).max(far(view.bottom_m));
    if farthest <= circle.radius_m {
        return None;
    }
    let rim = rim(solution, circle);
    if rim.len() < 3 {
        return None;
    }
    let series = Multipoles::of(case, solution, circle, &rim);
    let step = std::f64::consts::PI / rim.len() as f64;
    let layers = ((farthest / circle.radius_m).ln() / step).ceil().clamp(1.0, 60.0) as usize;
    let growth = (farthest / circle.radius_m).powf(1.0 / layers as f64);
    let first = solution.mesh.nodes.len() as u32;
    let mut ring = Ring {
        rim_b_t: rim
            .iter()
            .map(|&node| (node, series.b_t(solution.mesh.nodes[node as usize])))
            .collect(),
        ..Ring::default()
    };
    let mut inner: Vec<u32> = rim.clone();
    let point = |node: u32, ring: &Ring| match node.checked_sub(first) {
        Some(own) => ring.nodes[own as usize],
        None => solution.mesh.nodes[node as usize],
    };
    let flux = |node: u32, ring: &Ring| match node.checked_sub(first) {
        Some(own) => ring.flux_wb[own as usize],
        None => std::f64::consts::TAU * solution.field.psi_wb_per_rad[node as usize],
    };
    for layer in 1..=layers {
        let rho = circle.radius_m * growth.powi(layer as i32);
        let mut outer = Vec::with_capacity(rim.len());
        for &node in &rim {
            let on_rim = solution.mesh.nodes[node as usize];
            let factor = rho / circle.radius_m;
            let p = Point::new(
                on_rim.r * factor,
                circle.centre_z_m + (on_rim.z - circle.centre_z_m) * factor,
            );
            outer.push(first + ring.nodes.len() as u32);
            // What the few multipoles miss at the rim fades like a high one.
            let missed = solution.field.psi_wb_per_rad[node as usize] - series.psi(on_rim);
            ring.flux_wb
                .push(std::f64::consts::TAU * (series.psi(p) + missed * factor.powi(-6)));
            ring.nodes.push(p);
            ring.node_b_t.push(series.b_t(p));
        }
        for k in 0..rim.len() - 1 {
            for corners in [
                [inner[k], outer[k], outer[k + 1]],
                [inner[k], outer[k + 1], inner[k + 1]],
            ] {
                let p = corners.map(|node| point(node, &ring));
                if view.shows(&p) {
                    let b = flux_density(p, corners.map(|node| flux(node, &ring)));
                    ring.triangles.push(corners);
                    ring.cell_b_t.push(b);
                }
            }
        }
        inner = outer;
    }
    Some(ring)
}

/// Nodes on the circle from the lower pole to the upper, thinned out where there are too many.
fn rim(solution: &Solution, circle: OuterCircle) -> Vec<u32> {
    let mesh = &solution.mesh;
    let on_circle = mesh
        .curve_edges
        .iter()
        .filter(|edge| edge.boundary == Boundary::Circle);
    let mut nodes: Vec<u32> = on_circle.flat_map(|edge| edge.nodes).collect();
    let angle = |node: u32| {
        let p = mesh.nodes[node as usize];
        p.r.atan2(circle.centre_z_m - p.z)
    };
    nodes.sort_by(|&a, &b| angle(a).total_cmp(&angle(b)));
    nodes.dedup();
    let every = nodes.len().div_ceil(MOST_DIRECTIONS).max(1);
    let last = nodes.last().copied();
    let mut thin: Vec<u32> = nodes.into_iter().step_by(every).collect();
    if thin.last().copied() != last {
        thin.extend(last);
    }
    thin
}

/// (B_r, B_z) of a triangle on which the flux is linear in (r², z), T.
fn flux_density(p: [Point; 3], flux_wb: [f64; 3]) -> [f64; 2] {
    let s = p.map(|p| p.r * p.r);
    let (s1, s2, z1, z2) = (s[1] - s[0], s[2] - s[0], p[1].z - p[0].z, p[2].z - p[0].z);
    let (f1, f2) = (flux_wb[1] - flux_wb[0], flux_wb[2] - flux_wb[0]);
    let doubled_area = s1 * z2 - s2 * z1;
    let mean_r = (p[0].r + p[1].r + p[2].r) / 3.0;
    let tau = std::f64::consts::TAU;
    [
        -(s1 * f2 - s2 * f1) / (doubled_area * tau * mean_r),
        2.0 * (f1 * z2 - f2 * z1) / (doubled_area * tau),
    ]
}

/// psi = sum c_n (R/rho)^n (1 - x²) P_n'(x) + B0 r²/2, x the cosine of the polar angle.
struct Multipoles {
    circle: OuterCircle,
    /// c_1, c_2, ...
    coefficients: [f64; ORDERS],
    ambient_b_t: f64,
}

impl Multipoles {
    /// From psi at the nodes of the rim: c_n = (2n+1)/(2n(n+1)) int psi P_n' dx, by trapezia.
    fn of(case: &Case, solution: &Solution, circle: OuterCircle, rim: &[u32]) -> Self {
        let ambient_b_t = case.problem.ambient_b_t;
        let samples: Vec<(f64, f64)> = rim
            .iter()
            .map(|&node| {
                let p = solution.mesh.nodes[node as usize];
                let own = solution.field.psi_wb_per_rad[node as usize] - 0.5 * ambient_b_t * p.r * p.r;
                ((p.z - circle.centre_z_m) / circle.radius_m, own)
            })
            .collect();
        let mut coefficients = [0.0; ORDERS];
        for pair in samples.windows(2) {
            let [(x0, psi0), (x1, psi1)] = [pair[0], pair[1]];
            let (at0, at1) = (slopes(x0), slopes(x1));
            for (k, coefficient) in coefficients.iter_mut().enumerate() {
                let n = (k + 1) as f64;
                let share = match (case.problem.mirror, k % 2) {
                    (None, _) => 1.0,
                    // The image doubles the orders of its own parity and cancels the others.
                    (Some(MirrorCurrents::Same), 0) | (Some(MirrorCurrents::Opposite), 1) => 2.0,
                    (Some(_), _) => 0.0,
                };
                let mean = 0.5 * (psi0 * at0[k] + psi1 * at1[k]);
                *coefficient += share * (2.0 * n + 1.0) / (2.0 * n * (n + 1.0)) * mean * (x1 - x0);
            }
        }
        Self {
            circle,
            coefficients,
            ambient_b_t,
        }
    }

    /// (B_r, B_z), T, by differences of psi.
    fn b_t(&self, p: Point) -> [f64; 2] {
        let step = 1e-4 * self.circle.radius_m;
        // On the axis B is that of a point beside it.
        let r = p.r.max(step);
        let psi = |dr: f64, dz: f64| self.psi(Point::new(r + dr, p.z + dz));
        let by_r = (psi(step, 0.0) - psi(-step, 0.0)) / (2.0 * step);
        let by_z = (psi(0.0, step) - psi(0.0, -step)) / (2.0 * step);
        [-by_z / r, by_r / r]
    }

    fn psi(&self, p: Point) -> f64 {
        let height = p.z - self.circle.centre_z_m;
        let rho = p.r.hypot(height);
        let x = height / rho;
        let slopes = slopes(x);
        let (mut power, mut sum) = (1.0, 0.0);
        for (coefficient, slope) in self.coefficients.iter().zip(slopes) {
            power *= self.circle.radius_m / rho;
            sum += coefficient * power * slope;
        }
        (1.0 - x * x) * sum + 0.5 * self.ambient_b_t * p.r * p.r
    }
}

/// P_1', P_2', ... at x, by P_{n+1}' = P_{n-1}' + (2n+1) P_n.
fn slopes(x: f64) -> [f64; ORDERS] {
    let mut slopes = [0.0; ORDERS];
    let (mut before, mut value) = (1.0, x);
    slopes[0] = 1.0;
    for k in 1..ORDERS {
        let n = k as f64;
        slopes[k] = (2.0 * n + 1.0) * value + if k >= 2 { slopes[k - 2] } else { 0.0 };
        (before, value) = (value, ((2.0 * n + 1.0) * x * value - n * before) / (n + 1.0));
    }
    slopes
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slopes_are_those_of_legendre() {
        let x = 0.3;
        let found = slopes(x);
        assert!((found[0] - 1.0).abs() < 1e-15);
        assert!((found[1] - 3.0 * x).abs() < 1e-15);
        assert!((found[2] - (7.5 * x * x - 1.5)).abs() < 1e-14);
        assert!((found[3] - (17.5 * x * x * x - 7.5 * x)).abs() < 1e-14);
    }

    #[test]
    fn a_dipole_continues_as_a_dipole() {
        let circle = OuterCircle {
            centre_z_m: 0.1,
            radius_m: 0.5,
        };
        let (case, mut solution) = (crate::sample::case(), crate::sample::solution());
        let angles = (0..=200).map(|k| std::f64::consts::PI * f64::from(k) / 200.0);
        solution.mesh.nodes = angles
            .map(|t| Point::new(0.5 * t.sin(), 0.1 - 0.5 * t.cos()))
            .collect();
        // psi of a dipole: r² / rho³.
        let psi = |p: &Point| p.r * p.r / p.r.hypot(p.z - 0.1).powi(3);
        solution.field.psi_wb_per_rad = solution.mesh.nodes.iter().map(psi).collect();
        let rim: Vec<u32> = (0..=200).collect();
        let series = Multipoles::of(&case, &solution, circle, &rim);
        for p in [Point::new(0.6, 0.1), Point::new(0.3, 0.9), Point::new(1.0, -1.0)] {
            let deviation = series.psi(p) / psi(&p) - 1.0;
            // Trapezia over 200 arcs: error about (pi/200)²/12 of the integrand's curvature.
            assert!(deviation.abs() < 1e-3, "{deviation}");
            let rho2 = p.r * p.r + (p.z - 0.1).powi(2);
            let b_z = (2.0 * (p.z - 0.1).powi(2) - p.r * p.r) / rho2.powf(2.5);
            assert!((series.b_t(p)[1] - b_z).abs() < 1e-3 * rho2.powf(-1.5), "{b_z}");
        }
    }
}
