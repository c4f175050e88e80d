//! `POST /v1/spec-checks`: order, numbers, bad lines, and each answer that of the single call.

use axum::body::{Body, Bytes};
use axum::http::Request;
use brakewright::api::background::{Wanted, begin, guarded, pieces_at_once};
use brakewright::api::health::Readiness;
use brakewright::api::v1::spec_checks::lines::{LONGEST_LINE, Line, Splitter};
use proptest::prelude::{prop_assert_eq, proptest};
use proptest::{collection, sample};
use serde_json::{Value, json};

use super::common::{SPEC_CHECK, disc, lining, q, sector, validator_of, with, without};
use crate::support::client::{Answer, TestApp, settings};

pub(crate) const SPEC_CHECKS: &str = "/v1/spec-checks";

/// A vehicle of 1500 kg at 20 m/s that must stop within 40 m. Invented; with four brakes of 8 kN each it passes.
pub(crate) fn spec_check() -> Value {
    let lining = with(&lining(), "/max_temperature_peak", q(600.0, "degC"));
    let lining = with(&lining, "/max_temperature_continuous", q(300.0, "degC"));
    let disc = with(&disc(), "/material/max_temperature", q(600.0, "degC"));
    json!({
        "machine": {"kind": "vehicle", "mass": q(1500.0, "kg"), "rolling_radius": q(300.0, "mm"), "adhesion": 0.8},
        "fitted": [{
            "brake": {
                "pad": sector(),
                "lining": with(&lining, "/max_rubbing_speed", q(30.0, "m/s")),
                "disc": with(&disc, "/construction", "solid"),
                "actuation": {"kind": "clamp_force", "force": q(8.0, "kN")},
            },
            "axle": "all", "count": 4,
        }],
        "duties": [{"kind": "stop", "initial_speed": q(20.0, "m/s"), "require": {"max_distance": q(40.0, "m")}}],
    })
}

/// That check with another clamp force, kN: below 7.5 kN it fails.
pub(crate) fn pressed_by(force: f64) -> Value {
    with(&spec_check(), "/fitted/0/brake/actuation/force", q(force, "kN"))
}

/// That check without the pressure that the lining bears: it cannot be assessed in full.
pub(crate) fn incomplete() -> Value {
    without(&spec_check(), "/fitted/0/brake/lining/max_pressure")
}

fn request(body: impl Into<Body>) -> Request<Body> {
    let request = Request::post(SPEC_CHECKS).header("content-type", "application/x-ndjson");
    request.body(body.into()).unwrap()
}

fn lines_of(answer: &Answer) -> Vec<Value> {
    let text = std::str::from_utf8(&answer.body).unwrap();
    assert!(text.ends_with('\n'), "every line is closed");
    text.lines().map(|line| serde_json::from_str(line).unwrap()).collect()
}

/// The answers to a body, without and with the last one. Each is held against the description.
async fn stream(body: impl Into<Body>) -> (Vec<Value>, Value) {
    let answer = TestApp::new().send(request(body), 200).await;
    assert_eq!(answer.header("content-type"), "application/x-ndjson");
    let mut lines = lines_of(&answer);
    let validator = validator_of("StreamedLine");
    for line in &lines {
        assert!(validator.is_valid(line), "{line}");
    }
    let end = lines.pop().unwrap()["end"].take();
    assert!(end.is_object(), "the last line closes the stream");
    (lines, end)
}

/// What the single call answers, in the form of a stream's line.
async fn alone(request: &Value) -> Value {
    let answer = TestApp::new().post(SPEC_CHECK, &request.to_string(), 200).await;
    let mut result = answer["results"].clone();
    result.as_object_mut().unwrap().shift_remove("duties");
    result["warnings"] = answer["warnings"].clone();
    result["input_digest"] = answer["record"]["input_digest"].clone();
    result
}

fn text_of(requests: &[Value]) -> String {
    requests.iter().fold(String::new(), |text, request| text + &format!("{request}\n"))
}

#[tokio::test]
async fn each_line_is_answered_in_order_as_the_single_call_answers() {
    let us = with(&spec_check(), "/report_units", "us");
    let named = with(&pressed_by(5.0), "/ref", "the weak one");
    let requests = [spec_check(), us, named, incomplete()];
    let (lines, end) = stream(text_of(&requests)).await;
    assert_eq!(lines.len(), requests.len());
    for (index, (line, request)) in lines.iter().zip(&requests).enumerate() {
        assert_eq!(line["line"], index + 1);
        assert_eq!(line["result"], alone(request).await, "line {}", index + 1);
        assert_eq!(line.get("ref"), request.get("ref"));
    }
    let verdicts: Vec<&Value> = lines.iter().map(|line| &line["result"]["verdict"]).collect();
    assert_eq!(verdicts, ["pass", "pass", "fail", "incomplete"]);
    let counts = ["lines", "pass", "fail", "incomplete", "rejected"].map(|name| &end[name]);
    assert_eq!(counts, [4, 2, 1, 1, 0]);
    assert_eq!(end["service_version"], env!("CARGO_PKG_VERSION"));
}

