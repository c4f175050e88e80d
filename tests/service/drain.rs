//! Told to stop, the service loses nothing that it has taken.

use std::io::{Read as _, Write as _};
use std::net::TcpStream;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::{Duration, Instant};

use super::process::Service;

const CALCULATION: &str = r#"{"pad": {"shape": "annular_sector", "inner_radius": {"value": 90, "unit": "mm"},
    "outer_radius": {"value": 135, "unit": "mm"}, "angle": {"value": 1, "unit": "rad"}},
    "lining": {"friction": {"nominal": 0.4}}, "clamp_force": {"value": 8, "unit": "kN"}}"#;

fn request() -> String {
    format!(
        "POST /v1/pad-capacity HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\n\
         Content-Length: {}\r\n\r\n{CALCULATION}",
        CALCULATION.len()
    )
}

fn connect(address: &str) -> TcpStream {
    let stream = TcpStream::connect(address).unwrap();
    stream.set_read_timeout(Some(Duration::from_secs(10))).unwrap();
    stream
}

/// What comes until the service closes the connection.
fn rest(stream: &mut TcpStream) -> String {
    let mut answer = String::new();
    stream.read_to_string(&mut answer).unwrap();
    answer
}

#[test]
fn a_hundred_requests_in_progress_are_all_answered() {
    let service = Service::start(&[("BRAKEWRIGHT_LOG", "warn")]);
    let request = request();
    let (first, second) = request.split_at(request.len() - 20);
    let mut clients: Vec<TcpStream> = (0..100).map(|_| connect(&service.address)).collect();
    for client in &mut clients {
        client.write_all(first.as_bytes()).unwrap();
    }
    std::thread::sleep(Duration::from_millis(200));
    service.signal("TERM");
    let begin = Instant::now();
    while TcpStream::connect(&service.address).is_ok() {
        assert!(begin.elapsed() < Duration::from_secs(10), "new clients are still taken");
        std::thread::sleep(Duration::from_millis(20));
    }
    for client in &mut clients {
        client.write_all(second.as_bytes()).unwrap();
    }
    for client in &mut clients {
        let answer = rest(client);
        assert!(answer.starts_with("HTTP/1.1 200 "), "{answer}");
        assert!(answer.contains("connection: close\r\n"), "{answer}");
    }
    assert_eq!(service.end().0, Some(0));
}

/// The head of an answer; its body is left out of account by the length that the head gives.
fn answer(stream: &mut TcpStream) -> String {
    let mut head = Vec::new();
    let mut byte = [0];
    while !head.ends_with(b"\r\n\r\n") {
        stream.read_exact(&mut byte).unwrap();
        head.push(byte[0]);
    }
    let head = String::from_utf8(head).unwrap();
    let length = head.split_once("content-length: ").unwrap().1.split("\r\n").next().unwrap();
    stream.read_exact(&mut vec![0; length.parse().unwrap()]).unwrap();
    head
}

/// As balancers do, each client keeps its connection until an answer says that it was the last.
#[test]
fn no_request_is_lost_that_comes_at_the_moment_of_the_signal() {
    let service = Service::start(&[("BRAKEWRIGHT_LOG", "warn")]);
    let answered = AtomicUsize::new(0);
    let request = request();
    std::thread::scope(|scope| {
        for _ in 0..8 {
            scope.spawn(|| {
                let mut stream = connect(&service.address);
                loop {
                    stream.write_all(request.as_bytes()).unwrap();
                    let head = answer(&mut stream);
                    assert!(head.starts_with("HTTP/1.1 200 "), "{head}");
                    answered.fetch_add(1, Ordering::Relaxed);
                    if head.contains("connection: close\r\n") {
                        return;
                    }
                }
            });
        }
        let begin = Instant::now();
        while answered.load(Ordering::Relaxed) < 100 {
            assert!(begin.elapsed() < Duration::from_secs(10));
            std::thread::sleep(Duration::from_millis(1));
        }
        service.signal("TERM");
    });
    assert_eq!(service.end().0, Some(0));
}

#[test]
fn a_leaving_service_is_not_ready_but_answers_and_closes_what_is_idle() {
    let service = Service::start(&[("BRAKEWRIGHT_LOG", "warn")]);
    let mut idle = connect(&service.address);
    idle.write_all(b"GET /health/live HTTP/1.1\r\nHost: x\r\n\r\n").unwrap();
    let mut start = [0; 12];
    idle.read_exact(&mut start).unwrap();
    let mut asked = connect(&service.address);
    asked.write_all(b"GET /health/ready HTTP/1.1\r\nHost: x\r\n").unwrap();
    std::thread::sleep(Duration::from_millis(100));
    let begin = Instant::now();
    service.signal("TERM");
    rest(&mut idle);
    asked.write_all(b"\r\n").unwrap();
    let answer = rest(&mut asked);
    assert!(answer.starts_with("HTTP/1.1 503 ") && answer.contains("/problems/draining"));
    assert!(begin.elapsed() < Duration::from_secs(5), "{:?}", begin.elapsed());
    assert_eq!(service.end().0, Some(0));
}
