//! `POST /v1/selection`: a client's own candidates judged for one application and ranked.

pub mod answer;
pub mod candidates;
mod digest;
pub mod judge;

use std::sync::{Arc, LazyLock};

use axum::body::Body;
use axum::extract::{FromRequest as _, Request};
use axum::http::Response;
use axum::response::IntoResponse as _;
use futures_util::{StreamExt as _, stream};
use serde::{Deserialize, Serialize};
use tokio::sync::Semaphore;
use utoipa::ToSchema;

use answer::{Gathered, SelectionAnswer};
use candidates::Candidates;
use judge::Selection;

use super::block::fitted::Fitted;
use super::block::machine::Machine;
use super::spec_check::application::Waiver;
use super::spec_check::duty::Duty;
use crate::api::background;
use crate::api::extract::{Answer, Undecoded};
use crate::api::measure::{ReportUnits, Temperature};
use crate::api::metrics::busy;
use crate::api::problem::Problem;
use crate::calc::case::selection;

/// Candidates of one call at most.
pub const MOST_CANDIDATES: usize = 10_000;

/// Largest body: room for that many candidates of the usual size.
pub const BODY_LIMIT: usize = 16 * 1024 * 1024; // bytes

/// Calls at once; one more is told to come again. Each may hold its body and what was found of its candidates.
const MOST_AT_ONCE: usize = 16;

/// Candidates that are judged in one go: with common duties they take a few milliseconds.
const SLICE: usize = 16;

static PLACES: LazyLock<Semaphore> = LazyLock::new(|| Semaphore::new(MOST_AT_ONCE));

/// Candidates and what they are for.
#[derive(Debug, Clone, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct SelectionRequest {
    /// The caller's own reference, echoed in `record.ref` and left out of the digest.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Units of the answer, `si` if left out.
    #[schema(nullable = false)]
    pub report_units: Option<ReportUnits>,
    /// What the brakes are for.
    pub application: SelectionApplication,
    /// The choices. A wrong one is listed as rejected and does not disturb the others.
    pub candidates: Candidates,
    /// What comes first among those that pass, `least_oversized` if left out.
    #[schema(nullable = false)]
    pub rank_by: Option<RankBy>,
}

/// What brakes are for: a machine and what they are put through. The members are those of `POST /v1/spec-check`.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct SelectionApplication {
    /// What is braked.
    pub machine: Machine,
    /// What the brakes are put through. At most 10 repeated stops, descents and procedures, which times their fitted
    /// entries come to at most 100.
    #[schema(min_items = 1, max_items = 50)]
    pub duties: Vec<Duty>,
    /// Temperature of the air, 20 degC if left out.
    #[schema(nullable = false)]
    pub ambient_temperature: Option<Temperature>,
    /// From this share of a limit on, a result counts as near it: above 0, at most 1; 0.9 if left out.
    #[schema(nullable = false)]
    pub near_limit_from: Option<f64>,
    /// Checks that need not be assessed, with the reasons; they hold for all candidates.
    #[schema(nullable = false, max_items = 100)]
    pub waive: Option<Vec<Waiver>>,
}

/// A choice of brakes.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Candidate {
    /// The caller's own reference, echoed; two candidates may have the same.
    #[serde(rename = "ref")]
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 1000>")]
    #[schema(nullable = false, max_length = 1000)]
    pub reference: Option<String>,
    /// Its brakes, each in all its parts.
    #[schema(min_items = 1, max_items = 100)]
    pub fitted: Vec<Fitted>,
}

/// What comes first among the candidates that pass.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Deserialize, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum RankBy {
    /// The smallest margin: nothing is larger than it need be.
    #[default]
    LeastOversized,
    /// The largest margin.
    MostMargin,
}

impl RankBy {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::LeastOversized => "least_oversized",
            Self::MostMargin => "most_margin",
        }
    }
}

impl From<RankBy> for selection::RankBy {
    fn from(by: RankBy) -> Self {
        match by {
            RankBy::LeastOversized => Self::LeastOversized,
            RankBy::MostMargin => Self::MostMargin,
        }
    }
}

/// Rank candidates for an application.
///
/// Judges each candidate as `POST /v1/spec-check` does and puts them in order: passing before incomplete before failing;
/// those that pass by `rank_by`, the others by the most margin, equal ones in the order given. The margin is 1 less the
/// utilization of the check that governs. A candidate that is no valid choice is `rejected` with its problem; a wrong
/// application is refused as a whole. The body may have 16777216 bytes.
#[utoipa::path(
    post, path = "/selection", tag = "Calculations", operation_id = "selection",
    request_body = SelectionRequest,
    responses((status = OK, description = "The candidates, ranked.", body = SelectionAnswer)),
)]
pub(super) async fn selection(request: Request) -> Result<Response<Body>, Problem> {
    // Before the body is read: it may be large.
    let _place = PLACES.try_acquire().map_err(|_| busy())?;
    let Undecoded(body) = Undecoded::from_request(request, &()).await?;
    let selection = Arc::new(background::begin(move |_| Selection::read(&body)).await??);
    let gathered = judge_all(&selection).await?;
    background::begin(move |_| Answer(selection.answer(gathered)).into_response()).await
}

/// Judges the candidates on all cores, a few slices at a time, and gathers what they come to in order.
async fn judge_all(selection: &Arc<Selection>) -> Result<Gathered, Problem> {
    let count = selection.count();
    let slices = (0..count).step_by(SLICE).map(|start| start..count.min(start + SLICE));
    let judged = stream::iter(slices).map(|slice| {
        let selection = Arc::clone(selection);
        background::begin(move |wanted| selection.judge(slice, wanted))
    });
    let mut judged = judged.buffered(background::pieces_at_once());
    let mut gathered = selection.gather();
    while let Some(slice) = judged.next().await {
        gathered.add(slice?);
    }
    Ok(gathered)
}
