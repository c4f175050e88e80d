//! A number together with what it measures, for findings that compare things of any dimension.

use super::Si;

macro_rules! dimensions {
    ($($(#[$doc:meta])* $name:ident = $id:literal;)*) => {
        /// What a number measures. Dimensions that share SI units but not meaning stay apart.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum Dimension { $($(#[$doc])* $name,)* }

        impl Dimension {
            /// Every dimension.
            pub const ALL: &'static [Self] = &[$(Self::$name,)*];

            /// The identifier, as in the unit table.
            #[must_use]
            pub const fn id(self) -> &'static str {
                match self { $(Self::$name => $id,)* }
            }
        }
    };
}

dimensions! {
    /// A pure ratio.
    Ratio = "ratio";
    /// Length of a part, m.
    Length = "length";
    /// Way travelled, m; reported in other units than the length of a part.
    Travel = "travel";
    /// Area, m².
    Area = "area";
    /// Volume, m³.
    Volume = "volume";
    /// Plane angle, rad.
    Angle = "angle";
    /// Slope of the way, as an angle in rad.
    Grade = "grade";
    /// Mass, kg.
    Mass = "mass";
    /// Force, N.
    Force = "force";
    /// Pressure, Pa.
    Pressure = "pressure";
    /// Torque, N·m.
    Torque = "torque";
    /// Energy, J.
    Energy = "energy";
    /// Power, W.
    Power = "power";
    /// Speed, m/s.
    Speed = "speed";
    /// Rotational speed, rad/s.
    RotationalSpeed = "rotational_speed";
    /// Acceleration, m/s².
    Acceleration = "acceleration";
    /// Angular acceleration, rad/s².
    AngularAcceleration = "angular_acceleration";
    /// Time, s.
    Time = "time";
    /// Temperature on an absolute scale, K.
    Temperature = "temperature";
    /// Temperature difference, K.
    TemperatureDifference = "temperature_difference";
    /// Moment of inertia, kg·m².
    MomentOfInertia = "moment_of_inertia";
    /// Power per area, W/m².
    PowerFlux = "power_flux";
    /// Energy per area, J/m².
    EnergyFlux = "energy_flux";
    /// Pressure times rubbing speed, Pa·m/s.
    PressureVelocity = "pressure_velocity";
    /// Heat transfer coefficient, W/(m²·K).
    HeatTransferCoefficient = "heat_transfer_coefficient";
    /// Thermal conductivity, W/(m·K).
    ThermalConductivity = "thermal_conductivity";
    /// Specific heat capacity, J/(kg·K).
    SpecificHeat = "specific_heat";
    /// Density, kg/m³.
    Density = "density";
    /// Worn volume per friction energy, m³/J.
    SpecificWear = "specific_wear";
    /// Force per travel, N/m.
    Stiffness = "stiffness";
    /// Volume per pressure, m³/Pa.
    LineCompliance = "line_compliance";
    /// Stops per time, 1/s.
    StopFrequency = "stop_frequency";
}

/// A number of coherent SI units of a dimension.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Amount {
    /// What is measured.
    pub dimension: Dimension,
    /// How much, in the coherent SI unit.
    pub si: f64,
}

impl Amount {
    /// `quantity` seen as `dimension`. The caller vouches that they match.
    #[must_use]
    pub fn new(dimension: Dimension, quantity: impl Si) -> Self {
        Self { dimension, si: quantity.si() }
    }
}
