//! `GET /v1/procedures`: the published test cycles.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::measure::{Acceleration, Finite, Grade, Length, ReportUnits, Speed, Time};
use crate::api::problem::Problem;
use crate::data::procedures::{self, ProcedureRow, ProcedureStep as Step, Spacing};

/// The test cycles that requests may name.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ProcedureList {
    /// In the order of the table.
    pub items: Vec<ProcedureItem>,
}

/// A published test cycle: its parameters. The requirement's own text decides; a calculation does not replace the test.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ProcedureItem {
    /// Identifier.
    pub id: String,
    /// Name for people.
    pub name: String,
    /// Who published it.
    pub source: String,
    /// How it was found.
    pub provenance: Provenance,
    /// What else belongs to it.
    pub note: String,
    /// What is done, in order.
    pub steps: Vec<ProcedureStep>,
}

/// What a step of a test cycle does.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum ProcedureStepKind {
    /// Stops or snubs that are alike: `count`, `initial_speed`, `final_share`, `deceleration` and one of `interval` and
    /// `spacing` are there.
    Stops,
    /// A descent at a speed held by the brakes: `speed`, `grade` and `distance` are there.
    Descent,
}

/// A step of a test cycle. Which members are there depends on its kind.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ProcedureStep {
    /// What it does.
    pub kind: ProcedureStepKind,
    /// How many stops.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub count: Option<u32>,
    /// Speed at the start of each.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub initial_speed: Option<Speed>,
    /// Share of the vehicle's maximum speed that is taken instead if it is lower.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub share_of_max_speed: Option<Finite>,
    /// Speed at the end of each as a share of that at its start.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub final_share: Option<Finite>,
    /// Deceleration that the operator holds.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub deceleration: Option<Acceleration>,
    /// From the start of one stop to that of the next.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub interval: Option<Time>,
    /// The same between the last stop and the next step.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub interval_to_next_step: Option<Time>,
    /// Way from the start of one stop to that of the next.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub spacing: Option<Length>,
    /// Speed held on the descent.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub speed: Option<Speed>,
    /// Slope of the descent, negative downhill.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// Way of the descent.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub distance: Option<Length>,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = ProcedureList { items: items() };
    Catalog::new("procedures", &list, &list.items, |item| &item.id)
});

/// List the published test cycles.
///
/// Sequences of stops and descents as published. A `procedure` event of a duty cycle names one by its `id`.
#[utoipa::path(
    get, path = "/procedures", tag = "Catalog", operation_id = "procedures",
    responses((status = OK, description = "Every test cycle.", body = ProcedureList)),
)]
pub(super) async fn procedures(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a published test cycle.
///
/// One row of the list.
#[utoipa::path(
    get, path = "/procedures/{id}", tag = "Catalog", operation_id = "procedure",
    params(("id" = String, Path, description = "Identifier of the test cycle.", example = "us_571_135_heating_snubs")),
    responses((status = OK, description = "The test cycle.", body = ProcedureItem)),
)]
pub(super) async fn procedure(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<ProcedureItem> {
    procedures::all().iter().map(item).collect()
}

fn item(row: &ProcedureRow) -> ProcedureItem {
    ProcedureItem {
        id: row.id.clone(),
        name: row.name.clone(),
        source: row.source.clone(),
        provenance: row.provenance.into(),
        note: row.note.clone(),
        steps: row.steps.iter().map(step).collect(),
    }
}

const fn empty(kind: ProcedureStepKind) -> ProcedureStep {
    ProcedureStep {
        kind,
        count: None,
        initial_speed: None,
        share_of_max_speed: None,
        final_share: None,
        deceleration: None,
        interval: None,
        interval_to_next_step: None,
        spacing: None,
        speed: None,
        grade: None,
        distance: None,
    }
}

fn step(step: &Step) -> ProcedureStep {
    let speed = |si| Some(Speed::report_si(si, ReportUnits::Si));
    let travel = |metres| Some(Length::report_travel(metres, ReportUnits::Si));
    match *step {
        Step::Stops {
            count,
            initial_speed,
            share_of_max_speed,
            final_share,
            deceleration,
            spacing,
            then,
        } => ProcedureStep {
            count: Some(count),
            initial_speed: speed(initial_speed),
            share_of_max_speed: share_of_max_speed.map(Finite),
            final_share: Some(Finite(final_share)),
            deceleration: Some(Acceleration::report_si(deceleration, ReportUnits::Si)),
            interval: interval(spacing),
            interval_to_next_step: interval(then),
            spacing: way(spacing).and_then(travel),
            ..empty(ProcedureStepKind::Stops)
        },
        Step::Descent { speed: held, grade, distance } => ProcedureStep {
            speed: speed(held),
            grade: Some(Grade::report_si(grade, ReportUnits::Si)),
            distance: travel(distance),
            ..empty(ProcedureStepKind::Descent)
        },
    }
}

fn interval(spacing: Spacing) -> Option<Time> {
    match spacing {
        Spacing::Time(seconds) => Some(Time::report_si(seconds, ReportUnits::Si)),
        Spacing::Distance(_) => None,
    }
}

const fn way(spacing: Spacing) -> Option<f64> {
    match spacing {
        Spacing::Distance(metres) => Some(metres),
        Spacing::Time(_) => None,
    }
}
