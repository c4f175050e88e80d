//! The whole job in one call: verdict, governing check, waivers, the brakes that act, and hot linings.

use brakewright::calc::finding::CheckCode;
use serde_json::{Value, json};

use super::common::{
    G, answer, assert_both_unit_systems, assert_warns, bytes, codes, defaulted, of, q, warning,
    with, without,
};
use super::spec_check_requests::{
    SPEC_CHECK, check, check_of, checks, clamped, conveyor, fade, four_brakes, hoist, hold,
    hydraulic, number, one_hold, one_stop, repeated, shaft, spec, statuses, stop, used, vehicle,
    verdict_of,
};

/// Every kind of duty that knows its own figures, on a lining that fades.
fn all_duties() -> Value {
    let descent = json!({
        "kind": "descent", "name": "down the pass", "speed": q(8.0, "m/s"), "grade": q(-8.0, "%"),
        "distance": q(800.0, "m"), "start_temperature": q(60.0, "degC"),
    });
    let procedure = json!({
        "kind": "procedure", "id": "us_571_135_heating_snubs", "max_speed": q(130.0, "km/h"),
    });
    let rule = json!({
        "kind": "rule", "id": "cfr49_393_52_a2_service", "response": {"dead_time": q(0.1, "s")},
    });
    let duties = vec![stop(), repeated(), descent, hold(), rule, procedure];
    let mut body = spec(vehicle(), four_brakes(), duties);
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["lining"]["fade"] = fade();
    }
    body
}

#[tokio::test]
async fn a_choice_passes_fails_or_is_incomplete() {
    assert_eq!(verdict_of(&one_stop()).await, "pass");
    let short = with(&one_stop(), "/duties/0/require/max_distance", q(20.0, "m"));
    assert_eq!(verdict_of(&short).await, "fail");
    let lacking = without(&one_stop(), "/fitted/0/brake/lining/max_pressure");
    assert_eq!(verdict_of(&lacking).await, "incomplete");
    // What fails, fails whatever else is missing.
    let both = without(&short, "/fitted/0/brake/lining/max_pressure");
    assert_eq!(verdict_of(&both).await, "fail");
    let near = with(&one_stop(), "/near_limit_from", 1e-9);
    let answer = answer(SPEC_CHECK, &near).await;
    assert_eq!(answer["results"]["verdict"], "pass");
    assert!(statuses(&answer).iter().any(|(_, status)| *status == "near_limit"));
}

#[tokio::test]
async fn checks_come_duty_by_duty_with_the_names_that_were_given() {
    let answer = answer(SPEC_CHECK, &all_duties()).await;
    let all = answer["results"]["checks"].as_array().unwrap();
    let order: Vec<u64> = all.iter().map(|check| check["duty_index"].as_u64().unwrap()).collect();
    assert!(order.is_sorted(), "{order:?}");
    let duties = answer["results"]["duties"].as_array().unwrap();
    let kinds: Vec<&Value> = duties.iter().map(|duty| &duty["kind"]).collect();
    assert_eq!(kinds, ["stop", "repeated_stops", "descent", "hold", "rule", "procedure"]);
    for check in all {
        let name = match check["duty_index"].as_u64().unwrap() {
            0 => json!("emergency stop"),
            2 => json!("down the pass"),
            _ => Value::Null,
        };
        assert_eq!(check["duty_name"], name, "{check}");
        let detail = check["detail"].as_str().unwrap();
        assert!(detail.len() > 20, "{detail}");
    }
    assert_eq!(duties[0]["duty_name"], "emergency stop");
    assert!(!answer.to_string().contains(":-0.0"), "nobody wants to read of a zero below zero");
}

