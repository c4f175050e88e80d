//! The course of a stop: speed and way over time, piece by piece.

use roots::{SimpleConvergency, find_root_brent};

use super::forces::{Forces, Instant};
use super::integrate::Step;

/// A part of a stop, in the order of time.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Phase {
    /// Nobody has acted yet: speed held.
    Reaction,
    /// The drive is off, no torque yet.
    Dead,
    /// Torque rises.
    BuildUp,
    /// Torque has reached its final value.
    Full,
}

impl Phase {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Reaction => "reaction",
            Self::Dead => "dead",
            Self::BuildUp => "build_up",
            Self::Full => "full",
        }
    }

    /// Whether brake torque acts.
    #[must_use]
    pub const fn has_torque(self) -> bool {
        matches!(self, Self::BuildUp | Self::Full)
    }
}

/// Time, speed and way at one moment of a stop.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// s, from the start.
    pub time: f64,
    /// Along the coordinate.
    pub speed: f64,
    /// Along the coordinate, from the start.
    pub distance: f64,
}

/// What a phase took.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PhaseTotals {
    /// Which.
    pub phase: Phase,
    /// s.
    pub time: f64,
    /// Along the coordinate.
    pub distance: f64,
    /// Speed at its end.
    pub end_speed: f64,
}

/// How speed goes within a piece.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Motion {
    /// Deceleration linear in time.
    Polynomial {
        /// Speed at the start.
        speed: f64,
        /// Deceleration at the start.
        deceleration: f64,
        /// Rise of the deceleration per time.
        rise: f64,
    },
    /// A step of the integrator.
    Integrated(Step),
}

/// How hard the brakes press within a piece.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Effort {
    /// Applied fraction: start and rate.
    Ramp(f64, f64),
    /// Whatever gives this deceleration.
    Hold(f64),
}

/// A stretch of a stop.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Piece {
    pub(super) phase: Phase,
    pub(super) start: f64,
    pub(super) duration: f64,
    pub(super) way: f64,
    pub(super) motion: Motion,
    pub(super) effort: Effort,
}

/// The first time in (0, `duration`] at which v0 − a·τ − j·τ²/2 falls to `target`.
pub(super) fn time_to_speed(
    speed: f64,
    deceleration: f64,
    rise: f64,
    target: f64,
    duration: f64,
) -> Option<f64> {
    let gap = speed - target;
    let reached =
        |time: f64| (time > 0.0 && time <= duration * (1.0 + 1e-15)).then_some(time.min(duration));
    if rise == 0.0 {
        return if deceleration > 0.0 { reached(gap / deceleration) } else { None };
    }
    let discriminant = deceleration * deceleration + 2.0 * rise * gap;
    if discriminant < 0.0 {
        return None;
    }
    // The stable pair of roots of j/2·τ² + a·τ − gap = 0.
    let q = -0.5 * (deceleration + discriminant.sqrt().copysign(deceleration));
    let candidates = [reached(2.0 * q / rise), reached(-gap / q)];
    candidates.into_iter().flatten().min_by(f64::total_cmp)
}

impl Piece {
    pub(super) fn speed_at(&self, time: f64) -> f64 {
        match self.motion {
            Motion::Polynomial { speed, deceleration, rise } => {
                speed - time * (deceleration + 0.5 * rise * time)
            }
            Motion::Integrated(step) => step.speed_at(time),
        }
    }

    pub(super) fn way_at(&self, time: f64) -> f64 {
        match self.motion {
            Motion::Polynomial { speed, deceleration, rise } => {
                self.way + time * (speed - time * (0.5 * deceleration + rise * time / 6.0))
            }
            Motion::Integrated(step) => step.way_at(time),
        }
    }

    pub(super) fn point_at(&self, time: f64) -> Point {
        Point { time: self.start + time, speed: self.speed_at(time), distance: self.way_at(time) }
    }

    pub(super) fn end(&self) -> Point {
        self.point_at(self.duration)
    }

    fn time_at_speed(&self, target: f64) -> Option<f64> {
        let above = self.speed_at(0.0) >= target && self.speed_at(self.duration) < target;
        match self.motion {
            Motion::Polynomial { speed, deceleration, rise } => {
                if above {
                    time_to_speed(speed, deceleration, rise, target, self.duration)
                } else {
                    None
                }
            }
            Motion::Integrated(step) => {
                if above {
                    Some(time_in_step(&step, self.duration, target))
                } else {
                    None
                }
            }
        }
    }
}

/// When a step's speed falls to `target`, known to lie within `duration`.
pub(super) fn time_in_step(step: &Step, duration: f64, target: f64) -> f64 {
    let scale = step.speed_at(0.0).abs().max(f64::MIN_POSITIVE);
    let excess = |share: f64| (step.speed_at(share * duration) - target) / scale;
    let mut convergence = SimpleConvergency { eps: 1e-15, max_iter: 120 };
    find_root_brent(0.0, 1.0, excess, &mut convergence).map_or(duration, |share| share * duration)
}

