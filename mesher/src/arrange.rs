//! From painted outlines to a planar graph: crossings found, noise welded, every face given to a part.

mod check;
mod frame;
mod graph;
mod paint;
#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod properties;
#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod refusal_tests;
mod simplify;
#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic, reason = "tests")]
mod tests;

pub use check::ArrangementFault;
pub use graph::{Arrangement, Boundary, OUTSIDE, OuterCircle, Part, PartId, PlanarEdge, Weld};

use crate::curve::{Bounds, Curve};
use crate::error::MeshError;
use crate::planar::{Tolerance, planar_graph};
use crate::section::Section;
use crate::shape::Outline;

/// Vertices nearer to each other than this share of the drawing's size are one, and so are curves at half of it.
/// Drawing programs and expressions leave differences up to a millionth; real gaps (0.02 mm in 200 mm is 1e-4) are
/// far wider.
const WELD_SHARE: f64 = 2.4e-6;

/// Moves below this share of the drawing's size are round-off and not reported.
const ROUND_OFF_SHARE: f64 = 1e-12;

/// Makes a section a planar graph of curves whose faces belong to parts.
///
/// Crossing, touching, nested and partly shared outlines are resolved by painting order. What is nearly coincident
/// (corners within 2.4 millionths of the drawing's size, curves within half of that) is made one: what is drawn
/// moves onto the axis and the mirror, corners onto corners painted earlier, curves onto corners beside them; moves
/// above round-off are listed in [`Arrangement::welds`].
///
/// # Errors
/// Nothing painted, a mirror height that is not finite, a region or wall below the mirror, a region beyond the
/// wall, a region of which nothing is left, a drawing too entangled to be made planar.
pub fn arrange(section: &Section) -> Result<Arrangement, MeshError> {
    let painted: Vec<(usize, usize, &Outline)> = section
        .regions
        .iter()
        .enumerate()
        .flat_map(|(k, region)| {
            region
                .copies
                .iter()
                .enumerate()
                .map(move |(copy, outline)| (k, copy, outline))
        })
        .collect();
    if painted.is_empty() {
        return Err(MeshError::NothingPainted);
    }
    let frame = frame::Frame::of(section)?;
    let tolerance = tolerance_of(section);
    frame::refuse_below_mirror(section, tolerance.weld_m)?;
    let mut loops: Vec<&[Curve]> = vec![&frame.curves];
    loops.extend(painted.iter().map(|(_, _, outline)| outline.curves()));
    let graph = planar_graph(&loops, tolerance).map_err(|fault| MeshError::Entangled { at: fault.at })?;
    let painting = paint::Painting {
        section,
        painted: &painted,
        frame: &frame,
        weld_m: tolerance.weld_m,
    };
    let mut arrangement = painting.arrangement(graph)?;
    simplify::remove_needless_vertices(&mut arrangement, tolerance.round_off_m);
    Ok(arrangement.graph)
}

fn tolerance_of(section: &Section) -> Tolerance {
    let bounds = drawing_bounds(section);
    let corners = [bounds.low.r, bounds.low.z, bounds.high.r, bounds.high.z];
    let farthest = corners.into_iter().fold(0.0, |most: f64, x| most.max(x.abs()));
    // Of something small drawn far from the origin the coordinates themselves have few digits.
    let weld_m = (WELD_SHARE * bounds.size()).max(1e-13 * farthest);
    let round_off_m = (ROUND_OFF_SHARE * bounds.size()).max(1e-15 * farthest);
    Tolerance {
        weld_m,
        round_off_m,
        mirror_z_m: section.mirror_z_m,
    }
}

/// The box around everything drawn, the wall included.
fn drawing_bounds(section: &Section) -> Bounds {
    let wall = match &section.edge {
        crate::section::SpaceEdge::Wall(outline) => outline.bounds(),
        crate::section::SpaceEdge::HalfCircle => Bounds::EMPTY,
    };
    let copies = section.regions.iter().flat_map(|region| &region.copies);
    copies.fold(wall, |bounds, outline| bounds.union(outline.bounds()))
}
