//! The physics of a section: materials, windings, what moves, where to look. SI units.

use mesher::Point;

use crate::reluctivity::{Demagnetisation, Isotropic};

/// Everything the solver must know beside the mesh. `regions` goes with `mesher::Section::regions`, index by
/// index; air needs no entry.
#[derive(Clone, Debug)]
pub struct Problem {
    /// Physics of each painted region.
    pub regions: Vec<RegionPhysics>,
    /// Windings.
    pub windings: Vec<Winding>,
    /// Rigid groups of regions for which a force is wanted.
    pub movers: Vec<Mover>,
    /// How the currents of the image are directed, where the section has a mirror.
    pub mirror: Option<MirrorCurrents>,
    /// Uniform axial flux density the device sits in, T.
    pub ambient_b_t: f64,
    /// Where the field is read.
    pub traverses: Vec<Traverse>,
    /// Circles whose flux is read.
    pub search_coils: Vec<SearchCoil>,
    /// Stray field wanted.
    pub stray: Option<Stray>,
}

/// The physics of one region (all its copies).
#[derive(Clone, Debug)]
pub struct RegionPhysics {
    /// The name the user gave.
    pub name: String,
    /// Magnetic law at the working temperature.
    pub law: MagneticLaw,
    /// Electric conductivity at the working temperature, S/m; 0 for an insulator.
    pub conductivity_s_per_m: f64,
    /// Density, kg/m³, where the stock gives it.
    pub density_kg_per_m3: Option<f64>,
}

/// How B depends on H.
#[derive(Clone, Debug, PartialEq)]
pub enum MagneticLaw {
    /// B = mu0 mu_r H.
    Linear {
        /// Relative permeability, > 0.
        relative_permeability: f64,
    },
    /// B = mu0 mu_rec H + Br (the recoil line of a magnet).
    Magnet {
        /// Remanence vector (r, z) at the working temperature, T.
        remanence_t: [f64; 2],
        /// Recoil permeability, > 0.
        recoil_permeability: f64,
    },
    /// Saturable: H(B) from a law or a measured curve.
    Saturable(Isotropic),
    /// A magnet with its whole demagnetisation curve.
    DemagnetisedMagnet {
        /// The curve along the magnetisation, at the working temperature.
        curve: Demagnetisation,
        /// Unit vector (r, z) of the magnetisation.
        direction: [f64; 2],
        /// Relative permeability across it, > 0.
        recoil_permeability: f64,
    },
}

/// Turns in series that carry one terminal current.
#[derive(Clone, Debug)]
pub struct Winding {
    /// The name the user gave.
    pub name: String,
    /// Indices of its regions, the coil sides.
    pub regions: Vec<usize>,
    /// Its turns.
    pub turns: Turns,
    /// What its terminals are connected to.
    pub drive: Drive,
    /// What its resistance is made of; `None` when the case does not say.
    pub conductor: Option<Conductor>,
    /// Resistance of the leads in series, ohm.
    pub lead_resistance_ohm: f64,
}

/// Turns of a winding. Negative turns are wound in the opposite sense.
#[derive(Clone, Debug, PartialEq)]
pub enum Turns {
    /// Total, shared by visible area over all regions and copies.
    Total(f64),
    /// One number per region of the winding (shared by area over that region's copies).
    PerRegion(Vec<f64>),
}

/// What a winding's terminals are connected to (direct current).
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Drive {
    /// A current source, A; positive is along +phi for positive turns.
    Current(f64),
    /// A voltage source, V, over own plus lead resistance.
    Voltage(f64),
    /// Nothing, a short circuit or a load: no direct current flows.
    Passive,
}

/// What a winding's resistance is made of.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Conductor {
    /// Wire of known section.
    Wire {
        /// Conductor cross-section of one turn (all strands), m².
        copper_area_m2: f64,
        /// Outside area of one turn's round envelope with its insulation, m²; bare if not known.
        outside_area_m2: f64,
        /// Resistivity at the winding's temperature, ohm m.
        resistivity_ohm_m: f64,
        /// Density of the conductor, kg/m³, where the stock gives it.
        density_kg_per_m3: Option<f64>,
    },
    /// Measured, brought to the winding's temperature, ohm.
    Measured(f64),
}

/// Regions that move together along z.
#[derive(Clone, Debug)]
pub struct Mover {
    /// The name the user gave.
    pub name: String,
    /// Indices of its regions.
    pub regions: Vec<usize>,
}

/// How the currents of the mirror image are directed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MirrorCurrents {
    /// B crosses the plane squarely.
    Same,
    /// B lies in the plane.
    Opposite,
}

/// Points along which the field is read.
#[derive(Clone, Debug)]
pub struct Traverse {
    /// The name the user gave.
    pub name: String,
    /// The points, m (at least one; any place with r >= 0).
    pub points: Vec<Point>,
}

/// A circle whose flux is read.
#[derive(Clone, Debug)]
pub struct SearchCoil {
    /// The name the user gave.
    pub name: String,
    /// Where its (thin) turns lie, m.
    pub at: Point,
    /// Number of turns.
    pub turns: f64,
}

/// Stray field wanted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stray {
    /// Distance beyond the outer circle at which the largest flux density is wanted, m.
    pub distance_m: f64,
    /// Flux density whose reach is wanted, T.
    pub limit_t: f64,
}
