//! A vehicle on wheels.

use super::Situation;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::motion::{Coordinate, Reduced, Tires, Wheelbase};
use crate::calc::quantity::{Area, Length, Mass, MassDensity, STANDARD_GRAVITY, Si};

crate::method_sheet! {
    REDUCTION {
        id: "machine.vehicle",
        name: "Vehicle reduced to one motion",
        equation: "m_e = m k; F_out = -m g sin(b) - c_rr m g cos(b) - rho C_d A v^2/2 + F_drive; B = sum T n/r",
        symbols: [("m", "mass", "kg"), ("k", "rotating mass factor", "1"), ("b", "grade angle, positive uphill", "rad"),
            ("c_rr", "rolling resistance", "1"), ("rho", "air density", "kg/m3"), ("C_d A", "drag area", "m2"),
            ("T", "brake torque", "N.m"), ("n", "brake speed over wheel speed", "1"), ("r", "rolling radius", "m")],
        valid: "Straight travel, no wheel slip up to the adhesion limit.",
        accuracy: "Exact under these assumptions.",
        source: "Newton's second law; road load as in Limpert, Brake Design and Safety (from memory).",
        provenance: Memory,
        worked: "1500 kg, k 1, T 2000 N.m at r 0.3 m: B 6666.7 N, deceleration 4.444 m/s2.",
    }
}

/// Where a vehicle's weight acts, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct GeometryParts {
    /// Distance of the axles.
    pub wheelbase: Length,
    /// Height of the center of gravity above ground.
    pub center_of_gravity_height: Length,
    /// Front axle to center of gravity, along the ground.
    pub front_axle_to_center_of_gravity: Length,
}

/// Proof that the center of gravity lies above ground and between the axles.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Geometry(GeometryParts);

impl Geometry {
    /// Checks the parts.
    ///
    /// # Errors
    /// A length that is not positive, or a center of gravity that is not between the axles.
    pub fn new(parts: GeometryParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("wheelbase", parts.wheelbase);
        faults.positive("center_of_gravity_height", parts.center_of_gravity_height);
        faults.positive("front_axle_to_center_of_gravity", parts.front_axle_to_center_of_gravity);
        if faults.is_empty() {
            let is_between = parts.front_axle_to_center_of_gravity < parts.wheelbase;
            let member = "front_axle_to_center_of_gravity";
            faults.require(
                is_between,
                member,
                FaultCode::OutOfRange,
                "must be less than the wheelbase",
            );
        }
        faults.into_result(Self(parts))
    }
}

/// A vehicle, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct VehicleParts {
    /// Mass in all.
    pub mass: Mass,
    /// Rolling radius of the wheels.
    pub rolling_radius: Length,
    /// Effective mass over mass, 1 or more.
    pub rotating_mass_factor: f64,
    /// Rolling resistance over normal force, 0 to 1.
    pub rolling_resistance: f64,
    /// Drag coefficient times frontal area, 0 or more.
    pub drag_area: Area,
    /// Density of the air.
    pub air_density: MassDensity,
    /// Tire force over normal force at most; none: not considered.
    pub adhesion: Option<f64>,
    /// Where the weight acts; none: axle loads are not considered.
    pub geometry: Option<Geometry>,
}

/// A vehicle that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Vehicle(VehicleParts);

impl Vehicle {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: VehicleParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("mass", parts.mass);
        faults.positive("rolling_radius", parts.rolling_radius);
        let factor = parts.rotating_mass_factor;
        let holds = (1.0..=100.0).contains(&factor);
        faults.require(
            holds,
            "rotating_mass_factor",
            FaultCode::OutOfRange,
            "must lie between 1 and 100",
        );
        let holds = (0.0..1.0).contains(&parts.rolling_resistance);
        faults.require(
            holds,
            "rolling_resistance",
            FaultCode::OutOfRange,
            "must lie between 0 and 1",
        );
        faults.not_negative("drag_area", parts.drag_area);
        faults.positive("air_density", parts.air_density);
        let holds = parts.adhesion.is_none_or(|adhesion| adhesion > 0.0 && adhesion <= 5.0);
        faults.require(
            holds,
            "adhesion",
            FaultCode::OutOfRange,
            "must lie above 0 and not above 5",
        );
        faults.into_result(Self(parts))
    }

    /// The mass in all.
    #[must_use]
    pub const fn mass(&self) -> Mass {
        self.0.mass
    }

    /// The rolling radius of the wheels.
    #[must_use]
    pub const fn rolling_radius(&self) -> Length {
        self.0.rolling_radius
    }

    /// The adhesion, if considered.
    #[must_use]
    pub const fn adhesion(&self) -> Option<f64> {
        self.0.adhesion
    }

    /// Whether the axle loads are known.
    #[must_use]
    pub const fn has_geometry(&self) -> bool {
        self.0.geometry.is_some()
    }

    /// Where the weight acts along the vehicle and how high, if that is known.
    #[must_use]
    pub fn wheelbase(&self) -> Option<Wheelbase> {
        self.0.geometry.map(|Geometry(geometry)| Wheelbase {
            wheelbase: geometry.wheelbase.si(),
            height: geometry.center_of_gravity_height.si(),
            front: geometry.front_axle_to_center_of_gravity.si(),
        })
    }

    fn weight(&self) -> f64 {
        self.0.mass.si() * STANDARD_GRAVITY
    }

    /// The part of the weight along the slope, N, positive when it pulls backwards.
    pub(super) fn downhill_force(&self, situation: &Situation) -> f64 {
        self.weight() * libm::sin(situation.grade.si())
    }

    /// Normal force of the front (or every) and the rear axle at rest on a slope, N ([`super::HOLDING`]).
    #[must_use]
    pub fn normal_forces_at_rest(&self, situation: &Situation) -> [f64; 2] {
        let total = self.weight() * libm::cos(situation.grade.si());
        let Some(base) = self.wheelbase() else { return [total, 0.0] };
        let moment = total * base.front + base.height * self.downhill_force(situation);
        let rear = (moment / base.wheelbase).clamp(0.0, total);
        [total - rear, rear]
    }

    pub(super) fn with_load_factor(&self, factor: f64) -> Self {
        Self(VehicleParts { mass: self.0.mass * factor, ..self.0 })
    }

    pub(super) fn reduced(&self, situation: &Situation) -> Reduced {
        let parts = &self.0;
        let normal_force = self.weight() * libm::cos(situation.grade.si());
        Reduced {
            coordinate: Coordinate::Way,
            mass: parts.mass.si(),
            rotating: parts.rotating_mass_factor - 1.0,
            translating: parts.mass.si(),
            outside: situation.drive_force.si() - self.downhill_force(situation),
            reversal: 1.0,
            resistance: parts.rolling_resistance * normal_force,
            drag: 0.5 * parts.air_density.si() * parts.drag_area.si(),
            tires: Some(Tires {
                normal_force,
                adhesion: parts.adhesion,
                wheelbase: self.wheelbase(),
            }),
        }
    }
}
