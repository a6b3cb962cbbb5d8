//! Magnetic laws given by points: `curve`, `curve_file`, `demag_curve`.

use std::ops::Range;

use super::reader::Reader;
use crate::case::curves::{self, CurveFile, Judged, Quadrant, RowPoint, Unfit};
use crate::case::expression::Dimension;
use crate::case::model::located::Located;
use crate::case::model::quantity::Pair;
use crate::caution::Caution;
use crate::stock::Law;

/// Rows named in a caution before the rest is summed up.
const MOST_ROWS_NAMED: usize = 6;

impl Reader<'_> {
    pub(super) fn curve(&mut self, points: &Located<Vec<Pair>>) -> Option<Law> {
        let judged = self.listed(points, "curve", Quadrant::First)?;
        Some(Law::Curve(judged.points.into()))
    }

    pub(super) fn demag_curve(&mut self, points: &Located<Vec<Pair>>) -> Option<Law> {
        let (recoil, coefficient) = (self.recoil(), self.remanence_coefficient());
        let judged = self.listed(points, "demag_curve", Quadrant::Second)?;
        Some(Law::Demagnetization {
            points: judged.points.into(),
            recoil_permeability: recoil?,
            remanence_temperature_coefficient_per_k: coefficient?.unwrap_or(0.0),
        })
    }

    /// Points of a list in the case.
    fn listed(&mut self, points: &Located<Vec<Pair>>, key: &str, quadrant: Quadrant) -> Option<Judged> {
        let mut rows = Vec::with_capacity(points.value.len());
        for (index, [h, b]) in points.value.iter().enumerate() {
            // Both are read before giving up, to find all faults.
            let field = self.values.amount(h, key, Dimension::FIELD_STRENGTH);
            let density = self.values.amount(b, key, Dimension::FLUX_DENSITY);
            rows.push(field.zip(density).map(|(h_a_per_m, b_t)| RowPoint {
                row: index + 1,
                h_a_per_m,
                b_t,
            }));
        }
        let rows: Option<Vec<RowPoint>> = rows.into_iter().collect();
        match curves::judge(&rows?, quadrant) {
            Ok(judged) => {
                self.tell_repairs(&judged, &format!("`{key}`"), quadrant);
                Some(judged)
            }
            Err(unfit) => {
                let at = unfit.row().and_then(|row| points.value.get(row - 1));
                let span = at.map_or(points.span.clone(), |[h, b]| h.span.start..b.span.end);
                self.refuse(&span, key, &unfit);
                None
            }
        }
    }

    pub(super) fn curve_file(&mut self, path: &Located<String>) -> Option<Law> {
        let full = self.folder.join(&path.value);
        let rows = match CurveFile::read(&full) {
            Ok(file) => file.points,
            Err(fault) => {
                let message = format!("the curve file `{}` {fault}", full.display());
                let help =
                    "paths are relative to the case file; rows count from 1, the first line of the file";
                self.values.fault_with_help(&path.span, message, help);
                return None;
            }
        };
        match curves::judge(&rows, Quadrant::First) {
            Ok(judged) => {
                self.tell_repairs(
                    &judged,
                    &format!("the curve file `{}`", path.value),
                    Quadrant::First,
                );
                self.keep_points(&path.span, &judged.points);
                Some(Law::Curve(judged.points.into()))
            }
            Err(unfit) => {
                let message = format!("the curve file `{}`: {unfit}", full.display());
                let help = format!("{}; rows count from 1, the first line of the file", unfit.help());
                self.values.fault_with_help(&path.span, message, help);
                None
            }
        }
    }

    /// Puts the points in place of the file's name in the resolved case, which must repeat the run by itself.
    fn keep_points(&mut self, path: &Range<usize>, points: &[[f64; 2]]) {
        let whole = self.values.with_key(path);
        let key = self.values.source().text.get(whole.start..path.start);
        let Some(key) = key.filter(|key| key.contains("curve_file")) else {
            return;
        };
        let key = key.replacen("curve_file", "curve", 1);
        let list: Vec<String> = points.iter().map(|[h, b]| format!("[{h:?}, {b:?}]")).collect();
        self.values
            .replacements
            .push((whole, format!("{key}[{}]", list.join(", "))));
    }

    fn refuse(&mut self, span: &Range<usize>, key: &str, unfit: &Unfit) {
        let message = format!("`{key}` of `{}`: {unfit}", self.name.value);
        self.values.fault_with_help(span, message, unfit.help());
    }

    fn tell_repairs(&mut self, judged: &Judged, whose: &str, quadrant: Quadrant) {
        let rows = &judged.repaired_rows;
        if rows.is_empty() {
            return;
        }
        let mut named: Vec<String> = rows.iter().take(MOST_ROWS_NAMED).map(usize::to_string).collect();
        if rows.len() > MOST_ROWS_NAMED {
            named.push("more".to_owned());
        }
        let from = match quadrant {
            Quadrant::First => "the highest polarisation before",
            Quadrant::Second => "remanence",
        };
        self.values.cautions.push(Caution {
            about: self.name.value.clone(),
            text: format!(
                "In {whose} B rises by less than in air at row {}; this was taken for noise, and B made to follow air \
                 from {from}.",
                named.join(", ")
            ),
            source: "common practice, no source".to_owned(),
        });
    }
}
