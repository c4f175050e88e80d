//! From a duty to its checks: cold, and as hot as the duties make the linings.

use super::Input;
use super::acting::Acting;
use super::bench::Bench;
use super::check::Check;
use super::descended::{DESCENT, Descended, DescentCase};
use super::duty::{Duty, DutyNumbers, FittedNumbers, StopNumbers, Task};
use super::followed::{Followed, follow};
use super::held::Held;
use super::require::{HoldLimits, StopLimits};
use super::ruled::{Ruled, merge};
use super::stopped::Stopped;
use crate::calc::case::{stop_energy, stopping};
use crate::calc::fault::Faults;
use crate::calc::finding::{Caution, Notice, Remarks, Severity};
use crate::calc::machine::{HOLDING, Machine, Situation};
use crate::calc::method::Provenance;
use crate::calc::motion::{Demand, Ending};
use crate::calc::pressure::FRICTION_TORQUE;
use crate::calc::quantity::{Si, ThermodynamicTemperature, Time};

/// What a duty comes to.
#[derive(Debug, Clone)]
pub(super) struct Judgement {
    pub(super) checks: Vec<Check>,
    pub(super) numbers: DutyNumbers,
    /// What is to be said; inputs are named as in the duty's own calculation.
    pub(super) remarks: Remarks,
}

/// A stop to be tried.
pub(super) struct Trial<'a> {
    pub(super) situation: Situation,
    pub(super) demand: Demand,
    pub(super) limits: &'a StopLimits,
    /// Interval and count, if it is repeated.
    pub(super) repeating: Option<(Time, Option<u32>)>,
    pub(super) start: ThermodynamicTemperature,
    pub(super) has_response: bool,
}

/// Judges a duty with the brakes that act in it. Faults are named as in the duty's own calculation.
pub(super) fn judge(
    input: &Input,
    (duty_index, duty): (usize, &Duty),
    acting: &Acting,
    hot: bool,
) -> Result<Judgement, Faults> {
    let bench = Bench {
        machine: &input.machine,
        duty_index,
        acting,
        hot,
        ambient: input.ambient_temperature,
    };
    let fitted = acting.indices.iter().map(|&index| FittedNumbers::of(index)).collect();
    let numbers = DutyNumbers { fitted, ..DutyNumbers::default() };
    let mut judgement = Judgement { checks: Vec::new(), numbers, remarks: Remarks::new() };
    if matches!(input.machine, Machine::Hoist(_)) {
        judgement.remarks.caution(Caution::SuspendedLoad);
    }
    judgement.checks = judgement.of(&bench, duty)?;
    Ok(judgement)
}

impl Judgement {
    /// The checks of a duty; its numbers and remarks are added.
    fn of(&mut self, bench: &Bench<'_>, duty: &Duty) -> Result<Vec<Check>, Faults> {
        let start = duty.start_temperature;
        match &duty.task {
            Task::Stop { situation, demand, limits } => {
                let trial = Trial::new((situation, demand, limits), None, start);
                stop(bench, &trial, &mut self.numbers, &mut self.remarks)
            }
            Task::RepeatedStops { situation, demand, limits, interval, stop_count } => {
                let repeating = Some((*interval, *stop_count));
                let trial = Trial::new((situation, demand, limits), repeating, start);
                stop(bench, &trial, &mut self.numbers, &mut self.remarks)
            }
            Task::Descent { situation, speed, distance } => {
                let (speed, distance) = (*speed, *distance);
                Ok(self.descent(&Descended { bench, situation, speed, distance, start }))
            }
            Task::Hold { situation, limits } => Ok(self.hold(bench, situation, *limits)),
            Task::Rule { row, delays, max_speed, operated_by } => {
                self.note_brakes(bench);
                self.note_source(bench, row.provenance);
                self.remarks.caution(Caution::NotTheTest);
                let (delays, max_speed, operated_by) = (*delays, *max_speed, *operated_by);
                let ruled = Ruled { bench, row, delays, max_speed, operated_by, start };
                ruled.checks(&mut self.numbers, &mut self.remarks)
            }
            Task::Procedure { row, events } => {
                self.note_source(bench, row.provenance);
                self.remarks.caution(Caution::NotTheTest);
                let outcome = follow(bench, events, start)?;
                self.remarks.join(&outcome.remarks, |finding| Some(finding.clone()));
                let followed = Followed { bench, events, outcome: &outcome };
                self.numbers.fitted = followed.fitted();
                Ok(followed.checks())
            }
        }
    }

