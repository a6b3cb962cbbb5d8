//! Saturable materials and demagnetisation curves: what they become, and what is said of wrong ones.

use solver::problem::MagneticLaw;
use solver::reluctivity::{Isotropic, Saturation};

use super::{COIL, LOOK, and, good, refused};
use crate::case::{self, Case, Faults, Source};

const CORE: &str = "[[region]]\nname = \"core\"\nmaterial = \"m\"\nrect = { r = [0, 5], z = [0, 5] }\n";
const MAGNET: &str = "[[region]]\nname = \"core\"\nmaterial = \"m\"\nmagnetized = [0, -2]\nrect = { r = [0, 5], z = [0, 5] }\n";
const STEEL: &str = "[[0, 0], [200, 0.8], [1000, \"1.5 T\"], [\"10 kA/m\", 1.8], [1e5, 2.1]]";

fn core(stock: &str) -> Case {
    good(&and(&format!("[stock.m]\n{stock}\n{CORE}")))
}

fn law(case: &Case) -> &MagneticLaw {
    &case.problem.regions[1].law
}

/// Reads the coil with lines added, beside a curve file.
fn beside(file: &str, lines: &str) -> Result<Case, Faults> {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(folder.path().join("steel.csv"), file).unwrap();
    let source = Source::Text {
        name: "case.toml".to_owned(),
        text: format!("{COIL}\n{lines}\n"),
        folder: folder.path().to_owned(),
    };
    case::read(&source, &[])
}

#[test]
fn a_saturation_law_reaches_the_solver() {
    let case = core("saturation = { polarization = \"2000 mT\", half_field = \"5 Oe\" }");
    let MagneticLaw::Saturable(Isotropic::Saturation(Saturation {
        polarization_t,
        half_field_a_per_m,
    })) = law(&case)
    else {
        panic!("{:?}", law(&case))
    };
    assert_eq!(*polarization_t, 2.0);
    assert!((half_field_a_per_m - 5.0 * 250.0 / std::f64::consts::PI).abs() < 1e-9);
}

#[test]
fn a_curve_goes_through_its_points() {
    let case = core(&format!("curve = {STEEL}"));
    let MagneticLaw::Saturable(curve) = law(&case) else {
        panic!("{:?}", law(&case))
    };
    for [h, b] in [[200.0, 0.8], [1000.0, 1.5], [1e4, 1.8], [1e5, 2.1]] {
        assert!((curve.at(b).h - h).abs() < 1e-9 * h);
    }
    assert!(case.cautions.is_empty());
}

#[test]
fn noise_at_saturation_is_repaired_with_a_caution() {
    let case = core("curve = [[0, 0], [200, 0.8], [1000, 1.5], [1e5, 2.10], [1.5e5, 2.15]]");
    assert!(matches!(law(&case), MagneticLaw::Saturable(_)));
    assert!(
        case.cautions[0]
            .text
            .contains("In `curve` B rises by less than in air at row 5")
    );
    assert_eq!(case.cautions[0].about, "m");
}

#[test]
fn wrong_curves_are_marked_at_their_row() {
    let curve =
        |points: &str, words: &[&str]| refused(&and(&format!("[stock.m]\ncurve = {points}\n{CORE}")), words);
    curve(
        "[[0, 0], [200, 0.8], [»1000, 0.7]]",
        &["`curve` of `m`: row 3: B falls"],
    );
    curve(
        "[[0, 0], [200, 0.8], [»1e5, 0.85]]",
        &["row 3: B rises by less than mu0"],
    );
    curve("[[0, 0], [200, 0.8], [1000, »nan]]", &["finite"]);
    curve(
        "[[0, 0], [»200, 8000], [1000, 15000]]",
        &["row 2: B = 8000 T", "gauss", "10000 G"],
    );
    curve(
        "»[[0, 0], [200, 0.8]]",
        &["at least two points besides the origin, not 1"],
    );
    curve(
        "[[0, 0], [\"»200 T\", 0.8], [1000, 1.5]]"
            .replace("\"»", "»\"")
            .as_str(),
        &["`curve` expects", "A/m"],
    );
}

