//! The friction material.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::{
    Density, EnergyFlux, Kind, Measure, PowerFlux, Pressure, PressureVelocity, SpecificHeat,
    SpecificWear, Speed, Temperature, ThermalConductivity,
};
use crate::api::parse::{At, Reader};
use crate::calc::fault::FaultCode;
use crate::calc::friction::{Friction as Coefficients, FrictionCase};
use crate::calc::lining::{FadePoint, Limit, Lining as Material, LiningParts};
use crate::data::{friction_codes, linings};

/// A friction material: start from a catalog row (`id`), from a standard friction letter code (`friction_code`), or
/// from the supplier's sheet (`friction`). Members beside `id` override the row; `friction` does so as a whole.
#[derive(Debug, Clone, Default, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Lining {
    /// A row of `GET /v1/linings`.
    #[schema(nullable = false, example = "sintered_metal_dry")]
    pub id: Option<String>,
    /// The two-letter identification of SAE J866. The first letter gives the friction range, the second is only
    /// echoed. The code identifies; it does not rate.
    #[schema(nullable = false, example = "FF")]
    pub friction_code: Option<String>,
    /// Friction coefficients against the disc.
    #[schema(nullable = false)]
    pub friction: Option<Friction>,
    /// Highest pressure anywhere on the pad.
    #[schema(nullable = false)]
    pub max_pressure: Option<Pressure>,
    /// Highest rubbing speed at the pad's outer radius.
    #[schema(nullable = false)]
    pub max_rubbing_speed: Option<Speed>,
    /// Highest mean pressure times rubbing speed at the effective radius.
    #[schema(nullable = false)]
    pub max_pressure_velocity: Option<PressureVelocity>,
    /// Highest friction power per pad area.
    #[schema(nullable = false)]
    pub max_power_flux: Option<PowerFlux>,
    /// Highest friction energy per pad area in one stop.
    #[schema(nullable = false)]
    pub max_energy_flux: Option<EnergyFlux>,
    /// Highest temperature that may last; held against the bulk temperature of the disc.
    #[schema(nullable = false)]
    pub max_temperature_continuous: Option<Temperature>,
    /// Highest temperature for a short time; held against the temperature of the rubbed surface.
    #[schema(nullable = false)]
    pub max_temperature_peak: Option<Temperature>,
    /// Friction over temperature, as factors on the coefficients, in rising order of temperature.
    #[schema(nullable = false, max_items = 100)]
    pub fade: Option<Vec<Fade>>,
    /// Worn volume per friction energy.
    #[schema(nullable = false)]
    pub specific_wear: Option<SpecificWear>,
    /// Thermal conductivity.
    #[schema(nullable = false)]
    pub conductivity: Option<ThermalConductivity>,
    /// Density.
    #[schema(nullable = false)]
    pub density: Option<Density>,
    /// Specific heat capacity.
    #[schema(nullable = false)]
    pub specific_heat: Option<SpecificHeat>,
}

/// Friction coefficients, each above 0 and not above 2. `low` and `high` together give a range, with `nominal`
/// in the middle if it is left out; `nominal` alone is one value for all.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Friction {
    /// The lowest to count on.
    #[schema(nullable = false)]
    pub low: Option<f64>,
    /// That of the data sheet.
    #[schema(nullable = false)]
    pub nominal: Option<f64>,
    /// The highest to expect.
    #[schema(nullable = false)]
    pub high: Option<f64>,
}

/// A point of friction over temperature.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Fade {
    /// Contact temperature.
    pub temperature: Temperature,
    /// Friction there over the coefficient given, above 0 and not above 2.
    pub factor: f64,
}

impl Friction {
    fn read(self, at: &At<'_>, reader: &mut Reader) -> Option<Coefficients> {
        match (self.low, self.nominal, self.high) {
            (Some(low), nominal, Some(high)) => {
                let range = reader.take(at, Coefficients::range(low, nominal, high))?;
                reader.ratio(&at.member("nominal"), nominal, range.at(FrictionCase::Nominal));
                Some(range)
            }
            (None, Some(nominal), None) => reader.take(at, Coefficients::single(nominal)),
            (Some(_), _, None) => Self::missing(&at.member("high"), reader),
            (None, _, Some(_)) => Self::missing(&at.member("low"), reader),
            (None, None, None) => {
                reader.fault(at, FaultCode::Missing, "give nominal, or low and high");
                None
            }
        }
    }

    fn missing(at: &At<'_>, reader: &mut Reader) -> Option<Coefficients> {
        reader.fault(at, FaultCode::Missing, "a range needs both low and high");
        None
    }
}

