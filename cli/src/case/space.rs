//! `[space]` and `[ambient]`: the edge of the described space, the mirror, the uniform field around.

use mesher::section::SpaceEdge;
use solver::problem::MirrorCurrents;

use super::expression::Dimension;
use super::model::CaseFile;
use super::model::drawing::{Boundary, MirrorCurrentsKey, Space};
use super::regions::ReadRegion;
use super::shapes::ShapeKeys;
use super::values::Values;

/// How far below the mirror a shape may lie as drawing noise, over its own size.
pub(super) const NOISE: f64 = 1e-6;

/// The space, read.
pub struct ReadSpace {
    /// Edge of the meshed space.
    pub edge: SpaceEdge,
    /// Height of the mirror, m.
    pub mirror_z_m: Option<f64>,
    /// How the image's currents run.
    pub mirror: Option<MirrorCurrents>,
}

/// Reads `[space]`; `None` if something is wrong, and that is noted.
pub fn read(space: &Space, values: &mut Values) -> Option<ReadSpace> {
    let edge = edge(space, values);
    let mirror_z = match &space.mirror {
        Some(height) => values.amount(height, "mirror", Dimension::LENGTH).map(Some),
        None => Some(None),
    };
    let mirror = match (&space.mirror, &space.mirror_currents) {
        (Some(height), None) => {
            let help = "\"same\": B crosses the plane squarely; \"opposite\": B lies in it";
            let place = values.with_key(&height.span);
            values.fault_with_help(&place, "a mirror needs `mirror_currents`", help);
            None
        }
        (None, Some(currents)) => {
            values.fault(&currents.span, "`mirror_currents` without a `mirror`");
            None
        }
        (_, currents) => Some(currents.as_ref().map(|currents| match currents.value {
            MirrorCurrentsKey::Same => MirrorCurrents::Same,
            MirrorCurrentsKey::Opposite => MirrorCurrents::Opposite,
        })),
    };
    Some(ReadSpace {
        edge: edge?,
        mirror_z_m: mirror_z?,
        mirror: mirror?,
    })
}

fn edge(space: &Space, values: &mut Values) -> Option<SpaceEdge> {
    let boundary = space.boundary.as_ref();
    match (boundary.map(|boundary| boundary.value), &space.wall) {
        (Some(Boundary::Wall), Some(wall)) => {
            let (outline, _) = ShapeKeys::from(&wall.value).outline("the wall", &wall.span, values)?;
            Some(SpaceEdge::Wall(outline))
        }
        (Some(Boundary::Wall), None) => {
            if let Some(boundary) = boundary {
                let help = "for example wall = { rect = { r = [0, 60], z = [-40, 40] } }";
                values.fault_with_help(&boundary.span, "boundary = \"wall\" needs the wall's shape", help);
            }
            None
        }
        (_, Some(wall)) => {
            values.fault_with_help(
                &wall.span,
                "a wall is drawn, but the boundary is open",
                "write boundary = \"wall\"",
            );
            None
        }
        (_, None) => Some(SpaceEdge::HalfCircle),
    }
}

/// The ambient axial flux density, T; zero where there is none.
pub fn ambient(file: &CaseFile, values: &mut Values) -> Option<f64> {
    let Some(ambient) = &file.ambient else {
        return Some(0.0);
    };
    let place = values.with_key(&ambient.value.axial_b.span);
    let density = values.amount(&ambient.value.axial_b, "axial_b", Dimension::FLUX_DENSITY);
    let space = file.space.as_ref();
    if space.and_then(|space| space.wall.as_ref()).is_some() {
        values.fault(
            &place,
            "an ambient field cannot enter a wall: have one or the other",
        );
    }
    let currents = space.and_then(|space| space.mirror_currents.as_ref());
    if currents.is_some_and(|currents| currents.value == MirrorCurrentsKey::Opposite) {
        let message = "an ambient axial field crosses the mirror, but mirror_currents = \"opposite\" lets no field cross";
        values.fault(&place, message);
    }
    density
}

/// Nothing may be drawn below the mirror.
pub fn check_above_mirror(regions: &[Option<ReadRegion>], mirror_z_m: f64, values: &mut Values) {
    for region in regions.iter().flatten() {
        let lowest = region.painted.copies.iter().map(|copy| copy.bounds());
        let Some(bounds) = lowest.min_by(|a, b| a.low.z.total_cmp(&b.low.z)) else {
            continue;
        };
        let size = (bounds.high.z - bounds.low.z).max(bounds.high.r);
        if bounds.low.z < mirror_z_m - NOISE * size {
            let message = format!(
                "region `{}` reaches below the mirror: down to z = {}, the mirror is at z = {}",
                region.painted.name,
                values.length_text(bounds.low.z),
                values.length_text(mirror_z_m)
            );
            values.fault_with_help(
                &region.shape_span,
                message,
                "draw only what lies above the mirror; its image is implied",
            );
        }
    }
}
