//! What a spec check answers with.

use serde::Serialize;
use utoipa::ToSchema;

use super::application::RecordedWaiver;
use super::duty::Duty;
use crate::api::measure::{
    Acceleration, Angle, AngularAcceleration, AnyAmount, Energy, Finite, Force, Grade, Length,
    Power, ReportUnits, RotationalSpeed, Speed, Temperature, Time, Torque,
};
use crate::api::parse::RecordedDefault;
use crate::api::record::{CautionText, CheckName, FrictionCase, Record, Recorded, Warning};
use crate::calc::case::spec_check::{
    self, Check as Judged, DescentNumbers, DutyNumbers, HoldNumbers, Outcome, Status, StopNumbers,
};
use crate::calc::motion::Coordinate;

/// Whether a choice may pass, and why.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SpecCheckAnswer {
    /// The results.
    pub results: SpecCheckResults,
    /// Remarks on the results; one for each check at or near its limit, with the place of the limit.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: SpecCheckRecord,
}

/// How the answer was found, with what was waived.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SpecCheckRecord {
    /// Version of the service; numbers change only with it.
    pub service_version: &'static str,
    /// The caller's own reference.
    #[serde(rename = "ref", skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reference: Option<String>,
    /// SHA-256 over the RFC 8785 canonical form of the request without `ref`.
    #[schema(example = "sha256:e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855")]
    pub input_digest: String,
    /// The methods used; `GET /v1/methods` explains them.
    pub methods: Vec<&'static str>,
    /// Every value that was not in the request.
    pub defaults: Vec<RecordedDefault>,
    /// The waivers of the request.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub waivers: Vec<RecordedWaiver>,
}

impl SpecCheckRecord {
    /// A record with the waivers of its request. Its members are told one by one, because a schema that is put together
    /// of two cannot be closed by those who generate clients from it.
    #[must_use]
    pub fn new(record: Record, waivers: Vec<RecordedWaiver>) -> Self {
        let Record { service_version, reference, input_digest, methods, defaults } = record;
        Self { service_version, reference, input_digest, methods, defaults, waivers }
    }
}

/// Every check, and what they come to.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SpecCheckResults {
    /// What they come to.
    pub verdict: Verdict,
    /// The check that governs; absent if none could be assessed.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub governing: Option<Governing>,
    /// Every check, duty by duty.
    pub checks: Vec<Check>,
    /// The numbers behind the checks, duty by duty.
    pub duties: Vec<DutyResult>,
}

/// What all checks come to.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Verdict {
    /// Every check is met, near its limit, or waived.
    Pass,
    /// A check is not met.
    Fail,
    /// Nothing fails, but something could not be assessed.
    Incomplete,
}

impl From<spec_check::Verdict> for Verdict {
    fn from(verdict: spec_check::Verdict) -> Self {
        match verdict {
            spec_check::Verdict::Pass => Self::Pass,
            spec_check::Verdict::Fail => Self::Fail,
            spec_check::Verdict::Incomplete => Self::Incomplete,
        }
    }
}

/// The check that governs: one that is not met without a utilization, else the one with the highest.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Governing {
    /// Which check.
    pub code: CheckName,
    /// In which duty.
    pub duty_index: usize,
    /// On which entry of `fitted`, if it is about one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fitted_index: Option<usize>,
    /// How much of the limit is used, 1 at the limit.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub utilization: Option<Finite>,
}

/// How a check stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum CheckStatus {
    /// The limit is kept.
    Met,
    /// The limit is kept, but nearly reached.
    NearLimit,
    /// The limit is not provably kept.
    NotMet,
    /// Inputs are missing.
    NotAssessed,
    /// Inputs are missing, and the caller gave a reason to go without.
    Waived,
}

impl From<Status> for CheckStatus {
    fn from(status: Status) -> Self {
        match status {
            Status::Met => Self::Met,
            Status::NearLimit => Self::NearLimit,
            Status::NotMet => Self::NotMet,
            Status::NotAssessed => Self::NotAssessed,
            Status::Waived => Self::Waived,
        }
    }
}

/// A check of one duty, at its worst.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct Check {
    /// Which.
    pub code: CheckName,
    /// In which duty.
    pub duty_index: usize,
    /// The caller's name for the duty.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub duty_name: Option<String>,
    /// On which entry of `fitted`, if it is about one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fitted_index: Option<usize>,
    /// How it stands.
    pub status: CheckStatus,
    /// In which friction case it is worst, if that matters.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub friction_case: Option<FrictionCase>,
    /// True if it is worst with the linings as hot as the duties make them.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub hot: Option<bool>,
    /// The value found; absent if it has no end.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub actual: Option<AnyAmount>,
    /// The limit it was held against.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub limit: Option<AnyAmount>,
    /// How much of the limit is used, 1 at the limit whichever way it runs.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub utilization: Option<Finite>,
    /// The inputs that would let it be assessed.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub missing: Option<Vec<String>>,
    /// One sentence for people.
    pub detail: String,
}

