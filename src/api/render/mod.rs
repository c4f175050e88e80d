//! Answers as pictures: what a chart shows, how it is drawn, and which form of an answer is sent.

mod captions;
pub mod chart;
mod draw;
pub mod duty_cycle;
pub mod frame;
mod ink;
mod limits;
mod panel;
mod scale;
pub mod stop_energy;
pub mod stopping;
mod svg;
pub mod words;

use axum::Extension;
use axum::body::Body;
use axum::http::header::{CONTENT_TYPE, VARY};
use axum::http::{HeaderValue, Response};
use axum::response::IntoResponse;
use serde::Serialize;
use tower_http::set_header::SetResponseHeaderLayer;
use utoipa_axum::router::OpenApiRouter;

use super::accept::{JSON, Negotiated, Offers};
use super::extract::Answer;
use super::problem::{Problem, ProblemKind};
use super::sheet::HTML;
use chart::Chart;

/// The media type of charts.
pub const SVG: &str = "image/svg+xml";

/// Lets routes answer with charts, too.
pub(super) fn pictured(routes: OpenApiRouter) -> OpenApiRouter {
    in_forms(routes, &[JSON, SVG])
}

/// Lets routes answer with sheets, too.
pub(super) fn printed(routes: OpenApiRouter) -> OpenApiRouter {
    in_forms(routes, &[JSON, HTML])
}

/// Lets routes answer in several forms and tells caches that the answer depends on what the client accepts.
fn in_forms(routes: OpenApiRouter, forms: &'static [&'static str]) -> OpenApiRouter {
    let vary = HeaderValue::from_static("accept");
    routes.layer(Extension(Offers(forms))).layer(SetResponseHeaderLayer::appending(VARY, vary))
}

impl Negotiated {
    /// Whether the client prefers a chart.
    #[must_use]
    pub fn is_chart(self) -> bool {
        self.0 == SVG
    }

    /// The answer in the form that the client prefers: as JSON, or the chart or sheet that `show` makes of it.
    ///
    /// The answer is written as JSON in either case: what JSON refuses, no other form must show.
    pub fn render<T: Serialize, S: IntoResponse>(
        self,
        answer: T,
        show: impl FnOnce(&T) -> S,
    ) -> Response<Body> {
        let shown = (self.0 != JSON).then(|| show(&answer));
        let json = Answer(answer).into_response();
        match shown {
            Some(shown) if json.status().is_success() => shown.into_response(),
            _ => json,
        }
    }
}

impl IntoResponse for Chart {
    fn into_response(self) -> Response<Body> {
        match svg::document(&self) {
            Ok(text) => ([(CONTENT_TYPE, HeaderValue::from_static(SVG))], text).into_response(),
            Err(error) => {
                tracing::error!(%error, "a chart cannot be drawn");
                Problem::of_kind(ProblemKind::Internal).into_response()
            }
        }
    }
}
