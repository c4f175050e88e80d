//! Machines and their motion.

use std::f64::consts::PI;

use brakewright::calc::case::stop_energy::ENERGY_BALANCE;
use brakewright::calc::machine::{
    Conveyor, ConveyorParts, Direction, Geometry, GeometryParts, HOLDING, Hoist, HoistParts,
    Machine, Shaft, ShaftParts, Situation, Vehicle, VehicleParts, conveyor, hoist, shaft, vehicle,
};
use brakewright::calc::motion::{
    AXLE_FORCES, Coordinate, DRAG, Delays, Demand, Ending, Forces, LOCK_ORDER,
    MEAN_FULLY_DEVELOPED, PHASES, Reduced, Stop, stop,
};
use brakewright::calc::quantity::{
    Angle, Area, Length, Mass, MassDensity, MomentOfInertia, Si, Time, Torque,
};

use super::{Worked, worked};

const GRAVITY: f64 = 9.806_65; // m/s², exact
const FOOT: f64 = 0.3048; // m, exact
const POUND: f64 = 0.453_592_37; // kg, exact
const RPM: f64 = PI / 30.0; // rad/s

fn level(machine: &Machine) -> Reduced {
    machine.reduced(&Situation::level())
}

fn car(mass: f64, adhesion: Option<f64>) -> Machine {
    let metres = Length::from_si;
    let geometry = GeometryParts {
        wheelbase: metres(2.6),
        center_of_gravity_height: metres(0.55),
        front_axle_to_center_of_gravity: metres(1.2),
    };
    let parts = VehicleParts {
        mass: Mass::from_si(mass),
        rolling_radius: metres(0.3),
        rotating_mass_factor: 1.0,
        rolling_resistance: 0.0,
        drag_area: Area::from_si(0.0),
        air_density: MassDensity::from_si(1.225),
        adhesion,
        geometry: adhesion.map(|_| Geometry::new(geometry).unwrap()),
    };
    Machine::Vehicle(Vehicle::new(parts).unwrap())
}

fn turning(inertia: f64) -> Machine {
    let parts = ShaftParts {
        inertia: MomentOfInertia::from_si(inertia),
        driving_torque: Torque::from_si(0.0),
    };
    Machine::Shaft(Shaft::new(parts).unwrap())
}

fn from(speed: f64, forces: &Forces, dead: f64, build_up: f64) -> Stop {
    let seconds = Time::from_si;
    let delays = Delays::new(seconds(0.0), seconds(dead), seconds(build_up)).unwrap();
    let demand = Demand { initial_speed: speed, final_speed: 0.0, delays, deceleration: None };
    let found = stop(forces, &demand).unwrap();
    assert_eq!(found.ending, Ending::Reached(None));
    found
}

/// A mass that keeps moving but for its brakes and a drag.
fn sliding(mass: f64, drag: f64) -> Reduced {
    Reduced {
        coordinate: Coordinate::Way,
        mass,
        rotating: 0.0,
        translating: mass,
        outside: 0.0,
        resistance: 0.0,
        drag,
        reversal: 1.0,
        tires: None,
    }
}

fn vehicles() -> Worked {
    let machine = car(1500.0, None);
    let force = 2000.0 * machine.shaft_per_coordinate(None);
    let now = Forces::new(level(&machine), [force, 0.0]).at(1.0, 0.0);
    worked(&vehicle::REDUCTION, &[("6666.7", force), ("4.444", now.deceleration)])
}

fn shafts() -> Worked {
    let machine = turning(200.0 * POUND * FOOT * FOOT);
    // One N·m takes J·ω; forty seconds take the fortieth part of that torque.
    let slow = from(1800.0 * RPM, &Forces::new(level(&machine), [1.0, 0.0]), 0.0, 0.0);
    let torque = slow.path.end().time / 40.0 / (POUND * GRAVITY * FOOT);
    // The handbook's own number, by its own rounded constant.
    worked(&shaft::REDUCTION, &[("29.29", torque), ("29.2", 200.0 * 1800.0 / (308.0 * 40.0))])
}

