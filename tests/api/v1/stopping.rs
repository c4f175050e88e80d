//! `POST /v1/stopping`: phases, road, operator and brakes of a vehicle, by hand.
//!
//! The vehicle of `common`: 1500 kg, 3000 N.m on wheels of 0.3 m: 10 000 N, a = 20/3 m/s², from 20 m/s.

use serde_json::{Value, json};

use super::common::{
    G, STOPPING, answer, assert_both_unit_systems, assert_is, assert_warns, brake, case, codes,
    default_at, defaulted, of, q, stopping, with, with_axles,
};
use crate::support::close::assert_close;

const A: f64 = 20.0 / 3.0; // m/s²

async fn stop(body: &Value) -> Value {
    case(&answer(STOPPING, body).await, "nominal").clone()
}

/// Deceleration of the vehicle with some change.
async fn deceleration(member: &str, value: Value) -> f64 {
    of(&stop(&with(&stopping(), member, value)).await["peak_deceleration"], "m/s2")
}

#[tokio::test]
async fn a_stop_without_delays_is_the_schoolbook_one() {
    let stop = stop(&stopping()).await;
    assert_eq!(stop["reaches_final_speed"], true);
    // t = v/a = 20/(20/3) = 3 s; s = v²/(2a) = 400/(40/3) = 30 m.
    for member in ["total_time", "time_from_control", "braking_time"] {
        assert_is(&stop[member], 3.0, "s");
    }
    for member in ["total_distance", "distance_from_control", "braking_distance"] {
        assert_is(&stop[member], 30.0, "m");
    }
    for member in ["mean_deceleration", "mean_fully_developed_deceleration", "peak_deceleration"] {
        assert_is(&stop[member], A, "m/s2");
    }
    assert_eq!(stop["limited_by"], "brake");
    assert_is(&stop["fitted"][0]["torque"], 3000.0, "N.m");
    assert!(stop["fitted"][0].get("coefficient").is_none(), "a known torque has no friction");
    let phases = stop["phases"].as_array().unwrap();
    assert_eq!(phases.len(), 1);
    assert_eq!(phases[0]["phase"], "full");
    for absent in ["reason", "tending_speed", "runs_back", "run_back", "total_angle", "trace"] {
        assert!(stop.get(absent).is_none(), "{absent}");
    }
}

#[tokio::test]
async fn reaction_dead_time_and_build_up_come_before_full_braking() {
    let delays = json!({"reaction_time": q(1.0, "s"), "dead_time": q(200.0, "ms"), "build_up_time": q(0.4, "s")});
    let stop = stop(&with(&stopping(), "/response", delays)).await;
    // Reaction 20 m; dead 4 m; build-up: v = 20 − a·0.4/2 = 56/3 m/s, s = 8 − a·0.4²/6 = 7.8222 m;
    // full: (56/3)/a = 2.8 s, (56/3)²/(2a) = 26.1333 m.
    let (v, build_up) = (20.0 - A * 0.2, 8.0 - A * 0.16 / 6.0);
    let full = v * v / (2.0 * A);
    let expected = [
        ("reaction", 1.0, 20.0, 20.0),
        ("dead", 0.2, 4.0, 20.0),
        ("build_up", 0.4, build_up, v),
        ("full", 2.8, full, 0.0),
    ];
    let phases = stop["phases"].as_array().unwrap();
    assert_eq!(phases.len(), 4);
    for (phase, (name, time, distance, end_speed)) in phases.iter().zip(expected) {
        assert_eq!(phase["phase"], name);
        assert_is(&phase["time"], time, "s");
        assert_is(&phase["distance"], distance, "m");
        // The last speed is what is left of 20 m/s after several subtractions.
        assert!((of(&phase["end_speed"], "m/s") - end_speed).abs() < 1e-12);
    }
    assert_is(&stop["total_time"], 4.4, "s");
    assert_is(&stop["total_distance"], 24.0 + build_up + full, "m");
    assert_is(&stop["time_from_control"], 3.4, "s");
    assert_is(&stop["distance_from_control"], 4.0 + build_up + full, "m");
    assert_is(&stop["braking_time"], 3.2, "s");
    assert_is(&stop["braking_distance"], build_up + full, "m");
    assert_is(&stop["mean_deceleration"], 400.0 / (2.0 * (build_up + full)), "m/s2");
    assert_is(&stop["mean_fully_developed_deceleration"], A, "m/s2");
}

