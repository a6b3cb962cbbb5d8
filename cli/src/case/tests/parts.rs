//! What a right case becomes, in numbers.

use mesher::section::SpaceEdge;
use solver::problem::{Conductor, Drive, MagneticLaw, MirrorCurrents, Turns};
use solver::solve::Kind;

use super::{COIL, and, good, with};

const WIRE: &str = "wire = { diameter = \"0.5 mm\", outside = \"0.56 mm\" }";

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-14 * b.abs()
}

fn wire(text: &str) -> (f64, f64, f64) {
    match good(text).problem.windings[0].conductor {
        Some(Conductor::Wire {
            copper_area_m2,
            outside_area_m2,
            resistivity_ohm_m,
            ..
        }) => (copper_area_m2, outside_area_m2, resistivity_ohm_m),
        ref other => panic!("{other:?}"),
    }
}

#[test]
fn defaults_are_as_the_page_says() {
    let case = good(COIL);
    assert_eq!((case.name.as_str(), case.title.as_str()), ("case", "coil"));
    assert_eq!(
        (case.length_unit.name.as_str(), case.length_unit.metres),
        ("mm", 1e-3)
    );
    assert_eq!(case.temperature_c, 20.0);
    assert_eq!(case.accuracy.goal, 0.01);
    assert_eq!(case.accuracy.of, [Kind::Inductance, Kind::Force]);
    assert_eq!(
        (case.accuracy.max_triangles, case.accuracy.max_time),
        (2_000_000, None)
    );
    assert!(matches!(case.section.edge, SpaceEdge::HalfCircle));
    assert_eq!(case.section.mirror_z_m, None);
    assert_eq!(case.problem.ambient_b_t, 0.0);
    assert_eq!(case.region_notes[0].winding, Some(0));
    assert_eq!(case.region_notes[0].material, "copper");
    assert!(case.cautions.is_empty());
    let bounds = case.section.regions[0].copies[0].bounds();
    assert_eq!(
        (bounds.low.r, bounds.low.z, bounds.high.r, bounds.high.z),
        (0.02, -0.005, 0.03, 0.005)
    );
}

#[test]
fn bare_lengths_are_in_the_cases_unit() {
    for (unit, metres) in [
        ("m", 1.0),
        ("cm", 0.01),
        ("in", 0.0254),
        ("mil", 2.54e-5),
        ("um", 1e-6),
    ] {
        let case = good(&format!("length_unit = \"{unit}\"\n{}", with("\"outer\"", "30")));
        let bounds = case.section.regions[0].copies[0].bounds();
        assert!(
            close(bounds.low.r, 20.0 * metres) && close(bounds.high.r, 30.0 * metres),
            "{unit}"
        );
    }
}

#[test]
fn wire_areas_and_gauges() {
    let quarter_pi = std::f64::consts::FRAC_PI_4;
    let (copper, outside, resistivity) = wire(COIL);
    assert!(close(copper, quarter_pi * 0.25e-6) && close(outside, quarter_pi * 0.56e-3 * 0.56e-3));
    assert!(close(resistivity, 1e-6 / 58.0));
    // ASTM B258: 36 is 0.127 mm by definition, 0000 (-3) is 11.684 mm by definition.
    assert!(close(
        wire(&with(WIRE, "wire = { awg = 36 }")).0,
        quarter_pi * 0.127e-3 * 0.127e-3
    ));
    let thick = wire(&with(WIRE, "wire = { awg = -3 }")).0;
    assert!((thick / (quarter_pi * 11.684e-3 * 11.684e-3) - 1.0).abs() < 1e-12);
    let (copper, outside, _) = wire(&with(WIRE, "wire = { diameter = 0.1, strands = 20 }"));
    assert!(close(copper, 20.0 * quarter_pi * 1e-8) && outside == copper);
}

