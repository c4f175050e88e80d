//! A disc of one temperature that is heated and cools.

use super::cooling::{CoolingSurface, HeldSurface, Speeds};
use super::property::{SpecificEnergy, SpecificHeat};
use crate::calc::method::Method;
use crate::calc::quantity::{Si, ThermodynamicTemperature};

crate::method_sheet! {
    LUMPED_DISC {
        id: "heat.lumped_disc",
        name: "Disc temperature under heating and cooling",
        equation: "m c(T) dT/dt = P(t) - h(T) A (T - T_a)",
        symbols: [("m", "heated mass", "kg"), ("c", "specific heat", "J/(kg.K)"), ("P", "heat into the disc", "W"),
            ("h", "heat transfer coefficient", "W/(m2.K)"), ("A", "cooling area", "m2"), ("T, T_a", "bulk and ambient temperature", "K")],
        valid: "One temperature over the disc; below 10000 K.",
        accuracy: "Marched in steps of at most 3 K with exponentials, extrapolated; exact for constant properties and power; without cooling exact by enthalpy.",
        source: "Lumped capacity (Newton's law of cooling); repeated stops in closed form in Shigley, Mechanical Engineering Design, equations 16-59 to 16-61 (from memory).",
        provenance: Memory,
        worked: "60 K a stop, time constant 700 s, every 120 s: after the ninth stop 299.441188 K above ambient, at last 380.856723 K.",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&LUMPED_DISC];

/// The most that the temperature may change in one step, K.
const STEP: f64 = 3.0;
/// A step that changes the temperature by less than this is exact enough at once, K.
const NARROW: f64 = 0.25;
/// A step in which the heat capacity changes by more than this share goes by its mean over the step.
const UNEVEN: f64 = 0.02;
/// Trials for that mean: over the jump of iron at 600 °C each takes off four fifths of the error.
const MEAN_STEPS: usize = 12;
/// Parts of a stretch of changing power, at least, where its highest temperature is looked for.
const SUMMIT_PARTS: f64 = 16.0;
/// More steps than any way from 0 K to the ceiling and back takes; a fence against endless work.
const MOST_STEPS: usize = 5000;
/// Where following a disc ends, K: no disc is solid there.
const CEILING: f64 = 10_000.0;

/// A disc of one temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LumpedDisc<'a> {
    /// Mass that takes up the heat, kg.
    pub mass: f64,
    /// Of the disc's material.
    pub specific_heat: &'a SpecificHeat,
    /// How it cools; none: it does not.
    pub cooling: Option<CoolingSurface>,
}

/// Heating and speeds over a stretch of time: power linear from start to end, speeds held.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stretch {
    /// s.
    pub duration: f64,
    /// Heat into the disc at the start, W.
    pub power_at_start: f64,
    /// Heat into the disc at the end, W.
    pub power_at_end: f64,
    /// Of the disc and its vehicle.
    pub speeds: Speeds,
}