#[test]
fn a_curve_file_is_read_by_the_units_of_its_header() {
    let rows = "B (G), H (Oe)\n0, 0\n8000, 2.5\n15000, 12.5\n18000, 125\n21000, 1250\n";
    let case = beside(rows, &format!("[stock.m]\ncurve_file = \"steel.csv\"\n{CORE}")).unwrap();
    let MagneticLaw::Saturable(curve) = law(&case) else {
        panic!("{:?}", law(&case))
    };
    assert!((curve.at(1.5).h - 12.5 * 250.0 / std::f64::consts::PI).abs() < 1e-9);
    // The resolved case stands by itself.
    assert!(
        case.resolved_toml.contains("\ncurve = [[0.0, 0.0], [198.9"),
        "{}",
        case.resolved_toml
    );
    let again = good(&case.resolved_toml);
    assert_eq!(law(&again), law(&case));
}

#[test]
fn a_wrong_curve_file_is_named_with_its_row() {
    for (file, words) in [
        (
            "H (A/m), B (T)\n0, 0\n200, 0.8\n300, 0.7\n",
            "steel.csv`: row 4: B falls",
        ),
        (
            "H, B\n0, 0\n",
            "steel.csv` row 1: the column `H` does not tell its unit",
        ),
        (
            "H (A/m), B (T)\n0, 0\n200; 0.8\n",
            "steel.csv` row 3: expected 2 fields",
        ),
    ] {
        let faults = beside(file, &format!("[stock.m]\ncurve_file = \"steel.csv\"\n{CORE}")).unwrap_err();
        let said = faults.to_string();
        assert!(
            said.contains(words) && said.starts_with("case.toml:"),
            "{}",
            faults.render(LOOK)
        );
        assert_eq!(faults.list.len(), 1, "{said}");
    }
}

#[test]
fn a_demagnetisation_curve_shrinks_with_its_remanence() {
    let stock = "[stock.m]\ndemag_curve = [[0, 1.2], [-400000, 0.68], [-800000, 0.1], [-900000, -0.3]]\n\
                 remanence_temperature_coefficient = -0.001\n";
    let hot = and(&format!("{stock}{MAGNET}")).replacen("title", "temperature = \"120 degC\"\ntitle", 1);
    let case = good(&hot);
    let MagneticLaw::DemagnetisedMagnet {
        curve,
        direction,
        recoil_permeability,
    } = law(&case)
    else {
        panic!("{:?}", law(&case))
    };
    assert_eq!(*direction, [0.0, -1.0]);
    assert!((curve.remanence_t() - 0.9 * 1.2).abs() < 1e-12);
    assert!((curve.at(0.9 * 0.1).h + 0.9 * 8e5).abs() < 1e-6);
    // Across the magnetisation as along it at remanence: about 0.52 T over 400 kA/m.
    assert!((0.9..1.1).contains(recoil_permeability), "{recoil_permeability}");
    let across = good(&and(&format!("{stock}recoil_permeability = 1.2\n{MAGNET}")));
    assert!(matches!(
        law(&across),
        MagneticLaw::DemagnetisedMagnet { recoil_permeability, .. } if *recoil_permeability == 1.2
    ));
    refused(
        &and(&format!(
            "[stock.m]\ndemag_curve = [[0, 1.2], [»900000, 0]]\n{MAGNET}"
        )),
        &["`demag_curve` of `m`: row 2", "write -H"],
    );
    refused(
        &and(&format!(
            "[stock.m]\ndemag_curve = »[[-100, 1.1], [-900000, 0]]\n{MAGNET}"
        )),
        &["no point at H = 0"],
    );
}

#[test]
fn a_law_given_beside_like_replaces_the_copied_one() {
    let case = core("like = \"steel\"\nconductivity = \"4 MS/m\"");
    assert!(matches!(law(&case), MagneticLaw::Saturable(Isotropic::Curve(_))));
    assert_eq!(case.problem.regions[1].conductivity_s_per_m, 4e6);
    let case = core("like = \"steel\"\nsaturation = { polarization = 2, half_field = 300 }");
    assert!(matches!(
        law(&case),
        MagneticLaw::Saturable(Isotropic::Saturation(_))
    ));
    assert_eq!(case.problem.regions[1].density_kg_per_m3, Some(7850.0));
    refused(
        &and(&format!(
            "[stock.m]\nlike = \"steel\"\nrecoil_permeability = »1.1\n{CORE}"
        )),
        &["is for magnets"],
    );
}
