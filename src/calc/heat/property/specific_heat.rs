//! Specific heat, the enthalpy that it adds up to, and the way back from enthalpy to temperature.

use super::curve::Curve;
use crate::calc::fault::Faults;
use crate::calc::quantity::{
    Energy, Mass, Si, SpecificHeatCapacity, ThermodynamicTemperature, ZERO_CELSIUS,
};
use crate::method_sheet;

/// Energy per mass, J/kg.
pub type SpecificEnergy = <Energy as std::ops::Div<Mass>>::Output;

/// Highest temperature that is looked for, K. No solid disc is near it; beyond it there is no answer.
pub const CEILING: f64 = 10_000.0;

/// Precision of a temperature found from an enthalpy, relative to the absolute temperature.
const PRECISION: f64 = 1e-13;

/// Newton steps before halving takes over; smooth ranges need four.
const NEWTON_STEPS: u32 = 12;

/// All steps; 47 halvings lead from the whole scale down to the precision.
const MOST_STEPS: u32 = NEWTON_STEPS + 50;

method_sheet! {
    ENTHALPY {
        id: "heat.enthalpy",
        name: "Enthalpy from a specific heat that changes with temperature",
        equation: "h = integral of c over T from T1 to T2; with mean values from a base T0: h = m(T2) (T2 - T0) - m(T1) (T1 - T0)",
        symbols: [
            ("h", "heat taken up per mass", "J/kg"),
            ("c", "specific heat capacity", "J/(kg.K)"),
            ("m", "mean specific heat capacity from T0 to T", "J/(kg.K)"),
            ("T1", "start temperature", "K"),
            ("T2", "end temperature", "K"),
            ("T0", "base temperature of printed mean values", "K"),
        ],
        valid: "0 K to 10000 K; outside the published range of the material c (or m) stays at its last value.",
        accuracy: "Closed integrals; the end temperature is found to 1e-9 K or better. The data decide the rest.",
        source: "Definition of enthalpy at constant pressure. The specific heats carry their own sources; formulas by ranges with a pole are those of EN 1993-1-2:2005, 3.4.1.2.",
        provenance: Seen,
        worked: "Carbon steel of EN 1993-1-2: 200 kJ/kg from 20 degC lead to 397.779 degC.",
    }
}

/// Specific heat capacity over temperature, above zero everywhere.
#[derive(Debug, Clone, PartialEq)]
pub struct SpecificHeat(Curve);

impl SpecificHeat {
    /// From a curve in J/(kg·K).
    #[must_use]
    pub const fn new(curve: Curve) -> Self {
        Self(curve)
    }

    /// The same at every temperature.
    ///
    /// # Errors
    /// A value that is not finite and above zero.
    pub fn constant(value: SpecificHeatCapacity) -> Result<Self, Faults> {
        Curve::constant(value.si()).map(Self)
    }

    /// The specific heat at a temperature; constant outside the published range.
    #[must_use]
    pub fn at(&self, temperature: ThermodynamicTemperature) -> SpecificHeatCapacity {
        SpecificHeatCapacity::from_si(self.0.at(temperature.si() - ZERO_CELSIUS))
    }

    /// The heat per mass that leads from one temperature to another, negative on the way down ([`ENTHALPY`]).
    #[must_use]
    pub fn enthalpy(
        &self,
        from: ThermodynamicTemperature,
        to: ThermodynamicTemperature,
    ) -> SpecificEnergy {
        SpecificEnergy::from_si(self.integral(to.si()) - self.integral(from.si()))
    }

    /// The temperature after `heat` per mass is taken up, or given off if negative ([`ENTHALPY`]).
    ///
    /// None if it would lie below absolute zero or above [`CEILING`], or if an input does or is NaN.
    #[must_use]
    pub fn temperature_after(
        &self,
        start: ThermodynamicTemperature,
        heat: SpecificEnergy,
    ) -> Option<ThermodynamicTemperature> {
        let start = start.si();
        let target = self.integral(start) + heat.si();
        let on_scale = (0.0..=CEILING).contains(&start);
        let reachable = (self.integral(0.0)..=self.integral(CEILING)).contains(&target);
        (on_scale && reachable).then(|| {
            // A gain of zero must leave the temperature as it is, to the last bit.
            let at_start = heat.si().abs() <= 0.0;
            let end = if at_start { start } else { self.temperature_of(target, start) };
            ThermodynamicTemperature::from_si(end)
        })
    }

    /// Newton's method in a bracket; halving where it does not settle, so that the search always ends.
    ///
    /// Own routine: the derivative of the enthalpy is the specific heat itself, which a library's
    /// bracketing search would not use, and its end must not depend on an absolute precision.
    fn temperature_of(&self, target: f64, start: f64) -> f64 {
        let (mut low, mut high) = (0.0, CEILING);
        let mut temperature = start;
        for count in 0..MOST_STEPS {
            let excess = self.integral(temperature) - target;
            if excess > 0.0 {
                high = temperature;
            } else {
                low = temperature;
            }
            let step = -excess / self.0.at(temperature - ZERO_CELSIUS);
            let next = temperature + step;
            if step.abs() <= PRECISION * temperature || high - low <= PRECISION * high {
                return next.clamp(low, high);
            }
            let newton = count < NEWTON_STEPS && next > low && next < high;
            temperature = if newton { next } else { f64::midpoint(low, high) };
        }
        temperature
    }

    fn integral(&self, kelvin: f64) -> f64 {
        self.0.integral(kelvin - ZERO_CELSIUS)
    }
}
