//! A stop within a duty. Without fade it is the stop of `stopping`; with fade it is followed step by step.

use super::FailureReason;
use super::cold::{ColdStop, Node, STEPS};
use super::run::Run;
use super::track::Tracked;
use crate::calc::machine::Situation;
use crate::calc::motion::{Demand, Forces, Phase, Point};

/// A stop with fade ends in a failure after these: a hundred times the time that it takes cold.
const MOST_STEPS: u32 = 400;

/// A step of a duty.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Step {
    /// s.
    pub(super) duration: f64,
    /// Along the coordinate, at the start of the step.
    pub(super) speed: f64,
    /// Along the coordinate, at its end.
    pub(super) end_speed: f64,
    /// Along the coordinate, for the cooling.
    pub(super) cooled_at: f64,
    /// What the brakes do.
    pub(super) activity: Activity,
}

impl Step {
    /// A step at one speed.
    pub(super) const fn steady(duration: f64, speed: f64, activity: Activity) -> Self {
        Self { duration, speed, end_speed: speed, cooled_at: speed, activity }
    }
}

/// What the brakes do in a step.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Activity {
    /// Nothing.
    Idle,
    /// They hold a speed.
    Holding,
    /// They stop the machine.
    Stopping,
}

/// A stop of a duty.
#[derive(Debug, Clone, Copy)]
pub(super) struct Braking<'a> {
    pub(super) situation: &'a Situation,
    pub(super) demand: &'a Demand,
    /// The same stop at cold friction.
    pub(super) cold: &'a ColdStop,
}

