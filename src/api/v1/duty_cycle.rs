//! `POST /v1/duty-cycle`: temperature, friction and stopping distance through a duty.

use axum::body::Body;
use axum::http::Response as Reply;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::block::event::Event;
use super::block::fitted::Fitted;
use super::block::machine::Machine;
use super::block::stop::stood_in;
use super::block::temperatures;
use crate::api::accept::Negotiated;
use crate::api::extract::Json;
use crate::api::heavy::off_thread;
use crate::api::measure::{
    Angle, AnyAmount, Energy, Finite, Length, ReportUnits, Temperature, Time,
};
use crate::api::parse::{At, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{self, CautionText, CheckName, FrictionCase, Record, Recorded, Warning};
use crate::api::render::duty_cycle::{POINTS, chart};
use crate::api::render::frame::Figures;
use crate::calc::case::duty_cycle::{
    self, CaseOutcome, Course, FailureReason, Input, Outcome, TrackedOutcome,
};
use crate::calc::fault::FaultCode;
use crate::calc::finding::{Caution, Notice, Remarks, Severity, Subject};
use crate::calc::method::Provenance;
use crate::calc::motion::Coordinate;
use crate::calc::quantity::{Amount, Dimension};
use crate::data::procedures;

/// A machine, its brakes and what they go through.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DutyCycleRequest {
    /// The caller's own reference, echoed in `record.ref` and left out of the digest.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Units of the answer, `si` if left out.
    #[schema(nullable = false)]
    pub report_units: Option<ReportUnits>,
    /// What is braked.
    pub machine: Machine,
    /// Its brakes.
    #[schema(min_items = 1, max_items = 100)]
    pub fitted: Vec<Fitted>,
    /// What happens, in order. Speed may jump up between events without time; it falls only in a stop.
    #[schema(min_items = 1, max_items = 1000)]
    pub events: Vec<Event>,
    /// How often the events happen, 1 if left out; events times repeats must not exceed 20000, and times entries of `fitted` 20000.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub repeats: Option<u32>,
    /// Temperature of the air, 20 degC if left out.
    #[schema(nullable = false)]
    pub ambient_temperature: Option<Temperature>,
    /// Temperature of the discs at the start; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
    /// Asks for temperatures over time.
    #[schema(nullable = false)]
    pub trace: Option<CourseRequest>,
}

/// Asks for temperatures over time.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CourseRequest {
    /// Points at most, 2 to 2000, spread over the duty; where they are thinned out, the hotter ones are kept.
    #[serde(deserialize_with = "crate::api::count::required")]
    pub points: u32,
}

/// What the duty comes to.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DutyCycleAnswer {
    /// The results.
    pub results: DutyCycleResults,
    /// Remarks on the results.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: Record,
}

/// What the duty comes to, once per friction case.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DutyCycleResults {
    /// The cases.
    pub friction_cases: Vec<DutyCycleCase>,
}

/// What the duty comes to at one friction.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DutyCycleCase {
    /// Which.
    pub friction_case: FrictionCase,
    /// Whether every event could be done.
    pub completed: bool,
    /// Time in all; up to the failure if there is one.
    pub duration: Time,
    /// One brake of each fitted entry.
    pub fitted: Vec<FittedDuty>,
    /// The longest stop.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub longest_stop: Option<LongestStop>,
    /// The event that could not be done; the duty ends there.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub first_failure: Option<FirstFailure>,
    /// Temperatures over time.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub trace: Option<DutyTrace>,
}

/// What the duty does to one brake of a fitted entry.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FittedDuty {
    /// Which entry of `fitted`.
    pub fitted_index: usize,
    /// Highest bulk temperature of its disc; absent without a disc or its mass.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_bulk_temperature: Option<Temperature>,
    /// Highest temperature of the rubbed surface.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_surface_temperature: Option<Temperature>,
    /// Lowest friction over that of the data sheet while braking.
    #[schema(value_type = f64)]
    pub lowest_friction_factor: Finite,
    /// Energy taken up.
    pub energy: Energy,
    /// Thickness worn off one pad; needs `specific_wear`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub pad_wear: Option<Length>,
    /// The first crossing of each limit.
    pub crossings: Vec<Crossing>,
}

