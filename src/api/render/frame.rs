//! What all charts have in common: numbers in the units of the answer, and the words that travel with it.

use super::chart::{Band, Key, Limit, Style, Tone, Weight};
use super::words;
use crate::api::measure::ReportUnits;
use crate::api::record::{Record, Warning, WarningSeverity};
use crate::calc::brake::Brake;
use crate::calc::fitted::{Fitted, Place};
use crate::calc::friction::FrictionCase;
use crate::calc::machine::Machine;
use crate::calc::motion::{Coordinate, Demand, Path, Phase};
use crate::calc::quantity::{Dimension, Si, ThermodynamicTemperature};

/// Numbers in the units of an answer.
#[derive(Debug, Clone, Copy)]
pub struct Figures(pub ReportUnits);

impl Figures {
    /// The symbol of the unit.
    #[must_use]
    pub fn unit(self, dimension: Dimension) -> &'static str {
        self.0.unit_of(dimension).symbol
    }

    /// The number of units.
    #[must_use]
    pub fn number(self, dimension: Dimension, si: f64) -> f64 {
        self.0.unit_of(dimension).of_si(si)
    }

    /// The number in words, with its unit.
    #[must_use]
    pub fn text(self, dimension: Dimension, si: f64) -> String {
        format!("{} {}", words::number(self.number(dimension, si)), self.unit(dimension))
    }

    /// The name of an axis.
    #[must_use]
    pub fn axis(self, name: &str, dimension: Dimension) -> String {
        format!("{name}, {}", self.unit(dimension))
    }
}

impl Tone {
    /// The look of a friction case.
    #[must_use]
    pub const fn of(case: FrictionCase) -> Self {
        match case {
            FrictionCase::Low => Self::Low,
            FrictionCase::Nominal => Self::Nominal,
            FrictionCase::High => Self::High,
        }
    }
}

/// A line of the key for a friction case.
#[must_use]
pub fn case_key(case: FrictionCase, says: &str) -> Key {
    let style = Style { tone: Tone::of(case), weight: Weight::Heavy };
    Key { style, is_marked: true, label: format!("{} friction{says}", case.as_str()) }
}

/// The lines of the key that tell surface and bulk apart.
#[must_use]
pub fn temperature_keys() -> [Key; 2] {
    [(Weight::Heavy, "surface"), (Weight::Light, "bulk")].map(|(weight, label)| Key {
        style: Style { tone: Tone::Nominal, weight },
        is_marked: false,
        label: label.to_owned(),
    })
}

/// What is asked of a stop, in words.
#[must_use]
pub fn stop_in_words(figures: Figures, machine: &Machine, demand: &Demand) -> String {
    let speed = match machine.coordinate() {
        Coordinate::Way => Dimension::Speed,
        Coordinate::Angle => Dimension::RotationalSpeed,
    };
    let initial = figures.text(speed, demand.initial_speed);
    if demand.final_speed > 0.0 {
        format!("braking from {initial} to {}", figures.text(speed, demand.final_speed))
    } else {
        format!("stop from {initial}")
    }
}

/// The text with a capital letter in front.
#[must_use]
pub fn capital(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}

/// The lines below the title: the caller's reference, if there is one.
#[must_use]
pub fn subtitle(record: &Record) -> Vec<String> {
    const MOST_LETTERS: usize = 100;
    record.reference.iter().map(|reference| words::shortened(reference, MOST_LETTERS)).collect()
}

/// The lines at the bottom: how far to trust the chart, and which calculation it shows.
#[must_use]
pub fn footer(record: &Record, warnings: &[Warning]) -> Vec<String> {
    let exceeded =
        warnings.iter().filter(|warning| warning.severity == WarningSeverity::Exceeded).count();
    let mut lines = Vec::new();
    if !warnings.is_empty() {
        let (total, plural) = (warnings.len(), if warnings.len() == 1 { "" } else { "s" });
        let limits = match exceeded {
            0 => "no limit exceeded".to_owned(),
            1 => "1 limit exceeded".to_owned(),
            more => format!("{more} limits exceeded"),
        };
        lines.push(format!("{total} warning{plural}, {limits}: see the answer as JSON."));
    }
    lines.push(
        "A calculation for selecting a brake, not a proof: confirm it by test on the machine."
            .to_owned(),
    );
    lines.push(format!(
        "Brakewright {}, input {}",
        record.service_version,
        record.input_digest.chars().take(23).collect::<String>()
    ));
    lines
}

