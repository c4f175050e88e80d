//! The temperature rise of a slab under a piecewise linear flux, by superposition.

use super::flux::{Change, PiecewiseLinearFlux};
use super::response;
use crate::calc::fault::Faults;
use crate::calc::heat::substance::Substance;
use crate::calc::quantity::{Length, Si, TemperatureInterval, Time};

/// A slab of constant properties, heated evenly on one face, insulated on the other and without cooling.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Slab {
    depth: Length,
    substance: Substance,
}

impl Slab {
    /// A slab of `substance`, `depth` thick.
    ///
    /// # Errors
    /// A depth that is not above zero.
    pub fn new(depth: Length, substance: Substance) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("depth", depth);
        faults.into_result(Self { depth, substance })
    }

    /// The time in which heat crosses the slab, L²/α: at this time the Fourier number is 1.
    #[must_use]
    pub fn diffusion_time(&self) -> Time {
        let conductance = self.substance.conductivity().si() / self.depth.si();
        Time::from_si(self.substance.volumetric_heat() * self.depth.si() / conductance)
    }

    /// The rise of the mean temperature until `time`: heat put in over heat capacity.
    #[must_use]
    pub fn mean_rise_at(&self, flux: &PiecewiseLinearFlux, time: Time) -> TemperatureInterval {
        let capacity = self.substance.volumetric_heat() * self.depth.si();
        TemperatureInterval::from_si(flux.energy_until(time).si() / capacity)
    }

    /// The rise of the heated face at `time` ([`super::SLAB_SURFACE`]).
    #[must_use]
    pub fn surface_rise_at(&self, flux: &PiecewiseLinearFlux, time: Time) -> TemperatureInterval {
        self.rise_at(flux, time, 1.0)
    }

    /// The rise at `time` and at `height` above the insulated face, as a share of the depth (0 to 1).
    #[must_use]
    pub fn rise_at(
        &self,
        flux: &PiecewiseLinearFlux,
        time: Time,
        height: f64,
    ) -> TemperatureInterval {
        TemperatureInterval::from_si(self.rise(flux.changes(), time.si(), height))
    }

    /// The rise in K at `time` in s.
    ///
    /// Changes of the flux long ago have left their heat and a fading transient; those just made are
    /// taken as on a half-space. So nothing cancels, neither early nor after thousands of seconds.
    pub(super) fn rise(&self, changes: &[Change], time: f64, height: f64) -> f64 {
        let diffusion_time = self.diffusion_time().si();
        let fourier = |change: &Change| (time - change.time) / diffusion_time;
        let old = changes.partition_point(|change| fourier(change) >= response::IMAGES_BELOW);
        let (old, recent) = changes.split_at(old);
        let fading = old.iter().map(|change| {
            let bend = change.bend * diffusion_time;
            response::transient(fourier(change), height, change.step, bend)
        });
        let beginning = recent.iter().filter(|change| change.time < time).map(|change| {
            let bend = change.bend * diffusion_time;
            change.step * response::step_by_images(fourier(change), height)
                + bend * response::ramp_by_images(fourier(change), height)
        });
        let transient = fading.chain(beginning).sum::<f64>();
        lasting(old, time, height, diffusion_time) * self.resistance()
            + transient * self.resistance()
    }

    /// L/k, m²·K/W.
    fn resistance(&self) -> f64 {
        self.depth.si() / self.substance.conductivity().si()
    }
}

/// What the flux of `old` changes has left at `time` beside what still fades, as a rise over L/k.
fn lasting(old: &[Change], time: f64, height: f64, diffusion_time: f64) -> f64 {
    let untils = old.iter().skip(1).map(|change| change.time).chain([time]);
    let energy: f64 = old.iter().zip(untils).map(|(change, until)| energy(change, until)).sum();
    let now = old.last().map_or(0.0, |last| {
        let flux = last.flux + last.slope * (time - last.time);
        let bend = last.slope * diffusion_time;
        response::quasi_steady(height) * flux + response::ramp_offset(height) * bend
    });
    energy / diffusion_time + now
}

fn energy(change: &Change, until: f64) -> f64 {
    let spent = until - change.time;
    spent * (change.flux + change.slope * spent / 2.0)
}