#[tokio::test]
async fn the_delayed_stop_of_the_reference_comes_out() {
    // Verified in the reference: 30 m/s, dead time 0.9 s, build-up 0.4 s, 7 m/s²: 97.2390476 m, 5.3857143 s.
    let mut body = stopping();
    body["initial_speed"] = q(108.0, "km/h");
    body["fitted"][0]["torque"] = q(1500.0 * 7.0 * 0.3, "N.m");
    body["response"] = json!({"dead_time": q(0.9, "s"), "build_up_time": q(0.4, "s")});
    let stop = stop(&body).await;
    assert_close(of(&stop["total_distance"], "m"), 97.239_047_6, 1e-9);
    assert_close(of(&stop["total_time"], "s"), 5.385_714_3, 1e-8);
}

#[tokio::test]
async fn a_stop_may_end_within_the_build_up() {
    // Verified in the reference: 0.5 m/s, dead time 0.2 s, build-up 0.6 s, 6 m/s²: 0.2054093 m.
    let mut body = stopping();
    body["initial_speed"] = q(0.5, "m/s");
    body["fitted"][0]["torque"] = q(1500.0 * 6.0 * 0.3, "N.m");
    body["response"] = json!({"dead_time": q(0.2, "s"), "build_up_time": q(0.6, "s")});
    let stop = stop(&body).await;
    assert!((of(&stop["total_distance"], "m") - 0.205_409_3).abs() < 5e-8);
    let phases = stop["phases"].as_array().unwrap();
    assert_eq!(phases.last().unwrap()["phase"], "build_up");
}

#[tokio::test]
async fn a_final_speed_above_zero_ends_the_stop_there() {
    let slowed = stop(&with(&stopping(), "/final_speed", q(10.0, "m/s"))).await;
    // t = 10/a = 1.5 s; s = (400 − 100)/(2a) = 22.5 m.
    assert_is(&slowed["total_time"], 1.5, "s");
    assert_is(&slowed["total_distance"], 22.5, "m");
    assert!(slowed.get("mean_fully_developed_deceleration").is_none(), "10 is above 0.1 · 20 m/s");
    let slowed = stop(&with(&stopping(), "/final_speed", q(1.9, "m/s"))).await;
    assert_is(&slowed["mean_fully_developed_deceleration"], A, "m/s2");
}

#[tokio::test]
async fn the_road_and_the_wheels_resist() {
    // Uphill adds g sin(b), tan(b) = 0.05; downhill takes it away.
    let sine = 0.05 / 1.0025_f64.sqrt();
    assert_close(deceleration("/grade", q(5.0, "%")).await, A + G * sine, 1e-12);
    assert_close(deceleration("/grade", q(-5.0, "%")).await, A - G * sine, 1e-12);
    // 30 deg: sin = 1/2.
    assert_close(deceleration("/grade", q(30.0, "deg")).await, A + G / 2.0, 1e-12);
    // Rolling resistance 0.015 adds 0.015 g; turning parts of 4 % divide by 1.04.
    assert_close(
        deceleration("/machine/rolling_resistance", json!(0.015)).await,
        A + 0.015 * G,
        1e-12,
    );
    assert_close(deceleration("/machine/rotating_mass_factor", json!(1.04)).await, A / 1.04, 1e-12);
    // A drive of 1500 N takes 1 m/s² away, a retarder of 1500 N adds it.
    assert_close(deceleration("/drive_force", q(1500.0, "N")).await, A - 1.0, 1e-12);
    assert_close(deceleration("/drive_force", q(-1500.0, "N")).await, A + 1.0, 1e-12);
}

