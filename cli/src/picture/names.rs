//! Names of the parts: inside where they fit, else beside the section with a leader.

use super::mask::{CELL, Mask};
use super::outline::PartShape;
use super::svg::{Text, number, text_width};
use super::view::View;

/// Sizes of the first and the later lines.
const SIZES: [f64; 2] = [12.5, 11.0];
/// Height of a line, in sizes.
const LEADING: f64 = 1.25;
/// Room around words inside a part.
const ROOM: f64 = 4.0;
/// Least distance between labels beside the section.
const APART: f64 = 9.0;
/// Length of a leader outside the section.
const OUTSIDE: f64 = 18.0;

/// How far outside the section a leader bends.
const KNEE: f64 = 4.0;

/// A name to be placed.
#[derive(Clone, Debug)]
pub struct Label {
    /// Index of its region.
    pub region: usize,
    /// The name, then what else is to be said.
    pub lines: Vec<String>,
}

/// A rectangle on the page: left, top, right, bottom.
pub type Rect = [f64; 4];

/// A name with its place.
#[derive(Clone, Debug)]
pub struct Placed {
    label: Label,
    place: Place,
}

#[derive(Clone, Debug)]
enum Place {
    /// Centred here.
    Inside([f64; 2]),
    /// Right-aligned left of the section at this height, with a leader to the point.
    Beside { y: f64, to: [f64; 2] },
}

impl Label {
    fn width(&self) -> f64 {
        let widths = self
            .lines
            .iter()
            .enumerate()
            .map(|(k, line)| SIZES[k.min(1)] * text_width(line));
        widths.fold(0.0, f64::max)
    }

    fn height(&self) -> f64 {
        (0..self.lines.len()).map(|k| LEADING * SIZES[k.min(1)]).sum()
    }
}

/// Places all names. Places already `taken` on the page (marks) are kept free.
pub fn place(
    labels: Vec<Label>,
    parts: &[PartShape],
    mask: &Mask,
    view: &View,
    taken: &[Rect],
) -> Vec<Placed> {
    let mut placed = Vec::new();
    let mut beside = Vec::new();
    for label in labels {
        match inside(&label, parts, mask, taken) {
            Some(middle) => placed.push(Placed {
                label,
                place: Place::Inside(middle),
            }),
            None => {
                if let Some(to) = anchor(&label, parts, mask, view) {
                    beside.push((label, to));
                }
            }
        }
    }
    beside.sort_by(|(_, a), (_, b)| a[1].total_cmp(&b[1]));
    let heights: Vec<f64> = beside.iter().map(|(label, _)| label.height()).collect();
    let wanted: Vec<f64> = beside.iter().map(|(_, to)| to[1]).collect();
    let ys = spread(&wanted, &heights, view.height());
    placed.extend(beside.into_iter().zip(ys).map(|((label, to), y)| Placed {
        label,
        place: Place::Beside { y, to },
    }));
    placed
}

/// The best middle for a label inside its region, left of the axis (across it where the region does).
fn inside(label: &Label, parts: &[PartShape], mask: &Mask, taken: &[Rect]) -> Option<[f64; 2]> {
    let (width, height) = (label.width() + 2.0 * ROOM, label.height() + 2.0 * ROOM);
    let (across, down) = ((width / CELL).ceil() as usize, (height / CELL).ceil() as usize);
    // The full section left to right: the mirrored half, then the described one.
    let columns = 2 * mask.columns;
    let is_ours = |column: usize, row: usize| {
        let c = if column < mask.columns {
            mask.columns - 1 - column
        } else {
            column - mask.columns
        };
        mask.part(c, row)
            .is_some_and(|part| parts[part].region == label.region)
    };
    let sums = sums(columns, mask.rows, &is_ours);
    let total = sums.last().copied().unwrap_or(0);
    if across >= columns || down >= mask.rows || (total as usize) < across * down {
        return None;
    }
    let half = mask.columns as f64 * CELL;
    let [x, y] = centre(mask, parts, label.region);
    let reaches_axis = (0..mask.rows).any(|row| is_ours(mask.columns, row));
    let mut best: Option<(f64, [f64; 2])> = None;
    for row in 0..=mask.rows - down {
        for column in 0..=columns - across {
            // Right of the axis the values of the flux lines stand.
            if 2 * column + across > columns
                || count(&sums, columns, column, row, across, down) < (across * down) as u32
            {
                continue;
            }
            let middle = [
                (column as f64 + 0.5 * across as f64) * CELL - half,
                (row as f64 + 0.5 * down as f64) * CELL,
            ];
            let rect = around(middle, width, height);
            if taken.iter().any(|other| overlap(&rect, other)) {
                continue;
            }
            // Across the axis words stand centred on it or not at all well.
            let off = if rect[2] > 0.0 {
                4.0 * middle[0].abs() + (middle[1] - y).abs()
            } else {
                (middle[0] + x).hypot(middle[1] - y) + if reaches_axis { 25.0 } else { 0.0 }
            };
            if best.is_none_or(|(least, _)| off < least) {
                best = Some((off, middle));
            }
        }
    }
    best.map(|(_, middle)| middle)
}

