//! What must hold for every duty.

use brakewright::calc::actuation::Actuation;
use brakewright::calc::brake::{Brake, BrakeParts};
use brakewright::calc::case::duty_cycle::{self, CaseOutcome, Event, FailureReason, Input};
use brakewright::calc::case::{stop_energy, stopping};
use brakewright::calc::disc::{
    Construction, Cooling, Disc, DiscMaterial, DiscMaterialParts, DiscParts,
};
use brakewright::calc::fitted::{Fitted, FittedParts, Place, Source};
use brakewright::calc::friction::Friction;
use brakewright::calc::lining::{FadePoint, Lining, LiningParts};
use brakewright::calc::machine::{Machine, Situation, Vehicle, VehicleParts};
use brakewright::calc::motion::{Delays, Demand};
use brakewright::calc::pad::Pad;
use brakewright::calc::pressure::PressureDistribution;
use brakewright::calc::quantity::{
    Angle, Area, Force, HeatTransfer, Length, Mass, MassDensity, Si, SpecificHeatCapacity,
    ThermalConductivity, ThermodynamicTemperature, Time,
};
use brakewright::data::disc_materials;
use proptest::prelude::*;

use crate::support::close::{assert_close, assert_within};

const AMBIENT: f64 = 293.15;

fn kelvins(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value)
}

/// A material of constant properties.
fn plain_material() -> DiscMaterial {
    DiscMaterial::new(DiscMaterialParts {
        catalog: None,
        density: Some(MassDensity::from_si(7200.0)),
        specific_heat: Some(SpecificHeatCapacity::from_si(500.0)),
        conductivity: Some(ThermalConductivity::from_si(48.0)),
        emissivity: Some(0.55),
        max_temperature: None,
    })
    .unwrap()
}

fn brake(
    clamp_force: f64,
    cooling: Option<Cooling>,
    material: DiscMaterial,
    fade: Vec<FadePoint>,
) -> Brake {
    let metres = Length::from_si;
    let disc = Disc::new(DiscParts {
        material,
        outer_radius: metres(0.14),
        inner_radius: metres(0.08),
        thickness: metres(0.02),
        construction: Construction::Solid,
        mass: None,
        cooling,
    });
    let friction = Friction::single(0.4).unwrap();
    let lining = Lining::new(LiningParts { fade, ..LiningParts::of_friction(friction) });
    Brake::new(BrakeParts {
        pad: Pad::annular_sector(metres(0.09), metres(0.135), Angle::from_si(1.0)).unwrap(),
        lining: lining.unwrap(),
        faces: 2,
        pressure_distribution: PressureDistribution::UniformWear,
        disc: Some(disc.unwrap()),
        actuation: Some(Actuation::ClampForce(Some(Force::from_si(clamp_force)))),
    })
    .unwrap()
}

fn fitted(brake: Brake) -> Vec<Fitted> {
    let parts = FittedParts {
        source: Source::Brake(std::sync::Arc::new(brake)),
        count: 4,
        place: Some(Place::All),
        brakes_per_disc: 1,
        speed_ratio: 1.0,
        rolling_radius: None,
        control: None,
        operator_share: 1.0,
    };
    vec![Fitted::new(parts).unwrap()]
}

fn vehicle() -> Machine {
    let parts = VehicleParts {
        mass: Mass::from_si(1500.0),
        rolling_radius: Length::from_si(0.3),
        rotating_mass_factor: 1.05,
        rolling_resistance: 0.012,
        drag_area: Area::from_si(0.0),
        air_density: MassDensity::from_si(1.225),
        adhesion: None,
        geometry: None,
    };
    Machine::Vehicle(Vehicle::new(parts).unwrap())
}

fn demand(initial_speed: f64, final_speed: f64, build_up: f64) -> Demand {
    let delays =
        Delays::new(Time::from_si(0.0), Time::from_si(0.0), Time::from_si(build_up)).unwrap();
    Demand { initial_speed, final_speed, delays, deceleration: None }
}

fn stop_event(initial_speed: f64, final_speed: f64, build_up: f64) -> Event {
    Event::Stop {
        situation: Situation::level(),
        demand: demand(initial_speed, final_speed, build_up),
    }
}

fn duty(brake: Brake, events: Vec<Event>, repeats: u32) -> Input {
    Input {
        machine: vehicle(),
        fitted: fitted(brake),
        origins: (0..events.len()).collect(),
        events,
        repeats,
        ambient_temperature: kelvins(AMBIENT),
        start_temperature: kelvins(AMBIENT),
        points: Some(2000),
    }
}

