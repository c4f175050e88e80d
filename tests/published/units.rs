//! Whole answers in both unit systems against a general-purpose units library (pint, `tests/reference/conversions.py`).
//!
//! A request in US units and the same request converted by the library must come to the same answer in SI; the US
//! answer, converted by the library's factors, too.

use serde_json::Value;

use crate::support::client::TestApp;

/// Each number of a request is rounded once by the library and once by the service; the calculation may double
/// that a few times, next to limits somewhat more.
const RELATIVE: f64 = 1e-11;

fn reference() -> Value {
    serde_json::from_str(include_str!("../reference/conversions.json")).unwrap()
}

async fn results(path: &str, request: &Value, report_units: &str) -> Value {
    let mut request = request.clone();
    request["report_units"] = report_units.into();
    TestApp::new().post(path, &request.to_string(), 200).await["results"].clone()
}

/// Compares two answers member by member; measures by `convert`. Counts the numbers compared.
fn same(at: &str, one: &Value, other: &Value, convert: &impl Fn(f64, &str) -> f64) -> usize {
    match (one, other) {
        (Value::Object(measure), Value::Object(_)) if measure.contains_key("unit") => {
            let number = |measure: &Value| measure["value"].as_f64().unwrap();
            let found = convert(number(one), measure["unit"].as_str().unwrap());
            let expected = number(other);
            // A speed of zero may come out as the rounding of the speeds before it.
            let bound = RELATIVE * expected.abs().max(1e-3);
            assert!((found - expected).abs() <= bound, "{at}: {found} is not {expected}");
            1
        }
        (Value::Object(members), Value::Object(others)) => {
            assert!(members.keys().eq(others.keys()), "{at}");
            let each = members.iter().map(|(name, one)| (name.clone(), one));
            each.map(|(name, one)| same(&format!("{at}/{name}"), one, &others[&name], convert))
                .sum()
        }
        (Value::Array(items), Value::Array(others)) => {
            assert_eq!(items.len(), others.len(), "{at}");
            let each = items.iter().zip(others).enumerate();
            each.map(|(index, (one, other))| same(&format!("{at}/{index}"), one, other, convert))
                .sum()
        }
        (Value::Number(found), Value::Number(expected)) => {
            let (found, expected) = (found.as_f64().unwrap(), expected.as_f64().unwrap());
            assert!((found - expected).abs() <= RELATIVE * expected.abs(), "{at}: {found}");
            1
        }
        _ => {
            assert_eq!(one, other, "{at}");
            0
        }
    }
}

#[tokio::test]
async fn a_request_in_us_units_is_the_request_that_the_library_converts() {
    for case in reference()["cases"].as_array().unwrap() {
        let path = case["path"].as_str().unwrap();
        let (us, si) =
            (results(path, &case["us"], "si").await, results(path, &case["si"], "si").await);
        let compared = same(path, &us, &si, &|value, _| value);
        assert!(compared >= 15, "{path}: {compared} numbers");
    }
}

#[tokio::test]
async fn an_answer_in_us_units_is_the_answer_that_the_library_converts() {
    let reference = reference();
    let convert = |value: f64, unit: &str| match unit {
        // A temperature has an offset; a rise of temperature is told apart by its name below.
        "degF" => (value - 32.0) / 1.8,
        "deg" => value,
        _ => value * reference["factors"][unit].as_f64().unwrap_or_else(|| panic!("{unit}")),
    };
    for case in reference["cases"].as_array().unwrap() {
        let path = case["path"].as_str().unwrap();
        let (mut us, mut si) =
            (results(path, &case["us"], "us").await, results(path, &case["us"], "si").await);
        if path == "/v1/stop-energy" {
            for index in 0..3 {
                let rise = |answer: &mut Value| {
                    let case = &mut answer["friction_cases"][index]["fitted"][0];
                    let rise = case.as_object_mut().unwrap().remove("disc_bulk_rise").unwrap();
                    rise["value"].as_f64().unwrap()
                };
                let (us, si) = (rise(&mut us), rise(&mut si));
                assert!((us / 1.8 - si).abs() <= RELATIVE * si, "{us} degF, {si} K");
            }
        }
        let compared = same(path, &us, &si, &convert);
        assert!(compared >= 15, "{path}: {compared} numbers");
    }
}
