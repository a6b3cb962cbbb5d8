use super::*;
use crate::space::Space;
use crate::test_meshes::{even, polar};
use mesher::Point;

fn space(radius: f64, count: usize, mirror: Option<MirrorCurrents>) -> Space {
    let radii: Vec<f64> = even(0.0, radius, count).skip(1).chain([radius]).collect();
    Space::new(&polar(&radii, 3 * count, mirror.is_some(), |_| 0), mirror).unwrap()
}

#[test]
fn uniform_field_continues_as_a_pure_dipole() {
    // psi = s is affine, so the hats hold it on the arc itself, inner corners included: psi = R² (1 - x²).
    for mirror in [None, Some(MirrorCurrents::Same)] {
        let space = space(0.2, 4, mirror);
        let exterior = space.exterior.as_ref().unwrap();
        let series = exterior.series(&space.s);
        let c = series.coefficients();
        assert!((c[0] - 0.04).abs() < 1e-15, "{}", c[0]);
        assert!(c[1..].iter().all(|c| c.abs() < 1e-15), "{c:?}");
        // Energy of a dipole outside R: w_1 (4/3 R²)², halves with the mirror; w_1 = 3/(4 mu0 R).
        let whole = 0.75 / (MU0 * 0.2) * (4.0 / 3.0 * 0.04f64).powi(2);
        let want = if mirror.is_some() { 0.5 * whole } else { whole };
        assert!((exterior.stored(&space.s, &space.s) - want).abs() < 1e-13 * want);
        assert!(
            exterior.tail(&space.s) < 1e-13 * want,
            "nothing beyond the dipole"
        );
        // m = 4 pi R c_1 / mu0.
        let m = 4.0 * std::f64::consts::PI * 0.2 * 0.04 / MU0;
        assert!((series.dipole_moment_am2() - m).abs() < 1e-13 * m);
    }
}

#[test]
fn dipole_field_is_the_textbook_one() {
    // Jackson, Classical Electrodynamics, 5.6: B = mu0/(4 pi) m (2 cos e_rho + sin e_theta) / rho³.
    let series = Series::new(0.1, 0.2, vec![0.04]);
    let m = series.dipole_moment_am2();
    for (r, z) in [(0.0, 0.5), (0.3, 0.1), (0.25, -0.4), (0.0, -0.6), (0.2, 0.1)] {
        let (rho, height) = (f64::hypot(r, z - 0.1), z - 0.1);
        let scale = 1e-7 * m / rho.powi(5);
        let want = [3.0 * scale * r * height, scale * (2.0 * height * height - r * r)];
        let got = series.b(Point { r, z });
        for k in 0..2 {
            assert!(
                (got[k] - want[k]).abs() < 1e-14 * 2.0 * scale * rho * rho,
                "{got:?} {want:?}"
            );
        }
        let psi = 1e-7 * m * r * r / rho.powi(3);
        assert!((series.psi(Point { r, z }) - psi).abs() <= 1e-14 * psi);
    }
}

#[test]
fn flux_density_is_the_curl_of_psi_at_every_order() {
    let coefficients: Vec<f64> = (1..=HIGHEST_ORDER).map(|n| 1.0 / n as f64).collect();
    let series = Series::new(0.0, 1.0, coefficients);
    for (r, z) in [(0.9, 0.9), (1.1, -0.3), (0.02, 1.4), (0.7, -1.2)] {
        let h = 1e-4;
        let psi = |dr: f64, dz: f64| series.psi(Point { r: r + dr, z: z + dz });
        let slope = |f: &dyn Fn(f64) -> f64| (8.0 * (f(h) - f(-h)) - (f(2.0 * h) - f(-2.0 * h))) / (12.0 * h);
        let want = [-slope(&|d| psi(0.0, d)) / r, slope(&|d| psi(d, 0.0)) / r];
        let got = series.b(Point { r, z });
        let size = got[0].hypot(got[1]);
        for k in 0..2 {
            // Fifth derivatives grow like 40^5 (R/rho)^40 h^4 / 30; 1e-5 covers it at rho >= 1.14.
            assert!(
                (got[k] - want[k]).abs() < 1e-5 * size,
                "at {r} {z}: {got:?} {want:?}"
            );
        }
    }
}

#[test]
fn mirror_orders_continue_below_the_plane_with_the_right_symmetry() {
    let mut psi = Vec::new();
    for (mirror, sign) in [(MirrorCurrents::Same, 1.0), (MirrorCurrents::Opposite, -1.0)] {
        let space = space(1.0, 5, Some(mirror));
        psi.clear();
        psi.extend(space.s.iter().zip(&space.z).map(|(s, z)| s * (1.0 + z)));
        if sign < 0.0 {
            psi.iter_mut().zip(&space.z).for_each(|(psi, z)| *psi *= z);
        }
        let series = space.exterior.as_ref().unwrap().series(&psi);
        let (above, below) = (Point { r: 0.8, z: 0.9 }, Point { r: 0.8, z: -0.9 });
        let (a, b) = (series.psi(above), series.psi(below));
        assert!((a - sign * b).abs() < 1e-15 && a.abs() > 1e-3);
        let ([ar, az], [br, bz]) = (series.b(above), series.b(below));
        assert!((ar + sign * br).abs() < 1e-14 && (az - sign * bz).abs() < 1e-14);
    }
}

#[test]
fn tail_bounds_what_the_higher_orders_add() {
    // A single hat on the arc has slowly falling multipoles. Sum them to order 4000 by fine Gauss rules.
    let space = space(1.0, 6, None);
    let exterior = space.exterior.as_ref().unwrap();
    let mut psi = vec![0.0; space.nodes()];
    psi[exterior.arcs[4].nodes[1] as usize] = 1.0;
    let kept = exterior.stored(&psi, &psi);
    let tail = exterior.tail(&psi);
    let rule = gauss_legendre(40);
    let highest = 4000;
    let mut p = vec![0.0; highest + 1];
    for arc in exterior
        .arcs
        .iter()
        .filter(|arc| arc.nodes.iter().any(|&n| psi[n as usize] != 0.0))
    {
        let pieces = 100;
        for [t, w] in (0..pieces).flat_map(|k| {
            rule.iter()
                .map(move |[t, w]| [(f64::from(k) + t) / f64::from(pieces), w / f64::from(pieces)])
        }) {
            let (x, hats) = arc.at(t);
            let u: f64 = (0..3).map(|i| hats[i] * psi[arc.nodes[i] as usize]).sum();
            let (mut before, mut here) = (1.0, x);
            let mut slopes = [0.0, 1.0];
            for (n, p) in p.iter_mut().enumerate().skip(1) {
                *p += w * arc.width() * u * slopes[1];
                let m = n as f64;
                slopes = [slopes[1], slopes[0] + (2.0 * m + 1.0) * here];
                (before, here) = (here, ((2.0 * m + 1.0) * x * here - m * before) / (m + 1.0));
            }
        }
    }
    let term = |n: usize| (2 * n + 1) as f64 / (2 * (n + 1)) as f64 / MU0 * p[n] * p[n];
    let low: f64 = (1..=HIGHEST_ORDER).map(term).sum();
    assert!((low - kept).abs() < 1e-10 * kept, "{low} {kept}");
    let high: f64 = (HIGHEST_ORDER + 1..=highest).map(term).sum();
    assert!(high > 0.0 && high <= tail, "{high} {tail}");
    // The bound counts every order beyond 40 as if it were the 41st; terms fall like 1/n³ weighted by n.
    assert!(tail < 4.0 * high, "{high} {tail}");
}