/// Cumulative counts of a region's cells, one more row and column than the grid.
fn sums(columns: usize, rows: usize, is_ours: &dyn Fn(usize, usize) -> bool) -> Vec<u32> {
    let wide = columns + 1;
    let mut sums = vec![0u32; wide * (rows + 1)];
    for row in 0..rows {
        for column in 0..columns {
            sums[(row + 1) * wide + column + 1] = u32::from(is_ours(column, row))
                + sums[row * wide + column + 1]
                + sums[(row + 1) * wide + column]
                - sums[row * wide + column];
        }
    }
    sums
}

fn count(sums: &[u32], columns: usize, column: usize, row: usize, across: usize, down: usize) -> u32 {
    let at = |c: usize, r: usize| sums[r * (columns + 1) + c];
    at(column + across, row + down) + at(column, row) - at(column, row + down) - at(column + across, row)
}

/// Middle of a region's cells right of the axis.
fn centre(mask: &Mask, parts: &[PartShape], region: usize) -> [f64; 2] {
    let mut sum = [0.0, 0.0, 0.0];
    for row in 0..mask.rows {
        for column in 0..mask.columns {
            if mask
                .part(column, row)
                .is_some_and(|part| parts[part].region == region)
            {
                let [x, y] = Mask::middle(column, row);
                sum = [sum[0] + x, sum[1] + y, sum[2] + 1.0];
            }
        }
    }
    [sum[0] / sum[2].max(1.0), sum[1] / sum[2].max(1.0)]
}

/// Where a leader from the left ends in a region (left of the axis): the row on which it crosses the fewest others.
fn anchor(label: &Label, parts: &[PartShape], mask: &Mask, view: &View) -> Option<[f64; 2]> {
    let is_ours = |column, row| {
        mask.part(column, row)
            .is_some_and(|part: usize| parts[part].region == label.region)
    };
    let middle = centre(mask, parts, label.region);
    let mut best: Option<(f64, [f64; 2])> = None;
    for row in 0..mask.rows {
        let Some(outermost) = (0..mask.columns).rev().find(|&column| is_ours(column, row)) else {
            continue;
        };
        let crossed = (outermost..mask.columns)
            .filter(|&c| mask.part(c, row).is_some() && !is_ours(c, row))
            .count();
        let depth = (0..=outermost)
            .rev()
            .take_while(|&column| is_ours(column, row))
            .count();
        let [x, y] = Mask::middle(outermost - depth.min(6) / 2, row);
        let cost = 4.0 * crossed as f64 * CELL + (y - middle[1]).abs();
        if best.is_none_or(|(least, _)| cost < least) {
            best = Some((cost, [-x, y]));
        }
    }
    // A region too small for the grid has no cell; point at its outline.
    best.map(|(_, to)| to).or_else(|| {
        let curve = parts
            .iter()
            .find(|part| part.region == label.region)?
            .loops
            .first()?
            .first()?;
        let [x, y] = view.page(curve.midpoint());
        Some([-x, y])
    })
}

/// Middles as near as possible to the wanted ones (ascending) without overlap, within 0 to `height`.
fn spread(wanted: &[f64], heights: &[f64], height: f64) -> Vec<f64> {
    let mut ys = wanted.to_vec();
    let least = |k: usize| 0.5 * (heights[k] + heights[k + 1]) + APART;
    for _ in 0..200 {
        let mut moved = false;
        for k in 0..ys.len().saturating_sub(1) {
            let short = least(k) - (ys[k + 1] - ys[k]);
            if short > 1e-6 {
                ys[k] -= 0.5 * short;
                ys[k + 1] += 0.5 * short;
                moved = true;
            }
        }
        if let (Some(first), Some(h)) = (ys.first_mut(), heights.first()) {
            *first = first.max(0.5 * h);
        }
        if let (Some(last), Some(h)) = (ys.last_mut(), heights.last()) {
            *last = last.min(height - 0.5 * h);
        }
        if !moved {
            break;
        }
    }
    // However tight it is, order and distance come first.
    for k in 0..ys.len().saturating_sub(1) {
        ys[k + 1] = ys[k + 1].max(ys[k] + least(k));
    }
    ys
}

