//! Rounds of cutting and welding, until no two pieces meet except at their ends.

use std::collections::HashMap;

use super::crossing::{Meeting, meetings};
use super::pairs::for_each_close_pair;
use super::piece::{Cut, Piece, Seat, quarter_shares, seated};
use super::vertices::Vertices;
use super::{Entangled, Move, Tolerance};
use crate::curve::{Bounds, Curve, Point};

/// Drawings end in two to four rounds; more than this is a defect of the drawing or of this module.
const MOST_ROUNDS: usize = 40;

pub(super) struct Rounds {
    pub vertices: Vertices,
    pub pieces: Vec<Piece>,
    pub moves: Vec<Move>,
    /// How far the drawing was moved onto each vertex, at most, m.
    moved_m: Vec<f64>,
    tolerance: Tolerance,
}

impl Rounds {
    pub fn of(loops: &[&[Curve]], tolerance: Tolerance) -> Self {
        let mut rounds = Self {
            vertices: Vertices::new(tolerance),
            pieces: Vec::new(),
            moves: Vec::new(),
            moved_m: Vec::new(),
            tolerance,
        };
        let mut drawn = 0;
        for (looped, curves) in loops.iter().enumerate() {
            for curve in *curves {
                rounds.add(looped as u32, drawn, curve);
                drawn += 1;
            }
        }
        rounds
    }

    /// Adds a drawn curve, in pieces of at most a quarter turn.
    fn add(&mut self, looped: u32, drawn: u32, curve: &Curve) {
        let mut last: Option<(f64, u32)> = None;
        for share in quarter_shares(curve) {
            let point = curve.at(share);
            let vertex = self.vertices.place(point);
            self.note_move(vertex, point.distance(self.vertices.point(vertex)), &[looped]);
            if let Some((from_share, from)) = last.filter(|(_, from)| *from != vertex) {
                let seat = |share, vertex| Seat {
                    share,
                    point: self.vertices.point(vertex),
                    tangent: None,
                };
                let curve = seated(
                    curve,
                    seat(from_share, from),
                    seat(share, vertex),
                    &self.tolerance,
                );
                self.pieces.push(Piece {
                    start: from,
                    end: vertex,
                    curve,
                    loops: vec![(looped, 1)],
                    drawn: vec![drawn],
                    fresh: true,
                    fitted: [0; 2],
                });
            }
            last = Some((share, vertex));
        }
    }

    /// Records that loops were moved onto a vertex by more than round-off.
    fn note_move(&mut self, vertex: u32, by_m: f64, loops: &[u32]) {
        if self.moved_m.len() < self.vertices.points.len() {
            self.moved_m.resize(self.vertices.points.len(), 0.0);
        }
        if by_m > self.tolerance.round_off_m {
            let most = &mut self.moved_m[vertex as usize];
            *most = most.max(by_m);
            self.moves.push(Move {
                at: self.vertices.point(vertex),
                by_m,
                loops: loops.to_vec(),
            });
        }
    }

    /// Cuts and welds until nothing changes.
    pub fn run(&mut self) -> Result<(), Entangled> {
        self.merge_side_by_side();
        let mut somewhere = Point::default();
        for _ in 0..MOST_ROUNDS {
            let cuts = self.find_cuts();
            let Some(first) = cuts.iter().flatten().next() else {
                return Ok(());
            };
            somewhere = self.vertices.point(first.vertex);
            self.apply(cuts);
            self.merge_side_by_side();
        }
        Err(Entangled { at: somewhere })
    }

    /// The cuts each piece needs.
    fn find_cuts(&mut self) -> Vec<Vec<Cut>> {
        let margin = 0.5 * self.tolerance.weld_m;
        let boxes: Vec<Bounds> = self
            .pieces
            .iter()
            .map(|piece| piece.curve.bounds().widened(margin))
            .collect();
        let mut close = Vec::new();
        for_each_close_pair(&boxes, |i, j| {
            if self.pieces[i].fresh || self.pieces[j].fresh {
                close.push((i, j));
            }
        });
        let mut cuts = vec![Vec::new(); self.pieces.len()];
        for (i, j) in close {
            self.meet(i, j, &mut cuts);
        }
        cuts
    }

