//! Fields around the device, strong magnets, strong pulls.

use mesher::Point;
use solver::problem::MagneticLaw;
use solver::{Bracket, MU0, Quantities, Solution};

use super::{COMMON_PRACTICE, Caution, THIS_CASE};
use crate::case::Case;
use crate::notation::{Unit, significant};

/// Flux density above which implanted devices may be disturbed, T (ICNIRP 2009, from memory).
const IMPLANTS_T: f64 = 0.5e-3;
/// Static flux density that no part of the body of the general public should meet, T (ICNIRP 2009, from memory).
const PUBLIC_T: f64 = 0.4;
/// Static flux density that head and trunk should not meet at work, T (ICNIRP 2009, from memory).
const WORKERS_T: f64 = 2.0;
/// Pull above which fingers are hurt, N.
const CRUSHING_N: f64 = 50.0;

/// The farthest place in free air outside the device where the flux density is beyond a limit.
struct Reach {
    /// Distance beyond the box around all parts, m.
    distance_m: f64,
    /// Whether the mesh ends before the field falls under the limit.
    to_the_edge: bool,
}

/// How far from the box around all parts, within the mesh, the field is beyond a limit.
fn reach(solution: &Solution, limit_t: f64) -> Option<Reach> {
    let mesh = &solution.mesh;
    let is_air = |part: u32| {
        mesh.parts
            .get(part as usize)
            .is_none_or(|part| part.region.is_none())
    };
    let corners = |of: [u32; 3]| of.map(|node| mesh.nodes[node as usize]);
    let mut device = [f64::INFINITY, f64::NEG_INFINITY, 0.0];
    for (triangle, _) in mesh
        .triangles
        .iter()
        .zip(&mesh.part_of)
        .filter(|(_, part)| !is_air(**part))
    {
        for p in corners(*triangle) {
            device = [device[0].min(p.z), device[1].max(p.z), device[2].max(p.r)];
        }
    }
    let beyond = |p: Point| {
        // Below a mirror lies the image, not air.
        let under = if mesh.mirror_z_m.is_some() {
            0.0
        } else {
            device[0] - p.z
        };
        (p.r - device[2])
            .max(0.0)
            .hypot((p.z - device[1]).max(under).max(0.0))
    };
    let mut found: Option<Reach> = None;
    let strong = |(_, b): &(usize, &[f64; 2])| b[0].hypot(b[1]) > limit_t;
    for (index, _) in solution.field.cell_b_t.iter().enumerate().filter(strong) {
        let p = corners(mesh.triangles[index]);
        let centre = (p[0] + p[1] + p[2]) * (1.0 / 3.0);
        let distance_m = beyond(centre);
        if is_air(mesh.part_of[index])
            && distance_m > 0.0
            && found.as_ref().is_none_or(|found| distance_m > found.distance_m)
        {
            let to_the_edge = mesh.circle.is_some_and(|circle| {
                p.iter()
                    .any(|p| p.r.hypot(p.z - circle.centre_z_m) > (1.0 - 1e-6) * circle.radius_m)
            });
            found = Some(Reach {
                distance_m,
                to_the_edge,
            });
        }
    }
    found
}

/// Distance from the centre of the device at which its dipole field falls under a limit everywhere, m.
fn dipole_reach_m(moment_am2: f64, limit_t: f64) -> f64 {
    // On the axis B = mu0 2 m / (4 pi rho^3), the largest at that distance.
    (MU0 * moment_am2.abs() / (2.0 * std::f64::consts::PI * limit_t)).cbrt()
}

