//! Monotone C1 cubic interpolation of y(x) through rising points (Fritsch & Carlson, SIAM J. Numer. Anal. 17,
//! 1980; slopes by the weighted harmonic mean of Fritsch & Butland, SIAM J. Sci. Stat. Comput. 5, 1984), with the
//! exact integral.

/// The interpolant on its points; beyond them it is not defined.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Pchip {
    x: Vec<f64>,
    y: Vec<f64>,
    slope: Vec<f64>,
    /// int y dx from x[0] to each point.
    integral: Vec<f64>,
}

/// Value, slope and integral from the first point.
#[derive(Clone, Copy, Debug)]
pub(super) struct Value {
    pub y: f64,
    pub slope: f64,
    pub integral: f64,
}

impl Pchip {
    /// `x` strictly rising, `y` never falling, both of one length >= 2 (the caller has checked).
    pub fn new(x: Vec<f64>, y: Vec<f64>) -> Self {
        let slope = slopes(&x, &y);
        let mut integral = vec![0.0];
        for k in 0..x.len() - 1 {
            let h = x[k + 1] - x[k];
            // The cubic's exact integral (Hermite form).
            let piece = h * (y[k] + y[k + 1]) / 2.0 + h * h * (slope[k] - slope[k + 1]) / 12.0;
            integral.push(integral[k] + piece);
        }
        Self {
            x,
            y,
            slope,
            integral,
        }
    }

    /// Value at `x`, clamped to the range of the points.
    pub fn at(&self, x: f64) -> Value {
        let last = self.x.len() - 1;
        let k = self.x.partition_point(|p| *p <= x).clamp(1, last) - 1;
        let h = self.x[k + 1] - self.x[k];
        let t = ((x - self.x[k]) / h).clamp(0.0, 1.0);
        let (y0, y1, d0, d1) = (self.y[k], self.y[k + 1], h * self.slope[k], h * self.slope[k + 1]);
        let c2 = 3.0 * (y1 - y0) - 2.0 * d0 - d1;
        let c3 = d0 + d1 - 2.0 * (y1 - y0);
        Value {
            y: y0 + t * (d0 + t * (c2 + t * c3)),
            slope: (d0 + t * (2.0 * c2 + 3.0 * t * c3)) / h,
            integral: self.integral[k] + h * t * (y0 + t * (d0 / 2.0 + t * (c2 / 3.0 + t * c3 / 4.0))),
        }
    }

    /// First and last x.
    pub fn range(&self) -> (f64, f64) {
        (self.x[0], self.x[self.x.len() - 1])
    }

    /// d²y/dx² at the end of the last piece.
    pub fn last_curvature(&self) -> f64 {
        let k = self.x.len() - 2;
        let h = self.x[k + 1] - self.x[k];
        let secant = (self.y[k + 1] - self.y[k]) / h;
        (2.0 * self.slope[k] + 4.0 * self.slope[k + 1] - 6.0 * secant) / h
    }
}

fn slopes(x: &[f64], y: &[f64]) -> Vec<f64> {
    let n = x.len();
    let h: Vec<f64> = x.windows(2).map(|w| w[1] - w[0]).collect();
    let secant: Vec<f64> = y.windows(2).zip(&h).map(|(w, h)| (w[1] - w[0]) / h).collect();
    if n == 2 {
        return vec![secant[0]; 2];
    }
    let mut slope = vec![0.0; n];
    for k in 1..n - 1 {
        let (a, b) = (secant[k - 1], secant[k]);
        if a > 0.0 && b > 0.0 {
            let (w1, w2) = (2.0 * h[k] + h[k - 1], h[k] + 2.0 * h[k - 1]);
            slope[k] = (w1 + w2) / (w1 / a + w2 / b);
        }
    }
    slope[0] = end_slope(h[0], h[1], secant[0], secant[1]);
    slope[n - 1] = end_slope(h[n - 2], h[n - 3], secant[n - 2], secant[n - 3]);
    slope
}

/// One-sided three-point slope, kept within what monotony allows and away from zero: a vertical start would be an
/// infinite permeability.
fn end_slope(h0: f64, h1: f64, d0: f64, d1: f64) -> f64 {
    let slope = ((2.0 * h0 + h1) * d0 - h0 * d1) / (h0 + h1);
    slope.clamp(0.25 * d0, 3.0 * d0)
}
