//! How a run of the program ends.

use std::process::ExitCode;

/// Exit status.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    /// Everything done.
    Done = 0,
    /// Anything unexpected, such as a full disk.
    Unexpected = 1,
    /// The command line or the case is wrong, or the folder is in use; nothing was solved.
    Wrong = 2,
    /// Solved, but the accuracy goal or convergence was not reached; everything is written, and flagged.
    NotReached = 3,
    /// Some points of a sweep failed; the others are complete.
    SomeFailed = 4,
}

impl From<Status> for ExitCode {
    fn from(status: Status) -> Self {
        ExitCode::from(status as u8)
    }
}

/// Why the program gives up, in words for the person at the terminal.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Failure {
    /// How it ends.
    pub status: Status,
    /// Why: whole lines, shown on standard error.
    pub message: String,
}

impl Failure {
    /// The command line or the case is wrong.
    pub fn wrong(message: impl Into<String>) -> Self {
        Self {
            status: Status::Wrong,
            message: message.into(),
        }
    }

    /// Something that no one could know before.
    pub fn unexpected(message: impl Into<String>) -> Self {
        Self {
            status: Status::Unexpected,
            message: message.into(),
        }
    }
}
