//! Pads against handbooks and reference libraries.
//!
//! Marks: seen = read in a copy of the source; memory = from memory of the named source; verified = found
//! from first principles by quadrature, outside this code.

use std::f64::consts::PI;

use brakewright::calc::pad::elliptic::complete;
use brakewright::calc::pad::{Pad, PadKind};
use brakewright::calc::pressure::PressureDistribution::{self, UniformPressure, UniformWear};
use brakewright::calc::pressure::{
    clamp_force_for_torque, friction_force_per_face, mean_pressure, torque_per_face,
};
use brakewright::calc::quantity::{Angle, Force, Length, Pressure, Si, Torque};

const INCH: f64 = 0.0254; // m, exact
const POUND_FORCE: f64 = 0.453_592_37 * 9.806_65; // N, exact
const PSI: f64 = POUND_FORCE / (INCH * INCH); // Pa
const POUND_FORCE_INCH: f64 = POUND_FORCE * INCH; // N m
const MILLIMETER: f64 = 1e-3; // m

/// Whether two numbers agree to a relative tolerance.
#[track_caller]
fn close(actual: f64, expected: f64, tolerance: f64) {
    let error = (actual - expected).abs();
    assert!(error <= tolerance * expected.abs(), "{actual} is not {expected} within {tolerance}");
}

fn sector(inner: f64, outer: f64, degrees: f64) -> Pad {
    let angle = Angle::from_si(degrees.to_radians());
    Pad::annular_sector(Length::from_si(inner), Length::from_si(outer), angle).unwrap()
}

fn round(ratio: f64) -> Pad {
    Pad::round(Length::from_si(ratio), Length::from_si(1.0)).unwrap()
}

/// Worst ratio of peak to mean pressure.
fn peak_over_mean(distribution: PressureDistribution, pad: &Pad) -> f64 {
    let force = Force::from_si(1.0);
    distribution.peak_pressure(pad, force).si() / mean_pressure(pad, force).si()
}

/// Shigley, Mechanical Engineering Design, example 16-3 (memory): sector 3.875 to 5.50 in, 108 deg, friction
/// 0.37, 13 000 lbf in from two pads. Book: 315 psi, 3748 lbf, 4.69 in, 4.02 in, 2121 psi in 1.5 in cylinders;
/// more digits recomputed outside this code (verified).
#[test]
fn the_sector_of_shigley_example_16_3_needs_the_books_force_and_pressure() {
    let pad = sector(3.875 * INCH, 5.5 * INCH, 108.0);
    let torque = Torque::from_si(13_000.0 / 2.0 * POUND_FORCE_INCH);
    // Each digit given counts: half a unit of the last one.
    for (distribution, force, peak, radius) in
        [(UniformWear, 3747.75, 315.751, 4.6875), (UniformPressure, 3710.59, 258.432, 4.7344)]
    {
        let arm = distribution.effective_radius(&pad);
        let clamp = clamp_force_for_torque(0.37, torque, arm);
        close(arm.si() / INCH, radius, 1.1e-5);
        close(clamp.si() / POUND_FORCE, force, 1.5e-6);
        close(distribution.peak_pressure(&pad, clamp).si() / PSI, peak, 2e-6);
        close(torque_per_face(0.37, clamp, arm).si(), torque.si(), 1e-14);
    }
    close(UniformWear.pressure_center_radius(&pad).si() / INCH, 4.0237, 1.3e-5);
    close(3747.75 / (PI / 4.0 * 1.5 * 1.5), 2120.8, 3e-5);
}

/// Ugural, Mechanical Design of Machine Components, example 13.6 (seen): pads of 60 deg, 5 and 10 in in
/// diameter, friction 0.2, peak 200 psi. Book: 1309 lbf, 982 lbf in for one face; digits recomputed (verified).
#[test]
fn the_sector_of_ugural_example_13_6_gives_the_books_force_and_torque() {
    let pad = sector(2.5 * INCH, 5.0 * INCH, 60.0);
    let force = UniformWear.clamp_force_at_peak(&pad, Pressure::from_si(200.0 * PSI));
    close(force.si() / POUND_FORCE, 1308.997, 4e-7);
    let torque = torque_per_face(0.2, force, UniformWear.effective_radius(&pad));
    close(torque.si() / POUND_FORCE_INCH, 981.748, 6e-7);
    close(2.0 * torque.si() / POUND_FORCE_INCH, 1963.50, 3e-6);
    close(friction_force_per_face(0.2, force).si() / POUND_FORCE, 0.2 * 1308.997, 4e-7);
}

