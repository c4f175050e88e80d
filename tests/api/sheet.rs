//! The calculation sheet through the front door: when it is sent, and what is on it.

use std::collections::BTreeSet;
use std::sync::LazyLock;

use axum::body::Body;
use axum::http::Request;
use base64::Engine as _;
use base64::prelude::BASE64_STANDARD;
use scraper::{ElementRef, Html, Selector};
use serde_json::{Value, json};
use sha2::{Digest as _, Sha256};

use crate::support::client::{Answer, TestApp};

const PATH: &str = "/v1/spec-check";
const HTML: &str = "text/html";

/// An example of another endpoint lends its machine and its brakes. Invented data.
static TRACTOR: LazyLock<Value> = LazyLock::new(|| {
    let text = include_str!("../../examples/requests/stop-energy/tractor_all_day.json");
    serde_json::from_str::<Value>(text).unwrap()["request"].clone()
});

fn q(value: f64, unit: &str) -> Value {
    json!({"value": value, "unit": unit})
}

/// A tractor with a duty of each kind. Its pads do not last as long as asked.
pub(crate) fn failing() -> Value {
    let response = &TRACTOR["response"];
    json!({
        "ref": "Tractor 7",
        "machine": TRACTOR["machine"],
        "fitted": TRACTOR["fitted"],
        "ambient_temperature": q(25.0, "degC"),
        "duties": [
            {"kind": "stop", "name": "emergency", "initial_speed": q(25.0, "km/h"), "response": response,
                "require": {
                    "max_distance": q(30.0, "m"), "max_time": q(8.0, "s"),
                    "min_mean_deceleration": q(1.5, "m/s2"),
                    "min_mean_fully_developed_deceleration": q(1.5, "m/s2"),
                    "min_peak_deceleration": q(1.0, "m/s2"), "max_deceleration": q(5.0, "m/s2"),
                    "min_braking_ratio": 0.15, "no_wheel_lock": true, "front_locks_first": true,
                    "no_rear_wheel_lift": true,
                }},
            {"kind": "repeated_stops", "initial_speed": q(20.0, "km/h"), "interval": q(60.0, "s"),
                "stop_count": 20, "response": response, "require": {"min_pad_life_stops": 1e7}},
            {"kind": "descent", "speed": q(12.0, "km/h"), "grade": q(-10.0, "%"), "distance": q(150.0, "m")},
            {"kind": "hold", "grade": q(-12.0, "%"), "require": {"min_holding_factor": 1.5}},
            {"kind": "rule", "id": "cfr49_571_135_s7_5", "response": response, "max_speed": q(140.0, "km/h")},
        ],
    })
}

/// The same with one stop that the brakes can do, and nothing known of the rear disc.
fn incomplete() -> Value {
    let mut body = failing();
    body["duties"].as_array_mut().unwrap().truncate(1);
    body["fitted"][1]["brake"].as_object_mut().unwrap().remove("disc");
    body
}

const REASON: &str = "Measured on the machine before this one.";

/// The same with a reason to go without the temperatures of the rear disc.
fn waived() -> Value {
    let mut body = incomplete();
    body["waive"] = json!([
        {"check": "disc_bulk_temperature", "reason": REASON},
        {"check": "surface_temperature", "fitted_index": 1, "reason": REASON},
    ]);
    body
}

async fn asked(accept: Option<&str>, body: &Value, expected: u16) -> Answer {
    let mut request = Request::post(PATH).header("content-type", "application/json");
    if let Some(accept) = accept {
        request = request.header("accept", accept);
    }
    TestApp::new().send(request.body(Body::from(body.to_string())).unwrap(), expected).await
}

async fn sheet_text(body: &Value) -> String {
    String::from_utf8(asked(Some(HTML), body, 200).await.body.to_vec()).unwrap()
}

/// The page; one that a browser would have to mend is no page.
pub(crate) async fn sheet(body: &Value) -> Html {
    let page = Html::parse_document(&sheet_text(body).await);
    assert_eq!(page.errors, Vec::<String>::new());
    page
}

async fn answer(body: &Value) -> Value {
    asked(None, body, 200).await.json()
}

pub(crate) fn all<'a>(page: &'a Html, selector: &str) -> Vec<ElementRef<'a>> {
    page.select(&Selector::parse(selector).unwrap()).collect()
}

/// What a reader reads, with single spaces.
pub(crate) fn words(element: ElementRef<'_>) -> String {
    let text: String = element.text().collect();
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}

