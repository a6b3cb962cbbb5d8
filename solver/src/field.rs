//! B at a point, never from one element: a fit through the nodes around it, the exterior's series beyond the
//! outer circle, images below a mirror. And B recovered at every node for pictures and statistics.

use mesher::Point;
use rayon::prelude::*;

use crate::fit::{Reading, Sample, curl_free, near_axis, near_axis_of_any_kind, quadratic};
use crate::operating::Operating;
use crate::problem::MirrorCurrents;

/// Nodes a fit at a point uses at least, where the part has them.
const FEWEST: usize = 30;

/// Nodes a fit uses at most, and looks at at most.
const MOST: usize = 160;

/// Share of the way to the nearest other part from which nodes are taken: there the field is smooth, and the more
/// nodes a fit averages over, the less the single node's error shows.
const CLEARANCE_SHARE: f64 = 0.75;

/// Highest order of the polynomials by the number of nodes off the axis: about three nodes for each unknown.
fn order_for(nodes: usize) -> usize {
    match nodes {
        ..24 => 3,
        24..40 => 4,
        40..70 => 5,
        _ => 6,
    }
}

/// What is read at a point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PointField {
    /// psi, Wb/rad.
    pub psi: f64,
    /// (B_r, B_z), T.
    pub b: [f64; 2],
    /// The triangle whose material is there (of the image, below a mirror); `None` outside the mesh.
    pub triangle: Option<usize>,
    /// Sign of currents there against the described half: -1 below a mirror with opposite currents.
    pub current_sign: f64,
}

/// Reads the field at any point with r >= 0.
pub fn read(op: &Operating<'_>, at: Point) -> PointField {
    let Some((mirror, plane)) = op
        .problem
        .mirror
        .zip(op.mesh.mirror_z_m)
        .filter(|(_, z)| at.z < *z)
    else {
        return described(op, at);
    };
    let image = described(
        op,
        Point {
            r: at.r,
            z: 2.0 * plane - at.z,
        },
    );
    let [b_r, b_z] = image.b;
    match mirror {
        MirrorCurrents::Same => PointField {
            b: [-b_r, b_z],
            ..image
        },
        MirrorCurrents::Opposite => PointField {
            psi: -image.psi,
            b: [b_r, -b_z],
            current_sign: -1.0,
            ..image
        },
    }
}

fn described(op: &Operating<'_>, at: Point) -> PointField {
    let inside = op.locator.triangle_at(op.mesh, at).map(|t| t as usize);
    let reading = match inside {
        Some(triangle) => fitted(op, triangle, at),
        None => beyond(op, at),
    };
    PointField {
        psi: reading.psi,
        b: reading.b,
        triangle: inside,
        current_sign: 1.0,
    }
}

/// Beyond the outer circle the series; beyond a wall nothing.
fn beyond(op: &Operating<'_>, at: Point) -> Reading {
    let Some(series) = &op.series else {
        return Reading {
            psi: 0.0,
            b: [0.0; 2],
        };
    };
    let [b_r, b_z] = series.b(at);
    let b0 = op.problem.ambient_b_t;
    Reading {
        psi: series.psi(at) + 0.5 * b0 * at.r * at.r,
        b: [b_r, b_z + b0],
    }
}

fn fitted(op: &Operating<'_>, triangle: usize, at: Point) -> Reading {
    let samples = samples_around(op, triangle, at);
    let size = samples.iter().map(|(d, _)| *d).fold(0.0, f64::max);
    let s0 = at.r * at.r;
    let by_axis = samples.iter().any(|(_, p)| p.s == 0.0) || at.r < size;
    let samples: Vec<Sample> = samples.into_iter().map(|(_, sample)| sample).collect();
    let fit = if op.law_of(triangle).is_curved() {
        if by_axis {
            near_axis_of_any_kind(&samples, s0, at.z)
        } else {
            quadratic(&samples, s0, at.z)
        }
    } else {
        smooth(op, triangle, samples, at, by_axis)
    };
    fit.unwrap_or_else(|| single_element(op, triangle, at))
}

