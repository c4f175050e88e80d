//! Distances of laws and rules through the front door. Marks: S read in the text, M from memory, V recomputed.

use serde_json::Value;

use crate::support::client::TestApp;
use crate::support::close::{assert_close, assert_within};
use crate::support::point::{braked, q};
use crate::support::si::si;

const FOOT: f64 = 0.3048; // m, exact
const MILE_PER_HOUR: f64 = 0.447_04; // m/s, exact

/// The only friction case of a stop.
async fn stop(request: &Value) -> Value {
    let answer = TestApp::new().post("/v1/stopping", &request.to_string(), 200).await;
    answer["results"]["friction_cases"][0].clone()
}

/// Distance in feet from a speed in mph at a deceleration in ft/s², `dead` seconds after the control moves.
async fn feet(miles_per_hour: f64, deceleration: f64, dead: f64) -> f64 {
    let mut request = braked(deceleration * FOOT, &q(miles_per_hour, "mph"));
    request["response"] = serde_json::json!({"dead_time": q(dead, "s")});
    si(&stop(&request).await["distance_from_control"]) / FOOT
}

/// 49 CFR 393.52(d) [S], from 20 mph. The text says that its deceleration cannot be used for its distance: a
/// constant 21 or 17 ft/s² exceeds the 20 and 25 ft of the same row [V].
#[tokio::test]
async fn the_decelerations_of_393_52_miss_its_distances_as_the_text_says() {
    for (deceleration, distance) in [(21.0, 20.49), (17.0, 25.31), (14.0, 30.73)] {
        assert_within(feet(20.0, deceleration, 0.0).await, distance, 0.005);
    }
    // What the distances need: service rows A(1), A(2) and B(1).
    assert_within(feet(20.0, 21.51, 0.0).await, 20.0, 0.005);
    assert_within(feet(20.0, 17.21, 0.0).await, 25.0, 0.005);
    // Rows of 14 ft/s² leave an equivalent delay.
    assert_within(feet(20.0, 14.0, 0.146).await, 35.0, 0.02);
    assert_within(feet(20.0, 14.0, 0.316).await, 40.0, 0.02);
    // Emergency distances as constant decelerations, printed with three digits.
    for (deceleration, distance) in [(7.97, 54.0), (6.52, 66.0), (5.06, 85.0), (4.78, 90.0)] {
        assert_close(feet(20.0, deceleration, 0.0).await, distance, 1e-3);
    }
}

/// 49 CFR 393.52(d) [S]: braking force 65.2, 52.8, 43.5 % of weight beside 21, 17, 14 ft/s², by 32.2 ft/s².
#[tokio::test]
async fn the_forces_of_393_52_give_its_decelerations() {
    for (percent, deceleration) in [(65.2, 21.0), (52.8, 17.0), (43.5, 14.0)] {
        let found = stop(&braked(percent / 100.0 * 32.2 * FOOT, &q(20.0, "mph"))).await;
        assert_close(si(&found["peak_deceleration"]) / FOOT, deceleration, 1e-3);
    }
}

/// 49 CFR 571.121 Table II [S]: feet from 30 to 60 mph, eight columns.
const TABLE_II: [[f64; 9]; 7] = [
    [30.0, 70.0, 78.0, 65.0, 78.0, 84.0, 61.0, 170.0, 186.0],
    [35.0, 96.0, 106.0, 89.0, 106.0, 114.0, 84.0, 225.0, 250.0],
    [40.0, 125.0, 138.0, 114.0, 138.0, 149.0, 108.0, 288.0, 325.0],
    [45.0, 158.0, 175.0, 144.0, 175.0, 189.0, 136.0, 358.0, 409.0],
    [50.0, 195.0, 216.0, 176.0, 216.0, 233.0, 166.0, 435.0, 504.0],
    [55.0, 236.0, 261.0, 212.0, 261.0, 281.0, 199.0, 520.0, 608.0],
    [60.0, 280.0, 310.0, 250.0, 310.0, 335.0, 235.0, 613.0, 720.0],
];

/// Fit of each column: delay (s), deceleration (ft/s²), and the residual (ft) that the reference file states.
/// The table is no formula of its own; no single pair fits all of it.
const FITS: [(f64, f64, f64); 8] = [
    (0.017, 13.89, 0.5),
    (0.021, 12.55, 0.5),
    (0.149, 16.30, 0.9),
    (0.021, 12.55, 0.5),
    (0.013, 11.60, 0.5),
    (0.160, 17.48, 1.4),
    (0.777, 7.11, 0.5),
    (0.247, 5.54, 0.9),
];

#[tokio::test]
async fn the_fitted_columns_of_571_121_stay_within_their_residuals() {
    for (column, (delay, deceleration, residual)) in FITS.into_iter().enumerate() {
        let mut worst: f64 = 0.0;
        for row in TABLE_II {
            let found = feet(row[0], deceleration, delay).await;
            worst = worst.max((found - row[column + 1]).abs());
        }
        // The fit is printed with few digits: a tenth of a foot beyond its residual.
        assert!(worst <= residual + 0.15, "column {}: {worst} ft", column + 1);
        // And not by chance: a tenth more deceleration leaves the table.
        let off = feet(60.0, 1.1 * deceleration, delay).await - TABLE_II[6][column + 1];
        assert!(off.abs() > 10.0, "column {}: {off} ft", column + 1);
    }
}

