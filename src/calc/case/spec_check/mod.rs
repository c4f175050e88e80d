//! The whole job: a machine, its brakes and its duties, every check, and whether the choice may pass.

mod acting;
mod bench;
mod check;
mod criterion;
pub mod descended;
mod duty;
mod followed;
mod held;
mod hot;
mod judge;
mod loads;
mod place;
mod require;
mod ruled;
mod stopped;
mod verdict;
mod words;

pub use acting::Use;
pub use check::{Check, Compared, Judged, Status};
pub use criterion::{Criterion, Sense};
pub use descended::METHODS;
pub use duty::{
    DescentNumbers, Duty, DutyNumbers, FittedNumbers, HoldNumbers, Limb, StopNumbers, Task,
};
pub use require::{Clock, HoldLimits, StopLimits};
pub use ruled::{applies, has_a_test, has_force_for};
pub use verdict::{Verdict, Waiver};
pub use words::{detail, subject_of};

use acting::Acting;
use hot::Heat;
use judge::{Judgement, judge, worse};

use super::stopping;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::{Finding, Notice, Remarks, Severity, Subject, WarningCode};
use crate::calc::fitted::{Fitted, Pressed, press};
use crate::calc::machine::Machine;
use crate::calc::quantity::ThermodynamicTemperature;

/// Duties of one spec check at most.
pub const MOST_DUTIES: usize = 50;
/// Duties that heat the brakes for the others, at most: each is followed stop by stop.
pub const MOST_HEATING_DUTIES: usize = 10;
/// Duties times entries of fitted brakes at most: each entry is judged in each duty.
pub const MOST_JUDGED: usize = 500;
/// Entries that act in such duties, all duties together, at most: each is followed on its own.
pub const MOST_HEATED: usize = 100;
/// Repeated stops that are followed, times the entries that act in them, all duties together, at most.
pub const MOST_STOPS: usize = 10_000;
/// Waivers at most.
pub const MOST_WAIVERS: usize = 100;

/// A machine, its brakes, and what they are put through.
#[derive(Debug, Clone, PartialEq)]
pub struct Input {
    /// What is braked.
    pub machine: Machine,
    /// Its brakes, 1 to 100 entries, each in all its parts.
    pub fitted: Vec<Fitted>,
    /// What they are put through, 1 to 50.
    pub duties: Vec<Duty>,
    /// Of the air.
    pub ambient_temperature: ThermodynamicTemperature,
    /// From this share of a limit on, a result counts as near it; in (0, 1].
    pub near_limit_from: f64,
    /// What need not be assessed.
    pub waivers: Vec<Waiver>,
}

/// Whether the choice may pass, and why.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// Whether it may.
    pub verdict: Verdict,
    /// Every check, duty by duty.
    pub checks: Vec<Check>,
    /// How each stands.
    pub statuses: Vec<Status>,
    /// Which of them governs.
    pub governing: Option<usize>,
    /// The numbers behind the checks, duty by duty.
    pub duties: Vec<DutyNumbers>,
    /// For each waiver, whether it had an effect.
    pub waiver_effects: Vec<bool>,
    /// What presses each entry.
    pub pressed: Vec<Option<Pressed>>,
    /// What is to be said about the results.
    pub remarks: Remarks,
}

impl Input {
    /// What is impossible about the input. Members are those of the request.
    #[must_use]
    pub fn faults(&self) -> Faults {
        let mut faults = self.application_faults();
        let holds = (1..=100).contains(&self.fitted.len());
        faults.require(holds, "fitted", FaultCode::WrongCount, "must have 1 to 100 entries");
        for (index, entry) in self.fitted.iter().enumerate() {
            let detail = "is not enough here: a spec check judges the brake, so give brake";
            let member = format!("fitted/{index}/torque");
            faults.require(entry.brake().is_some(), &member, FaultCode::NotApplicable, detail);
        }
        stopping::place_faults(&self.machine, &self.fitted, &mut faults);
        let entries = self.fitted.len();
        let holds = entries.saturating_mul(self.duties.len()) <= MOST_JUDGED;
        let detail = "entries of fitted times duties must not exceed 500";
        faults.require(holds, "duties", FaultCode::WrongCount, detail);
        faults
    }

