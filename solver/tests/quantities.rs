//! Quantities of whole solves, from a drawn section to brackets, against closed forms.

use coilwright_solver as solver;
use mesher::section::{PaintedRegion, SpaceEdge};
use mesher::shape::Outline;
use mesher::{Point, Section};
use solver::problem::{
    Drive, MagneticLaw, MirrorCurrents, Mover, Problem, RegionPhysics, SearchCoil, Traverse, Turns, Winding,
};
use solver::solve::{Kind, Progress, Settings, Stage};
use solver::{Bracket, MU0, Quantities};

struct Silent;

impl Progress for Silent {
    fn stage(&self, _: Stage, _: usize, _: usize) {}
}

const AIR: MagneticLaw = MagneticLaw::Linear {
    relative_permeability: 1.0,
};

#[derive(Default)]
struct Bench {
    painted: Vec<PaintedRegion>,
    physics: Vec<RegionPhysics>,
    windings: Vec<Winding>,
    movers: Vec<Mover>,
    mirror: Option<(f64, MirrorCurrents)>,
    ambient: f64,
    looked_at: Vec<Point>,
}

impl Bench {
    fn region(mut self, name: &str, shape: Outline, law: MagneticLaw) -> Self {
        self.painted.push(PaintedRegion {
            name: name.into(),
            copies: vec![shape],
            mesh_size_m: None,
        });
        self.physics.push(RegionPhysics {
            name: name.into(),
            law,
            conductivity_s_per_m: 0.0,
            density_kg_per_m3: None,
        });
        self
    }

    fn coil(self, name: &str, r: [f64; 2], z: [f64; 2], turns: f64, current: f64) -> Self {
        let mut bench = self.region(name, Outline::rect(r, z, 0.0).unwrap(), AIR);
        bench.windings.push(Winding {
            name: name.into(),
            regions: vec![bench.painted.len() - 1],
            turns: Turns::Total(turns),
            drive: Drive::Current(current),
            conductor: None,
            lead_resistance_ohm: 0.0,
        });
        bench
    }

    fn moving(mut self) -> Self {
        let last = self.painted.len() - 1;
        self.movers.push(Mover {
            name: self.painted[last].name.clone(),
            regions: vec![last],
        });
        self
    }

    fn solve(self) -> Quantities<Bracket> {
        let section = Section {
            regions: self.painted,
            edge: SpaceEdge::HalfCircle,
            mirror_z_m: self.mirror.map(|(z, _)| z),
        };
        let problem = Problem {
            regions: self.physics,
            windings: self.windings,
            movers: self.movers,
            mirror: self.mirror.map(|(_, currents)| currents),
            ambient_b_t: self.ambient,
            traverses: vec![Traverse {
                name: "points".into(),
                points: self.looked_at.clone(),
            }],
            search_coils: self
                .looked_at
                .iter()
                .map(|&at| SearchCoil {
                    name: "ring".into(),
                    at,
                    turns: 10.0,
                })
                .collect(),
            stray: None,
        };
        let settings = Settings {
            goal: 0.01,
            of: vec![Kind::Inductance, Kind::Force],
            max_triangles: 2_000_000,
            max_time: None,
            fineness: 1.0,
        };
        let solution = solver::solve(&section, &problem, &settings, &Silent).unwrap();
        assert!(solution.accuracy.met, "{:?}", solution.accuracy);
        solution.quantities
    }
}

fn ball(radius: f64) -> Outline {
    Outline::circle(Point { r: 0.0, z: 0.0 }, radius).unwrap()
}

#[track_caller]
fn close(what: &str, b: &Bracket, published: f64, within: f64) {
    let off = (b.value - published).abs() / published.abs();
    assert!(
        b.contains(published),
        "{what}: {published} outside {b:?} (off by {off:e})"
    );
    assert!(
        off < within,
        "{what}: {} against {published}, off by {off:e}",
        b.value
    );
}

/// Uniformly magnetised sphere, Br = 1.2 T, radius 10 mm: B = 2/3 Br inside, a pure dipole m = Br V / mu0
/// outside (Jackson, Classical Electrodynamics, 5.10).
#[test]
fn magnet_ball() {
    let radius: f64 = 0.01;
    let law = MagneticLaw::Magnet {
        remanence_t: [0.0, 1.2],
        recoil_permeability: 1.0,
    };
    let mut bench = Bench::default().region("magnet", ball(radius), law);
    let inside = [Point { r: 0.0, z: 0.0 }, Point { r: 0.004, z: 0.003 }];
    let outside = [
        Point { r: 0.0, z: 0.02 },
        Point { r: 0.02, z: 0.0 },
        Point { r: 0.0, z: -0.05 },
    ];
    bench.looked_at = inside.iter().chain(&outside).copied().collect();
    let q = bench.solve();
    let points = &q.traverses[0].points;
    for p in &points[..2] {
        close("B inside", &p.b_z_t, 0.8, 2e-3);
        close("H inside", &p.h_z_a_per_m, -0.4 / MU0, 4e-3);
    }
    close("B above", &points[2].b_z_t, 0.1, 2e-3);
    close("B beside", &points[3].b_z_t, -0.05, 2e-3);
    close(
        "B far below",
        &points[4].b_z_t,
        0.8 * (0.01f64 / 0.05).powi(3),
        2e-3,
    );
    close("moment", q.dipole_moment_am2.as_ref().unwrap(), 4.0, 2e-3);
    let magnet = q.regions[0].magnet.as_ref().unwrap();
    close("mean B", &magnet.mean_b_along_t, 0.8, 2e-3);
    close(
        "permeance coefficient",
        magnet.permeance_coefficient.as_ref().unwrap(),
        2.0,
        6e-3,
    );
    // Flux through the equator: B times the circle's area.
    close(
        "flux",
        &q.search_coils[1].flux_wb,
        std::f64::consts::PI * 0.004f64.powi(2) * 0.8,
        2e-3,
    );
}

