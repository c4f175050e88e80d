//! Published requirements and test cycles as duties.

use brakewright::data::rules::{self, MachineKind};
use serde_json::{Value, json};

use super::common::{
    G, answer, assert_faults, assert_warns, bytes_or_problem, codes, of, problem, q, with, without,
};
use super::spec_check_requests::{
    SPEC_CHECK, check, check_of, checks, clamped, conveyor, fade, four_brakes, hoist, number,
    one_stop, shaft, spec, stop, used, vehicle,
};

/// The vehicle against a row, with its delays.
fn against(id: &str) -> Value {
    let response = json!({"reaction_time": q(0.5, "s"), "dead_time": q(0.05, "s"), "build_up_time": q(0.1, "s")});
    let duty = json!({
        "kind": "rule", "id": id, "response": response, "max_speed": q(150.0, "km/h"), "operated_by": "foot",
    });
    spec(vehicle(), four_brakes(), vec![duty])
}

/// Every row for vehicles is judged at a maximum speed that it has a test for.
#[tokio::test]
async fn every_requirement_for_vehicles_can_be_judged() {
    let rows = rules::all().iter().filter(|row| row.machines.contains(&MachineKind::Vehicle));
    let mut count = 0;
    for row in rows {
        let mut judged = false;
        for speed in [150.0, 220.0, 60.0, 28.0, 20.0] {
            let limb =
                if row.foot_force.is_none() && row.hand_force.is_some() { "hand" } else { "foot" };
            let body = with(&against(&row.id), "/duties/0/operated_by", json!(limb));
            let body = with(&body, "/duties/0/max_speed", q(speed, "km/h"));
            let (status, found) = bytes_or_problem(SPEC_CHECK, &body.to_string()).await;
            if status == 422 {
                assert_eq!(found["errors"][0]["pointer"], "#/duties/0/max_speed", "{found}");
                continue;
            }
            assert_eq!(status, 200, "{}: {found}", row.id);
            super::common::assert_conforms(SPEC_CHECK, &found);
            let all = found["results"]["checks"].as_array().unwrap();
            assert!(!all.is_empty(), "{}", row.id);
            let is_assessed = |check: &&Value| check["status"] != "not_assessed";
            assert_eq!(all.iter().filter(is_assessed).count(), all.len(), "{}: {all:#?}", row.id);
            assert!(found["cautions"].to_string().contains("not_the_test"), "{}", row.id);
            judged = true;
            break;
        }
        assert!(judged, "{} has a test for none of the speeds", row.id);
        count += 1;
    }
    assert!(count > 90, "{count}");
}

#[tokio::test]
async fn requirements_for_other_machines_are_judged_on_them() {
    for (id, body) in [
        ("cfr29_1910_179_hoist_other", hoist()),
        ("ilo_lift_b8_4_3", hoist()),
        ("wac_296_96_05150", hoist()),
        ("csa_z98_6_6_2", conveyor()),
        ("uk_woodworking_run_down", shaft()),
    ] {
        let mut duty = json!({"kind": "rule", "id": id, "response": {}});
        let member = if id.starts_with("uk") { "max_rotational_speed" } else { "max_speed" };
        let speed = if id.starts_with("uk") { q(100.0, "rad/s") } else { q(2.0, "m/s") };
        duty[member] = speed;
        let body = with(&body, "/duties", json!([duty]));
        let answer = answer(SPEC_CHECK, &body).await;
        let all = answer["results"]["checks"].as_array().unwrap();
        assert!(all.iter().all(|check| check["status"] != "not_assessed"), "{id}: {all:#?}");
    }
}

/// 29 CFR 1910.179(f)(2)(i) [seen]: 125 % of the full load hoisting torque.
#[tokio::test]
async fn a_crane_s_holding_brake_is_held_against_its_factor() {
    let duty = json!({"kind": "rule", "id": "cfr29_1910_179_hoist_other"});
    let answer = answer(SPEC_CHECK, &with(&hoist(), "/duties", json!([duty]))).await;
    let found = check(&answer, "holding_torque");
    assert_eq!(found["limit"], q(1.25, "1"));
    let factor = 2.0 * 0.3 * 0.125 * 7790.0 / (1000.0 * G * 0.01);
    assert!((number(&found["actual"]["value"]) - factor).abs() < 1e-9, "{found}");
}

/// ILO, lifts, B8.4.3 [seen]: 125 % of the load, going down at contract speed.
#[tokio::test]
async fn a_lift_is_stopped_with_more_than_its_load() {
    let duty = json!({"kind": "rule", "id": "ilo_lift_b8_4_3", "response": {}, "max_speed": q(2.0, "m/s")});
    let found = check_of(&with(&hoist(), "/duties", json!([duty])), "stops").await;
    assert!((of(&found["actual"], "N") - 1250.0 * G).abs() < 1e-6, "{found}");
}

