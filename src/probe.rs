//! The container's health check: asks the service on the configured address whether it is ready.

use std::io::{Read as _, Write as _};
use std::net::{IpAddr, Ipv4Addr, Ipv6Addr, SocketAddr, TcpStream};
use std::time::{Duration, Instant};

/// The whole question may take this long.
const TIME_LIMIT: Duration = Duration::from_secs(2);

/// The status line of a ready service fits into this many bytes.
const HEAD: usize = 64;

/// Asks `GET /health/ready`; an unspecified address means this machine.
///
/// # Errors
/// A sentence that says why the service is not ready.
pub fn probe(listen: SocketAddr) -> Result<(), String> {
    let address = reachable(listen);
    let head = ask(address).map_err(|error| format!("no answer from {address}: {error}"))?;
    if head.starts_with("HTTP/1.1 200 ") {
        return Ok(());
    }
    let line = head.lines().next().unwrap_or_default();
    Err(format!("the service on {address} is not ready: it answered `{line}`"))
}

fn reachable(listen: SocketAddr) -> SocketAddr {
    if !listen.ip().is_unspecified() {
        return listen;
    }
    let ip: IpAddr =
        if listen.is_ipv4() { Ipv4Addr::LOCALHOST.into() } else { Ipv6Addr::LOCALHOST.into() };
    SocketAddr::new(ip, listen.port())
}

/// The first bytes of the answer.
fn ask(address: SocketAddr) -> std::io::Result<String> {
    let end = Instant::now() + TIME_LIMIT;
    let mut stream = TcpStream::connect_timeout(&address, TIME_LIMIT)?;
    stream.set_write_timeout(Some(left(end)?))?;
    write!(stream, "GET /health/ready HTTP/1.1\r\nHost: {address}\r\nConnection: close\r\n\r\n")?;
    let mut head = Vec::new();
    while head.len() < HEAD {
        stream.set_read_timeout(Some(left(end)?))?;
        let mut chunk = [0; HEAD];
        let read = stream.read(&mut chunk)?;
        if read == 0 {
            break;
        }
        head.extend(chunk.iter().take(read));
    }
    Ok(String::from_utf8_lossy(&head).into_owned())
}

/// The time left; none is an error, because a socket takes no zero limit.
fn left(end: Instant) -> std::io::Result<Duration> {
    end.checked_duration_since(Instant::now())
        .filter(|left| !left.is_zero())
        .ok_or_else(|| std::io::ErrorKind::TimedOut.into())
}
