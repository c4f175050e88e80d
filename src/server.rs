//! Listens, announces, serves, drains.

use std::future;
use std::io::{self, Write as _};
use std::net::SocketAddr;
use std::time::Duration;

use axum::Router;
use tokio::net::TcpListener;

use crate::api;
use crate::api::health::Readiness;
use crate::api::metrics;
use crate::operate::connections::{Host, listen};
use crate::operate::key_watch::KeyWatch;
use crate::operate::log::Log;
use crate::operate::signals::{Hangups, StopSignals};
use crate::settings::Settings;

/// Connections of clients at once; one more is closed at once. Each holds some 16 kilobytes, so all hold 260 megabytes.
const MOST_CONNECTIONS: u32 = 16_384;

/// Connections to the metrics at once, and their patience: their clients are few and near.
const MOST_OBSERVERS: u32 = 32;
const PATIENCE_WITH_OBSERVERS: Duration = Duration::from_secs(10);

/// How long a service that is told to stop goes on to answer what comes, at most: its clients and their balancer do
/// not know yet.
const FAREWELL: Duration = Duration::from_millis(200);

/// Sends log lines to standard error from now on; dropping the log writes the last ones.
#[must_use]
pub fn start_logging(settings: &Settings) -> Log {
    Log::start(&settings.log, settings.log_format)
}

/// Serves until SIGTERM or SIGINT, then finishes what is in progress, for the drain time at most.
///
/// # Errors
/// A sentence for each address that cannot be bound, or for whatever else the system refuses.
pub async fn serve(settings: &Settings, log: &Log) -> Result<(), String> {
    let stop = StopSignals::listen().map_err(|error| cannot("take signals", &error))?;
    let hangups = Hangups::listen().map_err(|error| cannot("take signals", &error))?;
    allow_files();
    let (listener, observed) = bind(settings)?;
    let address = listener.local_addr().map_err(|error| cannot("serve", &error))?;
    warn_if_open(settings, address);

    let readiness = Readiness::default();
    let routes = api::router(&settings.layers(), readiness.clone());
    let host = Host::new(routes, settings.request_timeout, MOST_CONNECTIONS);
    watch_keys(settings, hangups);
    if let Some(observed) = observed {
        observe(observed, log);
    }
    writeln!(io::stdout(), "listening on http://{address}")
        .map_err(|error| cannot("write to standard output", &error))?;

    let farewell = FAREWELL.min(settings.drain_timeout / 2);
    let told = async {
        stop.wait().await;
        tracing::info!("told to stop: finishing what is in progress");
        readiness.drain();
        host.leave();
        // Connections are still taken in this time.
        tokio::time::sleep(farewell).await;
    };
    host.take_until(listener, told).await;
    let left = settings.drain_timeout.saturating_sub(farewell);
    if tokio::time::timeout(left, host.finish()).await.is_err() {
        tracing::warn!("the drain time is over: requests in progress are cut off");
    }
    Ok(())
}

/// Serves routes within the bounds that the service sets to connections, as long as the process lives.
pub async fn serve_routes(listener: TcpListener, routes: Router, patience: Duration) {
    Host::new(routes, patience, MOST_CONNECTIONS).take_until(listener, future::pending()).await;
}

fn cannot(what: &str, error: &io::Error) -> String {
    format!("error: cannot {what}: {error}\n")
}

/// Binds all addresses, or says of each why not.
fn bind(settings: &Settings) -> Result<(TcpListener, Option<TcpListener>), String> {
    let listener = listen(settings.listen)
        .map_err(|error| cannot(&format!("serve on {}", settings.listen), &error));
    let observed = settings.metrics_listen.address().map(|address| {
        listen(address).map_err(|error| cannot(&format!("serve metrics on {address}"), &error))
    });
    match (listener, observed.transpose()) {
        (Ok(listener), Ok(observed)) => Ok((listener, observed)),
        (listener, observed) => {
            Err(listener.err().unwrap_or_default() + &observed.err().unwrap_or_default())
        }
    }
}

/// As many files, that is connections, as the system grants at all.
fn allow_files() {
    if let Err(error) = rlimit::increase_nofile_limit(u64::from(MOST_CONNECTIONS) + 1024) {
        tracing::warn!(%error, "the limit of open files stays low");
    }
}

fn warn_if_open(settings: &Settings, address: SocketAddr) {
    if !address.ip().is_loopback() && settings.api_keys_file.ring().is_none() {
        tracing::warn!(%address, "open to whoever reaches this address: no API keys are set");
    }
}

/// Follows the file of keys; without one a signal to read it again is only taken note of.
fn watch_keys(settings: &Settings, mut hangups: Hangups) {
    match settings.api_keys_file.watched() {
        Some((path, ring)) => {
            tokio::spawn(KeyWatch::new(path.to_owned(), ring.clone()).run(hangups));
        }
        None => {
            tokio::spawn(async move {
                loop {
                    hangups.next().await;
                    tracing::info!("no file of API keys is set: nothing to read again");
                }
            });
        }
    }
}

/// Shows the metrics as long as the process lives, so that its end is seen, too.
fn observe(listener: TcpListener, log: &Log) {
    if let Ok(address) = listener.local_addr() {
        tracing::info!("metrics on http://{address}/metrics");
    }
    let routes = metrics::routes(log.reporter());
    let host = Host::new(routes, PATIENCE_WITH_OBSERVERS, MOST_OBSERVERS);
    tokio::spawn(async move { host.take_until(listener, future::pending()).await });
}