/// Permeable sphere in a uniform field: B = 3 mu / (mu + 2) B0 (Jackson, 5.11 and 5.12).
#[test]
fn permeable_ball_in_ambient_field() {
    let law = MagneticLaw::Linear {
        relative_permeability: 10.0,
    };
    let mut bench = Bench {
        ambient: 0.01,
        ..Bench::default()
    }
    .region("ball", ball(0.03), law);
    bench.looked_at = vec![Point { r: 0.0, z: 0.0 }, Point { r: 0.0, z: 0.2 }];
    let q = bench.solve();
    close("B inside", &q.traverses[0].points[0].b_z_t, 0.025, 2e-3);
    close("moment", q.dipole_moment_am2.as_ref().unwrap(), 2.025, 2e-3);
    let beyond = 0.01 + 2e-7 * 2.025 / 0.2f64.powi(3);
    close("B beyond", &q.traverses[0].points[1].b_z_t, beyond, 2e-3);
    assert!(q.energy_j.is_none());
}

/// Two thick coils: r 20..30 mm, 10 mm long, 10 mm apart, 100 turns each (Bessel-integral form, Conway, IEEE
/// Trans. Magn. 43, 2007; evaluated to ten digits by two methods).
#[test]
fn two_thick_coils() {
    let pair = || {
        Bench::default()
            .coil("lower", [0.02, 0.03], [0.0, 0.01], 100.0, 1.0)
            .moving()
            .coil("upper", [0.02, 0.03], [0.02, 0.03], 100.0, 1.0)
            .moving()
    };
    let q = pair().solve();
    close("L", &q.inductance_h[0][0], 0.0005738606972136793, 2e-3);
    close("M", &q.inductance_h[0][1], 0.00016947821600692963, 2e-3);
    close("k", &q.coupling[0][1], 0.29532988899538404, 2e-3);
    let force = -0.010593905752041305;
    close("force", q.movers[1].force_n.as_ref().unwrap(), force, 1e-2);
    close("J x B", &q.coil_sides[1].force_n, force, 1e-2);
    close("reaction", q.movers[0].force_n.as_ref().unwrap(), -force, 1e-2);
}

/// The same pair by halves: image currents the same way (B crosses the plane squarely) and the opposite way.
#[test]
fn mirrored_halves() {
    let (own, mutual, force) = (
        0.0005738606972136793,
        0.00016947821600692963,
        -0.010593905752041305,
    );
    for (currents, sign) in [(MirrorCurrents::Same, 1.0), (MirrorCurrents::Opposite, -1.0)] {
        let mut bench = Bench {
            mirror: Some((0.015, currents)),
            ..Bench::default()
        }
        .coil("upper", [0.02, 0.03], [0.02, 0.03], 100.0, 1.0)
        .moving();
        bench.looked_at = vec![Point { r: 0.01, z: 0.025 }, Point { r: 0.01, z: 0.005 }];
        let q = bench.solve();
        // Two coils in series, aiding or opposing.
        close(
            "series L",
            &q.inductance_h[0][0],
            2.0 * (own + sign * mutual),
            2e-3,
        );
        close("force", q.movers[0].force_n.as_ref().unwrap(), sign * force, 1e-2);
        let [above, below] = &q.traverses[0].points[..] else {
            unreachable!()
        };
        assert!((above.b_z_t.value - sign * below.b_z_t.value).abs() < 1e-9 * above.b_z_t.value.abs());
        assert!((above.b_r_t.value + sign * below.b_r_t.value).abs() < 1e-9 * above.b_t.value);
    }
}

/// Force and counterforce: a magnet and a steel disc in free space pull each other equally.
#[test]
fn forces_sum_to_zero() {
    let magnet = MagneticLaw::Magnet {
        remanence_t: [0.0, 1.2],
        recoil_permeability: 1.05,
    };
    let steel = MagneticLaw::Linear {
        relative_permeability: 1000.0,
    };
    let q = Bench::default()
        .region(
            "magnet",
            Outline::rect([0.0, 0.01], [0.0, 0.005], 0.0).unwrap(),
            magnet,
        )
        .moving()
        .region(
            "disc",
            Outline::rect([0.0, 0.012], [0.008, 0.012], 0.0).unwrap(),
            steel,
        )
        .moving()
        .solve();
    let [f, g] = [0, 1].map(|k| q.movers[k].force_n.unwrap());
    assert!(f.value > 1.0, "the magnet is pulled up: {f:?}");
    assert!(
        (f.value + g.value).abs() <= f.half_width() + g.half_width(),
        "{f:?} {g:?}"
    );
}
