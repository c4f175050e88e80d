//! Heat of one stop against outside sources. Marks: seen, from memory, verified (from first principles).

use brakewright::calc::heat::bulk::bulk_rise;
use brakewright::calc::heat::partition::disc_share;
use brakewright::calc::heat::property::{SpecificEnergy, SpecificHeat};
use brakewright::calc::heat::slab::{PiecewiseLinearFlux, Slab, constant_flux_response};
use brakewright::calc::heat::substance::Substance;
use brakewright::calc::quantity::{
    Area, Energy, Length, Mass, MassDensity, PowerFlux, Si, SpecificHeatCapacity,
    ThermalConductivity, ThermodynamicTemperature, Time, ZERO_CELSIUS,
};
use brakewright::data::disc_materials::find;

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value + ZERO_CELSIUS)
}

fn substance(conductivity: f64, density: f64, specific_heat: f64) -> Substance {
    let specific_heat = SpecificHeatCapacity::from_si(specific_heat);
    let conductivity = ThermalConductivity::from_si(conductivity);
    Substance::new(MassDensity::from_si(density), specific_heat, conductivity).unwrap()
}

/// A slab in which time is the Fourier number and the rise is dimensionless.
fn unit_slab() -> Slab {
    Slab::new(Length::from_si(1.0), substance(1.0, 1.0, 1.0)).unwrap()
}

fn flux(nodes: &[(f64, f64)]) -> PiecewiseLinearFlux {
    let quantity = |&(time, flux): &(f64, f64)| (Time::from_si(time), PowerFlux::from_si(flux));
    PiecewiseLinearFlux::new(&nodes.iter().map(quantity).collect::<Vec<_>>()).unwrap()
}

/// Whether `found` rounds to the printed number: half a unit of its last digit, and 1e-9 for a tie.
fn prints_as(found: f64, printed: f64, decimals: i32) -> bool {
    (found - printed).abs() <= 0.5 * libm::exp10(f64::from(-decimals)) + 1e-9
}

/// EN 1993-1-2, 3.4.1.2 (formula seen); the temperature verified.
#[test]
fn two_hundred_kilojoules_per_kilogram_bring_carbon_steel_to_398_degrees() {
    let steel = find("carbon_steel").unwrap().material.specific_heat();
    let end = steel.temperature_after(celsius(20.0), SpecificEnergy::from_si(200e3)).unwrap();
    assert!(prints_as(end.si() - ZERO_CELSIUS, 397.779, 3));
    assert!(prints_as(steel.at(celsius(20.0)).si(), 439.80, 2));
}

/// EN 1561 Annex A (from memory): mean specific heat 460 J/(kg·K) from 20 to 200 °C, 535 from 20 to 600 °C.
#[test]
fn the_enthalpy_of_gray_iron_is_its_printed_mean_specific_heat_times_the_rise() {
    let iron = find("gray_cast_iron_250").unwrap().material.specific_heat();
    let enthalpy = |to: f64| iron.enthalpy(celsius(20.0), celsius(to)).si();
    // The sum of two integrals of up to 3e5 J/kg: 1e-6 J/kg is far above their rounding.
    assert!((enthalpy(200.0) - 460.0 * 180.0).abs() < 1e-6);
    assert!((enthalpy(600.0) - 535.0 * 580.0).abs() < 1e-6);
    // By hand: the mean halfway between the points is 497.5 J/(kg·K).
    assert!((enthalpy(400.0) - 497.5 * 380.0).abs() < 1e-6);
}

/// Bhandari, Design of Machine Elements, example 12.14 (seen in a worked companion): a flywheel of 100 kg,
/// radius of gyration 0.35 m, from 500 rpm; 5 kg of 460 J/(kg·K).
#[test]
fn a_flywheel_heats_its_drum_by_seven_kelvins() {
    let speed = 500.0 * std::f64::consts::PI / 30.0;
    let heat = Energy::from_si(0.5 * 100.0 * 0.35 * 0.35 * speed * speed);
    let specific_heat = SpecificHeat::constant(SpecificHeatCapacity::from_si(460.0)).unwrap();
    let rise = bulk_rise(celsius(20.0), heat, Mass::from_si(5.0), &specific_heat).unwrap();
    assert!(prints_as(rise.si(), 7.300_885, 6));
}

/// Charron's partition with coverage (from memory); sample values verified.
#[test]
fn a_pad_on_a_fifth_of_the_track_takes_two_percent_of_the_heat() {
    let (iron, lining) = (substance(48.5, 7200.0, 500.0), substance(1.0, 2200.0, 1000.0));
    let share = |pad: f64| disc_share(Area::from_si(pad), Area::from_si(0.1), &lining, &iron);
    assert!(prints_as(share(0.1), 0.8991, 4));
    assert!(prints_as(share(0.02), 0.9780, 4));
}

/// Carslaw and Jaeger, 2nd ed., 2.9 (verified): constant flux on a half-space, T = 1.128379 q √t/b.
#[test]
#[expect(clippy::approx_constant, reason = "the published number is what is checked")]
fn a_half_space_under_constant_flux_warms_with_the_root_of_time() {
    let iron = substance(48.5, 7200.0, 500.0);
    let effusivity = (48.5_f64 * 7200.0 * 500.0).sqrt();
    let deep = Slab::new(Length::from_si(10.0), iron).unwrap();
    let held = flux(&[(0.0, 2e6), (9.0, 2e6)]);
    let published = 1.128_379;
    for time in [1e-6_f64, 0.1, 4.0, 9.0] {
        let rise = deep.surface_rise_at(&held, Time::from_si(time)).si();
        let ratio = rise * effusivity / (2e6 * time.sqrt());
        assert!(prints_as(ratio, published, 6), "{ratio} at {time} s");
    }
}

