//! The heated slab: energy, superposition, the seam between its two forms, and its peak.

use brakewright::calc::fault::FaultCode;
use brakewright::calc::heat::slab::{
    PiecewiseLinearFlux, Slab, constant_flux_response, flux_ramp_response,
};
use brakewright::calc::heat::substance::Substance;
use brakewright::calc::quantity::{
    Length, MassDensity, PowerFlux, Si, SpecificHeatCapacity, ThermalConductivity, Time,
};
use proptest::prelude::*;

type Node = (f64, f64);

fn slab(depth: f64) -> Slab {
    let substance = Substance::new(
        MassDensity::from_si(7200.0),
        SpecificHeatCapacity::from_si(500.0),
        ThermalConductivity::from_si(48.0),
    );
    Slab::new(Length::from_si(depth), substance.unwrap()).unwrap()
}

fn try_flux(nodes: &[Node]) -> Result<PiecewiseLinearFlux, FaultCode> {
    let nodes = nodes.iter().map(|node| (Time::from_si(node.0), PowerFlux::from_si(node.1)));
    PiecewiseLinearFlux::new(&nodes.collect::<Vec<_>>())
        .map_err(|faults| faults.as_slice().first().unwrap().code)
}

fn flux(nodes: &[Node]) -> PiecewiseLinearFlux {
    try_flux(nodes).unwrap()
}

fn surface(slab: &Slab, flux: &PiecewiseLinearFlux, time: f64) -> f64 {
    slab.surface_rise_at(flux, Time::from_si(time)).si()
}

/// A flux of two to six nodes, up to 20 s and 5 MW/m², with jumps at start and end.
fn histories() -> impl Strategy<Value = Vec<Node>> {
    prop::collection::vec((0.01_f64..4.0, 0.0_f64..5e6), 2..6).prop_map(|steps| {
        let mut time = 0.0;
        let mut nodes = Vec::new();
        for (step, flux) in steps {
            nodes.push((time, flux));
            time += step;
        }
        nodes
    })
}

fn scale(nodes: &[Node], factor: f64) -> Vec<Node> {
    nodes.iter().map(|&(time, flux)| (time, factor * flux)).collect()
}

fn end(nodes: &[Node]) -> f64 {
    nodes.last().unwrap().0
}

/// Mean over the height, by Gauss's rule with five points in each of 40 layers that are finer near the
/// heated face: height 1 − s⁴ with even steps of s.
fn mean_over_height(rise: impl Fn(f64) -> f64) -> f64 {
    // Abscissas and weights: Abramowitz and Stegun, table 25.4, n = 5 (from memory).
    const RULE: [(f64, f64); 5] = [
        (0.0, 0.568_888_888_888_888_9),
        (0.538_469_310_105_683_1, 0.478_628_670_499_366_5),
        (-0.538_469_310_105_683_1, 0.478_628_670_499_366_5),
        (0.906_179_845_938_664, 0.236_926_885_056_189_1),
        (-0.906_179_845_938_664, 0.236_926_885_056_189_1),
    ];
    let layers = 0..40_u32;
    let weighted = |s: f64| 4.0 * s * s * s * rise(1.0 - s * s * s * s);
    let layer = |index: u32| {
        let at = |x: f64| (f64::from(index) + f64::midpoint(1.0, x)) / 40.0;
        RULE.iter().map(|&(x, weight)| weight / 2.0 * weighted(at(x))).sum::<f64>() / 40.0
    };
    layers.map(layer).sum()
}

