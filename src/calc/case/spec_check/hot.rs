//! How much heat changes the friction of the linings, as the duties make them.

use super::Input;
use super::acting::Acting;
use super::duty::{Duty, FittedNumbers};
use super::judge::Judgement;
use crate::calc::quantity::{Si, ThermodynamicTemperature};

/// How hot each fitted entry gets in the duties that heat the brakes.
#[derive(Debug, Clone)]
pub(super) struct Heat {
    /// For each entry, K: without end where a duty heats it and nobody can tell how far; none where no duty does.
    peaks: Vec<Option<f64>>,
}

impl Heat {
    /// The highest bulk temperatures of the duties that heat.
    pub(super) fn of(input: &Input, heating: &[Option<Judgement>]) -> Self {
        let peak = |entry: usize| {
            let found = heating.iter().flatten().flat_map(|judgement| &judgement.numbers.fitted);
            let found = found.filter(|one| one.fitted_index == entry);
            // A disc whose temperature is not known may be as hot as it likes.
            found.map(|one| one.peak_bulk.unwrap_or(f64::INFINITY)).reduce(f64::max)
        };
        Self { peaks: (0..input.fitted.len()).map(peak).collect() }
    }

    /// The friction factors to judge a duty with beside the cold ones: the lowest and the highest that each lining comes
    /// to on the way to its peak, the heat before the duty's own start included. None where heat changes nothing.
    pub(super) fn factors(&self, input: &Input, duty: &Duty) -> Vec<Vec<f64>> {
        let ambient = input.ambient_temperature;
        let start = Some(duty.start_temperature.si()).filter(|start| *start > ambient.si());
        let range = |(entry, peak): (&crate::calc::fitted::Fitted, &Option<f64>)| {
            let peak = [*peak, start].into_iter().flatten().reduce(f64::max);
            let (Some(brake), Some(peak)) = (entry.brake(), peak) else { return (1.0, 1.0) };
            brake.parts().lining.fade_range(ambient, ThermodynamicTemperature::from_si(peak))
        };
        let ranges: Vec<(f64, f64)> = input.fitted.iter().zip(&self.peaks).map(range).collect();
        let lowest: Vec<f64> = ranges.iter().map(|(low, _)| *low).collect();
        let highest: Vec<f64> = ranges.iter().map(|(_, high)| *high).collect();
        let mut sets = vec![lowest];
        if sets.first() != Some(&highest) {
            sets.push(highest);
        }
        sets
    }
}

/// Notes the lowest factor that a duty was judged with.
pub(super) fn note(numbers: &mut [FittedNumbers], acting: &Acting, lowest: Option<&Vec<f64>>) {
    for index in &acting.indices {
        let factor = lowest.and_then(|factors| factors.get(*index).copied());
        let Some(factor) = factor.filter(|factor| factor.to_bits() != 1.0_f64.to_bits()) else {
            continue;
        };
        if let Some(known) = numbers.iter_mut().find(|known| known.fitted_index == *index) {
            known.hot_factor = Some(factor);
        }
    }
}
