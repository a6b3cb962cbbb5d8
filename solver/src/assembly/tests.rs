use super::*;
use crate::MU0;
use crate::test_meshes::{even, polar};

fn space(count: usize) -> Space {
    let radii: Vec<f64> = even(0.0, 0.1, count).skip(1).chain([0.1]).collect();
    Space::new(&polar(&radii, 3 * count, false, |_| 0), None).unwrap()
}

#[test]
fn pattern_holds_just_the_pairs_that_share_a_triangle() {
    let space = space(4);
    let pattern = pattern(&space);
    let mut pairs: Vec<(usize, usize)> = Vec::new();
    for corners in &space.triangles {
        let numbers: Vec<usize> = corners
            .iter()
            .map(|&c| space.free[c as usize])
            .filter(|&f| f != FIXED)
            .map(|f| f as usize)
            .collect();
        pairs.extend(numbers.iter().flat_map(|&i| numbers.iter().map(move |&j| (i, j))));
    }
    pairs.sort_unstable();
    pairs.dedup();
    assert_eq!(pattern.entries().collect::<Vec<_>>(), pairs);
}

#[test]
fn matrix_is_symmetric_to_the_last_bit_and_agrees_with_a_plain_sum() {
    let space = space(5);
    let nu: Vec<f64> = (0..space.triangles.len())
        .map(|t| (1.0 + (t % 7) as f64) / MU0)
        .collect();
    let matrix = interior(&space, pattern(&space), &|t, i, j| {
        space.elements[t].stiffness(nu[t], i, j)
    });
    let mut plain = vec![vec![0.0; matrix.ncols()]; matrix.nrows()];
    for (t, corners) in space.triangles.iter().enumerate() {
        for i in 0..3 {
            for j in 0..3 {
                let (a, b) = (space.free[corners[i] as usize], space.free[corners[j] as usize]);
                if a != FIXED && b != FIXED {
                    plain[a as usize][b as usize] += space.elements[t].stiffness(nu[t], i, j);
                }
            }
        }
    }
    for (i, j, value) in matrix.triplet_iter() {
        assert_eq!(*value, plain[i][j]);
        assert_eq!(*value, matrix.get_entry(j, i).unwrap().into_value());
    }
}

#[test]
fn uniform_axial_field_leaves_no_force_on_inner_nodes() {
    // K applied to psi = s/2 is the flux of a constant through each hat's support: zero but at the outer circle.
    let space = space(6);
    let nu = vec![1.0 / MU0; space.triangles.len()];
    let matrix = interior(&space, pattern(&space), &|t, i, j| {
        space.elements[t].stiffness(nu[t], i, j)
    });
    let psi: Vec<f64> = space
        .free_nodes
        .iter()
        .map(|&n| 0.5 * space.s[n as usize])
        .collect();
    let outer = &space.exterior.as_ref().unwrap().nodes;
    let mut inner = 0;
    for (row, &node) in space.free_nodes.iter().enumerate() {
        let entries = matrix.row(row);
        let terms: Vec<f64> = entries
            .col_indices()
            .iter()
            .zip(entries.values())
            .map(|(&c, v)| v * psi[c])
            .collect();
        let size: f64 = terms.iter().map(|t| t.abs()).sum();
        if !outer.contains(&node) {
            assert!(terms.iter().sum::<f64>().abs() < 1e-14 * size);
            inner += 1;
        }
    }
    assert!(inner > 60);
}

#[test]
fn exterior_rows_ascend_and_reproduce_its_form() {
    let space = space(4);
    let low_rank = exterior(&space);
    assert!(low_rank.rows.windows(2).all(|pair| pair[0] < pair[1]));
    let psi: Vec<f64> = space
        .s
        .iter()
        .zip(&space.z)
        .map(|(s, z)| s * (1.0 + 3.0 * z))
        .collect();
    let form: f64 = low_rank
        .vectors
        .iter()
        .map(|v| {
            let share: f64 = v
                .iter()
                .zip(&low_rank.rows)
                .map(|(v, &r)| v * psi[space.free_nodes[r] as usize])
                .sum();
            share * share
        })
        .sum();
    let want = space.exterior.as_ref().unwrap().stored(&psi, &psi);
    assert!((form - want).abs() < 1e-13 * want);
}
