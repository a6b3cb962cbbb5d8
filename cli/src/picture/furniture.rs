//! What stands around the section: axis, mirror, scale bar, the wedge that explains the shading, rulers.

use super::names::Rect;
use super::svg::{Text, number};
use super::tint;
use super::view::View;
use crate::case::Case;
use crate::notation::{Unit, significant};

/// Size of small words.
pub const SMALL: f64 = 11.0;

/// Axis and mirror, as dash-dotted lines that stick out of the section.
pub fn axes(view: &View) -> String {
    let height = view.height();
    let mut text = format!(r#"<path class="axis" d="M0 -10L0 {}"/>"#, number(height + 10.0));
    if view.mirror_m.is_some() {
        let (y, x) = (number(view.described_height()), view.half_width());
        text.push_str(&format!(
            r#"<path class="axis" d="M{} {y}L{} {y}"/>"#,
            number(-x),
            number(x + 10.0)
        ));
        let at = [x - 6.0, view.described_height() - 5.0];
        text.push_str(
            &Text {
                words: "mirror",
                at,
                size: SMALL,
                anchor: "end",
                turned: 0.0,
                class: "detail",
            }
            .element(),
        );
    }
    text
}

/// What the words at the mirror cover.
pub fn covered(view: &View) -> Option<Rect> {
    let (x, y) = (view.half_width(), view.described_height());
    view.mirror_m.map(|_| [x - 56.0, y - 18.0, x, y])
}

/// A length of 1, 2 or 5 times a power of ten of the case's unit, at most this share of the half width: in units.
fn round_length(view: &View, case: &Case, share: f64) -> f64 {
    let most = share * view.reach_m / case.length_unit.metres;
    let decade = 10f64.powf(most.log10().floor());
    let over = most / decade;
    decade
        * if over >= 5.0 {
            5.0
        } else if over >= 2.0 {
            2.0
        } else {
            1.0
        }
}

/// A scale bar.
pub struct ScaleBar {
    /// Its length on the page.
    pub length: f64,
    /// The bar and its words.
    pub elements: String,
}

/// The scale bar, its left end at (0, 0).
pub fn scale_bar(view: &View, case: &Case) -> ScaleBar {
    let units = round_length(view, case, 0.9);
    let length = units * case.length_unit.metres * view.scale;
    let d = format!("M0 -4L0 4M0 0L{0} 0M{0} -4L{0} 4", number(length));
    let words = format!(
        "{} {}",
        significant(units, Unit::NUMBER, 3),
        case.length_unit.name
    );
    let text = Text {
        words: &words,
        at: [0.5 * length, 18.0],
        size: SMALL,
        anchor: "middle",
        turned: 0.0,
        class: "detail",
    };
    ScaleBar {
        length,
        elements: format!(r#"<path class="bar" d="{d}"/>{}"#, text.element()),
    }
}

/// Length of the wedge.
pub const WEDGE: f64 = 250.0;
/// Height of its thick end.
const THICK: f64 = 16.0;

/// The wedge: as |B| grows, it grows thicker and darker. Its thin end at (0, 0), the thick one to the right.
pub fn wedge(top_t: f64) -> String {
    let mut text = format!(
        r#"<path class="wedge" fill="url(#ramp)" d="M0 0L{0} {1}L{0} {2}Z"/>"#,
        number(WEDGE),
        number(-0.5 * THICK),
        number(0.5 * THICK)
    );
    for quarter in 0..=4 {
        let share = f64::from(quarter) / 4.0;
        let x = share * WEDGE;
        let half = 0.5 * THICK * share;
        let tick = format!(
            "M{0} {1}L{0} {2}",
            number(x),
            number(half),
            number(half + 4.0 + 8.0 * (1.0 - share))
        );
        text.push_str(&format!(r#"<path class="bar-thin" d="{tick}"/>"#));
        let mut words = if quarter == 0 {
            "0".to_owned()
        } else {
            significant(share * top_t, Unit::TESLA, 3)
        };
        if quarter == 4 {
            words.insert_str(0, "≥ ");
        }
        let at = [x, 0.5 * THICK + 16.0];
        text.push_str(
            &Text {
                words: &words,
                at,
                size: SMALL,
                anchor: "middle",
                turned: 0.0,
                class: "detail",
            }
            .element(),
        );
    }
    let title = Text {
        words: "flux density",
        at: [0.0, -8.0],
        size: SMALL,
        anchor: "start",
        turned: 0.0,
        class: "detail",
    };
    text + &title.element()
}

/// The colours of the wedge.
pub fn ramp_definition() -> String {
    let stops: String = (0..=16)
        .map(|k| {
            let share = f64::from(k) / 16.0;
            format!(
                r#"<stop offset="{}" stop-color="{}"/>"#,
                number(share),
                tint::ramp_word(share)
            )
        })
        .collect();
    format!(r#"<linearGradient id="ramp">{stops}</linearGradient>"#)
}

/// Rulers below and right of the section: distance from the axis and height, in the case's unit.
pub fn rulers(view: &View, case: &Case) -> String {
    let unit = &case.length_unit;
    let step = round_length(view, case, 0.34);
    let mut text = String::new();
    let (width, height) = (view.half_width(), view.height());
    let y0 = height + 8.0;
    text.push_str(&format!(
        r#"<path class="bar-thin" d="M{} {2}L{} {2}"/>"#,
        number(-width),
        number(width),
        number(y0)
    ));
    let count = (view.reach_m / unit.metres / step).floor() as i64;
    for k in -count..=count {
        let units = step * k as f64;
        let x = units * unit.metres * view.scale;
        let tick = format!("M{0} {1}L{0} {2}", number(x), number(y0), number(y0 + 5.0));
        text.push_str(&format!(r#"<path class="bar-thin" d="{tick}"/>"#));
        let words = significant(units.abs(), Unit::NUMBER, 4);
        let at = [x, y0 + 17.0];
        text.push_str(
            &Text {
                words: &words,
                at,
                size: SMALL,
                anchor: "middle",
                turned: 0.0,
                class: "detail",
            }
            .element(),
        );
    }
    let words = format!("distance from the axis, {}", unit.name);
    let at = [0.0, y0 + 32.0];
    text.push_str(
        &Text {
            words: &words,
            at,
            size: SMALL,
            anchor: "middle",
            turned: 0.0,
            class: "detail",
        }
        .element(),
    );
    text + &height_ruler(view, case, step)
}

fn height_ruler(view: &View, case: &Case, step: f64) -> String {
    let unit = &case.length_unit;
    let (x0, height) = (view.half_width() + 8.0, view.height());
    let mut text = format!(
        r#"<path class="bar-thin" d="M{0} 0L{0} {1}"/>"#,
        number(x0),
        number(height)
    );
    let bottom_m = view.top_m - height / view.scale;
    let first = (bottom_m / unit.metres / step).ceil() as i64;
    let last = (view.top_m / unit.metres / step).floor() as i64;
    for k in first..=last {
        let units = step * k as f64;
        let y = (view.top_m - units * unit.metres) * view.scale;
        let tick = format!("M{0} {2}L{1} {2}", number(x0), number(x0 + 5.0), number(y));
        text.push_str(&format!(r#"<path class="bar-thin" d="{tick}"/>"#));
        let words = significant(units, Unit::NUMBER, 4);
        let at = [x0 + 8.0, y + 4.0];
        text.push_str(
            &Text {
                words: &words,
                at,
                size: SMALL,
                anchor: "start",
                turned: 0.0,
                class: "detail",
            }
            .element(),
        );
    }
    let words = format!("height, {}", unit.name);
    let at = [x0 + 46.0, 0.5 * height];
    text + &Text {
        words: &words,
        at,
        size: SMALL,
        anchor: "middle",
        turned: 90.0,
        class: "detail",
    }
    .element()
}
