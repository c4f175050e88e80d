//! `POST /v1/stopping`: shaft, hoist and conveyor, brakes too weak, and machines that run back; all by hand.

use serde_json::{Value, json};

use super::common::{
    G, STOPPING, answer, assert_both_unit_systems, assert_is, assert_warns, case, codes, conveyor,
    defaulted, hoist, of, q, shaft, stopping, warning, with,
};
use crate::support::close::assert_close;

async fn stop(body: &Value) -> Value {
    case(&answer(STOPPING, body).await, "nominal").clone()
}

#[tokio::test]
async fn a_shaft_turns_to_rest() {
    let stop = stop(&shaft()).await;
    // 60/12 = 5 rad/s²: 20 s, 100²/10 = 1000 rad, 1000/(2 pi) turns.
    assert_is(&stop["total_time"], 20.0, "s");
    assert_is(&stop["total_angle"], 1000.0_f64.to_degrees(), "deg");
    assert_close(stop["revolutions"].as_f64().unwrap(), 1000.0 / std::f64::consts::TAU, 1e-12);
    assert_is(&stop["mean_angular_deceleration"], 5.0, "rad/s2");
    assert_is(&stop["peak_angular_deceleration"], 5.0, "rad/s2");
    for absent in ["total_distance", "mean_deceleration", "peak_deceleration", "axles"] {
        assert!(stop.get(absent).is_none(), "{absent}");
    }
}

#[tokio::test]
async fn the_shaft_example_of_a_handbook_comes_out() {
    // Hicks, Standard Handbook of Mechanical Engineering Calculations, section 24 (seen): 200 lb.ft2 from
    // 1800 rpm in 40 s: 29.2 lbf.ft with the rounded constant 308, 29.35 exactly; 600 revolutions.
    let torque = 200.0 * 60.0 * std::f64::consts::PI / 40.0 / 32.174_048_556; // lb.ft2 · rad/s /s / (ft/s²)
    let body = json!({
        "machine": {"kind": "shaft", "inertia": q(200.0, "lb.ft2")},
        "fitted": [{"torque": q(torque, "lbf.ft")}], "initial_rotational_speed": q(1800.0, "rpm"),
    });
    assert!((torque - 29.2).abs() < 0.2);
    let stop = stop(&body).await;
    assert_close(of(&stop["total_time"], "s"), 40.0, 1e-9);
    assert_close(stop["revolutions"].as_f64().unwrap(), 600.0, 1e-9);
}

#[tokio::test]
async fn a_shaft_knows_driving_torque_final_speed_held_deceleration_and_speed_ratio() {
    let driven = stop(&with(&shaft(), "/machine/driving_torque", q(24.0, "N.m"))).await;
    assert_is(&driven["peak_angular_deceleration"], 3.0, "rad/s2"); // (60 − 24)/12
    let helped = stop(&with(&shaft(), "/machine/driving_torque", q(-24.0, "N.m"))).await;
    assert_is(&helped["peak_angular_deceleration"], 7.0, "rad/s2");
    let slowed = stop(&with(&shaft(), "/final_rotational_speed", q(50.0, "rad/s"))).await;
    assert_is(&slowed["total_time"], 10.0, "s");
    let held = stop(&with(&shaft(), "/angular_deceleration", q(2.0, "rad/s2"))).await;
    assert_is(&held["total_time"], 50.0, "s");
    assert_is(&held["fitted"][0]["torque"], 24.0, "N.m");
    let geared = stop(&with(&shaft(), "/fitted/0/speed_ratio", 3.0)).await;
    assert_is(&geared["peak_angular_deceleration"], 15.0, "rad/s2");
    let beyond = answer(STOPPING, &with(&shaft(), "/angular_deceleration", q(6.0, "rad/s2"))).await;
    assert_warns(&beyond, "deceleration_not_reached", "exceeded", "#/angular_deceleration");
}

#[tokio::test]
async fn a_shaft_that_is_driven_speeds_up_in_the_dead_time() {
    let mut body = with(&shaft(), "/machine/driving_torque", q(24.0, "N.m"));
    body["response"] = json!({"dead_time": q(0.5, "s")});
    body["trace"] = json!({"points": 2});
    let stop = stop(&body).await;
    assert_is(
        &stop["phases"][0]["end_rotational_speed"],
        101.0 * 30.0 / std::f64::consts::PI,
        "rpm",
    );
    assert_is(&stop["phases"][0]["angle"], 50.25_f64.to_degrees(), "deg"); // 50 + 2 · 0.5²/2
    assert_is(&stop["braking_time"], 101.0 / 3.0, "s");
    assert_eq!(stop["trace"]["units"], json!({"time": "s", "speed": "rpm", "distance": "deg"}));
}