fn run(input: &Input) -> CaseOutcome {
    duty_cycle::evaluate(input).unwrap().friction_cases.remove(0)
}

fn end_of(outcome: &CaseOutcome) -> (f64, f64) {
    let last = outcome.course.as_ref().unwrap().moments().last().unwrap().fitted[0];
    (last.bulk.unwrap(), last.surface.unwrap())
}

#[expect(clippy::unnecessary_wraps, reason = "a cooling as a disc takes it")]
fn coefficient(value: f64) -> Option<Cooling> {
    Some(Cooling::Coefficient(HeatTransfer::from_si(value)))
}

fn no_change() -> Vec<FadePoint> {
    vec![
        FadePoint { temperature: kelvins(400.0), factor: 1.0 },
        FadePoint { temperature: kelvins(500.0), factor: 1.0 },
    ]
}

fn single_stop(brake: Brake, demand: Demand) -> stop_energy::Outcome {
    let stop = stopping::Input {
        machine: vehicle(),
        fitted: fitted(brake),
        situation: Situation::level(),
        demand,
    };
    stop_energy::evaluate(&stop_energy::Input {
        stop,
        ambient_temperature: kelvins(AMBIENT),
        start_temperature: kelvins(AMBIENT),
        interval: None,
        stop_count: None,
        finds_limit: true,
    })
    .unwrap()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    /// With constant friction a duty of one stop is that of `stopping` and `stop-energy`, followed either way.
    #[test]
    fn a_duty_of_one_stop_is_the_stop(speed in 5.0..45.0_f64, share in 0.0..0.8_f64, build_up in 0.0..0.6_f64, force in 3e3..2e4_f64, fades in any::<bool>()) {
        let fade = if fades { no_change() } else { Vec::new() };
        let whole = brake(force, None, plain_material(), fade);
        let outcome = run(&duty(whole.clone(), vec![stop_event(speed, share * speed, build_up)], 1));
        let single = single_stop(whole, demand(speed, share * speed, build_up));
        let stop = single.stop.friction_cases[0].stop.path.end();
        let longest = outcome.longest_stop.unwrap();
        prop_assert!((longest.distance - stop.distance).abs() <= 1e-4 * stop.distance, "{} {}", longest.distance, stop.distance);
        prop_assert!((longest.time - stop.time).abs() <= 1e-4 * stop.time);
        let energies = single.friction_cases[0].energies.as_ref().unwrap();
        let load = energies.fitted[0];
        let disc = load.brake.unwrap().disc.unwrap();
        let tracked = &outcome.fitted[0];
        prop_assert!((tracked.energy - load.energy.si()).abs() <= 1e-3 * load.energy.si(), "{} {}", tracked.energy, load.energy.si());
        let bulk = AMBIENT + disc.bulk_rise.si();
        prop_assert!((tracked.peak_bulk.unwrap() - bulk).abs() <= 1e-4 * bulk);
        let surface = disc.surface_peak_temperature.si();
        prop_assert!((tracked.peak_surface.unwrap() - surface).abs() <= 1e-3 * surface, "{} {surface}", tracked.peak_surface.unwrap());
    }

    /// A stronger cooling never leaves the disc hotter.
    #[test]
    fn more_cooling_is_never_hotter(speed in 10.0..40.0_f64, less in 5.0..100.0_f64, more in 0.0..100.0_f64, repeats in 1..12_u32) {
        let events = || vec![stop_event(speed, 0.0, 0.2), Event::Run { speed, time: 30.0 }];
        let peaks = [less, less + more].map(|h| {
            let outcome = run(&duty(brake(8e3, coefficient(h), plain_material(), Vec::new()), events(), repeats));
            (outcome.fitted[0].peak_bulk.unwrap(), outcome.fitted[0].peak_surface.unwrap(), end_of(&outcome).0)
        });
        prop_assert!(peaks[1].0 <= peaks[0].0 + 1e-9 && peaks[1].1 <= peaks[0].1 + 1e-9 && peaks[1].2 <= peaks[0].2 + 1e-9);
    }

    /// Splitting a run in two changes nothing. (Below the speed at which the published airstream branches jump.)
    #[test]
    fn a_run_in_two_parts_is_the_same_run(time in 1.0..2000.0_f64, share in 0.05..0.95_f64, speed in 3.0..12.0_f64, model in prop_oneof![Just(Cooling::RotatingDisc), Just(Cooling::Airstream), Just(Cooling::Coefficient(HeatTransfer::from_si(60.0)))]) {
        let steel = || disc_materials::find("stainless_steel_austenitic").unwrap().material.clone();
        let bulk = |runs: &[f64]| {
            let mut events = vec![stop_event(speed, 0.0, 0.2)];
            events.extend(runs.iter().map(|time| Event::Run { speed, time: *time }));
            let mut input = duty(brake(8e3, Some(model), steel(), Vec::new()), events, 1);
            input.start_temperature = kelvins(700.0);
            end_of(&run(&input)).0
        };
        let (whole, parts) = (bulk(&[time]), bulk(&[share * time, (1.0 - share) * time]));
        prop_assert!((whole - parts).abs() <= 1e-9 * whole, "{whole} {parts}");
    }

    /// What went in is what is stored and what was lost: the loss integrated from the course.
    #[test]
    fn heat_in_is_heat_stored_and_lost(speed in 10.0..40.0_f64, h in 5.0..120.0_f64, repeats in 1..6_u32) {
        let whole = brake(8e3, coefficient(h), plain_material(), Vec::new());
        let events = vec![stop_event(speed, 0.0, 0.2), Event::Run { speed, time: 40.0 }];
        let outcome = run(&duty(whole, events, repeats));
        let (surface, _) = outcome.fitted[0].cooling.unwrap();
        let moments = outcome.course.as_ref().unwrap().moments();
        let lost: f64 = moments
            .windows(2)
            .map(|pair| {
                let mean = f64::midpoint(pair[0].fitted[0].bulk.unwrap(), pair[1].fitted[0].bulk.unwrap());
                (mean - AMBIENT) * h * surface.area() * (pair[1].time - pair[0].time)
            })
            .sum();
        let mass = std::f64::consts::PI * (0.135_f64.powi(2) - 0.09_f64.powi(2)) * 0.02 * 7200.0;
        let stored = mass * 500.0 * (end_of(&outcome).0 - AMBIENT);
        let entered = outcome.fitted[0].energy;
        prop_assert!((entered - stored - lost).abs() <= 2e-3 * entered, "{entered} {stored} {lost}");
    }

    /// Fade never shortens a stop, and repeats with it never get shorter while the disc gets hotter.
    #[test]
    fn fade_only_lengthens(speed in 15.0..40.0_f64, factor in 0.5..1.0_f64, repeats in 1..8_u32) {
        let fade = vec![FadePoint { temperature: kelvins(350.0), factor: 1.0 }, FadePoint { temperature: kelvins(650.0), factor }];
        let events = || vec![stop_event(speed, 0.0, 0.2), Event::Run { speed, time: 20.0 }];
        let distance = |fade| run(&duty(brake(8e3, coefficient(30.0), plain_material(), fade), events(), repeats)).longest_stop.unwrap().distance;
        prop_assert!(distance(fade) >= distance(Vec::new()) * (1.0 - 1e-4));
    }
}

