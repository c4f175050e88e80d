//! Stops against published formulas and tables.
//!
//! Sources are named beside each check: [S] read in a copy of the source, [M] from memory of it, [V] verified from
//! first principles.

use brakewright::calc::machine::{
    Geometry, GeometryParts, Machine, Shaft, ShaftParts, Situation, Vehicle, VehicleParts,
};
use brakewright::calc::motion::{
    Coordinate, Delays, Demand, Ending, Forces, LimitedBy, Reduced, Stop, stop,
};
use brakewright::calc::quantity::{
    Angle, Area, Length, Mass, MassDensity, MomentOfInertia, Si, Time, Torque,
};

use crate::support::close::{assert_close, assert_within};

const FOOT: f64 = 0.3048; // m, exact
const MILE_PER_HOUR: f64 = 0.447_04; // m/s, exact
const KILOMETER_PER_HOUR: f64 = 1.0 / 3.6; // m/s
const GRAVITY: f64 = 9.806_65; // m/s², exact

/// A body of 1 kg on a way, braked with `deceleration`, driven by `outside` (per kg).
fn point_mass(deceleration: f64, outside: f64) -> Forces {
    let system = Reduced {
        coordinate: Coordinate::Way,
        mass: 1.0,
        rotating: 0.0,
        translating: 1.0,
        outside,
        resistance: 0.0,
        drag: 0.0,
        reversal: 1.0,
        tires: None,
    };
    Forces::new(system, [deceleration, 0.0])
}

fn delays(reaction: f64, dead: f64, build_up: f64) -> Delays {
    Delays::new(Time::from_si(reaction), Time::from_si(dead), Time::from_si(build_up)).unwrap()
}

fn from_speed(speed: f64, delays: Delays) -> Demand {
    Demand { initial_speed: speed, final_speed: 0.0, delays, deceleration: None }
}

fn total(stop: &Stop) -> (f64, f64) {
    assert!(matches!(stop.ending, Ending::Reached(None)), "{:?}", stop.ending);
    (stop.path.end().distance, stop.path.end().time)
}

fn way(speed: f64, deceleration: f64, reaction: f64) -> f64 {
    total(
        &stop(&point_mass(deceleration, 0.0), &from_speed(speed, delays(reaction, 0.0, 0.0)))
            .unwrap(),
    )
    .0
}

/// Reference file section 5 [V]: v0(td + tb/2) + v0²/(2a) − a·tb²/24.
#[test]
fn build_up_of_torque_follows_the_closed_form() {
    let full = stop(&point_mass(7.0, 0.0), &from_speed(30.0, delays(0.0, 0.9, 0.4))).unwrap();
    assert_within(total(&full).0, 97.239_047_6, 5e-8);
    assert_within(total(&full).1, 5.385_714_3, 5e-8);
    let within_build_up =
        stop(&point_mass(6.0, 0.0), &from_speed(0.5, delays(0.0, 0.2, 0.6))).unwrap();
    assert_within(total(&within_build_up).0, 0.205_409_3, 5e-8);
}

/// Constant force and drag quadratic in speed, free stop [V]: m 1500 kg, A 7000 N, C 0.45 N s²/m², 55 m/s.
#[test]
fn a_stop_against_air_drag_follows_the_closed_form() {
    let mut forces = point_mass(0.0, 0.0);
    forces.system.mass = 1500.0;
    forces.system.drag = 0.45;
    let forces = Forces::new(forces.system, [7000.0, 0.0]);
    let with_drag = stop(&forces, &from_speed(55.0, Delays::NONE)).unwrap();
    let (a, c): (f64, f64) = (7000.0, 0.45);
    let time = 1500.0 / (a * c).sqrt() * (55.0 * (c / a).sqrt()).atan();
    let distance = 1500.0 / (2.0 * c) * (1.0 + c * 55.0 * 55.0 / a).ln();
    assert_within(time, 11.100_121_1, 5e-8);
    assert_within(distance, 296.162_979_7, 1e-6); // the exact form ends in ..98066
    assert_close(total(&with_drag).1, time, 1e-9);
    assert_close(total(&with_drag).0, distance, 1e-9);
}

/// AASHTO stopping sight distance, US: 1.47 V t + 1.075 V²/a with t 2.5 s, a 11.2 ft/s² [S formula, TxDOT manual 4.11.1];
/// design values [S for 20 to 35 and 50 to 65 mph, Highway Engineering Handbook Table 2.2; M for the others] are
/// the computed ones rounded up to 5 ft.
#[test]
fn stopping_sight_distance_gives_the_us_design_values() {
    let design = [
        (15, 80),
        (20, 115),
        (25, 155),
        (30, 200),
        (35, 250),
        (40, 305),
        (45, 360),
        (50, 425),
        (55, 495),
        (60, 570),
        (65, 645),
        (70, 730),
        (75, 820),
        (80, 910),
    ];
    for (speed, expected) in design {
        let feet = way(f64::from(speed) * MILE_PER_HOUR, 11.2 * FOOT, 2.5) / FOOT;
        assert_eq!((feet / 5.0).ceil() * 5.0, f64::from(expected), "{speed} mph: {feet} ft");
    }
}

