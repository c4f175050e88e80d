//! Specification checks that are refused: each fault at its place, and all of them at once.

use serde_json::{Value, json};

use super::common::{SPEC_CHECK, assert_each, assert_faults, problem, q, with, without};
use super::spec_check_requests::{
    conveyor, four_brakes, hoist, one_hold, one_stop, repeated, shaft, spec, stop, vehicle,
};

fn one_repeated() -> Value {
    spec(vehicle(), four_brakes(), vec![repeated()])
}

#[tokio::test]
async fn a_mistyped_member_is_told_the_nearest_name_at_every_depth() {
    for (body, at, typed, meant) in [
        (one_stop(), "", "dutys", "duties"),
        (one_stop(), "", "near_limit", "near_limit_from"),
        (one_stop(), "/duties/0", "grad", "grade"),
        (one_stop(), "/duties/0", "requires", "require"),
        (one_stop(), "/duties/0/require", "max_distence", "max_distance"),
        (one_hold(), "/duties/0/require", "min_hold_factor", "min_holding_factor"),
        (one_stop(), "/duties/0/response", "reaction_tme", "reaction_time"),
        (one_stop(), "/fitted/0/brake/lining", "max_presure", "max_pressure"),
    ] {
        let body = with(&body, &format!("{at}/{typed}"), 1);
        let problem = problem(SPEC_CHECK, &body.to_string(), 422).await;
        assert_eq!(problem["error_count"], 1, "{problem}");
        let error = &problem["errors"][0];
        assert_eq!(error["pointer"], format!("#{at}/{typed}"));
        assert_eq!(error["code"], "unknown_member");
        let advice = format!("did you mean `{meant}`?");
        assert!(error["detail"].as_str().unwrap().contains(&advice), "{error}");
    }
    // Members of another kind of duty are no members of this one.
    for (member, value) in
        [("interval", q(60.0, "s")), ("distance", q(60.0, "m")), ("id", json!("uk_mot_parking"))]
    {
        let at = format!("/duties/0/{member}");
        let body = with(&one_stop(), &at, value);
        assert_faults(SPEC_CHECK, &body, &[(&format!("#{at}"), "unknown_member")]).await;
    }
}

#[tokio::test]
async fn there_is_at_least_one_duty_and_not_more_than_fifty() {
    let duties = |count: usize| with(&one_stop(), "/duties", vec![stop(); count]);
    assert_faults(SPEC_CHECK, &duties(0), &[("#/duties", "wrong_count")]).await;
    assert_faults(SPEC_CHECK, &duties(51), &[("#/duties", "wrong_count")]).await;
    super::common::answer(SPEC_CHECK, &duties(50)).await;
    let heating = with(&one_stop(), "/duties", vec![repeated(); 11]);
    assert_faults(SPEC_CHECK, &heating, &[("#/duties", "wrong_count")]).await;
    let none = with(&one_stop(), "/fitted", json!([]));
    assert_faults(SPEC_CHECK, &none, &[("#/fitted", "wrong_count")]).await;
    let waivers: Vec<Value> =
        (0..101).map(|_| json!({"check": "stops", "reason": "none"})).collect();
    let many = with(&one_stop(), "/waive", waivers);
    assert_faults(SPEC_CHECK, &many, &[("#/waive", "wrong_count")]).await;
}

#[tokio::test]
async fn a_brake_of_which_only_the_torque_is_known_is_not_enough() {
    let torque = json!({"torque": q(500.0, "N.m"), "axle": "rear"});
    let body = with(&one_stop(), "/fitted/1", torque);
    assert_faults(SPEC_CHECK, &body, &[("#/fitted/1/torque", "not_applicable")]).await;
    let neither = without(&one_stop(), "/fitted/1/brake");
    assert_faults(SPEC_CHECK, &neither, &[("#/fitted/1", "missing")]).await;
}

#[tokio::test]
async fn what_belongs_to_wheels_is_refused_elsewhere() {
    for (body, member, value) in [
        (hoist(), "no_wheel_lock", json!(true)),
        (hoist(), "min_braking_ratio", json!(0.5)),
        (conveyor(), "front_locks_first", json!(true)),
        (shaft(), "no_rear_wheel_lift", json!(true)),
    ] {
        let body = with(&body, "/duties/0/require", json!({member: value}));
        let at = format!("#/duties/0/require/{member}");
        assert_faults(SPEC_CHECK, &body, &[(&at, "not_applicable")]).await;
    }
    // Not asking for it is no fault.
    let body = with(&hoist(), "/duties/0/require", json!({"no_wheel_lock": false}));
    super::common::answer(SPEC_CHECK, &body).await;
    let body = with(&hoist(), "/duties/0/grade", q(5.0, "%"));
    assert_faults(SPEC_CHECK, &body, &[("#/duties/0/grade", "not_applicable")]).await;
}

