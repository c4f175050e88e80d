//! The highest surface temperature over the whole history of a flux.
//!
//! The flux never being negative, no point is warmer than the heated face. So after the flux has ended
//! the face only cools, and the peak lies between the first node and the last. As long as the flux has
//! never fallen the face only warms, so the peak lies where it falls first, or later.

use super::flux::{PiecewiseLinearFlux, Segment};
use super::rise::{Course, Slab};
use crate::calc::quantity::{Si, TemperatureInterval, Time};

/// Parts into which all straight parts of the flux are cut together for a first look.
const CUTS: usize = 256;

/// Parts into which each is cut, at least and at most.
const FEWEST_CUTS: usize = 4;
const MOST_CUTS: usize = 16;

/// How far beside a summit to look whether it rises on, as a share of the way to the next place. A peak
/// nearer than that stands out by less than rounding.
const BESIDE: f64 = 1e-6;

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
        let mut course = Course::new(self, flux.changes(), 1.0);
        let diffusion_time = self.diffusion_time().si();
        let cuts = (CUTS / flux.changes().len()).clamp(FEWEST_CUTS, MOST_CUTS);
        let mut best = (0.0, 0.0);
        for segment in after_growth(flux) {
            course.advance(segment.from.0);
            let places = places(&segment, cuts, diffusion_time).into_iter();
            let looks: Vec<Look> = places.map(|at| (at, course.rise(at))).collect();
            for_summits(&looks, |beside, top| {
                // Told from here on, what happened long before costs little.
                let mut course = course;
                course.advance(beside.0.min(top.0));
                best = higher(best, summit(&|time| course.rise(time), beside, top));
            });
        }
        let end = flux.end().si();
        let best = higher(best, (end, course.rise(end)));
        (Time::from_si(best.0), TemperatureInterval::from_si(best.1))
    }
}

/// A time and the rise there.
type Look = (f64, f64);

/// The straight parts from where the flux falls first.
fn after_growth(flux: &PiecewiseLinearFlux) -> impl Iterator<Item = Segment> + '_ {
    let mut highest = 0.0;
    flux.segments().skip_while(move |segment| {
        let grows = highest <= segment.from.1 && segment.from.1 <= segment.to.1;
        highest = segment.to.1;
        grows
    })
}

fn higher(one: Look, other: Look) -> Look {
    if other.1 > one.1 { other } else { one }
}

/// Both ends of a straight part and places in it: even, and close to its ends.
fn places(segment: &Segment, cuts: usize, diffusion_time: f64) -> Vec<f64> {
    let (from, to) = (segment.from.0, segment.to.0);
    let width = (to - from) / to_f64(cuts);
    let even = (0..cuts).map(|cut| from + width * to_f64(cut));
    let close = CLOSE.into_iter().map(|share| share * diffusion_time);
    let near_ends = close.flat_map(|distance| [from + distance, to - distance]);
    let inside = near_ends.filter(|place| *place > from && *place < to);
    let mut places: Vec<f64> = even.chain(inside).chain([to]).collect();
    places.sort_by(f64::total_cmp);
    places.dedup();
    places
}

#[expect(clippy::cast_precision_loss, reason = "counts of cuts stay far below 2^53")]
const fn to_f64(count: usize) -> f64 {
    count as f64
}

/// Calls `visit` with each neighbor of every place that is not lower than its neighbors, and that place.
fn for_summits(looks: &[Look], mut visit: impl FnMut(Look, Look)) {
    let before = std::iter::once(None).chain(looks.iter().copied().map(Some));
    let after = looks.iter().copied().skip(1).map(Some).chain([None]);
    for ((before, look), after) in before.zip(looks.iter().copied()).zip(after) {
        let highest = |neighbor: Option<Look>| neighbor.is_none_or(|other| other.1 <= look.1);
        if highest(before) && highest(after) {
            for neighbor in [before, after].into_iter().flatten() {
                visit(neighbor, look);
            }
        }
    }
}

/// The highest place between the highest one looked at, `top`, and a neighbor.
fn summit(rise: &impl Fn(f64) -> f64, neighbor: Look, top: Look) -> Look {
    let beside = rise(top.0 + BESIDE * (neighbor.0 - top.0));
    if beside > top.1 { higher(top, narrowed(rise, neighbor, top)) } else { top }
}

/// The highest place between two, by golden sections.
fn narrowed(rise: &impl Fn(f64) -> f64, from: Look, to: Look) -> Look {
    let inner = |from: f64, to: f64| {
        let part = SMALLER_PART * (to - from);
        (from + part, to - part)
    };
    let (mut low, mut high) = (from.0.min(to.0), from.0.max(to.0));
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
    higher(left, right)
}