/// Bhandari, Design of Machine Elements, example 12.12 (seen): 1500 N m from two pads, 100 to 150 mm,
/// friction 0.35, mean pressure 2 N/mm². Book, uniform pressure: 77.54316 deg, arm 126.6667 mm, 16917.29 N. The
/// wear value is recomputed (verified).
#[test]
fn the_sector_of_bhandari_example_12_12_needs_the_books_angle() {
    for (distribution, degrees) in [(UniformPressure, 77.543_16), (UniformWear, 78.5771)] {
        let pad = sector(0.1, 0.15, 30.0);
        let arm = distribution.effective_radius(&pad);
        let force = clamp_force_for_torque(0.35, Torque::from_si(750.0), arm);
        // Area grows in proportion to the angle.
        let at_30_degrees = mean_pressure(&pad, force).si();
        close(30.0 * at_30_degrees / 2e6, degrees, 6.5e-7);
        let found = sector(0.1, 0.15, degrees);
        close(mean_pressure(&found, force).si(), 2e6, 6.5e-7);
    }
    let pad = sector(0.1, 0.15, 77.543_16);
    close(UniformPressure.effective_radius(&pad).si(), 126.6667 * MILLIMETER, 4e-7);
    let force = clamp_force_for_torque(
        0.35,
        Torque::from_si(750.0),
        UniformPressure.effective_radius(&pad),
    );
    close(force.si(), 16_917.29, 3e-7);
}

/// Shigley, example 16-4 (memory of the inputs): button of 0.5 in at 2 in, peak 350 psi, friction 0.31. The book
/// takes its arm from the table of 1972 (213 lbf, 127 lbf in); the exact values are verified.
#[test]
fn the_button_of_shigley_example_16_4_has_the_exact_arm_not_the_tables() {
    let pad = Pad::round(Length::from_si(0.5 * INCH), Length::from_si(2.0 * INCH)).unwrap();
    let arm = UniformWear.effective_radius(&pad);
    close(arm.si() / (2.0 * INCH), 0.992_06, 5e-6);
    let force = UniformWear.clamp_force_at_peak(&pad, Pressure::from_si(350.0 * PSI));
    close(force.si() / POUND_FORCE, 207.82, 2.5e-5);
    let torque = torque_per_face(0.31, force, arm);
    close(torque.si() / POUND_FORCE_INCH, 127.824, 4e-6);
    // What the book rounds to 127 holds either way: with the peak given, the torque needs the area only.
    close(torque.si() / POUND_FORCE_INCH, 127.0, 0.01);
}

/// Bhandari, example 12.13 (seen): 1500 N m from 3 calipers of 2 buttons, friction 0.35, mean pressure 2 N/mm²,
/// R/e = 0.2. The book's 28.6256 mm comes from the table of 1972; the exact 28.37748 mm is verified.
#[test]
fn the_button_of_bhandari_example_12_13_has_the_exact_radius() {
    // T = 6 μ p π R² δ R/0.2, solved for R; δ does not depend on size.
    let delta = UniformWear.effective_radius(&round(0.2)).si();
    let radius = libm::cbrt(1500.0 * 0.2 / (6.0 * 0.35 * 2e6 * PI * delta));
    close(radius, 28.377_48 * MILLIMETER, 2e-7);
    let pad = Pad::round(Length::from_si(radius), Length::from_si(radius / 0.2)).unwrap();
    let force = Force::from_si(2e6 * pad.area().si());
    let torque = torque_per_face(0.35, force, UniformWear.effective_radius(&pad));
    close(6.0 * torque.si(), 1500.0, 1e-12);
}

/// Ratio of the two arms by inner over outer radius (verified).
#[test]
fn the_arms_of_a_sector_differ_as_first_principles_say() {
    for (ratio, expected) in
        [(0.5, 1.037_037), (0.6, 1.020_833), (0.7, 1.010_381), (0.8, 1.004_115)]
    {
        let pad = sector(ratio, 1.0, 50.0);
        let found = UniformPressure.effective_radius(&pad) / UniformWear.effective_radius(&pad);
        close(found.si(), expected, 5e-7);
        // p_max/p_mean = (r_o + r_i)/(2 r_i) under wear: Shigley, section 16-6 (memory).
        close(peak_over_mean(UniformWear, &pad), (1.0 + ratio) / (2.0 * ratio), 1e-14);
        close(peak_over_mean(UniformPressure, &pad), 1.0, 1e-14);
    }
}

/// Orthwein, Clutches and Brakes, ch. 3 (seen), and Shigley 16-5 (memory): at a given peak pressure and outer
/// radius the torque under wear is greatest at `r_i/r_o` = 1/√3.
#[test]
fn the_torque_under_wear_is_greatest_at_one_over_root_three() {
    let torque = |ratio: f64| {
        let pad = sector(ratio, 1.0, 60.0);
        let force = UniformWear.clamp_force_at_peak(&pad, Pressure::from_si(1e6));
        torque_per_face(0.4, force, UniformWear.effective_radius(&pad)).si()
    };
    let best = 1.0 / 3.0_f64.sqrt();
    assert!(torque(best) > torque(best - 1e-4) && torque(best) > torque(best + 1e-4));
    assert!(torque(0.577_35) > torque(0.577_45) && torque(0.577_35) > torque(0.577_25));
}

