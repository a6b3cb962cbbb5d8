//! Who is next to whom: edges, neighbours and fans of a triangle mesh. Knows node numbers only, no positions.

/// "No triangle there": the other side of a boundary edge.
pub const NO_TRIANGLE: u32 = u32::MAX;

/// The edges of a mesh, each once. Local edge `i` of a triangle faces its corner `i`, i.e. it runs from corner
/// `i + 1` to corner `i + 2` (modulo 3).
#[derive(Clone, Debug)]
pub struct Edges {
    /// The two nodes of each edge, smaller number first; sorted by that smaller number.
    pub nodes: Vec<[u32; 2]>,
    /// Triangles on both sides; the second is [`NO_TRIANGLE`] on the boundary of the mesh.
    pub triangles: Vec<[u32; 2]>,
    /// Edge number of each local edge of each triangle (length = number of triangles).
    pub of_triangle: Vec<[u32; 3]>,
    /// Where the edges whose smaller node is `n` begin in `nodes` (length = nodes + 1).
    start: Vec<u32>,
}

/// One side of an edge, waiting for its partner.
#[derive(Clone, Copy, Default)]
struct HalfEdge {
    far: u32,
    triangle: u32,
    local: u8,
}

impl Edges {
    /// Numbers the edges of `triangles` over `node_count` nodes. Linear time; an edge with more than two
    /// triangles keeps the first two (`Mesh::check` reports it).
    pub fn of(triangles: &[[u32; 3]], node_count: usize) -> Self {
        let (begin, halves) = half_edges_by_smaller_node(triangles, node_count);
        let mut nodes: Vec<[u32; 2]> = Vec::with_capacity(halves.len() / 2 + 1);
        let mut sides: Vec<[u32; 2]> = Vec::with_capacity(halves.len() / 2 + 1);
        let mut of_triangle = vec![[0; 3]; triangles.len()];
        let mut start = Vec::with_capacity(node_count + 1);
        for near in 0..node_count {
            let first = nodes.len();
            start.push(first as u32);
            for half in &halves[begin[near] as usize..begin[near + 1] as usize] {
                let known = nodes[first..].iter().position(|edge| edge[1] == half.far);
                let edge = match known {
                    Some(offset) => {
                        let edge = first + offset;
                        if sides[edge][1] == NO_TRIANGLE {
                            sides[edge][1] = half.triangle;
                        }
                        edge
                    }
                    None => {
                        nodes.push([near as u32, half.far]);
                        sides.push([half.triangle, NO_TRIANGLE]);
                        nodes.len() - 1
                    }
                };
                of_triangle[half.triangle as usize][half.local as usize] = edge as u32;
            }
        }
        start.push(nodes.len() as u32);
        Self {
            nodes,
            triangles: sides,
            of_triangle,
            start,
        }
    }

    /// Number of the edge between two nodes, if there is one.
    pub fn between(&self, a: u32, b: u32) -> Option<u32> {
        let (near, far) = (a.min(b), a.max(b));
        let first = *self.start.get(near as usize)?;
        let last = *self.start.get(near as usize + 1)?;
        (first..last).find(|&edge| self.nodes[edge as usize][1] == far)
    }

    /// The triangle across each local edge of each triangle, [`NO_TRIANGLE`] at the boundary.
    pub fn neighbours(&self) -> Vec<[u32; 3]> {
        let across = |triangle: usize, edge: u32| {
            let [a, b] = self.triangles[edge as usize];
            if a as usize == triangle { b } else { a }
        };
        self.of_triangle
            .iter()
            .enumerate()
            .map(|(t, edges)| edges.map(|edge| across(t, edge)))
            .collect()
    }
}

/// Counting sort of all directed edges by their smaller node.
fn half_edges_by_smaller_node(triangles: &[[u32; 3]], node_count: usize) -> (Vec<u32>, Vec<HalfEdge>) {
    let mut begin = vec![0_u32; node_count + 1];
    for corners in triangles {
        for local in 0..3 {
            let (a, b) = (corners[(local + 1) % 3], corners[(local + 2) % 3]);
            begin[a.min(b) as usize + 1] += 1;
        }
    }
    for node in 0..node_count {
        begin[node + 1] += begin[node];
    }
    let mut fill = begin.clone();
    let mut halves = vec![HalfEdge::default(); triangles.len() * 3];
    for (triangle, corners) in triangles.iter().enumerate() {
        for local in 0..3 {
            let (a, b) = (corners[(local + 1) % 3], corners[(local + 2) % 3]);
            let slot = &mut fill[a.min(b) as usize];
            halves[*slot as usize] = HalfEdge {
                far: a.max(b),
                triangle: triangle as u32,
                local: local as u8,
            };
            *slot += 1;
        }
    }
    (begin, halves)
}

/// The triangles around each node, in ascending order of their numbers.
#[derive(Clone, Debug)]
pub struct Fans {
    start: Vec<u32>,
    triangles: Vec<u32>,
}

impl Fans {
    /// Collects the fans of `triangles` over `node_count` nodes.
    pub fn of(triangles: &[[u32; 3]], node_count: usize) -> Self {
        let mut start = vec![0_u32; node_count + 1];
        for &node in triangles.iter().flatten() {
            start[node as usize + 1] += 1;
        }
        for node in 0..node_count {
            start[node + 1] += start[node];
        }
        let mut fill = start.clone();
        let mut list = vec![0; triangles.len() * 3];
        for (triangle, corners) in triangles.iter().enumerate() {
            for &node in corners {
                let slot = &mut fill[node as usize];
                list[*slot as usize] = triangle as u32;
                *slot += 1;
            }
        }
        Self {
            start,
            triangles: list,
        }
    }

    /// Triangles that have `node` as a corner.
    pub fn around(&self, node: u32) -> &[u32] {
        let node = node as usize;
        &self.triangles[self.start[node] as usize..self.start[node + 1] as usize]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Two triangles over a square 0-1-2-3 with diagonal 0-2.
    const SQUARE: [[u32; 3]; 2] = [[0, 1, 2], [0, 2, 3]];

    #[test]
    fn edges_of_a_square_are_five_and_find_their_triangles() {
        let edges = Edges::of(&SQUARE, 4);
        assert_eq!(edges.nodes.len(), 5);
        let diagonal = edges.between(2, 0).unwrap();
        assert_eq!(edges.triangles[diagonal as usize], [0, 1]);
        assert_eq!(edges.between(1, 3), None);
        assert_eq!(edges.between(9, 3), None);
        assert_eq!(
            edges.neighbours(),
            [[NO_TRIANGLE, 1, NO_TRIANGLE], [NO_TRIANGLE, NO_TRIANGLE, 0]]
        );
    }

    #[test]
    fn fans_hold_every_triangle_of_a_node() {
        let fans = Fans::of(&SQUARE, 4);
        assert_eq!(fans.around(0), [0, 1]);
        assert_eq!(fans.around(1), [0]);
        assert_eq!(fans.around(3), [1]);
    }
}
