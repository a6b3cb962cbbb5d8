//! Delaunay refinement until sizes, gaps and angles are as wanted (after Ruppert, J. Algorithms 18, 1995, and
//! Chew, 9th Symp. Comput. Geom., 1993: circumcentres, but never beyond or too near to a segment, which is split
//! instead; off-centres after Üngör, LATIN 2004).

mod faces;
mod segments;
mod sizes;

use std::cmp::Reverse;
use std::collections::{BinaryHeap, VecDeque};

use crate::arrange::Arrangement;
use crate::curve::Point;
use crate::error::MeshError;
use crate::size::SizePlan;
use crate::triangulate::{EdgeTicket, Face, Spoke, Triangulation};

/// For the sake of angles no edge is made shorter than this share of the wanted size: with sizes bounded from
/// below this is what ends the refinement for certain.
const SHORTEST: f64 = 0.03;

/// Worst first: triangles are queued by the powers of two of their excess size.
const SIZE_CLASSES: usize = 16;

/// Refines until nothing is left to be done.
///
/// Errors: more than `max_triangles`, or a drawing that cannot be followed in double precision.
pub(crate) fn refine(
    drawing: &Arrangement,
    plan: &SizePlan,
    unit_m: f64,
    triangulation: Triangulation,
    max_triangles: usize,
) -> Result<Triangulation, MeshError> {
    let mut refiner = Refiner::new(drawing, plan, unit_m, triangulation, max_triangles);
    refiner.relax_all();
    refiner.follow_drawing()?;
    refiner.fill()?;
    Ok(refiner.mesh)
}

/// What is wrong with a triangle, worst class first.
#[derive(Clone, Copy, PartialEq)]
enum Fault {
    Size(usize),
    Shape,
}

struct Refiner<'a> {
    drawing: &'a Arrangement,
    plan: &'a SizePlan,
    unit_m: f64,
    mesh: Triangulation,
    max_triangles: usize,
    /// Whether faces are refined already.
    filling: bool,
    /// Segments that may be too long or encroached.
    segments: VecDeque<u32>,
    /// Faces that may span a gap.
    gaps: VecDeque<Face>,
    /// Faces too large, by excess; then faces of bad shape.
    large: Vec<Vec<Face>>,
    shape: Vec<Face>,
    /// Vertices whose neighbours may have too large sizes, smallest size first (its bits, and the vertex).
    lowered: BinaryHeap<Reverse<(u64, u32)>>,
    // Buffers, kept to spare allocations: spokes of a new vertex; neighbours of a lowered vertex; segments
    // encroached upon, and edges on the way to them.
    spokes: Vec<Spoke>,
    relaxed: Vec<u32>,
    found: Vec<u32>,
    tickets: Vec<EdgeTicket>,
    /// Squared ratio of circumradius to shortest edge at [`faces::ANGLE_DEG`].
    largest_ratio2: f64,
    /// Squared height of an off-centre above the shortest edge, over its squared length.
    off_centre2: f64,
}

impl<'a> Refiner<'a> {
    fn new(
        drawing: &'a Arrangement,
        plan: &'a SizePlan,
        unit_m: f64,
        mesh: Triangulation,
        max_triangles: usize,
    ) -> Self {
        let ratio = 0.5 / faces::ANGLE_DEG.to_radians().sin();
        let height = 0.5 / (0.5 * faces::OFF_CENTRE_DEG.to_radians()).tan();
        Self {
            drawing,
            plan,
            unit_m,
            mesh,
            max_triangles,
            filling: false,
            segments: VecDeque::new(),
            gaps: VecDeque::new(),
            large: vec![Vec::new(); SIZE_CLASSES],
            shape: Vec::new(),
            lowered: BinaryHeap::new(),
            spokes: Vec::new(),
            relaxed: Vec::new(),
            found: Vec::new(),
            tickets: Vec::new(),
            largest_ratio2: ratio * ratio,
            off_centre2: height * height,
        }
    }

    /// First the drawing alone: segments as short as sizes, curvature and gaps ask, before the faces are filled.
    fn follow_drawing(&mut self) -> Result<(), MeshError> {
        self.segments.clear();
        self.segments.extend(0..self.mesh.segments.len() as u32);
        self.gaps.extend(self.mesh.faces());
        while self.treat_drawing()? {}
        Ok(())
    }

    fn fill(&mut self) -> Result<(), MeshError> {
        self.filling = true;
        let faces: Vec<Face> = self.mesh.faces().collect();
        for face in faces {
            self.queue_face(face);
        }
        loop {
            if self.treat_drawing()? {
                continue;
            }
            let Some(face) = self.next_face() else {
                return Ok(());
            };
            self.treat_face(face)?;
        }
    }

    /// One step on segments and gaps; false when there is none to do.
    fn treat_drawing(&mut self) -> Result<bool, MeshError> {
        if 2 * self.mesh.vertex_count() > self.max_triangles {
            return Err(self.too_many());
        }
        if let Some(segment) = self.segments.pop_front() {
            self.treat_segment(segment)?;
        } else if let Some(face) = self.gaps.pop_front() {
            self.measure_gaps(face);
        } else {
            return Ok(false);
        }
        Ok(true)
    }

    fn too_many(&self) -> MeshError {
        let smallest = (4..self.mesh.vertex_count() as u32)
            .map(|v| self.mesh.site(v))
            .min_by(|a, b| a.size.total_cmp(&b.size));
        MeshError::TooManyTriangles {
            limit: self.max_triangles,
            smallest_m: smallest.map_or(f64::NAN, |site| site.size),
            at: smallest.map_or(Point::default(), |site| site.at),
        }
    }

    fn next_face(&mut self) -> Option<Face> {
        (0..SIZE_CLASSES)
            .rev()
            .find_map(|class| self.large[class].pop())
            .or_else(|| self.shape.pop())
    }

    fn queue_face(&mut self, face: Face) {
        if self.filling {
            self.queue(face, self.fault(face));
        }
    }

    fn queue(&mut self, face: Face, fault: Option<Fault>) {
        match fault {
            Some(Fault::Size(class)) => self.large[class].push(face),
            Some(Fault::Shape) => self.shape.push(face),
            None => {}
        }
    }

    fn queue_star(&mut self, vertex: u32) {
        if !self.filling {
            return;
        }
        let faces: Vec<Face> = self.mesh.star(vertex).collect();
        for face in faces {
            self.queue_face(face);
        }
    }
}
