//! What a selection answers with.

use std::collections::HashMap;

use serde::Serialize;
use utoipa::ToSchema;

use super::digest::PartDigest;
use super::judge::{Judged, JudgedCandidate, Refused, Selection, pointer_in_application};
use crate::api::measure::Finite;
use crate::api::parse::{DefaultValue, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{CautionText, CheckName, Recorded, Warning, WarningCode, cautions};
use crate::api::v1::spec_check::answer::{Governing, Verdict};
use crate::api::v1::spec_check::application::RecordedWaiver;
use crate::calc::case::selection::{Standing, ranked};
use crate::calc::case::spec_check::{self, Check, note_waivers};
use crate::calc::finding::Remarks;

/// Candidates, ranked.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SelectionAnswer {
    /// The results.
    pub results: SelectionResults,
    /// Remarks on the application, each as the first candidate that shows it does.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: SelectionRecord,
}

/// The candidates, best first.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SelectionResults {
    /// Those that were judged, best first.
    pub ranked: Vec<RankedCandidate>,
    /// Those that are no valid choice, in the order given.
    pub rejected: Vec<RejectedCandidate>,
    /// How many there are of each.
    pub counts: SelectionCounts,
}

/// A candidate that was judged. `POST /v1/spec-check` with its `fitted` gives every number.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RankedCandidate {
    /// Its place, from 1.
    #[schema(minimum = 1)]
    pub rank: usize,
    /// Which of `candidates`.
    pub candidate_index: usize,
    /// The caller's own reference.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// What its checks come to.
    pub verdict: Verdict,
    /// The check that governs; absent if none could be assessed.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub governing: Option<Governing>,
    /// 1 less the utilization of the check that governs; absent if that has none.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub margin: Option<Finite>,
    /// Checks that are not met, at most 10 of them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(max_items = 10)]
    pub not_met: Vec<CheckFound>,
    /// Checks that could not be assessed, at most 10 of them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(max_items = 10)]
    pub not_assessed: Vec<CheckLacking>,
    /// Codes of its warnings that are no checks. Those on the application are in `warnings`, too.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub notices: Vec<WarningCode>,
}

/// A check of a candidate.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct CheckFound {
    /// Which.
    pub code: CheckName,
    /// In which duty.
    pub duty_index: usize,
    /// On which entry of the candidate's `fitted`, if it is about one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fitted_index: Option<usize>,
    /// How much of the limit is used, 1 at the limit; absent if that is beyond numbers.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub utilization: Option<Finite>,
}

impl CheckFound {
    pub(super) fn of(check: &Check) -> Self {
        let utilization = check.compared().and_then(|compared| compared.utilization);
        Self {
            code: check.code.into(),
            duty_index: check.duty_index,
            fitted_index: check.fitted_index,
            utilization: utilization.map(Finite),
        }
    }
}

/// A check of a candidate that could not be assessed.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct CheckLacking {
    /// Which.
    pub code: CheckName,
    /// In which duty.
    pub duty_index: usize,
    /// On which entry of the candidate's `fitted`, if it is about one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fitted_index: Option<usize>,
    /// The inputs that would let it be assessed: pointers into the request if they start with `#/application`, else into
    /// the candidate.
    pub missing: Vec<String>,
}

/// A candidate that is no valid choice.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct RejectedCandidate {
    /// Which of `candidates`.
    pub candidate_index: usize,
    /// The caller's own reference, if it can be read.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// What is wrong with it; pointers are those of the request.
    pub problem: Problem,
}

/// How many candidates there are of each kind.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, ToSchema)]
pub struct SelectionCounts {
    /// All.
    pub candidates: usize,
    /// Those whose verdict is `pass`.
    pub pass: usize,
    /// Those whose verdict is `incomplete`.
    pub incomplete: usize,
    /// Those whose verdict is `fail`.
    pub fail: usize,
    /// Those that are no valid choice.
    pub rejected: usize,
}

/// How the answer was found.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SelectionRecord {
    /// Version of the service; numbers change only with it.
    pub service_version: &'static str,
    /// The caller's own reference.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// SHA-256 over the RFC 8785 canonical form of the request without its `ref`.
    pub input_digest: String,
    /// The methods used; `GET /v1/methods` explains them.
    pub methods: Vec<&'static str>,
    /// Every value that was not in the request, but for those of its candidates.
    pub defaults: Vec<RecordedDefault>,
    /// The waivers of the application; one is without effect if it is on every candidate.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub waivers: Vec<RecordedWaiver>,
    /// Every value that was not in the candidates, each once.
    pub candidate_defaults: Vec<CandidateDefault>,
}

/// A value that was not in some candidates.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct CandidateDefault {
    /// The member that was left out: a pointer into the candidate.
    pub pointer: String,
    /// What was taken in its place.
    pub value: DefaultValue,
    /// Its unit, if it has one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub unit: Option<&'static str>,
    /// In how many of them it was taken.
    #[schema(minimum = 1)]
    pub candidates: usize,
}

/// What the candidates come to, gathered in their order.
#[derive(Debug)]
pub(super) struct Gathered {
    judged: Vec<(usize, Box<Judged>)>,
    rejected: Vec<RejectedCandidate>,
    digest: PartDigest,
    /// What is said about the application, whichever candidate it came up with.
    remarks: Remarks,
    waiver_effects: Vec<bool>,
    defaults: Vec<CandidateDefault>,
    known_defaults: HashMap<String, usize>,
}

