//! What a machine is put through, and the numbers behind its checks.

use super::acting::Use;
use super::require::{HoldLimits, StopLimits};
use crate::calc::case::duty_cycle::Event;
use crate::calc::friction::FrictionCase;
use crate::calc::machine::Situation;
use crate::calc::motion::{Delays, Demand};
use crate::calc::quantity::{Angle, ThermodynamicTemperature, Time};
use crate::data::procedures::ProcedureRow;
use crate::data::rules::RuleRow;

/// A duty. Speeds and distances are SI along the coordinate.
#[derive(Debug, Clone, PartialEq)]
pub struct Duty {
    /// Which brakes act; none: all.
    pub uses: Option<Vec<Use>>,
    /// Of the discs at the first torque.
    pub start_temperature: ThermodynamicTemperature,
    /// What is done.
    pub task: Task,
}

/// What is done in a duty.
#[derive(Debug, Clone, PartialEq)]
pub enum Task {
    /// One stop.
    Stop {
        /// What surrounds it.
        situation: Situation,
        /// What it is asked to do.
        demand: Demand,
        /// What it is held against.
        limits: StopLimits,
    },
    /// The same stop again and again.
    RepeatedStops {
        /// What surrounds it.
        situation: Situation,
        /// What it is asked to do.
        demand: Demand,
        /// What it is held against.
        limits: StopLimits,
        /// From the start of one to that of the next.
        interval: Time,
        /// How many; none: until nothing changes any more.
        stop_count: Option<u32>,
    },
    /// A speed held by the brakes.
    Descent {
        /// What surrounds it.
        situation: Situation,
        /// Speed.
        speed: f64,
        /// Distance.
        distance: f64,
    },
    /// At rest.
    Hold {
        /// What surrounds it.
        situation: Situation,
        /// What it is held against.
        limits: HoldLimits,
    },
    /// A published requirement.
    Rule {
        /// Its row.
        row: &'static RuleRow,
        /// The delays, if they are known.
        delays: Option<Delays>,
        /// Of the machine, m/s or rad/s, if it is known.
        max_speed: Option<f64>,
        /// What moves the control, if it is known.
        operated_by: Option<Limb>,
    },
    /// A published test cycle.
    Procedure {
        /// Its row.
        row: &'static ProcedureRow,
        /// Its events.
        events: Vec<Event>,
    },
}

/// What moves a control.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Limb {
    /// A hand.
    Hand,
    /// A foot.
    Foot,
}

impl Task {
    /// Whether it heats the brakes for the others: stops, holds and rules are judged as hot as these make them.
    #[must_use]
    pub const fn heats(&self) -> bool {
        matches!(self, Self::RepeatedStops { .. } | Self::Descent { .. } | Self::Procedure { .. })
    }
}

/// The numbers behind the checks of a duty.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct DutyNumbers {
    /// Stops, once per friction case; a rule may have several.
    pub stops: Vec<StopNumbers>,
    /// Holds; a rule may have two, facing up and down.
    pub holds: Vec<HoldNumbers>,
    /// Descents, once per friction case.
    pub descents: Vec<DescentNumbers>,
    /// Each entry that acts.
    pub fitted: Vec<FittedNumbers>,
}

/// A stop at one friction, in SI along the coordinate.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StopNumbers {
    /// Which.
    pub friction_case: FrictionCase,
    /// Whether the linings are as hot as the duties make them.
    pub hot: bool,
    /// Speed at the start.
    pub initial_speed: f64,
    /// Distance and time in all, reaction included, if the final speed is reached.
    pub total: Option<(f64, f64)>,
    /// From the first torque on.
    pub mean_deceleration: Option<f64>,
    /// Highest.
    pub peak_deceleration: Option<f64>,
    /// Energy of all brakes, J.
    pub brake_energy: Option<f64>,
}

/// A hold, along the coordinate, N or N·m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HoldNumbers {
    /// At which friction.
    pub friction_case: FrictionCase,
    /// Whether the linings are as hot as the duties make them.
    pub hot: bool,
    /// Slope, of a vehicle.
    pub grade: Option<Angle>,
    /// What must be held.
    pub needed: f64,
    /// What the brakes hold.
    pub available: f64,
}

/// A descent at one friction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DescentNumbers {
    /// Which.
    pub friction_case: FrictionCase,
    /// s.
    pub time: f64,
    /// Force that drives, N.
    pub driving: f64,
    /// Brake force at full application at the end, N.
    pub available: f64,
    /// Power of all brakes, W.
    pub power: f64,
}

impl FittedNumbers {
    /// An entry of which nothing is known yet.
    pub(super) const fn of(fitted_index: usize) -> Self {
        Self { fitted_index, peak_bulk: None, peak_surface: None, hot_factor: None }
    }
}

/// One brake of an entry in a duty.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FittedNumbers {
    /// Which entry of all fitted ones.
    pub fitted_index: usize,
    /// Highest bulk temperature of its disc, K, over the friction cases.
    pub peak_bulk: Option<f64>,
    /// Highest temperature of the rubbed surface, K.
    pub peak_surface: Option<f64>,
    /// Friction over that of the data sheet, where it was judged hot.
    pub hot_factor: Option<f64>,
}
