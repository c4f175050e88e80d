//! What is asked, and what each candidate comes to.

use std::collections::BTreeSet;
use std::ops::Range;

use super::answer::{CheckFound, CheckLacking, Gathered};
use super::digest::canonical_text;
use super::{Candidate, MOST_CANDIDATES, RankBy, SelectionRequest};
use crate::api::background::{Wanted, guarded};
use crate::api::extract::{decode, reference_of};
use crate::api::measure::ReportUnits;
use crate::api::parse::{At, DefaultValue, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{Recorded, WarningCode as Noticed, no_answer, pointer_to};
use crate::api::v1::block::fitted::Fitted;
use crate::api::v1::block::stop::stood_in;
use crate::api::v1::spec_check::answer::{Governing, governing};
use crate::api::v1::spec_check::application::{Application, Meant};
use crate::calc::case::selection::Standing;
use crate::calc::case::spec_check::{Outcome, Status, evaluate};
use crate::calc::fault::{Fault, FaultCode, Faults};
use crate::calc::finding::{Caution, Finding, Remarks, Subject, WarningCode};
use crate::calc::method::Method;

/// Checks of a kind that are listed for a candidate at most.
const MOST_LISTED: usize = 10;

/// A request whose application was read.
#[derive(Debug)]
pub struct Selection {
    pub(super) request: SelectionRequest,
    pub(super) body: axum::body::Bytes,
    pub(super) defaults: Vec<RecordedDefault>,
    meant: Meant,
}

/// A candidate that was judged.
#[derive(Debug)]
pub(super) struct Judged {
    pub(super) reference: Option<String>,
    pub(super) standing: Standing,
    pub(super) governing: Option<Governing>,
    pub(super) not_met: Vec<CheckFound>,
    pub(super) not_assessed: Vec<CheckLacking>,
    pub(super) notices: BTreeSet<Noticed>,
    pub(super) about_application: Vec<Finding>,
    pub(super) defaults: Vec<RecordedDefault>,
    pub(super) waiver_effects: Vec<bool>,
    pub(super) cautions: Vec<Caution>,
    pub(super) methods: Vec<&'static Method>,
}

/// A candidate that is no valid choice.
#[derive(Debug)]
pub(super) struct Refused {
    pub(super) reference: Option<String>,
    pub(super) problem: Problem,
}

/// What a candidate comes to.
#[derive(Debug)]
pub(super) struct JudgedCandidate {
    /// Its canonical form.
    pub(super) canonical: Vec<u8>,
    /// What was found.
    pub(super) found: Result<Box<Judged>, Refused>,
}

impl SelectionRequest {
    /// The application as single checks and selections share it.
    #[must_use]
    pub fn shared(&self) -> Application<'_> {
        Application {
            machine: &self.application.machine,
            duties: &self.application.duties,
            ambient_temperature: self.application.ambient_temperature.as_ref(),
            near_limit_from: self.application.near_limit_from,
            waive: self.application.waive.as_deref().unwrap_or_default(),
            units: self.units(),
        }
    }

    /// Units of the answer.
    #[must_use]
    pub fn units(&self) -> ReportUnits {
        self.report_units.unwrap_or_default()
    }
}

impl Selection {
    /// Reads a request, all but its candidates.
    ///
    /// # Errors
    /// 400 if the body is not JSON, 422 with every fault of what all candidates share.
    pub(super) fn read(body: &axum::body::Bytes) -> Result<Self, Problem> {
        let request: SelectionRequest = decode(body)?;
        let (at, mut reader) = (At::ROOT, Reader::new());
        let at_application = at.member("application");
        let application = request.shared();
        let meant = application.read(&at_application, &mut reader).and_then(|meant| {
            let faults = application.as_given(meant.faults());
            reader.take(&at_application, faults.into_result(meant))
        });
        if !(1..=MOST_CANDIDATES).contains(&request.candidates.0.len()) {
            let detail = format!("must have 1 to {MOST_CANDIDATES} items");
            reader.fault(&at.member("candidates"), FaultCode::WrongCount, detail);
        }
        if request.rank_by.is_none() {
            let default = DefaultValue::Text(RankBy::default().as_str().to_owned());
            reader.record(&at.member("rank_by"), default, None);
        }
        let (meant, defaults) = reader.finish(meant)?;
        Ok(Self { request, body: body.clone(), defaults, meant })
    }

    pub(super) fn count(&self) -> usize {
        self.request.candidates.0.len()
    }

    pub(super) fn gather(&self) -> Gathered {
        Gathered::new(self)
    }

