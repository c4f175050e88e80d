//! The upper limits of a brake: where each comes from, and how a value is held against it.

use super::Brake;
use crate::calc::actuation::{Actuation, Pressing};
use crate::calc::finding::{CheckCode, Comparison, Remarks, Subject};
use crate::calc::friction::FrictionCase;
use crate::calc::lining::{Given, Limit, Lining};
use crate::calc::pressure::mean_pressure;
use crate::calc::quantity::{Amount, Dimension, Force, Length, Si};

/// An upper limit of a brake.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bound {
    /// The check that holds a value against it.
    pub code: CheckCode,
    /// The input that gives it, below the brake.
    pub input: &'static str,
    /// What is held against it, as the subject of a sentence.
    pub what: &'static str,
    /// The limit.
    pub limit: Amount,
}

/// Where a value was found.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Spot {
    /// In which fitted entry; none if the request has one brake.
    pub fitted_index: Option<usize>,
    /// In which friction case, if it depends on friction.
    pub friction_case: Option<FrictionCase>,
}

impl Bound {
    fn new<Q: Si>(
        (code, input, what): (CheckCode, &'static str, &'static str),
        dimension: Dimension,
        limit: Option<Q>,
    ) -> Option<Self> {
        Some(Self { code, input, what, limit: Amount::new(dimension, limit?) })
    }

    /// A lining's limit. A catalog row stands in for the member: then its identifier is what the caller wrote.
    fn of_lining<Q: Si>(
        (code, input, what): (CheckCode, &'static str, &'static str),
        dimension: Dimension,
        limit: Option<Limit<Q>>,
    ) -> Option<Self> {
        let input = match limit.as_ref()?.given {
            Given::Caller => input,
            Given::Catalog => "lining/id",
        };
        Self::new((code, input, what), dimension, limit.map(|limit| limit.value))
    }

    /// Holds a value, in coherent SI units, against the limit. Temperatures count from `ambient`, K.
    pub fn hold(&self, remarks: &mut Remarks, actual: f64, spot: Spot, ambient: f64) {
        let subject = Subject::Brake { fitted_index: spot.fitted_index, input: self.input };
        let actual = Amount { dimension: self.limit.dimension, si: actual };
        let comparison = Comparison {
            code: self.code,
            subject,
            friction_case: spot.friction_case,
            actual,
            limit: self.limit,
            what: self.what,
        };
        remarks.compare(comparison, ambient);
    }
}

/// The limit of a lining that a check is about, if the lining has it.
#[must_use]
#[expect(clippy::wildcard_enum_match_arm, reason = "most checks have no limit of a lining")]
pub fn lining_bound(lining: &Lining, code: CheckCode) -> Option<Bound> {
    let parts = lining.parts();
    match code {
        CheckCode::PadPeakPressure => {
            let words = (code, "lining/max_pressure", "the peak pressure on the lining");
            Bound::of_lining(words, Dimension::Pressure, parts.max_pressure)
        }
        CheckCode::RubbingSpeed => {
            let words =
                (code, "lining/max_rubbing_speed", "the rubbing speed at the pad's outer radius");
            Bound::of_lining(words, Dimension::Speed, parts.max_rubbing_speed)
        }
        CheckCode::PressureVelocity => {
            let words = (code, "lining/max_pressure_velocity", "mean pressure times rubbing speed");
            Bound::of_lining(words, Dimension::PressureVelocity, parts.max_pressure_velocity)
        }
        CheckCode::PowerFlux => {
            let words = (code, "lining/max_power_flux", "the highest friction power per pad area");
            Bound::of_lining(words, Dimension::PowerFlux, parts.max_power_flux)
        }
        CheckCode::EnergyFlux => {
            let words = (code, "lining/max_energy_flux", "the friction energy per pad area");
            Bound::of_lining(words, Dimension::EnergyFlux, parts.max_energy_flux)
        }
        CheckCode::SurfaceTemperature => {
            let words =
                (code, "lining/max_temperature_peak", "the temperature of the rubbed surface");
            Bound::of_lining(words, Dimension::Temperature, parts.max_temperature_peak)
        }
        CheckCode::DiscBulkTemperature => {
            let words =
                (code, "lining/max_temperature_continuous", "the bulk temperature of the disc");
            Bound::of_lining(words, Dimension::Temperature, parts.max_temperature_continuous)
        }
        _ => None,
    }
}

impl Brake {
    /// The upper limit that a check is about, if the brake has it.
    #[must_use]
    #[expect(clippy::wildcard_enum_match_arm, reason = "the rest is about the lining or nothing")]
    pub fn bound(&self, code: CheckCode) -> Option<Bound> {
        match code {
            CheckCode::DiscBulkTemperature => self.bulk_bound(),
            CheckCode::LinePressure
            | CheckCode::OperatorForce
            | CheckCode::OperatorStroke
            | CheckCode::ReleasePressure
            | CheckCode::AirPressure => {
                self.0.actuation.as_ref().and_then(|chain| actuation_bound(chain, code))
            }
            _ => lining_bound(&self.0.lining, code),
        }
    }

