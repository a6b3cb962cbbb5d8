//! Plain text laid out in sections of aligned rows.

use crate::notation::Shown;

/// Characters of indentation of rows.
const INDENT: usize = 2;
/// Blanks between columns.
const GAP: usize = 2;

/// A page being written. Rows are held back until their group is complete, so that their columns can be aligned.
#[derive(Debug)]
pub struct Page {
    text: String,
    width: usize,
    rows: Vec<[String; 3]>,
    /// Title of a section that has no content yet.
    pending: Option<String>,
}

impl Page {
    /// An empty page whose paragraphs are wrapped at `width` characters.
    pub fn new(width: usize) -> Self {
        Self {
            text: String::new(),
            width,
            rows: Vec::new(),
            pending: None,
        }
    }

    /// The title, underlined.
    pub fn title(&mut self, title: &str) {
        self.flush();
        let line = "=".repeat(title.chars().count().min(self.width));
        self.text.push_str(&format!("{title}\n{line}\n"));
    }

    /// Begins a section; its title appears with its first content.
    pub fn section(&mut self, title: &str) {
        self.flush();
        self.pending = Some(title.to_owned());
    }

    /// Text wrapped at the page's width.
    pub fn paragraph(&mut self, text: &str) {
        self.flush();
        self.open();
        let indent = if self.text.lines().count() <= 2 { 0 } else { INDENT };
        self.wrap(text, indent, indent);
    }

    /// A wrapped entry whose later lines are indented further than its first.
    pub fn entry(&mut self, text: &str) {
        self.flush();
        self.open();
        self.wrap(text, INDENT, 2 * INDENT);
    }

    /// A line that is not wrapped.
    pub fn line(&mut self, text: &str) {
        self.flush();
        self.open();
        self.push_line(&format!("{}{text}", " ".repeat(INDENT)));
    }

    /// A heading within a section, above rows.
    pub fn heading(&mut self, text: &str) {
        self.line(text);
    }

    /// A row: what, number, range.
    pub fn row(&mut self, what: &str, shown: &Shown) {
        self.rows.push([
            what.to_owned(),
            shown.value.clone(),
            shown.range.clone().unwrap_or_default(),
        ]);
    }

    /// A row with a remark instead of a number.
    pub fn remark(&mut self, what: &str, remark: &str) {
        self.rows
            .push([what.to_owned(), remark.to_owned(), String::new()]);
    }

    /// A table under its heads; numbers stand at the right of their columns.
    pub fn table(&mut self, heads: &[String], lines: &[Vec<String>]) {
        let width = |column: usize| {
            let of = |line: &[String]| line.get(column).map_or(0, |cell| cell.chars().count());
            lines.iter().map(|line| of(line)).fold(of(heads), usize::max)
        };
        let widths: Vec<usize> = (0..heads.len()).map(width).collect();
        for line in std::iter::once(heads).chain(lines.iter().map(Vec::as_slice)) {
            let cells: Vec<String> = line
                .iter()
                .zip(&widths)
                .map(|(cell, &width)| format!("{cell:>width$}"))
                .collect();
            self.line(cells.join(&" ".repeat(GAP)).trim_end());
        }
    }

    /// The finished text.
    pub fn finish(mut self) -> String {
        self.flush();
        self.text
    }

    /// Writes the title of the section if that has not happened.
    fn open(&mut self) {
        if let Some(title) = self.pending.take() {
            let line = "-".repeat(title.chars().count());
            self.text.push_str(&format!("\n{title}\n{line}\n"));
        }
    }

    /// Writes the rows held back.
    fn flush(&mut self) {
        if self.rows.is_empty() {
            return;
        }
        self.open();
        let rows = std::mem::take(&mut self.rows);
        // Remarks (no range) do not widen the column of numbers.
        let widest = |column: usize, only_with_range: bool| {
            let of = |row: &&[String; 3]| !only_with_range || !row[2].is_empty();
            rows.iter()
                .filter(of)
                .map(|row| row[column].chars().count())
                .max()
                .unwrap_or(0)
        };
        let (what, number) = (widest(0, false) + GAP, widest(1, true) + GAP);
        for [label, value, range] in &rows {
            let line = format!("{:INDENT$}{label:what$}{value:number$}{range}", "");
            self.push_line(line.trim_end());
        }
    }

    fn wrap(&mut self, text: &str, first: usize, later: usize) {
        let mut line = " ".repeat(first);
        let mut empty = true;
        for word in text.split_whitespace() {
            if !empty && line.chars().count() + 1 + word.chars().count() > self.width {
                self.push_line(&line);
                line = " ".repeat(later);
                empty = true;
            }
            if !empty {
                line.push(' ');
            }
            line.push_str(word);
            empty = false;
        }
        if !empty {
            self.push_line(&line);
        }
    }

    fn push_line(&mut self, line: &str) {
        self.text.push_str(line);
        self.text.push('\n');
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn shown(value: &str, range: Option<&str>) -> Shown {
        Shown {
            value: value.to_owned(),
            range: range.map(str::to_owned),
        }
    }

    #[test]
    fn tables_stand_right_under_their_heads() {
        let mut page = Page::new(40);
        page.section("Pull");
        let words = |words: &[&str]| words.iter().map(|word| (*word).to_owned()).collect::<Vec<_>>();
        page.table(
            &words(&["place, mm", "N"]),
            &[words(&["0", "-12.5"]), words(&["0.25", "-3"])],
        );
        assert_eq!(
            page.finish(),
            "\nPull\n----\n  place, mm      N\n          0  -12.5\n       0.25     -3\n"
        );
    }

    #[test]
    fn aligns_rows_and_skips_empty_sections() {
        let mut page = Page::new(40);
        page.title("Valve");
        page.section("Nothing");
        page.section("Coil");
        page.row("turns", &shown("900 turns", None));
        page.row("flux linkage", &shown("12.3 mWb", Some("(12.2 .. 12.4)")));
        page.row("own L", &shown("1.23 H", Some("(1.22 .. 1.24)")));
        page.section("Words");
        page.entry("one two three four five six seven eight nine ten");
        let expected = "Valve\n=====\n\nCoil\n----\n  turns         900 turns\n  flux linkage  12.3 mWb  (12.2 .. 12.4)\n  \
                        own L         1.23 H    (1.22 .. 1.24)\n\nWords\n-----\n  one two three four five six seven\n    \
                        eight nine ten\n";
        assert_eq!(page.finish(), expected);
    }
}
