//! Repeated stops and wear through the front door: against an outside ODE solver (`tests/reference/repeated.py`)
//! and against published examples. Marks as in `cooling.rs`.

use std::collections::BTreeMap;

use serde::Deserialize;
use serde_json::{Value, json};

use crate::support::client::TestApp;
use crate::support::close::{assert_close, assert_within};

#[derive(Deserialize)]
struct Reference {
    cases: Vec<Case>,
}

#[derive(Deserialize)]
struct Case {
    name: String,
    request: Value,
    expected: BTreeMap<String, f64>,
}

/// Temperature rises above ambient, relative; reached: 5e-5.
const RISE: f64 = 1e-4;

/// The first entry of the first friction case.
async fn entry(request: &Value) -> Value {
    let answer = TestApp::new().post("/v1/stop-energy", &request.to_string(), 200).await;
    answer["results"]["friction_cases"][0]["fitted"][0].clone()
}

fn value(of: &Value) -> f64 {
    of["value"].as_f64().unwrap()
}

#[tokio::test]
async fn repeated_stops_agree_with_an_outside_solver() {
    let reference: Reference =
        serde_json::from_str(include_str!("../reference/repeated.json")).unwrap();
    for case in &reference.cases {
        let found = entry(&case.request).await;
        let ambient = value(&case.request["ambient_temperature"]);
        for (member, expected) in &case.expected {
            if member == "stops_to_continuous_limit" {
                assert_eq!(found[member].as_f64(), Some(*expected), "{}", case.name);
                continue;
            }
            let error = (value(&found[member]) - expected).abs() / (expected - ambient);
            assert!(error <= RISE, "{} {member}: off by {error:.1e}: {found}", case.name);
        }
        let is_reached = case.expected.contains_key("stops_to_continuous_limit");
        assert_eq!(found.get("stops_to_continuous_limit").is_some(), is_reached, "{}", case.name);
    }
}

/// A shaft of 10 kg m² stopped from 100 rad/s by one brake: 50 kJ, by hand. Pads of 40 cm²: 1 rad/2 (0.12² − 0.08²) m².
fn flywheel(disc: &Value, lining: &Value) -> Value {
    let mm = |value: f64| json!({"value": value, "unit": "mm"});
    json!({
        "machine": {"kind": "shaft", "inertia": {"value": 10, "unit": "kg.m2"}},
        "fitted": [{"brake": {
            "pad": {"shape": "annular_sector", "inner_radius": mm(80.0), "outer_radius": mm(120.0), "angle": {"value": 1, "unit": "rad"}, "wear_allowance": mm(9.0)},
            "lining": lining, "disc": disc,
            "actuation": {"kind": "clamp_force", "force": {"value": 10, "unit": "kN"}},
        }}],
        "initial_rotational_speed": {"value": 100, "unit": "rad/s"},
    })
}

/// EN 1993-1-2, 3.4.1.2 [S]: 200 kJ/kg from 20 degC bring carbon steel to 397.779 degC; here 50 kJ in 0.25 kg.
#[tokio::test]
async fn a_steel_disc_warms_by_its_published_enthalpy() {
    let mm = |value: f64| json!({"value": value, "unit": "mm"});
    let disc = json!({
        "material": {"id": "carbon_steel"}, "outer_radius": mm(120.0), "inner_radius": mm(80.0), "thickness": mm(10.0),
        "construction": "solid", "mass": {"value": 0.25, "unit": "kg"},
    });
    let mut request = flywheel(&disc, &json!({"friction": {"nominal": 0.4}}));
    let found = entry(&request).await;
    assert_close(value(&found["energy"]), 50.0, 1e-12);
    assert_within(value(&found["disc_bulk_rise"]), 377.779, 6e-4);
    // The same through a duty of that one stop.
    let stop =
        json!({"kind": "stop", "initial_rotational_speed": request["initial_rotational_speed"]});
    request.as_object_mut().unwrap().remove("initial_rotational_speed");
    request["events"] = json!([stop]);
    let answer = TestApp::new().post("/v1/duty-cycle", &request.to_string(), 200).await;
    let duty = &answer["results"]["friction_cases"][0]["fitted"][0];
    assert_within(value(&duty["peak_bulk_temperature"]), 397.779, 6e-4);
}

/// A cooling that takes nothing leaves the energy in the disc, over the peak of steel's specific heat at 735 degC too.
#[tokio::test]
async fn steel_keeps_its_energy_over_the_peak_of_its_specific_heat() {
    let mm = |value: f64| json!({"value": value, "unit": "mm"});
    for mass in [0.12, 0.115, 0.11, 0.105, 0.1, 0.095] {
        let mut disc = json!({
            "material": {"id": "carbon_steel"}, "outer_radius": mm(120.0), "inner_radius": mm(80.0), "thickness": mm(10.0),
            "construction": "solid", "mass": {"value": mass, "unit": "kg"},
        });
        let lining = json!({"friction": {"nominal": 0.4}});
        let rise = value(&entry(&flywheel(&disc, &lining)).await["disc_bulk_rise"]);
        assert!((600.0..1000.0).contains(&rise), "{rise}");
        disc["cooling"] = json!({"coefficient": {"value": 1e-9, "unit": "W/(m2.K)"}});
        let mut request = flywheel(&disc, &lining);
        request["interval"] = json!({"value": 3600, "unit": "s"});
        request["stop_count"] = json!(1);
        let peak = value(&entry(&request).await["peak_after_stops"]);
        assert_close(peak - 20.0, rise, 2e-4);
    }
}