#[test]
fn temperature_acts_on_wire_magnets_and_measured_resistance() {
    let hot = |text: &str| format!("temperature = \"120 degC\"\n{text}");
    assert!(close(wire(&hot(COIL)).2, 1e-6 / 58.0 * (1.0 + 0.003_93 * 100.0)));
    // A winding's own temperature goes before its region's, and that before the case's.
    let region = hot(&with(
        "material = \"copper\"",
        "material = \"copper\"\ntemperature = \"70 degC\"",
    ));
    assert!(close(wire(&region).2, 1e-6 / 58.0 * (1.0 + 0.003_93 * 50.0)));
    let own = region.replace("turns =", "temperature = \"20 degC\"\nturns =");
    assert!(close(wire(&own).2, 1e-6 / 58.0));
    let measured = good(&hot(&with(WIRE, "resistance = \"10 ohm\"")));
    match measured.problem.windings[0].conductor {
        Some(Conductor::Measured(ohm)) => assert!(close(ohm, 13.93)),
        ref other => panic!("{other:?}"),
    }
    assert!(
        measured.cautions[0].text.contains("copper"),
        "{:?}",
        measured.cautions
    );
    let magnet = "[[region]]\nname = \"m\"\nmaterial = \"ndfeb\"\nmagnetized = [3, 4]\nrect = { r = [0, 5], z = [0, 5] }";
    match good(&hot(&and(magnet))).problem.regions[1].law {
        MagneticLaw::Magnet {
            remanence_t: [r, z],
            recoil_permeability,
        } => {
            let remanence = 1.25 * (1.0 - 0.0011 * 100.0);
            assert!(close(r, 0.6 * remanence) && close(z, 0.8 * remanence) && recoil_permeability == 1.05);
        }
        ref other => panic!("{other:?}"),
    }
}

#[test]
fn a_bare_temperature_that_is_hardly_kelvin_raises_a_caution() {
    let case = good(&format!("temperature = 150\n{COIL}"));
    assert!(case.cautions[0].text.contains("150 degC"), "{:?}", case.cautions);
    assert!((case.temperature_c - (150.0 - 273.15)).abs() < 1e-12);
}

#[test]
fn drives_turns_and_leads() {
    let drive = |line: &str| good(&with("current = \"1 A\"", line)).problem.windings[0].drive;
    assert_eq!(drive("current = \"-250 mA\""), Drive::Current(-0.25));
    assert_eq!(drive("voltage = 24"), Drive::Voltage(24.0));
    for passive in ["open = true", "shorted = true", "load = \"10 ohm\""] {
        assert_eq!(drive(passive), Drive::Passive);
    }
    let case = good(&with(
        "turns = \"n\"",
        "turns = -40\nlead = { resistance = \"1 ohm\", inductance = \"1 uH\" }\nparallel_capacitance = \"10 nF\"",
    ));
    assert_eq!(case.problem.windings[0].turns, Turns::Total(-40.0));
    assert_eq!(case.problem.windings[0].lead_resistance_ohm, 1.0);
    let pair = and("[[region]]\nname = \"b\"\nmaterial = \"air\"\nrect = { r = [20, 30], z = [6, 9] }")
        .replace("[\"coil\"]", "[\"b\", \"coil\"]")
        .replace("turns = \"n\"", "turns = [\"-n\", \"n\"]");
    let case = good(&pair);
    assert_eq!(
        case.problem.windings[0].turns,
        Turns::PerRegion(vec![-100.0, 100.0])
    );
    assert_eq!(case.problem.windings[0].regions, [1, 0]);
    assert_eq!(
        case.problem.regions[0].conductivity_s_per_m, 0.0,
        "a coil side conducts along its turns only"
    );
}

#[test]
fn own_materials_copy_and_replace() {
    let stock = "[stock.tube]\nlike = \"copper\"\nconductivity = \"20 MS/m\"\n[stock.core]\nlike = \"ferrite-mnzn\"\nrelative_permeability = 1800\n\
                 [stock.hot]\nlike = \"ndfeb\"\nrecoil_permeability = 1.1\n[stock.copper]\nlike = \"copper\"\nconductivity = \"50 MS/m\"\n";
    let regions: String = ["tube", "core", "hot", "copper"]
        .iter()
        .enumerate()
        .map(|(i, name)| {
            let magnet = if *name == "hot" { "magnetized = [0, -2]\n" } else { "" };
            format!("[[region]]\nname = \"r{i}\"\nmaterial = \"{name}\"\n{magnet}rect = {{ r = [0, 5], z = [{0}, {0} + 5] }}\n", 10 * i)
                .replace("+ 5]", "]")
                .replace(&format!("z = [{0}, {0} ]", 10 * i), &format!("z = [{}, {}]", 10 * i, 10 * i + 5))
        })
        .collect();
    let physics = good(&and(&format!("{stock}{regions}"))).problem.regions;
    assert_eq!(
        (physics[1].conductivity_s_per_m, physics[1].density_kg_per_m3),
        (20e6, Some(8890.0))
    );
    assert_eq!(
        physics[2].law,
        MagneticLaw::Linear {
            relative_permeability: 1800.0
        }
    );
    assert_eq!(
        physics[3].law,
        MagneticLaw::Magnet {
            remanence_t: [0.0, -1.25],
            recoil_permeability: 1.1
        }
    );
    assert_eq!(
        physics[4].conductivity_s_per_m, 50e6,
        "the case's own copper covers the built-in one"
    );
}

