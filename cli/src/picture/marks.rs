//! Marks on the parts: the sense of windings, the direction of magnets, what can move.

use solver::problem::{MagneticLaw, MirrorCurrents, Problem, Turns, Winding};

use super::mask::Mask;
use super::names::{Rect, around};
use super::outline::{PartShape, compact};
use super::svg::number;
use super::view::View;

/// Largest radius of a winding's mark.
const LARGEST: f64 = 9.0;
/// A mark smaller than this is left out.
const SMALLEST: f64 = 1.3;

/// A mark on the right half; the left one follows from it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Mark {
    at: [f64; 2],
    kind: Kind,
    radius: f64,
}

#[derive(Clone, Copy, Debug, PartialEq)]
enum Kind {
    /// Current along phi, right of the axis into the page.
    Current { into_page: bool },
    /// A magnet, magnetised along this direction of the page.
    Magnet([f64; 2]),
    /// Can move along the axis.
    Mover,
}

/// Which image of the described half a mark is drawn in.
#[derive(Clone, Copy, Debug)]
struct Image {
    left: bool,
    below: bool,
}

/// Sense of the turns of a winding's region: their sign.
fn sense(winding: &Winding, region: usize) -> f64 {
    let at = winding.regions.iter().position(|&of| of == region);
    match (&winding.turns, at) {
        (Turns::Total(turns), Some(_)) => turns.signum(),
        (Turns::PerRegion(turns), Some(at)) => turns.get(at).copied().unwrap_or(0.0).signum(),
        (_, None) => 0.0,
    }
}

/// The marks of all parts. `currents`: terminal current of each winding; where it is not known or 0, a positive one.
pub fn marks(
    problem: &Problem,
    currents: &[f64],
    movers: bool,
    parts: &[PartShape],
    mask: &Mask,
    view: &View,
) -> Vec<Mark> {
    let mut marks = Vec::new();
    for (index, part) in parts.iter().enumerate() {
        let compact = compact(part).map(|(middle, half)| (view.page(middle), half * view.scale));
        let Some((at, half)) = compact.or_else(|| mask.heart(index)) else {
            continue;
        };
        let radius = LARGEST.min(0.8 * half);
        let winding = problem
            .windings
            .iter()
            .enumerate()
            .find(|(_, winding)| winding.regions.contains(&part.region));
        if let Some((number, winding)) = winding {
            let current = currents
                .get(number)
                .copied()
                .filter(|current| *current != 0.0)
                .unwrap_or(1.0);
            let into_page = sense(winding, part.region) * current > 0.0;
            marks.push(Mark {
                at,
                kind: Kind::Current { into_page },
                radius,
            });
        } else if let Some(MagneticLaw::Magnet {
            remanence_t: [r, z], ..
        }) = problem.regions.get(part.region).map(|region| &region.law)
        {
            let size = r.hypot(*z);
            if size > 0.0 {
                let direction = [r / size, -z / size];
                marks.push(Mark {
                    at,
                    kind: Kind::Magnet(direction),
                    radius: 30f64.min(0.8 * half),
                });
            }
        } else if movers
            && problem
                .movers
                .iter()
                .any(|mover| mover.regions.contains(&part.region))
        {
            marks.push(Mark {
                at,
                kind: Kind::Mover,
                radius: 26f64.min(0.8 * half),
            });
        }
    }
    marks.retain(|mark| mark.radius >= SMALLEST);
    marks
}

/// What the marks cover left and right of the axis.
pub fn covered(marks: &[Mark]) -> Vec<Rect> {
    let sides = marks.iter().flat_map(|mark| {
        let size = 2.0 * mark.radius + 4.0;
        let [width, height] = match mark.kind {
            Kind::Current { .. } => [size, size],
            Kind::Magnet([x, y]) => [size * x.abs() + 14.0, size * y.abs() + 14.0],
            Kind::Mover => [14.0, size],
        };
        [mark.at, [-mark.at[0], mark.at[1]]].map(|at| around(at, width, height))
    });
    sides.collect()
}

/// The marks in all images of the described half.
pub fn draw(marks: &[Mark], problem: &Problem, view: &View) -> String {
    let mut text = String::new();
    for mark in marks {
        for left in [false, true] {
            text.push_str(&one(mark, Image { left, below: false }, problem, view));
            if view.mirror_m.is_some() {
                text.push_str(&one(mark, Image { left, below: true }, problem, view));
            }
        }
    }
    text
}

