//! Slabs and enthalpies against numbers that an independent program found (`tests/reference/heat.py`).

use brakewright::calc::heat::property::SpecificEnergy;
use brakewright::calc::heat::slab::{PiecewiseLinearFlux, Slab};
use brakewright::calc::heat::substance::Substance;
use brakewright::calc::quantity::{
    Length, MassDensity, PowerFlux, Si, SpecificHeatCapacity, ThermalConductivity,
    ThermodynamicTemperature, Time, ZERO_CELSIUS,
};
use brakewright::data::disc_materials::find;
use serde::Deserialize;

#[derive(Deserialize)]
struct Reference {
    slabs: Vec<SlabCase>,
    enthalpies: Vec<EnthalpyCase>,
    inverses: Vec<InverseCase>,
}

#[derive(Deserialize)]
struct SlabCase {
    name: String,
    density: f64,
    specific_heat: f64,
    conductivity: f64,
    depth: f64,
    nodes: Vec<(f64, f64)>,
    times: Vec<f64>,
    surface: Vec<f64>,
    insulated: Vec<f64>,
    disagreement: f64,
}

#[derive(Deserialize)]
struct EnthalpyCase {
    id: String,
    from: f64,
    to: f64,
    enthalpy: f64,
}

#[derive(Deserialize)]
struct InverseCase {
    id: String,
    start: f64,
    heat: f64,
    end: f64,
}

fn reference() -> Reference {
    serde_json::from_str(include_str!("../../reference/heat.json")).unwrap()
}

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value + ZERO_CELSIUS)
}

impl SlabCase {
    fn slab(&self) -> Slab {
        let substance = Substance::new(
            MassDensity::from_si(self.density),
            SpecificHeatCapacity::from_si(self.specific_heat),
            ThermalConductivity::from_si(self.conductivity),
        );
        Slab::new(Length::from_si(self.depth), substance.unwrap()).unwrap()
    }

    fn flux(&self) -> PiecewiseLinearFlux {
        let nodes =
            self.nodes.iter().map(|node| (Time::from_si(node.0), PowerFlux::from_si(node.1)));
        PiecewiseLinearFlux::new(&nodes.collect::<Vec<_>>()).unwrap()
    }
}

#[test]
fn slabs_warm_as_in_a_finite_difference_solution() {
    let cases = reference().slabs;
    assert_eq!(cases.len(), 5);
    for case in cases {
        let (slab, flux) = (case.slab(), case.flux());
        let highest = case.surface.iter().copied().fold(0.0, f64::max);
        // The reference's own uncertainty, and the integrator's absolute tolerance.
        let tolerance = case.disagreement * highest + 1e-6;
        let expected = case.surface.iter().zip(&case.insulated);
        for (&time, (&surface, &insulated)) in case.times.iter().zip(expected) {
            for (height, expected) in [(1.0, surface), (0.0, insulated)] {
                let found = slab.rise_at(&flux, Time::from_si(time), height).si();
                let error = (found - expected).abs();
                assert!(error <= tolerance, "{} at {time} s: {found} for {expected}", case.name);
            }
        }
    }
}

#[test]
fn enthalpies_are_those_of_a_quadrature() {
    let cases = reference().enthalpies;
    assert_eq!(cases.len(), 16);
    for case in cases {
        let heat = find(&case.id).unwrap().material.specific_heat();
        let found = heat.enthalpy(celsius(case.from), celsius(case.to)).si();
        // The quadrature is asked for 1e-13; the sum of some ranges doubles that a few times.
        assert!(
            (found - case.enthalpy).abs() <= 1e-11 * case.enthalpy.abs(),
            "{} {found}",
            case.id
        );
    }
}

#[test]
fn temperatures_found_from_enthalpies_are_those_of_another_root_finder() {
    let cases = reference().inverses;
    assert_eq!(cases.len(), 10);
    for case in cases {
        let heat = find(&case.id).unwrap().material.specific_heat();
        let end = heat.temperature_after(celsius(case.start), SpecificEnergy::from_si(case.heat));
        assert!((end.unwrap().si() - celsius(case.end).si()).abs() < 1e-8, "{}", case.id);
    }
}
