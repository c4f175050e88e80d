//! Keys that change while the service runs. A list that cannot be read changes nothing.

use std::fs::File;
use std::io::{self, Read as _};
use std::path::{Path, PathBuf};
use std::time::Duration;

use tokio::time::MissedTickBehavior;

use super::signals::Hangups;
use crate::api::guard::keys::{KeyRing, Keys};

/// How often the file is looked at. It is read, not asked for its date: a mounted secret may be exchanged as a whole.
const INTERVAL: Duration = Duration::from_secs(2);

/// The longest file that is read: a thousand keys, each with a comment.
const LONGEST: u64 = 1024 * 1024; // bytes

/// The text of a key file.
///
/// # Errors
/// A sentence.
pub(crate) fn read(path: &Path) -> Result<String, String> {
    let read = || -> io::Result<String> {
        let mut text = String::new();
        File::open(path)?.take(LONGEST + 1).read_to_string(&mut text)?;
        Ok(text)
    };
    let text = read().map_err(|error| format!("it cannot be read: {error}"))?;
    match u64::try_from(text.len()) {
        Ok(length) if length <= LONGEST => Ok(text),
        _ => Err(format!("it is longer than {LONGEST} bytes")),
    }
}

/// The file, the keys that came from it, and what was seen in it last.
#[derive(Debug)]
pub(crate) struct KeyWatch {
    path: PathBuf,
    ring: KeyRing,
    seen: Option<Result<String, String>>,
}

impl KeyWatch {
    /// Watches a file whose keys are in force.
    pub(crate) fn new(path: PathBuf, ring: KeyRing) -> Self {
        Self { path, ring, seen: None }
    }

    /// Keeps the keys in force what the file says, for ever; looks at once when told to by a signal.
    pub(crate) async fn run(mut self, mut hangups: Hangups) {
        let mut ticks = tokio::time::interval(INTERVAL);
        ticks.set_missed_tick_behavior(MissedTickBehavior::Delay);
        loop {
            let told = tokio::select! {
                _ = ticks.tick() => false,
                () = hangups.next() => true,
            };
            if told {
                // Also if nothing changed: whoever sent the signal waits for a line.
                self.seen = None;
            }
            let path = self.path.clone();
            let looked = tokio::task::spawn_blocking(move || read(&path)).await;
            let found = looked.unwrap_or_else(|_| Err("it cannot be read".to_owned()));
            if self.seen.as_ref() != Some(&found) {
                self.take(&found, told);
                self.seen = Some(found);
            }
        }
    }

    /// Puts new keys in force, or says why not.
    fn take(&self, found: &Result<String, String>, told: bool) {
        let path = self.path.display();
        match found.clone().and_then(|text| Keys::parse(&text)) {
            Ok(keys) => {
                let count = keys.count();
                self.ring.replace(keys);
                // The first look after the start finds what was read then.
                if self.seen.is_some() || told {
                    tracing::info!(%path, count, "API keys loaded");
                }
            }
            Err(reason) => {
                tracing::error!(%path, %reason, "API keys not loaded; the old ones stay in force");
            }
        }
    }
}
