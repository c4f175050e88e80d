//! Pads: what holds for every one of them, and what is refused.

use std::f64::consts::{PI, TAU};

use brakewright::calc::fault::{FaultCode, Faults};
use brakewright::calc::pad::{Pad, PadIntegrals, PadKind};
use brakewright::calc::pressure::PressureDistribution::{self, UniformPressure, UniformWear};
use brakewright::calc::pressure::{mean_pressure, torque_per_face};
use brakewright::calc::quantity::{Angle, Force, Length, Pressure, Si};
use proptest::prelude::*;
use serde_json::Value;

fn sector(inner: f64, outer: f64, angle: f64) -> Result<Pad, Faults> {
    Pad::annular_sector(Length::from_si(inner), Length::from_si(outer), Angle::from_si(angle))
}

fn round(radius: f64, center: f64) -> Result<Pad, Faults> {
    Pad::round(Length::from_si(radius), Length::from_si(center))
}

fn seven(sum: &PadIntegrals) -> [f64; 7] {
    [
        sum.area.si(),
        sum.area_per_radius.si(),
        sum.radius_moment.si(),
        sum.x_moment.si(),
        sum.y_moment.si(),
        sum.x_per_radius.si(),
        sum.y_per_radius.si(),
    ]
}

/// Member and code of every fault.
fn faults(pad: Result<Pad, Faults>) -> Vec<(String, FaultCode)> {
    let faults = pad.unwrap_err();
    faults.as_slice().iter().map(|fault| (fault.member.clone(), fault.code)).collect()
}

fn only(member: &str, code: FaultCode) -> Vec<(String, FaultCode)> {
    vec![(member.to_owned(), code)]
}

/// A star-shaped polygon about a center, counterclockwise: simple whatever the radii are.
fn star(center: [f64; 2], radii: &[f64]) -> Vec<[f64; 2]> {
    let step = TAU / f64::from(u32::try_from(radii.len()).unwrap());
    let place = |(index, radius): (u32, &f64)| {
        let angle = f64::from(index) * step;
        [center[0] + radius * libm::cos(angle), center[1] + radius * libm::sin(angle)]
    };
    (0_u32..).zip(radii).map(place).collect()
}

/// The corners of a sector's outline, its arcs as `steps` chords.
fn sampled_sector(inner: f64, outer: f64, angle: f64, steps: u32) -> Vec<[f64; 2]> {
    let at = |radius: f64, step: u32| {
        let turn = angle * (f64::from(step) / f64::from(steps) - 0.5);
        [radius * libm::cos(turn), radius * libm::sin(turn)]
    };
    let far = (0..=steps).map(|step| at(outer, step));
    far.chain((0..=steps).rev().map(|step| at(inner, step))).collect()
}

/// Quadrature by outside libraries, see `tests/reference/pads.py`.
#[test]
fn the_integrals_are_those_of_outside_quadrature() {
    let reference: Value = serde_json::from_str(include_str!("../reference/pads.json")).unwrap();
    let cases = reference["cases"].as_array().unwrap();
    assert_eq!(cases.len(), 18);
    for case in cases {
        let number = |name: &str| case[name].as_f64().unwrap();
        let pad = match case["shape"].as_str().unwrap() {
            "annular_sector" => {
                let angle = number("degrees").to_radians();
                sector(number("inner_radius"), number("outer_radius"), angle)
            }
            "round" => round(number("radius"), number("center_radius")),
            _ => {
                let points: Vec<[f64; 2]> = serde_json::from_value(case["points"].clone()).unwrap();
                Pad::outline(&points)
            }
        };
        let pad = pad.unwrap();
        let expected = &case["integrals"];
        // A moment about the axis that balances is judged by the size of its parts.
        let sizes = [("area", 0), ("area_per_radius", 1), ("radius_moment", 2)];
        let moments = [
            ("x_moment", 3, 2),
            ("y_moment", 4, 2),
            ("x_per_radius", 5, 0),
            ("y_per_radius", 6, 0),
        ];
        let found = seven(pad.integrals());
        let near = |name: &str, index: usize, scale: usize| {
            let expected = expected[name].as_f64().unwrap();
            let error = (found[index] - expected).abs() / found[scale];
            assert!(error < 2e-13, "{name} of {case}: {} misses by {error:e}", found[index]);
        };
        for (name, index) in sizes {
            near(name, index, index);
        }
        for (name, index, scale) in moments {
            near(name, index, scale);
        }
    }
}

