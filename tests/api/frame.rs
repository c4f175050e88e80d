//! The layers: what happens to a request that no endpoint should see.

use std::convert::Infallible;
use std::pin::Pin;
use std::task::{Context, Poll};
use std::time::Duration;

use axum::body::{Body, Bytes, HttpBody};
use axum::http::{HeaderValue, Request};
use axum::routing::{Router, get, post};
use brakewright::api::extract::{Answer, Json};
use brakewright::api::guard::body::{at_most, endless};
use brakewright::api::health::Readiness;
use brakewright::api::layers::{LayerSettings, wrap};
use brakewright::api::problem::Problem;
use http_body::Frame;
use http_body_util::BodyExt as _;
use serde::{Deserialize, Serialize};
use serde_json::json;
use tower::ServiceExt as _;
use utoipa::ToSchema;

use crate::support::client::{TestApp, settings};

/// A request of the tests only.
#[derive(Debug, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
struct Echo {
    word: String,
}

async fn echo(request: Json<Echo>) -> Result<Answer<Echo>, Problem> {
    Ok(Answer(request.value))
}

async fn broken() -> Result<Answer<Echo>, Problem> {
    panic!("the secret of the panic")
}

async fn slow() -> Result<Answer<Echo>, Problem> {
    tokio::time::sleep(Duration::from_hours(1)).await;
    Ok(Answer(Echo { word: "late".to_owned() }))
}

fn app(settings: &LayerSettings) -> TestApp {
    let routes = Router::new()
        .route("/echo", post(echo))
        .route("/broken", get(broken))
        .route("/slow", get(slow))
        .route("/health/live", get(|| async { "alive" }));
    TestApp::of(wrap(routes, settings))
}

fn json_request(body: Body) -> Request<Body> {
    Request::post("/echo").header("content-type", "application/json").body(body).unwrap()
}

/// A body that says no length, arrives in pieces, and may stay unfinished.
struct Pieces {
    left: usize,
    ends: bool,
}

impl HttpBody for Pieces {
    type Data = Bytes;
    type Error = Infallible;

    fn poll_frame(
        mut self: Pin<&mut Self>,
        _: &mut Context<'_>,
    ) -> Poll<Option<Result<Frame<Bytes>, Infallible>>> {
        if self.left > 0 {
            self.left -= 1;
            return Poll::Ready(Some(Ok(Frame::data(Bytes::from_static(&[b' '; 1024])))));
        }
        if self.ends { Poll::Ready(None) } else { Poll::Pending }
    }
}