proptest! {
    /// The heat in the slab is the heat put in.
    #[test]
    fn the_slab_keeps_all_heat(nodes in histories(), depth in 0.003_f64..0.05, share in 0.02_f64..2.0) {
        let (slab, flux) = (slab(depth), flux(&nodes));
        let time = share * end(&nodes);
        let at = Time::from_si(time);
        let mean = mean_over_height(|height| slab.rise_at(&flux, at, height).si());
        let put_in = flux.energy_until(at).si() / (7200.0 * 500.0 * depth);
        // The layers resolve the steepest profile here, 0.002 of the depth, far below 1e-9 of the rise.
        let tolerance = 1e-9 * surface(&slab, &flux, time);
        prop_assert!((mean - put_in).abs() <= tolerance, "{mean} for {put_in}");
        prop_assert!((slab.mean_rise_at(&flux, at).si() - put_in).abs() <= 1e-12 * put_in);
    }

    /// Two fluxes at once heat as much as each alone.
    #[test]
    fn rises_add_up(nodes in histories(), other in 0.1_f64..3.0, share in 0.0_f64..3.0, depth in 0.003_f64..0.05) {
        let slab = slab(depth);
        let time = share * end(&nodes);
        let one = surface(&slab, &flux(&nodes), time);
        let mixed: Vec<Node> = nodes.iter().map(|&(t, q)| (t, q * other + 1e6 * t)).collect();
        let ramp: Vec<Node> = nodes.iter().map(|&(t, _)| (t, 1e6 * t)).collect();
        let sum = other * one + surface(&slab, &flux(&ramp), time);
        prop_assert!((surface(&slab, &flux(&mixed), time) - sum).abs() <= 1e-9 * sum.max(1e-3));
    }

    /// A node on a straight line changes nothing, neither a rise nor the peak.
    #[test]
    fn a_ramp_in_two_parts_is_the_same_ramp(nodes in histories(), at in 0.01_f64..0.99, share in 0.0_f64..2.0) {
        let slab = slab(0.012);
        let (from, to) = (nodes[0], nodes[1]);
        let mut split = nodes.clone();
        split.insert(1, (from.0 + at * (to.0 - from.0), from.1 + at * (to.1 - from.1)));
        let (whole, split) = (flux(&nodes), flux(&split));
        let time = share * end(&nodes);
        let expected = surface(&slab, &whole, time);
        prop_assert!((surface(&slab, &split, time) - expected).abs() <= 1e-10 * expected.max(1e-3));
        let (one, other) = (slab.surface_peak(&whole).1.si(), slab.surface_peak(&split).1.si());
        prop_assert!((one - other).abs() <= 1e-10 * one);
    }

    /// No time is hotter than the peak, and the peak is reached.
    #[test]
    fn nothing_is_hotter_than_the_peak(nodes in histories(), depth in 0.001_f64..0.1) {
        let (slab, flux) = (slab(depth), flux(&nodes));
        let (time, peak) = slab.surface_peak(&flux);
        prop_assert!((surface(&slab, &flux, time.si()) - peak.si()).abs() <= 1e-12 * peak.si());
        for step in 0..2000 {
            let rise = surface(&slab, &flux, f64::from(step) * 1.5e-3 * end(&nodes));
            prop_assert!(rise <= peak.si() * (1.0 + 1e-12), "{rise} at {step} above {} at {}", peak.si(), time.si());
        }
    }

    /// Twice the flux, twice the rise.
    #[test]
    fn the_peak_is_proportional_to_the_flux(nodes in histories()) {
        let slab = slab(0.01);
        let (one, two) = (slab.surface_peak(&flux(&nodes)), slab.surface_peak(&flux(&scale(&nodes, 2.0))));
        prop_assert!((2.0 * one.1.si() - two.1.si()).abs() <= 1e-12 * two.1.si());
    }
}

/// The form with mirror images and the series agree where one takes over from the other.
#[test]
fn the_two_forms_meet_without_a_step() {
    let below = 0.03_f64.next_down();
    for height in [0.0, 0.3, 0.7, 0.9, 1.0] {
        for response in [constant_flux_response, flux_ramp_response] {
            let (one, other) = (response(below, height), response(0.03, height));
            // Relative at the heated face; deeper the response is small beside what the series cancels.
            let scale = if height > 0.99 { one } else { 0.02 };
            assert!((one - other).abs() <= 1e-12 * scale, "{one} {other} at {height}");
        }
    }
}

/// The ramp response is the integral of the step response: Simpson's rule over a stretch of both forms.
#[test]
fn the_ramp_response_is_the_integral_of_the_step_response() {
    for (from, to) in [(0.01, 0.02), (0.025, 0.04), (0.5, 0.7)] {
        for height in [0.0, 0.5, 1.0] {
            let (parts, step) = (400_u32, (to - from) / 400.0);
            let weight = |index: u32| match index {
                0 | 400 => 1.0,
                odd if odd % 2 == 1 => 4.0,
                _ => 2.0,
            };
            let at = |index: u32| constant_flux_response(from + f64::from(index) * step, height);
            let sum: f64 = (0..=parts).map(|index| weight(index) * at(index)).sum();
            let gain = flux_ramp_response(to, height) - flux_ramp_response(from, height);
            assert!((sum * step / 3.0 - gain).abs() < 1e-12, "{from} {height}");
        }
    }
}

