//! Several solves at once, each on its own share of the processors.
//!
//! Solves of one stroke or curve do not need each other: side by side they use the processors better than one after
//! another, because much of meshing and factorising is sequential. Numbers do not depend on how the work is shared:
//! every sum in a solve has a fixed order.

use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};
use std::sync::{Mutex, PoisonError};

/// Most solves at once: each holds its meshes and factors in memory.
const MOST_AT_ONCE: usize = 8;

/// Does `work` for 0, 1, ... `count` - 1 and returns the results in that order, several at once, each in a thread pool
/// of its share of the current pool's threads.
///
/// # Errors
/// The error of the lowest number that failed, with that number. What has not begun by then is left undone.
pub fn each<T: Send, E: Send>(
    count: usize,
    work: impl Fn(usize) -> Result<T, E> + Sync,
) -> Result<Vec<T>, (usize, E)> {
    let threads = rayon::current_num_threads().max(1);
    let hands = threads.min(count).min(MOST_AT_ONCE);
    if hands <= 1 {
        return (0..count)
            .map(|index| work(index).map_err(|error| (index, error)))
            .collect();
    }
    let (next, failed) = (AtomicUsize::new(0), AtomicBool::new(false));
    let done: Mutex<Vec<(usize, Result<T, E>)>> = Mutex::new(Vec::with_capacity(count));
    let hand = || {
        while !failed.load(Ordering::Relaxed) {
            let index = next.fetch_add(1, Ordering::Relaxed);
            if index >= count {
                return;
            }
            let result = work(index);
            if result.is_err() {
                failed.store(true, Ordering::Relaxed);
            }
            done.lock()
                .unwrap_or_else(PoisonError::into_inner)
                .push((index, result));
        }
    };
    std::thread::scope(|scope| {
        for rank in 0..hands {
            let share = threads / hands + usize::from(rank < threads % hands);
            let hand = &hand;
            scope.spawn(
                move || match rayon::ThreadPoolBuilder::new().num_threads(share).build() {
                    Ok(pool) => pool.install(hand),
                    // A machine that gives no more threads still solves, if more slowly.
                    Err(_) => hand(),
                },
            );
        }
    });
    let mut done = done.into_inner().unwrap_or_else(PoisonError::into_inner);
    done.sort_by_key(|(index, _)| *index);
    done.into_iter()
        .map(|(index, result)| result.map_err(|error| (index, error)))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn results_come_in_order_whatever_the_number_of_threads() {
        for threads in [1, 2, 5] {
            let pool = rayon::ThreadPoolBuilder::new()
                .num_threads(threads)
                .build()
                .unwrap();
            let squares = pool.install(|| each(17, |n| Ok::<_, ()>(n * n)));
            assert_eq!(squares, Ok((0..17).map(|n| n * n).collect()));
        }
        assert_eq!(each(0, |_| Ok::<usize, ()>(1)), Ok(vec![]));
    }

    #[test]
    fn the_lowest_failure_is_told() {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(3).build().unwrap();
        for _ in 0..20 {
            let found = pool.install(|| each(50, |n| if n < 7 { Ok(n) } else { Err("no") }));
            assert_eq!(found, Err((7, "no")));
        }
    }
}
