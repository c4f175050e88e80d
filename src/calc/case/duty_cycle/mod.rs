//! A duty over time: temperature, friction and stopping distance through any sequence of events.

mod braked;
mod cold;
mod course;
pub mod procedure;
mod run;
mod thermal;
mod track;

pub use course::{Course, Moment, Sample};
pub use track::{Crossing, TrackedOutcome};

use std::collections::BTreeSet;

use super::stopping;
use crate::calc::brake::Spot;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::{Caution, Finding, Notice, Remarks, Severity, Subject};
use crate::calc::fitted::{Fitted, Pressed, friction_cases, press};
use crate::calc::friction::FrictionCase;
use crate::calc::heat::air::AirTable;
use crate::calc::heat::slab::SLAB_VOLUMES;
use crate::calc::lining::FADE;
use crate::calc::machine::{Machine, Situation};
use crate::calc::method::Method;
use crate::calc::motion::{Demand, PHASES};
use crate::calc::quantity::{Amount, Dimension, Si, ThermodynamicTemperature};

crate::method_sheet! {
    DUTY_CYCLE {
        id: "duty.coupled",
        name: "Duty with friction coupled to temperature",
        equation: "m_e dv/dt = F_out - sum f_i(T_i) B_i; T_i surface of each disc: bulk by its heat balance, surface above bulk by the slab",
        symbols: [("f_i", "friction factor of a lining at the surface temperature of its disc", "1"), ("B_i", "brake force at the cold coefficient", "N or N.m"),
            ("T_i", "surface temperature", "K"), ("m_e", "effective mass or inertia", "kg or kg.m2"), ("F_out", "outside forces", "N or N.m")],
        valid: "Discs do not heat each other; driving up between events takes no time and makes no heat.",
        accuracy: "Second order in time; distance within 3e-4 and temperature rise within 6e-4 of an outside solver on eleven test duties. Without fade the stops are those of `stopping`.",
        source: "Newton's second law and the lumped disc with the slab series, coupled step by step.",
        provenance: Seen,
        worked: "Without fade one stop equals `stopping` and `stop-energy`.",
    }
}

/// The sheets of this folder.
pub static METHODS: &[&Method] = &[&DUTY_CYCLE];

/// Events of one repeat at most.
pub const MOST_EVENTS: usize = 1000;
/// Events in all repeats at most.
pub const MOST_EVENTS_IN_ALL: usize = 20_000;

/// Events in all repeats times fitted entries at most: each entry is followed on its own.
pub const MOST_FOLLOWED: usize = 20_000;

/// Something that happens in a duty. Speeds are SI along the coordinate.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Event {
    /// A stop or a slowing down.
    Stop {
        /// What surrounds it.
        situation: Situation,
        /// What it is asked to do.
        demand: Demand,
    },
    /// Moving at a speed without braking.
    Run {
        /// Speed.
        speed: f64,
        /// s.
        time: f64,
    },
    /// Held at a speed by the brakes.
    Descent {
        /// What surrounds it.
        situation: Situation,
        /// Speed.
        speed: f64,
        /// Along the coordinate.
        distance: f64,
    },
    /// Moving without braking until the next stop is due, counted from the start of the last one.
    Space {
        /// When it is due.
        gap: Gap,
        /// Mean speed.
        speed: f64,
    },
    /// At rest.
    Stand {
        /// s.
        time: f64,
    },
}

/// What lies between the starts of two stops.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Gap {
    /// s.
    Time(f64),
    /// Along the coordinate.
    Distance(f64),
}

impl Event {
    /// Speed at the start and at the end.
    #[must_use]
    pub const fn speeds(&self) -> (f64, f64) {
        match self {
            Self::Stop { demand, .. } => (demand.initial_speed, demand.final_speed),
            Self::Run { speed, .. } | Self::Descent { speed, .. } | Self::Space { speed, .. } => {
                (*speed, *speed)
            }
            Self::Stand { .. } => (0.0, 0.0),
        }
    }
}

/// A machine, its brakes and what they go through.
#[derive(Debug, Clone, PartialEq)]
pub struct Input {
    /// What is braked.
    pub machine: Machine,
    /// Its brakes.
    pub fitted: Vec<Fitted>,
    /// What happens, in order.
    pub events: Vec<Event>,
    /// For each of them, the event of the request that it came from.
    pub origins: Vec<usize>,
    /// How often, 1 or more.
    pub repeats: u32,
    /// Of the air.
    pub ambient_temperature: ThermodynamicTemperature,
    /// Of the discs at the start.
    pub start_temperature: ThermodynamicTemperature,
    /// Most points of a course over time, if one is asked for.
    pub points: Option<usize>,
}