/// What a reader reads of the whole page, without its style.
fn page_words(page: &Html) -> String {
    words(all(page, "body")[0])
}

#[tokio::test]
async fn json_is_the_answer_unless_a_page_is_preferred() {
    let body = incomplete();
    for accept in [None, Some("*/*"), Some("application/json"), Some("text/html;q=0.5, */*")] {
        let answer = asked(accept, &body, 200).await;
        assert_eq!(answer.header("content-type"), "application/json", "{accept:?}");
        assert_eq!(answer.header("vary"), "accept");
    }
    let browser = "text/html,application/xhtml+xml,application/xml;q=0.9,*/*;q=0.8";
    for accept in [HTML, "text/*", browser] {
        let answer = asked(Some(accept), &body, 200).await;
        assert_eq!(answer.header("content-type"), "text/html; charset=utf-8", "{accept}");
        assert_eq!(answer.header("vary"), "accept");
    }
    for accept in ["image/svg+xml", "text/plain"] {
        asked(Some(accept), &body, 406).await;
    }
}

#[tokio::test]
async fn what_is_wrong_with_a_request_stays_a_problem_document() {
    let mut body = failing();
    body["machine"]["mass"] = q(-1.0, "kg");
    let problem = asked(Some(HTML), &body, 422).await.json();
    assert_eq!(problem["errors"][0]["pointer"], "#/machine/mass");
}

#[tokio::test]
async fn the_same_request_gives_the_same_page() {
    let body = failing();
    assert_eq!(sheet_text(&body).await, sheet_text(&body).await);
}

#[tokio::test]
async fn nothing_runs_and_nothing_is_loaded() {
    let answer = asked(Some(HTML), &failing(), 200).await;
    let policy = answer.header("content-security-policy").to_owned();
    let page = Html::parse_document(std::str::from_utf8(&answer.body).unwrap());
    assert!(all(&page, "script, link, img, iframe, object, embed, base, form, [style]").is_empty());
    for element in all(&page, "*") {
        for (name, value) in element.value().attrs() {
            assert!(!name.starts_with("on"), "{name}");
            let is_address = ["href", "src", "xlink:href", "action", "data"].contains(&name);
            assert!(!is_address || value.starts_with('#'), "{name}={value}");
        }
    }
    let styles = all(&page, "style");
    assert_eq!(styles.len(), 1);
    let style: String = styles[0].text().collect();
    assert!(!style.contains("url(") && !style.contains("@import"));
    // CSP level 3, 6.7.2.3: the digest of the text of the element.
    let digest = BASE64_STANDARD.encode(Sha256::digest(&style));
    assert!(policy.starts_with("default-src 'none'; "), "{policy}");
    assert!(policy.contains(&format!("style-src 'sha256-{digest}';")), "{policy}");
}

#[tokio::test]
async fn text_of_the_caller_stays_text() {
    let hostile =
        "</td></style><script>alert(1)</script><img src=x onerror=alert(2)> & \"' \u{202e}\u{0}";
    let mut body = waived();
    body["ref"] = json!(hostile);
    body["duties"][0]["name"] = json!(hostile);
    body["fitted"][0]["control"] = json!(hostile);
    body["fitted"][1]["control"] = json!(hostile);
    body["waive"][0]["reason"] = json!(hostile);
    let page = sheet(&body).await;
    assert!(all(&page, "script, img").is_empty());
    let read = "</td></style><script>alert(1)</script><img src=x onerror=alert(2)> & \"'";
    assert_eq!(words(all(&page, "h1")[0]), read);
    // Title, duty, control and reason, at least once each.
    assert!(page_words(&page).matches(read).count() >= 6);
    let text: String = page.root_element().text().collect();
    assert!(!text.contains(['\u{202e}', '\u{0}', '\u{fffd}']));
}

