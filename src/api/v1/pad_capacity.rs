//! `POST /v1/pad-capacity`: what a pad carries.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::block::brake::PressureDistribution;
use super::block::lining::Lining;
use super::block::pad::Pad;
use crate::api::extract::{Answer, Json};
use crate::api::measure::{Area, Finite, Force, Length, Pressure, ReportUnits, Torque};
use crate::api::parse::{At, Reader, RecordedDefault};
use crate::api::problem::Problem;
use crate::api::record::{self, CautionText, FrictionCase, Record, Recorded, Warning};
use crate::calc::case::pad_capacity::{self, CaseOutcome, Input, Outcome};

/// A pad and its lining.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PadCapacityRequest {
    /// The caller's own reference, echoed in `record.ref` and left out of the digest.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Units of the answer, `si` if left out.
    #[schema(nullable = false)]
    pub report_units: Option<ReportUnits>,
    /// One pad.
    pub pad: Pad,
    /// Its friction material.
    pub lining: Lining,
    /// Friction faces, 1 to 1000; 2 if left out: one caliper with two pads.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub faces: Option<u32>,
    /// How the pressure spreads over the pad.
    #[schema(nullable = false)]
    pub pressure_distribution: Option<PressureDistribution>,
    /// Force of one pad on the disc. Left out: the force at which the peak pressure equals the lining's
    /// `max_pressure`.
    #[schema(nullable = false)]
    pub clamp_force: Option<Force>,
}

/// What the pad carries.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct PadCapacityAnswer {
    /// The results.
    pub results: PadCapacityResults,
    /// Remarks on the results.
    pub warnings: Vec<Warning>,
    /// Cautions to be shown with the results.
    pub cautions: Vec<CautionText>,
    /// How the answer was found.
    pub record: Record,
}

/// Force, pressure and torque of a pad.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct PadCapacityResults {
    /// Area of one pad.
    pub pad_area: Area,
    /// Radius at which the friction force acts.
    pub effective_radius: Length,
    /// Distance of the pressure's center from the disc axis: where the piston should push.
    pub pressure_center_radius: Length,
    /// Force of one pad on the disc.
    pub clamp_force: Force,
    /// Mean pressure on the pad.
    pub mean_pressure: Pressure,
    /// Highest pressure on the pad.
    pub peak_pressure: Pressure,
    /// What depends on friction, once per case.
    pub friction_cases: Vec<PadCapacityCase>,
}

/// Friction force and torque at one friction.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct PadCapacityCase {
    /// Which.
    pub friction_case: FrictionCase,
    /// Friction coefficient.
    #[schema(value_type = f64)]
    pub coefficient: Finite,
    /// Friction force of one face.
    pub friction_force_per_face: Force,
    /// Torque of one face.
    pub torque_per_face: Torque,
    /// Torque of all faces.
    pub torque: Torque,
}

/// Compute what a pad carries.
///
/// Force, pressure and torque of a pad at a clamp force, or at the one its lining allows. The torque comes once
/// per friction case.
#[utoipa::path(
    post, path = "/pad-capacity", tag = "Calculations", operation_id = "pad_capacity",
    responses((status = OK, description = "What the pad carries.", body = PadCapacityAnswer)),
)]
pub(super) async fn pad_capacity(
    request: Json<PadCapacityRequest>,
) -> Result<Answer<PadCapacityAnswer>, Problem> {
    let (input, defaults) = request.value.read()?;
    let outcome = pad_capacity::evaluate(&input).map_err(|faults| record::no_answer(&faults))?;
    Ok(Answer(request.value.answer(&request.body, &outcome, defaults)))
}

impl PadCapacityRequest {
    fn read(&self) -> Result<(Input, Vec<RecordedDefault>), Problem> {
        let (at, mut reader) = (At::ROOT, Reader::new());
        let pad = self.pad.read(&at.member("pad"), &mut reader);
        let lining = self.lining.read(&at.member("lining"), &mut reader);
        let faces = reader.count(&at.member("faces"), self.faces, 2);
        let at_distribution = at.member("pressure_distribution");
        let pressure_distribution =
            PressureDistribution::read(self.pressure_distribution, &at_distribution, &mut reader);
        let clamp_force = reader.optional(&at.member("clamp_force"), self.clamp_force.as_ref());
        reader.take(&at, pad_capacity::faults(faces, clamp_force).into_result(()));
        let input = pad.zip(lining);
        reader.finish(input.map(|(pad, lining)| Input {
            pad,
            lining,
            faces,
            pressure_distribution,
            clamp_force,
        }))
    }

    fn answer(
        &self,
        body: &[u8],
        outcome: &Outcome,
        defaults: Vec<RecordedDefault>,
    ) -> PadCapacityAnswer {
        let report_units = self.report_units.unwrap_or_default();
        let recorded =
            Recorded { body, reference: self.reference.as_deref(), brake: "", report_units };
        PadCapacityAnswer {
            results: PadCapacityResults::new(outcome, report_units),
            warnings: recorded.warnings(&outcome.remarks),
            cautions: record::cautions(&outcome.remarks),
            record: recorded.record(outcome.remarks.methods(), defaults),
        }
    }
}

impl PadCapacityResults {
    fn new(outcome: &Outcome, units: ReportUnits) -> Self {
        Self {
            pad_area: Area::report(outcome.pad_area, units),
            effective_radius: Length::report(outcome.effective_radius, units),
            pressure_center_radius: Length::report(outcome.pressure_center_radius, units),
            clamp_force: Force::report(outcome.clamp_force, units),
            mean_pressure: Pressure::report(outcome.mean_pressure, units),
            peak_pressure: Pressure::report(outcome.peak_pressure, units),
            friction_cases: outcome
                .friction_cases
                .iter()
                .map(|case| PadCapacityCase::new(case, units))
                .collect(),
        }
    }
}

impl PadCapacityCase {
    fn new(case: &CaseOutcome, units: ReportUnits) -> Self {
        Self {
            friction_case: case.friction_case.into(),
            coefficient: Finite(case.coefficient),
            friction_force_per_face: Force::report(case.friction_force_per_face, units),
            torque_per_face: Torque::report(case.torque_per_face, units),
            torque: Torque::report(case.torque, units),
        }
    }
}
