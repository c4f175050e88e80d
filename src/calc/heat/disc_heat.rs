//! The heat of one stop in one disc: its share, its bulk rise, and the peak of its surface.

use super::bulk::{BULK_RISE, bulk_temperature_after, heated_depth, heated_mass};
use super::partition::{PARTITION, SWEPT_RING, SweptRing, disc_share};
use super::property::ENTHALPY;
use super::slab::{PiecewiseLinearFlux, SLAB_SURFACE, Slab};
use crate::calc::brake::Brake;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::Remarks;
use crate::calc::quantity::{
    Energy, Mass, PowerFlux, Si, TemperatureInterval, ThermodynamicTemperature, Time,
};

/// What heats a disc.
#[derive(Debug, Clone, Copy)]
pub struct Heating<'a> {
    /// Energy of one brake, J.
    pub energy: f64,
    /// Power of one brake, W, over time, s, from 0 on; straight between the nodes.
    pub power: &'a [(f64, f64)],
    /// Brakes that press the same disc.
    pub brakes_per_disc: u32,
    /// Temperature of the disc before.
    pub start: ThermodynamicTemperature,
}

/// What a stop does to a disc.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DiscHeat {
    /// Share of the friction heat that enters the disc, in (0, 1].
    pub disc_share: f64,
    /// Rise of the bulk temperature.
    pub bulk_rise: TemperatureInterval,
    /// Highest temperature of the rubbed surface.
    pub surface_peak_temperature: ThermodynamicTemperature,
    /// When, from the first power on.
    pub surface_peak_time: Time,
}

/// The ring that a brake's pads sweep and the mass that takes up its heat; none if they cannot be told.
#[must_use]
pub fn heated_ring(brake: &Brake) -> Option<(SweptRing, Mass)> {
    let disc = brake.parts().disc.as_ref()?;
    let pad = &brake.parts().pad;
    let ring = SweptRing::new(pad.smallest_radius(), pad.largest_radius(), disc).ok()?;
    let mass = heated_mass(disc, &ring)?;
    Some((ring, mass))
}

/// The disc's share of the heat, at the start temperature; 1 if the lining's thermal properties are not known.
#[must_use]
pub fn share_of(brake: &Brake, ring: &SweptRing, heating: &Heating<'_>) -> f64 {
    let parts = brake.parts();
    let (Some(disc), Some(lining)) = (&parts.disc, parts.lining.substance()) else { return 1.0 };
    let pad_area = parts.pad.area() * f64::from(heating.brakes_per_disc);
    disc_share(pad_area, ring.area(), &lining, &disc.material().substance_at(heating.start))
}

/// A disc and the heat that enters it: what its peak and its course are found from.
struct Heated {
    share: f64,
    /// Heat of all brakes on the disc, as far as it enters.
    heat: Energy,
    mass: Mass,
    /// Bulk temperature after the stop.
    end: ThermodynamicTemperature,
    slab: Slab,
    /// None if no power acts over any time.
    flux: Option<PiecewiseLinearFlux>,
}

/// The share is taken at the start temperature, conductivity and specific heat of the slab at the mean of start and
/// end bulk temperature.
fn heated(brake: &Brake, heating: &Heating<'_>) -> Result<Option<Heated>, Faults> {
    let parts = brake.parts();
    let (Some(disc), Some((ring, mass))) = (&parts.disc, heated_ring(brake)) else {
        return Ok(None);
    };
    let brakes = f64::from(heating.brakes_per_disc);
    let material = disc.material();
    let share = share_of(brake, &ring, heating);
    let heat = Energy::from_si(share * heating.energy * brakes);
    let Some(end) = bulk_temperature_after(heating.start, heat, mass, material.specific_heat())
    else {
        return Err(too_hot());
    };
    let mean = ThermodynamicTemperature::from_si(f64::midpoint(heating.start.si(), end.si()));
    let depth = heated_depth(mass, parts.faces, material.density(), ring.area());
    let slab = Slab::new(depth, material.substance_at(mean))?;
    let per_power = share * brakes / (f64::from(parts.faces) * ring.area().si());
    Ok(Some(Heated { share, heat, mass, end, slab, flux: flux(heating.power, per_power) }))
}