/// Gauss-Legendre nodes and weights on [0, 1], five points: exact to degree 9 (Abramowitz and Stegun 25.4.30).
const GAUSS: [(f64, f64); 5] = [
    (0.046_910_077_030_668_004, 0.118_463_442_528_094_54),
    (0.230_765_344_947_158_45, 0.239_314_335_249_683_23),
    (0.5, 0.284_444_444_444_444_44),
    (0.769_234_655_052_841_6, 0.239_314_335_249_683_23),
    (0.953_089_922_969_332, 0.118_463_442_528_094_54),
];

/// A function of time with two values, and the size below which their changes are rounding.
struct Pair<F> {
    at: F,
    /// Per unit of time.
    rounding: f64,
}

impl<F: Fn(f64) -> [f64; 2]> Pair<F> {
    /// Integral from `from` to `to`, five points.
    fn gauss(&self, from: f64, to: f64) -> [f64; 2] {
        let width = to - from;
        GAUSS.iter().fold([0.0; 2], |sum, (node, weight)| {
            let value = (self.at)(from + node * width);
            [0, 1].map(|one: usize| sum[one] + weight * width * value[one])
        })
    }

    /// The same, halved until the halves agree with the `whole`: forces bend where another limit takes over.
    fn halved(&self, from: f64, to: f64, whole: [f64; 2], depth: u32) -> [f64; 2] {
        let middle = f64::midpoint(from, to);
        let (first, second) = (self.gauss(from, middle), self.gauss(middle, to));
        let both = [first[0] + second[0], first[1] + second[1]];
        let tolerance =
            1e-10 * (whole[0].abs() + whole[1].abs()) + self.rounding * (to - from).abs();
        let agrees = |one: usize| (both[one] - whole[one]).abs() <= tolerance;
        if depth == 0 || (agrees(0) && agrees(1)) {
            return both;
        }
        let first = self.halved(from, middle, first, depth - 1);
        let second = self.halved(middle, to, second, depth - 1);
        [first[0] + second[0], first[1] + second[1]]
    }
}

/// The course of a stop with the forces that caused it.
#[derive(Debug, Clone, PartialEq)]
pub struct Path {
    forces: Forces,
    pieces: Vec<Piece>,
    final_speed: Option<f64>,
}

impl Path {
    pub(super) fn new(forces: &Forces) -> Self {
        Self { forces: *forces, pieces: Vec::with_capacity(8), final_speed: None }
    }

    pub(super) fn push(&mut self, piece: Piece) {
        self.pieces.push(piece);
    }

    /// Says that the path ends at exactly this speed; the pieces come within some roundings of it.
    pub(super) fn finish(&mut self, final_speed: f64) {
        self.final_speed = Some(final_speed);
    }

    /// The forces on the machine.
    #[must_use]
    pub const fn forces(&self) -> &Forces {
        &self.forces
    }

    /// The end of the stop; zeros for an empty path.
    #[must_use]
    pub fn end(&self) -> Point {
        let end =
            self.pieces.last().map_or(Point { time: 0.0, speed: 0.0, distance: 0.0 }, Piece::end);
        Point { speed: self.final_speed.unwrap_or(end.speed), ..end }
    }

    /// Where the machine is `time` after the start, held at the end.
    #[must_use]
    pub fn at(&self, time: f64) -> Point {
        if time >= self.end().time {
            return self.end();
        }
        let index = self.pieces.partition_point(|piece| piece.start + piece.duration < time);
        self.pieces
            .get(index)
            .map_or_else(|| self.end(), |piece| piece.point_at((time - piece.start).max(0.0)))
    }

    /// The last point at which the speed falls through `speed`.
    #[must_use]
    pub fn falling_through(&self, speed: f64) -> Option<Point> {
        self.pieces
            .iter()
            .rev()
            .find_map(|piece| piece.time_at_speed(speed).map(|time| piece.point_at(time)))
    }

    /// What each phase took, for the phases that happened.
    #[must_use]
    pub fn phases(&self) -> Vec<PhaseTotals> {
        let mut totals: Vec<PhaseTotals> = Vec::with_capacity(4);
        for piece in &self.pieces {
            let distance = piece.end().distance - piece.way;
            match totals.last_mut().filter(|last| last.phase == piece.phase) {
                Some(last) => {
                    last.time += piece.duration;
                    last.distance += distance;
                    last.end_speed = piece.end().speed;
                }
                None => totals.push(PhaseTotals {
                    phase: piece.phase,
                    time: piece.duration,
                    distance,
                    end_speed: piece.end().speed,
                }),
            }
        }
        if let Some(last) = totals.last_mut() {
            last.end_speed = self.end().speed;
        }
        totals
    }

