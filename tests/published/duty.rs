//! Duties against numbers that an outside ODE solver found (`tests/reference/duty.py`), through the front door.
//!
//! All data are invented for the test, but for the catalog's materials.

use serde::Deserialize;
use serde_json::{Value, json};

use crate::support::client::TestApp;

#[derive(Deserialize)]
struct Reference {
    cases: Vec<Case>,
}

#[derive(Deserialize)]
struct Case {
    name: String,
    request: Value,
    expected: Expected,
}

#[derive(Deserialize)]
struct Expected {
    duration: f64,
    longest: f64,
    longest_time: f64,
    fitted: Vec<ExpectedEntry>,
}

#[derive(Deserialize)]
struct ExpectedEntry {
    energy: f64,
    lowest_friction_factor: f64,
    peak_bulk: Option<f64>,
    peak_surface: Option<f64>,
    end_bulk: Option<f64>,
}

/// Distances and times of stops, relative; reached: 1.4e-4.
const DISTANCE: f64 = 3e-4;
/// Temperature rises and energies, relative; reached: 4.6e-4.
const RISE: f64 = 6e-4;
/// Friction factors, absolute.
const FACTOR: f64 = 1e-3;

/// Adds a sentence for a value that lies farther off than it may.
fn hold(off: &mut Vec<String>, what: &str, (actual, expected): (f64, f64), relative: f64) {
    let error = (actual - expected).abs() / expected.abs();
    if error.is_nan() || error > relative {
        off.push(format!("{what}: {actual} is not {expected}, off by {error:.1e}"));
    }
}

fn hold_entry(off: &mut Vec<String>, case: &Case, index: usize, results: &Value) {
    let (fitted, expected) = (&results["fitted"][index], &case.expected.fitted[index]);
    let base = |member: &str| case.request[member]["value"].as_f64();
    let ambient = base("ambient_temperature").unwrap_or(20.0);
    let start = base("start_temperature").unwrap_or(ambient);
    let energy = fitted["energy"]["value"].as_f64().unwrap() * 1e3;
    hold(off, &format!("{} energy {index}", case.name), (energy, expected.energy), RISE);
    let factor = fitted["lowest_friction_factor"].as_f64().unwrap();
    hold(
        off,
        &format!("{} factor {index}", case.name),
        (factor + 1.0, expected.lowest_friction_factor + 1.0),
        0.5 * FACTOR,
    );
    let last = results["trace"]["fitted"][index]["bulk"].as_array().unwrap().last();
    let found = [
        ("bulk", fitted["peak_bulk_temperature"]["value"].as_f64(), expected.peak_bulk),
        ("surface", fitted["peak_surface_temperature"]["value"].as_f64(), expected.peak_surface),
        ("end", last.and_then(Value::as_f64), expected.end_bulk),
    ];
    for (what, actual, expected) in found {
        assert_eq!(actual.is_some(), expected.is_some(), "{} {what}", case.name);
        if let (Some(actual), Some(expected)) = (actual, expected) {
            // A rise above the cooler of start and ambient, for both may differ.
            let rises = (actual - start.min(ambient), expected - start.min(ambient));
            hold(off, &format!("{} {what} {index}", case.name), rises, RISE);
        }
    }
}

#[tokio::test]
async fn duties_with_fade_agree_with_an_outside_solver() {
    let reference: Reference =
        serde_json::from_str(include_str!("../reference/duty.json")).unwrap();
    assert!(reference.cases.len() >= 8);
    let mut off = Vec::new();
    for case in &reference.cases {
        let mut request = case.request.clone();
        request["trace"] = json!({"points": 2000});
        let answer = TestApp::new().post("/v1/duty-cycle", &request.to_string(), 200).await;
        let results = &answer["results"]["friction_cases"][0];
        assert_eq!(results["completed"], true, "{}: {results}", case.name);
        let expected = &case.expected;
        let duration = results["duration"]["value"].as_f64().unwrap();
        hold(&mut off, &format!("{} duration", case.name), (duration, expected.duration), DISTANCE);
        let longest = &results["longest_stop"];
        let way = longest["total_distance"]["value"].as_f64();
        let angle = || longest["total_angle"]["value"].as_f64().map(f64::to_radians).unwrap();
        let way = way.unwrap_or_else(angle);
        hold(&mut off, &format!("{} longest", case.name), (way, expected.longest), DISTANCE);
        let time = longest["total_time"]["value"].as_f64().unwrap();
        hold(&mut off, &format!("{} time", case.name), (time, expected.longest_time), DISTANCE);
        for index in 0..expected.fitted.len() {
            hold_entry(&mut off, case, index, results);
        }
    }
    assert!(off.is_empty(), "{}", off.join("\n"));
}