#[test]
fn a_rise_does_not_step_as_changes_of_the_flux_grow_old() {
    let (slab, flux) = (slab(0.01), flux(&[(0.0, 2e6), (1.0, 3e6), (1.0, 1e6), (3.0, 0.0)]));
    for change in [0.0, 1.0, 3.0] {
        let seam = change + 0.03 * slab.diffusion_time().si();
        let (before, after) =
            (surface(&slab, &flux, seam * (1.0 - 1e-14)), surface(&slab, &flux, seam));
        assert!((before - after).abs() <= 1e-12 * after, "{before} {after}");
    }
}

#[test]
fn a_short_pulse_after_a_long_stop_is_not_overlooked() {
    let (slab, long) = (slab(0.005), [(0.0, 1e5), (100.0, 1e5)]);
    let calm = slab.surface_peak(&flux(&long)).1.si();
    let pulse =
        flux(&[(0.0, 1e5), (90.0, 1e5), (90.0, 5e6), (90.1, 5e6), (90.1, 0.0), (100.0, 1e5)]);
    let (time, peak) = slab.surface_peak(&pulse);
    assert!((time.si() - 90.1).abs() < 1e-9);
    assert!(peak.si() > calm);
}

#[test]
fn before_the_flux_and_without_it_nothing_warms() {
    let slab = slab(0.01);
    let none = flux(&[(0.0, 0.0), (5.0, 0.0)]);
    let (time, peak) = slab.surface_peak(&none);
    assert!(time.si().abs() <= 0.0 && peak.si().abs() <= 0.0);
    let some = flux(&[(0.0, 1e6), (5.0, 0.0)]);
    assert!(surface(&slab, &some, 0.0).abs() <= 0.0);
    assert!(surface(&slab, &some, -1.0).abs() <= 0.0);
}

#[test]
fn extreme_slabs_give_finite_answers() {
    let some = flux(&[(0.0, 1e6), (5.0, 0.0)]);
    for depth in [1e-9, 1e-4, 1.0, 1e6] {
        let (time, peak) = slab(depth).surface_peak(&some);
        assert!((0.0..=5.0).contains(&time.si()) && peak.si().is_finite(), "{depth}");
    }
    assert!(Slab::new(Length::from_si(0.0), slab_substance()).is_err());
}

fn slab_substance() -> Substance {
    Substance::new(
        MassDensity::from_si(1.0),
        SpecificHeatCapacity::from_si(1.0),
        ThermalConductivity::from_si(1.0),
    )
    .unwrap()
}

#[test]
fn a_flux_without_meaning_is_refused() {
    assert_eq!(try_flux(&[(0.0, 1.0)]), Err(FaultCode::WrongCount));
    assert_eq!(try_flux(&[(1.0, 1.0), (2.0, 1.0)]), Err(FaultCode::NotInOrder));
    assert_eq!(try_flux(&[(0.0, 1.0), (0.0, 1.0)]), Err(FaultCode::NotInOrder));
    assert_eq!(try_flux(&[(0.0, 1.0), (2.0, 1.0), (1.0, 1.0)]), Err(FaultCode::NotInOrder));
    assert_eq!(try_flux(&[(0.0, 1.0), (f64::NAN, 1.0)]), Err(FaultCode::NotInOrder));
    assert_eq!(try_flux(&[(0.0, -1.0), (1.0, 1.0)]), Err(FaultCode::OutOfRange));
    assert_eq!(try_flux(&[(0.0, f64::NAN), (1.0, 1.0)]), Err(FaultCode::OutOfRange));
}

/// Own finding: this flux bends just after a summit, and a second, lower one follows 0.1 s later.
#[test]
fn of_two_summits_beside_a_node_the_higher_is_found() {
    let nodes = [(0.0, 2_089_581.5), (2.304_125, 1_030_260.1), (3.839_104, 505_180.4)];
    let (slab, flux) = (slab(0.075_778_5), flux(&nodes));
    let (time, peak) = slab.surface_peak(&flux);
    assert!(time.si() > 2.2 && time.si() < 2.3, "{time:?}");
    assert!(peak.si() > surface(&slab, &flux, 2.385));
}
