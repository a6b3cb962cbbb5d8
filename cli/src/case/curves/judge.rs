//! Whether points can be a material: what cannot be is refused with its row, noise at saturation is repaired.

use solver::MU0;

use super::RowPoint;

/// A polarisation that no material has, T: cobalt-iron, the highest, saturates at about 2.45 T (from memory).
const IMPOSSIBLE_POLARIZATION_T: f64 = 2.6;
/// A flux density that no curve is measured at, T.
const IMPOSSIBLE_B_T: f64 = 10.0;
/// A relative permeability that no material has; the best nickel-iron reaches about 1e6 (from memory).
const IMPOSSIBLE_PERMEABILITY: f64 = 2e6;
/// Fall of the polarisation that is taken for noise, over its largest value (common practice, no source).
const NOISE: f64 = 0.02;
/// Slope under that of air that rounding may leave; the solver allows the same.
const ROUNDING: f64 = 1e-6;

/// Where a curve lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Quadrant {
    /// A magnetisation curve: H and B from the origin upward.
    First,
    /// A demagnetisation curve: H from 0 downward, B at H = 0 the remanence.
    Second,
}

/// Points a material can have.
#[derive(Clone, Debug, PartialEq)]
pub struct Judged {
    /// (H in A/m, B in T): in the first quadrant rising from the origin or the first point; in the second rising
    /// to remanence.
    pub points: Vec<[f64; 2]>,
    /// Rows whose B was changed to rise with mu0, as in air.
    pub repaired_rows: Vec<usize>,
}

/// Why points are no curve of a material. Rows are those of [`RowPoint`].
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum Unfit {
    /// Fewer than two points besides the origin.
    #[error("needs at least two points{}, not {points}", besides(*.quadrant))]
    TooFew {
        /// How many there are.
        points: usize,
        /// The kind of curve.
        quadrant: Quadrant,
    },
    /// A number that is not finite.
    #[error("row {row}: H and B must be finite numbers")]
    NotFinite {
        /// Row.
        row: usize,
    },
    /// A point in the wrong quadrant.
    #[error("row {row}: H = {h_a_per_m} A/m, B = {b_t} T: {}", where_it_lies(*.quadrant))]
    WrongQuadrant {
        /// Row.
        row: usize,
        /// H there.
        h_a_per_m: f64,
        /// B there.
        b_t: f64,
        /// The kind of curve.
        quadrant: Quadrant,
    },
    /// B at H = 0.
    #[error("row {row}: B = {b_t} T at H = 0; a magnetisation curve begins with B = 0 there")]
    NotFromOrigin {
        /// Row.
        row: usize,
        /// B there.
        b_t: f64,
    },
    /// A demagnetisation curve that does not reach H = 0.
    #[error("has no point at H = 0, the remanence")]
    NoRemanence,
    /// The remanence is not above zero.
    #[error("row {row}: the remanence, B at H = 0, is {b_t} T and must be more than zero")]
    NegativeRemanence {
        /// Row.
        row: usize,
        /// B there.
        b_t: f64,
    },
    /// H does not rise.
    #[error("row {row}: H must rise from row to row, but goes from {before} to {here} A/m")]
    HNotRising {
        /// Row.
        row: usize,
        /// H before.
        before: f64,
        /// H here.
        here: f64,
    },
    /// B falls.
    #[error("row {row}: B falls while H rises, from {before} to {here} T")]
    BFalling {
        /// Row.
        row: usize,
        /// B before.
        before: f64,
        /// B here.
        here: f64,
    },
    /// dB/dH under mu0.
    #[error("row {row}: B rises by less than mu0 times the rise of H; that is less than in air")]
    UnderAir {
        /// Row.
        row: usize,
    },
    /// Numbers that belong to another unit.
    #[error("row {row}: {looks}")]
    WrongUnit {
        /// Row.
        row: usize,
        /// What they look like.
        looks: String,
    },
}

fn besides(quadrant: Quadrant) -> &'static str {
    match quadrant {
        Quadrant::First => " besides the origin",
        Quadrant::Second => "",
    }
}

fn where_it_lies(quadrant: Quadrant) -> &'static str {
    match quadrant {
        Quadrant::First => "a magnetisation curve has neither H nor B below zero",
        Quadrant::Second => "a demagnetisation curve has no H above zero",
    }
}

