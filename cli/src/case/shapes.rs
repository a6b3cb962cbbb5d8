//! Shapes as they are written -> checked outlines.

use std::ops::Range;

use mesher::shape::{Outline, Step};
use mesher::{Point, ShapeError};

use super::LengthUnit;
use super::expression::Dimension;
use super::model::drawing::{Circle, OutlineKeys, Rect, Region, Repeat, StepKeys, Wall};
use super::model::located::Located;
use super::model::quantity::Pair;
use super::places::point_text;
use super::values::{Values, length_text};

/// Most copies of a region.
const MOST_COPIES: usize = 100_000;

/// The keys that may give a shape, of which exactly one must be there.
pub struct ShapeKeys<'a> {
    rect: &'a Option<Located<Rect>>,
    circle: &'a Option<Located<Circle>>,
    polygon: &'a Option<Located<Vec<Pair>>>,
    outline: &'a Option<Located<OutlineKeys>>,
}

impl<'a> From<&'a Region> for ShapeKeys<'a> {
    fn from(region: &'a Region) -> Self {
        Self {
            rect: &region.rect,
            circle: &region.circle,
            polygon: &region.polygon,
            outline: &region.outline,
        }
    }
}

impl<'a> From<&'a Wall> for ShapeKeys<'a> {
    fn from(wall: &'a Wall) -> Self {
        Self {
            rect: &wall.rect,
            circle: &wall.circle,
            polygon: &wall.polygon,
            outline: &wall.outline,
        }
    }
}

impl ShapeKeys<'_> {
    /// The outline and where it is written. `owner` (``region `coil` ``) and `place` are for messages.
    pub fn outline(
        &self,
        owner: &str,
        place: &Range<usize>,
        values: &mut Values,
    ) -> Option<(Outline, Range<usize>)> {
        let spans = [
            ("rect", self.rect.as_ref().map(|shape| &shape.span)),
            ("circle", self.circle.as_ref().map(|shape| &shape.span)),
            ("polygon", self.polygon.as_ref().map(|shape| &shape.span)),
            ("outline", self.outline.as_ref().map(|shape| &shape.span)),
        ];
        let given: Vec<(&str, Range<usize>)> = spans
            .iter()
            .filter_map(|(key, span)| Some((*key, (*span)?.clone())))
            .collect();
        let span = match given.as_slice() {
            [] => {
                values.fault_with_help(
                    place,
                    format!("{owner} has no shape"),
                    "give one of rect, circle, polygon, outline",
                );
                return None;
            }
            [(_, span)] => span.clone(),
            [_, (_, second), ..] => {
                let keys: Vec<String> = given.iter().map(|(key, _)| format!("`{key}`")).collect();
                let message = format!("{owner} has more than one shape: {}", keys.join(", "));
                let second = values.with_key(second);
                values.fault_with_help(&second, message, "give exactly one");
                return None;
            }
        };
        let made = if let Some(rect) = self.rect {
            rectangle(&rect.value, values)
        } else if let Some(circle) = self.circle {
            round(&circle.value, values)
        } else if let Some(polygon) = self.polygon {
            corners(&polygon.value, values)
        } else {
            self.outline
                .as_ref()
                .and_then(|outline| drawn(&outline.value, values))
        }?;
        match made {
            Ok(outline) => Some((outline, span)),
            Err(error) => {
                let message = format!("{owner}: {}", shape_error_text(&error, &values.length_unit));
                values.fault(&span, message);
                None
            }
        }
    }
}

/// `None`: a quantity in it is wrong, and that is noted.
type Made = Option<Result<Outline, ShapeError>>;

fn rectangle(rect: &Rect, values: &mut Values) -> Made {
    let r = values.lengths(&rect.r, "r");
    let z = values.lengths(&rect.z, "z");
    let fillet = match &rect.fillet {
        Some(fillet) => values.amount(fillet, "fillet", Dimension::LENGTH),
        None => Some(0.0),
    };
    Some(Outline::rect(r?, z?, fillet?))
}

fn round(circle: &Circle, values: &mut Values) -> Made {
    let centre = values.point(&circle.centre, "centre");
    let radius = values.amount(&circle.radius, "radius", Dimension::LENGTH);
    Some(Outline::circle(centre?, radius?))
}

fn corners(polygon: &[Pair], values: &mut Values) -> Made {
    let points: Vec<Option<Point>> = polygon.iter().map(|pair| values.point(pair, "polygon")).collect();
    let points: Option<Vec<Point>> = points.into_iter().collect();
    Some(Outline::polygon(&points?))
}