    fn descent(&mut self, descended: &Descended<'_>) -> Vec<Check> {
        self.note_brakes(descended.bench);
        self.remarks.method(descended.bench.machine.method());
        self.remarks.method(&DESCENT);
        self.remarks.caution(Caution::HotSurfaces);
        descended.note(&mut self.remarks);
        let cases = descended.cases();
        self.numbers.descents = descended.numbers(&cases);
        heat(&mut self.numbers, &descended.fitted(&cases));
        descended.checks(&cases)
    }

    fn hold(&mut self, bench: &Bench<'_>, situation: &Situation, limits: HoldLimits) -> Vec<Check> {
        self.note_brakes(bench);
        self.remarks.method(&HOLDING);
        let limit_at = bench.at_duty("require/min_holding_factor");
        let held = Held { bench, situation, limits: &limits, limit_at };
        self.numbers.holds.push(held.numbers());
        held.checks()
    }

    /// A row that nobody read again in its source is not to be relied on.
    fn note_source(&mut self, bench: &Bench<'_>, provenance: Provenance) {
        if provenance == Provenance::Memory {
            let detail = "the figures of this row were entered from memory of their source: check them there";
            let subject = bench.at_duty("id");
            self.remarks.notice(Notice::ValueFromMemory, Severity::Info, subject, detail);
            self.remarks.caution(Caution::FromMemory);
        }
    }

    fn note_brakes(&mut self, bench: &Bench<'_>) {
        for (acting, _, brake) in bench.brakes() {
            brake.remark(&mut self.remarks, Some(acting));
            self.remarks.method(&FRICTION_TORQUE);
        }
    }
}