#[tokio::test]
async fn a_hoist_stops_a_lowered_load_against_gravity() {
    let answer = answer(STOPPING, &hoist()).await;
    let stop = case(&answer, "nominal");
    // 200 N.m · 10 · 2/0.2 m = 20 000 N; less 9806.65 N on 1000 kg.
    assert_is(&stop["peak_deceleration"], 20.0 - G, "m/s2");
    assert_is(&stop["total_time"], 2.0 / (20.0 - G), "s");
    assert_is(&stop["total_distance"], 2.0 / (20.0 - G), "m"); // v²/(2a) = 2/a
    assert!(answer["cautions"].to_string().contains("suspended_load"));
    assert!(stop.get("axles").is_none());
}

#[tokio::test]
async fn a_hoist_knows_inertia_efficiency_and_counterweight_both_ways() {
    let deceleration = async |direction: &str, change: &[(&str, Value)]| {
        let mut body = with(&hoist(), "/direction", direction);
        for (member, value) in change {
            body["machine"][member] = value.clone();
        }
        of(&stop(&body).await["peak_deceleration"], "m/s2")
    };
    assert_close(deceleration("raising", &[]).await, 20.0 + G, 1e-12);
    // 0.1 kg.m2 · 100² = 1000 kg more.
    let inertia = [("inertia", q(0.1, "kg.m2"))];
    assert_close(deceleration("lowering", &inertia).await, (20.0 - G) / 2.0, 1e-12);
    // Losses help to hold back and burden what is lifted.
    let efficiency = [("efficiency", json!(0.8))];
    assert_close(deceleration("lowering", &efficiency).await, 20.0 - 0.8 * G, 1e-12);
    assert_close(deceleration("raising", &efficiency).await, 20.0 + G / 0.8, 1e-12);
    // 400 kg on the other side: 600 kg drive 1400 kg; 1500 kg there: 500 kg hold 2500 kg.
    let lighter = [("counterweight_mass", q(400.0, "kg"))];
    assert_close(deceleration("lowering", &lighter).await, (20_000.0 - 600.0 * G) / 1400.0, 1e-12);
    let heavier = [("counterweight_mass", q(1500.0, "kg"))];
    assert_close(deceleration("lowering", &heavier).await, (20_000.0 + 500.0 * G) / 2500.0, 1e-12);
    assert_close(deceleration("raising", &heavier).await, (20_000.0 - 500.0 * G) / 2500.0, 1e-12);
}

#[tokio::test]
async fn a_lowered_load_speeds_up_in_the_dead_time() {
    let body = with(&hoist(), "/response", json!({"dead_time": q(0.1, "s")}));
    let stop = stop(&body).await;
    assert_is(&stop["phases"][0]["end_speed"], 2.0 + 0.1 * G, "m/s");
    assert_is(&stop["phases"][0]["distance"], 0.2 + 0.005 * G, "m");
    assert_is(&stop["braking_time"], (2.0 + 0.1 * G) / (20.0 - G), "s");
}

#[tokio::test]
async fn a_conveyor_stops_level_uphill_and_downhill() {
    let level = stop(&conveyor()).await;
    // 75 N.m · 10/0.25 m = 3000 N on 1500 kg: 2 m/s², 1.5 s, 2.25 m.
    assert_is(&level["total_time"], 1.5, "s");
    assert_is(&level["total_distance"], 2.25, "m");
    let deceleration = async |incline: f64, change: &[(&str, Value)]| {
        let mut body = with(&conveyor(), "/machine/incline", q(incline, "deg"));
        for (member, value) in change {
            body["machine"][member] = value.clone();
        }
        of(&stop(&body).await["peak_deceleration"], "m/s2")
    };
    // At 30 deg material of 1000 kg weighs 500 g along the belt.
    assert_close(deceleration(30.0, &[]).await, (3000.0 + 500.0 * G) / 1500.0, 1e-12);
    let efficiency = [("efficiency", json!(0.8))];
    assert_close(deceleration(30.0, &efficiency).await, (3000.0 + 625.0 * G) / 1500.0, 1e-12);
    // Downhill at −10 deg the material drives, lessened by the efficiency.
    let drive = 1000.0 * G * 10.0_f64.to_radians().sin();
    assert_close(deceleration(-10.0, &efficiency).await, (3000.0 - 0.8 * drive) / 1500.0, 1e-12);
    // The resistance 0.02 acts on belt and material, always against the motion: 0.02 g (1000 cos 10 + 500).
    let resistance = 0.02 * G * (1000.0 * 10.0_f64.to_radians().cos() + 500.0);
    let given = [("resistance", json!(0.02))];
    assert_close(deceleration(-10.0, &given).await, (3000.0 - drive + resistance) / 1500.0, 1e-12);
    // 0.5 kg.m2 · 40² = 800 kg more.
    let inertia = [("inertia", q(0.5, "kg.m2"))];
    assert_close(deceleration(0.0, &inertia).await, 3000.0 / 2300.0, 1e-12);
}

