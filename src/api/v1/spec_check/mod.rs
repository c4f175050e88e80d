//! `POST /v1/spec-check`: whether a choice of brakes may pass.

pub mod answer;
pub mod application;
pub mod duty;
pub mod require;

use axum::body::Body;
use axum::http::Response as Reply;
use serde::Deserialize;
use utoipa::ToSchema;

use answer::{Report, SpecCheckAnswer, SpecCheckRecord};
use application::{Application, Waiver};
use duty::Duty;

use super::block::fitted::Fitted;
use super::block::machine::Machine;
use super::block::stop::stood_in;
use crate::api::accept::Negotiated;
use crate::api::extract::Json;
use crate::api::heavy::off_thread;
use crate::api::measure::{AnyAmount, ReportUnits, Temperature};
use crate::api::metrics::{Verdict, count_verdict};
use crate::api::parse::{At, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{self, Recorded};
use crate::api::sheet::{Page, Sheet};
use crate::calc::case::spec_check::{self, Input, Outcome};
use crate::calc::quantity::{Amount, Dimension, Si};

/// A machine, its brakes and what they are put through.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct SpecCheckRequest {
    /// The caller's own reference, echoed in `record.ref` and left out of the digest.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Units of the answer, `si` if left out.
    #[schema(nullable = false)]
    pub report_units: Option<ReportUnits>,
    /// What is braked.
    pub machine: Machine,
    /// Its brakes, each in all its parts.
    #[schema(min_items = 1, max_items = 100)]
    pub fitted: Vec<Fitted>,
    /// What they are put through. At most 10 repeated stops, descents and procedures, which times their fitted entries
    /// come to at most 100.
    #[schema(min_items = 1, max_items = 50)]
    pub duties: Vec<Duty>,
    /// Temperature of the air, 20 degC if left out.
    #[schema(nullable = false)]
    pub ambient_temperature: Option<Temperature>,
    /// From this share of a limit on, a result counts as near it: above 0, at most 1; 0.9 if left out.
    #[schema(nullable = false)]
    pub near_limit_from: Option<f64>,
    /// Checks that need not be assessed, with the reasons.
    #[schema(nullable = false, max_items = 100)]
    pub waive: Option<Vec<Waiver>>,
}

/// Judge a choice of brakes.
///
/// The whole job in one call: every check that applies to the machine, its brakes and their duties, cold and hot, with
/// a verdict, the check that governs, and the inputs that are missing. A check that lacks an input makes the verdict
/// `incomplete` unless it is waived with a reason.
#[utoipa::path(
    post, path = "/spec-check", tag = "Calculations", operation_id = "spec_check",
    responses((
        status = OK,
        description = "Every check, and what they come to; as a page: the calculation sheet, to print, sign and file.",
        content((SpecCheckAnswer = "application/json"), (String = "text/html")),
    )),
)]
pub(super) async fn spec_check(
    form: Negotiated,
    request: Json<SpecCheckRequest>,
) -> Result<Reply<Body>, Problem> {
    if request.value.is_heavy() {
        return off_thread(move || request.value.respond(form, &request.body)).await?;
    }
    request.value.respond(form, &request.body)
}

/// Duties times entries of fitted brakes that are judged at once, without a thread of their own.
const FEW: usize = 12;

impl SpecCheckRequest {
    /// Whether it takes long: a duty is followed stop by stop, or there is much to judge.
    #[must_use]
    pub fn is_heavy(&self) -> bool {
        let is_heavy = |duty: &Duty| matches!(duty, Duty::RepeatedStops(_) | Duty::Procedure(_));
        self.duties.iter().any(is_heavy) || self.duties.len() * self.fitted.len() > FEW
    }

    fn respond(&self, form: Negotiated, body: &[u8]) -> Result<Reply<Body>, Problem> {
        let (input, outcome, defaults) = self.judged()?;
        count_verdict(counted(outcome.verdict));
        let answer = self.answer(body, &input, &outcome, defaults);
        Ok(form.render(answer, |answer| self.sheet(body, &input, &outcome, answer)))
    }

    fn sheet(
        &self,
        body: &[u8],
        input: &Input,
        outcome: &Outcome,
        answer: &SpecCheckAnswer,
    ) -> Page {
        let air = Amount { dimension: Dimension::Temperature, si: input.ambient_temperature.si() };
        let sheet = Sheet {
            // It was read from these bytes: they are JSON.
            request: &serde_json::from_slice(body).unwrap_or_default(),
            answer,
            methods: outcome.remarks.methods(),
            ambient_temperature: &AnyAmount::report(air, self.report_units.unwrap_or_default()),
            near_limit_from: input.near_limit_from,
        };
        sheet.page()
    }

    fn application(&self) -> Application<'_> {
        Application {
            machine: &self.machine,
            duties: &self.duties,
            ambient_temperature: self.ambient_temperature.as_ref(),
            near_limit_from: self.near_limit_from,
            waive: self.waive.as_deref().unwrap_or_default(),
            units: self.report_units.unwrap_or_default(),
        }
    }

    /// Reads the request and judges it.
    ///
    /// # Errors
    /// 422 with every fault.
    pub fn judged(&self) -> Result<(Input, Outcome, Vec<RecordedDefault>), Problem> {
        let (at, mut reader) = (At::ROOT, Reader::new());
        let application = self.application();
        let meant = application.read(&at, &mut reader);
        let at_fitted = at.member("fitted");
        let fitted =
            Fitted::read_all(&self.fitted, application.is_vehicle(), &at_fitted, &mut reader);
        let input = meant.zip(fitted).map(|(meant, fitted)| meant.with(fitted));
        let (input, defaults) = reader.finish(input)?;
        let outcome = spec_check::evaluate(&input)
            .map_err(|faults| record::no_answer(&application.as_given(faults)))?;
        Ok((input, outcome, defaults))
    }

    /// The request as it goes on record.
    #[must_use]
    pub fn recorded<'a>(&'a self, body: &'a [u8]) -> Recorded<'a> {
        let report_units = self.report_units.unwrap_or_default();
        Recorded { body, reference: self.reference.as_deref(), brake: "", report_units }
    }

    /// The wire form of an outcome.
    #[must_use]
    pub fn answer(
        &self,
        body: &[u8],
        input: &Input,
        outcome: &Outcome,
        mut defaults: Vec<RecordedDefault>,
    ) -> SpecCheckAnswer {
        let recorded = self.recorded(body);
        defaults.extend(stood_in(&input.fitted, &outcome.pressed, recorded.report_units));
        let coordinate = input.machine.coordinate();
        let report = Report { recorded, duties: &self.duties, coordinate };
        let waivers = self.waive.iter().flatten().zip(&outcome.waiver_effects);
        SpecCheckAnswer {
            results: report.results(outcome),
            warnings: recorded.warnings(&outcome.remarks),
            cautions: record::cautions(&outcome.remarks),
            record: SpecCheckRecord::new(
                recorded.record(outcome.remarks.methods(), defaults),
                waivers.map(|(waiver, effect)| waiver.recorded(*effect)).collect(),
            ),
        }
    }
}

/// The verdict as it is counted.
pub(super) const fn counted(verdict: spec_check::Verdict) -> Verdict {
    match verdict {
        spec_check::Verdict::Pass => Verdict::Pass,
        spec_check::Verdict::Fail => Verdict::Fail,
        spec_check::Verdict::Incomplete => Verdict::Incomplete,
    }
}
