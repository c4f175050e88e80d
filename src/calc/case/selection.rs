//! Brakes that were judged for one application, put in order.

use super::spec_check::{Outcome, Verdict};

/// What comes first among the choices that pass.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum RankBy {
    /// The least to spare: nothing is larger than it need be.
    LeastOversized,
    /// The most to spare.
    MostMargin,
}

/// How a choice stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Standing {
    /// Whether it may pass.
    pub verdict: Verdict,
    /// What is left of the limit that governs; none if nothing governs by a number.
    pub margin: Option<f64>,
}

impl Standing {
    /// How the choice with this outcome stands.
    #[must_use]
    pub fn of(outcome: &Outcome) -> Self {
        Self { verdict: outcome.verdict, margin: margin(outcome) }
    }

    /// Passing before incomplete before failing; then by margin, those without one last. Smaller comes first.
    fn key(self, by: RankBy) -> (u8, bool, f64) {
        let group = match self.verdict {
            Verdict::Pass => 0,
            Verdict::Incomplete => 1,
            Verdict::Fail => 2,
        };
        // Only what passes can be oversized; of the rest the nearest to passing is of use.
        let smallest_first = by == RankBy::LeastOversized && self.verdict == Verdict::Pass;
        let margin = self.margin.unwrap_or_default();
        (group, self.margin.is_none(), if smallest_first { margin } else { -margin })
    }
}

/// One less the utilization of the check that governs: 0 at the limit, below 0 beyond it.
#[must_use]
pub fn margin(outcome: &Outcome) -> Option<f64> {
    let governing = outcome.checks.get(outcome.governing?)?;
    Some(1.0 - governing.compared()?.utilization?)
}

/// The indices of the choices, best first; equal ones stay in the order given.
#[must_use]
pub fn ranked(standings: &[Standing], by: RankBy) -> Vec<usize> {
    let mut keyed: Vec<(usize, (u8, bool, f64))> =
        standings.iter().map(|standing| standing.key(by)).enumerate().collect();
    keyed.sort_by(|(_, one), (_, other)| {
        let groups = (one.0, one.1).cmp(&(other.0, other.1));
        groups.then(one.2.total_cmp(&other.2))
    });
    keyed.into_iter().map(|(index, _)| index).collect()
}