fn hoists() -> Worked {
    let parts = HoistParts {
        load_mass: Mass::from_si(1000.0),
        counterweight_mass: Mass::from_si(0.0),
        drum_radius: Length::from_si(0.25),
        falls: 1.0,
        gear_ratio: 25.0,
        efficiency: 1.0,
        inertia: MomentOfInertia::from_si(0.0),
    };
    let machine = Machine::Hoist(Hoist::new(parts).unwrap());
    let lowering = Situation { direction: Direction::Lowering, ..Situation::level() };
    let driving = machine.reduced(&lowering).outside;
    let torque = driving / machine.shaft_per_coordinate(None);
    worked(&hoist::REDUCTION, &[("9806.65", driving), ("98.07", torque)])
}

fn conveyors() -> Worked {
    let parts = ConveyorParts {
        material_mass: Mass::from_si(2000.0),
        belt_mass: Mass::from_si(0.0),
        incline: Angle::from_si(10.0 * PI / 180.0),
        resistance: 0.0,
        pulley_radius: Length::from_si(0.3),
        gear_ratio: 10.0,
        efficiency: 1.0,
        inertia: MomentOfInertia::from_si(0.0),
    };
    let machine = Machine::Conveyor(Conveyor::new(parts).unwrap());
    worked(&conveyor::REDUCTION, &[("3405.8", -level(&machine).outside)])
}

fn phases() -> Worked {
    let end = from(30.0, &Forces::new(sliding(1.0, 0.0), [7.0, 0.0]), 0.9, 0.4).path.end();
    worked(&PHASES, &[("97.2390476", end.distance), ("5.3857143", end.time)])
}

fn drag() -> Worked {
    let end = from(55.0, &Forces::new(sliding(1500.0, 0.45), [7000.0, 0.0]), 0.0, 0.0).path.end();
    worked(&DRAG, &[("11.1001211", end.time), ("296.1629807", end.distance)])
}

fn mean_fully_developed() -> Worked {
    let path = from(20.0, &Forces::new(sliding(1.0, 0.0), [5.0, 0.0]), 0.0, 0.0).path;
    let at = |speed: f64| path.falling_through(speed).unwrap().distance;
    let way = at(2.0) - at(16.0);
    let mean = (256.0 - 4.0) / (2.0 * way);
    worked(&MEAN_FULLY_DEVELOPED, &[("25.2", way), ("50.4", 2.0 * way), ("5", mean)])
}

fn axle_forces() -> Worked {
    let share = |demand: [f64; 2]| {
        let forces = Forces::new(level(&car(1000.0, Some(0.8))), demand);
        forces.at(1.0, 0.0).total_ground() / (1000.0 * GRAVITY)
    };
    let printed = [("0.5185185", share([1e6, 0.0])), ("0.3157895", share([0.0, 1e6]))];
    worked(&AXLE_FORCES, &printed)
}

fn lock_order() -> Worked {
    let weight = 1000.0 * GRAVITY;
    let forces = Forces::new(level(&car(1000.0, Some(0.8))), [0.65 * weight, 0.35 * weight]);
    let factors = forces.lock_factors(0.0).unwrap();
    assert!(factors.rear_first());
    worked(&LOCK_ORDER, &[("0.7111111", factors.rear.unwrap())])
}

fn holding() -> Worked {
    let grade = Angle::from_si(0.2_f64.atan());
    let force = car(1500.0, None).holding_force(&Situation { grade, ..Situation::level() });
    worked(&HOLDING, &[("2884.86", force)])
}

fn energy() -> Worked {
    let machine = turning(12.25);
    let path = from(500.0 * RPM, &Forces::new(level(&machine), [100.0, 0.0]), 0.0, 0.2).path;
    let gyration: f64 = 0.35;
    let printed = [("12.25", 100.0 * gyration.powi(2)), ("16 792", path.brake_work()[0])];
    worked(&ENERGY_BALANCE, &printed)
}

pub(super) fn all() -> Vec<Worked> {
    let machines = [vehicles(), shafts(), hoists(), conveyors()];
    let motion = [
        phases(),
        drag(),
        mean_fully_developed(),
        axle_forces(),
        lock_order(),
        energy(),
        holding(),
    ];
    machines.into_iter().chain(motion).collect()
}
