//! Iron parts that have no closed form, against second-order elements of an independent general-purpose library.
//! The numbers, their error bounds and the library's version stand in `independent/iron_reference.json`, written
//! by the script beside it.

use serde_json::Value;

use crate::case_text::CaseText;
use crate::exact::filament::Ring;
use crate::solved::{Failure, Solved};
use crate::table::{Row, Tolerance};

const STORED: &str = include_str!("../../independent/iron_reference.json");
const SOURCE: &str =
    "scikit-fem 12.0.2 (PyPI), biquadratic elements, validation/independent/iron_reference.py";

/// The rows of this source.
pub fn rows() -> Result<Vec<Row>, Failure> {
    let stored: Value = serde_json::from_str(STORED).map_err(|error| error.to_string())?;
    let cases = stored["cases"].as_object().ok_or("no cases stored")?;
    let mut rows = Vec::new();
    for (name, case) in cases {
        rows.extend(check(name, case)?);
    }
    Ok(rows)
}

fn check(name: &str, case: &Value) -> Result<Vec<Row>, Failure> {
    let inputs = &case["inputs"];
    let mover = inputs["mover"].as_str().ok_or("no mover stored")?;
    let mut text = CaseText::new(name)
        .coil("coil", millimetres(&inputs["coil"])?, 1.0, 1.0)
        .mover(mover);
    for part in inputs["iron"].as_array().ok_or("no iron stored")? {
        let part_name = part["name"].as_str().ok_or("iron without a name")?;
        let mu_r = part["mu_r"].as_f64().ok_or("iron without permeability")?;
        let material = format!("{part_name}-iron");
        text = text
            .iron(&material, mu_r)
            .rect(part_name, &material, millimetres(&part["box"])?, "");
    }
    let fields = inputs["fields"].as_object().ok_or("no points stored")?;
    for (point, at) in fields {
        let at = numbers(at)?;
        text = text.point(point, 1e-3 * at[0], 1e-3 * at[1]);
    }
    let solved = Solved::new(&text)?;
    let mut rows = Vec::new();
    for (key, stored) in case["values"].as_object().ok_or("no values stored")? {
        let (ours, unit, tolerance) = match key.split_once('.') {
            None if key == "inductance" => (solved.inductance("coil", "coil")?, "H", Tolerance::Field),
            None if key == "force_coil" => (solved.coil_force("coil")?, "N", Tolerance::Force),
            None => (solved.mover_force(mover)?, "N", Tolerance::Force),
            Some((point, "b_r")) => (solved.point(point)?.b_r_t, "T", Tolerance::Field),
            Some((point, _)) => (solved.point(point)?.b_z_t, "T", Tolerance::Field),
        };
        let published = stored["value"].as_f64().ok_or("no value stored")?;
        let error = stored["error"].as_f64().ok_or("no error stored")?;
        let quantity = format!(
            "{name}: {}, 1 A turn (reference known to {:.4} %)",
            key.replace('_', " "),
            100.0 * error / published.abs()
        );
        rows.push(Row {
            source: SOURCE,
            quantity,
            unit,
            published,
            ours,
            tolerance,
        });
    }
    Ok(rows)
}

pub(super) fn numbers(value: &Value) -> Result<Vec<f64>, Failure> {
    let list = value.as_array().ok_or("no list stored")?;
    list.iter()
        .map(|x| x.as_f64().ok_or_else(|| "no number stored".to_string()))
        .collect()
}

/// A stored box r0, r1, z0, z1 in mm.
pub(super) fn millimetres(value: &Value) -> Result<Ring, Failure> {
    let x = numbers(value)?;
    let mm = |i: usize| {
        x.get(i)
            .map(|x| 1e-3 * x)
            .ok_or_else(|| "a box needs four numbers".to_string())
    };
    Ok(Ring {
        r: [mm(0)?, mm(1)?],
        z: [mm(2)?, mm(3)?],
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_source_names_the_version_that_made_the_stored_values() {
        let stored: Value = serde_json::from_str(STORED).unwrap();
        assert!(SOURCE.contains(&format!(
            "scikit-fem {} ",
            stored["made_by"]["version"].as_str().unwrap()
        )));
    }

    #[test]
    fn the_stored_values_are_far_more_accurate_than_what_they_check() {
        let stored: Value = serde_json::from_str(STORED).unwrap();
        for case in stored["cases"].as_object().unwrap().values() {
            for (key, value) in case["values"].as_object().unwrap() {
                let (x, error) = (value["value"].as_f64().unwrap(), value["error"].as_f64().unwrap());
                assert!(error < 1e-4 * x.abs(), "{key}: {x} ± {error}");
            }
        }
    }
}
