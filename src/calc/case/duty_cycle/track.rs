//! What is kept of one brake through a duty: peaks, energy, and the first crossing of each limit.

use super::Place;
use super::braked::{Activity, Step};
use super::course::Sample;
use super::thermal::Thermal;
use crate::calc::brake::{Bound, Brake};
use crate::calc::finding::CheckCode;
use crate::calc::fitted::Fitted;
use crate::calc::heat::air::AirTable;
use crate::calc::heat::cooling::{CoolingSurface, Speeds};
use crate::calc::machine::Machine;
use crate::calc::motion::Coordinate;
use crate::calc::quantity::{Si, ThermodynamicTemperature};

/// The checks that a duty holds against limits as it goes.
const FOLLOWED: [CheckCode; 5] = [
    CheckCode::DiscBulkTemperature,
    CheckCode::SurfaceTemperature,
    CheckCode::PowerFlux,
    CheckCode::EnergyFlux,
    CheckCode::RubbingSpeed,
];

/// The first time that a limit is passed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crossing {
    /// Where.
    pub place: Place,
    /// s, from the start.
    pub time: f64,
    /// The value there, in coherent SI units.
    pub value: f64,
}

/// What a duty does to one brake of an entry.
#[derive(Debug, Clone, PartialEq)]
pub struct TrackedOutcome {
    /// Highest bulk temperature, K.
    pub peak_bulk: Option<f64>,
    /// Highest surface temperature, K.
    pub peak_surface: Option<f64>,
    /// Lowest friction factor while braking; 1 if it never fell.
    pub lowest_factor: f64,
    /// Energy of one brake, J.
    pub energy: f64,
    /// Thickness worn off one pad, m, if wear is known.
    pub pad_wear: Option<f64>,
    /// The limits that were followed.
    pub bounds: Vec<Bound>,
    /// The highest value held against each.
    pub highest: Vec<f64>,
    /// The first crossing of each, if it was passed.
    pub crossings: Vec<Option<Crossing>>,
    /// How the disc cools, and the coefficient at its hottest, W/(m²·K).
    pub cooling: Option<(CoolingSurface, f64)>,
}

/// One entry in a duty.
#[derive(Debug, Clone)]
pub(super) struct Tracked<'a> {
    entry: &'a Fitted,
    brake: Option<&'a Brake>,
    pub(super) thermal: Option<Thermal<'a>>,
    per_coordinate: f64,
    is_way: bool,
    outcome: TrackedOutcome,
    stop_energy: f64,
}

impl<'a> Tracked<'a> {
    pub(super) fn new(
        machine: &Machine,
        entry: &'a Fitted,
        start: ThermodynamicTemperature,
        ambient: ThermodynamicTemperature,
        air: &'a AirTable,
    ) -> Self {
        let brake = entry.brake();
        let thermal = brake.and_then(|brake| Thermal::new(entry, brake, start, ambient, air));
        let bounds: Vec<Bound> =
            FOLLOWED.iter().filter_map(|code| brake.and_then(|brake| brake.bound(*code))).collect();
        let parts = entry.parts();
        let outcome = TrackedOutcome {
            peak_bulk: thermal.as_ref().map(Thermal::bulk),
            peak_surface: thermal.as_ref().map(Thermal::surface),
            lowest_factor: 1.0,
            energy: 0.0,
            pad_wear: None,
            highest: vec![0.0; bounds.len()],
            crossings: vec![None; bounds.len()],
            bounds,
            cooling: None,
        };
        let per_coordinate = machine.shaft_per_coordinate(parts.rolling_radius) * parts.speed_ratio;
        let is_way = machine.coordinate() == Coordinate::Way;
        let mut tracked =
            Self { entry, brake, thermal, per_coordinate, is_way, outcome, stop_energy: 0.0 };
        tracked.outcome.lowest_factor = tracked.factor().min(1.0);
        tracked
    }

    /// Friction over that of the data sheet, at the temperature of the surface.
    pub(super) fn factor(&self) -> f64 {
        match (&self.brake, &self.thermal) {
            (Some(brake), Some(thermal)) => brake
                .parts()
                .lining
                .fade_factor(ThermodynamicTemperature::from_si(thermal.surface())),
            _ => 1.0,
        }
    }

    /// Whether friction changes with temperature.
    pub(super) fn fades(&self) -> bool {
        self.thermal.is_some()
            && self.brake.is_some_and(|brake| !brake.parts().lining.parts().fade.is_empty())
    }

