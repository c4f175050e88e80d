//! What a calculation says about its own result: a finding is a value, not an error.

mod caution;
mod code;
mod remarks;

pub use caution::Caution;
pub use code::{CheckCode, Notice, WarningCode};
pub use remarks::{Comparison, Remarks};

use super::friction::FrictionCase;
use super::quantity::{Amount, Dimension};

/// From this share of a limit on, a result is called near it.
pub const NEAR_LIMIT_FROM: f64 = 0.9;

/// How much a finding weighs.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Severity {
    /// Worth knowing.
    Info,
    /// From the near-limit share of a limit up to the limit.
    NearLimit,
    /// Beyond a limit, or not provably within it.
    Exceeded,
}

/// The input that a finding is about. Paths are member names joined by `/`.
#[derive(Debug, Clone, PartialEq, Eq, Hash)]
pub enum Subject {
    /// An input of the request itself.
    Request(&'static str),
    /// An input of a duty.
    Duty {
        /// Which duty.
        index: usize,
        /// Path below the duty.
        input: &'static str,
    },
    /// A waiver.
    Waiver {
        /// Which.
        index: usize,
    },
    /// An input of a fitted entry.
    Fitted {
        /// Which entry.
        index: usize,
        /// Path below the entry.
        input: &'static str,
    },
    /// An input of a brake: of the one fitted entry, or of the only brake of a request.
    Brake {
        /// Which fitted entry; none if the request has one brake.
        fitted_index: Option<usize>,
        /// Path below the brake.
        input: &'static str,
    },
}

/// A remark on a result.
#[derive(Debug, Clone, PartialEq)]
pub struct Finding {
    /// What it says, for programs.
    pub code: WarningCode,
    /// How much it weighs.
    pub severity: Severity,
    /// Which input it is about.
    pub subject: Subject,
    /// The friction case it was found in, if it depends on friction.
    pub friction_case: Option<FrictionCase>,
    /// The value found.
    pub actual: Option<Amount>,
    /// The limit it was held against.
    pub limit: Option<Amount>,
    /// One sentence for people.
    pub detail: String,
}

impl Finding {
    /// A remark without numbers.
    #[must_use]
    pub fn notice(
        code: Notice,
        severity: Severity,
        subject: Subject,
        detail: impl Into<String>,
    ) -> Self {
        Self {
            code: WarningCode::Notice(code),
            severity,
            subject,
            friction_case: None,
            actual: None,
            limit: None,
            detail: detail.into(),
        }
    }

    /// The same remark, with the friction case it was found in.
    #[must_use]
    pub const fn in_case(mut self, case: FrictionCase) -> Self {
        self.friction_case = Some(case);
        self
    }
}

/// How much of a limit a value uses: 1 exactly at the limit, more beyond it.
///
/// For an upper limit actual/limit; for a temperature the rise above `ambient` over the allowed rise.
/// None where the limit leaves no room (a temperature limit that is not above ambient).
#[must_use]
pub fn utilization_of_maximum(actual: Amount, limit: Amount, ambient: f64) -> Option<f64> {
    let floor = if limit.dimension == Dimension::Temperature { ambient } else { 0.0 };
    let room = limit.si - floor;
    (room > 0.0).then(|| (actual.si - floor) / room)
}

/// How much of a lower limit is used: 1 exactly at the limit, more below it. None if there is nothing to hold
/// against the limit.
#[must_use]
pub fn utilization_of_minimum(actual: Amount, limit: Amount) -> Option<f64> {
    (actual.si > 0.0).then(|| limit.si / actual.si)
}

/// The severity of a utilization; anything not provably within the limit is exceeded.
#[must_use]
pub fn severity_of(utilization: Option<f64>, near_limit_from: f64) -> Option<Severity> {
    match utilization {
        Some(used) if used < near_limit_from => None,
        Some(used) if used <= 1.0 => Some(Severity::NearLimit),
        _ => Some(Severity::Exceeded),
    }
}