#[test]
fn a_pad_knows_its_extent() {
    let pad = sector(0.1, 0.15, 1.2).unwrap();
    assert_eq!((pad.smallest_radius().si(), pad.largest_radius().si()), (0.1, 0.15));
    assert_eq!((pad.angular_width().si(), pad.kind()), (1.2, PadKind::AnnularSector));
    let pad = round(0.05, 0.1).unwrap();
    assert!((pad.angular_width().si() - PI / 3.0).abs() < 1e-15); // 2 asin(1/2)
    assert!((pad.smallest_radius().si() - 0.05).abs() < 1e-17);
    // The nearest point is the foot on a side, not a corner.
    let pad = Pad::outline(&[[0.1, -0.1], [0.2, 0.0], [0.1, 0.1]]).unwrap();
    assert!((pad.smallest_radius().si() - 0.1).abs() < 1e-16);
    assert!((pad.largest_radius().si() - 0.2).abs() < 1e-16);
    assert!((pad.angular_width().si() - PI / 2.0).abs() < 1e-15);
    // Across the direction of -x, where angles jump.
    let pad = Pad::outline(&[[-0.1, -0.1], [-0.2, 0.0], [-0.1, 0.1]]).unwrap();
    assert!((pad.angular_width().si() - PI / 2.0).abs() < 1e-15);
}

#[test]
fn a_full_ring_balances_and_360_degrees_are_accepted() {
    let degree = PI / 180.0;
    for turn in [TAU, 360.0 * degree, 360.0_f64.to_radians(), TAU * (1.0 + 3e-16), 6.283_185_308] {
        let pad = sector(0.1, 0.2, turn).unwrap();
        assert!((pad.area().si() - PI * 0.03).abs() < 1e-16);
        assert_eq!(UniformWear.pressure_center_radius(&pad), Length::from_si(0.0));
        assert!(pad.angular_width().si() <= TAU);
    }
    assert_eq!(faults(sector(0.1, 0.2, 6.29)), only("angle", FaultCode::OutOfRange));
}

#[test]
fn bad_sectors_are_refused_with_all_faults() {
    let found = faults(sector(-0.1, 0.0, 0.0));
    let members: Vec<_> = found.iter().map(|(member, _)| member.as_str()).collect();
    assert_eq!(members, ["inner_radius", "outer_radius", "angle"]);
    assert!(found.iter().all(|(_, code)| *code == FaultCode::NotPositive));
    let found = faults(sector(0.1, 0.1, 7.0));
    assert_eq!(found[0], ("outer_radius".to_owned(), FaultCode::NotAboveInnerRadius));
    assert_eq!(found[1], ("angle".to_owned(), FaultCode::OutOfRange));
    assert_eq!(faults(sector(f64::NAN, 0.1, 1.0)), only("inner_radius", FaultCode::NotPositive));
    assert_eq!(faults(sector(0.1, 0.2, f64::NAN)), only("angle", FaultCode::NotPositive));
    assert_eq!(faults(sector(1.0, 1e200, 1.0)), only("", FaultCode::OutOfRange));
    assert_eq!(faults(sector(1e-200, 2e-200, 1.0)), only("", FaultCode::OutOfRange));
}

#[test]
fn bad_round_pads_are_refused_with_all_faults() {
    assert_eq!(faults(round(0.1, 0.1)), only("radius", FaultCode::PadReachesAxis));
    assert_eq!(faults(round(0.2, 0.1)), only("radius", FaultCode::PadReachesAxis));
    assert_eq!(faults(round(0.0, f64::NAN)).len(), 2);
    assert_eq!(faults(round(1e200, 1e201)), only("", FaultCode::OutOfRange));
    assert_eq!(faults(round(1e-200, 1.0)), only("", FaultCode::OutOfRange));
}

