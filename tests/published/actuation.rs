//! What presses, against values worked outside this code.
//!
//! Marks: seen, from memory, verified (from first principles). Reference file, section 6.

use std::f64::consts::PI;

use brakewright::calc::actuation::{
    Actuation, Cable, CableParts, Hydraulic, HydraulicParts, Input, MasterCylinder,
    MasterCylinderParts, Pneumatic, PneumaticParts, Pressing, Spring, SpringParts,
};
use brakewright::calc::pad::Pad;
use brakewright::calc::pressure::PressureDistribution::UniformWear;
use brakewright::calc::pressure::torque_per_face;
use brakewright::calc::quantity::{
    Angle, Area, Force, Length, LineCompliance, Pressure, Si, Stiffness,
};

use crate::support::close::{assert_close, assert_within};

fn hydraulic(pistons_per_side: u32) -> HydraulicParts {
    let master = MasterCylinderParts {
        bore: Length::from_si(22.2e-3),
        lever_ratio: 4.5,
        efficiency: 0.9 * 0.95,
        operator_force: None,
        max_operator_force: None,
        max_stroke: None,
    };
    HydraulicParts {
        piston_diameter: Length::from_si(54e-3),
        pistons_per_side,
        efficiency: 0.97,
        threshold_pressure: Pressure::from_si(0.7e5),
        line_pressure: None,
        max_line_pressure: None,
        running_clearance: None,
        compliance: None,
        master_cylinder: Some(MasterCylinder::new(master).unwrap()),
    }
}

fn pressed(parts: HydraulicParts, force: f64, share: f64) -> Pressing {
    let chain = Actuation::Hydraulic(Hydraulic::new(parts).unwrap());
    chain.press(Input::OperatorForce(Force::from_si(force)), share, 2)
}

/// Line pressure and clamp force of the hydraulic check, Pa and N.
pub(super) fn hydraulic_check() -> (f64, f64) {
    let pressing = pressed(hydraulic(1), 400.0, 1.0);
    (pressing.line_pressure.unwrap().si(), pressing.clamp_force.si())
}

/// Hydraulic chain (Limpert's form of the gain, from memory; value verified): 400 N at 4.5, 0.9·0.95, 22.2 mm;
/// piston 54 mm, push-out 0.7 bar, 0.97; friction 0.38 at 110 mm on two faces.
#[test]
fn the_hydraulic_check_gives_pressure_clamp_force_and_torque() {
    let (pressure, clamp) = hydraulic_check();
    assert_within(pressure / 1e5, 39.7597, 5e-5);
    assert_within(clamp, 8677.16, 5e-3);
    // A sector from 80 to 140 mm has its arm at 110 mm under wear.
    let metres = Length::from_si;
    let pad = Pad::annular_sector(metres(0.08), metres(0.14), Angle::from_si(1.0)).unwrap();
    let arm = UniformWear.effective_radius(&pad);
    let torque = 2.0 * torque_per_face(0.38, Force::from_si(clamp), arm).si();
    assert_within(torque, 725.411, 5e-4);
}

/// Opposed pistons count on one side only (mechanics): two a side press twice as hard, above the push-out
/// pressure; half the operator's force makes half the pressure.
#[test]
fn pistons_of_one_side_add_up_and_the_threshold_counts_once() {
    let (one, two) = (pressed(hydraulic(1), 400.0, 1.0), pressed(hydraulic(2), 400.0, 1.0));
    assert_close(two.clamp_force.si(), 2.0 * one.clamp_force.si(), 1e-15);
    let half = pressed(hydraulic(1), 400.0, 0.5);
    assert_close(half.line_pressure.unwrap().si(), one.line_pressure.unwrap().si() / 2.0, 1e-15);
    let piston = PI / 4.0 * 54e-3 * 54e-3;
    assert_close(half.clamp_force.si(), (39.759_7e5 / 2.0 - 0.7e5) * piston * 0.97, 2e-6);
    // Below the push-out pressure nothing presses.
    assert_eq!(pressed(hydraulic(1), 7.0, 1.0).clamp_force.si(), 0.0);
}

/// By hand: 54 mm piston, 0.15 mm a face, two faces, one piston a side: 2·2290.221·0.15 = 687.066 mm³;
/// 400 mm³/MPa at 3.97597 MPa: 1590.388 mm³. Travel at 22.2 mm (387.0756 mm²), ratio 4.5: 26.4768 mm.
#[test]
fn fluid_and_travel_are_those_worked_by_hand() {
    let parts = HydraulicParts {
        running_clearance: Some(Length::from_si(0.15e-3)),
        compliance: Some(LineCompliance::from_si(400e-15)),
        ..hydraulic(1)
    };
    let volume = pressed(parts, 400.0, 1.0).fluid_volume.unwrap();
    assert_within(volume.si() * 1e9, 687.066 + 1590.388, 5e-3);
    let stroke = parts.master_cylinder.unwrap().stroke(volume);
    assert_within(stroke.si() * 1e3, 26.4768, 5e-4);
    // Clearance alone, or compliance alone, is counted alone; without both nothing is known.
    let clearance = HydraulicParts { compliance: None, ..parts };
    let volume = pressed(clearance, 400.0, 1.0).fluid_volume.unwrap();
    assert_within(volume.si() * 1e9, 687.066, 5e-4);
    assert_eq!(pressed(hydraulic(1), 400.0, 1.0).fluid_volume, None);
}

