//! What must hold for every stop.

use brakewright::calc::machine::{
    Conveyor, ConveyorParts, Direction, Geometry, GeometryParts, Hoist, HoistParts, Machine,
    Situation, Vehicle, VehicleParts,
};
use brakewright::calc::motion::{
    Coordinate, Delays, Demand, Ending, Forces, LimitedBy, Phase, Reduced, Stop, Tires, Wheelbase,
    stop,
};
use brakewright::calc::quantity::{
    Angle, Area, Length, Mass, MassDensity, MomentOfInertia, Si, Time,
};
use proptest::prelude::*;

use crate::support::close::{assert_close, assert_within};

const GRAVITY: f64 = 9.806_65;

fn delays(reaction: f64, dead: f64, build_up: f64) -> Delays {
    Delays::new(Time::from_si(reaction), Time::from_si(dead), Time::from_si(build_up)).unwrap()
}

fn demand(initial_speed: f64, final_speed: f64, delays: Delays) -> Demand {
    Demand { initial_speed, final_speed, delays, deceleration: None }
}

fn body(outside: f64, resistance: f64) -> Reduced {
    Reduced {
        coordinate: Coordinate::Way,
        mass: 1000.0,
        rotating: 0.0,
        translating: 1000.0,
        outside,
        resistance,
        drag: 0.0,
        reversal: 1.0,
        tires: None,
    }
}

prop_compose! {
    /// A vehicle with axle loads, adhesion and rotating masses, on any slope, with demands around its limits.
    fn vehicle()(
        mass in 50.0..40_000.0_f64, rotating in 0.0..0.3_f64, grade in -0.4..0.4_f64, rolling in 0.0..0.05_f64,
        adhesion in prop::option::of(0.05..1.3_f64), base in 0.8..8.0_f64, front in 0.2..0.8_f64, height in 0.1..0.6_f64,
        demand in (0.0..1.5_f64, 0.0..1.5_f64),
    ) -> Forces {
        let weight = mass * GRAVITY;
        let normal_force = weight * grade.cos();
        let wheelbase = Wheelbase { wheelbase: base, height: base * height, front: base * front };
        let system = Reduced {
            coordinate: Coordinate::Way, mass, rotating, translating: mass, outside: -weight * grade.sin(),
            resistance: rolling * normal_force, drag: 0.0,
            reversal: 1.0, tires: Some(Tires { normal_force, adhesion, wheelbase: Some(wheelbase) }),
        };
        Forces::new(system, [demand.0 * weight, demand.1 * weight])
    }
}

fn totals(stop: &Stop) -> Option<(f64, f64)> {
    match stop.ending {
        Ending::Reached(_) => Some((stop.path.end().time, stop.path.end().distance)),
        Ending::NotReached { .. } => None,
    }
}

