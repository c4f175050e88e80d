//! A published test cycle, followed as a duty with friction coupled to temperature.

use super::bench::Bench;
use super::check::{Check, Compared, Judged};
use super::loads::Found;
use crate::calc::actuation::Pressing;
use crate::calc::brake::Brake;
use crate::calc::case::duty_cycle::{self, CaseOutcome, Event, FailureReason};
use crate::calc::case::stopping::{brake_forces, full_torques, total};
use crate::calc::fault::Faults;
use crate::calc::finding::{CheckCode, Subject};
use crate::calc::fitted::{Fitted, eased};
use crate::calc::friction::FrictionCase;
use crate::calc::motion::Forces;
use crate::calc::quantity::{Amount, Dimension, ThermodynamicTemperature};

/// A test cycle and what it comes to.
pub(super) struct Followed<'a> {
    pub(super) bench: &'a Bench<'a>,
    pub(super) events: &'a [Event],
    pub(super) outcome: &'a duty_cycle::Outcome,
}

/// Follows the events of a test cycle. Faults are placed below the duty.
pub(super) fn follow(
    bench: &Bench<'_>,
    events: &[Event],
    start_temperature: ThermodynamicTemperature,
) -> Result<duty_cycle::Outcome, Faults> {
    let input = duty_cycle::Input {
        machine: bench.machine.clone(),
        fitted: bench.acting.fitted.clone(),
        events: events.to_vec(),
        origins: Vec::new(),
        repeats: 1,
        ambient_temperature: bench.ambient,
        start_temperature,
        points: None,
    };
    duty_cycle::evaluate_pressed(&input, bench.acting.pressed.clone())
}

