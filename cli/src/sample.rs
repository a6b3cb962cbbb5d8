//! A small solved case for tests, made by hand: a coil around a plunger, its field from the closed form of circular
//! filaments (complete elliptic integrals by the arithmetic-geometric mean; Abramowitz & Stegun 17.6).

use std::f64::consts::PI;

use mesher::arrange::{Boundary, Part};
use mesher::mesh::CurveEdge;
use mesher::section::{PaintedRegion, SpaceEdge};
use mesher::shape::Outline;
use mesher::{Curve, Mesh, Point, Section};
use solver::problem::{
    Conductor, Drive, MagneticLaw, Mover, Problem, RegionPhysics, SearchCoil, Stray, Turns, Winding,
};
use solver::quantity::{
    CoilSideResult, MoverResult, Quantities, RegionResult, SearchCoilResult, StrayResult, TraversePoint,
    TraverseResult, WindingResult,
};
use solver::solve::{Accuracy, FieldData, Kind, Settings, Timing};
use solver::{Bound, Bracket, MU0, Solution};

use crate::case::{Case, Given, LengthUnit, RegionNote};

const MM: f64 = 1e-3;
/// Ampere-turns of the coil.
const DRIVE_A: f64 = 450.0;
/// r and z ranges of the two regions and of the meshed space, mm.
const PLUNGER: [[f64; 2]; 2] = [[0.0, 4.0], [2.0, 16.0]];
const COIL: [[f64; 2]; 2] = [[5.0, 10.0], [0.0, 20.0]];
const SPACE: [[f64; 2]; 2] = [[0.0, 24.0], [-14.0, 34.0]];

/// A number with one per cent of doubt either way.
pub fn about(value: f64) -> Bracket {
    let doubt = 0.01 * value.abs();
    Bracket {
        value,
        low: value - doubt,
        high: value + doubt,
        bound: Bound::Estimated,
    }
}

/// The case.
pub fn case() -> Case {
    let region = |name: &str, [r, z]: [[f64; 2]; 2]| PaintedRegion {
        name: name.to_owned(),
        copies: vec![Outline::rect(r.map(|x| x * MM), z.map(|x| x * MM), 0.0).unwrap()],
        mesh_size_m: None,
    };
    let physics = |name: &str, relative_permeability| RegionPhysics {
        name: name.to_owned(),
        law: MagneticLaw::Linear {
            relative_permeability,
        },
        conductivity_s_per_m: 0.0,
        density_kg_per_m3: Some(7800.0),
    };
    let [space_r, space_z] = SPACE.map(|range| range.map(|x| x * MM));
    Case {
        name: "valve".to_owned(),
        title: "Drip-line valve <\"1\" & only>".to_owned(),
        length_unit: LengthUnit {
            name: "mm".to_owned(),
            metres: MM,
        },
        temperature_c: 20.0,
        givens: vec![Given {
            name: "gap".to_owned(),
            text: "1.5 mm".to_owned(),
            si: 1.5e-3,
            unit: "m".to_owned(),
        }],
        section: Section {
            regions: vec![region("plunger", PLUNGER), region("coil", COIL)],
            edge: SpaceEdge::Wall(Outline::rect(space_r, space_z, 0.0).unwrap()),
            mirror_z_m: None,
        },
        problem: Problem {
            regions: vec![physics("plunger", 1.0), physics("coil", 1.0)],
            windings: vec![Winding {
                name: "main".to_owned(),
                regions: vec![1],
                turns: Turns::Total(900.0),
                drive: Drive::Current(0.5),
                conductor: Some(Conductor::Measured(31.0)),
                lead_resistance_ohm: 0.0,
            }],
            movers: vec![Mover {
                name: "plunger".to_owned(),
                regions: vec![0],
            }],
            mirror: None,
            ambient_b_t: 0.0,
            traverses: Vec::new(),
            search_coils: vec![SearchCoil {
                name: "pickup".to_owned(),
                at: Point::new(0.01, 0.005),
                turns: 100.0,
            }],
            stray: Some(Stray {
                distance_m: 0.3,
                limit_t: 0.5e-3,
            }),
        },
        region_notes: vec![
            RegionNote {
                material: "yoke-iron".to_owned(),
                winding: None,
            },
            RegionNote {
                material: "copper".to_owned(),
                winding: Some(0),
            },
        ],
        travel: None,
        linkage: None,
        accuracy: Settings {
            goal: 0.01,
            of: vec![Kind::Inductance, Kind::Force],
            max_triangles: 2_000_000,
            max_time: None,
            fineness: 1.0,
        },
        cautions: Vec::new(),
        resolved_toml: "title = \"valve\"\n".to_owned(),
        places: Default::default(),
    }
}

