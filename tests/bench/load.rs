//! How the service bears load, in one run on loopback: `cargo bench --bench load`, some ten seconds.
//!
//! The service and the floor run in one process, each on one thread behind the same code for connections. They are
//! driven in turns, and the medians over the turns are told, so that what else the machine does falls on both. The
//! core time of a thread does not count what others do meanwhile: its ratio is the steadier one. Inputs are invented.
#![expect(clippy::unwrap_used, reason = "a bench fails by panicking")]
#![expect(clippy::print_stdout, reason = "a bench prints what it found")]

mod floor;
mod keep_alive;
mod process;
#[expect(dead_code, reason = "requests of other benches stand beside those used here")]
mod request;

use std::fmt::Debug;
use std::fs;
use std::net::{Ipv4Addr, SocketAddr};
use std::path::{Path, PathBuf};
use std::sync::mpsc;
use std::thread;
use std::time::{Duration, Instant};

use axum::Router;
use axum::body::Bytes;
use brakewright::api::health::Readiness;
use brakewright::api::router;
use brakewright::api::v1::pad_capacity::PadCapacityRequest;
use brakewright::api::v1::spec_check::SpecCheckRequest;
use brakewright::server::serve_routes;
use serde::de::DeserializeOwned;
use serde_json::Value;
use tokio::net::TcpListener;
use tokio::runtime::Builder;
use utoipa::ToSchema;

use keep_alive::{Connection, Stream, drive, post};
use process::{Service, core_time};

const CONNECTIONS: usize = 4;
const TURNS: usize = 10;
const TURN: Duration = Duration::from_millis(150);
const STARTS: usize = 9;
const SINGLES: usize = 2000;
const STREAMS: usize = 4;
const IDLE_CONNECTIONS: u16 = 1000;

fn main() {
    // Whoever only builds and tries the benches does not want to wait.
    if !std::env::args().any(|argument| argument == "--bench") {
        return;
    }
    let load = fs::read_to_string("/proc/loadavg").unwrap_or_default();
    println!("load average before: {load}");
    against_floor::<PadCapacityRequest>("pad-capacity", &request::pad_capacity(), 0.8);
    against_floor::<SpecCheckRequest>("spec-check", &request::spec_check(), 0.5);
    start();
    let service = Service::start();
    memory(&service);
    capacity(&service, "pad-capacity", &request::pad_capacity());
    capacity(&service, "spec-check", &request::spec_check());
    singles_beside_a_stream(&service);
}

fn tell(what: &str, found: &str, goal: Option<(&str, bool)>) {
    let goal =
        goal.map(|(goal, met)| format!("goal {goal}: {}", if met { "met" } else { "MISSED" }));
    println!("{what:<48} {found:>16}   {}", goal.unwrap_or_default());
}

/// The value below which a share of all lie.
fn quantile(values: &mut [f64], share: f64) -> f64 {
    values.sort_by(f64::total_cmp);
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        clippy::cast_precision_loss,
        reason = "an index of a short list"
    )]
    let index = (share * (values.len() - 1) as f64).round() as usize;
    values[index]
}

fn median(mut values: Vec<f64>) -> f64 {
    quantile(&mut values, 0.5)
}

/// Routes served by a thread of their own.
struct Served {
    address: SocketAddr,
    thread: PathBuf,
}

impl Served {
    fn start(routes: Router) -> Self {
        let (tell, told) = mpsc::channel();
        thread::spawn(move || {
            let runtime = Builder::new_current_thread().enable_all().build().unwrap();
            runtime.block_on(async {
                let listener = TcpListener::bind((Ipv4Addr::LOCALHOST, 0)).await.unwrap();
                let thread = Path::new("/proc").join(fs::read_link("/proc/thread-self").unwrap());
                tell.send(Self { address: listener.local_addr().unwrap(), thread }).unwrap();
                serve_routes(listener, routes, floor::settings().request_timeout).await;
            });
        });
        told.recv().unwrap()
    }
}

/// Requests in a second, and in a second of core time.
struct Rates {
    wall: f64,
    core: f64,
}

/// Drives what tells its core time.
fn turn(
    connections: &mut [Connection],
    request: &[u8],
    time: Duration,
    core_time: impl Fn() -> Duration,
) -> Rates {
    let (before, begun) = (core_time(), Instant::now());
    let count = f64::from(drive(connections, request, time));
    let wall = count / begun.elapsed().as_secs_f64();
    Rates { wall, core: count / core_time().saturating_sub(before).as_secs_f64() }
}

