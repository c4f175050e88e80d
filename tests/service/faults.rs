//! Clients that are slow, broken or malicious: each is got rid of in bounded time, and the next honest one is served.

use std::io::{Read as _, Write as _};
use std::net::{Shutdown, TcpStream};
use std::time::{Duration, Instant};

use serde_json::{Value, json};

use super::process::{Service, exchange};

/// The patience of the service in these tests, and what they wait at most.
const PATIENCE: Duration = Duration::from_millis(500);
const LONGEST: Duration = Duration::from_secs(10);

const CALCULATION: &str = r#"{"pad": {"shape": "annular_sector", "inner_radius": {"value": 90, "unit": "mm"},
    "outer_radius": {"value": 135, "unit": "mm"}, "angle": {"value": 1, "unit": "rad"}},
    "lining": {"friction": {"nominal": 0.4}}, "clamp_force": {"value": 8, "unit": "kN"}}"#;

fn service() -> Service {
    Service::start(&[("BRAKEWRIGHT_REQUEST_TIMEOUT", "500ms"), ("BRAKEWRIGHT_LOG", "warn")])
}

fn connect(service: &Service) -> TcpStream {
    let stream = TcpStream::connect(&service.address).unwrap();
    stream.set_read_timeout(Some(LONGEST)).unwrap();
    stream.set_write_timeout(Some(LONGEST)).unwrap();
    stream
}

/// A `POST` of a calculation, up to its body.
fn head(length: usize, more: &str) -> String {
    format!(
        "POST /v1/pad-capacity HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\n\
         Content-Length: {length}\r\n{more}\r\n"
    )
}

/// The service still answers, and at once.
#[track_caller]
fn assert_honest_request_is_served(service: &Service) {
    let begin = Instant::now();
    let request = head(CALCULATION.len(), "Connection: close\r\n") + CALCULATION;
    let answer = exchange(&service.address, &request);
    assert!(answer.starts_with("HTTP/1.1 200 "), "{answer}");
    assert!(begin.elapsed() < Duration::from_secs(2), "{:?}", begin.elapsed());
}

/// Writes a text bytewise with pauses, until the other end has enough.
fn trickle(stream: &mut TcpStream, text: &str) {
    let begin = Instant::now();
    for byte in text.as_bytes() {
        if stream.write_all(&[*byte]).is_err() || begin.elapsed() > LONGEST {
            return;
        }
        std::thread::sleep(Duration::from_millis(20));
    }
}

/// What came until the end of the connection, however that was.
fn rest(stream: &mut TcpStream) -> String {
    rest_within(stream, LONGEST)
}

fn rest_within(stream: &mut TcpStream, longest: Duration) -> String {
    let begin = Instant::now();
    let mut bytes = Vec::new();
    let mut piece = vec![0; 64 * 1024];
    while let Ok(count @ 1..) = stream.read(&mut piece) {
        bytes.extend(&piece[..count]);
    }
    assert!(begin.elapsed() < longest, "the connection stays open");
    String::from_utf8_lossy(&bytes).into_owned()
}

/// The problem in an answer with a status.
#[track_caller]
fn problem(answer: &str, status: u16) -> Value {
    assert!(answer.starts_with(&format!("HTTP/1.1 {status} ")), "{answer}");
    serde_json::from_str(answer.split_once("\r\n\r\n").unwrap().1).unwrap()
}

#[test]
fn a_head_that_comes_slowly_is_not_waited_for() {
    let service = service();
    let mut stream = connect(&service);
    let begin = Instant::now();
    trickle(&mut stream, &head(10, &format!("X-Long: {}\r\n", "x".repeat(1000))));
    assert_eq!(rest(&mut stream), "");
    assert!(
        begin.elapsed() >= PATIENCE && begin.elapsed() < 10 * PATIENCE,
        "{:?}",
        begin.elapsed()
    );
    assert_honest_request_is_served(&service);
}

