//! The values written on the flux lines.

use std::collections::{HashMap, HashSet};

use super::flux_lines::{FluxLine, FluxLines};
use super::names::{Rect, overlap};
use super::svg::{Text, text_width};
use crate::notation::{Unit, significant};

/// Size of the words.
const SIZE: f64 = 10.0;
/// Distance between places that are tried along a line.
const STRIDE: f64 = 7.0;
/// Most a line may bend away from straight words.
const MOST_BEND: f64 = 2.2;
/// Least distance between two values.
const APART: f64 = 13.0;
/// Cell of the grid that tells which lines pass near a place.
const CELL: f64 = 6.5;

/// A value with its place.
struct Value {
    words: String,
    middle: [f64; 2],
    turned_deg: f64,
    /// Points along the words.
    spine: Vec<[f64; 2]>,
}

/// Where values may be written.
pub struct Room<'a> {
    /// Half the width of the section on the page.
    pub width: f64,
    /// Height of the described section on the page.
    pub height: f64,
    /// What is covered already, left and right of the axis.
    pub taken: &'a [Rect],
}

/// Stands for the outlines of parts among the lines near a place.
const BORDER: i64 = i64::MIN;

/// Writes values on the lines, each once where there is room: right of the axis, or else left of it. `borders`: points
/// along the outlines of the parts.
pub fn draw(lines: &FluxLines, borders: &[[f64; 2]], room: &Room<'_>) -> String {
    let near = near_lines(lines, borders);
    let mut placed: Vec<Value> = Vec::new();
    let mut written = HashSet::new();
    let mut by_length: Vec<&FluxLine> = lines.lines.iter().collect();
    by_length.sort_by(|a, b| length(b).total_cmp(&length(a)));
    for left in [false, true] {
        for line in &by_length {
            if written.contains(&line.steps) {
                continue;
            }
            let words = significant(line.steps as f64 * lines.step_wb, Unit::WEBER, 3);
            let best = candidates(line, &words)
                .into_iter()
                .filter(|value| is_alone(value, line.steps, &near))
                .map(|value| {
                    (
                        border_penalty(&value, &near),
                        if left { value.mirrored() } else { value },
                    )
                })
                .filter(|(_, value)| fits(value, room))
                .map(|(penalty, value)| (merit(&value, &placed) - penalty, value))
                .filter(|(merit, _)| *merit > f64::NEG_INFINITY)
                .max_by(|a, b| a.0.total_cmp(&b.0));
            if let Some((_, value)) = best {
                written.insert(line.steps);
                placed.push(value);
            }
        }
    }
    placed.iter().map(Value::element).collect()
}

impl Value {
    /// The same on the other side of the axis.
    fn mirrored(mut self) -> Self {
        self.middle[0] = -self.middle[0];
        self.turned_deg = -self.turned_deg;
        self.spine.iter_mut().for_each(|point| point[0] = -point[0]);
        self
    }

    fn element(&self) -> String {
        let tilt = self.turned_deg.to_radians();
        // Centred on the line: the baseline lies a third of the size below it.
        let at = [
            self.middle[0] - 0.34 * SIZE * tilt.sin(),
            self.middle[1] + 0.34 * SIZE * tilt.cos(),
        ];
        let text = Text {
            words: &self.words,
            at,
            size: SIZE,
            anchor: "middle",
            turned: self.turned_deg,
            class: "flux-value",
        };
        text.element()
    }
}

fn length(line: &FluxLine) -> f64 {
    line.points
        .windows(2)
        .map(|pair| (pair[1][0] - pair[0][0]).hypot(pair[1][1] - pair[0][1]))
        .sum()
}

/// Which lines pass each cell of a coarse grid.
fn near_lines(lines: &FluxLines, borders: &[[f64; 2]]) -> HashMap<(i64, i64), Vec<i64>> {
    let mut near: HashMap<(i64, i64), Vec<i64>> = HashMap::new();
    for line in &lines.lines {
        for point in points_along(line, 0.5 * CELL) {
            let steps = near.entry(cell(point)).or_default();
            if !steps.contains(&line.steps) {
                steps.push(line.steps);
            }
        }
    }
    for &point in borders {
        let steps = near.entry(cell(point)).or_default();
        if !steps.contains(&BORDER) {
            steps.push(BORDER);
        }
    }
    near
}