impl Braking<'_> {
    /// Follows the stop: distance and time in all, reaction included.
    pub(super) fn follow(&self, run: &mut Run<'_>) -> Result<(f64, f64), FailureReason> {
        if run.fades() { self.with_fade(run) } else { self.without_fade(run) }
    }

    fn without_fade(&self, run: &mut Run<'_>) -> Result<(f64, f64), FailureReason> {
        let path = &self.cold.stop.path;
        let (begin, end) = (path.first_torque(), path.end());
        run.idle(begin.time, self.demand.initial_speed)?;
        let shares = run.shares(&vec![1.0; run.tracked.len()]);
        let work = self.cold.work;
        for (tracked, shares) in run.tracked.iter_mut().zip(&shares) {
            tracked.begin(work[0] * shares[0] + work[1] * shares[1]);
        }
        let braking_time = end.time - begin.time;
        let cooled_at =
            if braking_time > 0.0 { (end.distance - begin.distance) / braking_time } else { 0.0 };
        let mut powers = vec![(0.0, 0.0); shares.len()];
        let mut before: Option<Node> = None;
        for node in &self.cold.nodes {
            for ((from, to), shares) in powers.iter_mut().zip(&shares) {
                (*from, *to) = (*to, node.power[0] * shares[0] + node.power[1] * shares[1]);
            }
            if let Some(before) = before.replace(*node) {
                let step = Step {
                    duration: node.since - before.since,
                    speed: before.speed,
                    end_speed: node.speed,
                    cooled_at,
                    activity: Activity::Stopping,
                };
                run.step(&step, &powers)?;
            }
        }
        Ok((end.distance, end.time))
    }

    fn with_fade(&self, run: &mut Run<'_>) -> Result<(f64, f64), FailureReason> {
        let Some(mut motion) = self.until_torque(run)? else {
            let end = self.cold.stop.path.end();
            return Ok((end.distance, end.time));
        };
        let system = &self.cold.stop.path.forces().system;
        let (initial, end) = (motion.speed, self.demand.final_speed);
        run.begin(
            &Hot::new(run, self.situation),
            0.5 * system.inertia() * (initial * initial - end * end),
        );
        let scale = self.expected_time(initial) / f64::from(STEPS * STEPS);
        let build_up =
            BuildUp { time: self.demand.delays.build_up(), fraction: self.fraction(run, initial) };
        let cooled_at = f64::midpoint(initial, end);
        let mut since = 0.0;
        for step in 1..=MOST_STEPS {
            let hot = Hot::new(run, self.situation);
            let kink = build_up.kink(since, &hot.forces);
            let stretch = build_up.stretch(since, scale * f64::from(2 * step - 1), kink);
            if self.coupled(run, &hot, &mut motion, &stretch, cooled_at)? {
                return Ok((motion.way, motion.time));
            }
            since += stretch.duration;
        }
        Err(FailureReason::FinalSpeedNotReached)
    }

    /// Reaction and dead time, as in the cold stop: friction plays no part in them. None if the stop ends there.
    fn until_torque(&self, run: &mut Run<'_>) -> Result<Option<Motion>, FailureReason> {
        let path = &self.cold.stop.path;
        let has_torque = path.phases().iter().any(|phase| phase.phase >= Phase::BuildUp);
        let start = Point { time: 0.0, speed: self.demand.initial_speed, distance: 0.0 };
        let begin = if path.phases().is_empty() {
            // Without delays, brakes too weak when cold leave no course at all: nothing is over yet.
            start
        } else if has_torque {
            path.first_torque()
        } else {
            path.end()
        };
        run.idle(begin.time, self.demand.initial_speed)?;
        let is_over = !has_torque && begin.speed <= self.demand.final_speed;
        Ok((!is_over).then_some(Motion {
            time: begin.time,
            way: begin.distance,
            speed: begin.speed,
        }))
    }

    /// About how long the braking takes: sets the scale of the steps.
    fn expected_time(&self, speed: f64) -> f64 {
        let full = self.cold.stop.path.forces().at(1.0, self.demand.final_speed).deceleration;
        let held = self.demand.deceleration;
        let deceleration = held.map_or(full, |held| if full > 0.0 { held.min(full) } else { held });
        let change = speed - self.demand.final_speed;
        if deceleration > 0.0 {
            change / deceleration + self.demand.delays.build_up()
        } else {
            change
        }
    }

    /// The fraction that the operator builds up to.
    fn fraction(&self, run: &Run<'_>, speed: f64) -> f64 {
        let held = |held| Hot::new(run, self.situation).forces.fraction_for(held, speed);
        self.demand.deceleration.and_then(held).unwrap_or(1.0)
    }

    /// One step of motion and heat together from brakes as `hot` as they are, by Heun's method; true if the final speed is reached in it.
    fn coupled(
        &self,
        run: &mut Run<'_>,
        hot: &Hot,
        motion: &mut Motion,
        stretch: &RampedStep,
        cooled_at: f64,
    ) -> Result<bool, FailureReason> {
        let duration = stretch.duration;
        let start = self.state(hot, stretch.from, motion.speed, stretch.is_full);
        if stretch.is_full && (start.deceleration.is_nan() || start.deceleration <= 0.0) {
            return Err(FailureReason::FinalSpeedNotReached);
        }
        let predicted = (motion.speed - start.deceleration * duration).max(0.0);
        let factors =
            run.factors_after(duration, &start.powers(motion.speed, predicted), cooled_at)?;
        let end = self.state(
            &Hot::at(run, self.situation, &factors),
            stretch.to,
            predicted,
            stretch.is_full,
        );
        let rise = (end.deceleration - start.deceleration) / duration;
        let lasting =
            time_to(motion.speed - self.demand.final_speed, start.deceleration, rise, duration);
        let (time, is_over) = (lasting.unwrap_or(duration), lasting.is_some());
        let speed = motion.speed - time * (start.deceleration + 0.5 * rise * time);
        let speed = if is_over { self.demand.final_speed } else { speed };
        let last = start.towards(&end, time / duration);
        let powers: Vec<(f64, f64)> = start
            .brakes
            .iter()
            .zip(&last)
            .map(|(from, to)| (from * motion.speed, to * speed))
            .collect();
        let step = Step {
            duration: time,
            speed: motion.speed,
            end_speed: speed,
            cooled_at,
            activity: Activity::Stopping,
        };
        run.step(&step, &powers)?;
        motion.way += time * (motion.speed - time * (0.5 * start.deceleration + rise * time / 6.0));
        motion.time += time;
        motion.speed = speed;
        Ok(is_over)
    }

    /// Deceleration and force of one brake of each entry, with the brakes as hot as said.
    fn state(&self, hot: &Hot, fraction: f64, speed: f64, is_full: bool) -> State {
        let held = self.demand.deceleration.filter(|_| is_full);
        let fraction =
            held.map_or(fraction, |held| hot.forces.fraction_for(held, speed).unwrap_or(1.0));
        let instant = hot.forces.at(fraction, speed);
        let of_brake = |shares: &[f64; 2]| {
            (instant.brake[0] * shares[0] + instant.brake[1] * shares[1]).max(0.0)
        };
        State {
            deceleration: instant.deceleration,
            brakes: hot.shares.iter().map(of_brake).collect(),
        }
    }
}

