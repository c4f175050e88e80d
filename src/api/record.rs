//! What every calculation answers with beside its results: warnings, cautions and the record.

use std::borrow::Cow;

use serde::{Deserialize, Deserializer, Serialize, Serializer};
use serde_json::Value;
use sha2::{Digest, Sha256};
use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use super::measure::{AnyAmount, ReportUnits};
use super::parse::RecordedDefault;
use super::pointer;
use super::problem::{ErrorItem, Problem};
use crate::calc::fault::Faults;
use crate::calc::finding::{
    Caution, CheckCode, Finding, Notice, Remarks, Severity, Subject, WarningCode as Code,
};
use crate::calc::friction::FrictionCase as Case;
use crate::calc::method::Method;

/// Which bound of every fitted lining's friction a result is for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum FrictionCase {
    /// The lowest friction to count on.
    Low,
    /// The friction of the data sheet, or the single value given.
    Nominal,
    /// The highest friction to expect.
    High,
}

impl From<Case> for FrictionCase {
    fn from(case: Case) -> Self {
        match case {
            Case::Low => Self::Low,
            Case::Nominal => Self::Nominal,
            Case::High => Self::High,
        }
    }
}

/// How much a warning weighs.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum WarningSeverity {
    /// Worth knowing.
    Info,
    /// From 90 % of a limit up to it.
    NearLimit,
    /// Beyond a limit, or not provably within it.
    Exceeded,
}

impl From<Severity> for WarningSeverity {
    fn from(severity: Severity) -> Self {
        match severity {
            Severity::Info => Self::Info,
            Severity::NearLimit => Self::NearLimit,
            Severity::Exceeded => Self::Exceeded,
        }
    }
}

/// What a warning says, for programs. A closed set: check codes for limits, notices for the rest.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(transparent)]
pub struct WarningCode(&'static str);

impl From<Notice> for WarningCode {
    fn from(notice: Notice) -> Self {
        Self(notice.as_str())
    }
}

impl PartialSchema for WarningCode {
    fn schema() -> RefOr<Schema> {
        let checks = CheckCode::ALL.iter().map(|code| code.as_str());
        // Where the caller asks for it, a remark is a check and keeps its code: an enum names each once.
        let is_check = |notice: &&str| CheckCode::ALL.iter().any(|code| code.as_str() == *notice);
        let notices = Notice::ALL.iter().map(|code| code.as_str());
        let notices = notices.filter(|notice| !is_check(notice));
        ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(checks.chain(notices)))
            .description(Some("What a warning says, for programs. A closed set: check codes for limits, notices for the rest."))
            .into()
    }
}

impl ToSchema for WarningCode {}

/// The code of a check. A closed set.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct CheckName(pub CheckCode);

impl From<CheckCode> for CheckName {
    fn from(code: CheckCode) -> Self {
        Self(code)
    }
}

impl<'de> Deserialize<'de> for CheckName {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let text = <Cow<'de, str>>::deserialize(deserializer)?;
        let code = CheckCode::ALL.iter().find(|code| code.as_str() == text);
        code.map(|code| Self(*code)).ok_or_else(|| {
            serde::de::Error::invalid_value(
                serde::de::Unexpected::Str(&text),
                &"the code of a check",
            )
        })
    }
}

impl Serialize for CheckName {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.serialize_str(self.0.as_str())
    }
}

impl PartialSchema for CheckName {
    fn schema() -> RefOr<Schema> {
        ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(CheckCode::ALL.iter().map(|code| code.as_str())))
            .description(Some("The code of a check. A closed set."))
            .into()
    }
}

impl ToSchema for CheckName {}

/// A remark on a result.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Warning {
    /// What it says, for programs.
    pub code: WarningCode,
    /// How much it weighs.
    pub severity: WarningSeverity,
    /// Which input it is about; the `id` of a catalog row if the limit came from there.
    pub pointer: String,
    /// The friction case in which it is worst, if it depends on friction.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub friction_case: Option<FrictionCase>,
    /// The value found.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub actual: Option<AnyAmount>,
    /// The limit it was held against.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub limit: Option<AnyAmount>,
    /// One sentence for people.
    pub detail: String,
}

/// Which caution, for programs. A closed set.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(transparent)]
pub struct CautionCode(&'static str);

impl PartialSchema for CautionCode {
    fn schema() -> RefOr<Schema> {
        ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(Caution::ALL.iter().map(|caution| caution.code())))
            .description(Some("Which caution, for programs. A closed set."))
            .into()
    }
}

impl ToSchema for CautionCode {}

/// A caution that travels with the answer.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct CautionText {
    /// Which, for programs.
    pub code: CautionCode,
    /// Its words, to be shown to people.
    pub text: &'static str,
}

impl From<Caution> for CautionText {
    fn from(caution: Caution) -> Self {
        Self { code: CautionCode(caution.code()), text: caution.text() }
    }
}

