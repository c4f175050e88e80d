//! Faults of shape, alike on every calculation: each with its place, its code and some advice.

use serde_json::{Value, json};

use super::common::{
    ACTUATION_FORCE, PAD_CAPACITY, SPEC_CHECK, STOP_ENERGY, STOPPING, actuation_force, answer,
    assert_faults, brake, pad_capacity, problem, q, shaft, stopping, with, without,
};
use super::spec_check_requests::one_stop;

/// A body of each endpoint with the place of one quantity in it.
fn bodies() -> [(&'static str, Value, &'static str); 5] {
    [
        (PAD_CAPACITY, pad_capacity(), "/pad/outer_radius"),
        (ACTUATION_FORCE, actuation_force(), "/brake/actuation/piston_diameter"),
        (STOPPING, stopping(), "/machine/rolling_radius"),
        (STOP_ENERGY, stopping(), "/machine/rolling_radius"),
        (SPEC_CHECK, one_stop(), "/machine/rolling_radius"),
    ]
}

async fn only_error(path: &str, body: &Value) -> Value {
    let problem = problem(path, &body.to_string(), 422).await;
    assert_eq!(problem["error_count"], 1, "{problem}");
    problem["errors"][0].clone()
}

#[tokio::test]
async fn a_bare_number_in_place_of_a_quantity_is_refused_with_advice() {
    for (path, body, member) in bodies() {
        let error = only_error(path, &with(&body, member, 150)).await;
        assert_eq!(error["pointer"], format!("#{member}"));
        assert_eq!(error["code"], "wrong_type");
        assert!(error["detail"].as_str().unwrap().contains("needs its unit"), "{error}");
    }
}

#[tokio::test]
async fn an_unknown_unit_is_refused_with_those_known() {
    for (path, body, member) in bodies() {
        for unit in ["MPa", "millimetre", "MM", "", "mm "] {
            let error = only_error(path, &with(&body, member, q(150.0, unit))).await;
            assert_eq!(error["pointer"], format!("#{member}/unit"));
            assert_eq!(error["code"], "unknown_unit");
            assert!(error["detail"].as_str().unwrap().contains("mm, m, cm"), "{error}");
        }
    }
}

#[tokio::test]
async fn a_broken_quantity_is_refused_at_the_broken_part() {
    for (path, body, member) in bodies() {
        for (value, below, code) in [
            (json!({"value": "150", "unit": "mm"}), "/value", "wrong_type"),
            (json!({"value": null, "unit": "mm"}), "/value", "null_not_allowed"),
            (json!({"value": true, "unit": "mm"}), "/value", "wrong_type"),
            (json!({"value": [150], "unit": "mm"}), "/value", "wrong_type"),
            (json!({"value": 150, "unit": 3}), "/unit", "wrong_type"),
            (json!({"value": 150, "unit": null}), "/unit", "null_not_allowed"),
            (json!({"value": 150}), "/unit", "missing_member"),
            (json!({"unit": "mm"}), "/value", "missing_member"),
            (json!({"value": 150, "unit": "mm", "units": "mm"}), "/units", "unknown_member"),
            (json!(null), "", "null_not_allowed"),
            (json!("150 mm"), "", "wrong_type"),
            (json!([150, "mm"]), "", "wrong_type"),
        ] {
            let at = format!("#{member}{below}");
            assert_faults(path, &with(&body, member, value), &[(&at, code)]).await;
        }
    }
}

#[tokio::test]
async fn a_mistyped_member_is_told_the_nearest_name_at_every_depth() {
    for (path, body, at, typed, meant) in [
        (PAD_CAPACITY, pad_capacity(), "", "clampforce", "clamp_force"),
        (PAD_CAPACITY, pad_capacity(), "/pad", "outer_radios", "outer_radius"),
        (PAD_CAPACITY, pad_capacity(), "/lining", "max_presure", "max_pressure"),
        (PAD_CAPACITY, pad_capacity(), "/lining/friction", "hihg", "high"),
        (
            ACTUATION_FORCE,
            actuation_force(),
            "/brake/actuation",
            "piston_diametre",
            "piston_diameter",
        ),
        (STOPPING, stopping(), "/machine", "rolling_resistence", "rolling_resistance"),
        (STOPPING, stopping(), "/fitted/0", "rolling_radus", "rolling_radius"),
        (STOP_ENERGY, stopping(), "", "ambient_temprature", "ambient_temperature"),
    ] {
        let error = only_error(path, &with(&body, &format!("{at}/{typed}"), 1)).await;
        assert_eq!(error["pointer"], format!("#{at}/{typed}"));
        assert_eq!(error["code"], "unknown_member");
        let advice = format!("did you mean `{meant}`?");
        assert!(error["detail"].as_str().unwrap().contains(&advice), "{error}");
    }
}