/// Contract: which checks apply to a duty without any limit of its own.
#[tokio::test]
async fn some_checks_apply_to_every_duty_of_a_kind() {
    let moving = [
        "stops",
        "pad_peak_pressure",
        "rubbing_speed",
        "disc_bulk_temperature",
        "surface_temperature",
    ];
    let bare = json!({"friction": {"nominal": 0.4}});
    let fitted =
        json!([{"brake": with(&clamped(9000.0), "/lining", bare), "axle": "all", "count": 4}]);
    let still = json!({"kind": "stop", "initial_speed": q(20.0, "m/s")});
    let descent = json!({
        "kind": "descent", "speed": q(8.0, "m/s"), "distance": q(800.0, "m"), "grade": q(-8.0, "%"),
    });
    for duty in [still, repeated(), descent] {
        let answer = answer(SPEC_CHECK, &spec(vehicle(), fitted.clone(), vec![duty])).await;
        let found: Vec<&str> = statuses(&answer).iter().map(|(code, _)| *code).collect();
        assert_eq!(found, moving);
    }
    let answer = answer(SPEC_CHECK, &spec(vehicle(), fitted, vec![json!({"kind": "hold"})])).await;
    assert_eq!(statuses(&answer), [("holding_torque", "met"), ("holding_adhesion", "met")]);
    assert_eq!(used(check(&answer, "holding_torque")), 0.0, "nothing pulls on level ground");
}

#[tokio::test]
async fn a_stop_that_does_not_end_fails_and_keeps_no_limit() {
    let weak = with(&hoist(), "/machine/load_mass", q(20.0, "t"));
    let weak = with(
        &weak,
        "/duties/0/require",
        json!({"max_distance": q(5.0, "m"), "min_pad_life_stops": 10.0}),
    );
    let answer = answer(SPEC_CHECK, &weak).await;
    assert_eq!(answer["results"]["verdict"], "fail");
    let stops = check(&answer, "stops");
    assert_eq!(stops["status"], "not_met");
    assert_eq!(stops["friction_case"], "low");
    // 20 t pull with m g; the worn spring presses 7790 N: 2·0.3·0.125·7790 N.m on 100 rad a metre.
    assert!((of(&stops["actual"], "N") - 20_000.0 * G).abs() < 1e-6);
    assert!((of(&stops["limit"], "N") - 58_425.0).abs() < 1e-6, "{stops}");
    assert!((used(stops) - 20_000.0 * G / 58_425.0).abs() < 1e-12);
    let distance = check(&answer, "stopping_distance");
    assert_eq!(distance["status"], "not_met");
    assert!(distance.get("actual").is_none() && distance.get("utilization").is_none());
    for code in ["disc_bulk_temperature", "pad_life"] {
        let found = check(&answer, code);
        assert_eq!(found["status"], "not_assessed");
        assert!(found.get("missing").is_none(), "{found}");
        assert!(found["detail"].as_str().unwrap().contains("does not end"), "{found}");
    }
    assert_eq!(answer["results"]["governing"]["code"], "stopping_distance");
    assert_eq!(answer["results"]["duties"][0]["stops"][0]["reaches_final_speed"], false);
}

#[tokio::test]
async fn the_highest_utilization_governs_and_of_equal_ones_the_first() {
    let answer = answer(SPEC_CHECK, &all_duties()).await;
    let all = answer["results"]["checks"].as_array().unwrap();
    let highest = all.iter().filter_map(|check| check["utilization"].as_f64()).fold(0.0, f64::max);
    let governing = &answer["results"]["governing"];
    assert_eq!(number(&governing["utilization"]), highest);
    let first = all.iter().find(|check| check["utilization"].as_f64() == Some(highest)).unwrap();
    for member in ["code", "duty_index", "fitted_index"] {
        assert_eq!(governing[member], first[member], "{member}");
    }
    let twice = spec(vehicle(), four_brakes(), vec![stop(), stop()]);
    let answer = super::common::answer(SPEC_CHECK, &twice).await;
    assert_eq!(answer["results"]["governing"]["duty_index"], 0);
    // Nothing that can be assessed: nothing governs.
    let bare = with(&clamped(9000.0), "/lining", json!({"friction": {"nominal": 0.4}}));
    let fitted = json!([{"brake": bare, "axle": "front"}]);
    let mut alone = spec(vehicle(), fitted, vec![json!({"kind": "hold", "grade": q(5.0, "%")})]);
    let some = super::common::answer(SPEC_CHECK, &alone).await;
    assert_eq!(some["results"]["governing"]["code"], "holding_adhesion");
    alone["duties"] = json!([{"kind": "rule", "id": "cfr49_571_135_s7_6"}]);
    let none = super::common::answer(SPEC_CHECK, &alone).await;
    assert!(none["results"].get("governing").is_none(), "{}", none["results"]);
}

