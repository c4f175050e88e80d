//! What a stop costs: energy, power and temperature, for the machine and for each brake.

use crate::calc::brake::{Brake, Rated, compare_limit, compare_limit_above};
use crate::calc::fault::Faults;
use crate::calc::finding::{Caution, CheckCode, Comparison, Notice, Remarks, Severity, Subject};
use crate::calc::fitted::Fitted;
use crate::calc::friction::FrictionCase;
use crate::calc::heat::disc_heat::{self, DiscHeat, Heating};
use crate::calc::method::Method;
use crate::calc::motion::{Coordinate, Ending, Path};
use crate::calc::quantity::{
    Amount, Dimension, Energy, EnergyFlux, Power, PowerFlux, Si, ThermodynamicTemperature, Velocity,
};

use super::stopping;

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
    /// Temperatures of its disc, where they can be told.
    pub disc: Option<DiscHeat>,
}

/// Computes the energies.
///
/// # Errors
/// All that is impossible about the input, or temperatures beyond any material.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let mut faults = Faults::new();
    faults.not_negative("ambient_temperature", input.ambient_temperature);
    faults.not_negative("start_temperature", input.start_temperature);
    let Some(stop) = faults.part("", stopping::evaluate(&input.stop)) else { return Err(faults) };
    let mut remarks = stop.remarks.clone();
    remarks.method(&ENERGY_BALANCE);
    remarks.caution(Caution::HotSurfaces);
    note_missing(&mut remarks, &input.stop.fitted);
    let mut friction_cases = Vec::with_capacity(stop.friction_cases.len());
    for case in &stop.friction_cases {
        let energies = match case.stop.ending {
            Ending::Reached(_) => faults.part("", energies(input, case, &mut remarks)),
            Ending::NotReached { .. } => None,
        };
        friction_cases.push(CaseOutcome { friction_case: case.friction_case, energies });
    }
    faults.into_result(Outcome { friction_cases, stop, remarks })
}

