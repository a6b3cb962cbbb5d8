//! The quantities a designer reads. Every struct is generic over its number: `f64` as computed on one mesh,
//! [`crate::Bracket`] as told to the user. Field names end in their SI unit. With a mirror all values are those
//! of the whole device (see each field). Optional numbers are absent where they do not apply.

use mesher::Point;

mod combine;
pub mod force;
pub mod inductance;
pub mod point;
pub mod region;
pub mod stray;

pub use combine::combine;

use crate::field::Recovered;
use crate::operating::Operating;
use force::Hold;

/// Reads everything off a solved operating point; `holds` in the order of `Problem::movers`.
pub fn read(op: &Operating<'_>, recovered: &Recovered, holds: &[Hold]) -> Quantities<f64> {
    let inductance_h = inductance::matrix(op);
    let windings = inductance::windings(op, &inductance_h);
    let energy_j = inductance::energy(op);
    let linkage_times_current: f64 = windings.iter().map(|w| w.flux_linkage_wb * w.current_a).sum();
    Quantities {
        coupling: inductance::coupling(&inductance_h),
        incremental_inductance_h: inductance::incremental(op),
        inductance_h,
        windings,
        energy_j,
        coenergy_j: energy_j.map(|w| linkage_times_current - w),
        dipole_moment_am2: dipole_moment(op),
        movers: force::movers(op, holds),
        coil_sides: force::coil_sides(op),
        regions: region::regions(op, recovered),
        search_coils: op
            .problem
            .search_coils
            .iter()
            .map(|c| point::search_coil(op, c))
            .collect(),
        traverses: op
            .problem
            .traverses
            .iter()
            .map(|t| point::traverse(op, t))
            .collect(),
        stray: op.problem.stray.as_ref().and_then(|s| stray::stray(op, s)),
    }
}

/// None with opposite mirror currents (the image cancels it) or a wall.
fn dipole_moment(op: &Operating<'_>) -> Option<f64> {
    let opposite = op.problem.mirror == Some(crate::problem::MirrorCurrents::Opposite);
    op.series
        .as_ref()
        .filter(|_| !opposite)
        .map(|s| s.dipole_moment_am2())
}

/// All results of one operating point.
#[derive(Clone, Debug, PartialEq)]
pub struct Quantities<N> {
    /// In the order of `Problem::windings`.
    pub windings: Vec<WindingResult<N>>,
    /// Apparent inductance matrix, H (rows and columns as `windings`).
    pub inductance_h: Vec<Vec<N>>,
    /// Incremental inductance matrix, d linkage / d current at the operating point, H; absent with linear material,
    /// where it is the same.
    pub incremental_inductance_h: Option<Vec<Vec<N>>>,
    /// Coupling factor of each pair, M / sqrt(L1 L2); diagonal 1.
    pub coupling: Vec<Vec<N>>,
    /// Field energy, J: int of H dB over all space; absent with an ambient field.
    pub energy_j: Option<N>,
    /// Co-energy, J: sum of linkage times current, less the energy; absent likewise.
    pub coenergy_j: Option<N>,
    /// Axial magnetic dipole moment of the device, A m²; absent with a wall or opposite mirror currents.
    pub dipole_moment_am2: Option<N>,
    /// In the order of `Problem::movers`.
    pub movers: Vec<MoverResult<N>>,
    /// Forces on winding regions that carry current, by J x B.
    pub coil_sides: Vec<CoilSideResult<N>>,
    /// In the order of `Problem::regions`.
    pub regions: Vec<RegionResult<N>>,
    /// In the order of `Problem::search_coils`.
    pub search_coils: Vec<SearchCoilResult<N>>,
    /// In the order of `Problem::traverses`.
    pub traverses: Vec<TraverseResult<N>>,
    /// Stray field, when asked for.
    pub stray: Option<StrayResult<N>>,
}

/// One winding.
#[derive(Clone, Debug, PartialEq)]
pub struct WindingResult<N> {
    /// The name the user gave.
    pub name: String,
    /// Signed sum of turns (of the described half, where there is a mirror).
    pub turns: N,
    /// Terminal current, A.
    pub current_a: N,
    /// Turns times current, A.
    pub ampere_turns_a: N,
    /// Direct-current resistance of the winding itself at its temperature, ohm.
    pub resistance_ohm: Option<N>,
    /// Flux linkage from everything, Wb.
    pub flux_linkage_wb: N,
    /// Share of the linkage that magnets and the ambient field drive, Wb; absent without either.
    pub magnet_linkage_wb: Option<N>,
    /// Voltage at its terminals (current times own plus lead resistance), V.
    pub voltage_v: Option<N>,
    /// Loss in the winding itself, W.
    pub copper_loss_w: Option<N>,
    /// Power drawn from the supply (own plus lead resistance), W.
    pub supply_power_w: Option<N>,
    /// Own inductance over own plus lead resistance, s.
    pub time_constant_s: Option<N>,
    /// Current over conductor section, A/m²; absent without wire data.
    pub current_density_a_per_m2: Option<N>,
    /// Outside area of all turns over the winding's visible section; absent without wire data.
    pub fill_factor: Option<N>,
    /// Conductor area of all turns over the winding's visible section; absent without wire data.
    pub conductor_fill_factor: Option<N>,
    /// Length of wire, m; absent without wire data.
    pub wire_length_m: Option<N>,
    /// Mass of the conductor, kg.
    pub copper_mass_kg: Option<N>,
    /// Mean length of a turn, m.
    pub mean_turn_length_m: N,
    /// Visible section of all its regions, m² (of the described half).
    pub section_m2: N,
}

