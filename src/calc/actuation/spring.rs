//! Applied by a spring, released by pressure.

use std::f64::consts::PI;

use super::{Input, Pressing, given_not_negative, given_positive, ratios};
use crate::calc::fault::Faults;
use crate::calc::quantity::{Force, Length, Pressure, Si, Stiffness};

crate::method_sheet! {
    CHAIN {
        id: "actuation.spring",
        name: "Spring-applied, pressure-released brake",
        equation: "F_new = F_s i eta; F_worn = (F_s - k x_w) i eta; p_release = (F_s + k x_r) / (A eta)",
        symbols: [("F_s", "spring force with new pads", "N"), ("k", "spring rate", "N/m"), ("x_w", "spring travel lost when both pads are worn", "m"),
            ("x_r", "travel to open", "m"), ("i", "clamp force over spring force", "1"), ("eta", "efficiency", "1"), ("A", "release piston area", "m2"),
            ("F_new, F_worn", "clamp force with new, worn pads", "N")],
        valid: "Linear spring. Stopping and holding count on worn pads; pad pressure and release pressure use new pads.",
        accuracy: "Exact under these assumptions.",
        source: "Hooke's law.",
        provenance: Seen,
        worked: "800 kN/m compressed 12 mm: 9600 N new, 8000 N after 2 mm of wear travel.",
    }
}

/// A spring brake, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SpringParts {
    /// With new pads, brake applied.
    pub spring_force: Option<Force>,
    /// Force lost per travel.
    pub spring_rate: Option<Stiffness>,
    /// Spring travel lost when both pads are worn.
    pub pad_wear_travel: Option<Length>,
    /// Spring travel to open the brake.
    pub release_travel: Option<Length>,
    /// Clamp force over spring force.
    pub force_ratio: f64,
    /// In (0, 1].
    pub efficiency: f64,
    /// Of the piston that opens the brake.
    pub release_piston_diameter: Option<Length>,
    /// Most pressure that the supply gives.
    pub max_release_pressure: Option<Pressure>,
}

/// A spring brake that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spring(SpringParts);

impl Spring {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning. A spring that worn pads leave without force is an answer, not a fault.
    pub fn new(parts: SpringParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        given_positive(&mut faults, &[("spring_force", parts.spring_force)]);
        given_not_negative(&mut faults, &[("spring_rate", parts.spring_rate)]);
        given_not_negative(&mut faults, &[("pad_wear_travel", parts.pad_wear_travel)]);
        given_not_negative(&mut faults, &[("release_travel", parts.release_travel)]);
        ratios(&mut faults, &[("force_ratio", parts.force_ratio)]);
        faults.efficiency("efficiency", parts.efficiency);
        given_positive(&mut faults, &[("release_piston_diameter", parts.release_piston_diameter)]);
        given_positive(&mut faults, &[("max_release_pressure", parts.max_release_pressure)]);
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &SpringParts {
        &self.0
    }

    /// Whether the force lost by pad wear is known.
    #[must_use]
    pub const fn considers_wear(&self) -> bool {
        self.0.spring_rate.is_some() && self.0.pad_wear_travel.is_some()
    }

    /// Whether the force gained while opening is known.
    #[must_use]
    pub const fn considers_release_travel(&self) -> bool {
        self.0.spring_rate.is_some() && self.0.release_travel.is_some()
    }

    fn over(&self, travel: Option<Length>) -> f64 {
        self.0.spring_rate.map_or(0.0, Si::si) * travel.map_or(0.0, Si::si)
    }

    fn lost_by_wear(&self) -> f64 {
        self.over(self.0.pad_wear_travel)
    }

    fn gain(&self) -> f64 {
        self.0.force_ratio * self.0.efficiency
    }

    fn release_pressure(&self, spring_force: f64) -> Option<Pressure> {
        let diameter = self.0.release_piston_diameter?.si();
        let area = 0.25 * PI * diameter * diameter;
        Some(Pressure::from_si(
            (spring_force + self.over(self.0.release_travel)) / (area * self.0.efficiency),
        ))
    }

    pub(super) fn press(&self, input: Input) -> Pressing {
        let force = if let Input::SpringForce(force) = input { force.si() } else { 0.0 };
        Pressing {
            clamp_force: Force::from_si((force - self.lost_by_wear()).max(0.0) * self.gain()),
            spring_force: Some(Force::from_si(force)),
            release_pressure: self.release_pressure(force),
            ..Pressing::by(Force::from_si(force * self.gain()))
        }
    }

    pub(super) fn needed(&self, clamp_force: Force) -> Pressing {
        let force = clamp_force.si() / self.gain() + self.lost_by_wear();
        self.press(Input::SpringForce(Force::from_si(force)))
    }
}