fn energies(
    input: &Input,
    case: &stopping::CaseOutcome,
    remarks: &mut Remarks,
) -> Result<Energies, Faults> {
    let mut faults = Faults::new();
    let path = &case.stop.path;
    let work = path.brake_work();
    let mut fitted = Vec::with_capacity(input.stop.fitted.len());
    for (index, entry) in input.stop.fitted.iter().enumerate() {
        let shares = shares(case, index, entry);
        let load = entry_energy(input, case, entry, shares, work);
        if let Some(load) = faults.part(&format!("fitted/{index}/brake"), load) {
            compare(remarks, input, (index, entry), &load, case.friction_case);
            fitted.push(load);
        }
    }
    faults.into_result(balance(path, work, fitted))
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

/// What part of the brake work of each axle one brake of an entry does.
fn shares(case: &stopping::CaseOutcome, index: usize, entry: &Fitted) -> [f64; 2] {
    let own = case.demands.get(index).copied().unwrap_or([0.0; 2]);
    let count = f64::from(entry.parts().count);
    let total = case.stop.path.forces().demand;
    [0, 1].map(|axle: usize| match (own.get(axle), total.get(axle)) {
        (Some(own), Some(total)) if *total > 0.0 => own / total / count,
        _ => 0.0,
    })
}

fn entry_energy(
    input: &Input,
    case: &stopping::CaseOutcome,
    entry: &Fitted,
    shares: [f64; 2],
    work: [f64; 2],
) -> Result<EntryEnergy, Faults> {
    let path = &case.stop.path;
    let braking_time = path.end().time - path.first_torque().time;
    let energy = work[0] * shares[0] + work[1] * shares[1];
    let mean_power = if braking_time > 0.0 { energy / braking_time } else { 0.0 };
    let peak_power = path.peak_brake_power(shares).max(mean_power);
    let brake = match entry.brake() {
        Some(brake) => {
            let speed = stopping::highest_brake_speed(&input.stop, entry, &case.stop);
            Some(brake_load(
                input,
                brake,
                entry,
                (energy, peak_power, speed),
                &power_course(path, shares),
            )?)
        }
        None => None,
    };
    Ok(EntryEnergy {
        energy: Energy::from_si(energy),
        mean_power: Power::from_si(mean_power),
        peak_power: Power::from_si(peak_power),
        brake,
    })
}

/// Power of one brake over time, as nodes joined by straight lines.
fn power_course(path: &Path, shares: [f64; 2]) -> Vec<(f64, f64)> {
    const MOST_NODES: usize = 64;
    let of_one =
        |(time, power): (f64, [f64; 2])| (time, power[0] * shares[0] + power[1] * shares[1]);
    path.brake_power(MOST_NODES).into_iter().map(of_one).collect()
}

fn brake_load(
    input: &Input,
    brake: &Brake,
    entry: &Fitted,
    (energy, peak_power, shaft_speed): (f64, f64, f64),
    power: &[(f64, f64)],
) -> Result<BrakeLoad, Faults> {
    let parts = brake.parts();
    let faces = f64::from(parts.faces);
    let area = parts.pad.area().si();
    let heating = Heating {
        energy,
        power,
        brakes_per_disc: entry.parts().brakes_per_disc,
        start: input.start_temperature,
    };
    Ok(BrakeLoad {
        energy_per_face: Energy::from_si(energy / faces),
        energy_flux: EnergyFlux::from_si(energy / faces / area),
        peak_power_flux: PowerFlux::from_si(peak_power / faces / area),
        rubbing_speed: Velocity::from_si(shaft_speed * parts.pad.largest_radius().si()),
        disc: disc_heat::of_one_stop(brake, &heating)?,
    })
}

fn compare(
    remarks: &mut Remarks,
    input: &Input,
    (index, entry): (usize, &Fitted),
    load: &EntryEnergy,
    case: FrictionCase,
) {
    let (Some(brake), Some(on_brake)) = (entry.brake(), load.brake) else { return };
    let lining = &brake.parts().lining;
    let (index, case) = (Some(index), Some(case));
    let rated = |code, input, dimension, what| Rated { code, input, dimension, what };
    let power = rated(
        CheckCode::PowerFlux,
        "lining/max_power_flux",
        Dimension::PowerFlux,
        "the highest friction power per pad area",
    );
    compare_limit(
        remarks,
        lining.parts().max_power_flux,
        power,
        on_brake.peak_power_flux.si(),
        index,
        case,
    );
    let energy = rated(
        CheckCode::EnergyFlux,
        "lining/max_energy_flux",
        Dimension::EnergyFlux,
        "the friction energy per pad area",
    );
    compare_limit(
        remarks,
        lining.parts().max_energy_flux,
        energy,
        on_brake.energy_flux.si(),
        index,
        case,
    );
    let Some(disc) = on_brake.disc else { return };
    disc_heat::note_methods(remarks, &disc);
    let ambient = input.ambient_temperature.si();
    let peak = rated(
        CheckCode::SurfaceTemperature,
        "lining/max_temperature_peak",
        Dimension::Temperature,
        "the temperature of the rubbed surface",
    );
    compare_limit_above(
        remarks,
        lining.parts().max_temperature_peak,
        peak,
        disc.surface_peak_temperature.si(),
        (index, case),
        ambient,
    );
    let bulk = input.start_temperature.si() + disc.bulk_rise.si();
    compare_bulk(remarks, brake, bulk, (index, case), ambient);
}

/// Holds the bulk temperature against the lower of what the lining and the disc stand.
fn compare_bulk(
    remarks: &mut Remarks,
    brake: &Brake,
    bulk: f64,
    at: (Option<usize>, Option<FrictionCase>),
    ambient: f64,
) {
    let parts = brake.parts();
    let disc_limit = parts.disc.as_ref().and_then(|disc| disc.material().max_temperature());
    let lining_limit = parts.lining.parts().max_temperature_continuous;
    let what = "the bulk temperature of the disc";
    let disc_is_lower = match (disc_limit, lining_limit) {
        (Some(disc), Some(lining)) => disc.si() < lining.value.si(),
        (Some(_), None) => true,
        (None, _) => false,
    };
    if let (true, Some(limit)) = (disc_is_lower, disc_limit) {
        let from_catalog =
            parts.disc.as_ref().is_some_and(|disc| disc.material().max_temperature_from_catalog());
        let input = if from_catalog { "disc/material/id" } else { "disc/material/max_temperature" };
        let amount = |si| Amount { dimension: Dimension::Temperature, si };
        let subject = Subject::Brake { fitted_index: at.0, input };
        let (actual, limit) = (amount(bulk), amount(limit.si()));
        let code = CheckCode::DiscBulkTemperature;
        remarks.compare(
            Comparison { code, subject, friction_case: at.1, actual, limit, what },
            ambient,
        );
        return;
    }
    let rated = Rated {
        code: CheckCode::DiscBulkTemperature,
        input: "lining/max_temperature_continuous",
        dimension: Dimension::Temperature,
        what,
    };
    compare_limit_above(remarks, lining_limit, rated, bulk, at, ambient);
}

/// Says which temperatures cannot be told, and why.
fn note_missing(remarks: &mut Remarks, fitted: &[Fitted]) {
    for (index, entry) in fitted.iter().enumerate() {
        let Some(brake) = entry.brake() else { continue };
        let subject = |input| Subject::Brake { fitted_index: Some(index), input };
        let mut info = |code, input, detail: &str| {
            remarks.notice(code, Severity::Info, subject(input), detail);
        };
        let Some(disc) = &brake.parts().disc else {
            info(Notice::DiscNotGiven, "disc", "no disc is given: temperatures were not computed");
            continue;
        };
        if disc_heat::heated_mass_of(brake, disc).is_none() {
            info(
                Notice::DiscMassNotGiven,
                "disc/mass",
                "a ventilated disc needs the mass of its rubbed ring: temperatures were not computed",
            );
        } else if brake.parts().lining.substance().is_none() {
            let detail = "the lining's conductivity, density or specific heat is not given: all heat was taken to enter the disc";
            info(Notice::HeatPartitionNotGiven, "lining", detail);
        }
    }
}
