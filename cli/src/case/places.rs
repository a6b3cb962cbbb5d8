//! Where the drawing stands in the text, so that what the mesher finds is shown there.

use std::collections::HashMap;
use std::ops::Range;
use std::sync::Arc;

use mesher::{MeshError, Point};

use super::fault::{Fault, Faults, Place};
use super::model::CaseFile;
use super::regions::ReadRegion;
use super::source::SourceText;
use super::values::length_text;
use super::{Case, LengthUnit};

/// Where the drawing stands in the case file. Empty for a case that was not read from text.
#[derive(Clone, Debug, Default)]
pub struct Places {
    source: Option<Arc<SourceText>>,
    /// For each region its name and its shape.
    regions: HashMap<String, [Range<usize>; 2]>,
    wall: Option<Range<usize>>,
}

impl Places {
    pub(super) fn new(source: &Arc<SourceText>, file: &CaseFile, regions: &[Option<ReadRegion>]) -> Self {
        let spans = file.region.iter().zip(regions).filter_map(|(keys, region)| {
            let name = &keys.value.name;
            Some((
                name.value.clone(),
                [name.span.clone(), region.as_ref()?.shape_span.clone()],
            ))
        });
        let wall = file.space.as_ref().and_then(|space| space.wall.as_ref());
        Self {
            source: Some(source.clone()),
            regions: spans.collect(),
            wall: wall.map(|wall| wall.span.clone()),
        }
    }

    fn name(&self, region: &str) -> Option<Range<usize>> {
        self.regions.get(region).map(|[name, _]| name.clone())
    }

    fn shape(&self, region: &str) -> Option<Range<usize>> {
        self.regions.get(region).map(|[_, shape]| shape.clone())
    }
}

impl Case {
    /// What the mesher found wrong with the drawing, in the case's length unit and at its place in the case file.
    pub fn mesh_faults(&self, error: &MeshError) -> Faults {
        let (message, span) = self.drawing_fault(error);
        let place = self.places.source.as_ref().zip(span);
        let place = place.map(|(source, span)| Place {
            source: source.clone(),
            span,
        });
        Fault {
            message,
            label: String::new(),
            help: None,
            place,
        }
        .into()
    }

    fn drawing_fault(&self, error: &MeshError) -> (String, Option<Range<usize>>) {
        let unit = &self.length_unit;
        let length = |metres: &f64| length_text(*metres, unit);
        let places = &self.places;
        match error {
            MeshError::RegionVanished { region, .. } => (error.to_string(), places.name(region)),
            MeshError::BelowMirror {
                region,
                lowest_z_m,
                mirror_z_m,
            } => (
                format!(
                    "region `{region}` reaches below the mirror: down to z = {}, the mirror is at z = {}",
                    length(lowest_z_m),
                    length(mirror_z_m)
                ),
                places.shape(region),
            ),
            MeshError::WallBelowMirror {
                lowest_z_m,
                mirror_z_m,
            } => (
                format!(
                    "the wall reaches below the mirror: down to z = {}, the mirror is at z = {}",
                    length(lowest_z_m),
                    length(mirror_z_m)
                ),
                places.wall.clone(),
            ),
            MeshError::BeyondWall { region, at, by_m } => (
                format!(
                    "region `{region}` reaches beyond the wall, by {} at {}",
                    length(by_m),
                    point_text(*at, unit)
                ),
                places.shape(region),
            ),
            MeshError::TooManyTriangles {
                limit,
                smallest_m,
                at,
            } => (
                format!(
                    "more than {limit} triangles would be needed: the finest details ask for edges of {} at {}; \
                     draw them coarser, or raise max_triangles",
                    length(smallest_m),
                    point_text(*at, unit)
                ),
                None,
            ),
            MeshError::TooClose { at } => (
                format!(
                    "details at {} are too small for the size of the drawing",
                    point_text(*at, unit)
                ),
                None,
            ),
            MeshError::Entangled { at } => (
                format!(
                    "the drawing is too entangled at {}: too many nearly coincident curves; draw it more simply there",
                    point_text(*at, unit)
                ),
                None,
            ),
            other => (other.to_string(), None),
        }
    }
}

/// A point for a message, in a length unit.
pub(super) fn point_text(at: Point, unit: &LengthUnit) -> String {
    format!("r = {}, z = {}", length_text(at.r, unit), length_text(at.z, unit))
}
