//! `[[traverse]]`, `[[search_coil]]`, `[stray]`, `[accuracy]`: where to look, and how sharply.

use std::time::Duration;

use mesher::Point;
use solver::problem::{SearchCoil, Stray, Traverse};
use solver::solve::{Kind, Settings};

use super::expression::Dimension;
use super::model::CaseFile;
use super::model::located::Located;
use super::model::quantity::{Amount, Quantity, Range, Spacing};
use super::model::reading::{AccuracyKeys, KindKey, SearchCoilKeys, StrayKeys, TraverseKeys};
use super::values::Values;

/// Most points of a traverse or a range.
const MOST_POINTS: usize = 100_000;
/// Distance at which the stray field is looked at unless said, m (common practice, no source).
const USUAL_STRAY_DISTANCE_M: f64 = 0.3;
/// Flux density that people with implanted devices should not be exposed to, T (ICNIRP 2009, from memory).
const IMPLANT_LIMIT_T: f64 = 0.5e-3;
/// Accuracy goal unless said.
const USUAL_GOAL: f64 = 0.01;
/// Most triangles unless said.
const USUAL_MOST_TRIANGLES: usize = 2_000_000;
/// Fewest and most triangles that may be asked for.
const TRIANGLES: [usize; 2] = [100, 1_000_000_000];

/// Reads a traverse.
pub fn traverse(keys: &Located<TraverseKeys>, values: &mut Values) -> Option<Traverse> {
    let name = &keys.value.name;
    let points = match (&keys.value.line, &keys.value.at) {
        (Some(line), None) => {
            let from = values.point(&line.value.from, "from");
            let to = values.point(&line.value.to, "to");
            let count = values.whole(&line.value.points, "points", 2, MOST_POINTS);
            let (from, to, count) = (from?, to?, count?);
            check_radius(from, &line.value.from[0], values)?;
            check_radius(to, &line.value.to[0], values)?;
            (0..count).map(|index| between(from, to, index, count)).collect()
        }
        (None, Some(at)) => {
            let point = values.point(at, "at")?;
            check_radius(point, &at[0], values)?;
            vec![point]
        }
        _ => {
            let message = format!("the traverse `{}` needs either `line` or `at`", name.value);
            values.fault(&name.span, message);
            return None;
        }
    };
    Some(Traverse {
        name: name.value.clone(),
        points,
    })
}

/// The point number `index` of `count` on a straight line.
fn between(from: Point, to: Point, index: usize, count: usize) -> Point {
    // Counts are far below 2^53.
    let (done, left) = (index as f64, (count - 1 - index) as f64);
    let mix = |from: f64, to: f64| (left * from + done * to) / (done + left);
    Point {
        r: mix(from.r, to.r),
        z: mix(from.z, to.z),
    }
}

fn check_radius(point: Point, amount: &Amount, values: &mut Values) -> Option<()> {
    if point.r >= 0.0 {
        return Some(());
    }
    let message = format!(
        "a point cannot lie at r = {}; only r >= 0 is described",
        values.length_text(point.r)
    );
    values.fault(&amount.span, message);
    None
}

/// Reads a search coil.
pub fn search_coil(keys: &Located<SearchCoilKeys>, values: &mut Values) -> Option<SearchCoil> {
    let at = values.point(&keys.value.at.value, "at");
    let turns = match &keys.value.turns {
        Some(turns) => {
            let number = values.amount(turns, "turns", Dimension::NUMBER);
            if number == Some(0.0) {
                values.fault(
                    &turns.span,
                    format!("the search coil `{}` has zero turns", keys.value.name.value),
                );
                return None;
            }
            number
        }
        None => Some(1.0),
    };
    let (at, turns) = (at?, turns?);
    if at.r <= 0.0 {
        let message = format!(
            "the search coil `{}` needs a radius of more than zero",
            keys.value.name.value
        );
        values.fault(&keys.value.at.span, message);
        return None;
    }
    Some(SearchCoil {
        name: keys.value.name.value.clone(),
        at,
        turns,
    })
}