/// What a duty comes to.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// The results, once per friction case.
    pub friction_cases: Vec<CaseOutcome>,
    /// What presses each entry.
    pub pressed: Vec<Option<Pressed>>,
    /// What is to be said about the results.
    pub remarks: Remarks,
}

/// A place in a duty.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Place {
    /// Which event of the list.
    pub event_index: usize,
    /// In which repeat, from 1.
    pub repeat: u32,
}

/// The longest stop of a duty.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LongestStop {
    /// Where.
    pub place: Place,
    /// Along the coordinate, reaction included.
    pub distance: f64,
    /// s, reaction included.
    pub time: f64,
}

/// Why an event could not be done.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum FailureReason {
    /// The final speed of a stop was not reached.
    FinalSpeedNotReached,
    /// The speed of a descent could not be held.
    SpeedNotHeld,
    /// A disc left the range of temperatures that is followed.
    TooHot,
}

/// An event that could not be done; the duty ends there.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Failure {
    /// Where.
    pub place: Place,
    /// Why.
    pub reason: FailureReason,
}

/// What a duty comes to at one friction.
#[derive(Debug, Clone)]
pub struct CaseOutcome {
    /// Which.
    pub friction_case: FrictionCase,
    /// Time in all, s; up to the failure if there is one.
    pub duration: f64,
    /// Each entry, for one brake.
    pub fitted: Vec<TrackedOutcome>,
    /// The longest stop, if there was one.
    pub longest_stop: Option<LongestStop>,
    /// The event that could not be done.
    pub first_failure: Option<Failure>,
    /// Whether a stop ends at rest where the brakes cannot keep the machine from moving the other way.
    pub is_let_go: bool,
    /// Temperatures over time, if asked for.
    pub course: Option<Course>,
}

/// Follows a duty.
///
/// # Errors
/// All that is impossible about the input.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let mut faults = input.faults();
    let pressed = faults.part("fitted", press(&input.fitted));
    let Some(pressed) = pressed.filter(|_| faults.is_empty()) else { return Err(faults) };
    evaluate_pressed(input, pressed)
}

/// Follows a duty without faults whose brakes are pressed as said.
///
/// # Errors
/// A result beyond what numbers can hold.
pub fn evaluate_pressed(input: &Input, pressed: Vec<Option<Pressed>>) -> Result<Outcome, Faults> {
    let cases = friction_cases(&input.fitted).iter();
    let air = AirTable::new();
    let friction_cases: Vec<CaseOutcome> = cases
        .map(|&case| run::run(input, &pressed, case, &air))
        .collect::<Option<_>>()
        .ok_or_else(|| {
            let mut faults = Faults::new();
            faults.add(
                "",
                FaultCode::OutOfRange,
                "the duty leaves the range that numbers can follow",
            );
            faults
        })?;
    let remarks = remarks(input, &friction_cases);
    Ok(Outcome { friction_cases, pressed, remarks })
}

impl Input {
    fn faults(&self) -> Faults {
        let mut faults = Faults::new();
        let holds = (1..=MOST_EVENTS).contains(&self.events.len());
        faults.require(holds, "events", FaultCode::WrongCount, "must come to 1 to 1000 events");
        let repeats = usize::try_from(self.repeats).unwrap_or(usize::MAX);
        faults.require(repeats >= 1, "repeats", FaultCode::OutOfRange, "must be 1 or more");
        let holds = repeats.saturating_mul(self.events.len()) <= MOST_EVENTS_IN_ALL;
        faults.require(
            holds,
            "repeats",
            FaultCode::OutOfRange,
            "events times repeats must not exceed 20000",
        );
        let followed = repeats.saturating_mul(self.events.len()).saturating_mul(self.fitted.len());
        // Too many events, or too many entries, are told as such.
        let holds = followed <= MOST_FOLLOWED || !holds || self.fitted.len() > 100;
        faults.require(
            holds,
            "repeats",
            FaultCode::OutOfRange,
            "events times repeats times entries of fitted must not exceed 20000",
        );
        let holds = (1..=100).contains(&self.fitted.len());
        faults.require(holds, "fitted", FaultCode::WrongCount, "must have 1 to 100 entries");
        faults.not_negative("ambient_temperature", self.ambient_temperature);
        faults.not_negative("start_temperature", self.start_temperature);
        stopping::place_faults(&self.machine, &self.fitted, &mut faults);
        self.continuity_faults(&mut faults);
        faults
    }

    /// The event of the request that an event came from.
    #[must_use]
    pub fn origin(&self, index: usize) -> usize {
        self.origins.get(index).copied().unwrap_or(index)
    }

