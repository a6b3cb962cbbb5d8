//! `report.json`: the one place that fixes its keys. `docs/report.md` is made from the comments here (run the tests
//! with `COILWRIGHT_WRITE_DOCS=1` to make it anew).
//!
//! The ending of a key names its SI unit. A physical number is a [`Number`]; what does not apply is absent. Places
//! and settings, which the case fixes, are plain numbers.

use schemars::JsonSchema;
use serde::Serialize;

use crate::caution::Caution;

use super::Named;

mod build;
#[cfg(test)]
mod docs;
mod finite;
mod series;
#[cfg(test)]
mod tests;

pub use build::Clock;
pub use finite::NotFinite;
pub use series::PlaceResult;

/// The content of `report.json`.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Report {
    /// Title of the case.
    pub title: String,
    /// `static`.
    pub regime: &'static str,
    /// Version of the program.
    pub version: &'static str,
    /// The givens of the case, by name, after `--set`.
    pub given: Named<Given>,
    /// The finest mesh; with a travel that of the place the picture shows.
    pub mesh: MeshNumbers,
    /// How accurate the numbers are: the worst of all results.
    pub accuracy: Accuracy,
    /// One entry per place of a travel, in its order; else a single one.
    pub results: Vec<Outcome>,
    /// Number, from 0, of the result that pictures and field files show.
    #[serde(skip)]
    pub shown: usize,
    /// What the travel of a mover adds up to.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub travel: Option<Stretch>,
    /// Flux linkage of a winding over its current, at the drawn place.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub linkage: Option<LinkageOverCurrent>,
    /// Safety and validity remarks.
    pub cautions: Vec<Caution>,
    /// Where the time went.
    pub timing_s: TimingSeconds,
}

/// A physical number in SI units with its range.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, JsonSchema)]
pub struct Number {
    /// Best value.
    pub value: f64,
    /// Low end.
    pub low: f64,
    /// High end.
    pub high: f64,
    /// `guaranteed` (proved), `estimated` (from a pair of meshes) or `exact` (fixed by the drawing and the data).
    pub bound: &'static str,
}

/// One given.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Given {
    /// Its text, as written or set.
    pub text: String,
    /// Its value in SI units.
    pub si: f64,
    /// SI unit of the value; empty for a pure number.
    pub unit: String,
}

/// The finest mesh.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct MeshNumbers {
    /// Number of nodes.
    pub nodes: usize,
    /// Number of triangles.
    pub triangles: usize,
    /// Smallest angle of any triangle, degrees.
    pub smallest_angle_deg: f64,
    /// Sharpest corner of the drawing as meshed, degrees; no triangle there can be better.
    pub sharpest_corner_deg: f64,
    /// Pairs of meshes solved until the goal was met.
    pub levels: usize,
    /// Nearly coincident elements of the drawing that were made one.
    pub welded: Vec<Welded>,
    /// How Newton's method went on the finest pair of meshes; absent with linear material, which needs none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub newton: Option<Newton>,
}

/// How Newton's method went on a pair of meshes.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, JsonSchema)]
pub struct Newton {
    /// Steps on the coarse mesh of the pair, from zero field.
    pub coarse_steps: usize,
    /// Steps on the fine mesh, from the coarse mesh's field.
    pub fine_steps: usize,
    /// What is left of the equations' right side on the fine mesh, relative.
    pub residual: f64,
    /// Whether both settled; otherwise no number is good and the exit status is 3.
    pub converged: bool,
}

/// Nearly coincident elements of the drawing that were made one.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Welded {
    /// Distance from the axis, m.
    pub r_m: f64,
    /// Height, m.
    pub z_m: f64,
    /// How far the drawing was moved there, m.
    pub moved_m: f64,
    /// Regions involved.
    pub regions: Vec<String>,
}

/// How accurate the numbers are.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Accuracy {
    /// Wanted half width of each range over its value.
    pub goal: f64,
    /// The worst of the wanted quantities, by the same measure.
    pub reached: f64,
    /// Whether every wanted quantity met the goal; otherwise the exit status is 3.
    pub met: bool,
    /// Why not, in words.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub why_not: Option<String>,
}

