//! Small plots of a number over another as SVG, in the look of our pictures: one hue, the range of the number as a
//! band, words on the drawing instead of a key.

use crate::notation::rounded;
use crate::picture::svg::{PathData, Text, escaped, number, text_width};
use crate::picture::tint::{INK, PAPER, ramp_word};

/// Size of the whole page and room around the area of the plot (left, top, right, bottom).
const PAGE: [f64; 2] = [640.0, 420.0];
const ROOM: [f64; 4] = [84.0, 78.0, 30.0, 56.0];
/// Sizes of title and words.
const TITLE: f64 = 17.0;
const WORDS: f64 = 12.0;
/// Most steps of an axis.
const MOST_STEPS: f64 = 7.0;
/// Half the width of a check's diamond.
const DIAMOND: f64 = 3.6;

/// A number with its range over another, in the units of the axes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PlotPoint {
    /// Along the page.
    pub x: f64,
    /// Up the page.
    pub y: f64,
    /// Low end of `y`.
    pub low: f64,
    /// High end of `y`.
    pub high: f64,
}

/// What is plotted.
#[derive(Clone, Debug)]
pub struct Plot {
    /// Title.
    pub title: String,
    /// What line, band and marks mean.
    pub subtitle: String,
    /// Name and unit of the number along the page, such as `travel, mm`.
    pub across: String,
    /// Name and unit of the number up the page.
    pub up: String,
    /// The numbers, in the order the line passes them.
    pub points: Vec<PlotPoint>,
    /// Points (x, y) of a check, drawn as diamonds.
    pub checks: Vec<[f64; 2]>,
}

impl Plot {
    /// The SVG. Zero is always on the axis that goes up.
    pub fn svg(&self) -> String {
        let across = Axis::from_end_to_end(self.points.iter().map(|point| point.x));
        let heights = self
            .points
            .iter()
            .flat_map(|point| [point.low, point.high, point.y]);
        let up = Axis::around(
            heights
                .chain(self.checks.iter().map(|check| check[1]))
                .chain([0.0]),
        );
        let sheet = Sheet { across, up };
        let mut body = sheet.grid();
        body.push_str(&self.band(&sheet));
        body.push_str(&self.line(&sheet));
        for &[x, y] in &self.checks {
            body.push_str(&diamond(sheet.at(x, y)));
        }
        body.push_str(&self.words());
        let [w, h] = PAGE.map(number);
        format!(
            concat!(
                r#"<svg xmlns="http://www.w3.org/2000/svg" width="{w}" height="{h}" viewBox="0 0 {w} {h}" font-family="sans-serif">"#,
                r#"<title>{title}</title><style>text{{fill:{ink}}}.title{{font-weight:bold}}</style>"#,
                r#"<rect width="{w}" height="{h}" fill="{paper}"/>{body}</svg>"#,
                "\n"
            ),
            w = w,
            h = h,
            title = escaped(&self.title),
            ink = INK,
            paper = PAPER,
            body = body
        )
    }

    fn band(&self, sheet: &Sheet) -> String {
        let mut path = PathData::new();
        let there = self.points.iter().map(|point| sheet.at(point.x, point.high));
        let back = self.points.iter().rev().map(|point| sheet.at(point.x, point.low));
        join(&mut path, there.chain(back));
        path.close();
        // The stroke keeps a band visible that is thinner than a line.
        format!(
            r#"<path d="{}" fill="{1}" stroke="{1}" stroke-width="3" stroke-linejoin="round"/>"#,
            path.finish(),
            ramp_word(0.32)
        )
    }

