//! The program as a process of its own, and what the system knows of it.

use std::fs;
use std::io::{BufRead as _, BufReader};
use std::net::SocketAddr;
use std::path::Path;
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};

use crate::keep_alive::Connection;

/// A running service, as it is by default but for its port; it does not outlive the bench.
pub(crate) struct Service {
    child: Child,
    pub(crate) address: SocketAddr,
    /// From its start until it said that it is ready.
    pub(crate) began_in: Duration,
}

impl Service {
    pub(crate) fn start() -> Self {
        let begun = Instant::now();
        let mut command = Command::new(env!("CARGO_BIN_EXE_brakewright"));
        command.env_clear().env("BRAKEWRIGHT_LISTEN", "127.0.0.1:0").stdin(Stdio::null());
        let mut child = command.stdout(Stdio::piped()).stderr(Stdio::null()).spawn().unwrap();
        let mut line = String::new();
        BufReader::new(child.stdout.take().unwrap()).read_line(&mut line).unwrap();
        let address = line.trim_end().strip_prefix("listening on http://").unwrap();
        let address = address.parse().unwrap();
        Connection::open(address)
            .exchange(b"GET /health/ready HTTP/1.1\r\nHost: localhost\r\n\r\n");
        Self { child, address, began_in: begun.elapsed() }
    }

    /// The memory that is in use, in bytes.
    pub(crate) fn memory(&self) -> f64 {
        let status = fs::read_to_string(format!("/proc/{}/status", self.child.id())).unwrap();
        let line = status.lines().find_map(|line| line.strip_prefix("VmRSS:")).unwrap();
        let kibibytes: f64 = line.trim().strip_suffix(" kB").unwrap().parse().unwrap();
        kibibytes * 1024.0
    }

    /// The time that its threads have had a core.
    pub(crate) fn core_time(&self) -> Duration {
        let threads = fs::read_dir(format!("/proc/{}/task", self.child.id())).unwrap();
        threads.map(|thread| core_time(&thread.unwrap().path())).sum()
    }
}

impl Drop for Service {
    fn drop(&mut self) {
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}

/// The time that a thread has had a core.
pub(crate) fn core_time(thread: &Path) -> Duration {
    // proc_pid_schedstat(5): the first number is the time on a core, in nanoseconds.
    let text = fs::read_to_string(thread.join("schedstat")).unwrap();
    Duration::from_nanos(text.split(' ').next().unwrap().parse().unwrap())
}
