//! `[[region]]`: the painted drawing with the physics of each part.

use mesher::section::PaintedRegion;
use solver::MU0;
use solver::problem::{MagneticLaw, RegionPhysics};
use solver::reluctivity::{Curve, CurveError, Demagnetisation, Isotropic, Saturation};

use super::expression::Dimension;
use super::materials::Materials;
use super::model::drawing::{Currents, Region};
use super::model::located::Located;
use super::shapes::{ShapeKeys, repeated};
use super::values::{Values, celsius_text};
use crate::stock::{Law, Material};

/// A region, read.
pub struct ReadRegion {
    /// Its drawing.
    pub painted: PaintedRegion,
    /// Its physics.
    pub physics: RegionPhysics,
    /// Name of its material.
    pub material: String,
    /// Its own temperature, °C.
    pub own_temperature_c: Option<f64>,
    /// Temperature coefficient of its material's resistivity, 1/K, and its reference, °C.
    pub resistivity_coefficient: (f64, f64),
    /// Where its shape is written.
    pub shape_span: std::ops::Range<usize>,
}

/// Reads a region; `None` if something is wrong, and that is noted.
pub fn read(
    keys: &Located<Region>,
    materials: &Materials,
    case_temperature_c: f64,
    values: &mut Values,
) -> Option<ReadRegion> {
    let region = &keys.value;
    let owner = format!("region `{}`", region.name.value);
    let shape = ShapeKeys::from(region).outline(&owner, &keys.span, values);
    let mesh_size = match &region.mesh_size {
        Some(size) => values.positive(size, "mesh_size", Dimension::LENGTH).map(Some),
        None => Some(None),
    };
    let own_temperature = match &region.temperature {
        Some(temperature) => values.temperature_c(temperature, "temperature").map(Some),
        None => Some(None),
    };
    let material = materials.find(&region.material, values);
    let direction = direction(region, material, values);
    let (outline, shape_span) = shape?;
    let copies = repeated(outline, &region.repeat, &owner, values);
    let (material, own_temperature_c) = (material?, own_temperature?);
    let temperature_c = own_temperature_c.unwrap_or(case_temperature_c);
    let law = law_at(
        material,
        direction?,
        temperature_c,
        &owner,
        &region.material,
        values,
    )?;
    let conductivity = conductivity_at(material, temperature_c, &region.material, values)?;
    let insulated = matches!(
        &region.currents,
        Some(Located {
            value: Currents::None,
            ..
        })
    );
    Some(ReadRegion {
        painted: PaintedRegion {
            name: region.name.value.clone(),
            copies: copies?,
            mesh_size_m: mesh_size?,
        },
        physics: RegionPhysics {
            name: region.name.value.clone(),
            law,
            conductivity_s_per_m: if insulated { 0.0 } else { conductivity },
            density_kg_per_m3: material.density_kg_per_m3,
        },
        material: material.name.to_string(),
        own_temperature_c,
        resistivity_coefficient: (
            material.temperature_coefficient_per_k,
            material.reference_temperature_c,
        ),
        shape_span,
    })
}

/// The unit vector of a magnet's magnetisation (zero for what is no magnet).
fn direction(region: &Region, material: Option<&Material>, values: &mut Values) -> Option<[f64; 2]> {
    let given = match &region.magnetized {
        Some(keys) => Some((
            values.pair(&keys.value, "magnetized", Dimension::NUMBER)?,
            keys.span.clone(),
        )),
        None => None,
    };
    let is_magnet = matches!(material?.law, Law::Magnet { .. } | Law::Demagnetization { .. });
    let (name, of) = (&region.name.value, &region.material.value);
    match given {
        None if is_magnet => {
            let message =
                format!("region `{name}` is of the magnet material `{of}`, but has no `magnetized`");
            values.fault_with_help(
                &region.material.span,
                message,
                "give its direction, for example magnetized = [0, 1]",
            );
            None
        }
        None => Some([0.0, 0.0]),
        Some((_, span)) if !is_magnet => {
            values.fault(
                &span,
                format!("region `{name}` is magnetized, but its material `{of}` is no magnet"),
            );
            None
        }
        Some(([r, z], span)) => {
            let length = r.hypot(z);
            if length == 0.0 || !length.is_finite() {
                values.fault(&span, "`magnetized` must be a direction, not [0, 0]");
                return None;
            }
            Some([r / length, z / length])
        }
    }
}