    /// Adds the cuts that pieces `i` and `j` need because of each other.
    fn meet(&mut self, i: usize, j: usize, cuts: &mut [Vec<Cut>]) {
        let (a, b) = (&self.pieces[i], &self.pieces[j]);
        let ends = [[a.start, a.end], [b.start, b.end]];
        let curves = [a.curve, b.curve];
        // Vertices both have, with the share of the first: common ends, then ends of one near the other.
        let mut common: Vec<f64> = Vec::new();
        for (k, &vertex) in ends[0].iter().enumerate() {
            if ends[1].contains(&vertex) {
                common.push(k as f64);
            }
        }
        for (which, piece) in [i, j].into_iter().enumerate() {
            for (k, &vertex) in ends[1 - which].iter().enumerate() {
                if ends[which].contains(&vertex) {
                    continue;
                }
                let near = curves[which].nearest(self.vertices.point(vertex));
                if near.distance_m <= self.tolerance.touch_m() && near.t > 0.0 && near.t < 1.0 {
                    cuts[piece].push(Cut {
                        share: near.t,
                        vertex,
                        tangent: None,
                    });
                    common.push(if which == 0 { near.t } else { k as f64 });
                }
            }
        }
        common.sort_by(f64::total_cmp);
        let straight = curves.iter().all(|curve| matches!(curve, Curve::Line { .. }));
        if straight && ends[0].iter().any(|vertex| ends[1].contains(vertex)) {
            return; // Two lines meet once.
        }
        for meeting in meetings(&curves[0], &curves[1], self.tolerance.touch_m()) {
            if !self.within_overlap(&curves, &common, &meeting) {
                self.cut_at(&meeting, [i, j], ends, cuts);
            }
        }
    }

    /// Whether a crossing lies between two common vertices between which the curves run side by side: there the
    /// pieces become one, and where they cross in their noise does not matter.
    fn within_overlap(&self, curves: &[Curve; 2], common: &[f64], meeting: &Meeting) -> bool {
        let share = meeting.shares[0];
        let after = common.partition_point(|&t| t < share);
        let (Some(&from), Some(&to)) = (common.get(after.wrapping_sub(1)), common.get(after)) else {
            return false;
        };
        [0.25, 0.5, 0.75].into_iter().all(|t| {
            let sample = curves[0].at(from + t * (to - from));
            curves[1].distance_m(sample) <= self.tolerance.touch_m()
        })
    }

    fn cut_at(&mut self, meeting: &Meeting, pieces: [usize; 2], ends: [[u32; 2]; 2], cuts: &mut [Vec<Cut>]) {
        let vertex = self.vertices.place(meeting.at);
        if ends.iter().all(|pair| pair.contains(&vertex)) {
            self.part_from(vertex, pieces, ends, cuts);
            return;
        }
        for which in 0..2 {
            if !ends[which].contains(&vertex) {
                let share = meeting.shares[which];
                cuts[pieces[which]].push(Cut {
                    share,
                    vertex,
                    tangent: meeting.tangent,
                });
            }
        }
    }

