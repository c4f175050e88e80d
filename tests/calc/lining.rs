//! Linings: what is refused, and how friction fades.

use brakewright::calc::fault::FaultCode;
use brakewright::calc::friction::Friction;
use brakewright::calc::lining::{FadePoint, Given, Limit, Lining, LiningParts};
use brakewright::calc::quantity::{Pressure, Si, ThermodynamicTemperature};
use proptest::prelude::*;

fn temperature(kelvin: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(kelvin)
}

fn fading(points: &[(f64, f64)]) -> LiningParts {
    let point = |(kelvin, factor): &(f64, f64)| FadePoint {
        temperature: temperature(*kelvin),
        factor: *factor,
    };
    let fade = points.iter().map(point).collect();
    LiningParts { fade, ..LiningParts::of_friction(Friction::single(0.4).unwrap()) }
}

/// The contract's example: factor 1 at 100 degC, 0.7 at 400 degC; 0.85 in the middle, by hand.
#[test]
fn fade_is_linear_between_points_and_flat_outside() {
    let lining = Lining::new(fading(&[(373.15, 1.0), (673.15, 0.7)])).unwrap();
    for (kelvin, factor) in
        [(0.0, 1.0), (373.15, 1.0), (523.15, 0.85), (598.15, 0.775), (673.15, 0.7), (5000.0, 0.7)]
    {
        let found = lining.fade_factor(temperature(kelvin));
        assert!((found - factor).abs() < 1e-15, "{found} at {kelvin}");
    }
}

#[test]
fn without_points_nothing_fades_and_one_point_holds_everywhere() {
    let factor = |points: &[(f64, f64)]| {
        Lining::new(fading(points)).unwrap().fade_factor(temperature(600.0))
    };
    assert!((factor(&[]) - 1.0).abs() < f64::EPSILON);
    assert!((factor(&[(300.0, 0.5)]) - 0.5).abs() < f64::EPSILON);
    assert!((factor(&[(900.0, 0.5)]) - 0.5).abs() < f64::EPSILON);
}

#[test]
fn every_fault_of_a_lining_is_found_at_its_name() {
    let points = [(300.0, 1.0), (300.0, 0.9), (400.0, 0.0), (350.0, 2.1), (f64::NAN, 1.0)];
    let mut parts = fading(&points);
    parts.max_pressure = Some(Limit::by_caller(Si::from_si(0.0)));
    parts.max_rubbing_speed = Some(Limit::by_caller(Si::from_si(-1.0)));
    parts.max_pressure_velocity = Some(Limit::by_caller(Si::from_si(f64::NAN)));
    parts.max_power_flux = Some(Limit::by_caller(Si::from_si(0.0)));
    parts.max_energy_flux = Some(Limit::by_caller(Si::from_si(0.0)));
    parts.max_temperature_continuous = Some(Limit::by_caller(temperature(-1.0)));
    parts.max_temperature_peak = Some(Limit::by_caller(temperature(0.0)));
    parts.specific_wear = Some(Si::from_si(0.0));
    parts.conductivity = Some(Si::from_si(0.0));
    parts.density = Some(Si::from_si(0.0));
    parts.specific_heat = Some(Si::from_si(0.0));
    let faults = Lining::new(parts).unwrap_err();
    let found: Vec<_> =
        faults.as_slice().iter().map(|fault| (fault.member.as_str(), fault.code)).collect();
    let expected = [
        ("max_pressure", FaultCode::NotPositive),
        ("max_rubbing_speed", FaultCode::NotPositive),
        ("max_pressure_velocity", FaultCode::NotPositive),
        ("max_power_flux", FaultCode::NotPositive),
        ("max_energy_flux", FaultCode::NotPositive),
        ("max_temperature_continuous", FaultCode::OutOfRange),
        ("max_temperature_peak", FaultCode::OutOfRange),
        ("fade/1/temperature", FaultCode::NotInOrder),
        ("fade/2/factor", FaultCode::OutOfRange),
        ("fade/3/temperature", FaultCode::NotInOrder),
        ("fade/3/factor", FaultCode::OutOfRange),
        ("fade/4/temperature", FaultCode::OutOfRange),
        ("specific_wear", FaultCode::NotPositive),
        ("conductivity", FaultCode::NotPositive),
        ("density", FaultCode::NotPositive),
        ("specific_heat", FaultCode::NotPositive),
    ];
    assert_eq!(found, expected);
}

#[test]
fn no_point_of_fade_lies_at_absolute_zero() {
    let faults = Lining::new(fading(&[(0.0, 1.0)])).unwrap_err();
    let [fault] = faults.as_slice() else { panic!("{faults:?}") };
    assert_eq!((fault.member.as_str(), fault.code), ("fade/0/temperature", FaultCode::OutOfRange));
}

/// A supplier may well state a continuous limit above the peak limit's; both are only compared with.
#[test]
fn a_continuous_limit_above_the_peak_is_no_fault() {
    let mut parts = fading(&[]);
    parts.max_temperature_continuous = Some(Limit::by_caller(temperature(800.0)));
    parts.max_temperature_peak = Some(Limit::by_caller(temperature(700.0)));
    assert!(Lining::new(parts).is_ok());
}

#[test]
fn a_caller_replaces_a_limit_of_the_catalog() {
    let mut parts = brakewright::data::linings::find("sintered_metal_dry").unwrap().parts();
    assert_eq!(parts.max_pressure.map(|limit| limit.given), Some(Given::Catalog));
    parts.max_pressure = Some(Limit::by_caller(Pressure::from_si(2.4e6)));
    let lining = Lining::new(parts).unwrap();
    assert_eq!(lining.parts().max_pressure.map(|limit| limit.given), Some(Given::Caller));
    assert_eq!(lining.parts().origin.catalog_id.as_deref(), Some("sintered_metal_dry"));
}

proptest! {
    /// Between the least and the greatest factor at every temperature, and without jumps.
    #[test]
    fn the_fade_factor_stays_within_its_points(
        points in prop::collection::vec((1.0..200.0_f64, 0.01..2.0_f64), 1..8), kelvin in 0.0..2000.0_f64,
    ) {
        let mut sum = 0.0;
        let rising: Vec<_> = points.iter().map(|(step, factor)| { sum += step; (sum, *factor) }).collect();
        let lining = Lining::new(fading(&rising)).unwrap();
        let least = rising.iter().map(|point| point.1).fold(f64::INFINITY, f64::min);
        let greatest = rising.iter().map(|point| point.1).fold(0.0, f64::max);
        let found = lining.fade_factor(temperature(kelvin));
        prop_assert!(least - 1e-15 <= found && found <= greatest + 1e-15);
        // The steepest slope possible here is 2 per kelvin.
        let beside = lining.fade_factor(temperature(kelvin + 1e-6));
        prop_assert!((beside - found).abs() <= 2e-6 + 1e-12);
    }
}