/// Its solution.
pub fn solution() -> Solution {
    static MADE: std::sync::OnceLock<Solution> = std::sync::OnceLock::new();
    MADE.get_or_init(make).clone()
}

fn make() -> Solution {
    let mesh = mesh(96, 96);
    let field = field(&mesh);
    Solution {
        field,
        mesh,
        quantities: quantities(),
        accuracy: Accuracy {
            goal: 0.01,
            reached: 0.0031,
            met: true,
            why_not: None,
        },
        newton: None,
        levels: 1,
        timing: Timing {
            mesh_s: 0.1,
            assembly_s: 0.2,
            solve_s: 0.3,
            quantities_s: 0.05,
        },
    }
}

fn inside([r, z]: [[f64; 2]; 2], p: Point) -> bool {
    let (x, y) = (p.r / MM, p.z / MM);
    r[0] < x && x < r[1] && z[0] < y && y < z[1]
}

/// A grid over the space, `columns` by `rows`; the regions' edges fall on its lines for 96 by 96.
fn mesh(columns: usize, rows: usize) -> Mesh {
    let at =
        |range: [f64; 2], k: usize, n: usize| (range[0] + (range[1] - range[0]) * k as f64 / n as f64) * MM;
    let nodes: Vec<Point> = (0..=rows)
        .flat_map(|j| (0..=columns).map(move |i| Point::new(at(SPACE[0], i, columns), at(SPACE[1], j, rows))))
        .collect();
    let (mut triangles, mut part_of) = (Vec::new(), Vec::new());
    for j in 0..rows {
        for i in 0..columns {
            let a = (j * (columns + 1) + i) as u32;
            let b = a + columns as u32 + 1;
            let middle = nodes[a as usize].middle(nodes[b as usize + 1]);
            let part = if inside(PLUNGER, middle) {
                1
            } else {
                2 * u32::from(inside(COIL, middle))
            };
            triangles.extend([[a, a + 1, b + 1], [a, b + 1, b]]);
            part_of.extend([part; 2]);
        }
    }
    let part = |region, area_m2| Part {
        region,
        copy: 0,
        area_m2,
        r_moment_m3: 0.0,
        mesh_size_m: None,
    };
    let curve_edges = curve_edges(&nodes, &triangles, &part_of);
    let parts = vec![
        part(None, 1.0),
        part(Some(0), 56.0 * MM * MM),
        part(Some(1), 100.0 * MM * MM),
    ];
    Mesh {
        nodes,
        triangles,
        part_of,
        parts,
        curve_edges,
        circle: None,
        mirror_z_m: None,
        welds: Vec::new(),
    }
}

