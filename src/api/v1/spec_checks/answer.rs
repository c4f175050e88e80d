//! The lines that a stream is answered with.

use std::collections::BTreeSet;

use serde::Serialize;
use utoipa::ToSchema;

use super::lines::Line;
use crate::api::background::{Wanted, guarded};
use crate::api::extract::{decode, overflow, reference_of};
use crate::api::finite::to_json;
use crate::api::metrics::{self, StreamLine};
use crate::api::problem::Problem;
use crate::api::record::{CautionText, Warning, input_digest};
use crate::api::v1::spec_check::answer::{Check, Governing, Report, Verdict, governing};
use crate::api::v1::spec_check::{SpecCheckRequest, counted};
use crate::calc::finding::Caution;

/// A line of the answer.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
#[serde(untagged)]
pub enum StreamedLine {
    /// A line that was judged.
    Judged(JudgedLine),
    /// A line that was refused.
    Refused(RefusedLine),
    /// The last line.
    End(EndLine),
}

/// The answer to a line.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct JudgedLine {
    /// Which line of the body, from 1; empty lines are counted.
    #[schema(minimum = 1)]
    pub line: u64,
    /// The caller's own reference.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// What its checks come to.
    pub result: LineResult,
}

/// What the checks of a line come to: the same as `POST /v1/spec-check` answers, without the numbers behind it.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct LineResult {
    /// What they come to.
    pub verdict: Verdict,
    /// The check that governs; absent if none could be assessed.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub governing: Option<Governing>,
    /// Every check, duty by duty.
    pub checks: Vec<Check>,
    /// Remarks on the results, their pointers into the line.
    pub warnings: Vec<Warning>,
    /// SHA-256 over the RFC 8785 canonical form of the line without `ref`.
    pub input_digest: String,
}

/// The answer to a line that is no valid request.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct RefusedLine {
    /// Which line of the body, from 1; empty lines are counted.
    #[schema(minimum = 1)]
    pub line: u64,
    /// The caller's own reference, if it can be read.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// What is wrong with it, as if it had come alone; pointers, lines and columns count within the line.
    pub problem: Problem,
}

/// The last line of the answer: everything was answered.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct EndLine {
    /// What all lines come to.
    pub end: StreamEnd,
}

/// What all lines of a stream come to.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct StreamEnd {
    /// Lines that were answered; empty ones are not.
    pub lines: u64,
    /// Lines whose verdict is `pass`.
    pub pass: u64,
    /// Lines whose verdict is `fail`.
    pub fail: u64,
    /// Lines whose verdict is `incomplete`.
    pub incomplete: u64,
    /// Lines that were refused.
    pub rejected: u64,
    /// Version of the service; numbers change only with it.
    pub service_version: &'static str,
    /// Cautions to be shown with the results: those of all lines.
    pub cautions: Vec<CautionText>,
}

/// What lines come to.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Tally {
    pass: u64,
    fail: u64,
    incomplete: u64,
    rejected: u64,
    cautions: BTreeSet<Caution>,
}

impl Default for Tally {
    fn default() -> Self {
        let cautions = Caution::ALWAYS.iter().copied().collect();
        Self { pass: 0, fail: 0, incomplete: 0, rejected: 0, cautions }
    }
}

impl Tally {
    fn count(&mut self, verdict: Verdict) {
        match verdict {
            Verdict::Pass => self.pass += 1,
            Verdict::Fail => self.fail += 1,
            Verdict::Incomplete => self.incomplete += 1,
        }
    }

    /// Adds what other lines come to.
    pub fn add(&mut self, other: &Self) {
        self.pass += other.pass;
        self.fail += other.fail;
        self.incomplete += other.incomplete;
        self.rejected += other.rejected;
        self.cautions.extend(other.cautions.iter().copied());
    }

    /// The last line of the answer.
    #[must_use]
    pub fn end_line(&self) -> Vec<u8> {
        let end = StreamEnd {
            lines: self.pass + self.fail + self.incomplete + self.rejected,
            pass: self.pass,
            fail: self.fail,
            incomplete: self.incomplete,
            rejected: self.rejected,
            service_version: env!("CARGO_PKG_VERSION"),
            cautions: self.cautions.iter().copied().map(CautionText::from).collect(),
        };
        let mut text = Vec::new();
        append(&mut text, &EndLine { end });
        text
    }
}

/// The answers to a few lines.
#[derive(Debug)]
pub(super) struct AnsweredSlice {
    /// The answers, a line each.
    pub(super) text: Vec<u8>,
    /// What the lines come to.
    pub(super) tally: Tally,
}

/// Answers lines in order, as long as anybody waits for the answers.
pub(super) fn answer_slice(lines: Vec<Line>, wanted: Wanted<'_>) -> AnsweredSlice {
    let mut slice = AnsweredSlice { text: Vec::new(), tally: Tally::default() };
    for line in lines {
        if !wanted.is_wanted() {
            break;
        }
        answer_line(line, &mut slice);
    }
    slice
}

fn answer_line(Line { number, text }: Line, slice: &mut AnsweredSlice) {
    let judged = match &text {
        // A defect that one line meets is not the end of the stream.
        Ok(text) => guarded(|| judge(number, text, &mut slice.tally)).flatten(),
        Err(problem) => Err(problem.clone()),
    };
    match judged {
        Ok(answer) => {
            slice.text.extend(answer);
            slice.text.push(b'\n');
        }
        Err(problem) => {
            slice.tally.rejected += 1;
            metrics::count_stream_line(StreamLine::Rejected);
            let reference = text.ok().and_then(|text| reference_of(&text));
            append(&mut slice.text, &RefusedLine { line: number, reference, problem });
        }
    }
}

/// The answer to a line, written. It is counted only if there is one.
fn judge(number: u64, text: &str, tally: &mut Tally) -> Result<Vec<u8>, Problem> {
    let request: SpecCheckRequest = decode(text.as_bytes())?;
    let (input, outcome, _) = request.judged()?;
    let recorded = request.recorded(text.as_bytes());
    let coordinate = input.machine.coordinate();
    let report = Report { recorded, duties: &request.duties, coordinate };
    let result = LineResult {
        verdict: outcome.verdict.into(),
        governing: governing(&outcome),
        checks: report.checks(&outcome),
        warnings: recorded.warnings(&outcome.remarks),
        input_digest: input_digest(text.as_bytes()),
    };
    let verdict = result.verdict;
    let answer = JudgedLine { line: number, reference: request.reference.clone(), result };
    let text = to_json(&answer).map_err(|_| overflow())?;
    tally.count(verdict);
    metrics::count_verdict(counted(outcome.verdict));
    metrics::count_stream_line(StreamLine::Answered);
    tally.cautions.extend(outcome.remarks.cautions());
    Ok(text)
}

/// Appends a line that holds no computed number, so that nothing can prevent its being written.
fn append<T: Serialize>(text: &mut Vec<u8>, line: &T) {
    let written = to_json(line);
    debug_assert!(written.is_ok(), "texts and counts only");
    text.extend(written.unwrap_or_default());
    text.push(b'\n');
}
