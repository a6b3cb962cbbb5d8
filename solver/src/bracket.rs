//! A number with its low and high, and what stands behind them; Richardson's extrapolation from a nested pair.

/// What stands behind a bracket.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Bound {
    /// Proved.
    Guaranteed,
    /// Estimated from a pair of meshes.
    Estimated,
    /// Fixed by the drawing and the data alone.
    Exact,
}

/// A number in SI units between a low and a high: `low <= value <= high`, all finite.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bracket {
    /// Best value.
    pub value: f64,
    /// Low end.
    pub low: f64,
    /// High end.
    pub high: f64,
    /// What stands behind the ends.
    pub bound: Bound,
}

impl Bracket {
    /// A number that the drawing and the data alone fix.
    pub fn exact(value: f64) -> Self {
        Self {
            value,
            low: value,
            high: value,
            bound: Bound::Exact,
        }
    }

    /// Half of high minus low.
    pub fn half_width(&self) -> f64 {
        0.5 * (self.high - self.low)
    }

    /// Whether `x` lies within, ends included.
    pub fn contains(&self, x: f64) -> bool {
        self.low <= x && x <= self.high
    }

    /// Whether value and ends are finite and in order.
    pub fn is_sound(&self) -> bool {
        self.value.is_finite() && self.low <= self.value && self.value <= self.high
    }

    /// The bracket of `factor` times this number, `factor` exact.
    pub fn scaled(&self, factor: f64) -> Self {
        let (a, b) = (self.low * factor, self.high * factor);
        Self {
            value: self.value * factor,
            low: a.min(b),
            high: a.max(b),
            bound: self.bound,
        }
    }
}

/// Turns what two nested meshes say into brackets.
///
/// With sizes halved and an error of order h^p the limit is `fine + (fine - coarse)/(2^p - 1)`
/// (Richardson, Phil. Trans. R. Soc. A 210, 1911). First-order elements have p = 2 for energies on smooth
/// fields, less where iron has re-entrant corners (p = 4/3 at a right angle of very permeable iron). The value
/// uses p = 2; the interval covers every limit between p = 1 and p = infinity, that is from the fine mesh's own
/// number to `fine + (fine - coarse)`.
#[derive(Clone, Copy, Debug)]
pub struct Pairing {
    /// Relative difference of the field energies of the two meshes: the yardstick below which no difference of
    /// a single number is believed.
    pub energy_drift: f64,
}

/// Share of the energy drift, times the number's scale, that widens every interval: two meshes may agree on one
/// number by chance, never on the whole field.
const CHANCE_SHARE: f64 = 0.05;

/// The same for numbers read at a point: a recovered field is about as accurate as the energy, not better, and its
/// error does not fall as regularly.
const LOCAL_CHANCE_SHARE: f64 = 1.0;

impl Pairing {
    /// A number whose error is the energy's (inductance, linkage, energy, force by virtual displacement).
    /// `scale` is the size its kind has in the device; same unit.
    pub fn integral(&self, coarse: f64, fine: f64, scale: f64) -> Bracket {
        let step = fine - coarse;
        let half = 2.0 / 3.0 * step.abs() + CHANCE_SHARE * self.energy_drift * scale.abs().max(fine.abs());
        Self::around(fine + step / 3.0, half, fine)
    }

    /// A number read at a point or an extreme, whose error need not fall monotonically.
    pub fn local(&self, coarse: f64, fine: f64, scale: f64) -> Bracket {
        let step = fine - coarse;
        let half =
            4.0 / 3.0 * step.abs() + LOCAL_CHANCE_SHARE * self.energy_drift * scale.abs().max(fine.abs());
        Self::around(fine + step / 3.0, half, fine)
    }

    /// Round-off of the values themselves keeps every interval open.
    fn around(value: f64, half: f64, fine: f64) -> Bracket {
        let half = half + 1e-12 * fine.abs();
        Bracket {
            value,
            low: value - half,
            high: value + half,
            bound: Bound::Estimated,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_second_order_sequence_is_hit_and_every_order_from_one_is_covered() {
        let pairing = Pairing { energy_drift: 0.0 };
        for (order, at_value) in [
            (1.0, false),
            (4.0 / 3.0, false),
            (2.0, true),
            (3.0, false),
            (9.0, false),
        ] {
            let limit = 7.0;
            let error = |h: f64| -0.3 * h.powf(order);
            let b = pairing.integral(limit + error(1.0), limit + error(0.5), limit);
            assert!(
                b.low <= limit + 1e-12 && limit - 1e-12 <= b.high,
                "order {order}: {b:?}"
            );
            assert_eq!((b.value - limit).abs() < 1e-12, at_value, "order {order}");
        }
    }

    #[test]
    fn agreement_by_chance_is_not_believed() {
        let pairing = Pairing { energy_drift: 0.01 };
        assert!(pairing.local(1.0, 1.0, 1.0).half_width() > 4e-4);
    }

    #[test]
    fn scaling_by_a_negative_factor_keeps_the_order_of_the_ends() {
        let b = Bracket {
            value: 2.0,
            low: 1.0,
            high: 4.0,
            bound: Bound::Estimated,
        }
        .scaled(-3.0);
        assert!(b.is_sound() && b.low == -12.0 && b.high == -3.0);
    }
}
