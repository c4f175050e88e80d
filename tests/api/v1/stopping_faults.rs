//! What a stop refuses: impossible machines, brakes, speeds and members in the wrong place, on both endpoints.

use serde_json::{Value, json};

use super::common::{
    STOP_ENERGY, STOPPING, assert_each, assert_faults, brake, conveyor, hoist, q, shaft, stopping,
    with, with_axles, without,
};

/// Demands the same faults of both endpoints.
async fn each(body: &Value, cases: &[(&str, Value, &str, &str)]) {
    assert_each(STOPPING, body, cases).await;
    assert_each(STOP_ENERGY, body, cases).await;
}

async fn both(body: &Value, faults: &[(&str, &str)]) {
    assert_faults(STOPPING, body, faults).await;
    assert_faults(STOP_ENERGY, body, faults).await;
}

#[tokio::test]
async fn impossible_vehicles_are_refused() {
    let cases = [
        ("/machine/mass", q(0.0, "kg"), "#/machine/mass", "not_positive"),
        ("/machine/mass", q(-1.0, "kg"), "#/machine/mass", "not_positive"),
        ("/machine/mass", q(2e9, "kg"), "#/machine/mass", "out_of_range"),
        ("/machine/rolling_radius", q(0.0, "mm"), "#/machine/rolling_radius", "not_positive"),
        (
            "/machine/rotating_mass_factor",
            json!(0.99),
            "#/machine/rotating_mass_factor",
            "out_of_range",
        ),
        (
            "/machine/rolling_resistance",
            json!(-0.01),
            "#/machine/rolling_resistance",
            "out_of_range",
        ),
        ("/machine/rolling_resistance", json!(1), "#/machine/rolling_resistance", "out_of_range"),
        ("/machine/drag_area", q(-1.0, "m2"), "#/machine/drag_area", "negative"),
        ("/machine/air_density", q(0.0, "kg/m3"), "#/machine/air_density", "not_positive"),
        ("/machine/adhesion", json!(0), "#/machine/adhesion", "out_of_range"),
        ("/machine/adhesion", json!(-0.5), "#/machine/adhesion", "out_of_range"),
        ("/machine/adhesion", json!(5.1), "#/machine/adhesion", "out_of_range"),
        (
            "/machine/geometry/wheelbase",
            q(0.0, "m"),
            "#/machine/geometry/wheelbase",
            "not_positive",
        ),
        (
            "/machine/geometry/center_of_gravity_height",
            q(-0.5, "m"),
            "#/machine/geometry/center_of_gravity_height",
            "not_positive",
        ),
        (
            "/machine/geometry/front_axle_to_center_of_gravity",
            q(2.6, "m"),
            "#/machine/geometry/front_axle_to_center_of_gravity",
            "out_of_range",
        ),
    ];
    each(&with_axles(), &cases).await;
}

#[tokio::test]
async fn impossible_shafts_hoists_and_conveyors_are_refused() {
    let at_shaft = [("/machine/inertia", q(0.0, "kg.m2"), "#/machine/inertia", "not_positive")];
    each(&shaft(), &at_shaft).await;
    let at_hoist = [
        ("/machine/load_mass", q(0.0, "kg"), "#/machine/load_mass", "not_positive"),
        ("/machine/counterweight_mass", q(-1.0, "kg"), "#/machine/counterweight_mass", "negative"),
        ("/machine/drum_radius", q(0.0, "mm"), "#/machine/drum_radius", "not_positive"),
        ("/machine/falls", json!(0), "#/machine/falls", "out_of_range"),
        ("/machine/falls", json!(1001), "#/machine/falls", "out_of_range"),
        ("/machine/gear_ratio", json!(0), "#/machine/gear_ratio", "not_positive"),
        ("/machine/efficiency", json!(0), "#/machine/efficiency", "out_of_range"),
        ("/machine/efficiency", json!(1.01), "#/machine/efficiency", "out_of_range"),
        ("/machine/inertia", q(-1.0, "kg.m2"), "#/machine/inertia", "negative"),
    ];
    each(&hoist(), &at_hoist).await;
    let at_conveyor = [
        ("/machine/material_mass", q(0.0, "kg"), "#/machine/material_mass", "not_positive"),
        ("/machine/belt_mass", q(-1.0, "kg"), "#/machine/belt_mass", "negative"),
        ("/machine/incline", q(90.0, "deg"), "#/machine/incline", "out_of_range"),
        ("/machine/resistance", json!(1), "#/machine/resistance", "out_of_range"),
        ("/machine/resistance", json!(-0.1), "#/machine/resistance", "out_of_range"),
        ("/machine/pulley_radius", q(-1.0, "mm"), "#/machine/pulley_radius", "not_positive"),
        ("/machine/gear_ratio", json!(-1), "#/machine/gear_ratio", "not_positive"),
        ("/machine/efficiency", json!(2), "#/machine/efficiency", "out_of_range"),
    ];
    each(&conveyor(), &at_conveyor).await;
}