    /// Where torque begins; the end if it never does.
    #[must_use]
    pub fn first_torque(&self) -> Point {
        self.torque_pieces().next().map_or_else(|| self.end(), |piece| piece.point_at(0.0))
    }

    fn torque_pieces(&self) -> impl Iterator<Item = &Piece> {
        self.pieces.iter().filter(|piece| piece.phase.has_torque())
    }

    /// The highest speed while torque acts; 0 if it never does.
    #[must_use]
    pub fn highest_speed_with_torque(&self) -> f64 {
        self.torque_pieces().fold(0.0_f64, |highest, piece| highest.max(highest_speed(piece)))
    }

    fn instant(&self, piece: &Piece, time: f64) -> Instant {
        let speed = piece.speed_at(time);
        self.forces.at(self.fraction(piece, time), speed)
    }

    fn fraction(&self, piece: &Piece, time: f64) -> f64 {
        match piece.effort {
            Effort::Ramp(start, rate) => start + rate * time,
            Effort::Hold(deceleration) => {
                self.forces.fraction_for(deceleration, piece.speed_at(time)).unwrap_or(1.0)
            }
        }
    }

    /// The balance of forces, the applied fraction and the speed where the deceleration by torque is highest.
    #[must_use]
    pub fn hardest(&self) -> Option<(Instant, f64, f64)> {
        let mut hardest: Option<(Instant, f64, f64)> = None;
        for piece in self.torque_pieces() {
            for time in [0.0, self.time_of_summit(piece), piece.duration] {
                let instant = self.instant(piece, time);
                // Equal decelerations: the later state is the one in which all limits show.
                if hardest.is_none_or(|(found, ..)| instant.deceleration >= found.deceleration) {
                    hardest = Some((instant, self.fraction(piece, time), piece.speed_at(time)));
                }
            }
        }
        hardest
    }

    /// When the deceleration of a piece is highest: within it only where the torque rises while the air's force falls.
    ///
    /// Within a step of the integrator there is one summit, smooth or at the edge where a limit takes over; of
    /// an edge the later side is taken, on which the limit shows.
    fn time_of_summit(&self, piece: &Piece) -> f64 {
        let is_bent = matches!(piece.motion, Motion::Integrated(_))
            && matches!(piece.effort, Effort::Ramp(_, rate) if rate > 0.0);
        if !is_bent {
            return 0.0;
        }
        let deceleration = |time: f64| self.instant(piece, time).deceleration;
        let (mut low, mut high) = (0.0, piece.duration);
        for _ in 0..64 {
            let (one, other) = (low + (high - low) / 3.0, high - (high - low) / 3.0);
            if deceleration(one) < deceleration(other) { low = one } else { high = other }
        }
        high
    }

    /// Integrals over time, while torque acts, of two forces, given by the force balance and the speed, times the speed.
    fn work(&self, forces: impl Fn(&Instant, f64) -> [f64; 2]) -> [f64; 2] {
        let system = &self.forces.system;
        let of_piece = |piece: &Piece| {
            let at = |time: f64| {
                let speed = piece.speed_at(time);
                forces(&self.instant(piece, time), speed).map(|force| force * speed)
            };
            // The force of a brake is what is left of a balance of all forces: it is known to a rounding of these.
            let speed = piece.speed_at(0.0).abs();
            let carried = system.tires.map_or(0.0, |tires| tires.normal_force);
            let balance = system.outside.abs()
                + system.resistance
                + system.drag * speed * speed
                + self.forces.demand[0]
                + self.forces.demand[1]
                + carried;
            let pair = Pair { at, rounding: 1e-12 * balance * speed };
            let whole = pair.gauss(0.0, piece.duration);
            match piece.motion {
                Motion::Polynomial { .. } => whole,
                Motion::Integrated(_) => pair.halved(0.0, piece.duration, whole, 16),
            }
        };
        self.torque_pieces()
            .map(of_piece)
            .fold([0.0; 2], |sum, one| [sum[0] + one[0], sum[1] + one[1]])
    }

    /// Work of the brakes of each axle, front (or all) and rear, J.
    #[must_use]
    pub fn brake_work(&self) -> [f64; 2] {
        self.work(|instant, _| instant.brake)
    }

    /// Work of the resistances while torque acts, J, positive.
    #[must_use]
    pub fn resistance_work(&self) -> f64 {
        let system = &self.forces.system;
        self.work(|_, speed| [system.resistance + system.drag * speed * speed, 0.0])[0]
    }

