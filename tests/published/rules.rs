//! Distances of laws and rules through the front door. Marks: S read in the text, M from memory, V recomputed.

use brakewright::data::rules::{self, Resolution, ResolvedStop};
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

const KILOMETRE_PER_HOUR: f64 = 1.0 / 3.6; // m/s
const POUND_FORCE: f64 = 4.448_221_615_260_5; // N, exact

/// The stops of a catalog row for a machine of `max_speed`, m/s.
fn row_stops(id: &str, max_speed: f64) -> Vec<ResolvedStop> {
    let row = rules::find(id).unwrap_or_else(|| panic!("{id}"));
    let stop = |resolution| match resolution {
        Resolution::Stop(stop) => Some(stop),
        Resolution::Hold(_)
        | Resolution::ForceOverWeight(_)
        | Resolution::MaxSpeedNeeded
        | Resolution::NotApplicable(_) => None,
    };
    row.resolve(Some(max_speed)).into_iter().filter_map(stop).collect()
}

/// The only stop of a row, for a machine that reaches its speed.
fn row_stop(id: &str) -> ResolvedStop {
    let found = row_stops(id, 90.0);
    assert_eq!(found.len(), 1, "{id}");
    found[0]
}

/// 49 CFR 393.52(d) [S]: feet of the service and emergency columns, ft/s², percent; note (a): column 2 is the
/// deceleration over 32.2 ft/s².
#[test]
fn the_rows_of_393_52_hold_its_table() {
    let rows = [
        ("a1", 65.2, 21.0, 20.0, 54.0),
        ("a2", 52.8, 17.0, 25.0, 66.0),
        ("a3", 43.5, 14.0, 35.0, 85.0),
        ("b1", 52.8, 17.0, 25.0, 66.0),
        ("b2", 43.5, 14.0, 35.0, 85.0),
        ("b3", 43.5, 14.0, 40.0, 90.0),
    ];
    for (row, percent, deceleration, service, emergency) in rows {
        let stop = row_stop(&format!("cfr49_393_52_{row}_service"));
        assert_close(stop.speed, 20.0 * MILE_PER_HOUR, 1e-14);
        assert_close(stop.max_distance.unwrap() / FOOT, service, 1e-14);
        let found = stop.limits.min_peak_deceleration.unwrap() / FOOT;
        assert_close(found, deceleration, 1e-14);
        assert_close(100.0 * stop.limits.min_braking_ratio.unwrap(), percent, 1e-14);
        // Printed with three digits.
        assert_within(found / 32.2, stop.limits.min_braking_ratio.unwrap(), 5e-4);
        let stop = row_stop(&format!("cfr49_393_52_{row}_emergency"));
        assert_close(stop.max_distance.unwrap() / FOOT, emergency, 1e-14);
        assert_eq!(stop.limits, rules::StopLimits::default());
    }
    // 49 CFR 570.59(a)(2) [S].
    for (row, feet) in [("single_unit", 35.0), ("combination", 40.0)] {
        let stop = row_stop(&format!("cfr49_570_59_{row}"));
        assert_close(stop.max_distance.unwrap() / FOOT, feet, 1e-14);
    }
}

/// 49 CFR 571.135 [S]: metres and feet printed for 100 km/h beside each formula; the implied deceleration [V].
#[test]
fn the_formulas_of_571_135_give_its_printed_distances() {
    let rows = [
        ("5", 70.0, 230.0, 6.43),
        ("7", 70.0, 230.0, 6.43),
        ("8", 85.0, 279.0, 5.14),
        ("9", 110.0, 361.0, 3.86),
        ("10", 168.0, 551.0, 2.44),
        ("11", 168.0, 551.0, 2.44),
        ("14", 89.0, 292.0, 4.88),
    ];
    for (paragraph, metres, feet, deceleration) in rows {
        let stop = row_stop(&format!("cfr49_571_135_s7_{paragraph}"));
        assert_close(stop.speed, 100.0 * KILOMETRE_PER_HOUR, 1e-14);
        let distance = stop.max_distance.unwrap();
        assert_within(distance, metres, 1e-9);
        assert_within(distance / FOOT, feet, 0.5);
        let after_delay = distance - 0.10 * 100.0;
        assert_within(0.5 * stop.speed.powi(2) / after_delay, deceleration, 0.005);
    }
    let fast = row_stop("cfr49_571_135_s7_6");
    assert_close(fast.speed, 160.0 * KILOMETRE_PER_HOUR, 1e-14);
    let after_delay = fast.max_distance.unwrap() - 16.0;
    assert_within(0.5 * fast.speed.powi(2) / after_delay, 5.76, 0.005);
}

