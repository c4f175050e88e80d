//! The gate: a known client, within its share, and a place to work at.

use std::num::NonZeroU32;
use std::sync::Arc;

use axum::body::Body;
use axum::extract::{Request, State};
use axum::http::header::{CACHE_CONTROL, WWW_AUTHENTICATE};
use axum::http::{HeaderValue, Response};
use axum::middleware::Next;
use axum::response::IntoResponse;
use tokio::sync::{Semaphore, SemaphorePermit};

use super::client::Peer;
use super::keys::KeyRing;
use super::rate::{RateLimit, Standing};
use crate::api::metrics::{self, Turned};
use crate::api::problem::{Problem, ProblemKind};

/// Always answered, to everybody: a busy replica is not a dead one.
const HEALTH: &str = "/health/";

/// What a client must be able to read to learn how to use a key. Everything else needs one, if there are keys.
const READABLE: [&str; 3] = ["/docs", "/problems/", "/openapi"];

/// How to come in (RFC 6750, 3).
const CHALLENGE: HeaderValue = HeaderValue::from_static("Bearer realm=\"brakewright\"");
const CHALLENGE_AGAIN: HeaderValue =
    HeaderValue::from_static("Bearer realm=\"brakewright\", error=\"invalid_token\"");

/// Answers that need a key are nothing that a shared cache may hand on.
const FOR_THIS_CLIENT: HeaderValue =
    HeaderValue::from_static("private, max-age=300, must-revalidate");

/// What the gate asks for.
#[derive(Debug)]
pub(in crate::api) struct Gate {
    keys: Option<KeyRing>,
    rate: Option<RateLimit>,
    places: Semaphore,
}

impl Gate {
    /// A gate to `places` places. Without keys it is open to all, without a limit a client may ask at will.
    pub(in crate::api) fn new(
        keys: Option<KeyRing>,
        per_minute: Option<NonZeroU32>,
        places: usize,
    ) -> Self {
        let places = Semaphore::new(places.min(Semaphore::MAX_PERMITS));
        Self { keys, rate: per_minute.map(RateLimit::new), places }
    }

    /// Decides; beside that says what is left of the client's share.
    fn decide(
        &self,
        request: &Request,
    ) -> (Option<Standing>, Result<SemaphorePermit<'_>, Problem>) {
        let holder = self.keys.as_ref().and_then(|keys| keys.holder(request.headers()));
        let peer = request.extensions().get::<Peer>().copied();
        let mut standing = None;
        if let Some(rate) = &self.rate {
            let (left, counted) = rate.count(holder, peer);
            standing = Some(left);
            if let Err(problem) = counted {
                metrics::count_turned_away(Turned::RateLimited);
                return (standing, Err(problem));
            }
        }
        if self.keys.is_some() && holder.is_none() && !is_readable(request.uri().path()) {
            metrics::count_turned_away(Turned::Unauthorized);
            return (standing, Err(unauthorized(request)));
        }
        // A request that waits for a place helps nobody; it is told to come again.
        let place = self.places.try_acquire().map_err(|_| {
            metrics::count_turned_away(Turned::Busy);
            Problem::of_kind(ProblemKind::Overloaded)
        });
        (standing, place)
    }
}

fn is_readable(path: &str) -> bool {
    path == "/" || READABLE.iter().any(|readable| path.starts_with(readable))
}

fn unauthorized(request: &Request) -> Problem {
    let tried = request.headers().contains_key(axum::http::header::AUTHORIZATION);
    let challenge = if tried { CHALLENGE_AGAIN } else { CHALLENGE };
    Problem::of_kind(ProblemKind::Unauthorized).with_header(WWW_AUTHENTICATE, challenge)
}

/// Lets a request in, or says why not.
pub(in crate::api) async fn admit(
    State(gate): State<Arc<Gate>>,
    request: Request,
    next: Next,
) -> Response<Body> {
    if request.uri().path().starts_with(HEALTH) {
        return next.run(request).await;
    }
    let needs_key = gate.keys.is_some() && !is_readable(request.uri().path());
    let (standing, place) = gate.decide(&request);
    let mut response = match place {
        Ok(_place) => next.run(request).await,
        Err(problem) => problem.into_response(),
    };
    let headers = response.headers_mut();
    if needs_key && headers.contains_key(CACHE_CONTROL) {
        headers.insert(CACHE_CONTROL, FOR_THIS_CLIENT);
    }
    if let Some(standing) = standing {
        standing.tell(headers);
    }
    response
}
