//! Numbers for people: engineering prefixes, and as many digits as their range deserves.

use solver::Bracket;

/// A unit as it is shown, and how its numbers are scaled.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unit {
    symbol: &'static str,
    /// Shown number for 1 in SI, before any prefix.
    factor: f64,
    prefixes: bool,
}

impl Unit {
    /// Takes prefixes: 0.0123 H is 12.3 mH.
    pub(crate) const fn prefixed(symbol: &'static str) -> Self {
        Self {
            symbol,
            factor: 1.0,
            prefixes: true,
        }
    }

    /// Stands as it is, after multiplication by `factor`.
    const fn fixed(symbol: &'static str, factor: f64) -> Self {
        Self {
            symbol,
            factor,
            prefixes: false,
        }
    }

    /// A pure number.
    pub const NUMBER: Self = Self::fixed("", 1.0);
    /// A pure number shown per cent.
    pub const PER_CENT: Self = Self::fixed("%", 100.0);
    /// Turns.
    pub const TURNS: Self = Self::fixed("turns", 1.0);
    /// Henry.
    pub const HENRY: Self = Self::prefixed("H");
    /// Ampere.
    pub const AMPERE: Self = Self::prefixed("A");
    /// Volt.
    pub const VOLT: Self = Self::prefixed("V");
    /// Watt.
    pub const WATT: Self = Self::prefixed("W");
    /// Ohm.
    pub const OHM: Self = Self::prefixed("Ω");
    /// Joule.
    pub const JOULE: Self = Self::prefixed("J");
    /// Newton.
    pub const NEWTON: Self = Self::prefixed("N");
    /// Weber.
    pub const WEBER: Self = Self::prefixed("Wb");
    /// Tesla.
    pub const TESLA: Self = Self::prefixed("T");
    /// Second.
    pub const SECOND: Self = Self::prefixed("s");
    /// Metre.
    pub const METRE: Self = Self::prefixed("m");
    /// Ampere per metre.
    pub const AMPERE_PER_METRE: Self = Self::prefixed("A/m");
    /// Current density, shown in A/mm².
    pub const CURRENT_DENSITY: Self = Self::fixed("A/mm²", 1e-6);
    /// Mass in kg, shown in grams with prefixes.
    pub const MASS: Self = Self {
        symbol: "g",
        factor: 1e3,
        prefixes: true,
    };
    /// Section in m², shown in mm².
    pub const SECTION: Self = Self::fixed("mm²", 1e6);
    /// Volume in m³, shown in cm³.
    pub const VOLUME: Self = Self::fixed("cm³", 1e6);
    /// Magnetic moment.
    pub const MOMENT: Self = Self::fixed("A m²", 1.0);
}

/// A number and its range, each with what a reader needs.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Shown {
    /// The value with its unit, e.g. `12.34 mH`.
    pub value: String,
    /// The range in the same prefix, e.g. `(12.31 .. 12.36)`; `None` for an exact number.
    pub range: Option<String>,
}

impl std::fmt::Display for Shown {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&self.value)?;
        if let Some(range) = &self.range {
            write!(f, " {range}")?;
        }
        Ok(())
    }
}

const PREFIXES: [(i32, &str); 11] = [
    (-15, "f"),
    (-12, "p"),
    (-9, "n"),
    (-6, "µ"),
    (-3, "m"),
    (0, ""),
    (3, "k"),
    (6, "M"),
    (9, "G"),
    (12, "T"),
    (15, "P"),
];

/// Most digits shown of a number that has a range.
const MOST_DIGITS: i32 = 7;

/// A bracket for people; see [`with_range`].
pub fn bracket(number: &Bracket, unit: Unit) -> Shown {
    with_range(number.value, number.low, number.high, unit)
}

