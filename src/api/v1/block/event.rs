//! The events of a duty.

use serde::Deserialize;
use utoipa::ToSchema;

use super::delays::Response;
use super::machine::Machine;
use super::stop::{Direction, Stopping, Surroundings};
use crate::api::measure::{
    Acceleration, AngularAcceleration, Force, Grade, Length, RotationalSpeed, Speed, Time,
};
use crate::api::parse::{At, Reader};
use crate::calc::case::duty_cycle::Event as Happening;
use crate::calc::case::duty_cycle::procedure::{self, needs_max_speed};
use crate::calc::fault::FaultCode;
use crate::calc::machine::Situation;
use crate::calc::quantity::Si;
use crate::data::procedures::{self, ProcedureRow};
use crate::{only_word, tagged_union};

tagged_union! {
    /// Something that happens in a duty.
    Event by "kind" {
        "stop" => Stop(StopEvent),
        "run" => Run(RunEvent),
        "descent" => Descent(DescentEvent),
        "stand" => Stand(StandEvent),
        "procedure" => Procedure(ProcedureEvent),
    }
}

only_word! {
    /// Says that the machine stops or slows down.
    StopKind = "stop";
    /// Says that the machine moves without braking.
    RunKind = "run";
    /// Says that the brakes hold a speed.
    DescentKind = "descent";
    /// Says that the machine stands.
    StandKind = "stand";
    /// Says that a published test cycle is driven.
    ProcedureKind = "procedure";
}

/// A stop, or slowing down to a speed.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct StopEvent {
    /// The kind.
    pub kind: StopKind,
    /// Speed at the start, of the vehicle, load or belt. Required but for a shaft.
    #[schema(nullable = false)]
    pub initial_speed: Option<Speed>,
    /// Speed at the end; standstill if left out.
    #[schema(nullable = false)]
    pub final_speed: Option<Speed>,
    /// Speed at the start, of a shaft.
    #[schema(nullable = false)]
    pub initial_rotational_speed: Option<RotationalSpeed>,
    /// Speed at the end, of a shaft; standstill if left out.
    #[schema(nullable = false)]
    pub final_rotational_speed: Option<RotationalSpeed>,
    /// Slope of a vehicle's way, positive uphill; level if left out.
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// Force from outside on a vehicle: positive drives, negative retards; 0 if left out.
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
}

/// Moving at a speed without braking. Give `time` or `distance`.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RunEvent {
    /// The kind.
    pub kind: RunKind,
    /// Speed of the vehicle, load or belt.
    #[schema(nullable = false)]
    pub speed: Option<Speed>,
    /// Speed of a shaft.
    #[schema(nullable = false)]
    pub rotational_speed: Option<RotationalSpeed>,
    /// How long.
    #[schema(nullable = false)]
    pub time: Option<Time>,
    /// How far; not for a shaft.
    #[schema(nullable = false)]
    pub distance: Option<Length>,
    /// Slope of a vehicle's way. The drive overcomes it: it does not matter to the brakes.
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
}

/// A speed held by the brakes: downhill on a vehicle, a load that drives on a hoist or conveyor.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DescentEvent {
    /// The kind.
    pub kind: DescentKind,
    /// The speed.
    pub speed: Speed,
    /// How far.
    pub distance: Length,
    /// Slope of a vehicle's way, negative downhill; level if left out.
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// Force from outside on a vehicle: positive drives, negative retards; 0 if left out.
    #[schema(nullable = false)]
    pub drive_force: Option<Force>,
    /// Which way a hoist's load moves. Required for a hoist.
    #[schema(nullable = false)]
    pub direction: Option<Direction>,
}

/// At rest.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct StandEvent {
    /// The kind.
    pub kind: StandKind,
    /// How long.
    pub time: Time,
}

/// A published test cycle of vehicles: a row of `GET /v1/procedures`. A calculation does not replace the test.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ProcedureEvent {
    /// The kind.
    pub kind: ProcedureKind,
    /// A row of `GET /v1/procedures`.
    #[schema(example = "us_571_135_heating_snubs")]
    pub id: String,
    /// Maximum speed of the vehicle; required if the cycle counts from it.
    #[schema(nullable = false)]
    pub max_speed: Option<Speed>,
    /// Delays of each stop.
    #[schema(nullable = false)]
    pub response: Option<Response>,
}

impl Event {
    /// The events that are meant: one, or those of a test cycle.
    pub fn read(
        &self,
        machine: &Machine,
        at: &At<'_>,
        reader: &mut Reader,
    ) -> Option<Vec<Happening>> {
        match self {
            Self::Stop(event) => event.read(machine, at, reader).map(|event| vec![event]),
            Self::Run(event) => event.read(machine, at, reader).map(|event| vec![event]),
            Self::Descent(event) => event.read(machine, at, reader).map(|event| vec![event]),
            Self::Stand(event) => {
                let time = positive(&at.member("time"), event.time, reader)?;
                Some(vec![Happening::Stand { time }])
            }
            Self::Procedure(event) => event.read(machine, at, reader),
        }
    }
}

impl ProcedureEvent {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Vec<Happening>> {
        let (max_speed, response) = (self.max_speed.as_ref(), self.response.as_ref());
        let (_, events) = procedure_events(&self.id, max_speed, response, (machine, at, reader))?;
        Some(events)
    }
}