/// The first time that a limit is passed.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Crossing {
    /// Which check.
    pub check: CheckName,
    /// In which event of `events`.
    pub event_index: usize,
    /// In which repeat, from 1.
    pub repeat: u32,
    /// When, from the start.
    pub time: Time,
    /// The value then: the first one found beyond the limit.
    pub actual: AnyAmount,
    /// The highest value in the whole duty.
    pub highest: AnyAmount,
    /// The limit.
    pub limit: AnyAmount,
}

/// The longest stop of a duty. Of a shaft, an angle stands in the place of the distance.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct LongestStop {
    /// Which event of `events`.
    pub event_index: usize,
    /// In which repeat, from 1.
    pub repeat: u32,
    /// Distance in all, reaction included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_distance: Option<Length>,
    /// Angle in all, of a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_angle: Option<Angle>,
    /// Time in all, reaction included.
    pub total_time: Time,
}

/// An event that could not be done.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FirstFailure {
    /// Which event of `events`.
    pub event_index: usize,
    /// In which repeat, from 1.
    pub repeat: u32,
    /// Why.
    pub reason: DutyFailure,
}

/// Why an event could not be done.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum DutyFailure {
    /// The final speed of a stop was not reached.
    FinalSpeedNotReached,
    /// The brakes could not hold the speed of a descent.
    SpeedNotHeld,
    /// A disc left the range of temperatures that is followed.
    TooHot,
}

/// Temperatures over time, as numbers in the units stated.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DutyTrace {
    /// Times from the start.
    #[schema(value_type = Vec<f64>)]
    pub time: Vec<Finite>,
    /// Speeds.
    #[schema(value_type = Vec<f64>)]
    pub speed: Vec<Finite>,
    /// Each fitted entry.
    pub fitted: Vec<FittedTrace>,
    /// The units of the columns.
    pub units: DutyTraceUnits,
}

/// One brake over time. Columns of temperatures are empty where they are not followed.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FittedTrace {
    /// Bulk temperatures.
    #[schema(value_type = Vec<f64>)]
    pub bulk: Vec<Finite>,
    /// Surface temperatures.
    #[schema(value_type = Vec<f64>)]
    pub surface: Vec<Finite>,
    /// Friction over that of the data sheet.
    #[schema(value_type = Vec<f64>)]
    pub friction_factor: Vec<Finite>,
}

/// The units of a trace.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct DutyTraceUnits {
    /// Of the times.
    pub time: &'static str,
    /// Of the speeds.
    pub speed: &'static str,
    /// Of the temperatures.
    pub temperature: &'static str,
}

/// Follow a duty.
///
/// Temperature, friction and stopping distance through any sequence of stops, runs, descents and stands, repeated
/// as asked; every fitted brake on its own, with friction coupled to temperature through the lining's `fade`
/// points. Once per friction case.
#[utoipa::path(
    post, path = "/duty-cycle", tag = "Calculations", operation_id = "duty_cycle",
    responses((
        status = OK,
        description = "What the duty comes to; as a picture: temperature and friction of each brake over time.",
        content((DutyCycleAnswer = "application/json"), (String = "image/svg+xml")),
    )),
)]
pub(super) async fn duty_cycle(
    form: Negotiated,
    request: Json<DutyCycleRequest>,
) -> Result<Reply<Body>, Problem> {
    off_thread(move || request.value.respond(form, &request.body)).await?
}

impl DutyCycleRequest {
    fn respond(&self, form: Negotiated, body: &[u8]) -> Result<Reply<Body>, Problem> {
        let (mut input, defaults) = self.read()?;
        if form.is_chart() {
            input.points.get_or_insert(POINTS);
        }
        let mut outcome =
            duty_cycle::evaluate(&input).map_err(|faults| record::no_answer(&faults))?;
        if self.events.iter().any(|event| matches!(event, Event::Procedure(_))) {
            outcome.remarks.caution(Caution::NotTheTest);
            self.note_memory(&mut outcome.remarks);
        }
        let answer = self.answer(body, &input, &outcome, defaults);
        let figures = Figures(self.report_units.unwrap_or_default());
        Ok(form.render(answer, |answer| chart(figures, &input, &outcome, answer)))
    }

