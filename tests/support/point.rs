//! A body that only its brake retards, for rules that are written for nothing else.

use serde_json::{Value, json};

/// A measure on the wire.
pub(crate) fn q(value: f64, unit: &str) -> Value {
    json!({"value": value, "unit": unit})
}

/// A request to brake 1000 kg with `deceleration`, m/s², from a speed.
pub(crate) fn braked(deceleration: f64, speed: &Value) -> Value {
    let machine =
        json!({"kind": "vehicle", "mass": q(1000.0, "kg"), "rolling_radius": q(1.0, "m")});
    let torque = q(1000.0 * deceleration, "N.m");
    json!({"machine": machine, "fitted": [{"axle": "all", "torque": torque}], "initial_speed": speed})
}
