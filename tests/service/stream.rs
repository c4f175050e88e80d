//! Streams over real connections: long ones, slow readers, clients that leave, that pause, that come together.

use std::io::{self, BufRead as _, BufReader, Read as _, Write as _};
use std::net::TcpStream;
use std::time::{Duration, Instant};

use serde_json::Value;

use super::process::Service;
use crate::api::v1::spec_checks::{SPEC_CHECKS, spec_check};

/// Far more than any answer takes here, so that a test fails instead of hanging.
const PATIENCE: Duration = Duration::from_mins(1);

/// A stream in progress.
struct Client {
    out: TcpStream,
    back: BufReader<TcpStream>,
    text: Vec<u8>,
}

impl Client {
    fn open(service: &Service) -> Self {
        let out = TcpStream::connect(&service.address).unwrap();
        out.set_read_timeout(Some(PATIENCE)).unwrap();
        out.set_nodelay(true).unwrap();
        let back = BufReader::new(out.try_clone().unwrap());
        let mut client = Self { out, back, text: Vec::new() };
        let head = format!(
            "POST {SPEC_CHECKS} HTTP/1.1\r\nhost: test\r\ncontent-type: application/x-ndjson\r\n\
             transfer-encoding: chunked\r\n\r\n"
        );
        client.out.write_all(head.as_bytes()).unwrap();
        client
    }

    fn send(&mut self, text: &str) {
        write!(self.out, "{:x}\r\n{text}\r\n", text.len()).unwrap();
    }

    fn finish(&mut self) {
        self.out.write_all(b"0\r\n\r\n").unwrap();
    }

    /// Reads the head of the answer.
    fn head(&mut self) {
        let mut line = String::new();
        self.back.read_line(&mut line).unwrap();
        assert!(line.starts_with("HTTP/1.1 200 "), "{line}");
        while line != "\r\n" {
            line.clear();
            self.back.read_line(&mut line).unwrap();
        }
    }

    /// Reads a piece of the body; false at its end.
    fn piece(&mut self) -> io::Result<bool> {
        let mut size = String::new();
        self.back.read_line(&mut size)?;
        let size = usize::from_str_radix(size.trim_end(), 16)
            .map_err(|_| io::Error::from(io::ErrorKind::UnexpectedEof))?;
        let start = self.text.len();
        self.text.resize(start + size + 2, 0);
        self.back.read_exact(&mut self.text[start..])?;
        self.text.truncate(start + size);
        Ok(size > 0)
    }

    /// The next line of the answer; none at its end.
    fn line(&mut self) -> io::Result<Option<Value>> {
        loop {
            if let Some(end) = self.text.iter().position(|byte| *byte == b'\n') {
                let line = serde_json::from_slice(&self.text[..end]).unwrap();
                self.text.drain(..=end);
                return Ok(Some(line));
            }
            if !self.piece()? {
                assert!(self.text.is_empty(), "the last line is not closed");
                return Ok(None);
            }
        }
    }

    /// Demands answers to so many lines, in order, and the end of the stream.
    fn expect(&mut self, count: u64) {
        for number in 1..=count {
            let line = self.line().unwrap().unwrap();
            assert_eq!(line["line"], number);
            assert_eq!(line["result"]["verdict"], "pass", "{line}");
        }
        let end = self.line().unwrap().unwrap();
        assert_eq!(end["end"]["lines"], count);
        assert!(self.line().unwrap().is_none());
    }
}

fn line() -> String {
    format!("{}\n", spec_check())
}

/// Memory of the service, MB.
fn memory(service: &Service) -> u64 {
    service.memory_kib() / 1024
}

/// Processor time that the service has used, in ticks of a hundredth of a second.
fn ticks(service: &Service) -> u64 {
    let status = std::fs::read_to_string(format!("/proc/{}/stat", service.id())).unwrap();
    let (_, fields) = status.rsplit_once(')').unwrap();
    let fields: Vec<u64> =
        fields.split_whitespace().skip(11).take(2).map(|field| field.parse().unwrap()).collect();
    fields[0] + fields[1]
}

#[test]
fn a_long_stream_takes_no_more_memory_than_a_short_one() {
    const LINES: u64 = 2000;
    let service = Service::start(&[]);
    let mut client = Client::open(&service);
    let mut sender = client.out.try_clone().unwrap();
    // 64 MB in all: it would be seen if it were kept.
    let padded = format!("{}{}\n", spec_check(), " ".repeat(32 * 1024));
    let sending = std::thread::spawn(move || {
        for _ in 0..LINES {
            write!(sender, "{:x}\r\n{padded}\r\n", padded.len()).unwrap();
        }
    });
    client.head();
    let mut early = 0;
    for number in 1..=LINES {
        assert_eq!(client.line().unwrap().unwrap()["line"], number);
        if number == LINES / 10 {
            early = memory(&service);
        }
    }
    let late = memory(&service);
    sending.join().unwrap();
    client.finish();
    assert_eq!(client.line().unwrap().unwrap()["end"]["pass"], LINES);
    assert!(late < early + 16, "{early} MB early, {late} MB late");
}