// Waivers

fn waiver(check: &str) -> Value {
    json!({"check": check, "reason": "measured on the bench, report 12"})
}

#[tokio::test]
async fn a_waiver_with_a_reason_lets_a_check_go_that_cannot_be_assessed() {
    let lacking = without(&one_stop(), "/fitted/0/brake/lining/max_pressure");
    let body = with(&lacking, "/waive", json!([waiver("pad_peak_pressure")]));
    let answer = answer(SPEC_CHECK, &body).await;
    assert_eq!(answer["results"]["verdict"], "pass");
    let found = check(&answer, "pad_peak_pressure");
    assert_eq!(found["status"], "waived");
    assert_eq!(found["missing"], json!(["#/fitted/0/brake/lining/max_pressure"]));
    let recorded = json!([{
        "check": "pad_peak_pressure", "reason": "measured on the bench, report 12", "effect": "waived",
    }]);
    assert_eq!(answer["record"]["waivers"], recorded);
    assert!(!codes(&answer).contains(&"without_effect"));
    let plain = super::common::answer(SPEC_CHECK, &lacking).await;
    assert!(plain["record"].get("waivers").is_none());
}

#[tokio::test]
async fn a_waiver_holds_only_for_the_duty_and_the_entry_it_names() {
    let mut body = spec(vehicle(), four_brakes(), vec![stop(), stop()]);
    for entry in 0..2 {
        let lining = body["fitted"][entry]["brake"]["lining"].as_object_mut().unwrap();
        lining.shift_remove("max_pressure").unwrap();
    }
    let places = [(0, 0), (0, 1), (1, 0), (1, 1)];
    for (members, waived) in [
        (json!({}), vec![(0, 0), (0, 1), (1, 0), (1, 1)]),
        (json!({"duty_index": 1}), vec![(1, 0), (1, 1)]),
        (json!({"fitted_index": 0}), vec![(0, 0), (1, 0)]),
        (json!({"duty_index": 0, "fitted_index": 1}), vec![(0, 1)]),
        (json!({"duty_index": 2}), vec![]),
        (json!({"fitted_index": 7}), vec![]),
    ] {
        let mut one = waiver("pad_peak_pressure");
        one.as_object_mut().unwrap().extend(members.as_object().unwrap().clone());
        let answer = answer(SPEC_CHECK, &with(&body, "/waive", json!([one]))).await;
        for (found, place) in checks(&answer, "pad_peak_pressure").into_iter().zip(places) {
            let expected = if waived.contains(&place) { "waived" } else { "not_assessed" };
            assert_eq!(found["status"], expected, "{members} {found}");
        }
        let effect = if waived.is_empty() { "without_effect" } else { "waived" };
        assert_eq!(answer["record"]["waivers"][0]["effect"], effect, "{members}");
        let passes = answer["results"]["verdict"] == "pass";
        assert_eq!(passes, waived.len() == places.len(), "{members}");
    }
}

#[tokio::test]
async fn a_waiver_that_changes_nothing_is_reported() {
    for code in ["stopping_distance", "air_pressure"] {
        let answer = answer(SPEC_CHECK, &with(&one_stop(), "/waive", json!([waiver(code)]))).await;
        assert_eq!(answer["record"]["waivers"][0]["effect"], "without_effect");
        assert_warns(&answer, "without_effect", "info", "#/waive/0");
        assert_eq!(answer["results"]["verdict"], "pass");
    }
}

