//! The page: title, section, scale, words, put together.

use super::furniture;
use super::shade::Shade;
use super::svg::{Text, escaped, number, text_width};
use super::tint::{self, INK, PAPER};
use super::view::View;
use crate::case::Case;

/// Blank around everything.
const MARGIN: f64 = 30.0;
/// Sizes of title, subtitle and words.
const TITLE: f64 = 19.0;
const WORDS: f64 = 12.0;
/// Narrowest page.
const NARROWEST: f64 = 560.0;

/// What stands beside the section.
#[derive(Clone, Copy, Debug)]
pub struct Beside {
    /// Room left of it.
    pub left: f64,
    /// Room right of it, for a ruler.
    pub right: f64,
    /// How far down the names left of it reach, from the top of the section.
    pub bottom: f64,
}

/// A picture being composed. Coordinates within the section: x from the axis, y from the top of the window.
#[derive(Debug)]
pub struct Page<'a> {
    case: &'a Case,
    view: &'a View,
    /// Drawn once, shown in every image of the described half.
    half: String,
    /// Drawn once over all.
    over: String,
    subtitle: String,
    words: Vec<String>,
    hatched: bool,
}

impl<'a> Page<'a> {
    pub fn new(case: &'a Case, view: &'a View) -> Self {
        Self {
            case,
            view,
            half: String::new(),
            over: String::new(),
            subtitle: String::new(),
            words: Vec::new(),
            hatched: false,
        }
    }

    /// The field under the drawing.
    pub fn field(&mut self, shade: Option<&Shade>, lines: Option<String>) {
        if let Some(shade) = shade {
            self.half.push_str(&format!(
                r#"<image x="0" y="0" width="{}" height="{}" preserveAspectRatio="none" href="data:image/png;base64,{}"/>"#,
                number(self.view.half_width()),
                number(self.view.described_height()),
                shade.png_base64
            ));
        }
        if let Some(lines) = lines {
            self.half.push_str(&format!(
                r#"<path class="flux-halo" d="{lines}"/><path class="flux" d="{lines}"/>"#
            ));
        }
    }

    /// A part's area.
    pub fn part(&mut self, path: &str, class: &str) {
        self.hatched |= class == "part-winding";
        self.half.push_str(&format!(
            r#"<path class="{class}" fill-rule="evenodd" d="{path}"/>"#
        ));
    }