#[tokio::test]
async fn a_right_request_passes_all_layers() {
    let answer = app(&settings()).send(json_request(Body::from(r#"{"word":"yes"}"#)), 200).await;
    assert_eq!(answer.json(), json!({"word": "yes"}));
    assert_eq!(answer.header("content-type"), "application/json");
    assert_eq!(answer.header("cache-control"), "no-store");
    assert_eq!(answer.header("x-content-type-options"), "nosniff");
    assert_eq!(answer.header("referrer-policy"), "no-referrer");
    let policy = answer.header("content-security-policy");
    assert!(policy.starts_with("default-src 'self'"), "{policy}");
    assert!(policy.ends_with("frame-ancestors 'none'"), "{policy}");
}

#[tokio::test]
async fn an_unknown_path_is_a_problem() {
    let problem = app(&settings()).get("/nowhere", 404).await.json();
    assert_eq!(problem["type"], "/problems/not_found");
}

#[tokio::test]
async fn a_wrong_method_is_told_the_right_ones() {
    let answer = app(&settings()).get("/echo", 405).await;
    assert_eq!(answer.header("allow"), "POST");
    assert_eq!(answer.json()["type"], "/problems/method_not_allowed");
}

#[tokio::test]
async fn a_body_that_is_not_declared_as_json_is_refused() {
    for declared in ["text/plain", "application/xml", "application/jsonp", "json"] {
        let request = Request::post("/echo").header("content-type", declared);
        let answer = app(&settings()).send(request.body(Body::from("{}")).unwrap(), 415).await;
        assert_eq!(answer.header("accept-post"), "application/json");
    }
    let undeclared = Request::post("/echo").body(Body::from("{}")).unwrap();
    app(&settings()).send(undeclared, 415).await;
}

#[tokio::test]
async fn any_declaration_of_json_is_taken() {
    for declared in ["application/json; charset=utf-8", "Application/JSON", "application/x+json"] {
        let request = Request::post("/echo").header("content-type", declared);
        let body = Body::from(r#"{"word":"yes"}"#);
        app(&settings()).send(request.body(body).unwrap(), 200).await;
    }
}

#[tokio::test]
async fn a_client_that_takes_no_json_is_refused() {
    let mut request = json_request(Body::from(r#"{"word":"yes"}"#));
    request.headers_mut().insert("accept", HeaderValue::from_static("text/html"));
    let problem = app(&settings()).send(request, 406).await.json();
    assert_eq!(problem["detail"], "this endpoint answers with application/json");
}

#[tokio::test]
async fn a_compressed_body_is_refused() {
    let mut request = json_request(Body::from(r#"{"word":"yes"}"#));
    request.headers_mut().insert("content-encoding", HeaderValue::from_static("gzip"));
    let answer = app(&settings()).send(request, 415).await;
    assert_eq!(answer.header("accept-encoding"), "identity");
}

#[tokio::test]
async fn a_body_over_the_limit_is_refused_with_and_without_a_declared_length() {
    let settings = LayerSettings { max_body_bytes: 4096, ..settings() };
    let mut declared = json_request(Body::from(" ".repeat(4097)));
    declared.headers_mut().insert("content-length", HeaderValue::from_static("4097"));
    let problem = app(&settings).send(declared, 413).await.json();
    assert_eq!(problem["type"], "/problems/payload_too_large");
    // Were the limit not to hold, reading would never come to an end.
    let endless = json_request(Body::new(Pieces { left: usize::MAX, ends: true }));
    app(&settings).send(endless, 413).await;
}

#[tokio::test]
async fn a_body_at_the_limit_is_read() {
    let settings = LayerSettings { max_body_bytes: 4096, ..settings() };
    let blank = json_request(Body::new(Pieces { left: 4, ends: true }));
    let problem = app(&settings).send(blank, 400).await.json();
    assert_eq!(problem["type"], "/problems/malformed_json");
}

#[tokio::test]
async fn a_route_may_take_a_larger_body_than_the_others() {
    let settings = LayerSettings { max_body_bytes: 4096, ..settings() };
    let routes = Router::new()
        .route("/larger", post(echo).layer(at_most(8192)))
        .route("/endless", post(echo).layer(endless()));
    let app = TestApp::of(wrap(routes, &settings));
    let sent = |path: &str, bytes: usize| {
        let request = Request::post(path).header("content-type", "application/json");
        request.body(Body::from(" ".repeat(bytes) + r#"{"word":"yes"}"#)).unwrap()
    };
    app.send(sent("/larger", 8000), 200).await;
    app.send(sent("/larger", 8192), 413).await;
    app.send(sent("/endless", 1_000_000), 200).await;
}

/// Answers with the rest of a body, while that still arrives.
async fn handed_back(mut body: Body) -> Body {
    assert!(body.frame().await.is_some_and(|piece| piece.is_ok()));
    body
}

#[tokio::test]
async fn a_streamed_body_may_last_but_not_pause() {
    let settings = LayerSettings { request_timeout: Duration::from_millis(50), ..settings() };
    let app = wrap(Router::new().route("/stream", post(handed_back)), &settings);
    let request = Request::post("/stream").body(Body::new(Pieces { left: 3, ends: false }));
    let answer = app.oneshot(request.unwrap()).await.unwrap();
    assert_eq!(answer.status(), 200);
    let read = tokio::time::timeout(Duration::from_secs(5), answer.into_body().collect());
    assert!(read.await.unwrap().is_err(), "the pause was not noticed");
}

#[tokio::test]
async fn a_body_that_never_ends_runs_out_of_time() {
    let settings = LayerSettings { request_timeout: Duration::from_millis(50), ..settings() };
    let stuck = json_request(Body::new(Pieces { left: 1, ends: false }));
    let problem = app(&settings).send(stuck, 408).await.json();
    assert_eq!(problem["type"], "/problems/request_timeout");
}

#[tokio::test]
async fn a_handler_that_takes_too_long_runs_out_of_time() {
    let settings = LayerSettings { request_timeout: Duration::from_millis(50), ..settings() };
    app(&settings).get("/slow", 408).await;
}

#[tokio::test]
async fn a_panic_is_a_problem_and_keeps_its_secret() {
    // One place only: a panic must give it back.
    let app = app(&LayerSettings { max_concurrency: 1, ..settings() });
    for _ in 0..3 {
        let answer = app.get("/broken", 500).await;
        assert!(!String::from_utf8_lossy(&answer.body).contains("secret"));
        assert!(!answer.header("x-request-id").is_empty());
        app.send(json_request(Body::from(r#"{"word":"yes"}"#)), 200).await;
    }
}

#[tokio::test]
async fn a_full_service_sends_clients_away_but_says_that_it_lives() {
    let settings = LayerSettings { max_concurrency: 1, ..settings() };
    let app = app(&settings);
    let busy = tokio::spawn(app.get("/slow", 200));
    tokio::task::yield_now().await;
    let answer = app.send(json_request(Body::from(r#"{"word":"yes"}"#)), 503).await;
    assert_eq!(answer.json()["type"], "/problems/overloaded");
    assert_eq!(answer.header("retry-after"), "1");
    app.get("/health/live", 200).await;
    busy.abort();
    assert!(busy.await.unwrap_err().is_cancelled());
    app.send(json_request(Body::from(r#"{"word":"yes"}"#)), 200).await;
}

#[tokio::test]
async fn a_usable_request_id_is_echoed_and_named_in_problems() {
    let request = Request::get("/nowhere").header("x-request-id", "order-17.b");
    let answer = app(&settings()).send(request.body(Body::empty()).unwrap(), 404).await;
    assert_eq!(answer.header("x-request-id"), "order-17.b");
    assert_eq!(answer.json()["instance"], "urn:request-id:order-17.b");
}

#[tokio::test]
async fn an_unusable_request_id_is_replaced() {
    for given in ["", "two words", "a\"b", &"x".repeat(129)] {
        let request = Request::get("/nowhere").header("x-request-id", given);
        let answer = app(&settings()).send(request.body(Body::empty()).unwrap(), 404).await;
        let id = answer.header("x-request-id");
        assert_eq!(id.len(), 36, "{id}");
        assert_eq!(answer.json()["instance"], format!("urn:uuid:{id}"));
    }
}

#[tokio::test]
async fn a_trace_is_gone_on_with_and_an_invalid_one_is_replaced() {
    let trace = "0af7651916cd43dd8448eb211c80319c"; // the example of W3C Trace Context, seen
    let parent = "b7ad6b7169203331";
    let answered = |given: Option<String>| async {
        let mut request = Request::get("/health/live");
        if let Some(given) = given {
            request = request.header("traceparent", given);
        }
        let answer = app(&settings()).send(request.body(Body::empty()).unwrap(), 200).await;
        let text = answer.header("traceparent").to_owned();
        let parts: Vec<String> = text.split('-').map(str::to_owned).collect();
        let lengths: Vec<usize> = parts.iter().map(String::len).collect();
        assert_eq!(lengths, [2, 32, 16, 2], "{text}");
        parts
    };
    for given in [format!("00-{trace}-{parent}-01"), format!("cc-{trace}-{parent}-01-more")] {
        let parts = answered(Some(given)).await;
        assert_eq!((&*parts[0], &*parts[1], &*parts[3]), ("00", trace, "01"));
        assert_ne!(parts[2], parent);
    }
    let zeros = "0".repeat(32);
    for given in [
        None,
        Some(format!("00-{trace}-{parent}-01-more")),
        Some(format!("ff-{trace}-{parent}-01")),
        Some(format!("00-{zeros}-{parent}-01")),
        Some(format!("00-{trace}-{}-01", &zeros[..16])),
        Some(format!("00-{}-{parent}-01", trace.to_uppercase())),
        Some(format!("00-{trace}-{parent}")),
    ] {
        let parts = answered(given.clone()).await;
        assert!(parts[1] != trace && parts[1] != zeros, "{given:?}");
    }
}

fn preflight(origin: &'static str) -> Request<Body> {
    Request::options("/echo")
        .header("origin", origin)
        .header("access-control-request-method", "POST")
        .header("access-control-request-headers", "content-type")
        .body(Body::empty())
        .unwrap()
}

#[tokio::test]
async fn pages_of_listed_origins_may_call_and_others_not() {
    let allowed_origins = vec![HeaderValue::from_static("https://shop.example")];
    let app = app(&LayerSettings { allowed_origins, ..settings() });
    let allowed = app.send(preflight("https://shop.example"), 200).await;
    assert_eq!(allowed.header("access-control-allow-origin"), "https://shop.example");
    assert!(allowed.header("access-control-allow-headers").contains("content-type"));
    assert_eq!(allowed.header("access-control-max-age"), "7200");
    let denied = app.send(preflight("https://other.example"), 200).await;
    assert_eq!(denied.header("access-control-allow-origin"), "");
}

#[tokio::test]
async fn without_listed_origins_no_page_may_call() {
    let answer = app(&settings()).send(preflight("https://shop.example"), 405).await;
    assert_eq!(answer.header("access-control-allow-origin"), "");
}

#[tokio::test]
async fn a_listed_page_can_read_a_failure() {
    let allowed_origins = vec![HeaderValue::from_static("https://shop.example")];
    let app = app(&LayerSettings { allowed_origins, ..settings() });
    let request = Request::get("/broken").header("origin", "https://shop.example");
    let answer = app.send(request.body(Body::empty()).unwrap(), 500).await;
    assert_eq!(answer.header("access-control-allow-origin"), "https://shop.example");
}

#[tokio::test]
async fn a_draining_service_lives_but_is_not_ready() {
    let readiness = Readiness::default();
    let app = TestApp::of(brakewright::api::router(&settings(), readiness.clone()));
    assert_eq!(app.get("/health/ready", 200).await.json(), json!({"status": "ok"}));
    readiness.drain();
    assert_eq!(app.get("/health/ready", 503).await.json()["type"], "/problems/draining");
    app.get("/health/live", 200).await;
}