impl<'a> Trial<'a> {
    const fn new(
        (situation, demand, limits): (&Situation, &Demand, &'a StopLimits),
        repeating: Option<(Time, Option<u32>)>,
        start: ThermodynamicTemperature,
    ) -> Self {
        let (situation, demand) = (*situation, *demand);
        Self { situation, demand, limits, repeating, start, has_response: true }
    }
}

/// Tries a stop.
pub(super) fn stop(
    bench: &Bench<'_>,
    trial: &Trial<'_>,
    numbers: &mut DutyNumbers,
    remarks: &mut Remarks,
) -> Result<Vec<Check>, Faults> {
    let stop = stopping::Input {
        machine: bench.machine.clone(),
        fitted: bench.acting.fitted.clone(),
        situation: trial.situation,
        demand: trial.demand,
    };
    let input = stop_energy::Input {
        stop,
        ambient_temperature: bench.ambient,
        start_temperature: trial.start,
        interval: trial.repeating.map(|(interval, _)| interval),
        stop_count: trial.repeating.and_then(|(_, count)| count),
        finds_limit: false,
    };
    let stopped = stopping::evaluate_pressed(&input.stop, bench.acting.pressed.clone())?;
    let outcome = stop_energy::evaluate_stopped(&input, stopped)?;
    remarks.join(&outcome.remarks, |finding| Some(finding.clone()));
    let cases = outcome.stop.friction_cases.iter().zip(&outcome.friction_cases);
    numbers.stops.extend(cases.map(|(case, energies)| {
        let path = &case.stop.path;
        let is_over = matches!(case.stop.ending, Ending::Reached(_));
        StopNumbers {
            friction_case: case.friction_case,
            hot: bench.hot,
            initial_speed: trial.demand.initial_speed,
            total: is_over.then(|| (path.end().distance, path.end().time)),
            mean_deceleration: case.mean_deceleration(trial.demand.final_speed).filter(|_| is_over),
            peak_deceleration: case.hardest.map(|(instant, _)| instant.deceleration),
            brake_energy: energies.energies.as_ref().map(|energies| energies.brake_energy.si()),
        }
    }));
    let stopped = Stopped {
        bench,
        input: &input,
        outcome: &outcome,
        limits: trial.limits,
        has_response: trial.has_response,
    };
    heat(numbers, &stopped.temperatures());
    Ok(stopped.checks())
}

/// Keeps the highest temperatures of each entry.
fn heat(numbers: &mut DutyNumbers, found: &[FittedNumbers]) {
    for one in found {
        let same = |known: &&mut FittedNumbers| known.fitted_index == one.fitted_index;
        match numbers.fitted.iter_mut().find(same) {
            Some(known) => {
                known.peak_bulk = highest(known.peak_bulk, one.peak_bulk);
                known.peak_surface = highest(known.peak_surface, one.peak_surface);
            }
            None => numbers.fitted.push(*one),
        }
    }
}

fn highest(one: Option<f64>, other: Option<f64>) -> Option<f64> {
    [one, other].into_iter().flatten().reduce(f64::max)
}

/// The checks of a duty, each at its worst of cold and hot.
pub(super) fn worse(cold: Judgement, hot: Option<Judgement>) -> Judgement {
    let Some(hot) = hot else { return cold };
    let Judgement { mut checks, mut numbers, remarks } = cold;
    merge(&mut checks, hot.checks);
    numbers.stops.extend(hot.numbers.stops);
    numbers.holds.extend(hot.numbers.holds);
    heat(&mut numbers, &hot.numbers.fitted);
    let mut remarks = remarks;
    remarks.join(&hot.remarks, |finding| Some(finding.clone()));
    Judgement { checks, numbers, remarks }
}

impl Stopped<'_> {
    /// Highest temperatures of each entry over the friction cases.
    fn temperatures(&self) -> Vec<FittedNumbers> {
        let of_brake = |acting: usize| {
            let mut found = FittedNumbers::of(self.bench.acting.index(acting));
            for (_, load) in self.loads(acting) {
                let is_repeated = self.input.interval.is_some();
                // The first of many stops does not tell how hot the last one gets.
                if !self.has_an_end(&load) || (is_repeated && load.repeated.is_none()) {
                    return FittedNumbers::of(self.bench.acting.index(acting));
                }
                let [(_, surface), (_, bulk)] = stop_energy::limits::hottest(self.input, &load);
                found.peak_bulk = highest(found.peak_bulk, bulk);
                found.peak_surface = highest(found.peak_surface, surface);
            }
            found
        };
        self.bench.brakes().map(|(acting, ..)| of_brake(acting)).collect()
    }
}

impl Descended<'_> {
    fn fitted(&self, cases: &[DescentCase]) -> Vec<FittedNumbers> {
        let of_brake = |acting: usize| {
            let found = Self::hottest(cases, acting);
            let finite = |kelvins: Option<f64>| kelvins.filter(|kelvins| kelvins.is_finite());
            FittedNumbers {
                peak_bulk: finite(found.map(|(bulk, _)| bulk)),
                peak_surface: finite(found.map(|(_, surface)| surface)),
                ..FittedNumbers::of(self.bench.acting.index(acting))
            }
        };
        self.bench.brakes().map(|(acting, ..)| of_brake(acting)).collect()
    }
}

impl Followed<'_> {
    fn fitted(&self) -> Vec<FittedNumbers> {
        let of_brake = |acting: usize| {
            let mut found = FittedNumbers::of(self.bench.acting.index(acting));
            for tracked in
                self.outcome.friction_cases.iter().filter_map(|case| case.fitted.get(acting))
            {
                found.peak_bulk = highest(found.peak_bulk, tracked.peak_bulk);
                found.peak_surface = highest(found.peak_surface, tracked.peak_surface);
            }
            found
        };
        self.bench.brakes().map(|(acting, ..)| of_brake(acting)).collect()
    }
}
