//! One duty at one friction, event by event.

use std::rc::Rc;

use super::braked::{Activity, Braking, Hot, Step};
use super::cold::ColdStop;
use super::course::{Course, Moment};
use super::track::Tracked;
use super::{CaseOutcome, Event, Failure, FailureReason, Gap, Input, LongestStop, Place};
use crate::calc::case::stopping;
use crate::calc::fitted::Pressed;
use crate::calc::friction::FrictionCase;
use crate::calc::heat::air::AirTable;
use crate::calc::machine::Situation;
use crate::calc::motion::{Demand, Ending, Forces, stop};

/// Steps of an event without braking, growing from its start on: what is left of a stop dies out early.
const IDLE_STEPS: u32 = 8;
/// Steps of a descent.
const DESCENT_STEPS: u32 = 40;

/// Follows the duty. None if a stop cannot be followed in numbers.
pub(super) fn run(
    input: &Input,
    pressed: &[Option<Pressed>],
    case: FrictionCase,
    air: &AirTable,
) -> Option<CaseOutcome> {
    let mut run = Run::new(input, pressed, case, air);
    let cold = run.cold_stops()?;
    'duty: for repeat in 1..=input.repeats {
        for (event_index, (event, cold)) in input.events.iter().zip(&cold).enumerate() {
            run.place = Place { event_index: input.origin(event_index), repeat };
            if let Err(reason) = run.event(event, cold.as_deref()) {
                run.first_failure = Some(Failure { place: run.place, reason });
                break 'duty;
            }
        }
    }
    Some(run.finish(case))
}

/// A duty in the making.
pub(super) struct Run<'a> {
    pub(super) input: &'a Input,
    pub(super) tracked: Vec<Tracked<'a>>,
    /// Brake force of each entry at full application and cold friction, front (or all) and rear.
    pub(super) demands: Vec<[f64; 2]>,
    pub(super) place: Place,
    pub(super) time: f64,
    speed: f64,
    /// Distance and time of the last stop.
    last_stop: (f64, f64),
    longest_stop: Option<LongestStop>,
    first_failure: Option<Failure>,
    is_let_go: bool,
    course: Option<Course>,
}

/// Why an event could not be done.
pub(super) type Done = Result<(), FailureReason>;

impl<'a> Run<'a> {
    fn new(
        input: &'a Input,
        pressed: &[Option<Pressed>],
        case: FrictionCase,
        air: &'a AirTable,
    ) -> Self {
        let torques = stopping::full_torques(&input.fitted, pressed, case);
        let tracked = input.fitted.iter();
        let (start, ambient) = (input.start_temperature, input.ambient_temperature);
        let mut run = Self {
            input,
            tracked: tracked
                .map(|entry| Tracked::new(&input.machine, entry, start, ambient, air))
                .collect(),
            demands: stopping::brake_forces(&input.machine, &input.fitted, &torques),
            place: Place { event_index: 0, repeat: 1 },
            time: 0.0,
            speed: 0.0,
            last_stop: (0.0, 0.0),
            longest_stop: None,
            first_failure: None,
            is_let_go: false,
            course: input.points.map(Course::new),
        };
        run.speed = input.events.first().map_or(0.0, |event| event.speeds().0);
        run.record(run.speed);
        run
    }

    /// The stops at cold friction, one for each event that is a stop.
    fn cold_stops(&self) -> Option<Vec<Option<Rc<ColdStop>>>> {
        let factors = vec![1.0; self.tracked.len()];
        let cold = |situation: &Situation, demand: &Demand| {
            stop(&self.forces(situation, &factors), demand)
        };
        ColdStop::of_events(&self.input.events, self.fades(), cold)
    }

    /// Whether the friction of any entry changes with temperature.
    pub(super) fn fades(&self) -> bool {
        self.tracked.iter().any(Tracked::fades)
    }

