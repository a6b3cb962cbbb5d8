//! Tokens to a tree, by recursive descent with a depth limit.

use std::ops::Range;

use super::function::Function;
use super::lex::{Kind, Token, tokens};
use super::{ExpressionFault, Joined, Node, Term, evaluate, unit};

/// Deepest nesting of brackets, signs and powers.
pub const DEEPEST: usize = 64;

type Parsed = Result<Node, ExpressionFault>;

/// Reads the whole of `text` as one expression.
pub(super) fn parse(text: &str) -> Parsed {
    let mut parser = Parser {
        tokens: tokens(text)?,
        at: 0,
        depth: 0,
    };
    if parser.tokens.len() == 1 {
        return Err(ExpressionFault::new("the expression is empty", 0..text.len()));
    }
    let root = parser.sum()?;
    match parser.peek().kind {
        Kind::End => Ok(root),
        _ => Err(parser.unexpected()),
    }
}

struct Parser {
    /// Ends with [`Kind::End`], past which `at` never goes.
    tokens: Vec<Token>,
    at: usize,
    depth: usize,
}

impl Parser {
    fn peek(&self) -> &Token {
        &self.tokens[self.at.min(self.tokens.len() - 1)]
    }

    fn next_is(&self, sign: char) -> bool {
        self.peek().kind == Kind::Sign(sign)
    }

    /// Takes the next token if it is one of these signs.
    fn take_sign(&mut self, signs: &[char]) -> Option<(char, Range<usize>)> {
        match &self.peek().kind {
            &Kind::Sign(sign) if signs.contains(&sign) => {
                let span = self.peek().span.clone();
                self.at += 1;
                Some((sign, span))
            }
            _ => None,
        }
    }

    /// Runs a rule one level deeper.
    fn deeper(&mut self, rule: fn(&mut Self) -> Parsed) -> Parsed {
        if self.depth == DEEPEST {
            return Err(ExpressionFault::new(
                format!("the expression is nested more than {DEEPEST} deep"),
                self.peek().span.clone(),
            )
            .with_help("name its parts as givens"));
        }
        self.depth += 1;
        let node = rule(self);
        self.depth -= 1;
        node
    }

    fn sum(&mut self) -> Parsed {
        self.chain(Self::product, &['+', '-'], '-', Term::Sum)
    }

    fn product(&mut self) -> Parsed {
        self.chain(Self::signed, &['*', '/'], '/', Term::Product)
    }

    /// A row of parts joined by signs; `inverse` is the sign that marks a part as taken away.
    fn chain(
        &mut self,
        part: fn(&mut Self) -> Parsed,
        signs: &[char],
        inverse: char,
        term: fn(Vec<Joined>) -> Term,
    ) -> Parsed {
        let first = part(self)?;
        if !signs.iter().any(|&sign| self.next_is(sign)) {
            return Ok(first);
        }
        let mut span = first.span.clone();
        let mut parts = vec![Joined {
            inverse: false,
            sign_at: span.start,
            node: first,
        }];
        while let Some((sign, at)) = self.take_sign(signs) {
            let node = part(self)?;
            span.end = node.span.end;
            parts.push(Joined {
                inverse: sign == inverse,
                sign_at: at.start,
                node,
            });
        }
        Ok(Node {
            term: term(parts),
            span,
        })
    }

    fn signed(&mut self) -> Parsed {
        match self.take_sign(&['+', '-']) {
            None => self.power(),
            Some((sign, at)) => {
                let inner = self.deeper(Self::signed)?;
                Ok(if sign == '-' {
                    negative(inner, at.start)
                } else {
                    inner
                })
            }
        }
    }

    fn power(&mut self) -> Parsed {
        let base = self.value()?;
        if self.take_sign(&['^']).is_none() {
            return Ok(base);
        }
        let exponent = self.deeper(Self::signed)?;
        let span = base.span.start..exponent.span.end;
        Ok(Node {
            term: Term::Power(Box::new(base), Box::new(exponent)),
            span,
        })
    }

    fn value(&mut self) -> Parsed {
        let Token { kind, span } = self.peek().clone();
        match kind {
            Kind::Number(number) => {
                self.at += 1;
                self.quantity(number, span)
            }
            Kind::Name(name) => {
                self.at += 1;
                self.named(name, span)
            }
            Kind::Sign('(') => {
                self.at += 1;
                let inner = self.deeper(Self::sum)?;
                let end = self.close(span.start)?;
                Ok(Node {
                    span: span.start..end,
                    ..inner
                })
            }
            Kind::Sign(_) | Kind::End => Err(self.unexpected()),
        }
    }

    /// A number, the unit that follows it, and the unit's power.
    fn quantity(&mut self, number: f64, span: Range<usize>) -> Parsed {
        let Token {
            kind: Kind::Name(name),
            span: at,
        } = self.peek().clone()
        else {
            return Ok(Node {
                term: Term::Quantity(number, None),
                span,
            });
        };
        let Some(found) = unit::find(&name) else {
            return Err(no_unit(&name, at));
        };
        self.at += 1;
        let mut end = at.end;
        let mut power = 1;
        if self.take_sign(&['^']).is_some() {
            (power, end) = self.unit_power(&name)?;
        }
        Ok(Node {
            term: Term::Quantity(number, Some((found, power))),
            span: span.start..end,
        })
    }