/// The flux into the surface; none if no power acts over any time.
fn flux(power: &[(f64, f64)], flux_per_power: f64) -> Option<PiecewiseLinearFlux> {
    let node = |&(time, power): &(f64, f64)| {
        (Time::from_si(time), PowerFlux::from_si(power * flux_per_power))
    };
    let nodes: Vec<(Time, PowerFlux)> = power.iter().map(node).collect();
    PiecewiseLinearFlux::new(&nodes).ok()
}

/// Heats the disc of a brake. None without a disc or its mass.
///
/// # Errors
/// A temperature beyond the scale of any material.
pub fn of_one_stop(brake: &Brake, heating: &Heating<'_>) -> Result<Option<DiscHeat>, Faults> {
    let Some(heated) = heated(brake, heating)? else { return Ok(None) };
    let bulk_rise = heated.end.si() - heating.start.si();
    // Without power over any time the heat is taken to have spread at once.
    let at_once = (Time::from_si(0.0), TemperatureInterval::from_si(bulk_rise));
    let peak = heated.flux.as_ref().map_or(at_once, |flux| heated.slab.surface_peak(flux));
    let surface = heating.start.si() + peak.1.si();
    if !surface.is_finite() {
        return Err(too_hot());
    }
    Ok(Some(DiscHeat {
        disc_share: heated.share,
        bulk_rise: TemperatureInterval::from_si(bulk_rise),
        surface_peak_temperature: ThermodynamicTemperature::from_si(surface),
        surface_peak_time: peak.0,
    }))
}

/// How warm a disc is at one moment of a stop.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Warmth {
    /// Since the power began.
    pub time: Time,
    /// Temperature of the bulk.
    pub bulk: ThermodynamicTemperature,
    /// Temperature of the rubbed surface.
    pub surface: ThermodynamicTemperature,
}

/// How warm the disc of a brake is at `times` from the first power on. None without a disc, its mass, or power that
/// lasts.
///
/// Bulk by enthalpy, surface by the slab as in [`of_one_stop`]: the peak and the last bulk temperature are the same.
///
/// # Errors
/// A temperature beyond the scale of any material.
pub fn course(
    brake: &Brake,
    heating: &Heating<'_>,
    times: &[Time],
) -> Result<Option<Vec<Warmth>>, Faults> {
    let (Some(heated), Some(disc)) = (heated(brake, heating)?, &brake.parts().disc) else {
        return Ok(None);
    };
    let Some(flux) = &heated.flux else { return Ok(None) };
    let specific_heat = disc.material().specific_heat();
    let whole = flux.energy_until(flux.end()).si();
    let at = |&time: &Time| {
        let share = if whole > 0.0 { flux.energy_until(time).si() / whole } else { 0.0 };
        let bulk =
            bulk_temperature_after(heating.start, heated.heat * share, heated.mass, specific_heat)?;
        let surface = heating.start.si() + heated.slab.surface_rise_at(flux, time).si();
        Some(Warmth { time, bulk, surface: ThermodynamicTemperature::from_si(surface) })
    };
    let warmth: Option<Vec<Warmth>> = times.iter().map(at).collect();
    warmth.map(Some).ok_or_else(too_hot)
}

/// The fault of a heat that no disc stands.
#[must_use]
pub fn too_hot() -> Faults {
    let mut faults = Faults::new();
    faults.add(
        "disc",
        FaultCode::OutOfRange,
        "the heat of the stop would take the disc beyond any temperature a solid has",
    );
    faults
}

/// Notes the methods behind a disc's temperatures.
pub fn note_methods(remarks: &mut Remarks, heat: &DiscHeat) {
    remarks.method(&SWEPT_RING);
    if heat.disc_share < 1.0 {
        remarks.method(&PARTITION);
    }
    remarks.method(&BULK_RISE);
    remarks.method(&ENTHALPY);
    remarks.method(&SLAB_SURFACE);
}