#[tokio::test]
async fn every_default_of_a_machine_is_on_record() {
    for (body, members) in [
        (shaft(), vec!["driving_torque"]),
        (hoist(), vec!["counterweight_mass", "efficiency", "inertia"]),
        (conveyor(), vec!["efficiency", "inertia", "resistance"]),
    ] {
        let answer = answer(STOPPING, &body).await;
        let found: Vec<&str> = defaulted(&answer)
            .into_iter()
            .filter_map(|pointer| pointer.strip_prefix("#/machine/"))
            .collect();
        assert_eq!(found, members);
    }
    let mut bare = hoist();
    for member in ["falls", "gear_ratio"] {
        bare["machine"].as_object_mut().unwrap().shift_remove(member);
    }
    bare["fitted"][0]["torque"] = q(5000.0, "N.m");
    let answer = answer(STOPPING, &bare).await;
    assert!(defaulted(&answer).contains(&"#/machine/falls"));
    assert!(defaulted(&answer).contains(&"#/machine/gear_ratio"));
    // 5000 N.m/0.2 m = 25 000 N.
    assert_is(&case(&answer, "nominal")["peak_deceleration"], 25.0 - G, "m/s2");
}

fn assert_does_not_stop(answer: &Value, reason: &str) {
    let stop = case(answer, "nominal");
    assert_eq!(stop["reaches_final_speed"], false);
    assert_eq!(stop["reason"], reason);
    let absent = [
        "total_time",
        "total_distance",
        "total_angle",
        "revolutions",
        "time_from_control",
        "distance_from_control",
        "braking_time",
        "braking_distance",
        "mean_deceleration",
        "peak_deceleration",
        "phases",
        "trace",
        "runs_back",
    ];
    for member in absent {
        assert!(stop.get(member).is_none(), "{member}");
    }
    assert_warns(answer, "stops", "exceeded", "#/fitted");
    assert_eq!(warning(answer, "stops")["friction_case"], "nominal");
}

#[tokio::test]
async fn a_brake_too_weak_for_its_load_is_an_answer() {
    let weak = with(&hoist(), "/fitted/0/torque", q(90.0, "N.m"));
    let answer = answer(STOPPING, &with(&weak, "/trace", json!({"points": 10}))).await;
    assert_does_not_stop(&answer, "brake_force_too_low");
    let stop = case(&answer, "nominal");
    assert!(stop.get("tending_speed").is_none(), "the load falls faster and faster");
    // 9806.65 N drive against 90 · 100 N.
    assert_is(&warning(&answer, "stops")["actual"], 1000.0 * G, "N");
    assert_is(&warning(&answer, "stops")["limit"], 9000.0, "N");
    assert_is(&stop["fitted"][0]["torque"], 90.0, "N.m");
}

#[tokio::test]
async fn a_brake_that_just_balances_its_load_does_not_stop_it_either() {
    let mut body = with(&shaft(), "/machine/driving_torque", q(60.0, "N.m"));
    body["response"] = json!({"dead_time": q(1.0, "s")});
    let answer = answer(STOPPING, &body).await;
    assert_does_not_stop(&answer, "brake_force_too_low");
    // Driven alone for 1 s at 60/12 rad/s², then balanced: 105 rad/s for good.
    let stop = case(&answer, "nominal");
    assert_is(&stop["tending_rotational_speed"], 105.0 * 30.0 / std::f64::consts::PI, "rpm");
    assert!(stop.get("tending_speed").is_none());
    assert_is(&warning(&answer, "stops")["actual"], 60.0, "N.m");
}

#[tokio::test]
async fn a_vehicle_on_a_descent_tends_to_the_speed_at_which_the_air_holds_it() {
    let mut body = with(&stopping(), "/grade", q(-10.0, "%"));
    body["fitted"][0]["torque"] = q(300.0, "N.m");
    body["machine"]["drag_area"] = q(1.0, "m2");
    let answer = answer(STOPPING, &body).await;
    assert_does_not_stop(&answer, "brake_force_too_low");
    // 1500 g · 0.1/√1.01 − 1000 N = 0.6125 v².
    let net = 1500.0 * G * 0.1 / 1.01_f64.sqrt() - 1000.0;
    let tending = of(&case(&answer, "nominal")["tending_speed"], "m/s");
    assert_close(tending, (net / 0.6125).sqrt(), 1e-9);
}