/// The numbers behind the checks of a duty.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DutyResult {
    /// Which duty.
    pub duty_index: usize,
    /// The caller's name for it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub duty_name: Option<String>,
    /// What it is: the kind given in the request.
    pub kind: &'static str,
    /// Its stops, once per friction case; a rule may ask for several speeds.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub stops: Vec<StopResult>,
    /// Its holds; a rule may ask for two, facing up and down.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub holds: Vec<HoldResult>,
    /// Its descents, once per friction case.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub descents: Vec<DescentResult>,
    /// The brakes that act, where something is known of them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub fitted: Vec<FittedResult>,
}

/// A stop at one friction. Of a shaft, angles stand in the place of distances.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct StopResult {
    /// Which.
    pub friction_case: FrictionCase,
    /// True if the linings are as hot as the duties make them.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub hot: Option<bool>,
    /// Speed at the start.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub initial_speed: Option<Speed>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub initial_rotational_speed: Option<RotationalSpeed>,
    /// Whether the final speed is reached. If not, there are no times and distances.
    pub reaches_final_speed: bool,
    /// Distance in all, reaction included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_distance: Option<Length>,
    /// Angle in all, of a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_angle: Option<Angle>,
    /// Time in all, reaction included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub total_time: Option<Time>,
    /// From the first torque on.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub mean_deceleration: Option<Acceleration>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub mean_angular_deceleration: Option<AngularAcceleration>,
    /// Highest while torque acts.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_deceleration: Option<Acceleration>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_angular_deceleration: Option<AngularAcceleration>,
    /// Taken up by all brakes.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub brake_energy: Option<Energy>,
}

/// A hold. Of a shaft, torques stand in the place of forces.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct HoldResult {
    /// At which friction.
    pub friction_case: FrictionCase,
    /// True if the linings are as hot as the duties make them.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub hot: Option<bool>,
    /// Slope that a vehicle stands on.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// What must be held, along the way.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub required_force: Option<Force>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub required_torque: Option<Torque>,
    /// What the brakes hold, along the way.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub available_force: Option<Force>,
    /// The same for a shaft.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub available_torque: Option<Torque>,
}

/// A descent at one friction.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DescentResult {
    /// Which.
    pub friction_case: FrictionCase,
    /// How long it takes.
    pub time: Time,
    /// Force that drives.
    pub driving_force: Force,
    /// Brake force at full application, the linings as hot as they end.
    pub available_force: Force,
    /// Power of all brakes.
    pub power: Power,
}

/// One brake of an entry in a duty.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FittedResult {
    /// Which entry of `fitted`.
    pub fitted_index: usize,
    /// Highest bulk temperature of its disc, over the friction cases.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_bulk_temperature: Option<Temperature>,
    /// Highest temperature of the rubbed surface.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub peak_surface_temperature: Option<Temperature>,
    /// Friction over that of the data sheet, where the duty was judged hot.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub hot_friction_factor: Option<Finite>,
}

/// What turns an outcome into its wire form.
#[derive(Debug)]
pub struct Report<'a> {
    /// The request's record.
    pub recorded: Recorded<'a>,
    /// The duties as given, for their names.
    pub duties: &'a [Duty],
    /// What the machine's coordinate measures.
    pub coordinate: Coordinate,
}

