//! What must hold of every answer.

use std::collections::HashMap;
use std::sync::LazyLock;
use std::time::Duration;

use axum::Router;
use axum::body::{Body, Bytes};
use axum::http::{Request, StatusCode};
use brakewright::api::health::Readiness;
use brakewright::api::layers::LayerSettings;
use cpu_time::ProcessTime;
use http_body_util::BodyExt as _;
use jsonschema::Validator;
use serde_json::{Value, json};
use tokio::runtime::Runtime;
use tower::ServiceExt as _;

use crate::grammar::{Endpoint, GRAMMAR};
use crate::input::Input;

/// Longest processor time for an answer; instrumented code is some times slower than what is served.
const LONGEST: Duration = Duration::from_secs(2);
/// As much again for each event of a duty that is followed at one brake.
const LONGEST_OF_EVENT: Duration = Duration::from_millis(1);

static RUNTIME: LazyLock<Runtime> = LazyLock::new(|| {
    tokio::runtime::Builder::new_current_thread().enable_all().build().expect("a runtime")
});

static ROUTER: LazyLock<Router> =
    LazyLock::new(|| brakewright::api::router(&LayerSettings::default(), Readiness::default()));

/// Schemas of the requests and of the answers by status, for every endpoint.
static SHAPES: LazyLock<HashMap<String, (Validator, Vec<(String, Validator)>)>> =
    LazyLock::new(|| {
        let shapes = |endpoint: &Endpoint| {
            let responses = endpoint.operation["responses"].as_object().expect("it has responses");
            let answers = responses.iter().filter_map(|(status, response)| {
                let content = response["content"].as_object()?;
                let body = content
                    .iter()
                    .find(|(kind, _)| kind.ends_with("json"))
                    .map_or(&Value::Null, |(_, body)| body);
                Some((status.clone(), validator(&complete(&body["schema"]))))
            });
            (
                endpoint.path.clone(),
                (validator(&with_any_unit(complete(endpoint.request()))), answers.collect()),
            )
        };
        GRAMMAR.endpoints.iter().map(shapes).collect()
    });

/// A schema with the components that it refers to.
fn complete(schema: &Value) -> Value {
    let mut schema = schema.clone();
    if let (Some(object), Some(components)) =
        (schema.as_object_mut(), GRAMMAR.document.get("components"))
    {
        object.insert("components".to_owned(), components.clone());
    }
    schema
}

fn validator(schema: &Value) -> Validator {
    jsonschema::draft202012::new(schema).expect("a schema of the description")
}

/// A unit has more names than the description lists.
fn with_any_unit(mut schema: Value) -> Value {
    match &mut schema {
        Value::Object(members) => {
            for (name, member) in members.iter_mut() {
                let is_unit = name == "unit" && member.is_object();
                *member =
                    if is_unit { json!({"type": "string"}) } else { with_any_unit(member.take()) };
            }
        }
        Value::Array(items) => items.iter_mut().for_each(|item| *item = with_any_unit(item.take())),
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => {}
    }
    schema
}

fn send(request: Request<Body>) -> (StatusCode, Bytes) {
    RUNTIME.block_on(async {
        let (parts, body) = ROUTER.clone().oneshot(request).await.expect("infallible").into_parts();
        (parts.status, body.collect().await.expect("a body").to_bytes())
    })
}

/// The body that is at a path.
pub fn get(path: &str) -> Bytes {
    send(Request::get(path).body(Body::empty()).expect("a request")).1
}

/// Sends a request and panics if the answer is not as it must be. Returns whether there was an endpoint to send it to.
pub fn check(bytes: &[u8]) -> bool {
    let Some(input) = Input::read(bytes) else { return false };
    let Some(endpoint) = GRAMMAR.endpoint(&input.path) else { return false };
    let begin = ProcessTime::now();
    let (status, answer) = post(endpoint, &input);
    let spent = begin.elapsed();
    assert!(spent < longest(endpoint, &input.body), "took {spent:?}");
    if input.body.len() % 16 == 0 {
        let again = post(endpoint, &input).1;
        let is_same = same(&answer) == same(&again);
        assert!(is_same, "the same request, another answer");
    }
    if endpoint.takes_lines() {
        answer_of_lines(&input, status, &answer);
    } else {
        single_answer(endpoint, &input, status, &answer);
    }
    true
}

