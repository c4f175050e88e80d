//! Requests to start from, and ways to read answers. Every answer is held against the description.

use std::collections::BTreeMap;
use std::sync::LazyLock;

use axum::body::Body;
use axum::http::Request;
use brakewright::api::openapi::openapi_json;
use jsonschema::Validator;
use serde_json::{Value, json};

use crate::support::client::TestApp;

pub(crate) const PAD_CAPACITY: &str = "/v1/pad-capacity";
pub(crate) const ACTUATION_FORCE: &str = "/v1/actuation-force";
pub(crate) const STOPPING: &str = "/v1/stopping";
pub(crate) const STOP_ENERGY: &str = "/v1/stop-energy";
pub(crate) const SPEC_CHECK: &str = "/v1/spec-check";

/// Standard acceleration of free fall, m/s², exact by convention.
pub(crate) const G: f64 = 9.806_65;

/// The endpoints with the schemas of their answers.
pub(crate) const ENDPOINTS: [(&str, &str); 5] = [
    (PAD_CAPACITY, "PadCapacityAnswer"),
    (ACTUATION_FORCE, "ActuationForceAnswer"),
    (STOPPING, "StoppingAnswer"),
    (STOP_ENERGY, "StopEnergyAnswer"),
    (SPEC_CHECK, "SpecCheckAnswer"),
];

/// A quantity on the wire.
pub(crate) fn q(value: f64, unit: &str) -> Value {
    json!({"value": value, "unit": unit})
}

/// A pad between 100 and 150 mm over 90 deg: effective radius 125 mm under uniform wear.
pub(crate) fn sector() -> Value {
    json!({
        "shape": "annular_sector", "inner_radius": q(100.0, "mm"), "outer_radius": q(150.0, "mm"),
        "angle": q(90.0, "deg"),
    })
}

/// A lining of 0.3, 0.4 and 0.5 that bears 2 MPa.
pub(crate) fn lining() -> Value {
    json!({"friction": {"low": 0.3, "nominal": 0.4, "high": 0.5}, "max_pressure": q(2.0, "MPa")})
}

/// A pad with its lining.
pub(crate) fn pad_capacity() -> Value {
    json!({"pad": sector(), "lining": lining()})
}

/// A hydraulic brake of one friction, 0.4: 2 · 0.4 · 0.125 m = 0.1 N.m of torque per N of clamp force.
pub(crate) fn brake() -> Value {
    json!({
        "pad": sector(), "lining": {"friction": {"nominal": 0.4}},
        "actuation": {"kind": "hydraulic", "piston_diameter": q(50.0, "mm")},
    })
}

/// That brake with a torque demanded of it.
pub(crate) fn actuation_force() -> Value {
    json!({"brake": brake(), "torque": q(1000.0, "N.m")})
}

/// A vehicle of 1500 kg on wheels of 300 mm, with 3000 N.m on its wheels: 10 kN, 6.667 m/s².
pub(crate) fn stopping() -> Value {
    json!({
        "machine": {"kind": "vehicle", "mass": q(1500.0, "kg"), "rolling_radius": q(300.0, "mm")},
        "fitted": [{"torque": q(3000.0, "N.m"), "axle": "all"}],
        "initial_speed": q(20.0, "m/s"),
    })
}

/// A vehicle with axles: wheelbase 2.6 m, height 0.55 m, center of gravity 1.2 m behind the front axle.
pub(crate) fn with_axles() -> Value {
    let mut body = stopping();
    body["machine"]["geometry"] = json!({
        "wheelbase": q(2.6, "m"), "center_of_gravity_height": q(0.55, "m"),
        "front_axle_to_center_of_gravity": q(1.2, "m"),
    });
    body["machine"]["adhesion"] = json!(0.8);
    body
}

/// A shaft of 12 kg.m2 at 100 rad/s with a brake of 60 N.m.
pub(crate) fn shaft() -> Value {
    json!({
        "machine": {"kind": "shaft", "inertia": q(12.0, "kg.m2")},
        "fitted": [{"torque": q(60.0, "N.m")}],
        "initial_rotational_speed": q(100.0, "rad/s"),
    })
}

/// A hoist that lowers 1000 kg at 2 m/s: the shaft turns 100 rad per metre.
pub(crate) fn hoist() -> Value {
    json!({
        "machine": {"kind": "hoist", "load_mass": q(1000.0, "kg"), "drum_radius": q(200.0, "mm"),
            "falls": 2.0, "gear_ratio": 10.0},
        "fitted": [{"torque": q(200.0, "N.m")}],
        "initial_speed": q(2.0, "m/s"), "direction": "lowering",
    })
}

