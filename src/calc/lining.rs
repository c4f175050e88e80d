//! Linings: friction, what they bear, and how they fade and wear.

use super::fault::{FaultCode, Faults};
use super::friction::Friction;
use super::heat::substance::Substance;
use super::method::{Method, Provenance};
use super::quantity::{
    EnergyFlux, MassDensity, PowerFlux, Pressure, PressureVelocity, Si, SpecificHeatCapacity,
    SpecificWear, ThermalConductivity, ThermodynamicTemperature, Velocity,
};
use crate::method_sheet;

method_sheet! {
    FADE {
        id: "lining.fade",
        name: "Friction factor over temperature",
        equation: "mu = mu_cold f;  f = f_1 + (f_2 - f_1)(T - T_1)/(T_2 - T_1) between neighboring points, the end point's f outside",
        symbols: [
            ("mu", "friction coefficient at the temperature T", "1"),
            ("mu_cold", "friction coefficient of the lining", "1"),
            ("f", "friction factor", "1"),
            ("T", "contact temperature", "K"),
            ("T_1, T_2", "temperatures of the points around T", "K"),
            ("f_1, f_2", "factors of these points", "1"),
        ],
        valid: "points in rising order of temperature, 0 < f <= 2; f = 1 without points",
        accuracy: "that of the points given; nothing is added beyond them",
        source: "linear interpolation of the supplier's points (common practice, no source)",
        provenance: Memory,
        worked: "factor 1 at 100 degC and 0.7 at 400 degC: 0.85 at 250 degC",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&FADE];

/// Who set a limit.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Given {
    /// The request itself: a finding points at the limit.
    Caller,
    /// A catalog row: a finding points at the row's `id`.
    Catalog,
}

/// What a lining bears at most, and who says so.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limit<Q> {
    /// The limit.
    pub value: Q,
    /// Who set it.
    pub given: Given,
}

impl<Q> Limit<Q> {
    /// A limit set by the request.
    pub const fn by_caller(value: Q) -> Self {
        Self { value, given: Given::Caller }
    }

    /// A limit set by a catalog row.
    pub const fn by_catalog(value: Q) -> Self {
        Self { value, given: Given::Catalog }
    }
}

/// A point of the friction factor over temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FadePoint {
    /// Contact temperature.
    pub temperature: ThermodynamicTemperature,
    /// Friction at that temperature over friction of the data sheet, in (0, 2].
    pub factor: f64,
}

/// Where a lining comes from.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Origin {
    /// The catalog row that it starts from.
    pub catalog_id: Option<String>,
    /// How the row's values were found.
    pub provenance: Option<Provenance>,
    /// Whether it contains asbestos.
    pub contains_asbestos: bool,
    /// The two-letter SAE J866 identification that its friction comes from.
    pub friction_code: Option<String>,
}

/// A lining before it is checked. A catalog row gives one; the caller's members replace its own.
#[derive(Debug, Clone, PartialEq)]
pub struct LiningParts {
    /// Friction coefficients.
    pub friction: Friction,
    /// Highest peak pressure.
    pub max_pressure: Option<Limit<Pressure>>,
    /// Highest rubbing speed at the pad's outer radius.
    pub max_rubbing_speed: Option<Limit<Velocity>>,
    /// Highest mean pressure times rubbing speed.
    pub max_pressure_velocity: Option<Limit<PressureVelocity>>,
    /// Highest friction power per pad area.
    pub max_power_flux: Option<Limit<PowerFlux>>,
    /// Highest friction energy per pad area and stop.
    pub max_energy_flux: Option<Limit<EnergyFlux>>,
    /// Highest temperature that may last, of the disc's bulk.
    pub max_temperature_continuous: Option<Limit<ThermodynamicTemperature>>,
    /// Highest temperature for a short time, of the rubbed surface.
    pub max_temperature_peak: Option<Limit<ThermodynamicTemperature>>,
    /// Friction factor over temperature, in rising order of temperature; none means 1 throughout.
    pub fade: Vec<FadePoint>,
    /// Worn volume per friction energy.
    pub specific_wear: Option<SpecificWear>,
    /// Thermal conductivity.
    pub conductivity: Option<ThermalConductivity>,
    /// Density.
    pub density: Option<MassDensity>,
    /// Specific heat capacity.
    pub specific_heat: Option<SpecificHeatCapacity>,
    /// Where it comes from.
    pub origin: Origin,
}

impl LiningParts {
    /// A lining of which nothing but its friction is known.
    #[must_use]
    pub fn of_friction(friction: Friction) -> Self {
        Self {
            friction,
            max_pressure: None,
            max_rubbing_speed: None,
            max_pressure_velocity: None,
            max_power_flux: None,
            max_energy_flux: None,
            max_temperature_continuous: None,
            max_temperature_peak: None,
            fade: Vec::new(),
            specific_wear: None,
            conductivity: None,
            density: None,
            specific_heat: None,
            origin: Origin::default(),
        }
    }
}

/// A lining whose parts are checked: limits and properties above 0, fade points in order.
#[derive(Debug, Clone, PartialEq)]
pub struct Lining(LiningParts);

