//! The program that replays the examples against a deployment, against the served program.

#[path = "../../examples/replay/replay.rs"]
#[expect(clippy::indexing_slicing, reason = "JSON of a missing member is null")]
mod program;

use std::fs;
use std::path::{Path, PathBuf};

use serde_json::{Value, json};

use self::program::{Deployment, Found, Row, cases, is_as_expected, table};
use super::process::Service;

fn examples() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/requests")
}

fn deployment(service: &Service, tolerance: f64) -> Deployment {
    Deployment::new(&format!("http://{}/", service.address), None, tolerance).unwrap()
}

/// An example with a change, written below a folder of its own.
fn seeded(name: &str, change: impl FnOnce(&mut Value)) -> PathBuf {
    let text = fs::read_to_string(examples().join("stopping/cargo_cycle.json")).unwrap();
    let mut content: Value = serde_json::from_str(&text).unwrap();
    change(&mut content);
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join("replay").join(name).join("stopping");
    fs::create_dir_all(&folder).unwrap();
    fs::write(folder.join("seeded.json"), content.to_string()).unwrap();
    folder.parent().unwrap().to_owned()
}

async fn replayed(deployment: &Deployment, place: &Path) -> Vec<Row> {
    let mut rows = Vec::new();
    for case in cases(place).unwrap() {
        rows.push(deployment.replay(&case).await);
    }
    rows
}

/// What came of the only case.
async fn found(deployment: &Deployment, place: &Path) -> Found {
    let rows = replayed(deployment, place).await;
    assert_eq!(rows.len(), 1);
    rows[0].found.clone()
}

#[tokio::test]
async fn every_example_is_answered_the_same_by_the_served_program() {
    let service = Service::start(&[("BRAKEWRIGHT_REQUEST_TIMEOUT", "120s")]);
    let rows = replayed(&deployment(&service, 0.0), &examples()).await;
    let table = table(&rows).unwrap();
    assert!(is_as_expected(&rows), "{table}");
    assert!(rows.len() > 20 && rows.iter().any(|row| row.status == Some(422)), "{table}");
    let sums = format!("{0} cases: {0} same, 0 same by another version", rows.len());
    assert!(table.contains(&sums), "{table}");
}

#[tokio::test]
async fn a_seeded_difference_is_found_and_told() {
    const AT: &str = "/response/results/friction_cases/0/total_distance/value";
    let service = Service::start(&[]);
    let exact = deployment(&service, 0.0);
    let number = seeded("number", |content| {
        let value = content.pointer_mut(AT).unwrap();
        *value = json!(value.as_f64().unwrap() * (1.0 + 1e-9));
    });
    let Found::Different(told) = found(&exact, &number).await else { panic!("nothing was found") };
    assert_eq!(told.len(), 1, "{told:?}");
    assert!(told[0].starts_with("#/results/friction_cases/0/total_distance/value is "), "{told:?}");
    assert_eq!(found(&deployment(&service, 1e-8), &number).await, Found::Same);
    assert_ne!(found(&deployment(&service, 1e-10), &number).await, Found::Same);
    let rows = replayed(&exact, &number).await;
    assert!(!is_as_expected(&rows));
    let shown = table(&rows).unwrap();
    assert!(shown.contains("stopping/seeded  200     different\n    #/results/"), "{shown}");

    for (name, at, value, wanted) in [
        ("status", "/status", json!(422), "status 200 instead of 422"),
        (
            "word",
            "/response/results/friction_cases/0/friction_case",
            json!("high"),
            "#/results/friction_cases/0/friction_case is \"low\" instead of \"high\"",
        ),
        ("list", "/response/warnings", json!([1, 2, 3, 4, 5, 6, 7, 8, 9]), "items instead of 9"),
    ] {
        let place = seeded(name, |content| *content.pointer_mut(at).unwrap() = value);
        let Found::Different(told) = found(&exact, &place).await else { panic!("{name}") };
        assert!(told.iter().any(|told| told.contains(wanted)), "{told:?}");
    }
    let place = seeded("missing", |content| content["response"]["results"]["more"] = json!(1));
    assert_eq!(
        found(&exact, &place).await,
        Found::Different(vec!["#/results/more is missing".to_owned()])
    );
    let place = seeded("added", |content| {
        content["response"].as_object_mut().unwrap().shift_remove("cautions").unwrap();
    });
    assert_eq!(
        found(&exact, &place).await,
        Found::Different(vec!["#/cautions was not expected".to_owned()])
    );
}

#[tokio::test]
async fn another_version_is_told_and_is_no_difference_by_itself() {
    let service = Service::start(&[]);
    let other =
        |content: &mut Value| content["response"]["record"]["service_version"] = json!("0.0.1");
    let rows = replayed(&deployment(&service, 0.0), &seeded("version", other)).await;
    let told = format!("version \"{}\" instead of \"0.0.1\"", env!("CARGO_PKG_VERSION"));
    assert_eq!(rows[0].found, Found::OtherVersion(told.clone()));
    assert!(is_as_expected(&rows));
    let table = table(&rows).unwrap();
    assert!(table.contains(&told) && table.contains("1 same by another version"), "{table}");
}

#[tokio::test]
async fn a_service_that_is_not_there_and_cases_that_are_none_are_told() {
    let nobody = std::net::TcpListener::bind("127.0.0.1:0").unwrap().local_addr().unwrap();
    let deployment = Deployment::new(&format!("http://{nobody}"), None, 0.0).unwrap();
    let rows = replayed(&deployment, &seeded("nobody", |_| ())).await;
    assert!(matches!(rows[0].found, Found::Unanswered(_)), "{rows:?}");
    assert!(!is_as_expected(&rows));
    assert!(table(&rows).unwrap().contains("1 unanswered"));

    let empty = Path::new(env!("CARGO_TARGET_TMPDIR")).join("replay/empty");
    fs::create_dir_all(&empty).unwrap();
    assert!(cases(&empty).unwrap_err().to_string().contains("no cases in"));
    assert!(cases(&empty.join("nothing.json")).is_err());
    let broken = seeded("broken", |content| {
        content.as_object_mut().unwrap().shift_remove("response").unwrap();
    });
    assert!(cases(&broken).unwrap_err().to_string().contains("has no response"));
}

#[tokio::test]
async fn a_service_that_asks_for_a_key_gets_it() {
    // SHA-256 of `abc`: FIPS 180-4, seen in its published test vectors.
    const ABC: &str = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";
    let case = seeded("key", |_| ());
    let keys = case.join("keys");
    fs::write(&keys, ABC).unwrap();
    let service = Service::start(&[("BRAKEWRIGHT_API_KEYS_FILE", keys.to_str().unwrap())]);
    let base = format!("http://{}", service.address);
    let stopping = case.join("stopping");
    let keyed = Deployment::new(&base, Some("abc".to_owned()), 0.0).unwrap();
    assert_eq!(found(&keyed, &stopping).await, Found::Same);
    let rows = replayed(&deployment(&service, 0.0), &stopping).await;
    assert_eq!(rows[0].status, Some(401));
    assert!(!is_as_expected(&rows));
}
