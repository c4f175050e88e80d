//! A published test cycle as events of a duty.

use super::{Event, Gap};
use crate::calc::machine::Situation;
use crate::calc::motion::{Delays, Demand};
use crate::calc::quantity::{Angle, Si};
use crate::data::procedures::{ProcedureRow, ProcedureStep, Spacing};

/// Whether a test cycle needs the vehicle's maximum speed.
#[must_use]
pub fn needs_max_speed(row: &ProcedureRow) -> bool {
    let needs = |step: &ProcedureStep| {
        matches!(step, ProcedureStep::Stops { share_of_max_speed: Some(_), .. })
    };
    row.steps.iter().any(needs)
}

/// The events of a test cycle, for a vehicle of `max_speed`, m/s (0 where none is needed).
#[must_use]
pub fn events(row: &ProcedureRow, max_speed: f64, delays: Delays) -> Vec<Event> {
    row.steps.iter().flat_map(|step| events_of(step, max_speed, delays)).collect()
}

fn events_of(step: &ProcedureStep, max_speed: f64, delays: Delays) -> Vec<Event> {
    match *step {
        ProcedureStep::Stops {
            count,
            initial_speed,
            share_of_max_speed,
            final_share,
            deceleration,
            spacing,
        } => {
            let initial_speed = share_of_max_speed
                .map_or(initial_speed, |share| initial_speed.min(share * max_speed));
            let demand = Demand {
                initial_speed,
                final_speed: final_share * initial_speed,
                delays,
                deceleration: Some(deceleration),
            };
            let braking = Event::Stop { situation: Situation::level(), demand };
            // Driven up again at once, the vehicle runs at its speed until the next start.
            let gap = match spacing {
                Spacing::Time(time) => Gap::Time(time),
                Spacing::Distance(distance) => Gap::Distance(distance),
            };
            let space = Event::Space { gap, speed: initial_speed };
            (0..count).flat_map(|_| [braking, space]).collect()
        }
        ProcedureStep::Descent { speed, grade, distance } => {
            let situation = Situation { grade: Angle::from_si(grade), ..Situation::level() };
            vec![Event::Descent { situation, speed, distance }]
        }
    }
}
