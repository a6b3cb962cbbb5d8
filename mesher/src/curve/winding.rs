//! How often a closed outline turns around a point, counted curve by curve.

use super::{Curve, Point};

impl Curve {
    /// The curve's share of the winding number about `point`: the signed number of its passages across the ray
    /// from there towards larger r, upward ones positive. Summed over a closed outline it is the number of
    /// counter-clockwise turns around the point. Passages through heights are counted half-open, so that an
    /// outline's corners on the ray count once.
    pub fn winding_about(&self, point: Point) -> i32 {
        match *self {
            Self::Line { from, to } => {
                let rises = rising(from.z, to.z, point.z);
                if rises == 0 {
                    return 0;
                }
                let side = (to - from).cross(point - from);
                if side * f64::from(rises) > 0.0 { rises } else { 0 }
            }
            Self::Arc { .. } => self.arc_winding(point),
        }
    }

    /// The same for an arc: cut at its highest and lowest points, so that each piece rises or falls only.
    fn arc_winding(&self, point: Point) -> i32 {
        let Self::Arc {
            from,
            to,
            centre,
            sweep,
        } = *self
        else {
            return 0;
        };
        let radius = self.radius_m();
        let mut cuts = [(0.0, from.z), (1.0, to.z), (2.0, 0.0), (2.0, 0.0)];
        let mut count = 2;
        for height in [radius, -radius] {
            let extreme = centre + Point::new(0.0, height);
            // Strictly inside: the first and the last cut stay the end points, so that the counts of a closed
            // outline cancel whatever round-off does.
            if let Some(t) = self.share_at_direction(extreme).filter(|t| *t > 0.0 && *t < 1.0) {
                cuts[count] = (t, extreme.z);
                count += 1;
            }
        }
        let cuts = &mut cuts[..count];
        cuts.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mut turns = 0;
        for pair in cuts.windows(2) {
            let rises = rising(pair[0].1, pair[1].1, point.z);
            if rises == 0 {
                continue;
            }
            // A rising piece of a counter-clockwise arc is on the right half of the circle.
            let half = f64::from(rises) * sweep.signum();
            let height = point.z - centre.z;
            let half_width = ((radius - height) * (radius + height)).max(0.0).sqrt();
            if point.r < centre.r + half * half_width {
                turns += rises;
            }
        }
        turns
    }
}

/// +1 when a path from height `from` to `to` passes `level` upward, -1 downward, 0 not at all.
fn rising(from: f64, to: f64, level: f64) -> i32 {
    i32::from(to > level) - i32::from(from > level)
}
