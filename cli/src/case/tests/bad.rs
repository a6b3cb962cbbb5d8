//! Each wrong case has one fault, at its place, in words that help.

use mesher::MeshError;

use super::{COIL, and, faults, read_text, refused, with};
use crate::case::Source;
use crate::case::source::LARGEST_CASE_BYTES;

#[test]
fn unknown_keys_name_the_nearest_and_are_all_reported() {
    refused(
        &with("turns = \"n\"", "turns = \"n\"\n»wier = 3"),
        &["`wier`", "did you mean `wire`"],
    );
    let found = faults(&and("colour = \"red\"\n[spacee]\n[[region2]]\nname = \"x\""));
    assert_eq!(found.len(), 3, "{found:?}");
    assert!(
        found[0]
            .help
            .as_deref()
            .is_some_and(|help| help.contains("its keys are"))
    );
    assert!(
        found[1]
            .help
            .as_deref()
            .is_some_and(|help| help.contains("`space`"))
    );
}

#[test]
fn misspelt_names_name_the_nearest_and_list_the_few() {
    refused(
        &with("[\"coil\"]", "[»\"coill\"]"),
        &["no region `coill`", "did you mean `coil`", "known regions: coil"],
    );
    refused(
        &with("\"copper\"", "»\"coper\""),
        &["no material `coper`", "`copper`"],
    );
    refused(
        &with("\"outer\"]", "\"»outr\"]"),
        &["`outr`", "did you mean `outer`", "known givens: outer, n"],
    );
    refused(&with("\"1 A\"", "\"1 »Amp\""), &["`Amp` is not a unit"]);
    refused(&with("\"30 mm\"", "\"30 »mn\""), &["`mn` is not a unit", "mm"]);
    let mover = "[[mover]]\nname = \"m\"\nregions = [»\"coi\"]";
    refused(&and(mover), &["no region `coi`", "`coil`"]);
}

#[test]
fn wrong_dimensions_say_what_was_expected() {
    refused(
        &with("\"1 A\"", "»\"5 mm\""),
        &["`current` expects a current, but this is a length", "0.5 A"],
    );
    refused(
        &with("\"1 A\"", "\"3 mm »+ 1 A\""),
        &["a current cannot be added to a length"],
    );
    refused(
        &with("z = [-5, 5]", "z = [-5, »\"5 V\"]"),
        &["expects a length, but this is a voltage"],
    );
}

#[test]
fn impossible_shapes_name_their_region() {
    let rect = "rect = { r = [20, \"outer\"], z = [-5, 5] }";
    for (shape, words) in [
        ("rect = »{ r = [20, 20], z = [-5, 5] }", "no area"),
        (
            "polygon = »[[20, -5], [30, 5], [30, -5], [20, 5]]",
            "crosses itself",
        ),
        ("rect = »{ r = [-2, 5], z = [-5, 5] }", "only r >= 0"),
        (
            "circle = »{ centre = [20, 0], radius = -5 }",
            "more than zero, not -5 mm",
        ),
        (
            "rect = »{ r = [20, 30], z = [-5, 5], fillet = 6 }",
            "at most 5 mm fits",
        ),
        (
            "rect = »{ r = [20, 30], z = [-5, 5], fillet = -1 }",
            "must not be negative",
        ),
        ("polygon = »[[20, -5], [30, 5]]", "at least 3 points"),
    ] {
        refused(&with(rect, shape), &["region `coil`", words]);
    }
    refused(
        &with(rect, "»mesh_size = 0\nrect = { r = [20, 30], z = [-5, 5] }")
            .replace("»mesh_size = 0", "mesh_size = »0"),
        &["more than zero"],
    );
    refused(
        &with(&format!("\n{rect}"), "").replace("[[region]]", "»[[region]]"),
        &["has no shape", "rect, circle"],
    );
    refused(
        &with(
            rect,
            &format!("{rect}\n»circle = {{ centre = [0, 0], radius = 3 }}"),
        ),
        &["more than one shape"],
    );
    let arc = "outline = { start = [20, 0], path = [ { line = [30, 0] }, »{ arc = [20, 5] } ] }";
    refused(&with(rect, arc), &["either a line or an arc", "through"]);
    refused(
        &with(
            rect,
            &format!("{rect}\nrepeat = »{{ count = [3, 1], step = [-15, 0] }}"),
        ),
        &["copy 3 along r", "r >= 0"],
    );
    refused(
        &with(
            rect,
            &format!("{rect}\nrepeat = »{{ count = [3, 1], step = [0, 0] }}"),
        ),
        &["step along r is zero"],
    );
    refused(
        &with(
            rect,
            &format!("{rect}\nrepeat = {{ count = [»2.5, 1], step = [1, 0] }}"),
        ),
        &["whole number"],
    );
}