proptest! {
    /// Forces balance, no axle holds more than its tires, and no rear wheel lifts.
    #[test]
    fn forces_balance_within_all_limits(forces in vehicle(), fraction in 0.0..1.0_f64) {
        let system = forces.system;
        let tires = system.tires.unwrap();
        let now = forces.at(fraction, 0.0);
        let weight = tires.normal_force;
        prop_assert!((system.mass * now.deceleration - now.total_ground() - system.retarding(0.0)).abs() <= 1e-9 * weight);
        prop_assert!(now.total_ground() <= forces.lift_force().unwrap() + 1e-9 * weight);
        if let Some(adhesion) = tires.adhesion {
            for axle in 0..2 {
                prop_assert!(now.ground[axle] <= adhesion * now.normal[axle] + 1e-9 * weight, "{now:?}");
            }
        }
        for axle in 0..2 {
            prop_assert!(now.brake[axle] <= fraction * forces.demand[axle] + 1e-9 * weight, "{now:?}");
        }
        if now.limited_by == LimitedBy::Brake {
            prop_assert!((now.brake[0] + now.brake[1] - fraction * (forces.demand[0] + forces.demand[1])).abs() <= 1e-9 * weight);
        }
    }

    /// Between two breakpoints the deceleration is linear in the applied fraction.
    #[test]
    fn breakpoints_are_where_the_deceleration_bends(forces in vehicle()) {
        let mut edges = vec![0.0];
        edges.extend(forces.breakpoints(1.0));
        edges.push(1.0);
        for pair in edges.windows(2) {
            let [low, high] = [pair[0], pair[1]].map(|fraction| forces.at(fraction, 0.0).deceleration);
            let middle = forces.at(f64::midpoint(pair[0], pair[1]), 0.0).deceleration;
            prop_assert!((middle - f64::midpoint(low, high)).abs() <= 1e-8 * GRAVITY, "{edges:?}");
        }
    }

    /// The least fraction for a deceleration gives that deceleration.
    #[test]
    fn a_fraction_found_for_a_deceleration_gives_it(forces in vehicle(), deceleration in 0.05..10.0_f64) {
        match forces.fraction_for(deceleration, 0.0) {
            Some(fraction) if fraction > 0.0 => {
                let found = forces.at(fraction, 0.0).deceleration;
                prop_assert!((found - deceleration).abs() <= 1e-8 * GRAVITY);
            }
            Some(_) => prop_assert!(forces.at(0.0, 0.0).deceleration >= deceleration - 1e-9),
            None => prop_assert!(forces.at(1.0, 0.0).deceleration < deceleration + 1e-9),
        }
    }

    /// What moved is what the brakes and the resistances took.
    #[test]
    fn the_energy_balance_closes(forces in vehicle(), speed in 1.0..60.0_f64, share in 0.0..0.9_f64, dead in 0.0..1.0_f64, build_up in 0.0..2.0_f64, drag in prop_oneof![Just(0.0), 0.0..2.0_f64]) {
        let mut system = forces.system;
        system.drag = drag;
        let forces = Forces::new(system, forces.demand);
        let stop = stop(&forces, &demand(speed, share * speed, delays(0.3, dead, build_up))).unwrap();
        if totals(&stop).is_some() {
            let (begin, end) = (stop.path.first_torque(), stop.path.end());
            let kinetic = 0.5 * system.inertia() * (begin.speed.powi(2) - end.speed.powi(2));
            let outside = system.outside * (end.distance - begin.distance);
            let work = stop.path.brake_work();
            let gap = kinetic + outside - stop.path.resistance_work() - work[0] - work[1];
            let scale = kinetic.abs() + outside.abs() + stop.path.resistance_work();
            // The contract's bound; where a limit sets in between two steps the quadrature sees a bend.
            prop_assert!(gap.abs() <= 1e-6 * scale, "{gap} of {scale}");
        }
    }

    /// A drag too small to matter changes nothing: the integrated stop equals the closed one.
    #[test]
    fn the_integrated_stop_equals_the_closed_one(forces in vehicle(), speed in 1.0..60.0_f64, share in 0.0..0.9_f64, dead in 0.0..1.0_f64, build_up in 0.0..2.0_f64) {
        let demand = demand(speed, share * speed, delays(0.0, dead, build_up));
        let mut system = forces.system;
        system.drag = 1e-300;
        let integrated = stop(&Forces::new(system, forces.demand), &demand).unwrap();
        let closed = stop(&forces, &demand).unwrap();
        match (totals(&closed), totals(&integrated)) {
            (Some(closed), Some(integrated)) => {
                prop_assert!((closed.0 - integrated.0).abs() <= 1e-6 * closed.0, "{closed:?} {integrated:?}");
                prop_assert!((closed.1 - integrated.1).abs() <= 1e-6 * closed.1, "{closed:?} {integrated:?}");
            }
            (closed, integrated) => prop_assert_eq!(closed.is_some(), integrated.is_some()),
        }
    }

    /// A longer delay never shortens the way or the time of a machine that nothing slows before its brakes.
    #[test]
    fn more_delay_never_shortens_a_stop(deceleration in 0.5..10.0_f64, drive in 0.0..0.4_f64, speed in 0.5..60.0_f64, delay in 0.0..2.0_f64, more in 0.0..2.0_f64, which in 0..3_usize) {
        let forces = Forces::new(body(1000.0 * drive, 0.0), [1000.0 * deceleration, 0.0]);
        let stops = [delay, delay + more].map(|delay| {
            let mut parts = [0.2; 3];
            parts[which] = delay;
            totals(&stop(&forces, &demand(speed, 0.0, delays(parts[0], parts[1], parts[2]))).unwrap()).unwrap()
        });
        prop_assert!(stops[1].0 >= stops[0].0 - 1e-12 && stops[1].1 >= stops[0].1 - 1e-12);
    }

    /// A steeper climb never lengthens the stop, while tan β < 1/adhesion.
    #[test]
    fn more_grade_never_lengthens_a_stop_uphill(grade in 0.0..0.6_f64, more in 0.0..0.2_f64, adhesion in 0.1..1.2_f64, share in 0.0..1.5_f64, speed in 1.0..40.0_f64) {
        let ways = [grade, grade + more].map(|grade| {
            let normal_force = 1000.0 * GRAVITY * grade.cos();
            let system = Reduced {
                outside: -1000.0 * GRAVITY * grade.sin(),
                reversal: 1.0, tires: Some(Tires { normal_force, adhesion: Some(adhesion), wheelbase: None }),
                ..body(0.0, 0.0)
            };
            let forces = Forces::new(system, [(0.1 + share) * 1000.0 * GRAVITY, 0.0]);
            totals(&stop(&forces, &demand(speed, 0.0, delays(0.0, 0.0, 0.3))).unwrap()).unwrap().1
        });
        prop_assert!(ways[1] <= ways[0] * (1.0 + 1e-12));
    }

    /// No finite input gives a panic or a number that is none.
    #[test]
    fn no_finite_input_breaks_a_stop(
        mass in 1e-6..1e9_f64, outside in -1e9..1e9_f64, resistance in 0.0..1e9_f64, drag in prop_oneof![Just(0.0), 1e-6..1e3_f64],
        force in 0.0..1e9_f64, speed in 1e-9..1e6_f64, share in 0.0..1.0_f64, times in (0.0..1e4_f64, 0.0..1e4_f64, 0.0..1e4_f64),
        deceleration in prop::option::of(1e-6..1e6_f64),
    ) {
        let system = Reduced { mass, drag, ..body(outside, resistance) };
        let demand = Demand { deceleration, ..demand(speed, share * speed * 0.999, delays(times.0, times.1, times.2)) };
        if let Some(stop) = stop(&Forces::new(system, [force, 0.0]), &demand) {
            let end = stop.path.end();
            prop_assert!(!end.time.is_nan() && !end.distance.is_nan() && !end.speed.is_nan());
            prop_assert!(stop.path.trace(20).iter().all(|point| !point.distance.is_nan()));
            let work = stop.path.brake_work();
            prop_assert!(!work[0].is_nan() && !work[1].is_nan());
        }
    }

    /// The trace starts and ends with the stop, and its way never shrinks.
    #[test]
    fn a_trace_covers_the_stop(forces in vehicle(), speed in 1.0..60.0_f64, count in 2..50_usize) {
        let stop = stop(&forces, &demand(speed, 0.0, delays(0.3, 0.2, 0.4))).unwrap();
        if totals(&stop).is_some() {
            let trace = stop.path.trace(count);
            prop_assert_eq!(trace.len(), count);
            prop_assert_eq!(trace[0].distance, 0.0);
            prop_assert!((trace[count - 1].distance - stop.path.end().distance).abs() <= 1e-9 * stop.path.end().distance);
            prop_assert!(trace.windows(2).all(|pair| pair[1].distance >= pair[0].distance - 1e-9));
        }
    }
}

