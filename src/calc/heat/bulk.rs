//! How warm the body of the disc becomes.

use super::partition::SweptRing;
use super::property::SpecificHeat;
use crate::calc::disc::{Construction, Disc};
use crate::calc::quantity::{
    Area, Energy, Length, Mass, MassDensity, Si, TemperatureInterval, ThermodynamicTemperature,
};
use crate::method_sheet;

method_sheet! {
    BULK_RISE {
        id: "heat.bulk_rise",
        name: "Bulk temperature rise of the swept ring",
        equation: "Q = m (h(T2) - h(T1)); m = A_swept d rho for a solid disc, else the given mass of the ring",
        symbols: [
            ("Q", "heat that enters the disc", "J"),
            ("m", "heated mass: the swept ring, both sides, without hat", "kg"),
            ("h", "specific enthalpy of the disc material", "J/kg"),
            ("T1", "bulk temperature before", "K"),
            ("T2", "bulk temperature after", "K"),
            ("A_swept", "swept area per face", "m2"),
            ("d", "thickness of the disc", "m"),
            ("rho", "density of the disc material", "kg/m3"),
        ],
        valid: "Heat spread evenly through the swept ring, none given off: one stop without cooling.",
        accuracy: "Exact for these assumptions.",
        source: "Day, Braking of Road Vehicles (2014), 8.4, eq. 8.14, with the enthalpy in place of c (T2 - T1)",
        provenance: Seen,
        worked: "A wheel of 100 kg, radius of gyration 0.35 m, stopped from 500 rpm heats 5 kg of 460 J/(kg.K) by 7.300885 K.",
    }
}

/// The mass that takes up the heat ([`BULK_RISE`]): that given, or that of the swept ring of a solid disc.
///
/// None for a ventilated disc without a given mass.
#[must_use]
pub fn heated_mass(disc: &Disc, ring: &SweptRing) -> Option<Mass> {
    let of_ring = || match disc.construction() {
        Construction::Solid => Some(ring.area() * disc.thickness() * disc.material().density()),
        Construction::Ventilated => None,
    };
    disc.mass().or_else(of_ring)
}

/// The bulk temperature after `heat` entered the mass ([`BULK_RISE`]).
///
/// None if it leaves the scale of [`SpecificHeat::temperature_after`].
#[must_use]
pub fn bulk_temperature_after(
    start: ThermodynamicTemperature,
    heat: Energy,
    mass: Mass,
    specific_heat: &SpecificHeat,
) -> Option<ThermodynamicTemperature> {
    specific_heat.temperature_after(start, heat / mass)
}

/// How much the bulk temperature rises when `heat` enters the mass ([`BULK_RISE`]).
///
/// None if the temperature leaves the scale of [`SpecificHeat::temperature_after`].
#[must_use]
pub fn bulk_rise(
    start: ThermodynamicTemperature,
    heat: Energy,
    mass: Mass,
    specific_heat: &SpecificHeat,
) -> Option<TemperatureInterval> {
    let end = bulk_temperature_after(start, heat, mass, specific_heat)?;
    Some(TemperatureInterval::from_si(end.si() - start.si()))
}

/// How deep each heated side of the disc is: the depth of a slab that holds its part of the mass.
///
/// `heated_faces` is 1 or 2; with one, the whole disc lies behind it.
#[must_use]
pub fn heated_depth(
    mass: Mass,
    heated_faces: u32,
    density: MassDensity,
    swept_area: Area,
) -> Length {
    mass / (f64::from(heated_faces) * density * swept_area)
}
