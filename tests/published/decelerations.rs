//! Mean decelerations and axle loads against values worked by hand or recomputed from published statics.

use serde_json::{Value, json};

use crate::support::client::TestApp;
use crate::support::close::{assert_close, assert_within};
use crate::support::point::{braked, q};
use crate::support::si::si;

const GRAVITY: f64 = 9.806_65; // m/s², exact

async fn stop(request: &Value) -> (Value, Value) {
    let answer = TestApp::new().post("/v1/stopping", &request.to_string(), 200).await;
    (answer["results"]["friction_cases"][0].clone(), answer["warnings"].clone())
}

/// UN R13 Annex 4, 1.1.2, and directive 71/320 annex II (definition read): between 0.8 and 0.1 of the speed.
///
/// By hand, 20 m/s, 5 m/s² built up over 2 s: v = 20 − 1.25 t², so 16 m/s at t² = 3.2 after 33.391 948 m; 15 m/s at
/// 2 s after 36.666 667 m; 2 m/s another (225 − 4)/10 m on. d_m = 252/(2·25.374 719) = 4.965 571 m/s².
#[tokio::test]
async fn the_mean_fully_developed_deceleration_begins_within_the_build_up() {
    let mut request = braked(5.0, &q(20.0, "m/s"));
    request["response"] = json!({"build_up_time": q(2.0, "s")});
    let (found, _) = stop(&request).await;
    let mean = si(&found["mean_fully_developed_deceleration"]);
    assert_within(mean, 4.965_571, 2e-6);
    // To rest: 36.666 667 + 22.5 m; the mean deceleration over all of it is 400/(2·59.166 667).
    assert_close(si(&found["mean_deceleration"]), 400.0 / (2.0 * (110.0 / 3.0 + 22.5)), 1e-12);
}

/// A constant deceleration is its own mean over any part; a stop that ends above a tenth of its speed has none.
#[tokio::test]
async fn the_mean_fully_developed_deceleration_needs_the_speed_to_fall_to_a_tenth() {
    for (end, is_there) in [(0.0, true), (2.0, true), (2.001, false)] {
        let mut request = braked(5.0, &q(20.0, "m/s"));
        request["final_speed"] = q(end, "m/s");
        let (found, _) = stop(&request).await;
        let mean = &found["mean_fully_developed_deceleration"];
        assert_eq!(mean.is_object(), is_there, "{end}");
        if is_there {
            assert_close(si(mean), 5.0, 1e-12);
        }
    }
}

/// L 2.6, l_f 1.2, h 0.55 m, 1000 kg; torques as shares of the weight on 1 m wheels.
fn car(adhesion: Option<f64>, front: f64, rear: f64) -> Value {
    let mut machine = json!({
        "kind": "vehicle", "mass": q(1000.0, "kg"), "rolling_radius": q(1.0, "m"),
        "geometry": {"wheelbase": q(2.6, "m"), "center_of_gravity_height": q(0.55, "m"), "front_axle_to_center_of_gravity": q(1.2, "m")},
    });
    if let Some(adhesion) = adhesion {
        machine["adhesion"] = json!(adhesion);
    }
    let torque = |share: f64| q(share * 1000.0 * GRAVITY, "N.m");
    let entries = [("front", front), ("rear", rear)];
    let fitted: Vec<Value> = entries
        .iter()
        .filter(|(_, share)| *share > 0.0)
        .map(|(axle, share)| json!({"axle": axle, "torque": torque(*share)}))
        .collect();
    json!({"machine": machine, "fitted": fitted, "initial_speed": q(20.0, "m/s")})
}

/// Statics of the braked two-axle vehicle (Limpert, from memory; recomputed by hand): front only μ l_r/(L − μ h),
/// rear only μ l_f/(L + μ h), all μ; 6 deg downhill front only 0.411150 g in all.
#[tokio::test]
async fn load_transfer_gives_the_published_braking_ratios() {
    for (front, rear, expected, within) in
        [(9.0, 0.0, 0.518_518_5, 5e-8), (0.0, 9.0, 0.315_789_5, 5e-8), (9.0, 9.0, 0.8, 1e-12)]
    {
        let (found, warnings) = stop(&car(Some(0.8), front, rear)).await;
        assert_within(si(&found["peak_deceleration"]) / GRAVITY, expected, within);
        assert_eq!(found["limited_by"], "adhesion");
        let codes = warnings.as_array().unwrap().iter().map(|warning| warning["code"].clone());
        assert!(codes.into_iter().any(|code| code == "sliding_friction_lower"));
    }
    let mut downhill = car(Some(0.8), 9.0, 0.0);
    downhill["grade"] = q(-6.0, "deg");
    let (found, _) = stop(&downhill).await;
    assert_within(si(&found["peak_deceleration"]) / GRAVITY, 0.411_150, 5e-7);
}

