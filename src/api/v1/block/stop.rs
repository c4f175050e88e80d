//! The members that every request for a stop has, read once for all of them.

use serde::Deserialize;
use utoipa::ToSchema;

use super::delays::Response;
use super::fitted::Fitted;
use super::machine::Machine;
use crate::api::measure::Finite;
use crate::api::measure::{
    Acceleration, AngularAcceleration, Force, Grade, Measure, Pressure, ReportUnits,
    RotationalSpeed, Speed,
};
use crate::api::parse::{At, DefaultValue, Reader, RecordedDefault};
use crate::api::record::pointer_to;
use crate::calc::actuation::{Actuation as Chain, Input as Driving};
use crate::calc::case::stopping::Input;
use crate::calc::fitted::{Fitted as Entry, Pressed, press};
use crate::calc::machine::{Direction as Way, Situation};
use crate::calc::motion::{Coordinate, Delays, Demand};
use crate::calc::quantity::Si;

/// Which way a hoist's load moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Direction {
    /// Down.
    Lowering,
    /// Up.
    Raising,
}

/// What a stop is asked to do, as given.
#[derive(Debug, Clone, Copy)]
pub struct Stopping<'a> {
    /// Speed at the start, of a vehicle, load or belt.
    pub initial_speed: Option<&'a Speed>,
    /// Speed at the end, of a vehicle, load or belt.
    pub final_speed: Option<&'a Speed>,
    /// Speed at the start, of a shaft.
    pub initial_rotational_speed: Option<&'a RotationalSpeed>,
    /// Speed at the end, of a shaft.
    pub final_rotational_speed: Option<&'a RotationalSpeed>,
    /// Held after build-up, of a vehicle, load or belt.
    pub deceleration: Option<&'a Acceleration>,
    /// Held after build-up, of a shaft.
    pub angular_deceleration: Option<&'a AngularAcceleration>,
    /// The delays.
    pub response: Option<&'a Response>,
}

/// What surrounds a stop, as given.
#[derive(Debug, Clone, Copy)]
pub struct Surroundings<'a> {
    /// Slope, of a vehicle.
    pub grade: Option<&'a Grade>,
    /// Drive, of a vehicle.
    pub drive_force: Option<&'a Force>,
    /// Of a hoist.
    pub direction: Option<Direction>,
}

/// The members of a request for a stop.
#[derive(Debug, Clone, Copy)]
pub struct StopMembers<'a> {
    /// What is braked.
    pub machine: &'a Machine,
    /// Its brakes.
    pub fitted: &'a [Fitted],
    /// What the stop is asked to do.
    pub stopping: Stopping<'a>,
    /// What surrounds it.
    pub surroundings: Surroundings<'a>,
}

impl StopMembers<'_> {
    /// The stop that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Input> {
        let machine = self.machine.read(&at.member("machine"), reader);
        let is_vehicle = matches!(self.machine, Machine::Vehicle(_));
        let fitted = Fitted::read_all(self.fitted, is_vehicle, &at.member("fitted"), reader);
        if let Some(fitted) = &fitted {
            reader.take(&at.member("fitted"), press(fitted).map(drop));
        }
        let demand = self.stopping.read(self.machine, at, reader);
        let situation = self.surroundings.read(self.machine, at, reader);
        let input =
            Input { machine: machine?, fitted: fitted?, situation: situation?, demand: demand? };
        reader.take(at, input.faults().into_result(()))?;
        Some(input)
    }
}