/// A number and its ends for people. The value has as many decimals as the first digit of the range's half width
/// asks for; the ends are rounded outwards, so that the shown range contains the computed one.
pub fn with_range(number: f64, low: f64, high: f64, unit: Unit) -> Shown {
    let half_width = 0.5 * (high - low) * unit.factor;
    let value = number * unit.factor;
    if half_width <= 0.0 {
        return Shown {
            value: plain(number, unit),
            range: None,
        };
    }
    let (power, prefix) = prefix_for(value.abs().max(half_width), unit);
    let scale = 10f64.powi(-power);
    let decimals = decimals_for(value * scale, half_width * scale);
    let grid = 10f64.powi(decimals);
    let low = (low * unit.factor * scale * grid).floor() / grid;
    let high = (high * unit.factor * scale * grid).ceil() / grid;
    let digits = decimals.max(0) as usize;
    let value = fixed(value * scale, digits);
    Shown {
        value: with_unit(&value, prefix, unit),
        range: Some(format!("({} .. {})", fixed(low, digits), fixed(high, digits))),
    }
}

/// A number without a range, to at most five significant digits.
pub fn plain(number: f64, unit: Unit) -> String {
    significant(number, unit, 5)
}

/// A number to at most so many significant digits.
pub fn significant(number: f64, unit: Unit, digits: i32) -> String {
    let value = number * unit.factor;
    let (power, prefix) = prefix_for(value.abs(), unit);
    let scaled = value * 10f64.powi(-power);
    with_unit(&rounded(scaled, digits), prefix, unit)
}

/// How the numbers of one column or one axis are shown: all with the prefix that suits the largest.
#[derive(Clone, Debug, PartialEq)]
pub struct Column {
    /// The unit with its prefix, for the column's head.
    pub unit: String,
    /// Shown number for 1 in SI.
    pub scale: f64,
}

impl Column {
    /// For numbers whose largest magnitude (SI) is this.
    pub fn of(largest: f64, unit: Unit) -> Self {
        let (power, prefix) = prefix_for(largest.abs() * unit.factor, unit);
        Self {
            unit: format!("{prefix}{}", unit.symbol),
            scale: unit.factor * 10f64.powi(-power),
        }
    }

    /// A number and its range, rounded outwards, with the decimals that its half width deserves.
    pub fn with_range(&self, number: f64, low: f64, high: f64) -> [String; 2] {
        let [number, low, high] = [number, low, high].map(|x| x * self.scale);
        let half_width = 0.5 * (high - low);
        if half_width <= 0.0 {
            return [rounded(number, 5), String::new()];
        }
        let decimals = decimals_for(number, half_width);
        let (grid, digits) = (10f64.powi(decimals), decimals as usize);
        let [low, high] = [(low * grid).floor() / grid, (high * grid).ceil() / grid];
        [
            fixed(number, digits),
            format!("({} .. {})", fixed(low, digits), fixed(high, digits)),
        ]
    }
}

