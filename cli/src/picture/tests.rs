use super::*;
use crate::sample;

#[test]
fn a_solved_picture_says_what_it_must() {
    let picture = of_solution(&sample::case(), &sample::solution()).unwrap();
    for words in [
        "Drip-line valve &lt;&quot;1&quot; &amp; only&gt;",
        ">plunger<",
        ">coil<",
        "900 turns × 500 mA = 450 A",
        "from one flux line to the next.",
        "Inductance of main: 12.3 mH (12.2 .. 12.5).",
        "Force on plunger:",
        "(-3.24 .. -3.16) (down).",
        " mm<",
        "flux density",
    ] {
        assert!(picture.contains(words), "{words:?} is missing");
    }
    assert!(picture.contains("class=\"mark-dot\"") && picture.contains("class=\"mark-line\""));
    assert!(picture.len() < 1_500_000, "{}", picture.len());
    assert!(picture.matches("class=\"flux-value\"").count() >= 5);
}

#[test]
fn a_drawing_needs_no_solution() {
    let picture = of_drawing(&sample::case()).unwrap();
    for words in [
        ">plunger<",
        ">yoke-iron<",
        "winding main, 900 turns",
        "height, mm",
        "distance from the axis, mm",
    ] {
        assert!(picture.contains(words), "{words:?} is missing");
    }
    assert!(!picture.contains("flux density"), "nothing was solved");
}

#[test]
fn the_same_case_gives_the_same_picture() {
    let picture = || of_solution(&sample::case(), &sample::solution()).unwrap();
    assert_eq!(picture(), picture());
}

/// Writes the pictures of the sample case to a folder to be looked at:
/// `PICTURES=/tmp cargo test -p coilwright pictures_to_look_at -- --ignored`.
#[test]
#[ignore = "for the eye"]
fn pictures_to_look_at() {
    let Some(folder) = std::env::var_os("PICTURES").map(std::path::PathBuf::from) else {
        return;
    };
    std::fs::write(
        folder.join("solved.svg"),
        of_solution(&sample::case(), &sample::solution()).unwrap(),
    )
    .unwrap();
    std::fs::write(folder.join("drawn.svg"), of_drawing(&sample::case()).unwrap()).unwrap();
}
