//! What conducts and stores heat: a material at one temperature.

use crate::calc::fault::Faults;
use crate::calc::quantity::{MassDensity, Si, SpecificHeatCapacity, ThermalConductivity};

/// The thermal properties of a material at one temperature, each above zero.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Substance {
    density: MassDensity,
    specific_heat: SpecificHeatCapacity,
    conductivity: ThermalConductivity,
}

impl Substance {
    /// Joins the three properties.
    ///
    /// # Errors
    /// A property that is not above zero.
    pub fn new(
        density: MassDensity,
        specific_heat: SpecificHeatCapacity,
        conductivity: ThermalConductivity,
    ) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("density", density);
        faults.positive("specific_heat", specific_heat);
        faults.positive("conductivity", conductivity);
        faults.into_result(Self { density, specific_heat, conductivity })
    }

    /// From properties that are known to be above zero.
    pub(in crate::calc) const fn known(
        density: MassDensity,
        specific_heat: SpecificHeatCapacity,
        conductivity: ThermalConductivity,
    ) -> Self {
        Self { density, specific_heat, conductivity }
    }

    /// Mass per volume.
    #[must_use]
    pub const fn density(&self) -> MassDensity {
        self.density
    }

    /// Specific heat capacity.
    #[must_use]
    pub const fn specific_heat(&self) -> SpecificHeatCapacity {
        self.specific_heat
    }

    /// Thermal conductivity.
    #[must_use]
    pub const fn conductivity(&self) -> ThermalConductivity {
        self.conductivity
    }

    /// Thermal effusivity √(kρc), W·s^½/(m²·K): half powers have no quantity type.
    pub(super) fn effusivity(&self) -> f64 {
        self.conductivity.si().sqrt() * self.density.si().sqrt() * self.specific_heat.si().sqrt()
    }

    /// Heat capacity per volume ρc, J/(m³·K).
    pub(super) fn volumetric_heat(&self) -> f64 {
        self.density.si() * self.specific_heat.si()
    }
}