/// The magnetic law at a temperature.
fn law_at(
    material: &Material,
    direction: [f64; 2],
    temperature_c: f64,
    owner: &str,
    name: &Located<String>,
    values: &mut Values,
) -> Option<MagneticLaw> {
    let mut left = |coefficient: f64| {
        let ratio = 1.0 + coefficient * (temperature_c - material.reference_temperature_c);
        if ratio > 0.0 {
            return Some(ratio);
        }
        let message = format!(
            "{owner}: at {} nothing is left of the remanence of `{}`",
            celsius_text(temperature_c),
            name.value
        );
        values.fault(&name.span, message);
        None
    };
    match &material.law {
        Law::Linear {
            relative_permeability,
            ..
        } => Some(MagneticLaw::Linear {
            relative_permeability: *relative_permeability,
        }),
        Law::Magnet {
            remanence_t,
            recoil_permeability,
            remanence_temperature_coefficient_per_k: coefficient,
        } => {
            let remanence = remanence_t * left(*coefficient)?;
            Some(MagneticLaw::Magnet {
                remanence_t: direction.map(|d| remanence * d),
                recoil_permeability: *recoil_permeability,
            })
        }
        Law::Saturation {
            polarization_t,
            half_field_a_per_m,
        } => Some(MagneticLaw::Saturable(Isotropic::Saturation(Saturation {
            polarization_t: *polarization_t,
            half_field_a_per_m: *half_field_a_per_m,
        }))),
        Law::Curve(points) => {
            let curve = unfit(Curve::new(points), name, values)?;
            Some(MagneticLaw::Saturable(Isotropic::Curve(curve)))
        }
        Law::Demagnetization {
            points,
            recoil_permeability,
            remanence_temperature_coefficient_per_k: coefficient,
        } => {
            // B and H shrink alike, so that the slopes stay what they are.
            let ratio = left(*coefficient)?;
            let points: Vec<[f64; 2]> = points.iter().map(|p| p.map(|x| x * ratio)).collect();
            let curve = unfit(Demagnetisation::new(&points), name, values)?;
            let at_remanence = 1.0 / (MU0 * curve.at(curve.remanence_t()).slope);
            Some(MagneticLaw::DemagnetisedMagnet {
                curve,
                direction,
                recoil_permeability: recoil_permeability.unwrap_or(at_remanence),
            })
        }
    }
}

/// The curve; points were judged where the material was read, so what is refused here slipped through there.
fn unfit<T>(curve: Result<T, CurveError>, name: &Located<String>, values: &mut Values) -> Option<T> {
    curve
        .map_err(|error| values.fault(&name.span, format!("the curve of `{}`: {error}", name.value)))
        .ok()
}

/// How many times larger the resistivity is than at the reference temperature; noted as a fault when the linear
/// law has left its range.
pub fn resistivity_ratio(
    coefficient_per_k: f64,
    reference_c: f64,
    temperature_c: f64,
    name: &Located<String>,
    values: &mut Values,
) -> Option<f64> {
    let ratio = 1.0 + coefficient_per_k * (temperature_c - reference_c);
    if ratio > 0.0 {
        return Some(ratio);
    }
    let message = format!(
        "at {} the linear temperature law of `{}` gives no resistivity above zero",
        celsius_text(temperature_c),
        name.value
    );
    values.fault(&name.span, message);
    None
}

/// Conductivity at a temperature, S/m.
pub fn conductivity_at(
    material: &Material,
    temperature_c: f64,
    name: &Located<String>,
    values: &mut Values,
) -> Option<f64> {
    let (coefficient, reference) = (
        material.temperature_coefficient_per_k,
        material.reference_temperature_c,
    );
    let ratio = resistivity_ratio(coefficient, reference, temperature_c, name, values)?;
    Some(material.conductivity_s_per_m / ratio)
}