#[tokio::test]
async fn a_shaft_has_no_distance_and_others_do_not_turn() {
    for (member, value) in [
        ("max_distance", q(10.0, "m")),
        ("min_mean_deceleration", q(1.0, "m/s2")),
        ("max_deceleration", q(1.0, "m/s2")),
    ] {
        let at = format!("/duties/0/require/{member}");
        let body = with(&shaft(), &at, value);
        assert_faults(SPEC_CHECK, &body, &[(&format!("#{at}"), "not_applicable")]).await;
    }
    let body = with(&one_stop(), "/duties/0/initial_rotational_speed", q(10.0, "rad/s"));
    let at = "#/duties/0/initial_rotational_speed";
    assert_faults(SPEC_CHECK, &body, &[(at, "not_applicable")]).await;
    let body = without(&one_stop(), "/duties/0/initial_speed");
    assert_faults(SPEC_CHECK, &body, &[("#/duties/0/initial_speed", "missing")]).await;
    let body = without(&hoist(), "/duties/0/direction");
    assert_faults(SPEC_CHECK, &body, &[("#/duties/0/direction", "missing")]).await;
}

#[tokio::test]
async fn heating_duties_are_bounded_together_too() {
    let entry = one_stop()["fitted"][0].clone();
    let entries = |count: usize| vec![entry.clone(); count];
    let heating = |fitted: usize, duties: usize| {
        with(&with(&one_stop(), "/fitted", entries(fitted)), "/duties", vec![repeated(); duties])
    };
    assert_faults(SPEC_CHECK, &heating(11, 10), &[("#/duties", "wrong_count")]).await;
    // One alone may have them all.
    super::common::answer(SPEC_CHECK, &heating(100, 1)).await;
}

#[tokio::test]
async fn the_brakes_that_act_must_be_there() {
    let at = "/duties/0/uses";
    for (uses, below, code) in [
        (json!([]), "", "wrong_count"),
        (json!([{"fitted_index": 2}]), "/0/fitted_index", "out_of_range"),
        (json!([{"fitted_index": 0}, {"fitted_index": 0}]), "/1/fitted_index", "out_of_range"),
        (json!([{"fitted_index": 0, "count": 3}]), "/0/count", "out_of_range"),
        (json!([{"fitted_index": 0, "count": 0}]), "/0/count", "out_of_range"),
        (json!([{"fitted_index": 1}, {"fitted_index": -1}]), "/1/fitted_index", "out_of_range"),
        (json!([{"fitted_index": 0.5}]), "/0/fitted_index", "wrong_type"),
        (json!([{"count": 1}]), "/0/fitted_index", "missing_member"),
        (json!([{"fitted_index": 0, "share": 1}]), "/0/share", "unknown_member"),
    ] {
        let body = with(&one_stop(), at, uses);
        assert_faults(SPEC_CHECK, &body, &[(&format!("#{at}{below}"), code)]).await;
    }
    // Both brakes of a disc act, or none.
    let mut paired = with(&one_stop(), "/fitted/0/brakes_per_disc", 2);
    paired = with(&paired, at, json!([{"fitted_index": 0, "count": 1}]));
    let problem = problem(SPEC_CHECK, &paired.to_string(), 422).await;
    assert_eq!(problem["errors"][0]["pointer"], "#/duties/0/uses/0/count", "{problem}");
}

#[tokio::test]
async fn repeated_stops_have_one_interval_longer_than_the_braking() {
    for (interval, code) in [(0.0, "not_positive"), (-5.0, "not_positive"), (1.0, "out_of_range")] {
        let body = with(&one_repeated(), "/duties/0/interval", q(interval, "s"));
        assert_faults(SPEC_CHECK, &body, &[("#/duties/0/interval", code)]).await;
    }
    let frequency = "/duties/0/stop_frequency";
    let both = with(&one_repeated(), frequency, q(60.0, "1/h"));
    assert_faults(SPEC_CHECK, &both, &[("#/duties/0/stop_frequency", "conflict")]).await;
    let neither = without(&one_repeated(), "/duties/0/interval");
    assert_faults(SPEC_CHECK, &neither, &[("#/duties/0", "missing")]).await;
    // A fault of the frequency stands where it was given.
    for (value, code) in [(0.0, "not_positive"), (3600.0, "out_of_range")] {
        let body = with(&neither, frequency, q(value, "1/h"));
        assert_faults(SPEC_CHECK, &body, &[("#/duties/0/stop_frequency", code)]).await;
    }
    let at = "#/duties/0/stop_count";
    for count in [0, 10_001] {
        let body = with(&one_repeated(), "/duties/0/stop_count", count);
        assert_faults(SPEC_CHECK, &body, &[(at, "out_of_range")]).await;
    }
}