/// AASHTO, metric: 0.278 V t + 0.039 V²/a, a 3.4 m/s² [M]; the published constants are rounded, hence 0.8 %.
#[test]
fn stopping_sight_distance_gives_the_metric_column() {
    let computed = [
        (20, 18.5),
        (30, 31.2),
        (40, 46.2),
        (50, 63.4),
        (60, 83.0),
        (70, 104.9),
        (80, 129.0),
        (90, 155.5),
        (100, 184.2),
        (110, 215.2),
        (120, 248.6),
        (130, 284.2),
    ];
    for (speed, expected) in computed {
        assert_close(way(f64::from(speed) * KILOMETER_PER_HOUR, 3.4, 2.5), expected, 0.008);
    }
}

/// AASHTO on grades: braking term V²/[30((a/32.2) ± G)] ft [S form, M constants], columns computed from it.
///
/// The formula takes the small-angle form and a rounded 30; the machine solves the exact slope, hence 0.9 %.
#[test]
fn stopping_sight_distance_on_grades_follows_the_published_form() {
    let rows = [
        (15, [78.7, 81.2, 84.2, 75.0, 73.5, 72.3]),
        (30, [204.6, 214.5, 226.6, 189.7, 183.8, 178.8]),
        (45, [377.8, 399.9, 427.2, 344.0, 330.9, 319.5]),
        (60, [598.1, 637.4, 685.9, 538.1, 514.7, 494.6]),
        (80, [965.2, 1035.2, 1121.4, 858.6, 817.1, 781.3]),
    ];
    for (speed, columns) in rows {
        for (grade, expected) in [-3.0_f64, -6.0, -9.0, 3.0, 6.0, 9.0].into_iter().zip(columns) {
            let slope = (grade / 100.0).atan();
            let forces = point_mass(11.2 * FOOT, -GRAVITY * slope.sin());
            let stop =
                stop(&forces, &from_speed(f64::from(speed) * MILE_PER_HOUR, delays(2.5, 0.0, 0.0)))
                    .unwrap();
            assert_close(total(&stop).0 / FOOT, expected, 0.009);
        }
    }
}

/// S = t·v + v²/(2a) in the form X·V + Y·V² (V in km/h): t = 3.6 X, a = 1/(25.92 Y).
///
/// 49 CFR 571.135 S7.5 to S7.14 [S]: light vehicles from 100 km/h. 49 CFR 571.122 Table 2 [S]: motorcycles from
/// 60 and 40 km/h. Directive 93/14/EEC [S]: mopeds and motorcycles. Regulation (EU) 2015/68 annex II [S]: tractors.
#[test]
fn regulation_distances_follow_from_delay_and_deceleration() {
    let rows = [
        (100.0, 0.10, 0.0060, 70.0, 0.05), // 571.135 S7.5 cold effectiveness
        (100.0, 0.10, 0.0075, 85.0, 0.05), // S7.8 antilock failure
        (100.0, 0.10, 0.0100, 110.0, 0.05), // S7.9 variable proportioning failure
        (100.0, 0.10, 0.0158, 168.0, 0.05), // S7.10 circuit failure
        (100.0, 0.10, 0.0079, 89.0, 0.05), // S7.14 hot performance
        (60.0, 0.10, 0.0087, 37.32, 0.005), // 571.122 front brake, category 3-3
        (60.0, 0.10, 0.0133, 53.88, 0.005), // 571.122 rear brake, category 3-3
        (40.0, 0.10, 1.0 / 90.0, 21.78, 0.005), // 93/14/EEC two-wheel moped, front
        (60.0, 0.10, 1.0 / 115.0, 37.30, 0.005), // 93/14/EEC motorcycle, front
        (30.0, 0.15, 1.0 / 92.0, 14.28, 0.005), // 2015/68 tractor up to 30 km/h
        (40.0, 0.15, 1.0 / 130.0, 18.31, 0.005), // 2015/68 tractor above 30 km/h
    ];
    for (speed, linear, quadratic, expected, within) in rows {
        let distance = way(speed * KILOMETER_PER_HOUR, 1.0 / (25.92 * quadratic), 3.6 * linear);
        assert_within(distance, expected, within);
    }
}

/// 16 CFR 1512.5 [S]: 15 ft from 15 mph needs 16.13 ft/s² (0.501 g); speed correction (Vs/Vm)²·Sm: 15.6 ft at
/// 15.5 mph correspond to 14.61 ft at 15 mph.
#[test]
fn the_bicycle_rule_needs_half_the_acceleration_of_free_fall() {
    assert_within(way(15.0 * MILE_PER_HOUR, 16.13 * FOOT, 0.0) / FOOT, 15.0, 0.01);
    let deceleration = (15.5 * MILE_PER_HOUR).powi(2) / (2.0 * 15.6 * FOOT);
    assert_within(way(15.0 * MILE_PER_HOUR, deceleration, 0.0) / FOOT, 14.61, 0.005);
}

