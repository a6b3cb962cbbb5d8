//! One mesh with everything solved on it: unit fields of the windings, the field of magnets and ambient, and
//! their sum at the operating point.

use mesher::arrange::Boundary;
use mesher::locate::Locator;
use mesher::{Mesh, Point};
use rayon::prelude::*;

use crate::MU0;
use crate::exterior::Series;
use crate::magnetostatic::{
    Factored, ambient_load, centroid_b, current_load, gradients, magnet_load, stored,
};
use crate::problem::{MagneticLaw, Problem};
use crate::solve::{Clock, SolveError, Stage};
use crate::space::Space;
use crate::winding::{Laid, lay};

/// Constant reluctivity and remanence of each triangle.
#[derive(Clone, Debug)]
pub struct Materials {
    /// Reluctivity, m/H.
    pub nu: Vec<f64>,
    /// Remanence (r, z), T.
    pub remanence_t: Vec<[f64; 2]>,
    /// Whether any remanence is not zero.
    pub has_magnets: bool,
}

impl Materials {
    fn new(mesh: &Mesh, problem: &Problem) -> Self {
        let of_part: Vec<(f64, [f64; 2])> = mesh
            .parts
            .iter()
            .map(|part| match part.region.map(|r| &problem.regions[r].law) {
                None => (1.0 / MU0, [0.0; 2]),
                Some(MagneticLaw::Linear {
                    relative_permeability,
                }) => (1.0 / (MU0 * relative_permeability), [0.0; 2]),
                Some(MagneticLaw::Magnet {
                    remanence_t,
                    recoil_permeability,
                }) => (1.0 / (MU0 * recoil_permeability), *remanence_t),
            })
            .collect();
        Self {
            nu: mesh.part_of.iter().map(|&p| of_part[p as usize].0).collect(),
            remanence_t: mesh.part_of.iter().map(|&p| of_part[p as usize].1).collect(),
            has_magnets: of_part.iter().any(|(_, br)| *br != [0.0; 2]),
        }
    }
}

/// A solved operating point on one mesh. All nodal vectors cover all nodes.
pub struct Operating<'a> {
    /// The mesh.
    pub mesh: &'a Mesh,
    /// The discretisation on it.
    pub space: &'a Space,
    /// The physics.
    pub problem: &'a Problem,
    /// Reluctivity and remanence of each triangle.
    pub materials: Materials,
    /// The windings as laid.
    pub laid: Vec<Laid>,
    /// Load of one ampere in each winding, A per radian of psi.
    pub unit_load: Vec<Vec<f64>>,
    /// psi of one ampere in each winding, Wb/rad/A.
    pub unit_psi: Vec<Vec<f64>>,
    /// psi of magnets and ambient together (the uniform ambient field included), Wb/rad; `None` without either.
    pub given_psi: Option<Vec<f64>>,
    /// Load of the magnets; `None` without any.
    pub magnet_load: Option<Vec<f64>>,
    /// psi at the operating point, Wb/rad, the uniform ambient field included.
    pub psi: Vec<f64>,
    /// (psi_s, psi_z) of each triangle at the operating point.
    pub gradient: Vec<[f64; 2]>,
    /// (B_r, B_z) of each triangle at its centroid in (s, z), T.
    pub cell_b_t: Vec<[f64; 2]>,
    /// Current density of each triangle, A/m².
    pub cell_j_a_per_m2: Vec<f64>,
    /// The field beyond the outer circle without the uniform ambient field; `None` with a wall.
    pub series: Option<Series>,
    /// Field energy of psi less the uniform ambient field, J per radian: the yardstick of the whole field.
    pub rest_energy_j_per_rad: f64,
    /// Nodes on the edge of the meshed space other than the axis.
    pub on_boundary: Vec<bool>,
    /// Nodes where parts meet, and on the wall.
    pub on_interface: Vec<bool>,
    /// Nodes on the outer circle.
    pub on_circle: Vec<bool>,
    /// Finds the triangle of a point.
    pub locator: Locator,
}

