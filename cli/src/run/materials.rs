//! Materials of the stock for people.

use super::material_curve;
use crate::notation::{Unit, significant};
use crate::stock::{Law, Material};

/// Least likeness (0 to 1) of a name that is suggested for a misspelt one.
const ALIKE: f64 = 0.6;

/// One line per material.
pub fn list(table: &[Material]) -> String {
    let widest = |pick: fn(&Material) -> String| {
        table
            .iter()
            .map(|material| pick(material).chars().count())
            .max()
            .unwrap_or(0)
    };
    let (name, magnetic) = (
        widest(|material| material.name.to_string()),
        widest(|material| short(&material.law)),
    );
    let mut text = String::new();
    for material in table {
        let conductivity = match material.conductivity_s_per_m {
            0.0 => "insulator".to_owned(),
            sigma => significant(sigma, CONDUCTIVITY, 3),
        };
        text.push_str(&format!(
            "{:name$}  {:magnetic$}  {conductivity:>11}  {}\n",
            material.name,
            short(&material.law),
            material.about
        ));
    }
    text.push_str("\nSources: coilwright stock NAME\n");
    text
}

/// Everything about one material, with a plot of B over H where that is no line through the origin.
pub fn sheet(material: &Material) -> String {
    let mut rows = vec![
        ("material", material.name.to_string()),
        ("what it is", material.about.to_string()),
    ];
    rows.extend(law(&material.law));
    rows.extend(material_curve::rows(&material.law));
    let reference = format!("at {} °C", material.reference_temperature_c);
    rows.push(match material.conductivity_s_per_m {
        0.0 => ("conductivity", "0 (insulator)".to_owned()),
        sigma => (
            "conductivity",
            format!("{} {reference}", significant(sigma, CONDUCTIVITY, 5)),
        ),
    });
    if material.temperature_coefficient_per_k != 0.0 {
        let per_k = significant(material.temperature_coefficient_per_k, Unit::PER_CENT, 4);
        rows.push(("resistivity rises by", format!("{per_k} per K")));
    }
    if let Some(density) = material.density_kg_per_m3 {
        rows.push(("density", format!("{density} kg/m³")));
    }
    if let Some(loss) = &material.core_loss {
        let text = format!(
            "{} f^{} B^{} W/m³ (f in Hz, B the peak in T)",
            loss.k, loss.alpha, loss.beta
        );
        rows.push(("core loss", text));
    }
    rows.push(("source", material.source.to_string()));
    let width = rows
        .iter()
        .map(|(what, _)| what.chars().count())
        .max()
        .unwrap_or(0);
    let mut sheet: String = rows
        .iter()
        .map(|(what, text)| format!("{what:width$}  {text}\n"))
        .collect();
    let plot = material_curve::plot(&material.law);
    if !plot.is_empty() {
        sheet.push('\n');
        sheet.push_str(&plot);
    }
    sheet
}

/// What to say when there is no such material.
pub fn unknown(table: &[Material], name: &str) -> String {
    let likeness = |material: &&Material| strsim::jaro_winkler(&material.name, name);
    let nearest = table.iter().max_by(|a, b| likeness(a).total_cmp(&likeness(b)));
    let hint = match nearest.filter(|material| likeness(material) > ALIKE) {
        Some(material) => format!("did you mean `{}`?", material.name),
        None => "`coilwright stock` lists them".to_owned(),
    };
    format!("the stock has no material `{name}`; {hint}")
}

const CONDUCTIVITY: Unit = Unit::prefixed("S/m");

/// A magnetic law in a few words.
fn short(law: &Law) -> String {
    match law {
        Law::Linear {
            relative_permeability,
            ..
        } => format!("mu_r {relative_permeability}"),
        Law::Magnet { remanence_t, .. } => format!("magnet {}", significant(*remanence_t, Unit::TESLA, 3)),
        Law::Saturation { polarization_t, .. } => {
            format!("saturates at {}", significant(*polarization_t, Unit::TESLA, 3))
        }
        Law::Curve(_) => match material_curve::knee_t(law) {
            Some(knee) => format!("curve, knee at {}", significant(knee, Unit::TESLA, 3)),
            None => "curve".to_owned(),
        },
        Law::Demagnetization { points, .. } => {
            let remanence_t = points.iter().map(|p| p[1]).fold(0.0, f64::max);
            format!("magnet {}", significant(remanence_t, Unit::TESLA, 3))
        }
    }
}

/// A magnetic law in rows.
fn law(law: &Law) -> Vec<(&'static str, String)> {
    let per_k = |coefficient: f64| format!("{} per K", significant(coefficient, Unit::PER_CENT, 4));
    let point = |[h, b]: &[f64; 2]| {
        let (h, b) = (
            significant(*h, Unit::AMPERE_PER_METRE, 5),
            significant(*b, Unit::TESLA, 5),
        );
        ("H, B", format!("{h}, {b}"))
    };
    match law {
        Law::Linear {
            relative_permeability,
            relative_permeability_loss,
        } => {
            let mut rows = vec![("relative permeability", relative_permeability.to_string())];
            if *relative_permeability_loss != 0.0 {
                rows.push(("its loss part", relative_permeability_loss.to_string()));
            }
            rows
        }
        Law::Magnet {
            remanence_t,
            recoil_permeability,
            remanence_temperature_coefficient_per_k,
        } => vec![
            ("remanence", significant(*remanence_t, Unit::TESLA, 4)),
            ("recoil permeability", recoil_permeability.to_string()),
            (
                "remanence changes by",
                per_k(*remanence_temperature_coefficient_per_k),
            ),
        ],
        Law::Saturation {
            polarization_t,
            half_field_a_per_m,
        } => vec![
            (
                "saturation polarisation",
                significant(*polarization_t, Unit::TESLA, 4),
            ),
            (
                "half of it at",
                significant(*half_field_a_per_m, Unit::AMPERE_PER_METRE, 4),
            ),
        ],
        Law::Curve(points) => points.iter().map(point).collect(),
        Law::Demagnetization {
            points,
            recoil_permeability,
            remanence_temperature_coefficient_per_k,
        } => {
            let mut rows: Vec<_> = points.iter().map(point).collect();
            if let Some(across) = recoil_permeability {
                rows.push(("permeability across", across.to_string()));
            }
            rows.push((
                "remanence changes by",
                per_k(*remanence_temperature_coefficient_per_k),
            ));
            rows
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn copper() -> Material {
        Material {
            name: "copper".into(),
            about: "annealed copper".into(),
            law: Law::Linear {
                relative_permeability: 1.0,
                relative_permeability_loss: 0.0,
            },
            conductivity_s_per_m: 5.8e7,
            temperature_coefficient_per_k: 0.00393,
            reference_temperature_c: 20.0,
            density_kg_per_m3: Some(8890.0),
            core_loss: None,
            source: "a book".into(),
        }
    }

    #[test]
    fn a_sheet_tells_everything_with_units() {
        let expected = "material               copper\nwhat it is             annealed copper\n\
                        relative permeability  1\nconductivity           58 MS/m at 20 °C\n\
                        resistivity rises by   0.393 % per K\ndensity                8890 kg/m³\n\
                        source                 a book\n";
        assert_eq!(sheet(&copper()), expected);
    }

    #[test]
    fn a_misspelt_name_gets_a_hint() {
        assert_eq!(
            unknown(&[copper()], "coper"),
            "the stock has no material `coper`; did you mean `copper`?"
        );
        assert!(unknown(&[copper()], "xyz").ends_with("`coilwright stock` lists them"));
    }
}