/// By hand at 0.5 g with both axles braked: N_f = W(l_r + z h)/L = 1000·g·1.675/2.6, N_r = W(l_f − z h)/L.
#[tokio::test]
async fn axle_loads_shift_with_the_braking_ratio() {
    let (found, _) = stop(&car(None, 0.3, 0.2)).await;
    let weight = 1000.0 * GRAVITY;
    let axles = &found["axles"];
    assert_close(si(&axles[0]["normal_force"]), weight * (1.4 + 0.5 * 0.55) / 2.6, 1e-12);
    assert_close(si(&axles[1]["normal_force"]), weight * (1.2 - 0.5 * 0.55) / 2.6, 1e-12);
    assert_close(si(&axles[0]["brake_force"]), 0.3 * weight, 1e-12);
    // Used: 0.3/0.644231 and 0.2/0.355769.
    assert_close(axles[0]["adhesion_used"].as_f64().unwrap(), 0.3 * 2.6 / 1.675, 1e-12);
    assert_close(axles[1]["adhesion_used"].as_f64().unwrap(), 0.2 * 2.6 / 0.925, 1e-12);
}

/// Fixed share 0.65 of the front, μ 0.8 (recomputed by hand): the front would lock at μ(l_r/L)/(φ − μ h/L) =
/// 0.895522, the rear at μ(l_f/L)/((1 − φ) + μ h/L) = 0.711111: rear first. At the ideal share (l_r + z h)/L both
/// lock at once, and beside it the axle with more.
#[tokio::test]
async fn the_share_of_the_front_decides_which_axle_locks_first() {
    let (found, warnings) = stop(&car(Some(0.8), 0.65, 0.35)).await;
    assert_eq!(found["first_axle_to_lock"], "rear");
    let codes = warnings.as_array().unwrap().iter().map(|warning| warning["code"].clone());
    assert!(codes.into_iter().any(|code| code == "rear_axle_locks_first"));
    let ideal = (1.4 + 0.8 * 0.55) / 2.6;
    for (share, expected) in [(ideal + 1e-6, "front"), (ideal - 1e-6, "rear")] {
        let (found, _) = stop(&car(Some(0.8), share, 1.0 - share)).await;
        assert_eq!(found["first_axle_to_lock"], expected, "{share}");
    }
    // Just below its own factor the rear axle does not limit, just above it does.
    for (factor, limit) in [(0.711_111, "brake"), (0.711_112, "adhesion")] {
        let (found, _) = stop(&car(Some(0.8), 0.65 * factor, 0.35 * factor)).await;
        assert_eq!(found["limited_by"], limit, "{factor}");
    }
}

/// Pitch-over at l_f/h (published statics, by hand 1.2/0.55 = 2.181818): with no adhesion given, the rear wheel
/// lifts there.
#[tokio::test]
async fn the_rear_wheel_lifts_at_the_published_ratio() {
    let (found, warnings) = stop(&car(None, 3.0, 1.0)).await;
    assert_eq!(found["limited_by"], "rear_wheel_lift");
    assert_close(si(&found["peak_deceleration"]) / GRAVITY, 1.2 / 0.55, 1e-12);
    assert_within(si(&found["axles"][1]["normal_force"]), 0.0, 1e-9);
    let codes = warnings.as_array().unwrap().iter().map(|warning| warning["code"].clone());
    assert!(codes.into_iter().any(|code| code == "rear_wheel_lift"));
}

/// By hand, no source: 1000 kg raised at 0.5 m/s, drive efficiency 0.8, 0.5 s without torque, then 25 kN at the load.
/// Gravity over 0.8 stops it after 0.0407886 s; gravity times 0.8 drives it back, for 0.4592114 s to 3.60266 m/s;
/// the brake less that drive, 17.15468 m/s², takes another 0.2100103 s. In all 0.6692217 s and 1.2054891 m.
#[tokio::test]
async fn losses_of_the_drive_slow_a_load_both_ways() {
    let request = json!({
        "machine": {"kind": "hoist", "load_mass": q(1000.0, "kg"), "drum_radius": q(0.25, "m"), "gear_ratio": 25, "efficiency": 0.8},
        "fitted": [{"torque": q(250.0, "N.m")}], "direction": "raising", "initial_speed": q(0.5, "m/s"),
        "response": {"dead_time": q(0.5, "s")},
    });
    let (found, _) = stop(&request).await;
    assert_close(si(&found["total_time"]), 0.5 * 0.8 / GRAVITY, 1e-12);
    assert_eq!(found["runs_back"], true);
    let back = &found["run_back"];
    assert_within(si(&back["peak_speed"]), 3.602_66, 5e-6);
    assert_within(si(&back["time"]), 0.669_221_7, 5e-8);
    assert_within(si(&back["distance"]), 1.205_489_1, 5e-8);
}