#[tokio::test]
async fn a_waiver_names_a_check_and_a_reason() {
    let reason = "agreed";
    for (waiver, below, code) in [
        (json!({"check": "pad_live", "reason": reason}), "/check", "unknown_value"),
        (json!({"check": "wheel_lock_possible", "reason": reason}), "/check", "unknown_value"),
        (json!({"check": "pad_life"}), "/reason", "missing_member"),
        (json!({"reason": reason}), "/check", "missing_member"),
        (json!({"check": "pad_life", "reason": "  \t"}), "/reason", "missing"),
        (
            json!({"check": "pad_life", "reason": reason, "duty_index": -1}),
            "/duty_index",
            "out_of_range",
        ),
        (json!({"check": "pad_life", "reason": reason, "duty": 1}), "/duty", "unknown_member"),
    ] {
        let body = with(&one_stop(), "/waive", json!([waiver]));
        assert_faults(SPEC_CHECK, &body, &[(&format!("#/waive/0{below}"), code)]).await;
    }
    let empty = with(&one_stop(), "/waive", json!([{"check": "pad_life", "reason": ""}]));
    let problem = problem(SPEC_CHECK, &empty.to_string(), 422).await;
    assert_eq!(problem["errors"][0]["pointer"], "#/waive/0/reason", "{problem}");
}

#[tokio::test]
async fn what_is_out_of_range_is_refused() {
    let cold = || q(-300.0, "degC");
    assert_each(
        SPEC_CHECK,
        &one_stop(),
        &[
            ("/near_limit_from", json!(0.0), "#/near_limit_from", "out_of_range"),
            ("/near_limit_from", json!(-0.5), "#/near_limit_from", "out_of_range"),
            ("/near_limit_from", json!(1.000_001), "#/near_limit_from", "out_of_range"),
            ("/ambient_temperature", cold(), "#/ambient_temperature", "out_of_range"),
            ("/duties/0/start_temperature", cold(), "#/duties/0/start_temperature", "out_of_range"),
            (
                "/duties/0/require/max_distance",
                q(0.0, "m"),
                "#/duties/0/require/max_distance",
                "not_positive",
            ),
            (
                "/duties/0/require/max_time",
                q(-1.0, "s"),
                "#/duties/0/require/max_time",
                "not_positive",
            ),
            (
                "/duties/0/require/min_braking_ratio",
                json!(0.0),
                "#/duties/0/require/min_braking_ratio",
                "not_positive",
            ),
            (
                "/duties/0/require/min_pad_life_stops",
                json!(-3.0),
                "#/duties/0/require/min_pad_life_stops",
                "not_positive",
            ),
            ("/duties/0/initial_speed", q(0.0, "m/s"), "#/duties/0/initial_speed", "not_positive"),
            (
                "/duties/0/final_speed",
                q(20.0, "m/s"),
                "#/duties/0/final_speed",
                "not_below_initial_speed",
            ),
            (
                "/duties/0/response/dead_time",
                q(-0.1, "s"),
                "#/duties/0/response/dead_time",
                "negative",
            ),
            (
                "/fitted/1/brake/pad/outer_radius",
                q(90.0, "mm"),
                "#/fitted/1/brake/pad/outer_radius",
                "not_above_inner_radius",
            ),
        ],
    )
    .await;
    let at = "/duties/0/require/min_holding_factor";
    let body = with(&one_hold(), at, 0.0);
    assert_faults(SPEC_CHECK, &body, &[(&format!("#{at}"), "not_positive")]).await;
}

#[tokio::test]
async fn a_stop_that_ends_too_fast_has_no_mean_fully_developed_deceleration() {
    // Mean fully developed deceleration lies between 0.8 and 0.1 of the initial speed.
    let at = "#/duties/0/require/min_mean_fully_developed_deceleration";
    let body = with(&one_stop(), "/duties/0/final_speed", q(2.1, "m/s"));
    assert_faults(SPEC_CHECK, &body, &[(at, "not_applicable")]).await;
    super::common::answer(SPEC_CHECK, &with(&one_stop(), "/duties/0/final_speed", q(2.0, "m/s")))
        .await;
}