/// The forces of a machine with its brakes at their present friction.
pub(super) struct Hot {
    /// The balance.
    pub(super) forces: Forces,
    /// What part of the brake work of each axle one brake of each entry does.
    pub(super) shares: Vec<[f64; 2]>,
}

impl Hot {
    pub(super) fn new(run: &Run<'_>, situation: &Situation) -> Self {
        let factors: Vec<f64> = run.tracked.iter().map(Tracked::factor).collect();
        Self::at(run, situation, &factors)
    }

    pub(super) fn at(run: &Run<'_>, situation: &Situation, factors: &[f64]) -> Self {
        Self { forces: run.forces(situation, factors), shares: run.shares(factors) }
    }
}

/// Where a stop has come to.
struct Motion {
    time: f64,
    way: f64,
    speed: f64,
}

/// The brakes at one moment: force of one brake of each entry along the coordinate.
struct State {
    deceleration: f64,
    brakes: Vec<f64>,
}

impl State {
    /// Powers if the forces stay while the speed changes.
    fn powers(&self, from: f64, to: f64) -> Vec<(f64, f64)> {
        self.brakes.iter().map(|force| (force * from, force * to)).collect()
    }

    /// The forces a share of the way to another state.
    fn towards(&self, other: &Self, share: f64) -> Vec<f64> {
        self.brakes.iter().zip(&other.brakes).map(|(from, to)| from + share * (to - from)).collect()
    }
}

/// How the applied fraction rises.
struct BuildUp {
    time: f64,
    fraction: f64,
}

/// A step in which the applied fraction is linear.
struct RampedStep {
    duration: f64,
    from: f64,
    to: f64,
    is_full: bool,
}

impl BuildUp {
    /// How long until another limit takes over, as far as it lies in the build-up; endless if none does.
    fn kink(&self, since: f64, forces: &Forces) -> f64 {
        if since >= self.time {
            return f64::INFINITY;
        }
        // Heat shifts a limit a little: one just passed must not hold the next step back.
        let nearest = since + 1e-3 * self.time;
        let times = forces.breakpoints(self.fraction).into_iter();
        let mut times = times.map(|fraction| self.time * fraction / self.fraction);
        times.find(|time| *time > nearest).map_or(f64::INFINITY, |time| time - since)
    }

    /// The next step: as long as wanted, but it ends where the build-up or a limit does; a build-up takes sixteen at least.
    fn stretch(&self, since: f64, wanted: f64, kink: f64) -> RampedStep {
        let rest = self.time - since;
        if rest <= 1e-12 * self.time {
            return RampedStep {
                duration: wanted,
                from: self.fraction,
                to: self.fraction,
                is_full: true,
            };
        }
        let duration = wanted.min(0.0625 * self.time).min(rest).min(kink);
        let applied = |time: f64| (self.fraction * time / self.time).min(self.fraction);
        RampedStep { duration, from: applied(since), to: applied(since + duration), is_full: false }
    }
}

/// When a speed has fallen by `gap`, 0 or more, within `duration`, under a deceleration that changes linearly.
fn time_to(gap: f64, deceleration: f64, rise: f64, duration: f64) -> Option<f64> {
    // The first root of rise/2·t² + deceleration·t − gap = 0, in the form that does not cancel.
    let root = (deceleration * deceleration + 2.0 * rise * gap).sqrt();
    let time = if deceleration >= 0.0 {
        2.0 * gap / (deceleration + root)
    } else {
        (root - deceleration) / rise
    };
    (time >= 0.0 && time <= duration).then_some(time)
}
