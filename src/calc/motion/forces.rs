//! The balance of forces at one instant, solved exactly.
//!
//! With S the sum of the ground forces and R all that retards without brakes, m·a = S + R. Each axle carries
//! the smaller of what its brakes demand and what its tires hold; both are linear in S, so S is the least of a
//! few lines in the applied fraction of the brake torque.

use super::Reduced;

/// Where a vehicle's weight acts, m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wheelbase {
    /// Distance of the axles.
    pub wheelbase: f64,
    /// Height of the center of gravity.
    pub height: f64,
    /// Front axle to center of gravity.
    pub front: f64,
}

/// What keeps the deceleration from being higher.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum LimitedBy {
    /// The brakes give no more.
    Brake,
    /// The tires of an axle hold no more.
    Adhesion,
    /// The rear wheel would lift.
    RearWheelLift,
    /// The operator asks for no more.
    Operator,
}

impl LimitedBy {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Brake => "brake",
            Self::Adhesion => "adhesion",
            Self::RearWheelLift => "rear_wheel_lift",
            Self::Operator => "operator",
        }
    }
}

/// An axle of a vehicle with known axle loads; the whole machine is `Front` where axles are not told apart.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Axle {
    /// The front axle, or all.
    Front,
    /// The rear axle.
    Rear,
}

/// The state of forces at one instant. Index 0 is the front axle (or the whole machine), 1 the rear axle.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Instant {
    /// Deceleration, positive when slowing.
    pub deceleration: f64,
    /// Force of each axle on the ground.
    pub ground: [f64; 2],
    /// Brake force of each axle at the wheel: ground force and what its rotating masses take.
    pub brake: [f64; 2],
    /// Normal force of each axle, N; 0 where no ground carries.
    pub normal: [f64; 2],
    /// What limits the deceleration.
    pub limited_by: LimitedBy,
}

impl Instant {
    /// Sum of the ground forces.
    #[must_use]
    pub fn total_ground(&self) -> f64 {
        self.ground[0] + self.ground[1]
    }
}

/// One line that bounds S: S = (constant + retarding·R + fraction·f)/slope.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Line {
    constant: f64,
    retarding: f64,
    fraction: f64,
    slope: f64,
    kind: LimitedBy,
}

impl Line {
    fn offset(&self, retarding: f64) -> f64 {
        (self.constant + self.retarding * retarding) / self.slope
    }

    fn at(&self, fraction: f64, retarding: f64) -> f64 {
        self.offset(retarding) + self.gradient() * fraction
    }

    fn gradient(&self) -> f64 {
        self.fraction / self.slope
    }
}

/// A reduced machine with its brakes: the force balance at any applied fraction and speed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Forces {
    /// The machine.
    pub system: Reduced,
    /// Brake force of each axle at full application, before any cap.
    pub demand: [f64; 2],
    shares: [f64; 2],
    lines: [Option<Line>; 5],
}

impl Forces {
    /// A machine whose brakes press with full force `demand` per axle.
    #[must_use]
    pub fn new(system: Reduced, demand: [f64; 2]) -> Self {
        let total = demand[0] + demand[1];
        // Without brakes the rotating masses still have to be slowed, through the tires.
        let shares = if total > 0.0 { demand.map(|force| force / total) } else { [1.0, 0.0] };
        let mut forces = Self { system, demand, shares, lines: [None; 5] };
        forces.lines = forces.bounds();
        forces
    }

    /// The same machine, held down so that no wheel lifts.
    #[must_use]
    pub fn without_lift(mut self) -> Self {
        self.lines[4] = None;
        self
    }

    /// The same machine with all demands multiplied.
    #[must_use]
    pub fn scaled(&self, factor: f64) -> Self {
        Self::new(self.system, self.demand.map(|force| force * factor))
    }

    fn bounds(&self) -> [Option<Line>; 5] {
        let combination = |front, rear| self.combination([front, rear]);
        [
            combination(false, false),
            combination(true, false),
            combination(false, true),
            combination(true, true),
            self.lift_line(),
        ]
    }

    /// The line on which the axles marked `capped` hold no more; none where that cannot happen.
    fn combination(&self, capped: [bool; 2]) -> Option<Line> {
        let adhesion = self.system.tires.and_then(|tires| tires.adhesion);
        let mut line = Line {
            constant: 0.0,
            retarding: 0.0,
            fraction: 0.0,
            slope: 1.0,
            kind: LimitedBy::Brake,
        };
        for (axle, &is_capped) in capped.iter().enumerate() {
            if is_capped {
                let (constant, per_ground) = self.normal_line(axle)?;
                line.constant += adhesion? * constant;
                line.slope -= adhesion? * per_ground;
                line.kind = LimitedBy::Adhesion;
                if self.demand.get(axle).is_none_or(|force| *force <= 0.0) {
                    return None;
                }
            } else {
                let rotating = self.shares.get(axle).unwrap_or(&0.0) * self.system.rotating;
                line.retarding -= rotating;
                line.slope += rotating;
                line.fraction += self.demand.get(axle).unwrap_or(&0.0);
            }
        }
        // A line that S does not meet from below never binds: the axle gains load faster than force.
        (line.slope > 0.0).then_some(line)
    }

