//! Wrong cases: each must end with status 2, say what is wrong in words that help, and point at the place. The mark
//! `»` in a text stands just before the place where the message must point.

use crate::harness::{COIL, Room};

/// Runs the text (its mark taken out), and asserts status, place and words.
fn assert_refused(marked: &str, words: &[&str]) {
    let (before, after) = marked.split_once('»').expect("no mark");
    let text = format!("{before}{after}");
    let line = before.lines().count().max(1) + usize::from(before.ends_with('\n'));
    let column = before.rsplit('\n').next().unwrap().chars().count() + 1;
    let room = Room::with_case(&text);
    let ran = room.run(&["solve", "case.toml", "--json"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}\n{}", ran.err, ran.out);
    assert_eq!(ran.out, "", "nothing belongs on standard output");
    let place = format!("case.toml:{line}:{column}");
    assert!(ran.err.contains(&place), "wanted {place} in\n{}", ran.err);
    let flat = ran.err.to_lowercase();
    for word in words {
        assert!(
            flat.contains(&word.to_lowercase()),
            "wanted `{word}` in\n{}",
            ran.err
        );
    }
    assert_eq!(room.names(), ["case.toml"], "nothing may be written");
}

/// The small coil case with one piece replaced.
fn coil_with(piece: &str, replacement: &str) -> String {
    assert!(COIL.contains(piece));
    COIL.replacen(piece, replacement, 1)
}

/// The small coil case with lines after it.
fn coil_and(lines: &str) -> String {
    format!("{COIL}\n{lines}\n")
}

#[test]
fn an_unknown_key_names_the_nearest_known_one() {
    assert_refused(&coil_with("current = ", "»curent = "), &["curent", "current"]);
}

#[test]
fn an_unknown_table_names_the_nearest_known_one() {
    assert_refused(
        &coil_with("[[winding]]", "[[»windings]]"),
        &["windings", "winding"],
    );
}

#[test]
fn a_misspelt_given_names_the_nearest_known_one() {
    assert_refused(
        &coil_with("\"outer\"], z", "\"»outher\"], z"),
        &["outher", "outer"],
    );
}

#[test]
fn a_misspelt_material_names_the_nearest_known_one() {
    assert_refused(&coil_with("\"copper\"", "»\"coper\""), &["coper", "copper"]);
}

#[test]
fn a_wrong_dimension_says_what_was_expected() {
    assert_refused(&coil_with("\"1 A\"", "»\"5 mm\""), &["current"]);
}

#[test]
fn adding_a_length_to_a_current_is_refused() {
    assert_refused(&coil_with("\"1 A\"", "\"3 mm »+ 1 A\""), &["length", "current"]);
}

#[test]
fn an_unknown_unit_is_named() {
    assert_refused(&coil_with("\"30 mm\"", "\"30 »mn\""), &["mn"]);
}

#[test]
fn a_missing_region_names_the_nearest_known_one() {
    assert_refused(
        &coil_with("regions = [\"coil\"]", "regions = [»\"coill\"]"),
        &["coill", "coil"],
    );
}

#[test]
fn a_shape_without_area_is_refused() {
    assert_refused(
        &coil_with("rect = { r = [20, \"outer\"]", "rect = »{ r = [20, 20]"),
        &["coil", "area"],
    );
}

#[test]
fn an_outline_that_crosses_itself_is_refused() {
    let text = coil_with(
        "rect = { r = [20, \"outer\"], z = [-5, 5] }",
        "polygon = »[[20, -5], [30, 5], [30, -5], [20, 5]]",
    );
    assert_refused(&text, &["coil", "cross"]);
}

#[test]
fn a_negative_radius_is_refused() {
    assert_refused(
        &coil_with("rect = { r = [20, ", "rect = »{ r = [-20, "),
        &["coil", "axis"],
    );
}

#[test]
fn a_circle_of_negative_radius_is_refused() {
    let text = coil_with(
        "rect = { r = [20, \"outer\"], z = [-5, 5] }",
        "circle = »{ centre = [20, 0], radius = -5 }",
    );
    assert_refused(&text, &["radius"]);
}

#[test]
fn a_shape_beyond_the_wall_is_refused() {
    let wall = "[space]\nboundary = \"wall\"\nwall = { rect = { r = [0, 25], z = [-50, 50] } }";
    assert_refused(
        &coil_and(wall).replacen("rect = {", "rect = »{", 1),
        &["coil", "wall"],
    );
}

#[test]
fn a_winding_region_that_is_covered_is_refused() {
    let cover = "[[region]]\nname = \"lid\"\nmaterial = \"air\"\nrect = { r = [10, 40], z = [-10, 10] }";
    assert_refused(
        &coil_and(cover).replacen("name = \"coil\"", "name = »\"coil\"", 1),
        &["coil", "covered"],
    );
}

#[test]
fn zero_turns_are_refused() {
    assert_refused(&coil_with("turns = \"turns\"", "turns = »0"), &["turns", "zero"]);
}

#[test]
fn current_and_voltage_together_are_refused() {
    assert_refused(
        &coil_with("current = \"1 A\"", "current = \"1 A\"\n»voltage = \"5 V\""),
        &["current", "voltage", "main"],
    );
}

#[test]
fn a_voltage_without_a_resistance_is_refused() {
    assert_refused(
        &coil_with("current = \"1 A\"", "»voltage = \"5 V\""),
        &["resistance", "main"],
    );
}

#[test]
fn two_magnetic_laws_are_refused() {
    let stock = "[stock.odd]\nrelative_permeability = 10\n»remanence = \"1 T\"";
    assert_refused(&coil_and(stock), &["odd", "relative_permeability", "remanence"]);
}

#[test]
fn drawing_below_the_mirror_is_refused() {
    let mirror = "[space]\nmirror = \"0 mm\"\nmirror_currents = \"same\"";
    assert_refused(
        &coil_and(mirror).replacen("rect = {", "rect = »{", 1),
        &["coil", "mirror"],
    );
}

#[test]
fn a_mirror_needs_to_know_how_its_currents_run() {
    let text = coil_with("z = [-5, 5]", "z = [5, 15]") + "\n[space]\n»mirror = \"0 mm\"\n";
    assert_refused(&text, &["mirror_currents"]);
}

#[test]
fn an_ambient_field_with_a_wall_is_refused() {
    let text = "[space]\nboundary = \"wall\"\nwall = { rect = { r = [0, 50], z = [-50, 50] } }\n\n[ambient]\n»axial_b = \"0.1 T\"";
    assert_refused(&coil_and(text), &["ambient", "wall"]);
}

#[test]
fn a_given_may_not_shadow_a_unit() {
    assert_refused(
        &coil_with("outer = \"30 mm\"\n", "outer = \"30 mm\"\n»mm = 3\n"),
        &["mm", "unit"],
    );
}

#[test]
fn numbers_that_are_not_finite_are_refused() {
    for bad in ["nan", "inf", "-inf"] {
        assert_refused(
            &coil_with("z = [-5, 5]", &format!("z = [-5, »{bad}]")),
            &["finite"],
        );
    }
    assert_refused(&coil_with("z = [-5, 5]", "z = [-5, \"1/»0\"]"), &[]);
    assert_refused(&coil_with("z = [-5, 5]", "z = [-5, \"»1e300 * 1e300 mm\"]"), &[]);
}

#[test]
fn a_missing_curve_file_is_named() {
    let stock = "[stock.odd]\ncurve_file = »\"nowhere.csv\"";
    assert_refused(&coil_and(stock), &["nowhere.csv"]);
}

#[test]
fn circular_givens_name_their_ring() {
    assert_refused(
        &coil_with(
            "outer = \"30 mm\"",
            "outer = »\"inner + 1 mm\"\ninner = \"outer - 1 mm\"",
        ),
        &["outer", "inner"],
    );
}

#[test]
fn an_expression_nested_ten_thousand_deep_is_refused_without_harm() {
    let deep = format!("{}1{}", "(".repeat(10_000), ")".repeat(10_000));
    let text = coil_with("\"30 mm\"", &format!("\"{deep} * 1 mm\""));
    let room = Room::with_case(&text);
    let ran = room.run(&["solve", "case.toml", "--json"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", &ran.err[..ran.err.len().min(2000)]);
    assert!(
        ran.err.contains("case.toml:5:") && ran.err.contains("deep"),
        "{}",
        &ran.err[..ran.err.len().min(2000)]
    );
}

#[test]
fn nested_toml_ten_thousand_deep_is_refused_without_harm() {
    let deep = format!("{}{}", "[".repeat(10_000), "]".repeat(10_000));
    let room = Room::with_case(&coil_with("[-5, 5]", &deep));
    let ran = room.run(&["solve", "case.toml", "--json"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2);
}

#[test]
fn a_file_of_100_megabytes_is_refused_by_its_size() {
    let room = Room::new();
    let mut text = COIL.as_bytes().to_vec();
    text.resize(100 * 1024 * 1024, b'#');
    room.write("case.toml", &text);
    let ran = room.run(&["solve", "case.toml", "--json"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2);
    assert!(
        ran.err.contains("case.toml") && ran.err.contains("MB") || ran.err.contains("MiB"),
        "{}",
        ran.err
    );
    let ran = room.run_with_input(&["solve", "-", "--json"], &text);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", ran.err);
}

#[test]
fn a_file_that_is_not_text_is_refused() {
    let room = Room::new();
    room.write("case.toml", b"title = \"\xff\xfe\"\n");
    let ran = room.run(&["solve", "case.toml", "--json"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2);
    assert!(
        ran.err.contains("case.toml") && ran.err.contains("UTF-8"),
        "{}",
        ran.err
    );
}

#[test]
fn a_case_that_is_not_there_is_named() {
    let ran = Room::new().run(&["solve", "nowhere.toml"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2);
    assert!(ran.err.contains("nowhere.toml"), "{}", ran.err);
}

#[test]
fn broken_toml_is_placed() {
    assert_refused(&coil_with("current = \"1 A\"", "current = \"1 A»"), &[]);
}

#[test]
fn several_faults_are_reported_at_once() {
    let text = coil_with("current = \"1 A\"", "curent = \"1 A\"")
        .replace("\"copper\"", "\"coper\"")
        .replace("mm", "mn");
    let ran = Room::with_case(&text).run(&["solve", "case.toml"]);
    assert_eq!(ran.status, 2);
    for word in ["curent", "coper", "mn"] {
        assert!(ran.err.contains(word), "wanted `{word}` in\n{}", ran.err);
    }
}

#[test]
fn keys_of_regimes_to_come_are_answered_plainly() {
    for (regime, more) in [
        ("alternating", "[alternating]\nfrequency = \"85 kHz\""),
        ("transient", ""),
    ] {
        let text = coil_and(more).replacen("title =", &format!("regime = \"{regime}\"\ntitle ="), 1);
        let ran = Room::with_case(&text).run(&["solve", "case.toml"]);
        ran.assert_calm();
        assert_eq!(ran.status, 2, "{regime}: {}", ran.err);
        assert!(ran.err.contains(regime), "{}", ran.err);
    }
}

#[test]
fn every_wrong_set_is_refused() {
    let room = Room::with_case(&coil_and(
        "[[vary]]\nname = \"outer\"\nvalues = [\"30 mm\", \"31 mm\"]",
    ));
    for (set, words) in [
        ("outher=31 mm", vec!["outher", "outer"]),
        ("outer", vec!["="]),
        ("outer=31 kg", vec!["outer"]),
        ("turns=0", vec!["turns"]),
    ] {
        let ran = room.run(&["solve", "case.toml", "--json", "--set", set]);
        ran.assert_calm();
        assert_eq!(ran.status, 2, "{set}: {}{}", ran.err, ran.out);
        for word in words {
            assert!(ran.err.contains(word), "{set}: wanted `{word}` in\n{}", ran.err);
        }
    }
}
