//! What the service counts, as Prometheus reads it. Every label has few values, whatever clients send.

use std::future;
use std::sync::LazyLock;
use std::sync::atomic::AtomicU64;
use std::time::Duration;

use axum::body::Body;
use axum::http::header::{CACHE_CONTROL, CONTENT_TYPE};
use axum::http::{HeaderValue, Method, Response, StatusCode};
use axum::response::IntoResponse;
use axum::routing::{Router, get};
use prometheus_client::encoding::{EncodeLabelSet, text};
use prometheus_client::metrics::counter::Counter;
use prometheus_client::metrics::family::Family;
use prometheus_client::metrics::gauge::Gauge;
use prometheus_client::metrics::histogram::Histogram;
use prometheus_client::metrics::info::Info;
use prometheus_client::registry::{Registry, Unit};

use super::heavy;
use super::problem::{Problem, ProblemKind};

/// The form that Prometheus asks for and this service writes.
const OPEN_METRICS: HeaderValue =
    HeaderValue::from_static("application/openmetrics-text; version=1.0.0; charset=utf-8");

/// Upper ends of the classes of latency, in seconds: quick calls take well under a millisecond, long ones seconds.
const LATENCY: [f64; 14] =
    [0.000_25, 0.000_5, 0.001, 0.002_5, 0.005, 0.01, 0.025, 0.05, 0.1, 0.25, 1.0, 2.5, 10.0, 30.0];

/// The label of requests that no route takes, whatever their address.
const NO_ROUTE: &str = "none";

/// The label of requests that were given up before their answer, in place of a status.
const CLIENT_LEFT: &str = "client_left";

#[derive(Debug, Clone, PartialEq, Eq, Hash, EncodeLabelSet)]
struct RequestLabels {
    method: &'static str,
    route: String,
    status: String,
}

