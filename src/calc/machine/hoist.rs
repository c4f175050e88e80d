//! A load on a rope, with or without counterweight.

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::motion::{Coordinate, Reduced};
use crate::calc::quantity::{Length, Mass, MomentOfInertia, STANDARD_GRAVITY, Si};

crate::method_sheet! {
    REDUCTION {
        id: "machine.hoist",
        name: "Hoist reduced to one motion",
        equation: "v = w r/(i f); m_e = m_load + m_cw + J (w/v)^2; F_out = +-(m_load - m_cw) g, times efficiency when it drives, divided by it when it resists; B = sum T n w/v",
        symbols: [("v", "load speed", "m/s"), ("w", "speed of the brake shaft", "rad/s"), ("r", "drum radius", "m"),
            ("i", "gear ratio, brake shaft over drum", "1"), ("f", "falls, rope speed over load speed", "1"),
            ("J", "inertia at the brake shaft", "kg.m2"), ("m_load", "load with hook and block", "kg"), ("m_cw", "counterweight", "kg")],
        valid: "Rope mass and rope elasticity left out.",
        accuracy: "Exact under these assumptions.",
        source: "Newton's second law; reduction of masses as in handbooks of machine design (from memory).",
        provenance: Memory,
        worked: "1000 kg at w/v = 100 rad/m lowering: 9806.65 N driving, 98.07 N.m at the shaft.",
    }
}

/// Which way the load moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Direction {
    /// Down.
    Lowering,
    /// Up.
    Raising,
}

/// A hoist, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HoistParts {
    /// Load with hook and block.
    pub load_mass: Mass,
    /// Counterweight, 0 or more; moves as fast as the load.
    pub counterweight_mass: Mass,
    /// To the middle of the rope.
    pub drum_radius: Length,
    /// Rope speed over load speed, 1 or more.
    pub falls: f64,
    /// Brake-shaft speed over drum speed.
    pub gear_ratio: f64,
    /// Of gear and rope, in (0, 1].
    pub efficiency: f64,
    /// All that turns with the brake shaft.
    pub inertia: MomentOfInertia,
}

/// A hoist that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hoist(HoistParts);

impl Hoist {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: HoistParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("load_mass", parts.load_mass);
        faults.not_negative("counterweight_mass", parts.counterweight_mass);
        let holds = (1.0..=1000.0).contains(&parts.falls);
        faults.require(holds, "falls", FaultCode::OutOfRange, "must lie between 1 and 1000");
        faults.not_negative("inertia", parts.inertia);
        super::geared(
            &mut faults,
            ("drum_radius", parts.drum_radius),
            parts.gear_ratio,
            parts.efficiency,
        );
        faults.into_result(Self(parts))
    }

    pub(super) fn shaft_per_way(&self) -> f64 {
        self.0.gear_ratio * self.0.falls / self.0.drum_radius.si()
    }

    pub(super) const fn efficiency(&self) -> f64 {
        self.0.efficiency
    }

    /// What gravity pulls down with, N; negative where the counterweight is heavier.
    pub(super) fn downward_force(&self) -> f64 {
        (self.0.load_mass.si() - self.0.counterweight_mass.si()) * STANDARD_GRAVITY
    }

    pub(super) fn with_load_factor(&self, factor: f64) -> Self {
        Self(HoistParts { load_mass: self.0.load_mass * factor, ..self.0 })
    }

    pub(super) fn reduced(&self, direction: Direction) -> Reduced {
        let parts = &self.0;
        let per_way = self.shaft_per_way();
        let translating = parts.load_mass.si() + parts.counterweight_mass.si();
        let downward = self.downward_force();
        let gravity = match direction {
            Direction::Lowering => downward,
            Direction::Raising => -downward,
        };
        Reduced {
            coordinate: Coordinate::Way,
            mass: translating + parts.inertia.si() * per_way * per_way,
            rotating: 0.0,
            translating,
            outside: super::with_efficiency(gravity, parts.efficiency),
            reversal: parts.efficiency * parts.efficiency,
            resistance: 0.0,
            drag: 0.0,
            tires: None,
        }
    }
}
