//! The counts. They are those of the whole process, so each test looks for what only it counts.

use axum::body::Body;
use axum::http::Request;
use brakewright::api::metrics::{
    StreamLine, Verdict, count_stream_line, count_verdict, routes, set_log_lines_lost, text,
};
use tower::ServiceExt as _;

use crate::support::client::TestApp;

/// The value of a series.
#[track_caller]
fn value(text: &str, series: &str) -> f64 {
    let line = text.lines().find_map(|line| line.strip_prefix(series)?.strip_prefix(' '));
    line.unwrap_or_else(|| panic!("no {series} in\n{text}")).parse().unwrap()
}

#[test]
fn verdicts_and_lines_of_streams_are_counted_each_by_its_kind() {
    for series in ["verdicts_total{verdict=\"pass\"}", "stream_lines_total{outcome=\"answered\"}"] {
        assert!(value(&text(), &format!("brakewright_{series}")) >= 0.0);
    }
    let rejected = "brakewright_stream_lines_total{outcome=\"rejected\"}";
    let incomplete = "brakewright_verdicts_total{verdict=\"incomplete\"}";
    let before = text();
    count_verdict(Verdict::Incomplete);
    count_stream_line(StreamLine::Rejected);
    count_stream_line(StreamLine::Rejected);
    let after = text();
    assert!(value(&after, incomplete) >= value(&before, incomplete) + 1.0);
    assert!(value(&after, rejected) >= value(&before, rejected) + 2.0);
}

#[tokio::test]
async fn latencies_are_counted_by_the_template_of_the_route_and_never_by_what_was_sent() {
    let app = TestApp::new();
    app.get("/v1/units/no-such-unit", 404).await;
    app.get("/nowhere/at/all", 404).await;
    let odd = Request::builder().method("BREW").uri("/v1/units/K");
    app.send(odd.body(Body::empty()).unwrap(), 405).await;
    let text = text();
    let count = "brakewright_http_request_duration_seconds_count";
    for labels in [
        "method=\"GET\",route=\"/v1/units/{id}\",status=\"404\"",
        "method=\"GET\",route=\"none\",status=\"404\"",
        "method=\"other\",route=\"/v1/units/{id}\",status=\"405\"",
    ] {
        assert!(value(&text, &format!("{count}{{{labels}}}")) >= 1.0);
    }
    for sent in ["no-such-unit", "nowhere", "BREW"] {
        assert!(!text.contains(sent), "{sent}");
    }
}

#[tokio::test]
async fn the_metrics_are_open_metrics_text_and_nothing_else_is_there() {
    let app = TestApp::of(routes(|| set_log_lines_lost(17)));
    let answer = app.get("/metrics", 200).await;
    assert!(answer.header("content-type").starts_with("application/openmetrics-text"));
    let text = String::from_utf8(answer.body.to_vec()).unwrap();
    assert!(text.ends_with("# EOF\n"));
    assert_eq!(value(&text, "brakewright_log_lines_lost_total"), 17.0);
    assert!(value(&text, "brakewright_http_requests_in_flight") >= 0.0);
    assert!(value(&text, "brakewright_heavy_queue_depth") >= 0.0);
    let other = Request::get("/v1/units").body(Body::empty()).unwrap();
    assert_eq!(routes(|| ()).oneshot(other).await.unwrap().status(), 404);
}
