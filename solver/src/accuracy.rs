//! How accurate the wanted quantities are, in the measure of the goal: half a bracket's width over its value.

use crate::bracket::Bracket;
use crate::quantity::Quantities;
use crate::solve::{Accuracy, Kind, Settings};

/// A number also passes when its half width is under goal / 100 of its kind's scale.
const SCALE_SHARE: f64 = 100.0;

/// The worst number so far.
struct Worst {
    measure: f64,
    name: String,
}

impl Worst {
    fn hear(&mut self, name: impl Fn() -> String, bracket: &Bracket, scale: f64) {
        let half = bracket.half_width();
        let own = if half == 0.0 {
            0.0
        } else {
            half / bracket.value.abs()
        };
        let scaled = if half == 0.0 {
            0.0
        } else {
            SCALE_SHARE * half / scale.abs()
        };
        // NaN (no value, no scale) counts as never good.
        let measure = match (own.is_nan(), scaled.is_nan()) {
            (false, false) => own.min(scaled),
            (true, true) => f64::INFINITY,
            (true, false) => scaled,
            (false, true) => own,
        };
        if measure > self.measure {
            *self = Self {
                measure,
                name: name(),
            };
        }
    }

    fn verdict(self, goal: f64) -> Accuracy {
        let met = self.measure <= goal;
        Accuracy {
            goal,
            reached: self.measure,
            met,
            why_not: (!met).then(|| format!("the goal is not reached for {}", self.name)),
        }
    }
}

fn largest<'a>(brackets: impl Iterator<Item = &'a Bracket>) -> f64 {
    brackets.fold(0.0, |m, b| m.max(b.value.abs()))
}

/// Measures the kinds a goal is set for. `force_scale_n` is energy over largest dimension (0 where unknown).
pub fn measure(q: &Quantities<Bracket>, settings: &Settings, force_scale_n: f64) -> Accuracy {
    let mut worst = Worst {
        measure: 0.0,
        name: String::new(),
    };
    for kind in &settings.of {
        match kind {
            Kind::Inductance => inductance(q, &mut worst),
            Kind::Coupling => coupling(q, &mut worst),
            Kind::Linkage => linkage(q, &mut worst),
            Kind::Energy => energy(q, &mut worst),
            Kind::Force => force(q, force_scale_n, &mut worst),
            Kind::Traverse => traverse(q, &mut worst),
        }
    }
    worst.verdict(settings.goal)
}

/// A number to be judged, with its name for people and the scale of its kind.
#[derive(Clone, Debug)]
pub struct Judged {
    /// Its name, such as ``the inductance of `main` ``.
    pub name: String,
    /// The number.
    pub number: Bracket,
    /// The size its kind has in this device, in the same unit.
    pub scale: f64,
}

/// Measures a list of numbers.
pub fn worst_of(judged: &[Judged], goal: f64) -> Accuracy {
    let mut worst = Worst {
        measure: 0.0,
        name: String::new(),
    };
    for one in judged {
        worst.hear(|| one.name.clone(), &one.number, one.scale);
    }
    worst.verdict(goal)
}

fn inductance(q: &Quantities<Bracket>, worst: &mut Worst) {
    for (j, row) in q.inductance_h.iter().enumerate() {
        for (k, l) in row.iter().enumerate().take(j + 1) {
            let scale = (q.inductance_h[j][j].value * q.inductance_h[k][k].value)
                .abs()
                .sqrt();
            let name = || match j == k {
                true => format!("the inductance of `{}`", q.windings[j].name),
                false => format!(
                    "the inductance between `{}` and `{}`",
                    q.windings[j].name, q.windings[k].name
                ),
            };
            worst.hear(name, l, scale);
        }
    }
}

fn coupling(q: &Quantities<Bracket>, worst: &mut Worst) {
    for (j, row) in q.coupling.iter().enumerate() {
        for (k, factor) in row.iter().enumerate().take(j) {
            let name = || {
                format!(
                    "the coupling of `{}` and `{}`",
                    q.windings[j].name, q.windings[k].name
                )
            };
            worst.hear(name, factor, 1.0);
        }
    }
}

fn linkage(q: &Quantities<Bracket>, worst: &mut Worst) {
    let scale = largest(q.windings.iter().map(|w| &w.flux_linkage_wb));
    for w in &q.windings {
        worst.hear(
            || format!("the flux linkage of `{}`", w.name),
            &w.flux_linkage_wb,
            scale,
        );
    }
    let scale = largest(q.search_coils.iter().map(|s| &s.flux_wb));
    for s in &q.search_coils {
        worst.hear(
            || format!("the flux through search coil `{}`", s.name),
            &s.flux_wb,
            scale,
        );
    }
}