/// Shortest text of a number rounded to so many significant digits, without an exponent where one can be avoided.
pub fn rounded(value: f64, digits: i32) -> String {
    if value == 0.0 {
        return "0".to_owned();
    }
    let magnitude = value.abs().log10().floor() as i32;
    if !(-6..9).contains(&magnitude) {
        return format!("{value:.*e}", (digits - 1).max(0) as usize);
    }
    let decimals = (digits - 1 - magnitude).max(0) as usize;
    let text = format!("{value:.decimals$}");
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

/// Decimals of a number in its prefix.
fn decimals_for(value: f64, half_width: f64) -> i32 {
    // A little less than the logarithm: 0.0999999 and 0.1 deserve the same.
    let wanted = (-half_width.log10() - 1e-6).ceil() as i32;
    let magnitude = value.abs().max(half_width).log10().floor() as i32;
    wanted.min(MOST_DIGITS - 1 - magnitude).clamp(0, 12)
}

/// The power of ten and the prefix for a magnitude, so that 1 to 999 stand before the point.
fn prefix_for(magnitude: f64, unit: Unit) -> (i32, &'static str) {
    if !unit.prefixes || magnitude == 0.0 || !magnitude.is_finite() {
        return (0, "");
    }
    // 999.999 would be shown as 1000: choose by what is left after rounding to five digits.
    let power = ((magnitude.log10() + 2e-6) / 3.0).floor() as i32 * 3;
    let power = power.clamp(PREFIXES[0].0, PREFIXES[PREFIXES.len() - 1].0);
    PREFIXES
        .iter()
        .find(|(of, _)| *of == power)
        .copied()
        .unwrap_or((0, ""))
}

fn with_unit(number: &str, prefix: &str, unit: Unit) -> String {
    match unit.symbol {
        "" => number.to_owned(),
        symbol => format!("{number} {prefix}{symbol}"),
    }
}

/// Without a minus sign before nothing.
fn fixed(value: f64, digits: usize) -> String {
    let text = format!("{value:.digits$}");
    if text.starts_with('-') && text.chars().all(|c| matches!(c, '-' | '0' | '.')) {
        return text[1..].to_owned();
    }
    text
}

#[cfg(test)]
mod tests {
    use solver::Bound;

    use super::*;

    fn estimated(value: f64, low: f64, high: f64) -> Bracket {
        Bracket {
            value,
            low,
            high,
            bound: Bound::Estimated,
        }
    }

    #[test]
    fn digits_follow_the_range() {
        let shown = bracket(&estimated(0.0123372, 0.0123111, 0.0123612), Unit::HENRY);
        assert_eq!(shown.to_string(), "12.34 mH (12.31 .. 12.37)");
        let shown = bracket(&estimated(-3.21e-7, -3.3e-7, -3.1e-7), Unit::WEBER);
        assert_eq!(shown.to_string(), "-321 nWb (-330 .. -310)");
        let shown = bracket(&estimated(0.4321, 0.4319, 0.4323), Unit::NUMBER);
        assert_eq!(shown.to_string(), "0.4321 (0.4319 .. 0.4323)");
    }

    #[test]
    fn the_shown_range_contains_the_computed_one() {
        let number = estimated(1.0 / 3.0, 0.333_26, 0.333_41);
        let shown = bracket(&number, Unit::NEWTON);
        assert_eq!(shown.to_string(), "333.33 mN (333.26 .. 333.41)");
    }

    #[test]
    fn a_number_lost_in_its_range_keeps_one_scale() {
        let shown = bracket(&estimated(1e-9, -0.02, 0.021), Unit::NEWTON);
        assert_eq!(shown.to_string(), "0 mN (-20 .. 21)");
        let shown = bracket(&estimated(-1e-9, -0.02, 0.02), Unit::NEWTON);
        assert_eq!(shown.to_string(), "0 mN (-20 .. 20)");
    }

    #[test]
    fn a_column_keeps_one_prefix() {
        let column = Column::of(12.0, Unit::NEWTON);
        assert_eq!(column.unit, "N");
        assert_eq!(
            column.with_range(0.01234, 0.0122, 0.0126),
            ["0.0123", "(0.0122 .. 0.0126)"]
        );
        assert_eq!(
            Column::of(-0.004, Unit::HENRY).with_range(0.002, 0.002, 0.002),
            ["2", ""]
        );
    }

    #[test]
    fn exact_numbers_are_short() {
        assert_eq!(bracket(&Bracket::exact(0.5), Unit::AMPERE).to_string(), "500 mA");
        assert_eq!(
            bracket(&Bracket::exact(900.0), Unit::TURNS).to_string(),
            "900 turns"
        );
        assert_eq!(bracket(&Bracket::exact(0.0), Unit::VOLT).to_string(), "0 V");
        assert_eq!(plain(0.999_96, Unit::TESLA), "999.96 mT");
        assert_eq!(plain(0.999_999, Unit::TESLA), "1 T");
        assert_eq!(plain(1.0 / 3.0, Unit::PER_CENT), "33.333 %");
        assert_eq!(plain(0.0123, Unit::MASS), "12.3 g");
        assert_eq!(plain(1.5, Unit::MASS), "1.5 kg");
        assert_eq!(plain(4.2e6, Unit::CURRENT_DENSITY), "4.2 A/mm²");
    }
}
