//! Published braking requirements: their parameters, each row with its source.
//!
//! The rows stand in `rules.toml`. A row's limits are separate checks, even where one formula would contradict
//! another of the same row. The requirement's own text decides.

mod formula;
mod reader;
mod resolve;

use std::sync::LazyLock;

pub use formula::Formula;
pub use reader::parse;
pub use resolve::{NotApplicable, Resolution, ResolvedStop};

use super::nearest::nearest;
use crate::calc::method::Provenance;

/// The table as text.
pub const TEXT: &str = include_str!("../rules.toml");

/// A published requirement. Numbers are SI.
#[derive(Debug, Clone, PartialEq)]
pub struct RuleRow {
    /// Identifier.
    pub id: String,
    /// Name.
    pub name: String,
    /// Where it is published, with its clause.
    pub source: String,
    /// Whether the source was read.
    pub provenance: Provenance,
    /// What it applies to, in words.
    pub category: String,
    /// The machines it applies to, at least one.
    pub machines: Vec<MachineKind>,
    /// What else belongs to it.
    pub note: Option<String>,
    /// Force of a hand on the control.
    pub hand_force: Option<ControlForce>,
    /// Force of a foot on the control.
    pub foot_force: Option<ControlForce>,
    /// What is demanded, at least one.
    pub tests: Vec<RuleTest>,
}

/// What a machine is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum MachineKind {
    /// On wheels.
    Vehicle,
    /// A turning shaft.
    Shaft,
    /// A load on a rope.
    Hoist,
    /// Material on a belt, or a circulating rope.
    Conveyor,
}

/// The force that a test may use, N.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ControlForce {
    /// What the test uses at least; no limit of the brake.
    pub least: Option<f64>,
    /// The limit.
    pub most: f64,
}

/// A demand.
#[derive(Debug, Clone, PartialEq)]
pub enum RuleTest {
    /// To stop from a speed.
    Stop(StopTest),
    /// To hold at rest.
    Hold(HoldTest),
    /// Braking force over weight of at least this, however measured: drawn by a cable, or on a roller tester.
    ForceOverWeight(f64),
}

/// To stop from a speed. Without limits the demand is that it stops.
#[derive(Debug, Clone, PartialEq)]
pub struct StopTest {
    /// Where it starts.
    pub from: FromSpeed,
    /// Applies only to machines with a maximum speed above this, m/s.
    pub max_speed_above: Option<f64>,
    /// Applies only to machines with a maximum speed of at most this, m/s.
    pub max_speed_up_to: Option<f64>,
    /// The rated load is multiplied by this, 1 if nothing is said. The counterweight stays as it is.
    pub load_factor: f64,
    /// When distance and time start to count.
    pub clock: Clock,
    /// On the distance.
    pub max_distance: Option<DistanceLimit>,
    /// The other limits.
    pub limits: StopLimits,
}

/// Limits of a stop that do not depend on its speed.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct StopLimits {
    /// s.
    pub max_time: Option<f64>,
    /// m/s².
    pub min_mean_deceleration: Option<f64>,
    /// m/s².
    pub min_mean_fully_developed_deceleration: Option<f64>,
    /// The deceleration attained at some time of the stop, m/s².
    pub min_peak_deceleration: Option<f64>,
    /// Never exceeded, m/s².
    pub max_deceleration: Option<f64>,
    /// Braking force over weight.
    pub min_braking_ratio: Option<f64>,
}

/// The speed that a stop starts from.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum FromSpeed {
    /// m/s.
    Fixed(f64),
    /// A share of the machine's maximum speed; a shaft's is in rad/s.
    ShareOfMaxSpeed {
        /// Up to 1.
        share: f64,
        /// Taken instead if it is lower, m/s.
        at_most: Option<f64>,
    },
}

/// When distance and time start to count.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Clock {
    /// When the operator starts to move the control: without reaction.
    Control,
    /// At the signal to stop: with everything that follows it.
    Signal,
}

/// The longest distance allowed.
#[derive(Debug, Clone, PartialEq)]
pub enum DistanceLimit {
    /// m.
    Fixed(f64),
    /// Depends on the speed of the test.
    Formula(Formula),
}

impl DistanceLimit {
    /// The limit from `speed`, m/s, in m.
    #[must_use]
    pub fn at(&self, speed: f64) -> f64 {
        match self {
            Self::Fixed(distance) => *distance,
            Self::Formula(formula) => formula.at(speed),
        }
    }
}

/// To hold at rest.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum HoldTest {
    /// A vehicle on a slope.
    Slope {
        /// Angle, above 0, rad.
        grade: f64,
        /// Whether it is to be held facing uphill and facing downhill.
        is_both_ways: bool,
    },
    /// What hangs on the machine or drives it.
    Load {
        /// The rated load is multiplied by this. The counterweight stays as it is: where they balance a part
        /// of the load, that is more than this factor on what the brake holds.
        load_factor: f64,
        /// Braking torque over the torque to be held.
        min_holding_factor: f64,
        /// Whether that counts from the torque that hoists the load, the losses of the drive included.
        is_of_hoisting_torque: bool,
    },
}

static ROWS: LazyLock<Vec<RuleRow>> = LazyLock::new(|| parse(TEXT).unwrap_or_default());

/// Every row, in the order of the table.
#[must_use]
pub fn all() -> &'static [RuleRow] {
    &ROWS
}

/// The row with an identifier.
#[must_use]
pub fn find(id: &str) -> Option<&'static RuleRow> {
    ROWS.iter().find(|row| row.id == id)
}

/// The identifier most like `id`, if one is much like it.
#[must_use]
pub fn closest(id: &str) -> Option<&'static str> {
    nearest(id, all().iter().map(|row| row.id.as_str()))
}
