//! Shapes a region may have, all reduced to one closed outline of lines and arcs.

mod build;
mod checked;
#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;

use crate::curve::{Bounds, Curve, Point};
use crate::error::ShapeError;

/// A closed, simple outline, counter-clockwise in (r, z), within r >= 0, of nonzero area. Built only by this
/// module's constructors, which check that. It may touch itself, but not cross itself.
#[derive(Clone, Debug, PartialEq)]
pub struct Outline {
    pub(crate) curves: Vec<Curve>,
}

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

impl Step {
    /// Where it ends.
    pub fn to(&self) -> Point {
        match *self {
            Self::Line { to } | Self::Arc { to, .. } => to,
        }
    }
}

impl Outline {
    /// Rectangle `r[0]..r[1]`, `z[0]..z[1]` (either order), corners rounded with `fillet_m` (0: sharp; corners
    /// on the axis stay sharp). All lengths in m.
    ///
    /// # Errors
    /// A number that is not finite, r below 0, no area, a negative fillet or one that does not fit.
    pub fn rect(r: [f64; 2], z: [f64; 2], fillet_m: f64) -> Result<Self, ShapeError> {
        checked::finite("r of the rectangle", &r)?;
        checked::finite("z of the rectangle", &z)?;
        checked::finite("the fillet", &[fillet_m])?;
        let low = Point::new(r[0].min(r[1]), z[0].min(z[1]));
        let high = Point::new(r[0].max(r[1]), z[0].max(z[1]));
        checked::closed_outline(build::rounded_rect(low, high, fillet_m)?)
    }

    /// Circle around `centre` of radius `radius_m`, clipped at the axis. Lengths in m.
    ///
    /// # Errors
    /// A number that is not finite, a radius that is not positive, nothing left at r > 0.
    pub fn circle(centre: Point, radius_m: f64) -> Result<Self, ShapeError> {
        checked::finite("the centre", &[centre.r, centre.z])?;
        checked::finite("the radius", &[radius_m])?;
        if radius_m <= 0.0 {
            return Err(ShapeError::RadiusNotPositive { radius_m });
        }
        if centre.r <= -radius_m * (1.0 - checked::ROUND_OFF) {
            return Err(ShapeError::CircleBeyondAxis { centre, radius_m });
        }
        Ok(Self {
            curves: build::clipped_circle(centre, radius_m),
        })
    }

    /// Closed polygon through the points (m), either sense. The last point may repeat the first.
    ///
    /// # Errors
    /// A coordinate that is not finite, fewer than three points, r below 0, two consecutive points that
    /// coincide, an outline that crosses itself, no area.
    pub fn polygon(points: &[Point]) -> Result<Self, ShapeError> {
        for point in points {
            checked::finite("a coordinate of the polygon", &[point.r, point.z])?;
        }
        let repeats_first = points.len() > 1 && points.first() == points.last();
        let points = &points[..points.len() - usize::from(repeats_first)];
        if points.len() < 3 {
            return Err(ShapeError::TooFewPoints {
                given: points.len(),
                needed: 3,
            });
        }
        let next = points.iter().cycle().skip(1);
        checked::closed_outline(
            points
                .iter()
                .zip(next)
                .map(|(a, b)| Curve::line(*a, *b))
                .collect(),
        )
    }

    /// Lines and arcs from `start` (m); closes itself with a straight line if the last step does not end there.
    ///
    /// # Errors
    /// As [`Outline::polygon`], and an arc whose three points lie on a line.
    pub fn path(start: Point, steps: &[Step]) -> Result<Self, ShapeError> {
        checked::closed_outline(build::path(start, steps)?)
    }

    /// The same outline moved by (dr, dz), m.
    ///
    /// # Errors
    /// A number that is not finite, or the moved outline reaches across the axis.
    pub fn shifted(&self, dr: f64, dz: f64) -> Result<Self, ShapeError> {
        checked::finite("the shift", &[dr, dz])?;
        let by = Point::new(dr, dz);
        let curves: Vec<_> = self.curves.iter().map(|curve| curve.shifted(by)).collect();
        Ok(Self {
            curves: checked::beside_axis(curves)?,
        })
    }

    /// The curves in order, counter-clockwise: each ends where the next starts, to the last bit.
    pub fn curves(&self) -> &[Curve] {
        &self.curves
    }

    /// Area, m², exact for the drawn curves.
    pub fn area_m2(&self) -> f64 {
        self.curves.iter().map(Curve::area_term_m2).sum()
    }

    /// Integral of r over the area, m³ (volume of revolution over 2 pi), exact for the drawn curves.
    pub fn r_moment_m3(&self) -> f64 {
        self.curves.iter().map(Curve::moment_term_m3).sum()
    }

    /// The smallest box around it.
    pub fn bounds(&self) -> Bounds {
        self.curves
            .iter()
            .fold(Bounds::EMPTY, |bounds, curve| bounds.union(curve.bounds()))
    }

    /// Whether the point lies inside. On the outline itself either answer may come.
    pub fn contains(&self, point: Point) -> bool {
        self.curves
            .iter()
            .map(|curve| curve.winding_about(point))
            .sum::<i32>()
            > 0
    }
}