#[tokio::test]
async fn only_the_friction_case_that_fails_does_not_stop() {
    let mut body = hoist();
    // Clamp 400 N: 2 · friction · 0.125 m · 400 N · 100/m = 10 000 · friction N: 0.9 fails, 1.0 and 1.1 hold.
    body["fitted"] = json!([{"brake": {"pad": super::common::sector(),
        "lining": {"friction": {"low": 0.9, "nominal": 1.0, "high": 1.1}},
        "actuation": {"kind": "clamp_force", "force": q(400.0, "N")}}}]);
    let answer = answer(STOPPING, &body).await;
    for (name, stops) in [("low", false), ("nominal", true), ("high", true)] {
        assert_eq!(case(&answer, name)["reaches_final_speed"], stops, "{name}");
    }
    assert_eq!(warning(&answer, "stops")["friction_case"], "low");
    assert_warns(&answer, "friction_unusually_high", "info", "#/fitted/0/brake/lining/friction");
}

#[tokio::test]
async fn tires_too_slippery_for_the_descent_are_the_reason() {
    let mut body = with(&stopping(), "/grade", q(-10.0, "%"));
    body["machine"]["adhesion"] = json!(0.05);
    let answer = answer(STOPPING, &body).await;
    assert_does_not_stop(&answer, "adhesion_too_low");
    assert!(case(&answer, "nominal").get("tending_speed").is_none());
}

#[tokio::test]
async fn a_raised_load_runs_back_before_the_brake_holds_it() {
    let mut body = with(&hoist(), "/direction", "raising");
    body["initial_speed"] = q(0.5, "m/s");
    body["response"] = json!({"dead_time": q(0.1, "s")});
    let answer = answer(STOPPING, &body).await;
    let stop = case(&answer, "nominal");
    // Up: 0.5/g s and 0.5²/(2g) m. Back: for the rest of the dead time at g, then 20 − g against it.
    assert_eq!(stop["runs_back"], true);
    assert_is(&stop["total_time"], 0.5 / G, "s");
    assert_is(&stop["total_distance"], 0.125 / G, "m");
    let rest = 0.1 - 0.5 / G;
    let (peak, back) = (G * rest, 20.0 - G);
    assert_close(of(&stop["run_back"]["peak_speed"], "m/s"), peak, 1e-12);
    assert_close(of(&stop["run_back"]["time"], "s"), rest + peak / back, 1e-12);
    let distance = G * rest * rest / 2.0 + peak * peak / (2.0 * back);
    assert_close(of(&stop["run_back"]["distance"], "m"), distance, 1e-12);
    assert_warns(&answer, "runs_back_before_brake", "info", "#/response");
    assert!(stop.get("mean_deceleration").is_none(), "no torque acted on the way up");
}

#[tokio::test]
async fn a_load_that_the_brake_cannot_hold_after_the_stop_is_exceeded() {
    let mut body = with(&hoist(), "/direction", "raising");
    body["fitted"][0]["torque"] = q(90.0, "N.m");
    let answer = answer(STOPPING, &body).await;
    let stop = case(&answer, "nominal");
    // Upwards 9000 + 9806.65 N stop it; downwards 9000 N do not hold it.
    assert_eq!(stop["reaches_final_speed"], true);
    assert_is(&stop["peak_deceleration"], 9.0 + G, "m/s2");
    assert_eq!(stop["runs_back"], true);
    assert!(stop.get("run_back").is_none());
    assert_warns(&answer, "runs_back_before_brake", "exceeded", "#/response");
}

#[tokio::test]
async fn what_stands_by_itself_after_the_dead_time_does_not_run_back() {
    // A level vehicle that its rolling resistance stops: 0.1 g for 2 s from 1 m/s.
    let mut body = with(&stopping(), "/machine/rolling_resistance", 0.1);
    body["initial_speed"] = q(1.0, "m/s");
    body["deceleration"] = q(3.0, "m/s2");
    body["response"] = json!({"dead_time": q(2.0, "s")});
    let answer = answer(STOPPING, &body).await;
    let stop = case(&answer, "nominal");
    assert_is(&stop["total_time"], 1.0 / (0.1 * G), "s");
    assert!(stop.get("runs_back").is_none());
    let warned = codes(&answer);
    assert!(!warned.contains(&"runs_back_before_brake"), "{warned:?}");
    assert!(!warned.contains(&"deceleration_not_reached"), "no torque was needed: {warned:?}");
}

#[tokio::test]
async fn both_unit_systems_tell_the_same() {
    let mut run_back = with(&hoist(), "/direction", "raising");
    run_back["initial_speed"] = q(0.5, "m/s");
    run_back["response"] = json!({"dead_time": q(0.1, "s"), "build_up_time": q(0.2, "s")});
    let traced = with(&shaft(), "/trace", json!({"points": 4}));
    let weak = with(&hoist(), "/fitted/0/torque", q(90.0, "N.m"));
    for body in [traced, hoist(), run_back, weak, conveyor()] {
        assert_both_unit_systems(STOPPING, &body).await;
    }
}
