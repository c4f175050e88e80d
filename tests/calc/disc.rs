//! The disc and its material: what is refused, what overrides what.

use brakewright::calc::disc::{
    Construction, Cooling, Disc, DiscMaterial, DiscMaterialParts, DiscParts,
};
use brakewright::calc::fault::{FaultCode, Faults};
use brakewright::calc::quantity::{
    HeatTransfer, Length, Mass, MassDensity, Si, SpecificHeatCapacity, ThermalConductivity,
    ThermodynamicTemperature,
};
use brakewright::data::disc_materials::find;

fn found(faults: &Faults) -> Vec<(&str, FaultCode)> {
    faults.as_slice().iter().map(|fault| (fault.member.as_str(), fault.code)).collect()
}

fn own_material() -> DiscMaterialParts {
    DiscMaterialParts {
        density: Some(MassDensity::from_si(7000.0)),
        specific_heat: Some(SpecificHeatCapacity::from_si(500.0)),
        conductivity: Some(ThermalConductivity::from_si(50.0)),
        ..DiscMaterialParts::default()
    }
}

fn parts() -> DiscParts {
    DiscParts {
        material: DiscMaterial::new(own_material()).unwrap(),
        outer_radius: Length::from_si(0.15),
        inner_radius: Length::from_si(0.08),
        thickness: Length::from_si(0.02),
        construction: Construction::Solid,
        mass: None,
        cooling: None,
    }
}

#[test]
fn a_disc_reports_all_its_faults_at_once() {
    let bad = DiscParts {
        outer_radius: Length::from_si(0.0),
        inner_radius: Length::from_si(-0.1),
        thickness: Length::from_si(f64::NAN),
        mass: Some(Mass::from_si(0.0)),
        cooling: Some(Cooling::Coefficient(HeatTransfer::from_si(-1.0))),
        ..parts()
    };
    let faults = Disc::new(bad).unwrap_err();
    assert_eq!(
        found(&faults),
        [
            ("outer_radius", FaultCode::NotPositive),
            ("inner_radius", FaultCode::Negative),
            ("thickness", FaultCode::NotPositive),
            ("mass", FaultCode::NotPositive),
            ("cooling/coefficient", FaultCode::Negative),
        ]
    );
}

#[test]
fn the_outer_radius_must_exceed_the_inner_one() {
    let flat = DiscParts { inner_radius: Length::from_si(0.15), ..parts() };
    let faults = Disc::new(flat).unwrap_err();
    assert_eq!(found(&faults), [("outer_radius", FaultCode::NotAboveInnerRadius)]);
    assert!(Disc::new(DiscParts { inner_radius: Length::from_si(0.0), ..parts() }).is_ok());
}

#[test]
fn a_material_without_a_catalog_row_needs_all_three_thermal_properties() {
    let parts = DiscMaterialParts { density: None, conductivity: None, ..own_material() };
    let faults = DiscMaterial::new(parts).unwrap_err();
    assert_eq!(
        found(&faults),
        [("density", FaultCode::Missing), ("conductivity", FaultCode::Missing)]
    );
}

#[test]
fn a_material_without_meaning_is_refused_with_every_reason() {
    let parts = DiscMaterialParts {
        catalog: None,
        density: Some(MassDensity::from_si(-1.0)),
        specific_heat: Some(SpecificHeatCapacity::from_si(0.0)),
        conductivity: Some(ThermalConductivity::from_si(f64::INFINITY)),
        emissivity: Some(1.01),
        max_temperature: Some(ThermodynamicTemperature::from_si(0.0)),
    };
    let faults = DiscMaterial::new(parts).unwrap_err();
    assert_eq!(
        found(&faults),
        [
            ("density", FaultCode::NotPositive),
            ("emissivity", FaultCode::OutOfRange),
            ("max_temperature", FaultCode::OutOfRange),
            ("specific_heat", FaultCode::NotPositive),
            ("conductivity", FaultCode::OutOfRange),
        ]
    );
}

#[test]
fn own_values_stand_above_the_catalog() {
    let steel = find("stainless_steel_martensitic").unwrap().material.clone();
    let limit = ThermodynamicTemperature::from_si(700.0);
    let parts = DiscMaterialParts {
        catalog: Some(steel.clone()),
        specific_heat: Some(SpecificHeatCapacity::from_si(500.0)),
        max_temperature: Some(limit),
        ..DiscMaterialParts::default()
    };
    let material = DiscMaterial::new(parts).unwrap();
    let hot = material.substance_at(ThermodynamicTemperature::from_si(600.0));
    assert!((hot.specific_heat().si() - 500.0).abs() < 1e-9);
    assert_eq!(material.density(), steel.density());
    assert_eq!(material.max_temperature(), Some(limit));
    assert!(steel.max_temperature_from_catalog() && !material.max_temperature_from_catalog());
    assert!(material.emissivity_is_default());
}

#[test]
fn a_remembered_value_that_is_overridden_is_no_longer_remembered() {
    let parts = DiscMaterialParts {
        catalog: Some(find("carbon_steel").unwrap().material.clone()),
        emissivity: Some(0.6),
        ..DiscMaterialParts::default()
    };
    let material = DiscMaterial::new(parts).unwrap();
    assert!(material.origin().unwrap().from_memory.is_empty());
    assert!((material.emissivity() - 0.6).abs() < 1e-15);
}