/// UK Highway Code rule 126 [S]: thinking and braking distances in metres; thinking 0.671 s, braking V²/20 ft
/// (21.51 ft/s²), overall within 2 %.
#[test]
fn the_highway_code_distances_come_out() {
    for (speed, overall) in [(20, 12.0), (30, 23.0), (40, 36.0), (50, 53.0), (60, 73.0), (70, 96.0)]
    {
        assert_close(way(f64::from(speed) * MILE_PER_HOUR, 21.51 * FOOT, 0.671), overall, 0.02);
    }
}

fn vehicle(adhesion: Option<f64>) -> VehicleParts {
    VehicleParts {
        mass: Mass::from_si(1000.0),
        rolling_radius: Length::from_si(0.3),
        rotating_mass_factor: 1.0,
        rolling_resistance: 0.0,
        drag_area: Area::from_si(0.0),
        air_density: MassDensity::from_si(1.225),
        adhesion,
        geometry: Some(
            Geometry::new(GeometryParts {
                wheelbase: Length::from_si(2.6),
                center_of_gravity_height: Length::from_si(0.55),
                front_axle_to_center_of_gravity: Length::from_si(1.2),
            })
            .unwrap(),
        ),
    }
}

fn braking_ratio(demand: [f64; 2], grade: f64) -> (f64, LimitedBy) {
    let machine = Machine::Vehicle(Vehicle::new(vehicle(Some(0.8))).unwrap());
    let situation = Situation { grade: Angle::from_si(grade), ..Situation::level() };
    let instant = Forces::new(machine.reduced(&situation), demand).at(1.0, 0.0);
    (instant.total_ground() / (1000.0 * GRAVITY), instant.limited_by)
}

/// Load transfer on two axles [V, reference file section 5; statics as in Limpert, from memory]:
/// L 2.6, l_f 1.2, h 0.55 m, adhesion 0.8.
#[test]
fn axle_loads_limit_the_braking_ratio_as_published() {
    let (front_only, limited_by) = braking_ratio([1e6, 0.0], 0.0);
    assert_within(front_only, 0.518_518_5, 5e-8);
    assert_eq!(limited_by, LimitedBy::Adhesion);
    assert_within(braking_ratio([0.0, 1e6], 0.0).0, 0.315_789_5, 5e-8);
    assert_within(braking_ratio([1e6, 1e6], 0.0).0, 0.8, 1e-12);
    let downhill = 6.0_f64.to_radians();
    assert_within(braking_ratio([1e6, 0.0], -downhill).0 - downhill.sin(), 0.411_150, 5e-7);
}

/// Fixed distribution, front share 0.65 [V]: the rear axle locks first, at 0.7111111 g.
#[test]
fn the_rear_axle_locks_first_where_published() {
    let machine = Machine::Vehicle(Vehicle::new(vehicle(Some(0.8))).unwrap());
    let weight = 1000.0 * GRAVITY;
    let forces = Forces::new(machine.reduced(&Situation::level()), [0.65 * weight, 0.35 * weight]);
    let factors = forces.lock_factors(0.0).unwrap();
    assert!(factors.rear_first());
    assert_within(factors.rear.unwrap(), 0.711_111_1, 5e-8);
}

/// Hicks, Standard Handbook of Mechanical Engineering Calculations, section 24 [S]: Wk² 200 lb ft², 1800 rpm to rest
/// in 40 s: 29.2 lb ft with the rounded constant 308; exact constant 307.239, 600 revolutions, 110 433 ft lbf.
#[test]
fn the_handbook_shaft_stops_in_its_time() {
    const POUND: f64 = 0.453_592_37; // kg, exact
    let inertia = 200.0 * POUND * FOOT * FOOT;
    let shaft = ShaftParts {
        inertia: MomentOfInertia::from_si(inertia),
        driving_torque: Torque::from_si(0.0),
    };
    let machine = Machine::Shaft(Shaft::new(shaft).unwrap());
    let speed = 1800.0 * std::f64::consts::TAU / 60.0;
    let torque = 200.0 * 1800.0 / (307.239 * 40.0) * POUND * GRAVITY * FOOT;
    assert_close(200.0 * 1800.0 / (308.0 * 40.0), 29.2, 1e-3);
    let forces = Forces::new(machine.reduced(&Situation::level()), [torque, 0.0]);
    let stop = stop(&forces, &from_speed(speed, Delays::NONE)).unwrap();
    assert_close(total(&stop).1, 40.0, 3e-6);
    assert_close(total(&stop).0 / std::f64::consts::TAU, 600.0, 3e-6);
    assert_close(stop.path.brake_work()[0] / (POUND * GRAVITY * FOOT), 110_433.0, 1e-5);
}