/// The results at one operating point. With a mirror they are those of the whole device, unless a key says otherwise.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Outcome {
    /// The operating point; empty in the static regime.
    pub at: OperatingPoint,
    /// Windings, by name.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub windings: Named<Winding>,
    /// Apparent inductance of each pair of windings, H: `.inductance_h.A.B` is the linkage of A per ampere in B.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub inductance_h: Named<Named<Number>>,
    /// Incremental inductance of each pair of windings, H: d linkage of A / d current in B at the operating point;
    /// absent with linear material, where it is the same.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub incremental_inductance_h: Named<Named<Number>>,
    /// Coupling factor of each pair of windings, M / sqrt(L1 L2).
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub coupling: Named<Named<Number>>,
    /// Field energy over all space, J; absent with an ambient field.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub energy_j: Option<Number>,
    /// Co-energy, J; absent with an ambient field.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub coenergy_j: Option<Number>,
    /// Axial magnetic dipole moment of the device, A m²; absent with a wall or opposite mirror currents.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub dipole_moment_am2: Option<Number>,
    /// Movers, by name.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub movers: Named<Mover>,
    /// Current-carrying regions, by name.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub coil_sides: Named<CoilSide>,
    /// Regions, by name.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub regions: Named<Region>,
    /// Search coils, by name.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub search_coils: Named<SearchCoil>,
    /// Traverses, by name: their points in order.
    #[serde(skip_serializing_if = "Named::is_empty")]
    pub traverses: Named<Vec<TraversePoint>>,
    /// Stray field.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub stray: Option<Stray>,
}

/// The operating point.
#[derive(Clone, Copy, Debug, Default, Serialize, JsonSchema)]
pub struct OperatingPoint {
    /// Place of the travelling mover, m, counted from the drawn one, + is up; absent without a travel.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub travel_m: Option<f64>,
}

/// What a travel adds up to, from its first place to its last, at constant currents.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Stretch {
    /// The mover that travels.
    pub mover: String,
    /// Work of the field on the mover (of the described half), J; absent where a force is missing.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub work_j: Option<Number>,
    /// Change of co-energy (with a mirror half that of the whole device), J: equal to the work, found another way.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub coenergy_change_j: Option<Number>,
}

/// Flux linkage of a winding over its current.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct LinkageOverCurrent {
    /// The winding.
    pub winding: String,
    /// One entry per current, in the order of the case.
    pub points: Vec<LinkagePoint>,
}

/// A winding at one current.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct LinkagePoint {
    /// Terminal current, A.
    pub current_a: Number,
    /// Flux linkage from everything, Wb.
    pub flux_linkage_wb: Number,
    /// Apparent inductance, H.
    pub inductance_h: Number,
    /// Incremental inductance, d linkage / d current, H.
    pub incremental_inductance_h: Number,
}

/// One winding.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Winding {
    /// Signed sum of turns (of the described half, where there is a mirror).
    pub turns: Number,
    /// Terminal current, A.
    pub current_a: Number,
    /// Turns times current, A.
    pub ampere_turns_a: Number,
    /// Resistance of the winding itself at its temperature, ohm.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub resistance_ohm: Option<Number>,
    /// Flux linkage from everything, Wb.
    pub flux_linkage_wb: Number,
    /// Share of the linkage that magnets and the ambient field drive, Wb; absent without either.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub magnet_linkage_wb: Option<Number>,
    /// Voltage at its terminals with its leads, V.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub voltage_v: Option<Number>,
    /// Loss in the winding itself, W.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub copper_loss_w: Option<Number>,
    /// Power drawn from the supply, W.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub supply_power_w: Option<Number>,
    /// Own inductance over own plus lead resistance, s.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub time_constant_s: Option<Number>,
    /// Current over the section of the conductor, A/m²; absent without wire data.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub current_density_a_per_m2: Option<Number>,
    /// Outside area of all turns over the winding's visible section; absent without wire data.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fill_factor: Option<Number>,
    /// Conductor area of all turns over the winding's visible section; absent without wire data.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub conductor_fill_factor: Option<Number>,
    /// Length of wire, m; absent without wire data.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub wire_length_m: Option<Number>,
    /// Mass of the conductor, kg.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub copper_mass_kg: Option<Number>,
    /// Mean length of a turn, m.
    pub mean_turn_length_m: Number,
    /// Visible section of all its regions, m² (of the described half).
    pub section_m2: Number,
}

/// One mover.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Mover {
    /// Axial force on it (on the described half), N, + is up; absent when it touches the mirror.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub force_n: Option<Number>,
    /// Travelling mover: the force from the differences of the co-energies of neighbouring places, N: a check of
    /// `force_n` by other numbers.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub force_by_coenergy_n: Option<Number>,
    /// Travelling mover: work of the field on it from the first place to this one, J.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub work_j: Option<Number>,
    /// Whether it touches other material; then the force is the limit of a vanishing air film.
    pub touches_other_material: bool,
}

