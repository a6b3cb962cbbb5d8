//! A travel and a linkage curve, from the case to the files.

use serde_json::Value;

use crate::harness::{Room, number};

/// A plunger before a core in a coil, drawn 1 mm apart.
const PLUNGER: &str = r#"title = "Plunger"
[stock.steel]
saturation = { polarization = "1.8 T", half_field = "500 A/m" }

[[region]]
name = "plunger"
material = "steel"
rect = { r = [0, 5], z = [1, 21] }
[[region]]
name = "core"
material = "steel"
rect = { r = [0, 5], z = [-10, 0] }
[[region]]
name = "coil"
material = "copper"
rect = { r = [6, 12], z = [-9, 14] }
[[winding]]
name = "main"
regions = ["coil"]
turns = 1000
current = "1.5 A"
[[mover]]
name = "plunger"
regions = ["plunger"]
travel = { from = "-0.5 mm", to = "1.5 mm", points = 5 }
[linkage]
winding = "main"
current = [0, 1.5, 3]
[[traverse]]
name = "axis"
at = [0, 0.5]
"#;

fn ends(json: &Value, pointer: &str) -> [f64; 2] {
    ["low", "high"].map(|end| number(json, &format!("{pointer}/{end}")))
}

#[test]
fn has_an_entry_for_each_place_and_the_work_is_the_change_of_coenergy() {
    let json = Room::with_case(PLUNGER).solve_json(&[]);
    let results = json["results"].as_array().unwrap();
    let places: Vec<f64> = results.iter().map(|of| number(of, "/at/travel_m")).collect();
    assert_eq!(places, [-0.5e-3, 0.0, 0.5e-3, 1e-3, 1.5e-3]);
    let force = |of: &Value| number(of, "/movers/plunger/force_n/value");
    for pair in results.windows(2) {
        assert!(force(&pair[0]) < force(&pair[1]) && force(&pair[1]) < 0.0);
    }
    for of in results {
        let [low, high] = ends(of, "/movers/plunger/force_n");
        let check = ends(of, "/movers/plunger/force_by_coenergy_n");
        assert!(low <= check[1] && check[0] <= high, "{of:#}");
    }
    assert_eq!(json["travel"]["mover"], "plunger");
    let (work, change) = (
        ends(&json, "/travel/work_j"),
        ends(&json, "/travel/coenergy_change_j"),
    );
    assert!(
        work[0] <= change[1] && change[0] <= work[1],
        "{work:?} {change:?}"
    );
    assert!(work[1] < 0.0, "pulled apart against its pull");
    let total = number(&json, "/results/4/movers/plunger/work_j/value");
    assert_eq!(total, number(&json, "/travel/work_j/value"));
}

#[test]
fn the_drawn_place_is_what_the_case_without_travel_says_and_so_is_the_linkage_curve() {
    let json = Room::with_case(PLUNGER).solve_json(&[]);
    let alone: String = PLUNGER
        .lines()
        .filter(|line| !line.starts_with("travel"))
        .map(|l| format!("{l}\n"))
        .collect();
    let alone = Room::with_case(&alone).solve_json(&[]);
    for path in [
        "/movers/plunger/force_n",
        "/inductance_h/main/main",
        "/coenergy_j",
    ] {
        for end in ["value", "low", "high"] {
            let [a, b] = [("/results/1", &json), ("/results/0", &alone)]
                .map(|(result, json)| number(json, &format!("{result}{path}/{end}")));
            assert!((a - b).abs() <= 1e-9 * a.abs(), "{path}/{end}: {a} {b}");
        }
    }
    let [low, high] = ends(&json, "/linkage/points/1/flux_linkage_wb");
    let linkage = ends(&alone, "/results/0/windings/main/flux_linkage_wb");
    assert!(
        low <= linkage[1] && linkage[0] <= high,
        "{low} {high} {linkage:?}"
    );
    assert_eq!(number(&json, "/linkage/points/0/flux_linkage_wb/value"), 0.0);
    let slope = |point: usize| {
        number(
            &json,
            &format!("/linkage/points/{point}/incremental_inductance_h/value"),
        )
    };
    assert!(slope(2) < slope(0), "it saturates");
}

#[test]
fn numbers_do_not_depend_on_the_threads() {
    let results =
        |threads: &str| Room::with_case(PLUNGER).solve_json(&["--threads", threads])["results"].clone();
    let (one, three) = (results("1"), results("3"));
    for index in 0..5 {
        for path in [
            "movers/plunger/force_n/value",
            "windings/main/flux_linkage_wb/high",
        ] {
            let path = format!("/{index}/{path}");
            let (a, b) = (number(&one, &path), number(&three, &path));
            assert!((a - b).abs() <= 1e-9 * a.abs(), "{path}: {a} {b}");
        }
    }
}

#[test]
fn writes_tables_and_plots_and_the_report_shows_the_drawn_place() {
    let room = Room::with_case(PLUNGER);
    let ran = room.run(&["solve", "case.toml", "--out", "out"]);
    assert_eq!(ran.status, 0, "{}", ran.err);
    let read = |name: &str| std::fs::read_to_string(room.path().join("out").join(name)).unwrap();
    let rows = read("travel-plunger.csv");
    assert!(
        rows.starts_with("travel_m,force_n,force_n_low,force_n_high,force_by_coenergy_n,"),
        "{rows}"
    );
    assert!(
        rows.lines()
            .next()
            .unwrap()
            .contains("main.incremental_inductance_h_high")
    );
    assert_eq!(rows.lines().count(), 6);
    let cells = |line: &str| line.split(',').count();
    assert!(
        rows.lines()
            .all(|line| cells(line) == cells(rows.lines().next().unwrap()))
    );
    assert_eq!(read("linkage-main.csv").lines().count(), 4);
    for (name, words) in [
        ("travel-plunger.svg", "force on plunger, N"),
        ("linkage-main.svg", "current in main, A"),
    ] {
        let plot = read(name);
        assert!(
            plot.starts_with("<svg") && plot.contains(words) && !plot.contains("NaN"),
            "{plot}"
        );
    }
    let page = read("report.txt");
    assert!(
        page.contains("Travel of plunger") && page.contains("Linkage of main over its current"),
        "{page}"
    );
    assert!(page.contains("What follows holds at travel = 0 mm"), "{page}");
    assert_eq!(page.matches("\nAxial forces\n").count(), 1);
    assert_eq!(read("traverse-axis.csv").lines().count(), 2);
}

#[test]
fn a_place_that_cannot_be_meshed_is_named_and_nothing_is_written() {
    // A round wall: the boxes do not tell, the mesher does.
    let text = PLUNGER.replace("to = \"1.5 mm\"", "to = \"33.9 mm\"")
        + "[space]\nboundary = \"wall\"\nwall = { circle = { centre = [0, 10], radius = 45 } }\n";
    let room = Room::with_case(&text);
    let ran = room.run(&["solve", "case.toml", "--out", "out"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", ran.err);
    assert!(
        ran.err.contains("at travel = 33.9 mm") && ran.err.contains("`plunger`"),
        "{}",
        ran.err
    );
    assert_eq!(room.names(), ["case.toml"]);
}
