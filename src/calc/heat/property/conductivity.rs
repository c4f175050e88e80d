//! Thermal conductivity.

use super::curve::Curve;
use crate::calc::fault::Faults;
use crate::calc::quantity::{Si, ThermalConductivity, ThermodynamicTemperature, ZERO_CELSIUS};

/// Thermal conductivity over temperature, above zero everywhere.
#[derive(Debug, Clone, PartialEq)]
pub struct Conductivity(Curve);

impl Conductivity {
    /// From a curve in W/(m·K).
    #[must_use]
    pub const fn new(curve: Curve) -> Self {
        Self(curve)
    }

    /// The same at every temperature.
    ///
    /// # Errors
    /// A value that is not finite and above zero.
    pub fn constant(value: ThermalConductivity) -> Result<Self, Faults> {
        Curve::constant(value.si()).map(Self)
    }

    /// The conductivity at a temperature; constant outside the published range.
    #[must_use]
    pub fn at(&self, temperature: ThermodynamicTemperature) -> ThermalConductivity {
        ThermalConductivity::from_si(self.0.at(temperature.si() - ZERO_CELSIUS))
    }
}
