//! A client that costs little: requests written once, on connections that stay open.

use std::io::{Read as _, Write as _};
use std::net::{SocketAddr, TcpStream};
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::thread::{self, JoinHandle};
use std::time::{Duration, Instant};

/// Longer than any answer takes, so that a bench that waits in vain ends.
const PATIENCE: Duration = Duration::from_secs(10);

/// A request as it is written.
pub(crate) fn post(path: &str, body: &str) -> Vec<u8> {
    let length = body.len();
    let head = format!(
        "POST {path} HTTP/1.1\r\nHost: localhost\r\nContent-Type: application/json\r\nContent-Length: {length}\r\n\r\n"
    );
    [head.as_bytes(), body.as_bytes()].concat()
}

/// A connection on which one request at a time is answered.
pub(crate) struct Connection {
    stream: TcpStream,
    read: Vec<u8>,
}

impl Connection {
    pub(crate) fn open(address: SocketAddr) -> Self {
        let stream = TcpStream::connect(address).unwrap();
        stream.set_nodelay(true).unwrap();
        stream.set_read_timeout(Some(PATIENCE)).unwrap();
        stream.set_write_timeout(Some(PATIENCE)).unwrap();
        Self { stream, read: Vec::new() }
    }

    pub(crate) fn send(&mut self, request: &[u8]) {
        self.stream.write_all(request).unwrap();
    }

    /// Takes an answer whose head tells its length, and demands that it is 200.
    pub(crate) fn take(&mut self) {
        self.read.clear();
        while self.missing() > 0 {
            let mut piece = vec![0; 32 * 1024];
            let count = self.stream.read(&mut piece).unwrap();
            assert!(count > 0, "the connection was closed");
            self.read.extend_from_slice(&piece[..count]);
        }
    }

    /// How many bytes of the answer are known to be missing.
    fn missing(&self) -> usize {
        let Some(end) = self.read.windows(4).position(|window| window == b"\r\n\r\n") else {
            return 1;
        };
        let head = str::from_utf8(&self.read[..end]).unwrap();
        assert!(head.starts_with("HTTP/1.1 200 "), "{head}");
        let length = head.lines().find_map(|line| {
            let (name, value) = line.split_once(':')?;
            name.eq_ignore_ascii_case("content-length").then(|| value.trim().parse().unwrap())
        });
        let length: usize = length.unwrap();
        (end + 4 + length).saturating_sub(self.read.len())
    }

    pub(crate) fn exchange(&mut self, request: &[u8]) {
        self.send(request);
        self.take();
    }
}

/// Sends the same request for a while, always one in progress on each connection; gives how many were answered.
pub(crate) fn drive(connections: &mut [Connection], request: &[u8], time: Duration) -> u32 {
    let begun = Instant::now();
    let mut count = 0;
    for connection in &mut *connections {
        connection.send(request);
    }
    while begun.elapsed() < time {
        for connection in &mut *connections {
            connection.take();
            connection.send(request);
            count += 1;
        }
    }
    for connection in connections {
        connection.take();
        count += 1;
    }
    count
}

/// A stream of lines that goes on until it is ended; its answers are read and dropped.
pub(crate) struct Stream {
    ended: Arc<AtomicBool>,
    writer: JoinHandle<()>,
    reader: JoinHandle<String>,
}

impl Stream {
    pub(crate) fn start(address: SocketAddr, line: &str) -> Self {
        let mut stream = Connection::open(address).stream;
        let mut answers = stream.try_clone().unwrap();
        let ended = Arc::new(AtomicBool::new(false));
        let chunk = format!("{:x}\r\n{line}\n\r\n", line.len() + 1);
        let head = "POST /v1/spec-checks HTTP/1.1\r\nHost: localhost\r\nConnection: close\r\n\
            Content-Type: application/x-ndjson\r\nTransfer-Encoding: chunked\r\n\r\n";
        let told = Arc::clone(&ended);
        let writer = thread::spawn(move || {
            stream.write_all(head.as_bytes()).unwrap();
            while !told.load(Ordering::Relaxed) {
                stream.write_all(chunk.as_bytes()).unwrap();
            }
            stream.write_all(b"0\r\n\r\n").unwrap();
        });
        let reader = thread::spawn(move || {
            let (mut last, mut piece) = (Vec::new(), vec![0; 64 * 1024]);
            loop {
                let count = answers.read(&mut piece).unwrap();
                if count == 0 {
                    return String::from_utf8_lossy(&last).into_owned();
                }
                last.extend_from_slice(&piece[..count]);
                last.drain(..last.len().saturating_sub(4096));
            }
        });
        // Singles are only measured once lines are on their way.
        thread::sleep(Duration::from_millis(100));
        Self { ended, writer, reader }
    }

    /// Ends the stream and demands that its last line says so.
    pub(crate) fn end(self) {
        self.ended.store(true, Ordering::Relaxed);
        self.writer.join().unwrap();
        let last = self.reader.join().unwrap();
        assert!(last.contains("\"end\""), "{last}");
    }
}