#[tokio::test]
async fn drive_and_slope_act_in_the_dead_time_too_but_not_in_the_reaction() {
    let mut body = with(&stopping(), "/drive_force", q(-1500.0, "N"));
    body["response"] = json!({"reaction_time": q(1.0, "s"), "dead_time": q(0.5, "s")});
    let stop = stop(&body).await;
    // Reaction: 20 m/s held. Dead: 1 m/s² for 0.5 s: 19.5 m/s, 10 − 0.125 m.
    assert_is(&stop["phases"][0]["end_speed"], 20.0, "m/s");
    assert_is(&stop["phases"][1]["end_speed"], 19.5, "m/s");
    assert_is(&stop["phases"][1]["distance"], 9.875, "m");
    assert_is(&stop["braking_time"], 19.5 / (A + 1.0), "s");
}

#[tokio::test]
async fn air_resistance_follows_the_closed_form() {
    // m 1500 kg, A 7000 N, C 0.45 N.s2/m2, 55 m/s: 11.1001211 s, 296.1629807 m (verified in the reference).
    let mut body = stopping();
    body["initial_speed"] = q(55.0, "m/s");
    body["fitted"][0]["torque"] = q(7000.0 * 0.3, "N.m");
    body["machine"]["drag_area"] = q(0.75, "m2");
    body["machine"]["air_density"] = q(1.2, "kg/m3");
    let stop = stop(&body).await;
    assert_close(of(&stop["total_time"], "s"), 11.100_121_1, 1e-8);
    assert_close(of(&stop["total_distance"], "m"), 296.162_980_7, 1e-9);
    assert_is(&stop["peak_deceleration"], (7000.0 + 0.45 * 55.0 * 55.0) / 1500.0, "m/s2");
}

#[tokio::test]
async fn the_operator_holds_a_deceleration_that_the_brakes_can_give() {
    let held = answer(STOPPING, &with(&stopping(), "/deceleration", q(4.0, "m/s2"))).await;
    let stop = case(&held, "nominal");
    // t = 20/4 s, s = 400/8 m; torque 1500 · 4 · 0.3 N.m.
    assert_is(&stop["total_time"], 5.0, "s");
    assert_is(&stop["total_distance"], 50.0, "m");
    assert_is(&stop["fitted"][0]["torque"], 1800.0, "N.m");
    assert_eq!(stop["limited_by"], "operator");
    assert!(!codes(&held).contains(&"deceleration_not_reached"));
}

#[tokio::test]
async fn a_deceleration_beyond_the_brakes_gets_full_torque_and_a_warning() {
    let answer = answer(STOPPING, &with(&stopping(), "/deceleration", q(8.0, "m/s2"))).await;
    let stop = case(&answer, "nominal");
    assert_is(&stop["peak_deceleration"], A, "m/s2");
    assert_eq!(stop["limited_by"], "brake");
    assert_warns(&answer, "deceleration_not_reached", "exceeded", "#/deceleration");
}

#[tokio::test]
async fn air_resistance_stronger_than_the_held_deceleration_slows_the_vehicle_alone() {
    // 0.6125 · 4 N.s2/m2 · 80² = 15 680 N, 10.45 m/s²: above the 5 m/s² asked for until v = √(7500/2.45) m/s.
    let mut body = with(&stopping(), "/deceleration", q(5.0, "m/s2"));
    body["machine"]["drag_area"] = q(4.0, "m2");
    body["initial_speed"] = q(80.0, "m/s");
    let stop = stop(&body).await;
    let (drag, v) = (2.45_f64, (7500.0_f64 / 2.45).sqrt());
    // Coasting: t = (m/C)(1/v − 1/v0), s = (m/C) ln(v0/v); then 5 m/s².
    let (time, way) = (1500.0 / drag * (1.0 / v - 1.0 / 80.0), 1500.0 / drag * (80.0 / v).ln());
    assert_close(of(&stop["total_time"], "s"), time + v / 5.0, 1e-8);
    assert_close(of(&stop["total_distance"], "m"), way + v * v / 10.0, 1e-8);
    assert_close(of(&stop["peak_deceleration"], "m/s2"), drag * 6400.0 / 1500.0, 1e-8);
}