impl Unfit {
    /// The row it is about.
    pub fn row(&self) -> Option<usize> {
        match self {
            Self::TooFew { .. } | Self::NoRemanence => None,
            Self::NotFinite { row }
            | Self::WrongQuadrant { row, .. }
            | Self::NotFromOrigin { row, .. }
            | Self::NegativeRemanence { row, .. }
            | Self::HNotRising { row, .. }
            | Self::BFalling { row, .. }
            | Self::UnderAir { row }
            | Self::WrongUnit { row, .. } => Some(*row),
        }
    }

    /// What could cure it.
    pub fn help(&self) -> &'static str {
        match self {
            Self::TooFew { .. } | Self::NotFinite { .. } => "give points as [H in A/m, B in T]",
            Self::WrongQuadrant {
                quadrant: Quadrant::Second,
                ..
            } => "H against the magnetisation is negative: write -H",
            Self::WrongQuadrant { .. } => "for a magnet give demag_curve or remanence",
            Self::NotFromOrigin { .. } => {
                "leave the remanence out; for a magnet give demag_curve or remanence"
            }
            Self::NoRemanence | Self::NegativeRemanence { .. } => "add the point [0, remanence]",
            Self::HNotRising { .. } => "give one branch only, its rows in the order of H",
            Self::BFalling { .. } => "check the row for a slip",
            Self::UnderAir { .. } => "check the row for a slip, and whether H and B stand in the units told",
            Self::WrongUnit { .. } => "check the units: 1 T is 10000 G, 1 Oe is 79.577 A/m",
        }
    }
}

/// Judges points, and repairs noise at saturation.
///
/// Where the polarisation B - mu0 H falls by up to 2 % of its largest value with B still not falling, the rows are
/// read as noise and B is made to rise as in air from the highest polarisation before, or to fall so from remanence
/// (common practice, no source). In the first quadrant only the last rows are read so.
///
/// # Errors
/// Points that no material can have, by their row.
pub fn judge(rows: &[RowPoint], quadrant: Quadrant) -> Result<Judged, Unfit> {
    if let Some(bad) = rows
        .iter()
        .find(|p| !(p.h_a_per_m.is_finite() && p.b_t.is_finite()))
    {
        return Err(Unfit::NotFinite { row: bad.row });
    }
    let mut rows = rows.to_vec();
    if quadrant == Quadrant::Second && rows.len() > 1 && rows[0].h_a_per_m > rows[rows.len() - 1].h_a_per_m {
        // Data sheets run either way.
        rows.reverse();
    }
    let origin =
        quadrant == Quadrant::First && rows.first().is_some_and(|p| p.h_a_per_m == 0.0 && p.b_t == 0.0);
    let points = rows.len() - usize::from(origin);
    if points < 2 {
        return Err(Unfit::TooFew { points, quadrant });
    }
    in_quadrant(&rows, quadrant)?;
    in_units(&rows)?;
    in_order(&rows, quadrant)?;
    let repaired_rows = mended(&mut rows, quadrant)?;
    Ok(Judged {
        points: rows.iter().map(|p| [p.h_a_per_m, p.b_t]).collect(),
        repaired_rows,
    })
}

fn in_quadrant(rows: &[RowPoint], quadrant: Quadrant) -> Result<(), Unfit> {
    for &RowPoint { row, h_a_per_m, b_t } in rows {
        let inside = match quadrant {
            Quadrant::First => h_a_per_m >= 0.0 && b_t >= 0.0,
            Quadrant::Second => h_a_per_m <= 0.0,
        };
        if !inside {
            return Err(Unfit::WrongQuadrant {
                row,
                h_a_per_m,
                b_t,
                quadrant,
            });
        }
        if quadrant == Quadrant::First && h_a_per_m == 0.0 && b_t > 0.0 {
            return Err(Unfit::NotFromOrigin { row, b_t });
        }
    }
    let Some(last) = rows.last().filter(|_| quadrant == Quadrant::Second) else {
        return Ok(());
    };
    if !rows.iter().any(|p| p.h_a_per_m == 0.0) {
        return Err(Unfit::NoRemanence);
    }
    if last.h_a_per_m == 0.0 && last.b_t <= 0.0 {
        return Err(Unfit::NegativeRemanence {
            row: last.row,
            b_t: last.b_t,
        });
    }
    Ok(())
}

