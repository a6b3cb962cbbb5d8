//! Self-inductance of coils: rectangular section by a Bessel integral, current sheet by Lorenz's formula; field on
//! the axis of a thick solenoid.

use std::f64::consts::PI;

use super::MU0;
use super::bessel::j;
use super::elliptic::complete;
use super::filament::Ring;
use super::quadrature::{gauss, integrate};

/// Self-inductance, H, of one turn squared of a coil of rectangular section with evenly spread current:
/// L = mu0 pi / ((r2 - r1)² l²) int P(k)² 2 (k l - 1 + exp(-k l)) / k² dk, P = int r J1(k r) dr (the coil-in-air
/// term of Dodd & Deeds, J. Appl. Phys. 39, 2829 (1968); cf. Conway, IEEE Trans. Magn. 43 (2007)).
pub fn self_inductance(coil: Ring) -> f64 {
    let ([r1, r2], l) = (coil.r, coil.z[1] - coil.z[0]);
    let axial = |k: f64| {
        let x = k * l;
        // Series where the difference would cancel.
        let value = if x < 1e-2 {
            x * x * (0.5 - x / 6.0 + x * x / 24.0 - x.powi(3) / 120.0)
        } else {
            x + (-x).exp_m1()
        };
        2.0 * value / (k * k)
    };
    // Oscillates with period pi / r2; the tail beyond `end` falls like k^-4 and is added from its mean.
    let end = (1000.0 / (r2 - r1)).max(50.0 / l);
    let start = (20.0 / l).min(end);
    let integrand = |k: f64| radial(k, r1, r2).powi(2) * axial(k);
    let pieces = |a: f64, b: f64| (2.0 * (b - a) * r2).ceil() as usize;
    // exp(-k l) changes over 1 / l, which a long coil makes far shorter than the oscillation.
    let body = integrate(0.0, start, 40 + pieces(0.0, start), 4, integrand)
        + integrate(start, end, 1 + pieces(start, end), 4, integrand);
    let tail = (r1 + r2) / PI * (2.0 * l / (3.0 * end.powi(3)) - 2.0 / (4.0 * end.powi(4)));
    MU0 * PI * (body + tail) / ((r2 - r1) * l).powi(2)
}

/// int_{r1}^{r2} r J1(k r) dr = [r1 J0(k r1) - r2 J0(k r2) + int J0(k r) dr] / k.
fn radial(k: f64, r1: f64, r2: f64) -> f64 {
    let turns = k * (r2 - r1);
    if turns < 1.0 {
        return gauss_sum(r1, r2, 1, |r| r * j(1, k * r));
    }
    let inner = if k * r1 > 25.0 {
        (integral_of_j0(k * r2) - integral_of_j0(k * r1)) / k
    } else {
        gauss_sum(r1, r2, 1 + (turns / 4.0) as usize, |r| j(0, k * r))
    };
    (r1 * j(0, k * r1) - r2 * j(0, k * r2) + inner) / k
}

fn gauss_sum(a: f64, b: f64, pieces: usize, f: impl Fn(f64) -> f64) -> f64 {
    integrate(a, b, pieces, 8, f)
}

/// An antiderivative of J0 for x > 25, by repeated integration by parts: with I(p) that of J0 x^-p,
/// I(p) = J1 x^-p - (p + 1) J0 x^-(p+1) - (p + 1)² I(p + 2).
fn integral_of_j0(x: f64) -> f64 {
    let (j0, j1) = (j(0, x), j(1, x));
    let (mut sum, mut factor, mut power) = (0.0, 1.0, 1.0);
    for step in 0..9u32 {
        let odd = f64::from(2 * step + 1);
        sum += factor * power * (j1 - odd * j0 / x);
        factor *= -odd * odd;
        power /= x * x;
    }
    sum
}

/// Nagaoka's coefficient of a cylindrical current sheet, `ratio` = diameter / length, in Lorenz's closed form
/// (1879); tabulated by Nagaoka, J. Coll. Sci. Tokyo 27 (1909). L = mu0 pi R² N² K / l.
pub fn nagaoka(ratio: f64) -> f64 {
    let k2 = ratio * ratio / (1.0 + ratio * ratio);
    let (k, k1) = (k2.sqrt(), (1.0 - k2).sqrt());
    let (big_k, big_e) = complete(1.0 - k2);
    4.0 / (3.0 * PI * k1) * ((1.0 - k2) / k2 * (big_k - big_e) + big_e - k)
}

/// Axial flux density, T, on the axis of a thick solenoid of current density `j_a_per_m2` at height `z` above the
/// axis point the coil's heights count from (e.g. Montgomery, Solenoid Magnet Design (1969)).
pub fn axis_field(coil: Ring, j_a_per_m2: f64, z: f64) -> f64 {
    let [r1, r2] = coil.r;
    let part = |u: f64| u * ((r2 + r2.hypot(u)) / (r1 + r1.hypot(u))).ln();
    0.5 * MU0 * j_a_per_m2 * (part(z - coil.z[0]) - part(z - coil.z[1]))
}

/// int_0^s M(R, R, t) dt of two equal filaments at distance t, H m: the axial integral of sheet upon sheet.
pub fn sheet_integral(radius: f64, s: f64) -> f64 {
    // M grows like a logarithm at t = 0; t = s u^4 makes the integrand smooth enough for Gauss.
    gauss(60, 0.0, 1.0)
        .into_iter()
        .map(|(u, w)| w * 4.0 * s * u.powi(3) * super::filament::mutual(radius, radius, s * u.powi(4)))
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stored_self_inductances_agree() {
        for (r1, r2, l, stored) in [
            (0.02, 0.04, 0.02, 5.098_134_632_832_5e-8),
            (0.0195, 0.0205, 0.2, 7.135_157_659_023_6e-9),
            (0.01, 0.05, 0.001, 5.160_176_608_433_8e-8),
            (0.02, 0.03, 0.01, 5.738_606_972_136_8e-8),
        ] {
            let ours = self_inductance(Ring {
                r: [r1, r2],
                z: [0.0, l],
            });
            assert!(
                (ours / stored - 1.0).abs() < 1e-9,
                "{r1} {r2} {l}: {ours} {stored}"
            );
        }
    }

    #[test]
    fn nagaoka_agrees_with_the_printed_table() {
        // Values printed in Nagaoka's table, from memory.
        for (ratio, printed) in [
            (0.1, 0.958_807),
            (0.2, 0.920_093),
            (0.5, 0.818_136),
            (1.0, 0.688_423),
            (2.0, 0.525_510),
            (5.0, 0.319_825),
        ] {
            assert!((nagaoka(ratio) - printed).abs() < 0.6e-6);
        }
    }

    #[test]
    fn stored_axis_fields_and_magnet_forces_agree() {
        let coil = Ring {
            r: [0.03, 0.05],
            z: [-0.04, 0.04],
        };
        let density = 1000.0 / (0.02 * 0.08);
        assert!((axis_field(coil, density, 0.02) / 0.010_086_796_870_21 - 1.0).abs() < 1e-11);
        let (m, l, g) = (1.2 / MU0, 0.02, 0.005);
        let q = |s| sheet_integral(0.01, s);
        let force = m * m * (q(g + 2.0 * l) - 2.0 * q(g + l) + q(g));
        assert!((force / -56.564_126_273_54 - 1.0).abs() < 1e-9, "{force}");
    }
}
