//! Givens: their texts after `--set`, their values in any order.

use std::collections::HashMap;
use std::ops::Range;
use std::sync::Arc;

use super::Given;
use super::expression::{
    Expression, ExpressionFault, Names, Stop, Value, evaluate, function, reserved_meaning, toml_value, unit,
};
use super::fault::{Fault, Place};
use super::model::located::{Located, Named};
use super::model::quantity::Quantity;
use super::nearest::{known_names_help, nearest};
use super::source::SourceText;

/// Givens with their values, in file order.
#[derive(Debug, Default)]
pub struct Givens {
    entries: Vec<Entry>,
    indices: HashMap<String, usize>,
}

#[derive(Debug)]
struct Entry {
    name: String,
    /// Bytes of the text in the case file that is replaced in the resolved case.
    span: Range<usize>,
    text: String,
    at: Position,
    expression: Option<Expression>,
    /// `None` while unknown, or when its fault has been said.
    value: Option<Value>,
}

/// Where a text stands, so that a byte of the text can be shown in its file.
#[derive(Clone, Debug)]
pub struct Position {
    source: Arc<SourceText>,
    literal: Range<usize>,
    /// Where the decoded text starts; `None` if escapes moved its bytes.
    start: Option<usize>,
}

impl Position {
    /// The position of a decoded string whose literal (with its quotes) stands at `literal`.
    pub fn of_literal(source: &Arc<SourceText>, literal: Range<usize>, decoded: &str) -> Self {
        let raw = source.text.get(literal.clone()).unwrap_or_default();
        let start = raw
            .find(decoded)
            .filter(|_| !decoded.is_empty())
            .map(|offset| literal.start + offset);
        Self {
            source: source.clone(),
            literal,
            start,
        }
    }

    /// The place of some bytes of the decoded string.
    pub fn place(&self, within: &Range<usize>) -> Place {
        let span = match self.start {
            Some(start) => start + within.start..start + within.end,
            None => self.literal.clone(),
        };
        Place {
            source: self.source.clone(),
            span,
        }
    }

    /// An expression's fault as a fault of the file.
    pub fn fault(&self, fault: ExpressionFault) -> Fault {
        let mut out = Fault::new(fault.message, self.place(&fault.span));
        out.help = fault.help;
        out
    }
}

impl Givens {
    /// Resolves the file's givens, with `NAME=VALUE` texts in place of their own; the last wins.
    pub fn resolve(
        file: &Named<Located<Quantity>>,
        sets: &[String],
        source: &Arc<SourceText>,
        faults: &mut Vec<Fault>,
    ) -> Self {
        let mut givens = Self::default();
        for (name, text) in &file.0 {
            check_name(name, source, faults);
            givens.indices.insert(name.value.clone(), givens.entries.len());
            givens.entries.push(Entry::from_file(name, text, source));
        }
        for set in sets {
            givens.apply(set, faults);
        }
        givens.read_expressions(faults);
        for index in givens.order(faults) {
            givens.evaluate(index, faults);
        }
        givens
    }

    /// Names of all givens.
    pub fn names(&self) -> impl Iterator<Item = &str> {
        self.entries.iter().map(|entry| entry.name.as_str())
    }

    /// The givens for the report.
    pub fn report(&self) -> Vec<Given> {
        let with_value = self
            .entries
            .iter()
            .filter_map(|entry| Some((entry, entry.value?)));
        with_value
            .map(|(entry, value)| Given {
                name: entry.name.clone(),
                text: entry.text.clone(),
                si: value.si,
                unit: value.dimension.si_unit(),
            })
            .collect()
    }

    /// For each given, the bytes of its text in the file and its value as text.
    pub fn replacements(&self) -> impl Iterator<Item = (Range<usize>, String)> {
        let with_value = self
            .entries
            .iter()
            .filter_map(|entry| Some((entry, entry.value?)));
        with_value.map(|(entry, value)| (entry.span.clone(), toml_value(value.si, value.dimension)))
    }

    /// Puts a `--set` in place.
    fn apply(&mut self, set: &str, faults: &mut Vec<Fault>) {
        let Some((name, text)) = set.split_once('=') else {
            faults.push(
                Fault::unplaced(format!("--set {set}: expected NAME=VALUE"))
                    .with_help("for example --set gap=\"2 mm\""),
            );
            return;
        };
        let name = name.trim();
        match self.indices.get(name) {
            Some(&index) => {
                let entry = &mut self.entries[index];
                let source = Arc::new(SourceText {
                    name: format!("--set {name}"),
                    text: set.to_owned(),
                });
                let start = set.len() - text.len();
                entry.at = Position {
                    source,
                    literal: start..set.len(),
                    start: Some(start),
                };
                text.clone_into(&mut entry.text);
            }
            None => faults.push(
                Fault::unplaced(format!("--set {set}: the case has no given `{name}`"))
                    .with_help(known_names_help(name, self.names(), "givens")),
            ),
        }
    }

    fn read_expressions(&mut self, faults: &mut Vec<Fault>) {
        for entry in &mut self.entries {
            if matches!(entry.text.as_str(), "NaN" | "inf" | "-inf") {
                faults.push(entry.at.fault(ExpressionFault {
                    message: format!("the given `{}` must be a finite number", entry.name),
                    help: None,
                    span: 0..entry.text.len(),
                }));
                continue;
            }
            match Expression::parse(&entry.text) {
                Ok(expression) => entry.expression = Some(expression),
                Err(fault) => faults.push(entry.at.fault(fault)),
            }
        }
    }