/// What it costs that words stand on the outline of a part.
fn border_penalty(value: &Value, near: &HashMap<(i64, i64), Vec<i64>>) -> f64 {
    let on_border = |point: &&[f64; 2]| {
        near.get(&cell(**point))
            .is_some_and(|lines| lines.contains(&BORDER))
    };
    25.0 * value.spine.iter().filter(on_border).count() as f64
}

fn cell([x, y]: [f64; 2]) -> (i64, i64) {
    ((x / CELL).floor() as i64, (y / CELL).floor() as i64)
}

/// Points at equal distances along a line.
fn points_along(line: &FluxLine, stride: f64) -> Vec<[f64; 2]> {
    let mut points = Vec::new();
    let mut left = 0.0;
    let mut all = line.points.clone();
    if line.closed {
        all.extend(line.points.first().copied());
    }
    for pair in all.windows(2) {
        let (dx, dy) = (pair[1][0] - pair[0][0], pair[1][1] - pair[0][1]);
        let span = dx.hypot(dy);
        let mut at = left;
        while at < span {
            points.push([pair[0][0] + dx * at / span, pair[0][1] + dy * at / span]);
            at += stride;
        }
        left = at - span;
    }
    points
}

/// Places along a line that is straight enough for the words.
fn candidates(line: &FluxLine, words: &str) -> Vec<Value> {
    let width = SIZE * text_width(words);
    let points = points_along(line, STRIDE);
    let reach = (0.5 * width / STRIDE).ceil() as usize;
    let count = points.len();
    let mut values = Vec::new();
    for k in 0..count {
        let span: Option<Vec<[f64; 2]>> = (0..=2 * reach)
            .map(|j| {
                let at = (k + j).checked_sub(reach);
                let wrapped = if line.closed {
                    Some((k + count * (1 + reach / count.max(1)) + j - reach) % count)
                } else {
                    at
                };
                wrapped.and_then(|at| points.get(at)).copied()
            })
            .collect();
        let Some(spine) = span else { continue };
        let (first, last) = (spine[0], spine[2 * reach]);
        let (dx, dy) = (last[0] - first[0], last[1] - first[1]);
        let chord = dx.hypot(dy);
        let bend = |p: &[f64; 2]| (dx * (p[1] - first[1]) - dy * (p[0] - first[0])).abs() / chord.max(1e-9);
        if chord < 0.9 * width || spine.iter().map(bend).fold(0.0, f64::max) > MOST_BEND {
            continue;
        }
        let mut turned_deg = dy.atan2(dx).to_degrees();
        if turned_deg > 90.0 {
            turned_deg -= 180.0;
        } else if turned_deg <= -90.0 {
            turned_deg += 180.0;
        }
        let middle = [0.5 * (first[0] + last[0]), 0.5 * (first[1] + last[1])];
        values.push(Value {
            words: words.to_owned(),
            middle,
            turned_deg,
            spine,
        });
    }
    values
}

fn fits(value: &Value, room: &Room<'_>) -> bool {
    value.spine.iter().all(|&[x, y]| {
        let small = [x - 5.0, y - 5.0, x + 5.0, y + 5.0];
        x.abs() > 8.0
            && x.abs() < room.width - 8.0
            && y > 8.0
            && y < room.height - 8.0
            && !room.taken.iter().any(|rect| overlap(&small, rect))
    })
}

/// Whether no other line passes through the words.
fn is_alone(value: &Value, steps: i64, near: &HashMap<(i64, i64), Vec<i64>>) -> bool {
    value.spine.iter().all(|&point| {
        near.get(&cell(point))
            .is_none_or(|lines| lines.iter().all(|of| *of == steps || *of == BORDER))
    })
}

/// Far from other values, and not steep. Not at all when it would touch another value.
fn merit(value: &Value, placed: &[Value]) -> f64 {
    let distance = |other: &Value| {
        let pairs = value
            .spine
            .iter()
            .flat_map(|a| other.spine.iter().map(move |b| (a[0] - b[0]).hypot(a[1] - b[1])));
        pairs.fold(f64::INFINITY, f64::min)
    };
    let nearest = placed.iter().map(distance).fold(f64::INFINITY, f64::min);
    if nearest < APART {
        return f64::NEG_INFINITY;
    }
    nearest.min(70.0) - 0.35 * value.turned_deg.abs()
}