#[test]
fn bad_outlines_are_refused_with_the_place() {
    let refused = |points: &[[f64; 2]]| faults(Pad::outline(points));
    let crossing = FaultCode::OutlineSelfIntersects;
    assert_eq!(refused(&[[1.0, 0.0], [2.0, 0.0]]), only("points", FaultCode::WrongCount));
    assert_eq!(refused(&[[1.0, 1.0]; 1001]), only("points", FaultCode::WrongCount));
    let line = [[1.0, 1.0], [2.0, 2.0], [3.0, 3.0]];
    assert_eq!(refused(&line), only("points", FaultCode::OutlineWithoutArea));
    let bow = [[1.0, 0.0], [2.0, 1.0], [2.0, 0.0], [1.0, 1.0]];
    assert_eq!(refused(&bow), only("points/0", crossing));
    let closed = [[1.0, 0.0], [2.0, 0.0], [2.0, 1.0], [1.0, -0.0]];
    assert_eq!(refused(&closed), only("points/3", crossing));
    // A corner touches another side exactly.
    let touching = [[1.0, 0.0], [3.0, 0.0], [3.0, 1.0], [2.0, 0.0], [1.0, 1.0]];
    assert_eq!(refused(&touching), only("points/0", crossing));
    let spike = [[1.0, 0.0], [3.0, 0.0], [2.0, 0.0], [2.0, 1.0]];
    assert_eq!(refused(&spike), only("points/0", crossing));
    // The spike is at the first point.
    let spike = [[3.0, 0.0], [2.0, 0.0], [2.0, 1.0], [1.0, 0.0]];
    assert_eq!(refused(&spike), only("points/0", crossing));
    let around = [[-1.0, -1.0], [1.0, -1.0], [0.0, 1.0]];
    assert_eq!(refused(&around), only("points", FaultCode::OutlineContainsAxis));
    let on_side = [[-1.0, 0.0], [1.0, 0.0], [0.0, 1.0]];
    assert_eq!(refused(&on_side), only("points", FaultCode::OutlineContainsAxis));
    let on_corner = [[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]];
    assert_eq!(refused(&on_corner), only("points", FaultCode::OutlineContainsAxis));
    let both = [[-1.0, -1.0], [1.0, 1.0], [1.0, -1.0], [-1.0, 1.0]];
    assert_eq!(refused(&both).len(), 2);
    let endless = [[1.0, 0.0], [f64::INFINITY, 0.0], [1.0, f64::NAN]];
    let expected = [("points/1", FaultCode::OutOfRange), ("points/2", FaultCode::OutOfRange)];
    assert_eq!(refused(&endless), expected.map(|(member, code)| (member.to_owned(), code)));
    let tiny = [[1e-200, 0.0], [2e-200, 0.0], [1e-200, 1e-200]];
    assert_eq!(refused(&tiny).len(), 1);
}

/// Decimals that lie on one line only before they are rounded must neither be called touching nor pass as such.
#[test]
fn nearly_touching_sides_are_told_apart_exactly() {
    let notch =
        |depth: f64| Pad::outline(&[[1.0, 0.0], [2.0, 0.0], [2.0, 1.0], [1.5, depth], [1.0, 1.0]]);
    assert!(notch(f64::MIN_POSITIVE).is_ok());
    assert!(notch(0.0).is_err());
}

#[test]
fn a_thousand_points_are_judged_and_the_worst_case_stays_quick() {
    let radii = vec![0.02; 1000];
    assert!(Pad::outline(&star([0.1, 0.0], &radii)).is_ok());
    // A comb of long thin diagonal teeth: every side's box overlaps every other's, and none crosses.
    let tooth = |index: u32| {
        let (along, out) = (f64::from(index) * 1e-3, f64::from(index % 2));
        [3.0 + along + out, 3.0 - along + out]
    };
    let comb: Vec<_> = (0..999).map(tooth).chain([[2.0, 2.0]]).collect();
    let start = std::time::Instant::now();
    assert!(Pad::outline(&comb).is_ok());
    // A few ms in a release build; the bound is for a debug build on a loaded machine.
    assert!(start.elapsed().as_millis() < 2000);
}

#[test]
fn a_wear_allowance_must_be_above_zero() {
    let pad = sector(0.1, 0.15, 1.0).unwrap();
    assert_eq!(pad.wear_allowance(), None);
    let worn = pad.with_wear_allowance(Length::from_si(0.009)).unwrap();
    assert_eq!(worn.wear_allowance(), Some(Length::from_si(0.009)));
    let refused = pad.with_wear_allowance(Length::from_si(0.0));
    assert_eq!(faults(refused), only("wear_allowance", FaultCode::NotPositive));
}

