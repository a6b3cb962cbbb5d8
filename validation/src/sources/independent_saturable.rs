//! A plunger pot of saturable steel from below its knee to far beyond it, against second-order elements of an
//! independent general-purpose library. The numbers and their error bounds stand in
//! `independent/saturable_reference.json`, written by the script beside it.

use serde_json::Value;

use super::independent_iron::{millimetres, numbers};
use crate::case_text::CaseText;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const STORED: &str = include_str!("../../independent/saturable_reference.json");
const SOURCE: &str =
    "scikit-fem 12.0.2 (PyPI), biquadratic elements, validation/independent/saturable_reference.py";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let stored: Value = serde_json::from_str(STORED).map_err(|error| error.to_string())?;
    let mut rows = Vec::new();
    for current in numbers(&stored["inputs"]["currents"])? {
        rows.extend(check(&stored, current)?);
    }
    Ok(rows)
}

fn check(stored: &Value, current: f64) -> Result<Vec<Row>, Failure> {
    let inputs = &stored["inputs"];
    let number = |key: &str| inputs[key].as_f64().ok_or_else(|| format!("no {key} stored"));
    let mover = inputs["mover"].as_str().ok_or("no mover stored")?;
    let mut text = CaseText::new("saturable pot")
        .saturating("steel-of-it", number("polarization")?, number("half_field")?)
        .coil("coil", millimetres(&inputs["coil"])?, 1.0, current)
        .mover(mover)
        // Half the default: at 1 % of goal the linkage is told to 0.6 % only, and is to be checked to 0.2 %.
        .lines("[accuracy]\ngoal = \"0.5 %\"");
    for part in inputs["iron"].as_array().ok_or("no iron stored")? {
        let name = part["name"].as_str().ok_or("iron without a name")?;
        text = text.rect(name, "steel-of-it", millimetres(&part["box"])?, "");
    }
    let at = numbers(&inputs["fields"]["in_gap"])?;
    let solved = Solved::new(&text.point("in_gap", 1e-3 * at[0], 1e-3 * at[1]))?;
    let values = stored["values"].as_object().ok_or("no values stored")?;
    let mut rows = Vec::new();
    for (key, value) in values {
        // Keys begin with the current as the script writes it, `200.0 A.`.
        let Some(what) = key.strip_prefix(&format!("{current:?} A.")) else {
            continue;
        };
        let (ours, unit, tolerance) = match what {
            "linkage" => (solved.linkage("coil")?, "Wb", Tolerance::Field),
            "incremental_inductance" => (solved.incremental("coil", "coil")?, "H", Tolerance::Force),
            "force_mover" => (solved.mover_force(mover)?, "N", Tolerance::Force),
            _ => (solved.point("in_gap")?.b_z_t, "T", Tolerance::Field),
        };
        let published = value["value"].as_f64().ok_or("no value stored")?;
        let error = value["error"].as_f64().ok_or("no error stored")?;
        rows.push(Row {
            source: SOURCE,
            quantity: format!(
                "saturable pot: {}, {current} A turns (reference known to {:.4} %)",
                what.replace('_', " "),
                100.0 * error / published.abs()
            ),
            unit,
            published,
            ours,
            tolerance,
        });
    }
    Ok(rows)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_stored_values_are_more_accurate_than_what_they_check() {
        let stored: Value = serde_json::from_str(STORED).unwrap();
        assert!(SOURCE.contains(&format!(
            "scikit-fem {} ",
            stored["made_by"]["version"].as_str().unwrap()
        )));
        for (key, value) in stored["values"].as_object().unwrap() {
            let (x, error) = (value["value"].as_f64().unwrap(), value["error"].as_f64().unwrap());
            assert!(error < 2e-3 * x.abs(), "{key}: {x} ± {error}");
        }
    }
}
