//! Points of the half plane, and boxes around what is drawn.

use std::fmt;
use std::ops::{Add, Mul, Sub};

/// A point of the half section, metres. Differences of points are vectors and share the type.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Point {
    /// Distance from the axis, m.
    pub r: f64,
    /// Height along the axis, m.
    pub z: f64,
}

impl Point {
    /// The point at distance `r` from the axis and height `z`, m.
    pub const fn new(r: f64, z: f64) -> Self {
        Self { r, z }
    }

    /// Whether both coordinates are finite numbers.
    pub fn is_finite(self) -> bool {
        self.r.is_finite() && self.z.is_finite()
    }

    /// Scalar product of two vectors.
    pub fn dot(self, other: Self) -> f64 {
        self.r * other.r + self.z * other.z
    }

    /// `self.r * other.z - self.z * other.r`: positive when `other` points to the left of `self`
    /// (r to the right, z up).
    pub fn cross(self, other: Self) -> f64 {
        self.r * other.z - self.z * other.r
    }

    /// Length of a vector, m.
    pub fn norm(self) -> f64 {
        self.r.hypot(self.z)
    }

    /// Distance to another point, m.
    pub fn distance(self, other: Self) -> f64 {
        (self - other).norm()
    }

    /// The vector turned a quarter to the left (counter-clockwise).
    pub fn left_normal(self) -> Self {
        Self::new(-self.z, self.r)
    }

    /// The vector turned counter-clockwise by `angle` rad.
    pub fn turned(self, angle: f64) -> Self {
        let (sin, cos) = angle.sin_cos();
        Self::new(self.r * cos - self.z * sin, self.r * sin + self.z * cos)
    }

    /// The point at the share `t` of the way to `other`; exactly `self` at 0 and `other` at 1.
    pub fn towards(self, other: Self, t: f64) -> Self {
        Self::new(self.r * (1.0 - t) + other.r * t, self.z * (1.0 - t) + other.z * t)
    }

    /// The point halfway to `other`.
    pub fn middle(self, other: Self) -> Self {
        Self::new(0.5 * (self.r + other.r), 0.5 * (self.z + other.z))
    }
}

impl fmt::Display for Point {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "(r = {} m, z = {} m)", self.r, self.z)
    }
}

impl Add for Point {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self::new(self.r + other.r, self.z + other.z)
    }
}

impl Sub for Point {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self::new(self.r - other.r, self.z - other.z)
    }
}

impl Mul<f64> for Point {
    type Output = Self;
    fn mul(self, factor: f64) -> Self {
        Self::new(self.r * factor, self.z * factor)
    }
}

/// A box with sides along the axes, m. The empty box has `low` above `high`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bounds {
    /// Smallest r and z.
    pub low: Point,
    /// Largest r and z.
    pub high: Point,
}

impl Bounds {
    /// The box that holds nothing.
    pub const EMPTY: Self = Self {
        low: Point::new(f64::INFINITY, f64::INFINITY),
        high: Point::new(f64::NEG_INFINITY, f64::NEG_INFINITY),
    };

    /// The smallest box around this one and a point.
    pub fn with(self, point: Point) -> Self {
        Self {
            low: Point::new(self.low.r.min(point.r), self.low.z.min(point.z)),
            high: Point::new(self.high.r.max(point.r), self.high.z.max(point.z)),
        }
    }

    /// The smallest box around both.
    pub fn union(self, other: Self) -> Self {
        Self {
            low: Point::new(self.low.r.min(other.low.r), self.low.z.min(other.low.z)),
            high: Point::new(self.high.r.max(other.high.r), self.high.z.max(other.high.z)),
        }
    }

    /// The box widened by `margin` m on every side.
    pub fn widened(self, margin: f64) -> Self {
        let by = Point::new(margin, margin);
        Self {
            low: self.low - by,
            high: self.high + by,
        }
    }

    /// Whether the two share a point.
    pub fn meets(self, other: Self) -> bool {
        self.low.r <= other.high.r
            && other.low.r <= self.high.r
            && self.low.z <= other.high.z
            && other.low.z <= self.high.z
    }

    /// Whether the point lies in it (its border included).
    pub fn contains(self, point: Point) -> bool {
        self.low.r <= point.r && point.r <= self.high.r && self.low.z <= point.z && point.z <= self.high.z
    }

    /// The longer side, m; 0 for the empty box.
    pub fn size(self) -> f64 {
        (self.high.r - self.low.r).max(self.high.z - self.low.z).max(0.0)
    }
}
