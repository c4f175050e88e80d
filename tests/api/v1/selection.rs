//! `POST /v1/selection`: the order, what is said about each candidate, and whose fault is whose.

use brakewright::api::record::input_digest;
use brakewright::calc::case::selection::{RankBy, Standing, ranked};
use brakewright::calc::case::spec_check::Verdict;
use proptest::prelude::{Just, Strategy, prop_assert, prop_oneof, proptest};
use proptest::{collection, option};
use serde_json::{Value, json};

use super::common::{SPEC_CHECK, assert_problem, codes, q, validator_of, with, without};
use super::spec_checks::{incomplete, pressed_by, spec_check};
use crate::support::client::TestApp;

const SELECTION: &str = "/v1/selection";

fn candidate(reference: &str, request: &Value) -> Value {
    json!({"ref": reference, "fitted": request["fitted"]})
}

fn application() -> Value {
    let request = spec_check();
    json!({"machine": request["machine"], "duties": request["duties"]})
}

fn selection(candidates: &[Value]) -> Value {
    json!({"application": application(), "candidates": candidates})
}

/// Passing, failing and incomplete ones, two of them alike.
fn several() -> Value {
    selection(&[
        candidate("strong", &pressed_by(12.0)),
        candidate("weak", &pressed_by(3.0)),
        candidate("fair", &pressed_by(8.0)),
        candidate("unknown", &incomplete()),
        candidate("fair again", &pressed_by(8.0)),
        candidate("almost", &pressed_by(7.4)),
    ])
}

async fn answer(body: &Value) -> Value {
    let answer = TestApp::new().post(SELECTION, &body.to_string(), 200).await;
    let validator = validator_of("SelectionAnswer");
    let faults: Vec<String> =
        validator.iter_errors(&answer).map(|error| error.to_string()).collect();
    assert!(faults.is_empty(), "{faults:?}");
    answer
}

fn references(answer: &Value) -> Vec<&str> {
    let ranked = answer["results"]["ranked"].as_array().unwrap();
    for (candidate, rank) in ranked.iter().zip(1..) {
        assert_eq!(candidate["rank"], rank);
    }
    ranked.iter().map(|candidate| candidate["ref"].as_str().unwrap()).collect()
}

#[tokio::test]
async fn candidates_are_ranked_by_what_they_have_to_spare() {
    let least = answer(&several()).await;
    let rest = ["unknown", "almost", "weak"];
    assert_eq!(references(&least), [&["fair", "fair again", "strong"][..], &rest].concat());
    let named = answer(&with(&several(), "/rank_by", "least_oversized")).await;
    assert_eq!(least["results"], named["results"]);
    let most = answer(&with(&several(), "/rank_by", "most_margin")).await;
    assert_eq!(references(&most), [&["strong", "fair", "fair again"][..], &rest].concat());
    let counts = json!({"candidates": 6, "pass": 3, "incomplete": 1, "fail": 2, "rejected": 0});
    assert_eq!(least["results"]["counts"], counts);
}

#[tokio::test]
async fn each_candidate_is_judged_as_the_single_call_judges_it() {
    let body = several();
    let answer = answer(&body).await;
    for found in answer["results"]["ranked"].as_array().unwrap() {
        let index = usize::try_from(found["candidate_index"].as_u64().unwrap()).unwrap();
        let candidate = &body["candidates"][index];
        assert_eq!(found["ref"], candidate["ref"]);
        let alone = with(&spec_check(), "/fitted", candidate["fitted"].clone());
        let alone = TestApp::new().post(SPEC_CHECK, &alone.to_string(), 200).await;
        let results = &alone["results"];
        assert_eq!(found["verdict"], results["verdict"]);
        assert_eq!(found["governing"], results["governing"]);
        let utilization = results["governing"]["utilization"].as_f64().unwrap();
        assert_eq!(found["margin"].as_f64().unwrap(), 1.0 - utilization);
        for (listed, status) in [("not_met", "not_met"), ("not_assessed", "not_assessed")] {
            let checks = results["checks"].as_array().unwrap();
            let checks = checks.iter().filter(|check| check["status"] == status);
            let expected: Vec<&Value> = checks.map(|check| &check["code"]).collect();
            let found = found[listed].as_array().into_iter().flatten();
            assert_eq!(found.map(|check| &check["code"]).collect::<Vec<_>>(), expected);
        }
    }
}