#[tokio::test]
async fn a_descent_needs_a_speed_a_distance_and_a_slope_within_reason() {
    let descent = json!({"kind": "descent", "speed": q(8.0, "m/s"), "distance": q(100.0, "m"), "grade": q(-8.0, "%")});
    let body = with(&one_stop(), "/duties/0", descent);
    assert_each(
        SPEC_CHECK,
        &body,
        &[
            ("/duties/0/speed", q(0.0, "m/s"), "#/duties/0/speed", "not_positive"),
            ("/duties/0/distance", q(-1.0, "m"), "#/duties/0/distance", "not_positive"),
            ("/duties/0/grade", q(-120.0, "%"), "#/duties/0/grade", "out_of_range"),
        ],
    )
    .await;
    let bare = without(&without(&body, "/duties/0/speed"), "/duties/0/distance");
    let missing =
        [("#/duties/0/speed", "missing_member"), ("#/duties/0/distance", "missing_member")];
    assert_faults(SPEC_CHECK, &bare, &missing).await;
}

#[tokio::test]
async fn all_impossible_values_of_a_request_come_in_one_answer() {
    let mut body = spec(
        vehicle(),
        four_brakes(),
        vec![stop(), repeated(), json!({"kind": "rule", "id": "none"})],
    );
    body["machine"]["mass"] = q(-1.0, "kg");
    body["fitted"][1]["brake"]["pad"]["angle"] = q(0.0, "deg");
    body["fitted"][1]["brake"]["disc"]["thickness"] = q(0.0, "mm");
    body["duties"][0]["initial_speed"] = q(-20.0, "m/s");
    body["duties"][1]["interval"] = q(0.0, "s");
    body["waive"] =
        json!([{"check": "stops", "reason": "agreed"}, {"check": "stops", "reason": " "}]);
    let problem = problem(SPEC_CHECK, &body.to_string(), 422).await;
    let found: Vec<&str> = problem["errors"]
        .as_array()
        .unwrap()
        .iter()
        .map(|error| error["pointer"].as_str().unwrap())
        .collect();
    for pointer in [
        "#/machine/mass",
        "#/fitted/1/brake/pad/angle",
        "#/fitted/1/brake/disc/thickness",
        "#/duties/0/initial_speed",
        "#/duties/1/interval",
        "#/duties/2/id",
        "#/waive/1/reason",
    ] {
        assert!(found.contains(&pointer), "{pointer} in {found:?}");
    }
}

/// What is found only when all parts are known is found all at once as well.
#[tokio::test]
async fn all_impossible_combinations_of_a_request_come_in_one_answer() {
    let mut body = spec(
        vehicle(),
        four_brakes(),
        vec![stop(), stop(), json!({"kind": "rule", "id": "uk_woodworking_run_down"})],
    );
    body["near_limit_from"] = json!(2.0);
    body["fitted"][1] = json!({"torque": q(100.0, "N.m"), "axle": "rear"});
    body["duties"][0]["require"]["max_time"] = q(0.0, "s");
    body["duties"][1]["uses"] = json!([{"fitted_index": 9}, {"fitted_index": 0, "count": 5}]);
    let expected = [
        ("#/near_limit_from", "out_of_range"),
        ("#/fitted/1/torque", "not_applicable"),
        ("#/duties/0/require/max_time", "not_positive"),
        ("#/duties/1/uses/0/fitted_index", "out_of_range"),
        ("#/duties/1/uses/1/count", "out_of_range"),
        ("#/duties/2/id", "not_applicable"),
    ];
    assert_faults(SPEC_CHECK, &body, &expected).await;
}

#[tokio::test]
async fn faults_of_shape_all_over_a_request_come_in_one_answer() {
    let mut body =
        spec(vehicle(), four_brakes(), vec![stop(), json!({"kind": "stopp"}), json!(3), json!({})]);
    body["duties"][0]["initial_speed"] = json!(20);
    body["duties"][0]["require"]["max_distance"] = q(20.0, "s");
    body["duties"][0]["require"]["no_wheel_lock"] = json!("yes");
    body["duties"][0]["uses"] = json!(null);
    body["waive"] = json!({"check": "stops"});
    let expected = [
        ("#/duties/0/initial_speed", "wrong_type"),
        ("#/duties/0/require/max_distance/unit", "unknown_unit"),
        ("#/duties/0/require/no_wheel_lock", "wrong_type"),
        ("#/duties/0/uses", "null_not_allowed"),
        ("#/duties/1/kind", "unknown_value"),
        ("#/duties/2", "wrong_type"),
        ("#/duties/3/kind", "missing_member"),
        ("#/waive", "wrong_type"),
    ];
    assert_faults(SPEC_CHECK, &body, &expected).await;
}
