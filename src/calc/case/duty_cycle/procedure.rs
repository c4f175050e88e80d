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
///
/// Between two stops the vehicle is driven up again until the next is due: on the way its discs cool at the mean of the
/// final speed of the one and the initial speed of the other, as under repeated stops. Nothing follows the last one.
#[must_use]
pub fn events(row: &ProcedureRow, max_speed: f64, delays: Delays) -> Vec<Event> {
    let mut events: Vec<Event> = Vec::new();
    let mut due: Option<Gap> = None;
    for step in &row.steps {
        let (count, event, spacing, then) = event_of(step, max_speed, delays);
        for _ in 0..count {
            if let Some(gap) = due {
                let ended = events.last().map_or(0.0, |last| last.speeds().1);
                let speed = f64::midpoint(ended, event.speeds().0);
                events.push(Event::Space { gap, speed });
            }
            events.push(event);
            due = spacing;
        }
        due = then;
    }
    events
}

/// How often a step has its event, the event, and what lies between two and before the next step.
fn event_of(
    step: &ProcedureStep,
    max_speed: f64,
    delays: Delays,
) -> (u32, Event, Option<Gap>, Option<Gap>) {
    match *step {
        ProcedureStep::Stops {
            count,
            initial_speed,
            share_of_max_speed,
            final_share,
            deceleration,
            spacing,
            then,
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
            (count, braking, Some(gap(spacing)), Some(gap(then)))
        }
        ProcedureStep::Descent { speed, grade, distance } => {
            let situation = Situation { grade: Angle::from_si(grade), ..Situation::level() };
            (1, Event::Descent { situation, speed, distance }, None, None)
        }
    }
}

const fn gap(spacing: Spacing) -> Gap {
    match spacing {
        Spacing::Time(time) => Gap::Time(time),
        Spacing::Distance(distance) => Gap::Distance(distance),
    }
}