impl<'a> Operating<'a> {
    /// Solves a problem on a mesh.
    ///
    /// # Errors
    /// A winding without resistance under voltage; a linear system that cannot be solved accurately.
    pub fn solve(
        mesh: &'a Mesh,
        space: &'a Space,
        problem: &'a Problem,
        clock: &mut Clock<'_>,
    ) -> Result<Self, SolveError> {
        clock.begin(Stage::Assembly, mesh.nodes.len());
        let materials = Materials::new(mesh, problem);
        let laid = lay(mesh, problem)?;
        let density: Vec<Vec<f64>> = laid.iter().map(|l| l.turn_density(mesh, space)).collect();
        let unit_load: Vec<Vec<f64>> = density.iter().map(|d| current_load(space, d)).collect();
        let magnet_load = materials
            .has_magnets
            .then(|| magnet_load(space, &materials.nu, &materials.remanence_t));
        let given_load = given_load(space, problem, &materials, magnet_load.as_deref());
        clock.begin(Stage::Solve, mesh.nodes.len());
        let factored = Factored::new(space, &materials.nu)?;
        let loads: Vec<Vec<f64>> = unit_load.iter().cloned().chain(given_load).collect();
        let mut unit_psi = factored.solve(&loads)?;
        drop(factored);
        clock.begin(Stage::Quantities, mesh.nodes.len());
        let mut given = if unit_psi.len() > laid.len() {
            unit_psi.pop()
        } else {
            None
        };
        let mut rest = given.clone().unwrap_or_else(|| vec![0.0; mesh.nodes.len()]);
        for (psi, laid) in unit_psi.iter().zip(&laid) {
            if laid.current_a != 0.0 {
                rest.par_iter_mut()
                    .zip(psi)
                    .for_each(|(x, u)| *x += laid.current_a * u);
            }
        }
        let series = space.exterior.as_ref().map(|e| e.series(&rest));
        let rest_energy_j_per_rad = 0.5 * stored(space, &materials.nu, &rest, &rest);
        let b0 = problem.ambient_b_t;
        if b0 != 0.0 {
            rest.iter_mut()
                .zip(&space.s)
                .for_each(|(x, s)| *x += 0.5 * b0 * s);
            if let Some(given) = &mut given {
                given
                    .iter_mut()
                    .zip(&space.s)
                    .for_each(|(x, s)| *x += 0.5 * b0 * s);
            }
        }
        let cell_j_a_per_m2 = (0..mesh.triangles.len())
            .into_par_iter()
            .map(|t| density.iter().zip(&laid).map(|(d, l)| d[t] * l.current_a).sum())
            .collect();
        Ok(Self {
            gradient: gradients(space, &rest),
            cell_b_t: centroid_b(space, &rest),
            psi: rest,
            locator: Locator::of(mesh),
            on_boundary: on_edge(mesh, |b| !matches!(b, Boundary::None | Boundary::Axis)),
            on_interface: on_interface(mesh),
            on_circle: on_edge(mesh, |b| b == Boundary::Circle),
            rest_energy_j_per_rad,
            mesh,
            space,
            problem,
            materials,
            laid,
            unit_load,
            unit_psi,
            given_psi: given,
            magnet_load,
            cell_j_a_per_m2,
            series,
        })
    }

    /// Region of a triangle, `None` for air.
    pub fn region_of(&self, triangle: usize) -> Option<usize> {
        self.mesh.parts[self.mesh.part_of[triangle] as usize].region
    }

    /// The point as far beyond the outer circle as this one lies within it; `None` with a wall or at the centre.
    pub fn reflected_in_circle(&self, at: Point) -> Option<Point> {
        let circle = self.mesh.circle?;
        let height = at.z - circle.centre_z_m;
        let rho = at.r.hypot(height);
        let factor = (2.0 * circle.radius_m - rho) / rho;
        (rho > 0.0).then_some(Point {
            r: at.r * factor,
            z: circle.centre_z_m + height * factor,
        })
    }

    /// What a mirror multiplies whole-device numbers by.
    pub fn whole_device(&self) -> f64 {
        if self.problem.mirror.is_some() { 2.0 } else { 1.0 }
    }

    /// (H_r, H_z) of a triangle for a flux density in it, A/m.
    pub fn h_of(&self, triangle: usize, b: [f64; 2]) -> [f64; 2] {
        let (nu, br) = (self.materials.nu[triangle], self.materials.remanence_t[triangle]);
        [nu * (b[0] - br[0]), nu * (b[1] - br[1])]
    }
}

/// Nodes where triangles of different parts meet, and on the wall.
fn on_interface(mesh: &Mesh) -> Vec<bool> {
    let mut on = on_edge(mesh, |b| b == Boundary::Wall);
    let mut first = vec![u32::MAX; mesh.nodes.len()];
    for (corners, &part) in mesh.triangles.iter().zip(&mesh.part_of) {
        for &n in corners {
            match &mut first[n as usize] {
                seen if *seen == u32::MAX => *seen = part,
                seen => on[n as usize] |= *seen != part,
            }
        }
    }
    on
}

/// Nodes of edges on the boundaries that `of` picks.
fn on_edge(mesh: &Mesh, of: impl Fn(Boundary) -> bool) -> Vec<bool> {
    let mut on = vec![false; mesh.nodes.len()];
    for edge in mesh.curve_edges.iter().filter(|e| of(e.boundary)) {
        edge.nodes.iter().for_each(|&n| on[n as usize] = true);
    }
    on
}

/// One load for magnets and ambient together: they are never wanted apart.
fn given_load(
    space: &Space,
    problem: &Problem,
    materials: &Materials,
    magnets: Option<&[f64]>,
) -> Option<Vec<f64>> {
    let ambient =
        (problem.ambient_b_t != 0.0).then(|| ambient_load(space, &materials.nu, problem.ambient_b_t));
    match (magnets, ambient) {
        (Some(m), Some(a)) => Some(m.iter().zip(&a).map(|(x, y)| x + y).collect()),
        (Some(m), None) => Some(m.to_vec()),
        (None, ambient) => ambient,
    }
}
