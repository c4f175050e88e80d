//! What a disc is made of.

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::heat::property::{Conductivity, SpecificHeat};
use crate::calc::heat::substance::Substance;
use crate::calc::method::Provenance;
use crate::calc::quantity::{
    MassDensity, Si, SpecificHeatCapacity, ThermalConductivity, ThermodynamicTemperature,
};

/// Emissivity of a rubbed track where none is given. From memory: the order of black cast iron.
pub const DEFAULT_EMISSIVITY: f64 = 0.55;

/// The catalog row that a material is based on.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct CatalogOrigin {
    /// Identifier of the row.
    pub id: String,
    /// How the row was found.
    pub provenance: Provenance,
    /// Members still in use whose values come from memory of the source.
    pub from_memory: Vec<String>,
}

/// What a disc is made of. Proof that its numbers have a physical meaning.
#[derive(Debug, Clone, PartialEq)]
pub struct DiscMaterial {
    /// Mass per volume.
    pub(crate) density: MassDensity,
    /// Specific heat capacity over temperature.
    pub(crate) specific_heat: SpecificHeat,
    /// Thermal conductivity over temperature.
    pub(crate) conductivity: Conductivity,
    /// Share of black-body radiation, in (0, 1]; none: [`DEFAULT_EMISSIVITY`].
    pub(crate) emissivity: Option<f64>,
    /// Highest bulk temperature.
    pub(crate) max_temperature: Option<ThermodynamicTemperature>,
    /// Whether that limit is the catalog's, not the caller's.
    pub(crate) max_temperature_from_catalog: bool,
    /// The catalog row it is based on.
    pub(crate) origin: Option<CatalogOrigin>,
}

/// What a caller says of a disc's material: a catalog material, own values, or own values on top of it.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct DiscMaterialParts {
    /// The catalog material to start from.
    pub catalog: Option<DiscMaterial>,
    /// Mass per volume.
    pub density: Option<MassDensity>,
    /// Specific heat capacity, the same at every temperature.
    pub specific_heat: Option<SpecificHeatCapacity>,
    /// Thermal conductivity, the same at every temperature.
    pub conductivity: Option<ThermalConductivity>,
    /// Share of black-body radiation.
    pub emissivity: Option<f64>,
    /// Highest bulk temperature.
    pub max_temperature: Option<ThermodynamicTemperature>,
}

impl DiscMaterial {
    /// The material of `parts`; a value given overrides the catalog's.
    ///
    /// # Errors
    /// All faults: a value without meaning, or one that neither the caller nor a catalog row gives.
    pub fn new(parts: DiscMaterialParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        let given = parts.own_values(&mut faults);
        if let Some(catalog) = parts.catalog {
            return faults.into_result(given.on_top_of(catalog));
        }
        for member in given.missing() {
            let detail = "is required where no catalog material is named";
            faults.add(member, FaultCode::Missing, detail);
        }
        match (given.density, given.specific_heat, given.conductivity) {
            (Some(density), Some(specific_heat), Some(conductivity)) => faults.into_result(Self {
                density,
                specific_heat,
                conductivity,
                emissivity: given.emissivity,
                max_temperature: given.max_temperature,
                max_temperature_from_catalog: false,
                origin: None,
            }),
            _ => Err(faults),
        }
    }

    /// Mass per volume.
    #[must_use]
    pub const fn density(&self) -> MassDensity {
        self.density
    }

    /// Specific heat capacity over temperature.
    #[must_use]
    pub const fn specific_heat(&self) -> &SpecificHeat {
        &self.specific_heat
    }

    /// Thermal conductivity over temperature.
    #[must_use]
    pub const fn conductivity(&self) -> &Conductivity {
        &self.conductivity
    }

    /// Share of black-body radiation; [`DEFAULT_EMISSIVITY`] if none was given.
    #[must_use]
    pub fn emissivity(&self) -> f64 {
        self.emissivity.unwrap_or(DEFAULT_EMISSIVITY)
    }

