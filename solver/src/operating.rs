//! One mesh with everything solved on it: unit fields of the windings, the field of magnets and ambient, and
//! their sum at the operating point.

use mesher::arrange::Boundary;
use mesher::locate::Locator;
use mesher::{Mesh, Point};
use rayon::prelude::*;

use crate::exterior::Series;
use crate::law::{Law, Laws};
use crate::magnetostatic::{centroid_b, current_load, gradients, stored};
use crate::newton::Course;
use crate::problem::Problem;
use crate::solve::{Clock, SolveError, Stage};
use crate::space::Space;
use crate::statics::{Materials, Sources, StaticField};
use crate::winding::{Laid, lay};

/// A solved operating point on one mesh. All nodal vectors cover all nodes.
pub struct Operating<'a> {
    /// The mesh.
    pub mesh: &'a Mesh,
    /// The discretisation on it.
    pub space: &'a Space,
    /// The physics.
    pub problem: &'a Problem,
    /// The laws of the parts.
    pub laws: Laws,
    /// The material of each triangle, frozen at the operating point.
    pub materials: Materials,
    /// The windings as laid.
    pub laid: Vec<Laid>,
    /// Load of one ampere in each winding, A per radian of psi.
    pub unit_load: Vec<Vec<f64>>,
    /// psi of one ampere in each winding with the material frozen, Wb/rad/A.
    pub unit_psi: Vec<Vec<f64>>,
    /// psi of magnets and ambient together (the uniform ambient field included), Wb/rad; `None` without either.
    pub given_psi: Option<Vec<f64>>,
    /// Change of psi per ampere in each winding, Wb/rad/A; `None` with linear material.
    pub incremental_psi: Option<Vec<Vec<f64>>>,
    /// psi without the uniform ambient field, Wb/rad.
    pub rest: Vec<f64>,
    /// How Newton's method went; `None` with linear material.
    pub course: Option<Course>,
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
    /// Solves a problem on a mesh. `start` is a guess of [`Operating::rest`] for saturable material.
    ///
    /// # Errors
    /// A winding without resistance under voltage; a linear system that cannot be solved accurately.
    pub fn solve(
        mesh: &'a Mesh,
        space: &'a Space,
        problem: &'a Problem,
        start: Option<Vec<f64>>,
        clock: &mut Clock<'_>,
    ) -> Result<Self, SolveError> {
        clock.begin(Stage::Assembly, mesh.nodes.len());
        let laws = Laws::new(mesh, problem);
        let laid = lay(mesh, problem)?;
        let density: Vec<Vec<f64>> = laid.iter().map(|l| l.turn_density(mesh, space)).collect();
        let unit_load: Vec<Vec<f64>> = density.iter().map(|d| current_load(space, d)).collect();
        let currents: Vec<f64> = laid.iter().map(|l| l.current_a).collect();
        clock.begin(Stage::Solve, mesh.nodes.len());
        let sources = Sources {
            unit_load: &unit_load,
            currents: &currents,
        };
        let field = StaticField::solve(mesh, space, problem, &laws, &sources, start)?;
        clock.begin(Stage::Quantities, mesh.nodes.len());
        let total = |rest: &[f64]| -> Vec<f64> {
            rest.iter()
                .zip(&space.s)
                .map(|(x, s)| x + 0.5 * problem.ambient_b_t * s)
                .collect()
        };
        let psi = total(&field.rest);
        let cell_j_a_per_m2 = (0..mesh.triangles.len())
            .into_par_iter()
            .map(|t| density.iter().zip(&currents).map(|(d, i)| d[t] * i).sum())
            .collect();
        Ok(Self {
            gradient: gradients(space, &psi),
            cell_b_t: centroid_b(space, &psi),
            psi,
            locator: Locator::of(mesh),
            on_boundary: on_edge(mesh, |b| !matches!(b, Boundary::None | Boundary::Axis)),
            on_interface: on_interface(mesh),
            on_circle: on_edge(mesh, |b| b == Boundary::Circle),
            rest_energy_j_per_rad: 0.5 * stored(space, &field.materials.nu, &field.rest, &field.rest),
            series: space.exterior.as_ref().map(|e| e.series(&field.rest)),
            given_psi: field.given.as_deref().map(total),
            rest: field.rest,
            unit_psi: field.unit,
            incremental_psi: field.incremental,
            materials: field.materials,
            course: field.course,
            mesh,
            space,
            problem,
            laws,
            laid,
            unit_load,
            cell_j_a_per_m2,
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
        self.law_of(triangle).at(b).h
    }

    /// The law of a triangle.
    pub fn law_of(&self, triangle: usize) -> &Law {
        &self.laws.of_part[self.mesh.part_of[triangle] as usize]
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
