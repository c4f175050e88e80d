//! The stop: reaction, dead time, build-up and full braking, each in closed form where forces allow it.

use super::Coordinate;
use super::forces::Forces;
use super::integrate::integrate;
use super::path::{Effort, Motion, Path, Phase, Piece, time_in_step, time_to_speed};
use super::run_back::{RunBack, run_back};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{Si, Time};

/// The delays between the wish to stop and full torque.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Delays {
    reaction: f64,
    dead: f64,
    build_up: f64,
}

impl Delays {
    /// No delay at all.
    pub const NONE: Self = Self { reaction: 0.0, dead: 0.0, build_up: 0.0 };

    /// Reaction time, dead time and build-up time.
    ///
    /// # Errors
    /// A negative time.
    pub fn new(reaction: Time, dead: Time, build_up: Time) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.not_negative("reaction_time", reaction);
        faults.not_negative("dead_time", dead);
        faults.not_negative("build_up_time", build_up);
        faults.into_result(Self {
            reaction: reaction.si(),
            dead: dead.si(),
            build_up: build_up.si(),
        })
    }

    /// The build-up time, s.
    #[must_use]
    pub const fn build_up(&self) -> f64 {
        self.build_up
    }

    /// The reaction time, s.
    #[must_use]
    pub const fn reaction(&self) -> f64 {
        self.reaction
    }
}

/// What a stop is asked to do, in SI along the coordinate.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Demand {
    /// Speed at the start; above `final_speed`.
    pub initial_speed: f64,
    /// Speed at the end, 0 or more.
    pub final_speed: f64,
    /// The delays.
    pub delays: Delays,
    /// Deceleration that the operator holds after build-up.
    pub deceleration: Option<f64>,
}

impl Demand {
    /// What is impossible about it. Members are those of a request.
    #[must_use]
    pub fn faults(&self, coordinate: Coordinate) -> Faults {
        let mut faults = Faults::new();
        let (initial, end) = match coordinate {
            Coordinate::Way => ("initial_speed", "final_speed"),
            Coordinate::Angle => ("initial_rotational_speed", "final_rotational_speed"),
        };
        faults.positive(initial, self.initial_speed);
        faults.not_negative(end, self.final_speed);
        if faults.is_empty() {
            let holds = self.final_speed < self.initial_speed;
            faults.require(
                holds,
                end,
                FaultCode::NotBelowInitialSpeed,
                "must be below the initial speed",
            );
        }
        if let Some(deceleration) = self.deceleration {
            let member = match coordinate {
                Coordinate::Way => "deceleration",
                Coordinate::Angle => "angular_deceleration",
            };
            faults.positive(member, deceleration);
        }
        faults
    }
}

/// How a stop ends.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Ending {
    /// The final speed is reached; run-back tells of a machine that then moves the other way.
    Reached(Option<RunBack>),
    /// The deceleration vanishes above the final speed.
    NotReached {
        /// The speed that the machine tends to, if finite.
        tending_speed: Option<f64>,
    },
}

/// A stop.
#[derive(Debug, Clone, PartialEq)]
pub struct Stop {
    /// Its course; empty of meaning if the final speed is not reached.
    pub path: Path,
    /// How it ends.
    pub ending: Ending,
    /// Whether the operator holds a deceleration below what the brakes could give.
    pub is_modulated: bool,
    /// Largest fraction of the full torque applied once built up. A held deceleration needs most at the final speed,
    /// where the air resists least.
    pub fraction: f64,
    /// Force that drives against the brakes at the final speed, 0 or more.
    pub driving: f64,
    /// Brake force that the full torque gives there at the wheel, as limited.
    pub available: f64,
}