#[tokio::test]
async fn null_is_no_absence() {
    for (path, body, member) in [
        (PAD_CAPACITY, pad_capacity(), "/faces"),
        (PAD_CAPACITY, pad_capacity(), "/ref"),
        (PAD_CAPACITY, pad_capacity(), "/report_units"),
        (PAD_CAPACITY, pad_capacity(), "/pad"),
        (PAD_CAPACITY, pad_capacity(), "/lining/friction/nominal"),
        (ACTUATION_FORCE, actuation_force(), "/brake/disc"),
        (ACTUATION_FORCE, actuation_force(), "/brake/actuation/master_cylinder"),
        (STOPPING, stopping(), "/machine/geometry"),
        (STOPPING, stopping(), "/fitted/0"),
        (STOPPING, stopping(), "/trace"),
        (STOP_ENERGY, stopping(), "/start_temperature"),
    ] {
        let body = with(&body, member, Value::Null);
        assert_faults(path, &body, &[(&format!("#{member}"), "null_not_allowed")]).await;
    }
}

#[tokio::test]
async fn required_members_and_wrong_words_are_named() {
    for member in ["pad", "lining"] {
        let body = without(&pad_capacity(), &format!("/{member}"));
        assert_faults(PAD_CAPACITY, &body, &[(&format!("#/{member}"), "missing_member")]).await;
    }
    for (body, member) in [
        (actuation_force(), "torque"),
        (actuation_force(), "brake"),
        (actuation_force(), "brake/pad"),
        (actuation_force(), "brake/lining"),
        (actuation_force(), "brake/actuation/piston_diameter"),
        (actuation_force(), "brake/actuation/kind"),
    ] {
        let body = without(&body, &format!("/{member}"));
        assert_faults(ACTUATION_FORCE, &body, &[(&format!("#/{member}"), "missing_member")]).await;
    }
    let disc = with(&actuation_force(), "/brake/disc", json!({}));
    let missing = ["material", "outer_radius", "inner_radius", "thickness"]
        .map(|member| format!("#/brake/disc/{member}"));
    let missing = missing.each_ref().map(|at| (at.as_str(), "missing_member"));
    assert_faults(ACTUATION_FORCE, &disc, &missing).await;
    let chamber = with(&actuation_force(), "/brake/actuation", json!({"kind": "pneumatic"}));
    let at = "#/brake/actuation/chamber_area";
    assert_faults(ACTUATION_FORCE, &chamber, &[(at, "missing_member")]).await;
    let master = with(&actuation_force(), "/brake/actuation/master_cylinder", json!({}));
    let at = "#/brake/actuation/master_cylinder/bore";
    assert_faults(ACTUATION_FORCE, &master, &[(at, "missing_member")]).await;
    for (path, body, member) in [
        (PAD_CAPACITY, pad_capacity(), "/report_units"),
        (PAD_CAPACITY, pad_capacity(), "/pressure_distribution"),
        (PAD_CAPACITY, pad_capacity(), "/pad/shape"),
        (ACTUATION_FORCE, actuation_force(), "/brake/actuation/kind"),
        (STOPPING, stopping(), "/machine/kind"),
    ] {
        let body = with(&body, member, "other");
        assert_faults(path, &body, &[(&format!("#{member}"), "unknown_value")]).await;
    }
}

#[tokio::test]
async fn counts_are_whole_numbers() {
    for (value, code) in [
        (json!(2.5), "wrong_type"),
        (json!("2"), "wrong_type"),
        (json!(true), "wrong_type"),
        (json!(-1), "out_of_range"),
        (json!({"value": 2}), "wrong_type"),
    ] {
        let body = with(&pad_capacity(), "/faces", value.clone());
        assert_faults(PAD_CAPACITY, &body, &[("#/faces", code)]).await;
        let body = with(&stopping(), "/fitted/0/count", value);
        assert_faults(STOPPING, &body, &[("#/fitted/0/count", code)]).await;
    }
    // However large: what is told is the limit.
    for value in [json!(1e15), json!(4_294_967_296_u64), json!(1e300)] {
        let body = with(&pad_capacity(), "/faces", value);
        assert_faults(PAD_CAPACITY, &body, &[("#/faces", "out_of_range")]).await;
    }
}

