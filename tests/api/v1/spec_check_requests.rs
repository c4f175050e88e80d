//! Specification checks to start from. All data invented.

use serde_json::{Value, json};

use super::common::{answer, q, sector, with};

pub(super) const SPEC_CHECK: &str = "/v1/spec-check";

/// A disc that the sector fits on, with its cooling known.
pub(super) fn disc() -> Value {
    with(&super::common::disc(), "/cooling", json!({"coefficient": q(60.0, "W/(m2.K)")}))
}

/// A lining of 0.3, 0.4 and 0.5 with every limit, none of them near.
pub(super) fn lining() -> Value {
    json!({
        "friction": {"low": 0.3, "nominal": 0.4, "high": 0.5},
        "max_pressure": q(4.0, "MPa"), "max_rubbing_speed": q(60.0, "m/s"),
        "max_pressure_velocity": q(90.0, "MPa.m/s"), "max_power_flux": q(40.0, "W/mm2"),
        "max_energy_flux": q(60.0, "J/mm2"), "max_temperature_continuous": q(300.0, "degC"),
        "max_temperature_peak": q(600.0, "degC"), "specific_wear": q(120.0, "mm3/MJ"),
    })
}

fn brake(actuation: &Value) -> Value {
    json!({
        "pad": with(&sector(), "/wear_allowance", q(10.0, "mm")),
        "lining": lining(), "disc": disc(), "actuation": actuation,
    })
}

/// A hydraulic brake on a pedal; 200 N make 1 kN/(pi/4 · 20²) mm² = 3.18 MPa.
pub(super) fn hydraulic(piston_diameter: f64) -> Value {
    brake(&json!({
        "kind": "hydraulic", "piston_diameter": q(piston_diameter, "mm"), "efficiency": 0.98,
        "max_line_pressure": q(12.0, "MPa"), "running_clearance": q(0.5, "mm"),
        "master_cylinder": {"bore": q(20.0, "mm"), "lever_ratio": 5.0, "efficiency": 0.9,
            "operator_force": q(200.0, "N"), "max_operator_force": q(500.0, "N"),
            "max_stroke": q(400.0, "mm")},
    }))
}

/// A brake with a known clamp force.
pub(super) fn clamped(force: f64) -> Value {
    brake(&json!({"kind": "clamp_force", "force": q(force, "N")}))
}

/// A brake pressed by air.
pub(super) fn pneumatic() -> Value {
    brake(&json!({
        "kind": "pneumatic", "chamber_area": q(50.0, "cm2"), "air_pressure": q(0.6, "MPa"),
        "max_air_pressure": q(0.9, "MPa"), "force_ratio": 3.0, "efficiency": 0.9,
    }))
}

/// A brake pressed by a spring and opened by a piston.
pub(super) fn spring() -> Value {
    brake(&json!({
        "kind": "spring", "spring_force": q(9.0, "kN"), "spring_rate": q(200.0, "N/mm"),
        "pad_wear_travel": q(4.0, "mm"), "release_travel": q(2.0, "mm"), "efficiency": 0.95,
        "release_piston_diameter": q(50.0, "mm"), "max_release_pressure": q(12.0, "MPa"),
    }))
}

/// Without a lining's memory: one that fades from 100 to 400 degC down to 0.6.
pub(super) fn fade() -> Value {
    json!([
        {"temperature": q(100.0, "degC"), "factor": 1.0},
        {"temperature": q(400.0, "degC"), "factor": 0.6},
    ])
}

/// A vehicle of 1500 kg whose axles and tires are known.
pub(super) fn vehicle() -> Value {
    json!({
        "kind": "vehicle", "mass": q(1500.0, "kg"), "rolling_radius": q(300.0, "mm"), "adhesion": 0.8,
        "geometry": {"wheelbase": q(2.6, "m"), "center_of_gravity_height": q(0.55, "m"),
            "front_axle_to_center_of_gravity": q(1.2, "m")},
    })
}

/// Two larger brakes in front and two smaller ones behind, on one pedal.
pub(super) fn four_brakes() -> Value {
    json!([
        {"brake": hydraulic(50.0), "count": 2, "axle": "front", "control": "pedal"},
        {"brake": hydraulic(22.0), "count": 2, "axle": "rear", "control": "pedal"},
    ])
}