    /// The lines of the drawing.
    pub fn outlines(&mut self, path: &str) {
        self.half
            .push_str(&format!(r#"<path class="outline" d="{path}"/>"#));
    }

    /// What is drawn once over everything.
    pub fn over(&mut self, elements: &str) {
        self.over.push_str(elements);
    }

    /// The line under the title.
    pub fn subtitle(&mut self, words: String) {
        self.subtitle = words;
    }

    /// A sentence under the section.
    pub fn say(&mut self, words: String) {
        self.words.push(words);
    }

    /// The whole SVG. `top_t`: |B| at the thick end of the wedge.
    pub fn finish(self, Beside { left, right, bottom }: Beside, top_t: Option<f64>) -> String {
        let view = self.view;
        let (half, height) = (view.half_width(), view.height());
        let needed = 2.0 * half + left + right + 2.0 * MARGIN;
        let width = needed.max(NARROWEST);
        let title = wrapped(&self.case.title, TITLE, width - 2.0 * MARGIN);
        let subtitle = wrapped(&self.subtitle, WORDS, width - 2.0 * MARGIN);
        let head = MARGIN + 1.25 * TITLE * title.len() as f64 + 1.3 * WORDS * subtitle.len() as f64 + 22.0;
        let axis = MARGIN + left + half + 0.5 * (width - needed);

        let mut body = String::new();
        let mut y = MARGIN + TITLE;
        for (lines, size, class) in [(&title, TITLE, "title"), (&subtitle, WORDS, "detail")] {
            for line in lines {
                let text = Text {
                    words: line,
                    at: [MARGIN, y],
                    size,
                    anchor: "start",
                    turned: 0.0,
                    class,
                };
                body.push_str(&text.element());
                y += 1.27 * size;
            }
            y -= 2.0;
        }
        body.push_str(&self.section(axis, head));
        let mut foot = head + height.max(bottom) + if right > 0.0 { 62.0 } else { 34.0 };
        if let Some(top_t) = top_t {
            let bar = furniture::scale_bar(view, self.case);
            body.push_str(&placed([axis - half, foot], &bar.elements));
            // The last tick's words stick out of the wedge.
            let room = furniture::WEDGE + 26.0;
            let mut x = (axis + half).min(width - MARGIN) - room;
            if x < axis - half + bar.length + 30.0 {
                // Too narrow for both side by side.
                foot += 52.0;
                x = (axis - half).min(width - MARGIN - room);
            }
            body.push_str(&placed([x, foot], &furniture::wedge(top_t)));
            foot += 54.0;
        }
        let sentences = self
            .words
            .iter()
            .flat_map(|words| wrapped(words, WORDS, width - 2.0 * MARGIN));
        for line in sentences {
            let text = Text {
                words: &line,
                at: [MARGIN, foot],
                size: WORDS,
                anchor: "start",
                turned: 0.0,
                class: "detail",
            };
            body.push_str(&text.element());
            foot += 1.45 * WORDS;
        }
        self.whole(width, foot + 0.4 * MARGIN, &body)
    }

    /// The full section: the described half, its images, and what lies over them.
    fn section(&self, axis: f64, top: f64) -> String {
        let (half, described, height) = (
            self.view.half_width(),
            self.view.described_height(),
            self.view.height(),
        );
        let mut images = vec!["", r#" transform="scale(-1 1)""#];
        let below = format!(r#" transform="matrix(1 0 0 -1 0 {})""#, number(2.0 * described));
        let below_left = format!(r#" transform="matrix(-1 0 0 -1 0 {})""#, number(2.0 * described));
        if self.view.mirror_m.is_some() {
            images.extend([below.as_str(), below_left.as_str()]);
        }
        let uses: String = images
            .iter()
            .map(|image| format!(r##"<use href="#half"{image}/>"##))
            .collect();
        let inner = format!(
            r#"<rect x="{}" y="0" width="{}" height="{}" fill="{}"/>{uses}{}"#,
            number(-half),
            number(2.0 * half),
            number(height),
            tint::ramp_word(0.0),
            self.over
        );
        placed([axis, top], &inner)
    }

    fn whole(&self, width: f64, height: f64, body: &str) -> String {
        let [w, h] = [width, height].map(number);
        let hatch = if self.hatched {
            format!(
                r#"<pattern id="turns" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)"><rect width="6" height="6" fill="{}"/><path d="M0 0L0 6" stroke="{}" stroke-width="1.6"/></pattern>"#,
                tint::ramp_word(0.08),
                tint::ramp_word(0.5)
            )
        } else {
            String::new()
        };
        let window = format!(
            r#"<clipPath id="window"><rect x="0" y="0" width="{}" height="{}"/></clipPath>"#,
            number(self.view.half_width()),
            number(self.view.described_height())
        );
        format!(
            concat!(
                r#"<svg xmlns="http://www.w3.org/2000/svg" width="{w}" height="{h}" viewBox="0 0 {w} {h}" font-family="sans-serif">"#,
                "<title>{title}</title><style>{style}</style><defs>{ramp}{hatch}{window}",
                r##"<g id="half" clip-path="url(#window)">{half}</g></defs>"##,
                r#"<rect width="{w}" height="{h}" fill="{paper}"/>{body}</svg>"#,
                "\n"
            ),
            w = w,
            h = h,
            title = escaped(&self.case.title),
            style = style(),
            ramp = furniture::ramp_definition(),
            hatch = hatch,
            window = window,
            half = self.half,
            paper = PAPER,
            body = body
        )
    }
}

fn placed([x, y]: [f64; 2], elements: &str) -> String {
    format!(
        r#"<g transform="translate({} {})">{elements}</g>"#,
        number(x),
        number(y)
    )
}

/// Lines of words that fit a width.
fn wrapped(text: &str, size: f64, width: f64) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    for word in text.split_whitespace() {
        match lines.last_mut() {
            Some(line) if size * (text_width(line) + 0.38 + text_width(word)) <= width => {
                line.push(' ');
                line.push_str(word);
            }
            _ => lines.push(word.to_owned()),
        }
    }
    lines
}

fn style() -> String {
    let halo = format!("paint-order:stroke;stroke:{PAPER};stroke-linejoin:round;");
    [
        format!("text{{fill:{INK}}}"),
        ".title{font-weight:bold}".to_owned(),
        format!(".name{{font-weight:bold;{halo}stroke-width:3.2px;stroke-opacity:.85}}"),
        format!(".detail{{{halo}stroke-width:2.6px;stroke-opacity:.8}}"),
        format!(".flux-value{{{halo}stroke-width:2.8px}}"),
        format!(".flux{{fill:none;stroke:{INK};stroke-width:.75px;stroke-linejoin:round}}"),
        format!(".flux-halo{{fill:none;stroke:{PAPER};stroke-width:2.2px;stroke-opacity:.4}}"),
        format!(".outline{{fill:none;stroke:{INK};stroke-width:1.3px;stroke-linejoin:round;stroke-linecap:round}}"),
        format!(".axis{{fill:none;stroke:{INK};stroke-width:.8px;stroke-dasharray:12 3 2 3}}"),
        format!(".halo-line{{fill:none;stroke:{PAPER};stroke-width:3.4px;stroke-opacity:.85}}"),
        format!(".leader{{fill:none;stroke:{INK};stroke-width:.9px}}"),
        format!(".leader-end{{fill:{INK};stroke:{PAPER};stroke-width:1px}}"),
        format!(".mark{{fill:{PAPER};stroke:{INK};stroke-width:1.3px}}"),
        format!(".mark-line{{fill:none;stroke:{INK};stroke-width:1.5px;stroke-linecap:round;stroke-linejoin:round}}"),
        format!(".mark-dot{{fill:{INK}}}"),
        format!(".bar{{fill:none;stroke:{INK};stroke-width:1.6px}}"),
        format!(".bar-thin{{fill:none;stroke:{INK};stroke-width:.8px}}"),
        format!(".wedge{{stroke:{INK};stroke-width:.8px;stroke-linejoin:round}}"),
        ".part-winding{fill:url(#turns)}".to_owned(),
        format!(".part-magnet{{fill:{}}}", tint::ramp_word(0.42)),
        format!(".part-magnetic{{fill:{}}}", tint::ramp_word(0.26)),
        format!(".part-plain{{fill:{}}}", tint::ramp_word(0.07)),
    ]
    .concat()
}