/// How the answer was found.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Record {
    /// Version of the service; numbers change only with it.
    pub service_version: &'static str,
    /// The caller's own reference.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// SHA-256 over the RFC 8785 canonical form of the request without `ref`.
    #[schema(example = "sha256:e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855")]
    pub input_digest: String,
    /// The methods used; `GET /v1/methods` explains them.
    pub methods: Vec<&'static str>,
    /// Every value that was not in the request.
    pub defaults: Vec<RecordedDefault>,
}

/// A request that goes into the record.
#[derive(Debug, Clone, Copy)]
pub struct Recorded<'a> {
    /// Its bytes.
    pub body: &'a [u8],
    /// The caller's own reference.
    pub reference: Option<&'a str>,
    /// Path of the only brake below the request, for the pointers of its inputs; empty if there are several.
    pub brake: &'static str,
    /// The units of the answer.
    pub report_units: ReportUnits,
}

impl Recorded<'_> {
    /// The warnings of an answer.
    #[must_use]
    pub fn warnings(&self, remarks: &Remarks) -> Vec<Warning> {
        remarks.findings().iter().map(|finding| self.warning(finding)).collect()
    }

    fn warning(&self, finding: &Finding) -> Warning {
        let amount = |amount| AnyAmount::report(amount, self.report_units);
        Warning {
            code: WarningCode(match finding.code {
                Code::Check(code) => code.as_str(),
                Code::Notice(code) => code.as_str(),
            }),
            severity: finding.severity.into(),
            pointer: self.locate(&finding.subject),
            friction_case: finding.friction_case.map(Into::into),
            actual: finding.actual.map(amount),
            limit: finding.limit.map(amount),
            detail: finding.detail.clone(),
        }
    }

    /// The pointer of an input.
    #[must_use]
    pub fn locate(&self, subject: &Subject) -> String {
        match subject {
            Subject::Request(input) => pointer_to(input),
            Subject::Duty { index, input } => pointer_to(&format!("duties/{index}/{input}")),
            Subject::Waiver { index } => pointer_to(&format!("waive/{index}")),
            Subject::Fitted { index, input } => pointer_to(&format!("fitted/{index}/{input}")),
            Subject::Brake { fitted_index: Some(index), input } => {
                pointer_to(&format!("fitted/{index}/brake/{input}"))
            }
            Subject::Brake { fitted_index: None, input } => {
                pointer_to(&format!("{}/{input}", self.brake))
            }
        }
    }

    /// The record of an answer.
    #[must_use]
    pub fn record(&self, methods: &[&'static Method], defaults: Vec<RecordedDefault>) -> Record {
        Record {
            service_version: env!("CARGO_PKG_VERSION"),
            reference: self.reference.map(str::to_owned),
            input_digest: input_digest(self.body),
            methods: methods.iter().map(|method| method.id).collect(),
            defaults,
        }
    }
}

/// The cautions of an answer.
#[must_use]
pub fn cautions(remarks: &Remarks) -> Vec<CautionText> {
    remarks.cautions().map(CautionText::from).collect()
}

/// The pointer of member names joined by `/`.
#[must_use]
pub fn pointer_to(path: &str) -> String {
    pointer::fragment(path.split('/').filter(|name| !name.is_empty()))
}

/// The problem of a calculation that has no answer. Its faults are placed below the request.
#[must_use]
pub fn no_answer(faults: &Faults) -> Problem {
    let faults = faults.as_slice();
    let item = |fault: &crate::calc::fault::Fault| ErrorItem {
        pointer: pointer_to(&fault.member),
        code: fault.code.as_str(),
        detail: fault.detail.clone(),
    };
    Problem::invalid(faults.iter().map(item).collect(), faults.len())
}

/// SHA-256 over the canonical form (RFC 8785) of a request body without `ref`.
///
/// Numbers are taken as doubles, as that form demands. A body that is no JSON object gives the digest of nothing;
/// it never gets here.
#[must_use]
pub fn input_digest(body: &[u8]) -> String {
    let mut document: Value = serde_json::from_slice(body).unwrap_or_default();
    if let Value::Object(members) = &mut document {
        members.shift_remove("ref");
    }
    digest_text(Sha256::new().chain_update(canonical(document)))
}

/// The canonical form of a part of a body.
pub(super) fn canonical(mut document: Value) -> Vec<u8> {
    as_doubles(&mut document);
    serde_jcs::to_vec(&document).unwrap_or_default()
}

/// The digest of what was hashed, as it goes on record.
pub(super) fn digest_text(hashed: Sha256) -> String {
    let digest = hashed.finalize();
    digest.iter().fold(String::from("sha256:"), |text, byte| text + &format!("{byte:02x}"))
}

/// Turns whole numbers into doubles, so that `95` and `95.0` are the same input.
fn as_doubles(value: &mut Value) {
    match value {
        Value::Number(number) => {
            if let Some(double) = number.as_f64().and_then(serde_json::Number::from_f64) {
                *number = double;
            }
        }
        Value::Array(items) => items.iter_mut().for_each(as_doubles),
        Value::Object(members) => members.values_mut().for_each(as_doubles),
        Value::Null | Value::Bool(_) | Value::String(_) => {}
    }
}