#[test]
fn every_kind_and_distribution_has_its_own_method_sheet() {
    let kinds = [PadKind::AnnularSector, PadKind::Round, PadKind::Outline];
    for kind in kinds {
        for distribution in PressureDistribution::ALL {
            let id = format!("pad.{}.{}", kind.as_str(), distribution.as_str());
            assert_eq!(distribution.method(kind).id, id);
        }
    }
    assert_eq!(PressureDistribution::default(), UniformWear);
}

/// A pad far from the axis and small: sums along the sides would lose every digit without their bounds.
#[test]
fn a_tiny_pad_far_away_keeps_its_radius() {
    let size = 1e-6;
    let points = [[1e3, 1e3], [1e3 + size, 1e3], [1e3, 1e3 + size]];
    let pad = Pad::outline(&points).unwrap();
    for distribution in PressureDistribution::ALL {
        let radius = distribution.effective_radius(&pad).si();
        assert!((radius / (1e3 * 2.0_f64.sqrt()) - 1.0).abs() < 2e-9);
        let center = distribution.pressure_center_radius(&pad).si();
        assert!((center / (1e3 * 2.0_f64.sqrt()) - 1.0).abs() < 2e-9);
    }
}

fn radii() -> impl Strategy<Value = Vec<f64>> {
    prop::collection::vec(0.005..0.04_f64, 3..40)
}

