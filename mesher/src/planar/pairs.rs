//! Which boxes meet: a sweep along the longer side of the drawing, so that many small shapes cost little.

use crate::curve::Bounds;

/// Calls `visit(i, j)` with i < j for every pair of boxes that meet, in a fixed order.
pub(crate) fn for_each_close_pair(boxes: &[Bounds], mut visit: impl FnMut(usize, usize)) {
    let all = boxes.iter().fold(Bounds::EMPTY, |all, one| all.union(*one));
    let upright = all.high.z - all.low.z >= all.high.r - all.low.r;
    let span = |k: usize| {
        let one = &boxes[k];
        if upright {
            (one.low.z, one.high.z)
        } else {
            (one.low.r, one.high.r)
        }
    };
    let mut order: Vec<usize> = (0..boxes.len()).collect();
    order.sort_by(|&a, &b| span(a).0.total_cmp(&span(b).0).then(a.cmp(&b)));
    let mut active: Vec<usize> = Vec::new();
    for &k in &order {
        let from = span(k).0;
        active.retain(|&other| span(other).1 >= from);
        for &other in &active {
            if boxes[other].meets(boxes[k]) {
                visit(other.min(k), other.max(k));
            }
        }
        active.push(k);
    }
}