    /// The forces with the brakes of each entry at a factor of their cold force.
    pub(super) fn forces(&self, situation: &Situation, factors: &[f64]) -> Forces {
        let hot = self.demands.iter().zip(factors);
        let total = hot.fold([0.0; 2], |sum, (demand, factor)| {
            [sum[0] + demand[0] * factor, sum[1] + demand[1] * factor]
        });
        Forces::new(self.input.machine.reduced(situation), total)
    }

    /// The factor of each entry after a step that is not taken.
    pub(super) fn factors_after(
        &mut self,
        duration: f64,
        powers: &[(f64, f64)],
        speed: f64,
    ) -> Result<Vec<f64>, FailureReason> {
        let entries = self.tracked.iter_mut().zip(powers);
        let factors = entries.map(|(tracked, power)| tracked.factor_after(duration, *power, speed));
        factors.collect::<Option<_>>().ok_or(FailureReason::TooHot)
    }

    /// What part of the brake work of each axle one brake of each entry does, at factors of the cold forces.
    pub(super) fn shares(&self, factors: &[f64]) -> Vec<[f64; 2]> {
        let hot: Vec<[f64; 2]> = self
            .demands
            .iter()
            .zip(factors)
            .map(|(demand, factor)| demand.map(|force| force * factor))
            .collect();
        let total = stopping::total(&hot);
        let share =
            |own: f64, total: f64, count: f64| if total > 0.0 { own / total / count } else { 0.0 };
        let counts = self.tracked.iter().map(Tracked::count);
        hot.iter()
            .zip(counts)
            .map(|(own, count)| [share(own[0], total[0], count), share(own[1], total[1], count)])
            .collect()
    }

    fn event(&mut self, event: &Event, cold: Option<&ColdStop>) -> Done {
        match (event, cold) {
            (Event::Stop { situation, demand }, Some(cold)) => {
                if matches!(cold.stop.ending, Ending::NotReached { .. }) && !self.fades() {
                    return Err(FailureReason::FinalSpeedNotReached);
                }
                let braking = Braking { situation, demand, cold };
                let (distance, time) = braking.follow(self)?;
                self.is_let_go |= demand.final_speed <= 0.0 && !self.holds(situation);
                self.speed = demand.final_speed;
                self.last_stop = (distance, time);
                if self.longest_stop.is_none_or(|longest| distance > longest.distance) {
                    self.longest_stop = Some(LongestStop { place: self.place, distance, time });
                }
                Ok(())
            }
            (Event::Stop { .. }, None) => Err(FailureReason::FinalSpeedNotReached),
            (Event::Run { speed, time }, _) => self.idle(*time, *speed),
            (Event::Space { gap, speed }, _) => self.idle(self.until_due(gap, *speed), *speed),
            (Event::Stand { time }, _) => self.idle(*time, 0.0),
            (Event::Descent { situation, speed, distance }, _) => {
                self.descent(situation, *speed, *distance)
            }
        }
    }

    /// How long until the next stop is due; 0 if the last one took longer.
    fn until_due(&self, gap: &Gap, speed: f64) -> f64 {
        let (distance, time) = self.last_stop;
        match gap {
            Gap::Time(interval) => interval - time,
            Gap::Distance(spacing) => (spacing - distance) / speed,
        }
        .max(0.0)
    }

    /// Whether the brakes, as hot as they are, hold the machine at rest against what would move it back.
    fn holds(&self, situation: &Situation) -> bool {
        let forces = Hot::new(self, situation).forces;
        let brake = forces.at(1.0, 0.0).brake;
        brake[0] + brake[1] >= forces.system.reversing()
    }

    /// Time without braking, at a speed.
    pub(super) fn idle(&mut self, duration: f64, speed: f64) -> Done {
        self.speed = speed;
        for tracked in &mut self.tracked {
            if let Some(thermal) = &mut tracked.thermal {
                thermal.hold_properties(thermal.bulk());
            }
        }
        let none = vec![(0.0, 0.0); self.tracked.len()];
        self.graded(duration, IDLE_STEPS, |run, step| {
            run.step(&Step::steady(step, speed, Activity::Idle), &none)
        })
    }

