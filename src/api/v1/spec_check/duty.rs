//! The duties of a spec check, as given.

use serde::Deserialize;
use utoipa::ToSchema;

use super::require::{HoldRequirements, Requirements};
use crate::api::measure::{
    Acceleration, AngularAcceleration, Force, Grade, Length, ReportUnits, RotationalSpeed, Speed,
    StopFrequency, Temperature, Time,
};
use crate::api::parse::{At, Reader};
use crate::api::v1::block::delays::Response;
use crate::api::v1::block::event::{positive, procedure_events};
use crate::api::v1::block::machine::Machine;
use crate::api::v1::block::stop::{Direction, Stopping, Surroundings};
use crate::api::v1::block::temperatures;
use crate::calc::case::spec_check::{Duty as Meant, Limb, Task, Use};
use crate::calc::fault::FaultCode;
use crate::calc::machine::Situation;
use crate::calc::motion::Demand;
use crate::calc::quantity::{Angle, Si, ThermodynamicTemperature};
use crate::data::rules;
use crate::{only_word, tagged_union};

tagged_union! {
    /// Something that the brakes are put through.
    Duty by "kind" {
        "stop" => Stop(StopDuty),
        "repeated_stops" => RepeatedStops(RepeatedStopsDuty),
        "descent" => Descent(DescentDuty),
        "hold" => Hold(HoldDuty),
        "rule" => Rule(RuleDuty),
        "procedure" => Procedure(ProcedureDuty),
    }
}

only_word! {
    /// Says that the machine stops once.
    StopDutyKind = "stop";
    /// Says that the machine stops again and again.
    RepeatedStopsKind = "repeated_stops";
    /// Says that the brakes hold a speed.
    DescentDutyKind = "descent";
    /// Says that the brakes hold at rest.
    HoldKind = "hold";
    /// Says that a published requirement is to be met.
    RuleKind = "rule";
    /// Says that a published test cycle is driven.
    ProcedureDutyKind = "procedure";
}

/// Brakes of an entry that act in a duty.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct BrakeUse {
    /// Which entry of `fitted`.
    #[serde(deserialize_with = "crate::api::count::required")]
    pub fitted_index: u32,
    /// How many of its brakes act; all if left out.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub count: Option<u32>,
}

/// One stop, or slowing down to a speed.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct StopDuty {
    /// The kind.
    pub kind: StopDutyKind,
    /// The caller's name for it.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 200>")]
    #[schema(nullable = false, max_length = 200)]
    pub name: Option<String>,
    /// Which brakes act; all if left out.
    #[schema(nullable = false, min_items = 1, max_items = 100)]
    pub uses: Option<Vec<BrakeUse>>,
    /// Temperature of the discs before the stop; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
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
    /// What the stop is held against.
    #[schema(nullable = false)]
    pub require: Option<Requirements>,
}

/// The same stop again and again, until nothing changes any more or as often as asked. It heats the brakes: stops,
/// holds and rules are judged as hot as it makes them, too. Its own requirements are judged at cold friction: give the
/// stop as a duty of its own to have it judged hot.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RepeatedStopsDuty {
    /// The kind.
    pub kind: RepeatedStopsKind,
    /// The caller's name for it.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 200>")]
    #[schema(nullable = false, max_length = 200)]
    pub name: Option<String>,
    /// Which brakes act; all if left out.
    #[schema(nullable = false, min_items = 1, max_items = 100)]
    pub uses: Option<Vec<BrakeUse>>,
    /// Temperature of the discs before the first stop; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
    /// Time between the starts of two stops, longer than the braking. Give this or `stop_frequency`.
    #[schema(nullable = false)]
    pub interval: Option<Time>,
    /// The same as stops per time.
    #[schema(nullable = false)]
    pub stop_frequency: Option<StopFrequency>,
    /// How many, 1 or more, and times the fitted entries at most 10000, in all duties together; until steady if left
    /// out.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub stop_count: Option<u32>,
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
    /// Delays of each stop.
    #[schema(nullable = false)]
    pub response: Option<Response>,
    /// What each stop is held against.
    #[schema(nullable = false)]
    pub require: Option<Requirements>,
}

