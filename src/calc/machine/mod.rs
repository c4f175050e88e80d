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

    /// The same machine with its load multiplied: the mass of a vehicle, the load of a hoist, the material of a belt.
    /// A shaft stays as it is.
    #[must_use]
    pub fn with_load_factor(&self, factor: f64) -> Self {
        match self {
            Self::Vehicle(vehicle) => Self::Vehicle(vehicle.with_load_factor(factor)),
            Self::Shaft(shaft) => Self::Shaft(*shaft),
            Self::Hoist(hoist) => Self::Hoist(hoist.with_load_factor(factor)),
            Self::Conveyor(conveyor) => Self::Conveyor(conveyor.with_load_factor(factor)),
        }
    }

    /// The torque that hoists a load over that of gravity: the losses of a hoist's drive, 1 elsewhere.
    #[must_use]
    pub fn hoisting_over_gravity(&self) -> f64 {
        match self {
            Self::Hoist(hoist) => 1.0 / hoist.efficiency(),
            Self::Vehicle(_) | Self::Shaft(_) | Self::Conveyor(_) => 1.0,
        }
    }

    /// What must be held at rest, along the coordinate ([`HOLDING`]): resistances are not counted on.
    #[must_use]
    pub fn holding_force(&self, situation: &Situation) -> f64 {
        match self {
            Self::Vehicle(vehicle) => vehicle.downhill_force(situation).abs(),
            Self::Shaft(shaft) => shaft.driving_torque().si().abs(),
            Self::Hoist(hoist) => hoist.downward_force().abs(),
            Self::Conveyor(conveyor) => conveyor.downhill_force().abs(),
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

crate::method_sheet! {
    HOLDING {
        id: "machine.holding",
        name: "Holding at rest",
        equation: "H = m g |sin(b)|, |m_l - m_c| g, m_b g |sin(i)| or |T_drive|; holding factor = sum T n/r at low friction over H; tires: sum of min(T_i/r, mu N_i) against H, N_r = (m g cos(b) l_f + h m g sin(b))/L",
        symbols: [("H", "what must be held along the coordinate", "N or N.m"), ("m", "mass of a vehicle", "kg"), ("b", "grade angle, positive facing uphill", "rad"),
            ("m_l, m_c", "load and counterweight", "kg"), ("m_b", "material on a belt", "kg"), ("i", "incline of the belt", "rad"), ("T_drive", "driving torque of a shaft", "N.m"),
            ("T, n, r", "brake torque, its speed ratio, rolling radius", "N.m, 1, m"), ("mu", "adhesion", "1"), ("N", "normal force of an axle", "N"),
            ("l_f, h, L", "front axle to center of gravity, its height, wheelbase", "m")],
        valid: "At rest; resistances and losses of the drive are not counted on; worn springs.",
        accuracy: "Exact under these assumptions.",
        source: "Statics of a body on a slope.",
        provenance: Seen,
        worked: "1500 kg on 20 %: 2884.86 N.",
    }
}

/// The sheets of this folder.
pub static METHODS: &[&Method] =
    &[&vehicle::REDUCTION, &shaft::REDUCTION, &hoist::REDUCTION, &conveyor::REDUCTION, &HOLDING];

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
