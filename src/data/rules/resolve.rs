//! What a row demands of a machine with a certain maximum speed.

use super::{Clock, FromSpeed, HoldTest, RuleRow, RuleTest, StopLimits, StopTest};

/// What a test comes to. Numbers are SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Resolution {
    /// To stop from a known speed.
    Stop(ResolvedStop),
    /// To hold at rest.
    Hold(HoldTest),
    /// Braking force over weight of at least this.
    ForceOverWeight(f64),
    /// The test counts from the maximum speed, which is not given.
    MaxSpeedNeeded,
    /// The test is not meant for this machine.
    NotApplicable(NotApplicable),
}

/// Why a test is not meant for a machine.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum NotApplicable {
    /// It starts from a speed that the machine does not reach.
    AboveMaxSpeed,
    /// It is for machines with another maximum speed.
    OtherSpeedClass,
}

/// A stop from a known speed, with its limits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ResolvedStop {
    /// m/s; rad/s for a shaft.
    pub speed: f64,
    /// The rated load is multiplied by this.
    pub load_factor: f64,
    /// When distance and time start to count.
    pub clock: Clock,
    /// m.
    pub max_distance: Option<f64>,
    /// The other limits.
    pub limits: StopLimits,
}

impl RuleRow {
    /// What each test of the row comes to for a machine of `max_speed`, m/s (rad/s for a shaft).
    ///
    /// Without it, tests that start from a printed speed are taken to be within reach.
    #[must_use]
    pub fn resolve(&self, max_speed: Option<f64>) -> Vec<Resolution> {
        self.tests.iter().map(|test| test.resolve(max_speed)).collect()
    }

    /// Whether a test of the row counts from the maximum speed.
    #[must_use]
    pub fn needs_max_speed(&self) -> bool {
        self.resolve(None).contains(&Resolution::MaxSpeedNeeded)
    }
}

impl RuleTest {
    fn resolve(&self, max_speed: Option<f64>) -> Resolution {
        match self {
            Self::Stop(stop) => stop.resolve(max_speed),
            Self::Hold(hold) => Resolution::Hold(*hold),
            Self::ForceOverWeight(ratio) => Resolution::ForceOverWeight(*ratio),
        }
    }
}

impl StopTest {
    fn resolve(&self, max_speed: Option<f64>) -> Resolution {
        let Some(max_speed) = max_speed else {
            return match self.from {
                FromSpeed::Fixed(speed) if !self.is_for_a_speed_class() => self.at(speed),
                FromSpeed::Fixed(_) | FromSpeed::ShareOfMaxSpeed { .. } => {
                    Resolution::MaxSpeedNeeded
                }
            };
        };
        if self.max_speed_above.is_some_and(|bound| max_speed <= bound)
            || self.max_speed_up_to.is_some_and(|bound| max_speed > bound)
        {
            return Resolution::NotApplicable(NotApplicable::OtherSpeedClass);
        }
        match self.from {
            FromSpeed::Fixed(speed) if speed > max_speed => {
                Resolution::NotApplicable(NotApplicable::AboveMaxSpeed)
            }
            FromSpeed::Fixed(speed) => self.at(speed),
            FromSpeed::ShareOfMaxSpeed { share, at_most } => {
                let speed = share * max_speed;
                self.at(at_most.map_or(speed, |at_most| at_most.min(speed)))
            }
        }
    }

    const fn is_for_a_speed_class(&self) -> bool {
        self.max_speed_above.is_some() || self.max_speed_up_to.is_some()
    }

    fn at(&self, speed: f64) -> Resolution {
        let max_distance = self.max_distance.as_ref().map(|limit| limit.at(speed));
        let Self { load_factor, clock, limits, .. } = *self;
        Resolution::Stop(ResolvedStop { speed, load_factor, clock, max_distance, limits })
    }
}
