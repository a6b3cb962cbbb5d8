//! Results at many places of a travel, or at many currents, in the report's shape.

use solver::linkage::LinkageCurve;
use solver::quantity::Quantities;
use solver::solve::Accuracy as Reached;
use solver::stroke::{Station, Stroke};
use solver::{Bracket, bracket};

use super::build::outcome;
use super::{LinkageOverCurrent, LinkagePoint, Number, Outcome, Report, Stretch};
use crate::case::{Case, Travel};

/// One place of a travel, solved.
#[derive(Clone, Debug)]
pub struct PlaceResult {
    outcome: Outcome,
    station: Station,
    accuracy: Reached,
}

impl PlaceResult {
    /// What the place number `index` of a travel says.
    pub fn of(
        case: &Case,
        travel: &Travel,
        index: usize,
        quantities: &Quantities<Bracket>,
        accuracy: &Reached,
    ) -> Self {
        let at_m = travel.offsets_m[index];
        let mut outcome = outcome(case, quantities);
        // Adding 0 makes a negative zero plain.
        outcome.at.travel_m = Some(at_m + 0.0);
        Self {
            outcome,
            station: Station::of(at_m, &case.problem, quantities, travel.mover),
            accuracy: accuracy.clone(),
        }
    }
}

impl Report {
    /// Puts the places of a travel in place of the single result. `shown`: number of the place that pictures show.
    pub fn set_travel(&mut self, case: &Case, travel: &Travel, places: Vec<PlaceResult>, shown: usize) {
        let name = &case.problem.movers[travel.mover].name;
        let stations: Vec<Station> = places.iter().map(|place| place.station).collect();
        let stroke = Stroke::along(&stations);
        self.shown = shown;
        self.travel = Some(Stretch {
            mover: name.clone(),
            work_j: total(&stroke.work_j),
            coenergy_change_j: total(&stroke.coenergy_change_j),
        });
        let unit = &case.length_unit;
        let mut accuracy: Option<Reached> = None;
        self.results.clear();
        for (index, place) in places.into_iter().enumerate() {
            let at = crate::case::length_text(place.station.at_m, unit);
            let of_place = Reached {
                why_not: place
                    .accuracy
                    .why_not
                    .map(|why| format!("at travel = {at}: {why}")),
                ..place.accuracy
            };
            accuracy = Some(match accuracy {
                Some(before) => worse(before, of_place),
                None => of_place,
            });
            let mut outcome = place.outcome;
            if let Some((_, mover)) = outcome.movers.0.get_mut(travel.mover) {
                let pick = |list: &[Bracket]| list.get(index).map(|&number| Number::from(number));
                mover.force_by_coenergy_n = pick(&stroke.force_by_coenergy_n);
                mover.work_j = pick(&stroke.work_j);
            }
            self.results.push(outcome);
        }
        if let Some(accuracy) = accuracy {
            self.accuracy = accuracy.into();
        }
    }

    /// Adds the linkage of a winding over its current.
    pub fn set_linkage(&mut self, case: &Case, curve: &LinkageCurve) {
        let name = &case.problem.windings[curve.winding].name;
        let point = |point: &solver::linkage::LinkagePoint<Bracket>| LinkagePoint {
            current_a: bracket::Bracket::exact(point.current_a).into(),
            flux_linkage_wb: point.flux_linkage_wb.into(),
            inductance_h: point.inductance_h.into(),
            incremental_inductance_h: point.incremental_inductance_h.into(),
        };
        self.linkage = Some(LinkageOverCurrent {
            winding: name.clone(),
            points: curve.points.iter().map(point).collect(),
        });
        if !curve.accuracy.met || curve.accuracy.reached > self.accuracy.reached {
            let before = Reached {
                goal: self.accuracy.goal,
                reached: self.accuracy.reached,
                met: self.accuracy.met,
                why_not: self.accuracy.why_not.clone(),
            };
            self.accuracy = worse(before, curve.accuracy.clone()).into();
        }
    }
}

/// The sum over the whole travel, where there is more than one place.
fn total(sums: &[Bracket]) -> Option<Number> {
    sums.last()
        .filter(|_| sums.len() > 1)
        .map(|&number| number.into())
}

/// The worse of two: unmet before met, then by what was reached.
fn worse(a: Reached, b: Reached) -> Reached {
    match (a.met, b.met) {
        (true, false) => b,
        (false, true) => a,
        _ if b.reached > a.reached => b,
        _ => a,
    }
}
