//! A stop of a duty at cold friction: found once for all events that are the same stop.

use std::rc::Rc;

use super::Event;
use crate::calc::machine::Situation;
use crate::calc::motion::{Demand, Ending, Stop};

/// Steps of a stop, growing from the first torque on.
pub(super) const STEPS: u32 = 40;

/// A stop at cold friction.
#[derive(Debug, Clone)]
pub(super) struct ColdStop {
    pub(super) stop: Stop,
    /// Work of the brakes of each axle.
    pub(super) work: [f64; 2],
    /// Its course from the first torque on; none if friction fades or the final speed is not reached.
    pub(super) nodes: Vec<Node>,
}

/// A moment of a stop.
#[derive(Debug, Clone, Copy)]
pub(super) struct Node {
    /// s, from the first torque on.
    pub(super) since: f64,
    /// Along the coordinate.
    pub(super) speed: f64,
    /// Of the brakes of each axle, W.
    pub(super) power: [f64; 2],
}

impl ColdStop {
    fn new(stop: Stop, fades: bool) -> Self {
        let is_followed = !fades && matches!(stop.ending, Ending::Reached(_));
        let (work, nodes) = if is_followed {
            (stop.path.brake_work(), nodes(&stop))
        } else {
            ([0.0; 2], Vec::new())
        };
        Self { stop, work, nodes }
    }

    /// The stops among some events, one for each that is a stop. None if one cannot be followed in numbers.
    ///
    /// A stop that is the same as the last stop before it is not computed again.
    pub(super) fn of_events(
        events: &[Event],
        fades: bool,
        stop: impl Fn(&Situation, &Demand) -> Option<Stop>,
    ) -> Option<Vec<Option<Rc<Self>>>> {
        let mut last: Option<(&Event, Rc<Self>)> = None;
        let mut stops = Vec::with_capacity(events.len());
        for event in events {
            let Event::Stop { situation, demand } = event else {
                stops.push(None);
                continue;
            };
            let cold = match last.take().filter(|(known, _)| *known == event) {
                Some((_, known)) => known,
                None => Rc::new(Self::new(stop(situation, demand)?, fades)),
            };
            stops.push(Some(Rc::clone(&cold)));
            last = Some((event, cold));
        }
        Some(stops)
    }
}

fn nodes(stop: &Stop) -> Vec<Node> {
    let path = &stop.path;
    let (begin, end) = (path.first_torque().time, path.end().time);
    let node = |(since, power)| Node { since, speed: path.at(begin + since).speed, power };
    refined(&path.brake_power(STEPS as usize), end - begin).into_iter().map(node).collect()
}

/// Power over time with nodes close enough for the slab: dense after the first torque, never wider than a fortieth.
fn refined(nodes: &[(f64, [f64; 2])], braking_time: f64) -> Vec<(f64, [f64; 2])> {
    let mut refined: Vec<(f64, [f64; 2])> = nodes.first().copied().into_iter().collect();
    for (from, to) in nodes.iter().zip(nodes.iter().skip(1)) {
        let share = if braking_time > 0.0 { (to.0 - from.0) / braking_time } else { 0.0 };
        let parts = (f64::from(STEPS) * share).ceil().clamp(1.0, f64::from(STEPS));
        let is_jump = from.0 <= 0.0 && from.1[0] + from.1[1] > 0.0;
        let mut part = 1.0;
        while part <= parts {
            let place = if is_jump { (part / parts) * (part / parts) } else { part / parts };
            let between = |one: f64, other: f64| one + (other - one) * place;
            refined.push((
                between(from.0, to.0),
                [between(from.1[0], to.1[0]), between(from.1[1], to.1[1])],
            ));
            part += 1.0;
        }
    }
    refined
}
