use super::*;
use crate::quadrature::gauss_legendre;

/// int f over a triangle: tanh-sinh in both directions of the square collapsed to corner 0, which resolves
/// integrable singularities at corners and edges. Independent of every closed form.
fn integral(s: [f64; 3], z: [f64; 3], f: impl Fn(f64, f64) -> f64) -> f64 {
    let twice = (s[1] - s[0]) * (z[2] - z[0]) - (s[2] - s[0]) * (z[1] - z[0]);
    let rule = tanh_sinh();
    let mut sum = 0.0;
    for &[u, rest_u, wu] in &rule {
        for &[v, rest_v, wv] in &rule {
            let l = [rest_u, u * rest_v, u * v];
            let at = |x: [f64; 3]| l[0] * x[0] + l[1] * x[1] + l[2] * x[2];
            sum += wu * wv * u * f(at(s), at(z));
        }
    }
    twice * sum
}

/// Points x, distances 1 - x and weights on [0, 1]; Takahasi & Mori (1974).
fn tanh_sinh() -> Vec<[f64; 3]> {
    let h = 1.0 / 32.0;
    let half_pi = std::f64::consts::FRAC_PI_2;
    (-120..=120)
        .map(|k| {
            let t = h * f64::from(k);
            let u = half_pi * t.sinh();
            // Both distances keep all their digits.
            let (x, rest) = (1.0 / (1.0 + (-2.0 * u).exp()), 1.0 / (1.0 + (2.0 * u).exp()));
            [x, rest, h * half_pi * t.cosh() * 2.0 * x * rest]
        })
        .collect()
}

/// Corners in (r, z) that a mesh may have: fat, thin, near the axis, with a corner or an edge on it.
const TRIANGLES: [[[f64; 2]; 3]; 8] = [
    [[1.0, 0.0], [1.3, 0.1], [1.1, 0.4]],
    [[5e-3, 1e-3], [5.2e-3, 1e-3], [5.1e-3, 1.2e-3]],
    [[1.0, 0.0], [1.01, 0.0], [1.0, 2.0]],
    [[0.0, 0.0], [0.3, -0.1], [0.2, 0.5]],
    [[0.0, 0.0], [0.2, 0.0], [0.0, 0.3]],
    [[1e-4, 0.0], [1.0, 0.0], [1e-4, 1.0]],
    [[0.0, 0.0], [0.2, 0.0], [0.2, 0.1]],
    [[2.0, 0.0], [2.28, 0.0], [2.0, 0.1]],
];

fn corners(t: [[f64; 2]; 3]) -> ([f64; 3], [f64; 3], [f64; 3]) {
    (t.map(|p| p[0]), t.map(|p| p[0] * p[0]), t.map(|p| p[1]))
}

fn close(got: f64, want: f64, relative: f64, what: &str) {
    assert!(
        (got - want).abs() <= relative * want.abs(),
        "{what}: {got:e} against {want:e}"
    );
}

#[test]
fn hats_have_unit_gradient_property() {
    for t in TRIANGLES {
        let (_, s, z) = corners(t);
        let e = Element::straight(s, z).unwrap();
        // psi = 3 s - 2 z + 1 has the gradient (3, -2).
        let g = e.gradient([0, 1, 2].map(|i| 3.0 * s[i] - 2.0 * z[i] + 1.0));
        let height = z.iter().fold(0.0, |m: f64, x| m.max((x - z[0]).abs()));
        close(g[0], 3.0, 1e-11 / s[2].max(s[1]).min(1.0), "psi_s");
        close(g[1], -2.0, 1e-14 / height.min(1.0), "psi_z");
        close(e.area, integral(s, z, |_, _| 1.0), 1e-13, "area");
    }
}

#[test]
fn reversed_flat_and_not_a_number_are_refused() {
    assert!(Element::straight([0.0, 0.0, 1.0], [0.0, 1.0, 0.0]).is_none());
    assert!(Element::straight([0.0, 1.0, 2.0], [0.0, 1.0, 2.0]).is_none());
    assert!(Element::straight([0.0, f64::NAN, 2.0], [0.0, 1.0, 2.0]).is_none());
}

