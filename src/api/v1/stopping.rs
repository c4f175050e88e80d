//! `POST /v1/stopping`: how a machine stops.

use axum::body::Body;
use axum::http::Response as Reply;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::block::delays::Response;
use super::block::fitted::Fitted;
use super::block::machine::Machine;
use super::block::stop::{Direction, StopMembers, Stopping, Surroundings, stood_in};
use crate::api::accept::Negotiated;
use crate::api::extract::Json;
use crate::api::measure::{
    Acceleration, Angle, AngularAcceleration, Finite, Force, Grade, Length, ReportUnits,
    RotationalSpeed, Speed, Time, Torque,
};
use crate::api::parse::{At, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{self, CautionText, FrictionCase, Record, Recorded, Warning};
use crate::api::render::frame::Figures;
use crate::api::render::stopping::chart;
use crate::calc::case::stopping::{self, CaseOutcome, Input, Outcome};
use crate::calc::fault::FaultCode;
use crate::calc::motion::{Coordinate, Ending, LimitedBy as Limit, Phase as Part, PhaseTotals};
use crate::calc::quantity::Dimension;

/// A machine, its brakes and the stop asked of them.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct StoppingRequest {
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
    /// Speed at the start, of the vehicle, load or belt. Required but for a shaft.
    #[schema(nullable = false)]
    pub initial_speed: Option<Speed>,
    /// Speed at the end, below the initial one; standstill if left out.
    #[schema(nullable = false)]
    pub final_speed: Option<Speed>,
    /// Speed at the start, of a shaft. Required for a shaft.
    #[schema(nullable = false)]
    pub initial_rotational_speed: Option<RotationalSpeed>,
    /// Speed at the end, of a shaft; standstill if left out.
    #[schema(nullable = false)]
    pub final_rotational_speed: Option<RotationalSpeed>,
    /// Slope of a vehicle's way, positive uphill; level if left out, at most 100 %.
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// Force from outside on a vehicle, also in the dead time: positive drives, negative retards; 0 if left out.
    #[schema(nullable = false)]
    pub drive_force: Option<Force>,
    /// Which way a hoist's load moves. Required for a hoist.
    #[schema(nullable = false)]
    pub direction: Option<Direction>,
    /// Deceleration that the operator holds after build-up; full torque if left out.
    #[schema(nullable = false)]
    pub deceleration: Option<Acceleration>,
    /// The same for a shaft.
    #[schema(nullable = false)]
    pub angular_deceleration: Option<AngularAcceleration>,
    /// Delays.
    #[schema(nullable = false)]
    pub response: Option<Response>,
    /// Asks for speed and distance over time.
    #[schema(nullable = false)]
    pub trace: Option<TraceRequest>,
}

/// Asks for a trace.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct TraceRequest {
    /// Points, 2 to 2000, equally spaced in time, both ends included.
    #[serde(deserialize_with = "crate::api::count::required")]
    pub points: u32,
}

/// How the machine stops.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StoppingAnswer {
    /// The results.
    pub results: StoppingResults,
    /// Remarks on the results.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: Record,
}

/// How the machine stops, once per friction case.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StoppingResults {
    /// The cases.
    pub friction_cases: Vec<StoppingCase>,
}