#[tokio::test]
async fn a_reader_with_ears_finds_the_way() {
    for body in [failing(), incomplete(), waived()] {
        let page = sheet(&body).await;
        assert_eq!(page.root_element().attr("lang"), Some("en"));
        assert!(words(all(&page, "title")[0]).contains("Tractor 7"));
        let level = |heading: &ElementRef<'_>| heading.value().name()[1..].parse::<u8>().unwrap();
        let levels: Vec<u8> = all(&page, "h1, h2, h3, h4").iter().map(level).collect();
        assert_eq!(levels[0], 1);
        assert!(!levels[1..].contains(&1));
        assert!(levels.windows(2).all(|pair| pair[1] <= pair[0] + 1), "{levels:?}");
        for table in all(&page, "table") {
            let first = table.child_elements().next().unwrap();
            assert_eq!(first.value().name(), "caption");
            assert!(!words(first).is_empty());
        }
        for head in all(&page, "th") {
            assert!(["col", "row"].contains(&head.attr("scope").unwrap()));
        }
        let ids: Vec<&str> = all(&page, "[id]").iter().filter_map(|one| one.attr("id")).collect();
        let known: BTreeSet<&str> = ids.iter().copied().collect();
        assert_eq!(known.len(), ids.len());
        for link in all(&page, "a[href]") {
            assert!(known.contains(&link.attr("href").unwrap()[1..]));
        }
    }
}

/// The requests of the examples that have an answer.
fn examples() -> impl Iterator<Item = Value> {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/examples/requests/spec-check");
    let files = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path());
    let examples = files.map(|file| std::fs::read_to_string(file).unwrap());
    let examples = examples.map(|text| serde_json::from_str::<Value>(&text).unwrap());
    examples.filter(|example| example["status"] == 200).map(|example| example["request"].clone())
}

#[tokio::test]
async fn every_check_is_on_the_page_with_its_state() {
    let own = [failing(), incomplete(), waived()];
    for body in examples().chain(own) {
        let (page, answer) = (sheet(&body).await, answer(&body).await);
        let rows = all(&page, ".checks tbody tr");
        let checks = answer["results"]["checks"].as_array().unwrap();
        assert_eq!(rows.len(), checks.len());
        assert_eq!(all(&page, ".formula").len(), checks.len());
        for (row, check) in rows.iter().zip(checks) {
            let row = words(*row).to_lowercase();
            let name = check["code"].as_str().unwrap().replace('_', " ");
            let status = check["status"].as_str().unwrap().replace('_', " ");
            assert!(row.starts_with(&name), "{row}: {name}");
            assert!(row.ends_with(&status), "{row}: {status}");
            if let Some(case) = check["friction_case"].as_str() {
                assert!(row.contains(&format!("{case} friction")), "{row}: {case}");
            }
        }
    }
}

#[tokio::test]
async fn the_verdict_comes_first_with_the_check_that_governs() {
    let cases = [(failing(), "Fail"), (incomplete(), "Incomplete"), (waived(), "Pass")];
    for (body, verdict) in cases {
        let (page, answer) = (sheet(&body).await, answer(&body).await);
        assert_eq!(answer["results"]["verdict"], verdict.to_lowercase());
        assert_eq!(words(all(&page, ".verdict .word")[0]), verdict);
        let governing = answer["results"]["governing"]["code"].as_str().unwrap().replace('_', " ");
        let said = words(all(&page, ".verdict")[0]).to_lowercase();
        assert!(said.contains(&format!("governing: {governing}")), "{said}");
    }
}

#[tokio::test]
async fn what_is_missing_is_named_and_what_is_waived_has_its_reason() {
    let attention = |page: &Html| -> Vec<String> {
        all(page, ".attention li").into_iter().map(words).collect()
    };
    let open = attention(&sheet(&incomplete()).await);
    let missing: Vec<&String> =
        open.iter().filter(|line| line.contains("missing #/fitted/1/brake/disc.")).collect();
    assert_eq!(missing.len(), 2, "{open:?}");
    let page = sheet(&waived()).await;
    let gone = attention(&page);
    let reasons: Vec<&String> = gone.iter().filter(|line| line.contains(REASON)).collect();
    assert_eq!(reasons.len(), 2, "{gone:?}");
    assert!(words(all(&page, ".record")[0]).contains(REASON));
}

#[tokio::test]
async fn every_default_is_on_the_page() {
    let body = failing();
    let (page, answer) = (sheet(&body).await, answer(&body).await);
    let shown: Vec<String> = all(&page, ".defaults tbody code").into_iter().map(words).collect();
    let defaults = answer["record"]["defaults"].as_array().unwrap();
    let expected: Vec<&str> =
        defaults.iter().map(|default| default["pointer"].as_str().unwrap()).collect();
    assert!(!expected.is_empty());
    assert_eq!(shown, expected);
}

