//! `[[winding]]` and `[[mover]]`.

use schemars::JsonSchema;
use serde::Deserialize;

use super::located::Located;
use super::quantity::{Amount, OneOrMany, Range};

/// Turns in series that carry one terminal current.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct WindingKeys {
    /// Its name.
    pub name: Located<String>,
    /// Names of its regions, the coil sides.
    pub regions: Located<Vec<Located<String>>>,
    /// Turns: the total, shared by area, or one number per region; negative for the opposite sense.
    pub turns: Option<Located<OneOrMany>>,
    /// Drive: a current.
    pub current: Option<Amount>,
    /// Drive: a voltage over own plus lead resistance.
    pub voltage: Option<Amount>,
    /// Drive: nothing is connected.
    pub open: Option<Located<bool>>,
    /// Drive: the terminals are joined.
    pub shorted: Option<Located<bool>>,
    /// Drive: a load resistance.
    pub load: Option<Amount>,
    /// Phase of the current or voltage (alternating).
    pub phase: Option<Amount>,
    /// The wire it is wound from.
    pub wire: Option<Located<Wire>>,
    /// Measured resistance at the reference temperature, instead of wire.
    pub resistance: Option<Amount>,
    /// Each region is one solid turn whose current spreads by itself, all in series.
    pub one_piece: Option<Located<bool>>,
    /// What lies in series with it.
    pub lead: Option<Located<Lead>>,
    /// Capacitance across its terminals.
    pub parallel_capacitance: Option<Amount>,
    /// Its temperature, if not the case's.
    pub temperature: Option<Amount>,
}

/// Wire data.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Wire {
    /// Diameter of the bare conductor (of one strand).
    pub diameter: Option<Amount>,
    /// Gauge number instead of the diameter (ASTM B258): 0.127 mm x 92^((36 - awg)/39).
    pub awg: Option<Amount>,
    /// Outside diameter of one turn with its insulation.
    pub outside: Option<Amount>,
    /// Number of strands in parallel; one unless said.
    pub strands: Option<Amount>,
    /// Its material; copper unless said.
    pub material: Option<Located<String>>,
}

/// What lies in series with a winding.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Lead {
    /// Series resistance.
    pub resistance: Option<Amount>,
    /// Series inductance.
    pub inductance: Option<Amount>,
    /// Series capacitance.
    pub capacitance: Option<Amount>,
}

/// Regions that move together along z as one rigid part.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct MoverKeys {
    /// Its name.
    pub name: Located<String>,
    /// Names of its regions.
    pub regions: Located<Vec<Located<String>>>,
    /// Places along z, counted from the drawn one; + is up.
    pub travel: Option<Located<Range>>,
}
