//! Materials driven to where their law no longer tells the truth.

use solver::problem::MagneticLaw;
use solver::reluctivity::Isotropic;
use solver::{Bracket, Quantities};

use super::{COMMON_PRACTICE, Caution, THIS_CASE};
use crate::case::Case;
use crate::notation::{Unit, significant};

/// Flux density beyond which no steel keeps its permeability, T.
const STEEL_SATURATES_T: f64 = 1.5;
/// Relative permeability above which a constant one stands for steel.
const STEEL_LIKE: f64 = 50.0;

/// Regions of constant permeability that real steel would not keep.
pub(super) fn saturated_but_linear(case: &Case, quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let beyond = case.problem.regions.iter().zip(&quantities.regions).filter_map(|(physics, region)| {
        let MagneticLaw::Linear { relative_permeability } = physics.law else { return None };
        let b_t = region.b_max_t.value;
        (relative_permeability > STEEL_LIKE && b_t > STEEL_SATURATES_T).then(|| {
            Caution::validity(
                &region.name,
                format!(
                    "The flux density reaches {}, where real steel saturates, but this region keeps its relative \
                     permeability of {}: its flux, and forces and inductances with it, are too large. Give the material a \
                     `saturation` or a `curve`.",
                    significant(b_t, Unit::TESLA, 3),
                    significant(relative_permeability, Unit::NUMBER, 3)
                ),
                COMMON_PRACTICE,
            )
        })
    });
    beyond.collect()
}

/// Regions driven beyond the last point of their curve.
pub(super) fn beyond_the_curve(case: &Case, quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let beyond = case.problem.regions.iter().zip(&quantities.regions).filter_map(|(physics, region)| {
        let MagneticLaw::Saturable(Isotropic::Curve(curve)) = &physics.law else { return None };
        (region.b_max_t.value > curve.last_b()).then(|| {
            Caution::validity(
                &region.name,
                format!(
                    "The flux density reaches {}, but the curve of its material ends at {}. It was carried on with a slope \
                     that goes to that of air.",
                    significant(region.b_max_t.value, Unit::TESLA, 4),
                    significant(curve.last_b(), Unit::TESLA, 4)
                ),
                COMMON_PRACTICE,
            )
        })
    });
    beyond.collect()
}

/// Magnets driven past the knee of their curve.
pub(super) fn demagnetised(case: &Case, quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let crossed = quantities.regions.iter().filter_map(|region| {
        let magnet = region.magnet.as_ref()?;
        let (lowest, knee) = (magnet.lowest_b_along_t.value, magnet.knee_t.as_ref()?.value);
        (lowest < knee).then(|| {
            let unit = &case.length_unit;
            let length = |metres: f64| significant(metres / unit.metres, Unit::NUMBER, 4);
            Caution::validity(
                &region.name,
                format!(
                    "Part of this magnet is driven past the knee of its demagnetisation curve: B along its magnetisation \
                     falls to {} near r = {} {4}, z = {} {4}, and the knee lies at {}. What is lost there does not come \
                     back; the curve is followed both ways here, so a field taken away or a gap closed again leaves less \
                     than these numbers say. Heat makes it worse.",
                    significant(lowest, Unit::TESLA, 3),
                    length(magnet.lowest_at.r),
                    length(magnet.lowest_at.z),
                    significant(knee, Unit::TESLA, 3),
                    unit.name
                ),
                THIS_CASE,
            )
        })
    });
    crossed.collect()
}