impl LumpedDisc<'_> {
    /// The temperature after a stretch, K, and the highest on the way. None beyond the ceiling.
    #[must_use]
    pub fn after(&self, temperature: f64, stretch: &Stretch) -> Option<(f64, f64)> {
        let mut highest = temperature;
        let look = |part: &Part<'_>| highest = highest.max(self.summit(part));
        let end = self.follow(temperature, stretch, SUMMIT_PARTS, look)?;
        Some((end, highest.max(end)))
    }

    /// The temperature after a stretch, K. None beyond the ceiling.
    #[must_use]
    pub fn end(&self, temperature: f64, stretch: &Stretch) -> Option<f64> {
        self.follow(temperature, stretch, 1.0, |_| {})
    }

    /// The temperature after a stretch, K, of a disc that cools by `surface`. None beyond the ceiling.
    #[must_use]
    pub fn end_on(
        &self,
        surface: &HeldSurface<'_>,
        temperature: f64,
        stretch: &Stretch,
    ) -> Option<f64> {
        self.with_cooling(temperature, (stretch, 1.0), surface, |_| {})
    }

    fn follow(
        &self,
        start: f64,
        stretch: &Stretch,
        parts: f64,
        look: impl FnMut(&Part<'_>),
    ) -> Option<f64> {
        match &self.cooling {
            None => {
                let energy =
                    0.5 * (stretch.power_at_start + stretch.power_at_end) * stretch.duration;
                self.without_cooling(start, energy)
            }
            Some(surface) => {
                let held = HeldSurface::new(*surface, stretch.speeds);
                self.with_cooling(start, (stretch, parts), &held, look)
            }
        }
    }

    fn without_cooling(&self, temperature: f64, energy: f64) -> Option<f64> {
        let start = ThermodynamicTemperature::from_si(temperature);
        let heat = SpecificEnergy::from_si(energy / self.mass);
        self.specific_heat.temperature_after(start, heat).map(Si::si)
    }

    fn with_cooling(
        &self,
        start: f64,
        (stretch, parts): (&Stretch, f64),
        surface: &HeldSurface<'_>,
        mut look: impl FnMut(&Part<'_>),
    ) -> Option<f64> {
        let (mut time, mut temperature) = (0.0, start);
        for _ in 0..MOST_STEPS {
            if stretch.duration - time <= 0.0 {
                return Some(temperature);
            }
            let mut part = Part {
                stretch,
                surface,
                time,
                start: temperature,
                conductance: surface.conductance(temperature),
                capacity: self.capacity(temperature),
                duration: 0.0,
                end: 0.0,
            };
            part.duration = Self::step(&part, parts);
            part.end = self.refined(&part);
            if part.end.is_nan() || part.end >= CEILING {
                return None;
            }
            look(&part);
            temperature = part.end;
            let is_last = part.duration >= stretch.duration - time;
            time = if is_last { stretch.duration } else { time + part.duration };
        }
        None
    }

    /// A step in which the temperature changes by about [`STEP`] at most, and in which it can follow the power.
    fn step(part: &Part<'_>, parts: f64) -> f64 {
        let stretch = part.stretch;
        let rest = stretch.duration - part.time;
        let time_constant = part.capacity / part.conductance;
        let equilibrium = part.surface.ambient() + power_at(stretch, part.time) / part.conductance;
        let gap = equilibrium - part.start;
        // −ln(1 − x) is never less than x: often that is enough to know that the rest is the shorter.
        let is_near = gap.abs() * rest <= STEP * time_constant;
        let by_gap = if gap.abs() > STEP && !is_near {
            -time_constant * libm::log1p(-STEP / gap.abs())
        } else {
            rest
        };
        let shift = (stretch.power_at_end - stretch.power_at_start).abs() / part.conductance;
        if shift <= STEP {
            return rest.min(by_gap);
        }
        // The equilibrium moves: by no more than a step at a time, or slowly against the time constant. And where
        // it is asked for, the highest temperature, where heating has fallen to what cooling takes, must not be
        // stepped over.
        let by_power = (stretch.duration * STEP / shift).max(0.25 * time_constant);
        rest.min(by_gap).min(by_power).min(stretch.duration / parts)
    }

    fn capacity(&self, temperature: f64) -> f64 {
        self.mass * self.specific_heat.at(ThermodynamicTemperature::from_si(temperature)).si()
    }

    /// The highest temperature of a part that first warms and then cools, its rate taken as linear.
    fn summit(&self, part: &Part<'_>) -> f64 {
        let rate = |temperature: f64, conductance: f64, capacity: f64, time: f64| {
            let loss = conductance * (temperature - part.surface.ambient());
            (power_at(part.stretch, time) - loss) / capacity
        };
        let first = rate(part.start, part.conductance, part.capacity, part.time);
        let highest = part.start.max(part.end);
        if first.is_nan() || first <= 0.0 {
            return highest;
        }
        let at_end = part.surface.conductance(part.end);
        let last = rate(part.end, at_end, self.capacity(part.end), part.time + part.duration);
        let turns = last < 0.0;
        let summit = part.start + 0.5 * first * first * part.duration / (first - last);
        if turns { highest.max(summit) } else { highest }
    }

    /// A step by the midpoint rule; a wide one also in two halves, extrapolated to take its error off.
    fn refined(&self, part: &Part<'_>) -> f64 {
        let power = power_at(part.stretch, part.time + 0.5 * part.duration);
        let towards =
            |at: f64| part.towards(power, part.surface.conductance(at), self.capacity(at));
        let step = |start: f64, first: &Relaxation, time: f64| {
            let half = first.after(start, 0.5 * time);
            let way = towards(half);
            let end = way.after(start, time);
            if is_even([first.capacity, way.capacity, self.capacity(end)]) {
                end
            } else {
                self.by_enthalpy(start, end, &way, time)
            }
        };
        let (start, time) = (part.start, part.duration);
        let first = part.towards(power, part.conductance, part.capacity);
        let whole = step(start, &first, time);
        if (whole - start).abs() <= NARROW {
            return whole;
        }
        let half = step(start, &first, 0.5 * time);
        let halves = step(half, &towards(half), 0.5 * time);
        halves + (halves - whole) / 3.0
    }

    /// The end of a step over a jump or peak of the specific heat: with the mean heat capacity between start and end.
    fn by_enthalpy(&self, start: f64, guess: f64, way: &Relaxation, time: f64) -> f64 {
        let from = ThermodynamicTemperature::from_si(start);
        let mut end = guess;
        for _ in 0..MEAN_STEPS {
            let rise = end - start;
            let to = ThermodynamicTemperature::from_si(end);
            let capacity = self.mass * self.specific_heat.enthalpy(from, to).si() / rise;
            if rise.abs() < 1e-6 || capacity.is_nan() {
                return end;
            }
            end = Relaxation { capacity, ..*way }.after(start, time);
        }
        end
    }
}

/// A part of a stretch: what it starts from and what it comes to.
struct Part<'a> {
    stretch: &'a Stretch,
    surface: &'a HeldSurface<'a>,
    /// From the start of the stretch, s.
    time: f64,
    /// K.
    start: f64,
    /// At the start, W/K.
    conductance: f64,
    /// At the start, J/K.
    capacity: f64,
    /// s.
    duration: f64,
    /// K.
    end: f64,
}

