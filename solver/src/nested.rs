//! Nodal values carried from a mesh to its nested refinement.

use mesher::Mesh;

/// Values at all nodes of `fine` = `coarse.refined()` (see there for its numbering): new nodes get the mean of the
/// two ends of their edge.
pub fn prolong(values: &[f64], coarse: &Mesh, fine: &Mesh) -> Vec<f64> {
    let mut finer = values.to_vec();
    finer.resize(fine.nodes.len(), 0.0);
    for (t, corners) in coarse.triangles.iter().enumerate() {
        let middles = fine.triangles[4 * t + 3];
        for i in 0..3 {
            let (a, b) = (corners[(i + 1) % 3] as usize, corners[(i + 2) % 3] as usize);
            finer[middles[i] as usize] = 0.5 * (values[a] + values[b]);
        }
    }
    finer
}
