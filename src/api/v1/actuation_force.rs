//! `POST /v1/actuation-force`: what must press for a torque.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::block::brake::Brake;
use crate::api::extract::{Answer, Json};
use crate::api::measure::{Finite, Force, Length, Pressure, ReportUnits, Torque, Volume};
use crate::api::parse::{At, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{self, CautionText, FrictionCase, Record, Recorded, Warning};
use crate::calc::case::actuation_force::{self, CaseOutcome, Input, Outcome};

/// A brake and the torque demanded of it.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ActuationForceRequest {
    /// The caller's own reference, echoed in `record.ref` and left out of the digest.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Units of the answer, `si` if left out.
    #[schema(nullable = false)]
    pub report_units: Option<ReportUnits>,
    /// The brake. Leave the input to be found out of its actuation; its maximum may be there.
    pub brake: Brake,
    /// Torque demanded of this one brake.
    pub torque: Torque,
}

/// What must press.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ActuationForceAnswer {
    /// The results.
    pub results: ActuationForceResults,
    /// Remarks on the results.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: Record,
}

/// What must press, once per friction case.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ActuationForceResults {
    /// The cases.
    pub friction_cases: Vec<ActuationForceCase>,
}

/// What must press at one friction. A member is there when the actuation given lets it be computed.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ActuationForceCase {
    /// Which.
    pub friction_case: FrictionCase,
    /// Friction coefficient.
    #[schema(value_type = f64)]
    pub coefficient: Finite,
    /// Force of one pad on the disc that gives the torque.
    pub clamp_force: Force,
    /// Mean pressure on the pad; of a spring brake with new pads.
    pub mean_pressure: Pressure,
    /// Highest pressure on the pad; of a spring brake with new pads.
    pub peak_pressure: Pressure,
    /// Highest pressure over the lining's maximum, 1 at the limit.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = Option<f64>)]
    pub pressure_utilization: Option<Finite>,
    /// Pressure at the caliper.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub line_pressure: Option<Pressure>,
    /// Force of the operator.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub operator_force: Option<Force>,
    /// Air pressure at the chamber.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub air_pressure: Option<Pressure>,
    /// Spring force with new pads that still gives the torque when they are worn.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub spring_force: Option<Force>,
    /// Pressure that opens the spring brake, at new pads.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub release_pressure: Option<Pressure>,
    /// Fluid that one brake takes up.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fluid_volume: Option<Volume>,
    /// Travel of the control.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub operator_stroke: Option<Length>,
}

/// Find what must press for a torque.
///
/// Goes back through the actuation from the torque of one brake to the input that was not given. Where a maximum
/// is too low, a warning says by how much it falls short.
#[utoipa::path(
    post, path = "/actuation-force", tag = "Calculations", operation_id = "actuation_force",
    responses((status = OK, description = "What must press.", body = ActuationForceAnswer)),
)]
pub(super) async fn actuation_force(
    request: Json<ActuationForceRequest>,
) -> Result<Answer<ActuationForceAnswer>, Problem> {
    let (input, defaults) = request.value.read()?;
    let outcome = actuation_force::evaluate(&input).map_err(|faults| record::no_answer(&faults))?;
    Ok(Answer(request.value.answer(&request.body, &outcome, defaults)))
}

impl ActuationForceRequest {
    fn read(&self) -> Result<(Input, Vec<RecordedDefault>), Problem> {
        let (at, mut reader) = (At::ROOT, Reader::new());
        let brake = self.brake.read(&at.member("brake"), &mut reader);
        let torque = reader.quantity(&at.member("torque"), &self.torque);
        let actuation = brake.as_ref().and_then(|brake| brake.parts().actuation.as_ref());
        reader.take(&at, actuation_force::faults(torque, actuation).into_result(()));
        reader.finish(brake.map(|brake| Input { brake, torque }))
    }

    fn answer(
        &self,
        body: &[u8],
        outcome: &Outcome,
        defaults: Vec<RecordedDefault>,
    ) -> ActuationForceAnswer {
        let report_units = self.report_units.unwrap_or_default();
        let recorded =
            Recorded { body, reference: self.reference.as_deref(), brake: "brake", report_units };
        let cases = outcome.friction_cases.iter();
        let friction_cases =
            cases.map(|case| ActuationForceCase::new(case, report_units)).collect();
        ActuationForceAnswer {
            results: ActuationForceResults { friction_cases },
            warnings: recorded.warnings(&outcome.remarks),
            cautions: record::cautions(&outcome.remarks),
            record: recorded.record(outcome.remarks.methods(), defaults),
        }
    }
}

impl ActuationForceCase {
    fn new(case: &CaseOutcome, units: ReportUnits) -> Self {
        let needed = case.needed;
        let force = |force| Force::report(force, units);
        let pressure = |pressure| Pressure::report(pressure, units);
        Self {
            friction_case: case.friction_case.into(),
            coefficient: Finite(case.coefficient),
            clamp_force: force(case.clamp_force),
            mean_pressure: pressure(case.mean_pressure),
            peak_pressure: pressure(case.peak_pressure),
            pressure_utilization: case.pressure_utilization.map(Finite),
            line_pressure: needed.and_then(|needed| needed.line_pressure).map(pressure),
            operator_force: needed.and_then(|needed| needed.operator_force).map(force),
            air_pressure: needed.and_then(|needed| needed.air_pressure).map(pressure),
            spring_force: needed.and_then(|needed| needed.spring_force).map(force),
            release_pressure: needed.and_then(|needed| needed.release_pressure).map(pressure),
            fluid_volume: needed
                .and_then(|needed| needed.fluid_volume)
                .map(|volume| Volume::report(volume, units)),
            operator_stroke: case.operator_stroke.map(|stroke| Length::report(stroke, units)),
        }
    }
}
