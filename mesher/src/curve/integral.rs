//! Exact boundary integrals of lines and arcs: summed over a closed counter-clockwise outline they give its
//! area and its moment about the axis (Green's theorem; centroid volumes after Pappus).
//!
//! An arc is its chord plus a circular segment. The segment's terms are differences of nearly equal numbers for
//! a small sweep, so there they are summed as power series.

use super::Curve;

/// Half the sweep (rad) below which the series are used: there the closed forms lose more than three digits.
const SERIES_BELOW: f64 = 0.25;

impl Curve {
    /// Integral of r dz along the curve, m²: the curve's share of the area on its left.
    pub fn area_term_m2(&self) -> f64 {
        let (a, b) = (self.start(), self.end());
        0.5 * (a.r + b.r) * (b.z - a.z) + self.segment_area_m2()
    }

    /// Integral of r² / 2 dz along the curve, m³: the curve's share of the integral of r over the area on its
    /// left.
    pub fn moment_term_m3(&self) -> f64 {
        let (a, b) = (self.start(), self.end());
        (a.r * a.r + a.r * b.r + b.r * b.r) * (b.z - a.z) / 6.0 + self.segment_moment_m3()
    }

    /// Signed area between chord and arc, m²: positive where a counter-clockwise arc bulges to the right.
    fn segment_area_m2(&self) -> f64 {
        let Self::Arc { sweep, .. } = *self else {
            return 0.0;
        };
        let radius = self.radius_m();
        radius * radius * half_turn_less_sine(0.5 * sweep)
    }

    /// Integral of r over that segment, m³.
    fn segment_moment_m3(&self) -> f64 {
        let Self::Arc {
            from,
            to,
            centre,
            sweep,
        } = *self
        else {
            return 0.0;
        };
        let half = 0.5 * sweep;
        let radius = self.radius_m();
        // Unit vector from the centre to the middle of the arc, and the r of the chord's middle.
        let outward = ((from - centre) * (1.0 / radius)).turned(half);
        let chord_r = 0.5 * (from.r + to.r);
        chord_r * self.segment_area_m2() + outward.r * radius.powi(3) * segment_lever(half)
    }
}

/// h - sin h cos h: the segment's area over the squared radius, `h` half the sweep in rad.
fn half_turn_less_sine(h: f64) -> f64 {
    if h.abs() > SERIES_BELOW {
        return h - h.sin() * h.cos();
    }
    // h - sin(2h)/2 = sum over k >= 1 of (-1)^(k+1) (2h)^(2k+1) / (2 (2k+1)!)
    let double = 2.0 * h;
    let mut term = 0.5 * double;
    let mut sum = 0.0;
    for k in 1..10 {
        let n = f64::from(2 * k);
        term *= -double * double / (n * (n + 1.0));
        sum -= term;
    }
    sum
}

/// (2/3) sin³ h - cos h (h - sin h cos h): the segment's moment about its chord over the cubed radius.
fn segment_lever(h: f64) -> f64 {
    if h.abs() > SERIES_BELOW {
        return 2.0 / 3.0 * h.sin().powi(3) - h.cos() * (h - h.sin() * h.cos());
    }
    // = (3/4) sin h + (1/12) sin 3h - h cos h; its terms below h^5 cancel.
    let mut power = h; // h^(2k+1) / (2k+1)! with the sign (-1)^k
    let mut nine = 1.0; // 9^k
    let mut sum = 0.0;
    for k in 1..12 {
        let n = f64::from(2 * k);
        power *= -h * h / (n * (n + 1.0));
        nine *= 9.0;
        if k >= 2 {
            sum += power * (0.75 + nine / 4.0 - (n + 1.0));
        }
    }
    sum
}
