//! Faults drawn for a terminal or a log.

use miette::{
    GraphicalReportHandler, GraphicalTheme, LabeledSpan, MietteError, MietteSpanContents, SourceCode,
    SourceSpan, SpanContents,
};

use super::fault::{Fault, Faults, Look, Place};

/// Most faults drawn in full; the rest are counted.
const MOST_DRAWN: usize = 25;
/// What the handler asks for around a mark when it wants the text itself; it asks for 0 when it wants only the
/// line and column of the mark.
const CONTENT: usize = 1;
/// Most bytes of a line drawn before and after the marked place.
const WINDOW_BYTES: usize = 100;

impl Faults {
    /// Draws the faults: message, file with line and column, the marked text, the cure.
    pub fn render(&self, look: Look) -> String {
        let theme = match (look.unicode, look.colour) {
            (true, true) => GraphicalTheme::unicode(),
            (true, false) => GraphicalTheme::unicode_nocolor(),
            (false, true) => GraphicalTheme {
                characters: miette::ThemeCharacters::ascii(),
                ..GraphicalTheme::unicode()
            },
            (false, false) => GraphicalTheme::none(),
        };
        let handler = GraphicalReportHandler::new_themed(theme)
            .with_width(look.width.clamp(40, 160))
            .with_context_lines(CONTENT)
            .without_syntax_highlighting();
        let mut text = String::new();
        for fault in self.list.iter().take(MOST_DRAWN) {
            if !text.is_empty() {
                text.push('\n');
            }
            // Writing into a string fails only if the handler does; the plain line says the same.
            if handler.render_report(&mut text, &Drawn::new(fault)).is_err() {
                text.push_str(&format!("{fault}\n"));
            }
        }
        if self.list.len() > MOST_DRAWN {
            text.push_str(&format!("... and {} more\n", self.list.len() - MOST_DRAWN));
        }
        text
    }
}

/// A fault as miette wants it.
#[derive(Debug)]
struct Drawn<'a> {
    fault: &'a Fault,
    excerpt: Option<Excerpt<'a>>,
}

/// One line of the text, cut to a window around the marked place so that a line of any length can be shown.
#[derive(Debug)]
struct Excerpt<'a> {
    place: &'a Place,
    window: std::ops::Range<usize>,
    marked: std::ops::Range<usize>,
}

impl<'a> Drawn<'a> {
    fn new(fault: &'a Fault) -> Self {
        Self {
            fault,
            excerpt: fault.place.as_ref().map(Excerpt::new),
        }
    }
}

impl<'a> Excerpt<'a> {
    fn new(place: &'a Place) -> Self {
        let text = place.source.text.as_str();
        let start = char_boundary(text, place.span.start.min(text.len()));
        let line_start = text[..start].rfind('\n').map_or(0, |at| at + 1);
        let line_end = text[start..]
            .find(['\n', '\r'])
            .map_or(text.len(), |at| start + at);
        let end = char_boundary(text, place.span.end.clamp(start, line_end));
        let window = char_boundary(text, line_start.max(start.saturating_sub(WINDOW_BYTES)))
            ..char_boundary(text, line_end.min(start + WINDOW_BYTES));
        let marked = start..end.clamp(start, window.end.max(start));
        Self {
            place,
            window,
            marked,
        }
    }
}

/// The nearest character boundary at or before `at`.
fn char_boundary(text: &str, at: usize) -> usize {
    (0..=at.min(text.len()))
        .rev()
        .find(|&at| text.is_char_boundary(at))
        .unwrap_or(0)
}

impl SourceCode for Excerpt<'_> {
    fn read_span<'b>(
        &'b self,
        _span: &SourceSpan,
        lines_before: usize,
        _lines_after: usize,
    ) -> Result<Box<dyn SpanContents<'b> + 'b>, MietteError> {
        let source = &self.place.source;
        let span = if lines_before == CONTENT {
            &self.window
        } else {
            &self.marked
        };
        let (line, column) = Place {
            source: source.clone(),
            span: span.clone(),
        }
        .line_column();
        Ok(Box::new(MietteSpanContents::new_named(
            source.name.clone(),
            &source.text.as_bytes()[span.clone()],
            SourceSpan::new(span.start.into(), span.len()),
            line - 1,
            column - 1,
            1,
        )))
    }
}

impl std::fmt::Display for Drawn<'_> {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&self.fault.message)
    }
}

impl std::error::Error for Drawn<'_> {}

impl miette::Diagnostic for Drawn<'_> {
    fn help<'b>(&'b self) -> Option<Box<dyn std::fmt::Display + 'b>> {
        self.fault
            .help
            .as_ref()
            .map(|help| Box::new(help) as Box<dyn std::fmt::Display>)
    }

    fn source_code(&self) -> Option<&dyn SourceCode> {
        self.excerpt.as_ref().map(|excerpt| excerpt as &dyn SourceCode)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        let excerpt = self.excerpt.as_ref()?;
        let label = (!self.fault.label.is_empty()).then(|| self.fault.label.clone());
        Some(Box::new(std::iter::once(LabeledSpan::new_primary_with_span(
            label,
            SourceSpan::new(excerpt.marked.start.into(), excerpt.marked.len()),
        ))))
    }
}