/// The stop at one friction. Of a shaft, angles stand in the place of distances.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StoppingCase {
    /// Which.
    pub friction_case: FrictionCase,
    /// Whether the final speed is reached. If not, there are no times and distances.
    pub reaches_final_speed: bool,
    /// Why the final speed is not reached.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reason: Option<NotReachedReason>,
    /// The speed that the machine tends to instead, if it is finite.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub tending_speed: Option<Speed>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub tending_rotational_speed: Option<RotationalSpeed>,
    /// Time in all, reaction included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_time: Option<Time>,
    /// Distance in all, reaction included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_distance: Option<Length>,
    /// Angle that a shaft turns in all, reaction included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_angle: Option<Angle>,
    /// The same in revolutions.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub revolutions: Option<Finite>,
    /// Time without the reaction.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub time_from_control: Option<Time>,
    /// Distance without the reaction.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub distance_from_control: Option<Length>,
    /// Angle without the reaction, of a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub angle_from_control: Option<Angle>,
    /// Time from the first torque on.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub braking_time: Option<Time>,
    /// Distance from the first torque on.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub braking_distance: Option<Length>,
    /// Angle from the first torque on, of a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub braking_angle: Option<Angle>,
    /// From the squares of the speeds over the braking distance.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub mean_deceleration: Option<Acceleration>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub mean_angular_deceleration: Option<AngularAcceleration>,
    /// Between 0.8 and 0.1 of the initial speed; absent if the final speed is above that.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub mean_fully_developed_deceleration: Option<Acceleration>,
    /// Highest while torque acts.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_deceleration: Option<Acceleration>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_angular_deceleration: Option<AngularAcceleration>,
    /// What keeps the deceleration from being higher.
    pub limited_by: LimitedBy,
    /// Which axle reaches its adhesion first; needs adhesion and geometry.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub first_axle_to_lock: Option<LockingAxle>,
    /// True if the machine comes to rest before the brake holds it and then moves the other way.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub runs_back: Option<bool>,
    /// That movement, if the brake ends it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub run_back: Option<RunBack>,
    /// The phases that happened.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub phases: Option<Vec<Phase>>,
    /// The axles of a vehicle where the deceleration is highest.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub axles: Option<Vec<AxleForces>>,
    /// What each fitted entry does.
    pub fitted: Vec<FittedTorque>,
    /// Speed and distance over time.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub trace: Option<Trace>,
}

/// Why the final speed is not reached.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum NotReachedReason {
    /// The brakes give less than what drives.
    BrakeForceTooLow,
    /// The tires hold less than what drives.
    AdhesionTooLow,
    /// The rear wheel lifts before the brakes hold what drives.
    RearWheelLifts,
}

/// What keeps the deceleration from being higher.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum LimitedBy {
    /// The brakes give no more.
    Brake,
    /// The tires of an axle hold no more; braking there is taken as controlled.
    Adhesion,
    /// The rear wheel would lift.
    RearWheelLift,
    /// The operator asks for no more.
    Operator,
}

/// An axle that locks first.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum LockingAxle {
    /// The front axle.
    Front,
    /// The rear axle.
    Rear,
}

/// A movement the other way after a stop.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RunBack {
    /// From rest to rest.
    pub time: Time,
    /// Distance.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub distance: Option<Length>,
    /// Angle, of a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub angle: Option<Angle>,
    /// Highest speed on the way.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_speed: Option<Speed>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_rotational_speed: Option<RotationalSpeed>,
}

/// A phase of the stop.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Phase {
    /// Which.
    pub phase: PhaseName,
    /// How long it lasts.
    pub time: Time,
    /// Distance covered in it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub distance: Option<Length>,
    /// Angle covered in it, of a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub angle: Option<Angle>,
    /// Speed at its end.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub end_speed: Option<Speed>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub end_rotational_speed: Option<RotationalSpeed>,
}

/// The name of a phase.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum PhaseName {
    /// Nobody has acted yet; the speed is held.
    Reaction,
    /// The drive is off, no torque yet.
    Dead,
    /// The torque rises.
    BuildUp,
    /// The torque has its final value.
    Full,
}

/// Forces of an axle where the deceleration is highest.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct AxleForces {
    /// Which.
    pub axle: AxleName,
    /// Force of the tires on the ground.
    pub brake_force: Force,
    /// Force of the ground on the tires.
    pub normal_force: Force,
    /// Brake force over normal force; absent where the axle carries nothing.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub adhesion_used: Option<Finite>,
}

/// Which axle a result is for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum AxleName {
    /// The front axle.
    Front,
    /// The rear axle.
    Rear,
    /// All axles together: their loads are not known.
    All,
}

/// What one brake of a fitted entry does.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FittedTorque {
    /// Which entry of `fitted`.
    pub fitted_index: usize,
    /// Friction coefficient.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub coefficient: Option<Finite>,
    /// Torque of one brake once built up, before what the tires limit.
    pub torque: Torque,
    /// Force of one pad on the disc for it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub clamp_force: Option<Force>,
}

/// Speed and distance over time, as numbers in the units stated.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Trace {
    /// Times from the start.
    #[schema(value_type = Vec<f64>)]
    pub time: Vec<Finite>,
    /// Speeds.
    #[schema(value_type = Vec<f64>)]
    pub speed: Vec<Finite>,
    /// Distances from the start; angles of a shaft.
    #[schema(value_type = Vec<f64>)]
    pub distance: Vec<Finite>,
    /// The units of the columns.
    pub units: TraceUnits,
}