/// The row and the events of a published test cycle.
pub fn procedure_events(
    id: &str,
    max_speed: Option<&Speed>,
    response: Option<&Response>,
    (machine, at, reader): (&Machine, &At<'_>, &mut Reader),
) -> Option<(&'static ProcedureRow, Vec<Happening>)> {
    let is_vehicle = matches!(machine, Machine::Vehicle(_));
    reader.not_applicable(
        &at.member("kind"),
        !is_vehicle,
        "published test cycles belong to vehicles only",
    );
    let at_speed = at.member("max_speed");
    let max_speed = max_speed.map(|speed| positive(&at_speed, *speed, reader));
    let delays = Response::read(response, &at.member("response"), reader);
    let row = procedures::find(id);
    if row.is_none() {
        let near = procedures::closest(id);
        let hint = near.map_or(String::new(), |near| format!("; did you mean {near}?"));
        let detail = format!("is not a row of GET /v1/procedures{hint}");
        reader.fault(&at.member("id"), FaultCode::UnknownId, detail);
    }
    let row = row?;
    let max_speed = if needs_max_speed(row) {
        reader.required(&at_speed, max_speed, "is required: the cycle counts from it")?
    } else {
        Some(0.0)
    };
    Some((row, procedure::events(row, max_speed?, delays?)))
}

impl StopEvent {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Happening> {
        let stopping = Stopping {
            initial_speed: self.initial_speed.as_ref(),
            final_speed: self.final_speed.as_ref(),
            initial_rotational_speed: self.initial_rotational_speed.as_ref(),
            final_rotational_speed: self.final_rotational_speed.as_ref(),
            deceleration: self.deceleration.as_ref(),
            angular_deceleration: self.angular_deceleration.as_ref(),
            response: self.response.as_ref(),
        };
        let surroundings = Surroundings {
            grade: self.grade.as_ref(),
            drive_force: self.drive_force.as_ref(),
            direction: self.direction,
        };
        let demand = stopping.read(machine, at, reader);
        let situation = surroundings.read(machine, at, reader);
        let (situation, demand) = situation.zip(demand)?;
        Some(Happening::Stop { situation, demand })
    }
}

impl RunEvent {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Happening> {
        let is_shaft = matches!(machine, Machine::Shaft(_));
        let is_vehicle = matches!(machine, Machine::Vehicle(_));
        let (at_speed, at_turning) = (at.member("speed"), at.member("rotational_speed"));
        if let Some(grade) = &self.grade {
            let grade = reader.quantity(&at.member("grade"), grade);
            let situation = Situation { grade, ..Situation::level() };
            reader.take(at, situation.faults().into_result(()));
        }
        reader.not_applicable(
            &at.member("grade"),
            self.grade.is_some() && !is_vehicle,
            "belongs to vehicles only",
        );
        let speed = if is_shaft {
            reader.not_applicable(&at_speed, self.speed.is_some(), "a shaft has rotational_speed");
            let speed =
                reader.required(&at_turning, self.rotational_speed, "is required for a shaft");
            positive(&at_turning, speed?, reader)
        } else {
            reader.not_applicable(
                &at_turning,
                self.rotational_speed.is_some(),
                "belongs to shafts only; give speed",
            );
            let speed = reader.required(
                &at_speed,
                self.speed,
                "is required: the speed of the vehicle, load or belt",
            );
            positive(&at_speed, speed?, reader)
        };
        let time = self.time(is_shaft, speed, at, reader);
        Some(Happening::Run { speed: speed?, time: time? })
    }

    fn time(
        &self,
        is_shaft: bool,
        speed: Option<f64>,
        at: &At<'_>,
        reader: &mut Reader,
    ) -> Option<f64> {
        let at_distance = at.member("distance");
        match (self.time, self.distance) {
            (Some(time), None) => positive(&at.member("time"), time, reader),
            (None, Some(_)) if is_shaft => {
                reader.fault(
                    &at_distance,
                    FaultCode::NotApplicable,
                    "a shaft has no distance: give time",
                );
                None
            }
            (None, Some(distance)) => Some(positive(&at_distance, distance, reader)? / speed?),
            (Some(_), Some(_)) => {
                reader.fault(
                    &at_distance,
                    FaultCode::Conflict,
                    "give either this or time, not both",
                );
                None
            }
            (None, None) => {
                reader.fault(at, FaultCode::Missing, "give time or distance");
                None
            }
        }
    }
}

impl DescentEvent {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Happening> {
        if matches!(machine, Machine::Shaft(_)) {
            reader.fault(&at.member("kind"), FaultCode::NotApplicable, "a shaft does not descend");
            return None;
        }
        let surroundings = Surroundings {
            grade: self.grade.as_ref(),
            drive_force: self.drive_force.as_ref(),
            direction: self.direction,
        };
        let situation = surroundings.read(machine, at, reader);
        let speed = positive(&at.member("speed"), self.speed, reader);
        let distance = positive(&at.member("distance"), self.distance, reader);
        Some(Happening::Descent { situation: situation?, speed: speed?, distance: distance? })
    }
}

/// A quantity above zero, in coherent SI units.
pub fn positive<K: crate::api::measure::Kind>(
    at: &At<'_>,
    measure: crate::api::measure::Measure<K>,
    reader: &mut Reader,
) -> Option<f64> {
    let value = reader.quantity(at, &measure).si();
    if value > 0.0 {
        return Some(value);
    }
    reader.fault(at, FaultCode::NotPositive, "must be above 0");
    None
}