#[tokio::test]
async fn a_reason_is_given_for_every_candidate_that_does_not_pass() {
    let answer = answer(&several()).await;
    let of = |reference: &str| {
        let ranked = answer["results"]["ranked"].as_array().unwrap();
        ranked.iter().find(|candidate| candidate["ref"] == reference).unwrap()
    };
    // 3 kN: 37.5 m at 8 kN become 100 m.
    let weak = json!([{"code": "stopping_distance", "duty_index": 0, "utilization": 2.5}]);
    assert_eq!(of("weak")["not_met"], weak);
    let missing = json!([{"code": "pad_peak_pressure", "duty_index": 0, "fitted_index": 0,
        "missing": ["#/fitted/0/brake/lining/max_pressure"]}]);
    assert_eq!(of("unknown")["not_assessed"], missing);
    assert!(of("fair").get("not_met").is_none() && of("fair").get("not_assessed").is_none());
}

#[tokio::test]
async fn a_wrong_candidate_is_rejected_alone_with_its_place_in_the_request() {
    let fair = spec_check();
    let place = "/fitted/0/brake/pad/outer_radius";
    let mut body = selection(&[
        candidate("fair", &fair),
        candidate("unit", &with(&fair, &format!("{place}/unit"), "kg")),
        candidate("size", &with(&fair, place, q(1.0, "mm"))),
        candidate(
            "torque",
            &with(&fair, "/fitted/0", json!({"torque": q(1.0, "N.m"), "axle": "all"})),
        ),
        candidate("none", &with(&fair, "/fitted", json!([]))),
        candidate("axle", &without(&fair, "/fitted/0/axle")),
        json!({"ref": "null", "fitted": null}),
        json!(3),
        json!({"ref": "unknown", "fitted": fair["fitted"], "prize": 3}),
        candidate("fair, too", &fair),
    ]);
    // A word of the decoder's suspicion: it must not make one candidate the judge of another.
    body["ref"] = json!("null");
    let answer = answer(&body).await;
    assert_eq!(references(&answer), ["fair", "fair, too"]);
    let rejected = answer["results"]["rejected"].as_array().unwrap();
    let found: Vec<(u64, &str, &str)> = rejected
        .iter()
        .map(|candidate| {
            let problem = &candidate["problem"];
            assert_eq!(problem["status"], 422, "{problem}");
            assert_eq!(problem["error_count"], 1, "{problem}");
            let error = &problem["errors"][0];
            let text = |value: &'static str| error[value].as_str().unwrap();
            (candidate["candidate_index"].as_u64().unwrap(), text("pointer"), text("code"))
        })
        .collect();
    let expected = [
        (1, "#/candidates/1/fitted/0/brake/pad/outer_radius/unit", "unknown_unit"),
        (2, "#/candidates/2/fitted/0/brake/pad/outer_radius", "not_above_inner_radius"),
        (3, "#/candidates/3/fitted/0/torque", "not_applicable"),
        (4, "#/candidates/4/fitted", "wrong_count"),
        (5, "#/candidates/5/fitted/0/axle", "missing"),
        (6, "#/candidates/6/fitted", "null_not_allowed"),
        (7, "#/candidates/7", "wrong_type"),
        (8, "#/candidates/8/prize", "unknown_member"),
    ];
    assert_eq!(found, expected);
    assert_eq!(rejected[5]["ref"], "null");
    assert!(rejected[6].get("ref").is_none());
}

#[tokio::test]
async fn a_duty_that_a_candidate_has_no_brake_for_rejects_the_candidate() {
    let two = {
        let mut request = spec_check();
        let entry = with(&request["fitted"][0], "/count", 2);
        request["fitted"] = json!([with(&entry, "/axle", "front"), with(&entry, "/axle", "rear")]);
        request
    };
    let uses = json!([{"fitted_index": 1}]);
    let body = with(
        &selection(&[candidate("one", &spec_check()), candidate("two", &two)]),
        "/application/duties/0/uses",
        uses,
    );
    let answer = answer(&body).await;
    assert_eq!(references(&answer), ["two"]);
    let problem = &answer["results"]["rejected"][0]["problem"];
    let pointer = problem["errors"][0]["pointer"].as_str().unwrap();
    assert!(pointer.starts_with("#/application/duties/0/uses"), "{problem}");
}

