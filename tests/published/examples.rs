//! Worked examples of energy and heat, end to end. Marks: S read, M from memory, V recomputed.

use std::f64::consts::PI;

use serde_json::{Value, json};

use crate::support::client::TestApp;
use crate::support::close::{assert_close, assert_within};
use crate::support::point::{braked, q};
use crate::support::si::si;

const FOOT: f64 = 0.3048; // m, exact
const POUND: f64 = 0.453_592_37; // kg, exact
const POUND_FORCE: f64 = 4.448_221_615_260_5; // N, exact

async fn case(path: &str, request: &Value) -> Value {
    let answer = TestApp::new().post(path, &request.to_string(), 200).await;
    answer["results"]["friction_cases"][0].clone()
}

fn shaft(inertia: f64, rpm: f64, fitted: &Value) -> Value {
    json!({
        "machine": {"kind": "shaft", "inertia": q(inertia, "kg.m2")}, "fitted": [fitted],
        "initial_rotational_speed": q(rpm, "rpm"),
    })
}

/// Bhandari, Design of Machine Elements, example 12.1 [S in a worked companion]: steel disc 1 m in diameter, 0.2 m
/// thick, 7200 kg/m³, from 350 rpm in 1.5 s: 94956.722 J, 3454.3615 N m.
#[tokio::test]
async fn bhandari_12_1_stops_its_disc_in_a_second_and_a_half() {
    let mass = 7200.0 * PI / 4.0 * 0.2;
    let request = shaft(mass * 0.5 * 0.5 / 2.0, 350.0, &json!({"torque": q(3454.3615, "N.m")}));
    let found = case("/v1/stopping", &request).await;
    assert_close(si(&found["total_time"]), 1.5, 2e-8);
    let found = case("/v1/stop-energy", &request).await;
    assert_close(si(&found["brake_energy"]), 94_956.722, 6e-9);
    assert_close(si(&found["kinetic_rotation"]), 94_956.722, 6e-9);
}

/// A disc brake whose pads rub the given ring of a disc with a known mass and specific heat.
fn brake(
    ring: (f64, f64),
    thickness: f64,
    mass: &Value,
    specific_heat: &Value,
    cooling: f64,
) -> Value {
    let unit = mass["unit"].as_str().unwrap();
    let length = if unit == "lb" { "in" } else { "m" };
    json!({
        "pad": {"shape": "annular_sector", "inner_radius": q(ring.0, length), "outer_radius": q(ring.1, length), "angle": q(60.0, "deg")},
        "lining": {"friction": {"nominal": 0.35}},
        "disc": {
            "material": {"density": q(7800.0, "kg/m3"), "specific_heat": specific_heat, "conductivity": q(45.0, "W/(m.K)")},
            "outer_radius": q(ring.1, length), "inner_radius": q(ring.0, length), "thickness": q(thickness, length),
            "construction": "solid", "mass": mass, "cooling": {"coefficient": q(cooling, "W/(m2.K)")},
        },
        "actuation": {"kind": "clamp_force", "force": q(2e7, "N")},
    })
}

/// Bhandari, example 12.14 [S in a worked companion]: flywheel 100 kg, radius of gyration 0.35 m, from 500 rpm;
/// 5 kg of 460 J/(kg K) warm by 7.300885 K.
#[tokio::test]
async fn bhandari_12_14_warms_its_drum_end_to_end() {
    let brake = brake((0.1, 0.15), 0.02, &q(5.0, "kg"), &q(460.0, "J/(kg.K)"), 1.0);
    let request = shaft(100.0 * 0.35 * 0.35, 500.0, &json!({"brake": brake}));
    let found = case("/v1/stop-energy", &request).await;
    assert_eq!(found["fitted"][0]["disc_share"], 1.0);
    assert_within(si(&found["fitted"][0]["disc_bulk_rise"]), 7.300_885, 5e-7);
    // The sheet of the balance: 16 792 J.
    assert_within(si(&found["brake_energy"]), 16_792.0, 0.5);
}

/// Shigley, Mechanical Engineering Design, example 16-5 [M inputs, V digits]: steel disc 6 in in diameter, 1/4 in
/// thick, 0.282 lb/in³, 0.108 Btu/(lb °F), 50 in² cooling at 12.6e-6 Btu/(in² s °F), 24 stops an hour of 289
/// lbf in s² from 250 rpm, 70 °F: 10.6083 Btu, 49.276 °F, at last between 208.69 and 159.42 °F.
#[tokio::test]
async fn shigley_16_5_heats_its_disc_stop_after_stop() {
    const BOOKS_BTU: f64 = 9336.0; // in lbf per Btu in the book; exact 9338.03
    const BTU: f64 = 1_055.055_852_62; // J, exact
    let inch_pound = POUND_FORCE * FOOT / 12.0;
    let rounding = BTU / inch_pound / BOOKS_BTU;
    assert_close(rounding, 9338.03 / BOOKS_BTU, 1e-6);
    let mass = PI / 4.0 * 36.0 * 0.25 * 0.282;
    // The book's cooling conductance on the service's own cooling area.
    let area = 2.0 * PI * (9.0 - 1.0) + 2.0 * PI * 3.0 * 0.25;
    let unit = BTU / ((FOOT / 12.0).powi(2) * 5.0 / 9.0);
    assert_close(unit, 2.943_61e6, 2e-6); // conversion of the reference file [V]
    let coefficient = 12.6e-6 * unit * 50.0 / area;
    let brake = brake((1.0, 3.0), 0.25, &q(mass, "lb"), &q(0.108, "Btu/(lb.degF)"), coefficient);
    // The book's Btu instead of the exact one: so much more inertia.
    let inertia = 289.0 * inch_pound;
    let mut request = shaft(inertia * rounding, 250.0, &json!({"brake": brake}));
    request["ambient_temperature"] = q(70.0, "degF");
    request["stop_frequency"] = q(24.0, "1/h");
    request["report_units"] = json!("us");
    let found = case("/v1/stop-energy", &request).await;
    let value = |measure: &Value, unit: &str| {
        assert_eq!(measure["unit"], unit);
        measure["value"].as_f64().unwrap()
    };
    assert_within(value(&found["brake_energy"], "Btu"), 10.6083, 5e-5);
    let fitted = &found["fitted"][0];
    assert_within(value(&fitted["disc_bulk_rise"], "degF"), 49.276, 5e-4);
    // Clamped far beyond any brake, so that the stop is as sudden as the book takes it.
    assert_within(value(&fitted["steady_bulk_peak"], "degF"), 208.69, 0.02);
    assert_within(value(&fitted["steady_bulk_trough"], "degF"), 159.42, 0.02);
}

