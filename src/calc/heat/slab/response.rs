//! The slab's response to a flux that steps to one, and to one that grows with time. Dimensionless.
//!
//! Time is the Fourier number Fo = αt/L², place the height X = 0 at the insulated face to 1 at the
//! heated one, temperature θ = T k/(q L). A response is a polynomial that carries the heat put in, and
//! a transient that dies out. Just after the flux starts the two nearly cancel; there the heated face
//! does not feel the other one, and the half-space with its mirror images gives all digits.

use std::f64::consts::PI;

use crate::method_sheet;

/// Below this Fourier number the mirror images are used. There the first image left out, four depths
/// away at the heated face, is below 1e-50, and that two depths away, which is kept, below 1e-16.
pub(super) const IMAGES_BELOW: f64 = 0.03;

/// 1/√π.
const FRAC_1_SQRT_PI: f64 = 0.5 * std::f64::consts::FRAC_2_SQRT_PI;

method_sheet! {
    SLAB_SURFACE {
        id: "heat.slab_surface",
        name: "Surface temperature of a slab heated on one face",
        equation: "theta_step = Fo + (3 X^2 - 1)/6 - (2/pi^2) sum (-1)^n/n^2 exp(-n^2 pi^2 Fo) cos(n pi X); theta_ramp = integral of theta_step over Fo; piecewise linear flux by superposition; T = T_start + theta q L/k",
        symbols: [
            ("theta", "temperature rise over q L/k", "1"),
            ("Fo", "Fourier number k t/(rho c L^2)", "1"),
            ("X", "height above the insulated face over L, 1 at the heated face", "1"),
            ("q", "heat flux into the face", "W/m2"),
            ("L", "depth of the slab: half the thickness if both faces are heated alike", "m"),
            ("k", "thermal conductivity", "W/(m.K)"),
            ("rho", "density", "kg/m3"),
            ("c", "specific heat capacity", "J/(kg.K)"),
            ("t", "time since the flux began", "s"),
            ("T", "temperature", "K"),
        ],
        valid: "Flux spread evenly around the swept ring, k and c constant, no cooling during the stop.",
        accuracy: "Exact to rounding for the piecewise linear flux; below Fo = 0.03 the equal half-space form with mirror images is used.",
        source: "Carslaw and Jaeger, Conduction of Heat in Solids, 2nd ed., 2.9 and 3.8(3), with Duhamel's superposition (from memory; values verified against a numerical solution)",
        provenance: Memory,
        worked: "Constant flux, Fo = 0.5: surface 0.831876, insulated face 0.334791. Flux falling to zero at Fo = 1: surface at the end 0.522211, insulated face 0.480567.",
    }
}

/// Response at height `x` (0 to 1) to a unit flux that starts at Fo = 0 ([`SLAB_SURFACE`]).
#[must_use]
pub fn constant_flux_response(fourier: f64, x: f64) -> f64 {
    if fourier < IMAGES_BELOW {
        return step_by_images(fourier, x);
    }
    step_polynomial(fourier, x) + transient(fourier, x, 1.0, 0.0)
}

/// Response at height `x` (0 to 1) to a flux that grows as Fo from Fo = 0 ([`SLAB_SURFACE`]).
#[must_use]
pub fn flux_ramp_response(fourier: f64, x: f64) -> f64 {
    if fourier < IMAGES_BELOW {
        return ramp_by_images(fourier, x);
    }
    let lasting = fourier * (fourier / 2.0 + quasi_steady(x)) + ramp_offset(x);
    lasting + transient(fourier, x, 0.0, 1.0)
}

fn step_polynomial(fourier: f64, x: f64) -> f64 {
    fourier + quasi_steady(x)
}

/// What height `x` is warmer than the mean under a steady unit flux.
pub(super) fn quasi_steady(x: f64) -> f64 {
    (3.0 * x * x - 1.0) / 6.0
}

/// What height `x` lags behind that under a flux that grows by one per unit of Fo.
pub(super) fn ramp_offset(x: f64) -> f64 {
    let hollow = (1.0 - x) * (1.0 + x);
    hollow * hollow / 24.0 - 1.0 / 45.0
}

