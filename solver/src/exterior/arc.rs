//! One mesh edge on the outer circle, and the bulge between its chord in (s, z) and the circle.

use crate::element::Element;
use crate::quadrature::gauss_legendre;

/// A mesh edge on the outer circle with the triangle it belongs to.
#[derive(Clone, Copy, Debug)]
pub struct Arc {
    /// Index of the triangle.
    pub triangle: u32,
    /// Corners of the triangle: the inner one, then the lower and the upper node on the circle (the mesh's own
    /// counter-clockwise order, turned).
    pub nodes: [u32; 3],
    /// x = (z - zc)/R at the lower and the upper node.
    pub x: [f64; 2],
    /// The hats of `nodes` at both ends are 0, 1, 0 and 0, 0, 1; between them hat_i gains
    /// `bulge[i]` (x - x0)(x1 - x), because the circle leaves the chord.
    bulge: [f64; 3],
}

impl Arc {
    /// The arc of a triangle with these corners (inner, lower, upper), in a circle of radius R around height zc;
    /// `b` are the gradients d hat / ds in the same order.
    pub(crate) fn new(triangle: u32, nodes: [u32; 3], x: [f64; 2], b: [f64; 3], radius: f64) -> Self {
        // On the circle s exceeds the chord by (z - z0)(z1 - z) = R² (x - x0)(x1 - x).
        Self {
            triangle,
            nodes,
            x,
            bulge: b.map(|b| b * radius * radius),
        }
    }

    /// Extent in x.
    pub fn width(&self) -> f64 {
        self.x[1] - self.x[0]
    }

    /// x and the three hats (order of `nodes`) at the share `t` of the way from the lower to the upper node.
    pub fn at(&self, t: f64) -> (f64, [f64; 3]) {
        let bubble = self.width() * self.width() * t * (1.0 - t);
        let x = self.x[0] + self.width() * t;
        (
            x,
            [
                self.bulge[0] * bubble,
                1.0 - t + self.bulge[1] * bubble,
                t + self.bulge[2] * bubble,
            ],
        )
    }

    /// int (d psi/dx)² dx over the arc, in closed form (psi is quadratic in x).
    pub(crate) fn slope_squared(&self, psi: &[f64]) -> f64 {
        let u = self.nodes.map(|node| psi[node as usize]);
        let width = self.width();
        let mean = (u[2] - u[1]) / width;
        let bend: f64 = (0..3).map(|i| self.bulge[i] * u[i]).sum();
        // d psi/dx = mean + bend (x0 + x1 - 2x); the linear part has mean square bend² width²/3.
        width * (mean * mean + bend * bend * width * width / 3.0)
    }
}

/// The straight triangle's integrals with the bulge between its edge on the circle and the circle added: the
/// edge's ends have `s` (m²) and `z` (m), z ascending. s_arc - s_chord = (z - z0)(z1 - z).
pub(crate) fn with_bulge(mut element: Element, s: [f64; 2], z: [f64; 2]) -> Element {
    let height = z[1] - z[0];
    element.area += height * height * height / 6.0;
    if element.over_s > 0.0 {
        let log = |[t, weight]: &[f64; 2]| {
            let gap = height * height * t * (1.0 - t);
            weight * (gap / (s[0] + (s[1] - s[0]) * t)).ln_1p()
        };
        element.over_s += height * gauss_legendre(16).iter().map(log).sum::<f64>();
    }
    element
}