#[tokio::test]
async fn a_deceleration_that_fails_as_the_air_resistance_fades_is_not_reached() {
    // At 60 m/s 10 000 N and 2.45 · 3600 N give 12.5 m/s², at rest only 6.667: 8 m/s² cannot be held.
    let mut body = with(&stopping(), "/deceleration", q(8.0, "m/s2"));
    body["machine"]["drag_area"] = q(4.0, "m2");
    body["initial_speed"] = q(60.0, "m/s");
    let answer = answer(STOPPING, &body).await;
    assert_warns(&answer, "deceleration_not_reached", "exceeded", "#/deceleration");
    assert_is(
        &case(&answer, "nominal")["peak_deceleration"],
        (10_000.0 + 2.45 * 3600.0) / 1500.0,
        "m/s2",
    );
}

#[tokio::test]
async fn count_speed_ratio_and_rolling_radius_multiply_the_brake_force() {
    for (member, value, factor) in [
        ("count", json!(2), 2.0),
        ("speed_ratio", json!(1.5), 1.5),
        ("rolling_radius", q(0.6, "m"), 0.5),
    ] {
        let body = with(&stopping(), &format!("/fitted/0/{member}"), value);
        let stop = stop(&body).await;
        assert_is(&stop["peak_deceleration"], factor * A, "m/s2");
        assert_is(&stop["fitted"][0]["torque"], 3000.0, "N.m");
    }
}

fn with_cables() -> Value {
    let mut cable = brake();
    cable["actuation"] = json!({"kind": "cable", "lever_ratio": 4.0, "cable_efficiency": 0.8, "caliper_ratio": 10.0, "caliper_efficiency": 0.9});
    let mut led = cable.clone();
    led["actuation"]["operator_force"] = q(100.0, "N");
    let mut body = stopping();
    body["fitted"] = json!([
        {"brake": led, "count": 2, "axle": "front", "control": "pedal", "operator_share": 0.6},
        {"brake": cable, "count": 2, "axle": "rear", "control": "pedal", "operator_share": 0.4},
    ]);
    body
}

#[tokio::test]
async fn brakes_on_one_control_share_its_force() {
    let stop = stop(&with_cables()).await;
    // Clamp 100 · share · 4 · 0.8 · 10 · 0.9 N, torque 0.1 m of it: 172.8 and 115.2 N.m for each brake.
    for (index, share) in [(0, 0.6), (1, 0.4)] {
        assert_is(&stop["fitted"][index]["clamp_force"], 2880.0 * share, "N");
        assert_is(&stop["fitted"][index]["torque"], 288.0 * share, "N.m");
        assert_eq!(stop["fitted"][index]["coefficient"], 0.4);
        assert_eq!(stop["fitted"][index]["fitted_index"], index);
    }
    // 2 · 288 N.m/0.3 m = 1920 N: 1.28 m/s².
    assert_is(&stop["peak_deceleration"], 1.28, "m/s2");
}

#[tokio::test]
async fn without_an_input_the_least_maximum_of_the_control_presses_and_is_on_record() {
    let mut body = with_cables();
    body["fitted"][0]["brake"]["actuation"].as_object_mut().unwrap().shift_remove("operator_force");
    body["fitted"][0]["brake"]["actuation"]["max_operator_force"] = q(150.0, "N");
    body["fitted"][1]["brake"]["actuation"]["max_operator_force"] = q(100.0, "N");
    let answer = answer(STOPPING, &body).await;
    assert_is(&case(&answer, "nominal")["peak_deceleration"], 1.28, "m/s2");
    for index in [0, 1] {
        let at = format!("#/fitted/{index}/brake/actuation/operator_force");
        let default = default_at(&answer, &at);
        assert_eq!((&default["value"], &default["unit"]), (&json!(100.0), &json!("N")));
    }
    // At its own maximum the second control is near its limit, the first is not.
    assert_warns(
        &answer,
        "operator_force",
        "near_limit",
        "#/fitted/1/brake/actuation/max_operator_force",
    );
}

