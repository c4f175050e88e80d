//! The chart of a stop: speed and distance over time, with the phases.

use super::chart::{Chart, Key, Panel, Series, Style, Tone, Weight};
use super::frame::{self, Figures};
use crate::api::v1::stopping::{NotReachedReason, StoppingAnswer, StoppingCase};
use crate::calc::case::stopping::{CaseOutcome, Input, Outcome};
use crate::calc::motion::{Coordinate, Ending, Path, Point};
use crate::calc::quantity::Dimension;

/// The chart of an answer.
#[must_use]
pub fn chart(figures: Figures, input: &Input, outcome: &Outcome, answer: &StoppingAnswer) -> Chart {
    let view = View::new(figures, input, outcome);
    let cases: Vec<_> = outcome.friction_cases.iter().zip(&answer.results.friction_cases).collect();
    let sentences = cases.iter().map(|(case, told)| {
        format!("At {} friction {}.", case.friction_case.as_str(), view.says(case, told))
    });
    let stop = frame::stop_in_words(figures, &input.machine, &input.demand);
    Chart {
        id: frame::id("stopping", &answer.record),
        description: format!(
            "Speed and {} over time. {}",
            view.way_name(),
            sentences.collect::<Vec<_>>().join(" ")
        ),
        title: frame::capital(&stop),
        subtitle: frame::subtitle(&answer.record),
        key: view.key(&cases),
        panels: view.panels(&cases),
        footer: frame::footer(&answer.record, &answer.warnings),
    }
}

struct View<'a> {
    figures: Figures,
    input: &'a Input,
    speed: Dimension,
    way: Dimension,
    /// The cases whose final speed is reached.
    reached: Vec<&'a CaseOutcome>,
}

impl<'a> View<'a> {
    fn new(figures: Figures, input: &'a Input, outcome: &'a Outcome) -> Self {
        let (speed, way) = match input.machine.coordinate() {
            Coordinate::Way => (Dimension::Speed, Dimension::Travel),
            Coordinate::Angle => (Dimension::RotationalSpeed, Dimension::Angle),
        };
        let reached = outcome
            .friction_cases
            .iter()
            .filter(|case| matches!(case.stop.ending, Ending::Reached(_)));
        Self { figures, input, speed, way, reached: reached.collect() }
    }

    fn way_name(&self) -> &'static str {
        if self.way == Dimension::Angle { "angle" } else { "distance" }
    }

    fn says(&self, case: &CaseOutcome, told: &StoppingCase) -> String {
        let end = case.stop.path.end();
        match case.stop.ending {
            Ending::Reached(run_back) => {
                let way = self.figures.text(self.way, end.distance);
                let time = self.figures.text(Dimension::Time, end.time);
                let after = if run_back.is_some() { ", then runs back" } else { "" };
                format!("{way} in {time}{after}")
            }
            Ending::NotReached { .. } => {
                format!("does not {}: {}", self.aim(), told.reason.map_or("", why))
            }
        }
    }

    fn aim(&self) -> &'static str {
        if self.input.demand.final_speed > 0.0 { "reach the final speed" } else { "stop" }
    }

    fn key(&self, cases: &[(&CaseOutcome, &StoppingCase)]) -> Vec<Key> {
        let line = |(case, told): &(&CaseOutcome, &StoppingCase)| {
            frame::case_key(case.friction_case, &format!(": {}", self.says(case, told)))
        };
        // Without curves there is nothing to explain; the message says it all.
        if self.reached.is_empty() { Vec::new() } else { cases.iter().map(line).collect() }
    }

    fn panels(&self, cases: &[(&CaseOutcome, &StoppingCase)]) -> Vec<Panel> {
        if let Some(message) = self.message(cases) {
            return vec![Panel::saying(message)];
        }
        let seconds = |time| self.figures.number(Dimension::Time, time);
        let paths: Vec<&Path> = self.reached.iter().map(|case| &case.stop.path).collect();
        let mut bands = frame::phases(&paths);
        for band in &mut bands {
            (band.from, band.to) = (seconds(band.from), seconds(band.to));
        }
        let longest = paths.iter().fold(0.0_f64, |longest, path| longest.max(path.end().time));
        let panel = |heading: &str, dimension, value: fn(&Point) -> f64| Panel {
            heading: self.figures.axis(heading, dimension),
            x_label: self.figures.axis("Time from the start", Dimension::Time),
            x_end: seconds(longest),
            from_zero: true,
            series: self.reached.iter().map(|case| self.series(case, dimension, value)).collect(),
            bands: bands.clone(),
            ..Panel::empty()
        };
        let speed = panel("Speed", self.speed, |point| point.speed);
        let way = frame::capital(self.way_name());
        vec![speed, panel(&way, self.way, |point| point.distance)]
    }

    fn series(&self, case: &CaseOutcome, dimension: Dimension, value: fn(&Point) -> f64) -> Series {
        let path = &case.stop.path;
        let place = |point: Point| {
            let time = self.figures.number(Dimension::Time, point.time);
            (time, self.figures.number(dimension, value(&point)))
        };
        Series {
            style: Style { tone: Tone::of(case.friction_case), weight: Weight::Heavy },
            points: frame::times(path).into_iter().map(|time| place(path.at(time))).collect(),
            marked: Some(place(path.end())),
        }
    }

    /// What is said if there is nothing to draw.
    fn message(&self, cases: &[(&CaseOutcome, &StoppingCase)]) -> Option<String> {
        let mut reasons: Vec<&str> =
            cases.iter().filter_map(|(_, told)| told.reason).map(why).collect();
        reasons.dedup();
        let message = format!("The machine does not {}: {}.", self.aim(), reasons.join("; "));
        self.reached.is_empty().then_some(message)
    }
}

const fn why(reason: NotReachedReason) -> &'static str {
    match reason {
        NotReachedReason::BrakeForceTooLow => "the brake force is too low",
        NotReachedReason::AdhesionTooLow => "the adhesion is too low",
        NotReachedReason::RearWheelLifts => "the rear wheel would lift",
    }
}
