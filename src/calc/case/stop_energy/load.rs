//! The load of a stop on one brake of an entry.

use super::{BrakeLoad, EntryEnergy, Input};
use crate::calc::brake::Brake;
use crate::calc::case::stopping;
use crate::calc::fitted::Fitted;
use crate::calc::heat::cooling::Speeds;
use crate::calc::heat::disc_heat::{self, Heating, Warmth};
use crate::calc::heat::disc_series::{self, Repeated, Repeating};
use crate::calc::motion::{Coordinate, Path};
use crate::calc::quantity::{Energy, EnergyFlux, Power, PowerFlux, Si, Time, Velocity};

/// One brake of an entry in a stop.
pub(super) struct Load<'a> {
    input: &'a Input,
    case: &'a stopping::CaseOutcome,
    entry: &'a Fitted,
    /// What part of the brake work of each axle the brake does.
    shares: [f64; 2],
}

impl<'a> Load<'a> {
    pub(super) fn new(
        input: &'a Input,
        case: &'a stopping::CaseOutcome,
        (index, entry): (usize, &'a Fitted),
    ) -> Self {
        Self { input, case, entry, shares: case.shares_of_one_brake(index, entry) }
    }

    fn path(&self) -> &Path {
        &self.case.stop.path
    }

    fn braking_time(&self) -> f64 {
        self.path().end().time - self.path().first_torque().time
    }

    /// The brake's energy and what follows from it; `work` is that of all brakes of each axle.
    pub(super) fn energy(&self, work: [f64; 2]) -> EntryEnergy {
        let energy = work[0] * self.shares[0] + work[1] * self.shares[1];
        let braking_time = self.braking_time();
        let mean_power = if braking_time > 0.0 { energy / braking_time } else { 0.0 };
        let peak_power = self.path().peak_brake_power(self.shares).max(mean_power);
        let brake = self.entry.brake().map(|brake| self.on_brake(brake, energy, peak_power));
        EntryEnergy {
            energy: Energy::from_si(energy),
            mean_power: Power::from_si(mean_power),
            peak_power: Power::from_si(peak_power),
            brake,
        }
    }

    fn on_brake(&self, brake: &Brake, energy: f64, peak_power: f64) -> BrakeLoad {
        let parts = brake.parts();
        let faces = f64::from(parts.faces);
        let area = parts.pad.area().si();
        let shaft_speed =
            stopping::highest_brake_speed(&self.input.stop, self.entry, &self.case.stop);
        let power = self.power_course();
        let heating = self.heating(energy, &power);
        let heated = disc_heat::of_one_stop(brake, &heating);
        BrakeLoad {
            energy_per_face: Energy::from_si(energy / faces),
            energy_flux: EnergyFlux::from_si(energy / faces / area),
            peak_power_flux: PowerFlux::from_si(peak_power / faces / area),
            rubbing_speed: Velocity::from_si(shaft_speed * parts.pad.largest_radius().si()),
            overheats: heated.is_err(),
            disc: heated.ok().flatten(),
            repeated: self.repeated(brake, &heating),
            pad_life_stops: brake.pad_life(energy / faces),
        }
    }

    fn heating<'b>(&self, energy: f64, power: &'b [(f64, f64)]) -> Heating<'b> {
        Heating {
            energy,
            power,
            brakes_per_disc: self.entry.parts().brakes_per_disc,
            start: self.input.start_temperature,
        }
    }

    /// How the brake's disc warms in the stop of that energy; none where that cannot be told.
    pub(super) fn course(&self, load: &EntryEnergy, count: u32) -> Option<Vec<Warmth>> {
        let power = self.power_course();
        let heating = self.heating(load.energy.si(), &power);
        let peak = load.brake?.disc?.surface_peak_time;
        let times = moments(&power, peak.si(), count);
        disc_heat::course(self.entry.brake()?, &heating, &times).ok()?
    }

    /// Power of the brake over time, as nodes joined by straight lines.
    fn power_course(&self) -> Vec<(f64, f64)> {
        const MOST_NODES: usize = 64;
        let shares = self.shares;
        let of_one =
            |(time, power): (f64, [f64; 2])| (time, power[0] * shares[0] + power[1] * shares[1]);
        self.path().brake_power(MOST_NODES).into_iter().map(of_one).collect()
    }

    /// The same stop once an interval, if that is asked for.
    fn repeated(&self, brake: &Brake, heating: &Heating<'_>) -> Option<Repeated> {
        let (begin, end) = (self.path().first_torque(), self.path().end());
        let rest = self.input.interval?.si() - self.braking_time();
        let mean = (end.distance - begin.distance) / self.braking_time();
        let between =
            f64::midpoint(self.input.stop.demand.initial_speed, self.input.stop.demand.final_speed);
        let repeating = Repeating {
            heating: *heating,
            braking_speeds: self.speeds(mean),
            rest,
            resting_speeds: self.speeds(between),
            ambient: self.input.ambient_temperature,
            stop_count: self.input.stop_count,
            finds_limit: self.input.finds_limit,
            most_stops: self.input.most_stops(),
        };
        (self.braking_time() > 0.0)
            .then(|| disc_series::of_repeated_stops(brake, &repeating))
            .flatten()
    }

    /// The speeds of the disc and of the air around it at a speed along the coordinate.
    fn speeds(&self, speed: f64) -> Speeds {
        let machine = &self.input.stop.machine;
        let parts = self.entry.parts();
        let way = match machine.coordinate() {
            Coordinate::Way => speed,
            Coordinate::Angle => 0.0,
        };
        Speeds {
            shaft: speed * machine.shaft_per_coordinate(parts.rolling_radius) * parts.speed_ratio,
            way,
        }
    }
}

/// Times from 0 to the last node of the power, in order: `count` parts that grow evenly, since a surface warms
/// fastest at first; the nodes; and the peak.
fn moments(power: &[(f64, f64)], peak: f64, count: u32) -> Vec<Time> {
    let parts = count.max(1);
    let end = power.last().map_or(0.0, |node| node.0);
    let growing = (0..=parts).map(|part| {
        let share = f64::from(part) / f64::from(parts);
        end * share * share
    });
    let nodes = power.iter().map(|node| node.0);
    let mut times: Vec<f64> = growing.chain(nodes).chain([peak]).collect();
    times.sort_by(f64::total_cmp);
    times.dedup();
    times.into_iter().map(Time::from_si).collect()
}
