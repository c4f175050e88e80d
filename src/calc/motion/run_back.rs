//! A machine that comes to rest before the brake can hold it, and then moves the other way.

use super::forces::Forces;

/// A movement against the direction of the stop, until the brake holds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RunBack {
    /// From rest to rest, s; none if the brake never holds.
    pub time: Option<f64>,
    /// Along the coordinate, positive; none if the brake never holds.
    pub distance: Option<f64>,
    /// Highest speed on the way, positive; none if the brake never holds.
    pub peak_speed: Option<f64>,
}

const NEVER_HELD: RunBack = RunBack { time: None, distance: None, peak_speed: None };

/// A backward movement in the making: position and speed, both positive backwards.
struct Backward {
    time: f64,
    distance: f64,
    speed: f64,
    peak_speed: f64,
}

impl Backward {
    /// Moves on under an acceleration that starts at `start` and changes by `change` per time; true once at rest.
    fn go(&mut self, start: f64, change: f64, duration: f64) -> bool {
        let rest = super::path::time_to_speed(self.speed, -start, -change, 0.0, duration);
        let lasting = rest.unwrap_or(duration);
        let speed_at = |time: f64| self.speed + time * (start + 0.5 * change * time);
        let turning = if change < 0.0 { (-start / change).clamp(0.0, lasting) } else { lasting };
        self.peak_speed = self.peak_speed.max(speed_at(turning)).max(speed_at(lasting));
        let speed = speed_at(lasting);
        self.distance += lasting * (self.speed + lasting * (0.5 * start + change * lasting / 6.0));
        self.time += lasting;
        self.speed = if rest.is_some() { 0.0 } else { speed };
        rest.is_some()
    }
}

/// What follows a stop at rest, `since_dead` after the dead time (negative within it).
///
/// None if nothing moves the machine back or the brake already holds it. Resistance and the brake both act
/// against the movement; drag at these speeds is left out.
pub(super) fn run_back(forces: &Forces, since_dead: f64, build_up: f64) -> Option<RunBack> {
    let system = &forces.system;
    let reversing = system.reversing();
    let holding = |share: f64| {
        let instant = forces.at(share, 0.0);
        instant.brake[0] + instant.brake[1]
    };
    let share = if build_up > 0.0 {
        (since_dead / build_up).clamp(0.0, 1.0)
    } else {
        f64::from(since_dead >= 0.0)
    };
    let is_held = (share > 0.0 && holding(share) >= reversing) || reversing <= 0.0;
    if is_held {
        return None;
    }
    let acceleration = |share: f64| {
        (reversing - if share > 0.0 { holding(share) } else { 0.0 }) / system.inertia()
    };
    let mut backward = Backward { time: 0.0, distance: 0.0, speed: 0.0, peak_speed: 0.0 };
    let waiting = (-since_dead).max(0.0);
    let rising = build_up * (1.0 - share);
    let change =
        if rising > 0.0 { (acceleration(1.0) - acceleration(share)) / rising } else { 0.0 };
    let is_at_rest = backward.go(acceleration(0.0), 0.0, waiting)
        || (rising > 0.0 && backward.go(acceleration(share), change, rising))
        || (acceleration(1.0) < 0.0 && backward.go(acceleration(1.0), 0.0, f64::MAX));
    Some(if is_at_rest {
        RunBack {
            time: Some(backward.time),
            distance: Some(backward.distance),
            peak_speed: Some(backward.peak_speed),
        }
    } else {
        NEVER_HELD
    })
}
