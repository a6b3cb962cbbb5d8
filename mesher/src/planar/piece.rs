//! Pieces of drawn curve between two vertices, and how they are cut and bent onto new vertices.

use std::f64::consts::FRAC_PI_2;

use super::{Tolerance, Windings};
use crate::curve::{Curve, Point};

/// An end is fitted anew when welding turns the other curve once more; not for ever.
const MOST_FITS: u8 = 6;

/// A piece of drawn curve between two vertices, before it is known to cross nothing.
#[derive(Clone, Debug)]
pub(super) struct Piece {
    pub start: u32,
    pub end: u32,
    pub curve: Curve,
    pub loops: Windings,
    pub drawn: Vec<u32>,
    /// Not yet compared with the others.
    pub fresh: bool,
    /// How often its direction at start and end has been fitted to another curve that touches it there.
    pub fitted: [u8; 2],
}

/// A vertex at which a piece is to be cut; at an end of the piece, only its direction is fitted.
#[derive(Clone, Copy, Debug)]
pub(super) struct Cut {
    /// Share of the piece's length.
    pub share: f64,
    pub vertex: u32,
    /// The direction (either sense) the piece must have there, because it touches another.
    pub tangent: Option<Point>,
}

/// The ends of a part of a curve: where on the curve, and the point it is moved to.
#[derive(Clone, Copy, Debug)]
pub(super) struct Seat {
    pub share: f64,
    pub point: Point,
    pub tangent: Option<Point>,
}

/// Cuts an arc into equal pieces of at most a quarter turn: those are well shaped, seen from either end their
/// distance only grows, and moving an end moves no point of them by much more. Shares of the cuts, ends included.
pub(super) fn quarter_shares(curve: &Curve) -> Vec<f64> {
    let count = (curve.sweep().abs() / FRAC_PI_2 - 1e-9).ceil().max(1.0);
    (0..=count as u32).map(|k| f64::from(k) / count).collect()
}

/// The part of a curve between two seats, bent (never by more than its ends are moved) so that it ends there.
pub(super) fn seated(curve: &Curve, from: Seat, to: Seat, tolerance: &Tolerance) -> Curve {
    let Curve::Arc { .. } = curve else {
        return Curve::line(from.point, to.point);
    };
    let moved = from
        .point
        .distance(curve.at(from.share))
        .max(to.point.distance(curve.at(to.share)));
    let fitting = from.tangent.or(to.tangent).is_some();
    let part = curve.piece(from.share, to.share);
    let bent = if moved <= tolerance.round_off_m && !fitting {
        // Round-off only: the circle stays the drawn one.
        part.with_round_off_ends(from.point, to.point)
    } else {
        let sweep = tangent_sweep(curve, from, to, tolerance).unwrap_or_else(|| part.sweep());
        Curve::arc(from.point, to.point, sweep)
    };
    if bent.rise_m() <= 0.1 * tolerance.round_off_m {
        Curve::line(from.point, to.point)
    } else {
        bent
    }
}

/// The sweep for which the arc between the seats has the tangents asked for, if any are and the arc is moved by
/// no more than the weld tolerance for it.
fn tangent_sweep(curve: &Curve, from: Seat, to: Seat, tolerance: &Tolerance) -> Option<f64> {
    let chord = to.point - from.point;
    let drawn = curve.sweep() * (to.share - from.share);
    let wanted = [from, to]
        .into_iter()
        .zip([1.0, -1.0])
        .filter_map(|(seat, sense)| {
            let along = curve.tangent(seat.share);
            let tangent = seat
                .tangent
                .map(|t| if t.dot(along) < 0.0 { t * -1.0 } else { t })?;
            let sweep = 2.0 * sense * tangent.cross(chord).atan2(tangent.dot(chord));
            // The rise of an arc is about an eighth of chord times sweep.
            let change = (sweep - drawn).abs();
            (change * chord.norm() <= 8.0 * tolerance.weld_m && change <= 0.3 * drawn.abs()).then_some(sweep)
        });
    let wanted: Vec<f64> = wanted.collect();
    (!wanted.is_empty()).then(|| wanted.iter().sum::<f64>() / wanted.len() as f64)
}

impl Piece {
    /// The piece cut at vertices (in any order, repetitions allowed), with the points of its own ends.
    pub fn cut(&self, cuts: &mut [Cut], place: impl Fn(u32) -> Point, tolerance: &Tolerance) -> Vec<Self> {
        cuts.sort_by(|a, b| a.share.total_cmp(&b.share).then(a.vertex.cmp(&b.vertex)));
        let end = |share: f64, vertex: u32| {
            let tangent = cuts
                .iter()
                .filter(|cut| cut.vertex == vertex)
                .find_map(|cut| cut.tangent);
            Cut {
                share,
                vertex,
                tangent,
            }
        };
        let mut stops = vec![end(0.0, self.start)];
        for cut in cuts
            .iter()
            .filter(|cut| cut.vertex != self.start && cut.vertex != self.end)
        {
            match stops.iter_mut().find(|stop| stop.vertex == cut.vertex) {
                Some(known) => known.tangent = known.tangent.or(cut.tangent),
                None => stops.push(*cut),
            }
        }
        stops.push(end(1.0, self.end));
        stops
            .windows(2)
            .map(|pair| self.part(pair[0], pair[1], &place, tolerance))
            .collect()
    }

    fn part(&self, from: Cut, to: Cut, place: impl Fn(u32) -> Point, tolerance: &Tolerance) -> Self {
        let seat = |stop: Cut| Seat {
            share: stop.share,
            point: place(stop.vertex),
            tangent: stop.tangent,
        };
        let own = [
            self.fitted[0] * u8::from(from.share == 0.0),
            self.fitted[1] * u8::from(to.share == 1.0),
        ];
        Self {
            start: from.vertex,
            end: to.vertex,
            curve: seated(&self.curve, seat(from), seat(to), tolerance),
            loops: self.loops.clone(),
            drawn: self.drawn.clone(),
            fresh: true,
            fitted: [
                own[0] + u8::from(from.tangent.is_some()),
                own[1] + u8::from(to.tangent.is_some()),
            ],
        }
    }

    /// Whether the direction of the piece at its start (`end` 0) or end (1) can be made `tangent` by moving it no
    /// more than the weld tolerance.
    pub fn can_fit(&self, end: usize, tangent: Point, tolerance: &Tolerance) -> bool {
        if self.fitted[end] >= MOST_FITS || matches!(self.curve, Curve::Line { .. }) {
            return false;
        }
        let mut seats = [(0.0, self.curve.start()), (1.0, self.curve.end())].map(|(share, point)| Seat {
            share,
            point,
            tangent: None,
        });
        seats[end].tangent = Some(tangent);
        tangent_sweep(&self.curve, seats[0], seats[1], tolerance).is_some()
    }

    /// Takes in a piece that runs beside it between the same vertices.
    pub fn absorb(&mut self, other: &Self) {
        let sense = if other.start == self.start { 1 } else { -1 };
        super::add_windings(&mut self.loops, &other.loops, sense);
        for &drawn in &other.drawn {
            if let Err(k) = self.drawn.binary_search(&drawn) {
                self.drawn.insert(k, drawn);
            }
        }
    }
}