async fn faults(body: &Value) -> Vec<(String, String)> {
    let problem = TestApp::new().post(SELECTION, &body.to_string(), 422).await;
    assert_problem(&problem);
    let text = |value: &Value| value.as_str().unwrap().to_owned();
    let errors = problem["errors"].as_array().unwrap().iter();
    errors.map(|error| (text(&error["pointer"]), text(&error["code"]))).collect()
}

#[tokio::test]
async fn a_wrong_application_is_refused_as_a_whole() {
    let body = several();
    for (member, value, pointer, code) in [
        ("/application/machine/mass", q(-1.0, "kg"), "#/application/machine/mass", "not_positive"),
        (
            "/application/duties/0/initial_speed",
            q(0.0, "m/s"),
            "#/application/duties/0/initial_speed",
            "",
        ),
        ("/application/duties/0/id", json!("x"), "#/application/duties/0/id", "unknown_member"),
        (
            "/application/near_limit_from",
            json!(2.0),
            "#/application/near_limit_from",
            "out_of_range",
        ),
        ("/application/fitted", json!([]), "#/application/fitted", "unknown_member"),
        ("/application/duties", json!([]), "#/application/duties", "wrong_count"),
        ("/candidates", json!([]), "#/candidates", "wrong_count"),
        ("/candidates", json!(3), "#/candidates", "wrong_type"),
        ("/rank_by", json!("price"), "#/rank_by", "unknown_value"),
        ("/rank_by", Value::Null, "#/rank_by", "null_not_allowed"),
    ] {
        let found = faults(&with(&body, member, value)).await;
        assert_eq!(found.len(), 1, "{member}: {found:?}");
        assert_eq!(found[0].0, pointer);
        assert!(code.is_empty() || found[0].1 == code, "{found:?}");
    }
    let found = faults(&without(&body, "/application/duties")).await;
    assert_eq!(found, [("#/application/duties".to_owned(), "missing_member".to_owned())]);
    // Two faults in two places are found together.
    let both = with(&body, "/application/machine/mass", q(-1.0, "kg"));
    let both = with(&both, "/application/waive", json!([{"check": "pad_life", "reason": " "}]));
    assert_eq!(faults(&both).await.len(), 2);
}

#[tokio::test]
async fn the_digest_is_that_of_the_whole_request_without_its_reference() {
    let body = with(&with(&several(), "/rank_by", "most_margin"), "/report_units", "us");
    for body in [several(), with(&body, "/ref", "x"), selection(&[json!(3)])] {
        let text = body.to_string();
        let answer = answer(&body).await;
        assert_eq!(answer["record"]["input_digest"], input_digest(text.as_bytes()));
        assert_eq!(answer["record"].get("ref"), body.get("ref"));
        let pretty = format!("{body:#}");
        let again = TestApp::new().post(SELECTION, &pretty, 200).await;
        assert_eq!(answer, again);
    }
}

