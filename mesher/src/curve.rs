//! Points of the half plane and the two kinds of drawn curve: straight lines and circular arcs.

/// A point of the half section, metres.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Point {
    /// Distance from the axis, m.
    pub r: f64,
    /// Height along the axis, m.
    pub z: f64,
}

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
