//! How a machine stops: time, way, deceleration, and what limits it.

use crate::calc::actuation::Pressing;
use crate::calc::brake::Spot;
use crate::calc::disc::Cooling;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::{
    Caution, CheckCode, Finding, Notice, Remarks, Severity, Subject, WarningCode,
};
use crate::calc::fitted::{Fitted, Place, Pressed, eased, friction_cases, operator_stroke, press};
use crate::calc::friction::FrictionCase;
use crate::calc::machine::{Machine, Situation, Vehicle};
use crate::calc::motion::{
    AXLE_FORCES, Coordinate, DRAG, Demand, Ending, Forces, Instant, LOCK_ORDER, LimitedBy,
    LockFactors, MEAN_FULLY_DEVELOPED, PHASES, Reduced, Stop, lock_factors, stop,
};
use crate::calc::pressure::FRICTION_TORQUE;
use crate::calc::quantity::{Amount, Dimension, STANDARD_GRAVITY, Si, Torque, Volume};

/// A machine, its brakes and the stop asked of them. Speeds and the deceleration are SI along the coordinate:
/// m/s and m/s² of a vehicle, load or belt, rad/s and rad/s² of a shaft.
#[derive(Debug, Clone, PartialEq)]
pub struct Input {
    /// What is braked.
    pub machine: Machine,
    /// Its brakes, 1 to 100 entries.
    pub fitted: Vec<Fitted>,
    /// What surrounds the stop.
    pub situation: Situation,
    /// What the stop is asked to do.
    pub demand: Demand,
}

/// The stop, once per friction case.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// The results.
    pub friction_cases: Vec<CaseOutcome>,
    /// What presses each entry; none for an entry of known torque.
    pub pressed: Vec<Option<Pressed>>,
    /// How far each axle is from locking with front linings at low and rear ones at high friction.
    pub mixed_lock: Option<LockFactors>,
    /// What is to be said about the results.
    pub remarks: Remarks,
}

/// The stop at one friction.
#[derive(Debug, Clone)]
pub struct CaseOutcome {
    /// Which.
    pub friction_case: FrictionCase,
    /// The stop.
    pub stop: Stop,
    /// Torque of one brake of each entry at full application.
    pub full_torques: Vec<Torque>,
    /// Brake force of each entry's brakes together at full application, split into front (or all) and rear.
    pub demands: Vec<[f64; 2]>,
    /// The balance of forces where the deceleration is highest, and the fraction applied there.
    pub hardest: Option<(Instant, f64)>,
    /// How far each axle is from locking, if axle loads and adhesion are known.
    pub lock: Option<LockFactors>,
}

impl CaseOutcome {
    /// Torque that one brake of an entry is asked for once built up.
    #[must_use]
    pub fn torque(&self, index: usize) -> Torque {
        let full = self.full_torques.get(index).map_or(0.0, |torque| torque.si());
        Torque::from_si(full * self.stop.fraction)
    }

    /// What part of the brake work of each axle, front (or all) and rear, one brake of an entry does.
    #[must_use]
    pub fn shares_of_one_brake(&self, index: usize, entry: &Fitted) -> [f64; 2] {
        let own = self.demands.get(index).copied().unwrap_or([0.0; 2]);
        let count = f64::from(entry.parts().count);
        let total = self.stop.path.forces().demand;
        [0, 1].map(|axle: usize| match (own.get(axle), total.get(axle)) {
            (Some(own), Some(total)) if *total > 0.0 => own / total / count,
            _ => 0.0,
        })
    }

    /// What limits the deceleration where it is highest.
    #[must_use]
    pub fn limited_by(&self) -> LimitedBy {
        match self.hardest {
            // The operator asks for no more, even if one axle holds no more on the way there.
            _ if self.stop.is_modulated => LimitedBy::Operator,
            Some((instant, _)) => instant.limited_by,
            None => LimitedBy::Brake,
        }
    }

    /// Mean deceleration from the first torque to the end; none if no torque acted.
    #[must_use]
    pub fn mean_deceleration(&self, final_speed: f64) -> Option<f64> {
        let (begin, end) = (self.stop.path.first_torque(), self.stop.path.end());
        let way = end.distance - begin.distance;
        (way > 0.0).then(|| (begin.speed * begin.speed - final_speed * final_speed) / (2.0 * way))
    }