/// A speed held by the brakes over a distance: downhill on a vehicle, a load that drives on a hoist or conveyor. It
/// heats the brakes, as repeated stops do.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DescentDuty {
    /// The kind.
    pub kind: DescentDutyKind,
    /// The caller's name for it.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 200>")]
    #[schema(nullable = false, max_length = 200)]
    pub name: Option<String>,
    /// Which brakes act; all if left out.
    #[schema(nullable = false, min_items = 1, max_items = 100)]
    pub uses: Option<Vec<BrakeUse>>,
    /// Temperature of the discs at the start; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
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

/// At rest, against what pulls: the slope of a vehicle, the load of a hoist or belt, the torque on a shaft.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct HoldDuty {
    /// The kind.
    pub kind: HoldKind,
    /// The caller's name for it.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 200>")]
    #[schema(nullable = false, max_length = 200)]
    pub name: Option<String>,
    /// Which brakes act; all if left out.
    #[schema(nullable = false, min_items = 1, max_items = 100)]
    pub uses: Option<Vec<BrakeUse>>,
    /// Temperature of the discs; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
    /// Slope that a vehicle stands on, positive facing uphill; level if left out.
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// What the hold is held against.
    #[schema(nullable = false)]
    pub require: Option<HoldRequirements>,
}

/// A published requirement: a row of `GET /v1/rules`. A calculation does not replace its test.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RuleDuty {
    /// The kind.
    pub kind: RuleKind,
    /// The caller's name for it.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 200>")]
    #[schema(nullable = false, max_length = 200)]
    pub name: Option<String>,
    /// Which brakes act; all if left out.
    #[schema(nullable = false, min_items = 1, max_items = 100)]
    pub uses: Option<Vec<BrakeUse>>,
    /// Temperature of the discs before each stop; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
    /// A row of `GET /v1/rules`.
    #[schema(example = "cfr49_571_135_s7_5")]
    pub id: String,
    /// Delays. Without them no distance and no time is judged.
    #[schema(nullable = false)]
    pub response: Option<Response>,
    /// Maximum speed of the machine; some requirements count from it.
    #[schema(nullable = false)]
    pub max_speed: Option<Speed>,
    /// The same for a shaft.
    #[schema(nullable = false)]
    pub max_rotational_speed: Option<RotationalSpeed>,
    /// What moves the control, where a requirement tells hand and foot apart.
    #[schema(nullable = false)]
    pub operated_by: Option<OperatedBy>,
}

/// What moves a control.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum OperatedBy {
    /// A hand.
    Hand,
    /// A foot.
    Foot,
}

/// A published test cycle of vehicles: a row of `GET /v1/procedures`. A calculation does not replace the test. It heats
/// the brakes, as repeated stops do.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ProcedureDuty {
    /// The kind.
    pub kind: ProcedureDutyKind,
    /// The caller's name for it.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 200>")]
    #[schema(nullable = false, max_length = 200)]
    pub name: Option<String>,
    /// Which brakes act; all if left out.
    #[schema(nullable = false, min_items = 1, max_items = 100)]
    pub uses: Option<Vec<BrakeUse>>,
    /// Temperature of the discs at the start; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
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

/// What surrounds the reading of a duty.
#[derive(Debug, Clone, Copy)]
pub struct Around<'a> {
    /// The machine.
    pub machine: &'a Machine,
    /// Temperature of the air.
    pub ambient: ThermodynamicTemperature,
    /// Units of the answer.
    pub units: ReportUnits,
}