#[tokio::test]
async fn waiving_everything_hides_nothing_that_is_not_met() {
    let mut body = all_duties();
    body["duties"][0]["require"]["max_distance"] = q(20.0, "m");
    body["duties"][0]["require"]["max_time"] = q(1.0, "s");
    body["duties"][3]["require"]["min_holding_factor"] = json!(50.0);
    body["fitted"][0]["brake"]["lining"]["max_rubbing_speed"] = q(1.0, "m/s");
    body["fitted"][1]["brake"]["lining"].as_object_mut().unwrap().shift_remove("max_pressure");
    let plain = answer(SPEC_CHECK, &body).await;
    let waivers: Vec<Value> = CheckCode::ALL.iter().map(|code| waiver(code.as_str())).collect();
    let waived = answer(SPEC_CHECK, &with(&body, "/waive", waivers)).await;
    let (before, after) = (statuses(&plain), statuses(&waived));
    assert!(before.iter().filter(|(_, status)| *status == "not_met").count() > 4);
    assert!(before.iter().any(|(_, status)| *status == "not_assessed"));
    for (before, after) in before.iter().zip(&after) {
        let expected = if before.1 == "not_assessed" { "waived" } else { before.1 };
        assert_eq!((before.0, expected), *after);
    }
    assert_eq!(waived["results"]["verdict"], "fail");
    assert_eq!(plain["results"]["governing"], waived["results"]["governing"]);
    assert_eq!(plain["results"]["duties"], waived["results"]["duties"]);
}

// Which brakes act

/// The braking ratio of a stop that some brakes make; proportional to their force while no tire slides.
async fn ratio(uses: Option<Value>) -> f64 {
    let body = uses.map_or_else(one_stop, |uses| with(&one_stop(), "/duties/0/uses", uses));
    number(&check_of(&body, "braking_ratio").await["actual"]["value"])
}

#[tokio::test]
async fn only_the_brakes_that_are_used_act() {
    let all = ratio(None).await;
    let [front, rear] = [0, 1].map(|entry| json!([{"fitted_index": entry}]));
    let (front, rear) = (ratio(Some(front)).await, ratio(Some(rear)).await);
    let one = ratio(Some(json!([{"fitted_index": 0, "count": 1}]))).await;
    let both = ratio(Some(json!([{"fitted_index": 1}, {"fitted_index": 0, "count": 2}]))).await;
    // Piston areas as 50² to 22²; the build-up does not change the highest force.
    assert!((front / rear - 2500.0 / 484.0).abs() < 1e-9, "{front} {rear}");
    assert!((one - 0.5 * front).abs() < 1e-9);
    assert!((front + rear - all).abs() < 1e-9);
    assert!((both - all).abs() < 1e-12);
}

#[tokio::test]
async fn a_failed_circuit_leaves_its_brakes_out_and_the_checks_keep_their_places() {
    let mut failed = stop();
    failed["uses"] = json!([{"fitted_index": 1}]);
    let answer = answer(SPEC_CHECK, &spec(vehicle(), four_brakes(), vec![stop(), failed])).await;
    let entries = |duty: usize| {
        let found = checks(&answer, "pad_peak_pressure").into_iter();
        let found = found.filter(|check| check["duty_index"] == duty);
        found.map(|check| check["fitted_index"].as_u64().unwrap()).collect::<Vec<u64>>()
    };
    assert_eq!((entries(0), entries(1)), (vec![0, 1], vec![1]));
    let distances = checks(&answer, "stopping_distance");
    assert!(used(distances[1]) > 2.0 * used(distances[0]));
    let lacking = without(
        &spec(vehicle(), four_brakes(), vec![with(&stop(), "/uses", json!([{"fitted_index": 1}]))]),
        "/fitted/1/brake/disc",
    );
    let found = check_of(&lacking, "disc_bulk_temperature").await;
    assert_eq!(found["missing"], json!(["#/fitted/1/brake/disc"]));
}