    fn line(&self, sheet: &Sheet) -> String {
        let mut path = PathData::new();
        join(
            &mut path,
            self.points.iter().map(|point| sheet.at(point.x, point.y)),
        );
        let dots: String = self
            .points
            .iter()
            .map(|point| {
                let [x, y] = sheet.at(point.x, point.y).map(number);
                format!(r#"<circle cx="{x}" cy="{y}" r="2" fill="{INK}"/>"#)
            })
            .collect();
        let line = path.finish();
        format!(
            r#"<path d="{line}" fill="none" stroke="{INK}" stroke-width="1.5" stroke-linejoin="round"/>{dots}"#
        )
    }

    fn words(&self) -> String {
        let bottom = PAGE[1] - ROOM[3];
        let plain = |words, at, anchor| Text {
            words,
            at,
            size: WORDS,
            anchor,
            turned: 0.0,
            class: "",
        };
        let title = shortened(&self.title, PAGE[0] - 2.0 * ROOM[2]);
        [
            Text {
                size: TITLE,
                class: "title",
                ..plain(&title, [ROOM[2], 31.0], "start")
            },
            plain(&self.subtitle, [ROOM[2], 50.0], "start"),
            plain(&self.across, [PAGE[0] - ROOM[2], bottom + 39.0], "end"),
            plain(&self.up, [ROOM[2], ROOM[1] - 8.0], "start"),
        ]
        .iter()
        .map(Text::element)
        .collect()
    }
}

/// The area of the plot.
struct Sheet {
    across: Axis,
    up: Axis,
}

impl Sheet {
    fn at(&self, x: f64, y: f64) -> [f64; 2] {
        let [left, top, right, bottom] = ROOM;
        [
            left + self.across.share(x) * (PAGE[0] - left - right),
            PAGE[1] - bottom - self.up.share(y) * (PAGE[1] - top - bottom),
        ]
    }

    /// Rules across the page, marks along it, and their numbers.
    fn grid(&self) -> String {
        let (left, right) = (ROOM[0], PAGE[0] - ROOM[2]);
        let bottom = PAGE[1] - ROOM[3];
        let rule = |from: [f64; 2], to: [f64; 2], stroke: &str, width: f64| {
            let ([x, y], [u, v]) = (from.map(number), to.map(number));
            format!(r#"<path d="M{x} {y}L{u} {v}" stroke="{stroke}" stroke-width="{width}"/>"#)
        };
        let label = |words: &str, at, anchor| {
            Text {
                words,
                at,
                size: WORDS,
                anchor,
                turned: 0.0,
                class: "",
            }
            .element()
        };
        let mut grid = String::new();
        for mark in self.up.marks() {
            let y = self.at(self.across.low, mark)[1];
            let (stroke, width) = if mark == 0.0 {
                (INK.to_owned(), 1.0)
            } else {
                (ramp_word(0.16), 0.8)
            };
            grid.push_str(&rule([left, y], [right, y], &stroke, width));
            grid.push_str(&label(&rounded(mark, 6), [left - 8.0, y + 4.0], "end"));
        }
        for mark in self.across.marks() {
            let x = self.at(mark, self.up.low)[0];
            grid.push_str(&rule([x, bottom], [x, bottom + 5.0], INK, 1.0));
            grid.push_str(&label(&rounded(mark, 6), [x, bottom + 20.0], "middle"));
        }
        grid + &rule([left, bottom], [right, bottom], INK, 0.8)
    }
}

/// A range of numbers, marked at the multiples of a round step.
struct Axis {
    low: f64,
    high: f64,
    step: f64,
}

impl Axis {
    /// From a round number to a round number.
    fn around(numbers: impl Iterator<Item = f64>) -> Self {
        let Self { low, high, step } = Self::from_end_to_end(numbers);
        Self {
            low: (low / step + 1e-9).floor() * step,
            high: (high / step - 1e-9).ceil() * step,
            step,
        }
    }

    /// From the least to the greatest number.
    fn from_end_to_end(numbers: impl Iterator<Item = f64>) -> Self {
        let (low, high) = numbers.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), x| {
            (x.min(low), x.max(high))
        });
        let (low, high) = if low <= high { (low, high) } else { (0.0, 1.0) };
        // One number alone stands in the middle.
        let spread = high - low;
        let pad = if spread > 1e-12 * low.abs().max(high.abs()) {
            0.0
        } else if high == 0.0 {
            1.0
        } else {
            0.5 * high.abs()
        };
        let (low, high) = (low - pad, high + pad);
        let step = round_step((high - low) / MOST_STEPS);
        Self { low, high, step }
    }

