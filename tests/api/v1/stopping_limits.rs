//! `POST /v1/stopping`: what tires, axle loads and a lifting rear wheel allow.
//!
//! The vehicle: 1500 kg, wheelbase 2.6 m, height 0.55 m, 1.2 m from the front axle, adhesion 0.8. Check values of
//! the reference, verified by hand there: front brakes only 0.5185185 g, rear only 0.3157895 g, and with 65 %
//! at the front the rear axle locks first, at 0.7111111 g.

use serde_json::{Value, json};

use super::common::{
    G, STOPPING, answer, assert_both_unit_systems, assert_is, assert_warns, case, codes, of, q,
    stopping, warning, with, with_axles,
};
use crate::support::close::assert_close;

const WEIGHT: f64 = 1500.0 * G; // N

/// The vehicle with brake forces, N, at the wheels of its axles.
fn braked(front: f64, rear: f64) -> Value {
    let entry = |force: f64, axle: &str| json!({"torque": q(0.3 * force, "N.m"), "axle": axle});
    let entries = [(front, "front"), (rear, "rear")];
    let entries: Vec<Value> = entries
        .iter()
        .filter(|(force, _)| *force > 0.0)
        .map(|(force, axle)| entry(*force, axle))
        .collect();
    with(&with_axles(), "/fitted", entries)
}

async fn stop(body: &Value) -> Value {
    case(&answer_of(body).await, "nominal").clone()
}

async fn answer_of(body: &Value) -> Value {
    answer(STOPPING, body).await
}

/// The vehicle with 5000 N on each axle, on tires that hold that.
fn sticky() -> Value {
    with(&with_axles(), "/machine/adhesion", 1.2)
}

#[tokio::test]
async fn one_braked_axle_reaches_the_values_of_the_reference() {
    for (body, share, first) in
        [(braked(1e5, 0.0), 0.518_518_5, "front"), (braked(0.0, 1e5), 0.315_789_5, "rear")]
    {
        let answer = answer(STOPPING, &body).await;
        let stop = case(&answer, "nominal");
        assert_close(of(&stop["peak_deceleration"], "m/s2"), share * G, 1e-7);
        assert_eq!(stop["limited_by"], "adhesion");
        assert_eq!(stop["first_axle_to_lock"], first);
        assert_warns(&answer, "wheel_lock_possible", "info", "#/machine/adhesion");
        assert_warns(&answer, "sliding_friction_lower", "info", "#/machine/adhesion");
        assert_eq!(codes(&answer).contains(&"rear_axle_locks_first"), first == "rear");
    }
}

#[tokio::test]
async fn on_a_descent_one_axle_reaches_the_value_of_the_reference() {
    let body = with(&braked(1e5, 0.0), "/grade", q(-6.0, "deg"));
    let stop = stop(&body).await;
    assert_close(of(&stop["peak_deceleration"], "m/s2"), 0.411_150 * G, 2e-6);
}

#[tokio::test]
async fn a_fixed_distribution_locks_the_rear_axle_first_and_is_told() {
    // 65 to 35 at 0.70 g in all: below 0.7111 g nothing locks.
    let body = braked(0.65 * 0.70 * WEIGHT, 0.35 * 0.70 * WEIGHT);
    let free = answer(STOPPING, &body).await;
    let stop = case(&free, "nominal");
    assert_is(&stop["peak_deceleration"], 0.70 * G, "m/s2");
    assert_eq!(stop["limited_by"], "brake");
    assert_eq!(stop["first_axle_to_lock"], "rear", "defined even if nothing locks");
    assert_warns(&free, "rear_axle_locks_first", "info", "#/fitted");
    assert!(!codes(&free).contains(&"wheel_lock_possible"));
    // At 0.75 g the rear axle holds F_r = mu (m g l_f − h F_f)/(L + mu h).
    let (front, rear) = (0.65 * 0.75 * WEIGHT, 0.35 * 0.75 * WEIGHT);
    let limited = answer_of(&braked(front, rear)).await;
    let stop = case(&limited, "nominal");
    let held = 0.8 * (WEIGHT * 1.2 - 0.55 * front) / (2.6 + 0.8 * 0.55);
    assert!(held < rear);
    assert_is(&stop["peak_deceleration"], (front + held) / 1500.0, "m/s2");
    assert_eq!(stop["limited_by"], "adhesion");
    assert_eq!(
        stop["axles"][1]["adhesion_used"].as_f64().map(|used| (used * 1e9).round()),
        Some(8e8)
    );
}