impl Gathered {
    pub(super) fn new(selection: &Selection) -> Self {
        let waivers = selection.request.shared().waive.len();
        Self {
            judged: Vec::new(),
            rejected: Vec::new(),
            digest: PartDigest::new(&selection.body),
            remarks: Remarks::new(),
            waiver_effects: vec![false; waivers],
            defaults: Vec::new(),
            known_defaults: HashMap::new(),
        }
    }

    pub(super) fn add(&mut self, slice: Vec<JudgedCandidate>) {
        for JudgedCandidate { canonical, found } in slice {
            let candidate_index = self.judged.len() + self.rejected.len();
            self.digest.add(&canonical);
            match found {
                Ok(mut judged) => {
                    self.take_over(&mut judged);
                    self.judged.push((candidate_index, judged));
                }
                Err(Refused { reference, problem }) => {
                    self.rejected.push(RejectedCandidate { candidate_index, reference, problem });
                }
            }
        }
    }

    /// Joins what a candidate says with what the others say.
    fn take_over(&mut self, judged: &mut Judged) {
        for method in std::mem::take(&mut judged.methods) {
            self.remarks.method(method);
        }
        for caution in std::mem::take(&mut judged.cautions) {
            self.remarks.caution(caution);
        }
        for finding in std::mem::take(&mut judged.about_application) {
            self.remarks.find_once(finding);
        }
        for (effect, other) in self.waiver_effects.iter_mut().zip(&judged.waiver_effects) {
            *effect |= other;
        }
        for default in std::mem::take(&mut judged.defaults) {
            self.count(default);
        }
    }

    fn count(&mut self, default: RecordedDefault) {
        // A default is a text, a word or number, and a unit: writing it cannot fail.
        let key = serde_json::to_string(&default).unwrap_or_default();
        let place = *self.known_defaults.entry(key).or_insert(self.defaults.len());
        if let Some(known) = self.defaults.get_mut(place) {
            known.candidates += 1;
        } else {
            let RecordedDefault { pointer, value, unit } = default;
            self.defaults.push(CandidateDefault { pointer, value, unit, candidates: 1 });
        }
    }

    fn counts(&self) -> SelectionCounts {
        let mut counts = SelectionCounts {
            candidates: self.judged.len() + self.rejected.len(),
            rejected: self.rejected.len(),
            ..SelectionCounts::default()
        };
        for (_, judged) in &self.judged {
            match judged.standing.verdict {
                spec_check::Verdict::Pass => counts.pass += 1,
                spec_check::Verdict::Incomplete => counts.incomplete += 1,
                spec_check::Verdict::Fail => counts.fail += 1,
            }
        }
        counts
    }
}

impl Selection {
    /// The wire form of what the candidates come to.
    pub(super) fn answer(&self, mut gathered: Gathered) -> SelectionAnswer {
        let counts = gathered.counts();
        let standings: Vec<Standing> =
            gathered.judged.iter().map(|(_, judged)| judged.standing).collect();
        let order = ranked(&standings, self.request.rank_by.unwrap_or_default().into());
        let mut judged: Vec<Option<_>> = gathered.judged.into_iter().map(Some).collect();
        let best_first = order.into_iter().filter_map(|index| judged.get_mut(index)?.take());
        let ranked = best_first
            .zip(1..)
            .map(|((candidate_index, judged), rank)| {
                ranked_candidate(rank, candidate_index, *judged)
            })
            .collect();
        note_waivers(&mut gathered.remarks, &gathered.waiver_effects);
        let remarks = &gathered.remarks;
        let waivers = self.request.shared().waive.iter().zip(&gathered.waiver_effects);
        SelectionAnswer {
            results: SelectionResults { ranked, rejected: gathered.rejected, counts },
            warnings: self.warnings(remarks),
            cautions: cautions(remarks),
            record: SelectionRecord {
                service_version: env!("CARGO_PKG_VERSION"),
                reference: self.request.reference.clone(),
                input_digest: gathered.digest.finish(),
                methods: remarks.methods().iter().map(|method| method.id).collect(),
                defaults: self.defaults.clone(),
                waivers: waivers.map(|(waiver, effect)| waiver.recorded(*effect)).collect(),
                candidate_defaults: gathered.defaults,
            },
        }
    }

    fn warnings(&self, remarks: &Remarks) -> Vec<Warning> {
        let recorded = Recorded {
            body: &self.body,
            reference: None,
            brake: "",
            report_units: self.request.units(),
        };
        let mut warnings = recorded.warnings(remarks);
        for warning in &mut warnings {
            warning.pointer = pointer_in_application(&warning.pointer);
        }
        warnings
    }
}

fn ranked_candidate(rank: usize, candidate_index: usize, judged: Judged) -> RankedCandidate {
    RankedCandidate {
        rank,
        candidate_index,
        reference: judged.reference,
        verdict: judged.standing.verdict.into(),
        governing: judged.governing,
        margin: judged.standing.margin.map(Finite),
        not_met: judged.not_met,
        not_assessed: judged.not_assessed,
        notices: judged.notices.into_iter().collect(),
    }
}
