//! What a stop comes to against what the duty asks of it.

use super::bench::Bench;
use super::check::{Check, Compared, Judged, worst};
use super::require::{Clock, StopLimits};
use crate::calc::case::stop_energy;
use crate::calc::case::stopping::CaseOutcome;
use crate::calc::finding::{CheckCode, Subject};
use crate::calc::friction::FrictionCase;
use crate::calc::motion::{Coordinate, Demand, Ending};
use crate::calc::quantity::{Amount, Dimension, STANDARD_GRAVITY, Si};

/// A stop whose numbers are known, and what it is held against.
pub(super) struct Stopped<'a> {
    pub(super) bench: &'a Bench<'a>,
    pub(super) input: &'a stop_energy::Input,
    pub(super) outcome: &'a stop_energy::Outcome,
    pub(super) limits: &'a StopLimits,
    /// Whether the delays are known. Without them no distance and no time is judged.
    pub(super) has_response: bool,
}

#[expect(
    clippy::wildcard_enum_match_arm,
    reason = "each match is about the few checks that its caller names"
)]
impl Stopped<'_> {
    pub(super) fn demand(&self) -> &Demand {
        &self.input.stop.demand
    }

    pub(super) fn cases(&self) -> &[CaseOutcome] {
        &self.outcome.stop.friction_cases
    }

    fn low(&self) -> Option<&CaseOutcome> {
        self.cases().first()
    }

    fn high(&self) -> Option<&CaseOutcome> {
        self.cases().last()
    }

    /// All checks of the stop, those of the machine first.
    pub(super) fn checks(&self) -> Vec<Check> {
        let mut checks = vec![self.stops()];
        checks.extend(self.required());
        checks.extend(self.on_tires());
        self.on_brakes(&mut checks);
        checks
    }

    fn check(
        &self,
        code: CheckCode,
        member: Option<&'static str>,
        (case, judged): (Option<FrictionCase>, Judged),
    ) -> Check {
        Check {
            limit_at: member.map(|member| self.bench.at_duty(member)),
            friction_case: case,
            ..self.bench.check(code, judged)
        }
    }

    /// Only ranges have a case worth telling.
    fn case_of(&self, case: &CaseOutcome) -> Option<FrictionCase> {
        (self.cases().len() > 1).then_some(case.friction_case)
    }

    fn stops(&self) -> Check {
        let judged = self
            .low()
            .map_or(Judged::Lacking(Vec::new()), |case| Judged::Compared(Self::effort(case)));
        let case = self.low().and_then(|case| self.case_of(case));
        Check {
            limit_at: Some(Subject::Request("fitted")),
            ..self.check(CheckCode::Stops, None, (case, judged))
        }
    }

    fn effort(case: &CaseOutcome) -> Compared {
        let stop = &case.stop;
        let system = &stop.path.forces().system;
        let dimension = match system.coordinate {
            Coordinate::Way => Dimension::Force,
            Coordinate::Angle => Dimension::Torque,
        };
        match stop.ending {
            // At rest, but not for long: what pulls back is more than the brakes hold.
            Ending::Reached(Some(run_back)) if run_back.time.is_none() => {
                Compared::effort(dimension, system.reversing(), stop.available, false)
            }
            Ending::Reached(_) => Compared::effort(dimension, stop.driving, stop.available, true),
            Ending::NotReached { .. } => {
                Compared::effort(dimension, stop.driving, stop.available, false)
            }
        }
    }

    /// What the duty asks of distance, time and deceleration.
    fn required(&self) -> Vec<Check> {
        let asked = self.limits.of_the_machine();
        let asked = asked.into_iter().filter_map(|(code, member, dimension, limit)| {
            Some((code, member, Amount { dimension, si: limit? }))
        });
        asked
            .map(|(code, member, limit)| self.check(code, Some(member), self.judge(code, limit)))
            .collect()
    }

    /// What one case comes to in a check, if a torque acted.
    fn actual(&self, code: CheckCode, case: &CaseOutcome) -> Option<f64> {
        let peak = || case.hardest.map(|(instant, _)| instant.deceleration);
        match code {
            CheckCode::StoppingDistance => Some(self.distance(case)),
            CheckCode::StoppingTime => Some(self.time(case)),
            CheckCode::MeanDeceleration => case.mean_deceleration(self.demand().final_speed),
            CheckCode::MeanFullyDevelopedDeceleration => {
                case.mean_fully_developed_deceleration(self.demand())
            }
            CheckCode::BrakingRatio => self.braking_ratio(case),
            _ => peak(),
        }
    }

    fn distance(&self, case: &CaseOutcome) -> f64 {
        let demand = self.demand();
        let way = case.stop.path.end().distance;
        match self.limits.clock {
            Clock::Signal => way,
            Clock::Control => way - demand.initial_speed * demand.delays.reaction(),
        }
    }

    fn time(&self, case: &CaseOutcome) -> f64 {
        let time = case.stop.path.end().time;
        match self.limits.clock {
            Clock::Signal => time,
            Clock::Control => time - self.demand().delays.reaction(),
        }
    }

    fn braking_ratio(&self, case: &CaseOutcome) -> Option<f64> {
        let weight = self.bench.machine.vehicle()?.mass().si() * STANDARD_GRAVITY;
        case.hardest.map(|(instant, _)| instant.total_ground() / weight)
    }

    /// Holds what the worst case comes to against a limit, where the tires allow to tell. A stop that does not end
    /// keeps no limit.
    fn judge(&self, code: CheckCode, limit: Amount) -> (Option<FrictionCase>, Judged) {
        let is_timed = matches!(code, CheckCode::StoppingDistance | CheckCode::StoppingTime);
        let is_maximum = is_timed || code == CheckCode::PeakDeceleration;
        let mut missing = self.bench.missing_of_tires(true, !self.bench.acts_on_all());
        if is_timed && !self.has_response {
            missing.push(self.bench.at_duty("response"));
        }
        let case = if code == CheckCode::PeakDeceleration { self.high() } else { self.low() };
        let Some(case) = case.filter(|_| missing.is_empty()) else {
            return (None, Judged::Lacking(missing));
        };
        let is_over = matches!(case.stop.ending, Ending::Reached(_));
        let compared = match self.actual(code, case).filter(|_| is_over) {
            Some(actual) if is_maximum => Compared::at_most(actual, limit, 0.0),
            Some(actual) => Compared::at_least(actual, limit),
            // Rest came without any torque, by what resists alone.
            None if is_over && is_maximum => {
                let free = case.stop.path.forces().at(0.0, self.demand().initial_speed);
                Compared::at_most(free.deceleration.max(0.0), limit, 0.0)
            }
            None => Compared::beyond(Some(limit)),
        };
        (self.case_of(case), Judged::Compared(compared))
    }

    /// What the duty asks of the tires.
    fn on_tires(&self) -> Vec<Check> {
        let asked = [
            (self.limits.no_wheel_lock, CheckCode::Adhesion, "require/no_wheel_lock"),
            (
                self.limits.no_rear_wheel_lift,
                CheckCode::RearWheelLift,
                "require/no_rear_wheel_lift",
            ),
            (self.limits.front_locks_first, CheckCode::AxleLockOrder, "require/front_locks_first"),
        ];
        let asked = asked.into_iter().filter(|(is_asked, ..)| *is_asked);
        asked.map(|(_, code, member)| self.check(code, Some(member), self.tires(code))).collect()
    }

    fn tires(&self, code: CheckCode) -> (Option<FrictionCase>, Judged) {
        let missing = match code {
            CheckCode::Adhesion => self.bench.missing_of_tires(true, !self.bench.acts_on_all()),
            CheckCode::RearWheelLift => self.bench.missing_of_tires(false, true),
            _ => self.bench.missing_of_tires(true, true),
        };
        if !missing.is_empty() {
            return (None, Judged::Lacking(missing));
        }
        match (code, self.high()) {
            (CheckCode::AxleLockOrder, _) => self.lock_order(),
            (CheckCode::RearWheelLift, Some(high)) => {
                (self.case_of(high), self.rear_wheel_lift(high))
            }
            (_, Some(high)) => (self.case_of(high), Self::adhesion(high)),
            (_, None) => (None, Judged::Lacking(Vec::new())),
        }
    }

    /// The demand on each axle before any cap, over what its tires hold at the load reached; the worse axle.
    fn adhesion(case: &CaseOutcome) -> Judged {
        let forces = case.stop.path.forces();
        let adhesion = forces.system.tires.and_then(|tires| tires.adhesion);
        let (Some((instant, fraction)), Some(adhesion)) = (case.hardest, adhesion) else {
            return Judged::Compared(unasked());
        };
        let axles = forces.demand.into_iter().zip(instant.normal);
        let axles = axles.filter(|(demand, _)| *demand > 0.0).map(|(demand, normal)| {
            let limit = Amount { dimension: Dimension::Force, si: adhesion * normal };
            Judged::Compared(Compared::at_most(demand * fraction, limit, 0.0))
        });
        let worse =
            |one: Judged, other: Judged| if other.is_worse_than(&one) { other } else { one };
        axles.reduce(worse).unwrap_or(Judged::Lacking(Vec::new()))
    }

    /// Ground force and rolling resistance, as if the wheel could not lift, over what lifts it.
    fn rear_wheel_lift(&self, case: &CaseOutcome) -> Judged {
        let forces = case.stop.path.forces();
        let Some(lift) = forces.lift_force() else { return Judged::Lacking(Vec::new()) };
        let Some((_, fraction)) = case.hardest else { return Judged::Compared(unasked()) };
        let speed =
            case.stop.path.hardest().map_or(self.demand().initial_speed, |(.., speed)| speed);
        let resistance = forces.system.resistance;
        let total = forces.without_lift().at(fraction, speed).total_ground() + resistance;
        let limit = Amount { dimension: Dimension::Force, si: lift + resistance };
        Judged::Compared(Compared::at_most(total.max(0.0), limit, 0.0))
    }

    /// Front over rear lock factor, also with front linings at low and rear ones at high friction.
    fn lock_order(&self) -> (Option<FrictionCase>, Judged) {
        let limit = Amount { dimension: Dimension::Ratio, si: 1.0 };
        let judge =
            |factors: Option<crate::calc::motion::LockFactors>| {
                let ratio = factors.and_then(|factors| factors.front_over_rear());
                Judged::Compared(ratio.map_or(Compared::boundless(limit), |ratio| {
                    Compared::at_most(ratio, limit, 0.0)
                }))
            };
        let cases = self.cases().iter().map(|case| (case.friction_case, judge(case.lock)));
        let found = worst(cases).unwrap_or((None, judge(None)));
        let mixed = judge(self.outcome.stop.mixed_lock);
        if mixed.is_worse_than(&found.1) { (None, mixed) } else { found }
    }
}

/// Rest came without any torque: nothing was asked of the tires.
const fn unasked() -> Compared {
    let nothing = Amount { dimension: Dimension::Force, si: 0.0 };
    Compared { actual: Some(nothing), limit: None, utilization: Some(0.0), is_within: true }
}