    /// The lower of what the lining and the disc stand, of those given.
    fn bulk_bound(&self) -> Option<Bound> {
        let of_lining = lining_bound(&self.0.lining, CheckCode::DiscBulkTemperature);
        let of_disc = self.0.disc.as_ref().and_then(|disc| {
            let is_row = disc.material().max_temperature_from_catalog();
            let input = if is_row { "disc/material/id" } else { "disc/material/max_temperature" };
            let words = (CheckCode::DiscBulkTemperature, input, "the bulk temperature of the disc");
            Bound::new(words, Dimension::Temperature, disc.material().max_temperature())
        });
        let bounds = [of_lining, of_disc].into_iter().flatten();
        bounds.min_by(|one, other| one.limit.si.total_cmp(&other.limit.si))
    }

    /// Holds a value, in coherent SI units, against the limit of a check, if the brake has it.
    pub fn hold(&self, remarks: &mut Remarks, code: CheckCode, actual: Option<f64>, spot: Spot) {
        if let (Some(bound), Some(actual)) = (self.bound(code), actual) {
            bound.hold(remarks, actual, spot, 0.0);
        }
    }

    /// Holds what acts on the brake against the limits of lining and actuation.
    pub fn hold_pressing(&self, remarks: &mut Remarks, pressing: &Pressing, spot: Spot) {
        let peak = self.peak_pressure(pressing.highest_clamp_force);
        self.hold(remarks, CheckCode::PadPeakPressure, Some(peak.si()), spot);
        self.hold(remarks, CheckCode::LinePressure, pressing.line_pressure.map(Si::si), spot);
        self.hold(remarks, CheckCode::OperatorForce, pressing.operator_force.map(Si::si), spot);
        self.hold(remarks, CheckCode::AirPressure, pressing.air_pressure.map(Si::si), spot);
        self.hold(remarks, CheckCode::ReleasePressure, pressing.release_pressure.map(Si::si), spot);
    }

    /// Holds the travel of the control against its maximum.
    pub fn hold_stroke(&self, remarks: &mut Remarks, stroke: Option<Length>, spot: Spot) {
        self.hold(remarks, CheckCode::OperatorStroke, stroke.map(Si::si), spot);
    }

    /// Holds the rubbing at a shaft speed, rad/s, against the lining's limits.
    pub fn hold_rubbing(
        &self,
        remarks: &mut Remarks,
        shaft_speed: f64,
        clamp_force: Force,
        spot: Spot,
    ) {
        let outer = self.rubbing_speed(shaft_speed);
        self.hold(remarks, CheckCode::RubbingSpeed, Some(outer), spot);
        let pressure_velocity = self.pressure_velocity(shaft_speed, clamp_force);
        self.hold(remarks, CheckCode::PressureVelocity, Some(pressure_velocity), spot);
    }

    /// Rubbing speed at the pad's outer radius, m/s, at a shaft speed, rad/s.
    #[must_use]
    pub fn rubbing_speed(&self, shaft_speed: f64) -> f64 {
        shaft_speed * self.0.pad.largest_radius().si()
    }

    /// Mean pressure times rubbing speed at the effective radius, Pa·m/s, at a shaft speed, rad/s.
    #[must_use]
    pub fn pressure_velocity(&self, shaft_speed: f64, clamp_force: Force) -> f64 {
        mean_pressure(&self.0.pad, clamp_force).si() * shaft_speed * self.effective_radius().si()
    }
}

/// The maximum of an actuation that a check is about.
fn actuation_bound(chain: &Actuation, code: CheckCode) -> Option<Bound> {
    let pressure = |input, what, limit| Bound::new((code, input, what), Dimension::Pressure, limit);
    let force =
        |input, limit| Bound::new((code, input, "the operator's force"), Dimension::Force, limit);
    match (chain, code) {
        (Actuation::Hydraulic(chain), CheckCode::LinePressure) => pressure(
            "actuation/max_line_pressure",
            "the line pressure",
            chain.parts().max_line_pressure,
        ),
        (Actuation::Hydraulic(chain), CheckCode::OperatorForce) => {
            let master = chain.parts().master_cylinder?;
            force("actuation/master_cylinder/max_operator_force", master.parts().max_operator_force)
        }
        (Actuation::Hydraulic(chain), CheckCode::OperatorStroke) => {
            let words = (code, "actuation/master_cylinder/max_stroke", "the travel of the control");
            Bound::new(words, Dimension::Length, chain.parts().master_cylinder?.parts().max_stroke)
        }
        (Actuation::Cable(chain), CheckCode::OperatorForce) => {
            force("actuation/max_operator_force", chain.parts().max_operator_force)
        }
        (Actuation::Pneumatic(chain), CheckCode::AirPressure) => pressure(
            "actuation/max_air_pressure",
            "the air pressure",
            chain.parts().max_air_pressure,
        ),
        (Actuation::Spring(chain), CheckCode::ReleasePressure) => {
            let limit = chain.parts().max_release_pressure;
            pressure("actuation/max_release_pressure", "the release pressure", limit)
        }
        _ => None,
    }
}
