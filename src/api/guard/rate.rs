//! A share of the service for each client, told by the fields of draft-ietf-httpapi-ratelimit-headers-10.

use std::num::NonZeroU32;
use std::sync::atomic::{AtomicU64, Ordering};
use std::time::{Duration, Instant};

use axum::http::header::RETRY_AFTER;
use axum::http::{HeaderMap, HeaderName, HeaderValue};
use governor::clock::{Clock as _, DefaultClock};
use governor::middleware::StateInformationMiddleware;
use governor::state::keyed::HashMapStateStore;
use governor::{Quota, RateLimiter};

use super::client::{Client, Peer};
use super::keys::KeyId;
use crate::api::problem::{Problem, ProblemKind};

/// What the client has left, and when all of it is there again.
pub(in crate::api) const RATE_LIMIT: HeaderName = HeaderName::from_static("ratelimit");

/// What every client has.
pub(in crate::api) const RATE_LIMIT_POLICY: HeaderName =
    HeaderName::from_static("ratelimit-policy");

/// The time for which a share is given.
const WINDOW: Duration = Duration::from_mins(1);

/// More clients than this at once are a crowd.
const CROWD: usize = 50_000;

type Shares =
    RateLimiter<Client, HashMapStateStore<Client>, DefaultClock, StateInformationMiddleware>;

/// How many requests each client may send in a minute; unused ones come back evenly.
#[derive(Debug)]
pub struct RateLimit {
    share: NonZeroU32,
    shares: Shares,
    policy: HeaderValue,
    clock: DefaultClock,
    start: Instant,
    /// The minute, from the start, in which clients were last forgotten.
    swept: AtomicU64,
}

/// What is left to a client.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Standing {
    policy: HeaderValue,
    left: HeaderValue,
}

impl Standing {
    /// Writes it into the head of an answer.
    pub fn tell(self, headers: &mut HeaderMap) {
        headers.insert(RATE_LIMIT_POLICY, self.policy);
        headers.insert(RATE_LIMIT, self.left);
    }
}

impl RateLimit {
    /// A limit of `share` requests a minute for each client.
    #[must_use]
    pub fn new(share: NonZeroU32) -> Self {
        let policy = format!("\"default\";q={share};w={}", WINDOW.as_secs());
        Self {
            share,
            shares: RateLimiter::hashmap(Quota::per_minute(share)).with_middleware(),
            policy: HeaderValue::try_from(policy).unwrap_or(HeaderValue::from_static("")),
            clock: DefaultClock::default(),
            start: Instant::now(),
            swept: AtomicU64::new(0),
        }
    }

    /// Counts a request of a client, and says what is left to it.
    ///
    /// # Errors
    /// 429 if its share is used up.
    pub(in crate::api) fn count(
        &self,
        holder: Option<KeyId>,
        peer: Option<Peer>,
    ) -> (Standing, Result<(), Problem>) {
        self.forget();
        let crowded = self.shares.len() >= CROWD;
        let by_address = if crowded { Client::in_crowd(peer) } else { Client::at(peer) };
        let client = holder.map_or(by_address, Client::Key);
        match self.shares.check_key(&client) {
            Ok(state) => (self.standing(state.remaining_burst_capacity()), Ok(())),
            Err(until) => {
                let wait = until.wait_time_from(self.clock.now());
                let seconds = wait.as_secs() + 1;
                let detail = format!(
                    "{} requests a minute are this client's share; try again in {seconds} s",
                    self.share
                );
                let problem = Problem::new(ProblemKind::TooManyRequests, detail)
                    .with_header(RETRY_AFTER, seconds.into());
                (self.standing(0), Err(problem))
            }
        }
    }

    fn standing(&self, left: u32) -> Standing {
        let used = u64::from(self.share.get().saturating_sub(left));
        let full_again = (used * WINDOW.as_secs()).div_ceil(u64::from(self.share.get()));
        let left = format!("\"default\";r={left};t={full_again}");
        Standing {
            policy: self.policy.clone(),
            left: HeaderValue::try_from(left).unwrap_or(HeaderValue::from_static("")),
        }
    }

    /// Forgets, once a minute, the clients whose share is whole again.
    fn forget(&self) {
        let minute = self.start.elapsed().as_secs() / WINDOW.as_secs();
        let last = self.swept.load(Ordering::Relaxed);
        let ours = minute > last
            && self
                .swept
                .compare_exchange(last, minute, Ordering::Relaxed, Ordering::Relaxed)
                .is_ok();
        if ours {
            self.shares.retain_recent();
        }
    }
}