#[tokio::test]
async fn defaults_waivers_and_warnings_are_on_record() {
    let waive = json!([
        {"check": "pad_peak_pressure", "reason": "the maker vouches for it"},
        {"check": "pad_life", "reason": "not asked for"},
    ]);
    let body = with(&several(), "/application/waive", waive);
    let answer = answer(&body).await;
    let record = &answer["record"];
    assert_eq!(record["waivers"][0]["effect"], "waived");
    assert_eq!(record["waivers"][1]["effect"], "without_effect");
    assert!(codes(&answer).contains(&"without_effect"));
    for warning in answer["warnings"].as_array().unwrap() {
        assert!(warning["pointer"].as_str().unwrap().starts_with("#/application/"), "{warning}");
    }
    assert_eq!(answer["results"]["counts"]["incomplete"], 0);
    let defaults = record["defaults"].as_array().unwrap();
    assert!(defaults.contains(&json!({"pointer": "#/rank_by", "value": "least_oversized"})));
    let of_candidates = record["candidate_defaults"].as_array().unwrap();
    let faces = json!({"pointer": "#/fitted/0/brake/faces", "value": 2, "candidates": 6});
    assert!(of_candidates.contains(&faces), "{of_candidates:?}");
    let alone = with(&spec_check(), "/waive", body["application"]["waive"].clone());
    let alone = TestApp::new().post(SPEC_CHECK, &alone.to_string(), 200).await;
    assert_eq!(answer["cautions"], alone["cautions"]);
    let pointers = |defaults: &Value, prefix: &str| {
        let mut found: Vec<String> = (defaults.as_array().unwrap().iter())
            .map(|default| default["pointer"].as_str().unwrap().replacen(prefix, "#/", 1))
            .filter(|pointer| pointer != "#/rank_by")
            .collect();
        found.sort_unstable();
        found
    };
    let mut both = pointers(&record["defaults"], "#/application/");
    both.extend(pointers(&record["candidate_defaults"], "#/"));
    both.sort_unstable();
    assert_eq!(both, pointers(&alone["record"]["defaults"], "#/"));
}

#[tokio::test]
async fn a_selection_may_be_large_and_has_a_bound() {
    let app = TestApp::new();
    // No list of 10000 is cut, and 10001 are too many; numbers are rejected quickly.
    let list = |count: usize| selection(&vec![json!(0); count]).to_string();
    let most = app.post(SELECTION, &list(10_000), 200).await;
    assert_eq!(most["results"]["counts"]["rejected"], 10_000);
    assert_eq!(most["results"]["rejected"][9_999]["candidate_index"], 9_999);
    let problem = app.post(SELECTION, &list(10_001), 422).await;
    assert_eq!(problem["errors"][0]["pointer"], "#/candidates");
    let blank = |length: usize| " ".repeat(length - several().to_string().len());
    let padded = |length: usize| format!("{}{}", several(), blank(length));
    app.post(SELECTION, &padded(16 * 1024 * 1024), 200).await;
    app.post(SELECTION, &padded(16 * 1024 * 1024 + 1), 413).await;
    app.post("/v1/spec-check", &padded(2 * 1024 * 1024), 413).await;
}

/// The order of the contract, written again: a standing that must stand before another.
fn is_before(one: &Standing, other: &Standing, by: RankBy) -> bool {
    let group = |standing: &Standing| match standing.verdict {
        Verdict::Pass => 1,
        Verdict::Incomplete => 2,
        Verdict::Fail => 3,
    };
    if group(one) != group(other) {
        return group(one) < group(other);
    }
    match (one.margin, other.margin) {
        (Some(one_margin), Some(other_margin))
            if one.verdict == Verdict::Pass && by == RankBy::LeastOversized =>
        {
            one_margin < other_margin
        }
        (Some(one), Some(other)) => one > other,
        (one, other) => one.is_some() && other.is_none(),
    }
}

/// Puts each one behind all that must not stand after it.
fn naively(standings: &[Standing], by: RankBy) -> Vec<usize> {
    let mut order: Vec<usize> = Vec::new();
    for (index, standing) in standings.iter().enumerate() {
        let behind = order.iter().position(|known| is_before(standing, &standings[*known], by));
        order.insert(behind.unwrap_or(order.len()), index);
    }
    order
}

fn standing() -> impl Strategy<Value = Standing> {
    let verdict = prop_oneof![Just(Verdict::Pass), Just(Verdict::Incomplete), Just(Verdict::Fail)];
    // Few values, so that ties are common.
    let margin = option::of((-3_i8..4).prop_map(|eighths| f64::from(eighths) / 8.0));
    (verdict, margin).prop_map(|(verdict, margin)| Standing { verdict, margin })
}

proptest! {
    #[test]
    fn the_order_is_that_of_a_naive_sort(standings in collection::vec(standing(), 0..40)) {
        for by in [RankBy::LeastOversized, RankBy::MostMargin] {
            let found = ranked(&standings, by);
            prop_assert!(found == naively(&standings, by), "{found:?}");
        }
    }
}
