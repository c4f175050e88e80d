//! The program from outside: starting, announcing, probing, stopping.

use std::io::{BufRead as _, BufReader, Read as _, Write as _};
use std::net::TcpStream;
use std::process::{Child, Command, Output, Stdio};
use std::time::{Duration, Instant};

/// The program without the settings of whoever runs the tests.
fn program(arguments: &[&str], settings: &[(&str, &str)]) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_brakewright"));
    for (name, _) in std::env::vars_os() {
        if name.to_string_lossy().starts_with("BRAKEWRIGHT_") {
            command.env_remove(name);
        }
    }
    command.args(arguments).envs(settings.iter().copied()).stdin(Stdio::null());
    command
}

fn run(arguments: &[&str], settings: &[(&str, &str)]) -> Output {
    program(arguments, settings).output().unwrap()
}

/// A running service; it does not outlive the test.
pub(super) struct Service {
    child: Child,
    pub(super) address: String,
    observed: String,
}

impl Service {
    /// On a free port of loopback.
    pub(super) fn start(settings: &[(&str, &str)]) -> Self {
        Self::start_as_set(&[&[("BRAKEWRIGHT_LISTEN", "127.0.0.1:0")], settings].concat())
    }

    /// With metrics on another free port.
    pub(super) fn start_observed(settings: &[(&str, &str)]) -> Self {
        let free = std::net::TcpListener::bind("127.0.0.1:0").unwrap().local_addr().unwrap();
        let observed = free.to_string();
        let observe = [("BRAKEWRIGHT_METRICS_LISTEN", observed.as_str())];
        let mut service = Self::start(&[&observe, settings].concat());
        service.observed = observed;
        service
    }

    pub(super) fn start_as_set(settings: &[(&str, &str)]) -> Self {
        let mut command = program(&[], settings);
        let mut child = command.stdout(Stdio::piped()).stderr(Stdio::piped()).spawn().unwrap();
        let mut line = String::new();
        BufReader::new(child.stdout.take().unwrap()).read_line(&mut line).unwrap();
        let address = line.trim_end().strip_prefix("listening on http://").unwrap().to_owned();
        Self { child, address, observed: String::new() }
    }

    /// The value of a metric.
    pub(super) fn metric(&self, series: &str) -> f64 {
        let request = "GET /metrics HTTP/1.1\r\nHost: x\r\nConnection: close\r\n\r\n";
        let text = exchange(&self.observed, request);
        let line = text.lines().find_map(|line| line.strip_prefix(series)?.strip_prefix(' '));
        line.unwrap_or_else(|| panic!("no {series} in\n{text}")).parse().unwrap()
    }

    /// The memory of the process that is in use.
    pub(super) fn memory_kib(&self) -> u64 {
        let status = std::fs::read_to_string(format!("/proc/{}/status", self.child.id())).unwrap();
        let line = status.lines().find_map(|line| line.strip_prefix("VmRSS:")).unwrap();
        line.trim().strip_suffix(" kB").unwrap().parse().unwrap()
    }

    /// The process, for `/proc`.
    pub(super) fn id(&self) -> u32 {
        self.child.id()
    }

    pub(super) fn signal(&self, name: &str) {
        let id = self.child.id().to_string();
        assert!(Command::new("kill").args(["-s", name, &id]).status().unwrap().success());
    }

    /// Waits for the end; gives the exit code and the log.
    pub(super) fn end(mut self) -> (Option<i32>, String) {
        let deadline = Instant::now() + Duration::from_secs(10);
        while self.child.try_wait().unwrap().is_none() {
            assert!(Instant::now() < deadline, "the program does not stop");
            std::thread::sleep(Duration::from_millis(5));
        }
        let mut log = String::new();
        self.child.stderr.take().unwrap().read_to_string(&mut log).unwrap();
        (self.child.wait().unwrap().code(), log)
    }
}