/// A name for the elements of a chart: what it shows and of which input.
#[must_use]
pub fn id(kind: &str, record: &Record) -> String {
    let digest = record.input_digest.trim_start_matches("sha256:");
    format!("{kind}-{}", digest.chars().take(12).collect::<String>())
}

/// The phases of stops that share their delays. Times in s.
#[must_use]
pub fn phases(paths: &[&Path]) -> Vec<Band> {
    let mut bands: Vec<(Phase, f64, f64)> = Vec::with_capacity(4);
    for path in paths {
        let mut time = 0.0;
        for phase in path.phases() {
            let (from, to) = (time, time + phase.time);
            time = to;
            match bands.iter_mut().find(|band| band.0 == phase.phase) {
                Some(band) => band.2 = band.2.max(to),
                None => bands.push((phase.phase, from, to)),
            }
        }
    }
    bands.retain(|band| band.2 > band.1);
    bands.sort_by_key(|band| band.0);
    let named =
        |(phase, from, to): (Phase, f64, f64)| Band { label: name(phase).to_owned(), from, to };
    bands.into_iter().map(named).collect()
}

const fn name(phase: Phase) -> &'static str {
    match phase {
        Phase::Reaction => "reaction",
        Phase::Dead => "dead time",
        Phase::BuildUp => "build-up",
        Phase::Full => "full braking",
    }
}

/// Times of a stop for a curve: even ones and the ends of the phases.
#[must_use]
pub fn times(path: &Path) -> Vec<f64> {
    const EVEN: u32 = 160;
    let end = path.end().time;
    let even = (0..=EVEN).map(|index| end * f64::from(index) / f64::from(EVEN));
    let mut time = 0.0;
    let ends = path.phases().into_iter().map(|phase| {
        time += phase.time;
        time
    });
    let mut times: Vec<f64> = even.chain(ends.filter(|time| *time < end)).collect();
    times.sort_by(f64::total_cmp);
    times
}

/// The limits of a brake's temperatures.
#[must_use]
pub fn temperature_limits(figures: Figures, brake: &Brake) -> Vec<Limit> {
    let lining = brake.parts().lining.parts();
    let disc = brake.parts().disc.as_ref().and_then(|disc| disc.material().max_temperature());
    let limits = [
        ("lining peak (surface)", lining.max_temperature_peak.map(|limit| limit.value)),
        ("lining continuous (bulk)", lining.max_temperature_continuous.map(|limit| limit.value)),
        ("disc (bulk)", disc),
    ];
    let limit = |(label, value): (&str, Option<ThermodynamicTemperature>)| {
        let value = figures.number(Dimension::Temperature, value?.si());
        Some(Limit { label: label.to_owned(), value })
    };
    limits.into_iter().filter_map(limit).collect()
}

/// The name of a fitted entry, with what is shown of it.
#[must_use]
pub fn entry_heading(fitted: &[Fitted], index: usize, shown: &str) -> String {
    let place = fitted.get(index).and_then(|entry| entry.parts().place);
    let place = match place {
        Some(Place::Front) => ", front",
        Some(Place::Rear) => ", rear",
        Some(Place::All) | None => "",
    };
    if fitted.len() > 1 { format!("Entry {index}{place}: {shown}") } else { shown.to_owned() }
}

/// The highest of some values with the friction case that it belongs to, in words.
#[must_use]
pub fn highest(figures: Figures, name: &str, peaks: &[(FrictionCase, f64)]) -> Option<String> {
    let highest = peaks.iter().max_by(|one, other| one.1.total_cmp(&other.1))?;
    let case = if peaks.len() > 1 {
        format!(" at {} friction", highest.0.as_str())
    } else {
        String::new()
    };
    Some(format!("{name} {}{case}", figures.text(Dimension::Temperature, highest.1)))
}