    /// Judges some candidates, as long as anybody waits for it.
    pub(super) fn judge(&self, slice: Range<usize>, wanted: Wanted<'_>) -> Vec<JudgedCandidate> {
        let candidates = self.request.candidates.0.iter().enumerate();
        let slice = candidates.skip(slice.start).take(slice.len());
        let judged = slice.take_while(|_| wanted.is_wanted()).map(|(index, candidate)| {
            let text = candidate.get();
            let mut reference = None;
            // A defect that one candidate meets does not spoil the others.
            let judged = guarded(|| self.judge_one(index, text, &mut reference)).flatten();
            let found = match judged {
                Ok(judged) => Ok(Box::new(Judged { reference, ..judged })),
                Err(problem) => Err(Refused { reference, problem }),
            };
            JudgedCandidate { canonical: canonical_text(text), found }
        });
        judged.collect()
    }

    fn judge_one(
        &self,
        index: usize,
        text: &str,
        reference: &mut Option<String>,
    ) -> Result<Judged, Problem> {
        let place = format!("#/candidates/{index}");
        let candidate: Result<Candidate, Problem> = decode(text.as_bytes());
        let candidate = candidate.map_err(|problem| {
            *reference = reference_of(text);
            problem.below(&place)
        })?;
        reference.clone_from(&candidate.reference);
        let (at, mut reader) = (At::ROOT, Reader::new());
        let is_vehicle = self.request.shared().is_vehicle();
        let fitted =
            Fitted::read_all(&candidate.fitted, is_vehicle, &at.member("fitted"), &mut reader);
        let (fitted, defaults) = reader.finish(fitted).map_err(|problem| problem.below(&place))?;
        let input = self.meant.clone().with(fitted);
        let outcome = evaluate(&input).map_err(|faults| self.no_answer(faults, index))?;
        let stood_in = stood_in(&input.fitted, &outcome.pressed, self.request.units());
        Ok(self.found(&outcome, defaults.into_iter().chain(stood_in).collect()))
    }

    /// The problem of a candidate that cannot be judged: what lies in its brakes stands there, the rest at the duty
    /// that does not go with them.
    fn no_answer(&self, faults: Faults, index: usize) -> Problem {
        let faults = self.request.shared().as_given(faults);
        let mut placed = Faults::new();
        for Fault { member, code, detail } in faults.as_slice() {
            let is_of_candidate = member.split('/').next() == Some("fitted");
            let at = if is_of_candidate {
                format!("candidates/{index}")
            } else {
                "application".to_owned()
            };
            placed.add(format!("{at}/{member}"), *code, detail.clone());
        }
        no_answer(&placed)
    }

    fn found(&self, outcome: &Outcome, defaults: Vec<RecordedDefault>) -> Judged {
        let with = |wanted: Status| {
            let checks = outcome.checks.iter().zip(&outcome.statuses);
            checks.filter(move |(_, status)| **status == wanted).map(|(check, _)| check)
        };
        let not_met = with(Status::NotMet).take(MOST_LISTED).map(CheckFound::of).collect();
        let lacking = with(Status::NotAssessed).take(MOST_LISTED);
        let not_assessed = lacking
            .map(|check| CheckLacking {
                code: check.code.into(),
                duty_index: check.duty_index,
                fitted_index: check.fitted_index,
                missing: check.missing().iter().map(|subject| self.locate(subject)).collect(),
            })
            .collect();
        let (about_application, notices) = sorted(&outcome.remarks);
        Judged {
            reference: None,
            standing: Standing::of(outcome),
            governing: governing(outcome),
            not_met,
            not_assessed,
            notices,
            about_application,
            defaults,
            waiver_effects: outcome.waiver_effects.clone(),
            cautions: outcome.remarks.cautions().collect(),
            methods: outcome.remarks.methods().to_vec(),
        }
    }

    /// The pointer of an input: of the application, or within a candidate.
    pub(super) fn locate(&self, subject: &Subject) -> String {
        let recorded =
            Recorded { body: &[], reference: None, brake: "", report_units: self.request.units() };
        let pointer = recorded.locate(subject);
        if is_of_candidate(subject) { pointer } else { pointer_in_application(&pointer) }
    }
}

/// Where a place of a spec check is in a selection.
pub(super) fn pointer_in_application(pointer: &str) -> String {
    format!("{}{}", pointer_to("application"), pointer.trim_start_matches('#'))
}

const fn is_of_candidate(subject: &Subject) -> bool {
    match subject {
        Subject::Fitted { .. } | Subject::Brake { .. } => true,
        Subject::Request(_) | Subject::Duty { .. } | Subject::Waiver { .. } => false,
    }
}

/// The notices whose place is in the application, and the codes of all. Checks are listed otherwise; what comes of waivers
/// is known only when all candidates are judged.
fn sorted(remarks: &Remarks) -> (Vec<Finding>, BTreeSet<Noticed>) {
    let (mut about_application, mut notices) = (Vec::new(), BTreeSet::new());
    for finding in remarks.findings() {
        let WarningCode::Notice(code) = finding.code else { continue };
        if matches!(finding.subject, Subject::Waiver { .. }) {
            continue;
        }
        notices.insert(code.into());
        if !is_of_candidate(&finding.subject) {
            about_application.push(finding.clone());
        }
    }
    (about_application, notices)
}