/// Tesla and gauss, A/m and Oe mixed up, by the look of the numbers.
fn in_units(rows: &[RowPoint]) -> Result<(), Unfit> {
    for &RowPoint { row, h_a_per_m, b_t } in rows {
        let polarization = b_t - MU0 * h_a_per_m;
        let looks = if b_t.abs() > IMPOSSIBLE_B_T {
            format!("B = {b_t} T is beyond any curve; it looks like gauss or mT")
        } else if polarization.abs() > IMPOSSIBLE_POLARIZATION_T {
            format!(
                "B = {b_t} T at H = {h_a_per_m} A/m needs a polarisation B - mu0 H of {polarization:.3} T, and no material \
                 reaches {IMPOSSIBLE_POLARIZATION_T} T; it looks like another unit of B or H"
            )
        } else if h_a_per_m > 0.0 && b_t > IMPOSSIBLE_PERMEABILITY * MU0 * h_a_per_m {
            format!(
                "B = {b_t} T at H = {h_a_per_m} A/m is a relative permeability of {:.2e}, and no material has that; it \
                 looks like H in kA/m or Oe, or B in gauss",
                b_t / (MU0 * h_a_per_m)
            )
        } else {
            continue;
        };
        return Err(Unfit::WrongUnit { row, looks });
    }
    Ok(())
}

fn in_order(rows: &[RowPoint], quadrant: Quadrant) -> Result<(), Unfit> {
    let origin = RowPoint {
        row: 0,
        h_a_per_m: 0.0,
        b_t: 0.0,
    };
    let from_origin = (quadrant == Quadrant::First && rows[0].h_a_per_m > 0.0).then_some(origin);
    let all: Vec<RowPoint> = from_origin.into_iter().chain(rows.iter().copied()).collect();
    for pair in all.windows(2) {
        let (before, here) = (pair[0], pair[1]);
        // A demagnetisation curve may have been given the other way round: blame the row that comes later.
        let row = here.row.max(before.row);
        if here.h_a_per_m <= before.h_a_per_m {
            return Err(Unfit::HNotRising {
                row,
                before: before.h_a_per_m,
                here: here.h_a_per_m,
            });
        }
        if here.b_t < before.b_t {
            return Err(Unfit::BFalling {
                row,
                before: before.b_t,
                here: here.b_t,
            });
        }
    }
    Ok(())
}

/// Mends B where it rises by less than in air, if that is noise; the rows changed.
fn mended(rows: &mut [RowPoint], quadrant: Quadrant) -> Result<Vec<usize>, Unfit> {
    let polarization = |p: &RowPoint| p.b_t - MU0 * p.h_a_per_m;
    let largest = rows.iter().map(polarization).fold(f64::MIN, f64::max);
    let mut changed = Vec::new();
    let mut mend = |before: RowPoint, here: RowPoint, saturated: bool| {
        let rise = MU0 * (here.h_a_per_m - before.h_a_per_m);
        if here.b_t - before.b_t >= rise * (1.0 - ROUNDING) {
            return Ok(None);
        }
        let row = here.row.max(before.row);
        if !saturated || polarization(&before) - polarization(&here) > NOISE * largest {
            return Err(Unfit::UnderAir { row });
        }
        changed.push(row);
        Ok(Some(rise))
    };
    match quadrant {
        Quadrant::First => {
            let mut before = RowPoint {
                row: 0,
                h_a_per_m: 0.0,
                b_t: 0.0,
            };
            for here in rows.iter_mut().filter(|p| p.h_a_per_m > 0.0) {
                let saturated = polarization(&before) >= (1.0 - NOISE) * largest;
                if let Some(rise) = mend(before, *here, saturated)? {
                    here.b_t = before.b_t + rise;
                }
                before = *here;
            }
        }
        // From remanence downward, so that remanence stays.
        Quadrant::Second => {
            for index in (1..rows.len()).rev() {
                let (before, here) = (rows[index - 1], rows[index]);
                if let Some(rise) = mend(before, here, true)? {
                    rows[index - 1].b_t = here.b_t - rise;
                }
            }
        }
    }
    changed.sort_unstable();
    Ok(changed)
}
