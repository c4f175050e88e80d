//! A check: a value held against a limit, or what is missing to do so.

use crate::calc::finding::{CheckCode, Severity, Subject};
use crate::calc::finding::{severity_of, utilization_of_maximum, utilization_of_minimum};
use crate::calc::friction::FrictionCase;
use crate::calc::quantity::{Amount, Dimension};

/// A check of one duty, at its worst.
#[derive(Debug, Clone, PartialEq)]
pub struct Check {
    /// Which.
    pub code: CheckCode,
    /// In which duty.
    pub duty_index: usize,
    /// On which fitted entry; none where it is about the machine.
    pub fitted_index: Option<usize>,
    /// In which friction case it is worst, if that matters.
    pub friction_case: Option<FrictionCase>,
    /// Whether it is worst with the linings as hot as the duties make them.
    pub hot: bool,
    /// What was found.
    pub judged: Judged,
    /// The input that gives the limit.
    pub limit_at: Option<Subject>,
    /// Why it need not be assessed, if it was not and that was waived.
    pub waived: Option<String>,
}

/// What a check found.
#[derive(Debug, Clone, PartialEq)]
pub enum Judged {
    /// A value was held against a limit.
    Compared(Compared),
    /// Inputs are missing.
    Lacking(Vec<Subject>),
}

/// A value and its limit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Compared {
    /// The value; none if it has no end.
    pub actual: Option<Amount>,
    /// The limit.
    pub limit: Option<Amount>,
    /// How much of the limit is used, 1 at the limit; none if that is beyond numbers.
    pub utilization: Option<f64>,
    /// Whether the limit is provably kept.
    pub is_within: bool,
}

/// How a check stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Status {
    /// The limit is kept.
    Met,
    /// The limit is kept, but nearly reached.
    NearLimit,
    /// The limit is not provably kept.
    NotMet,
    /// Inputs are missing.
    NotAssessed,
    /// Inputs are missing, and the caller gave a reason to go without.
    Waived,
}

impl Status {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Met => "met",
            Self::NearLimit => "near_limit",
            Self::NotMet => "not_met",
            Self::NotAssessed => "not_assessed",
            Self::Waived => "waived",
        }
    }
}

impl Compared {
    fn new(actual: Amount, limit: Amount, utilization: Option<f64>) -> Self {
        let utilization = utilization.filter(|used| used.is_finite());
        let is_within = utilization.is_some_and(|used| used <= 1.0);
        let actual = Some(actual).filter(|actual| actual.si.is_finite());
        Self { actual, limit: Some(limit), utilization, is_within }
    }

    /// Holds a value against an upper limit; temperatures count from `ambient`, K.
    #[must_use]
    pub fn at_most(actual: f64, limit: Amount, ambient: f64) -> Self {
        let actual = Amount { dimension: limit.dimension, si: actual };
        Self::new(actual, limit, utilization_of_maximum(actual, limit, ambient))
    }

    /// Holds a value against a lower limit.
    #[must_use]
    pub fn at_least(actual: f64, limit: Amount) -> Self {
        let actual = Amount { dimension: limit.dimension, si: actual };
        Self::new(actual, limit, utilization_of_minimum(actual, limit))
    }

    /// A limit that is not kept, by a value that has no end.
    #[must_use]
    pub const fn beyond(limit: Option<Amount>) -> Self {
        Self { actual: None, limit, utilization: None, is_within: false }
    }

    /// A lower limit kept by a value that has no end.
    #[must_use]
    pub const fn boundless(limit: Amount) -> Self {
        Self { actual: None, limit: Some(limit), utilization: Some(0.0), is_within: true }
    }

    /// An effort held against what is available; `is_within` tells what the numbers alone may not.
    #[must_use]
    pub fn effort(dimension: Dimension, needed: f64, available: f64, is_within: bool) -> Self {
        let amount = |si| Amount { dimension, si };
        let ratio = if needed > 0.0 { needed / available } else { 0.0 };
        // What is not reached is at or beyond its limit, whatever the last digits say.
        let used = if is_within { ratio } else { ratio.max(1.0) };
        let utilization = Some(used).filter(|used| used.is_finite() && (is_within || needed > 0.0));
        Self {
            actual: Some(amount(needed)),
            limit: Some(amount(available)),
            utilization,
            is_within: is_within && used <= 1.0,
        }
    }
}

impl Judged {
    /// How bad it is: larger is worse. What is missing weighs more than what is kept.
    fn weight(&self) -> (u8, f64) {
        match self {
            Self::Compared(Compared { is_within: false, utilization: None, .. }) => (3, 0.0),
            Self::Compared(Compared { is_within: false, utilization: Some(used), .. }) => {
                (2, *used)
            }
            Self::Lacking(_) => (1, 0.0),
            Self::Compared(Compared { utilization, .. }) => (0, utilization.unwrap_or(0.0)),
        }
    }

    /// Whether it is worse than another.
    #[must_use]
    pub fn is_worse_than(&self, other: &Self) -> bool {
        self.weight() > other.weight()
    }
}

impl Check {
    /// How the check stands, if limits count as near from `near_limit_from` on.
    #[must_use]
    pub fn status(&self, near_limit_from: f64) -> Status {
        match &self.judged {
            Judged::Lacking(_) if self.waived.is_some() => Status::Waived,
            Judged::Lacking(_) => Status::NotAssessed,
            Judged::Compared(Compared { is_within: false, .. }) => Status::NotMet,
            Judged::Compared(Compared { utilization, .. }) => {
                match severity_of(*utilization, near_limit_from) {
                    None => Status::Met,
                    Some(Severity::NearLimit) => Status::NearLimit,
                    Some(_) => Status::NotMet,
                }
            }
        }
    }

    /// What was compared, if anything was.
    #[must_use]
    pub const fn compared(&self) -> Option<&Compared> {
        match &self.judged {
            Judged::Compared(compared) => Some(compared),
            Judged::Lacking(_) => None,
        }
    }

    /// The inputs that would let it be assessed.
    #[must_use]
    pub fn missing(&self) -> &[Subject] {
        match &self.judged {
            Judged::Compared(_) => &[],
            Judged::Lacking(missing) => missing,
        }
    }

    /// Keeps the worse of this and `other`, which is about the same.
    #[must_use]
    pub fn or_worse(self, other: Self) -> Self {
        if other.judged.is_worse_than(&self.judged) { other } else { self }
    }
}

/// The worst of what each friction case comes to; none of none. The case is told if the cases differ.
#[must_use]
pub(super) fn worst(
    found: impl IntoIterator<Item = (FrictionCase, Judged)>,
) -> Option<(Option<FrictionCase>, Judged)> {
    let mut found = found.into_iter();
    let (mut case, mut judged) = found.next()?;
    let mut differs = false;
    for (other_case, other) in found {
        differs |= other != judged;
        if other.is_worse_than(&judged) {
            (case, judged) = (other_case, other);
        }
    }
    Some((differs.then_some(case), judged))
}
