//! Keys of a running service, and the warning of one that has none.

use std::fs;
use std::path::PathBuf;
use std::time::{Duration, Instant};

use super::process::{Service, exchange};

/// SHA-256 of `abc` (FIPS 180-4, seen in its published test vectors) and of the empty text (from memory).
const ABC: &str = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";
const EMPTY: &str = "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855";

/// A file that does not outlive its test.
struct KeyFile(PathBuf);

impl KeyFile {
    fn new(name: &str, text: &str) -> Self {
        let path = std::env::temp_dir().join(format!("brakewright-{}-{name}", std::process::id()));
        fs::write(&path, text).unwrap();
        Self(path)
    }
}

impl Drop for KeyFile {
    fn drop(&mut self) {
        let _ = fs::remove_file(&self.0);
    }
}

/// The status of a request with the key `abc`.
fn status(service: &Service) -> String {
    let request = "GET /v1/units HTTP/1.1\r\nHost: x\r\nAuthorization: Bearer abc\r\nConnection: close\r\n\r\n";
    let answer = exchange(&service.address, request);
    answer.split(' ').nth(1).unwrap().to_owned()
}

fn wait_for(service: &Service, expected: &str, longest: Duration) {
    let begin = Instant::now();
    while status(service) != expected {
        assert!(begin.elapsed() < longest, "still {}", status(service));
        std::thread::sleep(Duration::from_millis(20));
    }
}

#[test]
fn keys_are_read_again_when_the_file_changes_or_on_a_signal_and_a_fault_changes_nothing() {
    let file = KeyFile::new("keys", ABC);
    let path = file.0.to_str().unwrap();
    let service = Service::start(&[("BRAKEWRIGHT_API_KEYS_FILE", path)]);
    assert_eq!(status(&service), "200");
    fs::write(path, EMPTY).unwrap();
    wait_for(&service, "401", Duration::from_secs(8));
    fs::write(path, ABC).unwrap();
    service.signal("HUP");
    wait_for(&service, "200", Duration::from_secs(1));
    fs::write(path, "not a key: hunter2").unwrap();
    service.signal("HUP");
    std::thread::sleep(Duration::from_millis(300));
    assert_eq!(status(&service), "200");
    fs::remove_file(path).unwrap();
    service.signal("HUP");
    std::thread::sleep(Duration::from_millis(300));
    assert_eq!(status(&service), "200");
    service.signal("TERM");
    let (code, log) = service.end();
    assert_eq!(code, Some(0));
    assert!(log.matches("API keys not loaded; the old ones stay in force").count() >= 2, "{log}");
    assert!(log.contains("line 1: not the SHA-256") && !log.contains("hunter2"), "{log}");
    assert!(log.contains("API keys loaded"), "{log}");
}

#[test]
fn a_signal_to_read_keys_does_not_end_a_service_without_any() {
    let service = Service::start(&[]);
    service.signal("HUP");
    std::thread::sleep(Duration::from_millis(100));
    assert_eq!(status(&service), "200");
}

#[test]
fn only_a_service_that_others_can_reach_without_a_key_warns() {
    let file = KeyFile::new("warning", ABC);
    let path = file.0.to_str().unwrap();
    for (listen, keys, warns) in
        [("0.0.0.0:0", "", true), ("0.0.0.0:0", path, false), ("127.0.0.1:0", "", false)]
    {
        let settings = [("BRAKEWRIGHT_LISTEN", listen), ("BRAKEWRIGHT_API_KEYS_FILE", keys)];
        let service = Service::start_as_set(&settings);
        service.signal("TERM");
        let log = service.end().1;
        let warnings = log.lines().filter(|line| line.contains("no API keys are set")).count();
        assert_eq!(warnings, usize::from(warns), "{listen} {keys}: {log}");
    }
}