/// The fit where permeability is constant. A uniform current density adds -mu J r³ / 3 to a curl-free psi: taken off
/// before the fit, put back after.
fn smooth(
    op: &Operating<'_>,
    triangle: usize,
    mut samples: Vec<Sample>,
    at: Point,
    by_axis: bool,
) -> Option<Reading> {
    let bend = op.cell_j_a_per_m2[triangle] / op.materials.nu[triangle] / 3.0;
    samples.iter_mut().for_each(|p| p.psi += bend * p.s * p.s.sqrt());
    let s0 = at.r * at.r;
    let order = order_for(samples.iter().filter(|p| p.s > 0.0).count());
    let Reading { psi, b: [b_r, b_z] } = if by_axis {
        near_axis(&samples, s0, at.z, order + 2)
    } else {
        curl_free(&samples, s0, at.z, order)
    }?;
    Some(Reading {
        psi: psi - bend * s0 * at.r,
        b: [b_r, b_z - 3.0 * bend * at.r],
    })
}

/// The last resort where a part has too few nodes for a fit.
fn single_element(op: &Operating<'_>, triangle: usize, at: Point) -> Reading {
    let [psi_s, psi_z] = op.gradient[triangle];
    let corner = op.space.triangles[triangle][0] as usize;
    let psi =
        op.psi[corner] + psi_s * (at.r * at.r - op.space.s[corner]) + psi_z * (at.z - op.space.z[corner]);
    Reading {
        psi,
        b: [if at.r > 0.0 { -psi_z / at.r } else { 0.0 }, 2.0 * psi_s],
    }
}

/// The nodes of the same part nearest to the point, with their distances; images in a mirror and, at the outer circle,
/// points beyond it (read from the series) included, so that no patch is one-sided there. Ties
/// are broken by node number, so that the choice never depends on the order of a search.
fn samples_around(op: &Operating<'_>, triangle: usize, at: Point) -> Vec<(f64, Sample)> {
    let nodes = nodes_around(op, triangle, at);
    let mut near: Vec<(f64, u32, Sample)> = Vec::with_capacity(3 * nodes.len());
    let reaches_circle = nodes.iter().any(|&n| op.on_circle[n as usize]);
    for n in nodes {
        let (node, psi) = (op.mesh.nodes[n as usize], op.psi[n as usize]);
        let mut add = |at_node: Point, s: f64, psi: f64| {
            let distance = (at_node.r - at.r).hypot(at_node.z - at.z);
            near.push((distance, n, Sample { s, z: at_node.z, psi }));
        };
        let s = op.space.s[n as usize];
        add(node, s, psi);
        if let Some((mirror, plane)) = op
            .problem
            .mirror
            .zip(op.mesh.mirror_z_m)
            .filter(|(_, z)| node.z != *z)
        {
            let image = Point {
                r: node.r,
                z: 2.0 * plane - node.z,
            };
            add(image, s, if mirror == MirrorCurrents::Same { psi } else { -psi });
        }
        if reaches_circle
            && !op.on_circle[n as usize]
            && let Some(outside) = op.reflected_in_circle(node)
        {
            add(outside, outside.r * outside.r, beyond(op, outside).psi);
        }
    }
    near.sort_by(|x, y| x.0.total_cmp(&y.0).then(x.1.cmp(&y.1)));
    // A fit of low order, as saturable material needs, gains nothing from farther nodes.
    let clear = if op.law_of(triangle).is_curved() {
        0.0
    } else {
        near.iter()
            .filter(|(_, n, _)| op.on_interface[*n as usize])
            .map(|(distance, ..)| CLEARANCE_SHARE * distance)
            .fold(f64::INFINITY, f64::min)
    };
    // Nodes on the axis carry no information beyond psi = 0, so they do not count.
    let mut off_axis = 0;
    near.into_iter()
        .take_while(|(distance, _, p)| {
            off_axis += usize::from(p.s > 0.0);
            off_axis <= FEWEST || (*distance <= clear && off_axis <= MOST)
        })
        .map(|(distance, _, sample)| (distance, sample))
        .collect()
}