    /// Mean fully developed deceleration; none if the final speed is above a tenth of the initial one.
    ///
    /// See [`MEAN_FULLY_DEVELOPED`].
    #[must_use]
    pub fn mean_fully_developed_deceleration(&self, demand: &Demand) -> Option<f64> {
        let (begin, end) = (0.8 * demand.initial_speed, 0.1 * demand.initial_speed);
        if demand.final_speed > end {
            return None;
        }
        let path = &self.stop.path;
        let at_end = path.falling_through(end).unwrap_or_else(|| path.end());
        let way = at_end.distance - path.falling_through(begin)?.distance;
        (way > 0.0).then(|| (begin * begin - end * end) / (2.0 * way))
    }
}

impl Input {
    /// What is impossible about the stop. Members are those of the request.
    #[must_use]
    pub fn faults(&self) -> Faults {
        let mut faults = Faults::new();
        faults.part("", self.demand.faults(self.machine.coordinate()).into_result(()));
        faults.part("", self.situation.faults().into_result(()));
        let holds = (1..=100).contains(&self.fitted.len());
        faults.require(holds, "fitted", FaultCode::WrongCount, "must have 1 to 100 entries");
        place_faults(&self.machine, &self.fitted, &mut faults);
        faults
    }
}

/// What does not fit between a machine and its brakes. Members are those of the request.
pub fn place_faults(machine: &Machine, fitted: &[Fitted], faults: &mut Faults) {
    let is_vehicle = machine.vehicle().is_some();
    for (index, entry) in fitted.iter().enumerate() {
        let at = format!("fitted/{index}");
        let parts = entry.parts();
        let found = entry_faults(is_vehicle, parts.place, parts.rolling_radius.is_some());
        faults.part(&at, found.into_result(()));
        let cooling = entry.brake().and_then(|brake| brake.parts().disc.as_ref()?.cooling());
        if !is_vehicle && cooling == Some(Cooling::Airstream) {
            let detail = "belongs to vehicles only: nothing else moves its disc through the air";
            let at = format!("{at}/brake/disc/cooling/model");
            faults.add(at, FaultCode::NotApplicable, detail);
        }
    }
}

/// Demands an axle on a vehicle, and neither axle nor rolling radius elsewhere. Members are those of an entry.
#[must_use]
pub fn entry_faults(is_vehicle: bool, place: Option<Place>, has_rolling_radius: bool) -> Faults {
    let mut faults = Faults::new();
    match (is_vehicle, place) {
        (true, None) => {
            let detail = "is required on a vehicle: front, rear or all";
            faults.add("axle", FaultCode::Missing, detail);
        }
        (false, Some(_)) => {
            faults.add("axle", FaultCode::NotApplicable, "belongs to vehicles only");
        }
        _ => {}
    }
    if !is_vehicle && has_rolling_radius {
        faults.add("rolling_radius", FaultCode::NotApplicable, "belongs to vehicles only");
    }
    faults
}

/// Computes the stop.
///
/// # Errors
/// All that is impossible about the input, or a result beyond what numbers can hold.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let mut faults = input.faults();
    let Some(pressed) = faults.part("fitted", press(&input.fitted)) else { return Err(faults) };
    faults.into_result(())?;
    evaluate_pressed(input, pressed)
}

/// Computes the stop of an input without faults whose brakes are pressed as said.
///
/// # Errors
/// A result beyond what numbers can hold.
pub fn evaluate_pressed(input: &Input, pressed: Vec<Option<Pressed>>) -> Result<Outcome, Faults> {
    let system = input.machine.reduced(&input.situation);
    let cases = friction_cases(&input.fitted).iter();
    let found: Option<Vec<CaseOutcome>> =
        cases.map(|&case| computed(input, &system, &pressed, case)).collect();
    let Some(friction_cases) = found else {
        let mut faults = Faults::new();
        faults.add("", FaultCode::OutOfRange, "the stop leaves the range that numbers can follow");
        return Err(faults);
    };
    let mixed_lock = mixed_lock(input, &system, &friction_cases);
    let remarks = remarks(input, &system, &pressed, (&friction_cases, mixed_lock));
    Ok(Outcome { friction_cases, pressed, mixed_lock, remarks })
}

