//! The case file as it is written: one type per table, every value with its place, nothing evaluated yet.
//!
//! The JSON Schema is made from these types, so the doc comments of their fields are what an editor shows.

use schemars::JsonSchema;
use serde::Deserialize;

pub mod drawing;
pub mod located;
pub mod material;
pub mod quantity;
pub mod reading;
pub mod winding;

use drawing::{Ambient, Region, Space};
use located::{Located, Named};
use material::StockEntry;
use quantity::Amount;
use reading::{
    AccuracyKeys, Alternating, GivenText, Linkage, SearchCoilKeys, StrayKeys, TraverseKeys, VaryKeys,
};
use winding::{MoverKeys, WindingKeys};

/// A coilwright case: everything one solve needs.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
#[schemars(title = "coilwright case")]
pub struct CaseFile {
    /// Title for the report.
    pub title: Option<Located<String>>,
    /// Unit of bare lengths; mm unless said.
    pub length_unit: Option<Located<String>>,
    /// Regime; static unless said.
    pub regime: Option<Located<Regime>>,
    /// Temperature of everything; 20 degC unless said.
    pub temperature: Option<Amount>,
    /// Named numbers that expressions use and that --set or a sweep can change.
    #[serde(default)]
    pub given: Named<GivenText>,
    /// Materials of the case's own.
    #[serde(default)]
    pub stock: Named<StockEntry>,
    /// Painted areas, in painting order.
    #[serde(default)]
    pub region: Vec<Located<Region>>,
    /// Windings.
    #[serde(default)]
    pub winding: Vec<Located<WindingKeys>>,
    /// Parts that move along z.
    #[serde(default)]
    pub mover: Vec<Located<MoverKeys>>,
    /// The edge of the described space and its symmetry.
    pub space: Option<Space>,
    /// The uniform field that the device sits in.
    pub ambient: Option<Located<Ambient>>,
    /// The alternating regime's data.
    pub alternating: Option<Located<Alternating>>,
    /// The transient regime's data.
    pub transient: Option<Located<Unread>>,
    /// Points along which the field is read.
    #[serde(default)]
    pub traverse: Vec<Located<TraverseKeys>>,
    /// Circles whose flux and induced voltage are read.
    #[serde(default)]
    pub search_coil: Vec<Located<SearchCoilKeys>>,
    /// How far the stray field reaches.
    pub stray: Option<Located<StrayKeys>>,
    /// The accuracy wanted and the limits of the effort.
    pub accuracy: Option<AccuracyKeys>,
    /// Linkage of a winding over its current.
    pub linkage: Option<Located<Linkage>>,
    /// Givens that a sweep runs through.
    #[serde(default)]
    pub vary: Vec<Located<VaryKeys>>,
}

/// How quantities change with time.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum Regime {
    /// Not at all.
    Static,
    /// As sine waves of one frequency.
    Alternating,
    /// Freely.
    Transient,
}

/// A table whose keys are not settled yet: anything in it is passed over.
#[derive(Clone, Debug)]
pub struct Unread;

impl<'de> Deserialize<'de> for Unread {
    fn deserialize<D: serde::Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        serde::de::IgnoredAny::deserialize(deserializer).map(|_| Self)
    }
}

impl JsonSchema for Unread {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> std::borrow::Cow<'static, str> {
        "Unread".into()
    }

    fn json_schema(_: &mut schemars::SchemaGenerator) -> schemars::Schema {
        schemars::json_schema!({ "type": "object" })
    }
}
