//! Requests that the fuzzers of `tests/fuzz` found: each was once answered wrongly or late.

use std::fs;
use std::path::Path;
use std::time::{Duration, Instant};

use brakewright::api::openapi::openapi_json;
use serde_json::Value;

use super::v1::common::{assert_problem, assert_valid, bytes_or_problem, validator_of};

/// Longest time for an answer, in a build without optimisation on a machine that is busy.
const LONGEST: Duration = Duration::from_secs(20);

/// The cases by their names: `about`, `path`, `request` (or `text` if it is no JSON), `status`, and the pointers and
/// codes of a refusal as `errors`.
fn cases() -> Vec<(String, Value)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/fuzz/cases");
    let mut files: Vec<_> =
        fs::read_dir(folder).unwrap().map(|file| file.unwrap().path()).collect();
    files.sort();
    let case = |text: Vec<u8>| serde_json::from_slice(&text).unwrap();
    let cases = files.iter().map(|file| {
        (file.file_stem().unwrap().to_string_lossy().into_owned(), case(fs::read(file).unwrap()))
    });
    cases.collect()
}

/// The component that describes the answer of an endpoint.
fn component(document: &Value, path: &str) -> String {
    let content = &document["paths"][path]["post"]["responses"]["200"]["content"];
    let reference = content["application/json"]["schema"]["$ref"].as_str().unwrap();
    reference.rsplit('/').next().unwrap().to_owned()
}

#[tokio::test]
async fn what_a_fuzzer_found_is_answered_as_it_must_be() {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    for (name, case) in cases() {
        let path = case["path"].as_str().unwrap();
        let body = case["text"].as_str().map_or_else(|| case["request"].to_string(), str::to_owned);
        let begin = Instant::now();
        let (status, answer) = bytes_or_problem(path, &body).await;
        assert!(begin.elapsed() < LONGEST, "{name}: took {:?}", begin.elapsed());
        assert_eq!(case["status"], status, "{name}: {answer}");
        if status == 200 {
            assert_valid(&validator_of(&component(&document, path)), &answer);
            continue;
        }
        assert_problem(&answer);
        let expected = case["errors"].as_array().into_iter().flatten();
        let found = answer["errors"].as_array().into_iter().flatten();
        let told = |error: &Value| (error["pointer"].clone(), error["code"].clone());
        assert_eq!(
            found.map(told).collect::<Vec<_>>(),
            expected.map(told).collect::<Vec<_>>(),
            "{name}"
        );
    }
}