/// How long the answer may take: the description allows as many as 20000 events in all, many lines, many candidates.
fn longest(endpoint: &Endpoint, body: &[u8]) -> Duration {
    let request: Value = serde_json::from_slice(body).unwrap_or_default();
    let length = |name: &str| request[name].as_array().map_or(1, Vec::len).max(1);
    let repeats =
        request["repeats"].as_u64().and_then(|repeats| usize::try_from(repeats).ok()).unwrap_or(1);
    let events =
        length("events").saturating_mul(length("fitted")).saturating_mul(repeats).min(20_000);
    let lines = if endpoint.takes_lines() {
        body.split(|byte| *byte == b'\n').count()
    } else {
        length("candidates")
    };
    let times = |count: usize| u32::try_from(count).unwrap_or(u32::MAX);
    LONGEST * times(lines) + LONGEST_OF_EVENT * times(events)
}

fn post(endpoint: &Endpoint, input: &Input) -> (StatusCode, Bytes) {
    let request = Request::post(&endpoint.path).header("content-type", &endpoint.media_type);
    let accept =
        if endpoint.forms().contains(&input.accept.as_str()) { &input.accept } else { "*/*" };
    let request = request.header("accept", accept);
    send(request.body(Body::from(input.body.clone())).expect("a request"))
}

/// An answer without the name of its occurrence.
fn same(answer: &[u8]) -> String {
    let text = String::from_utf8_lossy(answer);
    match text.split_once("\"urn:uuid:") {
        Some((before, after)) => format!("{before}{}", after.get(36..).unwrap_or_default()),
        None => text.into_owned(),
    }
}

fn answer_of_lines(input: &Input, status: StatusCode, answer: &[u8]) {
    assert_eq!(status, StatusCode::OK);
    let text = std::str::from_utf8(answer).expect("text");
    let lines: Vec<Value> =
        text.lines().map(|line| serde_json::from_str(line).expect("lines of JSON")).collect();
    let (end, answers) = lines.split_last().expect("a last line");
    let counts = &end["end"];
    assert_eq!(counts["lines"], answers.len(), "lines are lost: {end}");
    let outcomes = ["pass", "fail", "incomplete", "rejected"];
    let sum: u64 = outcomes.iter().map(|name| counts[name].as_u64().expect("a count")).sum();
    assert_eq!(counts["lines"], sum, "{end}");
    assert!(!has_null(&Value::from(lines.clone())), "null in an answer");
    let asked = String::from_utf8_lossy(&input.body);
    for answer in answers {
        let number = answer["line"].as_u64().expect("its number");
        let line = asked
            .split('\n')
            .nth(usize::try_from(number).expect("few lines") - 1)
            .expect("that line");
        assert!(answer["problem"]["status"] != 500, "{answer}");
        if let Ok(request) = serde_json::from_str(line) {
            pointers_lead_somewhere(&answer["problem"], &request);
        }
    }
}