fn computed(
    input: &Input,
    system: &Reduced,
    pressed: &[Option<Pressed>],
    case: FrictionCase,
) -> Option<CaseOutcome> {
    let torques = full_torques(&input.fitted, pressed, case);
    let demands = brake_forces(&input.machine, &input.fitted, &torques);
    let forces = Forces::new(*system, total(&demands));
    let stop = stop(&forces, &input.demand)?;
    let hardest = stop.path.hardest();
    let lock = forces.lock_factors(hardest.map_or(input.demand.initial_speed, |(.., speed)| speed));
    let is_finite = stop.path.end().time.is_finite() && stop.path.end().distance.is_finite();
    let hardest = hardest.map(|(instant, fraction, _)| (instant, fraction));
    // A stop that full torque cannot begin is limited by what limits full torque.
    let hardest = match stop.ending {
        Ending::NotReached { .. } => {
            hardest.or_else(|| Some((forces.at(1.0, input.demand.final_speed), 1.0)))
        }
        Ending::Reached(_) => hardest,
    };
    is_finite.then_some(CaseOutcome {
        friction_case: case,
        stop,
        full_torques: torques,
        demands,
        hardest,
        lock,
    })
}

/// Torque of one brake of each entry at full application.
#[must_use]
pub fn full_torques(
    fitted: &[Fitted],
    pressed: &[Option<Pressed>],
    case: FrictionCase,
) -> Vec<Torque> {
    fitted
        .iter()
        .zip(pressed)
        .map(|(entry, pressed)| entry.torque(case, pressed.as_ref()))
        .collect()
}

/// Brake force of each entry's brakes together along the coordinate, split into front (or all) and rear.
#[must_use]
pub fn brake_forces(machine: &Machine, fitted: &[Fitted], torques: &[Torque]) -> Vec<[f64; 2]> {
    fitted.iter().zip(torques).map(|(entry, torque)| brake_force(machine, entry, *torque)).collect()
}

/// The brake force of an entry along the coordinate, front (or all) and rear, with `torque` per brake.
fn brake_force(machine: &Machine, entry: &Fitted, torque: Torque) -> [f64; 2] {
    let parts = entry.parts();
    let per_torque = machine.shaft_per_coordinate(parts.rolling_radius)
        * parts.speed_ratio
        * f64::from(parts.count);
    let force = torque.si() * per_torque;
    let has_axles = machine.vehicle().is_some_and(Vehicle::has_geometry);
    match parts.place {
        Some(Place::Rear) if has_axles => [0.0, force],
        Some(Place::All) if has_axles => [0.5 * force, 0.5 * force],
        _ => [force, 0.0],
    }
}

/// The sum of brake forces, front (or all) and rear.
#[must_use]
pub fn total(demands: &[[f64; 2]]) -> [f64; 2] {
    demands.iter().fold([0.0; 2], |sum, demand| [sum[0] + demand[0], sum[1] + demand[1]])
}

/// Highest speed of an entry's brake shaft, rad/s, while torque acts.
#[must_use]
pub fn highest_brake_speed(input: &Input, entry: &Fitted, stop: &Stop) -> f64 {
    let parts = entry.parts();
    let per_coordinate =
        input.machine.shaft_per_coordinate(parts.rolling_radius) * parts.speed_ratio;
    stop.path.highest_speed_with_torque() * per_coordinate
}

fn remarks(
    input: &Input,
    system: &Reduced,
    pressed: &[Option<Pressed>],
    (cases, mixed_lock): (&[CaseOutcome], Option<LockFactors>),
) -> Remarks {
    let mut remarks = Remarks::new();
    note_methods(&mut remarks, input, system);
    note_machine(&mut remarks, input);
    for (index, entry) in input.fitted.iter().enumerate() {
        if let Some(brake) = entry.brake() {
            brake.remark(&mut remarks, Some(index));
            remarks.method(&FRICTION_TORQUE);
        }
    }
    for case in cases {
        note_ending(&mut remarks, case);
        note_limits(&mut remarks, input, case);
        note_pressing(&mut remarks, input, pressed, case);
    }
    note_lock_order(&mut remarks, cases, mixed_lock);
    remarks
}