fn against_floor<T>(endpoint: &str, body: &Value, goal: f64)
where
    T: DeserializeOwned + ToSchema + Debug + Send + 'static,
{
    let path = format!("/v1/{endpoint}");
    let request = post(&path, &body.to_string());
    let routes = router(&floor::settings(), Readiness::default());
    let asking = Builder::new_current_thread().enable_all().build().unwrap();
    let answer = asking.block_on(floor::send(&routes, &path, &Bytes::from(body.to_string())));
    let servers = [routes, floor::floor::<T>(&path, answer)].map(Served::start);
    let mut clients = servers
        .each_ref()
        .map(|server| [(); CONNECTIONS].map(|()| Connection::open(server.address)));
    let mut drive_both = || {
        let mut pairs = servers.iter().zip(&mut clients).map(|(server, connections)| {
            turn(connections, &request, TURN, || core_time(&server.thread))
        });
        (pairs.next().unwrap(), pairs.next().unwrap())
    };
    drive_both(); // warms up
    let turns: Vec<(Rates, Rates)> = (0..TURNS).map(|_| drive_both()).collect();
    let over = |value: &dyn Fn(&(Rates, Rates)) -> f64| median(turns.iter().map(value).collect());
    let ratio = over(&|(service, floor)| service.wall / floor.wall);
    let core_ratio = over(&|(service, floor)| service.core / floor.core);
    let rate = over(&|(service, _)| service.wall);
    let floor_rate = over(&|(_, floor)| floor.wall);
    tell(&format!("{endpoint}: requests a second, one thread"), &format!("{rate:.0}"), None);
    tell(&format!("{endpoint}: those of the floor"), &format!("{floor_rate:.0}"), None);
    let met = |ratio| Some((format!(">= {goal}"), ratio >= goal));
    for (name, ratio) in [("throughput", ratio), ("work per core time", core_ratio)] {
        let goal = met(ratio);
        let goal = goal.as_ref().map(|(text, met)| (text.as_str(), *met));
        tell(&format!("{endpoint}: {name}, service to floor"), &format!("{ratio:.2}"), goal);
    }
}

fn start() {
    let times = (0..STARTS).map(|_| Service::start().began_in.as_secs_f64() * 1e3).collect();
    let time = median(times);
    tell("start to ready", &format!("{time:.1} ms"), Some(("< 50 ms", time < 50.0)));
}

fn memory(service: &Service) {
    let idle = service.memory();
    let found = format!("{:.1} MB", idle / 1e6);
    tell("memory when idle", &found, Some(("< 20 MB", idle < 20e6)));
    rlimit::increase_nofile_limit(u64::from(IDLE_CONNECTIONS) + 200).unwrap();
    let check = post("/v1/spec-check", &request::spec_check().to_string());
    // What the first requests leave behind is not the connections'.
    let mut first = Connection::open(service.address);
    for _ in 0..200 {
        first.exchange(&check);
    }
    let warm = service.memory();
    tell("memory after 200 spec checks", &format!("{:.1} MB", warm / 1e6), None);
    let open = || {
        let mut connection = Connection::open(service.address);
        connection.exchange(&check);
        connection
    };
    let connections: Vec<Connection> = (0..IDLE_CONNECTIONS).map(|_| open()).collect();
    let each = (service.memory() - warm) / f64::from(IDLE_CONNECTIONS);
    tell("memory of an idle connection, used once", &format!("{:.1} kB", each / 1e3), None);
    drop(connections);
}

/// What the program as it is shipped answers in a second of core time, all its threads and its log counted.
fn capacity(service: &Service, endpoint: &str, body: &Value) {
    let request = post(&format!("/v1/{endpoint}"), &body.to_string());
    let mut connections = [(); 2 * CONNECTIONS].map(|()| Connection::open(service.address));
    let turns = (0..TURNS).map(|_| turn(&mut connections, &request, TURN, || service.core_time()));
    let rate = median(turns.map(|rates| rates.core).collect());
    tell(&format!("{endpoint}: requests per second and core"), &format!("{rate:.0}"), None);
}

/// How long single spec checks take one after the other, while nothing else is asked and while a client streams
/// spec checks and takes the answers as fast as they come.
fn singles_beside_a_stream(service: &Service) {
    let (mut quiet, mut beside) = (Vec::new(), Vec::new());
    for _ in 0..STREAMS {
        quiet.extend(latencies(service, SINGLES / STREAMS));
        let stream = Stream::start(service.address, &request::spec_check().to_string());
        beside.extend(latencies(service, SINGLES / STREAMS));
        stream.end();
    }
    for (name, times) in [("quiet", &mut quiet), ("beside a stream", &mut beside)] {
        let (half, last) = (quantile(times, 0.5), quantile(times, 0.99));
        tell(&format!("single spec check, {name}: p50"), &format!("{half:.2} ms"), None);
        tell(&format!("single spec check, {name}: p99"), &format!("{last:.2} ms"), None);
    }
    let ratio = quantile(&mut beside, 0.99) / quantile(&mut quiet, 0.99);
    tell(
        "p99 beside a stream to p99 in quiet",
        &format!("{ratio:.2}"),
        Some(("<= 3", ratio <= 3.0)),
    );
}

/// Times of single spec checks in milliseconds.
fn latencies(service: &Service, count: usize) -> Vec<f64> {
    let check = post("/v1/spec-check", &request::spec_check().to_string());
    let mut connection = Connection::open(service.address);
    let time = |_| {
        let begun = Instant::now();
        connection.exchange(&check);
        begun.elapsed().as_secs_f64() * 1e3
    };
    (0..count).map(time).collect()
}
