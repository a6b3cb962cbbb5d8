//! Saturable material: the saturating sphere against its closed form, Newton's convergence where it is hard.

use coilwright_solver as solver;
use mesher::section::{PaintedRegion, SpaceEdge};
use mesher::shape::Outline;
use mesher::{Mesh, MeshOptions, Point, Section};
use solver::law::Laws;
use solver::newton::{Course, Energy, Limits};
use solver::problem::{Drive, MagneticLaw, Mover, Problem, RegionPhysics, Traverse, Turns, Winding};
use solver::reluctivity::{Curve, Demagnetisation, Isotropic, Saturation};
use solver::solve::{Kind, Progress, Settings, Solution, Stage};
use solver::space::Space;
use solver::{Bracket, MU0};

struct Silent;

impl Progress for Silent {
    fn stage(&self, _: Stage, _: usize, _: usize) {}
}

fn steel() -> MagneticLaw {
    MagneticLaw::Saturable(Isotropic::Saturation(Saturation {
        polarization_t: 2.0,
        half_field_a_per_m: 400.0,
    }))
}

#[derive(Default)]
struct Bench {
    painted: Vec<PaintedRegion>,
    physics: Vec<RegionPhysics>,
    windings: Vec<Winding>,
    movers: Vec<Mover>,
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
        let physics = RegionPhysics {
            name: name.into(),
            law,
            conductivity_s_per_m: 0.0,
            density_kg_per_m3: None,
        };
        self.physics.push(physics);
        self
    }

    fn rect(self, name: &str, r: [f64; 2], z: [f64; 2], law: MagneticLaw) -> Self {
        self.region(name, Outline::rect(r, z, 0.0).unwrap(), law)
    }

    fn coil(self, r: [f64; 2], z: [f64; 2], ampere_turns: f64) -> Self {
        let air = MagneticLaw::Linear {
            relative_permeability: 1.0,
        };
        let mut bench = self.rect("coil", r, z, air);
        bench.windings.push(Winding {
            name: "coil".into(),
            regions: vec![bench.painted.len() - 1],
            turns: Turns::Total(1000.0),
            drive: Drive::Current(ampere_turns / 1000.0),
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

    fn parts(self) -> (Section, Problem) {
        let section = Section {
            regions: self.painted,
            edge: SpaceEdge::HalfCircle,
            mirror_z_m: None,
        };
        let problem = Problem {
            regions: self.physics,
            windings: self.windings,
            movers: self.movers,
            mirror: None,
            ambient_b_t: self.ambient,
            traverses: vec![Traverse {
                name: "points".into(),
                points: self.looked_at,
            }],
            search_coils: Vec::new(),
            stray: None,
        };
        (section, problem)
    }

    fn solve(self) -> Solution {
        let (section, problem) = self.parts();
        let settings = Settings {
            goal: 0.02,
            of: vec![Kind::Inductance, Kind::Force],
            max_triangles: 2_000_000,
            max_time: None,
            fineness: 1.0,
        };
        solver::solve(&section, &problem, &settings, &Silent).unwrap()
    }

    /// Newton from zero on the first mesh.
    fn course(self) -> Course {
        let (section, problem) = self.parts();
        let mesh = Mesh::of(&section, &MeshOptions::default()).unwrap();
        let space = Space::new(&mesh, None).unwrap();
        let laws = Laws::new(&mesh, &problem);
        let laid = solver::winding::lay(&mesh, &problem).unwrap();
        let mut load = vec![0.0; mesh.nodes.len()];
        for l in &laid {
            let density: Vec<f64> = l
                .turn_density(&mesh, &space)
                .iter()
                .map(|d| d * l.current_a)
                .collect();
            let part = solver::magnetostatic::current_load(&space, &density);
            load.iter_mut().zip(part).for_each(|(x, y)| *x += y);
        }
        let energy = Energy {
            mesh: &mesh,
            space: &space,
            laws: &laws,
            load: &load,
            ambient_b_t: problem.ambient_b_t,
        };
        energy.minimise(None, &Limits::default()).unwrap().course
    }
}

/// A closed pot around a coil: no gap anywhere.
fn closed_pot(ampere_turns: f64, law: &MagneticLaw) -> Bench {
    Bench::default()
        .rect("pot", [0.0, 0.03], [0.0, 0.04], law.clone())
        .coil([0.01, 0.025], [0.006, 0.034], ampere_turns)
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

/// A sphere of saturable material in a uniform field is magnetised uniformly: H + M(H) / 3 = B0 / mu0 (Osborn,
/// Phys. Rev. 67, 1945). Solved here by bisection.
#[test]
fn saturating_sphere_over_the_whole_range() {
    for b0 in [1e-4, 0.05, 0.2, 0.5, 1.0, 2.0, 5.0] {
        let law = Saturation {
            polarization_t: 2.0,
            half_field_a_per_m: 400.0,
        };
        let (mut low, mut high) = (0.0, b0 / MU0);
        for _ in 0..200 {
            let h = 0.5 * (low + high);
            let m = law.polarization_t / MU0 * h / (h + law.half_field_a_per_m);
            if h + m / 3.0 > b0 / MU0 { high = h } else { low = h }
        }
        let m = law.polarization_t / MU0 * low / (low + law.half_field_a_per_m);
        let (b_in, moment) = (
            MU0 * (low + m),
            m * 4.0 / 3.0 * std::f64::consts::PI * 0.02f64.powi(3),
        );
        let mut bench = Bench {
            ambient: b0,
            ..Bench::default()
        }
        .region(
            "ball",
            Outline::circle(Point { r: 0.0, z: 0.0 }, 0.02).unwrap(),
            steel(),
        );
        bench.looked_at = vec![Point { r: 0.0, z: 0.0 }, Point { r: 0.01, z: 0.005 }];
        let solution = bench.solve();
        let newton = solution.newton.as_ref().unwrap();
        assert!(newton.converged && newton.coarse_steps <= 10, "{b0}: {newton:?}");
        for p in &solution.quantities.traverses[0].points {
            close("B inside", &p.b_z_t, b_in, 3e-3);
        }
        close(
            "moment",
            solution.quantities.dipole_moment_am2.as_ref().unwrap(),
            moment,
            3e-3,
        );
    }
}

/// Closed cores, deep saturation (ten times the knee's field and far more), almost no field, a curve with a kink.
#[test]
fn newton_settles_where_it_is_hard() {
    let kinked = MagneticLaw::Saturable(Isotropic::Curve(
        Curve::new(&[[0.0, 0.0], [100.0, 1.5], [100_000.0, 1.5 + 1.2 * MU0 * 1e5]]).unwrap(),
    ));
    for (name, law) in [("saturation", steel()), ("kinked", kinked)] {
        for ampere_turns in [1e-6, 1e-2, 10.0, 300.0, 3e3, 3e4, 1e6] {
            let course = closed_pot(ampere_turns, &law).course();
            assert!(course.converged, "{name} at {ampere_turns} A: {course:?}");
            // A kink of 1 : 10,000 in a core without a gap takes the longest.
            assert!(course.steps() <= 50, "{name} at {ampere_turns} A: {course:?}");
        }
    }
}

/// A magnet drives steel; with a demagnetisation curve it works below its recoil line once past the knee.
#[test]
fn a_magnet_drives_steel() {
    let curve = Demagnetisation::new(&[
        [0.0, 1.2],
        [-300e3, 0.81],
        [-500e3, 0.55],
        [-560e3, 0.4],
        [-600e3, -0.1],
    ])
    .unwrap();
    let magnet = MagneticLaw::DemagnetisedMagnet {
        curve,
        direction: [0.0, 1.0],
        recoil_permeability: 1.05,
    };
    let solution = Bench::default()
        .rect("magnet", [0.0, 0.01], [0.0, 0.006], magnet)
        .rect("yoke", [0.0, 0.02], [-0.004, 0.0], steel())
        .rect("plate", [0.0, 0.02], [0.008, 0.012], steel())
        .moving()
        .solve();
    let newton = solution.newton.as_ref().unwrap();
    assert!(newton.converged && newton.coarse_steps <= 12, "{newton:?}");
    let force = solution.quantities.movers[0].force_n.unwrap();
    assert!(force.high < 0.0, "the plate is pulled down: {force:?}");
    let magnet = solution.quantities.regions[0].magnet.as_ref().unwrap();
    assert!(magnet.lowest_b_along_t.value < magnet.mean_b_along_t.value);
    assert!(magnet.knee_t.is_some());
}

/// At the end each step squares the error: the residual's order is 2.
#[test]
fn newton_converges_quadratically() {
    let course = closed_pot(2000.0, &steel()).course();
    let r: Vec<f64> = course.residuals.iter().copied().filter(|r| *r > 1e-11).collect();
    let n = r.len();
    let order = (r[n - 1] / r[n - 2]).ln() / (r[n - 2] / r[n - 3]).ln();
    assert!(order > 1.7, "{order}: {:?}", course.residuals);
}

/// Linkage and inductances at the operating point: L_app i is the linkage, L_inc its slope by differences.
#[test]
fn inductances_belong_to_the_linkage() {
    let at = |ampere_turns: f64| closed_pot(ampere_turns, &steel()).solve().quantities;
    let (below, here, above) = (at(395.0), at(400.0), at(405.0));
    let linkage = here.windings[0].flux_linkage_wb.value;
    assert!((here.inductance_h[0][0].value * 0.4 - linkage).abs() < 1e-7 * linkage);
    let slope = (above.windings[0].flux_linkage_wb.value - below.windings[0].flux_linkage_wb.value) / 0.01;
    let incremental = here.incremental_inductance_h.as_ref().unwrap()[0][0];
    // A central difference over 2.5 % of the current leaves (1.25 %)² of the slope's own curvature.
    assert!(
        (slope - incremental.value).abs() < 1e-3 * incremental.value,
        "{slope} {incremental:?}"
    );
    assert!(incremental.value < here.inductance_h[0][0].value);
}
