//! Repeated stops: the bulk temperature of a disc that is heated once an interval and cools all the time.

use roots::{SimpleConvergency, find_root_brent};

use super::cooling::Speeds;
use super::lumped::{LumpedDisc, Stretch};
use crate::calc::method::Method;

crate::method_sheet! {
    REPEATED_STOPS {
        id: "heat.repeated_stops",
        name: "Bulk temperature under repeated stops",
        equation: "one interval: heated by g P(t) and cooled at the mean speed of the stop during braking, then cooled at (v_0 + v_1)/2; steady when an interval ends where it began",
        symbols: [("g", "disc's share of the heat", "1"), ("P", "brake power on the disc", "W"), ("v_0, v_1", "initial and final speed", "m/s")],
        valid: "Every interval the same; steady values below 3000 K only.",
        accuracy: "The steady values are a fixed point to 1e-6 K; they tend to the closed form for instant heating and constant properties.",
        source: "Newcomb, J. Mech. Eng. Sci. 2 (1960) for repeated stops (abstract read); closed form in Shigley, Mechanical Engineering Design (from memory).",
        provenance: Memory,
        worked: "60 K a stop, time constant 700 s, every 120 s: 380.856723 K above ambient at last.",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&REPEATED_STOPS];

/// Above this temperature no steady state is sought, K.
const HOTTEST_STEADY: f64 = 3000.0;
/// Stops that are followed one by one at most.
pub const MOST_STOPS: u32 = 10_000;

/// One interval between the starts of two stops.
#[derive(Debug, Clone, PartialEq)]
pub struct Interval {
    /// Heat into the disc over time from the first torque on, W over s, straight between the nodes.
    pub heating: Vec<(f64, f64)>,
    /// Speeds during braking.
    pub braking_speeds: Speeds,
    /// From the end of braking to the next first torque, s.
    pub rest: f64,
    /// Speeds meanwhile.
    pub resting_speeds: Speeds,
}

/// The highest temperature of an interval and the one at its end, K.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Swing {
    /// Highest.
    pub peak: f64,
    /// When the next braking starts.
    pub trough: f64,
}

/// What many stops come to.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Series {
    /// The last of the stops followed, if a count was asked for.
    pub after_count: Option<Swing>,
    /// The temperature before that stop, K.
    pub last_start: Option<f64>,
    /// The stop in which the limit is first reached; none if it never is, or not within those followed.
    pub stops_to_limit: Option<u32>,
}

impl Interval {
    /// One interval from `start`, K. None beyond any temperature that is followed.
    #[must_use]
    pub fn swing(&self, disc: &LumpedDisc<'_>, start: f64) -> Option<Swing> {
        let (mut temperature, mut peak) = (start, start);
        for (from, to) in self.heating.iter().zip(self.heating.iter().skip(1)) {
            let stretch = Stretch {
                duration: to.0 - from.0,
                power_at_start: from.1,
                power_at_end: to.1,
                speeds: self.braking_speeds,
            };
            let highest;
            (temperature, highest) = disc.after(temperature, &stretch)?;
            peak = peak.max(highest);
        }
        let rest = Stretch {
            duration: self.rest,
            power_at_start: 0.0,
            power_at_end: 0.0,
            speeds: self.resting_speeds,
        };
        let (trough, highest) = disc.after(temperature, &rest)?;
        Some(Swing { peak: peak.max(highest), trough })
    }

    /// The interval that ends where it began. None without cooling, or if it would lie above 3000 K.
    #[must_use]
    pub fn steady(&self, disc: &LumpedDisc<'_>) -> Option<Swing> {
        let ambient = disc.cooling.as_ref()?.ambient();
        // Beyond what is followed the end counts as hotter than any start.
        let gain = |start: f64| self.swing(disc, start).map_or(1e6, |swing| swing.trough - start);
        if gain(HOTTEST_STEADY) >= 0.0 {
            return None;
        }
        let mut convergence = SimpleConvergency { eps: 1e-7, max_iter: 200 };
        let trough = if gain(ambient) <= 0.0 {
            ambient
        } else {
            find_root_brent(ambient, HOTTEST_STEADY, gain, &mut convergence).ok()?
        };
        let swing = self.swing(disc, trough)?;
        (swing.peak <= HOTTEST_STEADY).then_some(swing)
    }

    /// Follows stops from `start`, K: up to `count`, and up to the one that reaches `limit`, `most` of them.
    #[must_use]
    pub fn series(
        &self,
        disc: &LumpedDisc<'_>,
        start: f64,
        count: Option<u32>,
        limit: Option<f64>,
        most: u32,
    ) -> Series {
        let mut series = Series { after_count: None, last_start: None, stops_to_limit: None };
        let mut wants_limit = limit.is_some();
        let mut temperature = start;
        for stop in 1..=most {
            let wants_count = count.is_some_and(|count| stop <= count);
            if !wants_count && !wants_limit {
                break;
            }
            let Some(swing) = self.swing(disc, temperature) else { break };
            if wants_limit && limit.is_some_and(|limit| swing.peak >= limit) {
                series.stops_to_limit = Some(stop);
                wants_limit = false;
            }
            // Nothing changes any more: every later stop is the same.
            let is_steady = (swing.trough - temperature).abs() < 1e-9;
            if wants_count && (is_steady || count == Some(stop)) {
                (series.after_count, series.last_start) = (Some(swing), Some(temperature));
            }
            if is_steady {
                break;
            }
            temperature = swing.trough;
        }
        series
    }
}