#[test]
fn every_shape_and_its_copies() {
    let shape = |line: &str| {
        good(&with("rect = { r = [20, \"outer\"], z = [-5, 5] }", line))
            .section
            .regions[0]
            .copies
            .clone()
    };
    assert_eq!(
        shape("rect = { r = [20, 30], z = [-5, 5], fillet = 0.5 }")[0]
            .curves()
            .len(),
        8
    );
    let half = shape("circle = { centre = [0, 0], radius = 10 }");
    assert!((half[0].area_m2() / (std::f64::consts::FRAC_PI_2 * 1e-4) - 1.0).abs() < 1e-12);
    assert!(close(
        shape("polygon = [[20, 0], [30, 0], [30, 5]]")[0].area_m2(),
        25e-6
    ));
    let lens = shape(
        "outline = { start = [20, -5], path = [{ line = [30, -5] }, { arc = [20, 5], through = [27, 3] }] }",
    );
    assert!(lens[0].area_m2() > 0.0);
    let turns = shape(
        "circle = { centre = [20, 0], radius = 0.5 }\nrepeat = { count = [8, \"5\"], step = [1.1, \"-1.2 mm\"] }",
    );
    assert_eq!(turns.len(), 40);
    let last = turns[39].bounds();
    assert!(close(last.high.r, (20.0 + 7.0 * 1.1 + 0.5) * 1e-3));
    assert!((last.low.z - (-4.0 * 1.2 - 0.5) * 1e-3).abs() < 1e-15);
}

#[test]
fn space_readings_and_accuracy() {
    let lines = r#"
[space]
mirror = "0 mm"
mirror_currents = "opposite"
[[traverse]]
name = "axis"
line = { from = [0, -20], to = [0, 20], points = 5 }
[[traverse]]
name = "spot"
at = [3, 4]
[[search_coil]]
name = "pickup"
at = [10, 5]
turns = 100
[[search_coil]]
name = "loop"
at = [10, 6]
[stray]
limit = "27 uT"
[[mover]]
name = "coil-carrier"
regions = ["coil"]
[accuracy]
goal = "0.5 %"
of = ["energy", "traverse"]
max_triangles = 2_000
max_time = "10 min"
"#;
    let case =
        good(&with("z = [-5, 5]", "z = [0, 10]").replace("[[winding]]", &format!("{lines}\n[[winding]]")));
    assert_eq!(
        (case.section.mirror_z_m, case.problem.mirror),
        (Some(0.0), Some(MirrorCurrents::Opposite))
    );
    let heights: Vec<f64> = case.problem.traverses[0]
        .points
        .iter()
        .map(|point| point.z)
        .collect();
    assert_eq!((heights.len(), heights[0], heights[4]), (5, -0.02, 0.02));
    for (height, expected) in heights.iter().zip([-0.02, -0.01, 0.0, 0.01, 0.02]) {
        assert!((height - expected).abs() < 1e-17, "{height}");
    }
    assert_eq!(case.problem.traverses[1].points.len(), 1);
    assert_eq!(
        (
            case.problem.search_coils[0].turns,
            case.problem.search_coils[1].turns
        ),
        (100.0, 1.0)
    );
    let stray = case.problem.stray.expect("open surroundings");
    assert!(close(stray.limit_t, 27e-6) && stray.distance_m == 0.3);
    assert_eq!(case.problem.movers[0].regions, [0]);
    assert_eq!((case.accuracy.goal, case.accuracy.max_triangles), (0.005, 2000));
    assert_eq!(case.accuracy.of, [Kind::Energy, Kind::Traverse]);
    assert_eq!(case.accuracy.max_time, Some(std::time::Duration::from_secs(600)));
    let wall = good(&and(
        "[space]\nboundary = \"wall\"\nwall = { circle = { centre = [0, 0], radius = 60 } }",
    ));
    assert!(matches!(wall.section.edge, SpaceEdge::Wall(_)) && wall.problem.stray.is_none());
    assert_eq!(
        good(&and("[ambient]\naxial_b = \"0.1 T\"")).problem.ambient_b_t,
        0.1
    );
}
