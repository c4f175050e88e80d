//! One chain from pedal force to distance, energy and temperature, worked apart (`tests/reference/chain.py`).
//!
//! The reference shares no formula with the service: quadrature for the pads, root search and numerical
//! integration for the motion, finite volumes for the conduction. All data of the vehicle are invented.

use serde_json::{Value, json};

use crate::support::client::TestApp;
use crate::support::close::assert_close;
use crate::support::si::si;

const RELATIVE: f64 = 1e-6;
/// Below 1e-3 K: the service takes the power between 24 places of the build-up as straight, and the reference's
/// grids differ by 4e-4 K before their extrapolation.
const SURFACE: f64 = 3e-6; // of the rise

fn reference() -> Value {
    serde_json::from_str(include_str!("../reference/chain.json")).unwrap()
}

#[track_caller]
fn agrees(found: &Value, expected: &Value, members: &[&str]) {
    for member in members {
        let (actual, expected) = (si(&found[member]), expected[member].as_f64().unwrap());
        let off = (actual - expected).abs() / expected.abs();
        assert!(off <= RELATIVE, "{member} is {actual}, expected {expected}: {off:e}");
    }
}

async fn answer(path: &str, request: &Value) -> Value {
    TestApp::new().post(path, &request.to_string(), 200).await
}

fn cases(answer: &Value) -> Vec<Value> {
    answer["results"]["friction_cases"].as_array().unwrap().clone()
}

#[tokio::test]
async fn the_chain_stops_as_worked_apart() {
    let reference = reference();
    let mut request = reference["request"].clone();
    request.as_object_mut().unwrap().retain(|member, _| !member.ends_with("_temperature"));
    let answer = answer("/v1/stopping", &request).await;
    let found = cases(&answer);
    assert_eq!(found.len(), 3);
    for (found, expected) in found.iter().zip(cases_of(&reference)) {
        assert_eq!(found["friction_case"], expected["friction_case"]);
        assert_eq!(found["limited_by"], expected["limited_by"]);
        assert_eq!(found["reaches_final_speed"], true);
        let totals = ["total_time", "total_distance", "time_from_control", "distance_from_control"];
        agrees(found, &expected, &totals);
        agrees(found, &expected, &["braking_time", "braking_distance", "mean_deceleration"]);
        agrees(found, &expected, &["mean_fully_developed_deceleration", "peak_deceleration"]);
        for axle in 0..2 {
            let (found, expected) = (&found["axles"][axle], &expected["axles"][axle]);
            agrees(found, expected, &["brake_force", "normal_force"]);
            let used = [found, expected].map(|axle| axle["adhesion_used"].as_f64().unwrap());
            assert_close(used[0], used[1], RELATIVE);
        }
        for entry in 0..2 {
            let (found, expected) = (&found["fitted"][entry], &expected["fitted"][entry]);
            assert_eq!(found["coefficient"], expected["coefficient"]);
            agrees(found, expected, &["torque", "clamp_force"]);
        }
    }
    // The chain is meant to meet the tires in one case only.
    let limits = found.iter().map(|case| case["limited_by"].as_str().unwrap());
    assert_eq!(limits.collect::<Vec<_>>(), ["brake", "brake", "adhesion"]);
    let warnings = answer["warnings"].as_array().unwrap();
    let stroke = warnings.iter().find(|warning| warning["code"] == "operator_stroke").unwrap();
    assert_close(si(&stroke["actual"]), reference["operator_stroke"].as_f64().unwrap(), RELATIVE);
}

fn cases_of(reference: &Value) -> Vec<Value> {
    reference["friction_cases"].as_array().unwrap().clone()
}

#[tokio::test]
async fn the_chain_heats_its_discs_as_worked_apart() {
    let reference = reference();
    let answer = answer("/v1/stop-energy", &reference["request"]).await;
    let start = reference["request"]["start_temperature"]["value"].as_f64().unwrap();
    for (found, expected) in cases(&answer).iter().zip(cases_of(&reference)) {
        let balance = ["kinetic_translation", "kinetic_rotation", "grade_or_load", "resistance"];
        agrees(found, &expected, &balance);
        agrees(found, &expected, &["brake_energy"]);
        for entry in 0..2 {
            let (found, expected) = (&found["fitted"][entry], &expected["fitted"][entry]);
            agrees(found, expected, &["energy", "energy_per_face", "energy_flux", "mean_power"]);
            agrees(found, expected, &["peak_power", "peak_power_flux", "rubbing_speed"]);
            agrees(found, expected, &["disc_bulk_rise"]);
            let share = [found, expected].map(|entry| entry["disc_share"].as_f64().unwrap());
            assert_close(share[0], share[1], RELATIVE);
            let rise = si(&found["surface_peak_temperature"]) - start;
            let expected = expected["surface_peak_temperature"].as_f64().unwrap() - start;
            assert_close(rise, expected, SURFACE);
        }
    }
}

/// The parts of the chain one by one: pads at the force that presses, and back from the torque to the pedal.
#[tokio::test]
async fn the_links_of_the_chain_are_those_worked_apart() {
    let reference = reference();
    let nominal = &reference["friction_cases"][1];
    for (index, entry) in reference["request"]["fitted"].as_array().unwrap().iter().enumerate() {
        let (mut brake, expected) = (entry["brake"].clone(), &nominal["fitted"][index]);
        let clamp = json!({"value": expected["clamp_force"], "unit": "N"});
        let capacity = json!({
            "pad": brake["pad"], "lining": brake["lining"], "clamp_force": clamp,
            "pressure_distribution": brake["pressure_distribution"],
        });
        let found = &answer("/v1/pad-capacity", &capacity).await["results"];
        agrees(
            found,
            expected,
            &["pad_area", "effective_radius", "mean_pressure", "peak_pressure"],
        );
        agrees(&found["friction_cases"][1], expected, &["torque"]);

        let master = brake["actuation"]["master_cylinder"].as_object_mut().unwrap();
        let pedal = si(&master.remove("operator_force").unwrap());
        let share = entry["operator_share"].as_f64().unwrap();
        let torque = json!({"value": expected["torque"], "unit": "N.m"});
        let request = json!({"brake": brake, "torque": torque});
        let found = &answer("/v1/actuation-force", &request).await["results"]["friction_cases"][1];
        agrees(found, expected, &["clamp_force", "line_pressure", "fluid_volume", "peak_pressure"]);
        assert_close(si(&found["operator_force"]), pedal * share, RELATIVE);
    }
}
