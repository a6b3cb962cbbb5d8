//! What the program answers to whoever started it: status codes, help, where text goes.

use crate::harness::{COIL, Room};

#[test]
fn a_solved_case_ends_with_0_and_writes_every_file_whole() {
    let room = Room::with_case(COIL);
    let ran = room.run(&["solve", "case.toml"]);
    assert_eq!(ran.status, 0, "{}", ran.err);
    assert!(
        ran.out.contains("main"),
        "the report goes to standard output: {}",
        ran.out
    );
    assert_eq!(ran.err, "", "no progress where standard error is no terminal");
    let folder = room.path().join("case.out");
    for name in [
        "report.json",
        "report.txt",
        "field.vtu",
        "picture.svg",
        "resolved.toml",
    ] {
        let size = std::fs::metadata(folder.join(name))
            .unwrap_or_else(|error| panic!("{name}: {error}"))
            .len();
        assert!(size > 100, "{name} has {size} bytes");
    }
    assert_eq!(
        std::fs::read_to_string(folder.join("report.txt"))
            .unwrap()
            .trim_end(),
        ran.out.trim_end()
    );
}

#[test]
fn the_resolved_case_repeats_the_run() {
    let room = Room::with_case(COIL);
    assert_eq!(
        room.run(&["solve", "case.toml", "--quiet", "--set", "outer=33 mm"])
            .status,
        0
    );
    let resolved = std::fs::read_to_string(room.path().join("case.out/resolved.toml")).unwrap();
    assert!(resolved.contains(env!("CARGO_PKG_VERSION")), "{resolved}");
    let direct = room.solve_json(&["--set", "outer=33 mm"]);
    room.write("case.toml", resolved.as_bytes());
    let again = room.solve_json(&[]);
    let pointer = "/results/0/inductance_h/main/main";
    assert!(direct.pointer(pointer).is_some());
    assert_eq!(direct.pointer(pointer), again.pointer(pointer));
}

#[test]
fn a_goal_out_of_reach_ends_with_3_and_everything_is_written() {
    let room = Room::with_case(&format!(
        "{COIL}\n[accuracy]\ngoal = \"0.00001 %\"\nmax_triangles = 100000\n"
    ));
    let ran = room.run(&["solve", "case.toml", "--out", "here"]);
    assert_eq!(ran.status, 3, "{}{}", ran.out, ran.err);
    let report = std::fs::read_to_string(room.path().join("here/report.json")).unwrap();
    let json: serde_json::Value = serde_json::from_str(&report).unwrap();
    assert_eq!(json["accuracy"]["met"], false);
    assert!(
        json["accuracy"]["why_not"]
            .as_str()
            .is_some_and(|why| why.contains("main")),
        "{}",
        json["accuracy"]
    );
    assert!(room.path().join("here/field.vtu").exists());
}

#[test]
fn a_wrong_command_line_ends_with_2() {
    let room = Room::with_case(COIL);
    for arguments in [
        &["solve"][..],
        &["solvve", "case.toml"],
        &["solve", "case.toml", "--threads", "0"],
        &[],
    ] {
        let ran = room.run(arguments);
        ran.assert_calm();
        assert_eq!(ran.status, 2, "{arguments:?}");
    }
}

#[test]
fn help_and_version_end_with_0_on_standard_output() {
    let room = Room::new();
    let ran = room.run(&["--version"]);
    assert_eq!(
        (ran.status, ran.out.trim()),
        (0, concat!("coilwright ", env!("CARGO_PKG_VERSION")))
    );
    let ran = room.run(&["solve", "--help"]);
    assert!(ran.status == 0 && ran.out.contains("--json") && ran.out.contains("--set"));
}

#[test]
fn the_stock_tells_the_source_of_its_data() {
    let room = Room::new();
    let list = room.run(&["stock"]);
    assert!(list.status == 0 && list.out.contains("copper"), "{}", list.out);
    let copper = room.run(&["stock", "copper"]);
    assert!(
        copper.status == 0 && copper.out.contains("IEC 60028"),
        "{}",
        copper.out
    );
    let wrong = room.run(&["stock", "coper"]);
    assert!(wrong.status == 2 && wrong.err.contains("copper"), "{}", wrong.err);
}

#[test]
fn the_schema_is_json_and_knows_the_keys() {
    let ran = Room::new().run(&["schema"]);
    let schema: serde_json::Value = serde_json::from_str(&ran.out).unwrap();
    for key in [
        "region",
        "winding",
        "mover",
        "space",
        "ambient",
        "traverse",
        "search_coil",
        "stray",
        "accuracy",
    ] {
        assert!(schema["properties"].get(key).is_some(), "{key}");
    }
}

#[test]
fn completions_are_printed_for_common_shells() {
    for shell in ["bash", "zsh", "fish"] {
        let ran = Room::new().run(&["completions", shell]);
        assert!(ran.status == 0 && ran.out.contains("coilwright"), "{shell}");
    }
}

#[test]
fn a_drawing_needs_no_solve() {
    let room = Room::with_case(COIL);
    let ran = room.run(&["draw", "case.toml"]);
    assert_eq!(ran.status, 0, "{}", ran.err);
    let picture = std::fs::read_to_string(room.path().join("case.svg")).unwrap();
    assert!(picture.contains("<svg") && picture.contains("coil"));
}

#[test]
fn colours_follow_no_color_and_the_lack_of_a_terminal() {
    let room = Room::with_case(&COIL.replace("current", "curent"));
    let plain = room.run(&["solve", "case.toml"]);
    assert!(!plain.err.contains('\u{1b}'), "{:?}", plain.err);
    let mut command = room.command(&["solve", "case.toml"]);
    command.env_remove("NO_COLOR");
    let piped = String::from_utf8(command.output().unwrap().stderr).unwrap();
    assert!(!piped.contains('\u{1b}'), "a pipe is no terminal: {piped:?}");
}