/// One mover.
#[derive(Clone, Debug, PartialEq)]
pub struct MoverResult<N> {
    /// The name the user gave.
    pub name: String,
    /// Axial force on it (on the described half), N; absent when it touches the mirror.
    pub force_n: Option<N>,
    /// It touches other material, so the force is the limit of a vanishing air film (a caution).
    pub touches_other_material: bool,
}

/// One current-carrying region.
#[derive(Clone, Debug, PartialEq)]
pub struct CoilSideResult<N> {
    /// Name of the region.
    pub region: String,
    /// Axial force by J x B, N.
    pub force_n: N,
}

/// One region (all its copies).
#[derive(Clone, Debug, PartialEq)]
pub struct RegionResult<N> {
    /// The name the user gave.
    pub name: String,
    /// Visible volume, m³ (whole device).
    pub volume_m3: N,
    /// Mass, kg, where the density is known (whole device; a wire winding's region by its conductor).
    pub mass_kg: Option<N>,
    /// Flux density exceeded in 0.1 % of the volume, T.
    pub b_max_t: N,
    /// Where the largest flux density sits, m.
    pub b_max_at: Point,
    /// Volume mean of |B|, T.
    pub b_mean_t: N,
    /// For saturable material: how far it is into saturation.
    pub saturation: Option<SaturationResult<N>>,
    /// For a magnet: its operating point.
    pub magnet: Option<MagnetResult<N>>,
}

/// How far a saturable region is into saturation.
#[derive(Clone, Debug, PartialEq)]
pub struct SaturationResult<N> {
    /// Flux density of the law's knee, where its differential permeability has fallen to a tenth of its largest, T.
    pub knee_t: N,
    /// Share of the volume beyond the knee.
    pub saturated_share: N,
}

/// Operating point of a magnet. "Along" means along its magnetisation.
#[derive(Clone, Debug, PartialEq)]
pub struct MagnetResult<N> {
    /// Volume mean of B along, T.
    pub mean_b_along_t: N,
    /// Volume mean of H along, A/m (negative where demagnetising).
    pub mean_h_along_a_per_m: N,
    /// B along that 0.1 % of the volume falls short of, T.
    pub lowest_b_along_t: N,
    /// The H along that belongs to it, A/m.
    pub lowest_h_along_a_per_m: N,
    /// Where the lowest point sits, m.
    pub lowest_at: Point,
    /// -mean B / (mu0 mean H).
    pub permeance_coefficient: Option<N>,
    /// Flux density of the knee of its demagnetisation curve at temperature, T; absent where no curve with a knee
    /// is given.
    pub knee_t: Option<N>,
}

/// One search coil.
#[derive(Clone, Debug, PartialEq)]
pub struct SearchCoilResult<N> {
    /// The name the user gave.
    pub name: String,
    /// Flux through one turn, Wb.
    pub flux_wb: N,
    /// Turns times flux, Wb.
    pub flux_linkage_wb: N,
}

/// One traverse.
#[derive(Clone, Debug, PartialEq)]
pub struct TraverseResult<N> {
    /// The name the user gave.
    pub name: String,
    /// One entry per point.
    pub points: Vec<TraversePoint<N>>,
}

/// The field at one point.
#[derive(Clone, Debug, PartialEq)]
pub struct TraversePoint<N> {
    /// Where, m.
    pub at: Point,
    /// Region it lies in (`None`: air, or outside the meshed space).
    pub region: Option<usize>,
    /// Radial flux density, T.
    pub b_r_t: N,
    /// Axial flux density, T.
    pub b_z_t: N,
    /// Magnitude, T.
    pub b_t: N,
    /// Radial field strength, A/m.
    pub h_r_a_per_m: N,
    /// Axial field strength, A/m.
    pub h_z_a_per_m: N,
    /// Current density along phi, A/m².
    pub j_a_per_m2: N,
    /// Flux through the circle of this point, Wb.
    pub flux_wb: N,
}

/// Stray field.
#[derive(Clone, Debug, PartialEq)]
pub struct StrayResult<N> {
    /// Distance beyond the outer circle asked for, m.
    pub distance_m: f64,
    /// Largest flux density at that distance, T (without the ambient field).
    pub b_t: N,
    /// The limit asked for, T.
    pub limit_t: f64,
    /// Distance from the centre of the outer circle at which the flux density has fallen under the limit
    /// everywhere, m; absent when it is under the limit already at the outer circle.
    pub reach_of_limit_m: Option<N>,
}