/// By hand: 20 m/s² of gravity-like drive against 60: the dead time speeds the load up first.
#[test]
fn an_overhauling_load_gains_speed_before_torque_acts() {
    let forces = Forces::new(body(2000.0, 0.0), [6000.0, 0.0]);
    let stop = stop(&forces, &demand(1.0, 0.0, delays(0.0, 0.5, 0.0))).unwrap();
    // 2 m/s² for 0.5 s: 2 m/s after 0.75 m; then 4 m/s² for 0.5 s and 0.5 m.
    assert_close(stop.path.end().time, 1.0, 1e-12);
    assert_close(stop.path.end().distance, 1.25, 1e-12);
    assert_close(stop.path.highest_speed_with_torque(), 2.0, 1e-12);
    // E = ½·1000·2² + 2000·0.5 = 3000 J.
    assert_close(stop.path.brake_work()[0], 3000.0, 1e-12);
}

/// By hand: a load raised at 1 m/s under 4 m/s² stops after 0.25 s of a dead time of 0.5 s, falls back for 0.25 s,
/// and is caught with 10 − 4 m/s².
#[test]
fn a_raised_load_runs_back_before_its_brake() {
    let forces = Forces::new(body(-4000.0, 0.0), [10_000.0, 0.0]);
    let stop = stop(&forces, &demand(1.0, 0.0, delays(0.0, 0.5, 0.0))).unwrap();
    assert_close(stop.path.end().time, 0.25, 1e-12);
    assert_close(stop.path.end().distance, 0.125, 1e-12);
    let Ending::Reached(Some(run_back)) = stop.ending else { panic!("{:?}", stop.ending) };
    // 1 m/s backwards after 0.125 m, then 6 m/s² for 1/6 s and 1/12 m.
    assert_close(run_back.peak_speed.unwrap(), 1.0, 1e-12);
    assert_close(run_back.time.unwrap(), 0.25 + 1.0 / 6.0, 1e-12);
    assert_close(run_back.distance.unwrap(), 0.125 + 1.0 / 12.0, 1e-12);
}