/// A level conveyor with 1000 kg of material and 500 kg of belt at 3 m/s: the shaft turns 40 rad per metre.
pub(crate) fn conveyor() -> Value {
    json!({
        "machine": {"kind": "conveyor", "material_mass": q(1000.0, "kg"), "belt_mass": q(500.0, "kg"),
            "incline": q(0.0, "deg"), "pulley_radius": q(250.0, "mm"), "gear_ratio": 10.0},
        "fitted": [{"torque": q(75.0, "N.m")}],
        "initial_speed": q(3.0, "m/s"),
    })
}

/// A disc that the sector fits on.
pub(crate) fn disc() -> Value {
    json!({
        "material": {"density": q(7200.0, "kg/m3"), "specific_heat": q(500.0, "J/(kg.K)"), "conductivity": q(50.0, "W/(m.K)")},
        "outer_radius": q(155.0, "mm"), "inner_radius": q(90.0, "mm"), "thickness": q(20.0, "mm"),
    })
}

/// A copy with a member replaced or added; `pointer` is plain RFC 6901 and its parent must exist.
pub(crate) fn with(body: &Value, pointer: &str, value: impl Into<Value>) -> Value {
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
pub(crate) fn without(body: &Value, pointer: &str) -> Value {
    let mut body = body.clone();
    let (parent, member) = pointer.rsplit_once('/').unwrap();
    let parent = body.pointer_mut(parent).unwrap().as_object_mut().unwrap();
    parent.shift_remove(member).unwrap_or_else(|| panic!("{pointer} is not there"));
    body
}

/// Closes every object of a schema: a member that is not described is then a fault.
fn close(schema: &mut Value) {
    match schema {
        Value::Object(members) => {
            members.values_mut().for_each(close);
            if members.get("properties").is_some_and(Value::is_object) {
                members.insert("additionalProperties".to_owned(), json!(false));
            }
        }
        Value::Array(items) => items.iter_mut().for_each(close),
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => {}
    }
}

/// A validator of a component of the description, with every object closed.
pub(crate) fn validator_of(component: &str) -> Validator {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    let mut schemas = document["components"]["schemas"].clone();
    assert!(schemas[component].is_object(), "{component} is not described");
    schemas.as_object_mut().unwrap().values_mut().for_each(close);
    let reference = format!("#/components/schemas/{component}");
    jsonschema::draft202012::new(&json!({ "$ref": reference, "components": {"schemas": schemas} }))
        .unwrap()
}

static VALIDATORS: LazyLock<BTreeMap<&str, Validator>> = LazyLock::new(|| {
    ENDPOINTS.iter().map(|(path, component)| (*path, validator_of(component))).collect()
});
static PROBLEM: LazyLock<Validator> = LazyLock::new(|| validator_of("Problem"));

#[track_caller]
pub(crate) fn assert_valid(validator: &Validator, answer: &Value) {
    let faults: Vec<String> = validator
        .iter_errors(answer)
        .map(|error| format!("{}: {error}", error.instance_path()))
        .collect();
    assert!(faults.is_empty(), "an answer is not as described: {faults:#?}\n{answer:#}");
}

/// Holds an answer against the description of its endpoint.
#[track_caller]
pub(crate) fn assert_conforms(path: &str, answer: &Value) {
    assert_valid(&VALIDATORS[path], answer);
    assert!(!has_null(answer), "{answer:#}");
}

/// Holds a problem document against its description.
#[track_caller]
pub(crate) fn assert_problem(problem: &Value) {
    assert_valid(&PROBLEM, problem);
}

fn has_null(value: &Value) -> bool {
    match value {
        Value::Null => true,
        Value::Array(items) => items.iter().any(has_null),
        Value::Object(members) => members.values().any(has_null),
        Value::Bool(_) | Value::Number(_) | Value::String(_) => false,
    }
}

/// The answer to a request that has one.
pub(crate) async fn answer(path: &str, body: &Value) -> Value {
    let answer = TestApp::new().post(path, &body.to_string(), 200).await;
    assert_conforms(path, &answer);
    answer
}

/// The bytes of an answer.
pub(crate) async fn bytes(path: &str, body: &str) -> Vec<u8> {
    let request = Request::post(path).header("content-type", "application/json");
    let request = request.body(Body::from(body.to_owned())).unwrap();
    TestApp::new().send(request, 200).await.body.to_vec()
}

/// The problem of a request that is refused with `status`.
pub(crate) async fn problem(path: &str, body: &str, status: u16) -> Value {
    let problem = TestApp::new().post(path, body, status).await;
    assert_problem(&problem);
    problem
}

/// The faults of a body: pointer, code.
pub(crate) async fn faults(path: &str, body: &Value) -> Vec<(String, String)> {
    let problem = problem(path, &body.to_string(), 422).await;
    let errors = problem["errors"].as_array().unwrap();
    assert_eq!(problem["error_count"], errors.len(), "{problem}");
    let text = |value: &Value| value.as_str().unwrap().to_owned();
    errors.iter().map(|error| (text(&error["pointer"]), text(&error["code"]))).collect()
}

/// Demands exactly these faults, in any order.
pub(crate) async fn assert_faults(path: &str, body: &Value, expected: &[(&str, &str)]) {
    let mut found = faults(path, body).await;
    let mut expected: Vec<(String, String)> =
        expected.iter().map(|(at, code)| ((*at).to_owned(), (*code).to_owned())).collect();
    found.sort();
    expected.sort();
    assert_eq!(found, expected, "{path} {body}");
}

/// Demands one fault for each change of a body: member, value, pointer of the fault, code.
pub(crate) async fn assert_each(path: &str, body: &Value, cases: &[(&str, Value, &str, &str)]) {
    for (member, value, at, code) in cases {
        assert_faults(path, &with(body, member, value.clone()), &[(at, code)]).await;
    }
}

/// The results of a friction case.
#[track_caller]
pub(crate) fn case<'a>(answer: &'a Value, name: &str) -> &'a Value {
    let cases = answer["results"]["friction_cases"].as_array().unwrap();
    let found = cases.iter().find(|case| case["friction_case"] == name);
    found.unwrap_or_else(|| panic!("no case {name} in {answer:#}"))
}