impl Report<'_> {
    const fn units(&self) -> ReportUnits {
        self.recorded.report_units
    }

    fn is_angle(&self) -> bool {
        self.coordinate == Coordinate::Angle
    }

    fn name(&self, duty_index: usize) -> Option<String> {
        self.duties.get(duty_index).and_then(Duty::name).map(str::to_owned)
    }

    /// All results.
    #[must_use]
    pub fn results(&self, outcome: &Outcome) -> SpecCheckResults {
        SpecCheckResults {
            verdict: outcome.verdict.into(),
            governing: governing(outcome),
            checks: self.checks(outcome),
            duties: outcome
                .duties
                .iter()
                .enumerate()
                .map(|(index, numbers)| self.duty(index, numbers))
                .collect(),
        }
    }

    /// Every check.
    #[must_use]
    pub fn checks(&self, outcome: &Outcome) -> Vec<Check> {
        let checks = outcome.checks.iter().zip(&outcome.statuses);
        checks.map(|(check, status)| self.check(check, *status)).collect()
    }

    fn check(&self, check: &Judged, status: Status) -> Check {
        let compared = check.compared();
        let amount = |amount| AnyAmount::report(amount, self.units());
        let missing = check.missing().iter().map(|subject| self.recorded.locate(subject));
        Check {
            code: check.code.into(),
            duty_index: check.duty_index,
            duty_name: self.name(check.duty_index),
            fitted_index: check.fitted_index,
            status: status.into(),
            friction_case: check.friction_case.map(Into::into),
            hot: check.hot.then_some(true),
            actual: compared.and_then(|compared| compared.actual).map(amount),
            limit: compared.and_then(|compared| compared.limit).map(amount),
            utilization: compared.and_then(|compared| compared.utilization).map(Finite),
            missing: (missing.len() > 0).then(|| missing.collect()),
            detail: spec_check::detail(check, status),
        }
    }

    fn duty(&self, duty_index: usize, numbers: &DutyNumbers) -> DutyResult {
        DutyResult {
            duty_index,
            duty_name: self.name(duty_index),
            kind: self.duties.get(duty_index).map_or("", Duty::kind),
            stops: numbers.stops.iter().map(|stop| self.stop(stop)).collect(),
            holds: numbers.holds.iter().map(|hold| self.hold(hold)).collect(),
            descents: numbers.descents.iter().map(|descent| self.descent(descent)).collect(),
            fitted: numbers
                .fitted
                .iter()
                .filter(|one| one.peak_bulk.is_some() || one.hot_factor.is_some())
                .map(|one| FittedResult {
                    fitted_index: one.fitted_index,
                    peak_bulk_temperature: one
                        .peak_bulk
                        .map(|peak| Temperature::report_si(peak, self.units())),
                    peak_surface_temperature: one
                        .peak_surface
                        .map(|peak| Temperature::report_si(peak, self.units())),
                    hot_friction_factor: one.hot_factor.map(Finite),
                })
                .collect(),
        }
    }

    fn stop(&self, stop: &StopNumbers) -> StopResult {
        let (units, is_angle) = (self.units(), self.is_angle());
        let way = |value: Option<f64>| value.filter(|_| !is_angle);
        let angle = |value: Option<f64>| value.filter(|_| is_angle);
        let distance = stop.total.map(|(distance, _)| distance);
        let acceleration = |value| way(value).map(|value| Acceleration::report_si(value, units));
        let angular =
            |value| angle(value).map(|value| AngularAcceleration::report_si(value, units));
        StopResult {
            friction_case: stop.friction_case.into(),
            hot: stop.hot.then_some(true),
            initial_speed: way(Some(stop.initial_speed))
                .map(|speed| Speed::report_si(speed, units)),
            initial_rotational_speed: angle(Some(stop.initial_speed))
                .map(|speed| RotationalSpeed::report_si(speed, units)),
            reaches_final_speed: stop.total.is_some(),
            total_distance: way(distance).map(|way| Length::report_travel(way, units)),
            total_angle: angle(distance).map(|angle| Angle::report_si(angle, units)),
            total_time: stop.total.map(|(_, time)| Time::report_si(time, units)),
            mean_deceleration: acceleration(stop.mean_deceleration),
            mean_angular_deceleration: angular(stop.mean_deceleration),
            peak_deceleration: acceleration(stop.peak_deceleration),
            peak_angular_deceleration: angular(stop.peak_deceleration),
            brake_energy: stop.brake_energy.map(|energy| Energy::report_si(energy, units)),
        }
    }

    fn hold(&self, hold: &HoldNumbers) -> HoldResult {
        let (units, is_angle) = (self.units(), self.is_angle());
        let force = |value: f64| (!is_angle).then(|| Force::report_si(value, units));
        let torque = |value: f64| is_angle.then(|| Torque::report_si(value, units));
        HoldResult {
            friction_case: hold.friction_case.into(),
            hot: hold.hot.then_some(true),
            grade: hold.grade.map(|grade| Grade::report(grade, units)),
            required_force: force(hold.needed),
            required_torque: torque(hold.needed),
            available_force: force(hold.available),
            available_torque: torque(hold.available),
        }
    }

    fn descent(&self, descent: &DescentNumbers) -> DescentResult {
        let units = self.units();
        DescentResult {
            friction_case: descent.friction_case.into(),
            time: Time::report_si(descent.time, units),
            driving_force: Force::report_si(descent.driving, units),
            available_force: Force::report_si(descent.available, units),
            power: Power::report_si(descent.power, units),
        }
    }
}

/// The check that governs.
#[must_use]
pub fn governing(outcome: &Outcome) -> Option<Governing> {
    let check = outcome.checks.get(outcome.governing?)?;
    let utilization = check.compared().and_then(|compared| compared.utilization);
    Some(Governing {
        code: check.code.into(),
        duty_index: check.duty_index,
        fitted_index: check.fitted_index,
        utilization: utilization.map(Finite),
    })
}