/// The units of a trace.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct TraceUnits {
    /// Of the times.
    pub time: &'static str,
    /// Of the speeds.
    pub speed: &'static str,
    /// Of the distances or angles.
    pub distance: &'static str,
}

/// Compute how a machine stops.
///
/// Time, distance and deceleration through reaction, dead time, build-up and full braking, limited by brakes,
/// tires, a lifting rear wheel or the operator; once per friction case. A brake that cannot do it is an answer,
/// too.
#[utoipa::path(
    post, path = "/stopping", tag = "Calculations", operation_id = "stopping",
    responses((
        status = OK,
        description = "How the machine stops; as a picture: speed and distance over time, with the phases.",
        content((StoppingAnswer = "application/json"), (String = "image/svg+xml")),
    )),
)]
pub(super) async fn stopping(
    form: Negotiated,
    request: Json<StoppingRequest>,
) -> Result<Reply<Body>, Problem> {
    let (input, outcome, answer) = request.value.evaluate(&request.body)?;
    let figures = Figures(request.value.report_units.unwrap_or_default());
    Ok(form.render(answer, |answer| chart(figures, &input, &outcome, answer)))
}

impl StoppingRequest {
    fn members(&self) -> StopMembers<'_> {
        StopMembers {
            machine: &self.machine,
            fitted: &self.fitted,
            stopping: Stopping {
                initial_speed: self.initial_speed.as_ref(),
                final_speed: self.final_speed.as_ref(),
                initial_rotational_speed: self.initial_rotational_speed.as_ref(),
                final_rotational_speed: self.final_rotational_speed.as_ref(),
                deceleration: self.deceleration.as_ref(),
                angular_deceleration: self.angular_deceleration.as_ref(),
                response: self.response.as_ref(),
            },
            surroundings: Surroundings {
                grade: self.grade.as_ref(),
                drive_force: self.drive_force.as_ref(),
                direction: self.direction,
            },
        }
    }

    fn evaluate(&self, body: &[u8]) -> Result<(Input, Outcome, StoppingAnswer), Problem> {
        let (input, defaults) = self.read()?;
        let outcome = stopping::evaluate(&input).map_err(|faults| record::no_answer(&faults))?;
        let answer = self.answer(body, &input, &outcome, defaults);
        Ok((input, outcome, answer))
    }

    fn read(&self) -> Result<(Input, Vec<RecordedDefault>), Problem> {
        let mut reader = Reader::new();
        let input = self.members().read(&At::ROOT, &mut reader);
        if let Some(trace) = self.trace
            && !(2..=2000).contains(&trace.points)
        {
            let at = At::ROOT.member("trace");
            reader.fault(
                &at.member("points"),
                FaultCode::OutOfRange,
                "must lie between 2 and 2000",
            );
        }
        reader.finish(input)
    }

    fn answer(
        &self,
        body: &[u8],
        input: &Input,
        outcome: &Outcome,
        mut defaults: Vec<RecordedDefault>,
    ) -> StoppingAnswer {
        let report_units = self.report_units.unwrap_or_default();
        let recorded =
            Recorded { body, reference: self.reference.as_deref(), brake: "", report_units };
        defaults.extend(stood_in(&input.fitted, &outcome.pressed, report_units));
        let points = self.trace.and_then(|trace| usize::try_from(trace.points).ok());
        let report = Report { input, outcome, units: report_units, points };
        StoppingAnswer {
            results: StoppingResults {
                friction_cases: outcome
                    .friction_cases
                    .iter()
                    .map(|case| report.case(case))
                    .collect(),
            },
            warnings: recorded.warnings(&outcome.remarks),
            cautions: record::cautions(&outcome.remarks),
            record: recorded.record(outcome.remarks.methods(), defaults),
        }
    }
}

/// What turns a stop into its wire form.
struct Report<'a> {
    input: &'a Input,
    outcome: &'a Outcome,
    units: ReportUnits,
    points: Option<usize>,
}

