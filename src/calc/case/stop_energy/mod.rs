//! What a stop costs: energy, power and temperature, for the machine and for each brake.

pub(super) mod limits;
mod load;

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::{Caution, Remarks};
use crate::calc::friction::FrictionCase;
use crate::calc::heat::disc_heat::{self, DiscHeat, Warmth};
use crate::calc::heat::disc_series::Repeated;
use crate::calc::method::Method;
use crate::calc::motion::{Coordinate, Ending, Path};
use crate::calc::quantity::{
    Energy, EnergyFlux, Power, PowerFlux, Si, ThermodynamicTemperature, Time, Velocity,
};

use super::stopping;
use crate::calc::heat::repeated::MOST_STOPS;
use load::Load;

crate::method_sheet! {
    ENERGY_BALANCE {
        id: "energy.balance",
        name: "Energy that the brakes take up in a stop",
        equation: "E = m (v_b^2 - v_1^2)/2 + J (w_b^2 - w_1^2)/2 + W_outside - W_resistance, from the first torque on",
        symbols: [("E", "energy of all brakes", "J"), ("m", "translating mass", "kg"), ("J", "inertia of what turns", "kg.m2"),
            ("v_b", "speed where torque begins", "m/s"), ("v_1", "final speed", "m/s"),
            ("W_outside", "work of gravity, load or drive, positive when it drives", "J"), ("W_resistance", "work of the resistances", "J")],
        valid: "All brake work becomes heat at the brakes; tire slip is not counted.",
        accuracy: "The work of the brakes is integrated over the stop; the balance closes to 1e-6.",
        source: "Conservation of energy.",
        provenance: Seen,
        worked: "J 12.25 kg.m2 from 500 rpm: 16 792 J (100 kg, radius of gyration 0.35 m).",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&ENERGY_BALANCE];

/// A stop and the temperatures around it.
#[derive(Debug, Clone, PartialEq)]
pub struct Input {
    /// The stop.
    pub stop: stopping::Input,
    /// Of the air.
    pub ambient_temperature: ThermodynamicTemperature,
    /// Of the discs at the first torque.
    pub start_temperature: ThermodynamicTemperature,
    /// Between the starts of repeated stops.
    pub interval: Option<Time>,
    /// How many repeated stops to follow; times the fitted entries at most 10 000.
    pub stop_count: Option<u32>,
    /// Whether to find the stop that first reaches the lining's continuous limit; it may take thousands.
    pub finds_limit: bool,
}

/// The energies, once per friction case.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// The results.
    pub friction_cases: Vec<CaseOutcome>,
    /// The stop behind them.
    pub stop: stopping::Outcome,
    /// What is to be said about the results.
    pub remarks: Remarks,
}

/// The energies at one friction.
#[derive(Debug, Clone)]
pub struct CaseOutcome {
    /// Which.
    pub friction_case: FrictionCase,
    /// The energies; none if the final speed is not reached.
    pub energies: Option<Energies>,
}

/// Where the energy of a stop comes from and where it goes.
#[derive(Debug, Clone)]
pub struct Energies {
    /// Kinetic energy of what moves along a line.
    pub kinetic_translation: Energy,
    /// Kinetic energy of what turns.
    pub kinetic_rotation: Energy,
    /// Work of gravity, load or drive, positive when it drives.
    pub grade_or_load: Energy,
    /// Work of the resistances, positive.
    pub resistance: Energy,
    /// Taken up by all brakes.
    pub brake_energy: Energy,
    /// Each entry, for one brake.
    pub fitted: Vec<EntryEnergy>,
}

/// The load on one brake of an entry.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct EntryEnergy {
    /// In the stop.
    pub energy: Energy,
    /// Energy over braking time.
    pub mean_power: Power,
    /// Highest power.
    pub peak_power: Power,
    /// What depends on the brake's parts; none for an entry of known torque.
    pub brake: Option<BrakeLoad>,
}

/// The load on the pads and the disc of one brake.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BrakeLoad {
    /// Of one friction face.
    pub energy_per_face: Energy,
    /// Per area of one pad.
    pub energy_flux: EnergyFlux,
    /// Highest, per area of one pad.
    pub peak_power_flux: PowerFlux,
    /// Highest, at the pad's outer radius, while torque acts.
    pub rubbing_speed: Velocity,
    /// Whether the heat would take its disc beyond any temperature a solid has.
    pub overheats: bool,
    /// Temperatures of its disc, where they can be told.
    pub disc: Option<DiscHeat>,
    /// Temperatures of its disc under repeated stops, where they are asked for and can be told.
    pub repeated: Option<Repeated>,
    /// Stops until the usable pad is worn off, where wear is known.
    pub pad_life_stops: Option<f64>,
}

/// Computes the energies.
///
/// # Errors
/// All that is impossible about the input, or temperatures beyond any material.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let mut faults = Faults::new();
    faults.not_negative("ambient_temperature", input.ambient_temperature);
    faults.not_negative("start_temperature", input.start_temperature);
    input.require_count(&mut faults);
    let Some(stop) = faults.part("", stopping::evaluate(&input.stop)) else { return Err(faults) };
    faults.into_result(())?;
    let outcome = evaluate_stopped(input, stop)?;
    outcome.overheating().into_result(outcome)
}

