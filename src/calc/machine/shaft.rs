//! A turning shaft.

use crate::calc::fault::Faults;
use crate::calc::motion::{Coordinate, Reduced};
use crate::calc::quantity::{MomentOfInertia, Si, Torque};

crate::method_sheet! {
    REDUCTION {
        id: "machine.shaft",
        name: "Shaft reduced to one motion",
        equation: "J dw/dt = T_drive - sum T n",
        symbols: [("J", "moment of inertia at the brake shaft", "kg.m2"), ("w", "angular speed", "rad/s"),
            ("T_drive", "driving torque, positive when it keeps the shaft turning", "N.m"), ("T", "brake torque", "N.m"),
            ("n", "brake speed over shaft speed", "1")],
        valid: "Rigid shaft, inertia referred to it.",
        accuracy: "Exact.",
        source: "Euler's equation of rotation; Hicks, Standard Handbook of Mechanical Engineering Calculations, section 24.",
        provenance: Seen,
        worked: "Wk2 200 lb.ft2 from 1800 rpm in 40 s: 29.29 lbf.ft (printed 29.2 with the rounded constant 308).",
    }
}

/// A shaft, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ShaftParts {
    /// All that turns, referred to the shaft.
    pub inertia: MomentOfInertia,
    /// Torque from outside, positive when it keeps the shaft turning.
    pub driving_torque: Torque,
}

/// A shaft that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shaft(ShaftParts);

impl Shaft {
    /// Checks the parts.
    ///
    /// # Errors
    /// An inertia that is not positive.
    pub fn new(parts: ShaftParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("inertia", parts.inertia);
        faults.into_result(Self(parts))
    }

    pub(super) const fn driving_torque(&self) -> Torque {
        self.0.driving_torque
    }

    pub(super) fn reduced(&self) -> Reduced {
        Reduced {
            coordinate: Coordinate::Angle,
            mass: self.0.inertia.si(),
            rotating: 0.0,
            translating: 0.0,
            outside: self.0.driving_torque.si(),
            reversal: 1.0,
            resistance: 0.0,
            drag: 0.0,
            tires: None,
        }
    }
}
