use super::*;
use crate::linear::LowRank;
use nalgebra_sparse::{CooMatrix, CsrMatrix};

/// Five-point Laplacian on a square grid with `side`² unknowns, and two rank-one terms on its first row of points.
fn grid(side: usize) -> Matrix {
    let mut entries = CooMatrix::new(side * side, side * side);
    for i in 0..side {
        for j in 0..side {
            let here = i * side + j;
            entries.push(here, here, 4.0);
            if j + 1 < side {
                entries.push(here, here + 1, -1.0);
                entries.push(here + 1, here, -1.0);
            }
            if i + 1 < side {
                entries.push(here, here + side, -1.0);
                entries.push(here + side, here, -1.0);
            }
        }
    }
    let rows: Vec<usize> = (0..side).collect();
    let vectors = vec![
        vec![0.5; side],
        rows.iter().map(|&k| 1.0 / (1.0 + k as f64)).collect(),
    ];
    Matrix {
        sparse: CsrMatrix::from(&entries),
        low_rank: LowRank { rows, vectors },
    }
}

fn factored(matrix: Matrix) -> Result<Cholesky, LinearError> {
    let symbolic = Symbolic::new(matrix.sparse.pattern(), &matrix.low_rank)?;
    Cholesky::new(symbolic, matrix)
}

fn loads(n: usize, count: usize) -> Vec<Vec<f64>> {
    (0..count)
        .map(|k| (0..n).map(|i| ((i * (k + 3)) as f64 * 0.37).sin()).collect())
        .collect()
}

#[test]
fn solutions_of_several_loads_satisfy_the_whole_system() {
    for side in [1, 2, 9, 60] {
        let factor = factored(grid(side)).unwrap();
        let loads = loads(side * side, 5);
        let solutions = factor.solve(&loads).unwrap();
        for (x, load) in solutions.iter().zip(&loads) {
            let product = factor.matrix().product(x);
            let error: f64 = product
                .iter()
                .zip(load)
                .map(|(p, b)| (p - b).abs())
                .fold(0.0, f64::max);
            assert!(error < 1e-12, "{side}: {error}");
        }
    }
}

#[test]
fn the_border_equals_the_formed_sum() {
    // The same matrix with its rank-one terms added into the sparse part.
    let matrix = grid(12);
    let mut dense = CooMatrix::from(&matrix.sparse);
    for v in &matrix.low_rank.vectors {
        for (a, &i) in v.iter().zip(&matrix.low_rank.rows) {
            for (b, &j) in v.iter().zip(&matrix.low_rank.rows) {
                dense.push(i, j, a * b);
            }
        }
    }
    let formed = Matrix {
        sparse: CsrMatrix::from(&dense),
        low_rank: LowRank::default(),
    };
    let load = loads(144, 1);
    let (a, b) = (
        factored(matrix).unwrap().solve(&load),
        factored(formed).unwrap().solve(&load),
    );
    let (a, b) = (&a.unwrap()[0], &b.unwrap()[0]);
    assert!(a.iter().zip(b).all(|(a, b)| (a - b).abs() < 1e-13));
}

#[test]
fn another_matrix_on_the_pattern_keeps_the_analysis() {
    let first = factored(grid(20)).unwrap();
    let mut matrix = grid(20);
    matrix.sparse.values_mut().iter_mut().for_each(|v| *v *= 3.0);
    let load = loads(400, 1);
    let again = Cholesky::new(first.symbolic().clone(), matrix).unwrap();
    let x = again.solve(&load).unwrap();
    let residual = again.matrix().residual(&x[0], &load[0]);
    assert!(residual.iter().all(|r| r.abs() < 1e-12));
}

/// Path graph Laplacian with both ends free: singular, its null vector is constant.
fn singular(n: usize) -> Matrix {
    let mut entries = CooMatrix::new(n, n);
    for i in 0..n - 1 {
        for (a, b, v) in [
            (i, i, 1.0),
            (i + 1, i + 1, 1.0),
            (i, i + 1, -1.0),
            (i + 1, i, -1.0),
        ] {
            entries.push(a, b, v);
        }
    }
    Matrix {
        sparse: CsrMatrix::from(&entries),
        low_rank: LowRank::default(),
    }
}

// faer has been seen to answer Ok with infinities for a singular matrix: these guard the checks that catch it.
#[test]
fn singular_indefinite_and_broken_matrices_are_refused() {
    for n in [2, 3, 50, 400] {
        let outcome = factored(singular(n));
        assert!(
            matches!(outcome, Err(LinearError::NotPositiveDefinite { .. })),
            "{n}: {outcome:?}"
        );
    }
    // Singular but for round-off: pivots of 1e-16 are noise, not stiffness.
    let mut nearly = singular(400);
    let values = nearly.sparse.values_mut();
    values.iter_mut().for_each(|v| *v *= 0.1);
    values[0] *= 1.0 + 1e-15;
    assert!(matches!(
        factored(nearly),
        Err(LinearError::NotPositiveDefinite { .. })
    ));
    let mut zero_row = grid(6);
    zero_row.low_rank = LowRank::default();
    let (starts, _, values) = zero_row.sparse.csr_data_mut();
    let span = starts[7]..starts[8];
    values[span].fill(0.0);
    assert!(factored(zero_row).is_err());
    let mut indefinite = grid(6);
    indefinite.sparse.values_mut()[0] = -4.0;
    assert!(matches!(
        factored(indefinite),
        Err(LinearError::NotPositiveDefinite { .. })
    ));
    let mut broken = grid(6);
    broken.sparse.values_mut()[1] = f64::NAN;
    assert!(matches!(factored(broken), Err(LinearError::NotFinite { .. })));
    let mut infinite = grid(6);
    infinite.low_rank.vectors[0][1] = f64::INFINITY;
    assert!(matches!(factored(infinite), Err(LinearError::NotFinite { .. })));
}

#[test]
fn unfit_loads_and_matrices_are_refused() {
    let factor = factored(grid(6)).unwrap();
    assert!(matches!(
        factor.solve(&[vec![1.0; 35]]),
        Err(LinearError::Length {
            given: 35,
            wanted: 36,
            ..
        })
    ));
    let mut load = vec![1.0; 36];
    load[5] = f64::NAN;
    assert_eq!(
        factor.solve(&[load]),
        Err(LinearError::NotFinite {
            what: "a load",
            index: 5
        })
    );
    assert!(factor.solve(&[]).unwrap().is_empty());
    assert_eq!(factor.solve(&[vec![0.0; 36]]).unwrap(), vec![vec![0.0; 36]]);
    let other = Cholesky::new(factor.symbolic().clone(), grid(7));
    assert!(matches!(other, Err(LinearError::Length { .. })));
}

#[test]
fn the_number_of_threads_does_not_matter() {
    let solve = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new()
            .num_threads(threads)
            .build()
            .unwrap();
        pool.install(|| factored(grid(120)).unwrap().solve(&loads(14_400, 3)).unwrap())
    };
    let (one, three) = (solve(1), solve(3));
    for (a, b) in one.iter().flatten().zip(three.iter().flatten()) {
        assert!((a - b).abs() < 1e-12 * (1.0 + a.abs()));
    }
}