#[tokio::test]
async fn required_members_are_named_by_machine() {
    let cases: [(Value, &[&str]); 4] = [
        (stopping(), &["mass", "rolling_radius", "kind"]),
        (shaft(), &["inertia"]),
        (hoist(), &["load_mass", "drum_radius"]),
        (conveyor(), &["material_mass", "pulley_radius", "incline"]),
    ];
    for (body, members) in cases {
        for member in members {
            let body = without(&body, &format!("/machine/{member}"));
            both(&body, &[(&format!("#/machine/{member}"), "missing_member")]).await;
        }
    }
    for member in ["machine", "fitted"] {
        let body = without(&stopping(), &format!("/{member}"));
        both(&body, &[(&format!("#/{member}"), "missing_member")]).await;
    }
}

#[tokio::test]
async fn impossible_speeds_are_refused() {
    let cases = [
        ("/initial_speed", q(0.0, "m/s"), "#/initial_speed", "not_positive"),
        ("/initial_speed", q(-20.0, "m/s"), "#/initial_speed", "not_positive"),
        ("/final_speed", q(-1.0, "m/s"), "#/final_speed", "negative"),
        ("/final_speed", q(20.0, "m/s"), "#/final_speed", "not_below_initial_speed"),
        ("/final_speed", q(90.0, "km/h"), "#/final_speed", "not_below_initial_speed"),
        ("/deceleration", q(0.0, "m/s2"), "#/deceleration", "not_positive"),
        ("/deceleration", q(-1.0, "m/s2"), "#/deceleration", "not_positive"),
        ("/initial_speed", q(20_000.0, "m/s"), "#/initial_speed", "out_of_range"),
    ];
    each(&stopping(), &cases).await;
    let cases = [
        ("/initial_rotational_speed", q(0.0, "rpm"), "#/initial_rotational_speed", "not_positive"),
        (
            "/final_rotational_speed",
            q(100.0, "rad/s"),
            "#/final_rotational_speed",
            "not_below_initial_speed",
        ),
        ("/final_rotational_speed", q(-1.0, "rpm"), "#/final_rotational_speed", "negative"),
        ("/angular_deceleration", q(0.0, "rad/s2"), "#/angular_deceleration", "not_positive"),
    ];
    each(&shaft(), &cases).await;
}

#[tokio::test]
async fn a_shaft_has_rotational_members_and_everything_else_linear_ones() {
    let cases = [
        ("/initial_speed", q(1.0, "m/s"), "#/initial_speed", "not_applicable"),
        ("/final_speed", q(1.0, "m/s"), "#/final_speed", "not_applicable"),
        ("/deceleration", q(1.0, "m/s2"), "#/deceleration", "not_applicable"),
    ];
    each(&shaft(), &cases).await;
    let cases = [
        (
            "/initial_rotational_speed",
            q(1.0, "rpm"),
            "#/initial_rotational_speed",
            "not_applicable",
        ),
        ("/final_rotational_speed", q(1.0, "rpm"), "#/final_rotational_speed", "not_applicable"),
        ("/angular_deceleration", q(1.0, "rad/s2"), "#/angular_deceleration", "not_applicable"),
    ];
    for body in [stopping(), hoist(), conveyor()] {
        each(&body, &cases).await;
        let speechless = without(&body, "/initial_speed");
        both(&speechless, &[("#/initial_speed", "missing")]).await;
    }
    let speechless = without(&shaft(), "/initial_rotational_speed");
    both(&speechless, &[("#/initial_rotational_speed", "missing")]).await;
}

