//! Many small pieces of work that can wait: they take every core that nobody else needs.
//!
//! A call with very much to compute cuts it into pieces, begins a few of them at a time and takes their results in
//! order. So its memory is bounded, it stops soon after its client left, and pieces of other calls get their turn.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::LazyLock;
use std::thread::available_parallelism;

use rayon::{ThreadPool, ThreadPoolBuilder};
use tokio::sync::oneshot;

use super::metrics;
use super::problem::{Problem, ProblemKind};

/// Threads that compute pieces, one for each core.
static POOL: LazyLock<Option<ThreadPool>> = LazyLock::new(|| {
    let pool = ThreadPoolBuilder::new()
        .num_threads(cores())
        .thread_name(|index| format!("pieces-{index}"))
        .start_handler(|_| give_way())
        .build();
    pool.inspect_err(|error| tracing::error!(%error, "no threads for work in pieces")).ok()
});

/// How far such a thread stands back behind those that serve requests, in steps of the scheduler: 10 of them leave it
/// about a tenth of a core that both want.
const STEPS_BACK: i32 = 10;

/// Lets the other threads of the program go first. On Linux this is a matter of the calling thread alone.
fn give_way() {
    if let Err(error) = rustix::process::nice(STEPS_BACK) {
        tracing::warn!(%error, "work in pieces cannot stand back behind quick calls");
    }
}

fn cores() -> usize {
    available_parallelism().map_or(1, std::num::NonZero::get)
}

/// Pieces of one call that may be begun and not taken: so many that no core waits while the oldest is being taken.
#[must_use]
pub fn pieces_at_once() -> usize {
    2 * cores()
}

/// Tells a piece of work whether anybody still waits for it.
#[derive(Debug, Clone, Copy)]
pub struct Wanted<'a>(&'a dyn Ask);

trait Ask: std::fmt::Debug {
    fn is_wanted(&self) -> bool;
}

impl<T: std::fmt::Debug> Ask for oneshot::Sender<T> {
    fn is_wanted(&self) -> bool {
        !self.is_closed()
    }
}

impl Wanted<'_> {
    /// Whether its result will be taken, as far as is known now.
    #[must_use]
    pub fn is_wanted(self) -> bool {
        self.0.is_wanted()
    }
}

/// Begins a piece of work; the future gives its result. Dropping the future tells the work to stop.
///
/// # Errors
/// 500 if the work panics, 503 if there are no threads for it.
pub fn begin<T, F>(work: F) -> impl Future<Output = Result<T, Problem>> + Send
where
    T: std::fmt::Debug + Send + 'static,
    F: FnOnce(Wanted<'_>) -> T + Send + 'static,
{
    let (tell, told) = oneshot::channel();
    if let Some(pool) = &*POOL {
        pool.spawn_fifo(move || {
            if tell.is_wanted() {
                let done = guarded(|| work(Wanted(&tell)));
                // Fails if the client has left meanwhile.
                let _ = tell.send(done);
            }
        });
    }
    // Without a pool nobody will tell.
    async { told.await.unwrap_or_else(|_| Err(Problem::of_kind(ProblemKind::Overloaded))) }
}

/// What `work` comes to. What it says when it panics may hold a request's data and goes nowhere.
///
/// # Errors
/// 500 if it panics.
pub fn guarded<T>(work: impl FnOnce() -> T) -> Result<T, Problem> {
    // What a panic may have left half done is dropped with it.
    catch_unwind(AssertUnwindSafe(work)).map_err(|_| {
        metrics::count_panic();
        tracing::error!("a piece of work panicked");
        Problem::of_kind(ProblemKind::Internal)
    })
}