    /// The speeds of the disc and of the air around it at a speed along the coordinate.
    pub(super) fn speeds(&self, speed: f64) -> Speeds {
        Speeds { shaft: speed * self.per_coordinate, way: if self.is_way { speed } else { 0.0 } }
    }

    /// Starts a braking: its energy counts from here.
    pub(super) fn begin(&mut self, expected_energy: f64) {
        self.stop_energy = 0.0;
        if let Some(thermal) = &mut self.thermal {
            thermal.expect(expected_energy);
        }
    }

    /// Goes through a step with the power of one brake, W, cooled at a speed along the coordinate.
    pub(super) fn advance(&mut self, duration: f64, power: (f64, f64), speed: f64) -> Option<()> {
        let energy = 0.5 * (power.0 + power.1) * duration;
        self.outcome.energy += energy;
        self.stop_energy += energy;
        let speeds = self.speeds(speed);
        match &mut self.thermal {
            Some(thermal) => thermal.advance(duration, power, speeds),
            None => Some(()),
        }
    }

    /// The friction factor after a step that is not taken. None if it gets too hot.
    pub(super) fn factor_after(
        &mut self,
        duration: f64,
        power: (f64, f64),
        speed: f64,
    ) -> Option<f64> {
        if !self.fades() {
            return Some(1.0);
        }
        let speeds = self.speeds(speed);
        let surface = self.thermal.as_mut()?.surface_after(duration, power, speeds)?;
        let surface = ThermodynamicTemperature::from_si(surface);
        self.brake.map(|brake| brake.parts().lining.fade_factor(surface))
    }

    /// Looks at the state after a step: peaks and limits. `power` is the highest of the step.
    pub(super) fn look(&mut self, at: (Place, f64), power: f64, step: &Step) {
        if let Some(thermal) = &self.thermal {
            let (bulk, surface) = (thermal.bulk(), thermal.surface());
            self.outcome.peak_bulk = self.outcome.peak_bulk.map(|peak| peak.max(bulk));
            self.outcome.peak_surface = self.outcome.peak_surface.map(|peak| peak.max(surface));
            self.hold(CheckCode::DiscBulkTemperature, bulk, at);
            self.hold(CheckCode::SurfaceTemperature, surface, at);
        }
        let Some(brake) = self.brake.filter(|_| step.activity != Activity::Idle) else { return };
        self.outcome.lowest_factor = self.outcome.lowest_factor.min(self.factor());
        let parts = brake.parts();
        let faces_area = f64::from(parts.faces) * parts.pad.area().si();
        self.hold(CheckCode::PowerFlux, power / faces_area, at);
        if step.activity == Activity::Stopping {
            self.hold(CheckCode::EnergyFlux, self.stop_energy / faces_area, at);
        }
        let outer = step.speed * self.per_coordinate * parts.pad.largest_radius().si();
        self.hold(CheckCode::RubbingSpeed, outer, at);
    }

    fn hold(&mut self, code: CheckCode, value: f64, (place, time): (Place, f64)) {
        let outcome = &mut self.outcome;
        let followed = outcome.bounds.iter().zip(&mut outcome.highest).zip(&mut outcome.crossings);
        for ((bound, highest), crossing) in followed.filter(|((bound, _), _)| bound.code == code) {
            *highest = highest.max(value);
            if crossing.is_none() && value > bound.limit.si {
                *crossing = Some(Crossing { place, time, value });
            }
        }
    }

    /// The state of the brake.
    pub(super) fn sample(&self) -> Sample {
        Sample {
            bulk: self.thermal.as_ref().map(Thermal::bulk),
            surface: self.thermal.as_ref().map(Thermal::surface),
            factor: self.factor(),
        }
    }

    /// What the duty came to. `speed` is the last one along the coordinate.
    pub(super) fn finish(mut self, speed: f64) -> TrackedOutcome {
        let wear = self.brake.and_then(|brake| {
            let parts = brake.parts();
            let volume = parts.lining.parts().specific_wear?.si() * self.outcome.energy
                / f64::from(parts.faces);
            Some(volume / parts.pad.area().si())
        });
        self.outcome.pad_wear = wear;
        let surface = self.thermal.as_ref().and_then(Thermal::cooling);
        self.outcome.cooling = surface
            .zip(self.outcome.peak_bulk)
            .map(|(surface, peak)| (surface, surface.coefficient(peak, self.speeds(speed))));
        self.outcome
    }

    /// Brakes of the entry that act together.
    pub(super) fn count(&self) -> f64 {
        f64::from(self.entry.parts().count)
    }
}
