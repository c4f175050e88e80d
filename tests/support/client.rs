//! A front-door client without sockets: a request goes into the router, its answer comes out.

use axum::Router;
use axum::body::{Body, Bytes};
use axum::http::{HeaderMap, Request, StatusCode};
use brakewright::api;
use brakewright::api::health::Readiness;
use brakewright::api::layers::LayerSettings;
use http_body_util::BodyExt as _;
use serde_json::Value;
use tower::ServiceExt as _;

/// The service under test.
#[derive(Debug, Clone)]
pub(crate) struct TestApp {
    router: Router,
}

/// An answer, read to its end.
#[derive(Debug)]
pub(crate) struct Answer {
    pub(crate) status: StatusCode,
    pub(crate) headers: HeaderMap,
    pub(crate) body: Bytes,
}

/// Generous limits that no test meets by accident.
pub(crate) fn settings() -> LayerSettings {
    LayerSettings { max_concurrency: 64, ..LayerSettings::default() }
}

impl TestApp {
    /// The service as it is.
    pub(crate) fn new() -> Self {
        Self::of(api::router(&settings(), Readiness::default()))
    }

    /// Any router: routes of a test inside the layers of the service.
    pub(crate) fn of(router: Router) -> Self {
        Self { router }
    }

    /// Sends `POST` with a JSON body and demands a status.
    #[track_caller]
    pub(crate) fn post(
        &self,
        path: &str,
        body: &str,
        expected: u16,
    ) -> impl Future<Output = Value> + use<> {
        let request = Request::post(path).header("content-type", "application/json");
        let answer = self.send(request.body(Body::from(body.to_owned())).unwrap(), expected);
        async { answer.await.json() }
    }

    /// Sends `GET` and demands a status.
    #[track_caller]
    pub(crate) fn get(&self, path: &str, expected: u16) -> impl Future<Output = Answer> + use<> {
        self.send(Request::get(path).body(Body::empty()).unwrap(), expected)
    }

    /// Sends any request and takes whatever status comes. Every failure must be a problem document.
    pub(crate) async fn send_any(&self, request: Request<Body>) -> Answer {
        let asked = format!("{} {}", request.method(), request.uri());
        let answer = Answer::read(self.router.clone().oneshot(request).await.unwrap()).await;
        answer.assert_well_formed(&asked);
        answer
    }

    /// Sends any request and demands a status. Every failure must be a problem document.
    #[track_caller]
    pub(crate) fn send(
        &self,
        request: Request<Body>,
        expected: u16,
    ) -> impl Future<Output = Answer> + use<> {
        let caller = std::panic::Location::caller();
        let asked = format!("{} {} at {caller}", request.method(), request.uri());
        let router = self.router.clone();
        async move {
            let answer = Answer::read(router.oneshot(request).await.unwrap()).await;
            let text = String::from_utf8_lossy(&answer.body);
            assert_eq!(answer.status, expected, "{asked}: {text}");
            answer.assert_well_formed(&asked);
            answer
        }
    }
}

impl Answer {
    async fn read(response: axum::response::Response) -> Self {
        let (parts, body) = response.into_parts();
        let body = body.collect().await.unwrap().to_bytes();
        Self { status: parts.status, headers: parts.headers, body }
    }

    /// The body as JSON.
    pub(crate) fn json(&self) -> Value {
        serde_json::from_slice(&self.body).unwrap()
    }

    /// A header as text; empty if absent.
    pub(crate) fn header(&self, name: &str) -> &str {
        self.headers.get(name).map_or("", |value| value.to_str().unwrap())
    }

    fn assert_well_formed(&self, asked: &str) {
        if self.status.as_u16() < 400 {
            return;
        }
        assert_eq!(self.header("content-type"), "application/problem+json", "{asked}");
        let problem = self.json();
        assert_eq!(problem["status"], self.status.as_u16(), "{asked}");
        for member in ["type", "title", "detail", "instance"] {
            assert!(problem[member].is_string(), "{asked}: `{member}` is missing in {problem}");
        }
    }
}
