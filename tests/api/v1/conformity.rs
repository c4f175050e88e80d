//! Description and answers cannot disagree: every answer in these tests is held against the description with all
//! objects closed (`common::answer`); here the check itself is seen to fail, and closed sets are compared.

use std::collections::BTreeSet;

use brakewright::api::error_code;
use brakewright::api::openapi::openapi_json;
use brakewright::calc::fault::FaultCode;
use brakewright::calc::finding::{Caution, CheckCode, Notice};
use brakewright::calc::friction::FrictionCase;
use brakewright::calc::motion::{LimitedBy, Phase};
use serde_json::{Value, json};

use super::common::{
    ENDPOINTS, PAD_CAPACITY, STOPPING, answer, pad_capacity, stopping, validator_of, with,
};

fn schema(name: &str) -> Value {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    document["components"]["schemas"][name].clone()
}

/// The values of an enum in the description, each of which must stand there once.
fn described(name: &str) -> BTreeSet<String> {
    let schema = schema(name);
    let values = schema["enum"].as_array().unwrap_or_else(|| panic!("{name}: {schema}"));
    let found: BTreeSet<String> =
        values.iter().map(|value| value.as_str().unwrap().to_owned()).collect();
    assert_eq!(found.len(), values.len(), "{name}: {schema}");
    found
}

fn set<'a>(values: impl IntoIterator<Item = &'a str>) -> BTreeSet<String> {
    values.into_iter().map(str::to_owned).collect()
}

#[test]
fn every_operation_answers_with_the_schema_it_is_checked_against() {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    for (path, component) in ENDPOINTS {
        let content = &document["paths"][path]["post"]["responses"]["200"]["content"];
        let reference = format!("#/components/schemas/{component}");
        assert_eq!(content["application/json"]["schema"]["$ref"], reference, "{path}");
    }
}

#[tokio::test]
async fn an_answer_that_is_not_as_described_is_caught() {
    let right = answer(PAD_CAPACITY, &pad_capacity()).await;
    let validator = validator_of("PadCapacityAnswer");
    assert!(validator.is_valid(&right));
    for (member, value) in [
        ("/results/clamp_force", json!(15_708)),
        ("/results/clamp_force/unit", json!("MPa")),
        ("/results/clamp_force/value", Value::Null),
        ("/results/extra", json!(1)),
        ("/results/friction_cases/0/friction_case", json!("worst")),
        ("/record/defaults/0/value", Value::Null),
        ("/cautions", json!("none")),
    ] {
        assert!(!validator.is_valid(&with(&right, member, value)), "{member} was not caught");
    }
    let stop = answer(STOPPING, &stopping()).await;
    let validator = validator_of("StoppingAnswer");
    let limited = "/results/friction_cases/0/limited_by";
    assert!(!validator.is_valid(&with(&stop, limited, "luck")));
    let code = "/warnings/0/code";
    assert!(!validator.is_valid(&with(&stop, code, "unheard_of")));
}

#[test]
fn the_closed_sets_of_codes_are_those_of_the_description() {
    let checks = CheckCode::ALL.iter().map(|code| code.as_str());
    let notices = Notice::ALL.iter().map(|code| code.as_str());
    assert_eq!(described("WarningCode"), set(checks.chain(notices)));
    let faults = error_code::all();
    assert_eq!(described("ErrorCode"), set(faults.iter().copied()));
    assert!(FaultCode::ALL.iter().all(|code| faults.contains(&code.as_str())));
    let cases = [FrictionCase::Low, FrictionCase::Nominal, FrictionCase::High];
    assert_eq!(described("FrictionCase"), set(cases.iter().map(|value| value.as_str())));
    let limits =
        [LimitedBy::Brake, LimitedBy::Adhesion, LimitedBy::RearWheelLift, LimitedBy::Operator];
    assert_eq!(described("LimitedBy"), set(limits.iter().map(|value| value.as_str())));
    let checks = CheckCode::ALL.iter().map(|code| code.as_str());
    assert_eq!(described("CheckName"), set(checks));
    let phases = [Phase::Reaction, Phase::Dead, Phase::BuildUp, Phase::Full];
    assert_eq!(described("PhaseName"), set(phases.iter().map(|value| value.as_str())));
    assert_eq!(described("WarningSeverity"), set(["info", "near_limit", "exceeded"]));
    let cautions = Caution::ALL.iter().map(|caution| caution.code());
    assert_eq!(described("CautionCode"), set(cautions));
    assert_eq!(
        described("NotReachedReason"),
        set(["brake_force_too_low", "adhesion_too_low", "rear_wheel_lifts"])
    );
}

#[test]
fn no_code_stands_for_two_things() {
    let checks = set(CheckCode::ALL.iter().map(|code| code.as_str()));
    let notices = set(Notice::ALL.iter().map(|code| code.as_str()));
    assert_eq!(checks.len(), CheckCode::ALL.len());
    assert_eq!(notices.len(), Notice::ALL.len());
    // Asked for in a duty it is a check, else a remark: the same thing either way.
    let shared: Vec<&String> = checks.intersection(&notices).collect();
    assert_eq!(shared, ["rear_wheel_lift"]);
    let errors = error_code::all();
    assert_eq!(set(errors.iter().copied()).len(), errors.len());
}