/// Stray field that reaches people with implants.
pub(super) fn stray(case: &Case, solution: &Solution) -> Option<Caution> {
    let quantities = &solution.quantities;
    let asked = quantities
        .stray
        .as_ref()
        .filter(|stray| (stray.limit_t / IMPLANTS_T - 1.0).abs() < 1e-9);
    let radius = solution.mesh.circle.map(|circle| circle.radius_m)?;
    let how_far = match (asked, &quantities.dipole_moment_am2) {
        (Some(stray), _) => {
            let reach = stray.reach_of_limit_m.as_ref()?;
            format!(
                "up to {} from the centre of the device",
                significant(reach.high, Unit::METRE, 2)
            )
        }
        (None, Some(moment)) => {
            let largest = moment.low.abs().max(moment.high.abs());
            let reach = Some(dipole_reach_m(largest, IMPLANTS_T)).filter(|reach| *reach > radius)?;
            format!(
                "up to about {} from the centre of the device",
                significant(reach, Unit::METRE, 2)
            )
        }
        (None, None) => {
            let reach = reach(solution, IMPLANTS_T)?;
            let more = if reach.to_the_edge { " and more" } else { "" };
            format!(
                "{}{more} beyond the parts",
                significant(reach.distance_m, Unit::METRE, 2)
            )
        }
    };
    let ambient = if case.problem.ambient_b_t.abs() > 0.0 {
        " The ambient field is not counted."
    } else {
        ""
    };
    Some(Caution::safety(
        "stray field",
        format!(
            "The flux density exceeds {} {how_far}: keep people with pacemakers and other implants farther \
             away.{ambient}",
            significant(IMPLANTS_T, Unit::TESLA, 2)
        ),
        "ICNIRP 2009, static magnetic fields, from memory",
    ))
}

/// Fields beyond the reference levels for people in general.
pub(super) fn strong_field(_case: &Case, solution: &Solution) -> Option<Caution> {
    let public = reach(solution, PUBLIC_T)?;
    let workers = reach(solution, WORKERS_T);
    let far = |reach: &Reach| {
        let more = if reach.to_the_edge { " and more" } else { "" };
        format!("{}{more}", significant(reach.distance_m, Unit::METRE, 2))
    };
    let at_work = workers.map_or(String::new(), |reach| {
        format!(
            " Beyond {}, the level for head and trunk at work: {}.",
            significant(WORKERS_T, Unit::TESLA, 2),
            far(&reach)
        )
    });
    Some(Caution::safety(
        "stray field",
        format!(
            "In the open air around the parts the flux density exceeds {}, the level for any part of the body of \
             people in general, up to {} beyond them.{at_work}",
            significant(PUBLIC_T, Unit::TESLA, 2),
            far(&public)
        ),
        "ICNIRP 2009, static magnetic fields, from memory",
    ))
}

/// Magnets that snap together hard enough to hurt.
pub(super) fn strong_magnets(case: &Case, quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let strong = case.problem.regions.iter().zip(&quantities.regions).filter_map(|(physics, region)| {
        let remanence_t = match &physics.law {
            MagneticLaw::Magnet { remanence_t: [br_r, br_z], .. } => br_r.hypot(*br_z),
            MagneticLaw::DemagnetisedMagnet { curve, .. } => curve.remanence_t(),
            _ => return None,
        };
        // A pole face of the magnet's own size on thick steel: at most Br^2 / (2 mu0) times its area.
        let face_m2 = region.volume_m3.value.max(0.0).powf(2.0 / 3.0);
        let pull = remanence_t * remanence_t * face_m2 / (2.0 * MU0);
        (pull > CRUSHING_N).then(|| {
            Caution::safety(
                &region.name,
                format!(
                    "A magnet of this size and remanence can pull on steel or on another magnet with up to about {}, \
                     suddenly and from a distance: fingers are crushed, chips fly. Keep it from steel, watches, cards \
                     and children.",
                    significant(pull, Unit::NEWTON, 2)
                ),
                COMMON_PRACTICE,
            )
        })
    });
    strong.collect()
}

/// Movers that pull hard enough to hurt.
pub(super) fn strong_forces(quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let strong = quantities.movers.iter().filter_map(|mover| {
        let force = mover
            .force_n
            .as_ref()
            .map(|force| force.low.abs().max(force.high.abs()))?;
        (force > CRUSHING_N).then(|| {
            Caution::safety(
                &mover.name,
                format!(
                    "The pull, {}, pinches fingers, and it grows as the gap closes.",
                    significant(force, Unit::NEWTON, 2)
                ),
                COMMON_PRACTICE,
            )
        })
    });
    strong.collect()
}

/// Movers whose force is the limit of a vanishing air film.
pub(super) fn touching_movers(quantities: &Quantities<Bracket>) -> Vec<Caution> {
    let touching = quantities
        .movers
        .iter()
        .filter(|mover| mover.touches_other_material && mover.force_n.is_some());
    touching
        .map(|mover| {
            Caution::validity(
                &mover.name,
                "The mover touches other material, so its force is the limit of a vanishing air film. Rough faces, \
                 paint and plating leave a real gap and take much of it away: draw that gap."
                    .to_owned(),
                THIS_CASE,
            )
        })
        .collect()
}