fn one(mark: &Mark, image: Image, problem: &Problem, view: &View) -> String {
    let x = if image.left { -mark.at[0] } else { mark.at[0] };
    let y = if image.below {
        2.0 * view.described_height() - mark.at[1]
    } else {
        mark.at[1]
    };
    let opposite = problem.mirror == Some(MirrorCurrents::Opposite);
    match mark.kind {
        Kind::Current { into_page } => current(
            [x, y],
            mark.radius,
            into_page ^ image.left ^ (image.below && opposite),
        ),
        Kind::Magnet([dx, dy]) => {
            let dx = if image.left { -dx } else { dx };
            // With currents of the same sense the axial part is even about the mirror and the radial part odd.
            let sign = match (image.below, opposite) {
                (false, _) => [1.0, 1.0],
                (true, false) => [-1.0, 1.0],
                (true, true) => [1.0, -1.0],
            };
            arrow([x, y], mark.radius, [dx * sign[0], dy * sign[1]], false)
        }
        Kind::Mover => arrow([x, y], mark.radius, [0.0, -1.0], true),
    }
}

/// A cross (current into the page) or a dot (out of it).
fn current([x, y]: [f64; 2], radius: f64, into_page: bool) -> String {
    let [cx, cy, r] = [x, y, radius].map(number);
    let ring = format!(r#"<circle class="mark" cx="{cx}" cy="{cy}" r="{r}"/>"#);
    if into_page {
        let d = 0.62 * radius;
        let ends = [x - d, y - d, x + d, y + d, x - d, y + d, x + d, y - d].map(number);
        let [a, b, c, e, f, g, h, i] = &ends;
        format!(r#"{ring}<path class="mark-line" d="M{a} {b}L{c} {e}M{f} {g}L{h} {i}"/>"#)
    } else {
        format!(
            r#"{ring}<circle class="mark-dot" cx="{cx}" cy="{cy}" r="{}"/>"#,
            number(0.34 * radius)
        )
    }
}

/// An arrow through a point, with a head at one end or both.
fn arrow([x, y]: [f64; 2], half: f64, [dx, dy]: [f64; 2], both: bool) -> String {
    let head = (0.45 * half).min(7.0);
    let mut d = format!(
        "M{} {}L{} {}",
        number(x - half * dx),
        number(y - half * dy),
        number(x + half * dx),
        number(y + half * dy)
    );
    for sign in if both { &[1.0, -1.0][..] } else { &[1.0][..] } {
        let (tx, ty) = (x + sign * half * dx, y + sign * half * dy);
        let (bx, by) = (-sign * head * dx, -sign * head * dy);
        let side = |s: f64| [tx + bx - 0.5 * s * by, ty + by + 0.5 * s * bx].map(number);
        let ([ax, ay], [cx, cy]) = (side(1.0), side(-1.0));
        d.push_str(&format!("M{ax} {ay}L{} {}L{cx} {cy}", number(tx), number(ty)));
    }
    format!(r#"<path class="halo-line" d="{d}"/><path class="mark-line" d="{d}"/>"#)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn positive_current_is_a_cross_right_and_a_dot_left() {
        let case = crate::sample::case();
        let view = View {
            scale: 1e4,
            reach_m: 0.02,
            top_m: 0.02,
            bottom_m: 0.0,
            mirror_m: None,
        };
        let mark = Mark {
            at: [50.0, 50.0],
            kind: Kind::Current { into_page: true },
            radius: 9.0,
        };
        let drawn = |left| one(&mark, Image { left, below: false }, &case.problem, &view);
        assert!(drawn(false).contains("mark-line") && !drawn(false).contains("mark-dot"));
        assert!(drawn(true).contains("mark-dot") && drawn(true).contains(r#"cx="-50""#));
    }

    #[test]
    fn an_opposite_mirror_turns_the_image() {
        let mut case = crate::sample::case();
        let view = View {
            scale: 1e4,
            reach_m: 0.02,
            top_m: 0.02,
            bottom_m: 0.0,
            mirror_m: Some(0.0),
        };
        let mark = Mark {
            at: [50.0, 50.0],
            kind: Kind::Current { into_page: true },
            radius: 9.0,
        };
        let below = Image {
            left: false,
            below: true,
        };
        case.problem.mirror = Some(MirrorCurrents::Same);
        assert!(one(&mark, below, &case.problem, &view).contains("mark-line"));
        case.problem.mirror = Some(MirrorCurrents::Opposite);
        let drawn = one(&mark, below, &case.problem, &view);
        assert!(
            drawn.contains("mark-dot") && drawn.contains(r#"cy="350""#),
            "{drawn}"
        );
    }

    #[test]
    fn negative_turns_of_one_region_turn_its_mark() {
        let mut winding = crate::sample::case().problem.windings[0].clone();
        winding.regions = vec![4, 7];
        winding.turns = Turns::PerRegion(vec![10.0, -10.0]);
        assert_eq!([4, 7, 1].map(|region| sense(&winding, region)), [1.0, -1.0, 0.0]);
    }
}