fn single_answer(endpoint: &Endpoint, input: &Input, status: StatusCode, answer: &[u8]) {
    let (asked_shape, shapes) = &SHAPES[&endpoint.path];
    let code = status.as_str();
    assert!(!status.is_server_error(), "{code}: {}", String::from_utf8_lossy(answer));
    let kind = format!("{}XX", &code[..1]);
    let shape = shapes
        .iter()
        .find(|(status, _)| status == code)
        .or_else(|| shapes.iter().find(|(status, _)| *status == kind));
    let (_, shape) = shape.unwrap_or_else(|| panic!("{code} is not documented"));
    if status == StatusCode::OK
        && !input.accept.ends_with("json")
        && endpoint.forms().contains(&input.accept.as_str())
    {
        return shown(answer);
    }
    let answer: Value = serde_json::from_slice(answer).expect("JSON");
    assert!(!has_null(&answer), "null in {answer}");
    if let Err(violation) = shape.validate(&answer) {
        panic!("not as described: {violation} at {} in {answer}", violation.instance_path());
    }
    let request: Value = serde_json::from_slice(&input.body).unwrap_or_default();
    // A wrong candidate is rejected by itself.
    let rejected = answer["results"]["rejected"].as_array().map_or(0, Vec::len);
    if status == StatusCode::OK && rejected == 0 {
        let twice = input.documents(false).is_some_and(|documents| documents[0].repeats_a_member());
        assert!(!twice, "a member is given twice, and that was not refused");
        if let Err(violation) = asked_shape.validate(&request) {
            panic!("taken, although {violation} at {}", violation.instance_path());
        }
    }
    if status == StatusCode::UNPROCESSABLE_ENTITY {
        pointers_lead_somewhere(&answer, &request);
    }
    let defaults = answer["record"]["defaults"].as_array().map_or(&[][..], Vec::as_slice);
    for warning in answer["warnings"].as_array().into_iter().flatten() {
        // A limit may be a default, where nothing was given.
        if !defaults.iter().any(|default| default["pointer"] == warning["pointer"]) {
            leads_somewhere(warning["pointer"].as_str(), &request, &answer);
        }
    }
}

/// A picture or a page: markup without a number that is none.
fn shown(answer: &[u8]) {
    let text = std::str::from_utf8(answer).expect("text");
    assert!(text.trim_start().starts_with('<'), "no markup: {text}");
    for word in [">NaN", ">inf", ">-inf", "\"NaN", "\"inf", "\"-inf", " NaN", " inf ", " -inf "] {
        assert!(!text.contains(word), "`{word}` in {text}");
    }
}

fn pointers_lead_somewhere(problem: &Value, request: &Value) {
    let errors = problem["errors"].as_array().map_or(&[][..], Vec::as_slice);
    assert!(problem["status"] != 422 || !errors.is_empty(), "refused without a reason: {problem}");
    for error in errors {
        leads_somewhere(error["pointer"].as_str(), request, problem);
    }
}

/// A pointer leads to a part of the request, or to where one is missing.
fn leads_somewhere(pointer: Option<&str>, request: &Value, answer: &Value) {
    // A request with a number beyond every double is answered, but cannot be read here.
    let Some(pointer) = pointer.filter(|_| !request.is_null()) else { return };
    let path = decoded(pointer.strip_prefix('#').expect("a fragment"));
    let parent = path.rsplit_once('/').map_or("", |(parent, _)| parent);
    let is_there = request.pointer(&path).is_some() || request.pointer(parent).is_some();
    assert!(is_there, "{pointer} leads nowhere: {answer}");
}

/// Percent-encoded text (RFC 3986, 2.1).
fn decoded(text: &str) -> String {
    let mut bytes = Vec::new();
    let mut rest = text.as_bytes();
    while let [first, after @ ..] = rest {
        let code = after
            .get(..2)
            .filter(|_| *first == b'%')
            .and_then(|digits| std::str::from_utf8(digits).ok());
        let code = code.and_then(|digits| u8::from_str_radix(digits, 16).ok());
        bytes.push(code.unwrap_or(*first));
        rest = if code.is_some() { &after[2..] } else { after };
    }
    String::from_utf8(bytes).expect("UTF-8")
}

fn has_null(part: &Value) -> bool {
    match part {
        Value::Null => true,
        Value::Array(items) => items.iter().any(has_null),
        Value::Object(members) => members.values().any(has_null),
        Value::Bool(_) | Value::Number(_) | Value::String(_) => false,
    }
}
