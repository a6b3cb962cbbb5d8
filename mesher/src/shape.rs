//! Shapes a region may have, all reduced to one closed outline of lines and arcs.

use crate::curve::Curve;

/// A closed, simple outline, counter-clockwise in (r, z), within r >= 0, of nonzero area. Built only by this
/// module's constructors, which check that.
#[derive(Clone, Debug, PartialEq)]
pub struct Outline {
    pub(crate) curves: Vec<Curve>,
}

use crate::curve::Point;
use crate::error::ShapeError;

/// One step of a drawn outline.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Step {
    /// Straight to this point.
    Line {
        /// End.
        to: Point,
    },
    /// Along the circle through the last point, `through` and `to`.
    Arc {
        /// End.
        to: Point,
        /// A point on the way.
        through: Point,
    },
}

impl Outline {
    /// Rectangle `r[0]..r[1]`, `z[0]..z[1]` (either order), corners rounded with `fillet_m` (0: sharp; corners
    /// on the axis stay sharp).
    pub fn rect(_r: [f64; 2], _z: [f64; 2], _fillet_m: f64) -> Result<Self, ShapeError> {
        todo!("contract only; being written")
    }

    /// Circle, clipped at the axis.
    pub fn circle(_centre: Point, _radius_m: f64) -> Result<Self, ShapeError> {
        todo!("contract only; being written")
    }

    /// Closed polygon through the points, either sense.
    pub fn polygon(_points: &[Point]) -> Result<Self, ShapeError> {
        todo!("contract only; being written")
    }

    /// Lines and arcs from `start`; closes itself with a straight line if the last step does not end there.
    pub fn path(_start: Point, _steps: &[Step]) -> Result<Self, ShapeError> {
        todo!("contract only; being written")
    }

    /// The same outline moved by (dr, dz), m.
    pub fn shifted(&self, _dr: f64, _dz: f64) -> Result<Self, ShapeError> {
        todo!("contract only; being written")
    }
}
