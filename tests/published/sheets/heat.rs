//! Heat of one stop and of many.

use brakewright::calc::case::spec_check::descended::{DESCENT, surface_excess};
use brakewright::calc::disc::{
    Construction, Cooling, Disc, DiscMaterial, DiscMaterialParts, DiscParts,
};
use brakewright::calc::heat::air::Air;
use brakewright::calc::heat::bulk::{BULK_RISE, bulk_rise};
use brakewright::calc::heat::cooling::{
    AIRSTREAM, COOLING_SURFACE, CoolingSurface, RADIATION, ROTATING_DISC, Speeds,
    nusselt_of_airstream, nusselt_of_rotating_disc, radiation_coefficient,
};
use brakewright::calc::heat::lumped::{LUMPED_DISC, LumpedDisc};
use brakewright::calc::heat::partition::{PARTITION, SWEPT_RING, SweptRing, disc_share};
use brakewright::calc::heat::property::{ENTHALPY, SpecificEnergy, SpecificHeat};
use brakewright::calc::heat::repeated::{Interval, REPEATED_STOPS};
use brakewright::calc::heat::slab::{
    PiecewiseLinearFlux, SLAB_SURFACE, SLAB_VOLUMES, Slab, SlabStep, SlabVolumes,
    constant_flux_response,
};
use brakewright::calc::heat::substance::Substance;
use brakewright::calc::quantity::{
    Area, Energy, HeatTransfer, Length, Mass, MassDensity, PowerFlux, Si, SpecificHeatCapacity,
    ThermalConductivity, ThermodynamicTemperature, Time, ZERO_CELSIUS,
};
use brakewright::data::disc_materials::find;

use super::{Worked, worked};

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value + ZERO_CELSIUS)
}

fn substance(conductivity: f64, density: f64, specific_heat: f64) -> Substance {
    let density = MassDensity::from_si(density);
    let specific_heat = SpecificHeatCapacity::from_si(specific_heat);
    Substance::new(density, specific_heat, ThermalConductivity::from_si(conductivity)).unwrap()
}

fn constant(specific_heat: f64) -> SpecificHeat {
    SpecificHeat::constant(SpecificHeatCapacity::from_si(specific_heat)).unwrap()
}

fn disc(outer: f64, thickness: f64, coefficient: f64) -> Disc {
    let parts = DiscMaterialParts {
        catalog: None,
        density: Some(MassDensity::from_si(7200.0)),
        specific_heat: Some(SpecificHeatCapacity::from_si(500.0)),
        conductivity: Some(ThermalConductivity::from_si(48.5)),
        emissivity: None,
        max_temperature: None,
    };
    Disc::new(DiscParts {
        material: DiscMaterial::new(parts).unwrap(),
        outer_radius: Length::from_si(outer),
        inner_radius: Length::from_si(0.1),
        thickness: Length::from_si(thickness),
        construction: Construction::Solid,
        mass: None,
        cooling: Some(Cooling::Coefficient(HeatTransfer::from_si(coefficient))),
    })
    .unwrap()
}

fn ring(disc: &Disc) -> SweptRing {
    SweptRing::new(Length::from_si(0.1), disc.outer_radius(), disc).unwrap()
}

fn surface() -> CoolingSurface {
    let disc = disc(0.15, 0.02, 25.0);
    CoolingSurface::new(&disc, &ring(&disc), 2, celsius(20.0)).unwrap()
}

/// Rises above ambient: just after the ninth stop and, once steady, just after a stop.
fn repeated() -> (f64, f64) {
    const STILL: Speeds = Speeds { shaft: 0.0, way: 0.0 };
    let (surface, heat) = (surface(), constant(500.0));
    let mass = 700.0 * surface.area() * 25.0 / 500.0;
    let disc = LumpedDisc { mass, specific_heat: &heat, cooling: Some(surface) };
    // Too short for any cooling during the stop.
    let instant = 1e-8;
    let power = 60.0 * mass * 500.0 / instant;
    let interval = Interval {
        heating: vec![(0.0, power), (instant, power)],
        braking_speeds: STILL,
        rest: 120.0,
        resting_speeds: STILL,
    };
    let ambient = surface.ambient();
    let ninth = interval.series(&disc, ambient, Some(9), None, 9).after_count.unwrap();
    (ninth.peak - ambient, interval.steady(&disc).unwrap().peak - ambient)
}