    /// Indices in an order in which each given comes after those it uses; says which go round in a circle.
    fn order(&self, faults: &mut Vec<Fault>) -> Vec<usize> {
        #[derive(Clone, Copy, PartialEq)]
        enum State {
            New,
            Open,
            Done,
        }
        let uses: Vec<Vec<usize>> = self.entries.iter().map(|entry| self.uses(entry)).collect();
        let mut state = vec![State::New; self.entries.len()];
        let mut order = Vec::new();
        for root in 0..self.entries.len() {
            // A stack of its own: a chain of givens may be as long as the file.
            let mut stack = if state[root] == State::New {
                vec![(root, 0)]
            } else {
                Vec::new()
            };
            while let Some((index, next)) = stack.pop() {
                state[index] = State::Open;
                let Some(&used) = uses[index].get(next) else {
                    state[index] = State::Done;
                    order.push(index);
                    continue;
                };
                stack.push((index, next + 1));
                match state[used] {
                    State::New => stack.push((used, 0)),
                    State::Open => {
                        let from = stack.iter().position(|(open, _)| *open == used).unwrap_or(0);
                        let chain: Vec<usize> = stack[from..].iter().map(|(open, _)| *open).collect();
                        faults.push(self.circle_fault(&chain));
                    }
                    State::Done => {}
                }
            }
        }
        order
    }

    /// Indices of the givens that an entry uses.
    fn uses(&self, entry: &Entry) -> Vec<usize> {
        let names = entry
            .expression
            .as_ref()
            .map(Expression::names)
            .unwrap_or_default();
        names
            .iter()
            .filter_map(|(name, _)| self.indices.get(*name).copied())
            .collect()
    }

    fn circle_fault(&self, chain: &[usize]) -> Fault {
        let names: Vec<&str> = chain
            .iter()
            .chain(chain.first())
            .map(|&index| self.entries[index].name.as_str())
            .collect();
        let entry = &self.entries[chain.first().copied().unwrap_or_default()];
        Fault::new(
            format!("givens go round in a circle: {}", names.join(" -> ")),
            Place {
                source: entry.at.source.clone(),
                span: entry.at.literal.clone(),
            },
        )
        .with_help("one of them must not depend on the others")
    }

    fn evaluate(&mut self, index: usize, faults: &mut Vec<Fault>) {
        let entry = &self.entries[index];
        let Some(expression) = &entry.expression else {
            return;
        };
        match expression.evaluate(self) {
            Ok(value) => self.entries[index].value = Some(value),
            Err(Stop::Fault(fault)) => faults.push(entry.at.fault(fault)),
            Err(Stop::SaidAlready) => {}
        }
    }
}

impl Names for Givens {
    fn value(&self, name: &str, span: Range<usize>) -> Result<Value, Stop> {
        match self.indices.get(name) {
            Some(&index) => self.entries[index].value.ok_or(Stop::SaidAlready),
            None => Err(Stop::Fault(ExpressionFault {
                message: format!("`{name}` is neither a given nor a unit"),
                help: Some(self.unknown_help(name)),
                span,
            })),
        }
    }
}

impl Givens {
    /// What an unknown name in an expression may have meant.
    fn unknown_help(&self, name: &str) -> String {
        let others = unit::familiar_names()
            .chain(function::NAMES.iter().copied())
            .chain(evaluate::CONSTANTS.iter().copied());
        if nearest(name, self.names()).is_none()
            && let Some(near) = nearest(name, others)
        {
            return format!("did you mean `{near}`?");
        }
        known_names_help(name, self.names(), "givens")
    }
}

impl Entry {
    fn from_file(name: &Located<String>, text: &Located<Quantity>, source: &Arc<SourceText>) -> Self {
        let (words, at) = match &text.value {
            Quantity::Text(words) => (
                words.clone(),
                Position::of_literal(source, text.span.clone(), words),
            ),
            Quantity::Number(number) => {
                let at = Position {
                    source: source.clone(),
                    literal: text.span.clone(),
                    start: None,
                };
                (number_text(*number, source.text.get(text.span.clone())), at)
            }
        };
        Self {
            name: name.value.clone(),
            span: text.span.clone(),
            text: words,
            at,
            expression: None,
            value: None,
        }
    }
}

/// A bare number as it is written, where that reads as an expression too (`0x10` and `1_000` do not).
fn number_text(number: f64, written: Option<&str>) -> String {
    match written {
        Some(written) if number.is_finite() && Expression::parse(written).is_ok() => written.to_owned(),
        _ => format!("{number:?}"),
    }
}

/// A given's name is lower case and means nothing else in expressions.
fn check_name(name: &Located<String>, source: &Arc<SourceText>, faults: &mut Vec<Fault>) {
    let place = || Place {
        source: source.clone(),
        span: name.span.clone(),
    };
    let mut characters = name.value.chars();
    let plain = characters.next().is_some_and(|c| c.is_ascii_lowercase())
        && characters.all(|c| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '_');
    if let Some(meaning) = reserved_meaning(&name.value) {
        faults.push(
            Fault::new(
                format!("the given `{}` would hide {meaning} of that name", name.value),
                place(),
            )
            .with_help("choose another name, for example with an underscore"),
        );
    } else if !plain {
        faults.push(
            Fault::new(format!("`{}` cannot be the name of a given", name.value), place()).with_help(
                "a given's name has lower-case letters, digits and underscores, and starts with a letter",
            ),
        );
    }
}