impl Stopping<'_> {
    /// What the stop is asked to do.
    pub fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Demand> {
        let is_shaft = matches!(machine, Machine::Shaft(_));
        let (initial_speed, final_speed) =
            if is_shaft { self.turning(at, reader) } else { self.moving(at, reader) };
        let deceleration = self.held(is_shaft, at, reader);
        let delays = Response::read(self.response, &at.member("response"), reader);
        let coordinate = if is_shaft { Coordinate::Angle } else { Coordinate::Way };
        // Without delays: read on for the faults of the other members; the result is of no use.
        let demand = Demand {
            initial_speed: initial_speed?,
            final_speed,
            delays: delays.unwrap_or(Delays::NONE),
            deceleration,
        };
        let demand = reader.take(at, demand.faults(coordinate).into_result(demand));
        delays.and(demand)
    }

    fn moving(&self, at: &At<'_>, reader: &mut Reader) -> (Option<f64>, f64) {
        let detail = "belongs to shafts only; give initial_speed and final_speed";
        reader.not_applicable(
            &at.member("initial_rotational_speed"),
            self.initial_rotational_speed.is_some(),
            detail,
        );
        reader.not_applicable(
            &at.member("final_rotational_speed"),
            self.final_rotational_speed.is_some(),
            detail,
        );
        let at_initial = at.member("initial_speed");
        let initial = reader.optional(&at_initial, self.initial_speed);
        let initial = reader.required(
            &at_initial,
            initial,
            "is required: the speed of the vehicle, load or belt",
        );
        let end = reader.or_default(&at.member("final_speed"), self.final_speed, 0.0, "m/s");
        (initial.map(Si::si), end.si())
    }

    fn turning(&self, at: &At<'_>, reader: &mut Reader) -> (Option<f64>, f64) {
        let detail = "a shaft has initial_rotational_speed and final_rotational_speed";
        reader.not_applicable(&at.member("initial_speed"), self.initial_speed.is_some(), detail);
        reader.not_applicable(&at.member("final_speed"), self.final_speed.is_some(), detail);
        let at_initial = at.member("initial_rotational_speed");
        let initial = reader.optional(&at_initial, self.initial_rotational_speed);
        let initial = reader.required(&at_initial, initial, "is required for a shaft");
        let end = reader.or_default(
            &at.member("final_rotational_speed"),
            self.final_rotational_speed,
            0.0,
            "rpm",
        );
        (initial.map(Si::si), end.si())
    }

    fn held(&self, is_shaft: bool, at: &At<'_>, reader: &mut Reader) -> Option<f64> {
        let (at_linear, at_angular) =
            (at.member("deceleration"), at.member("angular_deceleration"));
        let linear = reader.optional(&at_linear, self.deceleration).map(Si::si);
        let angular = reader.optional(&at_angular, self.angular_deceleration).map(Si::si);
        if is_shaft {
            reader.not_applicable(&at_linear, linear.is_some(), "a shaft has angular_deceleration");
            angular
        } else {
            reader.not_applicable(
                &at_angular,
                angular.is_some(),
                "belongs to shafts only; give deceleration",
            );
            linear
        }
    }
}

impl Surroundings<'_> {
    /// The surroundings that are meant.
    pub fn read(&self, machine: &Machine, at: &At<'_>, reader: &mut Reader) -> Option<Situation> {
        let level = Situation::level();
        let (at_grade, at_drive) = (at.member("grade"), at.member("drive_force"));
        let (grade, drive_force) = if matches!(machine, Machine::Vehicle(_)) {
            let grade = reader.or_default(&at_grade, self.grade, 0.0, "%");
            (grade, reader.or_default(&at_drive, self.drive_force, 0.0, "N"))
        } else {
            reader.not_applicable(&at_grade, self.grade.is_some(), "belongs to vehicles only");
            reader.not_applicable(
                &at_drive,
                self.drive_force.is_some(),
                "belongs to vehicles only",
            );
            (level.grade, level.drive_force)
        };
        let at_direction = at.member("direction");
        let direction = if matches!(machine, Machine::Hoist(_)) {
            reader.required(
                &at_direction,
                self.direction,
                "is required for a hoist: lowering or raising",
            )?
        } else {
            reader.not_applicable(
                &at_direction,
                self.direction.is_some(),
                "belongs to hoists only",
            );
            Direction::Lowering
        };
        let direction = match direction {
            Direction::Lowering => Way::Lowering,
            Direction::Raising => Way::Raising,
        };
        let situation = Situation { grade, drive_force, direction };
        reader.take(at, situation.faults().into_result(situation))
    }
}

/// The maxima that stood in for inputs which were not given, as defaults on record.
#[must_use]
pub fn stood_in(
    fitted: &[Entry],
    pressed: &[Option<Pressed>],
    report_units: ReportUnits,
) -> Vec<RecordedDefault> {
    let entries = fitted.iter().zip(pressed).enumerate();
    entries
        .filter_map(|(index, (entry, pressed))| {
            stand_in(index, entry, pressed.as_ref()?, report_units)
        })
        .collect()
}

fn stand_in(
    index: usize,
    entry: &Entry,
    pressed: &Pressed,
    units: ReportUnits,
) -> Option<RecordedDefault> {
    if !pressed.chosen.is_maximum {
        return None;
    }
    let is_cable = matches!(entry.brake()?.parts().actuation, Some(Chain::Cable(_)));
    let (member, value, unit) = match pressed.chosen.input {
        Driving::LinePressure(pressure) => {
            recorded("line_pressure", &Pressure::report(pressure, units))
        }
        Driving::AirPressure(pressure) => {
            recorded("air_pressure", &Pressure::report(pressure, units))
        }
        Driving::OperatorForce(force) if is_cable => {
            recorded("operator_force", &Force::report(force, units))
        }
        Driving::OperatorForce(force) => {
            recorded("master_cylinder/operator_force", &Force::report(force, units))
        }
        Driving::Clamp(_) | Driving::SpringForce(_) => return None,
    };
    let pointer = pointer_to(&format!("fitted/{index}/brake/actuation/{member}"));
    Some(RecordedDefault { pointer, value, unit: Some(unit) })
}

fn recorded<K: crate::api::measure::Kind>(
    member: &'static str,
    measure: &Measure<K>,
) -> (&'static str, DefaultValue, &'static str) {
    (member, DefaultValue::Number(Finite(measure.value())), measure.unit().symbol)
}
