//! A traverse as a table for spreadsheets and plotting programs.

use super::json::{Number, TraversePoint};

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
