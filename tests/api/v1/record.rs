//! The record, the units accepted and the cautions, alike on every calculation.

use serde_json::{Value, json};
use sha2::{Digest as _, Sha256};

use super::common::{
    ACTUATION_FORCE, ENDPOINTS, PAD_CAPACITY, SPEC_CHECK, STOP_ENERGY, STOPPING, actuation_force,
    answer, assert_conforms, assert_is, bytes, case, of, pad_capacity, q, stopping, with,
};
use super::spec_check_requests::one_stop;

fn bodies() -> [(&'static str, Value); 5] {
    [
        (PAD_CAPACITY, pad_capacity()),
        (ACTUATION_FORCE, actuation_force()),
        (STOPPING, stopping()),
        (STOP_ENERGY, stopping()),
        (SPEC_CHECK, one_stop()),
    ]
}

fn digest_of(answer: &Value) -> String {
    answer["record"]["input_digest"].as_str().unwrap().to_owned()
}

#[tokio::test]
async fn the_digest_is_that_of_the_canonical_form_written_by_hand() {
    // RFC 8785: members sorted by their UTF-16 code units, numbers as ECMAScript writes them, no blanks; without
    // `ref`. 95.50 becomes 95.5, 2e1 becomes 20, 0.000001 stays, 1E-7 becomes 1e-7.
    let sent = r#"{ "ref": "mine", "pad": {"shape": "round", "radius": {"value": 2e1, "unit": "mm"},
        "center_radius": {"unit": "mm", "value": 95.50}}, "lining": {"friction": {"nominal": 0.40}},
        "clamp_force": {"value": 1E-7, "unit": "kN"}, "faces": 2 }"#;
    let canonical = concat!(
        r#"{"clamp_force":{"unit":"kN","value":1e-7},"faces":2,"lining":{"friction":{"nominal":0.4}},"#,
        r#""pad":{"center_radius":{"unit":"mm","value":95.5},"radius":{"unit":"mm","value":20},"shape":"round"}}"#
    );
    let answer: Value = serde_json::from_slice(&bytes(PAD_CAPACITY, sent).await).unwrap();
    assert_conforms(PAD_CAPACITY, &answer);
    let expected: Vec<u8> = Sha256::digest(canonical.as_bytes()).to_vec();
    let digest = digest_of(&answer);
    let hex = digest.strip_prefix("sha256:").unwrap();
    assert_eq!(hex, hex.to_lowercase());
    let pairs =
        (0..hex.len()).step_by(2).map(|at| u8::from_str_radix(&hex[at..at + 2], 16).unwrap());
    assert_eq!(pairs.collect::<Vec<u8>>(), expected);
    assert_eq!(answer["record"]["ref"], "mine");
}

#[tokio::test]
async fn the_reference_is_echoed_and_left_out_of_the_digest() {
    for (path, body) in bodies() {
        let plain = answer(path, &body).await;
        assert!(plain["record"].get("ref").is_none());
        let named = answer(path, &with(&body, "/ref", "order 17 – left")).await;
        assert_eq!(named["record"]["ref"], "order 17 – left");
        assert_eq!(digest_of(&plain), digest_of(&named));
        assert_eq!(plain["results"], named["results"]);
        assert_eq!(plain["record"]["service_version"], env!("CARGO_PKG_VERSION"));
    }
}

#[tokio::test]
async fn the_same_request_gives_the_same_bytes() {
    for (path, body) in bodies() {
        let text = body.to_string();
        let first = bytes(path, &text).await;
        for _ in 0..3 {
            assert_eq!(first, bytes(path, &text).await);
        }
    }
}

/// The same document with the members of every object in reverse order.
fn reversed(value: &Value) -> Value {
    match value {
        Value::Object(members) => Value::Object(
            members.iter().rev().map(|(name, part)| (name.clone(), reversed(part))).collect(),
        ),
        Value::Array(items) => items.iter().map(reversed).collect(),
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => value.clone(),
    }
}

#[tokio::test]
async fn order_of_members_and_spelling_of_numbers_do_not_change_the_digest() {
    for (path, body) in bodies() {
        let usual = answer(path, &body).await;
        assert_eq!(usual, answer(path, &reversed(&body)).await, "{path}");
        let spelled: Value =
            serde_json::from_slice(&bytes(path, &body.to_string().replace(".0,", ",")).await)
                .unwrap();
        assert_ne!(body.to_string(), body.to_string().replace(".0,", ","));
        assert_eq!(usual, spelled, "{path}");
        let other = answer(path, &with(&body, "/report_units", "si")).await;
        assert_ne!(digest_of(&usual), digest_of(&other), "a member more is another input");
    }
}

