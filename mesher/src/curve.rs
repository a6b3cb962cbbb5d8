//! Points of the half plane and the two kinds of drawn curve: straight lines and circular arcs.

mod integral;
mod point;
#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;
mod winding;

use std::f64::consts::{FRAC_PI_2, PI};

pub use point::{Bounds, Point};

/// A directed piece of drawn curve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Curve {
    /// The straight line between two points.
    Line {
        /// Start.
        from: Point,
        /// End.
        to: Point,
    },
    /// A circular arc.
    Arc {
        /// Start.
        from: Point,
        /// End.
        to: Point,
        /// Centre of the circle.
        centre: Point,
        /// Signed angle swept from `from` to `to`, rad: positive counter-clockwise in the (r, z) plane
        /// (r to the right, z up), at most a full turn.
        sweep: f64,
    },
}

/// The point of a curve nearest to some other point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Nearest {
    /// Share of the curve's length from its start, 0 to 1.
    pub t: f64,
    /// The point of the curve.
    pub point: Point,
    /// How far it is, m.
    pub distance_m: f64,
}

impl Curve {
    /// The straight line between two points.
    pub const fn line(from: Point, to: Point) -> Self {
        Self::Line { from, to }
    }

    /// The arc between two points that sweeps `sweep` rad (positive counter-clockwise, less than a full turn).
    pub fn arc(from: Point, to: Point, sweep: f64) -> Self {
        let half_chord = (to - from) * 0.5;
        let centre = from.middle(to) + half_chord.left_normal() * (0.5 * sweep).tan().recip();
        Self::Arc {
            from,
            to,
            centre,
            sweep,
        }
    }

    /// The arc from `from` through `through` to `to`; `None` when the three lie on a line (or nearly: the arc
    /// would rise by less than a millionth of its chord) or two of them coincide.
    pub fn arc_through(from: Point, through: Point, to: Point) -> Option<Self> {
        let (a, b) = (through - from, to - through);
        let chord = from.distance(to);
        // The angle by which the path turns at `through` is half the sweep (inscribed angle).
        let turn = a.cross(b).atan2(a.dot(b));
        let longest = chord.max(a.norm()).max(b.norm());
        let smallest = chord.min(a.norm()).min(b.norm());
        if smallest <= 1e-12 * longest || turn.abs() < 4e-6 || turn.abs() > PI - 1e-6 {
            return None;
        }
        Some(Self::arc(from, to, 2.0 * turn))
    }

    /// Where it starts.
    pub fn start(&self) -> Point {
        match *self {
            Self::Line { from, .. } | Self::Arc { from, .. } => from,
        }
    }

    /// Where it ends.
    pub fn end(&self) -> Point {
        match *self {
            Self::Line { to, .. } | Self::Arc { to, .. } => to,
        }
    }

    /// Signed angle swept, rad; 0 for a line.
    pub fn sweep(&self) -> f64 {
        match *self {
            Self::Line { .. } => 0.0,
            Self::Arc { sweep, .. } => sweep,
        }
    }

    /// Radius of curvature, m; infinite for a line.
    pub fn radius_m(&self) -> f64 {
        match *self {
            Self::Line { .. } => f64::INFINITY,
            Self::Arc {
                from,
                to,
                centre,
                sweep,
            } => {
                if sweep.abs() < FRAC_PI_2 {
                    0.5 * from.distance(to) / (0.5 * sweep).sin().abs()
                } else {
                    0.5 * (from.distance(centre) + to.distance(centre))
                }
            }
        }
    }

    /// Length, m.
    pub fn length_m(&self) -> f64 {
        match *self {
            Self::Line { from, to } => from.distance(to),
            Self::Arc { sweep, .. } => self.radius_m() * sweep.abs(),
        }
    }

    /// Largest distance between the curve and its chord, m.
    pub fn rise_m(&self) -> f64 {
        match *self {
            Self::Line { .. } => 0.0,
            Self::Arc { from, to, sweep, .. } if sweep.abs() < FRAC_PI_2 => {
                0.5 * from.distance(to) * (0.25 * sweep).tan().abs()
            }
            Self::Arc { sweep, .. } => self.radius_m() * (1.0 - (0.5 * sweep).cos()),
        }
    }

    /// The point at the share `t` (0 to 1) of the length; exactly the end points at 0 and 1.
    pub fn at(&self, t: f64) -> Point {
        match *self {
            Self::Line { from, to } => from.towards(to, t),
            Self::Arc { from, to, .. } if t == 0.0 || t == 1.0 => {
                if t == 0.0 {
                    from
                } else {
                    to
                }
            }
            Self::Arc {
                from,
                to,
                centre,
                sweep,
            } => {
                if sweep.abs() > PI {
                    return centre + (from - centre).turned(t * sweep);
                }
                // From the chord, not the centre: exact ends, and no loss for nearly straight arcs.
                let lever = (0.5 * t * sweep).sin() / (0.5 * sweep).sin();
                from + (to - from).turned(0.5 * (t - 1.0) * sweep) * lever
            }
        }
    }

    /// The middle of the curve, on the curve.
    pub fn midpoint(&self) -> Point {
        self.at(0.5)
    }

