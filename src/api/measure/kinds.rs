//! One marker and one alias per dimension: derived descriptions read types by their name.

use super::Measure;
use crate::calc::quantity::{self, Dimension, Si};

/// What a wire quantity measures.
pub trait Kind: 'static {
    /// The dimension in the unit table.
    const DIMENSION: Dimension;
    /// The name of the schema.
    const NAME: &'static str;
    /// What it is, for the description.
    const MEANING: &'static str;
    /// The type inside the calculation.
    type Quantity: Si;
}

macro_rules! kinds {
    ($($name:ident: $quantity:ty, $meaning:literal;)*) => {
        /// Markers of the dimensions.
        pub mod kind {
            $(
                #[doc = $meaning]
                #[derive(Debug, Clone, Copy, PartialEq, Eq)]
                pub enum $name {}
            )*
        }

        $(
            impl Kind for kind::$name {
                const DIMENSION: Dimension = Dimension::$name;
                const NAME: &'static str = stringify!($name);
                const MEANING: &'static str = $meaning;
                type Quantity = $quantity;
            }

            #[doc = $meaning]
            pub type $name = Measure<kind::$name>;
        )*
    };
}

kinds! {
    Length: quantity::Length, "A length.";
    Area: quantity::Area, "An area.";
    Volume: quantity::Volume, "A volume.";
    Angle: quantity::Angle, "A plane angle.";
    Grade: quantity::Angle, "A slope: percent of rise over run, or the angle. Positive uphill in the direction of travel.";
    Mass: quantity::Mass, "A mass.";
    Force: quantity::Force, "A force.";
    Pressure: quantity::Pressure, "A pressure; of fluids and air above the surroundings.";
    Torque: quantity::Torque, "A torque.";
    Energy: quantity::Energy, "An energy.";
    Power: quantity::Power, "A power.";
    Speed: quantity::Velocity, "A speed along a line.";
    RotationalSpeed: quantity::AngularVelocity, "A rotational speed.";
    Acceleration: quantity::Acceleration, "An acceleration or deceleration; `g` is the standard acceleration of free fall.";
    AngularAcceleration: quantity::AngularAcceleration, "An angular acceleration or deceleration.";
    Time: quantity::Time, "A time.";
    Temperature: quantity::ThermodynamicTemperature, "A temperature on its scale.";
    TemperatureDifference: quantity::TemperatureInterval, "A difference of temperatures.";
    MomentOfInertia: quantity::MomentOfInertia, "A moment of inertia.";
    PowerFlux: quantity::PowerFlux, "A power per area.";
    EnergyFlux: quantity::EnergyFlux, "An energy per area.";
    PressureVelocity: quantity::PressureVelocity, "A pressure times a rubbing speed.";
    HeatTransferCoefficient: quantity::HeatTransfer, "A heat transfer coefficient.";
    ThermalConductivity: quantity::ThermalConductivity, "A thermal conductivity.";
    SpecificHeat: quantity::SpecificHeatCapacity, "A specific heat capacity.";
    Density: quantity::MassDensity, "A density.";
    SpecificWear: quantity::SpecificWear, "A worn volume per friction energy.";
    Stiffness: quantity::Stiffness, "A force per travel.";
    LineCompliance: quantity::LineCompliance, "A volume that a brake line takes up per pressure.";
    StopFrequency: quantity::Frequency, "A number of stops per time.";
}
