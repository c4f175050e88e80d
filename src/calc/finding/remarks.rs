//! All that a calculation says beside its results.

use std::collections::BTreeSet;

use super::{Caution, CheckCode, Finding, NEAR_LIMIT_FROM, Notice, Severity, Subject, WarningCode};
use super::{severity_of, utilization_of_maximum};
use crate::calc::friction::FrictionCase;
use crate::calc::method::{Method, Provenance};
use crate::calc::quantity::Amount;

/// Findings, cautions and methods of one answer, each once.
#[derive(Debug, Clone, Default)]
pub struct Remarks {
    findings: Vec<Finding>,
    cautions: BTreeSet<Caution>,
    methods: Vec<&'static Method>,
}

/// A value held against a limit.
#[derive(Debug, Clone)]
pub struct Comparison {
    /// Which check.
    pub code: CheckCode,
    /// Where the limit came from.
    pub subject: Subject,
    /// In which friction case, if it matters.
    pub friction_case: Option<FrictionCase>,
    /// The value.
    pub actual: Amount,
    /// The limit.
    pub limit: Amount,
    /// The value in words, as the subject of a sentence.
    pub what: &'static str,
}

impl Remarks {
    /// Starts with what every answer says.
    #[must_use]
    pub fn new() -> Self {
        Self {
            findings: Vec::new(),
            cautions: Caution::ALWAYS.iter().copied().collect(),
            methods: Vec::new(),
        }
    }

    /// Adds a finding, unless the same is there already.
    pub fn find(&mut self, finding: Finding) {
        if !self.findings.contains(&finding) {
            self.findings.push(finding);
        }
    }

    /// Adds a finding, unless one of the same code on the same input is there already.
    pub fn find_once(&mut self, finding: Finding) {
        let same = |known: &Finding| known.code == finding.code && known.subject == finding.subject;
        if !self.findings.iter().any(same) {
            self.findings.push(finding);
        }
    }

    /// Adds a remark without numbers.
    pub fn notice(
        &mut self,
        code: Notice,
        severity: Severity,
        subject: Subject,
        detail: impl Into<String>,
    ) {
        self.find(Finding::notice(code, severity, subject, detail));
    }

    /// Adds a caution.
    pub fn caution(&mut self, caution: Caution) {
        self.cautions.insert(caution);
    }

    /// Notes that a method was used; a remembered source adds its caution.
    pub fn method(&mut self, method: &'static Method) {
        if !self.methods.iter().any(|known| known.id == method.id) {
            self.methods.push(method);
        }
        if method.provenance == Provenance::Memory {
            self.cautions.insert(Caution::FromMemory);
        }
    }

    /// Takes over what was said about a part: methods, cautions, and the findings that `place` puts in their place.
    pub fn join(&mut self, other: &Self, mut place: impl FnMut(&Finding) -> Option<Finding>) {
        for method in &other.methods {
            self.method(method);
        }
        self.cautions.extend(other.cautions.iter().copied());
        for finding in &other.findings {
            if let Some(finding) = place(finding) {
                self.find_once(finding);
            }
        }
    }

    /// Holds a value against an upper limit and reports it from the near-limit share on.
    ///
    /// Of the friction cases in which a limit is met, only the worst is kept. `ambient` counts for temperatures.
    pub fn compare(&mut self, comparison: Comparison, ambient: f64) {
        let used = utilization_of_maximum(comparison.actual, comparison.limit, ambient);
        let Some(severity) = severity_of(used, NEAR_LIMIT_FROM) else { return };
        let position = match severity {
            Severity::Exceeded if used.is_none() => "has no room: the surroundings are as hot as",
            Severity::Exceeded if comparison.actual.si > comparison.limit.si => "is above",
            Severity::Exceeded => "is not below",
            Severity::NearLimit | Severity::Info => "comes close to",
        };
        let finding = Finding {
            code: WarningCode::Check(comparison.code),
            severity,
            friction_case: comparison.friction_case,
            actual: Some(comparison.actual),
            limit: Some(comparison.limit),
            detail: format!("{} {position} its limit", comparison.what),
            subject: comparison.subject,
        };
        let same =
            |known: &&mut Finding| known.code == finding.code && known.subject == finding.subject;
        match self.findings.iter_mut().find(same) {
            Some(known) if known.actual.is_some_and(|actual| actual.si >= comparison.actual.si) => {
            }
            Some(known) => *known = finding,
            None => self.findings.push(finding),
        }
    }

    /// The findings, in the order in which they were made.
    #[must_use]
    pub fn findings(&self) -> &[Finding] {
        &self.findings
    }

    /// The cautions, in a fixed order.
    pub fn cautions(&self) -> impl Iterator<Item = Caution> + '_ {
        self.cautions.iter().copied()
    }

    /// The methods used, in the order of use.
    #[must_use]
    pub fn methods(&self) -> &[&'static Method] {
        &self.methods
    }
}