fn energy(q: &Quantities<Bracket>, worst: &mut Worst) {
    let scale = q.energy_j.map_or(0.0, |w| w.value);
    for (name, bracket) in [("the energy", &q.energy_j), ("the co-energy", &q.coenergy_j)] {
        if let Some(bracket) = bracket {
            worst.hear(|| name.to_string(), bracket, scale);
        }
    }
}

fn force(q: &Quantities<Bracket>, scale: f64, worst: &mut Worst) {
    let scale = scale.max(largest(q.movers.iter().filter_map(|m| m.force_n.as_ref())));
    for m in &q.movers {
        if let Some(bracket) = &m.force_n {
            worst.hear(|| format!("the force on `{}`", m.name), bracket, scale);
        }
    }
}

fn traverse(q: &Quantities<Bracket>, worst: &mut Worst) {
    for t in &q.traverses {
        let scale = largest(t.points.iter().map(|p| &p.b_t));
        for p in &t.points {
            worst.hear(
                || format!("the flux density along traverse `{}`", t.name),
                &p.b_t,
                scale,
            );
        }
    }
}

/// Name of the first number that is not finite or lies outside its own ends; `None` when all are sound.
pub fn first_unsound(q: &Quantities<Bracket>) -> Option<String> {
    let mut numbers: Vec<(String, Option<&Bracket>)> = Vec::new();
    let mut add = |name: String, b: Option<&'_ Bracket>| {
        if b.is_some_and(|b| !b.is_sound()) {
            numbers.push((name, None));
        }
    };
    for (w, row) in q.windings.iter().zip(&q.inductance_h) {
        row.iter()
            .for_each(|l| add(format!("the inductance of `{}`", w.name), Some(l)));
        add(
            format!("the flux linkage of `{}`", w.name),
            Some(&w.flux_linkage_wb),
        );
        add(format!("the current of `{}`", w.name), Some(&w.current_a));
        add(
            format!("the resistance of `{}`", w.name),
            w.resistance_ohm.as_ref(),
        );
        add(
            format!("the time constant of `{}`", w.name),
            w.time_constant_s.as_ref(),
        );
    }
    q.coupling
        .iter()
        .flatten()
        .for_each(|k| add("a coupling factor".into(), Some(k)));
    add("the energy".into(), q.energy_j.as_ref());
    add("the co-energy".into(), q.coenergy_j.as_ref());
    add("the dipole moment".into(), q.dipole_moment_am2.as_ref());
    for m in &q.movers {
        add(format!("the force on `{}`", m.name), m.force_n.as_ref());
    }
    for c in &q.coil_sides {
        add(format!("the force on `{}`", c.region), Some(&c.force_n));
    }
    for r in &q.regions {
        add(format!("the flux density in `{}`", r.name), Some(&r.b_max_t));
        add(
            format!("the mean flux density in `{}`", r.name),
            Some(&r.b_mean_t),
        );
        let magnet = r.magnet.as_ref();
        add(
            format!("the operating point of `{}`", r.name),
            magnet.map(|m| &m.lowest_b_along_t),
        );
        add(
            format!("the operating point of `{}`", r.name),
            magnet.map(|m| &m.mean_b_along_t),
        );
    }
    for s in &q.search_coils {
        add(format!("the flux through `{}`", s.name), Some(&s.flux_wb));
    }
    for t in &q.traverses {
        t.points
            .iter()
            .for_each(|p| add(format!("the field along `{}`", t.name), Some(&p.b_t)));
    }
    if let Some(stray) = &q.stray {
        add("the stray field".into(), Some(&stray.b_t));
        add(
            "the reach of the stray field".into(),
            stray.reach_of_limit_m.as_ref(),
        );
    }
    numbers.into_iter().next().map(|(name, _)| name)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::bracket::Bound;

    fn heard(value: f64, half: f64, scale: f64) -> f64 {
        let mut worst = Worst {
            measure: 0.0,
            name: String::new(),
        };
        let b = Bracket {
            value,
            low: value - half,
            high: value + half,
            bound: Bound::Estimated,
        };
        worst.hear(|| "x".into(), &b, scale);
        worst.measure
    }

    #[test]
    fn a_number_near_zero_is_judged_by_its_scale() {
        assert!((heard(1.0, 0.01, 1.0) - 0.01).abs() < 1e-15);
        // Zero by symmetry, known to 1e-5 of the scale: as good as 0.1 %.
        assert!((heard(0.0, 1e-5, 1.0) - 1e-3).abs() < 1e-15);
        assert_eq!(heard(0.0, 0.0, 0.0), 0.0);
        assert_eq!(heard(0.0, 1e-5, 0.0), f64::INFINITY);
    }
}