    /// Speed may jump up between events, but it falls only in a stop.
    fn continuity_faults(&self, faults: &mut Faults) {
        let ends = self.events.iter().map(|event| event.speeds().1);
        // Before the first event comes the last one, if there are repeats.
        let before_first = if self.repeats > 1 {
            self.events.last().map_or(0.0, |last| last.speeds().1)
        } else {
            0.0
        };
        let before = std::iter::once(before_first).chain(ends);
        for (index, (event, before)) in self.events.iter().zip(before).enumerate() {
            let start = event.speeds().0;
            let holds = start >= before * (1.0 - 1e-12);
            let member = format!("events/{}", self.origin(index));
            let detail = "starts slower than the event before ended: speed falls only in a stop";
            faults.require(holds, &member, FaultCode::SpeedNotContinuous, detail);
        }
    }
}

fn remarks(input: &Input, cases: &[CaseOutcome]) -> Remarks {
    let mut remarks = Remarks::new();
    remarks.method(input.machine.method());
    remarks.method(&PHASES);
    remarks.method(&DUTY_CYCLE);
    remarks.method(&SLAB_VOLUMES);
    remarks.caution(Caution::HotSurfaces);
    if matches!(input.machine, Machine::Hoist(_)) {
        remarks.caution(Caution::SuspendedLoad);
    }
    note_entries(&mut remarks, input);
    let mut failing = BTreeSet::new();
    for case in cases {
        for (fitted_index, (tracked, entry)) in case.fitted.iter().zip(&input.fitted).enumerate() {
            let spot =
                Spot { fitted_index: Some(fitted_index), friction_case: Some(case.friction_case) };
            for (bound, highest) in tracked.bounds.iter().zip(&tracked.highest) {
                bound.hold(&mut remarks, *highest, spot, input.ambient_temperature.si());
            }
            note_cooling(&mut remarks, tracked, entry, spot);
        }
        if case.is_let_go {
            let detail = "a stop of the duty comes to rest, and the brakes cannot keep the machine from moving the other way";
            let subject = Subject::Request("events");
            let notice = Notice::RunsBackBeforeBrake;
            let finding = Finding::notice(notice, Severity::Exceeded, subject, detail);
            remarks.find_once(finding.in_case(case.friction_case));
        }
        if case.first_failure.is_some() && failing.insert(case.friction_case) {
            let detail = "an event of the duty cannot be done: see first_failure";
            let finding = Finding::notice(
                Notice::DutyNotCompleted,
                Severity::Exceeded,
                Subject::Request("events"),
                detail,
            );
            remarks.find_once(finding.in_case(case.friction_case));
        }
    }
    remarks
}

fn note_entries(remarks: &mut Remarks, input: &Input) {
    for (index, entry) in input.fitted.iter().enumerate() {
        let Some(brake) = entry.brake() else { continue };
        brake.remark(remarks, Some(index));
        let subject = |input| Subject::Brake { fitted_index: Some(index), input };
        let mut info = |code, input, detail: &str| {
            remarks.notice(code, Severity::Info, subject(input), detail);
        };
        match &brake.parts().disc {
            None => info(
                Notice::DiscNotGiven,
                "disc",
                "no disc is given: temperatures were not followed",
            ),
            Some(_) if crate::calc::heat::disc_heat::heated_ring(brake).is_none() => {
                let detail = "a ventilated disc needs the mass of its rubbed ring: temperatures were not followed";
                info(Notice::DiscMassNotGiven, "disc/mass", detail);
            }
            Some(disc) if disc.cooling().is_none() => {
                let detail = "the disc's cooling is not given: the disc was taken to lose no heat";
                info(Notice::CoolingNotGiven, "disc", detail);
            }
            Some(_) => {}
        }
        if brake.parts().lining.parts().fade.is_empty() {
            let detail =
                "no fade points are given: friction was taken not to change with temperature";
            info(Notice::FadeNotGiven, "lining", detail);
        } else {
            remarks.method(&FADE);
        }
    }
}

fn note_cooling(remarks: &mut Remarks, tracked: &TrackedOutcome, entry: &Fitted, spot: Spot) {
    let Some((surface, coefficient)) = &tracked.cooling else { return };
    for method in surface.methods() {
        remarks.method(method);
    }
    if surface.is_estimated() && entry.brake().is_some() {
        let subject =
            Subject::Brake { fitted_index: spot.fitted_index, input: "disc/cooling/model" };
        let detail = "the cooling comes from a correlation, not from a measurement on this machine; the coefficient at the hottest moment is given";
        let mut finding =
            Finding::notice(Notice::CoolingEstimated, Severity::Info, subject, detail);
        finding.actual =
            Some(Amount { dimension: Dimension::HeatTransferCoefficient, si: *coefficient });
        finding.friction_case = spot.friction_case;
        remarks.find_once(finding);
    }
}
