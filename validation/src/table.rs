//! The table: one row per published number.

use std::fmt::Write as _;

use solver::Bracket;

/// How near a number must be, beside lying in our interval.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Tolerance {
    /// Inductances, linkages, fields, moments: 0.2 %.
    Field,
    /// Forces, and incremental inductances, which are derivatives too: 1 %.
    Force,
    /// A rule of thumb that is known to this relative error only; it need not lie in our interval.
    Estimate(f64),
}

impl Tolerance {
    fn relative(self) -> f64 {
        match self {
            Self::Field => 0.002,
            Self::Force => 0.01,
            Self::Estimate(relative) => relative,
        }
    }
}

/// One published number beside ours.
#[derive(Clone, Debug)]
pub struct Row {
    /// Where the number, or the formula it comes from, was published.
    pub source: &'static str,
    /// What it is, with the data of the case.
    pub quantity: String,
    /// Unit of both numbers.
    pub unit: &'static str,
    /// The published number.
    pub published: f64,
    /// Ours.
    pub ours: Bracket,
    /// How near it must be.
    pub tolerance: Tolerance,
}

impl Row {
    /// Deviation of our value from the published one, relative.
    pub fn deviation(&self) -> f64 {
        (self.ours.value - self.published) / self.published.abs()
    }

    /// Inside our interval (but for estimates) and within the tolerance.
    pub fn passes(&self) -> bool {
        let inside = self.ours.contains(self.published) || matches!(self.tolerance, Tolerance::Estimate(_));
        inside && self.deviation().abs() <= self.tolerance.relative()
    }

    fn cells(&self) -> [String; 6] {
        let Bracket { value, low, high, .. } = self.ours;
        let half = 50.0 * (high - low) / value.abs();
        [
            format!("{} {}", number(self.published), self.unit),
            number(value),
            format!("{} .. {}", number(low), number(high)),
            format!("±{half:.3} %"),
            format!("{:+.4} %", 100.0 * self.deviation()),
            if self.passes() { "yes".into() } else { "NO".into() },
        ]
    }
}

/// Seven digits, without needless exponents.
fn number(x: f64) -> String {
    let size = x.abs();
    if size != 0.0 && !(1e-3..1e6).contains(&size) {
        return format!("{x:.6e}");
    }
    let whole = if size < 1.0 {
        0
    } else {
        size.log10().floor() as usize + 1
    };
    format!("{x:.*}", 7usize.saturating_sub(whole.max(1)))
}

const HEADS: [&str; 8] = [
    "source",
    "quantity",
    "published",
    "ours",
    "our interval",
    "half width",
    "deviation",
    "pass",
];

fn lines(rows: &[Row]) -> Vec<[String; 8]> {
    rows.iter()
        .map(|row| {
            let [published, ours, interval, half, deviation, pass] = row.cells();
            [
                row.source.into(),
                row.quantity.clone(),
                published,
                ours,
                interval,
                half,
                deviation,
                pass,
            ]
        })
        .collect()
}

/// The table in columns for a terminal.
pub fn plain(rows: &[Row]) -> String {
    let lines = lines(rows);
    let width = |column: usize| {
        lines
            .iter()
            .map(|line| line[column].chars().count())
            .chain([HEADS[column].len()])
            .max()
            .unwrap_or(0)
    };
    let widths: Vec<usize> = (0..HEADS.len()).map(width).collect();
    let mut text = String::new();
    let heads = HEADS.map(String::from);
    for line in std::iter::once(&heads).chain(&lines) {
        let cells = line
            .iter()
            .zip(&widths)
            .map(|(cell, width)| format!("{cell:<width$}"));
        let _ = writeln!(text, "{}", cells.collect::<Vec<_>>().join("  ").trim_end());
    }
    text
}

/// The table in Markdown.
pub fn markdown(rows: &[Row]) -> String {
    let mut text = format!("| {} |\n|{}\n", HEADS.join(" | "), " --- |".repeat(HEADS.len()));
    for line in lines(rows) {
        let cells = line.map(|cell| cell.replace('|', "\\|"));
        let _ = writeln!(text, "| {} |", cells.join(" | "));
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;
    use solver::Bound;

    fn row(published: f64, value: f64, half: f64) -> Row {
        let ours = Bracket {
            value,
            low: value - half,
            high: value + half,
            bound: Bound::Estimated,
        };
        Row {
            source: "",
            quantity: String::new(),
            unit: "H",
            published,
            ours,
            tolerance: Tolerance::Field,
        }
    }

    #[test]
    fn near_but_outside_the_interval_fails_and_so_does_inside_but_far() {
        assert!(row(1.0, 1.001, 0.002).passes());
        assert!(!row(1.0, 1.001, 0.0005).passes());
        assert!(!row(1.0, 1.003, 0.01).passes());
        assert!(!row(-1.0, f64::NAN, 1.0).passes());
    }

    #[test]
    fn numbers_keep_seven_digits() {
        assert_eq!(number(15.768_123_4), "15.76812");
        assert_eq!(number(-0.5), "-0.500000");
        assert_eq!(number(1.67e-7), "1.670000e-7");
    }
}
