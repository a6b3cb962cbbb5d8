//! Quantity expressions: `"2.5 mm"`, `"gap + 2*wall"`, `"sqrt(2)*230 V"`.
//!
//! ```text
//! sum      = product { ("+" | "-") product }
//! product  = signed { ("*" | "/") signed }
//! signed   = ("+" | "-") signed | power
//! power    = value [ "^" exponent ]        exponent = ("+" | "-") exponent | power
//! value    = number [ unit [ "^" integer ] ] | name | function "(" sum { "," sum } ")" | "(" sum ")"
//! ```
//! A name alone is a given, a constant, or one of a unit (`400 A/m`).

use std::ops::Range;

pub mod dimension;
pub mod evaluate;
pub mod function;
mod lex;
mod parse;
pub mod unit;

pub use dimension::{Dimension, toml_value, write_si};
pub use evaluate::{Names, Stop, Value};

use unit::Unit;

/// A read expression.
#[derive(Clone, Debug, PartialEq)]
pub struct Expression {
    root: Node,
}

/// What is wrong with an expression, at bytes of its text.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ExpressionFault {
    /// What is wrong.
    pub message: String,
    /// How to cure it.
    pub help: Option<String>,
    /// Bytes of the expression.
    pub span: Range<usize>,
}

/// A part of an expression and the bytes it stands at.
#[derive(Clone, Debug, PartialEq)]
struct Node {
    term: Term,
    span: Range<usize>,
}

/// A term of a sum or a factor of a product.
#[derive(Clone, Debug, PartialEq)]
struct Joined {
    /// Taken away, or divided by.
    inverse: bool,
    /// Where its sign stands; where it stands itself if it is the first.
    sign_at: usize,
    node: Node,
}

#[derive(Clone, Debug, PartialEq)]
enum Term {
    /// A number with its unit and that unit's power.
    Quantity(f64, Option<(Unit, i32)>),
    Name(String),
    /// Terms, each added or taken away. Flat, so that a long sum is not a deep one.
    Sum(Vec<Joined>),
    /// Factors, each multiplied or divided by.
    Product(Vec<Joined>),
    Negative(Box<Node>),
    Power(Box<Node>, Box<Node>),
    Call(function::Function, Vec<Node>),
}

impl Expression {
    /// Reads an expression.
    ///
    /// # Errors
    /// What does not fit the grammar, and where.
    pub fn parse(text: &str) -> Result<Self, ExpressionFault> {
        parse::parse(text).map(|root| Self { root })
    }

    /// Names in it that are no unit, function or constant, each with its bytes: the givens it uses.
    pub fn names(&self) -> Vec<(&str, Range<usize>)> {
        let mut found = Vec::new();
        self.root.collect_names(&mut found);
        found
    }
}

impl Node {
    fn collect_names<'a>(&'a self, found: &mut Vec<(&'a str, Range<usize>)>) {
        match &self.term {
            Term::Quantity(..) => {}
            Term::Name(name) => {
                if !is_reserved(name) {
                    found.push((name, self.span.clone()));
                }
            }
            Term::Sum(parts) | Term::Product(parts) => {
                parts.iter().for_each(|part| part.node.collect_names(found))
            }
            Term::Negative(inner) => inner.collect_names(found),
            Term::Power(base, exponent) => {
                base.collect_names(found);
                exponent.collect_names(found);
            }
            Term::Call(_, arguments) => arguments
                .iter()
                .for_each(|argument| argument.collect_names(found)),
        }
    }
}

/// What a name already means in expressions: `a unit`, `a function`, `a constant`.
pub fn reserved_meaning(name: &str) -> Option<&'static str> {
    if evaluate::constant(name).is_some() {
        Some("a constant")
    } else if function::Function::find(name).is_some() {
        Some("a function")
    } else if unit::find(name).is_some() {
        Some("a unit")
    } else {
        None
    }
}

/// Whether a name is a unit, a function or a constant.
pub fn is_reserved(name: &str) -> bool {
    reserved_meaning(name).is_some()
}

impl ExpressionFault {
    fn new(message: impl Into<String>, span: Range<usize>) -> Self {
        Self {
            message: message.into(),
            help: None,
            span,
        }
    }

    fn with_help(mut self, help: impl Into<String>) -> Self {
        self.help = Some(help.into());
        self
    }
}

#[cfg(test)]
mod tests;