/// One current-carrying region.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct CoilSide {
    /// Axial force on its current, N, + is up.
    pub force_n: Number,
}

/// One region with all its copies.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Region {
    /// Name of its material in the stock.
    pub material: String,
    /// Visible volume, m³.
    pub volume_m3: Number,
    /// Mass, kg, where the density is known (a wire winding's region by its conductor).
    #[serde(skip_serializing_if = "Option::is_none")]
    pub mass_kg: Option<Number>,
    /// Flux density exceeded in 0.1 % of the volume, T.
    pub b_max_t: Number,
    /// Where the largest flux density sits.
    pub b_max_at: Place,
    /// Volume mean of the flux density's magnitude, T.
    pub b_mean_t: Number,
    /// Saturable material: flux density of its knee, T, where its differential permeability has fallen to a tenth of its
    /// largest (common practice, no source).
    #[serde(skip_serializing_if = "Option::is_none")]
    pub knee_t: Option<Number>,
    /// Saturable material: `b_max_t` over `knee_t`; above 1 it is driven past the knee.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub b_max_over_knee: Option<Number>,
    /// Saturable material: share of its volume beyond the knee.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saturated_share: Option<Number>,
    /// Magnets: volume mean of B along the magnetisation, T.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub mean_b_along_t: Option<Number>,
    /// Magnets: volume mean of H along the magnetisation, A/m; negative where demagnetising.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub mean_h_along_a_per_m: Option<Number>,
    /// Magnets: B along the magnetisation that 0.1 % of the volume falls short of, T.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_b_along_t: Option<Number>,
    /// Magnets: the H along the magnetisation that belongs to it, A/m.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_h_along_a_per_m: Option<Number>,
    /// Magnets: where the lowest point sits.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_at: Option<Place>,
    /// Magnets with a demagnetisation curve: B along the magnetisation, at temperature, below which the curve falls more
    /// than twice as steeply as at remanence, T; absent where it has no such knee.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub knee_b_along_t: Option<Number>,
    /// Magnets: - mean B / (mu0 mean H).
    #[serde(skip_serializing_if = "Option::is_none")]
    pub permeance_coefficient: Option<Number>,
}

/// A place of the half section.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, JsonSchema)]
pub struct Place {
    /// Distance from the axis, m.
    pub r_m: f64,
    /// Height, m.
    pub z_m: f64,
}

/// One search coil.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct SearchCoil {
    /// Flux through one turn, Wb.
    pub flux_wb: Number,
    /// Turns times flux, Wb.
    pub flux_linkage_wb: Number,
}

/// The field at one point of a traverse.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct TraversePoint {
    /// Distance from the axis, m.
    pub r_m: f64,
    /// Height, m.
    pub z_m: f64,
    /// Region it lies in; absent in air and beyond the mesh.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub region: Option<String>,
    /// Radial flux density, T.
    pub b_r_t: Number,
    /// Axial flux density, T.
    pub b_z_t: Number,
    /// Magnitude of the flux density, T.
    pub b_t: Number,
    /// Radial field strength, A/m.
    pub h_r_a_per_m: Number,
    /// Axial field strength, A/m.
    pub h_z_a_per_m: Number,
    /// Current density along phi, A/m².
    pub j_a_per_m2: Number,
    /// Flux through the circle of this point, Wb.
    pub flux_wb: Number,
}

/// Stray field, without the ambient one.
#[derive(Clone, Debug, Serialize, JsonSchema)]
pub struct Stray {
    /// Distance beyond the outer circle asked for, m.
    pub distance_m: f64,
    /// Largest flux density at that distance, T.
    pub b_t: Number,
    /// The limit asked for, T.
    pub limit_t: f64,
    /// Distance from the centre of the outer circle at which the flux density has fallen under the limit everywhere,
    /// m; absent when it is under the limit already at the outer circle.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reach_of_limit_m: Option<Number>,
}

/// Where the time went, s.
#[derive(Clone, Copy, Debug, Default, Serialize, JsonSchema)]
pub struct TimingSeconds {
    /// Reading the case, s.
    pub read: f64,
    /// Making meshes, s.
    pub mesh: f64,
    /// Assembly, s.
    pub assembly: f64,
    /// Factorisation and solution, s.
    pub solve: f64,
    /// Quantities, s.
    pub quantities: f64,
    /// Pictures and files (but for this one), s.
    pub output: f64,
    /// From the start of the program, s.
    pub total: f64,
}
