//! `POST /v1/stop-energy`: what a stop costs.

use axum::body::Body;
use axum::http::Response as Reply;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::block::delays::Response;
use super::block::fitted::Fitted;
use super::block::machine::Machine;
use super::block::stop::{Direction, StopMembers, Stopping, Surroundings, stood_in};
use super::block::temperatures;
use crate::api::accept::Negotiated;
use crate::api::extract::Json;
use crate::api::heavy::off_thread;
use crate::api::measure::{
    Acceleration, AngularAcceleration, Energy, EnergyFlux, Finite, Force, Grade,
    HeatTransferCoefficient, Power, PowerFlux, ReportUnits, RotationalSpeed, Speed, StopFrequency,
    Temperature, TemperatureDifference, Time,
};
use crate::api::parse::{At, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{self, CautionText, FrictionCase, Record, Recorded, Warning};
use crate::api::render::frame::Figures;
use crate::api::render::stop_energy::chart;
use crate::calc::case::stop_energy::{self, CaseOutcome, Energies, EntryEnergy, Input, Outcome};

/// A machine, its brakes and the stop whose energy is asked for.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct StopEnergyRequest {
    /// The caller's own reference, echoed in `record.ref` and left out of the digest.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Units of the answer, `si` if left out.
    #[schema(nullable = false)]
    pub report_units: Option<ReportUnits>,
    /// What is braked.
    pub machine: Machine,
    /// Its brakes.
    #[schema(min_items = 1, max_items = 100)]
    pub fitted: Vec<Fitted>,
    /// Speed at the start, of the vehicle, load or belt. Required but for a shaft.
    #[schema(nullable = false)]
    pub initial_speed: Option<Speed>,
    /// Speed at the end, below the initial one; standstill if left out.
    #[schema(nullable = false)]
    pub final_speed: Option<Speed>,
    /// Speed at the start, of a shaft. Required for a shaft.
    #[schema(nullable = false)]
    pub initial_rotational_speed: Option<RotationalSpeed>,
    /// Speed at the end, of a shaft; standstill if left out.
    #[schema(nullable = false)]
    pub final_rotational_speed: Option<RotationalSpeed>,
    /// Slope of a vehicle's way, positive uphill; level if left out, at most 100 %.
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// Force from outside on a vehicle, also in the dead time: positive drives, negative retards; 0 if left out.
    #[schema(nullable = false)]
    pub drive_force: Option<Force>,
    /// Which way a hoist's load moves. Required for a hoist.
    #[schema(nullable = false)]
    pub direction: Option<Direction>,
    /// Deceleration that the operator holds after build-up; full torque if left out.
    #[schema(nullable = false)]
    pub deceleration: Option<Acceleration>,
    /// The same for a shaft.
    #[schema(nullable = false)]
    pub angular_deceleration: Option<AngularAcceleration>,
    /// Delays.
    #[schema(nullable = false)]
    pub response: Option<Response>,
    /// Temperature of the air, 20 degC if left out.
    #[schema(nullable = false)]
    pub ambient_temperature: Option<Temperature>,
    /// Temperature of the discs before the stop; that of the air if left out.
    #[schema(nullable = false)]
    pub start_temperature: Option<Temperature>,
    /// Time between the starts of repeated stops, longer than the braking; asks for temperatures of repeated stops.
    #[schema(nullable = false)]
    pub interval: Option<Time>,
    /// The same as stops per time. Give this or `interval`, not both.
    #[schema(nullable = false)]
    pub stop_frequency: Option<StopFrequency>,
    /// How many repeated stops to follow, 1 or more, and times the fitted entries at most 10000; until steady if left
    /// out.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub stop_count: Option<u32>,
}

/// What the stop costs.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StopEnergyAnswer {
    /// The results.
    pub results: StopEnergyResults,
    /// Remarks on the results.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: Record,
}

/// What the stop costs, once per friction case.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StopEnergyResults {
    /// The cases.
    pub friction_cases: Vec<StopEnergyCase>,
}

/// The energy balance of a stop at one friction, from the first torque on:
/// `brake_energy = kinetic_translation + kinetic_rotation + grade_or_load − resistance`.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StopEnergyCase {
    /// Which.
    pub friction_case: FrictionCase,
    /// Whether the final speed is reached. If not, there are no energies; `stopping` tells why.
    pub reaches_final_speed: bool,
    /// Kinetic energy taken from what moves along a line.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub kinetic_translation: Option<Energy>,
    /// Kinetic energy taken from what turns.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub kinetic_rotation: Option<Energy>,
    /// Work of gravity, load or drive, positive when it drives.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub grade_or_load: Option<Energy>,
    /// Work of the resistances, positive.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub resistance: Option<Energy>,
    /// Energy that all brakes take up.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub brake_energy: Option<Energy>,
    /// What one brake of each fitted entry takes up.
    pub fitted: Vec<FittedEnergy>,
}