/// Rise of the heated and the insulated face over q L/k after flux 1 until Fo 0.5, in finite volumes.
fn volumes() -> (f64, f64) {
    let mut slab = SlabVolumes::new(Length::from_si(1.0));
    let steps = 400;
    let duration = 0.5 / f64::from(steps);
    let step = SlabStep {
        duration,
        flux_at_start: 1.0,
        flux_at_end: 1.0,
        conductivity: 1.0,
        volumetric_heat: 1.0,
    };
    for _ in 0..steps {
        slab.advance(&step);
    }
    (0.5 + slab.surface(), 0.5 + slab.insulated_face())
}

fn slab_surface() -> Worked {
    let slab = Slab::new(Length::from_si(1.0), substance(1.0, 1.0, 1.0)).unwrap();
    let node = |time, flux| (Time::from_si(time), PowerFlux::from_si(flux));
    let falling = PiecewiseLinearFlux::new(&[node(0.0, 1.0), node(1.0, 0.0)]).unwrap();
    let at = |height| slab.rise_at(&falling, Time::from_si(1.0), height).si();
    let printed = [
        ("0.831876", constant_flux_response(0.5, 1.0)),
        ("0.334791", constant_flux_response(0.5, 0.0)),
        ("0.522211", at(1.0)),
        ("0.480567", at(0.0)),
    ];
    worked(&SLAB_SURFACE, &printed)
}

fn partition() -> Worked {
    let (iron, pad) = (substance(48.5, 7200.0, 500.0), substance(1.0, 2200.0, 1000.0));
    let share = |area: f64| disc_share(Area::from_si(area), Area::from_si(1.0), &pad, &iron);
    worked(&PARTITION, &[("0.8991", share(1.0)), ("0.9780", share(0.2))])
}

fn bulk() -> Worked {
    let speed = 500.0 * std::f64::consts::PI / 30.0;
    let heat = Energy::from_si(0.5 * 100.0 * 0.35 * 0.35 * speed * speed);
    let rise = bulk_rise(celsius(20.0), heat, Mass::from_si(5.0), &constant(460.0)).unwrap();
    worked(&BULK_RISE, &[("7.300885", rise.si())])
}

fn enthalpy() -> Worked {
    let steel = find("carbon_steel").unwrap().material.specific_heat();
    let end = steel.temperature_after(celsius(20.0), SpecificEnergy::from_si(200e3)).unwrap();
    worked(&ENTHALPY, &[("397.779", end.si() - ZERO_CELSIUS)])
}

fn airstream() -> Worked {
    let air = Air::at(celsius(60.0).si());
    let reynolds = 30.0 * 0.28 / air.kinematic_viscosity;
    let coefficient = nusselt_of_airstream(reynolds) * air.conductivity / 0.28;
    worked(&AIRSTREAM, &[("4.4527e5", reynolds), ("135.83", coefficient)])
}

pub(super) fn all() -> Vec<Worked> {
    let (ninth, steady) = repeated();
    let (heated, insulated) = volumes();
    let wide = disc(0.2, 0.02, 25.0);
    let radiated = radiation_coefficient(0.55, celsius(300.0).si(), celsius(20.0).si());
    vec![
        worked(&DESCENT, &[("6.667", surface_excess(1e5, 0.01, 50.0))]),
        worked(&SWEPT_RING, &[("0.0942478", ring(&wide).area().si())]),
        worked(&COOLING_SURFACE, &[("0.0973894", surface().area())]),
        worked(&ROTATING_DISC, &[("884.8", nusselt_of_rotating_disc(1e6))]),
        worked(&RADIATION, &[("11.197", radiated)]),
        worked(&LUMPED_DISC, &[("299.441188", ninth), ("380.856723", steady)]),
        worked(&REPEATED_STOPS, &[("380.856723", steady)]),
        worked(&SLAB_VOLUMES, &[("0.8319", heated), ("0.3348", insulated)]),
        slab_surface(),
        partition(),
        bulk(),
        enthalpy(),
        airstream(),
    ]
}
