//! Progress on a terminal: the stage, how fine the mesh is, and the time so far.

use std::io::IsTerminal;
use std::time::Duration;

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};
use solver::solve::{Progress, Stage};

/// A line on standard error that tells what is going on; silent unless that is a terminal.
#[derive(Debug)]
pub struct ProgressLine {
    bar: ProgressBar,
}

impl ProgressLine {
    /// Starts the line.
    pub fn start(quiet: bool) -> Self {
        if quiet || !std::io::stderr().is_terminal() {
            return Self {
                bar: ProgressBar::hidden(),
            };
        }
        let bar = ProgressBar::with_draw_target(None, ProgressDrawTarget::stderr());
        if let Ok(style) = ProgressStyle::with_template("{spinner} {msg}  {elapsed_precise}") {
            bar.set_style(style);
        }
        bar.enable_steady_tick(Duration::from_millis(120));
        Self { bar }
    }

    /// Says what is going on.
    pub fn say(&self, what: impl Into<String>) {
        self.bar.set_message(what.into());
    }

    /// Tells of one of several solves, such as `place 3 of 21`.
    pub fn part(&self, head: impl Into<String>) -> Part<'_> {
        Part {
            line: self,
            head: head.into(),
        }
    }

    /// Removes the line.
    pub fn finish(&self) {
        self.bar.finish_and_clear();
    }
}

impl Drop for ProgressLine {
    fn drop(&mut self) {
        self.finish();
    }
}

impl Progress for ProgressLine {
    fn stage(&self, stage: Stage, level: usize, nodes: usize) {
        self.say(words(stage, level, nodes));
    }
}

/// The line while it tells of one of several solves.
#[derive(Debug)]
pub struct Part<'l> {
    line: &'l ProgressLine,
    head: String,
}

impl Progress for Part<'_> {
    fn stage(&self, stage: Stage, level: usize, nodes: usize) {
        self.line
            .say(format!("{}, {}", self.head, words(stage, level, nodes)));
    }
}

/// A stage in words.
fn words(stage: Stage, level: usize, nodes: usize) -> String {
    let what = match stage {
        Stage::Mesh => "making the mesh",
        Stage::Assembly => "assembling",
        Stage::Solve => "solving",
        Stage::Quantities => "reading off the quantities",
    };
    match nodes {
        0 => format!("mesh pair {level}: {what}"),
        _ => format!("mesh pair {level}: {what}, {nodes} nodes"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_the_stage_and_the_size() {
        assert_eq!(words(Stage::Solve, 2, 1234), "mesh pair 2: solving, 1234 nodes");
        assert_eq!(words(Stage::Mesh, 1, 0), "mesh pair 1: making the mesh");
    }
}
