//! The slab in finite volumes against the closed series, its conservation and its order.

use brakewright::calc::heat::slab::{SlabStep, SlabVolumes, constant_flux_response};
use brakewright::calc::quantity::{Length, Si};
use proptest::prelude::*;

use crate::support::close::{assert_close, assert_within};

/// k = ρc = L = 1: time is the Fourier number, temperature is over qL/k.
fn unit_step(duration: f64, from: f64, to: f64) -> SlabStep {
    SlabStep {
        duration,
        flux_at_start: from,
        flux_at_end: to,
        conductivity: 1.0,
        volumetric_heat: 1.0,
    }
}

/// Marches through `until` in steps that grow from the jump of the flux at the start on.
fn march(
    until: f64,
    steps: u32,
    flux: impl Fn(f64) -> f64,
    mut look: impl FnMut(f64, &SlabVolumes),
) {
    let mut slab = SlabVolumes::new(Length::from_si(1.0));
    let mut time = 0.0;
    for step in 1..=steps {
        let next = until * (f64::from(step) / f64::from(steps)).powi(2);
        slab.advance(&unit_step(next - time, flux(time), flux(next)));
        time = next;
        look(time, &slab);
    }
}

/// Carslaw and Jaeger 3.8(3) by the closed series: constant flux, spot check at Fo = 0.5 (0.831876, 0.334791).
#[test]
fn a_constant_flux_gives_the_published_temperatures() {
    march(
        0.5,
        40,
        |_| 1.0,
        |time, slab| {
            let surface = time + slab.surface();
            if time > 2e-3 {
                assert_close(surface, constant_flux_response(time, 1.0), 5e-3);
            }
            if (time - 0.5).abs() < 1e-12 {
                assert_within(surface, 0.831_876, 1e-4);
                assert_within(time + slab.insulated_face(), 0.334_791, 1e-4);
            }
        },
    );
}

/// Falling flux, Fs = 1 (reference file 4.2, V): highest 0.57747 at 0.6696, 0.522211 at the end, 0.480567 inside.
#[test]
fn a_falling_flux_gives_the_published_peak() {
    let mut peak = 0.0_f64;
    march(
        1.0,
        60,
        |time| 1.0 - time,
        |time, slab| {
            let mean = time - 0.5 * time * time;
            peak = peak.max(mean + slab.surface());
            if (time - 1.0).abs() < 1e-12 {
                assert_within(mean + slab.surface(), 0.522_211, 1e-4);
                assert_within(mean + slab.insulated_face(), 0.480_567, 3e-4);
            }
        },
    );
    assert_close(peak, 0.577_47, 1e-4);
}

/// A steady flux settles at a third of qL/k above the mean (surface) and a sixth below (insulated face).
#[test]
fn a_lasting_flux_settles_to_its_parabola() {
    march(
        50.0,
        40,
        |_| 1.0,
        |time, slab| {
            if time > 30.0 {
                assert_within(slab.surface(), 1.0 / 3.0, 1e-9);
                assert_within(slab.insulated_face(), -1.0 / 6.0, 1e-9);
            }
        },
    );
}

/// Halving the steps divides the error of time by four.
#[test]
fn the_steps_are_of_second_order() {
    let after = |steps: u32| {
        let mut found = 0.0;
        march(
            0.3,
            steps,
            |time| 1.0 + (20.0 * time).sin(),
            |_, slab| found = slab.insulated_face(),
        );
        found
    };
    let exact = after(3200);
    let ratio = (after(40) - exact) / (after(80) - exact);
    assert!((3.0..5.5).contains(&ratio), "{ratio}");
}

/// However long a step is against the time that heat takes through the slab: nothing is left, and nothing cancels.
#[test]
fn an_endless_step_leaves_nothing() {
    for duration in [1e9, 1e12, 1e17, 1e30, 1e100] {
        let mut slab = SlabVolumes::new(Length::from_si(1.0));
        slab.advance(&unit_step(0.1, 1.0, 1.0));
        let before = slab.surface();
        slab.advance(&unit_step(duration, 0.0, 0.0));
        assert!(slab.surface().abs() <= 1e-7 * before, "{duration} {}", slab.surface());
    }
}

/// A step may be tried and taken back; what follows is then the same to the last bit.
#[test]
fn a_step_taken_back_leaves_no_trace() {
    let mut tried = SlabVolumes::new(Length::from_si(1.0));
    let mut plain = tried.clone();
    for duration in [0.01, 0.02, 0.02, 0.5] {
        let before = tried.deviations();
        tried.advance(&unit_step(2.0 * duration, 3.0, 0.5));
        assert_ne!(tried.deviations(), before);
        tried.restore(before);
        for slab in [&mut tried, &mut plain] {
            slab.advance(&unit_step(duration, 1.0, 2.0));
        }
        assert_eq!(tried, plain);
    }
}

proptest! {
    /// The heat content is what was put in: the deviations keep a mean of zero to 1e-9 of the largest.
    #[test]
    fn energy_is_conserved(steps in prop::collection::vec((1e-6..10.0_f64, 0.0..10.0_f64, 0.0..10.0_f64), 1..40)) {
        let mut slab = SlabVolumes::new(Length::from_si(1.0));
        for (duration, from, to) in steps {
            slab.advance(&unit_step(duration, from, to));
            prop_assert!(slab.mean().abs() <= 1e-9);
        }
    }

    /// No step, however long or short, overshoots: without flux the deviations only die out.
    #[test]
    fn deviations_die_out(duration in 1e-9..1e9_f64, first in 1e-4..1.0_f64) {
        let mut slab = SlabVolumes::new(Length::from_si(1.0));
        slab.advance(&unit_step(first, 1.0, 1.0));
        let before = slab.surface();
        slab.advance(&unit_step(duration, 0.0, 0.0));
        prop_assert!(slab.surface().abs() <= before * (1.0 + 1e-9));
    }
}