fn note_methods(remarks: &mut Remarks, input: &Input, system: &Reduced) {
    remarks.method(input.machine.method());
    remarks.method(&PHASES);
    if system.drag > 0.0 {
        remarks.method(&DRAG);
    }
    if system.coordinate == Coordinate::Way
        && input.demand.final_speed <= 0.1 * input.demand.initial_speed
    {
        remarks.method(&MEAN_FULLY_DEVELOPED);
    }
    if let Some(tires) = system.tires
        && (tires.adhesion.is_some() || tires.wheelbase.is_some())
    {
        remarks.method(&AXLE_FORCES);
    }
}

fn note_machine(remarks: &mut Remarks, input: &Input) {
    let at = |member| Subject::Request(member);
    if matches!(input.machine, Machine::Hoist(_)) {
        remarks.caution(Caution::SuspendedLoad);
    }
    let Some(vehicle) = input.machine.vehicle() else { return };
    match vehicle.adhesion() {
        None => {
            let detail = "what the tires carry was not considered: give machine/adhesion to see whether they hold";
            remarks.notice(Notice::AdhesionNotConsidered, Severity::Info, at("machine"), detail);
        }
        Some(adhesion) if adhesion > 1.2 => {
            let detail = "the adhesion is above 1.2, which few tires reach on any ground";
            remarks.notice(
                Notice::AdhesionUnusuallyHigh,
                Severity::Info,
                at("machine/adhesion"),
                detail,
            );
        }
        Some(_) => {}
    }
    let tells_axles = input.fitted.iter().any(|entry| entry.parts().place != Some(Place::All));
    if vehicle.adhesion().is_some() && !vehicle.has_geometry() && tells_axles {
        let detail = "axle loads are unknown: the adhesion limit was taken for the whole vehicle, which is more than one axle holds; give machine/geometry";
        remarks.notice(Notice::LoadTransferNotConsidered, Severity::Info, at("machine"), detail);
    }
}

fn note_ending(remarks: &mut Remarks, case: &CaseOutcome) {
    let stop = &case.stop;
    let dimension = match stop.path.forces().system.coordinate {
        Coordinate::Way => Dimension::Force,
        Coordinate::Angle => Dimension::Torque,
    };
    match stop.ending {
        Ending::NotReached { .. } => {
            let code = WarningCode::Check(CheckCode::Stops);
            // Cases come from low to high friction: the first that fails is the worst. Balanced is not stopped.
            if remarks.findings().iter().all(|known| known.code != code) {
                remarks.find(Finding {
                    code,
                    severity: Severity::Exceeded,
                    subject: Subject::Request("fitted"),
                    friction_case: Some(case.friction_case),
                    actual: Some(Amount { dimension, si: stop.driving }),
                    limit: Some(Amount { dimension, si: stop.available }),
                    detail: "what drives the machine is not less than what its brakes hold: it does not stop"
                        .to_owned(),
                });
            }
        }
        Ending::Reached(Some(run_back)) => {
            let is_held = run_back.time.is_some();
            let (severity, detail) = if is_held {
                (
                    Severity::Info,
                    "the machine comes to rest before the brake holds it, and moves the other way until it does",
                )
            } else {
                (
                    Severity::Exceeded,
                    "the machine comes to rest, and the brake cannot keep it from moving the other way",
                )
            };
            let subject = Subject::Request("response");
            remarks.find(
                Finding::notice(Notice::RunsBackBeforeBrake, severity, subject, detail)
                    .in_case(case.friction_case),
            );
        }
        Ending::Reached(None) => {}
    }
}

