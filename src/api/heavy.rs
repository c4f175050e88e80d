//! Work that takes long runs beside the threads that serve requests, so that quick calls stay quick.

use std::sync::{Arc, LazyLock};
use std::thread::available_parallelism;

use tokio::sync::Semaphore;

use super::metrics::{self, Turned};
use super::problem::{Problem, ProblemKind};

/// Heavy calls that may wait for a core; one more is refused with 503 and `Retry-After`.
const MOST_WAITING: usize = 64;

/// The cores, and the places to wait for one.
struct Gate {
    count: usize,
    cores: Arc<Semaphore>,
    places: Arc<Semaphore>,
}

static GATE: LazyLock<Gate> = LazyLock::new(|| {
    let count = available_parallelism().map_or(1, std::num::NonZero::get);
    Gate {
        count,
        cores: Arc::new(Semaphore::new(count)),
        places: Arc::new(Semaphore::new(count + MOST_WAITING)),
    }
});

/// How many heavy calls wait for a core, and how many have one.
pub(super) fn load() -> (usize, usize) {
    let running = GATE.count.saturating_sub(GATE.cores.available_permits());
    let present = (GATE.count + MOST_WAITING).saturating_sub(GATE.places.available_permits());
    (present.saturating_sub(running), running)
}

/// Runs `work` on a thread of its own, at most one for each core at a time.
///
/// # Errors
/// 503 if too many wait already; 500 if the work panics.
pub async fn off_thread<T, F>(work: F) -> Result<T, Problem>
where
    T: Send + 'static,
    F: FnOnce() -> T + Send + 'static,
{
    let overloaded = || {
        metrics::count_turned_away(Turned::HeavyQueueFull);
        Problem::of_kind(ProblemKind::Overloaded)
    };
    let place = Arc::clone(&GATE.places).try_acquire_owned().map_err(|_| overloaded())?;
    let core = Arc::clone(&GATE.cores).acquire_owned().await.map_err(|_| overloaded())?;
    let worked = tokio::task::spawn_blocking(move || {
        // A client that goes away does not free its core before the work is done.
        let _held = (place, core);
        work()
    });
    worked.await.map_err(|_| Problem::of_kind(ProblemKind::Internal))
}