/// What one brake of a fitted entry takes up. A member is there when the request lets it be computed.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FittedEnergy {
    /// Which entry of `fitted`.
    pub fitted_index: usize,
    /// In the stop.
    pub energy: Energy,
    /// Of one friction face.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub energy_per_face: Option<Energy>,
    /// Energy of one face over the area of one pad.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub energy_flux: Option<EnergyFlux>,
    /// Energy over the braking time.
    pub mean_power: Power,
    /// Highest power.
    pub peak_power: Power,
    /// Highest power of one face over the area of one pad.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_power_flux: Option<PowerFlux>,
    /// Highest speed at the pad's outer radius while torque acts.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub rubbing_speed: Option<Speed>,
    /// Share of the friction heat that enters the disc, above 0 and not above 1.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub disc_share: Option<Finite>,
    /// Rise of the disc's bulk temperature, with the heat of all brakes on this disc.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub disc_bulk_rise: Option<TemperatureDifference>,
    /// Highest temperature of the rubbed surface.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub surface_peak_temperature: Option<Temperature>,
    /// Highest bulk temperature of the interval that ends where it began; absent if none does below 3000 K.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub steady_bulk_peak: Option<Temperature>,
    /// Bulk temperature when the next braking starts, in that interval.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub steady_bulk_trough: Option<Temperature>,
    /// Highest temperature of the rubbed surface in that interval.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub steady_surface_peak: Option<Temperature>,
    /// Highest bulk temperature of the last stop of `stop_count`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_after_stops: Option<Temperature>,
    /// Bulk temperature one interval after its start.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub trough_after_stops: Option<Temperature>,
    /// The stop in which the bulk first reaches the lining's continuous limit; absent if none of 10000 (over the fitted
    /// entries) does.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub stops_to_continuous_limit: Option<u32>,
    /// Coefficient of cooling between the stops, at the hottest bulk temperature.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub cooling_coefficient: Option<HeatTransferCoefficient>,
    /// Stops until the usable pad is worn off; needs `specific_wear` and `wear_allowance`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub pad_life_stops: Option<Finite>,
}

/// Compute what a stop costs.
///
/// The energy balance of the machine; energy, power and rubbing speed of each brake; and, where a disc is given,
/// its share of the heat, its bulk rise and the peak of its surface. Once per friction case.
#[utoipa::path(
    post, path = "/stop-energy", tag = "Calculations", operation_id = "stop_energy",
    responses((
        status = OK,
        description = "What the stop costs; as a picture: the temperatures of each disc over time.",
        content((StopEnergyAnswer = "application/json"), (String = "image/svg+xml")),
    )),
)]
pub(super) async fn stop_energy(
    form: Negotiated,
    request: Json<StopEnergyRequest>,
) -> Result<Reply<Body>, Problem> {
    let figures = Figures(request.value.report_units.unwrap_or_default());
    let (input, outcome, answer) =
        off_thread(move || request.value.evaluate(&request.body)).await??;
    Ok(form.render(answer, |answer| chart(figures, &input, &outcome, answer)))
}

