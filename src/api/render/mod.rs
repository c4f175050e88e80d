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
use chart::Chart;

/// The media type of charts.
pub const SVG: &str = "image/svg+xml";

/// Lets routes answer with charts, too, and tells caches that the answer depends on what the client accepts.
pub(super) fn pictured(routes: OpenApiRouter) -> OpenApiRouter {
    const FORMS: &[&str] = &[JSON, SVG];
    let vary = HeaderValue::from_static("accept");
    routes.layer(Extension(Offers(FORMS))).layer(SetResponseHeaderLayer::appending(VARY, vary))
}

impl Negotiated {
    /// Whether the client prefers a chart.
    #[must_use]
    pub fn is_chart(self) -> bool {
        self.0 == SVG
    }

    /// The answer in the form that the client prefers: as JSON, or the chart that `picture` makes of it.
    ///
    /// The answer is written as JSON in either case: what JSON refuses, a chart must not show.
    pub fn render<T: Serialize>(
        self,
        answer: T,
        picture: impl FnOnce(&T) -> Chart,
    ) -> Response<Body> {
        let chart = self.is_chart().then(|| picture(&answer));
        let json = Answer(answer).into_response();
        match chart {
            Some(chart) if json.status().is_success() => chart.into_response(),
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
