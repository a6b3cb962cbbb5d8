//! What can go wrong, with the names and numbers a person needs.

use thiserror::Error;

use crate::curve::Point;

/// Why no mesh could be made.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum MeshError {
    /// No copy of a region has a face of its own.
    #[error("region `{region}` has no triangle: {}", reason_of_vanishing(.covered_by))]
    RegionVanished {
        /// Its name.
        region: String,
        /// Names of the regions painted over it; empty when it is too thin to be meshed.
        covered_by: Vec<String>,
    },
    /// A list of curve edges names an edge that no triangle has.
    #[error("the curve edge between nodes {} and {} belongs to no triangle", nodes[0], nodes[1])]
    EdgeMissing {
        /// Its nodes.
        nodes: [u32; 2],
    },
    /// A triangle of the finer mesh would lie on its back.
    #[error("a triangle of `{part}` near r = {:.6e} m, z = {:.6e} m is too thin to be halved", at.r, at.z)]
    TurnedOver {
        /// A corner of it, m.
        at: Point,
        /// Name of its region, or "air".
        part: String,
    },
    /// The mesh would need more triangles than allowed.
    #[error(
        "more than {limit} triangles would be needed: the finest details ask for edges of {smallest_m:.3e} m at {at}; \
         draw them coarser, or allow more triangles"
    )]
    TooManyTriangles {
        /// The limit.
        limit: usize,
        /// The smallest wanted edge length, m.
        smallest_m: f64,
        /// Where that is, m.
        at: Point,
    },
    /// A coordinate is too small or too large for exact geometry.
    #[error("the coordinates at {at} are too small or too large to be meshed")]
    Coordinates {
        /// Where, m.
        at: Point,
    },
    /// Two nodes would fall into one place.
    #[error("details at {at} are too small for the size of the drawing")]
    TooClose {
        /// Where, m.
        at: Point,
    },
    /// A part has no triangle.
    #[error("region number {} has no triangle: it is too thin to be meshed", region + 1)]
    PartVanished {
        /// Which region, from 0.
        region: usize,
    },
    /// The fineness is not a positive number.
    #[error("the fineness must be a positive number, not {fineness}")]
    Fineness {
        /// What was given.
        fineness: f64,
    },
    /// Neither a region nor a wall gives the space an extent.
    #[error("nothing is painted: at least one region is needed")]
    NothingPainted,
    /// The height of the mirror is infinite or not a number.
    #[error("the height of the mirror must be a finite number, not {z_m}")]
    MirrorNotFinite {
        /// What was given, m.
        z_m: f64,
    },
    /// A region reaches below the symmetry plane.
    #[error(
        "region `{region}` reaches below the mirror: down to z = {lowest_z_m} m, the mirror is at z = {mirror_z_m} m"
    )]
    BelowMirror {
        /// Its name.
        region: String,
        /// Its lowest height, m.
        lowest_z_m: f64,
        /// Height of the mirror, m.
        mirror_z_m: f64,
    },
    /// The wall reaches below the symmetry plane.
    #[error(
        "the wall reaches below the mirror: down to z = {lowest_z_m} m, the mirror is at z = {mirror_z_m} m"
    )]
    WallBelowMirror {
        /// Its lowest height, m.
        lowest_z_m: f64,
        /// Height of the mirror, m.
        mirror_z_m: f64,
    },
    /// A region reaches out of the wall.
    #[error("region `{region}` reaches beyond the wall, by {by_m} m at {at}")]
    BeyondWall {
        /// Its name.
        region: String,
        /// The farthest drawn point outside.
        at: Point,
        /// Its distance from the wall, m.
        by_m: f64,
    },
    /// The drawing could not be made a planar graph.
    #[error(
        "the drawing is too entangled near {at}: too many nearly coincident curves; draw it more simply there"
    )]
    Entangled {
        /// Where, m.
        at: Point,
    },
}

fn reason_of_vanishing(covered_by: &[String]) -> String {
    if covered_by.is_empty() {
        return "it is too thin to be meshed".to_owned();
    }
    let names: Vec<_> = covered_by.iter().map(|name| format!("`{name}`")).collect();
    format!("it is covered by {}, painted later", names.join(", "))
}

/// Why a shape cannot be painted. Lengths in m; whoever shows them may change the unit.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum ShapeError {
    /// A coordinate, radius or fillet is infinite or not a number.
    #[error("{what} must be a finite number, not {value}")]
    NotFinite {
        /// Which one.
        what: &'static str,
        /// What was given.
        value: f64,
    },
    /// A length beyond what the mesher counts with.
    #[error("{what} must be within {limit_m:e} m, not {value:e} m")]
    TooFar {
        /// Which one.
        what: &'static str,
        /// What was given, m.
        value: f64,
        /// The largest that is accepted, m.
        limit_m: f64,
    },
    /// The shape reaches across the axis.
    #[error("the shape reaches across the axis, to {at}; only r >= 0 is described")]
    AcrossAxis {
        /// Its point farthest beyond the axis, m.
        at: Point,
    },
    /// A circle lies wholly beyond the axis.
    #[error("the circle lies wholly beyond the axis: centre {centre}, radius {radius_m} m")]
    CircleBeyondAxis {
        /// Its centre.
        centre: Point,
        /// Its radius, m.
        radius_m: f64,
    },
    /// The shape encloses nothing.
    #[error("the shape has no area ({area_m2} m² within a size of {size_m} m)")]
    NoArea {
        /// What it encloses, m²; round-off only.
        area_m2: f64,
        /// Its largest extent, m.
        size_m: f64,
    },
    /// The outline crosses itself.
    #[error("the outline crosses itself at {at}")]
    SelfCrossing {
        /// Where, m.
        at: Point,
    },
    /// The radius is zero or negative.
    #[error("the radius must be positive, not {radius_m} m")]
    RadiusNotPositive {
        /// What was given, m.
        radius_m: f64,
    },
    /// The fillet radius is negative.
    #[error("the fillet must not be negative, but is {fillet_m} m")]
    NegativeFillet {
        /// What was given, m.
        fillet_m: f64,
    },
    /// The fillets of two corners would overlap.
    #[error("the fillet of {fillet_m} m is too large: at most {limit_m} m fits")]
    FilletTooLarge {
        /// What was given, m.
        fillet_m: f64,
        /// What fits, m.
        limit_m: f64,
    },
    /// The three points of an arc lie on a straight line, or two of them coincide.
    #[error("no circular arc leads from {from} through {through} to {to}: the points lie on a line")]
    StraightArc {
        /// Start.
        from: Point,
        /// The point on the way.
        through: Point,
        /// End.
        to: Point,
    },
    /// Two consecutive points coincide.
    #[error("an edge has no length: two consecutive points at {at}")]
    NoLength {
        /// Where, m.
        at: Point,
    },
    /// Not enough points to enclose an area.
    #[error("an outline needs at least {needed} points, not {given}")]
    TooFewPoints {
        /// How many were given.
        given: usize,
        /// How many are needed.
        needed: usize,
    },
}
