//! `travel` of a mover and `[linkage]`: what is solved at many places or currents in one run.

use mesher::section::{Section, SpaceEdge};
use mesher::shape::Outline;
use mesher::{MeshError, ShapeError};
use solver::problem::Mover;

use super::expression::Dimension;
use super::fault::Faults;
use super::model::CaseFile;
use super::readings::range;
use super::regions::ReadRegion;
use super::roster::Roster;
use super::space::{NOISE, ReadSpace};
use super::values::{Values, length_text};
use super::{Case, Linkage, Travel};

/// Most places of a travel, and most currents of a linkage: each is a solve of its own.
const MOST: usize = 2_000;

/// What stands around the movers.
pub struct Around<'a> {
    /// The regions, where they could be read.
    pub regions: &'a [Option<ReadRegion>],
    /// The space, where it could be read.
    pub space: Option<&'a ReadSpace>,
}

/// Reads the travel of the one mover that has one. Outer `None` after a fault.
#[expect(clippy::option_option, reason = "a fault and no travel are different things")]
pub fn travel(
    file: &CaseFile,
    movers: &[Mover],
    around: &Around<'_>,
    values: &mut Values,
) -> Option<Option<Travel>> {
    let travelling: Vec<(usize, _)> = file
        .mover
        .iter()
        .enumerate()
        .filter_map(|(index, mover)| Some((index, mover.value.travel.as_ref()?)))
        .collect();
    let (mover, keys) = match travelling.as_slice() {
        [] => return Some(None),
        [one] => *one,
        [(first, _), (_, second), ..] => {
            let message = format!(
                "only one mover can travel; `{}` does already",
                movers[*first].name
            );
            let place = values.with_key(&second.span);
            values.fault_with_help(
                &place,
                message,
                "run the case once for each, or move the other by a given with --set",
            );
            return None;
        }
    };
    let offsets_m = range(keys, "travel", Dimension::LENGTH, values)?;
    let place = values.with_key(&keys.span);
    if offsets_m.len() > MOST {
        let message = format!(
            "`travel` has {} places; at most {MOST} are allowed",
            offsets_m.len()
        );
        values.fault(&place, message);
        return None;
    }
    let upward = offsets_m.windows(2).all(|pair| pair[0] < pair[1]);
    let downward = offsets_m.windows(2).all(|pair| pair[0] > pair[1]);
    if !upward && !downward {
        let message = "the places of `travel` must go one way, without repeating one";
        values.fault(&place, message);
        return None;
    }
    for &offset_m in &offsets_m {
        if let Some(message) = trouble(&movers[mover], offset_m, around, values) {
            values.fault(&place, message);
            return None;
        }
    }
    Some(Some(Travel { mover, offsets_m }))
}

/// What is wrong with a place, as far as the boxes around the shapes tell.
fn trouble(mover: &Mover, offset_m: f64, around: &Around<'_>, values: &Values) -> Option<String> {
    let at = format!(
        "at travel = {}, mover `{}`",
        values.length_text(offset_m),
        mover.name
    );
    for region in mover
        .regions
        .iter()
        .filter_map(|&index| around.regions.get(index)?.as_ref())
    {
        let name = &region.painted.name;
        for copy in &region.painted.copies {
            let Ok(moved) = copy.shifted(0.0, offset_m) else {
                return Some(format!("{at} has region `{name}` at no finite place"));
            };
            let bounds = moved.bounds();
            let slack = NOISE * (bounds.high.z - bounds.low.z).max(bounds.high.r);
            let mirror = around.space.and_then(|space| space.mirror_z_m);
            if let Some(mirror_z_m) = mirror.filter(|z| bounds.low.z < z - slack) {
                return Some(format!(
                    "{at} has region `{name}` below the mirror: down to z = {}, the mirror is at z = {}",
                    values.length_text(bounds.low.z),
                    values.length_text(mirror_z_m)
                ));
            }
            let Some(SpaceEdge::Wall(wall)) = around.space.map(|space| &space.edge) else {
                continue;
            };
            let wall = wall.bounds();
            if bounds.low.z < wall.low.z - slack || bounds.high.z > wall.high.z + slack {
                return Some(format!(
                    "{at} has region `{name}` beyond the wall: from z = {} to {}",
                    values.length_text(bounds.low.z),
                    values.length_text(bounds.high.z)
                ));
            }
        }
    }
    None
}

/// Reads `[linkage]`. Outer `None` after a fault.
#[expect(clippy::option_option, reason = "a fault and no linkage are different things")]
pub fn linkage(file: &CaseFile, windings: &Roster, values: &mut Values) -> Option<Option<Linkage>> {
    let Some(keys) = &file.linkage else {
        return Some(None);
    };
    let winding = windings.find(&keys.value.winding, values);
    let current = &keys.value.current;
    let currents_a = range(current, "current", Dimension::CURRENT, values)?;
    if currents_a.len() > MOST {
        let message = format!(
            "`current` has {} values; at most {MOST} are allowed",
            currents_a.len()
        );
        values.fault(&current.span, message);
        return None;
    }
    Some(Some(Linkage {
        winding: winding?,
        currents_a,
    }))
}

impl Case {
    /// The drawing with the travelling mover's regions moved up by `offset_m` from where they are drawn; the order of
    /// painting stays. The drawing itself without a travel.
    ///
    /// # Errors
    /// A place that is no finite number.
    pub fn section_at(&self, offset_m: f64) -> Result<Section, ShapeError> {
        let mut section = self.section.clone();
        let Some(travel) = self.travel.as_ref().filter(|_| offset_m != 0.0) else {
            return Ok(section);
        };
        for &index in &self.problem.movers[travel.mover].regions {
            let region = &mut section.regions[index];
            let moved: Result<Vec<Outline>, ShapeError> = region
                .copies
                .iter()
                .map(|copy| copy.shifted(0.0, offset_m))
                .collect();
            region.copies = moved?;
        }
        Ok(section)
    }

    /// What the mesher found wrong with the drawing at a place of the travel; see [`Case::mesh_faults`].
    pub fn mesh_faults_at(&self, error: &MeshError, offset_m: f64) -> Faults {
        let mut faults = self.mesh_faults(error);
        for fault in &mut faults.list {
            fault.message = format!(
                "at travel = {}: {}",
                length_text(offset_m, &self.length_unit),
                fault.message
            );
        }
        faults
    }
}

impl Travel {
    /// Number of the place that pictures show: the drawn one, or the first where that is not passed.
    pub fn shown(&self) -> usize {
        let longest = self
            .offsets_m
            .iter()
            .fold(0.0f64, |most, offset| most.max(offset.abs()));
        // Even steps through the drawn place may miss it by round-off.
        self.offsets_m
            .iter()
            .position(|offset| offset.abs() <= 1e-9 * longest)
            .unwrap_or(0)
    }
}
