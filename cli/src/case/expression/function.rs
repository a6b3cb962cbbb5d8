//! Functions that expressions may use.

use super::dimension::Dimension;
use super::evaluate::Value;

/// A function.
#[derive(Clone, Copy, Debug)]
pub enum Function {
    /// One pure number in, a pure number out.
    OfNumber(fn(f64) -> f64, &'static str),
    /// Square root, of anything.
    Sqrt,
    /// Magnitude, of anything.
    Abs,
    /// Least of several of one dimension.
    Min,
    /// Greatest of several of one dimension.
    Max,
}

/// Names of all functions.
pub const NAMES: &[&str] = &[
    "sqrt", "sin", "cos", "tan", "asin", "acos", "atan", "exp", "ln", "log10", "abs", "min", "max", "round",
    "floor", "ceil",
];

impl PartialEq for Function {
    fn eq(&self, other: &Self) -> bool {
        self.name() == other.name()
    }
}

impl Function {
    /// The function of this name.
    pub fn find(name: &str) -> Option<Self> {
        let function = match name {
            "sqrt" => Self::Sqrt,
            "abs" => Self::Abs,
            "min" => Self::Min,
            "max" => Self::Max,
            "sin" => Self::OfNumber(f64::sin, "sin"),
            "cos" => Self::OfNumber(f64::cos, "cos"),
            "tan" => Self::OfNumber(f64::tan, "tan"),
            "asin" => Self::OfNumber(f64::asin, "asin"),
            "acos" => Self::OfNumber(f64::acos, "acos"),
            "atan" => Self::OfNumber(f64::atan, "atan"),
            "exp" => Self::OfNumber(f64::exp, "exp"),
            "ln" => Self::OfNumber(f64::ln, "ln"),
            "log10" => Self::OfNumber(f64::log10, "log10"),
            "round" => Self::OfNumber(f64::round, "round"),
            "floor" => Self::OfNumber(f64::floor, "floor"),
            "ceil" => Self::OfNumber(f64::ceil, "ceil"),
            _ => return None,
        };
        Some(function)
    }

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Self::OfNumber(_, name) => name,
            Self::Sqrt => "sqrt",
            Self::Abs => "abs",
            Self::Min => "min",
            Self::Max => "max",
        }
    }

    /// Applies it to checked arguments (at least one).
    ///
    /// # Errors
    /// In words, what does not fit.
    pub fn apply(self, arguments: &[Value]) -> Result<Value, String> {
        let [first, rest @ ..] = arguments else {
            return Err(format!("`{}` needs a value in its brackets", self.name()));
        };
        if !rest.is_empty() && !matches!(self, Self::Min | Self::Max) {
            return Err(format!(
                "`{}` takes one value, not {}",
                self.name(),
                arguments.len()
            ));
        }
        match self {
            Self::OfNumber(f, name) => {
                if first.dimension != Dimension::NUMBER {
                    let what = first.dimension.describe();
                    return Err(format!("`{name}` takes a pure number, but this is {what}"));
                }
                Ok(Value::number(f(first.si)))
            }
            Self::Sqrt => match first.dimension.power(0.5) {
                Some(dimension) => Ok(Value {
                    si: first.si.sqrt(),
                    dimension,
                    absolute: false,
                }),
                None => Err("this root has no sensible dimension".to_owned()),
            },
            Self::Abs => Ok(Value {
                si: first.si.abs(),
                ..*first
            }),
            Self::Min | Self::Max => self.extreme(*first, rest),
        }
    }

    fn extreme(self, first: Value, rest: &[Value]) -> Result<Value, String> {
        rest.iter().try_fold(first, |best, next| {
            if next.dimension != best.dimension {
                return Err(format!(
                    "`{}` compares {} with {}",
                    self.name(),
                    best.dimension.describe(),
                    next.dimension.describe()
                ));
            }
            let better = if matches!(self, Self::Min) {
                next.si < best.si
            } else {
                next.si > best.si
            };
            Ok(if better { *next } else { best })
        })
    }
}