impl Lining {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every limit or property that is not above 0 (temperatures: absolute zero), at its name; fade points
    /// out of order or with a factor outside (0, 2], at `fade/<index>/temperature` or `fade/<index>/factor`.
    pub fn new(parts: LiningParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        positive(&mut faults, "max_pressure", limit(parts.max_pressure));
        positive(&mut faults, "max_rubbing_speed", limit(parts.max_rubbing_speed));
        positive(&mut faults, "max_pressure_velocity", limit(parts.max_pressure_velocity));
        positive(&mut faults, "max_power_flux", limit(parts.max_power_flux));
        positive(&mut faults, "max_energy_flux", limit(parts.max_energy_flux));
        let (continuous, peak) = (parts.max_temperature_continuous, parts.max_temperature_peak);
        above_zero_kelvin(&mut faults, "max_temperature_continuous", limit(continuous));
        above_zero_kelvin(&mut faults, "max_temperature_peak", limit(peak));
        check_fade(&mut faults, &parts.fade);
        positive(&mut faults, "specific_wear", parts.specific_wear);
        positive(&mut faults, "conductivity", parts.conductivity);
        positive(&mut faults, "density", parts.density);
        positive(&mut faults, "specific_heat", parts.specific_heat);
        faults.into_result(Self(parts))
    }

    /// Everything known about it.
    #[must_use]
    pub const fn parts(&self) -> &LiningParts {
        &self.0
    }

    /// Friction coefficients, cold.
    #[must_use]
    pub const fn friction(&self) -> Friction {
        self.0.friction
    }

    /// The same lining with its friction multiplied.
    #[must_use]
    pub fn with_friction_factor(&self, factor: f64) -> Self {
        Self(LiningParts { friction: self.0.friction.multiplied(factor), ..self.0.clone() })
    }

    /// What conducts and stores heat in it; none if density, specific heat or conductivity is not known.
    #[must_use]
    pub fn substance(&self) -> Option<Substance> {
        let parts = &self.0;
        Some(Substance::known(parts.density?, parts.specific_heat?, parts.conductivity?))
    }

    /// The factor on friction at a contact temperature. See [`FADE`].
    #[must_use]
    pub fn fade_factor(&self, temperature: ThermodynamicTemperature) -> f64 {
        let points = &self.0.fade;
        let temperature = temperature.si();
        let above = points.partition_point(|point| point.temperature.si() <= temperature);
        match (above.checked_sub(1).and_then(|below| points.get(below)), points.get(above)) {
            (Some(below), Some(above)) => between(below, above, temperature),
            (Some(end), None) | (None, Some(end)) => end.factor,
            (None, None) => 1.0,
        }
    }
}

impl Lining {
    /// The lowest and the highest factor on friction between two temperatures.
    #[must_use]
    pub fn fade_range(
        &self,
        from: ThermodynamicTemperature,
        to: ThermodynamicTemperature,
    ) -> (f64, f64) {
        let within = |point: &&FadePoint| (from.si()..=to.si()).contains(&point.temperature.si());
        let points = self.0.fade.iter().filter(within).map(|point| point.factor);
        let ends = [self.fade_factor(from), self.fade_factor(to)];
        let range = |(low, high): (f64, f64), factor: f64| (low.min(factor), high.max(factor));
        points.chain(ends).fold((f64::INFINITY, f64::NEG_INFINITY), range)
    }
}

fn between(below: &FadePoint, above: &FadePoint, temperature: f64) -> f64 {
    let (start, end) = (below.temperature.si(), above.temperature.si());
    below.factor + (above.factor - below.factor) * ((temperature - start) / (end - start))
}

fn limit<Q>(limit: Option<Limit<Q>>) -> Option<Q> {
    limit.map(|limit| limit.value)
}

fn positive(faults: &mut Faults, member: &str, value: Option<impl Si>) {
    if let Some(value) = value {
        faults.positive(member, value);
    }
}

fn above_zero_kelvin(
    faults: &mut Faults,
    member: &str,
    temperature: Option<ThermodynamicTemperature>,
) {
    if let Some(temperature) = temperature {
        let detail = "must lie above absolute zero";
        faults.require(temperature.si() > 0.0, member, FaultCode::OutOfRange, detail);
    }
}

fn check_fade(faults: &mut Faults, points: &[FadePoint]) {
    let mut before = f64::NEG_INFINITY;
    for (index, FadePoint { temperature, factor }) in points.iter().enumerate() {
        let member = format!("fade/{index}/temperature");
        if temperature.si() > 0.0 {
            let detail = "must lie above the temperature of the point before";
            faults.require(temperature.si() > before, &member, FaultCode::NotInOrder, detail);
        } else {
            above_zero_kelvin(faults, &member, Some(*temperature));
        }
        before = temperature.si();
        let holds = *factor > 0.0 && *factor <= 2.0;
        let member = format!("fade/{index}/factor");
        let detail = "must lie above 0 and not above 2";
        faults.require(holds, &member, FaultCode::OutOfRange, detail);
    }
}
