//! Stops of all machines through the front door against numerical integration (`tests/reference/stops.py`).
//!
//! The reference finds the ground forces by root search and integrates with an eighth-order method of scipy to
//! 1e-12; both sides claim far less error than the 1e-6 demanded here.

use serde::Deserialize;
use serde_json::{Value, json};

use crate::support::client::TestApp;
use crate::support::si::si;

/// What deviates, in words.
type Off = Vec<String>;

const RELATIVE: f64 = 1e-6;

#[derive(Deserialize)]
struct Reference {
    cases: Vec<Case>,
}

#[derive(Deserialize)]
struct Case {
    name: String,
    request: Value,
    expected: Value,
}

impl Case {
    fn is_shaft(&self) -> bool {
        self.request["machine"]["kind"] == "shaft"
    }

    /// Notes a value that is not the reference's. What is small against `scale` may be off by more of itself.
    fn hold(&self, off: &mut Off, what: &str, actual: &Value, expected: &Value, scale: f64) {
        let name = &self.name;
        match (actual.is_null(), expected.as_f64()) {
            (true, None) => {}
            (false, Some(expected)) => {
                let actual = si(actual);
                let agrees = (actual - expected).abs() <= RELATIVE * expected.abs().max(scale);
                if !agrees {
                    off.push(format!("{name}: {what} is {actual}, expected {expected}"));
                }
            }
            _ => off.push(format!("{name}: {what} is {actual}, expected {expected}")),
        }
    }

    fn compare_motion(&self, off: &mut Off, found: &Value) {
        let expected = &self.expected;
        assert_eq!(found["reaches_final_speed"], expected["reaches_final_speed"], "{}", self.name);
        let [distance, braking, mean, peak, tending] = if self.is_shaft() {
            let peak = "peak_angular_deceleration";
            let mean = "mean_angular_deceleration";
            ["total_angle", "braking_angle", mean, peak, "tending_rotational_speed"]
        } else {
            let peak = "peak_deceleration";
            ["total_distance", "braking_distance", "mean_deceleration", peak, "tending_speed"]
        };
        for (name, member) in [
            ("total_time", "total_time"),
            ("total_distance", distance),
            ("braking_time", "braking_time"),
            ("braking_distance", braking),
            ("mean_deceleration", mean),
            ("peak_deceleration", peak),
            ("tending_speed", tending),
        ] {
            self.hold(off, name, &found[member], &expected[name], 0.0);
        }
        let name = "mean_fully_developed_deceleration";
        self.hold(off, name, &found[name], &expected[name], 0.0);
        self.compare_axles(off, found);
        assert_eq!(
            found["runs_back"].as_bool().unwrap_or(false),
            expected["runs_back"].as_bool().unwrap_or(false),
            "{}",
            self.name
        );
        for member in ["time", "distance", "peak_speed"] {
            let what = format!("run_back/{member}");
            let (found, expected) = (&found["run_back"][member], &expected["run_back"][member]);
            self.hold(off, &what, found, expected, 0.0);
        }
    }

    fn compare_axles(&self, off: &mut Off, found: &Value) {
        let Some(axles) = self.expected["axles"].as_array() else { return };
        let weight = axles.iter().map(|axle| axle["normal_force"].as_f64().unwrap()).sum::<f64>();
        for (index, expected) in axles.iter().enumerate() {
            for member in ["brake_force", "normal_force"] {
                let what = format!("axles/{index}/{member}");
                self.hold(off, &what, &found["axles"][index][member], &expected[member], weight);
            }
        }
    }

    fn compare_energy(&self, off: &mut Off, found: &Value) {
        let expected = &self.expected;
        let kinetic = &expected["kinetic_translation"];
        let scale = expected["kinetic"].as_f64().unwrap_or(0.0);
        self.hold(off, "kinetic_translation", &found["kinetic_translation"], kinetic, 0.0);
        for member in ["grade_or_load", "resistance", "brake_energy"] {
            self.hold(off, member, &found[member], &expected[member], scale);
        }
        if let (Some(all), Some(translation)) = (expected["kinetic"].as_f64(), kinetic.as_f64()) {
            let rotation = json!(all - translation);
            self.hold(off, "kinetic_rotation", &found["kinetic_rotation"], &rotation, scale);
        }
        for (index, expected) in expected["fitted"].as_array().into_iter().flatten().enumerate() {
            for member in ["energy", "peak_power"] {
                let what = format!("fitted/{index}/{member}");
                self.hold(off, &what, &found["fitted"][index][member], &expected[member], 0.0);
            }
        }
    }
}

fn cases() -> Vec<Case> {
    let text = include_str!("../reference/stops.json");
    serde_json::from_str::<Reference>(text).unwrap().cases
}

fn of(name: &str) -> usize {
    cases().iter().filter(|case| case.name.contains(name)).count()
}

#[test]
fn the_reference_varies_machines_limits_and_endings() {
    assert!(cases().len() >= 60);
    for name in
        ["grade", "drag", "adhesion", "lift", "modulated", "too weak", "runs back", "driven"]
    {
        assert!(of(name) >= 2, "{name}");
    }
    for kind in ["vehicle", "shaft", "hoist", "conveyor"] {
        assert!(cases().iter().filter(|case| case.request["machine"]["kind"] == kind).count() >= 6);
    }
}

#[tokio::test]
async fn stops_agree_with_numerical_integration() {
    let (app, mut off) = (TestApp::new(), Off::new());
    for case in cases() {
        let answer = app.post("/v1/stopping", &case.request.to_string(), 200).await;
        let found = answer["results"]["friction_cases"].as_array().unwrap();
        assert_eq!(found.len(), 1, "{}", case.name);
        case.compare_motion(&mut off, &found[0]);
    }
    assert!(off.is_empty(), "{}", off.join("\n"));
}

#[tokio::test]
async fn energies_agree_with_numerical_integration() {
    let (app, mut off) = (TestApp::new(), Off::new());
    for case in cases() {
        let answer = app.post("/v1/stop-energy", &case.request.to_string(), 200).await;
        case.compare_energy(&mut off, &answer["results"]["friction_cases"][0]);
    }
    assert!(off.is_empty(), "{}", off.join("\n"));
}
