use solver::MU0;

use super::*;

fn rows(points: &[[f64; 2]]) -> Vec<RowPoint> {
    points
        .iter()
        .enumerate()
        .map(|(k, p)| RowPoint {
            row: k + 1,
            h_a_per_m: p[0],
            b_t: p[1],
        })
        .collect()
}

fn first(points: &[[f64; 2]]) -> Result<Judged, Unfit> {
    judge(&rows(points), Quadrant::First)
}

fn second(points: &[[f64; 2]]) -> Result<Judged, Unfit> {
    judge(&rows(points), Quadrant::Second)
}

const STEEL: [[f64; 2]; 5] = [[0.0, 0.0], [200.0, 0.8], [1e3, 1.5], [1e4, 1.8], [1e5, 2.1]];

#[test]
fn a_sound_curve_stays_as_it_is() {
    let judged = first(&STEEL).unwrap();
    assert_eq!(judged.points, STEEL);
    assert!(judged.repaired_rows.is_empty());
    assert!(solver::reluctivity::Curve::new(&judged.points).is_ok());
}

#[test]
fn noise_at_saturation_is_raised_to_follow_air() {
    // Polarisation 2.000, then 1.995 and 1.990: less than 2 % lost in the last rows.
    let mut points = STEEL.to_vec();
    points[4][1] = 2.0 + MU0 * 1e5;
    points.push([2e5, 1.995 + MU0 * 2e5]);
    points.push([3e5, 1.990 + MU0 * 3e5]);
    let judged = first(&points).unwrap();
    assert_eq!(judged.repaired_rows, [6, 7]);
    assert!((judged.points[6][1] - (2.0 + MU0 * 3e5)).abs() < 1e-12);
    assert!(solver::reluctivity::Curve::new(&judged.points).is_ok());
    points[6][1] = 1.9 + MU0 * 3e5;
    assert_eq!(first(&points), Err(Unfit::UnderAir { row: 7 }), "5 % is no noise");
}

#[test]
fn less_than_air_far_from_saturation_is_no_noise() {
    let points = [[0.0, 0.0], [100.0, 0.5], [3000.0, 0.502], [4000.0, 1.5]];
    assert_eq!(first(&points), Err(Unfit::UnderAir { row: 3 }));
}

#[test]
fn what_no_material_does_is_refused_by_its_row() {
    let row = |points: &[[f64; 2]]| first(points).unwrap_err().row();
    assert!(matches!(
        first(&[[0.0, 0.0], [100.0, 0.5]]),
        Err(Unfit::TooFew { points: 1, .. })
    ));
    assert_eq!(row(&[[0.0, 0.0], [100.0, 0.5], [200.0, 0.4]]), Some(3));
    assert_eq!(row(&[[0.0, 0.0], [100.0, 0.5], [100.0, 0.6]]), Some(3));
    assert_eq!(row(&[[0.0, 0.3], [100.0, 0.5]]), Some(1));
    assert_eq!(row(&[[10.0, 0.3], [100.0, f64::NAN]]), Some(2));
    assert_eq!(row(&[[10.0, 0.3], [-100.0, 0.5]]), Some(2));
    assert_eq!(
        row(&[[1e5, 0.01], [2e5, 0.02]]),
        Some(1),
        "less than air from the start"
    );
}

#[test]
fn mixed_up_units_are_told() {
    let looks = |points: &[[f64; 2]]| first(points).unwrap_err().to_string();
    assert!(looks(&[[0.0, 0.0], [100.0, 5000.0], [1e3, 15_000.0]]).starts_with("row 2: B = 5000 T"));
    assert!(looks(&[[0.0, 0.0], [100.0, 0.5], [1e3, 2.9]]).contains("polarisation B - mu0 H of 2.899 T"));
    assert!(looks(&[[0.0, 0.0], [0.1, 0.5], [1.0, 1.5]]).contains("relative permeability of 3.98e6"));
}

#[test]
fn a_demagnetisation_curve_may_run_either_way() {
    let up = [[-9e5, -0.2], [-8e5, 0.1], [-4e5, 0.68], [0.0, 1.2]];
    let mut down = up;
    down.reverse();
    assert_eq!(second(&up).unwrap().points, up);
    assert_eq!(second(&down).unwrap().points, up);
    assert!(solver::reluctivity::Demagnetisation::new(&up).is_ok());
    assert!(matches!(
        second(&[[0.0, 1.2], [9e5, 0.0]]),
        Err(Unfit::WrongQuadrant { row: 2, .. })
    ));
    assert!(matches!(
        second(&[[-1e5, 1.0], [-9e5, 0.0]]),
        Err(Unfit::NoRemanence)
    ));
    assert!(matches!(
        second(&[[0.0, 1.2], [-1e5, 1.3]]),
        Err(Unfit::BFalling { row: 2, .. })
    ));
}

#[test]
fn a_recoil_line_rounded_under_air_is_repaired() {
    let judged = second(&[[0.0, 1.2], [-955e3, 0.0]]).unwrap();
    assert_eq!(judged.repaired_rows, [2]);
    assert_eq!(judged.points[1], [0.0, 1.2], "remanence stays");
    assert!(solver::reluctivity::Demagnetisation::new(&judged.points).is_ok());
}

#[test]
fn files_tell_their_units_in_any_order() {
    let points = CurveFile::parse("# measured\nB [G]; H [Oe]; remark\n5000; 1; a\n15000; 10; b\n")
        .unwrap()
        .points;
    assert_eq!((points[0].row, points[1].row), (3, 4));
    assert!((points[1].b_t - 1.5).abs() < 1e-12);
    assert!((points[1].h_a_per_m - 10.0 * 250.0 / std::f64::consts::PI).abs() < 1e-9);
    let points = CurveFile::parse("\u{feff}h (kA/m), b (mT)\n0.1, 500\n")
        .unwrap()
        .points;
    assert!((points[0].h_a_per_m - 100.0).abs() < 1e-12 && (points[0].b_t - 0.5).abs() < 1e-15);
}

#[test]
fn files_that_are_no_curves_say_row_and_what_was_expected() {
    for (text, words) in [
        ("", "is empty"),
        (
            "0,0\n100,0.5\n",
            "row 1: the units of H and B are not told; expected a header row such as `H (A/m), B (T)`",
        ),
        ("H, B (T)\n", "row 1: the column `H` does not tell its unit"),
        ("H (A/m), B (A/m)\n", "row 1: `A/m` is no unit of B"),
        ("H (A/m), J (T)\n", "row 1: there is no column B"),
        ("H (furlong), B (T)\n", "`furlong` is no unit of H"),
        (
            "H (A/m), B (T)\n0, 0\n100\n",
            "row 3: expected 2 fields as in the header, found 1",
        ),
        (
            "H (A/m), B (T)\n0, 0\n100, half\n",
            "row 3: expected a number for B, found `half`",
        ),
        (
            "H (A/m), B (T)\n0, NaN\n",
            "row 2: expected a number for B, found `NaN`",
        ),
        (
            "H (A/m); B (T)\n0; 0,5\n",
            "row 2: expected a number for B, found `0,5`",
        ),
    ] {
        let said = CurveFile::parse(text).unwrap_err().to_string();
        assert!(said.contains(words), "{said}");
    }
}