#[test]
fn nothing_may_be_drawn_below_the_mirror() {
    let mirror = "[space]\nmirror = 0\nmirror_currents = \"same\"";
    refused(
        &and(mirror).replace("rect = {", "rect = »{"),
        &["region `coil`", "below the mirror", "z = -5 mm"],
    );
    let above = with("z = [-5, 5]", "z = [0, 10]");
    refused(
        &format!("{above}\n[space]\n»mirror = 0\n"),
        &["mirror_currents", "same"],
    );
    refused(
        &format!("{above}\n[space]\nmirror_currents = »\"same\"\n"),
        &["without a `mirror`"],
    );
    // Drawing noise is no drawing below the mirror.
    assert!(read_text(&with("z = [-5, 5]", "z = [-1e-6, 10]"), &[]).is_ok());
}

#[test]
fn windings_must_make_sense() {
    refused(
        &with("turns = \"n\"", "turns = »0"),
        &["winding `main`", "zero turns"],
    );
    refused(
        &with("turns = \"n\"", "turns = »[50, 50]"),
        &["2 numbers for 1 regions"],
    );
    refused(
        &with("turns = \"n\"\n", "").replace("name = \"main\"", "name = »\"main\""),
        &["needs the key `turns`"],
    );
    refused(
        &with("current = \"1 A\"\n", "current = \"1 A\"\n»voltage = \"5 V\"\n"),
        &["more than one drive", "`current`, `voltage`"],
    );
    refused(
        &with("current = \"1 A\"\n", "").replace("name = \"main\"", "name = »\"main\""),
        &["no drive", "current, voltage"],
    );
    refused(&with("current = \"1 A\"", "open = »false"), &["can only be true"]);
    let bare = with("wire = { diameter = \"0.5 mm\", outside = \"0.56 mm\" }\n", "");
    refused(
        &bare.replace("current = \"1 A\"", "»voltage = \"5 V\""),
        &["voltage but no resistance"],
    );
    refused(
        &and("").replace("0.56 mm\" }", "0.56 mm\" }\n»resistance = 3"),
        &["both `wire` and `resistance`"],
    );
    refused(
        &with("regions = [\"coil\"]", "regions = [\"coil\", »\"coil\"]"),
        &["listed twice"],
    );
    refused(
        &with("regions = [\"coil\"]", "regions = »[]"),
        &["at least one region"],
    );
    refused(
        &and("[[winding]]\nname = \"aux\"\nregions = [»\"coil\"]\nturns = 3\nopen = true"),
        &["two windings", "`main` and `aux`"],
    );
    refused(
        &and("[[winding]]\nname = »\"main\"\nregions = [\"coil\"]\nturns = 3\nopen = true"),
        &["already a winding `main` in line 13"],
    );
    let wire = "wire = { diameter = \"0.5 mm\", outside = \"0.56 mm\" }";
    refused(
        &with(wire, "wire = »{ outside = \"0.56 mm\" }"),
        &["needs its `diameter`"],
    );
    refused(
        &with(wire, "wire = { diameter = 0.5, awg = »24 }"),
        &["both `diameter` and `awg`"],
    );
    refused(&with(wire, "wire = { awg = »99 }"), &["`awg` must be from"]);
    refused(
        &with(wire, "wire = { diameter = 0.5, outside = »0.4 }"),
        &["smaller than the bare"],
    );
    refused(
        &with(wire, "wire = { diameter = 0.5, material = »\"air\" }"),
        &["does not conduct"],
    );
    refused(
        &with(wire, "wire = { diameter = »-0.5 }"),
        &["more than zero, not -0.5 mm"],
    );
    refused(
        &with("current = \"1 A\"", "load = »\"-3 ohm\""),
        &["more than zero"],
    );
}

