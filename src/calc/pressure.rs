//! How a pad presses: from clamp force to pressure and effective radius, and back.

use super::method::Method;
use super::pad::{
    OUTLINE_UNIFORM_PRESSURE, OUTLINE_UNIFORM_WEAR, Pad, PadKind, ROUND_UNIFORM_PRESSURE,
    ROUND_UNIFORM_WEAR, SECTOR_UNIFORM_PRESSURE, SECTOR_UNIFORM_WEAR,
};
use super::quantity::{Force, Length, Pressure, Si, Torque};
use crate::method_sheet;

method_sheet! {
    FRICTION_TORQUE {
        id: "friction.torque",
        name: "Friction torque of a brake",
        equation: "T = n mu F r_e;  friction force per face = mu F",
        symbols: [
            ("T", "brake torque", "N m"),
            ("n", "friction faces", "1"),
            ("mu", "friction coefficient", "1"),
            ("F", "clamp force: what one pad presses the disc with", "N"),
            ("r_e", "effective radius of the pad", "m"),
        ],
        valid: "mu in (0, 2], independent of pressure and speed within the lining's range; clean, dry, bedded pads",
        accuracy: "exact for the given friction coefficient",
        source: "Shigley, Mechanical Engineering Design, 8th/9th ed., section 16-6",
        provenance: Memory,
        worked: "2 faces, mu 0.37, 3747.75 lbf, 4.6875 in: 13 000 lbf in (Shigley, example 16-3)",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&FRICTION_TORQUE];

/// How the pressure between pad and disc depends on the radius.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default)]
pub enum PressureDistribution {
    /// Pressure times radius is constant: a run-in pad. Gives the lower torque.
    #[default]
    UniformWear,
    /// Pressure is constant: a new pad.
    UniformPressure,
}

impl PressureDistribution {
    /// Every distribution.
    pub const ALL: &'static [Self] = &[Self::UniformWear, Self::UniformPressure];

    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::UniformWear => "uniform_wear",
            Self::UniformPressure => "uniform_pressure",
        }
    }

    /// The data sheet of this distribution over a pad of that kind.
    #[must_use]
    pub const fn method(self, kind: PadKind) -> &'static Method {
        match (kind, self) {
            (PadKind::AnnularSector, Self::UniformWear) => &SECTOR_UNIFORM_WEAR,
            (PadKind::AnnularSector, Self::UniformPressure) => &SECTOR_UNIFORM_PRESSURE,
            (PadKind::Round, Self::UniformWear) => &ROUND_UNIFORM_WEAR,
            (PadKind::Round, Self::UniformPressure) => &ROUND_UNIFORM_PRESSURE,
            (PadKind::Outline, Self::UniformWear) => &OUTLINE_UNIFORM_WEAR,
            (PadKind::Outline, Self::UniformPressure) => &OUTLINE_UNIFORM_PRESSURE,
        }
    }

    /// The arm of the friction force: torque over friction force. Sheets as in [`Self::method`].
    #[must_use]
    pub fn effective_radius(self, pad: &Pad) -> Length {
        let integrals = pad.integrals();
        match self {
            Self::UniformWear => integrals.area / integrals.area_per_radius,
            Self::UniformPressure => integrals.radius_moment / integrals.area,
        }
    }

    /// The distance of the force center from the axis: where the piston must push for even pressing.
    ///
    /// Not the arm of the friction force, which is larger for every pad of some width.
    #[must_use]
    pub fn pressure_center_radius(self, pad: &Pad) -> Length {
        let integrals = pad.integrals();
        let (x, y) = match self {
            Self::UniformWear => (
                integrals.x_per_radius / integrals.area_per_radius,
                integrals.y_per_radius / integrals.area_per_radius,
            ),
            Self::UniformPressure => {
                (integrals.x_moment / integrals.area, integrals.y_moment / integrals.area)
            }
        };
        Length::from_si(libm::hypot(x.si(), y.si()))
    }

    /// The clamp force at which the peak pressure of the pad is `peak`.
    #[must_use]
    pub fn clamp_force_at_peak(self, pad: &Pad, peak: Pressure) -> Force {
        Force::from_si(peak.si() * self.force_per_peak_pressure(pad))
    }

    /// The peak pressure of the pad at a clamp force: at the smallest radius under uniform wear.
    #[must_use]
    pub fn peak_pressure(self, pad: &Pad, clamp_force: Force) -> Pressure {
        Pressure::from_si(clamp_force.si() / self.force_per_peak_pressure(pad))
    }

    /// Clamp force over peak pressure, m².
    fn force_per_peak_pressure(self, pad: &Pad) -> f64 {
        match self {
            Self::UniformWear => (pad.smallest_radius() * pad.integrals().area_per_radius).si(),
            Self::UniformPressure => pad.area().si(),
        }
    }
}

/// The clamp force over the pad's area, whatever the distribution.
#[must_use]
pub fn mean_pressure(pad: &Pad, clamp_force: Force) -> Pressure {
    clamp_force / pad.area()
}

/// The force that friction drags one face with. See [`FRICTION_TORQUE`].
#[must_use]
pub fn friction_force_per_face(coefficient: f64, clamp_force: Force) -> Force {
    coefficient * clamp_force
}

/// The torque of one face. See [`FRICTION_TORQUE`].
#[must_use]
pub fn torque_per_face(coefficient: f64, clamp_force: Force, effective_radius: Length) -> Torque {
    Torque::from_si(coefficient * clamp_force.si() * effective_radius.si())
}

/// The clamp force that gives a torque per face: the inverse of [`torque_per_face`].
#[must_use]
pub fn clamp_force_for_torque(
    coefficient: f64,
    torque_per_face: Torque,
    effective_radius: Length,
) -> Force {
    Force::from_si(torque_per_face.si() / (coefficient * effective_radius.si()))
}
