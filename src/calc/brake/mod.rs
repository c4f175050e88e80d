//! One brake: what rubs, on what, pressed by what.

mod bound;
mod remarks;

pub use bound::{Bound, Spot, lining_bound};
pub use remarks::{remark_lining, remark_pad};

use super::actuation::Actuation;
use super::disc::Disc;
use super::fault::{FaultCode, Faults};
use super::friction::FrictionCase;
use super::heat::partition::SweptRing;
use super::lining::Lining;
use super::pad::Pad;
use super::pressure::PressureDistribution;
use super::quantity::{Force, Length, Pressure, Si, Torque};
use super::wear;

/// A brake, as given.
#[derive(Debug, Clone, PartialEq)]
pub struct BrakeParts {
    /// One pad.
    pub pad: Pad,
    /// Its material.
    pub lining: Lining,
    /// Friction faces, 1 to 1000; one caliper with two pads has 2. With a disc 1 or 2.
    pub faces: u32,
    /// How the pressure spreads over the pad.
    pub pressure_distribution: PressureDistribution,
    /// What the pads rub on, if temperatures are wanted.
    pub disc: Option<Disc>,
    /// What presses, if forces are wanted.
    pub actuation: Option<Actuation>,
}

/// A brake that can exist.
#[derive(Debug, Clone, PartialEq)]
pub struct Brake(BrakeParts);

impl Brake {
    /// Checks that the parts fit each other.
    ///
    /// # Errors
    /// A face count out of range, or a pad that leaves its disc.
    pub fn new(parts: BrakeParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        check_faces(&mut faults, parts.faces);
        if let Some(disc) = &parts.disc {
            let is_known = parts.faces <= 2;
            faults.require(
                is_known,
                "faces",
                FaultCode::OutOfRange,
                "must be 1 or 2 with a disc; several discs are several brakes",
            );
            faults.part(
                "pad",
                SweptRing::new(parts.pad.smallest_radius(), parts.pad.largest_radius(), disc),
            );
        }
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &BrakeParts {
        &self.0
    }

    /// The same brake with its friction multiplied, as a hot lining has it.
    #[must_use]
    pub fn with_friction_factor(&self, factor: f64) -> Self {
        let lining = self.0.lining.with_friction_factor(factor);
        Self(BrakeParts { lining, ..self.0.clone() })
    }

    /// Radius at which the friction force acts.
    #[must_use]
    pub fn effective_radius(&self) -> Length {
        self.0.pressure_distribution.effective_radius(&self.0.pad)
    }

    /// Torque of the brake per clamp force, m.
    #[must_use]
    pub fn torque_per_clamp_force(&self, case: FrictionCase) -> f64 {
        f64::from(self.0.faces) * self.0.lining.friction().at(case) * self.effective_radius().si()
    }

    /// Torque of the brake at a clamp force.
    #[must_use]
    pub fn torque(&self, case: FrictionCase, clamp_force: Force) -> Torque {
        Torque::from_si(self.torque_per_clamp_force(case) * clamp_force.si())
    }

    /// Clamp force that gives a torque.
    #[must_use]
    pub fn clamp_force_for(&self, case: FrictionCase, torque: Torque) -> Force {
        Force::from_si(torque.si() / self.torque_per_clamp_force(case))
    }

    /// Highest pressure on the pad at a clamp force.
    #[must_use]
    pub fn peak_pressure(&self, clamp_force: Force) -> Pressure {
        self.0.pressure_distribution.peak_pressure(&self.0.pad, clamp_force)
    }

    /// Stops until the usable pad is worn off, if each takes `energy_per_face`, J ([`super::wear::PAD_LIFE`]).
    ///
    /// None if wear is not known or nothing wears.
    #[must_use]
    pub fn pad_life(&self, energy_per_face: f64) -> Option<f64> {
        let (wear, allowance) =
            (self.0.lining.parts().specific_wear?, self.0.pad.wear_allowance()?);
        wear::pad_life_stops(&self.0.pad, allowance, wear, energy_per_face)
    }
}

/// Demands a sensible number of friction faces.
pub(crate) fn check_faces(faults: &mut Faults, faces: u32) {
    faults.require(
        (1..=1000).contains(&faces),
        "faces",
        FaultCode::OutOfRange,
        "must lie between 1 and 1000",
    );
}