/// Repeats converge to the steady values of `stop-energy`: the same stop once an interval, cooled at the same speeds.
#[test]
fn repeats_converge_to_the_steady_values() {
    let speed = 25.0;
    let whole = brake(8e3, coefficient(60.0), plain_material(), Vec::new());
    let stop = single_stop(whole.clone(), demand(speed, 0.0, 0.2));
    let braking_time = stop.stop.friction_cases[0].stop.path.end().time;
    let input = stop_energy::Input {
        stop: stopping::Input {
            machine: vehicle(),
            fitted: fitted(whole.clone()),
            situation: Situation::level(),
            demand: demand(speed, 0.0, 0.2),
        },
        ambient_temperature: kelvins(AMBIENT),
        start_temperature: kelvins(AMBIENT),
        interval: Some(Time::from_si(60.0)),
        stop_count: None,
        finds_limit: true,
    };
    let steady =
        stop_energy::evaluate(&input).unwrap().friction_cases[0].energies.as_ref().unwrap().fitted
            [0];
    let repeated = steady.brake.unwrap().repeated.unwrap();
    let run_event = Event::Run { speed: 0.5 * speed, time: 60.0 - braking_time };
    let outcome = run(&duty(whole, vec![stop_event(speed, 0.0, 0.2), run_event], 200));
    assert_within(outcome.fitted[0].peak_bulk.unwrap(), repeated.steady.unwrap().peak, 0.01);
    assert_within(end_of(&outcome).0, repeated.steady.unwrap().trough, 0.01);
    // The closed series of the single stop leaves out the cooling within it: a little hotter.
    let surface = repeated.steady_surface_peak.unwrap() - outcome.fitted[0].peak_surface.unwrap();
    assert!((0.0..3.0).contains(&surface), "{surface}");
}