/// 49 CFR 571.121 Table II [S], all cells.
#[test]
fn the_rows_of_571_121_hold_its_table() {
    for column in 1..=8 {
        let stops = row_stops(&format!("cfr49_571_121_table_2_column_{column}"), 90.0);
        assert_eq!(stops.len(), TABLE_II.len());
        for (stop, printed) in stops.iter().zip(TABLE_II) {
            assert_close(stop.speed / MILE_PER_HOUR, printed[0], 1e-14);
            assert_close(stop.max_distance.unwrap() / FOOT, printed[column], 1e-14);
        }
    }
}

/// 49 CFR 571.122 [S], the implied decelerations [V] with two decimals, at the test speed of the category.
#[test]
fn the_rows_of_571_122_imply_the_decelerations_recomputed_for_them() {
    let rows = [
        ("front_3_1", 40.0, 3.48),
        ("front_3_2", 40.0, 2.70),
        ("front_3_3", 60.0, 4.43),
        ("front_3_4", 60.0, 3.67),
        ("rear_3_1", 40.0, 2.70),
        ("rear_3_3", 60.0, 2.90),
        ("rear_3_4", 60.0, 3.67),
        ("combined_3_1", 40.0, 4.43),
        ("combined_3_3", 60.0, 5.08),
        ("combined_3_4", 60.0, 5.43),
        ("combined_3_5", 60.0, 5.01),
        ("secondary_3_2", 40.0, 2.51),
        ("secondary_3_5", 60.0, 2.51),
    ];
    for (row, speed, deceleration) in rows {
        let stop = row_stop(&format!("cfr49_571_122_{row}"));
        assert_close(stop.speed, speed * KILOMETRE_PER_HOUR, 1e-14);
        let after_delay = stop.max_distance.unwrap() - 0.1 * speed;
        assert_within(0.5 * stop.speed.powi(2) / after_delay, deceleration, 0.005);
        // A slow one starts from 0.9 of its maximum.
        let slow = row_stops(&format!("cfr49_571_122_{row}"), 10.0);
        assert_close(slow[0].speed, 9.0, 1e-14);
    }
    // Without a delay.
    for (row, deceleration) in [("s6_4", 6.43), ("abs_3_1", 6.12), ("abs_3_3", 6.12)] {
        let stop = row_stop(&format!("cfr49_571_122_{row}"));
        let mean = 0.5 * stop.speed.powi(2) / stop.max_distance.unwrap();
        assert_within(mean, deceleration, 0.005);
    }
    for (row, linear, deceleration) in [("s6_5", 16.0, 5.76), ("s6_10", 5.0, 3.30)] {
        let stop = row_stops(&format!("cfr49_571_122_{row}"), 90.0)[0];
        let after_delay = stop.max_distance.unwrap() - linear;
        assert_within(0.5 * stop.speed.powi(2) / after_delay, deceleration, 0.005);
    }
}

/// Directive 93/14/EEC, Annex, Appendix 1 [S]: V²/Q beside a deceleration; Q/25.92 [V].
#[test]
fn the_rows_of_93_14_give_q_over_25_92() {
    let rows = [
        ("front_moped_2", 90.0, 3.47, 3.4),
        ("front_moped_3", 70.0, 2.70, 2.7),
        ("front_motorcycle", 115.0, 4.44, 4.4),
        ("front_sidecar", 95.0, 3.67, 3.6),
        ("rear_moped_2", 70.0, 2.70, 2.7),
        ("rear_moped_3", 70.0, 2.70, 2.7),
        ("rear_motorcycle", 75.0, 2.89, 2.9),
        ("rear_sidecar", 95.0, 3.67, 3.6),
        ("unladen_moped", 65.0, 2.51, 2.5),
        ("unladen_motorcycle", 65.0, 2.51, 2.5),
    ];
    for (row, q, implied, printed) in rows {
        let stop = row_stop(&format!("eu_93_14_{row}"));
        let speed = if row.contains("moped") { 40.0 } else { 60.0 };
        assert_close(stop.speed, speed * KILOMETRE_PER_HOUR, 1e-14);
        let after_delay = stop.max_distance.unwrap() - 0.1 * speed;
        assert_close(speed * speed / after_delay, q, 1e-12);
        assert_within(0.5 * stop.speed.powi(2) / after_delay, implied, 0.005);
        let found = stop.limits.min_mean_fully_developed_deceleration.unwrap();
        assert_close(found, printed, 1e-15);
    }
}

