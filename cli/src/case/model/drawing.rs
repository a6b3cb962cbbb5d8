//! `[[region]]`, its shapes, and `[space]`.

use schemars::JsonSchema;
use serde::Deserialize;

use super::located::Located;
use super::quantity::{Amount, Pair};

/// A painted area of one material. What is painted later covers what was painted earlier.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Region {
    /// Its name.
    pub name: Located<String>,
    /// Its material: a name of the stock.
    pub material: Located<String>,
    /// Shape: a rectangle.
    pub rect: Option<Located<Rect>>,
    /// Shape: a circle, clipped at the axis.
    pub circle: Option<Located<Circle>>,
    /// Shape: a polygon through points [r, z].
    pub polygon: Option<Located<Vec<Pair>>>,
    /// Shape: an outline of lines and arcs.
    pub outline: Option<Located<OutlineKeys>>,
    /// Copies along r and z, painted together.
    pub repeat: Option<Located<Repeat>>,
    /// Direction (r, z) of a magnet's magnetisation.
    pub magnetized: Option<Located<Pair>>,
    /// How eddy currents flow in it; a closed ring unless said.
    pub currents: Option<Located<Currents>>,
    /// Upper limit of the triangle size; normally never needed.
    pub mesh_size: Option<Amount>,
    /// Its temperature, if not the case's.
    pub temperature: Option<Amount>,
}

/// A rectangle.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Rect {
    /// Inner and outer radius.
    pub r: Pair,
    /// Lower and upper height.
    pub z: Pair,
    /// Radius of its rounded corners.
    pub fillet: Option<Amount>,
}

/// A circle, clipped at the axis.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Circle {
    /// Its centre [r, z].
    pub centre: Pair,
    /// Its radius.
    pub radius: Amount,
}

/// An outline of lines and arcs; closes itself.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct OutlineKeys {
    /// Its first point [r, z].
    pub start: Pair,
    /// Lines and arcs, each from where the last ended.
    pub path: Vec<Located<StepKeys>>,
}

/// A line or an arc of an outline.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct StepKeys {
    /// A straight line to this point [r, z].
    pub line: Option<Pair>,
    /// An arc to this point [r, z].
    pub arc: Option<Pair>,
    /// A point [r, z] on the way of the arc.
    pub through: Option<Pair>,
}

/// Copies along r and z.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Repeat {
    /// Number of copies along r and along z, the drawn one included.
    pub count: Pair,
    /// Distance of the copies along r and along z.
    pub step: Pair,
}

/// How eddy currents flow in a region.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
pub enum Currents {
    /// Not at all (laminated, powder).
    #[serde(rename = "none")]
    None,
    /// Without net current around the axis (slit).
    #[serde(rename = "no net")]
    NoNet,
}

/// The edge of the described space and its symmetry.
#[derive(Clone, Debug, Default, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Space {
    /// Unbounded surroundings (default), or a drawn wall that keeps the flux inside.
    pub boundary: Option<Located<Boundary>>,
    /// The wall's shape.
    pub wall: Option<Located<Wall>>,
    /// Height of the symmetry plane; only what lies above it is drawn.
    pub mirror: Option<Amount>,
    /// Whether the image's currents run in the same sense or the opposite one; required with mirror.
    pub mirror_currents: Option<Located<MirrorCurrentsKey>>,
}

/// What surrounds the described space.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum Boundary {
    /// Unbounded air.
    Open,
    /// A wall that keeps the flux inside.
    Wall,
}

/// How the currents of the mirror image run.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum MirrorCurrentsKey {
    /// In the same sense: B crosses the plane squarely.
    Same,
    /// In the opposite sense: B lies in the plane.
    Opposite,
}

/// The wall's shape, exactly one.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Wall {
    /// Shape: a rectangle.
    pub rect: Option<Located<Rect>>,
    /// Shape: a circle, clipped at the axis.
    pub circle: Option<Located<Circle>>,
    /// Shape: a polygon through points [r, z].
    pub polygon: Option<Located<Vec<Pair>>>,
    /// Shape: an outline of lines and arcs.
    pub outline: Option<Located<OutlineKeys>>,
}

/// The uniform field that the device sits in.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Ambient {
    /// Axial flux density far from the device.
    pub axial_b: Amount,
}