impl Followed<'_> {
    fn cases(&self) -> &[CaseOutcome] {
        &self.outcome.friction_cases
    }

    /// All checks of the cycle.
    pub(super) fn checks(&self) -> Vec<Check> {
        let mut checks: Vec<Check> =
            self.cases().first().map(|low| self.stops(low)).into_iter().collect();
        checks.extend(self.cases().first().and_then(|low| self.deceleration(low)));
        let pressings: Vec<_> =
            self.cases().iter().map(|case| (case.friction_case, self.pressings(case))).collect();
        for (acting, entry, brake) in self.bench.brakes() {
            self.bench.on_pressing(&mut checks, acting, true, &pressings);
            self.on_rubbing(&mut checks, (acting, entry, brake), &pressings);
            self.on_flux(&mut checks, (acting, brake));
            self.on_heat(&mut checks, (acting, brake));
        }
        checks
    }

    /// The deceleration that the brakes give at full application, at the lowest friction that the cycle brings them to,
    /// against what the cycle is driven with; none if it holds no deceleration.
    fn deceleration(&self, low: &CaseOutcome) -> Option<Check> {
        let asked = |event: &Event| match event {
            Event::Stop { demand, .. } => demand.deceleration,
            Event::Run { .. }
            | Event::Descent { .. }
            | Event::Space { .. }
            | Event::Stand { .. } => None,
        };
        let missing = self.bench.missing_of_tires(true, !self.bench.acts_on_all());
        let stops = self.events.iter().filter_map(|event| {
            let limit = Amount { dimension: Dimension::Acceleration, si: asked(event)? };
            if !missing.is_empty() {
                return Some(Judged::Lacking(missing.clone()));
            }
            let (forces, speed) = self.weakest(low, event)?;
            let actual = forces.at(1.0, speed).deceleration;
            Some(Judged::Compared(Compared::at_least(actual, limit)))
        });
        let worse =
            |one: Judged, other: Judged| if other.is_worse_than(&one) { other } else { one };
        let judged = stops.reduce(worse)?;
        Some(Check {
            friction_case: (self.cases().len() > 1).then_some(low.friction_case),
            hot: low.fitted.iter().any(|tracked| tracked.lowest_factor < 1.0),
            limit_at: Some(self.bench.at_duty("id")),
            ..self.bench.check(CheckCode::PeakDecelerationMinimum, judged)
        })
    }

    fn of_cases(
        &self,
        value: impl Fn(&CaseOutcome) -> Option<Found>,
    ) -> Vec<(FrictionCase, Found)> {
        let found = self.cases().iter().filter_map(|case| Some((case.friction_case, value(case)?)));
        found.collect()
    }

    fn on_rubbing(
        &self,
        checks: &mut Vec<Check>,
        (acting, entry, brake): (usize, &Fitted, &Brake),
        pressings: &[(FrictionCase, Vec<Option<Pressing>>)],
    ) {
        let parts = entry.parts();
        let speed = self.highest_speed()
            * self.bench.machine.shaft_per_coordinate(parts.rolling_radius)
            * parts.speed_ratio;
        let found = self.of_cases(|_| Some(Ok(brake.rubbing_speed(speed))));
        checks.extend(self.bench.on_brake((acting, brake), CheckCode::RubbingSpeed, true, found));
        let found = pressings.iter().filter_map(|(case, all)| {
            let own = all.get(acting).copied().flatten()?;
            Some((*case, Ok(brake.pressure_velocity(speed, own.highest_clamp_force))))
        });
        let code = CheckCode::PressureVelocity;
        checks.extend(self.bench.on_brake((acting, brake), code, false, found));
    }

    /// At high friction. The energy per area belongs to a stop: a descent has none.
    fn on_flux(&self, checks: &mut Vec<Check>, (acting, brake): (usize, &Brake)) {
        let Some(high) = self.cases().last() else { return };
        let has_stops = self.events.iter().any(|event| matches!(event, Event::Stop { .. }));
        let codes = [(true, CheckCode::PowerFlux), (has_stops, CheckCode::EnergyFlux)];
        for (_, code) in codes.into_iter().filter(|(applies, _)| *applies) {
            let highest = || {
                let tracked = high.fitted.get(acting)?;
                let place = tracked.bounds.iter().position(|bound| bound.code == code)?;
                tracked.highest.get(place).copied()
            };
            let found = highest().map(|value| (high.friction_case, value));
            checks.extend(
                found.and_then(|found| self.bench.of_one_case((acting, brake), code, found)),
            );
        }
    }

    fn on_heat(&self, checks: &mut Vec<Check>, (acting, brake): (usize, &Brake)) {
        let missing = self.bench.missing_of_heat(acting, brake, true);
        let temperature = |case: &CaseOutcome, peak: Option<f64>| -> Found {
            let is_too_hot =
                case.first_failure.is_some_and(|failure| failure.reason == FailureReason::TooHot);
            match peak {
                _ if !missing.is_empty() => Err(missing.clone()),
                Some(_) if is_too_hot => Ok(f64::INFINITY),
                Some(peak) => Ok(peak),
                None => Err(Vec::new()),
            }
        };
        let bulk =
            self.of_cases(|case| Some(temperature(case, case.fitted.get(acting)?.peak_bulk)));
        let surface =
            self.of_cases(|case| Some(temperature(case, case.fitted.get(acting)?.peak_surface)));
        let (bulk_code, surface_code) =
            (CheckCode::DiscBulkTemperature, CheckCode::SurfaceTemperature);
        checks.extend(self.bench.on_brake((acting, brake), bulk_code, true, bulk));
        checks.extend(self.bench.on_brake((acting, brake), surface_code, true, surface));
    }

    fn highest_speed(&self) -> f64 {
        self.events.iter().map(|event| event.speeds().0).fold(0.0, f64::max)
    }

    /// The forces in an event, with every lining at the lowest friction that the cycle brings it to.
    fn weakest(&self, case: &CaseOutcome, event: &Event) -> Option<(Forces, f64)> {
        let acting = self.bench.acting;
        let (situation, speed) = match event {
            Event::Stop { situation, demand } => (situation, demand.final_speed),
            Event::Descent { situation, speed, .. } => (situation, *speed),
            Event::Run { .. } | Event::Space { .. } | Event::Stand { .. } => return None,
        };
        let torques = full_torques(&acting.fitted, &acting.pressed, case.friction_case);
        let demands = brake_forces(self.bench.machine, &acting.fitted, &torques);
        let hot: Vec<[f64; 2]> = demands
            .iter()
            .zip(&case.fitted)
            .map(|(demand, tracked)| demand.map(|force| force * tracked.lowest_factor))
            .collect();
        Some((Forces::new(self.bench.machine.reduced(situation), total(&hot)), speed))
    }

    fn stops(&self, low: &CaseOutcome) -> Check {
        let is_done = low.first_failure.is_none() && !low.is_let_go;
        let efforts = self.events.iter().filter_map(|event| {
            let (forces, speed) = self.weakest(low, event)?;
            let brake = forces.at(1.0, speed).brake;
            Some((forces.system.driving(speed), brake[0] + brake[1]))
        });
        let harder = |one: (f64, f64), other: (f64, f64)| {
            if other.0 * one.1 > one.0 * other.1 { other } else { one }
        };
        let (driving, available) = efforts.reduce(harder).unwrap_or((0.0, 0.0));
        Check {
            friction_case: (self.cases().len() > 1).then_some(low.friction_case),
            hot: low.fitted.iter().any(|tracked| tracked.lowest_factor < 1.0),
            limit_at: Some(Subject::Request("fitted")),
            ..self.bench.check(
                CheckCode::Stops,
                Judged::Compared(Compared::effort(Dimension::Force, driving, available, is_done)),
            )
        }
    }

    /// What acts on each entry where the cycle asks for most, at the lowest friction.
    fn pressings(&self, case: &CaseOutcome) -> Vec<Option<Pressing>> {
        let fractions = self.events.iter().filter_map(|event| {
            let (forces, speed) = self.weakest(case, event)?;
            let held = match event {
                Event::Stop { demand, .. } => demand.deceleration,
                Event::Run { .. }
                | Event::Descent { .. }
                | Event::Space { .. }
                | Event::Stand { .. } => Some(0.0),
            };
            Some(held.and_then(|held| forces.fraction_for(held, speed)).unwrap_or(1.0))
        });
        let fraction = fractions.fold(0.0, f64::max).min(1.0);
        let acting = self.bench.acting;
        let entries = acting.fitted.iter().zip(&acting.pressed);
        entries.map(|(entry, pressed)| eased(entry, pressed.as_ref()?, fraction)).collect()
    }
}