    /// A test cycle that nobody read again in its source is not to be relied on.
    fn note_memory(&self, remarks: &mut Remarks) {
        let is_memory = |event: &Event| match event {
            Event::Procedure(event) => {
                procedures::find(&event.id).is_some_and(|row| row.provenance == Provenance::Memory)
            }
            Event::Stop(_) | Event::Run(_) | Event::Descent(_) | Event::Stand(_) => false,
        };
        if self.events.iter().any(is_memory) {
            let subject = Subject::Request("events");
            let detail = "the figures of a test cycle were entered from memory of their source: check them there";
            remarks.notice(Notice::ValueFromMemory, Severity::Info, subject, detail);
            remarks.caution(Caution::FromMemory);
        }
    }

    fn read(&self) -> Result<(Input, Vec<RecordedDefault>), Problem> {
        let (at, mut reader) = (At::ROOT, Reader::new());
        let machine = self.machine.read(&at.member("machine"), &mut reader);
        let is_vehicle = matches!(self.machine, Machine::Vehicle(_));
        let fitted = Fitted::read_all(&self.fitted, is_vehicle, &at.member("fitted"), &mut reader);
        let at_events = at.member("events");
        let events = self.events.iter().enumerate();
        let events: Vec<_> = events
            .map(|(index, event)| event.read(&self.machine, &at_events.index(index), &mut reader))
            .collect();
        let repeats = reader.count(&at.member("repeats"), self.repeats, 1);
        let ambient_temperature =
            temperatures::ambient(self.ambient_temperature.as_ref(), &at, &mut reader);
        let start_temperature = temperatures::start(
            self.start_temperature.as_ref(),
            ambient_temperature,
            self.report_units.unwrap_or_default(),
            (&at, &mut reader),
        );
        let points = self.points(&at, &mut reader);
        let events: Option<Vec<Vec<_>>> = events.into_iter().collect();
        let parts = machine.zip(fitted).zip(events);
        reader.finish(parts.map(|((machine, fitted), events)| {
            Input {
                machine,
                fitted,
                origins: events
                    .iter()
                    .enumerate()
                    .flat_map(|(index, events)| vec![index; events.len()])
                    .collect(),
                events: events.into_iter().flatten().collect(),
                repeats,
                ambient_temperature,
                start_temperature,
                points,
            }
        }))
    }

    fn points(&self, at: &At<'_>, reader: &mut Reader) -> Option<usize> {
        let points = self.trace?.points;
        if !(2..=2000).contains(&points) {
            let at = at.member("trace");
            reader.fault(
                &at.member("points"),
                FaultCode::OutOfRange,
                "must lie between 2 and 2000",
            );
        }
        usize::try_from(points).ok()
    }

    fn answer(
        &self,
        body: &[u8],
        input: &Input,
        outcome: &Outcome,
        mut defaults: Vec<RecordedDefault>,
    ) -> DutyCycleAnswer {
        let report_units = self.report_units.unwrap_or_default();
        let recorded =
            Recorded { body, reference: self.reference.as_deref(), brake: "", report_units };
        defaults.extend(stood_in(&input.fitted, &outcome.pressed, report_units));
        let coordinate = input.machine.coordinate();
        let cases = outcome.friction_cases.iter();
        let friction_cases =
            cases.map(|case| DutyCycleCase::new(case, coordinate, report_units)).collect();
        DutyCycleAnswer {
            results: DutyCycleResults { friction_cases },
            warnings: recorded.warnings(&outcome.remarks),
            cautions: record::cautions(&outcome.remarks),
            record: recorded.record(outcome.remarks.methods(), defaults),
        }
    }
}

