//! `POST /v1/duty-cycle`: what it refuses.

use serde_json::{Value, json};

use super::duty_requests::{DUTY_CYCLE, assert_faults, brake, duty, faults, q, with};

fn stop(initial: f64, last: f64) -> Value {
    json!({"kind": "stop", "initial_speed": q(initial, "m/s"), "final_speed": q(last, "m/s")})
}

fn run(speed: f64) -> Value {
    json!({"kind": "run", "speed": q(speed, "m/s"), "time": q(5.0, "s")})
}

fn events(events: &Value) -> Value {
    with(&duty(), "/events", events.clone())
}

fn shaft(events: &Value) -> Value {
    let mut body = self::events(events);
    body["machine"] = json!({"kind": "shaft", "inertia": q(10.0, "kg.m2")});
    body["fitted"] = json!([{"brake": brake()}]);
    body
}

fn hoist(events: &Value) -> Value {
    let mut body = shaft(events);
    body["machine"] =
        json!({"kind": "hoist", "load_mass": q(1000.0, "kg"), "drum_radius": q(200.0, "mm")});
    body
}

#[tokio::test]
async fn too_few_and_too_many_events_are_refused() {
    assert_faults(DUTY_CYCLE, &events(&json!([])), &[("#/events", "wrong_count")]).await;
    let stand = json!({"kind": "stand", "time": q(1.0, "s")});
    let body = events(&Value::Array(vec![stand.clone(); 1001]));
    assert_faults(DUTY_CYCLE, &body, &[("#/events", "wrong_count")]).await;
    let body = with(&events(&Value::Array(vec![stand; 1000])), "/repeats", 21);
    assert_faults(DUTY_CYCLE, &body, &[("#/repeats", "out_of_range")]).await;
}

#[tokio::test]
async fn repeats_out_of_range_are_refused() {
    for repeats in [0_u32, 10_001, u32::MAX] {
        let body = with(&duty(), "/repeats", repeats);
        assert_faults(DUTY_CYCLE, &body, &[("#/repeats", "out_of_range")]).await;
    }
}

/// Each entry is followed on its own.
#[tokio::test]
async fn many_events_of_many_entries_are_refused() {
    let mut body = with(&duty(), "/repeats", 9_000);
    let entry = json!({"torque": q(10.0, "N.m"), "axle": "all"});
    body["fitted"] = Value::Array(vec![entry; 3]);
    assert_faults(DUTY_CYCLE, &body, &[("#/repeats", "out_of_range")]).await;
}

#[tokio::test]
async fn points_of_a_trace_out_of_range_are_refused() {
    for points in [0, 1, 2001] {
        let body = with(&duty(), "/trace", json!({"points": points}));
        assert_faults(DUTY_CYCLE, &body, &[("#/trace/points", "out_of_range")]).await;
    }
}

#[tokio::test]
async fn events_without_a_length_are_refused() {
    let at = |member: &str| format!("#/events/0/{member}");
    for (event, member) in [
        (json!({"kind": "stand", "time": q(0.0, "s")}), "time"),
        (json!({"kind": "stand", "time": q(-3.0, "s")}), "time"),
        (json!({"kind": "run", "speed": q(10.0, "m/s"), "time": q(0.0, "s")}), "time"),
        (json!({"kind": "run", "speed": q(0.0, "m/s"), "time": q(5.0, "s")}), "speed"),
        (json!({"kind": "run", "speed": q(10.0, "m/s"), "distance": q(0.0, "m")}), "distance"),
        (json!({"kind": "descent", "speed": q(10.0, "m/s"), "distance": q(-1.0, "m")}), "distance"),
        (json!({"kind": "descent", "speed": q(-10.0, "m/s"), "distance": q(1.0, "m")}), "speed"),
        (stop(0.0, 0.0), "initial_speed"),
    ] {
        assert_faults(DUTY_CYCLE, &events(&json!([event])), &[(&at(member), "not_positive")]).await;
    }
    let both = json!({"kind": "run", "speed": q(10.0, "m/s"), "time": q(1.0, "s"), "distance": q(10.0, "m")});
    assert_faults(DUTY_CYCLE, &events(&json!([both])), &[("#/events/0/distance", "conflict")])
        .await;
    let none = json!({"kind": "run", "speed": q(10.0, "m/s")});
    assert_faults(DUTY_CYCLE, &events(&json!([none])), &[("#/events/0", "missing")]).await;
    let slow = stop(5.0, 5.0);
    let expected = [("#/events/0/final_speed", "not_below_initial_speed")];
    assert_faults(DUTY_CYCLE, &events(&json!([slow])), &expected).await;
}