/// By hand: 1500 kg at 10 % and 15 m/s need m g (sin δ − c cos δ) on four brakes; the surface settles q·L/(3k) above.
#[test]
fn a_descent_heats_each_brake_with_its_share() {
    let slope = -(0.1_f64).atan();
    let situation = Situation { grade: Angle::from_si(slope), ..Situation::level() };
    let event = Event::Descent { situation, speed: 15.0, distance: 1500.0 };
    let outcome = run(&duty(brake(8e3, None, plain_material(), Vec::new()), vec![event], 1));
    let power = 1500.0 * 9.806_65 * (-slope.sin() - 0.012 * slope.cos()) * 15.0 / 4.0;
    assert_close(outcome.fitted[0].energy, power * 100.0, 1e-12);
    assert_close(outcome.duration, 100.0, 1e-12);
    let area = std::f64::consts::PI * (0.135_f64.powi(2) - 0.09_f64.powi(2));
    let (bulk, surface) = end_of(&outcome);
    assert_close(bulk - AMBIENT, power * 100.0 / (area * 0.02 * 7200.0 * 500.0), 1e-12);
    assert_close(surface - bulk, power / (2.0 * area) * 0.01 / (3.0 * 48.0), 1e-6);
}

/// Without fade every stop is what it is alone, whatever stop came before: energies add up, the longest is the fastest.
#[test]
fn different_stops_in_turn_are_each_their_own() {
    let outcome_of =
        |events| run(&duty(brake(8e3, coefficient(30.0), plain_material(), Vec::new()), events, 1));
    let stop = |speed, end| stop_event(speed, end, 0.2);
    let (slow, fast, slight) = (stop(12.0, 0.0), stop(30.0, 0.0), stop(30.0, 20.0));
    let energy = |events| outcome_of(events).fitted[0].energy;
    let alone = [slow, fast, slight].map(|event| energy(vec![event]));
    let rest = Event::Stand { time: 5.0 };
    let whole = outcome_of(vec![slow, slow, rest, fast, slow, fast, fast, slight]);
    let expected = 3.0 * alone[0] + 3.0 * alone[1] + alone[2];
    assert_close(whole.fitted[0].energy, expected, 1e-12);
    let longest = outcome_of(vec![fast]).longest_stop.unwrap();
    assert_close(whole.longest_stop.unwrap().distance, longest.distance, 1e-15);
}

#[test]
fn a_descent_that_the_brakes_cannot_hold_ends_the_duty() {
    let situation = Situation { grade: Angle::from_si(-0.3), ..Situation::level() };
    let events = vec![
        Event::Run { speed: 10.0, time: 5.0 },
        Event::Descent { situation, speed: 10.0, distance: 100.0 },
    ];
    let outcome = run(&duty(brake(200.0, None, plain_material(), Vec::new()), events, 1));
    let failure = outcome.first_failure.unwrap();
    assert_eq!(
        (failure.place.event_index, failure.place.repeat, failure.reason),
        (1, 1, FailureReason::SpeedNotHeld)
    );
    assert_close(outcome.duration, 5.0, 1e-12);
}

/// The brake is too weak when cold, and no delay comes before it: that is a failure whether friction fades or not.
#[test]
fn a_brake_too_weak_from_the_start_ends_the_duty() {
    let situation = Situation { grade: Angle::from_si(-0.3), ..Situation::level() };
    for fade in [Vec::new(), no_change()] {
        let event = Event::Stop { situation, demand: demand(20.0, 0.0, 0.0) };
        let outcome = run(&duty(brake(200.0, None, plain_material(), fade), vec![event], 1));
        assert_eq!(outcome.first_failure.unwrap().reason, FailureReason::FinalSpeedNotReached);
        assert!(outcome.longest_stop.is_none());
    }
}

/// Friction that fades to nearly nothing on a slope: the stop is not finished.
#[test]
fn a_brake_that_fades_away_ends_the_duty() {
    let fade = vec![
        FadePoint { temperature: kelvins(320.0), factor: 1.0 },
        FadePoint { temperature: kelvins(420.0), factor: 0.02 },
    ];
    let situation = Situation { grade: Angle::from_si(-0.15), ..Situation::level() };
    let event = Event::Stop { situation, demand: demand(40.0, 0.0, 0.0) };
    let outcome = run(&duty(brake(6e3, None, plain_material(), fade), vec![event], 1));
    assert_eq!(outcome.first_failure.unwrap().reason, FailureReason::FinalSpeedNotReached);
    // 4.6 m/s² cold against 1.5 m/s² of the slope: the stop ends below a third of the friction.
    assert!(outcome.fitted[0].lowest_factor < 0.35, "{}", outcome.fitted[0].lowest_factor);
}
