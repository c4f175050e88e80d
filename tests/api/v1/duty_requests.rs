//! Duties and repeated stops to start from. All data invented.

use std::sync::LazyLock;
use std::time::{Duration, Instant};

use axum::body::Body;
use axum::http::Request;
use brakewright::api::openapi::openapi_json;
use jsonschema::Validator;
use serde_json::{Value, json};

use crate::support::client::TestApp;

pub(super) const DUTY_CYCLE: &str = "/v1/duty-cycle";
pub(super) const STOP_ENERGY: &str = "/v1/stop-energy";

/// A quantity on the wire.
pub(super) fn q(value: f64, unit: &str) -> Value {
    json!({"value": value, "unit": unit})
}

/// A brake of 2 · 0.4 · 8 kN · 0.1125 m = 720 N m on a disc whose swept ring weighs π(0.135² − 0.09²) · 0.02 · 7200 kg.
pub(super) fn brake() -> Value {
    json!({
        "pad": {"shape": "annular_sector", "inner_radius": q(90.0, "mm"), "outer_radius": q(135.0, "mm"), "angle": q(1.0, "rad")},
        "lining": {"friction": {"nominal": 0.4}},
        "disc": {
            "material": {"density": q(7200.0, "kg/m3"), "specific_heat": q(500.0, "J/(kg.K)"), "conductivity": q(48.0, "W/(m.K)")},
            "outer_radius": q(140.0, "mm"), "inner_radius": q(80.0, "mm"), "thickness": q(20.0, "mm"), "construction": "solid",
        },
        "actuation": {"kind": "clamp_force", "force": q(8.0, "kN")},
    })
}

/// Mass of the swept ring, kg.
pub(super) fn ring() -> f64 {
    std::f64::consts::PI * (0.135 * 0.135 - 0.09 * 0.09) * 0.02 * 7200.0
}

/// Four such brakes stop 1500 kg on wheels of 300 mm with 9.6 kN, 6.4 m/s²: from 20 m/s in 3.125 s and 31.25 m,
/// 75 kJ each. Then the vehicle stands for 10 s.
pub(super) fn duty() -> Value {
    json!({
        "machine": {"kind": "vehicle", "mass": q(1500.0, "kg"), "rolling_radius": q(300.0, "mm")},
        "fitted": [{"brake": brake(), "count": 4, "axle": "all"}],
        "events": [
            {"kind": "stop", "initial_speed": q(20.0, "m/s")},
            {"kind": "stand", "time": q(10.0, "s")},
        ],
    })
}

/// The same stop once a minute.
pub(super) fn repeated() -> Value {
    let mut body = duty();
    let members = body.as_object_mut().unwrap();
    members.remove("events");
    members.insert("initial_speed".to_owned(), q(20.0, "m/s"));
    members.insert("interval".to_owned(), q(60.0, "s"));
    with(&body, "/fitted/0/brake/disc/cooling", json!({"coefficient": q(50.0, "W/(m2.K)")}))
}

/// A copy with a member replaced or added; its parent must exist.
pub(super) fn with(body: &Value, pointer: &str, value: impl Into<Value>) -> Value {
    let mut body = body.clone();
    let (parent, member) = pointer.rsplit_once('/').unwrap();
    let parent = body.pointer_mut(parent).unwrap_or_else(|| panic!("{parent} is not there"));
    if let Value::Array(items) = parent {
        items[member.parse::<usize>().unwrap()] = value.into();
    } else {
        parent[member] = value.into();
    }
    body
}

/// A copy without a member.
pub(super) fn without(body: &Value, pointer: &str) -> Value {
    let mut body = body.clone();
    let (parent, member) = pointer.rsplit_once('/').unwrap();
    body.pointer_mut(parent).unwrap().as_object_mut().unwrap().remove(member).unwrap();
    body
}

fn validator(component: &str) -> Validator {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    let reference = format!("#/components/schemas/{component}");
    let schema = json!({"$ref": reference, "components": document["components"]});
    jsonschema::draft202012::new(&schema).unwrap()
}

static DUTY: LazyLock<Validator> = LazyLock::new(|| validator("DutyCycleAnswer"));
static STOP: LazyLock<Validator> = LazyLock::new(|| validator("StopEnergyAnswer"));

/// Demands that an answer is as described, and that nothing in it is null.
#[track_caller]
pub(super) fn assert_conforms(path: &str, answer: &Value) {
    let validator = if path == DUTY_CYCLE { &*DUTY } else { &*STOP };
    let faults: Vec<String> = validator
        .iter_errors(answer)
        .map(|error| format!("{}: {error}", error.instance_path()))
        .collect();
    assert!(faults.is_empty(), "not as described: {faults:#?}");
    assert!(!answer.to_string().contains(":null"), "{answer}");
}

/// The answer to a request that has one.
pub(super) async fn answer(path: &str, body: &Value) -> Value {
    let answer = TestApp::new().post(path, &body.to_string(), 200).await;
    assert_conforms(path, &answer);
    answer
}

/// The only friction case of an answer.
pub(super) async fn case(path: &str, body: &Value) -> Value {
    let answer = answer(path, body).await;
    let cases = answer["results"]["friction_cases"].as_array().unwrap().clone();
    assert_eq!(cases.len(), 1, "{cases:?}");
    cases[0].clone()
}

/// The faults of a request, as pointer and code, in the order of the answer.
pub(super) async fn faults(path: &str, body: &Value) -> Vec<(String, String)> {
    let problem = TestApp::new().post(path, &body.to_string(), 422).await;
    let errors = problem["errors"].as_array().unwrap();
    let text = |value: &Value| value.as_str().unwrap().to_owned();
    errors.iter().map(|error| (text(&error["pointer"]), text(&error["code"]))).collect()
}

/// Demands that a request has exactly these faults.
pub(super) async fn assert_faults(path: &str, body: &Value, expected: &[(&str, &str)]) {
    let mut found = faults(path, body).await;
    found.sort();
    let mut expected: Vec<(String, String)> = expected
        .iter()
        .map(|(pointer, code)| ((*pointer).to_owned(), (*code).to_owned()))
        .collect();
    expected.sort();
    assert_eq!(found, expected, "{body}");
}

/// Sends anything: the status, the answer, and how long it took.
pub(super) async fn try_out(path: &str, body: &Value) -> (u16, Value, Duration) {
    use tower::ServiceExt as _;
    let mut settings = crate::support::client::settings();
    settings.request_timeout = Duration::from_mins(5);
    let router =
        brakewright::api::router(&settings, brakewright::api::health::Readiness::default());
    let request = Request::post(path).header("content-type", "application/json");
    let request = request.body(Body::from(body.to_string())).unwrap();
    let begin = Instant::now();
    let response = router.oneshot(request).await.unwrap();
    let lasted = begin.elapsed();
    let status = response.status().as_u16();
    let body = http_body_util::BodyExt::collect(response.into_body()).await.unwrap().to_bytes();
    (status, serde_json::from_slice(&body).unwrap(), lasted)
}

pub(super) fn value(of: &Value) -> f64 {
    of["value"].as_f64().unwrap_or_else(|| panic!("{of} has no value"))
}

/// Codes of the warnings of an answer.
pub(super) fn codes(answer: &Value) -> Vec<&str> {
    let warnings = answer["warnings"].as_array().unwrap();
    warnings.iter().map(|warning| warning["code"].as_str().unwrap()).collect()
}