/// Carslaw and Jaeger; Newcomb 1959, 1960 (verified): flux falling to zero on a half-space peaks halfway at
/// 0.5319230 = 4/(3√(2π)) q √ts/b and ends at 0.376126; after that (2q/(b√π))(2/(3ts))(t − ts)^1.5 is added.
#[test]
fn a_half_space_under_falling_flux_peaks_halfway() {
    let (end, start_flux) = (5.0_f64, 3e6);
    let effusivity = (48.5_f64 * 7200.0 * 500.0).sqrt();
    let unit = start_flux * end.sqrt() / effusivity;
    let deep = Slab::new(Length::from_si(10.0), substance(48.5, 7200.0, 500.0)).unwrap();
    let falling = flux(&[(0.0, start_flux), (end, 0.0)]);
    let (time, peak) = deep.surface_peak(&falling);
    // The peak is flat, so its time is found to the root of the rounding of its height.
    assert!((time.si() / end - 0.5).abs() < 1e-7);
    assert!(prints_as(peak.si() / unit, 0.531_923_0, 7));
    let rise = |share: f64| deep.surface_rise_at(&falling, Time::from_si(share * end)).si() / unit;
    assert!(prints_as(rise(1.0), 0.376_126, 6));
    let root = std::f64::consts::PI.sqrt();
    let without_end = 2.0 / root * 1.5_f64.sqrt() * (1.0 - 2.0 * 1.5 / 3.0);
    let after = without_end + 2.0 / root * (2.0 / 3.0) * 0.5 * 0.5_f64.sqrt();
    assert!((rise(1.5) - after).abs() < 1e-12);
}

/// Carslaw and Jaeger 3.8(3) with Duhamel (verified against a Crank–Nicolson solution to 3 or 4 digits).
/// Columns: Fourier number of the stop, time of the peak over the stop, peak, peak over bulk, over half-space.
const FALLING_FLUX: [(f64, f64, f64, f64, f64); 12] = [
    (0.05, 0.5000, 0.118_94, 4.7577, 1.0000),
    (0.1, 0.5000, 0.168_21, 3.3642, 1.0000),
    (0.2, 0.5000, 0.237_88, 2.3788, 1.0000), // printed 2.3789, but 0.23788/0.1 is 2.3788
    (0.3, 0.5012, 0.291_41, 1.9428, 1.0002),
    (0.5, 0.5191, 0.378_12, 1.5125, 1.0053),
    (0.75, 0.5854, 0.475_35, 1.2676, 1.0319),
    (1.0, 0.6696, 0.577_47, 1.154_95, 1.0856),
    (1.5, 0.7778, 0.801_85, 1.069_13, 1.2308),
    (2.0, 0.8333, 1.038_89, 1.038_89, 1.3810),
    (3.0, 0.8889, 1.525_93, 1.017_28, 1.6562),
    (5.0, 0.9333, 2.515_56, 1.006_22, 2.1150),
    (10.0, 0.9667, 5.007_78, 1.001_56, 2.9771),
];

#[test]
fn a_slab_under_falling_flux_peaks_as_published() {
    for (fourier, time, peak, over_bulk, over_half_space) in FALLING_FLUX {
        let (at, rise) = unit_slab().surface_peak(&flux(&[(0.0, 1.0), (fourier, 0.0)]));
        let (at, rise) = (at.si() / fourier, rise.si());
        assert!(prints_as(at, time, 4), "time {at} at {fourier}");
        assert!(prints_as(rise, peak, 5), "peak {rise} at {fourier}");
        let decimals = if fourier < 1.0 { 4 } else { 5 };
        let ratio = rise / (fourier / 2.0);
        assert!(prints_as(ratio, over_bulk, decimals), "over bulk {ratio} at {fourier}");
        let ratio = rise / (0.531_923_0 * fourier.sqrt());
        assert!(prints_as(ratio, over_half_space, 4), "over half-space {ratio} at {fourier}");
    }
}

/// Spot checks of the same source (verified).
#[test]
fn a_slab_warms_as_published_at_its_surface_and_its_insulated_face() {
    assert!(prints_as(constant_flux_response(0.5, 1.0), 0.831_876, 6));
    assert!(prints_as(constant_flux_response(0.5, 0.0), 0.334_791, 6));
    let falling = flux(&[(0.0, 1.0), (1.0, 0.0)]);
    let at = |height| unit_slab().rise_at(&falling, Time::from_si(1.0), height).si();
    assert!(prints_as(at(1.0), 0.522_211, 6));
    assert!(prints_as(at(0.0), 0.480_567, 6));
}

/// Long stops (verified to 1e-5 from Fs = 2): peak at 1 − 1/(3 Fs), height Fs/2 + 1/(45 Fs) + 1/(18 Fs).
#[test]
fn a_long_stop_peaks_just_before_its_end() {
    for fourier in [2.0, 4.0, 30.0, 1e3, 1e6] {
        let (at, rise) = unit_slab().surface_peak(&flux(&[(0.0, 1.0), (fourier, 0.0)]));
        let time = 1.0 - 1.0 / (3.0 * fourier);
        let height = fourier / 2.0 + (1.0 / 45.0 + 1.0 / 18.0) / fourier;
        assert!((at.si() / fourier - time).abs() < 1e-5, "{fourier}");
        assert!((rise.si() - height).abs() < 1e-5, "{} for {height}", rise.si());
    }
}