macro_rules! labels {
    ($($(#[$doc:meta])* $set:ident, $label:ident: $($(#[$variant_doc:meta])* $name:ident = $text:literal),*;)*) => {$(
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum $set { $($(#[$variant_doc])* $name,)* }

        impl $set {
            const ALL: &'static [Self] = &[$(Self::$name,)*];

            fn label(self) -> Label {
                match self { $(Self::$name => [(stringify!($label), $text)],)* }
            }
        }
    )*};
}

labels! {
    /// Why a request or a connection was not served.
    Turned, reason:
        /// No key in force came with it.
        Unauthorized = "unauthorized",
        /// The client's share is used up.
        RateLimited = "rate_limited",
        /// All places are taken.
        Busy = "busy",
        /// Too many heavy calls wait.
        HeavyQueueFull = "heavy_queue_full",
        /// Too many connections are open.
        TooManyConnections = "too_many_connections";
    /// What a check of a specification came to.
    Verdict, verdict:
        /// Everything asked for is met.
        Pass = "pass",
        /// Something is not met.
        Fail = "fail",
        /// Something could not be judged.
        Incomplete = "incomplete";
    /// What became of a line of a stream.
    StreamLine, outcome:
        /// It was computed.
        Answered = "answered",
        /// It was no request that can be computed.
        Rejected = "rejected";
}

type Label = [(&'static str, &'static str); 1];

type Labeled = Family<Label, Counter>;

/// All that is counted, from the start of the process.
struct Metrics {
    registry: Registry,
    requests: Family<RequestLabels, Histogram>,
    in_flight: Gauge,
    connections: Gauge,
    heavy_waiting: Gauge,
    heavy_running: Gauge,
    turned_away: Labeled,
    stream_lines: Labeled,
    verdicts: Labeled,
    panics: Counter,
    log_lines_lost: Counter<u64, AtomicU64>,
}

/// Begins every series at 0: one that appears only with its first event hides that event from rates.
fn begin(counters: &Labeled, labels: impl Iterator<Item = Label>) {
    for label in labels {
        drop(counters.get_or_create(&label));
    }
}

static METRICS: LazyLock<Metrics> = LazyLock::new(Metrics::new);

impl Metrics {
    fn new() -> Self {
        let mut metrics = Self {
            registry: Registry::with_prefix("brakewright"),
            requests: Family::new_with_constructor(|| Histogram::new(LATENCY)),
            in_flight: Gauge::default(),
            connections: Gauge::default(),
            heavy_waiting: Gauge::default(),
            heavy_running: Gauge::default(),
            turned_away: Family::default(),
            stream_lines: Family::default(),
            verdicts: Family::default(),
            panics: Counter::default(),
            log_lines_lost: Counter::default(),
        };
        metrics.register();
        begin(&metrics.turned_away, Turned::ALL.iter().map(|turned| turned.label()));
        begin(&metrics.stream_lines, StreamLine::ALL.iter().map(|line| line.label()));
        begin(&metrics.verdicts, Verdict::ALL.iter().map(|verdict| verdict.label()));
        metrics
    }

    fn register(&mut self) {
        let Self { registry, .. } = self;
        let build = Info::new([("version", env!("CARGO_PKG_VERSION"))]);
        registry.register("build", "The program", build);
        registry.register_with_unit(
            "http_request_duration",
            "From the head of a request to the head of its answer",
            Unit::Seconds,
            self.requests.clone(),
        );
        registry.register(
            "http_requests_in_flight",
            "Requests without an answer yet",
            self.in_flight.clone(),
        );
        registry.register("connections", "Open connections", self.connections.clone());
        registry.register(
            "heavy_queue_depth",
            "Heavy calls that wait for a core",
            self.heavy_waiting.clone(),
        );
        registry.register(
            "heavy_running",
            "Heavy calls that have a core",
            self.heavy_running.clone(),
        );
        registry.register(
            "turned_away",
            "Requests and connections that were not served",
            self.turned_away.clone(),
        );
        registry.register("stream_lines", "Lines of streams", self.stream_lines.clone());
        registry.register("verdicts", "Verdicts of spec checks", self.verdicts.clone());
        registry.register("panics", "Handlers that panicked", self.panics.clone());
        registry.register(
            "log_lines_lost",
            "Log lines that nobody took in time",
            self.log_lines_lost.clone(),
        );
    }
}

/// Counts a request or connection that is not served.
pub fn count_turned_away(turned: Turned) {
    METRICS.turned_away.get_or_create(&turned.label()).inc();
}

/// Counts a request for which there is no place, and says so.
#[must_use]
pub(super) fn busy() -> Problem {
    count_turned_away(Turned::Busy);
    Problem::of_kind(ProblemKind::Overloaded)
}

/// Counts the verdict of a spec check.
pub fn count_verdict(verdict: Verdict) {
    METRICS.verdicts.get_or_create(&verdict.label()).inc();
}

/// Counts a line of a stream.
pub fn count_stream_line(line: StreamLine) {
    METRICS.stream_lines.get_or_create(&line.label()).inc();
}

/// Counts a handler that panicked.
pub(super) fn count_panic() {
    METRICS.panics.inc();
}

/// Says how many log lines were lost in all.
pub fn set_log_lines_lost(total: u64) {
    METRICS.log_lines_lost.inner().store(total, std::sync::atomic::Ordering::Relaxed);
}

/// Something that is there as long as this value.
#[derive(Debug)]
pub struct Present(Gauge);

impl Present {
    fn of(gauge: &Gauge) -> Self {
        gauge.inc();
        Self(gauge.clone())
    }

    /// An open connection.
    #[must_use]
    pub fn connection() -> Self {
        Self::of(&METRICS.connections)
    }

    /// A request in progress.
    #[must_use]
    pub fn request() -> Self {
        Self::of(&METRICS.in_flight)
    }
}

impl Drop for Present {
    fn drop(&mut self) {
        self.0.dec();
    }
}

/// Counts a request that is over; without a status it was given up.
pub(super) fn count_request(
    method: &Method,
    route: Option<&str>,
    status: Option<StatusCode>,
    lasted: Duration,
) {
    let labels = RequestLabels {
        method: known_method(method),
        route: route.unwrap_or(NO_ROUTE).to_owned(),
        status: status.as_ref().map_or(CLIENT_LEFT, StatusCode::as_str).to_owned(),
    };
    METRICS.requests.get_or_create(&labels).observe(lasted.as_secs_f64());
}

/// A method may be any word; those that no route takes share a label.
fn known_method(method: &Method) -> &'static str {
    [Method::GET, Method::HEAD, Method::POST, Method::OPTIONS]
        .iter()
        .position(|known| known == method)
        .and_then(|place| ["GET", "HEAD", "POST", "OPTIONS"].get(place).copied())
        .unwrap_or("other")
}

/// All counts as text.
#[must_use]
pub fn text() -> String {
    let (waiting, running) = heavy::load();
    METRICS.heavy_waiting.set(i64::try_from(waiting).unwrap_or(i64::MAX));
    METRICS.heavy_running.set(i64::try_from(running).unwrap_or(i64::MAX));
    let mut text = String::new();
    match text::encode(&mut text, &METRICS.registry) {
        Ok(()) => text,
        // Writing to a string cannot fail.
        Err(_) => String::new(),
    }
}

/// The routes of the listener for Prometheus; `refresh` is called before each answer.
pub fn routes(refresh: impl Fn() + Clone + Send + Sync + 'static) -> Router {
    let page = move || {
        refresh();
        let answer = ([(CONTENT_TYPE, OPEN_METRICS), (CACHE_CONTROL, NO_STORE)], text());
        future::ready(answer)
    };
    Router::new().route("/metrics", get(page)).fallback(nothing_else)
}

const NO_STORE: HeaderValue = HeaderValue::from_static("no-store");

async fn nothing_else() -> Response<Body> {
    Problem::new(ProblemKind::NotFound, "only `/metrics` is here").into_response()
}
