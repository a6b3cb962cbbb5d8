//! `travel` of a mover and `[linkage]`.

use super::{COIL, and, good, refused};

/// The coil as a mover that travels over these places.
fn travelling(places: &str) -> String {
    and(&format!(
        "[[mover]]\nname = \"slide\"\nregions = [\"coil\"]\ntravel = {places}"
    ))
}

#[test]
fn places_are_lengths_counted_from_the_drawn_one() {
    let case = good(&travelling("{ from = \"-1 mm\", to = 4, points = 26 }"));
    let travel = case.travel.as_ref().unwrap();
    assert_eq!((travel.mover, travel.offsets_m.len()), (0, 26));
    assert_eq!([travel.offsets_m[0], travel.offsets_m[25]], [-1e-3, 4e-3]);
    // The drawn place is the sixth, up to round-off.
    assert_eq!(travel.shown(), 5);
    assert_eq!(good(&travelling("[3, 2, 1]")).travel.unwrap().shown(), 0);
    assert_eq!(good(&travelling("0")).travel.unwrap().offsets_m, [0.0]);
    assert!(good(COIL).travel.is_none());
}

#[test]
fn only_the_movers_regions_move_and_the_order_of_painting_stays() {
    let text = travelling("[0, 2]")
        + "[[region]]\nname = \"post\"\nmaterial = \"air\"\nrect = { r = [0, 5], z = [-5, 5] }\n";
    let case = good(&text);
    let moved = case.section_at(2e-3).unwrap();
    for (before, after) in case.section.regions.iter().zip(&moved.regions) {
        assert_eq!(before.name, after.name);
        let [low, high] = [before, after].map(|region| region.copies[0].bounds().low.z);
        let lift = if before.name == "coil" { 2e-3 } else { 0.0 };
        assert!((high - low - lift).abs() < 1e-15, "{}", before.name);
    }
    let drawn = case.section_at(0.0).unwrap();
    assert_eq!(drawn.regions[0].copies, case.section.regions[0].copies);
}

#[test]
fn a_place_that_cannot_be_is_named() {
    refused(
        &(travelling("[0, 1, 5]").replace("travel", "»travel")
            + "[space]\nmirror = \"-8 mm\"\nmirror_currents = \"same\"\n")
            .replace("[0, 1, 5]", "[0, -2, -5]"),
        &[
            "at travel = -5 mm",
            "mover `slide`",
            "region `coil` below the mirror: down to z = -10 mm",
        ],
    );
    refused(
        &(travelling("[0, 6]").replace("travel", "»travel")
            + "[space]\nboundary = \"wall\"\nwall = { rect = { r = [0, 50], z = [-10, 10] } }\n"),
        &["at travel = 6 mm", "region `coil` beyond the wall"],
    );
    refused(
        &travelling("[0, 1, 1]").replace("travel", "»travel"),
        &["one way", "repeating"],
    );
    refused(
        &travelling("[0, 2, 1]").replace("travel", "»travel"),
        &["one way"],
    );
    refused(&travelling("»\"3 A\""), &["`travel` expects a length"]);
}

#[test]
fn one_mover_travels() {
    let second = "[[region]]\nname = \"disc\"\nmaterial = \"air\"\nrect = { r = [0, 5], z = [-5, 5] }\n\
                  [[mover]]\nname = \"other\"\nregions = [\"disc\"]\n»travel = [0, 1]\n";
    refused(
        &(travelling("[0, 1]") + "\n" + second),
        &["only one mover", "`slide`"],
    );
}

#[test]
fn linkage_names_a_winding_and_its_currents() {
    let case = good(&and(
        "[linkage]\nwinding = \"main\"\ncurrent = { from = 0, to = \"2 A\", points = 5 }",
    ));
    let linkage = case.linkage.unwrap();
    assert_eq!(
        (linkage.winding, linkage.currents_a.as_slice()),
        (0, &[0.0, 0.5, 1.0, 1.5, 2.0][..])
    );
    refused(
        &and("[linkage]\nwinding = »\"mian\"\ncurrent = 1"),
        &["no winding `mian`", "`main`"],
    );
    refused(
        &and("[linkage]\nwinding = \"main\"\ncurrent = »\"1 V\""),
        &["`current` expects"],
    );
}
