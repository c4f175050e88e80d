//! One request through the router for each endpoint, each beside its floor.

use axum::Router;
use axum::body::Bytes;
use brakewright::api::extract::decode;
use brakewright::api::health::Readiness;
use brakewright::api::record::input_digest;
use brakewright::api::router;
use brakewright::api::v1::actuation_force::ActuationForceRequest;
use brakewright::api::v1::duty_cycle::DutyCycleRequest;
use brakewright::api::v1::pad_capacity::PadCapacityRequest;
use brakewright::api::v1::spec_check::SpecCheckRequest;
use brakewright::api::v1::stop_energy::StopEnergyRequest;
use brakewright::api::v1::stopping::StoppingRequest;
use criterion::Criterion;
use serde::de::DeserializeOwned;
use serde_json::Value;
use std::fmt::Debug;
use std::hint::black_box;
use tokio::runtime::Runtime;
use utoipa::ToSchema;

use crate::floor::{floor, send, settings};
use crate::request;

/// Every endpoint, and the parts of a request that all share.
pub(crate) fn all(criterion: &mut Criterion) {
    let bench = Bench::new();
    bench.compare::<PadCapacityRequest>(criterion, "pad-capacity", &request::pad_capacity());
    bench.compare::<ActuationForceRequest>(
        criterion,
        "actuation-force",
        &request::actuation_force(),
    );
    bench.compare::<StoppingRequest>(criterion, "stopping", &request::stop(0.0));
    bench.compare::<StopEnergyRequest>(criterion, "stop-energy", &request::stop(0.0));
    bench.compare::<SpecCheckRequest>(criterion, "spec-check", &request::spec_check());
    bench.compare::<DutyCycleRequest>(criterion, "duty-cycle", &request::duty_cycle());
    parts(criterion);
}

/// The service and what runs it.
struct Bench {
    runtime: Runtime,
    service: Router,
}

impl Bench {
    fn new() -> Self {
        let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build();
        Self { runtime: runtime.unwrap(), service: router(&settings(), Readiness::default()) }
    }

    /// Measures an endpoint and its floor in one group.
    fn compare<T>(&self, criterion: &mut Criterion, endpoint: &str, body: &Value)
    where
        T: DeserializeOwned + ToSchema + Debug + Send + 'static,
    {
        let path = format!("/v1/{endpoint}");
        let body = Bytes::from(body.to_string());
        let answer = self.runtime.block_on(send(&self.service, &path, &body));
        let floor = floor::<T>(&path, answer);
        let mut group = criterion.benchmark_group(format!("request/{endpoint}"));
        for (name, router) in [("service", &self.service), ("floor", &floor)] {
            group.bench_function(name, |bench| {
                bench.iter(|| self.runtime.block_on(send(router, &path, &body)));
            });
        }
    }
}

fn parts(criterion: &mut Criterion) {
    let whole = request::spec_check().to_string();
    criterion.bench_function("decode/spec-check", |bench| {
        bench.iter(|| decode::<SpecCheckRequest>(black_box(whole.as_bytes())).unwrap());
    });
    let read = decode::<SpecCheckRequest>(whole.as_bytes()).unwrap();
    criterion.bench_function("judged/spec-check", |bench| {
        bench.iter(|| black_box(&read).judged().unwrap());
    });
    let (input, outcome, defaults) = read.judged().unwrap();
    criterion.bench_function("evaluate/spec-check", |bench| {
        bench.iter(|| brakewright::calc::case::spec_check::evaluate(black_box(&input)).unwrap());
    });
    criterion.bench_function("answer/spec-check", |bench| {
        bench.iter(|| {
            let answer = read.answer(whole.as_bytes(), &input, &outcome, defaults.clone());
            black_box(serde_json::to_vec(&answer).unwrap())
        });
    });
    criterion.bench_function("digest/spec-check", |bench| {
        bench.iter(|| input_digest(black_box(whole.as_bytes())));
    });
    let body = request::stop(0.0).to_string();
    criterion.bench_function("decode/stop-energy", |bench| {
        bench.iter(|| decode::<StopEnergyRequest>(black_box(body.as_bytes())).unwrap());
    });
    let small = request::pad_capacity().to_string();
    criterion.bench_function("decode/pad-capacity", |bench| {
        bench.iter(|| decode::<PadCapacityRequest>(black_box(small.as_bytes())).unwrap());
    });
    let faulty = request::faulty_pad_capacity().to_string();
    criterion.bench_function("decode/pad-capacity with three faults", |bench| {
        bench.iter(|| decode::<PadCapacityRequest>(black_box(faulty.as_bytes())).unwrap_err());
    });
    criterion.bench_function("digest/pad-capacity", |bench| {
        bench.iter(|| input_digest(black_box(small.as_bytes())));
    });
    criterion.bench_function("digest/stop-energy", |bench| {
        bench.iter(|| input_digest(black_box(body.as_bytes())));
    });
}