/// By hand, with build-up: torque rises to 10 m/s² in 0.2 s after a dead time of 0.5 s.
#[test]
fn a_run_back_ends_in_the_build_up_if_torque_suffices() {
    let forces = Forces::new(body(-4000.0, 0.0), [10_000.0, 0.0]);
    let stop = stop(&forces, &demand(1.0, 0.0, delays(0.0, 0.5, 0.2))).unwrap();
    let Ending::Reached(Some(run_back)) = stop.ending else { panic!("{:?}", stop.ending) };
    // v = 1 + 4t − 25t² in the build-up; at 0.2 s: 0.8 m/s, then 6 m/s²: 0.8/6 s. Peak at t = 0.08 s: 1.16 m/s.
    assert_close(run_back.peak_speed.unwrap(), 1.16, 1e-12);
    assert_close(run_back.time.unwrap(), 0.25 + 0.2 + 0.8 / 6.0, 1e-12);
    let way = 0.125 + (0.2 + 2.0 * 0.04 - 25.0 * 0.008 / 3.0) + 0.8 * 0.8 / 12.0;
    assert_close(run_back.distance.unwrap(), way, 1e-12);
}

#[test]
fn a_brake_that_cannot_hold_lets_the_machine_run_back_for_good() {
    let forces = Forces::new(body(-4000.0, 0.0), [3000.0, 0.0]);
    let stop = stop(&forces, &demand(1.0, 0.0, delays(0.0, 0.0, 0.0))).unwrap();
    let Ending::Reached(Some(run_back)) = stop.ending else { panic!("{:?}", stop.ending) };
    assert_eq!((run_back.time, run_back.distance, run_back.peak_speed), (None, None, None));
}

/// Resistance holds: a machine at rest that nothing pushes back stays.
#[test]
fn a_stop_in_the_dead_time_ends_there_if_nothing_reverses_it() {
    let forces = Forces::new(body(-100.0, 200.0), [10_000.0, 0.0]);
    let stop = stop(&forces, &demand(0.3, 0.0, delays(0.0, 5.0, 0.0))).unwrap();
    assert_eq!(stop.ending, Ending::Reached(None));
    assert_close(stop.path.end().time, 1.0, 1e-12);
    assert_eq!(
        stop.path.phases().iter().map(|phase| phase.phase).collect::<Vec<_>>(),
        [Phase::Dead]
    );
}

/// By hand: terminal speed v = √((drive − brake)/C) = √(1000/2.5) = 20 m/s.
#[test]
fn a_brake_too_weak_tends_to_a_terminal_speed() {
    let system = Reduced { drag: 2.5, ..body(3000.0, 0.0) };
    let stop = stop(&Forces::new(system, [2000.0, 0.0]), &demand(30.0, 0.0, delays(0.0, 0.0, 0.5)))
        .unwrap();
    let Ending::NotReached { tending_speed: Some(speed) } = stop.ending else {
        panic!("{:?}", stop.ending)
    };
    assert_close(speed, 20.0, 1e-9);
    assert_eq!((stop.driving, stop.available), (3000.0, 2000.0));
}

