//! Pads, friction and wear.

use std::f64::consts::PI;

use brakewright::calc::friction::Friction;
use brakewright::calc::lining::{FADE, FadePoint, Lining, LiningParts};
use brakewright::calc::pad::{
    OUTLINE_UNIFORM_PRESSURE, OUTLINE_UNIFORM_WEAR, Pad, ROUND_UNIFORM_PRESSURE,
    ROUND_UNIFORM_WEAR, SECTOR_UNIFORM_PRESSURE, SECTOR_UNIFORM_WEAR,
};
use brakewright::calc::pressure::PressureDistribution::{UniformPressure, UniformWear};
use brakewright::calc::pressure::{FRICTION_TORQUE, torque_per_face};
use brakewright::calc::quantity::{
    Angle, Force, Length, Pressure, Si, SpecificWear, ThermodynamicTemperature, ZERO_CELSIUS,
};
use brakewright::calc::wear::{PAD_LIFE, pad_life_stops};

use super::{Worked, worked};

const INCH: f64 = 0.0254; // m, exact
const POUND_FORCE: f64 = 4.448_221_615_260_5; // N, exact
const PSI: f64 = POUND_FORCE / (INCH * INCH);

fn metres(value: f64) -> Length {
    Length::from_si(value)
}

fn sector(inner: f64, outer: f64, degrees: f64) -> Pad {
    let angle = Angle::from_si(degrees * PI / 180.0);
    Pad::annular_sector(metres(inner), metres(outer), angle).unwrap()
}

fn outline() -> Pad {
    let corners = [(70, -35), (118, -45), (131, 4), (115, 41), (92, 28), (68, 36)];
    let points = corners.map(|(x, y)| [f64::from(x) * 1e-3, f64::from(y) * 1e-3]);
    Pad::outline(&points).unwrap()
}

fn fade() -> f64 {
    let celsius = |value: f64| ThermodynamicTemperature::from_si(value + ZERO_CELSIUS);
    let point = |temperature, factor| FadePoint { temperature: celsius(temperature), factor };
    let parts = LiningParts {
        fade: vec![point(100.0, 1.0), point(400.0, 0.7)],
        ..LiningParts::of_friction(Friction::single(0.4).unwrap())
    };
    Lining::new(parts).unwrap().fade_factor(celsius(250.0))
}

/// A sector of 40 cm²; half of the 50 kJ goes into each face.
fn pad_life() -> f64 {
    let degrees = 4000.0 / (0.5 * (150.0_f64.powi(2) - 100.0_f64.powi(2))) * 180.0 / PI;
    let pad = sector(0.1, 0.15, degrees);
    pad_life_stops(&pad, metres(0.009), SpecificWear::from_si(0.2e-12), 25_000.0).unwrap()
}

pub(super) fn all() -> Vec<Worked> {
    let shigley = sector(3.875 * INCH, 5.5 * INCH, 108.0);
    let button = Pad::round(metres(0.5 * INCH), metres(2.0 * INCH)).unwrap();
    let half = Pad::round(metres(0.5), metres(1.0)).unwrap();
    let clamp = UniformWear.clamp_force_at_peak(&button, Pressure::from_si(350.0 * PSI));
    let force = Force::from_si(3747.75 * POUND_FORCE);
    let torque = torque_per_face(0.37, force, metres(4.6875 * INCH));
    vec![
        worked(
            &SECTOR_UNIFORM_WEAR,
            &[
                ("4.6875", UniformWear.effective_radius(&shigley).si() / INCH),
                ("4.0237", UniformWear.pressure_center_radius(&shigley).si() / INCH),
            ],
        ),
        worked(
            &SECTOR_UNIFORM_PRESSURE,
            &[("126.6667", 1e3 * UniformPressure.effective_radius(&sector(0.1, 0.15, 60.0)).si())],
        ),
        worked(
            &ROUND_UNIFORM_WEAR,
            &[
                ("0.992062", UniformWear.effective_radius(&button).si() / (2.0 * INCH)),
                ("207.82", clamp.si() / POUND_FORCE),
            ],
        ),
        worked(
            &ROUND_UNIFORM_PRESSURE,
            &[("1.031592", UniformPressure.effective_radius(&half).si())],
        ),
        worked(
            &OUTLINE_UNIFORM_WEAR,
            &[("97.465631", 1e3 * UniformWear.effective_radius(&outline()).si())],
        ),
        worked(
            &OUTLINE_UNIFORM_PRESSURE,
            &[("100.171908", 1e3 * UniformPressure.effective_radius(&outline()).si())],
        ),
        worked(&FRICTION_TORQUE, &[("13 000", 2.0 * torque.si() / POUND_FORCE / INCH)]),
        worked(&FADE, &[("0.85", fade())]),
        worked(&PAD_LIFE, &[("7200", pad_life())]),
    ]
}