/// A stop from 20 m/s with every limit, none of them near.
pub(super) fn stop() -> Value {
    json!({
        "kind": "stop", "name": "emergency stop", "initial_speed": q(20.0, "m/s"),
        "response": {"reaction_time": q(0.5, "s"), "dead_time": q(0.1, "s"), "build_up_time": q(0.2, "s")},
        "require": {
            "max_distance": q(150.0, "m"), "max_time": q(20.0, "s"),
            "min_mean_deceleration": q(1.0, "m/s2"),
            "min_mean_fully_developed_deceleration": q(1.0, "m/s2"),
            "min_peak_deceleration": q(1.0, "m/s2"), "max_deceleration": q(9.0, "m/s2"),
            "min_braking_ratio": 0.1, "min_pad_life_stops": 1000.0,
            "no_wheel_lock": true, "front_locks_first": true, "no_rear_wheel_lift": true,
        },
    })
}

/// Stops from 15 m/s, 20 of them, one a minute.
pub(super) fn repeated() -> Value {
    json!({
        "kind": "repeated_stops", "initial_speed": q(15.0, "m/s"), "interval": q(60.0, "s"), "stop_count": 20,
    })
}

/// Standing on 18 %, facing uphill.
pub(super) fn hold() -> Value {
    json!({"kind": "hold", "grade": q(18.0, "%"), "require": {"min_holding_factor": 1.2}})
}

pub(super) fn spec(machine: Value, fitted: Value, duties: Vec<Value>) -> Value {
    let members = [("machine", machine), ("fitted", fitted), ("duties", duties.into())];
    members.into_iter().map(|(name, member)| (name.to_owned(), member)).collect()
}

/// The vehicle, its four brakes, and one stop with every limit: everything is met, and nothing is near.
pub(super) fn one_stop() -> Value {
    spec(vehicle(), four_brakes(), vec![stop()])
}

/// The vehicle at rest on a slope.
pub(super) fn one_hold() -> Value {
    spec(vehicle(), four_brakes(), vec![hold()])
}

/// A hoist that lowers 1000 kg at 2 m/s; its shaft turns 100 rad a metre, so the load pulls with 98.07 N.m.
pub(super) fn hoist() -> Value {
    let duty = json!({"kind": "stop", "initial_speed": q(2.0, "m/s"), "direction": "lowering"});
    spec(super::common::hoist()["machine"].clone(), json!([{"brake": spring()}]), vec![duty])
}

/// A shaft of 12 kg.m2 that 20 N.m drive, at 100 rad/s.
pub(super) fn shaft() -> Value {
    let machine =
        json!({"kind": "shaft", "inertia": q(12.0, "kg.m2"), "driving_torque": q(20.0, "N.m")});
    let duty = json!({
        "kind": "stop", "initial_rotational_speed": q(100.0, "rad/s"), "require": {"max_time": q(30.0, "s")},
    });
    spec(machine, json!([{"brake": clamped(1500.0)}]), vec![duty, json!({"kind": "hold"})])
}

/// A conveyor that carries 1000 kg up a slope of 10 deg at 3 m/s.
pub(super) fn conveyor() -> Value {
    let machine = &super::common::conveyor()["machine"];
    let machine = with(machine, "/incline", q(10.0, "deg"));
    let stop = json!({"kind": "stop", "initial_speed": q(3.0, "m/s")});
    let fitted = json!([{"brake": pneumatic()}]);
    spec(machine, fitted, vec![stop, json!({"kind": "hold"})])
}

/// All checks of an answer with a code.
pub(super) fn checks<'a>(answer: &'a Value, code: &str) -> Vec<&'a Value> {
    let all = answer["results"]["checks"].as_array().unwrap();
    all.iter().filter(|check| check["code"] == code).collect()
}

/// The first check with a code: that of the first duty and entry.
#[track_caller]
pub(super) fn check<'a>(answer: &'a Value, code: &str) -> &'a Value {
    let found = checks(answer, code);
    found.first().unwrap_or_else(|| panic!("no check {code} in {:#}", answer["results"]["checks"]))
}

/// The first check with a code in the answer to a request.
pub(super) async fn check_of(body: &Value, code: &str) -> Value {
    check(&answer(SPEC_CHECK, body).await, code).clone()
}

pub(super) async fn verdict_of(body: &Value) -> String {
    let answer = answer(SPEC_CHECK, body).await;
    answer["results"]["verdict"].as_str().unwrap().to_owned()
}

pub(super) fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("no number: {value}"))
}

/// The utilization of a check that has one.
pub(super) fn used(check: &Value) -> f64 {
    number(&check["utilization"])
}

/// The statuses of an answer's checks, each with its code, in order.
pub(super) fn statuses(answer: &Value) -> Vec<(&str, &str)> {
    let all = answer["results"]["checks"].as_array().unwrap();
    all.iter()
        .map(|check| (check["code"].as_str().unwrap(), check["status"].as_str().unwrap()))
        .collect()
}