fn curve_edges(nodes: &[Point], triangles: &[[u32; 3]], part_of: &[u32]) -> Vec<CurveEdge> {
    let mut sides = std::collections::BTreeMap::new();
    for (triangle, &part) in triangles.iter().zip(part_of) {
        for k in 0..3 {
            let (a, b) = (triangle[k], triangle[(k + 1) % 3]);
            sides
                .entry((a.min(b), a.max(b)))
                .or_insert_with(Vec::new)
                .push(part);
        }
    }
    let drawn = sides
        .into_iter()
        .filter(|(_, parts)| parts.len() == 1 || parts[0] != parts[1]);
    drawn
        .map(|((a, b), parts)| {
            let (from, to) = (nodes[a as usize], nodes[b as usize]);
            let boundary = match parts.len() {
                1 if from.r == 0.0 && to.r == 0.0 => Boundary::Axis,
                1 => Boundary::Wall,
                _ => Boundary::None,
            };
            CurveEdge {
                nodes: [a, b],
                curve: Curve::Line { from, to },
                boundary,
            }
        })
        .collect()
}

/// Whether the arithmetic and geometric means still differ.
fn differ(x: f64, y: f64) -> bool {
    x - y > 1e-15 * x
}

/// psi of a circular filament carrying 1 A at (a, height 0), at radius r and height z, Wb/rad.
fn filament(a: f64, r: f64, z: f64) -> f64 {
    if r == 0.0 {
        return 0.0;
    }
    let m = 4.0 * a * r / ((a + r).powi(2) + z * z);
    let (mut x, mut y, mut sum, mut power) = (1.0, (1.0 - m).sqrt(), 0.5 * m, 1.0);
    while differ(x, y) {
        let c = 0.5 * (x - y);
        (x, y) = (0.5 * (x + y), (x * y).sqrt());
        sum += power * c * c;
        power *= 2.0;
    }
    let k = PI / (2.0 * x);
    let e = k * (1.0 - sum);
    MU0 * (a * r).sqrt() / (PI * m.sqrt()) * ((1.0 - 0.5 * m) * k - e)
}

fn field(mesh: &Mesh) -> FieldData {
    let filaments: Vec<(f64, f64)> = (0..10)
        .flat_map(|i| (0..40).map(move |j| ((5.25 + 0.5 * i as f64) * MM, (0.25 + 0.5 * j as f64) * MM)))
        .collect();
    // A little off the grid's corners, where a filament's own field has no bound.
    let psi = |p: &Point| -> f64 {
        let each = DRIVE_A / filaments.len() as f64;
        filaments
            .iter()
            .map(|(a, z)| each * filament(*a, p.r, p.z - z + 0.07 * MM))
            .sum()
    };
    let psi: Vec<f64> = mesh.nodes.iter().map(psi).collect();
    let cell_b_t: Vec<[f64; 2]> = mesh
        .triangles
        .iter()
        .map(|corners| flux_density(mesh, &psi, *corners))
        .collect();
    let mut node_b_t = vec![[0.0; 3]; mesh.nodes.len()];
    for (corners, b) in mesh.triangles.iter().zip(&cell_b_t) {
        for &node in corners {
            let sum = &mut node_b_t[node as usize];
            *sum = [sum[0] + b[0], sum[1] + b[1], sum[2] + 1.0];
        }
    }
    FieldData {
        psi_wb_per_rad: psi,
        node_b_t: node_b_t.iter().map(|[r, z, n]| [r / n, z / n]).collect(),
        cell_h_a_per_m: cell_b_t.iter().map(|b| b.map(|b| b / MU0)).collect(),
        cell_j_a_per_m2: mesh
            .part_of
            .iter()
            .map(|&part| if part == 2 { DRIVE_A / 1e-4 } else { 0.0 })
            .collect(),
        cell_energy_j_per_m3: cell_b_t
            .iter()
            .map(|b| (b[0] * b[0] + b[1] * b[1]) / (2.0 * MU0))
            .collect(),
        cell_b_t,
    }
}