/// Every value of a request as it is written: numbers with their units, words, yes and no.
fn leaves(given: &Value, found: &mut Vec<String>) {
    match given {
        Value::Object(members) => match (members.get("value"), members.get("unit")) {
            (Some(value), Some(unit)) => {
                found.push(format!("{value} {}", unit.as_str().unwrap()));
            }
            _ => members.values().for_each(|member| leaves(member, found)),
        },
        Value::Array(items) => items.iter().for_each(|item| leaves(item, found)),
        Value::Bool(is_so) => found.push(if *is_so { "yes" } else { "no" }.to_owned()),
        Value::String(text) => found.push(text.clone()),
        Value::Number(number) => found.push(number.to_string()),
        Value::Null => unreachable!(),
    }
}

#[tokio::test]
async fn every_input_is_on_the_page_as_written() {
    let mut body = waived();
    body["fitted"][0]["brake"]["lining"]["fade"] = json!([
        {"temperature": q(20.0, "degC"), "factor": 1.0}, {"temperature": q(572.0, "degF"), "factor": 0.9},
    ]);
    body["duties"][0]["uses"] = json!([{"fitted_index": 0}, {"fitted_index": 1, "count": 1}]);
    let page = sheet(&body).await;
    let mut shown: Vec<String> = all(&page, ".inputs td").into_iter().map(words).collect();
    let mut expected = Vec::new();
    leaves(&body, &mut expected);
    shown.sort();
    expected.sort();
    assert_eq!(shown, expected);
}

#[tokio::test]
async fn numbers_are_in_the_units_asked_for() {
    let mut body = failing();
    body["report_units"] = json!("us");
    let page = sheet(&body).await;
    let amounts: Vec<String> = all(&page, ".checks .amount").into_iter().map(words).collect();
    for unit in ["ft", "psi", "°F", "lbf"] {
        let ending = format!(" {unit}");
        assert!(amounts.iter().any(|amount| amount.ends_with(&ending)), "{unit}");
    }
    for unit in ["m", "MPa", "°C", "N", "kN"] {
        let ending = format!(" {unit}");
        assert!(amounts.iter().all(|amount| !amount.ends_with(&ending)), "{unit}");
    }
    let formulas: String = all(&page, ".formula").into_iter().map(words).collect();
    assert!(formulas.contains("°F") && !formulas.contains("°C"));
}

#[tokio::test]
async fn methods_warnings_cautions_and_the_record_close_the_page() {
    let body = failing();
    let (page, answer) = (sheet(&body).await, answer(&body).await);
    let text = page_words(&page);
    for method in answer["record"]["methods"].as_array().unwrap() {
        let method = method.as_str().unwrap();
        let sheet = TestApp::new().get(&format!("/v1/methods/{method}"), 200).await.json();
        for part in ["name", "valid", "source"] {
            let part: Vec<&str> = sheet[part].as_str().unwrap().split_whitespace().collect();
            assert!(text.contains(&part.join(" ")), "{method}: {part:?}");
        }
        let shown = all(&page, &format!("#method-{}", method.replace(['.', '_'], "-")));
        let mark =
            if sheet["provenance"] == "memory" { "From memory" } else { "Read in the source" };
        assert!(words(shown[0]).contains(mark), "{method}: {mark}");
    }
    for caution in answer["cautions"].as_array().unwrap() {
        assert!(text.contains(caution["text"].as_str().unwrap()));
    }
    let warnings = answer["warnings"].as_array().unwrap();
    assert_eq!(all(&page, ".warnings tbody tr").len(), warnings.len());
    assert!(!warnings.is_empty());
    let record = words(all(&page, ".record")[0]);
    for part in ["service_version", "ref", "input_digest"] {
        assert!(record.contains(answer["record"][part].as_str().unwrap()), "{part}");
    }
    for place in ["Prepared by", "Reviewed by", "Name", "Signature", "Date"] {
        assert!(record.contains(place), "{place}");
    }
}

#[tokio::test]
async fn numbers_behind_the_checks_are_on_the_page() {
    let body = failing();
    let (page, answer) = (sheet(&body).await, answer(&body).await);
    let mut expected = 0;
    for duty in answer["results"]["duties"].as_array().unwrap() {
        for list in ["stops", "holds", "descents", "fitted"] {
            expected += duty[list].as_array().map_or(0, Vec::len);
        }
    }
    assert!(expected > 10);
    assert_eq!(all(&page, ".numbers tbody tr").len(), expected);
}