impl StopEnergyRequest {
    fn members(&self) -> StopMembers<'_> {
        StopMembers {
            machine: &self.machine,
            fitted: &self.fitted,
            stopping: Stopping {
                initial_speed: self.initial_speed.as_ref(),
                final_speed: self.final_speed.as_ref(),
                initial_rotational_speed: self.initial_rotational_speed.as_ref(),
                final_rotational_speed: self.final_rotational_speed.as_ref(),
                deceleration: self.deceleration.as_ref(),
                angular_deceleration: self.angular_deceleration.as_ref(),
                response: self.response.as_ref(),
            },
            surroundings: Surroundings {
                grade: self.grade.as_ref(),
                drive_force: self.drive_force.as_ref(),
                direction: self.direction,
            },
        }
    }

    fn evaluate(&self, body: &[u8]) -> Result<(Input, Outcome, StopEnergyAnswer), Problem> {
        let (input, defaults) = self.read()?;
        let outcome = self.evaluated(&input)?;
        let answer = self.answer(body, &input, &outcome, defaults);
        Ok((input, outcome, answer))
    }

    fn read(&self) -> Result<(Input, Vec<RecordedDefault>), Problem> {
        let (at, mut reader) = (At::ROOT, Reader::new());
        let stop = self.members().read(&at, &mut reader);
        let ambient_temperature =
            temperatures::ambient(self.ambient_temperature.as_ref(), &at, &mut reader);
        let start_temperature = temperatures::start(
            self.start_temperature.as_ref(),
            ambient_temperature,
            self.report_units.unwrap_or_default(),
            (&at, &mut reader),
        );
        let (interval, frequency) = (self.interval.as_ref(), self.stop_frequency.as_ref());
        let interval = temperatures::interval(interval, frequency, (&at, &mut reader));
        let at_count = at.member("stop_count");
        let is_wanted = self.interval.is_some() || self.stop_frequency.is_some();
        reader.not_applicable(
            &at_count,
            self.stop_count.is_some() && !is_wanted,
            "needs interval or stop_frequency",
        );
        let stop_count = self.stop_count;
        reader.finish(stop.map(|stop| Input {
            stop,
            ambient_temperature,
            start_temperature,
            interval,
            stop_count,
            finds_limit: true,
        }))
    }

    /// The outcome; a fault of the interval is placed where it was given.
    fn evaluated(&self, input: &Input) -> Result<Outcome, Problem> {
        let at = if self.stop_frequency.is_some() { "stop_frequency" } else { "interval" };
        stop_energy::evaluate(input)
            .map_err(|faults| record::no_answer(&faults.moved("interval", at)))
    }

    fn answer(
        &self,
        body: &[u8],
        input: &Input,
        outcome: &Outcome,
        mut defaults: Vec<RecordedDefault>,
    ) -> StopEnergyAnswer {
        let report_units = self.report_units.unwrap_or_default();
        let recorded =
            Recorded { body, reference: self.reference.as_deref(), brake: "", report_units };
        defaults.extend(stood_in(&input.stop.fitted, &outcome.stop.pressed, report_units));
        let cases = outcome.friction_cases.iter();
        let friction_cases = cases.map(|case| StopEnergyCase::new(case, report_units)).collect();
        StopEnergyAnswer {
            results: StopEnergyResults { friction_cases },
            warnings: recorded.warnings(&outcome.remarks),
            cautions: record::cautions(&outcome.remarks),
            record: recorded.record(outcome.remarks.methods(), defaults),
        }
    }
}

impl StopEnergyCase {
    fn new(case: &CaseOutcome, units: ReportUnits) -> Self {
        let energies = case.energies.as_ref();
        let energy = |part: fn(&Energies) -> crate::calc::quantity::Energy| {
            energies.map(|energies| Energy::report(part(energies), units))
        };
        let entries = energies.into_iter().flat_map(|energies| energies.fitted.iter().enumerate());
        Self {
            friction_case: case.friction_case.into(),
            reaches_final_speed: energies.is_some(),
            kinetic_translation: energy(|energies| energies.kinetic_translation),
            kinetic_rotation: energy(|energies| energies.kinetic_rotation),
            grade_or_load: energy(|energies| energies.grade_or_load),
            resistance: energy(|energies| energies.resistance),
            brake_energy: energy(|energies| energies.brake_energy),
            fitted: entries.map(|(index, entry)| FittedEnergy::new(index, entry, units)).collect(),
        }
    }
}

impl FittedEnergy {
    fn new(fitted_index: usize, entry: &EntryEnergy, units: ReportUnits) -> Self {
        let (brake, disc) = (entry.brake, entry.brake.and_then(|brake| brake.disc));
        let repeated = brake.and_then(|brake| brake.repeated);
        let steady = repeated.and_then(|repeated| repeated.steady);
        let after = repeated.and_then(|repeated| repeated.series.after_count);
        let temperature = |kelvins: f64| Temperature::report_si(kelvins, units);
        Self {
            fitted_index,
            energy: Energy::report(entry.energy, units),
            energy_per_face: brake.map(|brake| Energy::report(brake.energy_per_face, units)),
            energy_flux: brake.map(|brake| EnergyFlux::report(brake.energy_flux, units)),
            mean_power: Power::report(entry.mean_power, units),
            peak_power: Power::report(entry.peak_power, units),
            peak_power_flux: brake.map(|brake| PowerFlux::report(brake.peak_power_flux, units)),
            rubbing_speed: brake.map(|brake| Speed::report(brake.rubbing_speed, units)),
            disc_share: disc.map(|disc| Finite(disc.disc_share)),
            disc_bulk_rise: disc.map(|disc| TemperatureDifference::report(disc.bulk_rise, units)),
            surface_peak_temperature: disc
                .map(|disc| Temperature::report(disc.surface_peak_temperature, units)),
            steady_bulk_peak: steady.map(|swing| temperature(swing.peak)),
            steady_bulk_trough: steady.map(|swing| temperature(swing.trough)),
            steady_surface_peak: repeated
                .and_then(|repeated| repeated.steady_surface_peak)
                .map(temperature),
            peak_after_stops: after.map(|swing| temperature(swing.peak)),
            trough_after_stops: after.map(|swing| temperature(swing.trough)),
            stops_to_continuous_limit: repeated.and_then(|repeated| repeated.series.stops_to_limit),
            cooling_coefficient: repeated
                .map(|repeated| HeatTransferCoefficient::report_si(repeated.coefficient, units)),
            pad_life_stops: brake.and_then(|brake| brake.pad_life_stops).map(Finite),
        }
    }
}