/// The number of a quantity that must have this unit.
#[track_caller]
pub(crate) fn of(quantity: &Value, unit: &str) -> f64 {
    assert_eq!(quantity["unit"], unit, "{quantity}");
    quantity["value"].as_f64().unwrap()
}

/// Demands a quantity within 1e-12: what several exact operations in doubles leave.
#[track_caller]
pub(crate) fn assert_is(quantity: &Value, expected: f64, unit: &str) {
    let actual = of(quantity, unit);
    assert!(
        (actual - expected).abs() <= 1e-12 * expected.abs(),
        "{actual} is not {expected} {unit}"
    );
}

/// The codes of the warnings, in order.
pub(crate) fn codes(answer: &Value) -> Vec<&str> {
    let warnings = answer["warnings"].as_array().unwrap();
    warnings.iter().map(|warning| warning["code"].as_str().unwrap()).collect()
}

/// The only warning of a code.
#[track_caller]
pub(crate) fn warning<'a>(answer: &'a Value, code: &str) -> &'a Value {
    let warnings = answer["warnings"].as_array().unwrap();
    let found: Vec<&Value> = warnings.iter().filter(|warning| warning["code"] == code).collect();
    assert_eq!(found.len(), 1, "{code} in {warnings:#?}");
    found[0]
}

/// Demands a warning's severity and place.
#[track_caller]
pub(crate) fn assert_warns(answer: &Value, code: &str, severity: &str, pointer: &str) {
    let warning = warning(answer, code);
    assert_eq!(warning["severity"], severity, "{warning}");
    assert_eq!(warning["pointer"], pointer, "{warning}");
    assert!(!warning["detail"].as_str().unwrap().is_empty());
}

/// The default on record at a pointer.
#[track_caller]
pub(crate) fn default_at<'a>(answer: &'a Value, pointer: &str) -> &'a Value {
    let defaults = answer["record"]["defaults"].as_array().unwrap();
    let found: Vec<&Value> =
        defaults.iter().filter(|default| default["pointer"] == pointer).collect();
    assert_eq!(found.len(), 1, "{pointer} in {defaults:#?}");
    found[0]
}

/// The pointers of all defaults on record, sorted.
pub(crate) fn defaulted(answer: &Value) -> Vec<&str> {
    let defaults = answer["record"]["defaults"].as_array().unwrap();
    let mut pointers: Vec<&str> =
        defaults.iter().map(|default| default["pointer"].as_str().unwrap()).collect();
    pointers.sort_unstable();
    pointers
}

// Units, by their definitions: inch 0.0254 m, pound 0.453 592 37 kg, standard gravity, Btu(IT).
const INCH: f64 = 0.0254;
const FOOT: f64 = 0.3048;
const POUND: f64 = 0.453_592_37;
const POUND_FORCE: f64 = POUND * G;
const BTU: f64 = 1_055.055_852_62;
const DEGREE: f64 = std::f64::consts::PI / 180.0;