impl Drop for Service {
    fn drop(&mut self) {
        // Fails if it has ended already, which is the rule.
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}

pub(super) fn exchange(address: &str, request: &str) -> String {
    let mut stream = TcpStream::connect(address).unwrap();
    stream.set_read_timeout(Some(Duration::from_secs(5))).unwrap();
    stream.write_all(request.as_bytes()).unwrap();
    let mut answer = String::new();
    stream.read_to_string(&mut answer).unwrap();
    answer
}

#[test]
fn a_service_announces_itself_is_probed_and_stops_when_told() {
    for signal in ["TERM", "INT"] {
        let service = Service::start(&[]);
        let probe = run(&["probe"], &[("BRAKEWRIGHT_LISTEN", &service.address)]);
        assert_eq!(probe.status.code(), Some(0), "{probe:?}");
        service.signal(signal);
        assert_eq!(service.end().0, Some(0), "{signal}");
    }
}

#[test]
fn a_probe_reaches_a_service_that_listens_everywhere_by_loopback() {
    let service = Service::start(&[]);
    let port = service.address.rsplit_once(':').unwrap().1;
    let probe = run(&["probe"], &[("BRAKEWRIGHT_LISTEN", &format!("0.0.0.0:{port}"))]);
    assert_eq!(probe.status.code(), Some(0), "{probe:?}");
}

#[test]
fn a_probe_of_nothing_fails_with_a_sentence() {
    // Bound and dropped: the port was free a moment ago.
    let free = std::net::TcpListener::bind("127.0.0.1:0").unwrap().local_addr().unwrap();
    let probe = run(&["probe"], &[("BRAKEWRIGHT_LISTEN", &free.to_string())]);
    assert_eq!(probe.status.code(), Some(1));
    let said = String::from_utf8_lossy(&probe.stderr);
    assert!(said.starts_with(&format!("no answer from {free}: ")), "{said}");
}

#[test]
fn a_request_in_progress_is_finished_before_the_end() {
    let service = Service::start(&[]);
    let mut stream = TcpStream::connect(&service.address).unwrap();
    stream.set_read_timeout(Some(Duration::from_secs(5))).unwrap();
    stream.write_all(b"GET /health/live HTTP/1.1\r\nHost: x\r\n").unwrap();
    std::thread::sleep(Duration::from_millis(200));
    service.signal("TERM");
    std::thread::sleep(Duration::from_millis(200));
    stream.write_all(b"Connection: close\r\n\r\n").unwrap();
    let mut answer = String::new();
    stream.read_to_string(&mut answer).unwrap();
    assert!(answer.starts_with("HTTP/1.1 200 "), "{answer}");
    assert_eq!(service.end().0, Some(0));
}

#[test]
fn a_client_that_never_finishes_does_not_hold_the_end_beyond_the_drain_time() {
    let service = Service::start(&[("BRAKEWRIGHT_DRAIN_TIMEOUT", "300ms")]);
    let mut stream = TcpStream::connect(&service.address).unwrap();
    stream.write_all(b"GET /health/live HTTP/1.1\r\nHost: x\r\n").unwrap();
    std::thread::sleep(Duration::from_millis(200));
    service.signal("TERM");
    let (code, log) = service.end();
    assert_eq!(code, Some(0));
    assert!(log.contains("the drain time is over"), "{log}");
}

#[test]
fn a_request_is_one_line_of_the_log() {
    let service = Service::start(&[("BRAKEWRIGHT_LOG_FORMAT", "json")]);
    let trace = "0af7651916cd43dd8448eb211c80319c"; // the example of W3C Trace Context, seen
    let request = format!(
        "GET /problems/internal?secret=1 HTTP/1.1\r\nHost: x\r\nx-request-id: r-1\r\n\
         traceparent: 00-{trace}-b7ad6b7169203331-01\r\nAuthorization: Bearer my-secret\r\n\
         Connection: close\r\n\r\n"
    );
    let answer = exchange(&service.address, &request);
    assert!(answer.starts_with("HTTP/1.1 200 "));
    service.signal("TERM");
    let log = service.end().1;
    let lines: Vec<serde_json::Value> =
        log.lines().map(|line| serde_json::from_str(line).unwrap()).collect();
    let answered: Vec<_> = lines.iter().filter(|line| line["message"] == "answered").collect();
    let [line] = answered.as_slice() else { panic!("{log}") };
    assert_eq!(line["method"], "GET");
    assert_eq!(line["route"], "/problems/{kind}");
    assert_eq!(line["status"], 200);
    assert_eq!(line["request_id"], "r-1");
    assert_eq!(line["trace_id"], trace);
    let span = line["span_id"].as_str().unwrap();
    assert!(answer.contains(&format!("traceparent: 00-{trace}-{span}-01\r\n")), "{answer}");
    assert!(line["duration_ms"].is_number());
    assert!(!log.contains("secret"), "{log}");
}

#[test]
fn a_wrong_setting_stops_the_start_with_a_sentence() {
    let cases = [
        ("BRAKEWRIGHT_LISTEN", "localhost", "must be an IP address and a port"),
        ("BRAKEWRIGHT_LOG", "a=b=c", "must be a level"),
        ("BRAKEWRIGHT_LOG_FORMAT", "xml", "possible values: text, json"),
        ("BRAKEWRIGHT_ALLOWED_ORIGINS", "*", "must be an origin"),
        ("BRAKEWRIGHT_ALLOWED_ORIGINS", "https://a.example/", "must be an origin"),
        ("BRAKEWRIGHT_MAX_BODY_BYTES", "0", "0 is not in"),
        ("BRAKEWRIGHT_REQUEST_TIMEOUT", "soon", "must be a time above 0"),
        ("BRAKEWRIGHT_REQUEST_TIMEOUT", "0s", "must be a time above 0"),
        ("BRAKEWRIGHT_MAX_CONCURRENCY", "-1", "invalid value"),
        ("BRAKEWRIGHT_DRAIN_TIMEOUT", "20m", "must be a time above 0"),
        ("BRAKEWRIGHT_API_KEYS_FILE", "/nowhere/keys", "must be a file of API keys: it cannot be"),
        ("BRAKEWRIGHT_API_KEYS_FILE", "/dev/null", "it holds no key"),
        ("BRAKEWRIGHT_API_KEYS_FILE", "/dev/zero", "it is longer than 1048576 bytes"),
        ("BRAKEWRIGHT_RATE_LIMIT", "5/s", "invalid digit"),
        ("BRAKEWRIGHT_METRICS_LISTEN", "9090", "must be an IP address and a port"),
        ("BRAKEWRIGHT_APIKEYS", "keys", "BRAKEWRIGHT_APIKEYS is not a setting of this version"),
    ];
    for (name, value, sentence) in cases {
        let output = run(&[], &[(name, value)]);
        let said = String::from_utf8_lossy(&output.stderr);
        assert_eq!(output.status.code(), Some(2), "{name}={value}: {said}");
        assert!(said.contains(sentence), "{name}={value}: {said}");
        assert!(said.contains(name), "{name}={value}: {said}");
        assert!(output.stdout.is_empty());
    }
}

#[test]
fn all_wrong_settings_are_told_at_once() {
    let wrong = [
        ("BRAKEWRIGHT_LISTEN", "everywhere"),
        ("BRAKEWRIGHT_RATE_LIMIT", "many"),
        ("BRAKEWRIGHT_LOG_FORMAT", "xml"),
        ("BRAKEWRIGHT_KEYS", "secret"),
    ];
    for arguments in [&["--drain-timeout", "0s"][..], &["--drain-timeout=0s", "serve"]] {
        let output = run(arguments, &wrong);
        let said = String::from_utf8_lossy(&output.stderr);
        assert_eq!(output.status.code(), Some(2), "{said}");
        for (name, _) in wrong {
            assert_eq!(said.matches(name).count(), 1, "{name}: {said}");
        }
        assert!(said.contains("--drain-timeout") && !said.contains("DRAIN_TIMEOUT"), "{said}");
        assert_eq!(said.matches("error: ").count(), 5, "{said}");
    }
}

#[test]
fn help_is_given_whatever_is_wrong() {
    let output = run(&["--help"], &[("BRAKEWRIGHT_KEYS", "x"), ("BRAKEWRIGHT_RATE_LIMIT", "x")]);
    assert_eq!(output.status.code(), Some(0));
}

#[test]
fn a_wrong_option_is_not_blamed_on_the_environment() {
    let output = run(&["--listen=everywhere"], &[("BRAKEWRIGHT_LISTEN", "127.0.0.1:0")]);
    let said = String::from_utf8_lossy(&output.stderr);
    assert_eq!(output.status.code(), Some(2), "{said}");
    assert!(said.contains("--listen") && !said.contains("BRAKEWRIGHT_LISTEN"), "{said}");
}

#[test]
fn an_address_in_use_stops_the_start() {
    let holder = std::net::TcpListener::bind("127.0.0.1:0").unwrap();
    let address = holder.local_addr().unwrap().to_string();
    let output = run(&["serve"], &[("BRAKEWRIGHT_LISTEN", &address)]);
    assert_eq!(output.status.code(), Some(1));
    let said = String::from_utf8_lossy(&output.stderr);
    assert!(said.contains(&format!("cannot serve on {address}")), "{said}");
    let both = [("BRAKEWRIGHT_LISTEN", &*address), ("BRAKEWRIGHT_METRICS_LISTEN", &*address)];
    let said = String::from_utf8_lossy(&run(&[], &both).stderr).into_owned();
    assert!(said.contains(&format!("cannot serve on {address}")), "{said}");
    assert!(said.contains(&format!("cannot serve metrics on {address}")), "{said}");
}

#[test]
fn help_lists_every_setting_with_its_default() {
    let help = run(&["--help"], &[]);
    assert_eq!(help.status.code(), Some(0));
    let text = String::from_utf8_lossy(&help.stdout);
    for (name, default) in [
        ("LISTEN", "127.0.0.1:8080"),
        ("LOG", "info"),
        ("LOG_FORMAT", "text"),
        ("ALLOWED_ORIGINS", ""),
        ("MAX_BODY_BYTES", "1048576"),
        ("REQUEST_TIMEOUT", "30s"),
        ("MAX_CONCURRENCY", "1024"),
        ("RATE_LIMIT", "0"),
        ("API_KEYS_FILE", ""),
        ("METRICS_LISTEN", ""),
        ("DRAIN_TIMEOUT", "20s"),
    ] {
        assert!(text.contains(&format!("BRAKEWRIGHT_{name}")), "{name}: {text}");
        assert!(text.contains(&format!("[default: {default}")), "{name}: {text}");
    }
}

#[test]
fn the_description_is_printed() {
    let printed = run(&["openapi"], &[]);
    assert_eq!(printed.status.code(), Some(0));
    assert_eq!(String::from_utf8_lossy(&printed.stdout), brakewright::api::openapi::openapi_json());
}