impl Duty {
    /// The word that tells which it is.
    #[must_use]
    pub const fn kind(&self) -> &'static str {
        match self {
            Self::Stop(_) => "stop",
            Self::RepeatedStops(_) => "repeated_stops",
            Self::Descent(_) => "descent",
            Self::Hold(_) => "hold",
            Self::Rule(_) => "rule",
            Self::Procedure(_) => "procedure",
        }
    }

    /// The caller's name for it.
    #[must_use]
    pub fn name(&self) -> Option<&str> {
        match self {
            Self::Stop(duty) => duty.name.as_deref(),
            Self::RepeatedStops(duty) => duty.name.as_deref(),
            Self::Descent(duty) => duty.name.as_deref(),
            Self::Hold(duty) => duty.name.as_deref(),
            Self::Rule(duty) => duty.name.as_deref(),
            Self::Procedure(duty) => duty.name.as_deref(),
        }
    }

    fn uses(&self) -> Option<&[BrakeUse]> {
        match self {
            Self::Stop(duty) => duty.uses.as_deref(),
            Self::RepeatedStops(duty) => duty.uses.as_deref(),
            Self::Descent(duty) => duty.uses.as_deref(),
            Self::Hold(duty) => duty.uses.as_deref(),
            Self::Rule(duty) => duty.uses.as_deref(),
            Self::Procedure(duty) => duty.uses.as_deref(),
        }
    }

    /// The temperature at the start, if it is given.
    const fn start(&self) -> Option<&Temperature> {
        match self {
            Self::Stop(duty) => duty.start_temperature.as_ref(),
            Self::RepeatedStops(duty) => duty.start_temperature.as_ref(),
            Self::Descent(duty) => duty.start_temperature.as_ref(),
            Self::Hold(duty) => duty.start_temperature.as_ref(),
            Self::Rule(duty) => duty.start_temperature.as_ref(),
            Self::Procedure(duty) => duty.start_temperature.as_ref(),
        }
    }

    /// The duty that is meant.
    pub fn read(&self, around: Around<'_>, at: &At<'_>, reader: &mut Reader) -> Option<Meant> {
        let uses = self.uses().map(|uses| uses.iter().map(BrakeUse::read).collect());
        let start_temperature =
            temperatures::start(self.start(), around.ambient, around.units, (at, reader));
        let task = match self {
            Self::Stop(duty) => duty.read(around.machine, at, reader),
            Self::RepeatedStops(duty) => duty.read(around.machine, at, reader),
            Self::Descent(duty) => duty.read(around.machine, at, reader),
            Self::Hold(duty) => duty.read(around.machine, at, reader),
            Self::Rule(duty) => duty.read(around.machine, at, reader),
            Self::Procedure(duty) => duty.read(around.machine, at, reader),
        };
        Some(Meant { uses, start_temperature, task: task? })
    }
}

impl BrakeUse {
    fn read(&self) -> Use {
        let fitted_index = usize::try_from(self.fitted_index).unwrap_or(usize::MAX);
        Use { fitted_index, count: self.count }
    }
}

/// Reads the members that every stop has.
macro_rules! read_stop {
    ($duty:expr, $machine:expr, $at:expr, $reader:expr) => {{
        let stopping = Stopping {
            initial_speed: $duty.initial_speed.as_ref(),
            final_speed: $duty.final_speed.as_ref(),
            initial_rotational_speed: $duty.initial_rotational_speed.as_ref(),
            final_rotational_speed: $duty.final_rotational_speed.as_ref(),
            deceleration: $duty.deceleration.as_ref(),
            angular_deceleration: $duty.angular_deceleration.as_ref(),
            response: $duty.response.as_ref(),
        };
        let surroundings = Surroundings {
            grade: $duty.grade.as_ref(),
            drive_force: $duty.drive_force.as_ref(),
            direction: $duty.direction,
        };
        let demand: Option<Demand> = stopping.read($machine, $at, $reader);
        let situation: Option<Situation> = surroundings.read($machine, $at, $reader);
        let limits = $duty.require.unwrap_or_default().read(&$at.member("require"), $reader);
        (situation, demand, limits)
    }};
}

