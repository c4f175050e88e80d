//! The temperature rise of a slab under a piecewise linear flux, by superposition.

use super::flux::{Change, PiecewiseLinearFlux};
use super::response::{self, Transients};
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
    fn rise(&self, changes: &[Change], time: f64, height: f64) -> f64 {
        Course::new(self, changes, height).rise(time)
    }

    /// L/k, m²·K/W.
    fn resistance(&self) -> f64 {
        self.depth.si() / self.substance.conductivity().si()
    }
}

/// The rise at one height, followed forward in time.
///
/// Changes of the flux long ago have left their heat and a fading transient; those just made are
/// taken as on a half-space. So nothing cancels, neither early nor after thousands of seconds.
#[derive(Debug, Clone, Copy)]
pub(super) struct Course<'a> {
    changes: &'a [Change],
    height: f64,
    diffusion_time: f64, // s
    resistance: f64,     // m²·K/W
    /// From here on the rise is told, s.
    time: f64,
    /// So many changes are in `fading`.
    old: usize,
    fading: Transients,
}

impl<'a> Course<'a> {
    /// From the first change on.
    pub(super) fn new(slab: &Slab, changes: &'a [Change], height: f64) -> Self {
        Self {
            changes,
            height,
            diffusion_time: slab.diffusion_time().si(),
            resistance: slab.resistance(),
            time: 0.0,
            old: 0,
            fading: Transients::NONE,
        }
    }

    /// Goes on to a later time: what is old there is told the faster from then on.
    pub(super) fn advance(&mut self, time: f64) {
        self.fading.age((time - self.time) / self.diffusion_time);
        self.time = time;
        while let Some(change) = self.changes.get(self.old)
            && self.is_old(change, time)
        {
            let bend = change.bend * self.diffusion_time;
            self.fading.add(self.fourier(change, time), self.height, change.step, bend);
            self.old += 1;
        }
    }

    fn fourier(&self, change: &Change, time: f64) -> f64 {
        (time - change.time) / self.diffusion_time
    }

    fn is_old(&self, change: &Change, time: f64) -> bool {
        self.fourier(change, time) >= response::IMAGES_BELOW
    }

    /// The rise in K at `time` in s, no earlier than the course has advanced to.
    pub(super) fn rise(&self, time: f64) -> f64 {
        let (faded, newer) = self.changes.split_at(self.old);
        let old = newer.iter().take_while(|change| self.is_old(change, time)).count();
        let (old, recent) = newer.split_at(old);
        let fading = old.iter().map(|change| {
            let bend = change.bend * self.diffusion_time;
            response::transient(self.fourier(change, time), self.height, change.step, bend)
        });
        let beginning = recent.iter().take_while(|change| change.time < time).map(|change| {
            let (fourier, bend) = (self.fourier(change, time), change.bend * self.diffusion_time);
            change.step * response::step_by_images(fourier, self.height)
                + bend * response::ramp_by_images(fourier, self.height)
        });
        let transient = fading.chain(beginning).sum::<f64>()
            + self.fading.left_after((time - self.time) / self.diffusion_time);
        let lasting = old.last().or(faded.last()).map_or(0.0, |last| self.lasting(last, time));
        lasting * self.resistance + transient * self.resistance
    }

    /// What the changes up to the `last` old one have left beside what still fades, as a rise over L/k.
    fn lasting(&self, last: &Change, time: f64) -> f64 {
        let bend = last.slope * self.diffusion_time;
        last.heat_until(time) / self.diffusion_time
            + response::quasi_steady(self.height) * last.flux_at(time)
            + response::ramp_offset(self.height) * bend
    }
}