#[tokio::test]
async fn grade_drive_and_axle_belong_to_vehicles_and_the_direction_to_hoists() {
    let cases = [
        ("/grade", q(0.0, "%"), "#/grade", "not_applicable"),
        ("/drive_force", q(0.0, "N"), "#/drive_force", "not_applicable"),
        ("/fitted/0/axle", json!("all"), "#/fitted/0/axle", "not_applicable"),
        ("/fitted/0/rolling_radius", q(0.3, "m"), "#/fitted/0/rolling_radius", "not_applicable"),
    ];
    for body in [shaft(), hoist(), conveyor()] {
        each(&body, &cases).await;
    }
    let direction = [("/direction", json!("lowering"), "#/direction", "not_applicable")];
    for body in [stopping(), shaft(), conveyor()] {
        each(&body, &direction).await;
    }
    both(&without(&hoist(), "/direction"), &[("#/direction", "missing")]).await;
    both(&without(&stopping(), "/fitted/0/axle"), &[("#/fitted/0/axle", "missing")]).await;
    let down = [("/direction", json!("down"), "#/direction", "unknown_value")];
    each(&hoist(), &down).await;
}

#[tokio::test]
async fn a_grade_is_at_most_100_percent_and_then_computed() {
    let cases = [
        ("/grade", q(100.1, "%"), "#/grade", "out_of_range"),
        ("/grade", q(-100.1, "%"), "#/grade", "out_of_range"),
        ("/grade", q(46.0, "deg"), "#/grade", "out_of_range"),
        ("/grade", q(1e300, "%"), "#/grade", "out_of_range"),
    ];
    each(&stopping(), &cases).await;
    for grade in [q(100.0, "%"), q(45.0, "deg"), q(-100.0, "%")] {
        super::common::answer(STOPPING, &with(&stopping(), "/grade", grade)).await;
    }
}

#[tokio::test]
async fn impossible_entries_are_refused() {
    let cases = [
        ("/fitted/0/torque", q(0.0, "N.m"), "#/fitted/0/torque", "not_positive"),
        ("/fitted/0/torque", q(-1.0, "N.m"), "#/fitted/0/torque", "not_positive"),
        ("/fitted/0/count", json!(0), "#/fitted/0/count", "out_of_range"),
        ("/fitted/0/count", json!(1001), "#/fitted/0/count", "out_of_range"),
        ("/fitted/0/brakes_per_disc", json!(0), "#/fitted/0/brakes_per_disc", "out_of_range"),
        ("/fitted/0/brakes_per_disc", json!(1001), "#/fitted/0/brakes_per_disc", "out_of_range"),
        ("/fitted/0/brakes_per_disc", json!(2), "#/fitted/0/brakes_per_disc", "out_of_range"),
        ("/fitted/0/speed_ratio", json!(0), "#/fitted/0/speed_ratio", "not_positive"),
        ("/fitted/0/rolling_radius", q(0.0, "m"), "#/fitted/0/rolling_radius", "not_positive"),
        ("/fitted/0/operator_share", json!(0), "#/fitted/0/operator_share", "out_of_range"),
        ("/fitted/0/operator_share", json!(1.1), "#/fitted/0/operator_share", "out_of_range"),
        ("/fitted/0/axle", json!("middle"), "#/fitted/0/axle", "unknown_value"),
        ("/fitted/0/brake", brake(), "#/fitted/0/torque", "conflict"),
        ("/fitted", json!([]), "#/fitted", "wrong_count"),
    ];
    each(&stopping(), &cases).await;
    let neither = without(&stopping(), "/fitted/0/torque");
    both(&neither, &[("#/fitted/0", "missing")]).await;
    let entry = stopping()["fitted"][0].clone();
    let many = with(&stopping(), "/fitted", vec![entry; 101]);
    both(&many, &[("#/fitted", "wrong_count")]).await;
}