impl Part<'_> {
    /// Where the temperature tends to, with power and properties held.
    fn towards(&self, power: f64, conductance: f64, capacity: f64) -> Relaxation {
        Relaxation {
            equilibrium: self.surface.ambient() + power / conductance,
            conductance,
            capacity,
        }
    }
}

/// The exact way of a temperature with properties held.
struct Relaxation {
    equilibrium: f64,
    conductance: f64,
    capacity: f64,
}

impl Relaxation {
    fn after(&self, start: f64, time: f64) -> f64 {
        start + (self.equilibrium - start) * approach(time * self.conductance / self.capacity)
    }
}

/// Whether some heat capacities are nearly the same.
fn is_even(capacities: [f64; 3]) -> bool {
    let least = capacities.into_iter().fold(f64::INFINITY, f64::min);
    let most = capacities.into_iter().fold(0.0, f64::max);
    most <= least * (1.0 + UNEVEN)
}

/// 1 − e^−x for x of 0 or more; where it is small, by its series, exact to rounding and quicker.
fn approach(x: f64) -> f64 {
    const SMALL: f64 = 1.0 / 128.0;
    if x > SMALL {
        return -libm::expm1(-x);
    }
    // Seven terms: the next is below 2^-49/8! of the first.
    let nested = |inner: f64, order: f64| 1.0 - x * (1.0 / order) * inner;
    x * [7.0, 6.0, 5.0, 4.0, 3.0, 2.0].into_iter().fold(1.0, nested)
}

fn power_at(stretch: &Stretch, time: f64) -> f64 {
    let share = if stretch.duration > 0.0 { time / stretch.duration } else { 0.0 };
    stretch.power_at_start + (stretch.power_at_end - stretch.power_at_start) * share
}