    fn share(&self, x: f64) -> f64 {
        (x - self.low) / (self.high - self.low)
    }

    fn marks(&self) -> impl Iterator<Item = f64> {
        let (first, last) = (
            (self.low / self.step - 1e-9).ceil() as i64,
            (self.high / self.step + 1e-9).floor() as i64,
        );
        let step = self.step;
        (first..=last).map(move |k| k as f64 * step)
    }
}

/// The least of 1, 2, 5 times a power of ten that is not less.
fn round_step(least: f64) -> f64 {
    let power = 10f64.powf(least.log10().floor());
    [1.0, 2.0, 5.0]
        .iter()
        .map(|lead| lead * power)
        .find(|step| *step >= least * (1.0 - 1e-9))
        .unwrap_or(10.0 * power)
}

fn join(path: &mut PathData, points: impl Iterator<Item = [f64; 2]>) {
    for (index, point) in points.enumerate() {
        if index == 0 {
            path.start(point);
        } else {
            path.line(point);
        }
    }
}

fn diamond([x, y]: [f64; 2]) -> String {
    let mut path = PathData::new();
    join(
        &mut path,
        [
            [x - DIAMOND, y],
            [x, y - DIAMOND],
            [x + DIAMOND, y],
            [x, y + DIAMOND],
        ]
        .into_iter(),
    );
    path.close();
    format!(
        r#"<path d="{}" fill="none" stroke="{}" stroke-width="1.1"/>"#,
        path.finish(),
        ramp_word(0.85)
    )
}

/// A title that fits in a width.
fn shortened(title: &str, width: f64) -> String {
    if TITLE * text_width(title) <= width {
        return title.to_owned();
    }
    let mut short = String::new();
    for c in title.chars() {
        if TITLE * (text_width(&short) + 2.0) > width {
            break;
        }
        short.push(c);
    }
    format!("{}…", short.trim_end())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn axes_end_at_round_numbers_and_hold_everything() {
        for (numbers, low, high, step) in [
            (vec![0.0, 4.9], 0.0, 5.0, 1.0),
            (vec![-12.3, 0.0], -14.0, 0.0, 2.0),
            (vec![0.1, 0.7], 0.1, 0.7, 0.1),
            (vec![3.0], 1.5, 4.5, 0.5),
            (vec![0.0], -1.0, 1.0, 0.5),
        ] {
            let axis = Axis::around(numbers.iter().copied());
            assert!(
                (axis.low - low).abs() < 1e-12 && (axis.high - high).abs() < 1e-12,
                "{numbers:?}"
            );
            assert!((axis.step - step).abs() < 1e-12, "{numbers:?}: {}", axis.step);
            assert!(axis.high > axis.low && numbers.iter().all(|&x| (0.0..=1.0).contains(&axis.share(x))));
        }
    }

    #[test]
    fn a_plot_has_its_band_marks_and_words() {
        let about = |x: f64, y: f64| PlotPoint {
            x,
            y,
            low: y - 0.1,
            high: y + 0.1,
        };
        let plot = Plot {
            title: "Valve <1>".to_owned(),
            subtitle: "line and band".to_owned(),
            across: "travel, mm".to_owned(),
            up: "force, N".to_owned(),
            points: vec![about(0.0, -3.0), about(1.0, -1.0)],
            checks: vec![[0.0, -2.9]],
        };
        let svg = plot.svg();
        for wanted in ["Valve &lt;1&gt;", "travel, mm", "force, N", ">-3<", ">0.2<"] {
            assert!(svg.contains(wanted), "{wanted} is missing in {svg}");
        }
        assert!(!svg.contains("NaN") && !svg.contains("inf"), "{svg}");
        assert_eq!(svg.matches("<circle").count(), 2);
    }
}
