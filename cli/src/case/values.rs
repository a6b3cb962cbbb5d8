//! Evaluates the quantities of a case under their keys, and collects what is wrong.

use std::ops::Range;
use std::sync::Arc;

use mesher::Point;

use super::LengthUnit;
use super::expression::{Dimension, Expression, Stop, evaluate::scaled, toml_value};
use super::fault::{Fault, Place};
use super::givens::{Givens, Position};
use super::model::located::Located;
use super::model::quantity::{Amount, Pair, Quantity};
use super::source::SourceText;
use crate::caution::Caution;

/// The text, its givens, and what has been found so far.
#[derive(Debug)]
pub struct Values {
    source: Arc<SourceText>,
    pub(super) givens: Givens,
    pub(super) length_unit: LengthUnit,
    pub(super) faults: Vec<Fault>,
    pub(super) cautions: Vec<Caution>,
    /// Bytes of the file whose expression uses givens, and its value as text.
    pub(super) replacements: Vec<(Range<usize>, String)>,
}

impl Values {
    /// Values of a text whose givens are resolved.
    pub fn new(source: Arc<SourceText>, givens: Givens, length_unit: LengthUnit, faults: Vec<Fault>) -> Self {
        Self {
            source,
            givens,
            length_unit,
            faults,
            cautions: Vec::new(),
            replacements: Vec::new(),
        }
    }

    /// Notes a fault at some bytes of the file.
    pub fn fault(&mut self, span: &Range<usize>, message: impl Into<String>) {
        self.faults.push(Fault::new(message, self.place(span)));
    }

    /// Notes a fault with its cure.
    pub fn fault_with_help(
        &mut self,
        span: &Range<usize>,
        message: impl Into<String>,
        help: impl Into<String>,
    ) {
        self.faults
            .push(Fault::new(message, self.place(span)).with_help(help));
    }

    /// Notes that a key is understood but not solved by this version.
    pub fn not_solved_yet(&mut self, span: &Range<usize>, what: &str) {
        self.faults.push(
            Fault::new(
                format!("{what}: this version does not solve that yet"),
                self.place(span),
            )
            .with_label("not solved yet"),
        );
    }

    /// The text of the file.
    pub fn source(&self) -> &Arc<SourceText> {
        &self.source
    }

    /// A place in the file.
    pub fn place(&self, span: &Range<usize>) -> Place {
        Place {
            source: self.source.clone(),
            span: span.clone(),
        }
    }

    /// The bytes of `key = value`, from the bytes of the value.
    pub fn with_key(&self, value: &Range<usize>) -> Range<usize> {
        let before = self.source.text.get(..value.start).unwrap_or_default().trim_end();
        let Some(before) = before.strip_suffix('=').map(str::trim_end) else {
            return value.clone();
        };
        let key =
            before.trim_end_matches(|c: char| c.is_alphanumeric() || matches!(c, '-' | '_' | '.' | '"'));
        key.len()..value.end
    }

    /// Line of the first byte of `span`, from 1.
    pub fn line(&self, span: &Range<usize>) -> usize {
        self.place(span).line_column().0
    }

    /// The SI value of a quantity under `key`, which expects `dimension`. Noted as a fault if there is none.
    pub fn amount(&mut self, amount: &Amount, key: &str, dimension: Dimension) -> Option<f64> {
        match &amount.value {
            Quantity::Number(number) if number.is_finite() => Some(self.bare(*number, dimension)),
            Quantity::Number(_) => {
                self.fault(&amount.span, format!("`{key}` must be a finite number"));
                None
            }
            Quantity::Text(text) => self.expression(text, &amount.span, key, dimension),
        }
    }

    /// A bare number under a key: in its SI unit, a length in the case's unit.
    fn bare(&self, number: f64, dimension: Dimension) -> f64 {
        if dimension == Dimension::LENGTH {
            scaled(number, self.length_unit.metres)
        } else {
            number
        }
    }

    fn expression(
        &mut self,
        text: &str,
        span: &Range<usize>,
        key: &str,
        dimension: Dimension,
    ) -> Option<f64> {
        let at = Position::of_literal(&self.source, span.clone(), text);
        let expression = match Expression::parse(text) {
            Ok(expression) => expression,
            Err(fault) => {
                self.faults.push(at.fault(fault));
                return None;
            }
        };
        let value = match expression.evaluate(&self.givens) {
            Ok(value) => value,
            Err(Stop::Fault(fault)) => {
                self.faults.push(at.fault(fault));
                return None;
            }
            Err(Stop::SaidAlready) => return None,
        };
        let si = if value.dimension == dimension {
            value.si
        } else if value.dimension == Dimension::NUMBER {
            self.bare(value.si, dimension)
        } else {
            let example = dimension.example();
            let message = format!(
                "`{key}` expects {}, but this is {}",
                dimension.describe(),
                value.dimension.describe()
            );
            self.faults
                .push(Fault::new(message, self.place(span)).with_help(format!("such as \"{example}\"")));
            return None;
        };
        if !expression.names().is_empty() {
            self.replacements.push((span.clone(), toml_value(si, dimension)));
        }
        Some(si)
    }

