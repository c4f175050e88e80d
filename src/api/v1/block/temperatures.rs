//! The temperatures around a brake, and what lies between repeated stops.

use crate::api::measure::{Finite, ReportUnits, StopFrequency, Temperature, Time};
use crate::api::parse::{At, DefaultValue, Reader};
use crate::calc::fault::FaultCode;
use crate::calc::quantity::{self, Si, ThermodynamicTemperature};

/// The temperature of the air, 20 degC if left out.
pub fn ambient(
    given: Option<&Temperature>,
    at: &At<'_>,
    reader: &mut Reader,
) -> ThermodynamicTemperature {
    reader.or_default(&at.member("ambient_temperature"), given, 20.0, "degC")
}

/// The temperature of the discs at the start, that of the air if left out.
pub fn start(
    given: Option<&Temperature>,
    ambient: ThermodynamicTemperature,
    units: ReportUnits,
    (at, reader): (&At<'_>, &mut Reader),
) -> ThermodynamicTemperature {
    let at = at.member("start_temperature");
    reader.optional(&at, given).unwrap_or_else(|| {
        let start = Temperature::report(ambient, units);
        let value = DefaultValue::Number(Finite(start.value()));
        reader.record(&at, value, Some(start.unit().symbol));
        ambient
    })
}

/// The time between the starts of two stops, given as such or as stops per time; none if neither is given.
pub fn interval(
    interval: Option<&Time>,
    frequency: Option<&StopFrequency>,
    (at, reader): (&At<'_>, &mut Reader),
) -> Option<quantity::Time> {
    let (at_interval, at_frequency) = (at.member("interval"), at.member("stop_frequency"));
    let interval = reader.optional(&at_interval, interval);
    let frequency = reader.optional(&at_frequency, frequency);
    match (interval, frequency) {
        (Some(_), Some(_)) => {
            let detail = "give either this or interval, not both";
            reader.fault(&at_frequency, FaultCode::Conflict, detail);
            None
        }
        (None, Some(frequency)) if frequency.si() > 0.0 => {
            Some(quantity::Time::from_si(1.0 / frequency.si()))
        }
        (None, Some(_)) => {
            reader.fault(&at_frequency, FaultCode::NotPositive, "must be above 0");
            None
        }
        (Some(interval), None) if interval.si() > 0.0 => Some(interval),
        (Some(_), None) => {
            reader.fault(&at_interval, FaultCode::NotPositive, "must be above 0");
            None
        }
        (None, None) => None,
    }
}
