//! The chart of a stop's heat: bulk and surface temperature of each disc over time, with the limits.

use super::chart::{Chart, Key, Panel, Series, Style, Tone, Weight};
use super::frame::{self, Figures};
use crate::api::v1::stop_energy::StopEnergyAnswer;
use crate::calc::brake::Brake;
use crate::calc::case::stop_energy::{self, Input, Outcome};
use crate::calc::friction::FrictionCase;
use crate::calc::heat::disc_heat::Warmth;
use crate::calc::motion::Path;
use crate::calc::quantity::{Dimension, Si};

/// Parts of a curve.
const PARTS: u32 = 60;

/// The chart of an answer.
#[must_use]
pub fn chart(
    figures: Figures,
    input: &Input,
    outcome: &Outcome,
    answer: &StopEnergyAnswer,
) -> Chart {
    let view = View { figures, input, outcome };
    let panels = view.panels();
    let sentences = panels.iter().map(|panel| {
        let says = panel.message.iter().chain(&panel.notes).cloned().collect::<Vec<_>>();
        let lead = if panel.heading.is_empty() { "" } else { ": " };
        format!("{}{lead}{}", panel.heading, says.join(". ").trim_end_matches('.'))
    });
    let stop = frame::stop_in_words(figures, &input.stop.machine, &input.stop.demand);
    Chart {
        id: frame::id("stop-energy", &answer.record),
        title: format!("Disc temperatures, {stop}"),
        subtitle: frame::subtitle(&answer.record),
        description: format!(
            "Bulk and surface temperature of each disc over time. {}.",
            sentences.collect::<Vec<_>>().join(". ")
        ),
        key: if panels.iter().all(|panel| panel.message.is_some()) {
            Vec::new()
        } else {
            view.key()
        },
        panels,
        footer: frame::footer(&answer.record, &answer.warnings),
    }
}

struct View<'a> {
    figures: Figures,
    input: &'a Input,
    outcome: &'a Outcome,
}

/// How the disc of an entry warms at one friction.
struct Curve {
    case: FrictionCase,
    /// When the first torque acts, s.
    begin: f64,
    course: Vec<Warmth>,
}

impl View<'_> {
    fn key(&self) -> Vec<Key> {
        let mut key: Vec<Key> = Vec::new();
        for case in &self.outcome.friction_cases {
            let says =
                if case.energies.is_some() { "" } else { ": the final speed is not reached" };
            key.push(frame::case_key(case.friction_case, says));
        }
        key.extend(frame::temperature_keys());
        key
    }

    fn panels(&self) -> Vec<Panel> {
        let entries = self.input.stop.fitted.iter().enumerate();
        let discs = entries
            .filter_map(|(index, entry)| {
                let brake = entry.brake()?;
                let curves = self.curves(index);
                (!curves.is_empty()).then(|| self.panel(index, brake, &curves))
            })
            .collect::<Vec<_>>();
        if discs.is_empty() { vec![self.empty()] } else { discs }
    }

    fn curves(&self, entry: usize) -> Vec<Curve> {
        let cases = self.outcome.stop.friction_cases.iter().enumerate();
        cases
            .filter_map(|(index, case)| {
                let course = stop_energy::course(self.input, self.outcome, (index, entry), PARTS)?;
                let begin = case.stop.path.first_torque().time;
                Some(Curve { case: case.friction_case, begin, course })
            })
            .collect()
    }

    fn seconds(&self, time: f64) -> f64 {
        self.figures.number(Dimension::Time, time)
    }

    fn panel(&self, index: usize, brake: &Brake, curves: &[Curve]) -> Panel {
        let shown = self.figures.axis("temperature of the disc", Dimension::Temperature);
        let paths = self.paths();
        let mut bands = frame::phases(&paths);
        for band in &mut bands {
            (band.from, band.to) = (self.seconds(band.from), self.seconds(band.to));
        }
        let longest = paths.iter().fold(0.0_f64, |longest, path| longest.max(path.end().time));
        Panel {
            heading: frame::capital(&frame::entry_heading(&self.input.stop.fitted, index, &shown)),
            notes: self.notes(index, curves),
            x_label: self.figures.axis("Time from the start", Dimension::Time),
            x_end: self.seconds(longest),
            // The surface is drawn last: it lies above the bulk.
            series: [Weight::Light, Weight::Heavy]
                .into_iter()
                .flat_map(|weight| curves.iter().map(move |curve| self.series(curve, weight)))
                .collect(),
            limits: frame::temperature_limits(self.figures, brake),
            bands,
            ..Panel::empty()
        }
    }

    fn paths(&self) -> Vec<&Path> {
        let cases = self.outcome.friction_cases.iter().zip(&self.outcome.stop.friction_cases);
        cases.filter(|(case, _)| case.energies.is_some()).map(|(_, stop)| &stop.stop.path).collect()
    }

    fn series(&self, curve: &Curve, weight: Weight) -> Series {
        let temperature = |kelvins| self.figures.number(Dimension::Temperature, kelvins);
        let point = |warmth: &Warmth| {
            let kelvins = match weight {
                Weight::Heavy => warmth.surface.si(),
                Weight::Light => warmth.bulk.si(),
            };
            (self.seconds(curve.begin + warmth.time.si()), temperature(kelvins))
        };
        let start = (0.0, temperature(self.input.start_temperature.si()));
        let points: Vec<_> = std::iter::once(start).chain(curve.course.iter().map(point)).collect();
        let marked = points.iter().copied().max_by(|one, other| one.1.total_cmp(&other.1));
        Series { style: Style { tone: Tone::of(curve.case), weight }, points, marked }
    }

    fn notes(&self, index: usize, curves: &[Curve]) -> Vec<String> {
        let peaks = |value: fn(&Warmth) -> f64| {
            let peak = |curve: &Curve| {
                (curve.case, curve.course.iter().map(value).fold(0.0_f64, f64::max))
            };
            curves.iter().map(peak).collect::<Vec<_>>()
        };
        let surface = peaks(|warmth| warmth.surface.si());
        let bulk = peaks(|warmth| warmth.bulk.si());
        let highest = [
            frame::highest(self.figures, "Highest surface:", &surface),
            frame::highest(self.figures, "Highest bulk:", &bulk),
        ];
        highest.into_iter().flatten().chain(self.repeated(index)).collect()
    }

    /// What repeated stops come to, which the curves of one stop do not show.
    fn repeated(&self, index: usize) -> Option<String> {
        let energies = self.outcome.friction_cases.iter().filter_map(|case| case.energies.as_ref());
        let brakes = energies.filter_map(|energies| energies.fitted.get(index)?.brake);
        let repeated: Vec<_> = brakes.filter_map(|brake| brake.repeated).collect();
        if repeated.iter().any(|repeated| repeated.steady.is_none()) {
            return Some("Repeated without end: no steady state".to_owned());
        }
        let steady = repeated.iter().filter_map(|repeated| repeated.steady);
        let hottest = steady.max_by(|one, other| one.peak.total_cmp(&other.peak))?;
        let peak = self.figures.text(Dimension::Temperature, hottest.peak);
        Some(format!("Repeated without end: bulk up to {peak}"))
    }

    /// What is said if there is nothing to draw.
    fn empty(&self) -> Panel {
        let is_reached = self.outcome.friction_cases.iter().any(|case| case.energies.is_some());
        let message = if is_reached {
            "No temperatures: no entry has a disc whose heated mass is known."
        } else {
            "No temperatures: the final speed is not reached."
        };
        Panel::saying(message)
    }
}