/// What is still to die out of a flux step and of a change of the flux's slope, both `fourier` ago.
pub(super) fn transient(fourier: f64, x: f64, step: f64, slope: f64) -> f64 {
    let modes = decays(fourier).map(|(n, decay)| decayed(n, decay, x, step, slope));
    2.0 / (PI * PI) * modes.sum::<f64>()
}

/// n and what is left of mode n after `fourier`, exp(-n² π² Fo), from the slowest mode on while above 1e-20.
fn decays(fourier: f64) -> impl Iterator<Item = (f64, f64)> {
    let first = libm::exp(-PI * PI * fourier);
    let mut next = (1.0, first, first * first * first);
    std::iter::from_fn(move || {
        let (n, decay, ratio) = next;
        // decay = first^(n²).
        next = (n + 1.0, decay * ratio, ratio * first * first);
        (decay > 1e-20).then_some((n, decay))
    })
}

/// The part of a transient that mode n carries.
fn decayed(n: f64, decay: f64, x: f64, step: f64, slope: f64) -> f64 {
    let (n2, depth) = (n * n, PI * (1.0 - x));
    let wave = if depth > 0.0 { libm::cos(n * depth) } else { 1.0 };
    decay * wave / n2 * (slope / (PI * PI * n2) - step)
}

/// Modes that stand above 1e-20 at [`IMAGES_BELOW`].
const MODES: usize = 12;

/// The transients of many changes at one place, added up mode by mode: they die out together.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Transients([f64; MODES]);

impl Transients {
    pub(super) const NONE: Self = Self([0.0; MODES]);

    /// Lets them die out for `fourier`.
    pub(super) fn age(&mut self, fourier: f64) {
        let mut decays = decays(fourier);
        for mode in &mut self.0 {
            *mode *= decays.next().map_or(0.0, |(_, decay)| decay);
        }
    }

    /// Adds a change like that of [`transient`], made [`IMAGES_BELOW`] ago or earlier.
    pub(super) fn add(&mut self, fourier: f64, x: f64, step: f64, slope: f64) {
        for (mode, (n, decay)) in self.0.iter_mut().zip(decays(fourier)) {
            *mode += decayed(n, decay, x, step, slope);
        }
    }

    /// What is left of them after `fourier`.
    pub(super) fn left_after(&self, fourier: f64) -> f64 {
        let modes = self.0.iter().zip(decays(fourier)).map(|(mode, (_, decay))| mode * decay);
        2.0 / (PI * PI) * modes.sum::<f64>()
    }
}

/// A flux step seen by a half-space with mirror images.
pub(super) fn step_by_images(fourier: f64, x: f64) -> f64 {
    let reach = 2.0 * fourier.sqrt();
    reach * over_images(reach, x, first_integral)
}

/// A flux ramp seen by a half-space with mirror images.
pub(super) fn ramp_by_images(fourier: f64, x: f64) -> f64 {
    let reach = 2.0 * fourier.sqrt();
    reach * reach * reach * over_images(reach, x, third_integral)
}

fn over_images(reach: f64, x: f64, response: fn(f64) -> f64) -> f64 {
    if reach > 0.0 {
        let distances = [1.0 - x, 1.0 + x, 3.0 - x, 3.0 + x].map(|distance| distance / reach);
        let nearest = distances[0] * distances[0];
        // A response falls faster than exp(-z²): farther ones are below 1e-17 of the nearest.
        let counts = |z: &f64| z * z - nearest < 40.0;
        distances.into_iter().take_while(counts).map(response).sum()
    } else {
        0.0
    }
}

/// ierfc, the integral of erfc from z to infinity.
fn first_integral(z: f64) -> f64 {
    FRAC_1_SQRT_PI * libm::exp(-z * z) - z * libm::erfc(z)
}

/// i³erfc, the third repeated integral of erfc.
fn third_integral(z: f64) -> f64 {
    let z2 = z * z;
    (FRAC_1_SQRT_PI * (1.0 + z2) * libm::exp(-z2) - z * (1.5 + z2) * libm::erfc(z)) / 6.0
}