#[test]
fn a_body_that_comes_slowly_is_told_so() {
    let service = service();
    let mut stream = connect(&service);
    stream.write_all(head(1_000_000, "").as_bytes()).unwrap();
    let mut sender = stream.try_clone().unwrap();
    let sending = std::thread::spawn(move || trickle(&mut sender, &" ".repeat(1000)));
    let begin = Instant::now();
    let problem = problem(&rest(&mut stream), 408);
    assert_eq!(problem["type"], "/problems/request_timeout");
    assert!(begin.elapsed() < 10 * PATIENCE, "{:?}", begin.elapsed());
    assert_honest_request_is_served(&service);
    sending.join().unwrap();
}

#[test]
fn a_client_that_takes_nothing_of_its_answers_is_closed() {
    let service = Service::start_observed(&[
        ("BRAKEWRIGHT_REQUEST_TIMEOUT", "500ms"),
        ("BRAKEWRIGHT_LOG", "warn"),
    ]);
    let mut stream = connect(&service);
    // More than the buffers of the system take.
    for _ in 0..200 {
        stream.write_all(b"GET /openapi.json HTTP/1.1\r\nHost: x\r\n\r\n").unwrap();
    }
    let begin = Instant::now();
    while service.metric("brakewright_connections") < 0.5 {
        assert!(begin.elapsed() < LONGEST);
    }
    while service.metric("brakewright_connections") > 1.5 {
        assert!(begin.elapsed() < LONGEST, "the connection is kept");
        std::thread::sleep(Duration::from_millis(50));
    }
    assert!(begin.elapsed() < LONGEST / 2, "{:?}", begin.elapsed());
    assert_honest_request_is_served(&service);
}

#[test]
fn a_connection_that_is_closed_on_one_side_comes_to_its_end() {
    let service = service();
    let whole = head(CALCULATION.len(), "") + CALCULATION;
    for sent in [&whole, &whole[..whole.len() - 9], &whole[..40], ""] {
        let mut stream = connect(&service);
        stream.write_all(sent.as_bytes()).unwrap();
        stream.shutdown(Shutdown::Write).unwrap();
        let begin = Instant::now();
        let answer = rest(&mut stream);
        assert!(begin.elapsed() < 10 * PATIENCE, "{:?}", begin.elapsed());
        assert!(answer.is_empty() || answer.starts_with("HTTP/1.1 "), "{answer}");
    }
    assert_honest_request_is_served(&service);
}

#[test]
fn a_body_that_is_too_large_is_refused_readably_while_it_is_still_sent() {
    let service = service();
    let memory = service.memory_kib();
    let chunk = format!("{:x}\r\n{}\r\n", 65_536, " ".repeat(65_536));
    let declared = head(16 << 20, "");
    let chunked =
        declared.replace(&format!("Content-Length: {}", 16 << 20), "Transfer-Encoding: chunked");
    for (head, piece) in [(&declared, &" ".repeat(65_536)), (&chunked, &chunk)] {
        let mut stream = connect(&service);
        stream.write_all(head.as_bytes()).unwrap();
        let mut sender = stream.try_clone().unwrap();
        let piece = piece.clone();
        let sending = std::thread::spawn(move || {
            // Many clients look for the answer only when all is sent.
            (0..256).all(|_| sender.write_all(piece.as_bytes()).is_ok())
        });
        assert!(sending.join().unwrap(), "the connection broke");
        // The chunked body has no end: that of the connection must come anyway.
        let problem = problem(&rest(&mut stream), 413);
        assert_eq!(problem["type"], "/problems/payload_too_large");
        assert_honest_request_is_served(&service);
    }
    assert!(service.memory_kib() < memory + 16 * 1024, "{} KiB", service.memory_kib());
}

#[test]
fn zeros_that_unfold_are_refused_unopened() {
    let service = service();
    // The head of a gzip file (RFC 1952, 2.3), then nothing: it is not looked at.
    for coding in ["gzip", "deflate", "br", "zstd", "identity, gzip"] {
        let body = "\u{1f}\u{8}";
        let head =
            head(body.len(), &format!("Content-Encoding: {coding}\r\nConnection: close\r\n"));
        let problem = problem(&exchange(&service.address, &(head + body)), 415);
        assert_eq!(problem["type"], "/problems/unsupported_media_type");
    }
    assert_honest_request_is_served(&service);
}