    /// Normal force of an axle as (constant, per unit of S); none where no ground carries it.
    fn normal_line(&self, axle: usize) -> Option<(f64, f64)> {
        let tires = self.system.tires?;
        let Some(base) = tires.wheelbase else {
            return (axle == 0).then_some((tires.normal_force, 0.0));
        };
        let transfer = base.height / base.wheelbase;
        let rear =
            tires.normal_force * base.front / base.wheelbase - transfer * self.system.resistance;
        Some(if axle == 0 { (tires.normal_force - rear, transfer) } else { (rear, -transfer) })
    }

    fn lift_line(&self) -> Option<Line> {
        let constant = self.lift_force()?;
        Some(Line {
            constant,
            retarding: 0.0,
            fraction: 0.0,
            slope: 1.0,
            kind: LimitedBy::RearWheelLift,
        })
    }

    /// Total ground force at which the rear wheel lifts; none where axle loads are unknown.
    #[must_use]
    pub fn lift_force(&self) -> Option<f64> {
        let tires = self.system.tires?;
        let base = tires.wheelbase?;
        Some(tires.normal_force * base.front / base.height - self.system.resistance)
    }

    fn active(&self) -> impl Iterator<Item = &Line> {
        self.lines.iter().flatten()
    }

    /// The balance with `fraction` of the full brake torque applied, at `speed`.
    #[must_use]
    pub fn at(&self, fraction: f64, speed: f64) -> Instant {
        let retarding = self.system.retarding(speed);
        let mut total = f64::INFINITY;
        let mut limited_by = LimitedBy::Brake;
        for line in self.active() {
            let bound = line.at(fraction, retarding);
            if bound < total {
                (total, limited_by) = (bound, line.kind);
            }
        }
        let rotating = [0, 1].map(|axle| self.rotating_force(axle, total + retarding));
        let normal = [0, 1].map(|axle| self.normal(axle, total));
        let ground = self.split(fraction, total, limited_by, rotating, normal);
        Instant {
            deceleration: (total + retarding) / self.system.mass,
            ground,
            brake: [ground[0] + rotating[0], ground[1] + rotating[1]],
            normal,
            limited_by,
        }
    }

    /// What an axle's rotating masses take from its brakes: s·(k − 1)·m·a.
    fn rotating_force(&self, axle: usize, mass_times_deceleration: f64) -> f64 {
        self.shares.get(axle).unwrap_or(&0.0) * self.system.rotating * mass_times_deceleration
    }

    fn normal(&self, axle: usize, total: f64) -> f64 {
        self.normal_line(axle)
            .map_or(0.0, |(constant, per_ground)| (constant + per_ground * total).max(0.0))
    }

    /// How the total ground force divides between the axles.
    fn split(
        &self,
        fraction: f64,
        total: f64,
        by: LimitedBy,
        rotating: [f64; 2],
        normal: [f64; 2],
    ) -> [f64; 2] {
        let demanded = [0, 1].map(|axle: usize| {
            let brake = fraction * self.demand.get(axle).unwrap_or(&0.0);
            brake - rotating.get(axle).unwrap_or(&0.0)
        });
        match (by, self.system.tires.and_then(|tires| tires.adhesion)) {
            // All wheels are eased alike.
            (LimitedBy::RearWheelLift, None) => {
                let sum = demanded[0] + demanded[1];
                let scale = if sum > 0.0 { total / sum } else { 0.0 };
                demanded.map(|force| force * scale)
            }
            (_, None) => demanded,
            (_, Some(adhesion)) => {
                let rear = demanded[1].min(adhesion * normal[1]);
                [total - rear, rear]
            }
        }
    }

    /// The fractions in (0, `up_to`) at which another limit takes over, rising. Only without drag.
    #[must_use]
    pub fn breakpoints(&self, up_to: f64) -> Vec<f64> {
        let retarding = self.system.retarding(0.0);
        let lines: Vec<&Line> = self.active().collect();
        let mut points = Vec::new();
        for (index, first) in lines.iter().enumerate() {
            for second in lines.iter().skip(index + 1) {
                let meeting = (second.offset(retarding) - first.offset(retarding))
                    / (first.gradient() - second.gradient());
                let binds = || {
                    let here = first.at(meeting, retarding);
                    lines.iter().all(|line| line.at(meeting, retarding) >= here - 1e-9 * here.abs())
                };
                if meeting > 0.0 && meeting < up_to && binds() {
                    points.push(meeting);
                }
            }
        }
        points.sort_by(f64::total_cmp);
        points.dedup();
        points
    }

    /// The least fraction that gives `deceleration` at `speed`; none if no fraction up to 1 does.
    #[must_use]
    pub fn fraction_for(&self, deceleration: f64, speed: f64) -> Option<f64> {
        let retarding = self.system.retarding(speed);
        let wanted = self.system.mass * deceleration - retarding;
        let mut fraction = 0.0_f64;
        for line in self.active() {
            let missing = wanted - line.offset(retarding);
            if missing > 0.0 {
                if line.gradient() <= 0.0 {
                    return None;
                }
                fraction = fraction.max(missing / line.gradient());
            }
        }
        (fraction <= 1.0).then_some(fraction)
    }
}