fn drawn(outline: &OutlineKeys, values: &mut Values) -> Made {
    let start = values.point(&outline.start, "start");
    let steps: Vec<Option<Step>> = outline.path.iter().map(|keys| step(keys, values)).collect();
    let steps: Option<Vec<Step>> = steps.into_iter().collect();
    Some(Outline::path(start?, &steps?))
}

fn step(keys: &Located<StepKeys>, values: &mut Values) -> Option<Step> {
    match &keys.value {
        StepKeys {
            line: Some(line),
            arc: None,
            through: None,
        } => Some(Step::Line {
            to: values.point(line, "line")?,
        }),
        StepKeys {
            line: None,
            arc: Some(arc),
            through: Some(through),
        } => {
            let to = values.point(arc, "arc");
            let through = values.point(through, "through");
            Some(Step::Arc {
                to: to?,
                through: through?,
            })
        }
        _ => {
            let message = "a step of an outline is either a line or an arc";
            values.fault_with_help(
                &keys.span,
                message,
                "write { line = [r, z] } or { arc = [r, z], through = [r, z] }",
            );
            None
        }
    }
}

/// The outline and its copies along r and z.
pub fn repeated(
    first: Outline,
    repeat: &Option<Located<Repeat>>,
    owner: &str,
    values: &mut Values,
) -> Option<Vec<Outline>> {
    let Some(repeat) = repeat else {
        return Some(vec![first]);
    };
    let keys = &repeat.value;
    let along_r = values.whole(&keys.count[0], "count", 1, MOST_COPIES);
    let along_z = values.whole(&keys.count[1], "count", 1, MOST_COPIES);
    let step = values.lengths(&keys.step, "step");
    let (along_r, along_z, [dr, dz]) = (along_r?, along_z?, step?);
    if along_r * along_z > MOST_COPIES {
        values.fault(
            &repeat.span,
            format!(
                "{owner} has {} copies; at most {MOST_COPIES} are allowed",
                along_r * along_z
            ),
        );
        return None;
    }
    for (count, step, name) in [(along_r, dr, "r"), (along_z, dz, "z")] {
        if count > 1 && step == 0.0 {
            values.fault(
                &repeat.span,
                format!("{owner}: the step along {name} is zero, so copies would lie on each other"),
            );
            return None;
        }
    }
    let mut copies = Vec::with_capacity(along_r * along_z);
    for row in 0..along_z {
        for column in 0..along_r {
            // Counts are far below 2^53.
            match first.shifted(column as f64 * dr, row as f64 * dz) {
                Ok(copy) => copies.push(copy),
                Err(error) => {
                    let text = shape_error_text(&error, &values.length_unit);
                    let message = format!(
                        "{owner}: copy {} along r, {} along z: {text}",
                        column + 1,
                        row + 1
                    );
                    values.fault(&repeat.span, message);
                    return None;
                }
            }
        }
    }
    Some(copies)
}

/// A shape error in the case's length unit.
pub fn shape_error_text(error: &ShapeError, unit: &LengthUnit) -> String {
    let length = |metres: &f64| length_text(*metres, unit);
    let point = |at: &Point| point_text(*at, unit);
    match error {
        ShapeError::NotFinite { what, value } => format!("{what} must be a finite number, not {value}"),
        ShapeError::AcrossAxis { at } => format!(
            "the shape crosses the axis, to {}; only r >= 0 is drawn",
            point(at)
        ),
        ShapeError::CircleBeyondAxis { centre, radius_m } => {
            format!(
                "the circle lies wholly beyond the axis: centre {}, radius {}",
                point(centre),
                length(radius_m)
            )
        }
        ShapeError::NoArea { .. } => "the shape has no area".to_owned(),
        ShapeError::SelfCrossing { at } => format!("the outline crosses itself at {}", point(at)),
        ShapeError::RadiusNotPositive { radius_m } => {
            format!("the radius must be more than zero, not {}", length(radius_m))
        }
        ShapeError::NegativeFillet { fillet_m } => {
            format!("the fillet must not be negative, but is {}", length(fillet_m))
        }
        ShapeError::FilletTooLarge { fillet_m, limit_m } => {
            format!(
                "the fillet of {} is too large: at most {} fits",
                length(fillet_m),
                length(limit_m)
            )
        }
        ShapeError::StraightArc { from, through, to } => format!(
            "no arc leads from {} through {} to {}: the points lie on a line",
            point(from),
            point(through),
            point(to)
        ),
        ShapeError::NoLength { at } => format!("two neighbouring points coincide at {}", point(at)),
        ShapeError::TooFewPoints { given, needed } => {
            format!("at least {needed} points are needed, not {given}")
        }
        // Rare ones, in metres.
        other => other.to_string(),
    }
}