#[test]
fn mean_over_s_agrees_with_independent_quadrature() {
    for (k, t) in TRIANGLES.into_iter().enumerate() {
        let (_, s, z) = corners(t);
        if k == 4 {
            assert_eq!(mean_over_s(s), 0.0, "an edge on the axis");
            continue;
        }
        let area = integral(s, z, |_, _| 1.0);
        let want = integral(s, z, |s, _| 1.0 / s) / area;
        // Reached where 1/s varies by 1e8 over the triangle; elsewhere the two agree to 1e-13.
        close(mean_over_s(s), want, 1e-11, &format!("triangle {k}"));
        let turned = [s[2], s[0], s[1]];
        assert_eq!(
            mean_over_s(turned),
            mean_over_s(s),
            "the order of the corners must not matter"
        );
    }
}

#[test]
fn series_and_closed_form_meet_where_one_hands_over_to_the_other() {
    for middle in [1.0, 1.1, 1.2999] {
        let s = [1.0, middle, 1.3];
        let (below, above) = (mean_over_s(s), mean_over_s([1.0, middle, 1.3 * (1.0 + 1e-15)]));
        // The closed form divides a difference of about 0.1 by 0.3: some ten roundings.
        close(below, above, 5e-15, "at the switch");
        let gauss = gauss_legendre(12);
        let mut mean = 0.0;
        for [u, wu] in &gauss {
            for [v, wv] in &gauss {
                mean += 2.0 * wu * wv * u / (s[0] + u * ((s[1] - s[0]) * (1.0 - v) + (s[2] - s[0]) * v));
            }
        }
        close(below, mean, 1e-14, "against Gauss");
    }
    close(mean_over_s([2.0, 2.0, 2.0]), 0.5, 1e-15, "equal corners");
    close(
        mean_over_s([2.0, 2.0, 2.0 * (1.0 + 1e-9)]),
        0.5 - 0.5e-9 / 3.0,
        1e-15,
        "nearly equal corners",
    );
}

#[test]
fn load_moments_agree_with_independent_quadrature() {
    for (k, t) in TRIANGLES.into_iter().enumerate() {
        let (r, s, z) = corners(t);
        let e = Element::straight(s, z).unwrap();
        let got = load_moments(r, e.area);
        for (i, got) in got.into_iter().enumerate() {
            let hat = |x: f64, y: f64| {
                1.0 / 3.0
                    + e.b[i] * (x - (s[0] + s[1] + s[2]) / 3.0)
                    + e.c[i] * (y - (z[0] + z[1] + z[2]) / 3.0)
            };
            let want = integral(s, z, |x, y| hat(x, y) / (2.0 * x.sqrt()));
            close(got, want, 1e-10, &format!("triangle {k}, corner {i}"));
        }
        let sum: f64 = got.iter().sum();
        close(
            sum,
            e.area * mean_over_2r(r),
            3e-15,
            "the moments add up to the section",
        );
        // Edges straight in (s, z) bend in (r, z), but where two corners share r and two share z by little.
        close(sum, integral(s, z, |x, _| 0.5 / x.sqrt()), 1e-10, "the section");
    }
}

#[test]
fn stiffness_is_symmetric_and_kills_constants() {
    let (_, s, z) = corners(TRIANGLES[0]);
    let e = Element::straight(s, z).unwrap();
    for i in 0..3 {
        for j in 0..3 {
            assert_eq!(e.stiffness(7.0, i, j), e.stiffness(7.0, j, i));
        }
        let row: f64 = (0..3).map(|j| e.stiffness(7.0, i, j)).sum();
        assert!(row.abs() < 1e-14 * e.stiffness(7.0, i, i));
    }
    let (u, v) = ([1.0, -2.0, 0.5], [0.3, 0.2, 4.0]);
    let form: f64 = (0..9)
        .map(|k| u[k / 3] * e.stiffness(7.0, k / 3, k % 3) * v[k % 3])
        .sum();
    close(
        e.stored(7.0, e.gradient(u), e.gradient(v)),
        form,
        1e-13,
        "gradients against the matrix",
    );
}