#[test]
fn a_brake_too_weak_without_drag_tends_to_no_speed() {
    let stop = stop(
        &Forces::new(body(3000.0, 0.0), [2000.0, 0.0]),
        &demand(3.0, 0.0, delays(0.1, 0.1, 0.5)),
    )
    .unwrap();
    assert_eq!(stop.ending, Ending::NotReached { tending_speed: None });
}

/// By hand: 3 m/s² held from 30 m/s: 150 m; half of the 6 m/s² that the brakes give.
#[test]
fn a_held_deceleration_takes_only_the_torque_it_needs() {
    let forces = Forces::new(body(0.0, 0.0), [6000.0, 0.0]);
    let held = Demand { deceleration: Some(3.0), ..demand(30.0, 0.0, Delays::NONE) };
    let stop_held = stop(&forces, &held).unwrap();
    assert!(stop_held.is_modulated);
    assert_close(stop_held.fraction, 0.5, 1e-12);
    assert_close(stop_held.path.end().distance, 150.0, 1e-12);
    let too_much = Demand { deceleration: Some(7.0), ..held };
    let full = stop(&forces, &too_much).unwrap();
    assert!(!full.is_modulated);
    assert_close(full.path.end().distance, 75.0, 1e-12);
}

/// By hand: 1.5 m/s² held where the slope alone gives 0.98: once at rest the brake holds what it could have given.
#[test]
fn a_held_deceleration_uphill_does_not_run_back() {
    let forces = Forces::new(body(-980.0, 0.0), [6000.0, 0.0]);
    let held = Demand { deceleration: Some(1.5), ..demand(10.0, 0.0, delays(0.0, 0.0, 0.3)) };
    assert_eq!(stop(&forces, &held).unwrap().ending, Ending::Reached(None));
    // Gravity alone exceeds what is held: the operator does nothing until the load rests, and then holds it.
    let raised = Demand { deceleration: Some(0.5), ..held };
    assert_eq!(stop(&forces, &raised).unwrap().ending, Ending::Reached(None));
}

/// By hand: without brake torque 100 N slow 1000 kg and a tenth of it that turns: 100/1100 m/s².
#[test]
fn rotating_masses_are_slowed_without_brakes_too() {
    let system = Reduced { rotating: 0.1, ..body(0.0, 100.0) };
    let now = Forces::new(system, [0.0, 0.0]).at(1.0, 5.0);
    assert_close(now.deceleration, 100.0 / 1100.0, 1e-15);
    assert_within(now.brake[0], 0.0, 1e-12);
}

/// By hand: 1000 N at the wheel against 1100 N driving, whatever turns with it.
#[test]
fn a_brake_too_weak_is_compared_at_the_wheel() {
    let system = Reduced { rotating: 0.04, ..body(1100.0, 0.0) };
    let weak = stop(&Forces::new(system, [1000.0, 0.0]), &demand(10.0, 0.0, Delays::NONE)).unwrap();
    assert_close(weak.available, 1000.0, 1e-12);
    assert_close(weak.driving, 1100.0, 1e-12);
}

/// With drag the held deceleration stays constant while the torque changes; energy closes all the same.
#[test]
fn a_held_deceleration_stays_constant_against_drag() {
    let system = Reduced { drag: 1.0, ..body(0.0, 0.0) };
    let held = Demand { deceleration: Some(3.0), ..demand(30.0, 0.0, Delays::NONE) };
    let stop = stop(&Forces::new(system, [6000.0, 0.0]), &held).unwrap();
    assert_close(stop.path.end().distance, 150.0, 1e-9);
    // Drag takes ∫v² ds = ∫v³/a dv = 30⁴/(4·3) J per N s²/m².
    let drag = 30.0_f64.powi(4) / 12.0;
    assert_close(stop.path.resistance_work(), drag, 1e-9);
    assert_close(stop.path.brake_work()[0], 0.5 * 1000.0 * 900.0 - drag, 1e-9);
}

fn vehicle_parts() -> VehicleParts {
    VehicleParts {
        mass: Mass::from_si(1000.0),
        rolling_radius: Length::from_si(0.3),
        rotating_mass_factor: 1.0,
        rolling_resistance: 0.0,
        drag_area: Area::from_si(0.0),
        air_density: MassDensity::from_si(1.225),
        adhesion: Some(0.9),
        geometry: None,
    }
}

