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

/// Heats the disc of a brake. None without a disc or its mass.
///
/// The share is taken at the start temperature, conductivity and specific heat of the slab at the mean of start and
/// end bulk temperature.
///
/// # Errors
/// A temperature beyond the scale of any material.
pub fn of_one_stop(brake: &Brake, heating: &Heating<'_>) -> Result<Option<DiscHeat>, Faults> {
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
    let rise = surface_rise(&slab, heating.power, per_power);
    let surface = heating.start.si() + rise.unwrap_or(end.si() - heating.start.si());
    if !surface.is_finite() {
        return Err(too_hot());
    }
    Ok(Some(DiscHeat {
        disc_share: share,
        bulk_rise: TemperatureInterval::from_si(end.si() - heating.start.si()),
        surface_peak_temperature: ThermodynamicTemperature::from_si(surface),
    }))
}

/// Highest rise of the surface; none if no power acts over any time.
fn surface_rise(slab: &Slab, power: &[(f64, f64)], flux_per_power: f64) -> Option<f64> {
    let node = |&(time, power): &(f64, f64)| {
        (Time::from_si(time), PowerFlux::from_si(power * flux_per_power))
    };
    let nodes: Vec<(Time, PowerFlux)> = power.iter().map(node).collect();
    let flux = PiecewiseLinearFlux::new(&nodes).ok()?;
    Some(slab.surface_peak(&flux).1.si())
}

fn too_hot() -> Faults {
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