/// Computes the energies of a stop that is known already. A disc beyond any temperature is told as such.
///
/// # Errors
/// An interval that is shorter than the braking, too many stops or none.
pub fn evaluate_stopped(input: &Input, stop: stopping::Outcome) -> Result<Outcome, Faults> {
    let mut faults = Faults::new();
    input.require_count(&mut faults);
    faults.require(
        input.is_spaced(&stop),
        "interval",
        FaultCode::OutOfRange,
        "must be longer than the braking time",
    );
    if !faults.is_empty() {
        return Err(faults);
    }
    let mut remarks = stop.remarks.clone();
    remarks.method(&ENERGY_BALANCE);
    remarks.caution(Caution::HotSurfaces);
    limits::note_missing(&mut remarks, input);
    let mut friction_cases = Vec::with_capacity(stop.friction_cases.len());
    for case in &stop.friction_cases {
        let energies = match case.stop.ending {
            Ending::Reached(_) => Some(energies(input, case, &mut remarks)),
            Ending::NotReached { .. } => None,
        };
        friction_cases.push(CaseOutcome { friction_case: case.friction_case, energies });
    }
    faults.into_result(Outcome { friction_cases, stop, remarks })
}

impl Outcome {
    /// The discs whose heat goes beyond any temperature.
    fn overheating(&self) -> Faults {
        let mut faults = Faults::new();
        let entries =
            |case: &CaseOutcome| case.energies.as_ref().map_or(0, |energies| energies.fitted.len());
        let most = self.friction_cases.iter().map(entries).max().unwrap_or(0);
        let overheats = |index: usize, case: &CaseOutcome| {
            let load =
                case.energies.as_ref().and_then(|energies| energies.fitted.get(index)?.brake);
            load.is_some_and(|load| load.overheats)
        };
        for index in 0..most {
            if self.friction_cases.iter().any(|case| overheats(index, case)) {
                faults.part(&format!("fitted/{index}/brake"), Err::<(), _>(disc_heat::too_hot()));
            }
        }
        faults
    }
}

impl Input {
    /// Repeated stops that are followed at most, for each entry.
    fn most_stops(&self) -> u32 {
        let entries = u32::try_from(self.stop.fitted.len()).unwrap_or(u32::MAX).max(1);
        (MOST_STOPS / entries).max(1)
    }

    fn require_count(&self, faults: &mut Faults) {
        let holds = self.stop_count.is_none_or(|count| (1..=self.most_stops()).contains(&count));
        let detail = "must be 1 or more, and times the fitted entries not above 10000";
        faults.require(holds, "stop_count", FaultCode::OutOfRange, detail);
    }

    /// Whether each stop is over before the next one starts, in every friction case.
    fn is_spaced(&self, stop: &stopping::Outcome) -> bool {
        let Some(interval) = self.interval else { return true };
        let braking_time = |case: &stopping::CaseOutcome| {
            let path = &case.stop.path;
            path.end().time - path.first_torque().time
        };
        let done = stop
            .friction_cases
            .iter()
            .filter(|case| matches!(case.stop.ending, Ending::Reached(_)));
        done.map(braking_time).all(|time| interval.si() > time)
    }
}

/// How the disc of one brake of an entry warms in the stop of a case, in about `count` parts, from the first torque
/// on (`heat::disc_heat::course`). None where the final speed is not reached or the temperatures cannot be told.
#[must_use]
pub fn course(
    input: &Input,
    outcome: &Outcome,
    (case, entry): (usize, usize),
    count: u32,
) -> Option<Vec<Warmth>> {
    let load = outcome.friction_cases.get(case)?.energies.as_ref()?.fitted.get(entry)?;
    let fitted = input.stop.fitted.get(entry)?;
    let stop = outcome.stop.friction_cases.get(case)?;
    Load::new(input, stop, (entry, fitted)).course(load, count)
}

fn energies(input: &Input, case: &stopping::CaseOutcome, remarks: &mut Remarks) -> Energies {
    let path = &case.stop.path;
    let work = path.brake_work();
    let mut fitted = Vec::with_capacity(input.stop.fitted.len());
    for (index, entry) in input.stop.fitted.iter().enumerate() {
        let load = Load::new(input, case, (index, entry)).energy(work);
        limits::hold(remarks, input, (index, entry), &load, case.friction_case);
        fitted.push(load);
    }
    balance(path, work, fitted)
}

/// The terms of the balance ([`ENERGY_BALANCE`]).
fn balance(path: &Path, work: [f64; 2], fitted: Vec<EntryEnergy>) -> Energies {
    let system = &path.forces().system;
    let (begin, end) = (path.first_torque(), path.end());
    let squares = 0.5 * (begin.speed * begin.speed - end.speed * end.speed);
    let translating = match system.coordinate {
        Coordinate::Way => system.translating,
        Coordinate::Angle => 0.0,
    };
    Energies {
        kinetic_translation: Energy::from_si(translating * squares),
        kinetic_rotation: Energy::from_si((system.inertia() - translating) * squares),
        grade_or_load: Energy::from_si(system.outside * (end.distance - begin.distance)),
        resistance: Energy::from_si(path.resistance_work()),
        brake_energy: Energy::from_si(work[0] + work[1]),
        fitted,
    }
}