/// Coherent SI of one unit: factors written again here, so that the service's table is not its own witness.
fn factor(unit: &str) -> f64 {
    match unit {
        "1" | "m" | "m2" | "kg" | "N" | "N.m" | "m/s" | "rad/s" | "m/s2" | "rad/s2" | "s" | "K"
        | "rad" | "kg.m2" | "kg/m3" | "%" => 1.0,
        "mm" => 1e-3,
        "mm2" => 1e-6,
        "mm3" => 1e-9,
        "in" => INCH,
        "ft" | "ft/s" | "ft/s2" => FOOT,
        "in2" => INCH * INCH,
        "in3" => INCH * INCH * INCH,
        "deg" => DEGREE,
        "lb" => POUND,
        "lbf" => POUND_FORCE,
        "MPa" | "W/mm2" | "J/mm2" | "MPa.m/s" => 1e6,
        "psi" => POUND_FORCE / (INCH * INCH),
        "lbf.in" => POUND_FORCE * INCH,
        "kJ" | "kW" => 1e3,
        "Btu" => BTU,
        "hp" => 550.0 * FOOT * POUND_FORCE,
        "rpm" => std::f64::consts::PI / 30.0,
        "hp/in2" => 550.0 * FOOT * POUND_FORCE / (INCH * INCH),
        "Btu/in2" => BTU / (INCH * INCH),
        "psi.ft/min" => POUND_FORCE / (INCH * INCH) * FOOT / 60.0,
        other => panic!("the unit {other} is not expected in an answer"),
    }
}

/// A number of a unit in coherent SI; `is_difference` tells differences of temperatures from points on the scale.
pub(crate) fn si(value: f64, unit: &str, is_difference: bool) -> f64 {
    match (unit, is_difference) {
        ("degF", true) => value / 1.8,
        ("degF", false) => (value + 459.67) / 1.8,
        ("degC", _) => value + 273.15,
        _ => value * factor(unit),
    }
}

/// Demands the same answer but for its units.
pub(crate) fn assert_same_physics(si_units: &Value, us_units: &Value, relative: f64) {
    Comparison { relative }.values(si_units, us_units, "");
}

struct Comparison {
    relative: f64,
}

impl Comparison {
    fn values(&self, one: &Value, other: &Value, at: &str) {
        match (one, other) {
            (Value::Object(first), Value::Object(second)) => {
                let names = |object: &serde_json::Map<String, Value>| {
                    object.keys().cloned().collect::<Vec<String>>()
                };
                assert_eq!(names(first), names(second), "{at}");
                if first.contains_key("value") && first.contains_key("unit") {
                    return self.quantities(one, other, at);
                }
                if first.contains_key("units") {
                    return self.traces(one, other, at);
                }
                for (name, part) in first.iter().filter(|(name, _)| *name != "input_digest") {
                    self.values(part, &second[name], &format!("{at}/{name}"));
                }
            }
            (Value::Array(first), Value::Array(second)) => {
                assert_eq!(first.len(), second.len(), "{at}");
                for (index, (one, other)) in first.iter().zip(second).enumerate() {
                    self.values(one, other, &format!("{at}/{index}"));
                }
            }
            (Value::Number(first), Value::Number(second)) => {
                self.numbers(first.as_f64().unwrap(), second.as_f64().unwrap(), at);
            }
            _ => assert_eq!(one, other, "{at}"),
        }
    }

    fn quantities(&self, one: &Value, other: &Value, at: &str) {
        let is_difference = at.ends_with("rise");
        let [one, other] = [one, other].map(|quantity| {
            let unit = quantity["unit"].as_str().unwrap();
            si(quantity["value"].as_f64().unwrap(), unit, is_difference)
        });
        self.numbers(one, other, at);
    }

    fn traces(&self, one: &Value, other: &Value, at: &str) {
        for column in ["time", "speed", "distance"] {
            let [one, other] = [one, other].map(|trace| {
                let unit = trace["units"][column].as_str().unwrap();
                let numbers = trace[column].as_array().unwrap();
                numbers
                    .iter()
                    .map(|number| si(number.as_f64().unwrap(), unit, false))
                    .collect::<Vec<f64>>()
            });
            assert_eq!(one.len(), other.len(), "{at}");
            for (one, other) in one.iter().zip(&other) {
                self.numbers(*one, *other, at);
            }
        }
    }

    fn numbers(&self, one: f64, other: f64, at: &str) {
        let bound = self.relative * one.abs().max(other.abs());
        assert!((one - other).abs() <= bound, "{at}: {one} and {other}");
    }
}

/// Demands that a request answers with the same physics in both unit systems.
pub(crate) async fn assert_both_unit_systems(path: &str, body: &Value) {
    let in_si = answer(path, &with(body, "/report_units", "si")).await;
    let in_us = answer(path, &with(body, "/report_units", "us")).await;
    assert_same_physics(&in_si, &in_us, 1e-12);
    assert_ne!(in_si["results"], in_us["results"]);
}

/// Status and body of whatever comes back.
pub(crate) async fn bytes_or_problem(path: &str, body: &str) -> (u16, Value) {
    let request = Request::post(path).header("content-type", "application/json");
    let answer = TestApp::new().send_any(request.body(Body::from(body.to_owned())).unwrap()).await;
    (answer.status.as_u16(), answer.json())
}
