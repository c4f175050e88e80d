//! Many checks in one call, on all cores: lines of a stream, candidates of a selection.

use axum::Router;
use axum::body::{Body, Bytes};
use axum::http::header::CONTENT_TYPE;
use axum::http::{Request, StatusCode};
use brakewright::api::extract::decode;
use brakewright::api::health::Readiness;
use brakewright::api::record::input_digest;
use brakewright::api::router;
use brakewright::api::v1::spec_check::SpecCheckRequest;
use brakewright::calc::case::spec_check::evaluate;
use criterion::{Criterion, SamplingMode, Throughput};
use http_body_util::BodyExt as _;
use std::hint::black_box;
use tower::ServiceExt as _;

use crate::{floor, request};

const LINES: u32 = 2000;
const CANDIDATES: u32 = 10_000;

/// A stream, selections, and what one line is made of.
pub(crate) fn all(criterion: &mut Criterion) {
    let runtime = tokio::runtime::Builder::new_multi_thread().enable_all().build().unwrap();
    let service = router(&floor::settings(), Readiness::default());
    let line = request::choice().to_string();
    let mut group = criterion.benchmark_group("many");
    // Each call takes seconds.
    group.sample_size(10).sampling_mode(SamplingMode::Flat);
    let mut bench = |name: &str, (path, form): (&str, &str), text: String, count: u32| {
        let body = Bytes::from(text);
        group.throughput(Throughput::Elements(u64::from(count)));
        group.bench_function(name, |bench| {
            bench.iter(|| runtime.block_on(send(&service, path, form, &body)));
        });
    };
    let stream = ("/v1/spec-checks", "application/x-ndjson");
    let selection = ("/v1/selection", "application/json");
    let lines = format!("{line}\n").repeat(usize::try_from(LINES).unwrap());
    bench("spec-checks", stream, lines, LINES);
    for (name, wrong_every) in [
        ("selection", None),
        ("selection, a tenth wrong", Some(10)),
        ("selection, all wrong", Some(1)),
    ] {
        let body = request::selection(CANDIDATES, wrong_every).to_string();
        bench(name, selection, body, CANDIDATES);
    }
    group.finish();
    parts(criterion, &line);
}

fn parts(criterion: &mut Criterion, line: &str) {
    let asked: SpecCheckRequest = decode(line.as_bytes()).unwrap();
    let (input, ..) = asked.judged().unwrap();
    criterion.bench_function("line/decode", |bench| {
        bench.iter(|| decode::<SpecCheckRequest>(black_box(line.as_bytes())).unwrap());
    });
    criterion.bench_function("line/evaluate", |bench| {
        bench.iter(|| evaluate(black_box(&input)).unwrap());
    });
    criterion.bench_function("line/digest", |bench| {
        bench.iter(|| input_digest(black_box(line.as_bytes())));
    });
}

async fn send(service: &Router, path: &str, form: &str, body: &Bytes) -> usize {
    let request = Request::post(path).header(CONTENT_TYPE, form);
    let request = request.body(Body::from(body.clone())).unwrap();
    let answer = service.clone().oneshot(request).await.unwrap();
    assert_eq!(answer.status(), StatusCode::OK);
    answer.into_body().collect().await.unwrap().to_bytes().len()
}
