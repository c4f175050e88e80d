//! How a disc warms in the course of a stop.

use brakewright::calc::brake::{Brake, BrakeParts};
use brakewright::calc::disc::{Construction, Disc, DiscMaterial, DiscMaterialParts, DiscParts};
use brakewright::calc::friction::Friction;
use brakewright::calc::heat::disc_heat::{Heating, course, of_one_stop};
use brakewright::calc::lining::{Lining, LiningParts};
use brakewright::calc::pad::Pad;
use brakewright::calc::pressure::PressureDistribution;
use brakewright::calc::quantity::{
    Angle, Length, MassDensity, Si, SpecificHeatCapacity, ThermalConductivity,
    ThermodynamicTemperature, Time,
};
use brakewright::data::disc_materials::find;

use crate::support::close::{assert_close, assert_within};

const START: f64 = 293.15; // K

/// A ring of pads on both faces of a disc that thick; all heat enters the disc.
fn brake(material: DiscMaterial, thickness: f64) -> Brake {
    let metres = Length::from_si;
    let pad = Pad::annular_sector(metres(0.1), metres(0.15), Angle::from_si(std::f64::consts::TAU));
    let disc = DiscParts {
        material,
        outer_radius: metres(0.16),
        inner_radius: metres(0.09),
        thickness: metres(thickness),
        construction: Construction::Solid,
        mass: None,
        cooling: None,
    };
    let lining = LiningParts::of_friction(Friction::single(0.4).unwrap());
    Brake::new(BrakeParts {
        pad: pad.unwrap(),
        lining: Lining::new(lining).unwrap(),
        faces: 2,
        pressure_distribution: PressureDistribution::UniformWear,
        disc: Some(Disc::new(disc).unwrap()),
        actuation: None,
    })
    .unwrap()
}

fn constant_iron() -> DiscMaterial {
    let parts = DiscMaterialParts {
        density: Some(MassDensity::from_si(7200.0)),
        specific_heat: Some(SpecificHeatCapacity::from_si(500.0)),
        conductivity: Some(ThermalConductivity::from_si(48.5)),
        ..DiscMaterialParts::default()
    };
    DiscMaterial::new(parts).unwrap()
}

fn heating(energy: f64, power: &[(f64, f64)]) -> Heating<'_> {
    let start = ThermodynamicTemperature::from_si(START);
    Heating { energy, power, brakes_per_disc: 1, start }
}

/// Carslaw and Jaeger, 2nd ed., 2.9 (verified): a half-space under constant flux, T = 1.128379 q √t/b; the bulk of a
/// disc 2 m thick by hand: heat over mass and specific heat.
#[test]
#[expect(clippy::approx_constant, reason = "the published number is what is checked")]
fn a_thick_disc_warms_as_a_half_space() {
    let area = std::f64::consts::PI * (0.15 * 0.15 - 0.1 * 0.1);
    let (flux, effusivity) = (100e3 / (2.0 * area), (48.5_f64 * 7200.0 * 500.0).sqrt());
    let power = [(0.0, 100e3), (10.0, 100e3)];
    let brake = brake(constant_iron(), 2.0);
    let times = [0.1, 1.0, 4.0, 10.0].map(Time::from_si);
    let warmth = course(&brake, &heating(1e6, &power), &times).unwrap().unwrap();
    assert_eq!(warmth.len(), 4);
    for moment in warmth {
        let time = moment.time.si();
        // The published number has seven digits.
        let surface = 1.128_379 * flux * time.sqrt() / effusivity;
        assert_close(moment.surface.si() - START, surface, 1e-6);
        // A rise of some hundredths of a kelvin is left of 293 K: 1e-12 K.
        let bulk = 100e3 * time / (area * 2.0 * 7200.0 * 500.0);
        assert_within(moment.bulk.si() - START, bulk, 1e-10);
    }
}

/// The peak and the end are found on other ways in `of_one_stop`: by narrowing, and from the energy at once.
#[test]
fn the_course_runs_through_the_peak_and_ends_at_the_bulk_temperature_of_the_stop() {
    let power = [(0.0, 0.0), (0.3, 60e3), (4.0, 0.0)];
    let energy = 0.5 * 60e3 * 4.0;
    let brake = brake(find("gray_cast_iron").unwrap().material.clone(), 0.012);
    let stop = of_one_stop(&brake, &heating(energy, &power)).unwrap().unwrap();
    let even = (0..=400).map(|step| Time::from_si(f64::from(step) / 100.0));
    let times: Vec<Time> = even.chain([stop.surface_peak_time]).collect();
    let warmth = course(&brake, &heating(energy, &power), &times).unwrap().unwrap();
    let highest = warmth.iter().map(|moment| moment.surface.si()).fold(0.0, f64::max);
    assert_within(highest, stop.surface_peak_temperature.si(), 1e-9);
    assert_within(warmth[401].surface.si(), highest, 1e-9);
    assert_within(warmth[400].bulk.si() - START, stop.bulk_rise.si(), 1e-9);
    assert_within(warmth[0].surface.si(), START, 1e-12);
    let rises = warmth.windows(2).take(400).all(|pair| pair[0].bulk <= pair[1].bulk);
    assert!(rises, "the bulk cools while power acts");
}

#[test]
fn without_a_disc_there_is_no_course() {
    let bare =
        Brake::new(BrakeParts { disc: None, ..brake(constant_iron(), 0.02).parts().clone() });
    let power = [(0.0, 1e3), (1.0, 1e3)];
    assert!(course(&bare.unwrap(), &heating(1e3, &power), &[]).unwrap().is_none());
}
