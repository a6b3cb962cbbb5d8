use super::*;
use crate::problem::MirrorCurrents;
use crate::test_meshes::{boxed, even, polar, reflected, walled};
use mesher::{Mesh, Point};

const NU0: f64 = 1.0 / MU0;

/// Rings for a ball of radius 1 and air out to 2, `count` rings in each.
fn ball(count: usize) -> Mesh {
    let radii: Vec<f64> = even(0.0, 1.0, count)
        .skip(1)
        .chain(even(1.0, 2.0, count))
        .chain([2.0])
        .collect();
    polar(&radii, 4 * count, false, |k| u32::from(k < count))
}

/// A coil of square section, inner radius and height `c` = 20 mm (a Brooks coil), `cells` cells across it.
fn brooks(cells: usize, outer: f64) -> Mesh {
    let c = 0.02;
    let r: Vec<f64> = even(0.0, 2.5 * c, 5 * cells / 2).chain([2.5 * c]).collect();
    let z: Vec<f64> = even(-c, c, 2 * cells).chain([c]).collect();
    boxed(&r, &z, outer * c, 2 * cells, 1.0, |p| {
        u32::from(p.r > c && p.r < 2.0 * c && p.z.abs() < 0.5 * c)
    })
}

fn by_part<T: Copy>(mesh: &Mesh, air: T, body: T) -> Vec<T> {
    mesh.part_of
        .iter()
        .map(|&part| if part == 1 { body } else { air })
        .collect()
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

/// Inductance by a(psi, psi) for one ampere-turn spread evenly, H.
fn inductance(mesh: &Mesh) -> f64 {
    let space = Space::new(mesh, None).unwrap();
    let nu = vec![NU0; mesh.triangles.len()];
    let coil = (0..mesh.triangles.len()).filter(|&t| mesh.part_of[t] == 1);
    let section: f64 = coil.map(|t| unit_moments(&space, t).iter().sum::<f64>()).sum();
    assert!(
        (section - 4e-4).abs() < 1e-14,
        "the section of the meshed coil is exact: {section}"
    );
    let load = current_load(&space, &by_part(mesh, 0.0, 1.0 / section));
    let psi = &Factored::new(&space, &nu)
        .unwrap()
        .solve(std::slice::from_ref(&load))
        .unwrap()[0];
    let (linkage, twice_energy) = (dot(&load, psi), stored(&space, &nu, psi, psi));
    assert!(
        (linkage - twice_energy).abs() < 1e-10 * linkage,
        "energy is half of current times linkage"
    );
    let tail = space.exterior.as_ref().unwrap().tail(psi);
    // The guaranteed low side of `bracket.md`, F²/(a + tail), differs by the tail alone.
    assert!(tail >= 0.0 && tail < 1e-3 * twice_energy, "{tail} {twice_energy}");
    2.0 * std::f64::consts::PI * linkage
}

#[test]
fn brooks_coil_has_its_published_inductance_with_order_two() {
    // Brooks, J. Res. NBS 7 (1931); Grover, Inductance Calculations (1946): 1.6994e-6 x mean radius x N² (printed
    // to five digits, from memory; computed from the defining integral 1.699378211e-6).
    let exact = 1.699378211e-6 * 0.03;
    let l = [4, 8, 16].map(|cells| inductance(&brooks(cells, 4.0)));
    let errors = l.map(|l| exact - l);
    assert!(
        errors.iter().all(|&e| e > 0.0),
        "a stiffer space stores less: {errors:?}"
    );
    let order = (errors[1] / errors[2]).log2();
    assert!((order - 2.0).abs() < 0.1, "order {order}, {errors:?}");
    let extrapolated = l[2] + (l[2] - l[1]) / 3.0;
    // Extrapolation removes the order-two part, whose size is |l2 - l1|/3; a tenth of it is left at most.
    assert!(
        (extrapolated - exact).abs() < 0.1 * (l[2] - l[1]) / 3.0,
        "{}",
        extrapolated / exact - 1.0
    );
}

#[test]
fn exterior_as_close_as_a_quarter_beyond_the_coil_adds_no_error_of_its_own() {
    // The coil's far corner lies at 0.79 of the radius. Two nested grids extrapolate to the published value, so
    // what is left of their errors is the element's, not the exterior's.
    let c = 0.02;
    let outer = (2.0f64 * 2.0 + 0.25).sqrt() / 0.79 * c;
    let coil = |p: Point| u32::from(p.r > c && p.r < 2.0 * c && p.z.abs() < 0.5 * c);
    let l = [1, 2, 4].map(|fine| {
        let r: Vec<f64> = even(0.0, 2.25 * c, 9 * fine).chain([2.25 * c]).collect();
        let z: Vec<f64> = even(-0.75 * c, 0.75 * c, 6 * fine).chain([0.75 * c]).collect();
        inductance(&boxed(&r, &z, outer, 2 * fine, 1.0, coil))
    });
    let exact = 1.699378211e-6 * 0.03;
    let (first, second) = (l[1] - l[0], l[2] - l[1]);
    assert!(((first / second).log2() - 2.0).abs() < 0.2, "{l:?}");
    let extrapolated = l[2] + second / 3.0;
    assert!(
        (extrapolated - exact).abs() < 0.1 * second / 3.0,
        "{} of {}",
        extrapolated / exact - 1.0,
        second / exact
    );
}

#[test]
fn permeable_ball_in_a_uniform_field_converges_with_order_two() {
    // Jackson, Classical Electrodynamics, 5.12: inside B = 3 mu/(mu + 2) B0; moment (mu - 1)/(mu + 2) 4 pi a³ B0/mu0.
    let (mu, b0) = (10.0, 0.1);
    let inside = 3.0 * mu / (mu + 2.0) * b0;
    let moment = (mu - 1.0) / (mu + 2.0) * 4.0 * std::f64::consts::PI * b0 / MU0;
    let errors: Vec<[f64; 2]> = [8, 16, 32]
        .into_iter()
        .map(|count| {
            let mesh = ball(count);
            let space = Space::new(&mesh, None).unwrap();
            let nu = by_part(&mesh, NU0, NU0 / mu);
            let load = ambient_load(&space, &nu, b0);
            let psi = &Factored::new(&space, &nu).unwrap().solve(&[load]).unwrap()[0];
            let series = space.exterior.as_ref().unwrap().series(psi);
            // The flux through the ball's middle, one node off the axis, where psi = B s/2.
            let node = mesh
                .nodes
                .iter()
                .position(|p| p.z.abs() < 1e-12 && (p.r - 0.5).abs() < 1e-9)
                .unwrap();
            let b = b0 + 2.0 * psi[node] / space.s[node];
            [
                (series.dipole_moment_am2() / moment - 1.0).abs(),
                (b / inside - 1.0).abs(),
            ]
        })
        .collect();
    for k in 0..2 {
        let order = (errors[1][k] / errors[2][k]).log2();
        assert!((order - 2.0).abs() < 0.15, "order {order}: {errors:?}");
    }
    assert!(errors[2][0] < 2e-3 && errors[2][1] < 2e-3, "{errors:?}");
}

#[test]
fn magnetised_ball_stores_the_published_energy_with_order_two() {
    // Jackson, 5.10: inside B = 2/3 Br; a(psi, psi) = F(psi) = Br . (2/3 Br) V / (2 pi mu0), V = 4 pi/3.
    let br = 1.2;
    let exact = 4.0 / 9.0 * br * br / MU0;
    let errors: Vec<f64> = [6, 12, 24]
        .into_iter()
        .map(|count| {
            let mesh = ball(count);
            let space = Space::new(&mesh, None).unwrap();
            let nu = vec![NU0; mesh.triangles.len()];
            let load = magnet_load(&space, &nu, &by_part(&mesh, [0.0, 0.0], [0.0, br]));
            let psi = &Factored::new(&space, &nu)
                .unwrap()
                .solve(std::slice::from_ref(&load))
                .unwrap()[0];
            assert!((dot(&load, psi) / stored(&space, &nu, psi, psi) - 1.0).abs() < 1e-10);
            (stored(&space, &nu, psi, psi) / exact - 1.0).abs()
        })
        .collect();
    let order = (errors[1] / errors[2]).log2();
    assert!((order - 2.0).abs() < 0.1, "order {order}: {errors:?}");
}

#[test]
fn radially_magnetised_and_axial_loads_agree_with_bound_currents() {
    // Uniform axial magnetisation of the middle third of a ball's rings, in a closed shell, has no net force on a
    // uniform field: F . (s/2) = int nu Br dV/(2 pi); a radial one gives -int nu Br (psi_z / 2r) = 0 for psi = s/2,
    // and for psi = z (not a field, but a function) -int nu Br_r / (2 sqrt s) = -nu Br_r section.
    let mesh = ball(4);
    let space = Space::new(&mesh, None).unwrap();
    let nu = vec![NU0; mesh.triangles.len()];
    let half_s: Vec<f64> = space.s.iter().map(|s| 0.5 * s).collect();
    let body: Vec<usize> = (0..nu.len()).filter(|&t| mesh.part_of[t] == 1).collect();
    let area: f64 = body.iter().map(|&t| space.elements[t].area).sum();
    let section: f64 = body
        .iter()
        .map(|&t| unit_moments(&space, t).iter().sum::<f64>())
        .sum();
    let axial = magnet_load(&space, &nu, &by_part(&mesh, [0.0, 0.0], [0.0, 0.7]));
    let radial = magnet_load(&space, &nu, &by_part(&mesh, [0.0, 0.0], [0.7, 0.0]));
    let want = NU0 * 0.7 * 0.5 * area;
    assert!((dot(&axial, &half_s) / want - 1.0).abs() < 1e-13);
    assert!(dot(&radial, &half_s).abs() < 1e-12 * want);
    assert!((dot(&radial, &space.z) / (-NU0 * 0.7 * section) - 1.0).abs() < 1e-13);
}

#[test]
fn ball_magnet_within_a_flux_wall_has_its_closed_form() {
    // Two shells: inside B = (2/3) Br (1 - (a/R)³), from psi = 0 at R and the jump of H_theta at a.
    let br = 1.2;
    let want = 2.0 / 3.0 * br * (1.0 - 0.125);
    let errors: Vec<f64> = [8, 16, 32]
        .into_iter()
        .map(|count| {
            let mesh = walled(ball(count));
            let space = Space::new(&mesh, None).unwrap();
            let nu = vec![NU0; mesh.triangles.len()];
            let load = magnet_load(&space, &nu, &by_part(&mesh, [0.0, 0.0], [0.0, br]));
            let psi = &Factored::new(&space, &nu).unwrap().solve(&[load]).unwrap()[0];
            let b = centroid_b(&space, psi);
            let body = (0..nu.len()).filter(|&t| mesh.part_of[t] == 1);
            let (flux, area) = body.fold((0.0, 0.0), |(flux, area), t| {
                (
                    flux + b[t][1] * space.elements[t].area,
                    area + space.elements[t].area,
                )
            });
            (flux / area / want - 1.0).abs()
        })
        .collect();
    let order = (errors[1] / errors[2]).log2();
    assert!((order - 2.0).abs() < 0.1, "order {order}: {errors:?}");
}

#[test]
fn a_mirrored_half_equals_the_whole_device() {
    let radii: Vec<f64> = even(0.0, 1.0, 12).skip(1).chain([1.0]).collect();
    let half = polar(&radii, 14, true, |k| u32::from((4..7).contains(&k)));
    let whole = reflected(&half);
    let count = half.triangles.len();
    let whole_space = Space::new(&whole, None).unwrap();
    for (mirror, sign) in [(MirrorCurrents::Same, 1.0), (MirrorCurrents::Opposite, -1.0)] {
        let space = Space::new(&half, Some(mirror)).unwrap();
        // Current in the body, iron in a part of the air, so that nothing is symmetric by chance.
        let mut j = by_part(&half, 0.0, 1.0);
        let mut nu = vec![NU0; count];
        for t in 0..count {
            if t % 5 == 0 {
                nu[t] = 0.01 * NU0;
            }
            j[t] *= 1.0 + (t % 3) as f64;
        }
        let psi = &Factored::new(&space, &nu)
            .unwrap()
            .solve(&[current_load(&space, &j)])
            .unwrap()[0];
        let (both_nu, both_j) = (
            nu.repeat(2),
            [j.clone(), j.iter().map(|j| sign * j).collect()].concat(),
        );
        let load = current_load(&whole_space, &both_j);
        let both = &Factored::new(&whole_space, &both_nu)
            .unwrap()
            .solve(&[load])
            .unwrap()[0];
        let size = psi.iter().fold(0.0, |m: f64, p| m.max(p.abs()));
        for k in 0..half.nodes.len() {
            assert!(
                (psi[k] - both[k]).abs() < 1e-11 * size,
                "{mirror:?}: {} {}",
                psi[k],
                both[k]
            );
        }
        let (a, b) = (
            stored(&space, &nu, psi, psi),
            stored(&whole_space, &both_nu, both, both),
        );
        assert!((2.0 * a / b - 1.0).abs() < 1e-11);
        let (outside, whole_outside) = (
            space.exterior.as_ref().unwrap(),
            whole_space.exterior.as_ref().unwrap(),
        );
        let (tail, whole_tail) = (outside.tail(psi), whole_outside.tail(both));
        assert!(
            2.0 * tail <= whole_tail * (1.0 + 1e-6) + 1e-13 * b,
            "{tail} {whole_tail}"
        );
        let (near, far) = (outside.series(psi), whole_outside.series(both));
        let at = Point { r: 0.9, z: -0.8 };
        assert!((near.psi(at) - far.psi(at)).abs() < 1e-11 * size);
    }
}

#[test]
fn inductances_are_symmetric_and_positive() {
    let mesh = ball(8);
    let space = Space::new(&mesh, None).unwrap();
    let nu = by_part(&mesh, NU0, NU0 / 500.0);
    let factored = Factored::new(&space, &nu).unwrap();
    let loads: Vec<Vec<f64>> = (0..4)
        .map(|k| {
            let j: Vec<f64> = (0..nu.len())
                .map(|t| if t % 11 == 2 * k + 1 { 1.0 } else { 0.0 })
                .collect();
            current_load(&space, &j)
        })
        .collect();
    let psi = factored.solve(&loads).unwrap();
    let m = |a: usize, b: usize| dot(&loads[a], &psi[b]);
    for a in 0..4 {
        assert!(m(a, a) > 0.0);
        for b in 0..4 {
            assert!((m(a, b) - m(b, a)).abs() < 1e-11 * m(a, a), "{a} {b}");
            assert!((m(a, b) - stored(&space, &nu, &psi[a], &psi[b])).abs() < 1e-10 * m(a, a));
            assert!(a == b || m(a, b) * m(a, b) < m(a, a) * m(b, b));
        }
    }
    // Changing the reluctivity by a factor changes the interior only: less field, never more.
    let air = factored.with_reluctivity(&vec![NU0; nu.len()]).unwrap();
    let in_air = air.solve(&loads).unwrap();
    assert!((0..4).all(|k| dot(&loads[k], &in_air[k]) < m(k, k)));
}

#[test]
fn residuals_are_small_with_iron_and_thin_triangles() {
    let r: Vec<f64> = even(0.0, 1e-2, 30)
        .chain(even(1e-2, 1.002e-2, 3))
        .chain(even(1.002e-2, 0.02, 9))
        .chain([0.02])
        .collect();
    let z: Vec<f64> = even(-0.02, 0.02, 60).chain([0.02]).collect();
    let mesh = boxed(&r, &z, 0.05, 12, 1.2, |p| {
        u32::from(p.r < 1e-2 && p.z.abs() < 0.015)
    });
    let space = Space::new(&mesh, None).unwrap();
    let nu = by_part(&mesh, NU0, NU0 / 1e5);
    let factored = Factored::new(&space, &nu).unwrap();
    let j: Vec<f64> = mesh
        .triangles
        .iter()
        .map(|c| f64::from(u8::from(mesh.nodes[c[0] as usize].r > 0.012)))
        .collect();
    let mut j = j;
    for arc in &space.exterior.as_ref().unwrap().arcs {
        j[arc.triangle as usize] = 0.0;
    }
    let load = current_load(&space, &j);
    let psi = &factored.solve(std::slice::from_ref(&load)).unwrap()[0];
    let pick = |v: &[f64]| -> Vec<f64> { space.free_nodes.iter().map(|&n| v[n as usize]).collect() };
    let (x, b) = (pick(psi), pick(&load));
    let residual = factored.factor().matrix().residual(&x, &b);
    let relative = dot(&residual, &residual).sqrt() / dot(&b, &b).sqrt();
    assert!(relative < 1e-10, "{relative}");
}

#[test]
fn wrong_lengths_are_refused_by_name() {
    let mesh = ball(3);
    let space = Space::new(&mesh, None).unwrap();
    let message = Factored::new(&space, &[NU0]).unwrap_err().to_string();
    assert!(message.contains("the reluctivity has length 1"), "{message}");
    let factored = Factored::new(&space, &vec![NU0; mesh.triangles.len()]).unwrap();
    assert!(matches!(
        factored.solve(&[vec![0.0; 3]]),
        Err(LinearError::Length { given: 3, .. })
    ));
    let negative = vec![-NU0; mesh.triangles.len()];
    assert!(matches!(
        Factored::new(&space, &negative),
        Err(LinearError::NotPositiveDefinite { .. })
    ));
}
