//! The chart of a duty: temperatures and friction of each brake over time, with limits and where they are passed.

use super::chart::{Chart, Key, Mark, Panel, Series, Style, Tone, Weight};
use super::frame::{self, Figures};
use crate::api::v1::duty_cycle::{DutyCycleAnswer, DutyCycleCase, DutyFailure, FirstFailure};
use crate::calc::brake::Brake;
use crate::calc::case::duty_cycle::{
    CaseOutcome, Course, Input, Moment, Outcome, Sample, TrackedOutcome,
};
use crate::calc::finding::CheckCode;
use crate::calc::friction::FrictionCase;
use crate::calc::quantity::Dimension;

/// Points of a curve if the request asks for no trace.
pub const POINTS: usize = 500;

/// The chart of an answer whose outcome holds its courses.
#[must_use]
pub fn chart(
    figures: Figures,
    input: &Input,
    outcome: &Outcome,
    answer: &DutyCycleAnswer,
) -> Chart {
    let view = View { figures, input, cases: &outcome.friction_cases };
    let panels = view.panels();
    let key = view.key(answer, &panels);
    let lines = key.iter().map(|key| key.label.clone());
    let said = panels.iter().flat_map(|panel| {
        let notes = panel.message.iter().chain(&panel.notes);
        notes.map(|note| format!("{}: {note}", panel.heading)).collect::<Vec<_>>()
    });
    let duration = outcome.friction_cases.iter().map(|case| case.duration).fold(0.0, f64::max);
    Chart {
        id: frame::id("duty-cycle", &answer.record),
        title: format!("Duty of {}", figures.text(Dimension::Time, duration)),
        subtitle: frame::subtitle(&answer.record),
        description: format!(
            "Temperature and friction of each brake over time. {}.",
            lines.chain(said).collect::<Vec<_>>().join(". ").trim_end_matches('.')
        ),
        key,
        panels,
        footer: frame::footer(&answer.record, &answer.warnings),
    }
}

struct View<'a> {
    figures: Figures,
    input: &'a Input,
    cases: &'a [CaseOutcome],
}