    /// Power of the brakes of each axle over time from the first torque on, as nodes joined by straight lines.
    ///
    /// Pieces in which the power is not linear are divided, long ones by their share of `most`; about twice `most`
    /// nodes at the most, and two for each piece.
    #[must_use]
    pub fn brake_power(&self, most: usize) -> Vec<(f64, [f64; 2])> {
        let pieces: Vec<&Piece> = self.torque_pieces().collect();
        let begin = self.first_torque().time;
        let curved = pieces.iter().filter(|piece| !self.has_linear_power(piece)).count().max(1);
        let least = (most / curved).clamp(2, 24);
        let lasting = self.end().time - begin;
        // A held deceleration is one long piece, beside the many short ones of a build-up against drag.
        let divisions = |piece: &Piece| {
            let wanted = to_f64(most) * piece.duration / lasting;
            (least..most.max(least))
                .find(|parts| to_f64(*parts) >= wanted)
                .unwrap_or(most.max(least))
        };
        let mut nodes = Vec::new();
        for (index, piece) in pieces.iter().enumerate() {
            let parts = if self.has_linear_power(piece) { 1 } else { divisions(piece) };
            let first = usize::from(index > 0 && piece.phase != Phase::Full);
            for part in first..=parts {
                let time = piece.duration * to_f64(part) / to_f64(parts);
                let instant = self.instant(piece, time);
                let speed = piece.speed_at(time).max(0.0);
                nodes.push((
                    piece.start + time - begin,
                    instant.brake.map(|force| force.max(0.0) * speed),
                ));
            }
        }
        nodes.dedup_by(|next, last| {
            next.0 = next.0.max(last.0);
            // Two powers at one time are a jump, as from build-up to a held deceleration.
            let jump = (next.1[0] - last.1[0]).abs() + (next.1[1] - last.1[1]).abs();
            next.0 <= last.0 && jump <= 1e-9 * (last.1[0] + last.1[1])
        });
        nodes
    }

    /// Highest power over the torque phases of brakes that do `shares` of the work of each axle, W.
    #[must_use]
    pub fn peak_brake_power(&self, shares: [f64; 2]) -> f64 {
        self.torque_pieces()
            .fold(0.0_f64, |highest, piece| highest.max(self.peak_power_in(piece, shares)))
    }

    /// Looks at even places, then narrows the highest: power within a piece has one summit.
    fn peak_power_in(&self, piece: &Piece, shares: [f64; 2]) -> f64 {
        const PLACES: usize = 8;
        let power = |time: f64| {
            let brake = self.instant(piece, time).brake;
            (brake[0] * shares[0] + brake[1] * shares[1]) * piece.speed_at(time)
        };
        let ends = power(0.0).max(power(piece.duration));
        if self.has_linear_power(piece) {
            return ends;
        }
        let width = piece.duration / to_f64(PLACES);
        let places = (0..=PLACES).map(|place| to_f64(place) * width);
        let summit = places.fold((0.0, power(0.0)), |best, time| {
            let here = power(time);
            if here > best.1 { (time, here) } else { best }
        });
        let (mut low, mut high) =
            ((summit.0 - width).max(0.0), (summit.0 + width).min(piece.duration));
        for _ in 0..40 {
            let (one, other) = (low + (high - low) / 3.0, high - (high - low) / 3.0);
            if power(one) < power(other) { low = one } else { high = other }
        }
        ends.max(power(f64::midpoint(low, high)))
    }

    fn has_linear_power(&self, piece: &Piece) -> bool {
        matches!(piece.effort, Effort::Ramp(_, 0.0))
            && matches!(piece.motion, Motion::Polynomial { rise: 0.0, .. })
            && self.forces.system.drag == 0.0
    }

    /// `count` points equally spaced in time, both ends included.
    #[must_use]
    pub fn trace(&self, count: usize) -> Vec<Point> {
        let end = self.end().time;
        let last = to_f64(count.saturating_sub(1)).max(1.0);
        (0..count).map(|index| self.at(end * to_f64(index) / last)).collect()
    }
}

/// The highest speed within a piece: at its ends or where the deceleration passes zero.
fn highest_speed(piece: &Piece) -> f64 {
    let ends = piece.speed_at(0.0).max(piece.speed_at(piece.duration));
    match piece.motion {
        Motion::Polynomial { deceleration, rise, .. } if rise > 0.0 && deceleration < 0.0 => {
            let time = -deceleration / rise;
            if time < piece.duration { ends.max(piece.speed_at(time)) } else { ends }
        }
        Motion::Polynomial { .. } => ends,
        Motion::Integrated(_) => (1..8).fold(ends, |highest, part| {
            highest.max(piece.speed_at(piece.duration * f64::from(part) / 8.0))
        }),
    }
}

/// Small counts as numbers; exact far beyond any count used here.
#[expect(clippy::cast_precision_loss, reason = "counts of points stay far below 2^53")]
const fn to_f64(count: usize) -> f64 {
    count as f64
}
