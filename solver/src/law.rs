//! The law of each triangle, evaluated on the discrete field: energy, H and the tangent dH/dB.
//!
//! One flux density stands for a triangle: B_z = 2 psi_s and B_r = -psi_z m with m² the triangle's mean of 1/s, so
//! that B² is the mean of the discrete field's square. The energy (area / 2) w(B) is then convex in psi, exact for
//! constant permeability, and its derivatives are exact.

use rayon::prelude::*;

use mesher::Mesh;

use crate::MU0;
use crate::problem::{MagneticLaw, Problem};
use crate::reluctivity::{Demagnetisation, Isotropic};
use crate::space::Space;

/// A law as the triangles of one part use it.
#[derive(Clone, Debug)]
pub enum Law {
    /// H = nu (B - Br).
    Linear {
        /// Reluctivity, m/H.
        nu: f64,
        /// Remanence (r, z), T.
        remanence_t: [f64; 2],
    },
    /// H parallel to B.
    Isotropic(Isotropic),
    /// A demagnetisation curve along `direction`, constant permeability across it.
    Magnet {
        /// Along the magnetisation.
        along: Demagnetisation,
        /// Unit vector (r, z).
        direction: [f64; 2],
        /// Reluctivity across, m/H.
        across: f64,
    },
}

/// Energy density, field and tangent of a law at one flux density (r, z).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Point {
    /// int H dB, J/m³.
    pub energy: f64,
    /// (H_r, H_z), A/m.
    pub h: [f64; 2],
    /// dH_r/dB_r, dH_r/dB_z, dH_z/dB_z, m/H.
    pub tangent: [f64; 3],
}

impl Law {
    /// The law of a region.
    pub fn of(law: &MagneticLaw) -> Self {
        match law {
            MagneticLaw::Linear {
                relative_permeability,
            } => Self::Linear {
                nu: 1.0 / (MU0 * relative_permeability),
                remanence_t: [0.0; 2],
            },
            MagneticLaw::Magnet {
                remanence_t,
                recoil_permeability,
            } => Self::Linear {
                nu: 1.0 / (MU0 * recoil_permeability),
                remanence_t: *remanence_t,
            },
            MagneticLaw::Saturable(law) => Self::Isotropic(law.clone()),
            MagneticLaw::DemagnetisedMagnet {
                curve,
                direction,
                recoil_permeability,
            } => Self::Magnet {
                along: curve.clone(),
                direction: *direction,
                across: 1.0 / (MU0 * recoil_permeability),
            },
        }
    }

    /// Whether H is not an affine function of B.
    pub fn is_curved(&self) -> bool {
        !matches!(self, Self::Linear { .. })
    }

    /// Everything at a flux density (r, z), T.
    pub fn at(&self, b: [f64; 2]) -> Point {
        match self {
            Self::Linear { nu, remanence_t } => {
                let d = [b[0] - remanence_t[0], b[1] - remanence_t[1]];
                Point {
                    energy: 0.5 * nu * (d[0] * d[0] + d[1] * d[1]),
                    h: [nu * d[0], nu * d[1]],
                    tangent: [*nu, 0.0, *nu],
                }
            }
            Self::Isotropic(law) => {
                let size = b[0].hypot(b[1]);
                let state = law.at(size);
                if size == 0.0 {
                    return Point {
                        energy: 0.0,
                        h: [0.0; 2],
                        tangent: [state.slope, 0.0, state.slope],
                    };
                }
                let (nu, u) = (state.h / size, [b[0] / size, b[1] / size]);
                let extra = state.slope - nu;
                Point {
                    energy: state.energy,
                    h: [nu * b[0], nu * b[1]],
                    tangent: [
                        nu + extra * u[0] * u[0],
                        extra * u[0] * u[1],
                        nu + extra * u[1] * u[1],
                    ],
                }
            }
            Self::Magnet {
                along,
                direction: m,
                across,
            } => {
                let parallel = b[0] * m[0] + b[1] * m[1];
                let cross = [b[0] - parallel * m[0], b[1] - parallel * m[1]];
                let state = along.at(parallel);
                let extra = state.slope - across;
                Point {
                    energy: state.energy + 0.5 * across * (cross[0] * cross[0] + cross[1] * cross[1]),
                    h: [
                        state.h * m[0] + across * cross[0],
                        state.h * m[1] + across * cross[1],
                    ],
                    tangent: [
                        across + extra * m[0] * m[0],
                        extra * m[0] * m[1],
                        across + extra * m[1] * m[1],
                    ],
                }
            }
        }
    }

    /// The frozen law at a flux density: H = nu (B - Br) that gives the same H there. For isotropic material the
    /// secant without remanence; for a magnet the slope of its curve there.
    pub fn frozen(&self, b: [f64; 2]) -> (f64, [f64; 2]) {
        match self {
            Self::Linear { nu, remanence_t } => (*nu, *remanence_t),
            Self::Isotropic(law) => {
                let size = b[0].hypot(b[1]);
                let state = law.at(size);
                (
                    if size > 0.0 && state.h > 0.0 {
                        state.h / size
                    } else {
                        state.slope
                    },
                    [0.0; 2],
                )
            }
            Self::Magnet { along, direction, .. } => {
                let slope = along.at(b[0] * direction[0] + b[1] * direction[1]).slope;
                let h = self.at(b).h;
                (slope, [b[0] - h[0] / slope, b[1] - h[1] / slope])
            }
        }
    }
}

/// The laws of a mesh.
#[derive(Clone, Debug)]
pub struct Laws {
    /// Distinct laws, one per part of the mesh.
    pub of_part: Vec<Law>,
    /// Whether any is curved.
    pub curved: bool,
}

impl Laws {
    /// Laws of the parts of a mesh; air is [`Law::Linear`].
    pub fn new(mesh: &Mesh, problem: &Problem) -> Self {
        let air = Law::Linear {
            nu: 1.0 / MU0,
            remanence_t: [0.0; 2],
        };
        let of_part: Vec<Law> = mesh
            .parts
            .iter()
            .map(|part| {
                part.region
                    .map_or_else(|| air.clone(), |r| Law::of(&problem.regions[r].law))
            })
            .collect();
        // Parts that are covered wholly do not count.
        let curved = mesh.part_of.iter().any(|&p| of_part[p as usize].is_curved());
        Self { of_part, curved }
    }
}

/// What one flux density stands for in each triangle: (B_r, B_z), T.
pub fn mean_b(space: &Space, triangle: usize, gradient: [f64; 2]) -> [f64; 2] {
    [
        -gradient[1] * root_mean_over_s(space, triangle),
        2.0 * gradient[0],
    ]
}

fn root_mean_over_s(space: &Space, triangle: usize) -> f64 {
    let element = &space.elements[triangle];
    (element.over_s / element.area).sqrt()
}

/// Rows of the two field components on the hats of a triangle: B_r = sum rows[i].0 psi_i, B_z = sum rows[i].1 psi_i.
pub fn rows(space: &Space, triangle: usize) -> [[f64; 2]; 3] {
    let (element, m) = (&space.elements[triangle], root_mean_over_s(space, triangle));
    std::array::from_fn(|i| [-m * element.c[i], 2.0 * element.b[i]])
}

/// All laws evaluated on a field given by its gradients (psi_s, psi_z).
pub fn evaluate(mesh: &Mesh, space: &Space, laws: &Laws, gradients: &[[f64; 2]]) -> Vec<Point> {
    gradients
        .par_iter()
        .enumerate()
        .map(|(t, &gradient)| laws.of_part[mesh.part_of[t] as usize].at(mean_b(space, t, gradient)))
        .collect()
}