impl View<'_> {
    fn key(&self, answer: &DutyCycleAnswer, panels: &[Panel]) -> Vec<Key> {
        let told = answer.results.friction_cases.iter();
        let line = |(case, told): (&CaseOutcome, &DutyCycleCase)| {
            let says = told.first_failure.as_ref().map_or_else(String::new, failure);
            frame::case_key(case.friction_case, &says)
        };
        let mut key: Vec<Key> = self.cases.iter().zip(told).map(line).collect();
        if panels.iter().any(|panel| panel.message.is_none()) {
            key.extend(frame::temperature_keys());
        }
        key
    }

    fn panels(&self) -> Vec<Panel> {
        let entries = self.input.fitted.iter().enumerate();
        let panels: Vec<Panel> = entries
            .filter_map(|(index, entry)| Some(self.entry(index, entry.brake()?)))
            .flatten()
            .collect();
        if panels.is_empty() {
            return vec![Panel::saying(
                "No temperatures: no entry has a disc whose heated mass is known.",
            )];
        }
        panels
    }

    /// The panels of one entry: temperature, and friction if it changes. None if nothing is followed.
    fn entry(&self, index: usize, brake: &Brake) -> Vec<Panel> {
        let is_followed =
            self.samples(index, |sample| sample.surface).any(|curve| !curve.1.is_empty());
        if !is_followed {
            return Vec::new();
        }
        let mut panels = vec![self.temperature(index, brake)];
        if self.lowest(index).iter().any(|lowest| lowest.1 < 1.0) {
            panels.push(self.friction(index));
        }
        panels
    }

    /// A column of each case over time, without what is not followed.
    fn samples(
        &self,
        index: usize,
        value: fn(&Sample) -> Option<f64>,
    ) -> impl Iterator<Item = (FrictionCase, Vec<(f64, f64)>)> {
        self.cases.iter().map(move |case| {
            let moments = case.course.iter().flat_map(Course::moments);
            let point = |moment: &Moment| {
                let time = self.figures.number(Dimension::Time, moment.time);
                Some((time, value(moment.fitted.get(index)?)?))
            };
            (case.friction_case, moments.filter_map(point).collect())
        })
    }

    fn panel(&self, index: usize, shown: &str) -> Panel {
        let longest = self.cases.iter().map(|case| case.duration).fold(0.0, f64::max);
        Panel {
            heading: frame::capital(&frame::entry_heading(&self.input.fitted, index, shown)),
            x_label: self.figures.axis("Time from the start", Dimension::Time),
            x_end: self.figures.number(Dimension::Time, longest),
            ..Panel::empty()
        }
    }

    fn temperature(&self, index: usize, brake: &Brake) -> Panel {
        let shown = self.figures.axis("temperature of the disc", Dimension::Temperature);
        let surface =
            self.samples(index, |sample| sample.surface).map(|curve| (curve, Weight::Heavy));
        let bulk = self.samples(index, |sample| sample.bulk).map(|curve| (curve, Weight::Light));
        let series = |((case, points), weight): ((FrictionCase, Vec<(f64, f64)>), Weight)| {
            let in_units =
                |(time, kelvins)| (time, self.figures.number(Dimension::Temperature, kelvins));
            let points: Vec<_> = points.into_iter().map(in_units).collect();
            let marked = points.iter().copied().max_by(|one, other| one.1.total_cmp(&other.1));
            Series { style: Style { tone: Tone::of(case), weight }, points, marked }
        };
        let (marks, passed) = self.crossings(index);
        let peaks = |value: fn(&TrackedOutcome) -> Option<f64>| {
            let peak =
                |case: &CaseOutcome| Some((case.friction_case, value(case.fitted.get(index)?)?));
            self.cases.iter().filter_map(peak).collect::<Vec<_>>()
        };
        let highest = [
            frame::highest(self.figures, "Highest surface:", &peaks(|brake| brake.peak_surface)),
            frame::highest(self.figures, "Highest bulk:", &peaks(|brake| brake.peak_bulk)),
        ];
        Panel {
            notes: highest.into_iter().flatten().chain(passed).collect(),
            series: bulk.chain(surface).map(series).collect(),
            limits: frame::temperature_limits(self.figures, brake),
            marks,
            ..self.panel(index, &shown)
        }
    }

    /// Where the limits of temperature are first passed, in whichever case that is earliest.
    fn crossings(&self, index: usize) -> (Vec<Mark>, Vec<String>) {
        let limits = [
            (CheckCode::SurfaceTemperature, "surface limit"),
            (CheckCode::DiscBulkTemperature, "bulk limit"),
        ];
        let first = |(code, name): (CheckCode, &str)| {
            let (case, time) = self
                .cases
                .iter()
                .filter_map(|case| Some((case.friction_case, crossing(case, index, code)?)))
                .min_by(|one, other| one.1.total_cmp(&other.1))?;
            let mark = Mark {
                label: format!("{name} passed"),
                x: self.figures.number(Dimension::Time, time),
            };
            let time = self.figures.text(Dimension::Time, time);
            let case = case.as_str();
            Some((
                mark,
                format!("{} first passed at {time}, {case} friction", frame::capital(name)),
            ))
        };
        limits.into_iter().filter_map(first).unzip()
    }

    fn lowest(&self, index: usize) -> Vec<(FrictionCase, f64)> {
        let lowest =
            |case: &CaseOutcome| Some((case.friction_case, case.fitted.get(index)?.lowest_factor));
        self.cases.iter().filter_map(lowest).collect()
    }

    fn friction(&self, index: usize) -> Panel {
        let series = |(case, points): (FrictionCase, Vec<(f64, f64)>)| {
            let marked = points.iter().copied().min_by(|one, other| one.1.total_cmp(&other.1));
            let style = Style { tone: Tone::of(case), weight: Weight::Heavy };
            Series { style, points, marked }
        };
        let lowest = self.lowest(index).into_iter().min_by(|one, other| one.1.total_cmp(&other.1));
        let note = |(case, factor): (FrictionCase, f64)| {
            format!(
                "Lowest while braking: {} at {} friction",
                super::words::number(factor),
                case.as_str()
            )
        };
        Panel {
            notes: lowest.map(note).into_iter().collect(),
            from_zero: true,
            series: self.samples(index, |sample| Some(sample.factor)).map(series).collect(),
            ..self.panel(index, "friction over that of the data sheet")
        }
    }
}

/// When a limit of an entry is first passed, s.
fn crossing(case: &CaseOutcome, index: usize, code: CheckCode) -> Option<f64> {
    let tracked = case.fitted.get(index)?;
    let mut followed = tracked.bounds.iter().zip(&tracked.crossings);
    let (_, crossing) = followed.find(|(bound, _)| bound.code == code)?;
    crossing.map(|crossing| crossing.time)
}

fn failure(failure: &FirstFailure) -> String {
    let why = match failure.reason {
        DutyFailure::FinalSpeedNotReached => "the final speed is not reached",
        DutyFailure::SpeedNotHeld => "the speed is not held",
        DutyFailure::TooHot => "the disc gets too hot to follow",
    };
    format!(": ends in event {}, repeat {}: {why}", failure.event_index, failure.repeat)
}