/// B of a triangle on which psi is linear in (r², z).
fn flux_density(mesh: &Mesh, psi: &[f64], corners: [u32; 3]) -> [f64; 2] {
    let p = corners.map(|node| mesh.nodes[node as usize]);
    let (s, z) = (p.map(|p| p.r * p.r), p.map(|p| p.z));
    let v = corners.map(|node| psi[node as usize]);
    let area = (s[1] - s[0]) * (z[2] - z[0]) - (s[2] - s[0]) * (z[1] - z[0]);
    let by_s = ((v[1] - v[0]) * (z[2] - z[0]) - (v[2] - v[0]) * (z[1] - z[0])) / area;
    let by_z = ((s[1] - s[0]) * (v[2] - v[0]) - (s[2] - s[0]) * (v[1] - v[0])) / area;
    [-by_z / ((p[0].r + p[1].r + p[2].r) / 3.0), 2.0 * by_s]
}

fn quantities() -> Quantities<Bracket> {
    let region = |name: &str, b: f64| RegionResult {
        name: name.to_owned(),
        volume_m3: Bracket::exact(7.037e-7),
        mass_kg: Some(Bracket::exact(0.00549)),
        b_max_t: about(1.3 * b),
        b_max_at: Point::new(0.004, 0.016),
        b_mean_t: about(b),
        saturation: None,
        magnet: None,
    };
    let point = |z: f64| TraversePoint {
        at: Point::new(0.0, z),
        region: (z > 0.0).then_some(0),
        b_r_t: Bracket::exact(0.0),
        b_z_t: about(0.02),
        b_t: about(0.02 + z),
        h_r_a_per_m: Bracket::exact(0.0),
        h_z_a_per_m: about(0.02 / MU0),
        j_a_per_m2: Bracket::exact(0.0),
        flux_wb: Bracket::exact(0.0),
    };
    Quantities {
        windings: vec![winding()],
        inductance_h: vec![vec![about(0.012337)]],
        incremental_inductance_h: None,
        coupling: vec![vec![Bracket::exact(1.0)]],
        energy_j: Some(about(0.00154)),
        coenergy_j: Some(about(0.00154)),
        dipole_moment_am2: None,
        movers: vec![MoverResult {
            name: "plunger".to_owned(),
            force_n: Some(about(-3.2)),
            touches_other_material: false,
        }],
        coil_sides: vec![CoilSideResult {
            region: "coil".to_owned(),
            force_n: about(3.2),
        }],
        regions: vec![region("plunger", 0.9), region("coil", 0.011)],
        search_coils: vec![SearchCoilResult {
            name: "pickup".to_owned(),
            flux_wb: about(6.8e-6),
            flux_linkage_wb: about(6.8e-4),
        }],
        traverses: vec![TraverseResult {
            name: "axis".to_owned(),
            points: vec![point(-0.01), point(0.02)],
        }],
        stray: Some(StrayResult {
            distance_m: 0.3,
            b_t: about(2.1e-6),
            limit_t: 0.5e-3,
            reach_of_limit_m: Some(about(0.047)),
        }),
    }
}

fn winding() -> WindingResult<Bracket> {
    WindingResult {
        name: "main".to_owned(),
        turns: Bracket::exact(900.0),
        current_a: Bracket::exact(0.5),
        ampere_turns_a: Bracket::exact(450.0),
        resistance_ohm: Some(Bracket::exact(31.0)),
        flux_linkage_wb: about(0.0061685),
        magnet_linkage_wb: None,
        voltage_v: Some(Bracket::exact(15.5)),
        copper_loss_w: Some(Bracket::exact(7.75)),
        supply_power_w: Some(Bracket::exact(7.75)),
        time_constant_s: Some(about(0.000398)),
        current_density_a_per_m2: Some(Bracket::exact(1.0186e7)),
        fill_factor: Some(Bracket::exact(0.554)),
        conductor_fill_factor: Some(Bracket::exact(0.4418)),
        wire_length_m: Some(Bracket::exact(42.4)),
        copper_mass_kg: Some(Bracket::exact(0.0185)),
        mean_turn_length_m: Bracket::exact(0.047124),
        section_m2: Bracket::exact(1e-4),
    }
}