/// Regulation (EU) 2015/68, Annex II, point 3 [S]: 14.28 m from 30 km/h and 18.31 m from 40 km/h [V]; 3.55, 5.0 m/s².
/// UN R13 Type-0 [M]: 36.69 m from 60 km/h, 61.23 m from 80 km/h [V]; UN R13-H [M]: 70 m.
#[test]
fn tractors_trucks_and_cars_have_their_distances() {
    for (row, max_speed, metres, deceleration) in [
        ("eu_2015_68_up_to_30", 30.0, 14.28, 3.55),
        ("eu_2015_68_above_30", 40.0, 18.31, 5.0),
        ("un_r13_type_0_n2", 90.0, 36.69, 5.0),
        ("un_r13_type_0_n3", 90.0, 36.69, 5.0),
        ("un_r13_type_0_m2", 90.0, 36.69, 5.0),
        ("un_r13_type_0_m3", 90.0, 36.69, 5.0),
        ("un_r13_type_0_n1", 90.0, 61.23, 5.0),
        ("un_r13h_type_0", 180.0, 70.0, 6.43),
    ] {
        let [stop] = row_stops(row, max_speed * KILOMETRE_PER_HOUR)[..] else { panic!("{row}") };
        assert_within(stop.max_distance.unwrap(), metres, 0.005);
        let found = stop.limits.min_mean_fully_developed_deceleration.unwrap();
        assert_close(found, deceleration, 1e-15);
    }
}

/// 16 CFR 1512.5 and 1512.18 [S]: 15 ft (4.57 m) from 15 or 10 mph, 40 lbf (178 N).
/// 29 CFR 1910.179(f)(4)(vii) [S]: from 200 ft/min in 20 ft [V].
#[test]
fn bicycles_and_cranes_have_their_distances() {
    for (row, speed) in [("hand_fast", 15.0), ("hand_slow", 10.0), ("foot_fast", 15.0)] {
        let stop = row_stop(&format!("cfr16_1512_5_{row}"));
        assert_close(stop.speed / MILE_PER_HOUR, speed, 1e-14);
        assert_within(stop.max_distance.unwrap(), 4.57, 0.005);
    }
    let force = rules::find("cfr16_1512_5_hand_fast").unwrap().hand_force.unwrap().most;
    assert_close(force, 40.0 * POUND_FORCE, 1e-14);
    assert_within(force, 178.0, 0.5);
    let foot_per_minute = FOOT / 60.0;
    let [travel] = row_stops("cfr29_1910_179_travel", 200.0 * foot_per_minute)[..] else {
        panic!()
    };
    assert_close(travel.speed, 200.0 * foot_per_minute, 1e-14);
    assert_close(travel.max_distance.unwrap() / FOOT, 20.0, 1e-12);
}