/// The vehicle with one brake in its parts.
fn with_brake(brake: &Value) -> Value {
    with(&stopping(), "/fitted/0", json!({"brake": brake, "axle": "all"}))
}

#[tokio::test]
async fn a_brake_in_a_stop_needs_something_that_presses() {
    let at = "#/fitted/0/brake/actuation";
    both(&with_brake(&without(&brake(), "/actuation")), &[(at, "missing")]).await;
    both(&with_brake(&brake()), &[(at, "missing")]).await;
    for chain in [
        json!({"kind": "clamp_force"}),
        json!({"kind": "cable"}),
        json!({"kind": "pneumatic", "chamber_area": q(100.0, "cm2")}),
        json!({"kind": "spring"}),
    ] {
        both(&with_brake(&with(&brake(), "/actuation", chain)), &[(at, "missing")]).await;
    }
    let mut pressed = brake();
    pressed["actuation"]["line_pressure"] = q(1.0, "MPa");
    pressed["actuation"]["master_cylinder"] =
        json!({"bore": q(20.0, "mm"), "operator_force": q(100.0, "N")});
    let at = "#/fitted/0/brake/actuation/line_pressure";
    both(&with_brake(&pressed), &[(at, "conflict")]).await;
    let negative = json!({"kind": "clamp_force", "force": q(-1.0, "N")});
    let body = with_brake(&with(&brake(), "/actuation", negative));
    both(&body, &[("#/fitted/0/brake/actuation/force", "negative")]).await;
}

#[tokio::test]
async fn entries_of_one_control_with_different_forces_are_refused() {
    let entry = |force: f64, axle: &str| {
        let cable = json!({"kind": "cable", "lever_ratio": 40, "operator_force": q(force, "N")});
        json!({"brake": with(&brake(), "/actuation", cable), "axle": axle, "control": "lever"})
    };
    let two = |first, second| {
        with(&stopping(), "/fitted", json!([entry(first, "front"), entry(second, "rear")]))
    };
    super::common::answer(STOPPING, &two(100.0, 100.0)).await;
    let at = |index: usize| format!("#/fitted/{index}/brake/actuation");
    both(&two(100.0, 101.0), &[(&at(0), "differs"), (&at(1), "differs")]).await;
    let mut apart = two(100.0, 101.0);
    apart["fitted"][1]["control"] = json!("pedal");
    super::common::answer(STOPPING, &apart).await;
}

#[tokio::test]
async fn a_pad_beyond_its_disc_is_refused_at_the_pad() {
    let mut small = super::common::disc();
    small["outer_radius"] = q(140.0, "mm");
    let mut brake = with(&brake(), "/disc", small);
    brake["actuation"]["line_pressure"] = q(1.0, "MPa");
    both(&with_brake(&brake), &[("#/fitted/0/brake/pad", "pad_beyond_disc")]).await;
}

#[tokio::test]
async fn a_trace_has_2_to_2000_points_and_only_a_stop_has_one() {
    for points in [0, 1, 2001] {
        let body = with(&stopping(), "/trace", json!({"points": points}));
        assert_faults(STOPPING, &body, &[("#/trace/points", "out_of_range")]).await;
    }
    for (points, code) in
        [(json!(2.5), "wrong_type"), (json!(-2), "out_of_range"), (json!("9"), "wrong_type")]
    {
        let body = with(&stopping(), "/trace", json!({"points": points}));
        assert_faults(STOPPING, &body, &[("#/trace/points", code)]).await;
    }
    let body = with(&stopping(), "/trace", json!({}));
    assert_faults(STOPPING, &body, &[("#/trace/points", "missing_member")]).await;
    let body = with(&stopping(), "/trace", json!({"points": 9}));
    assert_faults(STOP_ENERGY, &body, &[("#/trace", "unknown_member")]).await;
}

