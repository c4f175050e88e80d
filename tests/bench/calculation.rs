//! One evaluation of each calculation, its input given.

use std::hint::black_box;

use brakewright::calc::actuation::{Actuation, Hydraulic, HydraulicParts};
use brakewright::calc::case::{actuation_force, pad_capacity, stop_energy, stopping};
use brakewright::calc::heat::slab::{PiecewiseLinearFlux, Slab};
use brakewright::calc::heat::substance::Substance;
use brakewright::calc::pad::Pad;
use brakewright::calc::pressure::PressureDistribution;
use brakewright::calc::quantity::{
    Length, LineCompliance, MassDensity, PowerFlux, Pressure, Si, SpecificHeatCapacity,
    ThermalConductivity, ThermodynamicTemperature, Time, Torque,
};
use criterion::Criterion;

use crate::parts;

/// Every calculation.
pub(crate) fn all(criterion: &mut Criterion) {
    pads(criterion);
    forces(criterion);
    stops(criterion);
    peaks(criterion);
}

/// The pad is made within the measured time: its integrals are the work.
fn pads(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("pad_capacity");
    let mut measure = |name: &str, pad: &dyn Fn() -> Pad| {
        let input = pad_capacity::Input {
            pad: pad(),
            lining: parts::lining(),
            faces: 2,
            pressure_distribution: PressureDistribution::UniformWear,
            clamp_force: None,
        };
        group.bench_function(format!("{name}/pad"), |bench| bench.iter(pad));
        group.bench_function(format!("{name}/evaluate"), |bench| {
            bench.iter(|| pad_capacity::evaluate(black_box(&input)));
        });
    };
    measure("sector", &parts::sector_pad);
    measure("round", &parts::round_pad);
    for count in [6, 1000] {
        let points = parts::outline(count);
        let pad = || Pad::outline(black_box(&points)).unwrap();
        measure(&format!("outline_{count}"), &pad);
    }
}

fn forces(criterion: &mut Criterion) {
    let hydraulic = HydraulicParts {
        piston_diameter: Length::from_si(0.054),
        pistons_per_side: 1,
        efficiency: 0.97,
        threshold_pressure: Pressure::from_si(0.0),
        line_pressure: None,
        max_line_pressure: Some(Pressure::from_si(1e7)),
        running_clearance: None,
        compliance: Option::<LineCompliance>::None,
        master_cylinder: None,
    };
    let actuation = Actuation::Hydraulic(Hydraulic::new(hydraulic).unwrap());
    let input = actuation_force::Input {
        brake: parts::brake(Some(actuation)),
        torque: Torque::from_si(800.0),
    };
    criterion.bench_function("actuation_force/evaluate", |bench| {
        bench.iter(|| actuation_force::evaluate(black_box(&input)));
    });
}

fn stops(criterion: &mut Criterion) {
    for (name, drag_area) in [("closed", 0.0), ("drag", 0.7)] {
        let input = parts::stop(drag_area);
        criterion.bench_function(&format!("stopping/{name}"), |bench| {
            bench.iter(|| stopping::evaluate(black_box(&input)));
        });
        let room = ThermodynamicTemperature::from_si(293.15);
        let input = stop_energy::Input {
            stop: input,
            ambient_temperature: room,
            start_temperature: room,
            interval: None,
            stop_count: None,
            finds_limit: true,
        };
        criterion.bench_function(&format!("stop_energy/{name}_two_discs"), |bench| {
            bench.iter(|| stop_energy::evaluate(black_box(&input)));
        });
    }
}

/// A stop of 5 s in 20 mm of gray cast iron, its flux given by few nodes and by many.
fn peaks(criterion: &mut Criterion) {
    let iron = Substance::new(
        MassDensity::from_si(7200.0),
        SpecificHeatCapacity::from_si(500.0),
        ThermalConductivity::from_si(48.0),
    );
    let slab = Slab::new(Length::from_si(0.01), iron.unwrap()).unwrap();
    for count in [2, 8, 64] {
        let node = |index: u32| {
            let share = f64::from(index) / f64::from(count - 1);
            let flux = 1e6 * (1.0 - share) * (1.0 + 0.2 * share);
            (Time::from_si(5.0 * share), PowerFlux::from_si(flux))
        };
        let nodes: Vec<_> = (0..count).map(node).collect();
        let flux = PiecewiseLinearFlux::new(&nodes).unwrap();
        criterion.bench_function(&format!("slab_peak/{count}_nodes"), |bench| {
            bench.iter(|| black_box(&slab).surface_peak(black_box(&flux)));
        });
    }
}
