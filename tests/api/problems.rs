//! Faults of a body: all in one answer, each with its place.

use std::collections::BTreeMap;

use axum::body::Body;
use axum::http::Request;
use axum::routing::{Router, post};
use brakewright::api::extract::{Answer, Json};
use brakewright::api::health::HealthStatus;
use brakewright::api::layers::wrap;
use brakewright::api::problem::{ErrorItem, Problem, ProblemKind};
use brakewright::api::shape;
use serde::Deserialize;
use serde_json::{Value, json};
use utoipa::ToSchema;

use crate::support::client::{TestApp, settings};

/// A quantity as the interface has them.
#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its shape matters here")]
struct TestLength {
    value: f64,
    unit: TestLengthUnit,
}

#[derive(Debug, Deserialize, ToSchema)]
enum TestLengthUnit {
    #[serde(rename = "mm", alias = "MMT")]
    Millimeter,
    #[serde(rename = "in", alias = "INH", alias = "[in_i]")]
    Inch,
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
enum SectorTag {
    Sector,
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
enum OutlineTag {
    Outline,
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its shape matters here")]
struct Sector {
    shape: SectorTag,
    inner_radius: TestLength,
    outer_radius: TestLength,
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its shape matters here")]
struct Outline {
    shape: OutlineTag,
    #[schema(min_items = 3, max_items = 1000)]
    points: Vec<f64>,
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "shape", mapping(
    ("sector" = "#/components/schemas/Sector"),
    ("outline" = "#/components/schemas/Outline"),
)))]
#[expect(dead_code, reason = "only its shape matters here")]
enum Pad {
    Sector(Sector),
    Outline(Outline),
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its shape matters here")]
struct Brake {
    pad: Pad,
    #[serde(default)]
    #[schema(nullable = false, minimum = 1, maximum = 1000)]
    faces: Option<u32>,
}

/// A request with all that can go wrong.
#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its shape matters here")]
struct TestRequest {
    fitted: Vec<Brake>,
    #[serde(default)]
    #[schema(nullable = false)]
    direction: Option<Direction>,
    #[serde(default, rename = "ref")]
    #[schema(nullable = false)]
    reference: Option<String>,
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
enum Direction {
    Lowering,
    Raising,
}

fn app() -> TestApp {
    async fn take(_: Json<TestRequest>) -> Result<Answer<Value>, Problem> {
        Ok(Answer(json!({})))
    }
    TestApp::of(wrap(Router::new().route("/take", post(take)), &settings()))
}

/// The faults of a body, code by pointer.
async fn faults(body: &Value) -> BTreeMap<String, String> {
    let problem = app().post("/take", &body.to_string(), 422).await;
    let errors = problem["errors"].as_array().unwrap();
    assert_eq!(problem["error_count"], errors.len(), "{problem}");
    let text = |value: &Value| value.as_str().unwrap().to_owned();
    errors.iter().map(|error| (text(&error["pointer"]), text(&error["code"]))).collect()
}

/// The only fault of a body.
async fn fault(body: &Value) -> Value {
    let problem = app().post("/take", &body.to_string(), 422).await;
    assert_eq!(problem["error_count"], 1, "{problem}");
    problem["errors"][0].clone()
}

fn sector() -> Value {
    let mm = |value: f64| json!({"value": value, "unit": "mm"});
    json!({"shape": "sector", "inner_radius": mm(80.0), "outer_radius": mm(120.0)})
}

fn with_pad(pad: &Value) -> Value {
    json!({"fitted": [{"pad": pad}]})
}

fn as_map(pairs: &[(&str, &str)]) -> BTreeMap<String, String> {
    pairs.iter().map(|(pointer, code)| ((*pointer).to_owned(), (*code).to_owned())).collect()
}

#[tokio::test]
async fn a_right_body_is_taken() {
    let body =
        json!({"fitted": [{"pad": sector(), "faces": 2}], "direction": "raising", "ref": "a"});
    app().post("/take", &body.to_string(), 200).await;
}

#[tokio::test]
async fn all_faults_come_in_one_answer() {
    let body = json!({
        "fitted": [
            {"pad": {"shape": "sector", "inner_radius": {"value": "80", "unit": "mm"}, "outer_radius": {"value": 120, "unit": "kg"}}, "faces": 0},
            {"pad": {"shape": "outline", "points": [1, 2]}, "facess": 2},
            {"pad": {"shape": "sector", "inner_radius": 80, "outer_radius": {"value": null, "unit": "mm"}}},
            {"pad": {"shape": "round", "radius": 3}},
            {"pad": {"inner_radius": 3}},
            {},
            {"pad": 7},
        ],
        "direction": "up",
        "ref": 4,
        "a/b~c d": 1,
    });
    let expected = as_map(&[
        ("#/fitted/0/pad/inner_radius/value", "wrong_type"),
        ("#/fitted/0/pad/outer_radius/unit", "unknown_unit"),
        ("#/fitted/0/faces", "out_of_range"),
        ("#/fitted/1/pad/points", "wrong_count"),
        ("#/fitted/1/facess", "unknown_member"),
        ("#/fitted/2/pad/inner_radius", "wrong_type"),
        ("#/fitted/2/pad/outer_radius/value", "null_not_allowed"),
        ("#/fitted/3/pad/shape", "unknown_value"),
        ("#/fitted/4/pad/shape", "missing_member"),
        ("#/fitted/5/pad", "missing_member"),
        ("#/fitted/6/pad", "wrong_type"),
        ("#/direction", "unknown_value"),
        ("#/ref", "wrong_type"),
        ("#/a~1b~0c%20d", "unknown_member"),
    ]);
    assert_eq!(faults(&body).await, expected);
}

#[tokio::test]
async fn a_mistyped_member_is_told_the_right_name() {
    let mut pad = sector();
    pad["iner_radius"] = pad["inner_radius"].clone();
    let error = fault(&with_pad(&pad)).await;
    assert_eq!(error["pointer"], "#/fitted/0/pad/iner_radius");
    assert!(error["detail"].as_str().unwrap().contains("did you mean `inner_radius`?"), "{error}");
}

#[tokio::test]
async fn an_unknown_tag_is_one_fault_that_lists_the_known_ones() {
    let error = fault(&with_pad(&json!({"shape": "round", "radius": 3}))).await;
    assert_eq!(error["code"], "unknown_value");
    assert!(error["detail"].as_str().unwrap().ends_with("one of: outline, sector"), "{error}");
}

#[tokio::test]
async fn a_bare_number_in_place_of_a_quantity_is_told_to_take_a_unit() {
    let mut pad = sector();
    pad["inner_radius"] = json!(80);
    let error = fault(&with_pad(&pad)).await;
    assert!(error["detail"].as_str().unwrap().contains("needs its unit"), "{error}");
}

#[tokio::test]
async fn null_and_a_wrong_type_of_a_choice_are_one_fault_each() {
    for (value, code) in [(json!(null), "null_not_allowed"), (json!(5), "wrong_type")] {
        let error = fault(&json!({"fitted": [], "direction": value})).await;
        assert_eq!(error["code"], code);
    }
}

#[tokio::test]
async fn null_is_no_absence_and_the_word_in_a_text_is_no_null() {
    let mut body = with_pad(&sector());
    body["ref"] = json!("null");
    app().post("/take", &body.to_string(), 200).await;
    body["fitted"][0]["faces"] = json!(null);
    let error = fault(&body).await;
    assert_eq!(error["code"], "null_not_allowed");
    assert_eq!(error["pointer"], "#/fitted/0/faces");
}

#[tokio::test]
async fn a_list_that_is_too_long_is_one_fault() {
    let points = vec![json!("x"); 1001];
    let error = fault(&with_pad(&json!({"shape": "outline", "points": points}))).await;
    assert_eq!(
        (&error["code"], &error["pointer"]),
        (&json!("wrong_count"), &json!("#/fitted/0/pad/points"))
    );
}

#[tokio::test]
async fn at_most_a_hundred_faults_are_listed_and_all_are_counted() {
    let body = json!({"fitted": vec![json!({}); 250]});
    let problem = app().post("/take", &body.to_string(), 422).await;
    assert_eq!(problem["error_count"], 250);
    assert_eq!(problem["errors"].as_array().unwrap().len(), 100);
    assert_eq!(problem["detail"], "250 faults were found; the first 100 are listed");
}

#[tokio::test]
async fn what_only_the_decoder_refuses_has_its_place_too() {
    // A whole number written as 2.0 is an integer to JSON Schema and none to the decoder.
    let body = r#"{"fitted": [{"pad": {"shape": "outline", "points": [1, 2, 3]}, "faces": 2.0}]}"#;
    let problem = app().post("/take", body, 422).await;
    assert_eq!(problem["errors"][0]["pointer"], "#/fitted/0/faces", "{problem}");
    assert_eq!(problem["errors"][0]["code"], "invalid_value");
}

#[tokio::test]
async fn a_number_beyond_a_double_is_out_of_range() {
    let body = r#"{"fitted": [{"pad": {"shape": "outline", "points": [1, 2, 1e999]}}]}"#;
    let problem = app().post("/take", body, 422).await;
    assert_eq!(problem["errors"][0]["pointer"], "#/fitted/0/pad/points/2", "{problem}");
    assert_eq!(problem["errors"][0]["code"], "out_of_range");
}

#[tokio::test]
async fn broken_json_is_told_line_and_column() {
    for (body, line, column) in
        [("{\n  \"fitted\": [,]\n}", 2, 14), ("", 1, 0), ("{\"fitted\": []} x", 1, 16)]
    {
        let problem = app().post("/take", body, 400).await;
        assert_eq!(problem["type"], "/problems/malformed_json");
        assert_eq!(
            (&problem["line"], &problem["column"]),
            (&json!(line), &json!(column)),
            "{body}"
        );
    }
}

#[tokio::test]
async fn invalid_utf_8_is_not_json() {
    let request = Request::post("/take").header("content-type", "application/json");
    let body = Body::from(&b"{\"fitted\": [], \"ref\": \"\xff\"}"[..]);
    let problem = app().send(request.body(body).unwrap(), 400).await.json();
    assert_eq!(problem["type"], "/problems/malformed_json");
}

#[tokio::test]
async fn deep_nesting_is_refused() {
    let body = format!("{}{}", "[".repeat(100_000), "]".repeat(100_000));
    let problem = app().post("/take", &body, 400).await;
    assert!(problem["detail"].as_str().unwrap().contains("128 levels"), "{problem}");
}

#[tokio::test]
async fn a_member_given_twice_is_refused_wherever_it_is() {
    let cases = [
        (r#"{"fitted": [], "fitted": []}"#, "#/fitted"),
        (
            r#"{"fitted": [{"pad": {"shape": "outline", "points": [1, 2, 3], "sh\u0061pe": "outline"}}]}"#,
            "#/fitted/0/pad/shape",
        ),
        (r#"{"fitted": [1, {"x": [{}, {"a/b": 1, "c": 2, "a/b": 1}]}]}"#, "#/fitted/1/x/1/a~1b"),
    ];
    for (body, pointer) in cases {
        let problem = app().post("/take", body, 400).await;
        assert_eq!(problem["type"], "/problems/duplicate_member", "{body}");
        assert_eq!(problem["pointer"], pointer);
    }
}

/// Used with more units only: compiled schemas are kept by type.
#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its shape matters here")]
struct Lengths {
    one: TestLength,
    other: TestLength,
}

#[test]
fn more_units_are_accepted_and_the_published_ones_suggested() {
    let more = |plain: &[&str]| {
        assert_eq!(plain, ["mm", "in"]);
        vec!["MMT".to_owned(), "INH".to_owned(), "[in_i]".to_owned()]
    };
    let body = br#"{"one": {"value": 1, "unit": "INH"}, "other": {"value": 1, "unit": "inch"}}"#;
    let problem = shape::decode::<Lengths>(body, more).unwrap_err();
    let [only] = problem.errors() else { panic!("{problem:?}") };
    assert_eq!((only.pointer.as_str(), only.code), ("#/other/unit", "unknown_unit"));
    assert!(only.detail.ends_with("one of: mm, in"), "{}", only.detail);
}

#[test]
fn the_list_of_faults_is_capped_and_counted() {
    let item = ErrorItem { pointer: "#".to_owned(), code: "wrong_type", detail: "d".to_owned() };
    let problem = Problem::invalid(vec![item; 150], 150);
    assert_eq!(problem.errors().len(), 100);
    let json: Value = serde_json::from_slice(&problem.to_json()).unwrap();
    assert_eq!(json["error_count"], 150);
}

#[tokio::test]
async fn the_type_of_every_problem_leads_to_its_explanation() {
    let app = TestApp::new();
    for kind in ProblemKind::ALL {
        let page = app.get(kind.type_reference(), 200).await.json();
        assert_eq!(page["type"], kind.type_reference());
        assert_eq!(page["status"], kind.status().as_u16());
    }
    app.get("/problems/no_such_kind", 404).await;
}

#[test]
fn a_foreign_status_finds_its_kind() {
    let of = |status: u16| ProblemKind::of_status(status.try_into().unwrap());
    assert_eq!(of(400), ProblemKind::BadRequest);
    assert_eq!(of(404), ProblemKind::NotFound);
    assert_eq!(of(418), ProblemKind::BadRequest);
    assert_eq!(of(503), ProblemKind::Overloaded);
    assert_eq!(of(507), ProblemKind::Internal);
    assert_eq!(Problem::of_status(418.try_into().unwrap()).status(), 418);
    assert_eq!(serde_json::to_value(HealthStatus::Ok).unwrap(), "ok");
}