#[tokio::test]
async fn negative_delays_and_impossible_temperatures_are_refused() {
    for member in ["reaction_time", "dead_time", "build_up_time"] {
        let body = with(&stopping(), "/response", json!({member: q(-0.1, "s")}));
        both(&body, &[(&format!("#/response/{member}"), "negative")]).await;
    }
    let cases = [
        ("/ambient_temperature", q(-273.16, "degC"), "#/ambient_temperature", "out_of_range"),
        ("/ambient_temperature", q(-1.0, "K"), "#/ambient_temperature", "out_of_range"),
        ("/start_temperature", q(-459.68, "degF"), "#/start_temperature", "out_of_range"),
        ("/start_temperature", q(1e5, "K"), "#/start_temperature", "out_of_range"),
    ];
    assert_each(STOP_ENERGY, &stopping(), &cases).await;
}

#[tokio::test]
async fn faults_all_over_a_stop_come_in_one_answer() {
    let mut body = with_axles();
    body["machine"]["mass"] = q(0.0, "kg");
    body["machine"]["geometry"]["wheelbase"] = q(-1.0, "m");
    body["machine"]["adhesion"] = json!(9);
    body["initial_speed"] = q(10.0, "m/s");
    body["final_speed"] = q(20.0, "m/s");
    body["grade"] = q(60.0, "deg");
    body["deceleration"] = q(-1.0, "m/s2");
    body["direction"] = json!("raising");
    body["response"] = json!({"dead_time": q(-1.0, "s")});
    let mut bad = brake();
    bad["pad"]["angle"] = q(0.0, "deg");
    bad["lining"]["friction"]["nominal"] = json!(3);
    bad["faces"] = json!(0);
    bad["actuation"]["piston_diameter"] = q(0.0, "mm");
    body["fitted"] = json!([
        {"brake": bad, "count": 0, "control": "pedal"},
        {"torque": q(0.0, "N.m"), "axle": "rear", "speed_ratio": 0},
        {"axle": "front", "operator_share": 2},
    ]);
    let expected = [
        ("#/machine/mass", "not_positive"),
        ("#/machine/geometry/wheelbase", "not_positive"),
        ("#/machine/adhesion", "out_of_range"),
        ("#/final_speed", "not_below_initial_speed"),
        ("#/grade", "out_of_range"),
        ("#/deceleration", "not_positive"),
        ("#/direction", "not_applicable"),
        ("#/response/dead_time", "negative"),
        ("#/fitted/0/brake/pad/angle", "not_positive"),
        ("#/fitted/0/brake/lining/friction/nominal", "out_of_range"),
        ("#/fitted/0/brake/faces", "out_of_range"),
        ("#/fitted/0/brake/actuation/piston_diameter", "not_positive"),
        ("#/fitted/0/count", "out_of_range"),
        ("#/fitted/0/axle", "missing"),
        ("#/fitted/1/torque", "not_positive"),
        ("#/fitted/1/speed_ratio", "not_positive"),
        ("#/fitted/2", "missing"),
        ("#/fitted/2/operator_share", "out_of_range"),
    ];
    both(&body, &expected).await;
}

#[tokio::test]
async fn a_missing_input_joins_the_other_faults() {
    let mut body = with_brake(&brake());
    body["machine"]["mass"] = q(-1.0, "kg");
    body["initial_speed"] = q(-1.0, "m/s");
    let expected = [
        ("#/machine/mass", "not_positive"),
        ("#/initial_speed", "not_positive"),
        ("#/fitted/0/brake/actuation", "missing"),
    ];
    both(&body, &expected).await;
}
