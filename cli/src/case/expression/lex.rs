//! An expression's text cut into tokens.

use std::ops::Range;

use winnow::ascii::{digit0, digit1, multispace0};
use winnow::combinator::{alt, opt, preceded};
use winnow::error::ContextError;
use winnow::prelude::*;
use winnow::stream::LocatingSlice;
use winnow::token::{any, one_of, take_while};

use super::ExpressionFault;

/// What a token is.
#[derive(Clone, Debug, PartialEq)]
pub enum Kind {
    /// A number.
    Number(f64),
    /// A unit, given, function or constant.
    Name(String),
    /// One of `+ - * / ^ ( ) ,`.
    Sign(char),
    /// The end of the text.
    End,
}

/// A token and the bytes it stands at.
#[derive(Clone, Debug, PartialEq)]
pub struct Token {
    /// What it is.
    pub kind: Kind,
    /// Where it is.
    pub span: Range<usize>,
}

type Input<'a> = LocatingSlice<&'a str>;

/// Cuts `text` into tokens, the last of which is [`Kind::End`].
///
/// # Errors
/// A character that no expression has.
pub fn tokens(text: &str) -> Result<Vec<Token>, ExpressionFault> {
    let mut input = LocatingSlice::new(text);
    let mut out = Vec::new();
    loop {
        // White space is optional: this cannot fail.
        let _: Result<&str, ContextError> = multispace0.parse_next(&mut input);
        if input.is_empty() {
            out.push(Token {
                kind: Kind::End,
                span: text.len()..text.len(),
            });
            return Ok(out);
        }
        let start = text.len() - input.len();
        match token.with_span().parse_next(&mut input) {
            Ok((kind, span)) => out.push(Token { kind, span }),
            Err(_) => {
                let end = start + input.chars().next().map_or(0, char::len_utf8);
                let fault = ExpressionFault::new(
                    format!(
                        "`{}` means nothing in an expression",
                        text.get(start..end).unwrap_or_default()
                    ),
                    start..end,
                );
                return Err(fault);
            }
        }
    }
}

fn token(input: &mut Input<'_>) -> Result<Kind, ContextError> {
    alt((number, name, sign)).parse_next(input)
}

/// Digits with an optional fraction and exponent; the sign is a token of its own.
fn number(input: &mut Input<'_>) -> Result<Kind, ContextError> {
    let exponent = (one_of(['e', 'E']), opt(one_of(['+', '-'])), digit1);
    let mantissa = alt(((digit1, opt(('.', digit0))).void(), ('.', digit1).void()));
    (mantissa, opt(exponent))
        .take()
        .verify_map(|text: &str| text.parse().ok().map(Kind::Number))
        .parse_next(input)
}

fn name(input: &mut Input<'_>) -> Result<Kind, ContextError> {
    let first = |c: char| c.is_alphabetic() || matches!(c, '_' | '%' | '°' | 'µ');
    let word = |c: char| c.is_alphanumeric() || matches!(c, '_' | 'µ');
    alt((
        "%".map(|text: &str| Kind::Name(text.to_owned())),
        (one_of(first), take_while(0.., word))
            .take()
            .map(|text: &str| Kind::Name(text.to_owned())),
    ))
    .parse_next(input)
}

fn sign(input: &mut Input<'_>) -> Result<Kind, ContextError> {
    preceded((), any.verify(|c: &char| "+-*/^(),".contains(*c)))
        .map(Kind::Sign)
        .parse_next(input)
}