    /// Whether the emissivity is the default.
    #[must_use]
    pub const fn emissivity_is_default(&self) -> bool {
        self.emissivity.is_none()
    }

    /// Highest bulk temperature, where one is given.
    #[must_use]
    pub const fn max_temperature(&self) -> Option<ThermodynamicTemperature> {
        self.max_temperature
    }

    /// Whether [`Self::max_temperature`] is the catalog's, not the caller's.
    #[must_use]
    pub const fn max_temperature_from_catalog(&self) -> bool {
        self.max_temperature_from_catalog
    }

    /// The catalog row that the material is based on.
    #[must_use]
    pub const fn origin(&self) -> Option<&CatalogOrigin> {
        self.origin.as_ref()
    }

    /// Its properties at one temperature.
    #[must_use]
    pub fn substance_at(&self, temperature: ThermodynamicTemperature) -> Substance {
        let specific_heat = self.specific_heat.at(temperature);
        Substance::known(self.density, specific_heat, self.conductivity.at(temperature))
    }
}

/// The caller's values that have a meaning.
struct Given {
    density: Option<MassDensity>,
    specific_heat: Option<SpecificHeat>,
    conductivity: Option<Conductivity>,
    emissivity: Option<f64>,
    max_temperature: Option<ThermodynamicTemperature>,
    absent: Vec<&'static str>,
}

impl DiscMaterialParts {
    fn own_values(&self, faults: &mut Faults) -> Given {
        if let Some(density) = self.density {
            faults.positive("density", density);
        }
        if let Some(emissivity) = self.emissivity {
            faults.efficiency("emissivity", emissivity);
        }
        if let Some(limit) = self.max_temperature {
            let detail = "must lie above absolute zero";
            faults.require(limit.si() > 0.0, "max_temperature", FaultCode::OutOfRange, detail);
        }
        let specific_heat = self.specific_heat.map(SpecificHeat::constant);
        let conductivity = self.conductivity.map(Conductivity::constant);
        Given {
            density: self.density,
            specific_heat: specific_heat.and_then(|value| faults.part("specific_heat", value)),
            conductivity: conductivity.and_then(|value| faults.part("conductivity", value)),
            emissivity: self.emissivity,
            max_temperature: self.max_temperature,
            absent: self.absent(),
        }
    }

    fn absent(&self) -> Vec<&'static str> {
        [
            ("density", self.density.is_none()),
            ("specific_heat", self.specific_heat.is_none()),
            ("conductivity", self.conductivity.is_none()),
            ("emissivity", self.emissivity.is_none()),
            ("max_temperature", self.max_temperature.is_none()),
        ]
        .into_iter()
        .filter_map(|(member, absent)| absent.then_some(member))
        .collect()
    }
}

impl Given {
    fn missing(&self) -> impl Iterator<Item = &'static str> {
        let required = ["density", "specific_heat", "conductivity"];
        self.absent.iter().copied().filter(move |member| required.contains(member))
    }

    fn on_top_of(self, catalog: DiscMaterial) -> DiscMaterial {
        let absent = self.absent;
        let still_used = |mut origin: CatalogOrigin| {
            origin.from_memory.retain(|member| absent.contains(&member.as_str()));
            origin
        };
        let own_limit = self.max_temperature.is_some();
        DiscMaterial {
            density: self.density.unwrap_or(catalog.density),
            specific_heat: self.specific_heat.unwrap_or(catalog.specific_heat),
            conductivity: self.conductivity.unwrap_or(catalog.conductivity),
            emissivity: self.emissivity.or(catalog.emissivity),
            max_temperature: self.max_temperature.or(catalog.max_temperature),
            max_temperature_from_catalog: catalog.max_temperature_from_catalog && !own_limit,
            origin: catalog.origin.map(still_used),
        }
    }
}