#[tokio::test]
async fn columns_of_a_row_are_checks_of_their_own() {
    // 49 CFR 393.52(d), row A(1) [seen]: 20 ft from 20 mph, 21 ft/s2, 65.2 %.
    let answer = answer(SPEC_CHECK, &against("cfr49_393_52_a1_service")).await;
    for (code, value, unit) in [
        ("stopping_distance", 20.0 * 0.3048, "m"),
        ("peak_deceleration_minimum", 21.0 * 0.3048, "m/s2"),
        ("braking_ratio", 0.652, "1"),
    ] {
        let limit = &check(&answer, code)["limit"];
        assert!((of(limit, unit) - value).abs() < 1e-12, "{limit}");
    }
    let place = "#/duties/0/id";
    assert_warns(&answer, "stopping_distance", "exceeded", place);
    let speed = &answer["results"]["duties"][0]["stops"][0]["initial_speed"];
    assert!((of(speed, "m/s") - 20.0 * 0.44704).abs() < 1e-12);
}

#[tokio::test]
async fn the_reaction_does_not_count_where_the_clock_starts_at_the_control() {
    let slow =
        with(&against("cfr49_571_135_s7_5"), "/duties/0/response/reaction_time", q(1.5, "s"));
    let quick = without(&slow, "/duties/0/response/reaction_time");
    let quick_answer = answer(SPEC_CHECK, &quick).await;
    let [slow, quick] = [
        check_of(&slow, "stopping_distance").await,
        check(&quick_answer, "stopping_distance").clone(),
    ];
    let (slow, quick_distance) = (of(&slow["actual"], "m"), of(&quick["actual"], "m"));
    assert!((slow - quick_distance).abs() < 1e-9, "{slow} {quick_distance}");
    // 49 CFR 571.135 S7.5.3 [seen]: 70 m from 100 km/h.
    assert!((of(&quick["limit"], "m") - 70.0).abs() < 1e-9);
    // A caller's own limit counts the reaction.
    let own = with(&one_stop(), "/duties/0/response/reaction_time", q(1.5, "s"));
    let [own, usual] = [
        check_of(&own, "stopping_distance").await,
        check_of(&one_stop(), "stopping_distance").await,
    ];
    assert!((of(&own["actual"], "m") - of(&usual["actual"], "m") - 20.0).abs() < 1e-9);
    // The run-down of a tool counts from the signal.
    let tool = |reaction: f64| {
        let duty = json!({
            "kind": "rule", "id": "uk_woodworking_run_down", "max_rotational_speed": q(60.0, "rad/s"),
            "response": {"reaction_time": q(reaction, "s")},
        });
        with(&shaft(), "/duties", json!([duty]))
    };
    let [none, some] =
        [check_of(&tool(0.0), "stopping_time").await, check_of(&tool(0.7), "stopping_time").await];
    assert!((of(&some["actual"], "s") - of(&none["actual"], "s") - 0.7).abs() < 1e-9);
}

#[tokio::test]
async fn a_distance_is_not_judged_without_the_delays() {
    let body = without(&against("cfr49_393_52_a1_service"), "/duties/0/response");
    let answer = answer(SPEC_CHECK, &body).await;
    let distance = check(&answer, "stopping_distance");
    assert_eq!(distance["status"], "not_assessed");
    assert_eq!(distance["missing"], json!(["#/duties/0/response"]));
    // What does not depend on them is judged.
    assert_ne!(check(&answer, "peak_deceleration_minimum")["status"], "not_assessed");
    assert_ne!(check(&answer, "braking_ratio")["status"], "not_assessed");
}

#[tokio::test]
async fn a_row_that_counts_from_the_maximum_speed_says_that_it_is_missing() {
    let body = without(&against("cfr49_571_135_s7_6"), "/duties/0/max_speed");
    let answer = answer(SPEC_CHECK, &body).await;
    for code in ["stops", "stopping_distance"] {
        let found = check(&answer, code);
        assert_eq!(found["status"], "not_assessed");
        assert_eq!(found["missing"], json!(["#/duties/0/max_speed"]));
    }
    assert_eq!(answer["results"]["verdict"], "incomplete");
    // S7.6 [seen] is for vehicles faster than 125 km/h.
    let slow = with(&body, "/duties/0/max_speed", q(100.0, "km/h"));
    assert_faults(SPEC_CHECK, &slow, &[("#/duties/0/max_speed", "not_applicable")]).await;
}

