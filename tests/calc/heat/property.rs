//! Specific heat and conductivity: enthalpy adds up, rises, and can be inverted.

use brakewright::calc::fault::FaultCode;
use brakewright::calc::heat::property::{
    CEILING, Conductivity, Curve, Piece, Pole, SpecificEnergy, SpecificHeat,
};
use brakewright::calc::quantity::{
    Si, SpecificHeatCapacity, ThermalConductivity, ThermodynamicTemperature, ZERO_CELSIUS,
};
use brakewright::data::disc_materials::{all, find};
use proptest::prelude::*;

fn kelvin(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value)
}

fn specific_heat(row: usize) -> &'static SpecificHeat {
    all().get(row % all().len()).unwrap().material.specific_heat()
}

proptest! {
    /// What is taken up over two ranges is what is taken up over both; the way back gives it off.
    #[test]
    fn enthalpy_adds_up(row in 0_usize..20, a in 1.0_f64..3000.0, b in 1.0_f64..3000.0, c in 1.0_f64..3000.0) {
        let heat = specific_heat(row);
        let between = |from, to| heat.enthalpy(kelvin(from), kelvin(to)).si();
        // The integrals are of the order of 3000 K × 2000 J/(kg·K); 1e-9 J/kg is their rounding.
        prop_assert!((between(a, b) + between(b, c) - between(a, c)).abs() < 1e-8);
        prop_assert!((between(a, b) + between(b, a)).abs() < 1e-9);
    }

    /// A warmer body holds more heat, by no less than the smallest specific heat in the catalog.
    #[test]
    fn enthalpy_rises_with_temperature(row in 0_usize..20, from in 1.0..3000.0, rise in 0.01..1000.0) {
        let gain = specific_heat(row).enthalpy(kelvin(from), kelvin(from + rise)).si();
        prop_assert!(gain > 300.0 * rise);
    }

    /// The temperature found from an enthalpy has that enthalpy.
    #[test]
    fn the_inverse_leads_back(row in 0_usize..20, from in 0.5_f64..9990.0, to in 0.5_f64..9990.0) {
        let heat = specific_heat(row);
        let gain = heat.enthalpy(kelvin(from), kelvin(to));
        let found = heat.temperature_after(kelvin(from), gain).unwrap().si();
        prop_assert!((found - to).abs() <= 1e-9, "{found} for {to}");
    }

    /// The enthalpy over a small step is the specific heat times the step.
    #[test]
    fn the_specific_heat_is_the_slope_of_the_enthalpy(row in 0_usize..20, celsius in 21.0_f64..590.0) {
        let heat = specific_heat(row);
        let at = celsius + ZERO_CELSIUS;
        // 0.01 K: rounding of the integrals about 1e-10/1e-2, curvature below 1e-6 of the value.
        let gain = heat.enthalpy(kelvin(at - 0.005), kelvin(at + 0.005)).si();
        let near_jump = (celsius - 200.0).abs() < 0.01;
        prop_assert!(near_jump || (gain / 0.01 - heat.at(kelvin(at)).si()).abs() < 1e-3);
    }
}

#[test]
fn a_gain_of_nothing_leaves_the_temperature_to_the_last_bit() {
    let heat = specific_heat(5);
    for start in [0.0, 293.15, 1008.15, CEILING] {
        assert_eq!(
            heat.temperature_after(kelvin(start), SpecificEnergy::from_si(0.0)),
            Some(kelvin(start))
        );
    }
}

#[test]
fn a_temperature_off_the_scale_is_no_answer() {
    let heat = SpecificHeat::constant(SpecificHeatCapacity::from_si(500.0)).unwrap();
    let after = |start, gain| heat.temperature_after(kelvin(start), SpecificEnergy::from_si(gain));
    assert!(after(300.0, 500.0 * 9699.0).is_some());
    assert!(after(300.0, 500.0 * 9701.0).is_none());
    assert!(after(300.0, -500.0 * 301.0).is_none());
    for (start, gain) in [
        (f64::NAN, 1.0),
        (300.0, f64::NAN),
        (300.0, f64::INFINITY),
        (300.0, 1e308),
        (-1.0, 1e3),
        (2e4, -1e6),
    ] {
        assert!(after(start, gain).is_none(), "{start} {gain}");
    }
}

#[test]
fn outside_the_published_range_a_property_stays_constant() {
    let iron = &find("gray_cast_iron_250").unwrap().material;
    let conductivity = |celsius: f64| iron.conductivity().at(kelvin(celsius + ZERO_CELSIUS)).si();
    assert!((conductivity(-40.0) - 48.5).abs() < 1e-12);
    assert!((conductivity(900.0) - 44.5).abs() < 1e-12);
    assert!((conductivity(350.0) - 45.75).abs() < 1e-9);
    let steel = find("carbon_steel").unwrap().material.specific_heat();
    let at = |celsius: f64| steel.at(kelvin(celsius + ZERO_CELSIUS)).si();
    assert!((at(-40.0) - at(20.0)).abs() < 1e-12);
    assert!((at(2000.0) - 650.0).abs() < 1e-12);
}

#[test]
fn curves_without_a_physical_meaning_are_refused() {
    let code = |curve: Result<Curve, _>| {
        let faults: brakewright::calc::fault::Faults = curve.unwrap_err();
        faults.as_slice().first().unwrap().code
    };
    let piece = |from, to, polynomial, pole| Piece { from, to, polynomial, pole };
    assert_eq!(code(Curve::constant(0.0)), FaultCode::NotPositive);
    assert_eq!(code(Curve::constant(f64::NAN)), FaultCode::NotPositive);
    assert_eq!(code(Curve::table(&[])), FaultCode::WrongCount);
    assert_eq!(code(Curve::table(&[(20.0, 5.0), (20.0, 6.0)])), FaultCode::NotInOrder);
    assert_eq!(code(Curve::mean_from(20.0, &[(20.0, 5.0)])), FaultCode::NotInOrder);
    // Means that fall so fast that the property itself would be negative: 100 − 4 × 80.
    assert_eq!(
        code(Curve::mean_from(0.0, &[(80.0, 420.0), (160.0, 100.0)])),
        FaultCode::OutOfRange
    );
    // (θ − 5)² − 1 is above zero at both ends of 0 to 10 and below zero between.
    let dip = piece(0.0, 10.0, [24.0, -10.0, 1.0, 0.0], None);
    assert_eq!(code(Curve::pieces(vec![dip])), FaultCode::OutOfRange);
    let pole = piece(0.0, 10.0, [24.0, 0.0, 0.0, 0.0], Some(Pole { factor: 1.0, at: 10.0 }));
    assert_eq!(code(Curve::pieces(vec![pole])), FaultCode::OutOfRange);
    let gap = [piece(0.0, 10.0, [1.0; 4], None), piece(11.0, 12.0, [1.0; 4], None)];
    assert_eq!(code(Curve::pieces(gap.to_vec())), FaultCode::NotInOrder);
    assert!(Conductivity::constant(ThermalConductivity::from_si(-1.0)).is_err());
}
