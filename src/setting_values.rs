//! From the texts of settings to values; each refuses with a sentence what it cannot be.

use std::net::SocketAddr;
use std::path::{Path, PathBuf};
use std::time::Duration;

use axum::http::{HeaderValue, Uri};
use clap::ValueEnum;
use tracing_subscriber::EnvFilter;

use crate::api::guard::keys::{KeyRing, Keys};
use crate::operate::key_watch;

/// How log lines are written.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum LogFormat {
    /// For people.
    Text,
    /// One JSON object a line.
    Json,
}

/// Where metrics are shown, if anywhere.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct MetricsListen(Option<SocketAddr>);

impl MetricsListen {
    pub(crate) fn parse(text: &str) -> Result<Self, String> {
        if text.is_empty() {
            Ok(Self(None))
        } else {
            listen(text).map(|address| Self(Some(address)))
        }
    }

    /// The address, if there is one.
    #[must_use]
    pub fn address(self) -> Option<SocketAddr> {
        self.0
    }
}

/// A file of API keys that was read, if one is set.
#[derive(Debug, Clone)]
pub struct KeysFile(Option<(PathBuf, KeyRing)>);

impl KeysFile {
    /// Reads the file here, so that keys which cannot be used are one of the wrong settings.
    pub(crate) fn read(text: &str) -> Result<Self, String> {
        if text.is_empty() {
            return Ok(Self(None));
        }
        let path = PathBuf::from(text);
        let keys = key_watch::read(&path).and_then(|text| Keys::parse(&text));
        let keys = keys.map_err(|reason| format!("must be a file of API keys: {reason}"))?;
        Ok(Self(Some((path, KeyRing::new(keys)))))
    }

    /// The keys in force, if there are any.
    #[must_use]
    pub fn ring(&self) -> Option<&KeyRing> {
        self.0.as_ref().map(|(_, ring)| ring)
    }

    /// The file with its keys, if there is one.
    pub(crate) fn watched(&self) -> Option<(&Path, &KeyRing)> {
        self.0.as_ref().map(|(path, ring)| (path.as_path(), ring))
    }
}

/// Origins of web pages, checked.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Origins(Vec<HeaderValue>);

impl Origins {
    pub(crate) fn parse(text: &str) -> Result<Self, String> {
        let listed = text.split(',').map(str::trim).filter(|origin| !origin.is_empty());
        listed.map(origin).collect::<Result<_, _>>().map(Self)
    }

    /// As browsers send them.
    #[must_use]
    pub fn list(&self) -> &[HeaderValue] {
        &self.0
    }
}

pub(crate) fn listen(text: &str) -> Result<SocketAddr, String> {
    text.parse().map_err(|_| "must be an IP address and a port, such as 127.0.0.1:8080".to_owned())
}

pub(crate) fn log_filter(text: &str) -> Result<String, String> {
    let refusal = |error| format!("must be a level or `target=level` pairs: {error}");
    EnvFilter::builder().parse(text).map(|_| text.to_owned()).map_err(refusal)
}

/// An origin is scheme, host and port; browsers send it without a final slash.
fn origin(text: &str) -> Result<HeaderValue, String> {
    let refusal = || {
        format!("`{text}` must be an origin such as https://example.org or http://localhost:3000")
    };
    let uri: Uri = text.parse().map_err(|_| refusal())?;
    let (Some(scheme @ ("http" | "https")), Some(authority)) = (uri.scheme_str(), uri.authority())
    else {
        return Err(refusal());
    };
    // Compared as text, as browsers do: a path, a user name or capitals would never match.
    let canonical = format!("{scheme}://{}", authority.as_str().to_lowercase());
    if canonical != text || text.contains(['@', '*']) {
        return Err(refusal());
    }
    HeaderValue::try_from(canonical).map_err(|_| refusal())
}

pub(crate) fn duration(text: &str) -> Result<Duration, String> {
    let (number, unit): (&str, fn(u64) -> Duration) = match text.strip_suffix("ms") {
        Some(number) => (number, Duration::from_millis),
        None => (text.strip_suffix('s').unwrap_or(text), Duration::from_secs),
    };
    let number = number.trim().parse().ok().filter(|number| (1..=86_400_000).contains(number));
    number.map(unit).ok_or_else(|| "must be a time above 0, such as 30s or 500ms".to_owned())
}