/// UK Highway Code rule 126 [S]: thinking and braking in whole metres; thinking 0.671 s (0.3 m per mph), braking
/// V²/20 ft [V].
#[tokio::test]
async fn the_highway_code_prints_thinking_and_braking_of_one_rule() {
    let rows = [(20, 6, 6), (30, 9, 14), (40, 12, 24), (50, 15, 38), (60, 18, 55), (70, 21, 75)];
    for (speed, thinking, braking) in rows {
        let mut request =
            braked(0.5 * (88.0_f64 / 60.0).powi(2) * 20.0 * FOOT, &q(f64::from(speed), "mph"));
        request["response"] = serde_json::json!({"reaction_time": q(0.671, "s")});
        let found = stop(&request).await;
        let phases = found["phases"].as_array().unwrap();
        assert_eq!(phases[0]["phase"], "reaction");
        assert_eq!(si(&phases[0]["distance"]).round(), f64::from(thinking), "{speed} mph");
        assert_eq!(si(&found["braking_distance"]).round(), f64::from(braking), "{speed} mph");
    }
}

/// 16 CFR 1512.5 and 1512.18 [S]: 15 ft from 15 mph, slower bicycles 15 ft from 10 mph [V: 16.13, 7.17 ft/s²].
#[tokio::test]
async fn both_bicycle_rows_come_out() {
    assert_within(feet(15.0, 16.13, 0.0).await, 15.0, 0.01);
    assert_within(feet(10.0, 7.17, 0.0).await, 15.0, 0.01);
}

/// 29 CFR 1910.179(f)(4)(vii) [S]: bridges stop within 10 % of their speed in ft/min, in feet: 200 ft/min in
/// 20 ft [V: 0.278 ft/s², and V/720 ft/s² in general].
#[tokio::test]
async fn a_crane_bridge_stops_in_a_tenth_of_its_feet_a_minute() {
    for (speed, deceleration, within) in [(200.0, 0.278, 0.02), (150.0, 150.0 / 720.0, 1e-9)] {
        let found = stop(&braked(deceleration * FOOT, &q(speed, "ft/min"))).await;
        assert_within(si(&found["total_distance"]) / FOOT, speed / 10.0, within);
    }
    assert_within(0.278 * FOOT, 0.0847, 5e-5);
}

/// Laws that print a distance [S] beside the constant deceleration that it takes [V]: NHTSA letter of 1970;
/// California Vehicle Code 26457; American Samoa 22.1109; Western Australia r.604 (repealed).
#[tokio::test]
async fn printed_distances_follow_from_constant_deceleration() {
    let rows = [
        (60.0, 20.0, 193.6, 0.05),
        (60.0, 20.0, 194.0, 0.5),
        (15.0, 7.56, 32.0, 0.02),
        (10.0, 11.60, 9.3, 0.05),
        (15.0, 11.60, 20.8, 0.1),
        (20.0, 11.60, 37.0, 0.1),
        (25.0, 11.60, 58.0, 0.1),
        (30.0, 11.60, 83.3, 0.2),
    ];
    for (speed, deceleration, distance, within) in rows {
        assert_within(feet(speed, deceleration, 0.0).await, distance, within);
    }
    for (deceleration, metres) in [(1.6, 21.7), (1.0, 34.7)] {
        let found = stop(&braked(deceleration, &q(30.0, "km/h"))).await;
        assert_within(si(&found["total_distance"]), metres, 0.05);
    }
}

/// CSA Z98-07 6.6.2 [S]: a ropeway between 0.45 and 1.5 m/s², from 2.5 m/s 6.94 and 2.08 m [V].
#[tokio::test]
async fn a_ropeway_stops_within_its_bounds() {
    for (deceleration, metres) in [(0.45, 6.94), (1.5, 2.08)] {
        let found = stop(&braked(deceleration, &q(2.5, "m/s"))).await;
        assert_within(si(&found["total_distance"]), metres, 0.005);
    }
}

/// Pairs of a distance term and the mean fully developed deceleration printed with it [S: directive 93/14/EEC,
/// regulation (EU) 2015/68; M: UN R13-H, R13]; printed decelerations are rounded down by up to 0.09, but for 2.9 beside
/// V²/75, which is 2.8935 [V].
#[tokio::test]
async fn distance_terms_give_the_mean_fully_developed_deceleration_printed_with_them() {
    let rows = [
        (40.0, 0.1, 1.0 / 90.0, 3.4),
        (40.0, 0.1, 1.0 / 70.0, 2.7),
        (60.0, 0.1, 1.0 / 115.0, 4.4),
        (60.0, 0.1, 1.0 / 95.0, 3.6),
        (60.0, 0.1, 1.0 / 75.0, 2.9),
        (60.0, 0.1, 1.0 / 65.0, 2.5),
        (30.0, 0.15, 1.0 / 92.0, 3.55),
        (40.0, 0.15, 1.0 / 130.0, 5.0),
        (100.0, 0.1, 0.0060, 6.43),
        (160.0, 0.1, 0.0067, 5.76),
        (100.0, 0.1, 0.0158, 2.44),
    ];
    for (speed, linear, square, printed) in rows {
        let mut request = braked(1.0 / (25.92 * square), &q(speed, "km/h"));
        request["response"] = serde_json::json!({"dead_time": q(3.6 * linear, "s")});
        let found = stop(&request).await;
        let distance = linear * speed + square * speed * speed;
        assert_close(si(&found["distance_from_control"]), distance, 1e-12);
        let mean = si(&found["mean_fully_developed_deceleration"]);
        assert!((-0.01..0.09).contains(&(mean - printed)), "{mean} beside {printed}");
    }
}

/// The speed of the tables, mph, in the service's own unit.
#[tokio::test]
async fn a_mile_an_hour_is_exact() {
    let found = stop(&braked(1.0, &q(1.0, "mph"))).await;
    assert_close(si(&found["total_time"]), MILE_PER_HOUR, 1e-15);
}