fn note_limits(remarks: &mut Remarks, input: &Input, case: &CaseOutcome) {
    let mut find = |code, severity, member, detail: &str| {
        let subject = Subject::Request(member);
        let is_known = remarks
            .findings()
            .iter()
            .any(|known| known.code == WarningCode::Notice(code) && known.subject == subject);
        if !is_known {
            remarks
                .find(Finding::notice(code, severity, subject, detail).in_case(case.friction_case));
        }
    };
    if input.demand.deceleration.is_some() && !case.stop.is_modulated && case.hardest.is_some() {
        let detail =
            "the deceleration asked for is more than brakes and tires give: full torque was taken";
        let member = match input.machine.coordinate() {
            Coordinate::Way => "deceleration",
            Coordinate::Angle => "angular_deceleration",
        };
        find(Notice::DecelerationNotReached, Severity::Exceeded, member, detail);
    }
    match case.hardest.map(|(instant, _)| instant.limited_by) {
        Some(LimitedBy::Adhesion) => {
            let detail = "the brakes can lock a wheel; a sliding wheel brakes less than computed here and does not steer";
            find(Notice::WheelLockPossible, Severity::Info, "machine/adhesion", detail);
            let detail = "braking at the limit of adhesion is taken as controlled: with locked wheels the way is longer";
            find(Notice::SlidingFrictionLower, Severity::Info, "machine/adhesion", detail);
        }
        Some(LimitedBy::RearWheelLift) => {
            let detail =
                "the brakes can lift the rear wheel; the deceleration is held at that limit";
            find(Notice::RearWheelLift, Severity::Info, "machine/geometry", detail);
        }
        _ => {}
    }
    if !matches!(case.stop.ending, Ending::Reached(_)) {
        return;
    }
    if case.stop.path.end().time - input.demand.delays.reaction() < 0.1 {
        let detail = "the stop takes less than 0.1 s; look for a slip of units";
        find(Notice::StopUnusuallyShort, Severity::Info, "fitted", detail);
    }
    let is_harsh =
        case.hardest.is_some_and(|(instant, _)| instant.deceleration > 1.5 * STANDARD_GRAVITY);
    if input.machine.coordinate() == Coordinate::Way && is_harsh {
        let detail =
            "the deceleration is above 1.5 times that of free fall; look for a slip of units";
        find(Notice::DecelerationUnusuallyHigh, Severity::Info, "fitted", detail);
    }
}

/// What acts on each entry in a case: as pressed, or what a held deceleration needs of it.
#[must_use]
pub fn acting(entry: &Fitted, pressed: Option<&Pressed>, stop: &Stop) -> Option<Pressing> {
    let pressed = pressed?;
    if stop.is_modulated { eased(entry, pressed, stop.fraction) } else { Some(pressed.pressing) }
}

fn note_pressing(
    remarks: &mut Remarks,
    input: &Input,
    pressed: &[Option<Pressed>],
    case: &CaseOutcome,
) {
    let actings: Vec<Option<Pressing>> = input
        .fitted
        .iter()
        .zip(pressed)
        .map(|(entry, pressed)| acting(entry, pressed.as_ref(), &case.stop))
        .collect();
    let volumes: Vec<Option<Volume>> =
        actings.iter().map(|acting| acting.and_then(|acting| acting.fluid_volume)).collect();
    let friction_case = case.stop.is_modulated.then_some(case.friction_case);
    for (index, (entry, acting)) in input.fitted.iter().zip(&actings).enumerate() {
        let (Some(brake), Some(acting)) = (entry.brake(), acting) else { continue };
        let spot = Spot { fitted_index: Some(index), friction_case };
        brake.hold_pressing(remarks, acting, spot);
        brake.hold_stroke(remarks, operator_stroke(&input.fitted, &volumes, index), spot);
        if matches!(case.stop.ending, Ending::Reached(_)) {
            let speed = highest_brake_speed(input, entry, &case.stop);
            let spot = Spot { friction_case: Some(case.friction_case), ..spot };
            brake.hold_rubbing(remarks, speed, acting.highest_clamp_force, spot);
        }
    }
}

/// The lock factors with front linings at low and rear ones at high friction.
fn mixed_lock(input: &Input, system: &Reduced, cases: &[CaseOutcome]) -> Option<LockFactors> {
    let (low, high) = cases.first().zip(cases.last())?;
    let demand = [total(&low.demands)[0], total(&high.demands)[1]];
    lock_factors(system, demand, input.demand.initial_speed)
}

/// Warns if the rear axle may lock first: in any case, or with front linings at low and rear ones at high friction.
fn note_lock_order(remarks: &mut Remarks, cases: &[CaseOutcome], mixed: Option<LockFactors>) {
    if cases.iter().all(|case| case.lock.is_none()) {
        return;
    }
    remarks.method(&LOCK_ORDER);
    let rear_first = |lock: &Option<LockFactors>| lock.is_some_and(|factors| factors.rear_first());
    if cases.iter().any(|case| rear_first(&case.lock)) || rear_first(&mixed) {
        let detail = "the rear axle reaches its adhesion before the front one in at least one combination of friction: the vehicle may become unstable";
        remarks.notice(
            Notice::RearAxleLocksFirst,
            Severity::Info,
            Subject::Request("fitted"),
            detail,
        );
    }
}