/// Energy law of wear [V]: two pads of 40 cm², 9 mm, 0.2 cm³/MJ, 50 kJ a stop: 7200 stops.
#[tokio::test]
async fn pads_last_as_many_stops_as_published() {
    let wear =
        json!({"friction": {"nominal": 0.4}, "specific_wear": {"value": 0.2, "unit": "cm3/MJ"}});
    let mut request = flywheel(&Value::Null, &wear);
    request["fitted"][0]["brake"].as_object_mut().unwrap().remove("disc");
    assert_close(entry(&request).await["pad_life_stops"].as_f64().unwrap(), 7200.0, 1e-12);
    // A duty of a hundred such stops wears off the 72nd part of 9 mm.
    let stop =
        json!({"kind": "stop", "initial_rotational_speed": request["initial_rotational_speed"]});
    request.as_object_mut().unwrap().remove("initial_rotational_speed");
    request["events"] = json!([stop]);
    request["repeats"] = json!(100);
    let answer = TestApp::new().post("/v1/duty-cycle", &request.to_string(), 200).await;
    let duty = &answer["results"]["friction_cases"][0]["fitted"][0];
    assert_close(value(&duty["pad_wear"]), 9.0 / 72.0, 1e-9);
}

/// Shigley, Mechanical Engineering Design, example 16-5 [M; recomputed V]: a steel disc of 6 in by 0.25 in, 0.282
/// lbm/in³, 0.108 Btu/(lbm °F), stopped 24 times an hour from 250 rpm, 70 °F around, 12.6e-6 Btu/(in² s °F) on 50 in²:
/// printed 209 and 160 °F, recomputed 208.69 and 159.42 °F (the book rounds the mass).
#[tokio::test]
async fn a_clutch_disc_settles_at_its_published_temperatures() {
    let inch = |value: f64| json!({"value": value, "unit": "in"});
    // π/4·6²·0.25·0.282 lbm, as in the book, whatever ring is rubbed.
    let mass = std::f64::consts::PI / 4.0 * 36.0 * 0.25 * 0.282;
    // The inner radius for which both faces and the rim are 50 in²: 2π(3² − r²) + 2π·3·0.25 = 50.
    let inner = (9.0 + 0.75 - 25.0 / std::f64::consts::PI).sqrt();
    // I = 289 with the book's E = I ω²/2/9336 Btu, in kg m².
    let inertia = 289.0 / 9336.0 * 1_055.055_852_62;
    let request = json!({
        "report_units": "us",
        "machine": {"kind": "shaft", "inertia": {"value": inertia, "unit": "kg.m2"}},
        "fitted": [{"brake": {
            "pad": {"shape": "annular_sector", "inner_radius": inch(inner), "outer_radius": inch(3.0), "angle": {"value": 60, "unit": "deg"}},
            "lining": {"friction": {"nominal": 0.4}},
            "disc": {
                "material": {"density": {"value": 0.282, "unit": "lb/in3"}, "specific_heat": {"value": 0.108, "unit": "Btu/(lb.degF)"}, "conductivity": {"value": 28, "unit": "Btu/(h.ft.degF)"}},
                "outer_radius": inch(3.0), "inner_radius": inch(1.0), "thickness": inch(0.25), "construction": "solid",
                "mass": {"value": mass, "unit": "lb"},
                "cooling": {"coefficient": {"value": 12.6e-6 * 144.0 * 3600.0, "unit": "Btu/(h.ft2.degF)"}},
            },
            // The book heats in no time: a torque that stops within a hundredth of a second.
            "actuation": {"kind": "clamp_force", "force": {"value": 4000, "unit": "kN"}},
        }}],
        "initial_rotational_speed": {"value": 250, "unit": "rpm"},
        "stop_frequency": {"value": 24, "unit": "1/h"},
        "ambient_temperature": {"value": 70, "unit": "degF"},
    });
    let found = entry(&request).await;
    assert_within(value(&found["energy"]), 10.6083, 5e-5);
    assert_within(value(&found["disc_bulk_rise"]), 49.276, 5e-4);
    assert_within(value(&found["steady_bulk_peak"]), 208.69, 6e-3);
    assert_within(value(&found["steady_bulk_trough"]), 159.42, 6e-3);
    assert_eq!(found["steady_bulk_peak"]["unit"], "degF");
}
