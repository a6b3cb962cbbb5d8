//! Traverses, travels and linkage curves as tables for spreadsheets and plotting programs: SI throughout, heads name
//! the unit, each number has its low and high in the columns after it.

use super::json::{LinkageOverCurrent, Number, Outcome, Report, Stretch, TraversePoint};

/// Head of a column, and what stands in it.
type Column = (&'static str, fn(&TraversePoint) -> Number);

/// `traverse-NAME.csv`: one line per point, each number with its low and high in the columns after it. Heads name
/// the unit. SI throughout.
pub fn traverse(points: &[TraversePoint]) -> Result<Vec<u8>, csv::Error> {
    let mut table = csv::Writer::from_writer(Vec::new());
    let columns: [Column; 7] = [
        ("b_r_t", |point| point.b_r_t),
        ("b_z_t", |point| point.b_z_t),
        ("b_t", |point| point.b_t),
        ("h_r_a_per_m", |point| point.h_r_a_per_m),
        ("h_z_a_per_m", |point| point.h_z_a_per_m),
        ("j_a_per_m2", |point| point.j_a_per_m2),
        ("flux_wb", |point| point.flux_wb),
    ];
    let mut head = vec!["r_m".to_owned(), "z_m".to_owned(), "region".to_owned()];
    for (name, _) in columns {
        head.extend([name.to_owned(), format!("{name}_low"), format!("{name}_high")]);
    }
    table.write_record(&head)?;
    for point in points {
        let mut line = vec![
            point.r_m.to_string(),
            point.z_m.to_string(),
            point.region.clone().unwrap_or_default(),
        ];
        for (_, pick) in columns {
            let number = pick(point);
            line.extend([number.value, number.low, number.high].map(|part| format!("{part:e}")));
        }
        table.write_record(&line)?;
    }
    finished(table)
}

/// `travel-NAME.csv`: one line per place. Numbers that are absent at a place leave their cells empty.
pub fn travel(report: &Report, travel: &Stretch) -> Result<Vec<u8>, csv::Error> {
    type Pick<'a> = Box<dyn Fn(&Outcome) -> Option<Number> + 'a>;
    let mover = travel.mover.as_str();
    let mut columns: Vec<(String, Pick<'_>)> = vec![
        (
            "force_n".to_owned(),
            Box::new(move |of| of.movers.get(mover)?.force_n),
        ),
        (
            "force_by_coenergy_n".to_owned(),
            Box::new(move |of| of.movers.get(mover)?.force_by_coenergy_n),
        ),
        (
            "work_j".to_owned(),
            Box::new(move |of| of.movers.get(mover)?.work_j),
        ),
        ("coenergy_j".to_owned(), Box::new(|of| of.coenergy_j)),
    ];
    let windings = report
        .results
        .first()
        .map(|of| of.windings.iter().map(|(name, _)| name));
    for name in windings.into_iter().flatten() {
        columns.push((
            format!("{name}.flux_linkage_wb"),
            Box::new(move |of| Some(of.windings.get(name)?.flux_linkage_wb)),
        ));
        columns.push((
            format!("{name}.inductance_h"),
            Box::new(move |of| of.inductance_h.get(name)?.get(name).copied()),
        ));
        columns.push((
            format!("{name}.incremental_inductance_h"),
            Box::new(move |of| of.incremental_inductance_h.get(name)?.get(name).copied()),
        ));
    }
    columns.retain(|(_, pick)| report.results.iter().any(|of| pick(of).is_some()));
    let mut table = csv::Writer::from_writer(Vec::new());
    let heads = columns.iter().flat_map(|(name, _)| triple_heads(name));
    table.write_record(std::iter::once("travel_m".to_owned()).chain(heads))?;
    for outcome in &report.results {
        let at = outcome
            .at
            .travel_m
            .map(|at| format!("{at:e}"))
            .unwrap_or_default();
        let cells = columns.iter().flat_map(|(_, pick)| triple(pick(outcome)));
        table.write_record(std::iter::once(at).chain(cells))?;
    }
    finished(table)
}

/// `linkage-NAME.csv`: one line per current.
pub fn linkage(linkage: &LinkageOverCurrent) -> Result<Vec<u8>, csv::Error> {
    let mut table = csv::Writer::from_writer(Vec::new());
    let names = ["flux_linkage_wb", "inductance_h", "incremental_inductance_h"];
    let heads = names.into_iter().flat_map(triple_heads);
    table.write_record(std::iter::once("current_a".to_owned()).chain(heads))?;
    for point in &linkage.points {
        let numbers = [
            point.flux_linkage_wb,
            point.inductance_h,
            point.incremental_inductance_h,
        ];
        let cells = numbers.into_iter().flat_map(|number| triple(Some(number)));
        table.write_record(std::iter::once(format!("{:e}", point.current_a.value)).chain(cells))?;
    }
    finished(table)
}

fn triple_heads(name: &str) -> [String; 3] {
    [name.to_owned(), format!("{name}_low"), format!("{name}_high")]
}

fn triple(number: Option<Number>) -> [String; 3] {
    number.map_or([const { String::new() }; 3], |of| {
        [of.value, of.low, of.high].map(|part| format!("{part:e}"))
    })
}

fn finished(table: csv::Writer<Vec<u8>>) -> Result<Vec<u8>, csv::Error> {
    table
        .into_inner()
        .map_err(|error| csv::Error::from(error.into_error()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn has_a_column_for_each_end() {
        let number = Number {
            value: 0.5,
            low: 0.25,
            high: 0.75,
            bound: "estimated",
        };
        let point = TraversePoint {
            r_m: 0.001,
            z_m: -0.02,
            region: None,
            b_r_t: number,
            b_z_t: number,
            b_t: number,
            h_r_a_per_m: number,
            h_z_a_per_m: number,
            j_a_per_m2: number,
            flux_wb: number,
        };
        let text = String::from_utf8(traverse(&[point]).unwrap()).unwrap();
        let lines: Vec<&str> = text.lines().collect();
        assert_eq!(lines.len(), 2);
        assert!(lines[0].starts_with("r_m,z_m,region,b_r_t,b_r_t_low,b_r_t_high,b_z_t,"));
        assert!(lines[1].starts_with("0.001,-0.02,,5e-1,2.5e-1,7.5e-1,"));
        assert_eq!(lines[0].split(',').count(), lines[1].split(',').count());
    }
}
