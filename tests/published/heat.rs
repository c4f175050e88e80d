//! Heat of one stop against outside sources. Marks: seen, from memory, verified from first principles.

use brakewright::calc::heat::property::SpecificEnergy;
use brakewright::calc::quantity::{Si, ThermodynamicTemperature, ZERO_CELSIUS};
use brakewright::data::disc_materials::find;

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value + ZERO_CELSIUS)
}

/// EN 1993-1-2, 3.4.1.2 (formula seen); the temperature verified from first principles.
#[test]
fn two_hundred_kilojoules_per_kilogram_bring_carbon_steel_to_398_degrees() {
    let steel = find("carbon_steel").unwrap().material.specific_heat();
    let end = steel.temperature_after(celsius(20.0), SpecificEnergy::from_si(200e3)).unwrap();
    assert!((end.si() - celsius(397.779).si()).abs() < 0.5e-3);
}

/// EN 1561 Annex A (from memory): mean specific heat 460 J/(kg·K) from 20 to 200 °C, 535 from 20 to 600 °C.
#[test]
fn the_enthalpy_of_gray_iron_is_its_printed_mean_specific_heat_times_the_rise() {
    let iron = find("gray_cast_iron_250").unwrap().material.specific_heat();
    let enthalpy = |to: f64| iron.enthalpy(celsius(20.0), celsius(to)).si();
    assert!((enthalpy(200.0) - 460.0 * 180.0).abs() < 1e-6);
    assert!((enthalpy(600.0) - 535.0 * 580.0).abs() < 1e-6);
    // By hand: the mean halfway between the points is 497.5 J/(kg·K).
    assert!((enthalpy(400.0) - 497.5 * 380.0).abs() < 1e-6);
}