#[test]
fn a_material_has_one_law() {
    refused(
        &and("[stock.odd]\nrelative_permeability = 10\n»remanence = \"1 T\""),
        &["`odd`", "`relative_permeability`, `remanence`"],
    );
    refused(
        &and("[stock.»odd]\ndensity = 7000"),
        &["no magnetic law", "relative_permeability = 1"],
    );
    refused(
        &and("[stock.odd]\nremanence = »\"1 T\""),
        &["no recoil_permeability"],
    );
    refused(
        &and("[stock.odd]\nrelative_permeability = »-3"),
        &["more than zero"],
    );
    refused(
        &and("[stock.odd]\nrelative_permeability = »[3, 4]"),
        &["anisotropic", "does not solve"],
    );
    refused(
        &and("[stock.odd]\ncurve_file = »\"nowhere.csv\""),
        &["nowhere.csv", "cannot be opened"],
    );
    refused(
        &and("[stock.odd]\ncurve = »[[0, 0]]"),
        &["`curve` of `odd`: needs at least two points"],
    );
    refused(
        &and("[stock.odd]\nlike = »\"coper\""),
        &["no material `coper`", "`copper`"],
    );
    refused(
        &and("[stock.a]\nlike = \"b\"\n[stock.b]\nlike = »\"a\""),
        &["circle: a -> b -> a"],
    );
    refused(
        &and(
            "[stock.odd]\nrelative_permeability = 9\nrelative_permeability_loss = 1\ncore_loss = »{ k = 1, alpha = 1, beta = 2 }",
        ),
        &["twice"],
    );
    refused(
        &and("[stock.odd]\nrelative_permeability = 9\nrecoil_permeability = »1"),
        &["is for magnets"],
    );
}

#[test]
fn magnets_have_a_direction_and_others_have_none() {
    let magnet = "[[region]]\nname = \"m\"\nmaterial = »\"ndfeb\"\nrect = { r = [0, 5], z = [0, 5] }\n";
    refused(&and(magnet), &["has no `magnetized`"]);
    refused(
        &(and(&magnet.replace('»', "")) + "magnetized = »[0, 0]\n"),
        &["must be a direction"],
    );
    refused(
        &with(
            "material = \"copper\"",
            "material = \"copper\"\nmagnetized = »[0, 1]",
        ),
        &["`copper` is no magnet"],
    );
    let hot = magnet.replace('»', "").replace("\"ndfeb\"", "»\"ndfeb\"")
        + "magnetized = [0, 1]\ntemperature = \"2000 degC\"\n";
    refused(&and(&hot), &["nothing is left of the remanence"]);
}

#[test]
fn surroundings_must_fit_together() {
    let wall = "[space]\nboundary = \"wall\"\nwall = { rect = { r = [0, 50], z = [-50, 50] } }\n";
    refused(
        &and(&format!("{wall}[ambient]\n»axial_b = \"0.1 T\"")),
        &["ambient", "wall"],
    );
    refused(
        &and(&format!("{wall}[stray]\n")).replace("[stray]", "»[stray]"),
        &["no stray field outside a wall"],
    );
    refused(&and("[space]\nboundary = »\"wall\""), &["needs the wall's shape"]);
    refused(
        &and("[space]\nwall = »{ rect = { r = [0, 50], z = [-50, 50] } }"),
        &["boundary is open"],
    );
    refused(
        &and("[space]\nboundary = »\"opn\""),
        &["cannot be \"opn\"", "did you mean `open`"],
    );
    let above = with("z = [-5, 5]", "z = [0, 10]");
    let text =
        format!("{above}\n[space]\nmirror = 0\nmirror_currents = \"opposite\"\n[ambient]\n»axial_b = 1\n");
    refused(&text, &["opposite"]);
}

#[test]
fn readings_must_lie_in_the_half_plane() {
    refused(&and("[[traverse]]\nname = »\"t\""), &["either `line` or `at`"]);
    refused(&and("[[traverse]]\nname = \"t\"\nat = [»-1, 0]"), &["r = -1 mm"]);
    refused(
        &and("[[traverse]]\nname = \"t\"\nline = { from = [0, 0], to = [1, 1], points = »1 }"),
        &["whole number from 2"],
    );
    refused(
        &and("[[search_coil]]\nname = \"s\"\nat = »[0, 1]"),
        &["radius of more than zero"],
    );
    refused(
        &and("[[search_coil]]\nname = \"s\"\nat = [1, 1]\nturns = »0"),
        &["zero turns"],
    );
    refused(&and("[accuracy]\ngoal = »1"), &["100 %"]);
    refused(
        &and("[accuracy]\nof = [\"inductance\", »\"impedance\"]"),
        &["other regimes"],
    );
    refused(
        &and("[accuracy]\nof = [»\"inductanse\"]"),
        &["did you mean `inductance`"],
    );
    refused(&and("[accuracy]\nmax_triangles = »7"), &["from 100"]);
}

