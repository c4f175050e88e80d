//! Repeated stops in `POST /v1/stop-energy`. Expected values by hand, see `duty_requests`.

use serde_json::json;

use super::duty_requests::{
    STOP_ENERGY, answer, assert_faults, case, codes, q, repeated, ring, value, with, without,
};
use crate::support::close::{assert_close, assert_within};

/// Time constant and rise of a stop of the disc: 500 J/(kg K) of the ring over 50 W/(m² K) of both faces and the rim.
fn disc() -> (f64, f64) {
    let area = 2.0 * ring() / 144.0 + std::f64::consts::TAU * 0.135 * 0.02;
    (500.0 * ring() / (50.0 * area), 75e3 / (500.0 * ring()))
}

/// Heating takes 3 of 60 s, so the closed form for instant heating is near.
#[tokio::test]
async fn repeated_stops_come_near_the_closed_form() {
    let body = with(&repeated(), "/stop_count", 5);
    let body = with(&body, "/fitted/0/brake/lining/max_temperature_continuous", q(200.0, "degC"));
    let found = case(STOP_ENERGY, &body).await["fitted"][0].clone();
    let (time_constant, rise) = disc();
    let left = (-60.0 / time_constant).exp();
    assert_within(value(&found["steady_bulk_peak"]), 20.0 + rise / (1.0 - left), 2.0);
    let fifth = 20.0 + rise * (1.0 - left.powi(5)) / (1.0 - left);
    assert_within(value(&found["peak_after_stops"]), fifth, 1.0);
    let reached = found["stops_to_continuous_limit"].as_u64().unwrap();
    let after = |stops: f64| 20.0 + rise * (1.0 - left.powf(stops)) / (1.0 - left);
    let stops = f64::from(u32::try_from(reached).unwrap());
    assert!(after(stops - 1.0) < 201.0 && after(stops + 1.0) > 200.0, "{reached}");
    assert_close(value(&found["cooling_coefficient"]), 50.0, 1e-12);
    let us = case(STOP_ENERGY, &with(&body, "/report_units", "us")).await["fitted"][0].clone();
    let fahrenheit = 32.0 + 1.8 * value(&found["steady_bulk_peak"]);
    assert_close(value(&us["steady_bulk_peak"]), fahrenheit, 1e-12);
    assert_eq!(us["cooling_coefficient"]["unit"], "Btu/(h.ft2.degF)");
}

#[tokio::test]
async fn a_frequency_is_an_interval() {
    let interval = case(STOP_ENERGY, &repeated()).await;
    let mut body = without(&repeated(), "/interval");
    body["stop_frequency"] = q(1.0, "1/min");
    let frequency = case(STOP_ENERGY, &body).await;
    let [one, other] =
        [interval, frequency].map(|case| value(&case["fitted"][0]["steady_bulk_peak"]));
    assert_close(one, other, 1e-12);
}

#[tokio::test]
async fn without_cooling_there_is_no_steady_state() {
    let body = without(&repeated(), "/fitted/0/brake/disc/cooling");
    let whole = answer(STOP_ENERGY, &body).await;
    let found = &whole["results"]["friction_cases"][0]["fitted"][0];
    assert!(found.get("steady_bulk_peak").is_none() && found.get("disc_bulk_rise").is_some());
    let slight = with(
        &repeated(),
        "/fitted/0/brake/disc/cooling",
        json!({"coefficient": q(0.5, "W/(m2.K)")}),
    );
    let whole = answer(STOP_ENERGY, &slight).await;
    let found = &whole["results"]["friction_cases"][0]["fitted"][0];
    assert!(found.get("steady_bulk_peak").is_none(), "{found}");
    assert!(codes(&whole).contains(&"no_steady_state"), "{whole}");
}

#[tokio::test]
async fn wrong_repeats_are_refused() {
    let at = |pointer: &'static str, code: &'static str| [(pointer, code)];
    let body = with(&repeated(), "/stop_frequency", q(60.0, "1/h"));
    assert_faults(STOP_ENERGY, &body, &at("#/stop_frequency", "conflict")).await;
    for interval in [0.0, -1.0] {
        let body = with(&repeated(), "/interval", q(interval, "s"));
        assert_faults(STOP_ENERGY, &body, &at("#/interval", "not_positive")).await;
    }
    let mut body = without(&repeated(), "/interval");
    assert_faults(
        STOP_ENERGY,
        &with(&body, "/stop_count", 5),
        &at("#/stop_count", "not_applicable"),
    )
    .await;
    body["stop_frequency"] = q(0.0, "1/h");
    assert_faults(STOP_ENERGY, &body, &at("#/stop_frequency", "not_positive")).await;
    for count in [0, 10_001] {
        let body = with(&repeated(), "/stop_count", count);
        assert_faults(STOP_ENERGY, &body, &at("#/stop_count", "out_of_range")).await;
    }
    // The braking takes 3.125 s.
    let body = with(&repeated(), "/interval", q(3.1, "s"));
    assert_faults(STOP_ENERGY, &body, &at("#/interval", "out_of_range")).await;
    assert_eq!(
        case(STOP_ENERGY, &with(&repeated(), "/interval", q(3.2, "s"))).await["reaches_final_speed"],
        true
    );
}

/// 10000 stops are followed, and quickly: once nothing changes any more they are all the same.
#[tokio::test]
async fn a_hundred_thousand_stops_are_steady() {
    let body = with(&repeated(), "/stop_count", 10_000);
    let found = case(STOP_ENERGY, &body).await["fitted"][0].clone();
    assert_close(value(&found["peak_after_stops"]), value(&found["steady_bulk_peak"]), 1e-6);
    assert_close(value(&found["trough_after_stops"]), value(&found["steady_bulk_trough"]), 1e-6);
}

/// With a count the surface of its last stop is judged, not only that of the first, cold one.
#[tokio::test]
async fn a_count_of_stops_judges_the_surface_of_its_last() {
    let body = with(&repeated(), "/fitted/0/brake/lining/max_temperature_peak", q(150.0, "degC"));
    let exceeds = |whole: &serde_json::Value| codes(whole).contains(&"surface_temperature");
    assert!(!exceeds(&answer(STOP_ENERGY, &with(&body, "/stop_count", 1)).await));
    assert!(exceeds(&answer(STOP_ENERGY, &with(&body, "/stop_count", 50)).await));
}

/// A hot start passes the limit in the first stop although the steady state stays below it.
#[tokio::test]
async fn a_limit_passed_in_the_first_stop_is_told() {
    let steady = case(STOP_ENERGY, &repeated()).await;
    let peak = value(&steady["fitted"][0]["steady_bulk_peak"]);
    let mut body = with(&repeated(), "/start_temperature", q(peak, "degC"));
    let limit = q(peak + 10.0, "degC");
    body["fitted"][0]["brake"]["lining"]["max_temperature_continuous"] = limit;
    assert_eq!(case(STOP_ENERGY, &body).await["fitted"][0]["stops_to_continuous_limit"], 1);
}

#[tokio::test]
async fn an_interval_too_short_is_one_fault_where_it_was_given() {
    let body = with(&repeated(), "/interval", q(1.0, "s"));
    assert_faults(STOP_ENERGY, &body, &[("#/interval", "out_of_range")]).await;
    let mut body = without(&repeated(), "/interval");
    body["stop_frequency"] = q(3600.0, "1/h");
    assert_faults(STOP_ENERGY, &body, &[("#/stop_frequency", "out_of_range")]).await;
}