/// Brakes a machine. None if a motion cannot be followed within the tolerance of the integrator.
#[must_use]
pub fn stop(forces: &Forces, demand: &Demand) -> Option<Stop> {
    let at_end = forces.at(1.0, demand.final_speed);
    let mut run = Run::new(forces, demand);
    let is_over = run.reaction() || run.dead()? || run.build_up()? || run.full()?;
    let ending = if is_over {
        run.path.finish(demand.final_speed);
        Ending::Reached(run.run_back())
    } else {
        Ending::NotReached { tending_speed: tending_speed(forces, &run) }
    };
    Some(Stop {
        ending,
        is_modulated: run.is_modulated,
        fraction: run.largest_fraction,
        driving: forces.system.driving(demand.final_speed),
        available: at_end.brake[0] + at_end.brake[1],
        path: run.path,
    })
}

/// A stop in the making.
struct Run<'a> {
    forces: &'a Forces,
    demand: &'a Demand,
    path: Path,
    time: f64,
    way: f64,
    speed: f64,
    fraction: f64,
    largest_fraction: f64,
    is_modulated: bool,
}

impl<'a> Run<'a> {
    fn new(forces: &'a Forces, demand: &'a Demand) -> Self {
        Self {
            forces,
            demand,
            path: Path::new(forces),
            time: 0.0,
            way: 0.0,
            speed: demand.initial_speed,
            fraction: 1.0,
            largest_fraction: 1.0,
            is_modulated: false,
        }
    }

    fn has_drag(&self) -> bool {
        self.forces.system.drag > 0.0
    }

    fn reaction(&mut self) -> bool {
        let duration = self.demand.delays.reaction;
        if duration > 0.0 {
            let motion = Motion::Polynomial { speed: self.speed, deceleration: 0.0, rise: 0.0 };
            self.push(Phase::Reaction, duration, motion, Effort::Ramp(0.0, 0.0));
        }
        false
    }

    fn dead(&mut self) -> Option<bool> {
        let duration = self.demand.delays.dead;
        if duration > 0.0 { self.ramp(Phase::Dead, duration, 0.0, 0.0) } else { Some(false) }
    }

    fn build_up(&mut self) -> Option<bool> {
        if let Some(deceleration) = self.demand.deceleration {
            let at = |speed| self.forces.fraction_for(deceleration, speed);
            // Where the air helps at the start, the brakes must still hold the deceleration at the end.
            let fractions = at(self.speed).zip(at(self.demand.final_speed));
            self.is_modulated = fractions.is_some();
            let (first, last) = fractions.unwrap_or((1.0, 1.0));
            (self.fraction, self.largest_fraction) = (first, first.max(last));
        }
        let duration = self.demand.delays.build_up;
        if duration <= 0.0 {
            return Some(false);
        }
        if self.has_drag() {
            return self.ramp(Phase::BuildUp, duration, 0.0, self.fraction);
        }
        let mut start = 0.0;
        let mut ends = self.forces.breakpoints(self.fraction);
        ends.push(self.fraction);
        for end in ends {
            let share = if self.fraction > 0.0 { (end - start) / self.fraction } else { 1.0 };
            if self.ramp(Phase::BuildUp, duration * share, start, end)? {
                return Some(true);
            }
            start = end;
        }
        Some(false)
    }

    fn full(&mut self) -> Option<bool> {
        let target = self.demand.final_speed;
        if let (true, Some(deceleration), true) =
            (self.is_modulated, self.demand.deceleration, self.has_drag())
        {
            if self.coast(deceleration)? {
                return Some(true);
            }
            let duration = (self.speed - target) / deceleration;
            let motion = Motion::Polynomial { speed: self.speed, deceleration, rise: 0.0 };
            self.push(Phase::Full, duration, motion, Effort::Hold(deceleration));
            return Some(true);
        }
        let slowest = self.forces.at(self.fraction, target).deceleration;
        if slowest.is_nan() || slowest <= 0.0 {
            return Some(false);
        }
        // The deceleration grows with speed: at the final speed it is least.
        let horizon = (self.speed - target) / slowest * (1.0 + 1e-9);
        self.ramp(Phase::Full, horizon, self.fraction, self.fraction)
    }