/// What is wanted of the stray field: always looked at in open surroundings, never within a wall. Outer `None`
/// after a fault.
#[expect(
    clippy::option_option,
    reason = "a fault and no stray field are different things"
)]
pub fn stray(file: &CaseFile, walled: bool, values: &mut Values) -> Option<Option<Stray>> {
    let keys = file.stray.as_ref();
    if walled {
        if let Some(keys) = keys {
            values.fault(&keys.span, "there is no stray field outside a wall");
            return None;
        }
        return Some(None);
    }
    let none = StrayKeys {
        distance: None,
        limit: None,
    };
    let keys = keys.map_or(&none, |keys| &keys.value);
    let distance_m = match &keys.distance {
        Some(distance) => values.not_negative(distance, "distance", Dimension::LENGTH),
        None => Some(USUAL_STRAY_DISTANCE_M),
    };
    let limit_t = match &keys.limit {
        Some(limit) => values.positive(limit, "limit", Dimension::FLUX_DENSITY),
        None => Some(IMPLANT_LIMIT_T),
    };
    Some(Some(Stray {
        distance_m: distance_m?,
        limit_t: limit_t?,
    }))
}

/// Reads `[accuracy]`.
pub fn accuracy(keys: Option<&AccuracyKeys>, values: &mut Values) -> Option<Settings> {
    let goal = match keys.and_then(|keys| keys.goal.as_ref()) {
        Some(amount) => match values.positive(amount, "goal", Dimension::NUMBER) {
            Some(goal) if goal >= 1.0 => {
                let message = format!("a goal of {goal} is {} %; it must be below 100 %", goal * 100.0);
                values.fault_with_help(&amount.span, message, "write it in per cent: goal = \"1 %\"");
                None
            }
            goal => goal,
        },
        None => Some(USUAL_GOAL),
    };
    let of = match keys.and_then(|keys| keys.of.as_ref()) {
        Some(of) => {
            let kinds: Vec<Option<Kind>> = of.value.iter().map(|kind| kind_of(kind, values)).collect();
            kinds.into_iter().collect()
        }
        None => Some(vec![Kind::Inductance, Kind::Force]),
    };
    let max_triangles = match keys.and_then(|keys| keys.max_triangles.as_ref()) {
        Some(amount) => values.whole(amount, "max_triangles", TRIANGLES[0], TRIANGLES[1]),
        None => Some(USUAL_MOST_TRIANGLES),
    };
    let max_time = match keys.and_then(|keys| keys.max_time.as_ref()) {
        Some(amount) => values
            .positive(amount, "max_time", Dimension::TIME)
            .map(|seconds| {
                // Too long for a clock is no limit.
                Duration::try_from_secs_f64(seconds).ok()
            }),
        None => Some(None),
    };
    Some(Settings {
        goal: goal?,
        of: of?,
        max_triangles: max_triangles?,
        max_time: max_time?,
        fineness: solver::solve::USUAL_FINENESS,
    })
}

fn kind_of(kind: &Located<KindKey>, values: &mut Values) -> Option<Kind> {
    match kind.value {
        KindKey::Inductance => Some(Kind::Inductance),
        KindKey::Linkage => Some(Kind::Linkage),
        KindKey::Energy => Some(Kind::Energy),
        KindKey::Force => Some(Kind::Force),
        KindKey::Coupling => Some(Kind::Coupling),
        KindKey::Traverse => Some(Kind::Traverse),
        KindKey::Voltage | KindKey::Impedance | KindKey::Loss => {
            let message = "this kind of quantity belongs to the other regimes; static knows inductance, linkage, energy, force, coupling, traverse";
            values.fault(&kind.span, message);
            None
        }
    }
}

/// The values of a range, ends included.
pub fn range(
    range: &Located<Range>,
    key: &str,
    dimension: Dimension,
    values: &mut Values,
) -> Option<Vec<f64>> {
    match &range.value {
        Range::One(quantity) => {
            let amount = Amount {
                value: Quantity::clone(quantity),
                span: range.span.clone(),
            };
            values.amount(&amount, key, dimension).map(|value| vec![value])
        }
        Range::List(list) => {
            let all: Vec<Option<f64>> = list
                .iter()
                .map(|amount| values.amount(amount, key, dimension))
                .collect();
            all.into_iter().collect()
        }
        Range::Points(keys) => {
            let from = values.amount(&keys.from, "from", dimension);
            let to = values.amount(&keys.to, "to", dimension);
            let count = values.whole(&keys.points, "points", 2, MOST_POINTS);
            let (from, to, count) = (from?, to?, count?);
            let log = keys.spacing == Some(Spacing::Log);
            if log && from * to <= 0.0 {
                values.fault(&range.span, "ends with log spacing must both be more than zero");
                return None;
            }
            let share = |index: usize| index as f64 / (count - 1) as f64;
            Some(
                (0..count)
                    .map(|index| match index {
                        _ if index + 1 == count => to,
                        _ if log => from * (to / from).powf(share(index)),
                        _ => from + share(index) * (to - from),
                    })
                    .collect(),
            )
        }
    }
}