    /// Divides a duration into steps that grow from its start on.
    fn graded(
        &mut self,
        duration: f64,
        steps: u32,
        mut go: impl FnMut(&mut Self, f64) -> Done,
    ) -> Done {
        let share = |step: u32| {
            let share = f64::from(step) / f64::from(steps);
            share * share
        };
        (0..steps).try_for_each(|step| go(self, duration * (share(step + 1) - share(step))))
    }

    fn descent(&mut self, situation: &Situation, speed: f64, distance: f64) -> Done {
        let duration = distance / speed;
        self.speed = speed;
        let hot = Hot::new(self, situation);
        let driving = -hot.forces.system.retarding(speed);
        if driving <= 0.0 {
            return self.idle(duration, speed);
        }
        self.begin(&hot, driving * distance);
        self.graded(duration, DESCENT_STEPS, |run, step| {
            run.held(situation, (speed, driving), step)
        })?;
        // What is left at the end must still hold the speed.
        Self::holding(&Hot::new(self, situation), speed, driving).map(|_| ())
    }

    /// One step at a held speed, by Heun's method: what each brake does shifts as their friction changes.
    fn held(&mut self, situation: &Situation, (speed, driving): (f64, f64), duration: f64) -> Done {
        let start = Self::holding(&Hot::new(self, situation), speed, driving)?;
        let steady: Vec<(f64, f64)> = start.iter().map(|power| (*power, *power)).collect();
        let factors = self.factors_after(duration, &steady, speed)?;
        let end = Self::holding(&Hot::at(self, situation, &factors), speed, driving)?;
        let powers: Vec<(f64, f64)> = start.into_iter().zip(end).collect();
        self.step(&Step::steady(duration, speed, Activity::Holding), &powers)
    }

    /// Power of one brake of each entry while they hold a speed against a driving force.
    fn holding(hot: &Hot, speed: f64, driving: f64) -> Result<Vec<f64>, FailureReason> {
        if hot.forces.at(1.0, speed).total_ground() < driving {
            return Err(FailureReason::SpeedNotHeld);
        }
        let fraction = hot.forces.fraction_for(0.0, speed).unwrap_or(1.0);
        let brake = hot.forces.at(fraction, speed).brake;
        let power = |shares: &[f64; 2]| (brake[0] * shares[0] + brake[1] * shares[1]) * speed;
        Ok(hot.shares.iter().map(power).collect())
    }

    /// Starts a braking in which all brakes together will take up about `energy`.
    pub(super) fn begin(&mut self, hot: &Hot, energy: f64) {
        let full = hot.forces.demand;
        let total = full[0] + full[1];
        for (tracked, shares) in self.tracked.iter_mut().zip(&hot.shares) {
            let part =
                if total > 0.0 { (full[0] * shares[0] + full[1] * shares[1]) / total } else { 0.0 };
            tracked.begin(energy * part);
        }
    }

    /// One step of all brakes, each with the power of one brake at start and end.
    pub(super) fn step(&mut self, step: &Step, powers: &[(f64, f64)]) -> Done {
        if step.duration <= 0.0 {
            return Ok(());
        }
        self.time += step.duration;
        let (place, time) = (self.place, self.time);
        for (tracked, power) in self.tracked.iter_mut().zip(powers) {
            tracked.advance(step.duration, *power, step.cooled_at).ok_or(FailureReason::TooHot)?;
            tracked.look((place, time), power.0.max(power.1), step);
        }
        self.record(step.end_speed);
        Ok(())
    }

    fn record(&mut self, speed: f64) {
        if let Some(course) = &mut self.course {
            let fitted = self.tracked.iter().map(Tracked::sample).collect();
            course.add(Moment { time: self.time, speed, fitted });
        }
    }

    fn finish(self, friction_case: FrictionCase) -> CaseOutcome {
        let speed = self.speed;
        CaseOutcome {
            friction_case,
            duration: self.time,
            fitted: self.tracked.into_iter().map(|tracked| tracked.finish(speed)).collect(),
            longest_stop: self.longest_stop,
            first_failure: self.first_failure,
            is_let_go: self.is_let_go,
            course: self.course.map(Course::finish),
        }
    }
}