    /// Lets the air slow the machine while that alone exceeds the deceleration asked for; true if the stop ends in it.
    fn coast(&mut self, deceleration: f64) -> Option<bool> {
        let system = &self.forces.system;
        let free = self.forces.at(0.0, self.speed).deceleration;
        let is_slower = free > deceleration;
        if !is_slower {
            return Some(false);
        }
        // Without brakes the deceleration is proportional to what retards.
        let wanted = system.retarding(self.speed) * deceleration / free;
        let square = (wanted - system.retarding(0.0)) / system.drag;
        let target = square.max(0.0).sqrt().max(self.demand.final_speed);
        let horizon = (self.speed - target) / deceleration * (1.0 + 1e-9);
        self.integrated((Phase::Full, horizon), (0.0, 0.0), target)?;
        Some(target <= self.demand.final_speed)
    }

    /// Goes through `duration` while the fraction rises from `start` to `end`; true if the stop ends in it.
    fn ramp(&mut self, phase: Phase, duration: f64, start: f64, end: f64) -> Option<bool> {
        let rate = (end - start) / duration;
        if self.has_drag() {
            self.integrated((phase, duration), (start, rate), self.demand.final_speed)
        } else {
            Some(self.closed(phase, duration, start, end))
        }
    }

    fn closed(&mut self, phase: Phase, duration: f64, start: f64, end: f64) -> bool {
        let first = self.forces.at(start, self.speed).deceleration;
        let rise = (self.forces.at(end, self.speed).deceleration - first) / duration;
        let rise = if start.to_bits() == end.to_bits() { 0.0 } else { rise };
        let ending = time_to_speed(self.speed, first, rise, self.demand.final_speed, duration);
        let motion = Motion::Polynomial { speed: self.speed, deceleration: first, rise };
        let effort = Effort::Ramp(start, (end - start) / duration);
        self.push(phase, ending.unwrap_or(duration), motion, effort);
        ending.is_some()
    }

    fn integrated(
        &mut self,
        (phase, duration): (Phase, f64),
        (start, rate): (f64, f64),
        target: f64,
    ) -> Option<bool> {
        let forces = self.forces;
        let deceleration =
            |time: f64, speed: f64| forces.at(start + rate * time, speed.max(0.0)).deceleration;
        let steps = integrate(deceleration, self.speed, duration, target)?;
        let (time, way) = (self.time, self.way);
        for step in steps {
            let is_last = step.speed_at(step.length) <= target;
            let length =
                if is_last { time_in_step(&step, step.length, target) } else { step.length };
            let step = step.moved(way);
            (self.time, self.way) = (time + step.start, step.way_at(0.0));
            let effort = Effort::Ramp(start + rate * step.start, rate);
            self.push(phase, length, Motion::Integrated(step), effort);
            if is_last {
                self.speed = target;
                return Some(true);
            }
        }
        Some(false)
    }

    fn push(&mut self, phase: Phase, duration: f64, motion: Motion, effort: Effort) {
        let piece = Piece { phase, start: self.time, duration, way: self.way, motion, effort };
        let end = piece.end();
        (self.time, self.way, self.speed) = (end.time, end.distance, end.speed);
        self.path.push(piece);
    }

    fn run_back(&self) -> Option<RunBack> {
        if self.demand.final_speed > 0.0 {
            return None;
        }
        let delays = &self.demand.delays;
        let since_dead = self.time - delays.reaction - delays.dead;
        // Once at rest, an operator who held a deceleration can press as hard as the brake allows.
        run_back(self.forces, since_dead, delays.build_up)
    }
}

/// Where the speed settles when the brakes do not suffice; none if it grows without bound.
fn tending_speed(forces: &Forces, run: &Run<'_>) -> Option<f64> {
    let net = |speed: f64| forces.at(run.fraction, speed).deceleration;
    let low = run.demand.final_speed;
    if forces.system.drag <= 0.0 {
        return (net(low) == 0.0).then_some(run.speed);
    }
    // The deceleration grows without bound with speed: double until it is positive.
    let mut high = run.speed.max(1.0);
    for _ in 0..200 {
        if net(high) > 0.0 {
            let mut convergence = roots::SimpleConvergency { eps: 1e-12, max_iter: 200 };
            return roots::find_root_brent(low, high, net, &mut convergence).ok();
        }
        high *= 2.0;
    }
    None
}
