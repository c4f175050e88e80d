//! The signals by which the system speaks to the program.

use std::io;

use tokio::signal::unix::{Signal, SignalKind, signal};

/// The signals that ask the program to stop.
#[derive(Debug)]
pub(crate) struct StopSignals {
    terminate: Signal,
    interrupt: Signal,
}

impl StopSignals {
    /// From now on the signals no longer end the process by themselves.
    pub(crate) fn listen() -> io::Result<Self> {
        let terminate = signal(SignalKind::terminate())?;
        Ok(Self { terminate, interrupt: signal(SignalKind::interrupt())? })
    }

    /// Waits for one of them.
    pub(crate) async fn wait(mut self) {
        tokio::select! {
            _ = self.terminate.recv() => {}
            _ = self.interrupt.recv() => {}
        }
    }
}

/// The signal that asks the program to read its files again.
#[derive(Debug)]
pub(crate) struct Hangups(Signal);

impl Hangups {
    /// From now on the signal no longer ends the process.
    pub(crate) fn listen() -> io::Result<Self> {
        signal(SignalKind::hangup()).map(Self)
    }

    /// Waits for the next one.
    pub(crate) async fn next(&mut self) {
        if self.0.recv().await.is_none() {
            // There will be no more.
            std::future::pending::<()>().await;
        }
    }
}