/// Width that the labels beside the section need.
pub fn column_width(placed: &[Placed]) -> f64 {
    let beside = placed
        .iter()
        .filter(|placed| matches!(placed.place, Place::Beside { .. }));
    beside
        .map(|placed| placed.label.width() + OUTSIDE + 6.0)
        .fold(0.0, f64::max)
}

/// How far down the page the labels beside the section reach.
pub fn bottom(placed: &[Placed]) -> f64 {
    let beside = placed.iter().filter_map(|placed| match placed.place {
        Place::Beside { y, .. } => Some(y + 0.5 * placed.label.height()),
        Place::Inside(_) => None,
    });
    beside.fold(0.0, f64::max)
}

/// What the labels and their leaders cover, so that nothing else is written there.
pub fn covered(placed: &[Placed], view: &View) -> Vec<Rect> {
    const APART: f64 = 6.0;
    let mut rects = Vec::new();
    for Placed { label, place } in placed {
        match *place {
            Place::Inside(middle) => rects.push(around(middle, label.width() + 6.0, label.height() + 4.0)),
            Place::Beside { y, to } => {
                let knee = [-view.half_width() - KNEE, y];
                let steps = (to[0] - knee[0]).hypot(to[1] - knee[1]) / APART;
                let count = steps.ceil().max(1.0) as usize;
                let along = |k: usize| k as f64 / count as f64;
                rects.extend((0..=count).map(along).map(|t| {
                    around(
                        [knee[0] + t * (to[0] - knee[0]), knee[1] + t * (to[1] - knee[1])],
                        APART,
                        APART,
                    )
                }));
            }
        }
    }
    rects
}

/// The rectangle of this size around a point.
pub fn around([x, y]: [f64; 2], width: f64, height: f64) -> Rect {
    [
        x - 0.5 * width,
        y - 0.5 * height,
        x + 0.5 * width,
        y + 0.5 * height,
    ]
}

/// Whether two rectangles overlap.
pub fn overlap(a: &Rect, b: &Rect) -> bool {
    a[0] < b[2] && b[0] < a[2] && a[1] < b[3] && b[1] < a[3]
}

/// The names and leaders; the axis is at x = 0.
pub fn draw(placed: &[Placed], view: &View) -> String {
    let mut leaders = String::new();
    let mut words = String::new();
    for Placed { label, place } in placed {
        let (x, y, anchor) = match *place {
            Place::Inside([x, y]) => (x, y, "middle"),
            Place::Beside { y, to } => {
                let edge = -view.half_width();
                let (knee, text) = (edge - KNEE, edge - OUTSIDE);
                let d = format!(
                    "M{} {}L{} {}L{} {}",
                    number(text + 3.0),
                    number(y),
                    number(knee),
                    number(y),
                    number(to[0]),
                    number(to[1])
                );
                leaders.push_str(&format!(
                    r#"<path class="halo-line" d="{d}"/><path class="leader" d="{d}"/>"#
                ));
                leaders.push_str(&format!(
                    r#"<circle class="leader-end" cx="{}" cy="{}" r="2.2"/>"#,
                    number(to[0]),
                    number(to[1])
                ));
                (text, y, "end")
            }
        };
        let mut top = y - 0.5 * label.height();
        for (k, line) in label.lines.iter().enumerate() {
            let size = SIZES[k.min(1)];
            let class = if k == 0 { "name" } else { "detail" };
            let text = Text {
                words: line,
                at: [x, top + 0.95 * size],
                size,
                anchor,
                turned: 0.0,
                class,
            };
            words.push_str(&text.element());
            top += LEADING * size;
        }
    }
    leaders + &words
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spread_labels_never_overlap() {
        let heights = [20.0; 6];
        let ys = spread(&[100.0, 100.0, 101.0, 103.0, 300.0, 301.0], &heights, 400.0);
        for pair in ys.windows(2) {
            assert!(pair[1] - pair[0] >= 20.0 + APART - 1e-3, "{ys:?}");
        }
        assert!(ys[0] >= 10.0 && ys[5] <= 390.0, "{ys:?}");
    }

    #[test]
    fn far_labels_stay_where_they_are() {
        assert_eq!(spread(&[50.0, 200.0], &[20.0, 20.0], 400.0), [50.0, 200.0]);
    }
}
