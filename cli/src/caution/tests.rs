use solver::problem::MagneticLaw;
use solver::quantity::MagnetResult;
use solver::reluctivity::{Curve, Isotropic};
use solver::{Bracket, Solution};

use super::*;
use crate::sample;

fn raised(change: impl FnOnce(&mut Case, &mut Solution)) -> Vec<Caution> {
    let (mut case, mut solution) = (sample::case(), sample::solution());
    change(&mut case, &mut solution);
    all(&case, &solution)
}

fn one<'a>(cautions: &'a [Caution], about: &str, words: &str) -> &'a Caution {
    cautions
        .iter()
        .find(|caution| caution.about == about && caution.text.contains(words))
        .unwrap_or_else(|| panic!("no caution about {about} with {words:?} in {cautions:#?}"))
}

fn none(cautions: &[Caution], words: &str) {
    assert!(
        !cautions.iter().any(|caution| caution.text.contains(words)),
        "{cautions:#?}"
    );
}

#[test]
fn of_touch_voltage_above_its_limit_only() {
    let at = |volts: f64| {
        raised(|_, solution| solution.quantities.windings[0].voltage_v = Some(Bracket::exact(volts)))
    };
    none(&at(119.9), "extra-low");
    let above = at(-120.1);
    let caution = one(&above, "main", "-low voltage");
    assert!(caution.source.contains("IEC 61140") && caution.source.contains("from memory"));
}

#[test]
fn of_energy_that_arcs_or_shocks() {
    let at = |amperes: f64| {
        raised(|_, solution| solution.quantities.windings[0].current_a = Bracket::exact(amperes))
    };
    // 12.337 mH: 10 mJ at 1.27 A, 5 J at 28.5 A.
    none(&at(1.2), "currents store");
    one(&at(1.4), "stored energy", "contacts arc");
    one(&at(29.0), "stored energy", "dangerous to life");
}

#[test]
fn of_current_density_and_fill() {
    let cautions = raised(|_, solution| {
        let winding = &mut solution.quantities.windings[0];
        winding.current_density_a_per_m2 = Some(Bracket::exact(5.1e6));
        winding.fill_factor = Some(Bracket::exact(1.02));
    });
    assert_eq!(
        one(&cautions, "main", "5.1 A/mm²").source,
        "common practice, no source"
    );
    one(&cautions, "main", "need 102 % of the drawn section");
    let loose = raised(|_, solution| {
        let winding = &mut solution.quantities.windings[0];
        winding.current_density_a_per_m2 = Some(Bracket::exact(4.9e6));
        winding.fill_factor = Some(Bracket::exact(0.5));
    });
    none(&loose, "A/mm²");
    none(&loose, "drawn section");
}

#[test]
fn of_a_strong_magnet_but_not_of_a_crumb() {
    let at = |volume: f64| {
        raised(|case, solution| {
            case.problem.regions[0].law = MagneticLaw::Magnet {
                remanence_t: [0.0, 1.2],
                recoil_permeability: 1.05,
            };
            solution.quantities.regions[0].volume_m3 = Bracket::exact(volume);
        })
    };
    one(&at(1e-6), "plunger", "fingers are crushed");
    none(&at(1e-9), "fingers are crushed");
}

#[test]
fn of_a_winding_that_is_partly_covered() {
    let cautions = raised(|_, solution| solution.mesh.parts[2].area_m2 *= 0.75);
    one(
        &cautions,
        "coil",
        "25 % of this region of winding `main` is covered",
    );
    none(&raised(|_, _| ()), "covered");
}

#[test]
fn of_stray_field_with_its_reach() {
    let cautions = raised(|_, _| ());
    assert!(
        !cautions.iter().any(|caution| caution.about == "stray field"),
        "a wall keeps it in: {cautions:#?}"
    );
    let open = raised(|_, solution| {
        solution.mesh.circle = Some(mesher::arrange::OuterCircle {
            centre_z_m: 0.01,
            radius_m: 0.03,
        });
    });
    one(&open, "stray field", "up to 47 mm from the centre");
}

#[test]
fn about_safety_end_by_deferring() {
    let cautions = raised(|_, solution| {
        solution.quantities.windings[0].voltage_v = Some(Bracket::exact(300.0));
        solution.quantities.movers[0].force_n = Some(Bracket::exact(60.0));
    });
    for about in ["main", "plunger"] {
        assert!(one(&cautions, about, "").text.ends_with(DEFER));
    }
}

#[test]
fn of_steel_of_constant_permeability_beyond_its_knee() {
    let at = |b_t: f64, relative_permeability: f64| {
        raised(|case, solution| {
            case.problem.regions[0].law = MagneticLaw::Linear {
                relative_permeability,
            };
            solution.quantities.regions[0].b_max_t = Bracket::exact(b_t);
        })
    };
    one(
        &at(1.6, 1000.0),
        "plunger",
        "reaches 1.6 T, where real steel saturates",
    );
    none(&at(1.4, 1000.0), "saturates");
    none(&at(1.6, 1.0), "saturates");
}

#[test]
fn of_a_curve_that_ends_too_early() {
    let at = |b_t: f64| {
        raised(|case, solution| {
            let curve = Curve::new(&[[0.0, 0.0], [200.0, 0.8], [1e3, 1.5], [1e4, 1.8]]).unwrap();
            case.problem.regions[0].law = MagneticLaw::Saturable(Isotropic::Curve(curve));
            solution.quantities.regions[0].b_max_t = Bracket::exact(b_t);
        })
    };
    one(&at(1.9), "plunger", "ends at 1.8 T");
    none(&at(1.7), "ends at");
}

#[test]
fn of_a_magnet_past_its_knee() {
    let at = |lowest: f64| {
        raised(|_, solution| {
            solution.quantities.regions[0].magnet = Some(MagnetResult {
                mean_b_along_t: Bracket::exact(0.6),
                mean_h_along_a_per_m: Bracket::exact(-4e5),
                lowest_b_along_t: Bracket::exact(lowest),
                lowest_h_along_a_per_m: Bracket::exact(-6e5),
                lowest_at: mesher::Point { r: 0.004, z: 0.0 },
                permeance_coefficient: None,
                knee_t: Some(Bracket::exact(0.2)),
            });
        })
    };
    one(
        &at(0.15),
        "plunger",
        "falls to 150 mT near r = 4 mm, z = 0 mm, and the knee lies at 200 mT",
    );
    none(&at(0.25), "knee");
}
