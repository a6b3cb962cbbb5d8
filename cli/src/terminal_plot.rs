//! A small line plot made of characters, for the terminal.

/// Cells of the plotting area.
const COLUMNS: usize = 60;
const ROWS: usize = 14;
/// Dots in a cell: two across, four down (the Braille patterns of Unicode, U+2800 to U+28FF).
const ACROSS: usize = 2;
const DOWN: usize = 4;
/// Bit of each dot, by row and column within a cell (The Unicode Standard, Braille Patterns).
const BITS: [[u8; ACROSS]; DOWN] = [[0x01, 0x08], [0x02, 0x10], [0x04, 0x20], [0x40, 0x80]];

/// How numbers lie along an axis.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Scale {
    /// Evenly.
    Even,
    /// By their logarithms; both ends must be above zero.
    Log,
}

/// One axis.
#[derive(Clone, Debug)]
pub struct Axis {
    /// What it shows, with its unit.
    pub label: String,
    /// Its left or lower end.
    pub low: f64,
    /// Its right or upper end; more than `low`.
    pub high: f64,
    /// How numbers lie along it.
    pub scale: Scale,
    /// Numbers written beside it.
    pub ticks: Vec<(f64, String)>,
}

impl Axis {
    /// Where a number lies: 0 at the low end, 1 at the high one.
    fn share(&self, x: f64) -> f64 {
        match self.scale {
            Scale::Even => (x - self.low) / (self.high - self.low),
            Scale::Log => (x / self.low).ln() / (self.high / self.low).ln(),
        }
    }
}

/// Draws straight lines between the points, one after the other; what lies outside the axes is left out.
pub fn draw(points: &[[f64; 2]], x: &Axis, y: &Axis) -> String {
    let mut cells = vec![[0u8; COLUMNS]; ROWS];
    let (wide, high) = ((COLUMNS * ACROSS - 1) as f64, (ROWS * DOWN - 1) as f64);
    let place = |p: &[f64; 2]| [x.share(p[0]) * wide, (1.0 - y.share(p[1])) * high];
    for pair in points.windows(2) {
        let (from, to) = (place(&pair[0]), place(&pair[1]));
        let length = (to[0] - from[0]).abs().max((to[1] - from[1]).abs());
        let steps = if length.is_finite() {
            length.ceil().clamp(1.0, 1e4) as usize
        } else {
            0
        };
        for k in 0..=steps {
            let t = k as f64 / steps.max(1) as f64;
            let dot = [0, 1].map(|i| (from[i] + t * (to[i] - from[i])).round());
            if (0.0..=wide).contains(&dot[0]) && (0.0..=high).contains(&dot[1]) {
                let (column, row) = (dot[0] as usize, dot[1] as usize);
                cells[row / DOWN][column / ACROSS] |= BITS[row % DOWN][column % ACROSS];
            }
        }
    }
    framed(&cells, x, y)
}

/// Puts the axes around the plotting area.
fn framed(cells: &[[u8; COLUMNS]], x: &Axis, y: &Axis) -> String {
    let row_of = |value: f64| ((1.0 - y.share(value)) * (ROWS - 1) as f64).round() as usize;
    let width = y
        .ticks
        .iter()
        .map(|(_, text)| text.chars().count())
        .max()
        .unwrap_or(0);
    let mut text = format!("{:width$} {}\n", "", y.label);
    for (row, line) in cells.iter().enumerate() {
        let tick = y.ticks.iter().find(|(value, _)| row_of(*value) == row);
        let (number, edge) = tick.map_or(("", '│'), |(_, number)| (number.as_str(), '┤'));
        let dots: String = line
            .iter()
            .map(|&bits| {
                if bits == 0 {
                    ' '
                } else {
                    char::from_u32(0x2800 + u32::from(bits)).unwrap_or(' ')
                }
            })
            .collect();
        text.push_str(format!("{number:>width$} {edge}{dots}").trim_end());
        text.push('\n');
    }
    let (mut edge, mut numbers) = (vec!['─'; COLUMNS], vec![' '; COLUMNS + 16]);
    for (value, number) in &x.ticks {
        let column = (x.share(*value) * (COLUMNS - 1) as f64).round() as usize;
        if column < COLUMNS {
            edge[column] = '┴';
            let start = column.saturating_sub(number.chars().count() / 2);
            for (slot, c) in numbers[start..].iter_mut().zip(number.chars()) {
                *slot = c;
            }
        }
    }
    text.push_str(&format!("{:width$} └{}\n", "", String::from_iter(edge)));
    text.push_str(format!("{:width$}  {}", "", String::from_iter(numbers)).trim_end());
    text.push_str(&format!("\n{:width$}  {:>COLUMNS$}\n", "", x.label));
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    fn axis(low: f64, high: f64, scale: Scale) -> Axis {
        Axis {
            label: "x, m".to_owned(),
            low,
            high,
            scale,
            ticks: vec![(low, format!("{low}")), (high, format!("{high}"))],
        }
    }

    #[test]
    fn a_diagonal_runs_from_corner_to_corner() {
        let text = draw(
            &[[0.0, 0.0], [1.0, 1.0]],
            &axis(0.0, 1.0, Scale::Even),
            &axis(0.0, 1.0, Scale::Even),
        );
        let lines: Vec<&str> = text.lines().collect();
        assert_eq!(lines.len(), ROWS + 4);
        assert!(lines[1].starts_with("1 ┤") && lines[1].ends_with('⠉'), "{text}");
        assert_eq!(lines[1].chars().count(), 3 + COLUMNS);
        assert!(lines[ROWS].starts_with("0 ┤⣀"), "{text}");
        assert!(lines[ROWS / 2].chars().filter(|c| *c > '⠀').count() < COLUMNS / 2);
    }

    #[test]
    fn decades_are_equally_wide_and_what_is_outside_is_left_out() {
        let x = axis(1.0, 100.0, Scale::Log);
        assert_eq!(x.share(10.0), 0.5);
        let text = draw(&[[1e-9, 5.0], [1e9, 7.0]], &x, &axis(0.0, 1.0, Scale::Even));
        assert!(
            !text.chars().any(|c| ('\u{2801}'..='\u{28ff}').contains(&c)),
            "{text}"
        );
    }
}
