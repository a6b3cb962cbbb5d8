//! A number with its low and high, and what stands behind them.

/// What stands behind a bracket.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Bound {
    /// Proved.
    Guaranteed,
    /// Estimated from a pair of meshes.
    Estimated,
    /// Fixed by the drawing and the data alone.
    Exact,
}

/// A number in SI units between a low and a high: `low <= value <= high`, all finite.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bracket {
    /// Best value.
    pub value: f64,
    /// Low end.
    pub low: f64,
    /// High end.
    pub high: f64,
    /// What stands behind the ends.
    pub bound: Bound,
}

impl Bracket {
    /// A number that the drawing and the data alone fix.
    pub fn exact(value: f64) -> Self {
        Self { value, low: value, high: value, bound: Bound::Exact }
    }

    /// Half of high minus low.
    pub fn half_width(&self) -> f64 {
        0.5 * (self.high - self.low)
    }

    /// Whether `x` lies within, ends included.
    pub fn contains(&self, x: f64) -> bool {
        self.low <= x && x <= self.high
    }
}