    /// Two pieces that leave a vertex almost in one direction and cross once more close by, because welding turned
    /// one of them a little: one is given the direction of the other there, or they are cut at the crossing.
    fn part_from(&mut self, vertex: u32, pieces: [usize; 2], ends: [[u32; 2]; 2], cuts: &mut [Vec<Cut>]) {
        let curves = pieces.map(|k| self.pieces[k].curve);
        let corner = self.vertices.point(vertex);
        let mut crossings = meetings(&curves[0], &curves[1], 0.0);
        // Nearer ones are round-off of a true touch, and well within the shortest edge there can be.
        crossings.retain(|meeting| meeting.at.distance(corner) > 0.1 * self.tolerance.weld_m);
        if crossings.is_empty() {
            return;
        }
        for (which, other) in [(1, 0), (0, 1)] {
            let end = usize::from(ends[which][0] != vertex);
            let other_end = if ends[other][0] == vertex { 0.0 } else { 1.0 };
            let tangent = curves[other].tangent(other_end);
            let piece = pieces[which];
            if self.pieces[piece].can_fit(end, tangent, &self.tolerance) {
                let far_end = ends[which][1 - end];
                let bound = self.pieces[piece].fitted[1 - end] > 0
                    || cuts[piece]
                        .iter()
                        .any(|cut| cut.vertex == far_end && cut.tangent.is_some());
                if bound {
                    // An arc can be fitted at one end only: its half is fitted.
                    let middle = self.vertices.place(curves[which].midpoint());
                    cuts[piece].push(Cut {
                        share: 0.5,
                        vertex: middle,
                        tangent: None,
                    });
                }
                cuts[piece].push(Cut {
                    share: end as f64,
                    vertex,
                    tangent: Some(tangent),
                });
                return;
            }
        }
        for crossing in crossings {
            let vertex = self.vertices.place(crossing.at);
            for which in 0..2 {
                if !ends[which].contains(&vertex) {
                    cuts[pieces[which]].push(Cut {
                        share: crossing.shares[which],
                        vertex,
                        tangent: None,
                    });
                }
            }
        }
    }

    fn apply(&mut self, cuts: Vec<Vec<Cut>>) {
        let pieces = std::mem::take(&mut self.pieces);
        for (mut piece, mut cuts) in pieces.into_iter().zip(cuts) {
            if cuts.is_empty() {
                piece.fresh = false;
                self.pieces.push(piece);
                continue;
            }
            let loops: Vec<u32> = piece.loops.iter().map(|entry| entry.0).collect();
            for cut in &cuts {
                let by_m = self
                    .vertices
                    .point(cut.vertex)
                    .distance(piece.curve.at(cut.share));
                self.note_move(cut.vertex, by_m, &loops);
            }
            let vertices = &self.vertices;
            self.pieces
                .extend(piece.cut(&mut cuts, |vertex| vertices.point(vertex), &self.tolerance));
        }
    }

    /// Makes pieces between the same vertices one where they run side by side, the earliest one's curve being
    /// kept, and drops those along which every loop runs as often forth as back: they bound nothing.
    fn merge_side_by_side(&mut self) {
        let mut kept: Vec<Piece> = Vec::with_capacity(self.pieces.len());
        let mut between: HashMap<(u32, u32), Vec<usize>> = HashMap::new();
        for piece in std::mem::take(&mut self.pieces) {
            let key = (piece.start.min(piece.end), piece.start.max(piece.end));
            let rivals = between.entry(key).or_default();
            let middle = piece.curve.midpoint();
            let gap = |k: &usize| kept[*k].curve.midpoint().distance(middle);
            let twin = rivals.iter().copied().find(|k| gap(k) <= self.tolerance.weld_m);
            match twin {
                Some(k) => {
                    self.note_merge(&kept[k], &piece);
                    kept[k].absorb(&piece);
                }
                None => {
                    rivals.push(kept.len());
                    kept.push(piece);
                }
            }
        }
        kept.retain(|piece| !piece.loops.is_empty());
        self.pieces = kept;
    }

    /// Records a merge that moves the drawing by more than the welding of the ends has told already.
    fn note_merge(&mut self, kept: &Piece, gone: &Piece) {
        let at = kept.curve.midpoint();
        let by_m = at.distance(gone.curve.midpoint());
        let told = self.moved_m[kept.start as usize].max(self.moved_m[kept.end as usize]);
        if by_m > self.tolerance.round_off_m && by_m > 1.5 * told {
            let mut loops: Vec<u32> = kept
                .loops
                .iter()
                .chain(&gone.loops)
                .map(|entry| entry.0)
                .collect();
            loops.dedup();
            self.moves.push(Move { at, by_m, loops });
        }
    }
}