impl DutyCycleCase {
    fn new(case: &CaseOutcome, coordinate: Coordinate, units: ReportUnits) -> Self {
        let is_way = coordinate == Coordinate::Way;
        let fitted = case.fitted.iter().enumerate();
        Self {
            friction_case: case.friction_case.into(),
            completed: case.first_failure.is_none(),
            duration: Time::report_si(case.duration, units),
            fitted: fitted.map(|(index, tracked)| FittedDuty::new(index, tracked, units)).collect(),
            longest_stop: case.longest_stop.map(|longest| LongestStop {
                event_index: longest.place.event_index,
                repeat: longest.place.repeat,
                total_distance: is_way.then(|| Length::report_travel(longest.distance, units)),
                total_angle: (!is_way).then(|| Angle::report_si(longest.distance, units)),
                total_time: Time::report_si(longest.time, units),
            }),
            first_failure: case.first_failure.map(|failure| FirstFailure {
                event_index: failure.place.event_index,
                repeat: failure.place.repeat,
                reason: match failure.reason {
                    FailureReason::FinalSpeedNotReached => DutyFailure::FinalSpeedNotReached,
                    FailureReason::SpeedNotHeld => DutyFailure::SpeedNotHeld,
                    FailureReason::TooHot => DutyFailure::TooHot,
                },
            }),
            trace: case.course.as_ref().map(|course| DutyTrace::new(course, coordinate, units)),
        }
    }
}

impl FittedDuty {
    fn new(fitted_index: usize, tracked: &TrackedOutcome, units: ReportUnits) -> Self {
        let followed = tracked.bounds.iter().zip(&tracked.highest).zip(&tracked.crossings);
        let crossing = |((bound, highest), crossing): (
            (&crate::calc::brake::Bound, &f64),
            &Option<duty_cycle::Crossing>,
        )| {
            let crossing = (*crossing)?;
            let amount = |si| Amount { dimension: bound.limit.dimension, si };
            Some(Crossing {
                check: bound.code.into(),
                event_index: crossing.place.event_index,
                repeat: crossing.place.repeat,
                time: Time::report_si(crossing.time, units),
                actual: AnyAmount::report(amount(crossing.value), units),
                highest: AnyAmount::report(amount(*highest), units),
                limit: AnyAmount::report(bound.limit, units),
            })
        };
        Self {
            fitted_index,
            peak_bulk_temperature: tracked
                .peak_bulk
                .map(|peak| Temperature::report_si(peak, units)),
            peak_surface_temperature: tracked
                .peak_surface
                .map(|peak| Temperature::report_si(peak, units)),
            lowest_friction_factor: Finite(tracked.lowest_factor),
            energy: Energy::report_si(tracked.energy, units),
            pad_wear: tracked.pad_wear.map(|wear| Length::report_si(wear, units)),
            crossings: followed.filter_map(crossing).collect(),
        }
    }
}

impl DutyTrace {
    fn new(course: &Course, coordinate: Coordinate, units: ReportUnits) -> Self {
        let speed = match coordinate {
            Coordinate::Way => Dimension::Speed,
            Coordinate::Angle => Dimension::RotationalSpeed,
        };
        let unit = |dimension| units.unit_of(dimension);
        let symbol = |dimension| unit(dimension).symbol;
        let number = |dimension, si: f64| Finite(unit(dimension).of_si(si));
        let moments = course.moments();
        let entries = moments.first().map_or(0, |moment| moment.fitted.len());
        let samples =
            |entry: usize| moments.iter().filter_map(move |moment| moment.fitted.get(entry));
        let temperature = |kelvins| number(Dimension::Temperature, kelvins);
        let fitted = (0..entries).map(|entry| FittedTrace {
            bulk: samples(entry).filter_map(|sample| sample.bulk).map(temperature).collect(),
            surface: samples(entry).filter_map(|sample| sample.surface).map(temperature).collect(),
            friction_factor: samples(entry).map(|sample| Finite(sample.factor)).collect(),
        });
        Self {
            time: moments.iter().map(|moment| number(Dimension::Time, moment.time)).collect(),
            speed: moments.iter().map(|moment| number(speed, moment.speed)).collect(),
            fitted: fitted.collect(),
            units: DutyTraceUnits {
                time: symbol(Dimension::Time),
                speed: symbol(speed),
                temperature: symbol(Dimension::Temperature),
            },
        }
    }
}