/// Published as pitch-over at a/g = l_f/h of a vehicle that tips over its front axle (statics): l_f 0.6, h 1.0 m.
#[test]
fn the_rear_wheel_lifts_where_statics_says() {
    let geometry = GeometryParts {
        wheelbase: Length::from_si(1.1),
        center_of_gravity_height: Length::from_si(1.0),
        front_axle_to_center_of_gravity: Length::from_si(0.6),
    };
    for adhesion in [None, Some(0.9)] {
        let parts = VehicleParts {
            adhesion,
            geometry: Some(Geometry::new(geometry).unwrap()),
            ..vehicle_parts()
        };
        let machine = Machine::Vehicle(Vehicle::new(parts).unwrap());
        let now = Forces::new(machine.reduced(&Situation::level()), [1e5, 1e4]).at(1.0, 10.0);
        assert_eq!(now.limited_by, LimitedBy::RearWheelLift);
        assert_close(now.deceleration, 0.6 * GRAVITY, 1e-12);
        assert_within(now.normal[1], 0.0, 1e-9);
    }
}

/// By hand: 500 kg against 200 kg, drum 0.2 m, gear 10, 2 falls, 2 kg m²: ω/v = 100 rad/m, m_e = 700 + 20 000 kg;
/// lowering drives with 300·g·0.9, raising resists with 300·g/0.9.
#[test]
fn a_hoist_reduces_to_its_load() {
    let hoist = HoistParts {
        load_mass: Mass::from_si(500.0),
        counterweight_mass: Mass::from_si(200.0),
        drum_radius: Length::from_si(0.2),
        falls: 2.0,
        gear_ratio: 10.0,
        efficiency: 0.9,
        inertia: MomentOfInertia::from_si(2.0),
    };
    let machine = Machine::Hoist(Hoist::new(hoist).unwrap());
    assert_close(machine.shaft_per_coordinate(None), 100.0, 1e-15);
    let lowering =
        machine.reduced(&Situation { direction: Direction::Lowering, ..Situation::level() });
    let raising =
        machine.reduced(&Situation { direction: Direction::Raising, ..Situation::level() });
    assert_close(lowering.inertia(), 20_700.0, 1e-15);
    assert_close(lowering.outside, 300.0 * GRAVITY * 0.9, 1e-15);
    assert_close(raising.outside, -300.0 * GRAVITY / 0.9, 1e-15);
    // A heavier counterweight drives when the load goes up.
    let light = HoistParts { load_mass: Mass::from_si(100.0), ..hoist };
    let light = Machine::Hoist(Hoist::new(light).unwrap());
    let raising = light.reduced(&Situation { direction: Direction::Raising, ..Situation::level() });
    assert_close(raising.outside, 100.0 * GRAVITY * 0.9, 1e-15);
}

/// By hand: 2000 kg material, 500 kg belt, 10 deg, c 0.02: gravity on the material only, resistance on both.
#[test]
fn a_conveyor_reduces_to_its_belt() {
    let conveyor = ConveyorParts {
        material_mass: Mass::from_si(2000.0),
        belt_mass: Mass::from_si(500.0),
        incline: Angle::from_si(10.0_f64.to_radians()),
        resistance: 0.02,
        pulley_radius: Length::from_si(0.25),
        gear_ratio: 20.0,
        efficiency: 1.0,
        inertia: MomentOfInertia::from_si(0.5),
    };
    let machine = Machine::Conveyor(Conveyor::new(conveyor).unwrap());
    let reduced = machine.reduced(&Situation::level());
    let slope = 10.0_f64.to_radians();
    assert_close(reduced.inertia(), 2500.0 + 0.5 * 80.0 * 80.0, 1e-15);
    assert_close(reduced.outside, -2000.0 * GRAVITY * slope.sin(), 1e-14);
    assert_close(reduced.resistance, 0.02 * GRAVITY * (2000.0 * slope.cos() + 500.0), 1e-14);
    let downhill = ConveyorParts { incline: Angle::from_si(-slope), efficiency: 0.8, ..conveyor };
    let downhill = Machine::Conveyor(Conveyor::new(downhill).unwrap()).reduced(&Situation::level());
    assert_close(downhill.outside, 2000.0 * GRAVITY * slope.sin() * 0.8, 1e-14);
}
