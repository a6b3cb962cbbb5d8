//! The properties. Numbers that stand for the same thing must agree within the sum of their half widths: no
//! tolerance is chosen here.

use coilwright_tests::{Body, Coil, Mirror, Scene, Solved};
use proptest::prelude::*;
use proptest::test_runner::{RngSeed, TestCaseError};
use solver::Bracket;

use super::strategy::{anything, coils_and_iron};

fn config(cases: u32, seed: u64) -> ProptestConfig {
    ProptestConfig {
        cases,
        rng_seed: RngSeed::Fixed(seed),
        failure_persistence: None,
        max_shrink_iters: 20,
        ..ProptestConfig::default()
    }
}

fn solve(text: &str) -> Result<Solved, TestCaseError> {
    Solved::new(text).map_err(TestCaseError::fail)
}

/// `a` and `factor` x `b` agree within their intervals.
fn agree(a: Bracket, b: Bracket, factor: f64, what: &str) -> Result<(), TestCaseError> {
    let room = a.half_width() + factor.abs() * b.half_width();
    prop_assert!(
        (a.value - factor * b.value).abs() <= room,
        "{what}: {a:?} against {factor} x {b:?}"
    );
    Ok(())
}

fn matrix(solved: &Solved) -> Vec<Vec<f64>> {
    solved
        .quantities
        .inductance_h
        .iter()
        .map(|row| row.iter().map(|entry| entry.value).collect())
        .collect()
}

/// Smallest pivot of the Cholesky factorisation of the matrix scaled to a unit diagonal.
fn smallest_pivot(matrix: &[Vec<f64>]) -> f64 {
    let n = matrix.len();
    let mut a: Vec<Vec<f64>> = (0..n)
        .map(|i| {
            (0..n)
                .map(|j| matrix[i][j] / (matrix[i][i] * matrix[j][j]).sqrt())
                .collect()
        })
        .collect();
    let mut smallest = f64::INFINITY;
    for k in 0..n {
        let pivot = a[k].clone();
        smallest = smallest.min(pivot[k]);
        for row in a.iter_mut().skip(k + 1) {
            let share = row[k] / pivot[k];
            row.iter_mut().zip(&pivot).for_each(|(x, p)| *x -= share * p);
        }
    }
    smallest
}

/// The scene with the first coil wound the other way.
fn reversed(scene: &Scene) -> Scene {
    let mut reversed = scene.clone();
    reversed.coils[0].turns = -reversed.coils[0].turns;
    reversed
}

proptest! {
    #![proptest_config(config(12, 1))]

    #[test]
    fn the_inductance_matrix_is_symmetric_and_positive_definite(scene in coils_and_iron()) {
        let l = matrix(&solve(&scene.case_text())?);
        for i in 0..l.len() {
            for j in 0..i {
                let scale = (l[i][i] * l[j][j]).sqrt();
                prop_assert!((l[i][j] - l[j][i]).abs() <= 1e-12 * scale, "{l:?}");
            }
        }
        prop_assert!(l.iter().enumerate().all(|(i, row)| row[i] > 0.0) && smallest_pivot(&l) > 0.0, "{l:?}");
    }

    #[test]
    fn reversing_a_winding_flips_the_signs_of_its_mutual_inductances_only(scene in coils_and_iron()) {
        let (l, m) = (matrix(&solve(&scene.case_text())?), matrix(&solve(&reversed(&scene).case_text())?));
        for i in 0..l.len() {
            for j in 0..l.len() {
                let sign = if (i == 0) == (j == 0) { 1.0 } else { -1.0 };
                let scale = (l[i][i] * l[j][j]).sqrt();
                prop_assert!((l[i][j] - sign * m[i][j]).abs() <= 1e-9 * scale, "{l:?} {m:?}");
            }
        }
    }

    #[test]
    fn without_magnets_the_energy_is_half_the_sum_of_current_times_linkage(scene in coils_and_iron()) {
        let quantities = solve(&scene.case_text())?.quantities;
        let half: f64 = quantities.windings.iter().map(|w| 0.5 * w.current_a.value * w.flux_linkage_wb.value).sum();
        let energy = quantities.energy_j.unwrap().value;
        prop_assert!((energy - half).abs() <= 1e-9 * energy, "{energy} {half}");
        let coenergy = quantities.coenergy_j.unwrap().value;
        prop_assert!((energy - coenergy).abs() <= 1e-9 * energy, "{energy} {coenergy}");
    }
}

