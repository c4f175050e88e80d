//! Heavy calls wait in a bounded queue; one too many is told to come back, and quick calls pass them.

use std::thread::available_parallelism;
use std::time::{Duration, Instant};

use serde_json::{Value, json};

use super::process::Service;

/// A quantity on the wire.
fn q(value: f64, unit: &str) -> Value {
    json!({"value": value, "unit": unit})
}

fn pad() -> Value {
    json!({"shape": "annular_sector", "inner_radius": q(90.0, "mm"), "outer_radius": q(135.0, "mm"), "angle": q(1.0, "rad")})
}

fn brake() -> Value {
    json!({
        "pad": pad(),
        "lining": {"friction": {"nominal": 0.4}},
        "disc": {"material": {"id": "gray_cast_iron_250"}, "outer_radius": q(140.0, "mm"), "inner_radius": q(80.0, "mm"),
            "thickness": q(20.0, "mm"), "construction": "solid", "cooling": {"model": "airstream"}},
        "actuation": {"kind": "clamp_force", "force": q(8.0, "kN")},
    })
}

/// A few tenths of a second of work without optimization.
fn duty() -> Value {
    json!({
        "machine": {"kind": "vehicle", "mass": q(1500.0, "kg"), "rolling_radius": q(300.0, "mm")},
        "fitted": [{"brake": brake(), "count": 4, "axle": "all"}],
        "events": [{"kind": "stop", "initial_speed": q(20.0, "m/s")}, {"kind": "stand", "time": q(60.0, "s")}],
        "repeats": 100,
    })
}

/// Status, `Retry-After`, and how long it took.
async fn call(
    client: &reqwest::Client,
    address: &str,
    path: &str,
    body: &Value,
) -> (u16, Option<String>, Duration) {
    let begin = Instant::now();
    let request = client.post(format!("http://{address}{path}")).json(body);
    let answer = request.send().await.unwrap();
    let retry = answer.headers().get("retry-after").map(|value| value.to_str().unwrap().to_owned());
    let status = answer.status().as_u16();
    answer.bytes().await.unwrap();
    (status, retry, begin.elapsed())
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn too_many_heavy_calls_are_told_to_come_back_and_quick_calls_stay_quick() {
    const CALLS: usize = 120;
    let service = Service::start(&[("BRAKEWRIGHT_REQUEST_TIMEOUT", "120s")]);
    let client = reqwest::Client::new();
    let heavy: Vec<_> = (0..CALLS)
        .map(|_| {
            let (client, address) = (client.clone(), service.address.clone());
            tokio::spawn(async move { call(&client, &address, "/v1/duty-cycle", &duty()).await })
        })
        .collect();
    let quick = json!({"pad": pad(), "lining": {"friction": {"nominal": 0.4}}, "clamp_force": q(8.0, "kN")});
    let mut slowest = Duration::ZERO;
    for _ in 0..20 {
        let (status, _, lasted) = call(&client, &service.address, "/v1/pad-capacity", &quick).await;
        assert_eq!(status, 200);
        slowest = slowest.max(lasted);
    }
    let mut answered = 0;
    let mut refused = 0;
    let mut longest = Duration::ZERO;
    for call in heavy {
        let (status, retry, lasted) = call.await.unwrap();
        match status {
            200 => answered += 1,
            503 => {
                refused += 1;
                assert!(retry.is_some_and(|seconds| seconds.parse::<u32>().unwrap() >= 1));
            }
            other => panic!("status {other}"),
        }
        longest = longest.max(lasted);
    }
    let cores = available_parallelism().unwrap().get();
    assert_eq!(answered + refused, CALLS);
    assert!(answered >= 64 + cores && refused > 0, "{answered} answered, {refused} refused");
    // Quick calls do not stand in the queue of the heavy ones.
    assert!(slowest < longest / 2, "{slowest:?} against {longest:?}");
    let (status, ..) = call(&client, &service.address, "/v1/duty-cycle", &duty()).await;
    assert_eq!(status, 200);
}