#[tokio::test]
async fn a_bad_line_is_answered_with_its_problem_and_spoils_no_other() {
    let good = spec_check().to_string();
    let app = TestApp::new();
    let malformed = good.replacen(':', "", 1);
    let twice = good.replacen('{', "{\"duties\": [], ", 1);
    let bodies = [
        (malformed, 400),
        (twice, 400),
        (with(&spec_check(), "/ref", 7).to_string(), 422),
        (with(&spec_check(), "/machine/mass/unit", "mm").to_string(), 422),
        (with(&spec_check(), "/fitted/0/brake/pad/outer_radius", q(1.0, "mm")).to_string(), 422),
        (with(&spec_check(), "/duties", Value::Null).to_string(), 422),
        (with(&spec_check(), "/machine/mass/value", -5).to_string(), 422),
        ("3".to_owned(), 422),
        ("\"text\"".to_owned(), 422),
        (good.chars().take(good.len() / 2).collect(), 400),
        (good.replacen("1500.0", "1e999", 1), 422),
    ];
    let text =
        bodies.iter().fold(String::new(), |text, (bad, _)| text + &format!("{bad}\n{good}\n"));
    let (lines, end) = stream(text).await;
    assert_eq!(lines.len(), 2 * bodies.len());
    for (pair, (bad, status)) in lines.chunks(2).zip(&bodies) {
        let mut problem = app.post(SPEC_CHECK, bad, *status).await;
        problem.as_object_mut().unwrap().shift_remove("instance");
        assert_eq!(pair[0]["problem"], problem, "{bad}");
        assert_eq!(pair[1]["result"]["verdict"], "pass");
    }
    assert_eq!(end["rejected"], bodies.len());
    assert_eq!(end["lines"], 2 * bodies.len());
}

#[tokio::test]
async fn a_reference_is_echoed_when_only_the_rest_is_wrong() {
    let requests = [
        json!({"ref": "shape", "machine": 3}),
        with(&with(&spec_check(), "/ref", "physics"), "/machine/mass/value", -1),
        json!({"ref": 7}),
    ];
    let (lines, _) = stream(text_of(&requests)).await;
    let references: Vec<Option<&Value>> = lines.iter().map(|line| line.get("ref")).collect();
    assert_eq!(references, [Some(&json!("shape")), Some(&json!("physics")), None]);
}

#[tokio::test]
async fn empty_lines_are_counted_but_not_answered_and_the_last_line_needs_no_end() {
    let good = spec_check();
    let text = format!("\n{good}\r\n \t\r\n\r\n{good}\n\n{good}");
    let (lines, end) = stream(text).await;
    let numbers: Vec<&Value> = lines.iter().map(|line| &line["line"]).collect();
    assert_eq!(numbers, [2, 5, 7]);
    assert_eq!(end["lines"], 3);
    for nothing in ["", "\n", "\r\n \n"] {
        let (lines, end) = stream(nothing).await;
        assert_eq!((lines.len(), &end["lines"]), (0, &json!(0)), "{nothing:?}");
        assert!(!end["cautions"].as_array().unwrap().is_empty());
    }
}

#[tokio::test]
async fn a_line_that_is_too_long_or_no_text_is_refused_alone() {
    let good = spec_check().to_string();
    let padded = |length: usize| format!("{good}{}", " ".repeat(length - good.len()));
    let mut body = Vec::new();
    for line in [padded(LONGEST_LINE), padded(LONGEST_LINE + 1), good.clone()] {
        body.extend(line.into_bytes());
        body.push(b'\n');
    }
    body.extend(b"{\"ref\": \"\xff\"}\n");
    body.extend(good.into_bytes());
    body.push(b'\n');
    body.extend(vec![b'x'; 3 * LONGEST_LINE]);
    let (lines, end) = stream(body).await;
    let status = |line: &Value| line["problem"]["status"].as_u64();
    let found: Vec<Option<u64>> = lines.iter().map(status).collect();
    assert_eq!(found, [None, Some(413), None, Some(400), None, Some(413)]);
    assert_eq!(end["rejected"], 3);
}

#[tokio::test]
async fn the_cautions_of_all_lines_stand_at_the_end() {
    let app = TestApp::new();
    let answer = app.post(SPEC_CHECK, &spec_check().to_string(), 200).await;
    let (_, end) = stream(format!("{}\n{{}}\n", spec_check())).await;
    assert_eq!(end["cautions"], answer["cautions"]);
}

