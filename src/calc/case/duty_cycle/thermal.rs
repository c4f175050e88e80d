//! The temperatures of one disc, followed step by step: bulk by its heat balance, surface above it by the slab.

use crate::calc::brake::Brake;
use crate::calc::disc::DiscMaterial;
use crate::calc::fitted::Fitted;
use crate::calc::heat::air::AirTable;
use crate::calc::heat::bulk::heated_depth;
use crate::calc::heat::cooling::{CoolingSurface, HeldSurface, Speeds};
use crate::calc::heat::disc_heat::{Heating, heated_ring, share_of};
use crate::calc::heat::disc_series::cooling_surface;
use crate::calc::heat::lumped::{LumpedDisc, Stretch};
use crate::calc::heat::slab::{SlabStep, SlabVolumes};
use crate::calc::quantity::{Si, ThermodynamicTemperature};

/// The disc of one entry.
#[derive(Debug, Clone)]
pub(super) struct Thermal<'a> {
    material: &'a DiscMaterial,
    disc: LumpedDisc<'a>,
    slab: SlabVolumes,
    air: &'a AirTable,
    /// The disc's surface at the speeds of the last step.
    held: Option<HeldSurface<'a>>,
    /// Heat into the disc per power of one brake.
    into_disc: f64,
    /// Flux into each face per heat into the disc, 1/m².
    flux_per_heat: f64,
    /// K.
    bulk: f64,
    conductivity: f64,
    volumetric_heat: f64,
}

impl<'a> Thermal<'a> {
    /// None without a disc or its mass.
    pub(super) fn new(
        entry: &Fitted,
        brake: &'a Brake,
        start: ThermodynamicTemperature,
        ambient: ThermodynamicTemperature,
        air: &'a AirTable,
    ) -> Option<Self> {
        let parts = brake.parts();
        let material = parts.disc.as_ref()?.material();
        let (ring, mass) = heated_ring(brake)?;
        let brakes_per_disc = entry.parts().brakes_per_disc;
        let heating = Heating { energy: 0.0, power: &[], brakes_per_disc, start };
        let depth = heated_depth(mass, parts.faces, material.density(), ring.area());
        let cooling = cooling_surface(brake, ambient);
        let mut thermal = Self {
            material,
            disc: LumpedDisc { mass: mass.si(), specific_heat: material.specific_heat(), cooling },
            slab: SlabVolumes::new(depth),
            air,
            held: None,
            into_disc: share_of(brake, &ring, &heating) * f64::from(brakes_per_disc),
            flux_per_heat: 1.0 / (f64::from(parts.faces) * ring.area().si()),
            bulk: start.si(),
            conductivity: 0.0,
            volumetric_heat: 1.0,
        };
        thermal.hold_properties(thermal.bulk);
        Some(thermal)
    }

    /// Bulk temperature, K.
    pub(super) const fn bulk(&self) -> f64 {
        self.bulk
    }

    /// Temperature of the rubbed surface, K.
    pub(super) fn surface(&self) -> f64 {
        self.bulk + self.slab.surface()
    }

    /// How the disc cools, if that is known.
    pub(super) const fn cooling(&self) -> Option<CoolingSurface> {
        self.disc.cooling
    }

    /// Takes the slab's conductivity and heat capacity at a temperature, K, from here on.
    pub(super) fn hold_properties(&mut self, temperature: f64) {
        let substance = self.material.substance_at(ThermodynamicTemperature::from_si(temperature));
        self.conductivity = substance.conductivity().si();
        self.volumetric_heat = substance.density().si() * substance.specific_heat().si();
    }

    /// Holds the properties at the mean of the bulk temperature and that after `energy` of one brake.
    pub(super) fn expect(&mut self, energy: f64) {
        let start = ThermodynamicTemperature::from_si(self.bulk);
        let heat = crate::calc::quantity::Energy::from_si(energy * self.into_disc)
            / crate::calc::quantity::Mass::from_si(self.disc.mass);
        let end = self.disc.specific_heat.temperature_after(start, heat).map_or(self.bulk, Si::si);
        self.hold_properties(f64::midpoint(self.bulk, end));
    }

    /// Goes through a step with the power of one brake, W, linear from start to end. None if it gets too hot.
    pub(super) fn advance(
        &mut self,
        duration: f64,
        power: (f64, f64),
        speeds: Speeds,
    ) -> Option<()> {
        let [power_at_start, power_at_end] = [power.0, power.1].map(|power| power * self.into_disc);
        let stretch = Stretch { duration, power_at_start, power_at_end, speeds };
        self.hold_speeds(speeds);
        self.bulk = match &self.held {
            Some(held) => self.disc.end_on(held, self.bulk, &stretch)?,
            None => self.disc.end(self.bulk, &stretch)?,
        };
        self.slab.advance(&SlabStep {
            duration,
            flux_at_start: power_at_start * self.flux_per_heat,
            flux_at_end: power_at_end * self.flux_per_heat,
            conductivity: self.conductivity,
            volumetric_heat: self.volumetric_heat,
        });
        Some(())
    }

    /// The surface temperature, K, after a step that is not taken. None if it gets too hot.
    pub(super) fn surface_after(
        &mut self,
        duration: f64,
        power: (f64, f64),
        speeds: Speeds,
    ) -> Option<f64> {
        let (bulk, deviations) = (self.bulk, self.slab.deviations());
        let is_followed = self.advance(duration, power, speeds);
        let surface = self.surface();
        self.bulk = bulk;
        self.slab.restore(deviations);
        is_followed.map(|()| surface)
    }

    fn hold_speeds(&mut self, speeds: Speeds) {
        if self.held.is_none_or(|held| held.speeds() != speeds) {
            let at_speeds = |surface| HeldSurface::in_air(surface, speeds, self.air);
            self.held = self.disc.cooling.map(at_speeds);
        }
    }
}