#[tokio::test]
async fn all_fluid_on_a_control_passes_its_cylinder() {
    let mut hydraulic = brake();
    hydraulic["actuation"] = json!({
        "kind": "hydraulic", "piston_diameter": q(50.0, "mm"), "running_clearance": q(0.2, "mm"), "efficiency": 0.9,
        "master_cylinder": {"bore": q(20.0, "mm"), "lever_ratio": 5.0, "operator_force": q(200.0, "N"), "max_stroke": q(35.0, "mm")},
    });
    let mut body = stopping();
    let entry = |count: u32, axle: &str| json!({"brake": hydraulic, "count": count, "axle": axle, "control": "pedal", "operator_share": 0.5});
    body["fitted"] = json!([entry(2, "front"), entry(2, "rear")]);
    let answer = answer(STOPPING, &body).await;
    // One brake: 2 faces · 625 pi mm² · 0.2 mm = 250 pi mm³; four of them at half a share, over 100 pi mm²,
    // times 5: 5 · 2 · 2.5 mm = 25 mm. Against 35 mm: no warning; against 26 mm: near.
    assert!(!codes(&answer).contains(&"operator_stroke"));
    let at = "/fitted/1/brake/actuation/master_cylinder/max_stroke";
    let near = with(&body, at, q(26.0, "mm"));
    let near = super::common::answer(STOPPING, &near).await;
    assert_warns(&near, "operator_stroke", "near_limit", &format!("#{at}"));
    assert_is(&super::common::warning(&near, "operator_stroke")["actual"], 25.0, "mm");
}

#[tokio::test]
async fn a_held_deceleration_needs_only_its_part_of_the_force() {
    let mut body = with_cables();
    body["deceleration"] = q(0.64, "m/s2");
    let stop = stop(&body).await;
    assert_is(&stop["fitted"][0]["torque"], 86.4, "N.m");
    assert_is(&stop["fitted"][0]["clamp_force"], 864.0, "N");
}

#[tokio::test]
async fn lining_limits_of_a_stop_point_at_the_entry_or_its_row() {
    let mut body = with_cables();
    body["initial_speed"] = q(72.0, "km/h");
    body["fitted"][0]["brake"]["lining"]["max_rubbing_speed"] = q(9.0, "m/s");
    body["fitted"][1]["brake"]["lining"] =
        json!({"id": "sintered_metal_dry", "max_pressure": q(0.14, "MPa")});
    let answer = answer(STOPPING, &body).await;
    // 20 m/s on wheels of 0.3 m at the pad's 0.15 m: 10 m/s, above 9.
    let at = "#/fitted/0/brake/lining/max_rubbing_speed";
    assert_warns(&answer, "rubbing_speed", "exceeded", at);
    assert_is(&super::common::warning(&answer, "rubbing_speed")["actual"], 10.0, "m/s");
    // 1152 N on pi/2 · 5000 mm²: 0.1467 MPa, above the caller's 0.14 MPa.
    let at = "#/fitted/1/brake/lining/max_pressure";
    assert_warns(&answer, "pad_peak_pressure", "exceeded", at);
    // The row's 3600 ft/min = 18.288 m/s are near from 16.46 m/s on: 33 m/s on the road give 16.5 m/s.
    let faster = with(&body, "/initial_speed", q(33.0, "m/s"));
    let faster = super::common::answer(STOPPING, &faster).await;
    let rows: Vec<&Value> = faster["warnings"]
        .as_array()
        .unwrap()
        .iter()
        .filter(|warning| warning["pointer"] == "#/fitted/1/brake/lining/id")
        .collect();
    let rubbing = rows.iter().find(|warning| warning["code"] == "rubbing_speed").unwrap();
    assert_eq!(rubbing["severity"], "near_limit");
    assert_is(&rubbing["actual"], 16.5, "m/s");
    assert_is(&rubbing["limit"], 3600.0 * 0.3048 / 60.0, "m/s");
}

