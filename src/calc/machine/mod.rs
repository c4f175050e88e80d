//! Machines: vehicle, shaft, hoist and conveyor, each an adapter to one reduced motion.

pub mod conveyor;
pub mod hoist;
pub mod shaft;
pub mod vehicle;

pub use conveyor::{Conveyor, ConveyorParts};
pub use hoist::{Direction, Hoist, HoistParts};
pub use shaft::{Shaft, ShaftParts};
pub use vehicle::{Geometry, GeometryParts, Vehicle, VehicleParts};

use super::fault::{FaultCode, Faults};
use super::method::Method;
use super::motion::{Coordinate, Reduced};
use super::quantity::{Angle, Force, Length, Si};

/// What is braked.
#[derive(Debug, Clone, PartialEq)]
pub enum Machine {
    /// A vehicle on wheels.
    Vehicle(Vehicle),
    /// A turning shaft.
    Shaft(Shaft),
    /// A load on a rope.
    Hoist(Hoist),
    /// Material on a belt.
    Conveyor(Conveyor),
}

/// What surrounds a stop.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Situation {
    /// Slope, positive uphill in the direction of travel; a vehicle's only.
    pub grade: Angle,
    /// Force from outside along the way, positive driving; a vehicle's only.
    pub drive_force: Force,
    /// Which way a hoist's load moves; ignored elsewhere.
    pub direction: Direction,
}

impl Situation {
    /// On the level, without drive.
    #[must_use]
    pub fn level() -> Self {
        Self {
            grade: Angle::from_si(0.0),
            drive_force: Force::from_si(0.0),
            direction: Direction::Lowering,
        }
    }

    /// What is impossible about it. Members are those of a request.
    #[must_use]
    pub fn faults(&self) -> Faults {
        let mut faults = Faults::new();
        let holds = self.grade.si().abs() <= std::f64::consts::FRAC_PI_4 * (1.0 + 1e-12);
        faults.require(holds, "grade", FaultCode::OutOfRange, "must not be steeper than 100 %");
        faults
    }
}

impl Machine {
    /// The motion that the brakes see.
    #[must_use]
    pub fn reduced(&self, situation: &Situation) -> Reduced {
        match self {
            Self::Vehicle(vehicle) => vehicle.reduced(situation),
            Self::Shaft(shaft) => shaft.reduced(),
            Self::Hoist(hoist) => hoist.reduced(situation.direction),
            Self::Conveyor(conveyor) => conveyor.reduced(),
        }
    }

    /// Radians that the reference brake shaft turns per unit of the coordinate.
    ///
    /// A wheel's own rolling radius goes before the machine's.
    #[must_use]
    pub fn shaft_per_coordinate(&self, rolling_radius: Option<Length>) -> f64 {
        match self {
            Self::Vehicle(vehicle) => 1.0 / rolling_radius.unwrap_or(vehicle.rolling_radius()).si(),
            Self::Shaft(_) => 1.0,
            Self::Hoist(hoist) => hoist.shaft_per_way(),
            Self::Conveyor(conveyor) => conveyor.shaft_per_way(),
        }
    }

    /// What the coordinate measures.
    #[must_use]
    pub const fn coordinate(&self) -> Coordinate {
        match self {
            Self::Shaft(_) => Coordinate::Angle,
            Self::Vehicle(_) | Self::Hoist(_) | Self::Conveyor(_) => Coordinate::Way,
        }
    }

    /// The sheet of the reduction.
    #[must_use]
    pub const fn method(&self) -> &'static Method {
        match self {
            Self::Vehicle(_) => &vehicle::REDUCTION,
            Self::Shaft(_) => &shaft::REDUCTION,
            Self::Hoist(_) => &hoist::REDUCTION,
            Self::Conveyor(_) => &conveyor::REDUCTION,
        }
    }

    /// The vehicle, if it is one.
    #[must_use]
    pub const fn vehicle(&self) -> Option<&Vehicle> {
        match self {
            Self::Vehicle(vehicle) => Some(vehicle),
            Self::Shaft(_) | Self::Hoist(_) | Self::Conveyor(_) => None,
        }
    }
}

/// The sheets of this folder.
pub static METHODS: &[&Method] =
    &[&vehicle::REDUCTION, &shaft::REDUCTION, &hoist::REDUCTION, &conveyor::REDUCTION];

/// The torque of gravity at the shaft with the losses of the drive: they help when gravity is held back.
fn with_efficiency(gravity: f64, efficiency: f64) -> f64 {
    if gravity >= 0.0 { gravity * efficiency } else { gravity / efficiency }
}

/// Collects the faults that two machines with a geared drum share.
fn geared(faults: &mut Faults, radius: (&str, Length), gear_ratio: f64, efficiency: f64) {
    faults.positive(radius.0, radius.1);
    faults.positive("gear_ratio", gear_ratio);
    faults.efficiency("efficiency", efficiency);
}
