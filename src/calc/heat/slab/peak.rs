//! The highest surface temperature over the whole history of a flux.
//!
//! The flux never being negative, no point is warmer than the heated face. So after the flux has ended
//! the face only cools, and the peak lies between the first node and the last.

use super::flux::{PiecewiseLinearFlux, Segment};
use super::rise::Slab;
use crate::calc::quantity::{Si, TemperatureInterval, Time};

/// Parts into which each straight part of the flux is cut for a first look.
const CUTS: u32 = 16;

/// Times after and before a node at which a peak may hide, in diffusion times.
const CLOSE: [f64; 5] = [0.01, 0.03, 0.1, 0.33, 1.0];

/// Narrowings of a bracket; each leaves 0.618 of it, all together 4e-9, which is as fine as a flat
/// maximum can be told by its height.
const NARROWINGS: u32 = 40;

/// The smaller part of the golden section.
const SMALLER_PART: f64 = 0.381_966_011_250_105_15;

impl Slab {
    /// When the heated face is hottest, and how much warmer than at the start.
    ///
    /// Looks at every node and at places between, then narrows the summits of each straight part, its
    /// ends included: two summits may stand close on either side of a node. The work is bounded.
    /// The time is exact to about 1e-8 of the distance between the places, the rise to rounding.
    #[must_use]
    pub fn surface_peak(&self, flux: &PiecewiseLinearFlux) -> (Time, TemperatureInterval) {
        let rise = |time: f64| self.rise(flux.changes(), time, 1.0);
        let diffusion_time = self.diffusion_time().si();
        let mut best = (0.0, 0.0);
        for segment in flux.segments() {
            let places = places(&segment, diffusion_time).into_iter();
            let looks: Vec<Look> = places.map(|at| (at, rise(at))).collect();
            for_summits(&looks, |from, to| best = higher(best, narrowed(&rise, from, to)));
        }
        (Time::from_si(best.0), TemperatureInterval::from_si(best.1))
    }
}

/// A time and the rise there.
type Look = (f64, f64);

fn higher(one: Look, other: Look) -> Look {
    if other.1 > one.1 { other } else { one }
}

/// Both ends of a straight part and places in it: even, and close to its ends.
fn places(segment: &Segment, diffusion_time: f64) -> Vec<f64> {
    let (from, to) = (segment.from.0, segment.to.0);
    let even = (0..CUTS).map(|cut| from + (to - from) * f64::from(cut) / f64::from(CUTS));
    let close = CLOSE.into_iter().map(|share| share * diffusion_time);
    let near_ends = close.flat_map(|distance| [from + distance, to - distance]);
    let inside = near_ends.filter(|place| *place > from && *place < to);
    let mut places: Vec<f64> = even.chain(inside).chain([to]).collect();
    places.sort_by(f64::total_cmp);
    places.dedup();
    places
}

/// Calls `visit` with both sides of every place that is not lower than its neighbors.
fn for_summits(looks: &[Look], mut visit: impl FnMut(Look, Look)) {
    let before = std::iter::once(None).chain(looks.iter().copied().map(Some));
    let after = looks.iter().copied().skip(1).map(Some).chain([None]);
    for ((before, look), after) in before.zip(looks.iter().copied()).zip(after) {
        let highest = |neighbor: Option<Look>| neighbor.is_none_or(|other| other.1 <= look.1);
        if highest(before) && highest(after) {
            if let Some(before) = before {
                visit(before, look);
            }
            if let Some(after) = after {
                visit(look, after);
            }
        }
    }
}

/// The highest place between two, by golden sections; the ends count too.
fn narrowed(rise: &impl Fn(f64) -> f64, from: Look, to: Look) -> Look {
    let best = higher(from, to);
    let inner = |from: f64, to: f64| {
        let part = SMALLER_PART * (to - from);
        (from + part, to - part)
    };
    let (mut low, mut high) = (from.0, to.0);
    let (left, right) = inner(low, high);
    let (mut left, mut right) = ((left, rise(left)), (right, rise(right)));
    for _ in 0..NARROWINGS {
        if left.1 >= right.1 {
            (high, right) = (right.0, left);
            let place = inner(low, high).0;
            left = (place, rise(place));
        } else {
            (low, left) = (left.0, right);
            let place = inner(low, high).1;
            right = (place, rise(place));
        }
    }
    higher(best, higher(left, right))
}
