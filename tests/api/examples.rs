//! The files in `examples/requests`, sent through the front door: each answer is the one in its file.
//!
//! The expected answers are own output, pinned: they show users what comes back and guard it against unnoticed
//! change. What proves the numbers right is in `tests/published` and `tests/calc`. After a wanted change,
//! `UPDATE_GOLDEN=1 cargo test` writes the new answers. Run it twice, because the description holds some of them,
//! and read the difference before it lands.

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use axum::body::Body;
use axum::http::Request;
use brakewright::api::openapi::{openapi_30_json, openapi_json};
use serde_json::{Value, json};

use crate::support::client::TestApp;
use crate::support::json::readable;

/// An example file, read.
struct Example {
    endpoint: String,
    path: PathBuf,
    content: Value,
}

fn examples() -> Vec<Example> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/requests");
    let folders = fs::read_dir(root).unwrap().map(|entry| entry.unwrap().path());
    let files = folders.flat_map(|folder| fs::read_dir(folder).unwrap());
    let mut paths: Vec<PathBuf> = files.map(|entry| entry.unwrap().path()).collect();
    paths.sort();
    paths.into_iter().map(Example::read).collect()
}

impl Example {
    fn read(path: PathBuf) -> Self {
        let folder = path.parent().unwrap().file_name().unwrap();
        let endpoint = folder.to_str().unwrap().to_owned();
        let content = serde_json::from_str(&fs::read_to_string(&path).unwrap());
        let content = content.unwrap_or_else(|error| panic!("{}: {error}", path.display()));
        Self { endpoint, path, content }
    }

    fn name(&self) -> &str {
        self.path.file_stem().unwrap().to_str().unwrap()
    }

    /// Sends the request; the id makes the `instance` of a problem the same every time.
    async fn send(&self, app: &TestApp) -> Value {
        let request = Request::post(format!("/v1/{}", self.endpoint))
            .header("content-type", "application/json")
            .header("x-request-id", "example");
        let body = Body::from(self.content["request"].to_string());
        let status = u16::try_from(self.content["status"].as_u64().unwrap()).unwrap();
        app.send(request.body(body).unwrap(), status).await.json()
    }
}

#[tokio::test]
async fn every_example_is_answered_as_it_says() {
    let update = std::env::vars_os().any(|(name, _)| name == "UPDATE_GOLDEN");
    let app = TestApp::new();
    for mut example in examples() {
        let answer = example.send(&app).await;
        let text = fs::read_to_string(&example.path).unwrap();
        if !update {
            let path = example.path.display();
            assert_eq!(example.content["response"], answer, "{path}: is the change wanted?");
            assert!(text == readable(&example.content), "{path} is not laid out for reading");
            continue;
        }
        example.content["response"] = answer;
        let updated = readable(&example.content);
        if updated != text {
            fs::write(&example.path, updated).unwrap();
        }
    }
}

/// `examples/streams` holds a stream as it is sent, and beside it what comes back.
#[tokio::test]
async fn the_example_of_a_stream_is_answered_as_it_says() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/streams");
    let sent = fs::read_to_string(root.join("spec-checks.ndjson")).unwrap();
    let request = Request::post("/v1/spec-checks").header("content-type", "application/x-ndjson");
    let answer = TestApp::new().send(request.body(Body::from(sent)).unwrap(), 200).await;
    let answer = String::from_utf8(answer.body.to_vec()).unwrap();
    let path = root.join("spec-checks.answers.ndjson");
    if std::env::vars_os().any(|(name, _)| name == "UPDATE_GOLDEN") {
        fs::write(&path, &answer).unwrap();
    }
    let expected = fs::read_to_string(&path).unwrap();
    assert!(answer == expected, "{}: is the change wanted?", path.display());
}

#[test]
fn every_example_has_the_same_members_and_says_that_its_data_is_invented() {
    for example in examples() {
        let members: Vec<&String> = example.content.as_object().unwrap().keys().collect();
        assert_eq!(members, ["title", "about", "request", "status", "response"]);
        let about = example.content["about"].as_str().unwrap();
        assert!(about.ends_with(" Invented data, for demonstration only."), "{about}");
    }
}

