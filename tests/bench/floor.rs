//! The least that a request costs behind the layers of the service: it is read into its type, and nothing is computed.

use axum::body::{Body, Bytes};
use axum::http::header::CONTENT_TYPE;
use axum::http::{Request, StatusCode};
use axum::routing::post;
use axum::{Extension, Router};
use brakewright::api::extract::Json;
use brakewright::api::layers::{LayerSettings, wrap};
use http_body_util::BodyExt as _;
use serde::de::DeserializeOwned;
use std::fmt::Debug;
use std::hint::black_box;
use tower::ServiceExt as _;
use utoipa::ToSchema;

/// Layers with limits that nothing here meets.
pub(crate) fn settings() -> LayerSettings {
    LayerSettings { max_concurrency: 64, ..LayerSettings::default() }
}

/// Sends a request through a router; its answer.
pub(crate) async fn send(router: &Router, path: &str, body: &Bytes) -> Bytes {
    let request = Request::post(path).header(CONTENT_TYPE, "application/json");
    let request = request.body(Body::from(body.clone())).unwrap();
    let answer = router.clone().oneshot(request).await.unwrap();
    let (status, body) = (answer.status(), answer.into_body());
    let body = body.collect().await.unwrap().to_bytes();
    assert_eq!(status, StatusCode::OK, "{body:?}");
    body
}

/// Reads a `T` and answers always the same.
pub(crate) fn floor<T>(path: &str, answer: Bytes) -> Router
where
    T: DeserializeOwned + ToSchema + Debug + Send + 'static,
{
    let handler = |Extension(answer): Extension<Bytes>, request: Json<T>| async move {
        black_box(request.value);
        ([(CONTENT_TYPE, "application/json")], answer)
    };
    wrap(Router::new().route(path, post(handler)).layer(Extension(answer)), &settings())
}
