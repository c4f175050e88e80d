//! The sheet of a duty claims an agreement, not a number.

use brakewright::calc::case::duty_cycle::DUTY_CYCLE;
use brakewright::calc::method::Method;
use serde_json::json;

use crate::support::client::TestApp;
use crate::support::close::{assert_close, assert_within};
use crate::support::si::si;

pub(super) static SHEET: &Method = &DUTY_CYCLE;

/// Invented data; a lining without fade.
#[tokio::test]
async fn a_duty_of_one_stop_without_fade_is_that_stop() {
    let q = |value: f64, unit: &str| json!({"value": value, "unit": unit});
    let brake = json!({
        "pad": {"shape": "annular_sector", "inner_radius": q(90.0, "mm"), "outer_radius": q(135.0, "mm"), "angle": q(55.0, "deg")},
        "lining": {"friction": {"nominal": 0.4}},
        "disc": {"material": {"id": "gray_cast_iron"}, "outer_radius": q(140.0, "mm"), "inner_radius": q(80.0, "mm"), "thickness": q(20.0, "mm"), "construction": "solid"},
        "actuation": {"kind": "clamp_force", "force": q(9000.0, "N")},
    });
    let machine =
        json!({"kind": "vehicle", "mass": q(1600.0, "kg"), "rolling_radius": q(0.31, "m")});
    let stop = json!({"initial_speed": q(28.0, "m/s"), "response": {"build_up_time": q(0.3, "s")}});
    let mut request =
        json!({"machine": machine, "fitted": [{"axle": "all", "count": 4, "brake": brake}]});
    let app = TestApp::new();

    let mut duty = request.clone();
    let mut event = stop.clone();
    event["kind"] = json!("stop");
    duty["events"] = json!([event]);
    let duty = app.post("/v1/duty-cycle", &duty.to_string(), 200).await;
    request.as_object_mut().unwrap().extend(stop.as_object().unwrap().clone());
    let stopping = app.post("/v1/stopping", &request.to_string(), 200).await;
    let energy = app.post("/v1/stop-energy", &request.to_string(), 200).await;

    let [duty, stopping, energy] =
        [duty, stopping, energy].map(|answer| answer["results"]["friction_cases"][0].clone());
    for member in ["total_distance", "total_time"] {
        // The sheet: the stops are those of `stopping`.
        assert_close(si(&duty["longest_stop"][member]), si(&stopping[member]), 1e-9);
    }
    let (duty, energy) = (&duty["fitted"][0], &energy["fitted"][0]);
    // Marched in time to second order, found 2e-6 off; the temperatures ask for no more.
    assert_close(si(&duty["energy"]), si(&energy["energy"]), 1e-5);
    // 2e-3 of the rise, the sheet says; the rise is some 140 K.
    let bulk = 20.0 + si(&energy["disc_bulk_rise"]);
    assert_within(si(&duty["peak_bulk_temperature"]), bulk, 0.3);
    let surface = si(&energy["surface_peak_temperature"]);
    assert_within(si(&duty["peak_surface_temperature"]), surface, 0.3);
}