#[tokio::test]
async fn a_whole_number_may_be_written_with_a_point() {
    let text = with(&pad_capacity(), "/faces", 4).to_string();
    let whole = bytes(PAD_CAPACITY, &text).await;
    let pointed = bytes(PAD_CAPACITY, &text.replace(r#""faces":4"#, r#""faces":4.0"#)).await;
    assert_eq!(whole, pointed);
}

#[tokio::test]
async fn every_answer_carries_the_cautions_that_always_travel() {
    for (path, body) in bodies() {
        let answer = answer(path, &body).await;
        let cautions = answer["cautions"].as_array().unwrap();
        let codes: Vec<&str> =
            cautions.iter().map(|caution| caution["code"].as_str().unwrap()).collect();
        let always = [
            "confirm_by_test",
            "local_codes_decide",
            "competent_review",
            "clean_dry_bedded",
            "lining_dust",
        ];
        for code in always {
            assert!(codes.contains(&code), "{path}: {codes:?}");
        }
        assert!(cautions.iter().all(|caution| caution["text"].as_str().unwrap().len() > 40));
        assert_eq!(codes.contains(&"hot_surfaces"), [STOP_ENERGY, SPEC_CHECK].contains(&path));
    }
}

#[tokio::test]
async fn every_answer_names_its_methods() {
    for (path, body) in bodies() {
        let answer = answer(path, &body).await;
        let methods = answer["record"]["methods"].as_array().unwrap();
        assert!(!methods.is_empty(), "{path}");
        assert!(methods.iter().all(|id| id.as_str().unwrap().contains('.')), "{methods:?}");
    }
    let stop = answer(STOPPING, &stopping()).await;
    assert_eq!(
        stop["record"]["methods"],
        json!(["machine.vehicle", "motion.phases", "motion.mean_fully_developed_deceleration"])
    );
}

#[tokio::test]
async fn a_unit_goes_by_its_symbol_its_ucum_code_and_its_recommendation_20_code() {
    let spelled = |radius: &str, force: &str, angle: &str| {
        let mut body = with(&pad_capacity(), "/clamp_force", q(2000.0, force));
        body["pad"] = json!({
            "shape": "annular_sector", "inner_radius": q(4.0, radius), "outer_radius": q(6.0, radius), "angle": q(60.0, angle),
        });
        body
    };
    let plain = answer(PAD_CAPACITY, &spelled("in", "lbf", "deg")).await;
    assert_is(&plain["results"]["effective_radius"], 127.0, "mm");
    // UCUM: [in_i], [lbf_av], deg. Recommendation 20: INH, C78, DD.
    for (radius, force, angle) in [("[in_i]", "[lbf_av]", "deg"), ("INH", "C78", "DD")] {
        let coded = answer(PAD_CAPACITY, &spelled(radius, force, angle)).await;
        assert_eq!(plain["results"], coded["results"]);
    }
    let mut vehicle = stopping();
    vehicle["initial_speed"] = q(72.0, "km/h");
    let plain = answer(STOPPING, &vehicle).await;
    vehicle["initial_speed"] = q(72.0, "KMH");
    vehicle["machine"]["mass"] = q(1.5, "TNE");
    vehicle["machine"]["rolling_radius"] = q(30.0, "CMT");
    vehicle["fitted"][0]["torque"] = q(3.0, "B48");
    let coded = answer(STOPPING, &vehicle).await;
    let [plain, coded] =
        [&plain, &coded].map(|answer| of(&case(answer, "nominal")["total_distance"], "m"));
    assert!((plain - coded).abs() <= 1e-14 * plain, "{plain} and {coded}");
}

#[tokio::test]
async fn answers_use_the_first_unit_of_each_system() {
    let us = answer(PAD_CAPACITY, &with(&pad_capacity(), "/report_units", "us")).await;
    let results = &us["results"];
    for (member, unit) in [
        ("pad_area", "in2"),
        ("effective_radius", "in"),
        ("clamp_force", "lbf"),
        ("peak_pressure", "psi"),
    ] {
        assert_eq!(results[member]["unit"], unit);
    }
    assert_eq!(results["friction_cases"][0]["torque"]["unit"], "lbf.in");
    let us = answer(STOPPING, &with(&stopping(), "/report_units", "us")).await;
    let stop = case(&us, "nominal");
    for (member, unit) in
        [("total_time", "s"), ("total_distance", "ft"), ("mean_deceleration", "ft/s2")]
    {
        assert_eq!(stop[member]["unit"], unit);
    }
    let us = answer(STOP_ENERGY, &with(&stopping(), "/report_units", "us")).await;
    let energy = case(&us, "nominal");
    assert_eq!(energy["brake_energy"]["unit"], "Btu");
    assert_eq!(energy["fitted"][0]["mean_power"]["unit"], "hp");
}

#[test]
fn these_calculations_are_covered() {
    assert_eq!(bodies().map(|(path, _)| path), ENDPOINTS.map(|(path, _)| path));
}
