//! A solved scene and its numbers.

use std::path::PathBuf;

use coilwright::case::{self, Source};
use solver::solve::{Progress, Stage};
use solver::{Bracket, Quantities};

struct Silent;

impl Progress for Silent {
    fn stage(&self, _: Stage, _: usize, _: usize) {}
}

/// The quantities of a case.
#[derive(Debug)]
pub struct Solved {
    /// As the solver returned them.
    pub quantities: Quantities<Bracket>,
}

impl Solved {
    /// Reads and solves a case text with what it says and nothing else.
    ///
    /// # Errors
    /// What the reader or the solver said, with the text.
    pub fn new(text: &str) -> Result<Self, String> {
        let source = Source::Text {
            name: "scene".into(),
            text: text.into(),
            folder: PathBuf::from("."),
        };
        let case = case::read(&source, &[]).map_err(|faults| format!("{faults}\n{text}"))?;
        let solution = solver::solve(&case.section, &case.problem, &case.accuracy, &Silent)
            .map_err(|error| format!("{error}\n{text}"))?;
        Ok(Self {
            quantities: solution.quantities,
        })
    }

    /// Force on a mover by the stress of the field, N.
    pub fn force(&self, name: &str) -> Option<Bracket> {
        self.quantities
            .movers
            .iter()
            .find(|mover| mover.name == name)?
            .force_n
    }

    /// Force on a coil side by J x B, N.
    pub fn side_force(&self, name: &str) -> Option<Bracket> {
        self.quantities
            .coil_sides
            .iter()
            .find(|side| side.region == name)
            .map(|side| side.force_n)
    }
}