impl Report<'_> {
    fn is_angle(&self) -> bool {
        self.input.machine.coordinate() == Coordinate::Angle
    }

    fn distance(&self, coordinate: f64) -> Option<Length> {
        (!self.is_angle()).then(|| Length::report_travel(coordinate, self.units))
    }

    fn angle(&self, coordinate: f64) -> Option<Angle> {
        self.is_angle().then(|| Angle::report_si(coordinate, self.units))
    }

    fn speed(&self, coordinate: f64) -> Option<Speed> {
        (!self.is_angle()).then(|| Speed::report_si(coordinate, self.units))
    }

    fn rotational_speed(&self, coordinate: f64) -> Option<RotationalSpeed> {
        self.is_angle().then(|| RotationalSpeed::report_si(coordinate, self.units))
    }

    fn acceleration(&self, coordinate: Option<f64>) -> Option<Acceleration> {
        coordinate
            .filter(|_| !self.is_angle())
            .map(|value| Acceleration::report_si(value, self.units))
    }

    fn angular_acceleration(&self, coordinate: Option<f64>) -> Option<AngularAcceleration> {
        coordinate
            .filter(|_| self.is_angle())
            .map(|value| AngularAcceleration::report_si(value, self.units))
    }

    fn time(&self, seconds: f64) -> Time {
        Time::report_si(seconds, self.units)
    }

    fn case(&self, case: &CaseOutcome) -> StoppingCase {
        let empty = self.without_times(case);
        match case.stop.ending {
            Ending::NotReached { .. } => empty,
            Ending::Reached(_) => self.with_times(case, empty),
        }
    }

    /// What is known whether the final speed is reached or not.
    fn without_times(&self, case: &CaseOutcome) -> StoppingCase {
        let tending = match case.stop.ending {
            Ending::NotReached { tending_speed } => tending_speed,
            Ending::Reached(_) => None,
        };
        let first = case.lock.filter(|lock| lock.front_over_rear().is_some());
        StoppingCase {
            friction_case: case.friction_case.into(),
            reaches_final_speed: matches!(case.stop.ending, Ending::Reached(_)),
            reason: self.reason(case),
            tending_speed: tending.and_then(|speed| self.speed(speed)),
            tending_rotational_speed: tending.and_then(|speed| self.rotational_speed(speed)),
            total_time: None,
            total_distance: None,
            total_angle: None,
            revolutions: None,
            time_from_control: None,
            distance_from_control: None,
            angle_from_control: None,
            braking_time: None,
            braking_distance: None,
            braking_angle: None,
            mean_deceleration: None,
            mean_angular_deceleration: None,
            mean_fully_developed_deceleration: None,
            peak_deceleration: None,
            peak_angular_deceleration: None,
            limited_by: case.limited_by().into(),
            first_axle_to_lock: first
                .map(|lock| if lock.rear_first() { LockingAxle::Rear } else { LockingAxle::Front }),
            runs_back: None,
            run_back: None,
            phases: None,
            axles: self.axles(case),
            fitted: self.fitted(case),
            trace: None,
        }
    }

    fn with_times(&self, case: &CaseOutcome, empty: StoppingCase) -> StoppingCase {
        let path = &case.stop.path;
        let (end, torque) = (path.end(), path.first_torque());
        let reaction = self.input.demand.delays.reaction();
        let control = self.input.demand.initial_speed * reaction;
        let mean = case.mean_deceleration(self.input.demand.final_speed);
        let peak = case.hardest.map(|(instant, _)| instant.deceleration);
        let developed = case.mean_fully_developed_deceleration(&self.input.demand);
        let Ending::Reached(run_back) = case.stop.ending else { return empty };
        StoppingCase {
            total_time: Some(self.time(end.time)),
            total_distance: self.distance(end.distance),
            total_angle: self.angle(end.distance),
            revolutions: self.is_angle().then(|| Finite(end.distance / std::f64::consts::TAU)),
            time_from_control: Some(self.time(end.time - reaction)),
            distance_from_control: self.distance(end.distance - control),
            angle_from_control: self.angle(end.distance - control),
            braking_time: Some(self.time(end.time - torque.time)),
            braking_distance: self.distance(end.distance - torque.distance),
            braking_angle: self.angle(end.distance - torque.distance),
            mean_deceleration: self.acceleration(mean),
            mean_angular_deceleration: self.angular_acceleration(mean),
            mean_fully_developed_deceleration: self.acceleration(developed),
            peak_deceleration: self.acceleration(peak),
            peak_angular_deceleration: self.angular_acceleration(peak),
            runs_back: run_back.map(|_| true),
            run_back: run_back.and_then(|run_back| self.run_back(&run_back)),
            phases: Some(path.phases().iter().map(|phase| self.phase(phase)).collect()),
            trace: self.points.map(|points| self.trace(case, points)),
            ..empty
        }
    }

    fn reason(&self, case: &CaseOutcome) -> Option<NotReachedReason> {
        if matches!(case.stop.ending, Ending::Reached(_)) {
            return None;
        }
        let at_end = case.stop.path.forces().at(1.0, self.input.demand.final_speed);
        Some(match at_end.limited_by {
            Limit::Adhesion => NotReachedReason::AdhesionTooLow,
            Limit::RearWheelLift => NotReachedReason::RearWheelLifts,
            Limit::Brake | Limit::Operator => NotReachedReason::BrakeForceTooLow,
        })
    }

    fn run_back(&self, run_back: &crate::calc::motion::RunBack) -> Option<RunBack> {
        let (time, distance, peak_speed) =
            (run_back.time?, run_back.distance?, run_back.peak_speed?);
        Some(RunBack {
            time: self.time(time),
            distance: self.distance(distance),
            angle: self.angle(distance),
            peak_speed: self.speed(peak_speed),
            peak_rotational_speed: self.rotational_speed(peak_speed),
        })
    }

    fn phase(&self, totals: &PhaseTotals) -> Phase {
        Phase {
            phase: match totals.phase {
                Part::Reaction => PhaseName::Reaction,
                Part::Dead => PhaseName::Dead,
                Part::BuildUp => PhaseName::BuildUp,
                Part::Full => PhaseName::Full,
            },
            time: self.time(totals.time),
            distance: self.distance(totals.distance),
            angle: self.angle(totals.distance),
            end_speed: self.speed(totals.end_speed),
            end_rotational_speed: self.rotational_speed(totals.end_speed),
        }
    }

    fn axles(&self, case: &CaseOutcome) -> Option<Vec<AxleForces>> {
        let vehicle = self.input.machine.vehicle()?;
        let (instant, _) = case.hardest?;
        let names: &[AxleName] = if vehicle.has_geometry() {
            &[AxleName::Front, AxleName::Rear]
        } else {
            &[AxleName::All]
        };
        let forces = instant.ground.into_iter().zip(instant.normal);
        Some(
            names
                .iter()
                .zip(forces)
                .map(|(axle, (brake, normal))| self.axle(*axle, brake, normal))
                .collect(),
        )
    }

    fn axle(&self, axle: AxleName, brake_force: f64, normal_force: f64) -> AxleForces {
        AxleForces {
            axle,
            brake_force: Force::report_si(brake_force, self.units),
            normal_force: Force::report_si(normal_force, self.units),
            adhesion_used: (normal_force > 0.0).then(|| Finite(brake_force / normal_force)),
        }
    }

    fn fitted(&self, case: &CaseOutcome) -> Vec<FittedTorque> {
        let entries = self.input.fitted.iter().zip(&self.outcome.pressed).enumerate();
        let entry = |(fitted_index, (entry, pressed)): (
            usize,
            (&crate::calc::fitted::Fitted, &Option<_>),
        )| {
            let acting = stopping::acting(entry, pressed.as_ref(), &case.stop);
            FittedTorque {
                fitted_index,
                coefficient: entry.coefficient(case.friction_case).map(Finite),
                torque: Torque::report(case.torque(fitted_index), self.units),
                clamp_force: acting.map(|acting| Force::report(acting.clamp_force, self.units)),
            }
        };
        entries.map(entry).collect()
    }

    fn trace(&self, case: &CaseOutcome, count: usize) -> Trace {
        let [speed, distance] = if self.is_angle() {
            [Dimension::RotationalSpeed, Dimension::Angle]
        } else {
            [Dimension::Speed, Dimension::Travel]
        };
        let points = case.stop.path.trace(count);
        let column = |dimension, value: fn(&crate::calc::motion::Point) -> f64| {
            let unit = self.units.unit_of(dimension);
            let numbers = points.iter().map(|point| Finite(unit.of_si(value(point)))).collect();
            (numbers, unit.symbol)
        };
        let (time, time_unit) = column(Dimension::Time, |point| point.time);
        let (speed, speed_unit) = column(speed, |point| point.speed);
        let (distance, distance_unit) = column(distance, |point| point.distance);
        let units = TraceUnits { time: time_unit, speed: speed_unit, distance: distance_unit };
        Trace { time, speed, distance, units }
    }
}

impl From<Limit> for LimitedBy {
    fn from(limit: Limit) -> Self {
        match limit {
            Limit::Brake => Self::Brake,
            Limit::Adhesion => Self::Adhesion,
            Limit::RearWheelLift => Self::RearWheelLift,
            Limit::Operator => Self::Operator,
        }
    }
}