/// Two rear brakes hold with T/r each on the slope: 2·2·0.3·0.125 m·F/0.3 m, F the clamp force.
#[tokio::test]
async fn a_parking_brake_holds_alone() {
    let mut body = one_hold();
    body["fitted"] = json!([
        {"brake": hydraulic(50.0), "count": 2, "axle": "front"},
        {"brake": clamped(7000.0), "count": 2, "axle": "rear"},
    ]);
    body["duties"][0]["uses"] = json!([{"fitted_index": 1}]);
    let answer = answer(SPEC_CHECK, &body).await;
    let held = 2.0 * 2.0 * 0.3 * 0.125 * 7000.0 / 0.3;
    let pulls = 1500.0 * G * 0.18_f64.atan().sin();
    let factor = number(&check(&answer, "holding_torque")["actual"]["value"]);
    assert!((factor - held / pulls).abs() < 1e-9, "{factor}");
    // Facing uphill the rear axle carries more: (1500 g cos 1.2 + h sin)/2.6.
    let (sine, cosine) = 0.18_f64.atan().sin_cos();
    let normal = 1500.0 * G * (1.2 * cosine + 0.55 * sine) / 2.6;
    let tires = check(&answer, "holding_adhesion");
    assert!((of(&tires["limit"], "N") - held.min(0.8 * normal)).abs() < 1e-6, "{tires}");
    body["machine"]["adhesion"] = json!(0.2);
    let slippery = check_of(&body, "holding_adhesion").await;
    assert_eq!(slippery["status"], "not_met");
    assert!((used(&slippery) - pulls / (0.2 * normal)).abs() < 1e-9, "{slippery}");
    // Facing downhill the load leaves it.
    body["duties"][0]["grade"] = q(-18.0, "%");
    let normal = 1500.0 * G * (1.2 * cosine - 0.55 * sine) / 2.6;
    let facing_down = check_of(&body, "holding_adhesion").await;
    assert!((used(&facing_down) - pulls / (0.2 * normal)).abs() < 1e-9, "{facing_down}");
}

// Hot

fn stop_after_many(lining_fades: bool) -> Value {
    let mut body = spec(vehicle(), four_brakes(), vec![stop(), repeated(), hold()]);
    if lining_fades {
        for entry in 0..2 {
            body["fitted"][entry]["brake"]["lining"]["fade"] = fade();
        }
    }
    body
}

#[tokio::test]
async fn after_duties_that_heat_the_brakes_stops_and_holds_are_judged_hot() {
    let cold = answer(SPEC_CHECK, &stop_after_many(false)).await;
    let hot = answer(SPEC_CHECK, &stop_after_many(true)).await;
    for code in ["stopping_distance", "stopping_time", "mean_deceleration", "holding_torque"] {
        let (cold, hot) = (check(&cold, code), check(&hot, code));
        assert!(cold.get("hot").is_none(), "{cold}");
        assert_eq!(hot["hot"], true, "{hot}");
        assert!(used(hot) > 1.02 * used(cold), "{code}");
        assert!(hot["detail"].as_str().unwrap().contains(", hot"), "{hot}");
    }
    // High friction decelerates hardest while cold, and that is what its limit is about.
    let peak = check(&hot, "peak_deceleration");
    assert!(peak.get("hot").is_none(), "{peak}");
    let factor =
        |duty: usize| number(&hot["results"]["duties"][duty]["fitted"][0]["hot_friction_factor"]);
    assert!(factor(0) < 1.0 && factor(0) == factor(2));
    // The factor belongs to the hottest bulk: 1 at 100 degC down to 0.6 at 400 degC.
    let bulk = of(&hot["results"]["duties"][1]["fitted"][0]["peak_bulk_temperature"], "degC");
    let expected = 1.0 - 0.4 * (bulk - 100.0) / 300.0;
    assert!((factor(0) - expected).abs() < 1e-12, "{} at {bulk}", factor(0));
    // Torque falls with friction: the holding factor with both entries' factors.
    let holds = hot["results"]["duties"][2]["holds"].as_array().unwrap();
    assert_eq!(holds.len(), 2);
    assert_eq!(holds[1]["hot"], true);
    assert!(of(&holds[1]["available_force"], "N") < of(&holds[0]["available_force"], "N"));
    let stops = hot["results"]["duties"][0]["stops"].as_array().unwrap();
    assert_eq!(stops.len(), 6, "three friction cases, cold and hot");
    assert_eq!(stops.iter().filter(|stop| stop["hot"] == true).count(), 3);
}

