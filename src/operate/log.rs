//! The log on standard error. Whoever reads it slowly loses lines; the service does not wait for it.

use std::io::{self, IsTerminal as _};
use std::panic;

use tracing_appender::non_blocking::{ErrorCounter, NonBlockingBuilder, WorkerGuard};
use tracing_subscriber::EnvFilter;

use crate::api::metrics;
use crate::setting_values::LogFormat;

/// Lines that may wait to be written.
const MOST_WAITING: usize = 4096;

/// The open log; dropping it writes what still waits.
#[derive(Debug)]
pub struct Log {
    _writer: WorkerGuard,
    lost: ErrorCounter,
}

impl Log {
    /// Sends log lines to standard error from now on, also those of panics.
    pub(crate) fn start(filter: &str, format: LogFormat) -> Self {
        let (writer, guard) = NonBlockingBuilder::default()
            .lossy(true)
            .buffered_lines_limit(MOST_WAITING)
            .thread_name("log")
            .finish(io::stderr());
        let lost = writer.error_counter();
        let lines = tracing_subscriber::fmt()
            // The filter was checked when the settings were read.
            .with_env_filter(EnvFilter::builder().parse_lossy(filter))
            .with_ansi(io::stderr().is_terminal())
            .with_writer(writer);
        match format {
            LogFormat::Text => lines.init(),
            LogFormat::Json => lines.json().flatten_event(true).init(),
        }
        // The message of a panic may hold a request's data; the place does not.
        panic::set_hook(Box::new(|what| {
            let place = what.location().map(ToString::to_string).unwrap_or_default();
            tracing::error!(place, "panicked");
        }));
        Self { _writer: guard, lost }
    }

    /// What brings the count of lost lines up to date.
    pub(crate) fn reporter(&self) -> impl Fn() + Clone + Send + Sync + 'static {
        let lost = self.lost.clone();
        move || {
            let total = u64::try_from(lost.dropped_lines()).unwrap_or(u64::MAX);
            metrics::set_log_lines_lost(total);
        }
    }
}