/// Clamp force of a cable chain, N.
pub(super) fn cabled(force: f64, lever: f64, cable: f64, caliper: f64, efficiency: f64) -> f64 {
    let parts = CableParts {
        lever_ratio: lever,
        cable_efficiency: cable,
        caliper_ratio: caliper,
        caliper_efficiency: efficiency,
        operator_force: None,
        max_operator_force: None,
    };
    let chain = Actuation::Cable(Cable::new(parts).unwrap());
    chain.press(Input::OperatorForce(Force::from_si(force)), 1.0, 2).clamp_force.si()
}

/// Euler's rope friction (verified): a housing bent by 180 deg at 0.1 passes exp(−0.1·π) = 0.7304, one bent by
/// 270 deg at 0.06 passes 0.7537. As the efficiency of the cable they scale the clamp force.
#[test]
fn a_bent_cable_passes_what_euler_says() {
    for (friction, degrees, printed) in [(0.1, 180.0_f64, 0.7304), (0.06, 270.0, 0.7537)] {
        let efficiency = (-friction * degrees.to_radians()).exp();
        assert_within(efficiency, printed, 5e-5);
        let passed = cabled(100.0, 4.0, efficiency, 10.0, 0.9);
        // By hand: 100 N · 4 · 10 · 0.9 = 3600 N at a straight cable.
        assert_close(passed, 3600.0 * printed, 5e-5 / printed);
    }
}

/// Clamp force of the pneumatic sheet, N.
pub(super) fn pneumatic_check() -> f64 {
    pneumatic(6e5)
}

fn pneumatic(pressure: f64) -> f64 {
    let parts = PneumaticParts {
        chamber_area: Area::from_si(129e-4),
        air_pressure: None,
        max_air_pressure: None,
        return_spring_force: Force::from_si(180.0),
        force_ratio: 15.0,
        efficiency: 0.93,
    };
    let chain = Actuation::Pneumatic(Pneumatic::new(parts).unwrap());
    chain.press(Input::AirPressure(Pressure::from_si(pressure)), 1.0, 2).clamp_force.si()
}

/// By hand: (600 000·0.0129 − 180)·15·0.93 = 105 462 N; 129 cm² are the 20 in² of a chamber "type 20"
/// (effective area in in², from memory). Below 180 N nothing presses.
#[test]
fn an_air_chamber_presses_less_its_return_spring() {
    assert_close(pneumatic_check(), 105_462.0, 1e-12);
    assert_close(20.0 * 6.4516, 129.0, 3e-4);
    assert_eq!(pneumatic(180.0 / 0.0129 * 0.999), 0.0);
    assert!(pneumatic(180.0 / 0.0129 * 1.001) > 0.0);
}

fn spring(force_ratio: f64, efficiency: f64) -> SpringParts {
    SpringParts {
        spring_force: None,
        spring_rate: Some(Stiffness::from_si(800e3)),
        pad_wear_travel: Some(Length::from_si(2e-3)),
        release_travel: Some(Length::from_si(1e-3)),
        force_ratio,
        efficiency,
        release_piston_diameter: Some(Length::from_si(60e-3)),
        max_release_pressure: None,
    }
}

fn sprung(parts: SpringParts) -> Pressing {
    // 800 kN/m compressed by 12 mm.
    let force = Force::from_si(800e3 * 12e-3);
    Actuation::Spring(Spring::new(parts).unwrap()).press(Input::SpringForce(force), 1.0, 2)
}

/// Clamp force with new and with worn pads, N.
pub(super) fn spring_check() -> (f64, f64) {
    let pressing = sprung(spring(1.0, 1.0));
    (pressing.highest_clamp_force.si(), pressing.clamp_force.si())
}

/// Hooke's law (verified): 800 kN/m compressed 12 mm: 9600 N new, 8000 N after 2 mm of wear travel.
#[test]
fn a_spring_brake_loses_force_as_its_pads_wear() {
    let (new, worn) = spring_check();
    assert_close(new, 9600.0, 1e-15);
    assert_close(worn, 8000.0, 1e-15);
    let pressing = sprung(spring(3.0, 0.9));
    assert_close(pressing.clamp_force.si(), 8000.0 * 2.7, 1e-14);
}

/// By hand: (9600 N + 800 N/mm · 1 mm)/(π/4·60² mm²·0.9) = 10 400/2544.690 = 4.086 942 MPa, at new pads.
#[test]
fn the_release_pressure_is_that_worked_by_hand() {
    let pressure = sprung(spring(1.0, 0.9)).release_pressure.unwrap();
    assert_close(pressure.si(), 4.086_942e6, 2e-7);
    let without_travel = SpringParts { release_travel: None, ..spring(1.0, 0.9) };
    assert_close(sprung(without_travel).release_pressure.unwrap().si(), 9600.0 / 2544.690e-6, 2e-7);
    let without_piston = SpringParts { release_piston_diameter: None, ..spring(1.0, 0.9) };
    assert_eq!(sprung(without_piston).release_pressure, None);
}