#[tokio::test]
async fn axle_loads_shift_as_statics_say() {
    // S = 10 000 N in equal halves: N_r = (m g l_f − h S)/L.
    let stop = stop(&sticky()).await;
    let rear = (WEIGHT * 1.2 - 0.55 * 10_000.0) / 2.6;
    let axles = stop["axles"].as_array().unwrap();
    for (axle, (name, normal)) in axles.iter().zip([("front", WEIGHT - rear), ("rear", rear)]) {
        assert_eq!(axle["axle"], name);
        assert_is(&axle["brake_force"], 5000.0, "N");
        assert_is(&axle["normal_force"], normal, "N");
        assert_close(axle["adhesion_used"].as_f64().unwrap(), 5000.0 / normal, 1e-12);
    }
    assert_eq!(stop["limited_by"], "brake");
}

#[tokio::test]
async fn rolling_resistance_and_grade_enter_the_axle_loads() {
    let mut body = with(&sticky(), "/machine/rolling_resistance", 0.02);
    body["fitted"][0]["torque"] = q(600.0, "N.m");
    body["grade"] = q(75.0, "%"); // cos = 0.8, sin = 0.6
    let stop = stop(&body).await;
    let (normal, rolling) = (0.8 * WEIGHT, 0.016 * WEIGHT);
    let rear = (normal * 1.2 - 0.55 * (2000.0 + rolling)) / 2.6;
    assert_is(&stop["axles"][1]["normal_force"], rear, "N");
    assert_is(&stop["axles"][0]["normal_force"], normal - rear, "N");
    assert_is(&stop["peak_deceleration"], (2000.0 + rolling) / 1500.0 + 0.6 * G, "m/s2");
}

#[tokio::test]
async fn turning_masses_take_their_part_before_the_ground_does() {
    let body = with(&sticky(), "/machine/rotating_mass_factor", 1.1);
    let stop = stop(&body).await;
    // m k a = 10 000 N; the ground sees m a of it.
    assert_is(&stop["peak_deceleration"], 10_000.0 / 1650.0, "m/s2");
    assert_is(&stop["axles"][0]["brake_force"], 10_000.0 / 2.2, "N");
}

#[tokio::test]
async fn strong_brakes_on_all_axles_reach_the_ideal_adhesion() {
    let answer = answer(STOPPING, &braked(1e5, 1e5)).await;
    let stop = case(&answer, "nominal");
    assert_is(&stop["peak_deceleration"], 0.8 * G, "m/s2");
    for axle in [0, 1] {
        assert_close(stop["axles"][axle]["adhesion_used"].as_f64().unwrap(), 0.8, 1e-12);
    }
}

#[tokio::test]
async fn without_axle_loads_the_whole_vehicle_shares_one_limit() {
    for (axle, warned) in [("all", false), ("front", true)] {
        let mut body = with(&stopping(), "/machine/adhesion", 0.5);
        body["fitted"][0]["axle"] = json!(axle);
        let answer = answer(STOPPING, &body).await;
        let stop = case(&answer, "nominal");
        assert_is(&stop["peak_deceleration"], 0.5 * G, "m/s2");
        assert_eq!(stop["limited_by"], "adhesion");
        assert!(stop.get("first_axle_to_lock").is_none());
        assert_eq!(stop["axles"][0]["axle"], "all");
        assert_is(&stop["axles"][0]["normal_force"], WEIGHT, "N");
        assert_eq!(codes(&answer).contains(&"load_transfer_not_considered"), warned);
    }
}

/// A machine on two wheels, short and high: it lifts at l_f/h = 1.0769 g.
fn short() -> Value {
    let mut body = braked(1e5, 0.0);
    body["machine"]["geometry"] = json!({
        "wheelbase": q(1.4, "m"), "center_of_gravity_height": q(0.65, "m"),
        "front_axle_to_center_of_gravity": q(0.7, "m"),
    });
    body["machine"]["adhesion"] = json!(1.2);
    body
}

#[tokio::test]
async fn a_rear_wheel_about_to_lift_holds_the_deceleration_with_and_without_adhesion() {
    let mut without = short();
    without["machine"].as_object_mut().unwrap().shift_remove("adhesion");
    for body in [short(), without] {
        let answer = answer(STOPPING, &body).await;
        let stop = case(&answer, "nominal");
        assert_is(&stop["peak_deceleration"], 0.7 / 0.65 * G, "m/s2");
        assert_eq!(stop["limited_by"], "rear_wheel_lift");
        assert_warns(&answer, "rear_wheel_lift", "info", "#/machine/geometry");
        // All weight is on the front axle.
        assert_close(of(&stop["axles"][0]["normal_force"], "N"), WEIGHT, 1e-12);
        assert!(of(&stop["axles"][1]["normal_force"], "N").abs() < 1e-9 * WEIGHT);
    }
}