/// 49 CFR 571.122 [seen]: hand 250 N, foot 400 N.
#[tokio::test]
async fn the_operator_s_force_is_held_against_the_limb_that_moves_the_control() {
    let force = |newtons: f64, by: Option<&str>| {
        let mut body = without(&against("cfr49_571_122_s6_4"), "/duties/0/operated_by");
        if let Some(by) = by {
            body["duties"][0]["operated_by"] = json!(by);
        }
        for entry in 0..2 {
            body["fitted"][entry]["brake"]["actuation"]["master_cylinder"]["operator_force"] =
                q(newtons, "N");
        }
        body
    };
    for (newtons, by, status) in [
        (249.0, Some("hand"), "near_limit"),
        (251.0, Some("hand"), "not_met"),
        (251.0, Some("foot"), "met"),
        (399.0, Some("foot"), "near_limit"),
        (401.0, Some("foot"), "not_met"),
        (249.0, None, "near_limit"),
        (251.0, None, "not_assessed"),
    ] {
        // The caller's own limit is another check of the same code; the worse of both is told.
        let body = without(
            &force(newtons, by),
            "/fitted/0/brake/actuation/master_cylinder/max_operator_force",
        );
        let found = check_of(&body, "operator_force").await;
        assert_eq!(found["status"], status, "{newtons} {by:?}: {found}");
        if status == "not_assessed" {
            assert_eq!(found["missing"], json!(["#/duties/0/operated_by"]));
        }
    }
    let unknown = with(&against("cfr49_571_122_s6_4"), "/fitted/1/brake", clamped(3000.0));
    let unknown = without(&unknown, "/fitted/1/control");
    let answer = answer(SPEC_CHECK, &unknown).await;
    let found = checks(&answer, "operator_force")[1];
    assert_eq!(found["missing"], json!(["#/fitted/1/brake/actuation"]), "{found}");
}

/// 49 CFR 571.122 S6.8 [seen]: 18 %, facing up and down.
#[tokio::test]
async fn a_parking_brake_is_tried_facing_up_and_down() {
    let mut body = against("cfr49_571_122_s6_8");
    body["machine"]["adhesion"] = json!(0.3);
    body["duties"][0]["uses"] = json!([{"fitted_index": 0}]);
    let both = answer(SPEC_CHECK, &body).await;
    let holds = both["results"]["duties"][0]["holds"].as_array().unwrap();
    let grades: Vec<f64> = holds.iter().map(|hold| of(&hold["grade"], "%")).collect();
    assert!((grades[0] - 18.0).abs() < 1e-9 && (grades[1] + 18.0).abs() < 1e-9, "{grades:?}");
    let mut alone = Vec::new();
    for grade in [18.0, -18.0] {
        let duty = json!({"kind": "hold", "grade": q(grade, "%"), "uses": [{"fitted_index": 0}]});
        let body = with(&body, "/duties", json!([duty]));
        alone.push(used(&check_of(&body, "holding_adhesion").await));
    }
    assert!(alone[0] > alone[1], "facing uphill takes load from the front axle: {alone:?}");
    let found = used(check(&both, "holding_adhesion"));
    assert!((found - alone[0]).abs() < 1e-9, "{found} {alone:?}");
}

/// A tester finds force over weight, but what presses the brakes keeps its limits all the same.
#[tokio::test]
async fn a_force_over_weight_is_found_with_brakes_within_their_own_limits() {
    let at = "/fitted/0/brake/lining/max_pressure";
    let body = with(&against("uk_mot_parking"), at, q(0.1, "MPa"));
    let answer = answer(SPEC_CHECK, &body).await;
    assert_eq!(check(&answer, "braking_ratio")["limit"], q(0.16, "1"));
    assert_eq!(check(&answer, "pad_peak_pressure")["status"], "not_met");
    assert_warns(&answer, "pad_peak_pressure", "exceeded", &format!("#{at}"));
}

#[tokio::test]
async fn a_requirement_is_judged_as_hot_as_the_other_duties_make_the_brakes() {
    let mut body = against("cfr49_393_52_a2_service");
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["lining"]["fade"] = fade();
    }
    let cold = check_of(&body, "stopping_distance").await;
    body["duties"].as_array_mut().unwrap().push(super::spec_check_requests::repeated());
    let hot = check_of(&body, "stopping_distance").await;
    assert_eq!(hot["hot"], true);
    assert!(used(&hot) > used(&cold));
}

#[tokio::test]
async fn a_row_from_memory_is_marked_as_such() {
    let memory = answer(SPEC_CHECK, &against("un_r13h_type_0")).await;
    assert_warns(&memory, "value_from_memory", "info", "#/duties/0/id");
    assert!(memory["cautions"].to_string().contains("values_from_memory"));
    let seen = answer(SPEC_CHECK, &against("cfr49_571_135_s7_5")).await;
    assert!(!codes(&seen).contains(&"value_from_memory"));
}

