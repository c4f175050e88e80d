//! Air pressure on a chamber.

use super::{Input, Pressing, given_not_negative, given_positive, ratios};
use crate::calc::fault::Faults;
use crate::calc::quantity::{Area, Force, Pressure, Si};

crate::method_sheet! {
    CHAIN {
        id: "actuation.pneumatic",
        name: "Air chamber to clamp force",
        equation: "F = (p A - F_ret) i eta, not below 0",
        symbols: [("p", "air pressure above the surroundings", "Pa"), ("A", "effective chamber area", "m2"),
            ("F_ret", "return spring force", "N"), ("i", "clamp force over push rod force", "1"), ("eta", "efficiency", "1"), ("F", "clamp force", "N")],
        valid: "Steady pressure; chamber area constant over the stroke.",
        accuracy: "Exact under these assumptions; efficiency and area are the caller's.",
        source: "Statics of the chamber; a chamber's type number is its effective area in square inches (from memory).",
        provenance: Memory,
        worked: "6 bar on 129 cm2, 180 N return, ratio 15, 0.93: (7740 - 180) x 15 x 0.93 = 105462 N.",
    }
}

/// An air chamber, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PneumaticParts {
    /// Effective area.
    pub chamber_area: Area,
    /// Pressure above the surroundings.
    pub air_pressure: Option<Pressure>,
    /// Most pressure that the supply gives.
    pub max_air_pressure: Option<Pressure>,
    /// Force of the return spring, 0 or more.
    pub return_spring_force: Force,
    /// Clamp force over push rod force.
    pub force_ratio: f64,
    /// In (0, 1].
    pub efficiency: f64,
}

/// An air chamber that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pneumatic(PneumaticParts);

impl Pneumatic {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: PneumaticParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("chamber_area", parts.chamber_area);
        given_not_negative(&mut faults, &[("air_pressure", parts.air_pressure)]);
        given_positive(&mut faults, &[("max_air_pressure", parts.max_air_pressure)]);
        faults.not_negative("return_spring_force", parts.return_spring_force);
        ratios(&mut faults, &[("force_ratio", parts.force_ratio)]);
        faults.efficiency("efficiency", parts.efficiency);
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &PneumaticParts {
        &self.0
    }

    fn gain(&self) -> f64 {
        self.0.force_ratio * self.0.efficiency
    }

    pub(super) fn press(&self, input: Input) -> Pressing {
        let pressure = if let Input::AirPressure(pressure) = input {
            pressure
        } else {
            Pressure::from_si(0.0)
        };
        let rod = pressure.si() * self.0.chamber_area.si() - self.0.return_spring_force.si();
        Pressing {
            air_pressure: Some(pressure),
            ..Pressing::by(Force::from_si(rod.max(0.0) * self.gain()))
        }
    }

    pub(super) fn needed(&self, clamp_force: Force) -> Pressing {
        let rod = clamp_force.si() / self.gain() + self.0.return_spring_force.si();
        let pressure = Pressure::from_si(rod / self.0.chamber_area.si());
        Pressing { air_pressure: Some(pressure), ..Pressing::by(clamp_force) }
    }
}
