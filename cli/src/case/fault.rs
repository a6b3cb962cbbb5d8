//! What is wrong with a case: messages that point into its text, several at once.

use std::fmt;
use std::ops::Range;
use std::sync::Arc;

use super::source::SourceText;

/// A stretch of a named text.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Place {
    /// The text.
    pub source: Arc<SourceText>,
    /// Bytes of it.
    pub span: Range<usize>,
}

/// One thing that is wrong.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Fault {
    /// What is wrong, in one sentence.
    pub message: String,
    /// A few words beside the marked text; may be empty.
    pub label: String,
    /// How to cure it.
    pub help: Option<String>,
    /// Where; `None` when it has no place in a text (a file that cannot be opened).
    pub place: Option<Place>,
}

/// All that is wrong with a case, in the order of the text; at least one.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Faults {
    /// The faults.
    pub list: Vec<Fault>,
}

/// How faults are drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Look {
    /// Whether terminal colours are allowed.
    pub colour: bool,
    /// Whether line-drawing characters beyond ASCII are allowed.
    pub unicode: bool,
    /// Width in characters.
    pub width: usize,
}

impl Place {
    /// Line and column of its start, from 1; columns count characters.
    pub fn line_column(&self) -> (usize, usize) {
        let before = self
            .source
            .text
            .get(..self.span.start)
            .unwrap_or(&self.source.text);
        let line = before.bytes().filter(|&byte| byte == b'\n').count() + 1;
        let column = before.rsplit('\n').next().map_or(0, |tail| tail.chars().count()) + 1;
        (line, column)
    }
}

impl Fault {
    /// A fault at a place.
    pub fn new(message: impl Into<String>, place: Place) -> Self {
        Self {
            message: message.into(),
            label: String::new(),
            help: None,
            place: Some(place),
        }
    }

    /// A fault without a place in a text.
    pub fn unplaced(message: impl Into<String>) -> Self {
        Self {
            message: message.into(),
            label: String::new(),
            help: None,
            place: None,
        }
    }

    /// Adds the words beside the marked text.
    #[must_use]
    pub fn with_label(mut self, label: impl Into<String>) -> Self {
        self.label = label.into();
        self
    }

    /// Adds how to cure it.
    #[must_use]
    pub fn with_help(mut self, help: impl Into<String>) -> Self {
        self.help = Some(help.into());
        self
    }

    /// Line and column of its place, from 1.
    pub fn line_column(&self) -> Option<(usize, usize)> {
        self.place.as_ref().map(Place::line_column)
    }
}

impl fmt::Display for Fault {
    /// One line: `file:line:column: message (help)`.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some(place) = &self.place {
            let (line, column) = place.line_column();
            write!(f, "{}:{line}:{column}: ", place.source.name)?;
        }
        f.write_str(&self.message)?;
        if let Some(help) = &self.help {
            write!(f, " ({help})")?;
        }
        Ok(())
    }
}

impl std::error::Error for Fault {}

impl fmt::Display for Faults {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (index, fault) in self.list.iter().enumerate() {
            if index > 0 {
                writeln!(f)?;
            }
            write!(f, "{fault}")?;
        }
        Ok(())
    }
}

impl std::error::Error for Faults {}

impl From<Fault> for Faults {
    fn from(fault: Fault) -> Self {
        Self { list: vec![fault] }
    }
}
