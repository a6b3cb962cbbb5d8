//! A small SVG writer: escaping, short numbers, paths.

use std::fmt::Write;

/// Text that may stand between tags and in attributes. Characters that XML cannot hold are left out.
pub fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            '\t' | '\n' | '\r' => out.push(' '),
            c if (c as u32) < 0x20 || matches!(c as u32, 0x7f..=0x9f | 0xfffe | 0xffff) => {}
            c => out.push(c),
        }
    }
    out
}

/// A coordinate: a hundredth of a unit is finer than any screen or printer shows.
pub fn number(value: f64) -> String {
    let text = format!("{value:.2}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" {
        "0".to_owned()
    } else {
        text.to_owned()
    }
}

/// The `d` of a path being written.
#[derive(Debug, Default)]
pub struct PathData {
    text: String,
}

impl PathData {
    /// An empty path.
    pub fn new() -> Self {
        Self::default()
    }

    fn command(&mut self, letter: char, numbers: &[f64]) {
        self.text.push(letter);
        for (index, &value) in numbers.iter().enumerate() {
            if index > 0 {
                self.text.push(' ');
            }
            // Writing into a string cannot fail.
            let _ = write!(self.text, "{}", number(value));
        }
    }

    /// Begins at a point.
    pub fn start(&mut self, [x, y]: [f64; 2]) {
        self.command('M', &[x, y]);
    }

    /// Straight to a point.
    pub fn line(&mut self, [x, y]: [f64; 2]) {
        self.command('L', &[x, y]);
    }

    /// Along a cubic with two control points.
    pub fn cubic(&mut self, a: [f64; 2], b: [f64; 2], [x, y]: [f64; 2]) {
        self.command('C', &[a[0], a[1], b[0], b[1], x, y]);
    }

    /// Along a circle; `clockwise` as seen on the page.
    pub fn arc(&mut self, radius: f64, large: bool, clockwise: bool, [x, y]: [f64; 2]) {
        let flag = |is: bool| f64::from(u8::from(is));
        self.command('A', &[radius, radius, 0.0, flag(large), flag(clockwise), x, y]);
    }

    /// Back to where it began.
    pub fn close(&mut self) {
        self.text.push('Z');
    }

    /// The finished text.
    pub fn finish(self) -> String {
        self.text
    }
}

/// Width of a text in a plain sans-serif face, in units of its size; on the wide side, so that nothing overlaps.
pub fn text_width(text: &str) -> f64 {
    text.chars()
        .map(|c| match c {
            'i' | 'j' | 'l' | '.' | ',' | ':' | ';' | '\'' | '|' | '!' | ' ' | '(' | ')' | '[' | ']' => 0.38,
            'f' | 't' | 'r' | 'I' | '-' | '/' => 0.45,
            'm' | 'w' | 'M' | 'W' | '@' | '%' => 0.98,
            c if c.is_ascii_uppercase() => 0.72,
            c if c.is_ascii() => 0.64,
            c if (c as u32) < 0x2e80 => 0.7,
            _ => 1.05,
        })
        .sum()
}

/// A text on the page.
#[derive(Clone, Copy, Debug)]
pub struct Text<'a> {
    /// What it says.
    pub words: &'a str,
    /// Where its anchor stands.
    pub at: [f64; 2],
    /// Size of the face.
    pub size: f64,
    /// `start`, `middle` or `end`.
    pub anchor: &'static str,
    /// Degrees it is turned clockwise.
    pub turned: f64,
    /// Class for the style sheet; may be empty.
    pub class: &'static str,
}

impl Text<'_> {
    /// The element.
    pub fn element(&self) -> String {
        let [x, y] = self.at.map(number);
        let turned = match self.turned {
            0.0 => String::new(),
            angle => format!(r#" transform="rotate({} {x} {y})""#, number(angle)),
        };
        let class = match self.class {
            "" => String::new(),
            class => format!(r#" class="{class}""#),
        };
        format!(
            r#"<text x="{x}" y="{y}" font-size="{}" text-anchor="{}"{class}{turned}>{}</text>"#,
            number(self.size),
            self.anchor,
            escaped(self.words)
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn escapes_what_xml_reserves_and_drops_what_it_forbids() {
        assert_eq!(
            escaped("a<b & \"c\">'d'\u{1}\n"),
            "a&lt;b &amp; &quot;c&quot;&gt;&#39;d&#39; "
        );
    }

    #[test]
    fn numbers_are_short() {
        assert_eq!(
            ["0", "-1.5", "12.35", "100"],
            [-0.001, -1.5, 12.346, 100.0]
                .map(number)
                .each_ref()
                .map(String::as_str)
        );
    }

    #[test]
    fn paths_read_as_drawn() {
        let mut path = PathData::new();
        path.start([0.0, 1.0]);
        path.line([2.0, 1.0]);
        path.arc(1.5, false, true, [3.0, 2.0]);
        path.close();
        assert_eq!(path.finish(), "M0 1L2 1A1.5 1.5 0 0 1 3 2Z");
    }
}