/// Slopes, holding factors and forces over weight, as printed: 49 CFR 571.135 S7.12, 571.121 S5.6, 571.122 S6.8,
/// 571.105 S5.2, 29 CFR 1910.179(f)(2)(i), UK MOT inspection manual 1.2.2, 1.3.2, 1.4.2 [S]; UN R13, R13-H [M].
#[test]
fn parking_and_holding_rows_hold_their_figures() {
    let slopes = [
        ("cfr49_571_135_s7_12", 20.0),
        ("cfr49_571_121_s5_6_2", 20.0),
        ("cfr49_571_122_s6_8", 18.0),
        ("cfr49_571_105_s5_2_school_bus", 30.0),
        ("cfr49_571_105_s5_2_light", 20.0),
        ("cfr49_571_105_s5_2_heavy", 20.0),
        ("un_r13_parking", 18.0),
        ("un_r13h_parking", 20.0),
    ];
    for (row, percent) in slopes {
        let tests = rules::find(row).unwrap().resolve(None);
        let [Resolution::Hold(rules::HoldTest::Slope { grade, is_both_ways: true })] = tests[..]
        else {
            panic!("{row}: {tests:?}")
        };
        assert_close(100.0 * grade.tan(), percent, 1e-14);
    }
    for (row, factor) in [("other", 1.25), ("mechanical", 1.0), ("two", 1.0)] {
        let row = format!("cfr29_1910_179_hoist_{row}");
        let hold = rules::HoldTest::Load {
            load_factor: 1.0,
            min_holding_factor: factor,
            is_of_hoisting_torque: true,
        };
        assert_eq!(rules::find(&row).unwrap().resolve(None), [Resolution::Hold(hold)]);
    }
    let ratios = [
        ("uk_mot_service_m1_new", 0.58),
        ("uk_mot_service_m1_old", 0.50),
        ("uk_mot_service_n1_m2_m3", 0.50),
        ("uk_mot_service_l5", 0.50),
        ("uk_mot_service_l2_l6", 0.40),
        ("uk_mot_first_control_l", 0.30),
        ("uk_mot_second_control_l", 0.25),
        ("uk_mot_secondary", 0.25),
        ("uk_mot_parking", 0.16),
        ("cfr49_571_121_s5_6_1_tractor", 0.14),
    ];
    for (row, ratio) in ratios {
        let found = rules::find(row).unwrap().resolve(None);
        assert_eq!(found, [Resolution::ForceOverWeight(ratio)], "{row}");
    }
}

/// Control forces as printed, N: 49 CFR 571.135, 571.122, regulation (EU) 2015/68 [S]; 571.105 S5.2 in pounds [S];
/// UN R13, R13-H [M].
#[test]
fn rows_hold_their_control_forces() {
    let rows = [
        ("cfr49_571_135_s7_12", Some(400.0), Some(500.0)),
        ("cfr49_571_135_s7_10", None, Some(500.0)),
        ("cfr49_571_122_front_3_3", Some(200.0), Some(350.0)),
        ("cfr49_571_122_front_3_4", Some(200.0), Some(500.0)),
        ("cfr49_571_122_combined_3_5", None, None),
        ("cfr49_571_122_s6_4", Some(250.0), Some(400.0)),
        ("cfr49_571_122_s6_8", Some(400.0), Some(500.0)),
        ("eu_2015_68_up_to_30", Some(400.0), Some(600.0)),
        ("cfr49_571_105_s5_2_light", Some(90.0 * POUND_FORCE), Some(125.0 * POUND_FORCE)),
        ("cfr49_571_105_s5_2_heavy", Some(125.0 * POUND_FORCE), Some(150.0 * POUND_FORCE)),
        ("un_r13_type_0_n3", None, Some(700.0)),
        ("un_r13_parking", Some(600.0), Some(700.0)),
        ("un_r13h_parking", Some(400.0), Some(500.0)),
    ];
    for (row, hand, foot) in rows {
        let found = rules::find(row).unwrap();
        for (found, expected) in [(found.hand_force, hand), (found.foot_force, foot)] {
            match (found, expected) {
                (Some(force), Some(expected)) => assert_close(force.most, expected, 1e-14),
                (found, expected) => assert_eq!((found, expected), (None, None), "{row}"),
            }
        }
    }
}

/// CSA Z98-07 6.6.2 [S]: 0.45 to 1.5 m/s²; HSE WIS 38 [S]: 10 s; ILO B8.4.3 and WAC 296-96-05150 [S]: the load with
/// a quarter more.
#[test]
fn lifts_ropeways_and_machine_tools_count_from_their_own_speed() {
    let stop = |row| {
        let [stop] = row_stops(row, 2.5)[..] else { panic!("{row}") };
        assert_close(stop.speed, 2.5, 1e-15);
        stop
    };
    let ropeway = stop("csa_z98_6_6_2").limits;
    assert_eq!((ropeway.min_mean_deceleration, ropeway.max_deceleration), (Some(0.45), Some(1.5)));
    assert_eq!(stop("uk_woodworking_run_down").limits.max_time, Some(10.0));
    for row in ["ilo_lift_b8_4_3", "wac_296_96_05150"] {
        assert_close(stop(row).load_factor, 1.25, 1e-15);
    }
    let hold = rules::HoldTest::Load {
        load_factor: 1.25,
        min_holding_factor: 1.0,
        is_of_hoisting_torque: false,
    };
    let resolved = rules::find("wac_296_96_05150").unwrap().resolve(Some(2.5));
    assert!(resolved.contains(&Resolution::Hold(hold)));
}