    /// What is impossible about the machine, its duties and the terms, whatever brakes are fitted.
    #[must_use]
    pub fn application_faults(&self) -> Faults {
        let mut faults = Faults::new();
        let holds = (1..=MOST_DUTIES).contains(&self.duties.len());
        faults.require(holds, "duties", FaultCode::WrongCount, "must have 1 to 50 duties");
        let heating = self.duties.iter().filter(|duty| duty.task.heats()).count();
        let detail = "must not have more than 10 repeated stops, descents and procedures together";
        faults.require(heating <= MOST_HEATING_DUTIES, "duties", FaultCode::WrongCount, detail);
        self.amount_faults(&mut faults);
        let holds = self.waivers.len() <= MOST_WAIVERS;
        faults.require(
            holds,
            "waive",
            FaultCode::WrongCount,
            "must not have more than 100 waivers",
        );
        let holds = self.near_limit_from > 0.0 && self.near_limit_from <= 1.0;
        let detail = "must lie above 0 and not above 1";
        faults.require(holds, "near_limit_from", FaultCode::OutOfRange, detail);
        faults.not_negative("ambient_temperature", self.ambient_temperature);
        for (index, duty) in self.duties.iter().enumerate() {
            faults.part(&format!("duties/{index}"), self.duty_faults(duty).into_result(()));
        }
        faults
    }

    /// What would take too long: each duty by itself is bounded, and so are all of them.
    fn amount_faults(&self, faults: &mut Faults) {
        let acting = |duty: &Duty| duty.uses.as_ref().map_or(self.fitted.len(), Vec::len);
        let heating = self.duties.iter().filter(|duty| duty.task.heats());
        let heated: usize = heating.clone().map(acting).sum();
        let detail = "repeated stops, descents and procedures, each times its fitted entries, must not come to more than 100 together";
        let is_one = heating.clone().count() <= 1;
        faults.require(is_one || heated <= MOST_HEATED, "duties", FaultCode::WrongCount, detail);
        let stops = heating.filter_map(|duty| match duty.task {
            Task::RepeatedStops { stop_count, .. } => {
                usize::try_from(stop_count?).ok()?.checked_mul(acting(duty))
            }
            Task::Stop { .. }
            | Task::Descent { .. }
            | Task::Hold { .. }
            | Task::Rule { .. }
            | Task::Procedure { .. } => None,
        });
        // One duty with too many is told as such.
        let stops: usize = stops.filter(|stops| *stops <= MOST_STOPS).sum();
        let detail =
            "repeated stops, times their fitted entries, must not be more than 10000 together";
        faults.require(stops <= MOST_STOPS, "duties", FaultCode::OutOfRange, detail);
    }

    fn duty_faults(&self, duty: &Duty) -> Faults {
        let mut faults = Faults::new();
        faults.not_negative("start_temperature", duty.start_temperature);
        match &duty.task {
            Task::Stop { situation, demand, limits }
            | Task::RepeatedStops { situation, demand, limits, .. } => {
                faults.part("", situation.faults().into_result(()));
                faults.part("", demand.faults(self.machine.coordinate()).into_result(()));
                let found = limits.faults(&self.machine, demand.initial_speed, demand.final_speed);
                faults.part("require", found.into_result(()));
            }
            Task::Descent { situation, speed, distance } => {
                faults.part("", situation.faults().into_result(()));
                faults.positive("speed", *speed);
                faults.positive("distance", *distance);
            }
            Task::Hold { situation, limits } => {
                faults.part("", situation.faults().into_result(()));
                faults.part("require", limits.faults().into_result(()));
            }
            Task::Rule { row, max_speed, operated_by, .. } => {
                let detail = "is not what the requirement has a control force for";
                let holds = has_force_for(row, *operated_by);
                faults.require(holds, "operated_by", FaultCode::NotApplicable, detail);
                let detail = "is a requirement for other kinds of machines";
                let is_meant = applies(row, &self.machine);
                faults.require(is_meant, "id", FaultCode::NotApplicable, detail);
                let detail = "is not among the maximum speeds that the requirement has a test for";
                let holds = has_a_test(row, *max_speed);
                faults.require(holds, "max_speed", FaultCode::NotApplicable, detail);
            }
            Task::Procedure { events, .. } => {
                let holds = (1..=super::duty_cycle::MOST_EVENTS).contains(&events.len());
                let detail = "must come to 1 to 1000 events";
                faults.require(holds, "id", FaultCode::WrongCount, detail);
                let detail = "belongs to vehicles only";
                let is_vehicle = self.machine.vehicle().is_some();
                faults.require(is_vehicle, "kind", FaultCode::NotApplicable, detail);
            }
        }
        faults
    }
}

