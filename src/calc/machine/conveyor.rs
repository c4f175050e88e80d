//! Material on a belt, level or inclined.

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::motion::{Coordinate, Reduced};
use crate::calc::quantity::{Angle, Length, Mass, MomentOfInertia, STANDARD_GRAVITY, Si};

crate::method_sheet! {
    REDUCTION {
        id: "machine.conveyor",
        name: "Belt conveyor reduced to one motion",
        equation: "v = w r/i; m_e = m_mat + m_belt + J (w/v)^2; F_out = -m_mat g sin(b), times efficiency when it drives, divided by it when it resists; R = c g (m_mat cos(b) + m_belt)",
        symbols: [("v", "belt speed", "m/s"), ("w", "speed of the brake shaft", "rad/s"), ("r", "pulley radius", "m"),
            ("i", "gear ratio, brake shaft over pulley", "1"), ("m_mat", "material on the belt", "kg"),
            ("m_belt", "belt and idlers of both runs", "kg"), ("b", "incline, positive when carried uphill", "rad"),
            ("c", "resistance coefficient", "1"), ("J", "inertia at the brake shaft", "kg.m2")],
        valid: "The belt does not slip on the pulley and stays tight; one incline along the way.",
        accuracy: "Exact under these assumptions.",
        source: "Newton's second law; resistance as one coefficient, common practice, no source.",
        provenance: Memory,
        worked: "2000 kg at 10 deg uphill: gravity 3405.8 N against the motion.",
    }
}

/// A conveyor, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ConveyorParts {
    /// Material on the belt.
    pub material_mass: Mass,
    /// Belt and idlers of both runs, 0 or more.
    pub belt_mass: Mass,
    /// Positive when material is carried uphill.
    pub incline: Angle,
    /// Resistance over normal force, 0 to 1.
    pub resistance: f64,
    /// Of the driven pulley.
    pub pulley_radius: Length,
    /// Brake-shaft speed over pulley speed.
    pub gear_ratio: f64,
    /// Of the drive, in (0, 1].
    pub efficiency: f64,
    /// All that turns with the brake shaft.
    pub inertia: MomentOfInertia,
}

/// A conveyor that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Conveyor(ConveyorParts);

impl Conveyor {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: ConveyorParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("material_mass", parts.material_mass);
        faults.not_negative("belt_mass", parts.belt_mass);
        let holds = parts.incline.si().abs() < std::f64::consts::FRAC_PI_2;
        faults.require(holds, "incline", FaultCode::OutOfRange, "must be less than upright");
        let holds = (0.0..1.0).contains(&parts.resistance);
        faults.require(holds, "resistance", FaultCode::OutOfRange, "must lie between 0 and 1");
        faults.not_negative("inertia", parts.inertia);
        super::geared(
            &mut faults,
            ("pulley_radius", parts.pulley_radius),
            parts.gear_ratio,
            parts.efficiency,
        );
        faults.into_result(Self(parts))
    }

    pub(super) fn shaft_per_way(&self) -> f64 {
        self.0.gear_ratio / self.0.pulley_radius.si()
    }

    /// What gravity pulls the material back with, N; negative where it is carried downhill.
    pub(super) fn downhill_force(&self) -> f64 {
        self.0.material_mass.si() * STANDARD_GRAVITY * libm::sin(self.0.incline.si())
    }

    pub(super) fn with_load_factor(&self, factor: f64) -> Self {
        Self(ConveyorParts { material_mass: self.0.material_mass * factor, ..self.0 })
    }

    pub(super) fn reduced(&self) -> Reduced {
        let parts = &self.0;
        let per_way = self.shaft_per_way();
        let translating = parts.material_mass.si() + parts.belt_mass.si();
        let incline = parts.incline.si();
        let gravity = -self.downhill_force();
        let normal = parts.material_mass.si() * libm::cos(incline) + parts.belt_mass.si();
        Reduced {
            coordinate: Coordinate::Way,
            mass: translating + parts.inertia.si() * per_way * per_way,
            rotating: 0.0,
            translating,
            outside: super::with_efficiency(gravity, parts.efficiency),
            reversal: parts.efficiency * parts.efficiency,
            resistance: parts.resistance * STANDARD_GRAVITY * normal,
            drag: 0.0,
            tires: None,
        }
    }
}
