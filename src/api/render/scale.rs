//! Axes with round divisions.

use std::ops::Range;

use plotters::coord::ranged1d::{KeyPointHint, NoDefaultFormatting, Ranged, ValueFormatter};

/// A straight axis. Its divisions are found once, and their number is bounded whatever the range.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Scale {
    low: f64,
    high: f64,
    step: f64,
    divisions: Vec<f64>,
}

impl Scale {
    /// An axis from `low` to `high` with about `count` divisions.
    pub(super) fn new(low: f64, high: f64, count: u32) -> Self {
        // Numbers that differ in their last digits alone cannot be told apart on an axis.
        let least = 1e-6 * low.abs().max(high.abs());
        let high = if high - low > least { high } else { low + least.max(1.0) };
        let step = round_step((high - low) / f64::from(count.max(1)));
        let first = libm::ceil(low / step - 1e-9);
        let divisions = (0..=3 * count)
            .map(|index| (first + f64::from(index)) * step)
            .take_while(|&division| division <= high + 1e-9 * step)
            .collect();
        Self { low, high, step, divisions }
    }

    /// The same axis, widened to whole divisions.
    pub(super) fn widened(low: f64, high: f64, count: u32) -> Self {
        let step = Self::new(low, high, count).step;
        let (low, high) = (libm::floor(low / step + 1e-9), libm::ceil(high / step - 1e-9));
        Self::new(low * step, high * step, count)
    }

    /// Where a value lies between two pixels.
    pub(super) fn place(&self, value: f64, (from, to): (i32, i32)) -> i32 {
        let share = (value - self.low) / (self.high - self.low);
        pixel(f64::from(from) + share * (f64::from(to) - f64::from(from)))
    }

    /// Lowest and highest value.
    pub(super) const fn ends(&self) -> (f64, f64) {
        (self.low, self.high)
    }

    /// The divisions and their words.
    pub(super) fn labels(&self) -> impl Iterator<Item = (f64, String)> + '_ {
        self.divisions.iter().map(|division| (*division, self.label(*division)))
    }

    fn label(&self, value: f64) -> String {
        let largest = self.low.abs().max(self.high.abs());
        if largest >= 1e6 || self.step < 1e-4 {
            return super::words::number(value);
        }
        let decimals =
            (0..4).find(|&decimals| is_whole(self.step * libm::exp10(f64::from(decimals))));
        let decimals = usize::try_from(decimals.unwrap_or(4)).unwrap_or(4);
        // A division at zero may come out as a tiny number, or as a negative zero.
        let value = if value.abs() < 1e-9 * self.step { 0.0 } else { value };
        format!("{value:.decimals$}")
    }
}

fn is_whole(value: f64) -> bool {
    (value - libm::round(value)).abs() < 1e-6
}

/// The least of 1, 2, 5 times a power of ten that is not below `span`.
fn round_step(span: f64) -> f64 {
    let power = libm::exp10(libm::floor(libm::log10(span)));
    let steps = [1.0, 2.0, 5.0].map(|digit| digit * power);
    steps.into_iter().find(|step| *step >= span * (1.0 - 1e-9)).unwrap_or(10.0 * power)
}

/// The pixel that a place on the canvas falls on. Places far outside stay at its rim.
#[expect(clippy::cast_possible_truncation, reason = "bounded just before")]
pub(super) fn pixel(place: f64) -> i32 {
    libm::round(place.clamp(-1e6, 1e6)) as i32
}

impl Ranged for Scale {
    type FormatOption = NoDefaultFormatting;
    type ValueType = f64;

    fn map(&self, value: &f64, limit: (i32, i32)) -> i32 {
        self.place(*value, limit)
    }

    fn key_points<Hint: KeyPointHint>(&self, _: Hint) -> Vec<f64> {
        self.divisions.clone()
    }

    fn range(&self) -> Range<f64> {
        self.low..self.high
    }
}

impl ValueFormatter<f64> for Scale {
    fn format_ext(&self, value: &f64) -> String {
        self.label(*value)
    }
}