#[tokio::test]
async fn a_trace_is_equally_spaced_with_both_ends() {
    let body = with(&stopping(), "/trace", json!({"points": 5}));
    let stop = stop(&body).await;
    let trace = &stop["trace"];
    // v = 20 − a t, s = 20 t − a t²/2 at t = 0, 0.75, ... 3 s.
    let expected = [
        ("time", [0.0, 0.75, 1.5, 2.25, 3.0]),
        ("speed", [20.0, 15.0, 10.0, 5.0, 0.0]),
        ("distance", [0.0, 13.125, 22.5, 28.125, 30.0]),
    ];
    for (column, expected) in expected {
        let numbers = trace[column].as_array().unwrap();
        assert_eq!(numbers.len(), 5);
        for (number, expected) in numbers.iter().zip(expected) {
            assert!((number.as_f64().unwrap() - expected).abs() < 1e-12, "{column}: {numbers:?}");
        }
    }
    assert_eq!(trace["units"], json!({"time": "s", "speed": "m/s", "distance": "m"}));
    for points in [2, 2000] {
        let answer = answer(STOPPING, &with(&body, "/trace/points", points)).await;
        let trace = &case(&answer, "nominal")["trace"];
        assert_eq!(trace["time"].as_array().unwrap().len(), points);
    }
}

#[tokio::test]
async fn every_default_is_on_record() {
    let answer = answer(STOPPING, &stopping()).await;
    assert_eq!(
        defaulted(&answer),
        [
            "#/drive_force",
            "#/final_speed",
            "#/fitted/0/brakes_per_disc",
            "#/fitted/0/count",
            "#/fitted/0/operator_share",
            "#/fitted/0/speed_ratio",
            "#/grade",
            "#/machine/air_density",
            "#/machine/drag_area",
            "#/machine/rolling_resistance",
            "#/machine/rotating_mass_factor",
            "#/response/build_up_time",
            "#/response/dead_time",
            "#/response/reaction_time",
        ]
    );
    for (at, value, unit) in [
        ("#/machine/air_density", 1.225, "kg/m3"),
        ("#/grade", 0.0, "%"),
        ("#/response/dead_time", 0.0, "s"),
        ("#/final_speed", 0.0, "m/s"),
    ] {
        let default = default_at(&answer, at);
        assert_eq!((&default["value"], &default["unit"]), (&json!(value), &json!(unit)));
    }
    assert_warns(&answer, "adhesion_not_considered", "info", "#/machine");
}

#[tokio::test]
async fn both_unit_systems_tell_the_same() {
    let mut delayed = with(&with_axles(), "/trace", json!({"points": 7}));
    delayed["response"] = json!({"reaction_time": q(1.0, "s"), "dead_time": q(0.2, "s"), "build_up_time": q(0.4, "s")});
    delayed["grade"] = q(-4.0, "%");
    delayed["machine"]["drag_area"] = q(0.7, "m2");
    let mut limited = with_cables();
    limited["fitted"][1]["brake"]["lining"] =
        json!({"id": "sintered_metal_dry", "max_pressure": q(0.14, "MPa")});
    limited["fitted"][0]["brake"]["actuation"]["max_operator_force"] = q(90.0, "N");
    for body in [stopping(), delayed, limited] {
        assert_both_unit_systems(STOPPING, &body).await;
    }
}

#[tokio::test]
async fn strange_but_possible_stops_are_computed_with_a_warning() {
    // Up to 1.5 g = 14.71 m/s², 22 065 N, 6619.5 N.m is usual.
    for (torque, is_strange) in [(6600.0, false), (6640.0, true)] {
        let body = with(&stopping(), "/fitted/0/torque", q(torque, "N.m"));
        let answer = answer(STOPPING, &body).await;
        assert_eq!(codes(&answer).contains(&"deceleration_unusually_high"), is_strange);
    }
    // 0.1 s at 20/3 m/s² from 0.6667 m/s.
    for (speed, is_strange) in [(0.67, false), (0.66, true)] {
        let body = with(&stopping(), "/initial_speed", q(speed, "m/s"));
        let answer = answer(STOPPING, &body).await;
        assert_eq!(codes(&answer).contains(&"stop_unusually_short"), is_strange);
    }
    for (adhesion, is_strange) in [(1.2, false), (1.21, true)] {
        let answer = answer(STOPPING, &with(&stopping(), "/machine/adhesion", adhesion)).await;
        assert_eq!(codes(&answer).contains(&"adhesion_unusually_high"), is_strange);
    }
}
