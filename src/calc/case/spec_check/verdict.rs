//! From checks to a verdict: what governs, and what was waived.

use super::check::{Check, Status};
use crate::calc::finding::CheckCode;

/// A check that need not be assessed, and why.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Waiver {
    /// Which check.
    pub check: CheckCode,
    /// In which duty; none: in all.
    pub duty_index: Option<usize>,
    /// On which entry; none: on all.
    pub fitted_index: Option<usize>,
    /// The caller's reason.
    pub reason: String,
}

impl Waiver {
    fn covers(&self, check: &Check) -> bool {
        check.code == self.check
            && self.duty_index.is_none_or(|index| index == check.duty_index)
            && (self.fitted_index.is_none() || self.fitted_index == check.fitted_index)
    }
}

/// Whether a machine's brakes may pass.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Verdict {
    /// Every check is met, nearly at its limit, or waived.
    Pass,
    /// A check is not met.
    Fail,
    /// Nothing fails, but something could not be assessed.
    Incomplete,
}

impl Verdict {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Pass => "pass",
            Self::Fail => "fail",
            Self::Incomplete => "incomplete",
        }
    }
}

/// Waives what could not be assessed; for each waiver, whether it had an effect.
pub(super) fn waive(checks: &mut [Check], waivers: &[Waiver]) -> Vec<bool> {
    let mut effects = vec![false; waivers.len()];
    for check in checks.iter_mut().filter(|check| check.compared().is_none()) {
        for (waiver, effect) in waivers.iter().zip(&mut effects) {
            if waiver.covers(check) {
                *effect = true;
                check.waived.get_or_insert_with(|| waiver.reason.clone());
            }
        }
    }
    effects
}

/// What all checks come to.
pub(super) fn verdict(checks: &[Check], near_limit_from: f64) -> Verdict {
    let has = |wanted| checks.iter().any(|check| check.status(near_limit_from) == wanted);
    if has(Status::NotMet) {
        Verdict::Fail
    } else if has(Status::NotAssessed) {
        Verdict::Incomplete
    } else {
        Verdict::Pass
    }
}

/// The check that governs: one that is not met without a utilization, else the one with the highest.
pub(super) fn governing(checks: &[Check]) -> Option<usize> {
    let beyond = |check: &Check| {
        check
            .compared()
            .is_some_and(|compared| !compared.is_within && compared.utilization.is_none())
    };
    if let Some(first) = checks.iter().position(beyond) {
        return Some(first);
    }
    let mut governing: Option<(usize, f64)> = None;
    for (index, check) in checks.iter().enumerate() {
        let Some(used) = check.compared().and_then(|compared| compared.utilization) else {
            continue;
        };
        if governing.is_none_or(|(_, most)| used > most) {
            governing = Some((index, used));
        }
    }
    governing.map(|(index, _)| index)
}