#[tokio::test]
async fn a_text_longer_than_described_is_refused() {
    for (path, body, _) in bodies() {
        let long = with(&body, "/ref", "x".repeat(1001));
        assert_faults(path, &long, &[("#/ref", "out_of_range")]).await;
        // Characters count, not bytes.
        answer(path, &with(&body, "/ref", "\u{e4}".repeat(1000))).await;
    }
    let long = with(&stopping(), "/fitted/0/control", "x".repeat(101));
    assert_faults(STOPPING, &long, &[("#/fitted/0/control", "out_of_range")]).await;
}

#[tokio::test]
async fn a_member_given_twice_is_a_400_with_its_place() {
    for (path, body, _) in bodies() {
        let text = body.to_string();
        let twice = text.replacen(r#""unit":"#, r#""unit":"mm","unit":"#, 1);
        let problem = problem(path, &twice, 400).await;
        assert!(problem.to_string().contains("/unit"), "{problem}");
        let twice = format!("{},{}", &text[..text.len() - 1], r#""ref":"a","ref":"b"}"#);
        let problem = super::common::problem(path, &twice, 400).await;
        assert!(problem.to_string().contains("#/ref"), "{problem}");
    }
}

#[tokio::test]
async fn broken_json_is_a_400_with_line_and_column() {
    for (path, _, _) in bodies() {
        for text in ["", "{", "{\n  \"pad\": {,}\n}", "nonsense", "{\"pad\": NaN}", "{\"a\": 1} x"]
        {
            let problem = problem(path, text, 400).await;
            assert!(problem["line"].is_u64() && problem["column"].is_u64(), "{problem}");
        }
        for text in ["[]", "3", "\"text\"", "null", "true"] {
            assert_eq!(problem(path, text, 422).await["errors"][0]["pointer"], "#");
        }
    }
}

#[tokio::test]
async fn a_number_beyond_doubles_and_a_deep_nest_are_refused() {
    for (path, body, member) in bodies() {
        let text = with(&body, member, q(123_456.0, "mm")).to_string().replace("123456.0", "1e999");
        let problem = problem(path, &text, 422).await;
        assert_eq!(problem["errors"][0]["code"], "out_of_range", "{problem}");
        let nest = format!("{{\"pad\":{}1{}}}", "[".repeat(100_000), "]".repeat(100_000));
        super::common::problem(path, &nest, 400).await;
    }
}

#[tokio::test]
async fn many_faults_are_counted_and_the_first_hundred_listed() {
    let points: Vec<Value> = (0..150).map(|_| json!(["x", 1])).collect();
    let body =
        with(&pad_capacity(), "/pad", json!({"shape": "outline", "unit": "mm", "points": points}));
    let problem = problem(PAD_CAPACITY, &body.to_string(), 422).await;
    assert_eq!(problem["error_count"], 150);
    assert_eq!(problem["errors"].as_array().unwrap().len(), 100);
}

#[tokio::test]
async fn faults_of_shape_all_over_a_request_come_in_one_answer() {
    let mut body = stopping();
    body["machine"]["mass"] = json!(1500);
    body["machine"]["rolling_radius"] = q(300.0, "kg");
    body["machine"]["adhesion"] = json!("0.8");
    body["fitted"] = json!([{"brake": with(&brake(), "/pad/shape", "square"), "axle": "all"}, {"axle": null}, 3]);
    body["initial_sped"] = q(20.0, "m/s");
    body["grade"] = json!(null);
    body["trace"] = json!({});
    let expected = [
        ("#/machine/mass", "wrong_type"),
        ("#/machine/rolling_radius/unit", "unknown_unit"),
        ("#/machine/adhesion", "wrong_type"),
        ("#/fitted/0/brake/pad/shape", "unknown_value"),
        ("#/fitted/1/axle", "null_not_allowed"),
        ("#/fitted/2", "wrong_type"),
        ("#/initial_sped", "unknown_member"),
        ("#/grade", "null_not_allowed"),
        ("#/trace/points", "missing_member"),
    ];
    assert_faults(STOPPING, &body, &expected).await;
}

#[tokio::test]
async fn a_result_beyond_doubles_is_out_of_range_and_no_500() {
    // 1e12 N.m/1e-30 kg.m2 leave every double.
    let mut body = with(&shaft(), "/machine/inertia", q(1e-30, "kg.m2"));
    body["fitted"][0]["torque"] = q(1e12, "N.m");
    body["initial_rotational_speed"] = q(1e-29, "rad/s");
    for path in [STOPPING, STOP_ENERGY] {
        let request = super::common::bytes_or_problem(path, &body.to_string()).await;
        assert!([200, 422].contains(&request.0), "{}", request.1);
    }
}
