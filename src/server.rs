//! Listens, announces, serves, drains.

use std::future::IntoFuture as _;
use std::io::{self, IsTerminal as _, Write as _};

use axum::serve::ListenerExt as _;
use tokio::net::TcpListener;
use tokio::signal::unix::{Signal, SignalKind, signal};
use tokio::sync::oneshot;
use tracing_subscriber::EnvFilter;

use crate::api;
use crate::api::health::Readiness;
use crate::settings::{LogFormat, Settings};

/// Sends log lines to standard error from now on.
pub fn start_logging(settings: &Settings) {
    // The filter was checked when the settings were read.
    let filter = EnvFilter::builder().parse_lossy(&settings.log);
    let lines = tracing_subscriber::fmt()
        .with_env_filter(filter)
        .with_ansi(io::stderr().is_terminal())
        .with_writer(io::stderr);
    match settings.log_format {
        LogFormat::Text => lines.init(),
        LogFormat::Json => lines.json().flatten_event(true).init(),
    }
}

/// Serves until SIGTERM or SIGINT, then finishes what is in progress, for the drain time at most.
///
/// # Errors
/// The address cannot be bound, or standard output cannot be written.
pub async fn serve(settings: &Settings) -> io::Result<()> {
    let stop = StopSignals::listen()?;
    let listener = TcpListener::bind(settings.listen).await?;
    let address = listener.local_addr()?;
    if !address.ip().is_loopback() {
        tracing::warn!(%address, "reachable from other machines, without keys or encryption: put a proxy in front");
    }
    let readiness = Readiness::default();
    let routes = api::router(&settings.layers(), readiness.clone());
    writeln!(io::stdout(), "listening on http://{address}")?;

    let (tell, told) = oneshot::channel();
    let listener = listener.tap_io(|stream| {
        // Answers are short; without it they could wait for the client's acknowledgement.
        let _ = stream.set_nodelay(true);
    });
    let until_told = async {
        let _ = told.await;
    };
    let served = axum::serve(listener, routes).with_graceful_shutdown(until_told).into_future();
    let drained = async {
        stop.wait().await;
        tracing::info!("told to stop: finishing what is in progress");
        readiness.drain();
        let _ = tell.send(());
        tokio::time::sleep(settings.drain_timeout).await;
    };
    tokio::select! {
        result = served => result,
        () = drained => {
            tracing::warn!("the drain time is over: requests in progress are cut off");
            Ok(())
        }
    }
}

/// The signals that ask the program to stop.
struct StopSignals {
    terminate: Signal,
    interrupt: Signal,
}

impl StopSignals {
    /// From now on the signals no longer end the process by themselves.
    fn listen() -> io::Result<Self> {
        let terminate = signal(SignalKind::terminate())?;
        Ok(Self { terminate, interrupt: signal(SignalKind::interrupt())? })
    }

    async fn wait(mut self) {
        tokio::select! {
            _ = self.terminate.recv() => {}
            _ = self.interrupt.recv() => {}
        }
    }
}
