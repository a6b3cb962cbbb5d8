//! Where the field is read, how accurately, and what a sweep varies.

use schemars::JsonSchema;
use serde::Deserialize;

use super::located::Located;
use super::quantity::{Amount, Pair, Quantity, Range};

/// Points along which the field is read.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct TraverseKeys {
    /// Its name.
    pub name: Located<String>,
    /// Points along a straight line.
    pub line: Option<Located<Line>>,
    /// A single point [r, z].
    pub at: Option<Pair>,
}

/// Points along a straight line, ends included.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Line {
    /// First point [r, z].
    pub from: Pair,
    /// Last point [r, z].
    pub to: Pair,
    /// Number of points, ends included.
    pub points: Amount,
}

/// A circle whose flux and induced voltage are read.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SearchCoilKeys {
    /// Its name.
    pub name: Located<String>,
    /// Where its turns lie [r, z].
    pub at: Located<Pair>,
    /// Number of turns; one unless said.
    pub turns: Option<Amount>,
}

/// How far the stray field reaches.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct StrayKeys {
    /// Distance beyond the outer circle at which the largest flux density is wanted; 0.3 m unless said.
    pub distance: Option<Amount>,
    /// Flux density whose reach is wanted; 0.5 mT unless said.
    pub limit: Option<Amount>,
}

/// The accuracy wanted and the limits of the effort.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct AccuracyKeys {
    /// Half the bracket's width over the value; 1 % unless said.
    pub goal: Option<Amount>,
    /// Kinds of quantity that the goal is for; static: inductance and force unless said.
    pub of: Option<Located<Vec<Located<KindKey>>>>,
    /// Most triangles per solve; two million unless said.
    pub max_triangles: Option<Amount>,
    /// Most time per solve; no limit unless said.
    pub max_time: Option<Amount>,
}

/// Kinds of quantity.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum KindKey {
    /// Inductance matrix.
    Inductance,
    /// Flux linkages.
    Linkage,
    /// Energy and co-energy.
    Energy,
    /// Forces on movers.
    Force,
    /// Induced voltages.
    Voltage,
    /// Impedances.
    Impedance,
    /// Losses.
    Loss,
    /// Coupling factors.
    Coupling,
    /// Fields along traverses.
    Traverse,
}

/// A given that a sweep runs through.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct VaryKeys {
    /// Name of the given.
    pub name: Located<String>,
    /// Its values.
    pub values: Located<Range>,
    /// Whether it steps together with the one before.
    pub together: Option<Located<bool>>,
}

/// The alternating regime.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Alternating {
    /// Frequency, or a range of them.
    pub frequency: Located<Range>,
}

/// Linkage of a winding over its current.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Linkage {
    /// Name of the winding.
    pub winding: Located<String>,
    /// Its currents.
    pub current: Located<Range>,
}

/// A given's text or number.
pub type GivenText = Located<Quantity>;
