//! The SI value of an expression.

use std::ops::Range;

use super::dimension::Dimension;
use super::unit::Unit;
use super::{Expression, ExpressionFault, Joined, Node, Term, unit};

/// A value in SI units with its dimension.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Value {
    /// In SI units.
    pub si: f64,
    /// Its dimension.
    pub dimension: Dimension,
    /// Whether it is a temperature counted from absolute zero that was written in degC: two such cannot be added.
    pub absolute: bool,
}

/// Why there is no value.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Stop {
    /// Something is wrong.
    Fault(ExpressionFault),
    /// A given that it uses is wrong, and that has been said already.
    SaidAlready,
}

/// Values of the givens.
pub trait Names {
    /// The value of a given.
    ///
    /// # Errors
    /// In words, or nothing if its fault was said already.
    fn value(&self, name: &str, span: Range<usize>) -> Result<Value, Stop>;
}

type Evaluated = Result<Value, Stop>;

/// Magnetic constant, H/m (CODATA 2018; the exact 4 pi 1e-7 of the SI before 2019 is 5.5e-10 smaller).
const MU0_H_PER_M: f64 = 1.256_637_062_12e-6;

/// Names of all constants.
pub const CONSTANTS: &[&str] = &["pi", "mu0"];

/// Value of a constant.
pub fn constant(name: &str) -> Option<Value> {
    match name {
        "pi" => Some(Value::number(std::f64::consts::PI)),
        "mu0" => Some(Value {
            si: MU0_H_PER_M,
            dimension: Dimension::of(1, 1, -2, -2, 0),
            absolute: false,
        }),
        _ => None,
    }
}

impl Value {
    /// A pure number.
    pub fn number(si: f64) -> Self {
        Self {
            si,
            dimension: Dimension::NUMBER,
            absolute: false,
        }
    }
}

impl Expression {
    /// Its value.
    ///
    /// # Errors
    /// Dimensions that do not fit, unknown names, a result that is not finite.
    pub fn evaluate(&self, names: &dyn Names) -> Evaluated {
        self.root.evaluate(names)
    }
}

impl Node {
    fn evaluate(&self, names: &dyn Names) -> Evaluated {
        let value = match &self.term {
            Term::Quantity(number, None) => Value::number(*number),
            Term::Quantity(number, Some((unit, power))) => self.with_unit(*number, *unit, *power)?,
            Term::Name(name) => self.named(name, names)?,
            Term::Sum(terms) => sum(terms, names)?,
            Term::Product(factors) => product(factors, names)?,
            Term::Negative(inner) => {
                let value = inner.relative(names)?;
                Value {
                    si: -value.si,
                    ..value
                }
            }
            Term::Power(base, exponent) => self.power(base.relative(names)?, exponent, names)?,
            Term::Call(function, arguments) => {
                let values: Vec<Value> = arguments
                    .iter()
                    .map(|node| node.evaluate(names))
                    .collect::<Result<_, _>>()?;
                function.apply(&values).map_err(|words| self.fault(words))?
            }
        };
        if value.si.is_finite() {
            Ok(value)
        } else {
            Err(self.fault(not_finite(value.si)))
        }
    }

    /// Its value where an absolute temperature makes no sense.
    fn relative(&self, names: &dyn Names) -> Evaluated {
        let value = self.evaluate(names)?;
        if value.absolute {
            return Err(Stop::Fault(
                ExpressionFault::new(
                    "a temperature in degC cannot be multiplied, divided or negated",
                    self.span.clone(),
                )
                .with_help("write differences of temperature in K, and coefficients per K"),
            ));
        }
        Ok(value)
    }

    fn with_unit(&self, number: f64, unit: Unit, power: i32) -> Evaluated {
        if unit.offset != 0.0 {
            if power != 1 {
                return Err(self.fault("degC has no powers: differences of temperature are in K"));
            }
            return Ok(Value {
                si: number * unit.factor + unit.offset,
                dimension: unit.dimension,
                absolute: true,
            });
        }
        let dimension = unit
            .dimension
            .power(f64::from(power))
            .ok_or_else(|| self.fault("the power is too large"))?;
        Ok(Value {
            si: scaled(number, unit.factor.powi(power)),
            dimension,
            absolute: false,
        })
    }

