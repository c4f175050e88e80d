//! How large a number of each dimension may be on the wire.
//!
//! The bounds are generous by orders of magnitude: no calculation with numbers inside them loses its
//! meaning by overflow or underflow, and a slip of several powers of ten is caught. They are ours, not a source's.

use crate::calc::quantity::Dimension;

/// The accepted numbers of a dimension, in coherent SI units: 0, and what lies between the bounds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Magnitude {
    /// The coherent SI unit.
    pub unit: &'static str,
    /// The smallest magnitude that is not 0.
    pub least: f64,
    /// The largest magnitude.
    pub most: f64,
    /// Whether numbers below 0 have a meaning.
    pub signed: bool,
}

impl Magnitude {
    /// Whether `si` is accepted; NaN is not.
    #[must_use]
    pub fn contains(&self, si: f64) -> bool {
        let size = si.abs();
        let is_sized = size <= self.most && (size >= self.least || size <= 0.0);
        is_sized && (self.signed || si >= 0.0)
    }

    /// The bounds in words.
    #[must_use]
    pub fn text(&self) -> String {
        let Self { unit, least, most, signed } = self;
        let unit = if *unit == "1" { String::new() } else { format!(" {unit}") };
        let negative = if *signed { ", either sign" } else { ", not below 0" };
        format!("0, or from {least:e} to {most:e}{unit}{negative}")
    }
}

macro_rules! magnitudes {
    ($($dimension:ident: $unit:literal, $least:literal, $most:literal, $signed:literal;)*) => {
        /// The accepted numbers of a dimension.
        #[must_use]
        pub const fn of(dimension: Dimension) -> Magnitude {
            let (unit, least, most, signed) = match dimension {
                $(Dimension::$dimension => ($unit, $least, $most, $signed),)*
            };
            Magnitude { unit, least, most, signed }
        }
    };
}

magnitudes! {
    Ratio: "1", 1e-12, 1e12, true;
    Length: "m", 1e-9, 1e6, true;
    Travel: "m", 1e-9, 1e6, true;
    Area: "m2", 1e-15, 1e6, true;
    Volume: "m3", 1e-18, 1e6, true;
    Angle: "rad", 1e-9, 1e9, true;
    // Short of a right angle, where a slope has no end.
    Grade: "rad", 1e-9, 1.57, true;
    Mass: "kg", 1e-9, 1e9, true;
    Force: "N", 1e-9, 1e12, true;
    Pressure: "Pa", 1e-6, 1e12, true;
    Torque: "N.m", 1e-9, 1e12, true;
    Energy: "J", 1e-9, 1e15, true;
    Power: "W", 1e-9, 1e15, true;
    Speed: "m/s", 1e-9, 1e4, true;
    RotationalSpeed: "rad/s", 1e-9, 1e6, true;
    Acceleration: "m/s2", 1e-9, 1e6, true;
    AngularAcceleration: "rad/s2", 1e-9, 1e9, true;
    Time: "s", 1e-9, 1e9, true;
    // Absolute: there is nothing below 0 K.
    Temperature: "K", 1e-3, 1e4, false;
    TemperatureDifference: "K", 1e-9, 1e4, true;
    MomentOfInertia: "kg.m2", 1e-12, 1e12, true;
    PowerFlux: "W/m2", 1e-6, 1e15, true;
    EnergyFlux: "J/m2", 1e-6, 1e15, true;
    PressureVelocity: "Pa.m/s", 1e-6, 1e15, true;
    HeatTransferCoefficient: "W/(m2.K)", 1e-9, 1e9, true;
    ThermalConductivity: "W/(m.K)", 1e-9, 1e6, true;
    SpecificHeat: "J/(kg.K)", 1e-6, 1e9, true;
    Density: "kg/m3", 1e-9, 1e6, true;
    SpecificWear: "m3/J", 1e-24, 1.0, true;
    Stiffness: "N/m", 1e-9, 1e15, true;
    LineCompliance: "m3/Pa", 1e-24, 1.0, true;
    StopFrequency: "1/s", 1e-12, 1e3, true;
}