/// Nodes of the same part in layers around a triangle: at least two layers, then until the next layer is farther than
/// is clear of other parts or there are enough.
fn nodes_around(op: &Operating<'_>, triangle: usize, at: Point) -> Vec<u32> {
    let mut nodes: Vec<u32> = op.mesh.triangles[triangle].to_vec();
    let (part, mut layer_start) = (op.mesh.part_of[triangle], 0);
    let distance = |n: u32| {
        let p = op.mesh.nodes[n as usize];
        (p.r - at.r).hypot(p.z - at.z)
    };
    for layer in 0.. {
        let layer_end = nodes.len();
        for k in layer_start..layer_end {
            for &t in op.space.fan(nodes[k] as usize) {
                if op.mesh.part_of[t as usize] == part {
                    for n in op.mesh.triangles[t as usize] {
                        if !nodes.contains(&n) {
                            nodes.push(n);
                        }
                    }
                }
            }
        }
        let off_axis = nodes.iter().filter(|&&n| op.space.s[n as usize] > 0.0).count();
        let nearest_of = |list: &[u32]| list.iter().map(|&n| distance(n)).fold(f64::INFINITY, f64::min);
        let foreign: Vec<u32> = nodes
            .iter()
            .copied()
            .filter(|&n| op.on_interface[n as usize])
            .collect();
        let enough = layer >= 1
            && off_axis >= FEWEST
            && (off_axis >= MOST || nearest_of(&nodes[layer_end..]) > CLEARANCE_SHARE * nearest_of(&foreign));
        if nodes.len() == layer_end || enough {
            return nodes;
        }
        layer_start = layer_end;
    }
    nodes
}

/// Recovered B at each corner of each part's own nodes: nodes inside a part by a fit over their neighbours,
/// nodes where parts meet by one-sided averages.
pub struct Recovered {
    /// (B_r, B_z) at nodes all of whose triangles are of one part; `None` elsewhere.
    inner: Vec<Option<[f64; 2]>>,
}

impl Recovered {
    /// Recovers all nodes.
    pub fn new(op: &Operating<'_>) -> Self {
        Self {
            inner: (0..op.mesh.nodes.len())
                .into_par_iter()
                .map(|n| inner(op, n))
                .collect(),
        }
    }

    /// (B_r, B_z) at a node as seen from a part that has triangles around it, T.
    pub fn seen_from(&self, op: &Operating<'_>, node: usize, part: u32) -> [f64; 2] {
        self.inner[node].unwrap_or_else(|| average(op, node, |p| p == part))
    }

    /// (B_r, B_z) at a node, averaged over the parts that meet there, T.
    pub fn at_node(&self, op: &Operating<'_>, node: usize) -> [f64; 2] {
        self.inner[node].unwrap_or_else(|| average(op, node, |_| true))
    }
}

/// Mean of the elements around a node, weighted by volume; B_r = 0 on the axis.
fn average(op: &Operating<'_>, node: usize, of: impl Fn(u32) -> bool) -> [f64; 2] {
    let (mut sum, mut weight) = ([0.0; 2], 0.0);
    for &t in op.space.fan(node) {
        if of(op.mesh.part_of[t as usize]) {
            let (w, b) = (op.space.elements[t as usize].area, op.cell_b_t[t as usize]);
            sum = [sum[0] + w * b[0], sum[1] + w * b[1]];
            weight += w;
        }
    }
    let on_axis = op.space.s[node] == 0.0;
    [
        if on_axis || weight == 0.0 {
            0.0
        } else {
            sum[0] / weight
        },
        if weight == 0.0 { 0.0 } else { sum[1] / weight },
    ]
}

fn inner(op: &Operating<'_>, node: usize) -> Option<[f64; 2]> {
    let fan = op.space.fan(node);
    let part = op.mesh.part_of[*fan.first()? as usize];
    let on_axis = op.space.s[node] == 0.0;
    if fan.iter().any(|&t| op.mesh.part_of[t as usize] != part) || op.on_boundary[node] {
        return None;
    }
    let mut ring = [node as u32; 24];
    let mut count = 1;
    for n in fan.iter().flat_map(|&t| op.mesh.triangles[t as usize]) {
        if count < ring.len() && !ring[..count].contains(&n) {
            ring[count] = n;
            count += 1;
        }
    }
    let mut samples = [Sample {
        s: 0.0,
        z: 0.0,
        psi: 0.0,
    }; 24];
    for (sample, &n) in samples.iter_mut().zip(&ring[..count]) {
        *sample = Sample {
            s: op.space.s[n as usize],
            z: op.space.z[n as usize],
            psi: op.psi[n as usize],
        };
    }
    let (s0, z0) = (op.space.s[node], op.space.z[node]);
    if on_axis {
        return near_axis(&samples[..count], 0.0, z0, 2).map(|r| r.b);
    }
    quadratic(&samples[..count], s0, z0).map(|reading| reading.b)
}