    fn named(&self, name: &str, names: &dyn Names) -> Evaluated {
        if let Some(value) = constant(name) {
            return Ok(value);
        }
        match unit::find(name) {
            Some(unit) if unit.offset != 0.0 => Err(Stop::Fault(
                ExpressionFault::new("degC needs a number before it", self.span.clone())
                    .with_help("differences of temperature are in K"),
            )),
            Some(unit) => Ok(Value {
                si: unit.factor,
                dimension: unit.dimension,
                absolute: false,
            }),
            None => names.value(name, self.span.clone()),
        }
    }

    fn power(&self, base: Value, exponent: &Node, names: &dyn Names) -> Evaluated {
        let raised = exponent.evaluate(names)?;
        if raised.dimension != Dimension::NUMBER {
            let what = raised.dimension.describe();
            return Err(exponent.fault(format!("an exponent must be a pure number, but this is {what}")));
        }
        match base.dimension.power(raised.si) {
            Some(dimension) => Ok(Value {
                si: base.si.powf(raised.si),
                dimension,
                absolute: false,
            }),
            None => Err(self.fault(format!(
                "{} cannot be raised to the power {}",
                base.dimension.describe(),
                raised.si
            ))),
        }
    }

    fn fault(&self, message: impl Into<String>) -> Stop {
        Stop::Fault(ExpressionFault::new(message, self.span.clone()))
    }
}

/// A number in units of `factor`. Dividing by a whole inverse (1000 for mm) rounds once, multiplying by 0.001 twice.
pub fn scaled(number: f64, factor: f64) -> f64 {
    let inverse = (1.0 / factor).round();
    if factor < 1.0 && inverse < 9e15 && (1.0 / inverse) == factor {
        number / inverse
    } else {
        number * factor
    }
}

fn sum(terms: &[Joined], names: &dyn Names) -> Evaluated {
    let mut total: Option<Value> = None;
    for Joined {
        inverse: minus,
        sign_at,
        node,
    } in terms
    {
        let value = node.evaluate(names)?;
        total = Some(match total {
            None => value,
            Some(before) => add(before, value, *minus)
                .map_err(|words| Stop::Fault(ExpressionFault::new(words, *sign_at..node.span.end)))?,
        });
    }
    // A sum has at least two terms.
    Ok(total.unwrap_or(Value::number(0.0)))
}

fn add(before: Value, next: Value, minus: bool) -> Result<Value, String> {
    if before.dimension != next.dimension {
        let (first, second) = (before.dimension.describe(), next.dimension.describe());
        let sign = if minus { "taken from" } else { "added to" };
        return Err(format!("{second} cannot be {sign} {first}"));
    }
    let absolute = match (before.absolute, next.absolute, minus) {
        (true, true, false) => {
            return Err("two temperatures in degC cannot be added: write the difference in K".to_owned());
        }
        (false, true, true) => {
            return Err("a temperature in degC cannot be taken from a difference in K".to_owned());
        }
        (first, second, _) => first != second,
    };
    let si = if minus {
        before.si - next.si
    } else {
        before.si + next.si
    };
    Ok(Value {
        si,
        dimension: before.dimension,
        absolute,
    })
}

fn product(factors: &[Joined], names: &dyn Names) -> Evaluated {
    let mut total = Value::number(1.0);
    for (
        index,
        Joined {
            inverse: divide,
            node,
            ..
        },
    ) in factors.iter().enumerate()
    {
        let value = node.relative(names)?;
        if *divide && value.si == 0.0 {
            return Err(node.fault("division by zero"));
        }
        total = match (index, divide) {
            (0, _) => value,
            (_, true) => Value {
                si: total.si / value.si,
                dimension: total.dimension.per(value.dimension),
                absolute: false,
            },
            (_, false) => Value {
                si: total.si * value.si,
                dimension: total.dimension.times(value.dimension),
                absolute: false,
            },
        };
    }
    Ok(total)
}

fn not_finite(si: f64) -> &'static str {
    if si.is_nan() {
        "this has no real value"
    } else {
        "this is too large for a number"
    }
}
