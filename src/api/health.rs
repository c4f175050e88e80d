//! Whether the service lives, and whether it takes requests.

use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};

use axum::Extension;
use serde::Serialize;
use utoipa::ToSchema;

use super::extract::Answer;
use super::problem::{Problem, ProblemKind};

/// Whether this replica takes new requests; shared with whoever shuts it down.
#[derive(Debug, Clone, Default)]
pub struct Readiness {
    draining: Arc<AtomicBool>,
}

impl Readiness {
    /// Makes the service report that it is not ready, for good.
    pub fn drain(&self) {
        self.draining.store(true, Ordering::Relaxed);
    }

    /// Whether [`Self::drain`] was called.
    #[must_use]
    pub fn is_draining(&self) -> bool {
        self.draining.load(Ordering::Relaxed)
    }
}

/// The state of a replica.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
pub struct Health {
    /// The state.
    status: HealthStatus,
}

/// What a healthy replica says.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum HealthStatus {
    /// It can answer.
    Ok,
}

/// Tell whether the process lives.
///
/// Answers as long as the process can answer anything; a replica that does not should be restarted.
#[utoipa::path(
    get, path = "/health/live", tag = "Service", operation_id = "health_live",
    responses((status = OK, description = "The process lives.", body = Health)),
)]
pub(super) async fn live() -> Answer<Health> {
    Answer(Health { status: HealthStatus::Ok })
}

/// Tell whether the service takes requests.
///
/// 503 while it drains, that is after it was told to stop: send requests to another replica then.
#[utoipa::path(
    get, path = "/health/ready", tag = "Service", operation_id = "health_ready",
    responses((status = OK, description = "The service takes requests.", body = Health)),
)]
pub(super) async fn ready(
    Extension(readiness): Extension<Readiness>,
) -> Result<Answer<Health>, Problem> {
    if readiness.is_draining() {
        return Err(Problem::of_kind(ProblemKind::Draining));
    }
    Ok(Answer(Health { status: HealthStatus::Ok }))
}
