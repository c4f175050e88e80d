//! `POST /v1/spec-checks`: spec checks by the thousand, a line each, in a stream.
//!
//! Nothing is computed unless the client takes the answers: its body is read piece by piece, cut into slices of a few
//! lines, and each slice is judged on a thread for such work. A few slices are on their way at a time, and their answers
//! leave in order.

pub mod answer;
mod flow;
pub mod lines;

use std::pin::Pin;
use std::sync::Arc;

use axum::body::Body;
use axum::http::header::CONTENT_TYPE;
use axum::http::{HeaderMap, HeaderValue, Response};
use axum::response::IntoResponse;
use futures_util::StreamExt as _;
use tokio::sync::Semaphore;

use answer::StreamedLine;

use super::spec_check::SpecCheckRequest;
use crate::api::accept::Negotiated;
use crate::api::extract::require_type;
use crate::api::metrics::busy;
use crate::api::problem::Problem;

/// The media types of lines of JSON, both ways. Neither is registered; both are in use.
pub const FORMS: &[&str] = &["application/x-ndjson", "application/jsonl"];

/// Streams at once; one more is told to come again. Each holds a few slices of lines and their answers.
const MOST_STREAMS: usize = 64;

static PLACES: std::sync::LazyLock<Arc<Semaphore>> =
    std::sync::LazyLock::new(|| Arc::new(Semaphore::new(MOST_STREAMS)));

/// Judge many choices of brakes in a stream.
///
/// Lines of JSON in and out, as they come: each line is a request of `POST /v1/spec-check`, each is answered by a line
/// that has its number, in order. A line that is refused does not disturb the others: its answer holds the `problem`,
/// with pointers into the line. Lines are numbered from 1; empty ones count as lines of the text but are not answered.
/// A line may have 1048576 bytes, the stream any number of lines; it is cut off if the client pauses longer than the
/// time limit of requests, or takes no answers. The last line, `end`, has the counts and the cautions; without it the
/// stream was cut off.
#[utoipa::path(
    post, path = "/spec-checks", tag = "Calculations", operation_id = "spec_checks",
    request_body(
        content = SpecCheckRequest, content_type = "application/x-ndjson",
        description = "Requests, one a line. `application/jsonl` is taken, too.",
    ),
    responses((
        status = OK, body = StreamedLine, content_type = "application/x-ndjson",
        description = "Answers, one a line, in the order of the requests; then one line that ends the stream.",
    )),
)]
pub(super) async fn spec_checks(
    Negotiated(form): Negotiated,
    headers: HeaderMap,
    body: Body,
) -> Result<Response<Body>, Problem> {
    require_type(&headers, FORMS)?;
    let place = Arc::clone(&PLACES).try_acquire_owned().map_err(|_| busy())?;
    let mut bytes = body.into_data_stream().peekable();
    // A client that asks before it sends waits for the first byte to be wanted, not for the head of an answer.
    Pin::new(&mut bytes).peek().await;
    let answers = flow::answers(lines::read(bytes), place);
    let form = HeaderValue::from_static(form);
    Ok(([(CONTENT_TYPE, form)], Body::from_stream(answers)).into_response())
}
