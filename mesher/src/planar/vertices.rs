//! The vertices of the graph, found again by place: no two are nearer than the weld tolerance.

use std::collections::HashMap;

use super::Tolerance;
use crate::curve::Point;

pub(super) struct Vertices {
    pub points: Vec<Point>,
    tolerance: Tolerance,
    /// Vertices by cell of a grid as wide as the weld tolerance. Only looked up by key, so its order is no input.
    cells: HashMap<(i64, i64), Vec<u32>>,
}

impl Vertices {
    pub fn new(tolerance: Tolerance) -> Self {
        Self {
            points: Vec::new(),
            tolerance,
            cells: HashMap::new(),
        }
    }

    pub fn point(&self, vertex: u32) -> Point {
        self.points[vertex as usize]
    }

    /// The vertex at a point: the nearest one within the weld tolerance, else a new one there (on the axis or the
    /// mirror, where it is that near to them).
    pub fn place(&mut self, point: Point) -> u32 {
        let point = self.snapped(point);
        if let Some(vertex) = self.near(point) {
            return vertex;
        }
        let vertex = self.points.len() as u32;
        self.points.push(point);
        self.cells.entry(self.cell(point)).or_default().push(vertex);
        vertex
    }

    fn snapped(&self, point: Point) -> Point {
        let weld = self.tolerance.weld_m;
        let r = if point.r <= weld { 0.0 } else { point.r };
        let z = match self.tolerance.mirror_z_m {
            Some(mirror) if (point.z - mirror).abs() <= weld => mirror,
            _ => point.z,
        };
        Point::new(r, z)
    }

    /// The nearest vertex within the weld tolerance; the earliest of equally near ones.
    fn near(&self, point: Point) -> Option<u32> {
        let (column, row) = self.cell(point);
        let mut best = None;
        let mut least = self.tolerance.weld_m;
        for dc in -1..=1 {
            for dr in -1..=1 {
                for &vertex in self.cells.get(&(column + dc, row + dr)).into_iter().flatten() {
                    let distance = self.point(vertex).distance(point);
                    let nearer = match best {
                        None => distance <= least,
                        Some(found) => distance < least || (distance == least && vertex < found),
                    };
                    if nearer {
                        (best, least) = (Some(vertex), distance);
                    }
                }
            }
        }
        best
    }

    fn cell(&self, point: Point) -> (i64, i64) {
        let width = self.tolerance.weld_m;
        ((point.r / width).floor() as i64, (point.z / width).floor() as i64)
    }
}
