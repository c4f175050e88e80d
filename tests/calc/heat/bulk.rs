//! The swept ring and what it takes up.

use brakewright::calc::disc::{Construction, Disc, DiscParts};
use brakewright::calc::fault::{FaultCode, Faults};
use brakewright::calc::heat::bulk::{bulk_temperature_after, heated_depth, heated_mass};
use brakewright::calc::heat::partition::{SweptRing, disc_share};
use brakewright::calc::quantity::{
    Area, Energy, Length, Mass, Si, ThermodynamicTemperature, ZERO_CELSIUS,
};
use brakewright::data::disc_materials::find;
use proptest::prelude::*;

fn disc(construction: Construction, mass: Option<f64>) -> Disc {
    let parts = DiscParts {
        material: find("gray_cast_iron").unwrap().material.clone(),
        outer_radius: Length::from_si(0.15),
        inner_radius: Length::from_si(0.08),
        thickness: Length::from_si(0.02),
        construction,
        mass: mass.map(Mass::from_si),
        cooling: None,
    };
    Disc::new(parts).unwrap()
}

fn ring(inner: f64, outer: f64) -> Result<SweptRing, Faults> {
    let disc = disc(Construction::Solid, None);
    SweptRing::new(Length::from_si(inner), Length::from_si(outer), &disc)
}

fn codes(faults: &Faults) -> Vec<FaultCode> {
    faults.as_slice().iter().map(|fault| fault.code).collect()
}

#[test]
fn a_pad_that_leaves_its_disc_is_refused_at_each_edge() {
    let both = ring(0.079, 0.151).unwrap_err();
    assert_eq!(codes(&both), [FaultCode::PadBeyondDisc, FaultCode::PadBeyondDisc]);
    assert_eq!(codes(&ring(0.09, 0.1501).unwrap_err()), [FaultCode::PadBeyondDisc]);
    assert_eq!(codes(&ring(0.1, 0.1).unwrap_err()), [FaultCode::NotAboveInnerRadius]);
    assert!(codes(&ring(f64::NAN, f64::NAN).unwrap_err()).contains(&FaultCode::PadBeyondDisc));
}

#[test]
fn a_pad_as_large_as_its_disc_is_accepted_in_spite_of_rounded_units() {
    assert!(ring(0.08, 0.15).is_ok());
    assert!(ring(0.08 * (1.0 - 1e-15), 0.15 * (1.0 + 1e-15)).is_ok());
}

/// By hand: π(0.15² − 0.1²) × 0.02 × 7200 = 5.654867 kg.
#[test]
fn the_heated_mass_is_that_of_the_swept_ring_unless_given() {
    let swept = ring(0.1, 0.15).unwrap();
    let mass = |construction, given| heated_mass(&disc(construction, given), &swept);
    let of_ring = mass(Construction::Solid, None).unwrap().si();
    assert!((of_ring - 5.654_866_776).abs() < 1e-8);
    assert_eq!(mass(Construction::Solid, Some(4.0)), Some(Mass::from_si(4.0)));
    assert_eq!(mass(Construction::Ventilated, Some(4.0)), Some(Mass::from_si(4.0)));
    assert_eq!(mass(Construction::Ventilated, None), None);
}

#[test]
fn each_side_of_a_solid_disc_is_half_as_deep_if_both_are_heated() {
    let (swept, disc) = (ring(0.1, 0.15).unwrap(), disc(Construction::Solid, None));
    let mass = heated_mass(&disc, &swept).unwrap();
    let depth = |faces| heated_depth(mass, faces, disc.material().density(), swept.area()).si();
    assert!((depth(1) - 0.02).abs() < 1e-15);
    assert!((depth(2) - 0.01).abs() < 1e-15);
}

#[test]
fn heat_beyond_any_solid_gives_no_temperature() {
    let iron = find("gray_cast_iron").unwrap().material.specific_heat();
    let start = ThermodynamicTemperature::from_si(20.0 + ZERO_CELSIUS);
    let after =
        |heat| bulk_temperature_after(start, Energy::from_si(heat), Mass::from_si(1.0), iron);
    assert!(after(1e6).is_some());
    assert!(after(1e7).is_none());
    assert!(after(f64::INFINITY).is_none());
}

proptest! {
    /// More pad on the track takes more heat; no pad takes none; the shares of two bodies add to one.
    #[test]
    fn the_disc_takes_the_rest_of_the_heat(row in 0_usize..10, pad in 1e-4_f64..0.1, more in 1e-4_f64..0.1) {
        let temperature = ThermodynamicTemperature::from_si(400.0);
        let rows = brakewright::data::disc_materials::all();
        let disc = rows.get(row).unwrap().material.substance_at(temperature);
        let lining = rows.first().unwrap().material.substance_at(temperature);
        let swept = Area::from_si(0.1);
        let share = |pad: f64| disc_share(Area::from_si(pad), swept, &lining, &disc);
        prop_assert!(share(pad + more) < share(pad));
        prop_assert!((share(0.0) - 1.0).abs() < 1e-15);
        let other_way = disc_share(swept, swept, &disc, &lining);
        prop_assert!((share(0.1) + other_way - 1.0).abs() < 1e-14);
    }
}
