//! What a duty is held against, as given.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::Finite;
use crate::api::measure::{Acceleration, Kind, Length, Measure, Time};
use crate::api::parse::{At, DefaultValue, Reader};
use crate::calc::case::spec_check::{Clock, HoldLimits, StopLimits};
use crate::calc::quantity::Si;

/// Limits of a stop; each is judged if it is given. Distance and time count from the start, reaction included.
#[derive(Debug, Clone, Copy, Default, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Requirements {
    /// Distance at most; not for a shaft.
    #[schema(nullable = false)]
    pub max_distance: Option<Length>,
    /// Time at most.
    #[schema(nullable = false)]
    pub max_time: Option<Time>,
    /// Mean deceleration at least; not for a shaft.
    #[schema(nullable = false)]
    pub min_mean_deceleration: Option<Acceleration>,
    /// Mean fully developed deceleration at least; not for a shaft.
    #[schema(nullable = false)]
    pub min_mean_fully_developed_deceleration: Option<Acceleration>,
    /// Deceleration to be reached at some time; not for a shaft.
    #[schema(nullable = false)]
    pub min_peak_deceleration: Option<Acceleration>,
    /// Deceleration never to be passed; not for a shaft.
    #[schema(nullable = false)]
    pub max_deceleration: Option<Acceleration>,
    /// Force of all tires on the ground over the weight, to be reached at some time; a vehicle's only.
    #[schema(nullable = false)]
    pub min_braking_ratio: Option<f64>,
    /// Stops until the usable pad is worn off.
    #[schema(nullable = false)]
    pub min_pad_life_stops: Option<f64>,
    /// No axle's brakes may ask more than its tires hold; a vehicle's only.
    #[schema(nullable = false)]
    pub no_wheel_lock: Option<bool>,
    /// The rear axle may not reach its adhesion before the front one; a vehicle's only.
    #[schema(nullable = false)]
    pub front_locks_first: Option<bool>,
    /// The brakes may not lift the rear wheel; a vehicle's only.
    #[schema(nullable = false)]
    pub no_rear_wheel_lift: Option<bool>,
}

/// Limits of a hold.
#[derive(Debug, Clone, Copy, Default, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct HoldRequirements {
    /// What the brakes hold over what they must, at least; 1 if left out.
    #[schema(nullable = false)]
    pub min_holding_factor: Option<f64>,
}

impl Requirements {
    /// The limits that are meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> StopLimits {
        fn read<K: Kind>(
            given: Option<&Measure<K>>,
            member: &str,
            (at, reader): (&At<'_>, &mut Reader),
        ) -> Option<f64> {
            reader.optional(&at.member(member), given).map(Si::si)
        }
        let mut acceleration =
            |given: Option<&Acceleration>, member| read(given, member, (at, reader));
        let min_mean_deceleration =
            acceleration(self.min_mean_deceleration.as_ref(), "min_mean_deceleration");
        let min_mean_fully_developed_deceleration = acceleration(
            self.min_mean_fully_developed_deceleration.as_ref(),
            "min_mean_fully_developed_deceleration",
        );
        let min_peak_deceleration =
            acceleration(self.min_peak_deceleration.as_ref(), "min_peak_deceleration");
        let max_deceleration = acceleration(self.max_deceleration.as_ref(), "max_deceleration");
        StopLimits {
            max_distance: read(self.max_distance.as_ref(), "max_distance", (at, reader)),
            max_time: read(self.max_time.as_ref(), "max_time", (at, reader)),
            min_mean_deceleration,
            min_mean_fully_developed_deceleration,
            min_peak_deceleration,
            max_deceleration,
            min_braking_ratio: self.min_braking_ratio,
            min_pad_life_stops: self.min_pad_life_stops,
            no_wheel_lock: self.no_wheel_lock.unwrap_or(false),
            front_locks_first: self.front_locks_first.unwrap_or(false),
            no_rear_wheel_lift: self.no_rear_wheel_lift.unwrap_or(false),
            clock: Clock::Signal,
        }
    }
}

impl HoldRequirements {
    /// The limits that are meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> HoldLimits {
        let min_holding_factor = self.min_holding_factor.unwrap_or_else(|| {
            let least = HoldLimits::default().min_holding_factor;
            reader.record(
                &at.member("min_holding_factor"),
                DefaultValue::Number(Finite(least)),
                None,
            );
            least
        });
        HoldLimits { min_holding_factor }
    }
}