impl StopDuty {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Task> {
        let (situation, demand, limits) = read_stop!(self, machine, at, reader);
        Some(Task::Stop { situation: situation?, demand: demand?, limits })
    }
}

impl RepeatedStopsDuty {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Task> {
        let (situation, demand, limits) = read_stop!(self, machine, at, reader);
        let (interval, frequency) = (self.interval.as_ref(), self.stop_frequency.as_ref());
        let found = temperatures::interval(interval, frequency, (at, reader));
        if interval.is_none() && frequency.is_none() {
            reader.fault(at, FaultCode::Missing, "give interval or stop_frequency");
        }
        Some(Task::RepeatedStops {
            situation: situation?,
            demand: demand?,
            limits,
            interval: found?,
            stop_count: self.stop_count,
        })
    }
}

impl DescentDuty {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Task> {
        if matches!(machine, Machine::Shaft(_)) {
            let detail = "a shaft does not descend";
            reader.fault(&at.member("kind"), FaultCode::NotApplicable, detail);
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
        Some(Task::Descent { situation: situation?, speed: speed?, distance: distance? })
    }
}

impl HoldDuty {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Task> {
        let at_grade = at.member("grade");
        let is_vehicle = matches!(machine, Machine::Vehicle(_));
        let grade = if is_vehicle {
            reader.or_default(&at_grade, self.grade.as_ref(), 0.0, "%")
        } else {
            reader.not_applicable(&at_grade, self.grade.is_some(), "belongs to vehicles only");
            Angle::from_si(0.0)
        };
        let situation = Situation { grade, ..Situation::level() };
        let situation = reader.take(at, situation.faults().into_result(situation));
        let at_require = at.member("require");
        let limits = self.require.unwrap_or_default().read(&at_require, reader);
        Some(Task::Hold { situation: situation?, limits })
    }
}

impl RuleDuty {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Task> {
        let at_response = at.member("response");
        let response = self.response.as_ref();
        let delays = response.map(|given| Response::read(Some(given), &at_response, reader));
        let max_speed = self.max_speed(machine, at, reader);
        let row = rules::find(&self.id);
        if row.is_none() {
            let near = rules::closest(&self.id);
            let hint = near.map_or(String::new(), |near| format!("; did you mean {near}?"));
            let detail = format!("is not a row of GET /v1/rules{hint}");
            reader.fault(&at.member("id"), FaultCode::UnknownId, detail);
        }
        let delays = match delays {
            Some(delays) => Some(delays?),
            None => None,
        };
        let operated_by = self.operated_by.map(|by| match by {
            OperatedBy::Hand => Limb::Hand,
            OperatedBy::Foot => Limb::Foot,
        });
        Some(Task::Rule { row: row?, delays, max_speed, operated_by })
    }

    /// The maximum speed, if it is given. A wrong one is a fault, and the value is of no use then.
    fn max_speed(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<f64> {
        let (at_speed, at_turning) = (at.member("max_speed"), at.member("max_rotational_speed"));
        if matches!(machine, Machine::Shaft(_)) {
            let detail = "a shaft has max_rotational_speed";
            reader.not_applicable(&at_speed, self.max_speed.is_some(), detail);
            return positive(&at_turning, self.max_rotational_speed?, reader);
        }
        let detail = "belongs to shafts only; give max_speed";
        reader.not_applicable(&at_turning, self.max_rotational_speed.is_some(), detail);
        positive(&at_speed, self.max_speed?, reader)
    }
}

impl ProcedureDuty {
    fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Task> {
        let (max_speed, response) = (self.max_speed.as_ref(), self.response.as_ref());
        let (row, events) = procedure_events(&self.id, max_speed, response, (machine, at, reader))?;
        Some(Task::Procedure { row, events })
    }
}
