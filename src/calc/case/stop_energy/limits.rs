//! What the loads of a stop come to against the limits of lining and disc, and what could not be told.

use super::{BrakeLoad, EntryEnergy, Input};
use crate::calc::brake::{Brake, Spot};
use crate::calc::finding::{CheckCode, Finding, Notice, Remarks, Severity, Subject};
use crate::calc::fitted::Fitted;
use crate::calc::friction::FrictionCase;
use crate::calc::heat::disc_heat;
use crate::calc::heat::disc_series::{self, Repeated};
use crate::calc::quantity::{Amount, Dimension, Si};

/// Holds the loads of one entry against its limits.
pub(super) fn hold(
    remarks: &mut Remarks,
    input: &Input,
    (index, entry): (usize, &Fitted),
    load: &EntryEnergy,
    case: FrictionCase,
) {
    let (Some(brake), Some(load)) = (entry.brake(), load.brake) else { return };
    let spot = Spot { fitted_index: Some(index), friction_case: Some(case) };
    brake.hold(remarks, CheckCode::PowerFlux, Some(load.peak_power_flux.si()), spot);
    brake.hold(remarks, CheckCode::EnergyFlux, Some(load.energy_flux.si()), spot);
    if load.pad_life_stops.is_some() {
        remarks.method(&crate::calc::wear::PAD_LIFE);
    }
    if let Some(disc) = &load.disc {
        disc_heat::note_methods(remarks, disc);
    }
    let ambient = input.ambient_temperature.si();
    for (code, temperature) in hottest(input, &load) {
        if let (Some(bound), Some(temperature)) = (brake.bound(code), temperature) {
            bound.hold(remarks, temperature, spot, ambient);
        }
    }
    if let Some(repeated) = &load.repeated {
        note_repeated(remarks, repeated, spot);
    }
}

/// The highest temperatures that a load comes to, K: of the surface and of the bulk.
pub(in crate::calc::case) fn hottest(
    input: &Input,
    load: &BrakeLoad,
) -> [(CheckCode, Option<f64>); 2] {
    let once = load.disc.map(|disc| disc.surface_peak_temperature.si());
    let steady = load.repeated.and_then(|repeated| repeated.steady_surface_peak);
    let bulk_once = load.disc.map(|disc| input.start_temperature.si() + disc.bulk_rise.si());
    let after = load.repeated.and_then(|repeated| repeated.series.after_count);
    // A count that was asked for ends before the steady state.
    let series = after.or_else(|| load.repeated.and_then(|repeated| repeated.steady));
    let bulk = [bulk_once, series.map(|swing| swing.peak)].into_iter().flatten().reduce(f64::max);
    let surface_after = match after {
        Some(_) => load.repeated.and_then(|repeated| repeated.surface_after_count),
        None => steady,
    };
    let surface = [once, surface_after].into_iter().flatten().reduce(f64::max);
    [(CheckCode::SurfaceTemperature, surface), (CheckCode::DiscBulkTemperature, bulk)]
}

fn note_repeated(remarks: &mut Remarks, repeated: &Repeated, spot: Spot) {
    disc_series::note_methods(remarks, repeated);
    let subject = |input| Subject::Brake { fitted_index: spot.fitted_index, input };
    if repeated.surface.is_estimated() {
        let detail = "the cooling comes from a correlation, not from a measurement on this machine; the coefficient used is given";
        let mut finding = Finding::notice(
            Notice::CoolingEstimated,
            Severity::Info,
            subject("disc/cooling/model"),
            detail,
        );
        let dimension = Dimension::HeatTransferCoefficient;
        finding.actual = Some(Amount { dimension, si: repeated.coefficient });
        finding.friction_case = spot.friction_case;
        remarks.find_once(finding);
    }
    if repeated.steady.is_none() {
        let detail =
            "repeated without end, the stops heat the disc beyond 3000 K: there is no steady state";
        let finding = Finding::notice(
            Notice::NoSteadyState,
            Severity::Exceeded,
            subject("disc/cooling"),
            detail,
        );
        remarks.find_once(match spot.friction_case {
            Some(case) => finding.in_case(case),
            None => finding,
        });
    }
}

/// Says which temperatures cannot be told, and why.
pub(super) fn note_missing(remarks: &mut Remarks, input: &Input) {
    for (index, entry) in input.stop.fitted.iter().enumerate() {
        if let Some(brake) = entry.brake() {
            note_missing_of(remarks, input, brake, index);
        }
    }
}

fn note_missing_of(remarks: &mut Remarks, input: &Input, brake: &Brake, index: usize) {
    let subject = |input| Subject::Brake { fitted_index: Some(index), input };
    let mut info = |code, input, detail: &str| {
        remarks.notice(code, Severity::Info, subject(input), detail);
    };
    let Some(disc) = &brake.parts().disc else {
        info(Notice::DiscNotGiven, "disc", "no disc is given: temperatures were not computed");
        return;
    };
    if disc_heat::heated_ring(brake).is_none() {
        let detail =
            "a ventilated disc needs the mass of its rubbed ring: temperatures were not computed";
        info(Notice::DiscMassNotGiven, "disc/mass", detail);
        return;
    }
    if brake.parts().lining.substance().is_none() {
        let detail = "the lining's conductivity, density or specific heat is not given: all heat was taken to enter the disc";
        info(Notice::HeatPartitionNotGiven, "lining", detail);
    }
    if input.interval.is_some() && disc.cooling().is_none() {
        let detail =
            "the disc's cooling is not given: temperatures of repeated stops were not computed";
        info(Notice::CoolingNotGiven, "disc", detail);
    }
}