    /// Unit vector along the direction of travel at the share `t` of the length.
    pub fn tangent(&self, t: f64) -> Point {
        let along = match *self {
            Self::Line { from, to } => to - from,
            Self::Arc {
                from, centre, sweep, ..
            } if sweep.abs() > PI => (from - centre).left_normal().turned(t * sweep) * sweep.signum(),
            Self::Arc { from, to, sweep, .. } => (to - from).turned((t - 0.5) * sweep),
        };
        let norm = along.norm();
        if norm > 0.0 { along * norm.recip() } else { along }
    }

    /// The same curve travelled the other way.
    #[must_use]
    pub fn reversed(&self) -> Self {
        match *self {
            Self::Line { from, to } => Self::Line { from: to, to: from },
            Self::Arc {
                from,
                to,
                centre,
                sweep,
            } => Self::Arc {
                from: to,
                to: from,
                centre,
                sweep: -sweep,
            },
        }
    }

    /// The piece between the shares `t0` and `t1` of the length.
    #[must_use]
    pub fn piece(&self, t0: f64, t1: f64) -> Self {
        self.piece_with_ends(t0, t1, self.at(t0), self.at(t1))
    }

    /// The piece between two points of the curve (given to round-off), which become its ends to the last bit. It
    /// runs from `a` to `b`, so against the curve's direction when `b` comes first.
    #[must_use]
    pub fn between(&self, a: Point, b: Point) -> Self {
        self.piece_with_ends(self.nearest(a).t, self.nearest(b).t, a, b)
    }

    fn piece_with_ends(&self, t0: f64, t1: f64, from: Point, to: Point) -> Self {
        match *self {
            Self::Line { .. } => Self::Line { from, to },
            Self::Arc { centre, sweep, .. } => Self::Arc {
                from,
                to,
                centre,
                sweep: sweep * (t1 - t0),
            },
        }
    }

    /// The curve of the same kind and sweep between two other points: turned and scaled so that its ends lie
    /// there. A full turn is moved only.
    #[must_use]
    pub fn with_ends(&self, from: Point, to: Point) -> Self {
        match *self {
            Self::Line { .. } => Self::Line { from, to },
            Self::Arc {
                from: old_from,
                to: old_to,
                centre,
                sweep,
            } => {
                if from == old_from && to == old_to {
                    *self
                } else if from == to {
                    Self::Arc {
                        from,
                        to,
                        centre: centre + (from - old_from),
                        sweep,
                    }
                } else {
                    Self::arc(from, to, sweep)
                }
            }
        }
    }

    /// The same curve with end points that differ from its own by round-off only: the circle stays as it is.
    #[must_use]
    pub(crate) fn with_round_off_ends(&self, from: Point, to: Point) -> Self {
        match *self {
            Self::Line { .. } => Self::Line { from, to },
            Self::Arc { centre, sweep, .. } => Self::Arc {
                from,
                to,
                centre,
                sweep,
            },
        }
    }

    /// The curve moved by (dr, dz) = `by`, m.
    #[must_use]
    pub fn shifted(&self, by: Point) -> Self {
        match *self {
            Self::Line { from, to } => Self::Line {
                from: from + by,
                to: to + by,
            },
            Self::Arc {
                from,
                to,
                centre,
                sweep,
            } => Self::Arc {
                from: from + by,
                to: to + by,
                centre: centre + by,
                sweep,
            },
        }
    }

    /// The point of the curve nearest to `point`.
    pub fn nearest(&self, point: Point) -> Nearest {
        let t = match *self {
            Self::Line { from, to } => {
                let along = to - from;
                let square = along.dot(along);
                if square > 0.0 {
                    ((point - from).dot(along) / square).clamp(0.0, 1.0)
                } else {
                    0.0
                }
            }
            Self::Arc { from, to, .. } => match self.share_at_direction(point) {
                Some(t) => t,
                None if point.distance(from) <= point.distance(to) => 0.0,
                None => 1.0,
            },
        };
        let nearest = self.at(t);
        Nearest {
            t,
            point: nearest,
            distance_m: nearest.distance(point),
        }
    }

    /// Distance of a point from the curve, m.
    pub fn distance_m(&self, point: Point) -> f64 {
        self.nearest(point).distance_m
    }

    /// For an arc, the share of its length at which it is seen from its centre in the direction of `point`;
    /// `None` when the arc does not reach that direction, or for a line.
    pub(crate) fn share_at_direction(&self, point: Point) -> Option<f64> {
        let Self::Arc { sweep, .. } = *self else {
            return None;
        };
        // Seen from the middle of the arc: the centre of a nearly straight one is far away and costs digits.
        let curvature = sweep.signum() / self.radius_m();
        let along = self.tangent(0.5);
        let d = point - self.midpoint();
        let angle = (curvature * d.dot(along)).atan2(1.0 - curvature * d.dot(along.left_normal()));
        let t = 0.5 + angle / sweep;
        (0.0..=1.0).contains(&t).then_some(t)
    }

    /// The smallest box around the curve.
    pub fn bounds(&self) -> Bounds {
        let mut bounds = Bounds::EMPTY.with(self.start()).with(self.end());
        if let Self::Arc { centre, .. } = *self {
            let radius = self.radius_m();
            for (dr, dz) in [(1.0, 0.0), (-1.0, 0.0), (0.0, 1.0), (0.0, -1.0)] {
                let extreme = centre + Point::new(dr, dz) * radius;
                if self.share_at_direction(extreme).is_some() {
                    bounds = bounds.with(extreme);
                }
            }
        }
        bounds
    }
}
