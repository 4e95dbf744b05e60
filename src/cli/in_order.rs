//! Work on all cores, results in the order of the call.

use std::collections::BTreeMap;
use std::sync::{Condvar, Mutex, MutexGuard, PoisonError};

/// Results that may wait for their turn, per thread: memory does not grow with the number of items.
const AHEAD: usize = 2;

struct State<R> {
    next: usize,
    taken: usize,
    done: BTreeMap<usize, R>,
    stop: bool,
}

/// Runs `work` on every item by `threads` threads and hands the results to `take` in the order of the items, whatever finishes
/// first.
///
/// # Errors
/// The first error of `take`, which ends the work.
pub(super) fn in_order<T: Sync, R: Send, E>(
    items: &[T],
    threads: usize,
    work: impl Fn(&T) -> R + Sync,
    mut take: impl FnMut(&T, R) -> Result<(), E>,
) -> Result<(), E> {
    let threads = threads.min(items.len());
    if threads <= 1 {
        return items.iter().try_for_each(|item| take(item, work(item)));
    }
    let state = Mutex::new(State { next: 0, taken: 0, done: BTreeMap::new(), stop: false });
    let (ready, room) = (Condvar::new(), Condvar::new());
    let stop = || {
        lock(&state).stop = true;
        ready.notify_all();
        room.notify_all();
    };
    std::thread::scope(|scope| {
        for _ in 0..threads {
            scope.spawn(|| {
                // A thread that panics must not leave the others waiting for it.
                let _guard = OnPanic(&stop);
                while let Some(i) = ticket(&state, &room, items.len(), threads * AHEAD) {
                    let result = work(&items[i]);
                    lock(&state).done.insert(i, result);
                    ready.notify_all();
                }
            });
        }
        for (i, item) in items.iter().enumerate() {
            let mut now = lock(&state);
            let result = loop {
                if let Some(result) = now.done.remove(&i) {
                    break result;
                }
                if now.stop {
                    return Ok(());
                }
                now = ready.wait(now).unwrap_or_else(PoisonError::into_inner);
            };
            now.taken = i + 1;
            drop(now);
            room.notify_all();
            if let Err(error) = take(item, result) {
                stop();
                return Err(error);
            }
        }
        Ok(())
    })
}

fn ticket<R>(state: &Mutex<State<R>>, room: &Condvar, items: usize, ahead: usize) -> Option<usize> {
    let mut now = lock(state);
    while !now.stop && now.next < items && now.next >= now.taken + ahead {
        now = room.wait(now).unwrap_or_else(PoisonError::into_inner);
    }
    if now.stop || now.next >= items {
        return None;
    }
    now.next += 1;
    Some(now.next - 1)
}

fn lock<R>(state: &Mutex<State<R>>) -> MutexGuard<'_, State<R>> {
    state.lock().unwrap_or_else(PoisonError::into_inner)
}

struct OnPanic<'a>(&'a (dyn Fn() + Sync));

impl Drop for OnPanic<'_> {
    fn drop(&mut self) {
        if std::thread::panicking() {
            (self.0)();
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::sync::atomic::{AtomicUsize, Ordering};
    use std::time::Duration;

    #[test]
    fn the_order_is_that_of_the_items() {
        let items: Vec<u64> = (0..60).collect();
        for threads in [1, 2, 7] {
            let mut seen = Vec::new();
            let result: Result<(), ()> = in_order(
                &items,
                threads,
                |&i| {
                    // The first ones take longest.
                    std::thread::sleep(Duration::from_millis((60 - i) / 20));
                    i * i
                },
                |&i, square| {
                    assert_eq!(square, i * i);
                    seen.push(i);
                    Ok(())
                },
            );
            assert_eq!((result, seen), (Ok(()), items.clone()));
        }
    }

    #[test]
    fn an_error_ends_the_work() {
        let items: Vec<usize> = (0..1_000).collect();
        let worked = AtomicUsize::new(0);
        let result = in_order(
            &items,
            2,
            |_| worked.fetch_add(1, Ordering::SeqCst),
            |&i, _| if i == 10 { Err("enough") } else { Ok(()) },
        );
        assert_eq!(result, Err("enough"));
        assert!(worked.load(Ordering::SeqCst) < 30, "{worked:?}");
    }

    #[test]
    fn no_more_results_wait_than_agreed() {
        let items: Vec<usize> = (0..200).collect();
        let (made, taken) = (AtomicUsize::new(0), AtomicUsize::new(0));
        let result: Result<(), ()> = in_order(
            &items,
            3,
            |_| {
                let waiting = made.fetch_add(1, Ordering::SeqCst) - taken.load(Ordering::SeqCst);
                assert!(waiting <= 3 * AHEAD + 3, "{waiting}");
            },
            |_, ()| {
                taken.fetch_add(1, Ordering::SeqCst);
                Ok(())
            },
        );
        assert_eq!(result, Ok(()));
    }
}