#[tokio::test]
async fn without_fade_points_nothing_is_hotter_and_a_warning_says_so() {
    let answer = answer(SPEC_CHECK, &stop_after_many(false)).await;
    let warned: Vec<&Value> = answer["warnings"]
        .as_array()
        .unwrap()
        .iter()
        .filter(|warning| warning["code"] == "fade_not_given")
        .collect();
    let places: Vec<&Value> = warned.iter().map(|warning| &warning["pointer"]).collect();
    assert_eq!(places, ["#/fitted/0/brake/lining", "#/fitted/1/brake/lining"]);
    let all = answer["results"]["checks"].as_array().unwrap();
    assert!(all.iter().all(|check| check.get("hot").is_none()));
    // Where nothing heats the brakes, nobody misses them.
    assert!(
        !codes(&super::common::answer(SPEC_CHECK, &one_stop()).await).contains(&"fade_not_given")
    );
    // And where fade is given but nothing heats them, nothing is hot.
    let unheated = with(&one_stop(), "/fitted/0/brake/lining/fade", fade());
    let answer = super::common::answer(SPEC_CHECK, &unheated).await;
    assert!(!answer.to_string().contains("\"hot\""));
}

#[tokio::test]
async fn a_descent_is_held_by_what_the_hot_brakes_leave() {
    let descent = |distance: f64| json!({"kind": "descent", "speed": q(10.0, "m/s"), "grade": q(-8.0, "%"), "distance": q(distance, "m")});
    let mut body = spec(vehicle(), four_brakes(), vec![descent(100.0)]);
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["lining"]["fade"] = fade();
    }
    let short = answer(SPEC_CHECK, &body).await;
    body["duties"] = json!([descent(20_000.0)]);
    let long = answer(SPEC_CHECK, &body).await;
    let pulls = 1500.0 * G * 0.08_f64.atan().sin();
    for answer in [&short, &long] {
        let stops = check(answer, "stops");
        assert!((of(&stops["actual"], "N") - pulls).abs() < 1e-6, "{stops}");
        let power = of(&answer["results"]["duties"][0]["descents"][0]["power"], "kW");
        assert!((power - pulls * 10.0 / 1e3).abs() < 1e-9);
    }
    assert_eq!(check(&long, "stops")["hot"], true);
    assert!(used(check(&long, "stops")) > 1.1 * used(check(&short, "stops")));
    assert!(
        used(check(&long, "disc_bulk_temperature"))
            > 3.0 * used(check(&short, "disc_bulk_temperature"))
    );
}

// Other machines