#[tokio::test]
async fn media_types_are_those_of_lines() {
    let app = TestApp::new();
    for (name, value, status) in [
        ("content-type", "application/x-ndjson", 200),
        ("content-type", "application/jsonl; charset=utf-8", 200),
        ("content-type", "application/json", 415),
        ("content-type", "text/plain", 415),
        ("accept", "application/json", 406),
        ("accept", "application/jsonl", 200),
    ] {
        let request = if name == "accept" {
            Request::post(SPEC_CHECKS).header("content-type", "application/jsonl")
        } else {
            Request::post(SPEC_CHECKS)
        };
        let request = request.header(name, value).body(Body::from("{}\n")).unwrap();
        let answer = app.send(request, status).await;
        match status {
            415 => {
                assert_eq!(answer.header("accept-post"), "application/x-ndjson, application/jsonl");
            }
            200 if name == "accept" => assert_eq!(answer.header("content-type"), value),
            _ => {}
        }
    }
}

#[tokio::test]
async fn a_body_that_breaks_off_gets_no_end() {
    use http_body_util::BodyExt as _;
    use tower::ServiceExt as _;

    let line = Bytes::from(format!("{}\n", spec_check()));
    let broken = futures_util::stream::iter([Ok(line), Err(std::io::Error::other("gone"))]);
    let router = brakewright::api::router(&settings(), Readiness::default());
    let answer = router.oneshot(request(Body::from_stream(broken))).await.unwrap();
    let mut body = answer.into_body();
    let mut text = Vec::new();
    let cut = loop {
        match body.frame().await {
            Some(Ok(frame)) => text.extend(frame.into_data().unwrap()),
            Some(Err(_)) => break true,
            None => break false,
        }
    };
    assert!(cut, "the connection must not be closed in good order");
    let text = String::from_utf8(text).unwrap();
    assert!(text.contains("\"line\":1") && !text.contains("\"end\""), "{text}");
}

#[tokio::test]
async fn a_piece_of_work_that_panics_is_a_problem_of_its_own() {
    let broken: Result<(), _> = guarded(|| panic!("a defect"));
    assert_eq!(broken.unwrap_err().status(), 500);
    assert_eq!(guarded(|| 3), Ok(3));
    let broken: Result<(), _> = begin(|_| panic!("a defect")).await;
    assert_eq!(broken.unwrap_err().status(), 500);
    let asked = begin(|wanted: Wanted<'_>| (wanted.is_wanted(), 3));
    assert_eq!(asked.await, Ok((true, 3)));
}

#[tokio::test]
async fn work_that_nobody_waits_for_is_told_so() {
    let (tell, told) = std::sync::mpsc::channel();
    let piece = begin(move |wanted| {
        tell.send(true).unwrap();
        let begin = std::time::Instant::now();
        while wanted.is_wanted() && begin.elapsed() < std::time::Duration::from_secs(10) {
            std::thread::yield_now();
        }
        tell.send(wanted.is_wanted()).unwrap();
    });
    assert!(told.recv().unwrap());
    drop(piece);
    assert!(!told.recv().unwrap());
    assert!(pieces_at_once() >= 2);
}

/// Lines as a reader would cut them that has all bytes at once.
fn naive(text: &str) -> Vec<(u64, String)> {
    let lines = (1..).zip(text.split('\n'));
    let lines = lines.map(|(number, line)| (number, line.strip_suffix('\r').unwrap_or(line)));
    lines
        .filter(|(_, line)| !line.trim_ascii().is_empty())
        .map(|(number, line)| (number, line.to_owned()))
        .collect()
}

fn split(pieces: &[&[u8]]) -> Vec<Line> {
    let mut splitter = Splitter::default();
    let mut lines = Vec::new();
    for piece in pieces {
        splitter.feed(piece);
        while let Some(slice) = splitter.slice(false) {
            assert!(slice.len() <= 16, "a slice must not grow with the body");
            lines.extend(slice);
        }
    }
    while let Some(slice) = splitter.slice(true) {
        lines.extend(slice);
    }
    lines
}

proptest! {
    /// Where a body is cut into pieces on its way does not matter.
    #[test]
    fn lines_are_the_same_however_the_bytes_arrive(
        parts in collection::vec(sample::select(vec!["\n", "\r\n", "a", "{}", " ", "\r", "b\u{e9}"]), 0..60),
        size in 1_usize..9,
    ) {
        let text = parts.concat();
        let pieces: Vec<&[u8]> = text.as_bytes().chunks(size).collect();
        let found: Vec<(u64, String)> =
            split(&pieces).into_iter().map(|line| (line.number, line.text.unwrap())).collect();
        prop_assert_eq!(found, naive(&text));
    }
}

/// Many large blank lines before a request do not swallow it.
#[test]
fn blank_lines_of_any_size_lose_no_line_after_them() {
    let mut splitter = Splitter::default();
    let blank = format!("{}\n", " ".repeat(70_000)).repeat(6);
    splitter.feed(format!("{blank}{{}}\n").as_bytes());
    let lines = splitter.slice(true).unwrap();
    assert_eq!(lines.len(), 1);
    assert_eq!((lines[0].number, lines[0].text.as_deref().unwrap()), (7, "{}"));
}
