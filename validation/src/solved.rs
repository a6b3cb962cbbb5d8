//! One case solved from its text with default settings, and its numbers found by name.

use std::path::PathBuf;

use coilwright::case::{self, Source};
use solver::quantity::{MagnetResult, TraversePoint};
use solver::solve::{Progress, Stage};
use solver::{Bracket, Problem, Solution};

use crate::case_text::CaseText;

/// A check that could not be carried out, in words.
pub type Failure = String;

struct Silent;

impl Progress for Silent {
    fn stage(&self, _: Stage, _: usize, _: usize) {}
}

/// A case with its solution.
#[derive(Debug)]
pub struct Solved {
    problem: Problem,
    solution: Solution,
}

impl Solved {
    /// Reads and solves; nothing is set but what the text says.
    pub fn new(text: &CaseText) -> Result<Self, Failure> {
        let source = Source::Text {
            name: "validation".into(),
            text: text.as_str().into(),
            folder: PathBuf::from("."),
        };
        let case = case::read(&source, &[]).map_err(|faults| format!("{faults}\n{}", text.as_str()))?;
        let solution = solver::solve(&case.section, &case.problem, &case.accuracy, &Silent)
            .map_err(|error| format!("{error}\n{}", text.as_str()))?;
        Ok(Self {
            problem: case.problem,
            solution,
        })
    }

    fn winding(&self, name: &str) -> Result<usize, Failure> {
        self.problem
            .windings
            .iter()
            .position(|w| w.name == name)
            .ok_or_else(|| format!("no winding {name}"))
    }

    /// Entry of the inductance matrix, H.
    pub fn inductance(&self, one: &str, two: &str) -> Result<Bracket, Failure> {
        Ok(self.solution.quantities.inductance_h[self.winding(one)?][self.winding(two)?])
    }

    /// Entry of the incremental inductance matrix, H.
    pub fn incremental(&self, one: &str, two: &str) -> Result<Bracket, Failure> {
        let matrix = self.solution.quantities.incremental_inductance_h.as_ref();
        let matrix = matrix.ok_or("no incremental inductance: the material is linear")?;
        Ok(matrix[self.winding(one)?][self.winding(two)?])
    }

    /// Flux linkage of a winding, Wb.
    pub fn linkage(&self, name: &str) -> Result<Bracket, Failure> {
        Ok(self.solution.quantities.windings[self.winding(name)?].flux_linkage_wb)
    }

    /// Coupling factor.
    pub fn coupling(&self, one: &str, two: &str) -> Result<Bracket, Failure> {
        Ok(self.solution.quantities.coupling[self.winding(one)?][self.winding(two)?])
    }

    /// Force on a mover by the stress of the field, N.
    pub fn mover_force(&self, name: &str) -> Result<Bracket, Failure> {
        let found = self.solution.quantities.movers.iter().find(|m| m.name == name);
        found
            .and_then(|m| m.force_n)
            .ok_or_else(|| format!("no force on mover {name}"))
    }

    /// Force on a coil side by J x B, N.
    pub fn coil_force(&self, region: &str) -> Result<Bracket, Failure> {
        let found = self
            .solution
            .quantities
            .coil_sides
            .iter()
            .find(|c| c.region == region);
        found
            .map(|c| c.force_n)
            .ok_or_else(|| format!("no force on coil side {region}"))
    }

    /// Field at the only point of a traverse.
    pub fn point(&self, traverse: &str) -> Result<&TraversePoint<Bracket>, Failure> {
        let found = self
            .solution
            .quantities
            .traverses
            .iter()
            .find(|t| t.name == traverse);
        found
            .and_then(|t| t.points.first())
            .ok_or_else(|| format!("no traverse {traverse}"))
    }

    /// Flux through a search coil, Wb.
    pub fn flux(&self, search_coil: &str) -> Result<Bracket, Failure> {
        let found = self
            .solution
            .quantities
            .search_coils
            .iter()
            .find(|s| s.name == search_coil);
        found
            .map(|s| s.flux_wb)
            .ok_or_else(|| format!("no search coil {search_coil}"))
    }

    /// Operating point of a magnet.
    pub fn magnet(&self, region: &str) -> Result<&MagnetResult<Bracket>, Failure> {
        let found = self.solution.quantities.regions.iter().find(|r| r.name == region);
        found
            .and_then(|r| r.magnet.as_ref())
            .ok_or_else(|| format!("{region} is no magnet"))
    }

    /// Dipole moment of everything, A m².
    pub fn moment(&self) -> Result<Bracket, Failure> {
        self.solution
            .quantities
            .dipole_moment_am2
            .ok_or_else(|| "no dipole moment".into())
    }
}

/// A bracket in another unit.
pub fn times(bracket: Bracket, factor: f64) -> Bracket {
    let (a, b) = (bracket.low * factor, bracket.high * factor);
    Bracket {
        value: bracket.value * factor,
        low: a.min(b),
        high: a.max(b),
        bound: bracket.bound,
    }
}