#[test]
fn an_answer_comes_before_the_next_line_is_sent() {
    let service = Service::start(&[]);
    let mut client = Client::open(&service);
    for number in 1..=3 {
        client.send(&line());
        if number == 1 {
            client.head();
        }
        assert_eq!(client.line().unwrap().unwrap()["line"], number);
    }
    client.finish();
    assert_eq!(client.line().unwrap().unwrap()["end"]["lines"], 3);
}

#[test]
fn a_client_that_takes_no_answers_is_not_read_on_and_hurts_no_other() {
    let service = Service::start(&[]);
    let mut greedy = Client::open(&service);
    greedy.out.set_write_timeout(Some(Duration::from_secs(2))).unwrap();
    // Lines of two bytes with answers of hundreds: what is not taken would grow without bound.
    let many = "3\n".repeat(32 * 1024);
    let mut sent = 0;
    let mut offer = || write!(greedy.out, "{:x}\r\n{many}\r\n", many.len());
    while sent < 1000 && offer().is_ok() {
        sent += 1;
    }
    assert!(sent < 1000, "64 MB were taken although no answer was");
    let mut other = Client::open(&service);
    for _ in 0..50 {
        other.send(&line());
    }
    other.finish();
    other.head();
    other.expect(50);
    let used = memory(&service);
    assert!(used < 200, "{used} MB");
}

#[test]
fn a_slow_reader_gets_every_answer() {
    let service = Service::start(&[]);
    let mut client = Client::open(&service);
    let text = line().repeat(100);
    client.send(&text);
    client.finish();
    client.head();
    for number in 1..=100 {
        std::thread::sleep(Duration::from_millis(5));
        assert_eq!(client.line().unwrap().unwrap()["line"], number);
    }
    assert_eq!(client.line().unwrap().unwrap()["end"]["lines"], 100);
}

#[test]
fn a_client_that_leaves_stops_its_work_and_hurts_no_other() {
    let service = Service::start(&[]);
    let mut other = Client::open(&service);
    other.send(&line());
    other.head();
    assert_eq!(other.line().unwrap().unwrap()["line"], 1);
    {
        let mut client = Client::open(&service);
        client.send(&line().repeat(1000));
        client.head();
        assert_eq!(client.line().unwrap().unwrap()["line"], 1);
        // Another one leaves in the middle of a line.
        let mut half = Client::open(&service);
        let text = line();
        half.send(&text[..text.len() / 2]);
    }
    std::thread::sleep(Duration::from_secs(1));
    let before = ticks(&service);
    std::thread::sleep(Duration::from_millis(500));
    let worked = ticks(&service) - before;
    assert!(worked < 15, "{worked} hundredths of a second of work for nobody");
    other.send(&line());
    other.finish();
    assert_eq!(other.line().unwrap().unwrap()["line"], 2);
    assert_eq!(other.line().unwrap().unwrap()["end"]["lines"], 2);
}

#[test]
fn two_clients_at_once_get_their_own_answers() {
    let service = Service::start(&[]);
    std::thread::scope(|scope| {
        for count in [60, 90] {
            let service = &service;
            scope.spawn(move || {
                let mut client = Client::open(service);
                client.send(&line().repeat(usize::try_from(count).unwrap()));
                client.finish();
                client.head();
                client.expect(count);
            });
        }
    });
}

#[test]
fn a_stream_may_last_longer_than_the_time_limit_but_not_pause_so_long() {
    let service = Service::start(&[("BRAKEWRIGHT_REQUEST_TIMEOUT", "1s")]);
    let mut lasting = Client::open(&service);
    let begin = Instant::now();
    let mut count = 0;
    while begin.elapsed() < Duration::from_millis(2500) {
        lasting.send(&line());
        count += 1;
        std::thread::sleep(Duration::from_millis(100));
    }
    lasting.finish();
    lasting.head();
    lasting.expect(count);

    let mut pausing = Client::open(&service);
    pausing.send(&line());
    pausing.head();
    assert_eq!(pausing.line().unwrap().unwrap()["line"], 1);
    let begin = Instant::now();
    // Cut off: neither a further line nor a proper end.
    assert!(pausing.line().is_err());
    assert!(begin.elapsed() < Duration::from_secs(20), "{:?}", begin.elapsed());
}