#[tokio::test]
async fn the_wheel_does_not_lift_below_that_limit() {
    let mut body = short();
    body["fitted"][0]["torque"] = q(0.3 * 1.07 * WEIGHT, "N.m");
    let answer = answer(STOPPING, &body).await;
    assert_eq!(case(&answer, "nominal")["limited_by"], "brake");
    assert!(!codes(&answer).contains(&"rear_wheel_lift"));
}

#[tokio::test]
async fn a_rear_wheel_may_lift_before_the_brakes_hold_a_steep_descent() {
    // Down 45 deg: gravity m g/√2 drives; the wheel lifts at m g/√2 · l_f/h, less than that with l_f 0.3, h 0.6.
    let mut body = short();
    body["grade"] = q(-100.0, "%");
    body["machine"]["geometry"]["front_axle_to_center_of_gravity"] = q(0.3, "m");
    body["machine"]["geometry"]["center_of_gravity_height"] = q(0.6, "m");
    let answer = answer(STOPPING, &body).await;
    let stop = case(&answer, "nominal");
    assert_eq!(stop["reason"], "rear_wheel_lifts");
    assert_is(&warning(&answer, "stops")["limit"], WEIGHT / 8.0_f64.sqrt(), "N");
}

#[tokio::test]
async fn lock_order_is_also_judged_across_friction_bounds() {
    // Front and rear by friction: at equal friction the front locks first; with the front at low and the rear at
    // high friction the rear does.
    let entry = |clamp: f64, axle: &str| {
        json!({"axle": axle, "brake": {"pad": super::common::sector(), "lining": {"friction": {"low": 0.3, "high": 0.5}},
            "actuation": {"kind": "clamp_force", "force": q(clamp, "N")}}})
    };
    let with_clamps = |front: f64, rear: f64| {
        with(&with_axles(), "/fitted", json!([entry(front, "front"), entry(rear, "rear")]))
    };
    // The front share at which both lock together at z = 0.8 is (1.4 + 0.8 · 0.55)/2.6 = 0.70769: 0.75 is front
    // first, 0.75 · 0.3/(0.75 · 0.3 + 0.25 · 0.5) = 0.643 is rear first; 0.9 and 0.844 are both front first.
    let mixed = answer(STOPPING, &with_clamps(7500.0, 2500.0)).await;
    for name in ["low", "nominal", "high"] {
        assert_eq!(case(&mixed, name)["first_axle_to_lock"], "front");
    }
    assert_warns(&mixed, "rear_axle_locks_first", "info", "#/fitted");
    let front = answer(STOPPING, &with_clamps(9000.0, 1000.0)).await;
    assert!(!codes(&front).contains(&"rear_axle_locks_first"));
}

#[tokio::test]
async fn a_held_deceleration_beyond_the_tires_is_not_reached() {
    let body = with(&braked(1e5, 1e5), "/deceleration", q(9.0, "m/s2"));
    let answer = answer(STOPPING, &body).await;
    assert_eq!(case(&answer, "nominal")["limited_by"], "adhesion");
    assert_warns(&answer, "deceleration_not_reached", "exceeded", "#/deceleration");
    // At 7 m/s² the rear axle holds no more, the front one gives the rest: it is the operator who ends it.
    let held = stop(&with(&body, "/deceleration", q(7.0, "m/s2"))).await;
    assert_eq!(held["limited_by"], "operator");
    assert_is(&held["total_distance"], 400.0 / 14.0, "m");
}

#[tokio::test]
async fn build_up_bends_where_an_axle_reaches_its_adhesion() {
    // Front only: the demand rises to 2 · 0.5185 m g in 1 s; the tires hold from half way on.
    let (limit, time) = (1.12 / 2.16 * G, 0.5);
    let mut body = braked(2.0 * 1.12 / 2.16 * WEIGHT, 0.0);
    body["response"] = json!({"build_up_time": q(1.0, "s")});
    let stop = stop(&body).await;
    // Rise: v loses a t/2; then a constant deceleration.
    let after = 20.0 - limit * time / 2.0;
    assert_close(of(&stop["total_time"], "s"), time + after / limit, 1e-12);
    let way = 20.0 * time - limit * time * time / 6.0 + after * after / (2.0 * limit);
    assert_close(of(&stop["total_distance"], "m"), way, 1e-12);
}

#[tokio::test]
async fn both_unit_systems_tell_the_same() {
    for body in [braked(1e5, 1e4), braked(5000.0, 5000.0), short()] {
        assert_both_unit_systems(STOPPING, &body).await;
    }
}