#[tokio::test]
async fn a_requirement_for_another_kind_of_machine_is_refused() {
    let at = "#/duties/0/id";
    for id in ["cfr29_1910_179_hoist_other", "uk_woodworking_run_down"] {
        let body = without(&against(id), "/duties/0/operated_by");
        assert_faults(SPEC_CHECK, &body, &[(at, "not_applicable")]).await;
    }
    let duty = json!({"kind": "rule", "id": "cfr49_571_135_s7_5"});
    let body = with(&hoist(), "/duties", json!([duty]));
    assert_faults(SPEC_CHECK, &body, &[(at, "not_applicable")]).await;
}

#[tokio::test]
async fn an_unknown_row_is_refused_with_the_nearest_known_one() {
    for (kind, id, meant) in [
        ("rule", "cfr49_571_135_s7_55", "cfr49_571_135_s7_5"),
        ("procedure", "us_571_135_heating_snub", "us_571_135_heating_snubs"),
    ] {
        let duty = json!({"kind": kind, "id": id, "max_speed": q(150.0, "km/h")});
        let body = with(&one_stop(), "/duties", json!([stop(), duty]));
        let problem = problem(SPEC_CHECK, &body.to_string(), 422).await;
        let error = &problem["errors"][0];
        assert_eq!(
            (&error["pointer"], &error["code"]),
            (&json!("#/duties/1/id"), &json!("unknown_id"))
        );
        let advice = format!("did you mean {meant}?");
        assert!(error["detail"].as_str().unwrap().contains(&advice), "{error}");
    }
}

// Test cycles

fn snubs() -> Value {
    let duty = json!({"kind": "procedure", "id": "us_571_135_heating_snubs", "max_speed": q(140.0, "km/h")});
    spec(vehicle(), four_brakes(), vec![duty])
}

#[tokio::test]
async fn a_test_cycle_is_followed_and_heats_what_comes_after() {
    let answer = answer(SPEC_CHECK, &snubs()).await;
    let temperature = of(&check(&answer, "disc_bulk_temperature")["actual"], "degC");
    assert!(temperature > 100.0, "{temperature}");
    assert_eq!(check(&answer, "stops")["status"], "met");
    assert!(answer["cautions"].to_string().contains("not_the_test"));
    let mut body = snubs();
    body["duties"].as_array_mut().unwrap().push(stop());
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["lining"]["fade"] = fade();
    }
    assert_eq!(check_of(&body, "stopping_distance").await["hot"], true);
}

#[tokio::test]
async fn a_test_cycle_without_cooling_names_it_and_one_beyond_the_brakes_is_told() {
    let lacking = without(&snubs(), "/fitted/0/brake/disc/cooling");
    let found = check_of(&lacking, "disc_bulk_temperature").await;
    assert_eq!(found["missing"], json!(["#/fitted/0/brake/disc/cooling"]));
    let mut weak = snubs();
    for entry in 0..2 {
        weak["fitted"][entry]["brake"]["actuation"]["master_cylinder"]["operator_force"] =
            q(60.0, "N");
    }
    // The cycle asks for 3 m/s2.
    let answer = answer(SPEC_CHECK, &weak).await;
    assert_warns(&answer, "peak_deceleration_minimum", "exceeded", "#/duties/0/id");
    assert_eq!(answer["results"]["verdict"], "fail");
    for entry in 0..2 {
        weak["fitted"][entry]["brake"]["actuation"]["master_cylinder"]["operator_force"] =
            q(500.0, "N");
    }
    let strong = super::common::answer(SPEC_CHECK, &weak).await;
    assert!(!codes(&strong).contains(&"peak_deceleration_minimum"));
}

#[tokio::test]
async fn a_test_cycle_needs_a_vehicle_and_the_speed_it_counts_from() {
    let body = without(&snubs(), "/duties/0/max_speed");
    assert_faults(SPEC_CHECK, &body, &[("#/duties/0/max_speed", "missing")]).await;
    let body = with(&hoist(), "/duties", snubs()["duties"].clone());
    assert_faults(SPEC_CHECK, &body, &[("#/duties/0/kind", "not_applicable")]).await;
}

/// A limb that the requirement has no force for would leave the control unjudged.
#[tokio::test]
async fn a_limb_without_a_limit_is_refused() {
    let body = with(&against("cfr49_571_135_s7_5"), "/duties/0/operated_by", json!("hand"));
    assert_faults(SPEC_CHECK, &body, &[("#/duties/0/operated_by", "not_applicable")]).await;
}