#[tokio::test]
async fn speeds_of_another_kind_of_machine_are_refused() {
    let turning = json!({"kind": "stop", "initial_rotational_speed": q(1000.0, "rpm")});
    let expected = [
        ("#/events/0/initial_rotational_speed", "not_applicable"),
        ("#/events/0/initial_speed", "missing"),
    ];
    assert_faults(DUTY_CYCLE, &events(&json!([turning])), &expected).await;
    let expected = [
        ("#/events/0/initial_speed", "not_applicable"),
        ("#/events/0/final_speed", "not_applicable"),
        ("#/events/0/initial_rotational_speed", "missing"),
        ("#/events/1/speed", "not_applicable"),
        ("#/events/1/rotational_speed", "missing"),
    ];
    assert_faults(DUTY_CYCLE, &shaft(&json!([stop(5.0, 0.0), run(5.0)])), &expected).await;
    let turning = json!({"kind": "run", "rotational_speed": q(900.0, "rpm"), "time": q(1.0, "s")});
    let expected =
        [("#/events/0/rotational_speed", "not_applicable"), ("#/events/0/speed", "missing")];
    assert_faults(DUTY_CYCLE, &events(&json!([turning])), &expected).await;
    let far = json!({"kind": "run", "rotational_speed": q(900.0, "rpm"), "distance": q(1.0, "m")});
    let expected = [("#/events/0/distance", "not_applicable")];
    assert_faults(DUTY_CYCLE, &shaft(&json!([far])), &expected).await;
}

#[tokio::test]
async fn events_that_a_machine_cannot_go_through_are_refused() {
    let descent = json!({"kind": "descent", "speed": q(1.0, "m/s"), "distance": q(10.0, "m")});
    let expected = [("#/events/0/kind", "not_applicable")];
    assert_faults(DUTY_CYCLE, &shaft(&json!([descent])), &expected).await;
    let expected = [("#/events/0/direction", "missing")];
    assert_faults(DUTY_CYCLE, &hoist(&json!([descent])), &expected).await;
    let graded = with(&descent, "/grade", q(-5.0, "%"));
    let graded = with(&graded, "/direction", "lowering");
    assert_faults(DUTY_CYCLE, &hoist(&json!([graded])), &[("#/events/0/grade", "not_applicable")])
        .await;
    let graded = with(&run(1.0), "/grade", q(-5.0, "%"));
    assert_faults(DUTY_CYCLE, &hoist(&json!([graded])), &[("#/events/0/grade", "not_applicable")])
        .await;
    let steep = with(&stop(10.0, 0.0), "/grade", q(-101.0, "%"));
    assert_faults(DUTY_CYCLE, &events(&json!([steep])), &[("#/events/0/grade", "out_of_range")])
        .await;
    let direction = with(&stop(10.0, 0.0), "/direction", "raising");
    let expected = [("#/events/0/direction", "not_applicable")];
    assert_faults(DUTY_CYCLE, &events(&json!([direction])), &expected).await;
}

#[tokio::test]
async fn an_airstream_without_a_vehicle_is_refused() {
    let mut body = hoist(&json!([run(1.0)]));
    body["fitted"][0]["brake"]["disc"]["cooling"] = json!({"model": "airstream"});
    let expected = [("#/fitted/0/brake/disc/cooling/model", "not_applicable")];
    assert_faults(DUTY_CYCLE, &body, &expected).await;
}

/// Speed falls only in a stop: between events, and from the last event to the first of the next repeat.
#[tokio::test]
async fn speed_that_falls_by_itself_is_refused() {
    let stand = json!({"kind": "stand", "time": q(1.0, "s")});
    let code = "speed_not_continuous";
    let body = events(&json!([run(10.0), stand]));
    assert_faults(DUTY_CYCLE, &body, &[("#/events/1", code)]).await;
    let body = events(&json!([stop(20.0, 10.0), run(9.0), stop(8.0, 0.0)]));
    assert_faults(DUTY_CYCLE, &body, &[("#/events/1", code), ("#/events/2", code)]).await;
    let body = events(&json!([stop(20.0, 0.0), run(30.0)]));
    assert_faults(DUTY_CYCLE, &with(&body, "/repeats", 2), &[("#/events/0", code)]).await;
    // Once is fine: nothing follows the run. So is a rise.
    assert_eq!(super::duty_requests::case(DUTY_CYCLE, &body).await["completed"], true);
}

#[tokio::test]
async fn many_faults_are_told_at_once() {
    let mut body = events(&json!([
        {"kind": "stand", "time": q(0.0, "s")},
        {"kind": "run", "speed": q(10.0, "m/s")},
        stop(5.0, 6.0),
    ]));
    body["machine"]["mass"] = q(0.0, "kg");
    body["fitted"][0]["brake"]["lining"]["friction"]["nominal"] = json!(3.0);
    body["trace"] = json!({"points": 1});
    let found = faults(DUTY_CYCLE, &body).await;
    for pointer in [
        "#/machine/mass",
        "#/fitted/0/brake/lining/friction/nominal",
        "#/events/0/time",
        "#/events/1",
        "#/events/2/final_speed",
        "#/trace/points",
    ] {
        assert!(found.iter().any(|(at, _)| at.starts_with(pointer)), "{pointer}: {found:?}");
    }
}

#[tokio::test]
async fn what_presses_must_be_known_and_shapes_must_be_right() {
    let mut body = duty();
    body["fitted"][0]["brake"].as_object_mut().unwrap().remove("actuation");
    let expected = [("#/fitted/0/brake/actuation", "missing")];
    assert_faults(DUTY_CYCLE, &body, &expected).await;
    let body = with(&duty(), "/events/0/kind", "dance");
    assert_eq!(faults(DUTY_CYCLE, &body).await[0].0, "#/events/0/kind");
    let body = with(&duty(), "/repeat", 3);
    assert_eq!(faults(DUTY_CYCLE, &body).await[0].0, "#/repeat");
}
