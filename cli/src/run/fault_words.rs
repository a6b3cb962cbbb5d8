//! A fault of the program itself, told in words.

use std::panic::{self, AssertUnwindSafe};
use std::sync::{Arc, Mutex};

use crate::status::{Failure, Status};

/// Does the work; should the program itself fail in it, says so in words and with the status for the unexpected.
pub fn caught(work: impl FnOnce() -> Result<Status, Failure>) -> Result<Status, Failure> {
    let place = Arc::new(Mutex::new(None));
    let seen = Arc::clone(&place);
    let before = panic::take_hook();
    panic::set_hook(Box::new(move |info| {
        let payload = info.payload();
        let words = payload.downcast_ref::<&str>().copied();
        let what = words
            .or_else(|| payload.downcast_ref::<String>().map(String::as_str))
            .unwrap_or("no reason given");
        let at = info
            .location()
            .map(|at| format!("{}, line {}", at.file(), at.line()));
        if let Ok(mut seen) = seen.lock() {
            // The first fault is the cause; later ones follow from it.
            seen.get_or_insert_with(|| (what.to_owned(), at.unwrap_or_else(|| "unknown place".to_owned())));
        }
    }));
    let ended = panic::catch_unwind(AssertUnwindSafe(work));
    panic::set_hook(before);
    ended.unwrap_or_else(|_| {
        let (what, at) = place
            .lock()
            .ok()
            .and_then(|mut place| place.take())
            .unwrap_or_else(|| ("no reason given".to_owned(), "unknown place".to_owned()));
        Err(Failure::unexpected(format!(
            "the program itself failed, which is its own fault and not that of the case ({at}: {what}). No file was \
             left half written. Please report it, with the case file."
        )))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tells_a_fault_in_words() {
        let list: Vec<u32> = Vec::new();
        let index = std::hint::black_box(3);
        let ended = caught(|| {
            if list[index] == 0 {
                Ok(Status::Done)
            } else {
                Ok(Status::Wrong)
            }
        });
        let failure = ended.unwrap_err();
        assert_eq!(failure.status, Status::Unexpected);
        assert!(
            failure.message.contains("the program itself failed"),
            "{}",
            failure.message
        );
        assert!(
            failure.message.contains("fault_words.rs, line "),
            "{}",
            failure.message
        );
        assert!(!failure.message.contains("panicked"), "{}", failure.message);
    }

    #[test]
    fn leaves_other_ends_alone() {
        assert_eq!(caught(|| Ok(Status::NotReached)), Ok(Status::NotReached));
        let failure = Failure::wrong("no");
        assert_eq!(caught(|| Err(failure.clone())), Err(failure));
    }
}