#[test]
fn a_body_that_nests_deeply_is_refused() {
    let service = service();
    let depth = 100_000;
    for (body, status) in [
        ("[".repeat(depth), 400),
        ("{\"pad\":".repeat(depth), 400),
        (format!("{{\"pad\":{}{}}}", "[".repeat(depth), "]".repeat(depth)), 400),
        (format!("{{\"pad\":{}{}}}", "[".repeat(100), "]".repeat(100)), 422),
    ] {
        let request = head(body.len(), "Connection: close\r\n") + &body;
        problem(&exchange(&service.address, &request), status);
        assert_honest_request_is_served(&service);
    }
}

#[test]
fn a_thousand_errors_are_counted_and_a_hundred_listed() {
    let service = service();
    let mut body: Value = serde_json::from_str(CALCULATION).unwrap();
    for index in 0..1000 {
        body[format!("unknown_{index}")] = json!(index);
    }
    let body = body.to_string();
    let request = head(body.len(), "Connection: close\r\n") + &body;
    let begin = Instant::now();
    let problem = problem(&exchange(&service.address, &request), 422);
    assert!(begin.elapsed() < LONGEST / 5, "{:?}", begin.elapsed());
    assert_eq!(problem["error_count"], 1000);
    assert_eq!(problem["errors"].as_array().unwrap().len(), 100);
    assert_honest_request_is_served(&service);
}

#[test]
fn a_thousand_idle_connections_cost_little_and_are_closed() {
    const COUNT: u32 = 1000;
    rlimit::increase_nofile_limit(4096).unwrap();
    let service = Service::start_observed(&[
        ("BRAKEWRIGHT_REQUEST_TIMEOUT", "6s"),
        ("BRAKEWRIGHT_LOG", "warn"),
    ]);
    assert_honest_request_is_served(&service);
    let memory = service.memory_kib();
    let mut idle: Vec<TcpStream> = (0..COUNT).map(|_| connect(&service)).collect();
    // Half of them are of use before they lie idle.
    for stream in idle.iter_mut().step_by(2) {
        stream.write_all(b"GET /health/live HTTP/1.1\r\nHost: x\r\n\r\n").unwrap();
    }
    for stream in idle.iter_mut().step_by(2) {
        let mut answer = [0; 12];
        stream.read_exact(&mut answer).unwrap();
        assert_eq!(&answer, b"HTTP/1.1 200");
    }
    assert!(service.metric("brakewright_connections") >= f64::from(COUNT));
    assert_honest_request_is_served(&service);
    let each = (service.memory_kib() - memory.min(service.memory_kib())) / u64::from(COUNT);
    assert!(each <= 32, "{each} KiB for each");
    let begin = Instant::now();
    for stream in &mut idle {
        rest(stream);
    }
    assert!(begin.elapsed() < LONGEST, "{:?}", begin.elapsed());
    assert_honest_request_is_served(&service);
}

#[test]
fn a_log_that_nobody_reads_does_not_stop_the_service() {
    let service = Service::start_observed(&[("BRAKEWRIGHT_LOG_FORMAT", "json")]);
    let mut stream = connect(&service);
    // The pipe takes some hundred lines, the program some thousand.
    let request = "GET /health/live HTTP/1.1\r\nHost: x\r\n\r\n";
    let asked = 6_000;
    let mut sender = stream.try_clone().unwrap();
    let sending = std::thread::spawn(move || {
        for _ in 0..asked / 100 {
            sender.write_all(request.repeat(100).as_bytes()).unwrap();
        }
        sender.shutdown(Shutdown::Write).unwrap();
    });
    let answers = rest_within(&mut stream, 6 * LONGEST).matches("HTTP/1.1 200 ").count();
    sending.join().unwrap();
    assert!(answers > asked - 200, "{answers} answers");
    assert!(service.metric("brakewright_log_lines_lost_total") > 0.0);
    assert_honest_request_is_served(&service);
}