proptest! {
    /// Chords approach their arc with the square of their number: 8 times as many, error below 1/50.
    #[test]
    fn a_sampled_sector_converges_to_the_sector(
        inner in 0.05..0.2_f64, width in 0.01..0.2_f64, angle in 0.2..5.0_f64,
    ) {
        let exact = sector(inner, inner + width, angle).unwrap();
        let error = |steps| {
            let pad = Pad::outline(&sampled_sector(inner, inner + width, angle, steps)).unwrap();
            let miss = |found: f64, exact: f64| (found / exact - 1.0).abs();
            let found = seven(pad.integrals());
            let wanted = seven(exact.integrals());
            miss(found[0], wanted[0]).max(miss(found[1], wanted[1])).max(miss(found[2], wanted[2]))
        };
        let (coarse, fine) = (error(30), error(240));
        // Relative to the pad's area the chords miss at most (radius/width)·angle²/(12 n²) or so.
        prop_assert!(fine < 1e-3);
        prop_assert!(fine < coarse / 50.0 + 1e-12, "{coarse:e} {fine:e}");
    }

    /// Winding, first point, and turning the pad about the axis change nothing but the direction of the force center.
    #[test]
    fn winding_and_rotation_do_not_matter(radii in radii(), turn in 0.0..TAU, shift in 0_usize..40) {
        let points = star([0.1, 0.0], &radii);
        let (sine, cosine) = libm::sincos(turn);
        let mut changed: Vec<_> =
            points.iter().map(|[x, y]| [x * cosine - y * sine, x * sine + y * cosine]).collect();
        changed.reverse();
        let places = shift % changed.len();
        changed.rotate_left(places);
        let (pad, changed) = (Pad::outline(&points).unwrap(), Pad::outline(&changed).unwrap());
        let close = |first: f64, second: f64| (first / second - 1.0).abs() < 1e-11;
        prop_assert!(close(pad.area().si(), changed.area().si()));
        prop_assert!(close(pad.smallest_radius().si(), changed.smallest_radius().si()));
        prop_assert!(close(pad.angular_width().si(), changed.angular_width().si()));
        for distribution in PressureDistribution::ALL {
            let radius = |pad| distribution.effective_radius(pad).si();
            prop_assert!(close(radius(&pad), radius(&changed)));
            let center = |pad| distribution.pressure_center_radius(pad).si();
            prop_assert!(close(center(&pad), center(&changed)));
        }
    }

    /// General law (verified): at a given peak pressure under wear, torque needs area only: T = μ p r₀ A.
    #[test]
    fn torque_at_the_peak_pressure_under_wear_needs_area_only(
        radii in radii(), ratio in 0.01..0.99_f64, peak in 1e4..1e7_f64, friction in 0.05..0.8_f64,
    ) {
        let pads = [
            Pad::outline(&star([0.1, 0.0], &radii)).unwrap(),
            round(ratio * 0.2, 0.2).unwrap(),
            sector(ratio * 0.2, 0.2, 6.0 * ratio).unwrap(),
        ];
        for pad in pads {
            let force = UniformWear.clamp_force_at_peak(&pad, Pressure::from_si(peak));
            let torque = torque_per_face(friction, force, UniformWear.effective_radius(&pad)).si();
            let law = friction * peak * pad.smallest_radius().si() * pad.area().si();
            prop_assert!((torque / law - 1.0).abs() < 1e-13);
        }
    }

    /// (∫dA)² ≤ ∫dA/r ∫r dA: a new pad has the longer arm, and both lie between the radii of the outline.
    #[test]
    fn the_arm_under_wear_is_the_shorter_one(radii in radii(), away in 0.05..1.0_f64) {
        let pad = Pad::outline(&star([away, 0.03], &radii)).unwrap();
        let (wear, pressure) = (UniformWear.effective_radius(&pad), UniformPressure.effective_radius(&pad));
        let rounding = 1.0 - 1e-12;
        prop_assert!(wear.si() * rounding <= pressure.si());
        prop_assert!(pad.smallest_radius().si() <= wear.si());
        prop_assert!(pressure.si() <= pad.largest_radius().si());
        for distribution in PressureDistribution::ALL {
            let center = distribution.pressure_center_radius(&pad).si();
            prop_assert!(center <= distribution.effective_radius(&pad).si() * (1.0 + 1e-12));
        }
    }

    /// Midpoint rule in polar coordinates, r = e + R sin u, which removes the root at both ends.
    #[test]
    fn a_round_pad_agrees_with_quadrature(ratio in 0.001..0.98_f64) {
        let pad = round(ratio, 1.0).unwrap();
        let mut sums = [0.0; 4];
        let steps = 4000;
        for step in 0..steps {
            let u = PI * ((f64::from(step) + 0.5) / f64::from(steps) - 0.5);
            let r = 1.0 + ratio * libm::sin(u);
            let cosine = (r * r + 1.0 - ratio * ratio) / (2.0 * r);
            let half = libm::acos(cosine.min(1.0));
            let strip = 2.0 * half * ratio * libm::cos(u) * PI / f64::from(steps);
            let chord = 2.0 * libm::sin(half) * ratio * libm::cos(u) * PI / f64::from(steps);
            for (sum, part) in sums.iter_mut().zip([strip * r, strip, strip * r * r, chord * r]) {
                *sum += part;
            }
        }
        let found = seven(pad.integrals());
        for (found, sum) in [found[0], found[1], found[2], found[5]].into_iter().zip(sums) {
            prop_assert!((found / sum - 1.0).abs() < 1e-5, "{found} {sum}");
        }
    }

    /// Peak pressure and clamp force are inverse to each other, and the peak is never below the mean.
    #[test]
    fn peak_pressure_inverts_the_clamp_force(ratio in 0.01..0.99_f64, force in 1.0..1e6_f64) {
        let pad = round(ratio, 1.0).unwrap();
        for distribution in PressureDistribution::ALL {
            let peak = distribution.peak_pressure(&pad, Force::from_si(force));
            let back = distribution.clamp_force_at_peak(&pad, peak).si();
            prop_assert!((back / force - 1.0).abs() < 1e-15 * 4.0);
            let mean = mean_pressure(&pad, Force::from_si(force)).si();
            prop_assert!(peak.si() >= mean * (1.0 - 1e-14));
        }
    }

    /// Whatever finite numbers come in: an answer without NaN, or faults.
    #[test]
    fn no_input_gives_nan_or_a_panic(
        first in any::<f64>(), second in any::<f64>(), third in any::<f64>(),
        points in prop::collection::vec([any::<f64>(), any::<f64>()], 0..6),
        small in prop::collection::vec([-3_i8..4, -3_i8..4], 0..7),
    ) {
        let small: Vec<_> = small.iter().map(|point| point.map(f64::from)).collect();
        let pads =
            [sector(first, second, third), round(first, second), Pad::outline(&points), Pad::outline(&small)];
        for pad in pads.into_iter().flatten() {
            for distribution in PressureDistribution::ALL {
                prop_assert!(distribution.effective_radius(&pad).si() > 0.0);
                prop_assert!(distribution.pressure_center_radius(&pad).si() >= 0.0);
            }
            prop_assert!(seven(pad.integrals()).iter().all(|value| value.is_finite()));
        }
    }
}