/// Judges the brakes of a machine.
///
/// # Errors
/// All that is impossible about the input, or a result beyond what numbers can hold.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let mut faults = input.faults();
    let pressed = faults.part("fitted", press(&input.fitted)).unwrap_or_default();
    let mut actings = Vec::with_capacity(input.duties.len());
    for (index, duty) in input.duties.iter().enumerate() {
        let acting = Acting::new(&input.fitted, &pressed, duty.uses.as_deref());
        actings.extend(faults.part(&format!("duties/{index}"), acting));
    }
    faults.into_result(())?;
    let judgements = all_judged(input, &actings)?;
    let mut remarks = Remarks::new();
    let (mut checks, mut duties) = (Vec::new(), Vec::with_capacity(judgements.len()));
    for ((duty_index, judgement), acting) in judgements.into_iter().enumerate().zip(&actings) {
        remarks.join(&judgement.remarks, |finding| place::finding(finding, duty_index, acting));
        checks.extend(judgement.checks);
        duties.push(judgement.numbers);
    }
    let waiver_effects = verdict::waive(&mut checks, &input.waivers);
    let statuses: Vec<Status> =
        checks.iter().map(|check| check.status(input.near_limit_from)).collect();
    note_fade(&mut remarks, input);
    note_checks(&mut remarks, &checks, &statuses);
    note_waivers(&mut remarks, &waiver_effects);
    Ok(Outcome {
        verdict: verdict::verdict(&checks, input.near_limit_from),
        governing: verdict::governing(&checks),
        checks,
        statuses,
        duties,
        waiver_effects,
        pressed,
        remarks,
    })
}

/// Every duty judged: those that heat first, the others as cold and as hot as these make them.
fn all_judged(input: &Input, actings: &[Acting]) -> Result<Vec<Judgement>, Faults> {
    let mut faults = Faults::new();
    let mut judged = |index: usize, duty, acting: &Acting, hot| {
        let found = judge(input, (index, duty), acting, hot);
        let found = found.map_err(|faults| place::faults(&faults, index, acting));
        faults.part("", found)
    };
    let duties = || input.duties.iter().zip(actings).enumerate();
    let mut heating: Vec<Option<Judgement>> = duties()
        .map(|(index, (duty, acting))| {
            duty.task.heats().then(|| judged(index, duty, acting, false)).flatten()
        })
        .collect();
    let heat = Heat::of(input, &heating);
    let mut judgements = Vec::with_capacity(input.duties.len());
    for (index, (duty, acting)) in duties() {
        if duty.task.heats() {
            judgements.extend(heating.get_mut(index).and_then(Option::take));
            continue;
        }
        let Some(mut both) = judged(index, duty, acting, false) else { continue };
        let sets = heat.factors(input, duty);
        for factors in &sets {
            let hot = acting.hot(factors).and_then(|acting| judged(index, duty, &acting, true));
            both = worse(both, hot);
        }
        hot::note(&mut both.numbers.fitted, acting, sets.first());
        judgements.push(both);
    }
    faults.into_result(judgements)
}

/// Where duties heat the brakes, fade points are missed.
fn note_fade(remarks: &mut Remarks, input: &Input) {
    if !input.duties.iter().any(|duty| duty.task.heats()) {
        return;
    }
    for (index, entry) in input.fitted.iter().enumerate() {
        let Some(brake) = entry.brake() else { continue };
        if brake.parts().lining.parts().fade.is_empty() {
            let subject = Subject::Brake { fitted_index: Some(index), input: "lining" };
            let detail =
                "no fade points are given: friction was taken not to change with temperature";
            remarks.find_once(Finding::notice(
                Notice::FadeNotGiven,
                Severity::Info,
                subject,
                detail,
            ));
        } else {
            remarks.method(&crate::calc::lining::FADE);
        }
    }
}

/// A warning for each check at or near its limit, with the place of the limit.
fn note_checks(remarks: &mut Remarks, checks: &[Check], statuses: &[Status]) {
    for (check, status) in checks.iter().zip(statuses) {
        let severity = match status {
            Status::NearLimit => Severity::NearLimit,
            Status::NotMet => Severity::Exceeded,
            Status::Met | Status::NotAssessed | Status::Waived => continue,
        };
        let Some(subject) = check.limit_at.clone() else { continue };
        remarks.find(Finding {
            code: WarningCode::Check(check.code),
            severity,
            subject,
            friction_case: check.friction_case,
            actual: check.compared().and_then(|compared| compared.actual),
            limit: check.compared().and_then(|compared| compared.limit),
            detail: detail(check, *status),
        });
    }
}

/// A notice on each waiver that had no effect.
pub fn note_waivers(remarks: &mut Remarks, effects: &[bool]) {
    for (index, _) in effects.iter().enumerate().filter(|(_, effect)| !**effect) {
        let subject = Subject::Waiver { index };
        let detail = "the waiver changes nothing: only a check that is not assessed can be waived";
        remarks.find(Finding::notice(Notice::WithoutEffect, Severity::Info, subject, detail));
    }
}
