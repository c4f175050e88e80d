//! How long a duty of 1,000 events with two fitted brakes takes, without and with fade, on one core.

use brakewright::calc::actuation::Actuation;
use brakewright::calc::brake::{Brake, BrakeParts};
use brakewright::calc::case::duty_cycle::{self, Event, Input};
use brakewright::calc::disc::{Construction, Cooling, Disc, DiscParts};
use brakewright::calc::fitted::{Fitted, FittedParts, Place, Source};
use brakewright::calc::friction::Friction;
use brakewright::calc::lining::{FadePoint, Lining, LiningParts};
use brakewright::calc::machine::{Machine, Situation, Vehicle, VehicleParts};
use brakewright::calc::motion::{Delays, Demand};
use brakewright::calc::pad::Pad;
use brakewright::calc::pressure::PressureDistribution;
use brakewright::calc::quantity::{
    Angle, Area, Force, Length, Mass, MassDensity, Si, ThermodynamicTemperature, Time,
};
use brakewright::data::disc_materials;
use criterion::{Criterion, criterion_group, criterion_main};

const AMBIENT: f64 = 293.15; // K

fn brake(force: f64, fades: bool) -> Option<Brake> {
    let metres = Length::from_si;
    let disc = Disc::new(DiscParts {
        material: disc_materials::find("gray_cast_iron_250")?.material.clone(),
        outer_radius: metres(0.14),
        inner_radius: metres(0.08),
        thickness: metres(0.02),
        construction: Construction::Solid,
        mass: None,
        cooling: Some(Cooling::Airstream),
    });
    let point = |celsius: f64, factor| FadePoint {
        temperature: ThermodynamicTemperature::from_si(celsius + 273.15),
        factor,
    };
    let fade = if fades { vec![point(100.0, 1.0), point(400.0, 0.7)] } else { Vec::new() };
    let friction = Friction::single(0.4).ok()?;
    let lining = Lining::new(LiningParts { fade, ..LiningParts::of_friction(friction) }).ok()?;
    let pad = Pad::annular_sector(metres(0.09), metres(0.135), Angle::from_si(1.0)).ok()?;
    Brake::new(BrakeParts {
        pad,
        lining,
        faces: 2,
        pressure_distribution: PressureDistribution::UniformWear,
        disc: Some(disc.ok()?),
        actuation: Some(Actuation::ClampForce(Some(Force::from_si(force)))),
    })
    .ok()
}

fn entry(force: f64, place: Place, fades: bool) -> Option<Fitted> {
    Fitted::new(FittedParts {
        source: Source::Brake(std::sync::Arc::new(brake(force, fades)?)),
        count: 2,
        place: Some(place),
        brakes_per_disc: 1,
        speed_ratio: 1.0,
        rolling_radius: None,
        control: None,
        operator_share: 1.0,
    })
    .ok()
}

/// 500 stops from 25 m/s, each followed by a run of 30 s.
fn duty(fades: bool) -> Option<Input> {
    let vehicle = Vehicle::new(VehicleParts {
        mass: Mass::from_si(1500.0),
        rolling_radius: Length::from_si(0.3),
        rotating_mass_factor: 1.05,
        rolling_resistance: 0.012,
        drag_area: Area::from_si(0.7),
        air_density: MassDensity::from_si(1.225),
        adhesion: None,
        geometry: None,
    });
    let seconds = Time::from_si;
    let delays = Delays::new(seconds(0.5), seconds(0.1), seconds(0.3)).ok()?;
    let demand = Demand { initial_speed: 25.0, final_speed: 0.0, delays, deceleration: None };
    let pair = [
        Event::Stop { situation: Situation::level(), demand },
        Event::Run { speed: 20.0, time: 30.0 },
    ];
    Some(Input {
        machine: Machine::Vehicle(vehicle.ok()?),
        fitted: vec![entry(9e3, Place::Front, fades)?, entry(5e3, Place::Rear, fades)?],
        events: pair.into_iter().cycle().take(1000).collect(),
        origins: (0..1000).collect(),
        repeats: 1,
        ambient_temperature: ThermodynamicTemperature::from_si(AMBIENT),
        start_temperature: ThermodynamicTemperature::from_si(AMBIENT),
        points: None,
    })
}

fn duties(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("duty of 1000 events, two brakes");
    group.sample_size(10);
    for (name, fades) in [("without fade", false), ("with fade", true)] {
        let Some(input) = duty(fades) else { continue };
        group.bench_function(name, |bencher| bencher.iter(|| duty_cycle::evaluate(&input)));
    }
    group.finish();
}

criterion_group!(benches, duties);
criterion_main!(benches);