impl Lining {
    /// The lining that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Material> {
        let friction =
            self.friction.and_then(|friction| friction.read(&at.member("friction"), reader));
        let parts = self.base(at, friction, reader);
        let mut parts = match parts {
            Some(parts) => parts,
            // Read on for the faults of the other members; the result is of no use.
            None => LiningParts::of_friction(Coefficients::single(1.0).ok()?),
        };
        self.override_limits(at, &mut parts, reader);
        self.override_properties(at, &mut parts, reader);
        reader.take(at, Material::new(parts))
    }

    /// Where the lining starts from: a row, a code or its own friction.
    fn base(
        &self,
        at: &At<'_>,
        friction: Option<Coefficients>,
        reader: &mut Reader,
    ) -> Option<LiningParts> {
        match (&self.id, &self.friction_code, self.friction.is_some()) {
            (Some(_), Some(_), _) => {
                reader.fault(
                    &at.member("friction_code"),
                    FaultCode::Conflict,
                    "give either this or id, not both",
                );
                None
            }
            (None, Some(_), true) => {
                reader.fault(
                    &at.member("friction_code"),
                    FaultCode::Conflict,
                    "give either this or friction, not both",
                );
                None
            }
            (None, None, false) => {
                reader.fault(at, FaultCode::Missing, "give id, friction_code or friction");
                None
            }
            (Some(id), None, _) => {
                let mut parts = row(&at.member("id"), id, reader)?;
                parts.friction = friction.unwrap_or(parts.friction);
                Some(parts)
            }
            (None, Some(code), false) => {
                let friction = reader
                    .take(&at.member("friction_code"), friction_codes::friction_code(code))?;
                let mut parts = LiningParts::of_friction(friction);
                parts.origin.friction_code = Some(code.clone());
                Some(parts)
            }
            (None, None, true) => friction.map(LiningParts::of_friction),
        }
    }

    fn override_limits(&self, at: &At<'_>, parts: &mut LiningParts, reader: &mut Reader) {
        limit(&at.member("max_pressure"), self.max_pressure, &mut parts.max_pressure, reader);
        limit(
            &at.member("max_rubbing_speed"),
            self.max_rubbing_speed,
            &mut parts.max_rubbing_speed,
            reader,
        );
        let member = at.member("max_pressure_velocity");
        limit(&member, self.max_pressure_velocity, &mut parts.max_pressure_velocity, reader);
        limit(&at.member("max_power_flux"), self.max_power_flux, &mut parts.max_power_flux, reader);
        limit(
            &at.member("max_energy_flux"),
            self.max_energy_flux,
            &mut parts.max_energy_flux,
            reader,
        );
        let member = at.member("max_temperature_continuous");
        limit(
            &member,
            self.max_temperature_continuous,
            &mut parts.max_temperature_continuous,
            reader,
        );
        let member = at.member("max_temperature_peak");
        limit(&member, self.max_temperature_peak, &mut parts.max_temperature_peak, reader);
    }

    fn override_properties(&self, at: &At<'_>, parts: &mut LiningParts, reader: &mut Reader) {
        if let Some(fade) = &self.fade {
            let at = at.member("fade");
            let point = |(index, point): (usize, &Fade)| FadePoint {
                temperature: reader
                    .quantity(&at.index(index).member("temperature"), &point.temperature),
                factor: point.factor,
            };
            parts.fade = fade.iter().enumerate().map(point).collect();
        }
        property(&at.member("specific_wear"), self.specific_wear, &mut parts.specific_wear, reader);
        property(&at.member("conductivity"), self.conductivity, &mut parts.conductivity, reader);
        property(&at.member("density"), self.density, &mut parts.density, reader);
        property(&at.member("specific_heat"), self.specific_heat, &mut parts.specific_heat, reader);
    }
}

fn row(at: &At<'_>, id: &str, reader: &mut Reader) -> Option<LiningParts> {
    let row = linings::find(id);
    if row.is_none() {
        let hint =
            linings::closest(id).map_or(String::new(), |near| format!("; did you mean {near}?"));
        reader.fault(at, FaultCode::UnknownId, format!("is not a row of GET /v1/linings{hint}"));
    }
    row.map(linings::LiningRow::parts)
}

fn limit<K: Kind>(
    at: &At<'_>,
    given: Option<Measure<K>>,
    limit: &mut Option<Limit<K::Quantity>>,
    reader: &mut Reader,
) {
    if let Some(given) = given {
        *limit = Some(Limit::by_caller(reader.quantity(at, &given)));
    }
}

fn property<K: Kind>(
    at: &At<'_>,
    given: Option<Measure<K>>,
    property: &mut Option<K::Quantity>,
    reader: &mut Reader,
) {
    if let Some(given) = given {
        *property = Some(reader.quantity(at, &given));
    }
}