    /// The whole number after `mm^`, and where it ends.
    fn unit_power(&mut self, unit: &str) -> Result<(i32, usize), ExpressionFault> {
        let sign = self
            .take_sign(&['+', '-'])
            .map_or(1, |(sign, _)| if sign == '-' { -1 } else { 1 });
        match self.peek().clone() {
            Token {
                kind: Kind::Number(power),
                span,
            } if power.fract() == 0.0 && power <= 12.0 => {
                self.at += 1;
                // Whole and at most 12: fits.
                Ok((sign * power as i32, span.end))
            }
            Token { span, .. } => Err(ExpressionFault::new(
                format!("the power of the unit `{unit}` must be a whole number (up to 12)"),
                span,
            )
            .with_help("to raise the number with its unit, put both in brackets")),
        }
    }

    /// A name: a function with its brackets, or a given, constant or unit.
    fn named(&mut self, name: String, span: Range<usize>) -> Parsed {
        if !self.next_is('(') {
            // `min` alone is a minute; other functions need their brackets.
            if Function::find(&name).is_some() && unit::find(&name).is_none() {
                return Err(ExpressionFault::new(
                    format!("the function `{name}` needs brackets: `{name}(...)`"),
                    span,
                ));
            }
            return Ok(Node {
                term: Term::Name(name),
                span,
            });
        }
        let Some(function) = Function::find(&name) else {
            let what = match (evaluate::constant(&name).is_some(), unit::find(&name).is_some()) {
                (true, _) => "a constant",
                (_, true) => "a unit",
                _ => "not a function",
            };
            return Err(ExpressionFault::new(
                format!("`{name}` is {what}, so no bracket can follow it"),
                span,
            )
            .with_help(format!(
                "to multiply write `{name}*(...)`; functions are {}",
                super::function::NAMES.join(" ")
            )));
        };
        let open = self.peek().span.start;
        self.at += 1;
        let mut arguments = vec![self.deeper(Self::sum)?];
        while self.take_sign(&[',']).is_some() {
            arguments.push(self.deeper(Self::sum)?);
        }
        let end = self.close(open)?;
        Ok(Node {
            term: Term::Call(function, arguments),
            span: span.start..end,
        })
    }

    /// Takes the closing bracket and returns where it ends.
    fn close(&mut self, open: usize) -> Result<usize, ExpressionFault> {
        if let Some((_, span)) = self.take_sign(&[')']) {
            return Ok(span.end);
        }
        if self.peek().kind == Kind::End {
            return Err(ExpressionFault::new(
                "this bracket is never closed",
                open..open + 1,
            ));
        }
        Err(self.unexpected())
    }

    /// The next token cannot stand here.
    fn unexpected(&self) -> ExpressionFault {
        let Token { kind, span } = self.peek().clone();
        let before = self.at.checked_sub(1).map(|at| &self.tokens[at].kind);
        let after_value = matches!(before, Some(Kind::Number(_) | Kind::Name(_) | Kind::Sign(')')));
        match kind {
            Kind::End => ExpressionFault::new("the expression ends where a value is missing", span),
            Kind::Number(_) | Kind::Name(_) | Kind::Sign('(') if after_value => {
                ExpressionFault::new("a sign is missing before this", span).with_help(
                    "only a number and its unit are multiplied by standing side by side; write `*`",
                )
            }
            Kind::Sign('*') if before == Some(&Kind::Sign('*')) => {
                ExpressionFault::new("`**` means nothing", span).with_help("powers are written `^`")
            }
            Kind::Sign(')') if after_value => ExpressionFault::new("this bracket was never opened", span),
            Kind::Sign(sign) => {
                ExpressionFault::new(format!("`{sign}` stands where a value is missing"), span)
            }
            Kind::Number(_) | Kind::Name(_) => ExpressionFault::new("this cannot stand here", span),
        }
    }
}

/// The negative of a node. A number's own sign belongs to it: -2 degC is one absolute value.
fn negative(inner: Node, start: usize) -> Node {
    let span = start..inner.span.end;
    match inner.term {
        Term::Quantity(number, unit) => Node {
            term: Term::Quantity(-number, unit),
            span,
        },
        _ => Node {
            term: Term::Negative(Box::new(inner)),
            span,
        },
    }
}

fn no_unit(name: &str, span: Range<usize>) -> ExpressionFault {
    if super::is_reserved(name) {
        return ExpressionFault::new(format!("`{name}` is not a unit"), span)
            .with_help(format!("to multiply write `*` before `{name}`"));
    }
    let near = crate::case::nearest::several_near(name, unit::familiar_names());
    let fault = ExpressionFault::new(format!("`{name}` is not a unit"), span);
    match near {
        Some(near) => fault.with_help(format!(
            "did you mean {near}? To multiply by a given write `*` before it"
        )),
        None => fault.with_help(format!(
            "units are {}, with SI prefixes on SI units; to multiply by a given write `*` before it",
            "m in mil s min h g A K degC V VA W J N H F T Wb ohm S Hz rad deg rpm % G Oe lbf kgf"
        )),
    }
}