/// The capabilities that users should see at work.
#[test]
fn every_calculation_has_examples_of_success_and_of_faults_in_both_unit_systems() {
    let examples = examples();
    for endpoint in ["pad-capacity", "actuation-force", "stopping", "stop-energy", "spec-check"] {
        let here = || examples.iter().filter(|example| example.endpoint == endpoint);
        let us = |example: &&Example| example.content["request"]["report_units"] == "us";
        assert!(here().any(|example| us(&example)), "{endpoint}: no example in us units");
        assert!(here().any(|example| !us(&example)), "{endpoint}: no example in si units");
        let faults = here().filter(|example| example.content["status"] == 422);
        let most = faults.map(|example| example.content["response"]["error_count"].as_u64());
        assert!(most.max().flatten() > Some(1), "{endpoint}: no example with several faults");
        let exceeded = |example: &Example| {
            let warnings = example.content["response"]["warnings"].as_array();
            warnings.into_iter().flatten().any(|warning| warning["severity"] == "exceeded")
        };
        assert!(here().any(exceeded), "{endpoint}: no example of a brake that is too weak");
    }
}

/// What a configurator meets: each verdict, each kind of machine and duty, a waiver, and linings judged hot.
#[test]
fn the_specification_checks_show_every_verdict_machine_and_duty() {
    let examples = examples();
    let here = || examples.iter().filter(|example| example.endpoint == "spec-check");
    let requests = || here().map(|example| &example.content["request"]);
    let answers = || here().map(|example| &example.content["response"]);
    for verdict in ["pass", "fail", "incomplete"] {
        assert!(answers().any(|answer| answer["results"]["verdict"] == verdict), "{verdict}");
    }
    for kind in ["vehicle", "hoist", "conveyor", "shaft"] {
        assert!(requests().any(|request| request["machine"]["kind"] == kind), "{kind}");
    }
    let duties = || requests().flat_map(|request| request["duties"].as_array().unwrap());
    for kind in ["stop", "repeated_stops", "descent", "hold", "rule", "procedure"] {
        assert!(duties().any(|duty| duty["kind"] == kind), "{kind}");
    }
    let checks = || answers().filter_map(|answer| answer["results"]["checks"].as_array()).flatten();
    for status in ["met", "near_limit", "not_met", "not_assessed", "waived"] {
        assert!(checks().any(|check| check["status"] == status), "{status}");
    }
    assert!(checks().any(|check| check["hot"] == true));
    for request in requests() {
        assert!(request["ref"].as_str().unwrap().starts_with("invented: "), "{request}");
    }
}

#[test]
fn every_calculation_of_the_description_has_an_example_that_is_a_file() {
    let files = examples();
    let newer: Value = serde_json::from_str(openapi_json()).unwrap();
    let older: Value = serde_json::from_str(openapi_30_json()).unwrap();
    let mut shown = BTreeSet::new();
    for document in [&newer, &older] {
        for (path, item) in document["paths"].as_object().unwrap() {
            let Some(operation) = item.get("post") else { continue };
            // Streams have examples of their own, in `examples/streams`.
            if operation["requestBody"]["content"].get("application/json").is_none() {
                continue;
            }
            let json = |part: &str| &operation[part]["content"]["application/json"]["examples"];
            let request = json("requestBody").as_object();
            let request = request.unwrap_or_else(|| panic!("{path} shows no example"));
            let (name, request) = request.iter().next().unwrap();
            let endpoint = path.strip_prefix("/v1/").unwrap();
            let file = |file: &&Example| file.endpoint == endpoint && file.name() == name;
            let file = &files.iter().find(file).unwrap().content;
            assert_eq!(file["status"], 200, "{path}: the example shown must be a good one");
            assert_eq!(request["value"], file["request"], "{path}");
            let ok = &operation["responses"]["200"]["content"]["application/json"]["examples"];
            assert_eq!(ok[name]["value"], file["response"], "{path}");
            shown.insert(endpoint.to_owned());
        }
    }
    assert!(shown.len() >= 4, "{shown:?}");
}

#[test]
fn examples_are_written_with_one_quantity_a_line() {
    let given = json!({"a": {"value": 1.5, "unit": "mm"}, "b": [[1, 2], [3, 4]], "c": [], "d": {}});
    let written = "{\n  \"a\": {\"value\": 1.5, \"unit\": \"mm\"},\n  \"b\": [[1, 2], [3, 4]],\n  \
                   \"c\": [],\n  \"d\": {}\n}\n";
    assert_eq!(readable(&given), written);
}