#[tokio::test]
async fn hoists_conveyors_and_shafts_are_judged_too() {
    let mut lowering = hoist();
    lowering["duties"].as_array_mut().unwrap().push(json!({"kind": "hold"}));
    let answer = answer(SPEC_CHECK, &lowering).await;
    assert_eq!(answer["results"]["verdict"], "pass");
    // A worn spring: (9000 − 200·4)·0.95 N; 2·0.3·0.125 m of it against 1000 g·0.2 m/(2·10).
    let factor = 2.0 * 0.3 * 0.125 * 7790.0 / (1000.0 * G * 0.01);
    let found = number(&check(&answer, "holding_torque")["actual"]["value"]);
    assert!((found - factor).abs() < 1e-9, "{found}");
    assert!(codes(&answer).is_empty() || !codes(&answer).contains(&"adhesion_not_considered"));
    let cautions = answer["cautions"].to_string();
    assert!(cautions.contains("suspended_load"), "{cautions}");

    let answer = super::common::answer(SPEC_CHECK, &conveyor()).await;
    // 0.6 MPa on 50 cm² times 3, 0.9 of it, against 1000 kg on 10 deg at 40 rad a metre.
    let pulls = 1000.0 * G * 10.0_f64.to_radians().sin() / 40.0;
    let found = number(&check(&answer, "holding_torque")["actual"]["value"]);
    assert!((found - 2.0 * 0.3 * 0.125 * 8100.0 / pulls).abs() < 1e-9, "{found}");
    assert_eq!(check(&answer, "air_pressure")["status"], "met");

    let answer = super::common::answer(SPEC_CHECK, &shaft()).await;
    assert_eq!(answer["results"]["verdict"], "pass");
    let stops = check(&answer, "stops");
    assert!((of(&stops["actual"], "N.m") - 20.0).abs() < 1e-12, "{stops}");
    assert!((of(&stops["limit"], "N.m") - 2.0 * 0.3 * 0.125 * 1500.0).abs() < 1e-9, "{stops}");
    // 12 kg.m2 from 100 rad/s against 112.5 − 20 N.m.
    let time = of(&check(&answer, "stopping_time")["actual"], "s");
    assert!((time - 1200.0 / 92.5).abs() < 1e-9, "{time}");
    let first = &answer["results"]["duties"][0]["stops"][0];
    assert!(first["total_angle"].is_object() && first.get("total_distance").is_none());
    assert!(answer["results"]["duties"][1]["holds"][0]["required_torque"].is_object());
}

// Record

#[tokio::test]
async fn the_same_request_gives_the_same_bytes_and_the_same_physics_in_both_unit_systems() {
    let body = all_duties();
    let text = body.to_string();
    assert_eq!(bytes(SPEC_CHECK, &text).await, bytes(SPEC_CHECK, &text).await);
    for body in [body, hoist(), conveyor(), shaft()] {
        assert_both_unit_systems(SPEC_CHECK, &body).await;
    }
}

#[tokio::test]
async fn every_default_is_on_record_and_every_method_is_named() {
    let answer = answer(SPEC_CHECK, &all_duties()).await;
    let defaults = defaulted(&answer);
    for pointer in [
        "#/ambient_temperature",
        "#/near_limit_from",
        "#/duties/0/start_temperature",
        "#/duties/0/grade",
        "#/duties/1/response/reaction_time",
    ] {
        assert!(defaults.contains(&pointer), "{pointer} in {defaults:?}");
    }
    let hold = super::common::answer(SPEC_CHECK, &without(&one_hold(), "/duties/0/require")).await;
    assert!(defaulted(&hold).contains(&"#/duties/0/require/min_holding_factor"));
    let methods = answer["record"]["methods"].to_string();
    for method in ["heat.descent", "friction.torque", "machine.vehicle"] {
        assert!(methods.contains(method), "{method} in {methods}");
    }
}

#[tokio::test]
async fn wheels_that_may_lock_are_a_remark_unless_the_duty_forbids_it() {
    let mut body = with(&one_stop(), "/machine/adhesion", 0.35);
    let asked = answer(SPEC_CHECK, &body).await;
    assert_eq!(check(&asked, "adhesion")["status"], "not_met");
    let require = body["duties"][0]["require"].as_object_mut().unwrap();
    for member in ["no_wheel_lock", "front_locks_first", "no_rear_wheel_lift"] {
        require.shift_remove(member).unwrap();
    }
    let answer = answer(SPEC_CHECK, &body).await;
    assert!(checks(&answer, "adhesion").is_empty());
    assert_eq!(warning(&answer, "wheel_lock_possible")["severity"], "info");
    assert_eq!(answer["results"]["verdict"], "pass", "{}", answer["results"]);
}
