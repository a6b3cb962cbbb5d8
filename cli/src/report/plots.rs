//! Plots of the report: pull over travel, linkage over current.

use super::json::{LinkageOverCurrent, Mover, Number, Outcome, Report, Stretch};
use crate::case::Case;
use crate::notation::{Column, Unit};
use crate::plot::{Plot, PlotPoint};

/// `travel-NAME.svg`: force on the mover over its travel; `None` where no place has a force.
pub fn travel(case: &Case, report: &Report, travel: &Stretch) -> Option<String> {
    let unit = &case.length_unit;
    let over = |pick: fn(&Mover) -> Option<Number>| -> Vec<(f64, Number)> {
        let at = |of: &Outcome| {
            Some((
                of.at.travel_m? / unit.metres,
                pick(of.movers.get(&travel.mover)?)?,
            ))
        };
        report.results.iter().filter_map(at).collect()
    };
    let (forces, checks) = (
        over(|mover| mover.force_n),
        over(|mover| mover.force_by_coenergy_n),
    );
    if forces.is_empty() {
        return None;
    }
    let column = column(forces.iter().map(|(_, force)| force), Unit::NEWTON);
    let check = if checks.is_empty() {
        ""
    } else {
        "; diamonds: force by differences of the co-energy"
    };
    let plot = Plot {
        title: case.title.clone(),
        subtitle: format!("Line: axial force, + is up; band: its range{check}"),
        across: format!("travel, {}", unit.name),
        up: format!("force on {}, {}", travel.mover, column.unit),
        points: points(&forces, &column),
        checks: checks
            .iter()
            .map(|(x, force)| [*x, force.value * column.scale])
            .collect(),
    };
    Some(plot.svg())
}

/// `linkage-NAME.svg`: flux linkage over current.
pub fn linkage(case: &Case, linkage: &LinkageOverCurrent) -> String {
    let current = column(linkage.points.iter().map(|point| &point.current_a), Unit::AMPERE);
    let numbers: Vec<(f64, Number)> = linkage
        .points
        .iter()
        .map(|point| (point.current_a.value * current.scale, point.flux_linkage_wb))
        .collect();
    let column = column(numbers.iter().map(|(_, linkage)| linkage), Unit::WEBER);
    let plot = Plot {
        title: case.title.clone(),
        subtitle: "Line: flux linkage from everything; band: its range".to_owned(),
        across: format!("current in {}, {}", linkage.winding, current.unit),
        up: format!("flux linkage, {}", column.unit),
        points: points(&numbers, &column),
        checks: Vec::new(),
    };
    plot.svg()
}

fn column<'a>(numbers: impl Iterator<Item = &'a Number>, unit: Unit) -> Column {
    Column::of(
        numbers.fold(0.0, |most, number| most.max(number.value.abs())),
        unit,
    )
}

fn points(numbers: &[(f64, Number)], column: &Column) -> Vec<PlotPoint> {
    let point = |(x, of): &(f64, Number)| PlotPoint {
        x: *x,
        y: of.value * column.scale,
        low: of.low * column.scale,
        high: of.high * column.scale,
    };
    numbers.iter().map(point).collect()
}
