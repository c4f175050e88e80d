//! Friction is a range: results come once per case, and no path has "the" coefficient.

use super::fault::{FaultCode, Faults};

/// Which bound of every fitted lining's friction a result is for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum FrictionCase {
    /// The lowest friction to count on.
    Low,
    /// The friction of the data sheet.
    Nominal,
    /// The highest friction to expect.
    High,
}

impl FrictionCase {
    /// The cases of a range, from low to high.
    pub const RANGE: &'static [Self] = &[Self::Low, Self::Nominal, Self::High];
    /// The only case of a single value.
    pub const SINGLE: &'static [Self] = &[Self::Nominal];

    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Low => "low",
            Self::Nominal => "nominal",
            Self::High => "high",
        }
    }
}

/// The friction coefficients of a lining against its disc.
///
/// Proof that every bound lies in (0, 2] and that low ≤ nominal ≤ high.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Friction {
    low: f64,
    nominal: f64,
    high: f64,
    is_range: bool,
}

impl Friction {
    /// One value: one case, used wherever a bound is asked.
    ///
    /// # Errors
    /// A coefficient outside (0, 2].
    pub fn single(nominal: f64) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        bounded(&mut faults, "nominal", nominal);
        faults.into_result(Self { low: nominal, nominal, high: nominal, is_range: false })
    }

    /// A range; without `nominal` the middle is taken.
    ///
    /// # Errors
    /// A coefficient outside (0, 2], or bounds out of order.
    pub fn range(low: f64, nominal: Option<f64>, high: f64) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        bounded(&mut faults, "low", low);
        bounded(&mut faults, "high", high);
        if let Some(nominal) = nominal {
            bounded(&mut faults, "nominal", nominal);
        }
        let nominal = nominal.unwrap_or(f64::midpoint(low, high));
        if faults.is_empty() {
            faults.require(
                low <= nominal,
                "low",
                FaultCode::NotInOrder,
                "must not lie above nominal",
            );
            faults.require(
                nominal <= high,
                "high",
                FaultCode::NotInOrder,
                "must not lie below nominal",
            );
        }
        faults.into_result(Self { low, nominal, high, is_range: true })
    }

    /// The coefficient of a case.
    #[must_use]
    pub const fn at(&self, case: FrictionCase) -> f64 {
        match case {
            FrictionCase::Low => self.low,
            FrictionCase::Nominal => self.nominal,
            FrictionCase::High => self.high,
        }
    }

    /// The same friction multiplied by a fade factor.
    #[must_use]
    pub(super) fn multiplied(&self, factor: f64) -> Self {
        let Self { low, nominal, high, is_range } = *self;
        Self { low: low * factor, nominal: nominal * factor, high: high * factor, is_range }
    }

    /// Whether a range was given, not a single value.
    #[must_use]
    pub const fn is_range(&self) -> bool {
        self.is_range
    }

    /// The cases that this friction gives results for.
    #[must_use]
    pub const fn cases(&self) -> &'static [FrictionCase] {
        if self.is_range { FrictionCase::RANGE } else { FrictionCase::SINGLE }
    }
}

fn bounded(faults: &mut Faults, member: &str, coefficient: f64) {
    let holds = coefficient > 0.0 && coefficient <= 2.0;
    faults.require(holds, member, FaultCode::OutOfRange, "must lie above 0 and not above 2");
}