    /// A quantity that must be more than zero.
    pub fn positive(&mut self, amount: &Amount, key: &str, dimension: Dimension) -> Option<f64> {
        let si = self.amount(amount, key, dimension)?;
        if si > 0.0 {
            return Some(si);
        }
        let shown = self.shown(si, dimension);
        self.fault(
            &amount.span,
            format!("`{key}` must be more than zero, not {shown}"),
        );
        None
    }

    /// A quantity that must not be negative.
    pub fn not_negative(&mut self, amount: &Amount, key: &str, dimension: Dimension) -> Option<f64> {
        let si = self.amount(amount, key, dimension)?;
        if si >= 0.0 {
            return Some(si);
        }
        let shown = self.shown(si, dimension);
        self.fault(
            &amount.span,
            format!("`{key}` must not be negative, but is {shown}"),
        );
        None
    }

    /// A whole number between two limits.
    pub fn whole(&mut self, amount: &Amount, key: &str, least: usize, most: usize) -> Option<usize> {
        let number = self.amount(amount, key, Dimension::NUMBER)?;
        let rounded = number.round();
        // The limits are small enough to be exact as f64.
        if (number - rounded).abs() > 1e-9 * number.abs().max(1.0)
            || rounded < least as f64
            || rounded > most as f64
        {
            self.fault(
                &amount.span,
                format!("`{key}` must be a whole number from {least} to {most}, not {number}"),
            );
            return None;
        }
        Some(rounded as usize)
    }

    /// A temperature, °C.
    pub fn temperature_c(&mut self, amount: &Amount, key: &str) -> Option<f64> {
        let kelvin = self.not_negative(amount, key, Dimension::TEMPERATURE)?;
        let bare = matches!(amount.value, Quantity::Number(_));
        if bare && kelvin < 200.0 {
            self.cautions.push(Caution {
                about: key.to_owned(),
                text: format!(
                    "`{key}` = {kelvin} (line {}) is read as {kelvin} K; for degrees Celsius write \"{kelvin} degC\"",
                    self.line(&amount.span)
                ),
                source: "common practice, no source".to_owned(),
            });
        }
        Some(kelvin - super::expression::unit::ZERO_CELSIUS_K)
    }

    /// A point (r, z), m.
    pub fn point(&mut self, pair: &Pair, key: &str) -> Option<Point> {
        let [r, z] = self.lengths(pair, key)?;
        Some(Point { r, z })
    }

    /// Two lengths, m.
    pub fn lengths(&mut self, pair: &Pair, key: &str) -> Option<[f64; 2]> {
        self.pair(pair, key, Dimension::LENGTH)
    }

    /// Two quantities of one dimension; both are tried before giving up.
    pub fn pair(&mut self, pair: &Pair, key: &str, dimension: Dimension) -> Option<[f64; 2]> {
        let first = self.amount(&pair[0], key, dimension);
        let second = self.amount(&pair[1], key, dimension);
        Some([first?, second?])
    }

    /// A length for a message, in the case's unit.
    pub fn length_text(&self, metres: f64) -> String {
        length_text(metres, &self.length_unit)
    }

    fn shown(&self, si: f64, dimension: Dimension) -> String {
        if dimension == Dimension::LENGTH {
            self.length_text(si)
        } else {
            format!("{si} {}", dimension.si_unit()).trim_end().to_owned()
        }
    }

    /// `true` under a key that can only be true.
    pub fn set_true(&mut self, flag: &Option<Located<bool>>, key: &str) -> bool {
        match flag {
            Some(Located { value: false, span }) => {
                self.fault(span, format!("`{key}` can only be true; leave it out otherwise"));
                false
            }
            Some(_) => true,
            None => false,
        }
    }
}

/// A temperature for a message: round-off of the way through kelvin is dropped.
pub fn celsius_text(celsius: f64) -> String {
    format!("{} degC", (celsius * 1e6).round() / 1e6)
}

/// A length in a unit, to six digits.
pub fn length_text(metres: f64, unit: &LengthUnit) -> String {
    let number = metres / unit.metres;
    // Six significant digits without trailing zeros.
    let digits = (5 - number.abs().max(1e-12).log10().floor() as i32).clamp(0, 12) as usize;
    let text = format!("{number:.digits$}");
    let text = if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.')
    } else {
        &text
    };
    format!("{text} {}", unit.name)
}
