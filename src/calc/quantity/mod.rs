//! What is measured: dimension-checked quantities in SI base units.
//!
//! Inside the calculation every quantity is one `f64` in the coherent SI unit of its dimension
//! (m, kg, s, K, rad). Units exist only at the border (`data::units`). Inner loops may drop to
//! documented SI `f64` through [`Si`].

mod amount;

pub use amount::{Amount, Dimension};
pub use uom::si::f64::{
    Acceleration, Angle, AngularAcceleration, AngularVelocity, Area, Energy, Force, Frequency,
    HeatTransfer, Length, Mass, MassDensity, MomentOfInertia, Power, Pressure,
    SpecificHeatCapacity, TemperatureInterval, ThermalConductivity, ThermodynamicTemperature, Time,
    Torque, Velocity, Volume,
};
use uom::si::{ISQ, Quantity, SI};
use uom::typenum::{N1, N2, N3, P1, P2, P4, Z0};

/// Power per area, W/m².
pub type PowerFlux = Quantity<ISQ<Z0, P1, N3, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Energy per area, J/m².
pub type EnergyFlux = Quantity<ISQ<Z0, P1, N2, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Pressure times rubbing speed, Pa·m/s.
pub type PressureVelocity = Quantity<ISQ<Z0, P1, N3, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Worn volume per friction energy, m³/J.
pub type SpecificWear = Quantity<ISQ<P1, N1, P2, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Force per travel, N/m.
pub type Stiffness = Quantity<ISQ<Z0, P1, N2, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Volume taken up per pressure, m³/Pa.
pub type LineCompliance = Quantity<ISQ<P4, N1, P2, Z0, Z0, Z0, Z0>, SI<f64>, f64>;

/// Standard acceleration of free fall, m/s², exact by convention (CGPM 1901).
pub const STANDARD_GRAVITY: f64 = 9.806_65;

/// Zero of the Celsius scale, K, exact by definition.
pub const ZERO_CELSIUS: f64 = 273.15;

/// The bridge between a quantity and its number in the coherent SI unit.
pub trait Si: Copy {
    /// The quantity of `value` coherent SI units.
    fn from_si(value: f64) -> Self;
    /// The number of coherent SI units.
    fn si(self) -> f64;
}

impl<D: uom::si::Dimension + ?Sized> Si for Quantity<D, SI<f64>, f64> {
    fn from_si(value: f64) -> Self {
        Self { dimension: std::marker::PhantomData, units: std::marker::PhantomData, value }
    }

    fn si(self) -> f64 {
        self.value
    }
}

impl Si for f64 {
    fn from_si(value: f64) -> Self {
        value
    }

    fn si(self) -> f64 {
        self
    }
}
