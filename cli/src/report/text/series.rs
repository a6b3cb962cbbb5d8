//! Tables over the travel of a mover and over the current of a winding.

use super::page::Page;
use crate::case::Case;
use crate::notation::{Column, Unit, rounded, with_range};
use crate::report::json::{Number, Outcome, Report};

/// One column of numbers.
struct Numbers<'a> {
    head: &'a str,
    unit: Unit,
    /// Whether the ranges are shown beside it.
    ranges: bool,
    numbers: Vec<Option<Number>>,
}

/// The pull over the travel, and what each winding sees; then where the rest of the report stands.
pub fn travel(page: &mut Page, case: &Case, report: &Report) {
    let Some(travel) = &report.travel else { return };
    page.section(&format!("Travel of {}", travel.mover));
    let of = |outcome: &Outcome, pick: fn(&crate::report::json::Mover) -> Option<Number>| {
        outcome.movers.get(&travel.mover).and_then(pick)
    };
    let over = |pick: fn(&crate::report::json::Mover) -> Option<Number>| {
        report.results.iter().map(|outcome| of(outcome, pick)).collect()
    };
    let places = places(case, report);
    let columns = [
        numbers("force", Unit::NEWTON, true, over(|mover| mover.force_n)),
        numbers(
            "by co-energy",
            Unit::NEWTON,
            true,
            over(|mover| mover.force_by_coenergy_n),
        ),
        numbers("work so far", Unit::JOULE, false, over(|mover| mover.work_j)),
    ];
    table(page, &places, &columns);
    for (what, number) in [
        ("work of the field on it", &travel.work_j),
        ("change of co-energy", &travel.coenergy_change_j),
    ] {
        if let Some(number) = number {
            page.row(
                what,
                &with_range(number.value, number.low, number.high, Unit::JOULE),
            );
        }
    }
    page.paragraph(
        "At constant currents the work equals the change of co-energy; each is found from other numbers, and so is the \
         force by co-energy: a check of the force.",
    );
    let windings: Vec<&str> = report
        .results
        .first()
        .map_or(vec![], |of| of.windings.iter().map(|(n, _)| n).collect());
    for name in windings {
        page.section(&format!("Winding {name} over the travel"));
        winding_over(page, &places, report, name);
    }
    page.section("At one place");
    let shown = report
        .results
        .get(report.shown)
        .and_then(|of| of.at.travel_m)
        .unwrap_or(0.0);
    page.paragraph(&format!(
        "What follows holds at travel = {}; report.json has it for every place.",
        crate::case::length_text(shown, &case.length_unit)
    ));
}

fn winding_over(page: &mut Page, places: &Numbered, report: &Report, name: &str) {
    let own = |outcome: &Outcome, incremental: bool| {
        let matrix = if incremental {
            &outcome.incremental_inductance_h
        } else {
            &outcome.inductance_h
        };
        matrix.get(name).and_then(|row| row.get(name)).copied()
    };
    let linkage = report
        .results
        .iter()
        .map(|of| of.windings.get(name).map(|winding| winding.flux_linkage_wb))
        .collect();
    let inductance = report.results.iter().map(|of| own(of, false)).collect();
    let incremental = report.results.iter().map(|of| own(of, true)).collect();
    let columns = [
        numbers("linkage", Unit::WEBER, true, linkage),
        numbers("inductance", Unit::HENRY, true, inductance),
        numbers("incremental", Unit::HENRY, false, incremental),
    ];
    table(page, places, &columns);
}

/// Linkage over current.
pub fn linkage(page: &mut Page, report: &Report) {
    let Some(linkage) = &report.linkage else { return };
    page.section(&format!("Linkage of {} over its current", linkage.winding));
    let over = |pick: fn(&crate::report::json::LinkagePoint) -> Number| -> Vec<Option<Number>> {
        linkage.points.iter().map(|point| Some(pick(point))).collect()
    };
    let currents = over(|point| point.current_a);
    let column = column(&currents, Unit::AMPERE);
    let places = Numbered {
        head: format!("current, {}", column.unit),
        values: currents
            .iter()
            .flatten()
            .map(|number| rounded(number.value * column.scale, 5))
            .collect(),
    };
    let columns = [
        numbers("linkage", Unit::WEBER, true, over(|point| point.flux_linkage_wb)),
        numbers("inductance", Unit::HENRY, true, over(|point| point.inductance_h)),
        numbers(
            "incremental",
            Unit::HENRY,
            true,
            over(|point| point.incremental_inductance_h),
        ),
    ];
    table(page, &places, &columns);
}

/// The first column.
struct Numbered {
    head: String,
    values: Vec<String>,
}

fn places(case: &Case, report: &Report) -> Numbered {
    let unit = &case.length_unit;
    let at = |outcome: &Outcome| {
        outcome
            .at
            .travel_m
            .map(|at| rounded(at / unit.metres, 5))
            .unwrap_or_default()
    };
    Numbered {
        head: format!("travel, {}", unit.name),
        values: report.results.iter().map(at).collect(),
    }
}

fn numbers(head: &str, unit: Unit, ranges: bool, numbers: Vec<Option<Number>>) -> Numbers<'_> {
    Numbers {
        head,
        unit,
        ranges,
        numbers,
    }
}

fn column(numbers: &[Option<Number>], unit: Unit) -> Column {
    let largest = numbers
        .iter()
        .flatten()
        .fold(0.0f64, |most, number| most.max(number.value.abs()));
    Column::of(largest, unit)
}

/// Columns without any number are left out.
fn table(page: &mut Page, places: &Numbered, columns: &[Numbers<'_>]) {
    let mut heads = vec![places.head.clone()];
    let mut lines: Vec<Vec<String>> = places.values.iter().map(|value| vec![value.clone()]).collect();
    for of in columns.iter().filter(|of| of.numbers.iter().any(Option::is_some)) {
        let column = column(&of.numbers, of.unit);
        heads.push(format!("{}, {}", of.head, column.unit));
        if of.ranges {
            heads.push("range".to_owned());
        }
        for (line, number) in lines.iter_mut().zip(&of.numbers) {
            let cells = number.map_or([String::new(), String::new()], |n| {
                column.with_range(n.value, n.low, n.high)
            });
            line.extend(cells.into_iter().take(if of.ranges { 2 } else { 1 }));
        }
    }
    page.table(&heads, &lines);
}
