//! Answers in coherent SI, by factors written down here, apart from the service's own table.

use serde_json::Value;

/// A measure of an answer in coherent SI; temperatures in degC.
#[track_caller]
pub(crate) fn si(measure: &Value) -> f64 {
    let unit = measure["unit"].as_str().unwrap_or_else(|| panic!("no measure: {measure}"));
    let factor = match unit {
        "m" | "s" | "m/s" | "m/s2" | "rad/s2" | "rad" | "N" | "N.m" | "K" | "degC" | "1" => 1.0,
        "mm" => 1e-3,
        "mm2" => 1e-6,
        "mm3" => 1e-9,
        "MPa" | "W/mm2" | "J/mm2" | "MPa.m/s" => 1e6,
        "kJ" | "kW" => 1e3,
        "deg" => std::f64::consts::PI / 180.0,
        "rpm" => std::f64::consts::PI / 30.0,
        other => panic!("no factor for {other}"),
    };
    measure["value"].as_f64().unwrap() * factor
}