proptest! {
    #![proptest_config(config(8, 2))]

    #[test]
    fn lengths_times_ten_make_inductance_times_ten_and_leave_the_force(scene in coils_and_iron()) {
        let small = solve(&scene.case_text())?.quantities;
        let large = solve(&Scene { unit: "cm", ..scene.clone() }.case_text())?.quantities;
        for (row, larger) in small.inductance_h.iter().zip(&large.inductance_h) {
            for (a, b) in row.iter().zip(larger) {
                agree(*b, *a, 10.0, "inductance")?;
            }
        }
        for (a, b) in small.movers.iter().zip(&large.movers) {
            agree(a.force_n.unwrap(), b.force_n.unwrap(), 1.0, &a.name)?;
        }
    }

    #[test]
    fn all_forces_in_free_space_sum_to_zero(scene in anything()) {
        let solved = solve(&scene.case_text())?;
        let forces: Option<Vec<Bracket>> = scene.movers().iter().map(|name| solved.force(name)).collect();
        let forces = forces.unwrap();
        let sum: f64 = forces.iter().map(|force| force.value).sum();
        let room: f64 = forces.iter().map(Bracket::half_width).sum();
        prop_assert!(sum.abs() <= room, "{sum} of {forces:?}");
    }

    #[test]
    fn stress_and_current_in_field_give_the_same_force_on_a_coil(scene in anything()) {
        let solved = solve(&scene.case_text())?;
        for index in 0..scene.coils.len() {
            let name = format!("c{index}");
            agree(solved.force(&name).unwrap(), solved.side_force(&name).unwrap(), 1.0, &name)?;
        }
    }

    #[test]
    fn a_half_with_its_mirror_is_the_whole(scene in anything(), opposite in any::<bool>()) {
        let mirror = if opposite { Mirror::Opposite } else { Mirror::Same };
        let half = Scene { mirror: Some(mirror), ..scene };
        let (folded, whole) = (solve(&half.case_text())?, solve(&half.unfolded_case_text())?);
        let (f, w) = (&folded.quantities, &whole.quantities);
        for (row, other) in f.inductance_h.iter().zip(&w.inductance_h) {
            for (a, b) in row.iter().zip(other) {
                agree(*a, *b, 1.0, "inductance")?;
            }
        }
        agree(f.energy_j.unwrap(), w.energy_j.unwrap(), 1.0, "energy")?;
        for (a, b) in f.windings.iter().zip(&w.windings) {
            agree(a.flux_linkage_wb, b.flux_linkage_wb, 1.0, &a.name)?;
        }
        for name in half.movers() {
            agree(folded.force(&name).unwrap(), whole.force(&name).unwrap(), 1.0, &name)?;
        }
    }
}

/// The random scenes may hold forces too weak to be told from nothing; this one does not.
#[test]
fn forces_far_above_their_intervals_sum_to_zero_too() {
    let scene = Scene {
        unit: "mm",
        coils: vec![Coil {
            r: [6.0, 12.0],
            z: [0.0, 8.0],
            turns: 200.0,
            current_a: 3.0,
        }],
        bodies: vec![
            Body {
                r: [0.0, 10.0],
                z: [10.0, 15.0],
                permeability: 300.0,
                remanence_t: 0.0,
            },
            Body {
                r: [0.0, 8.0],
                z: [17.0, 25.0],
                permeability: 1.05,
                remanence_t: 1.1,
            },
        ],
        mirror: None,
    };
    let solved = Solved::new(&scene.case_text()).unwrap();
    let forces: Vec<Bracket> = scene
        .movers()
        .iter()
        .map(|name| solved.force(name).unwrap())
        .collect();
    let sum: f64 = forces.iter().map(|force| force.value).sum();
    let room: f64 = forces.iter().map(Bracket::half_width).sum();
    assert!(sum.abs() <= room, "{sum} of {forces:?}");
    assert!(
        forces.iter().any(|force| force.value.abs() > 20.0 * room),
        "{forces:?}"
    );
}