#[test]
fn numbers_must_be_finite() {
    for bad in ["nan", "inf", "-inf"] {
        refused(&with("z = [-5, 5]", &format!("z = [-5, »{bad}]")), &["finite"]);
        refused(&with("n = 100", &format!("n = »{bad}")), &["finite"]);
    }
    refused(&with("z = [-5, 5]", "z = [-5, \"1/»0\"]"), &["division by zero"]);
    refused(
        &with("z = [-5, 5]", "z = [-5, \"»1e300*1e300 mm\"]"),
        &["too large"],
    );
}

#[test]
fn what_is_not_solved_yet_is_said_plainly_with_its_key() {
    refused(
        &with("title = \"coil\"", "regime = »\"transient\""),
        &["transient"],
    );
    refused(
        &with("current = \"1 A\"", "current = \"1 A\"\nphase = »\"90 deg\""),
        &["`phase`", "alternating"],
    );
    let found = faults(
        &(with("title = \"coil\"", "regime = \"alternating\"") + "\n[alternating]\nfrequency = \"85 kHz\"\n"),
    );
    assert_eq!(found.len(), 2, "{found:?}");
    assert!(
        found.iter().all(|fault| fault.message.contains("alternating")),
        "{found:?}"
    );
    let one_piece = with(
        "wire = { diameter = \"0.5 mm\", outside = \"0.56 mm\" }",
        "one_piece = »true",
    )
    .replace("turns = \"n\"\n", "");
    refused(&one_piece, &["`one_piece`", "not solve that yet"]);
}

#[test]
fn form_of_later_keys_is_checked_all_the_same() {
    let found = faults(&and(
        "[alternating]\nfrequency = { from = \"1 kHz\", to = \"-1 kHz\", points = 5, spacing = \"log\" }",
    ));
    assert!(
        found.iter().any(|fault| fault.message.contains("log spacing")),
        "{found:?}"
    );
    let found = faults(&and("[alternating]\nfrequency = \"5 mm\""));
    assert!(
        found
            .iter()
            .any(|fault| fault.message.contains("expects a frequency")),
        "{found:?}"
    );
}

#[test]
fn too_large_a_text_is_refused_by_its_size() {
    let text = format!("{COIL}{}", "#".repeat(LARGEST_CASE_BYTES));
    assert!(faults(&text)[0].message.contains("larger than 16 MiB"));
}

#[test]
fn files_that_cannot_be_read_are_named() {
    let said = |source: Source| match crate::case::read(&source, &[]) {
        Err(faults) => faults.to_string(),
        Ok(_) => panic!("read"),
    };
    assert!(said(Source::File("nowhere.toml".into())).contains("`nowhere.toml` cannot be opened"));
    assert!(said(Source::File(std::env::temp_dir())).contains("is a folder"));
}

#[test]
fn bytes_that_are_no_text_are_placed() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("case.toml");
    std::fs::write(&path, b"title = \"a\"\n# caf\xe9\n").expect("written");
    let Err(found) = crate::case::read(&Source::File(path), &[]) else {
        panic!("read")
    };
    assert!(
        found.list[0].message.contains("byte 0xe9 in line 2, column 6"),
        "{found}"
    );
}

#[test]
fn what_the_mesher_finds_is_shown_in_the_text_and_in_its_unit() {
    let case = super::good(COIL);
    let at = mesher::Point { r: 0.03, z: -0.005 };
    let beyond = MeshError::BeyondWall {
        region: "coil".to_owned(),
        at,
        by_m: 0.0049999999999999975,
    };
    let said = case.mesh_faults(&beyond).to_string();
    assert_eq!(
        said,
        "case.toml:10:8: region `coil` reaches beyond the wall, by 5 mm at r = 30 mm, z = -5 mm"
    );
    let covered = MeshError::RegionVanished {
        region: "coil".to_owned(),
        covered_by: vec!["lid".to_owned()],
    };
    let said = case.mesh_faults(&covered).to_string();
    assert!(
        said.starts_with("case.toml:8:8: region `coil` has no triangle"),
        "{said}"
    );
    assert!(
        case.mesh_faults(&MeshError::NothingPainted).list[0]
            .place
            .is_none()
    );
}
