//! What the drawing asks for but cannot have.

use mesher::Mesh;
use solver::{Bracket, Quantities};

use super::{COMMON_PRACTICE, Caution, THIS_CASE};
use crate::case::Case;
use crate::notation::{Unit, significant};

/// Most of a plane that equal circles can cover: pi / sqrt(12) (Thue 1910, from memory).
const DENSEST_CIRCLES: f64 = 0.906_899_682_117_108_9;
/// Share of its area that a region may lose to later ones before it is worth a word.
const WORTH_A_WORD: f64 = 1e-6;
/// More welds than this are summed up.
const MOST_WELDS: usize = 5;

pub(super) fn turns_that_do_not_fit(quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let tight = quantities.windings.iter().filter_map(|winding| {
        let fill = winding.fill_factor.as_ref()?.value;
        let share = significant(fill, Unit::PER_CENT, 3);
        let most = significant(DENSEST_CIRCLES, Unit::PER_CENT, 3);
        let (text, source) = if fill > 1.0 {
            let text = format!("The turns do not fit: with their insulation they need {share} of the drawn section.");
            (text, THIS_CASE)
        } else if fill > DENSEST_CIRCLES {
            let text = format!(
                "Round turns do not fit: they need {share} of the drawn section, and at their densest circles leave \
                 room for {most}."
            );
            (text, "densest packing of circles, Thue 1910, from memory")
        } else if fill > std::f64::consts::FRAC_PI_4 {
            let text = format!(
                "The turns fill {share} of the drawn section; wound one above the other, round wire gets no farther than \
                 79 %. Only orderly layers, each in the grooves of the one below, fit."
            );
            (text, COMMON_PRACTICE)
        } else {
            return None;
        };
        Some(Caution::validity(&winding.name, text, source))
    });
    tight.collect()
}

pub(super) fn covered_regions(case: &Case, mesh: &Mesh) -> Vec<Caution> {
    let mut visible_m2 = vec![0.0; case.section.regions.len()];
    for part in &mesh.parts {
        if let Some(area) = part.region.and_then(|region| visible_m2.get_mut(region)) {
            *area += part.area_m2;
        }
    }
    let covered = case.section.regions.iter().zip(visible_m2).enumerate().filter_map(|(index, (region, visible))| {
        let drawn: f64 = region.copies.iter().map(|copy| copy.area_m2()).sum();
        let share = 1.0 - visible / drawn;
        if share < WORTH_A_WORD {
            return None;
        }
        let winding = case.region_notes.get(index).and_then(|note| note.winding);
        // Air painted over a core is how gaps and bores are drawn; only a winding's loss is likely a slip.
        let name = case.problem.windings.get(winding?).map(|winding| winding.name.as_str())?;
        let share = significant(share, Unit::PER_CENT, 3);
        Some(Caution::validity(
            &region.name,
            format!(
                "{share} of this region of winding `{name}` is covered by what is painted later (or by its own other \
                 copies); all its turns are counted in what is left."
            ),
            THIS_CASE,
        ))
    });
    covered.collect()
}

pub(super) fn welds(mesh: &Mesh) -> Vec<Caution> {
    let length = |metres: f64| significant(metres, Unit::METRE, 3);
    if mesh.welds.len() > MOST_WELDS {
        let most = mesh.welds.iter().map(|weld| weld.moved_m).fold(0.0, f64::max);
        let text = format!(
            "{} nearly coincident points or edges of the drawing were made one; none was moved by more than {}.",
            mesh.welds.len(),
            length(most)
        );
        return vec![Caution::validity("drawing", text, THIS_CASE)];
    }
    let told = mesh.welds.iter().map(|weld| {
        let text = format!(
            "Nearly coincident points or edges of {} were made one at r = {}, z = {}; the drawing moved by {}.",
            weld.regions.join(" and "),
            length(weld.at.r),
            length(weld.at.z),
            length(weld.moved_m)
        );
        Caution::validity("drawing", text, THIS_CASE)
    });
    told.collect()
}