/// Exact ratios of a round pad, six decimals (verified): R/e, arm and peak over mean under wear, arm under pressure.
#[test]
fn round_pads_have_the_exact_arms_and_peaks() {
    for (ratio, wear, peak, pressure) in [
        (0.05, 0.999_687, 1.052_302, 1.000_313),
        (0.10, 0.998_747, 1.109_719, 1.001_251),
        (0.15, 0.997_172, 1.173_143, 1.002_815),
        (0.20, 0.994_949, 1.243_686, 1.005_008),
        (0.25, 0.992_062, 1.322_749, 1.007_833),
        (0.30, 0.988_486, 1.412_122, 1.011_293),
        (0.40, 0.979_134, 1.631_889, 1.020_138),
        (0.50, 0.966_528, 1.933_055, 1.031_592),
        (0.60, 0.950_075, 2.375_188, 1.045_727),
        (0.70, 0.928_776, 3.095_921, 1.062_638),
        (0.80, 0.900_749, 4.503_745, 1.082_460),
        (0.90, 0.861_564, 8.615_639, 1.105_393),
    ] {
        let pad = round(ratio);
        let half_digit = 6e-7;
        close(UniformWear.effective_radius(&pad).si(), wear, half_digit);
        close(UniformPressure.effective_radius(&pad).si(), pressure, half_digit);
        close(peak_over_mean(UniformWear, &pad), peak, half_digit);
        close(peak_over_mean(UniformPressure, &pad), 1.0, 1e-14);
    }
}

/// The table of 1972 as Bhandari reprints it, Table 12.1 p. 495 (seen): R/e and δ. It must not come out here,
/// and the difference must stay what the method sheet says.
#[test]
fn the_table_of_1972_differs_by_up_to_three_and_a_half_percent_and_the_sheet_says_so() {
    let mut worst: f64 = 0.0;
    for (ratio, table) in
        [(0.1, 0.9833), (0.2, 0.9693), (0.3, 0.9572), (0.4, 0.9467), (0.5, 0.9375)]
    {
        let exact = UniformWear.effective_radius(&round(ratio)).si();
        assert!(exact > table * 1.01, "{ratio}");
        worst = worst.max(exact / table - 1.0);
    }
    close(worst, 0.034, 0.02);
    for distribution in PressureDistribution::ALL {
        let sheet = distribution.method(PadKind::Round);
        assert!(sheet.accuracy.contains("1972") && sheet.accuracy.contains("not used"));
    }
}

/// The check polygon (verified to 1e-10 by quadrature), mm.
#[test]
fn the_check_polygon_has_the_published_integrals() {
    let points = [
        [0.070, -0.035],
        [0.118, -0.045],
        [0.131, 0.004],
        [0.115, 0.041],
        [0.092, 0.028],
        [0.068, 0.036],
    ];
    let pad = Pad::outline(&points).unwrap();
    let tolerance = 6e-9; // half of the last of nine digits
    close(pad.area().si(), 4107e-6, 1e-12);
    close(UniformPressure.effective_radius(&pad).si(), 100.171_908e-3, tolerance);
    close(UniformWear.effective_radius(&pad).si(), 97.465_631e-3, tolerance);
    let sum = pad.integrals();
    close((sum.x_per_radius / sum.area_per_radius).si(), 95.201_490e-3, tolerance);
    close((sum.y_per_radius / sum.area_per_radius).si(), -2.635_402e-3, 2e-7);
    close((sum.x_moment / sum.area).si(), 97.903_782e-3, tolerance);
    close((sum.y_moment / sum.area).si(), -2.894_570e-3, 2e-7);
    let center = libm::hypot(95.201_490e-3, 2.635_402e-3);
    close(UniformWear.pressure_center_radius(&pad).si(), center, tolerance);
}

/// Abramowitz & Stegun, Table 17.1, m = 0.5 (memory): K = 1.854 074 677 301 372, E = 1.350 643 881 047 675.
#[test]
fn the_elliptic_integrals_are_those_of_the_handbook() {
    let root = 0.5_f64.sqrt();
    let found = complete(root, root);
    close(found.k, 1.854_074_677_301_372, 4e-16);
    close(found.d, (1.854_074_677_301_372 - 1.350_643_881_047_675) / 0.5, 2e-15);
    let none = complete(0.0, 1.0);
    close(none.k, PI / 2.0, 1e-16);
    close(none.d, PI / 4.0, 1e-16);
}
