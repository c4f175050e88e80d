//! What a duty is asked to keep beside the limits of lining, disc and actuation.

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::CheckCode;
use crate::calc::machine::Machine;
use crate::calc::quantity::{Dimension, Si};

/// When the clock of a stop starts.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Clock {
    /// With the signal to stop: the reaction counts.
    #[default]
    Signal,
    /// When the control is moved: the reaction does not count.
    Control,
}

/// Limits of a stop, in coherent SI units along the coordinate; none: not asked for.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct StopLimits {
    /// Distance in all, m.
    pub max_distance: Option<f64>,
    /// Time in all, s.
    pub max_time: Option<f64>,
    /// From the first torque on, m/s².
    pub min_mean_deceleration: Option<f64>,
    /// Between 0.8 and 0.1 of the initial speed, m/s².
    pub min_mean_fully_developed_deceleration: Option<f64>,
    /// To be reached at some time, m/s².
    pub min_peak_deceleration: Option<f64>,
    /// Never to be passed, m/s².
    pub max_deceleration: Option<f64>,
    /// Force of all tires on the ground over the weight, to be reached at some time.
    pub min_braking_ratio: Option<f64>,
    /// Stops until the usable pad is worn off.
    pub min_pad_life_stops: Option<f64>,
    /// No axle's brakes may ask more than its tires hold.
    pub no_wheel_lock: bool,
    /// The rear axle may not reach its adhesion before the front one.
    pub front_locks_first: bool,
    /// The brakes may not lift the rear wheel.
    pub no_rear_wheel_lift: bool,
    /// When distance and time begin to count.
    pub clock: Clock,
}

impl StopLimits {
    /// What is impossible about it. Members are those of the request.
    #[must_use]
    pub fn faults(&self, machine: &Machine, initial_speed: f64, final_speed: f64) -> Faults {
        let mut faults = Faults::new();
        for (member, limit) in self.numbers() {
            if let Some(limit) = limit {
                faults.positive(member, limit);
            }
        }
        let is_shaft = matches!(machine, Machine::Shaft(_));
        for (member, limit) in self.along_a_way() {
            let detail = "does not fit a shaft, which turns: give max_time";
            let holds = limit.is_none() || !is_shaft;
            faults.require(holds, member, FaultCode::NotApplicable, detail);
        }
        for (member, is_asked) in self.on_wheels() {
            let holds = !is_asked || machine.vehicle().is_some();
            faults.require(holds, member, FaultCode::NotApplicable, "belongs to vehicles only");
        }
        let asks_developed = self.min_mean_fully_developed_deceleration.is_some();
        let holds = !asks_developed || final_speed <= 0.1 * initial_speed;
        let detail = "needs a final speed of at most a tenth of the initial one";
        let member = "min_mean_fully_developed_deceleration";
        faults.require(holds, member, FaultCode::NotApplicable, detail);
        faults
    }

    /// What is asked of distance, time and deceleration: each with its check and its place in the request.
    pub(super) const fn of_the_machine(
        &self,
    ) -> [(CheckCode, &'static str, Dimension, Option<f64>); 7] {
        const ACCELERATION: Dimension = Dimension::Acceleration;
        [
            (
                CheckCode::StoppingDistance,
                "require/max_distance",
                Dimension::Travel,
                self.max_distance,
            ),
            (CheckCode::StoppingTime, "require/max_time", Dimension::Time, self.max_time),
            (
                CheckCode::MeanDeceleration,
                "require/min_mean_deceleration",
                ACCELERATION,
                self.min_mean_deceleration,
            ),
            (
                CheckCode::MeanFullyDevelopedDeceleration,
                "require/min_mean_fully_developed_deceleration",
                ACCELERATION,
                self.min_mean_fully_developed_deceleration,
            ),
            (
                CheckCode::PeakDecelerationMinimum,
                "require/min_peak_deceleration",
                ACCELERATION,
                self.min_peak_deceleration,
            ),
            (
                CheckCode::PeakDeceleration,
                "require/max_deceleration",
                ACCELERATION,
                self.max_deceleration,
            ),
            (
                CheckCode::BrakingRatio,
                "require/min_braking_ratio",
                Dimension::Ratio,
                self.min_braking_ratio,
            ),
        ]
    }

    fn numbers(&self) -> [(&'static str, Option<f64>); 8] {
        [
            ("max_distance", self.max_distance),
            ("max_time", self.max_time),
            ("min_mean_deceleration", self.min_mean_deceleration),
            ("min_mean_fully_developed_deceleration", self.min_mean_fully_developed_deceleration),
            ("min_peak_deceleration", self.min_peak_deceleration),
            ("max_deceleration", self.max_deceleration),
            ("min_braking_ratio", self.min_braking_ratio),
            ("min_pad_life_stops", self.min_pad_life_stops),
        ]
    }

    fn along_a_way(&self) -> impl Iterator<Item = (&'static str, Option<f64>)> {
        let turns_too = ["max_time", "min_braking_ratio", "min_pad_life_stops"];
        self.numbers().into_iter().filter(move |(member, _)| !turns_too.contains(member))
    }

    fn on_wheels(&self) -> [(&'static str, bool); 4] {
        [
            ("min_braking_ratio", self.min_braking_ratio.is_some()),
            ("no_wheel_lock", self.no_wheel_lock),
            ("front_locks_first", self.front_locks_first),
            ("no_rear_wheel_lift", self.no_rear_wheel_lift),
        ]
    }
}

/// What a brake at rest is asked to keep.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HoldLimits {
    /// What the brakes hold over what they must.
    pub min_holding_factor: f64,
}

impl Default for HoldLimits {
    fn default() -> Self {
        Self { min_holding_factor: 1.0 }
    }
}

impl HoldLimits {
    /// What is impossible about it. Members are those of the request.
    #[must_use]
    pub fn faults(&self) -> Faults {
        let mut faults = Faults::new();
        faults.positive("min_holding_factor", self.min_holding_factor.si());
        faults
    }
}