/// 14 CFR 23.735 (earlier text) [S]: kinetic energy per wheel 0.0443 W V²/N ft lbf, W in lb, V in kt; the constant
/// recomputed 1.68781²/(2·32.174) = 0.04427 [V].
#[tokio::test]
async fn an_aircraft_wheel_takes_the_energy_of_23_735() {
    let (weight, knots, wheels) = (6500.0, 72.0, 4);
    let request = json!({
        "machine": {"kind": "vehicle", "mass": q(weight, "lb"), "rolling_radius": q(10.0, "in")},
        "fitted": [{"axle": "all", "count": wheels, "torque": q(2000.0, "lbf.ft")}],
        "initial_speed": q(knots * 1852.0 / 3600.0, "m/s"),
    });
    let found = case("/v1/stop-energy", &request).await;
    let energy = si(&found["fitted"][0]["energy"]) / (POUND_FORCE * FOOT);
    assert_close(energy, 0.044_27 * weight * knots * knots / f64::from(wheels), 2e-4);
    assert_close(energy, 0.0443 * weight * knots * knots / f64::from(wheels), 1.2e-3);
    assert_close(POUND * 9.806_65, POUND_FORCE, 1e-15);
}

/// Snubs of test procedures: energy per mass and duration [V], of 49 CFR 571.135 S7.13, 571.105 S5.1.4 and 571.121
/// S5.4.2 [S], and of the Type-I test of directive 71/320 [S]. Speeds, deceleration, J/kg, s.
#[tokio::test]
async fn test_snubs_take_the_energy_and_time_recomputed_from_their_text() {
    let rows = [
        (q(120.0, "km/h"), q(60.0, "km/h"), 3.0, 416.7, 5.56),
        (q(60.0, "km/h"), q(30.0, "km/h"), 3.0, 104.2, 2.78),
        (q(60.0, "mph"), q(0.0, "mph"), 15.0 * FOOT, 359.7, 5.87),
        (q(40.0, "mph"), q(20.0, "mph"), 10.0 * FOOT, 119.9, 2.93),
    ];
    for (from, to, deceleration, energy, time) in rows {
        let mut request = braked(deceleration, &from);
        request["final_speed"] = to;
        let found = case("/v1/stop-energy", &request).await;
        assert_within(si(&found["brake_energy"]) / 1000.0, energy, 0.05);
        let found = case("/v1/stopping", &request).await;
        assert_within(si(&found["total_time"]), time, 0.005);
    }
    // 571.121 S5.4.2: 50 to 15 mph at 9 ft/s² takes 5.70 s and 91 % of the energy.
    let mut snub = braked(9.0 * FOOT, &q(50.0, "mph"));
    let whole = si(&case("/v1/stop-energy", &snub).await["brake_energy"]);
    snub["final_speed"] = q(15.0, "mph");
    assert_within(si(&case("/v1/stopping", &snub).await["total_time"]), 5.70, 0.005);
    let share = si(&case("/v1/stop-energy", &snub).await["brake_energy"]) / whole;
    assert_within(share, 0.91, 0.005);
}

/// 49 CFR 571.135 S7.13 with 2000 kg [V]: 833 kJ a snub, 150 kW mean, 200 kW at its start. 571.105: 258 ft.
#[tokio::test]
async fn a_heating_snub_has_the_recomputed_powers() {
    let mut request = braked(3.0, &q(120.0, "km/h"));
    request["final_speed"] = q(60.0, "km/h");
    request["machine"]["mass"] = q(2000.0, "kg");
    request["fitted"][0]["torque"] = q(6000.0, "N.m");
    let found = case("/v1/stop-energy", &request).await;
    assert_within(si(&found["brake_energy"]), 833e3, 500.0);
    assert_within(si(&found["fitted"][0]["mean_power"]), 150e3, 500.0);
    assert_within(si(&found["fitted"][0]["peak_power"]), 200e3, 500.0);
    let found = case("/v1/stopping", &braked(15.0 * FOOT, &q(60.0, "mph"))).await;
    assert_within(si(&found["total_distance"]) / FOOT, 258.0, 0.5);
}
