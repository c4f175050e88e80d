//! `POST /v1/duty-cycle`: what it answers. Expected values by hand, see `duty_requests`.

use std::time::Duration;

use proptest::prelude::*;
use serde_json::{Value, json};

use super::duty_requests::{
    DUTY_CYCLE, STOP_ENERGY, answer, assert_conforms, assert_faults, brake, case, codes, duty, q,
    ring, try_out, value, with, without,
};
use crate::support::close::{assert_close, assert_within};

/// 75 kJ into 500 J/(kg K) of the ring, K.
fn rise() -> f64 {
    75e3 / (500.0 * ring())
}

#[tokio::test]
async fn three_stops_without_cooling_add_up() {
    let mut body = with(&duty(), "/repeats", 3);
    body["fitted"][0]["brake"]["lining"]["specific_wear"] = q(100.0, "mm3/MJ");
    let whole = answer(DUTY_CYCLE, &body).await;
    let found = &whole["results"]["friction_cases"][0];
    assert_eq!(found["friction_case"], "nominal");
    assert_eq!(found["completed"], true);
    assert!(found.get("first_failure").is_none() && found.get("trace").is_none());
    assert_close(value(&found["duration"]), 39.375, 1e-12);
    let longest = &found["longest_stop"];
    assert_close(value(&longest["total_distance"]), 31.25, 1e-12);
    assert_close(value(&longest["total_time"]), 3.125, 1e-12);
    assert_eq!((&longest["event_index"], &longest["repeat"]), (&json!(0), &json!(1)));
    let fitted = &found["fitted"][0];
    assert_close(value(&fitted["energy"]), 225.0, 1e-9);
    assert_close(value(&fitted["peak_bulk_temperature"]), 20.0 + 3.0 * rise(), 1e-9);
    assert_eq!(fitted["lowest_friction_factor"], 1.0);
    // 100 mm³/MJ · 0.225 MJ over two faces on pads of (0.135² − 0.09²)/2 m².
    assert_close(value(&fitted["pad_wear"]), 22.5 / 2.0 / 5062.5, 1e-9);
    assert_eq!(fitted["crossings"], json!([]));
    let codes = codes(&whole);
    for code in ["cooling_not_given", "fade_not_given"] {
        assert!(codes.contains(&code), "{codes:?}");
    }
}

#[tokio::test]
async fn the_same_duty_in_customary_units() {
    let body = with(&with(&duty(), "/repeats", 3), "/trace", json!({"points": 50}));
    let us = case(DUTY_CYCLE, &with(&body, "/report_units", "us")).await;
    assert_close(value(&us["longest_stop"]["total_distance"]), 31.25 / 0.3048, 1e-12);
    assert_eq!(us["longest_stop"]["total_distance"]["unit"], "ft");
    let fitted = &us["fitted"][0];
    assert_close(value(&fitted["energy"]), 225.0 / 1.055_055_852_62, 1e-9);
    assert_eq!(fitted["energy"]["unit"], "Btu");
    let peak = 68.0 + 1.8 * 3.0 * rise();
    assert_close(value(&fitted["peak_bulk_temperature"]), peak, 1e-9);
    assert_eq!(us["trace"]["units"], json!({"time": "s", "speed": "ft/s", "temperature": "degF"}));
    let bulk = us["trace"]["fitted"][0]["bulk"].as_array().unwrap();
    assert_close(bulk.last().unwrap().as_f64().unwrap(), peak, 1e-9);
}

/// The bulk passes 60 degC in the second stop after the share 1 − (1 − t/3.125 s)² of its energy.
#[tokio::test]
async fn a_limit_is_crossed_once_and_told_when_where_and_by_how_much() {
    let mut body = with(&duty(), "/repeats", 3);
    let lining = &mut body["fitted"][0]["brake"]["lining"];
    lining["max_temperature_continuous"] = q(60.0, "degC");
    lining["max_temperature_peak"] = q(400.0, "degC");
    // By hand: 20 m/s/0.3 m · 0.135 m = 9 m/s; 9.6 kN · 20 m/s/4 over two pads of 5062.5 mm² is 4.74 W/mm².
    lining["max_rubbing_speed"] = q(8.0, "m/s");
    lining["max_power_flux"] = q(5.0, "W/mm2");
    lining["max_energy_flux"] = q(7.0, "J/mm2");
    let whole = answer(DUTY_CYCLE, &body).await;
    let crossings = whole["results"]["friction_cases"][0]["fitted"][0]["crossings"].clone();
    let of = |check: &str| {
        let found = crossings.as_array().unwrap().iter().filter(|found| found["check"] == check);
        let found: Vec<&Value> = found.collect();
        assert!(found.len() < 2, "{crossings}");
        found.first().copied().cloned()
    };
    let bulk = of("disc_bulk_temperature").unwrap();
    assert_eq!((&bulk["event_index"], &bulk["repeat"]), (&json!(0), &json!(2)));
    let share = (40.0 - rise()) / rise();
    let exact = 13.125 + 3.125 * (1.0 - (1.0 - share).sqrt());
    // At the end of the step in which it happens; steps are at most a twentieth of a stop.
    assert!((exact..exact + 3.125 / 20.0).contains(&value(&bulk["time"])), "{bulk} {exact}");
    assert_close(value(&bulk["highest"]), 20.0 + 3.0 * rise(), 1e-9);
    // The first value found beyond the limit: within the step in which it is passed.
    assert!((60.0..60.0 + rise() / 10.0).contains(&value(&bulk["actual"])), "{bulk}");
    assert_eq!(bulk["limit"], json!({"value": 60.0, "unit": "degC"}));
    let rubbing = of("rubbing_speed").unwrap();
    assert_close(value(&rubbing["actual"]), 9.0, 1e-12);
    assert_eq!((&rubbing["event_index"], &rubbing["repeat"]), (&json!(0), &json!(1)));
    // 75 kJ over two pads of 5062.5 mm².
    assert_close(value(&of("energy_flux").unwrap()["highest"]), 75e3 / 10_125.0, 1e-9);
    assert!(of("power_flux").is_none() && of("surface_temperature").is_none());
    let codes = codes(&whole);
    for code in ["disc_bulk_temperature", "rubbing_speed", "energy_flux", "power_flux"] {
        // 4.74 of 5 W/mm² is near its limit.
        assert!(codes.contains(&code), "{code}: {codes:?}");
    }
}

#[tokio::test]
async fn a_range_of_friction_is_followed_in_three_cases() {
    let friction = json!({"low": 0.3, "nominal": 0.4, "high": 0.5});
    let body = with(&duty(), "/fitted/0/brake/lining/friction", friction);
    let whole = answer(DUTY_CYCLE, &body).await;
    let cases = whole["results"]["friction_cases"].as_array().unwrap();
    let ways: Vec<f64> =
        cases.iter().map(|case| value(&case["longest_stop"]["total_distance"])).collect();
    for (way, expected) in ways.iter().zip([31.25 * 4.0 / 3.0, 31.25, 25.0]) {
        assert_close(*way, expected, 1e-12);
    }
}

#[tokio::test]
async fn a_brake_of_known_torque_has_energy_but_no_temperature() {
    let mut body = duty();
    body["fitted"] = json!([{"torque": q(720.0, "N.m"), "count": 4, "axle": "all"}]);
    body["trace"] = json!({"points": 10});
    let found = case(DUTY_CYCLE, &body).await;
    assert_close(value(&found["fitted"][0]["energy"]), 75.0, 1e-9);
    assert!(found["fitted"][0].get("peak_bulk_temperature").is_none());
    assert_eq!(found["trace"]["fitted"][0]["bulk"], json!([]));
}

#[tokio::test]
async fn what_is_not_given_is_said() {
    let disc = "/fitted/0/brake/disc";
    let mut vented = with(&duty(), &format!("{disc}/construction"), "ventilated");
    let whole = answer(DUTY_CYCLE, &vented).await;
    assert!(codes(&whole).contains(&"disc_mass_not_given"));
    assert!(
        whole["results"]["friction_cases"][0]["fitted"][0].get("peak_bulk_temperature").is_none()
    );
    vented["fitted"][0]["brake"]["disc"]["mass"] = q(2.0 * ring(), "kg");
    let peak = value(&case(DUTY_CYCLE, &vented).await["fitted"][0]["peak_bulk_temperature"]);
    assert_close(peak - 20.0, 0.5 * rise(), 1e-9);
    let whole = answer(DUTY_CYCLE, &without(&duty(), disc)).await;
    assert!(codes(&whole).contains(&"disc_not_given"));
    let cooled = with(&duty(), &format!("{disc}/cooling"), json!({"model": "airstream"}));
    let whole = answer(DUTY_CYCLE, &cooled).await;
    let warnings = whole["warnings"].as_array().unwrap();
    let estimated = warnings.iter().find(|warning| warning["code"] == "cooling_estimated").unwrap();
    assert_eq!(estimated["actual"]["unit"], "W/(m2.K)");
    assert!(!codes(&whole).contains(&"cooling_not_given"));
    let defaults = whole["record"]["defaults"].as_array().unwrap();
    for pointer in
        ["#/repeats", "#/ambient_temperature", "#/start_temperature", "#/events/0/final_speed"]
    {
        assert!(
            defaults.iter().any(|default| default["pointer"] == pointer),
            "{pointer}: {defaults:?}"
        );
    }
}

/// By hand: 1500 kg on 60 % drive with more than four brakes at a tenth of their friction give.
#[tokio::test]
async fn the_event_that_cannot_be_done_ends_the_duty() {
    let weak = with(&duty(), "/fitted/0/brake/actuation/force", q(500.0, "N"));
    let stop = json!({"kind": "stop", "initial_speed": q(10.0, "m/s"), "grade": q(-10.0, "%")});
    let run = json!({"kind": "run", "speed": q(10.0, "m/s"), "distance": q(50.0, "m")});
    let body = with(&weak, "/events", json!([run, stop]));
    let whole = answer(DUTY_CYCLE, &body).await;
    let found = &whole["results"]["friction_cases"][0];
    assert_eq!(found["completed"], false);
    let failure = json!({"event_index": 1, "repeat": 1, "reason": "final_speed_not_reached"});
    assert_eq!(found["first_failure"], failure);
    assert_close(value(&found["duration"]), 5.0, 1e-12);
    assert!(found.get("longest_stop").is_none());
    assert!(codes(&whole).contains(&"duty_not_completed"));
    let descent = json!({"kind": "descent", "speed": q(10.0, "m/s"), "distance": q(50.0, "m"), "grade": q(-10.0, "%")});
    let found = case(DUTY_CYCLE, &with(&weak, "/events", json!([run, descent]))).await;
    assert_eq!(found["first_failure"]["reason"], "speed_not_held");
    // 75 kJ a stop into a thousandth of the ring: beyond any solid within the first.
    let tiny = with(&duty(), "/fitted/0/brake/disc/mass", q(1e-3 * ring(), "kg"));
    let found = case(DUTY_CYCLE, &tiny).await;
    assert_eq!(found["first_failure"]["reason"], "too_hot");
}

/// Brakes that hold at the top of a hill but have faded at its foot.
#[tokio::test]
async fn a_descent_is_judged_to_its_last_metre() {
    let descent = json!({"kind": "descent", "speed": q(10.0, "m/s"), "distance": q(1000.0, "m"), "grade": q(-10.0, "%")});
    let mut body = with(&duty(), "/events", json!([descent]));
    // m g sin(atan 0.1) · 1000 m/4 = 366 kJ a brake: 20 degC to about 180 degC without cooling.
    let driving: f64 = 1500.0 * 9.806_65 * 0.1_f64.atan().sin();
    let end = 20.0 + driving * 250.0 / (500.0 * ring());
    let at_end = driving / 9600.0;
    for (factor, completed) in [(0.97 * at_end, false), (1.03 * at_end, true)] {
        let fade = json!([{"temperature": q(end - 15.0, "degC"), "factor": 1.0}, {"temperature": q(end, "degC"), "factor": factor}]);
        body["fitted"][0]["brake"]["lining"]["fade"] = fade;
        let found = case(DUTY_CYCLE, &body).await;
        assert_eq!(found["completed"], completed, "{found}");
    }
}

/// Friction 0.8 of that of the data sheet until warm: too little for the hill, but the start is warm.
#[tokio::test]
async fn a_stop_that_only_warm_brakes_can_do_is_followed_from_its_real_speed() {
    let fade = json!([{"temperature": q(50.0, "degC"), "factor": 1.0}, {"temperature": q(150.0, "degC"), "factor": 2.0}]);
    let mut body = with(&duty(), "/fitted/0/brake/lining/fade", fade);
    // 9.6 kN · 0.5 cold against 1500 kg · g · sin(atan 0.4) = 5464 N: only above factor 1.14.
    body["fitted"][0]["brake"]["actuation"]["force"] = q(4.0, "kN");
    body["events"] = json!([{"kind": "stop", "initial_speed": q(20.0, "m/s"), "final_speed": q(5.0, "m/s"), "grade": q(-40.0, "%")}]);
    body["start_temperature"] = q(150.0, "degC");
    let found = case(DUTY_CYCLE, &body).await;
    assert_eq!(found["completed"], true);
    let driving = 1500.0 * 9.806_65 * 0.4_f64.atan().sin();
    let deceleration = (9600.0 - driving) / 1500.0;
    let way = (400.0 - 25.0) / (2.0 * deceleration);
    assert_close(value(&found["longest_stop"]["total_distance"]), way, 1e-9);
}

#[tokio::test]
async fn events_that_follow_each_other_belong_together() {
    let events = json!([
        {"kind": "run", "speed": q(72.0, "km/h"), "time": q(5.0, "s")},
        {"kind": "stop", "initial_speed": q(72.0, "km/h"), "final_speed": q(36.0, "km/h")},
        {"kind": "run", "speed": q(10.0, "m/s"), "distance": q(100.0, "m")},
        {"kind": "stop", "initial_speed": q(10.0, "m/s")},
        {"kind": "stand", "time": q(1.0, "min")},
    ]);
    let body = with(&with(&duty(), "/events", events), "/repeats", 2);
    let found = case(DUTY_CYCLE, &body).await;
    assert_close(value(&found["duration"]), 2.0 * (5.0 + 3.125 + 10.0 + 60.0), 1e-9);
    assert_close(value(&found["fitted"][0]["energy"]), 150.0, 1e-9);
}

/// The trace tells speed and temperature of the same moment, from the first to the last.
#[tokio::test]
async fn a_trace_runs_from_the_first_moment_to_the_last() {
    let body = with(&duty(), "/trace", json!({"points": 400}));
    let trace = case(DUTY_CYCLE, &body).await["trace"].clone();
    let column = |of: &Value| -> Vec<f64> {
        of.as_array().unwrap().iter().map(|value| value.as_f64().unwrap()).collect()
    };
    let (times, speeds) = (column(&trace["time"]), column(&trace["speed"]));
    let bulk = column(&trace["fitted"][0]["bulk"]);
    assert_eq!((times[0], speeds[0], bulk[0]), (0.0, 20.0, 20.0));
    assert_close(*times.last().unwrap(), 13.125, 1e-12);
    assert!(times.windows(2).all(|pair| pair[0] < pair[1]));
    for ((time, speed), bulk) in times.iter().zip(&speeds).zip(&bulk) {
        let expected = (20.0 - 6.4 * time).max(0.0);
        assert_within(*speed, expected, 1e-9);
        assert_within(bulk - 20.0, rise() * (1.0 - expected * expected / 400.0), 1e-6);
    }
}

#[tokio::test]
async fn the_longest_duty_is_answered_in_bounded_points_and_time() {
    let mut body = duty();
    body["fitted"][0]["brake"]["disc"]["cooling"] = json!({"coefficient": q(60.0, "W/(m2.K)")});
    for points in [2, 3, 100, 2000] {
        body["trace"] = json!({"points": points});
        let repeats = if points == 100 { 10_000 } else { 300 };
        body["repeats"] = json!(repeats);
        // 20000 events; without optimization, hence the generous bound.
        let (status, answer, lasted) = try_out(DUTY_CYCLE, &body).await;
        assert_eq!(status, 200, "{answer}");
        assert!(lasted < Duration::from_mins(2), "{lasted:?}");
        let trace = &answer["results"]["friction_cases"][0]["trace"];
        for column in [&trace["time"], &trace["speed"], &trace["fitted"][0]["surface"]] {
            assert!((2..=points).contains(&column.as_array().unwrap().len()));
        }
        let last = trace["time"].as_array().unwrap().last().unwrap().as_f64().unwrap();
        assert_close(last, 13.125 * f64::from(repeats), 1e-9);
        if points == 100 {
            let hottest = trace["fitted"][0]["surface"].as_array().unwrap();
            let hottest = hottest.iter().map(|value| value.as_f64().unwrap()).fold(0.0, f64::max);
            let peak =
                &answer["results"]["friction_cases"][0]["fitted"][0]["peak_surface_temperature"];
            assert_close(hottest, value(peak), 1e-12);
        }
    }
}

/// A raised load may come to rest before the brake holds: the stop ends there, in a duty as alone.
#[tokio::test]
async fn a_raised_load_ends_its_stop_at_rest_with_and_without_fade() {
    let machine = json!({"kind": "hoist", "load_mass": q(1000.0, "kg"), "drum_radius": q(200.0, "mm"), "falls": 2, "gear_ratio": 10});
    let mut body = with(&duty(), "/machine", machine);
    body["fitted"] = json!([{"brake": brake()}]);
    let fade = json!([{"temperature": q(20.0, "degC"), "factor": 1.0}, {"temperature": q(400.0, "degC"), "factor": 0.999_999}]);
    for dead in [0.0, 0.05, 0.1, 5.0] {
        let stop = json!({"kind": "stop", "initial_speed": q(1.0, "m/s"), "direction": "raising",
            "response": {"reaction_time": q(0.2, "s"), "dead_time": q(dead, "s"), "build_up_time": q(0.3, "s")}});
        body["events"] = json!([stop]);
        let plain = case(DUTY_CYCLE, &body).await;
        let faded =
            case(DUTY_CYCLE, &with(&body, "/fitted/0/brake/lining/fade", fade.clone())).await;
        for member in ["total_distance", "total_time"] {
            let [plain, faded] = [&plain, &faded].map(|case| value(&case["longest_stop"][member]));
            assert_close(faded, plain, 2e-5);
        }
        if dead > 1.0 {
            // v/g = 0.102 s after the reaction, v²/(2 g).
            assert_close(value(&plain["longest_stop"]["total_time"]), 0.2 + 1.0 / 9.806_65, 1e-9);
            assert_eq!(value(&plain["fitted"][0]["energy"]), 0.0);
        }
    }
}

/// 20 N m cannot hold 98 N m of load; gravity alone brings it to rest.
#[tokio::test]
async fn a_load_that_the_brakes_let_go_is_told() {
    let machine = json!({"kind": "hoist", "load_mass": q(1000.0, "kg"), "drum_radius": q(200.0, "mm"), "falls": 2, "gear_ratio": 10});
    let mut body = with(&duty(), "/machine", machine);
    body["events"] =
        json!([{"kind": "stop", "initial_speed": q(1.0, "m/s"), "direction": "raising"}]);
    for (torque, lets_go) in [(20.0, true), (200.0, false)] {
        body["fitted"] = json!([{"torque": q(torque, "N.m")}]);
        let whole = answer(DUTY_CYCLE, &body).await;
        assert_eq!(codes(&whole).contains(&"runs_back_before_brake"), lets_go, "{whole}");
    }
}

/// A held deceleration against drag, by scipy's solve_ivp to 1e-11: 281.944628 kJ in 70.2280460 m.
#[tokio::test]
async fn a_deceleration_held_against_drag_takes_its_energy() {
    let mut body = duty();
    body["events"][0]["deceleration"] = q(3.0, "m/s2");
    body["events"][0]["response"] = json!({"build_up_time": q(0.4, "s")});
    body["machine"]["drag_area"] = q(2.0, "m2");
    let found = case(DUTY_CYCLE, &body).await;
    assert_close(value(&found["longest_stop"]["total_distance"]), 70.228_046_0, 1e-8);
    assert_close(4.0 * value(&found["fitted"][0]["energy"]), 281.944_628, 1e-4);
}

/// Tires that hold less than the brakes demand decide alike with and without fade, and so does an operator.
#[tokio::test]
async fn limits_and_operators_act_with_fade_as_without() {
    let nearly_none = json!([{"temperature": q(20.0, "degC"), "factor": 1.0}, {"temperature": q(900.0, "degC"), "factor": 0.999_999}]);
    let mut grip = duty();
    grip["machine"]["adhesion"] = json!(0.5);
    grip["machine"]["rotating_mass_factor"] = json!(1.1);
    grip["machine"]["geometry"] = json!({"wheelbase": q(2.5, "m"), "center_of_gravity_height": q(0.6, "m"), "front_axle_to_center_of_gravity": q(1.2, "m")});
    grip["fitted"] = json!([{"brake": brake(), "count": 2, "axle": "front"}, {"brake": brake(), "count": 2, "axle": "rear"}]);
    let response = json!({"build_up_time": q(0.4, "s")});
    grip["events"][0]["response"] = response.clone();
    let mut held = duty();
    held["events"][0]["deceleration"] = q(3.0, "m/s2");
    held["events"][0]["response"] = response;
    held["machine"]["drag_area"] = q(2.0, "m2");
    let mut beyond = held.clone();
    beyond["events"][0]["deceleration"] = q(30.0, "m/s2");
    for body in [grip, held, beyond] {
        let plain = case(DUTY_CYCLE, &body).await;
        let mut body = body;
        for entry in body["fitted"].as_array_mut().unwrap() {
            entry["brake"]["lining"]["fade"] = nearly_none.clone();
        }
        let faded = case(DUTY_CYCLE, &body).await;
        for member in ["total_distance", "total_time"] {
            let [plain, faded] = [&plain, &faded].map(|case| value(&case["longest_stop"][member]));
            // Where the tires begin to hold no more, the deceleration bends within a step.
            assert_close(faded, plain, 3e-4);
        }
        for (one, other) in
            plain["fitted"].as_array().unwrap().iter().zip(faded["fitted"].as_array().unwrap())
        {
            assert_close(value(&other["energy"]), value(&one["energy"]), 5e-4);
        }
    }
}

#[tokio::test]
async fn a_duty_and_its_stop_need_the_same_energy() {
    let mut stop = duty();
    stop.as_object_mut().unwrap().remove("events");
    stop["initial_speed"] = q(20.0, "m/s");
    let single = case(STOP_ENERGY, &stop).await;
    let duty = case(DUTY_CYCLE, &duty()).await;
    assert_close(value(&duty["fitted"][0]["energy"]), value(&single["fitted"][0]["energy"]), 1e-9);
}

/// A number of any magnitude, and now and then one that is wrong.
fn wild() -> impl Strategy<Value = f64> {
    prop_oneof![
        8 => (-3.0..4.0_f64).prop_map(|power| 10.0_f64.powf(power)),
        3 => (-14.0..16.0_f64).prop_map(|power| 10.0_f64.powf(power)),
        1 => prop_oneof![Just(0.0), Just(-1.0), Just(f64::MIN_POSITIVE), Just(1e300), Just(-1e300)],
    ]
}

fn wild_event(numbers: &[f64]) -> Value {
    let [a, b, c, d, ..] = *numbers else { panic!("too few numbers") };
    match numbers[4].to_bits() % 4 {
        0 => json!({"kind": "run", "speed": q(a, "m/s"), "time": q(b, "s")}),
        1 => {
            json!({"kind": "descent", "speed": q(a, "m/s"), "distance": q(b, "m"), "grade": q(-c.min(90.0), "%")})
        }
        2 => json!({"kind": "stand", "time": q(b, "s")}),
        _ => {
            json!({"kind": "stop", "initial_speed": q(a, "m/s"), "final_speed": q(a.min(1e3) * 1e-3 * (d % 2.0), "m/s"),
            "response": {"reaction_time": q(b, "s"), "dead_time": q(c, "s"), "build_up_time": q(d, "s")}})
        }
    }
}

fn wild_duty(numbers: &[f64], repeats: u32, model: u8) -> Value {
    let n = |index: usize| numbers[index];
    let mut body = duty();
    body["machine"]["mass"] = q(n(0), "kg");
    body["machine"]["drag_area"] = q(n(1), "m2");
    body["fitted"][0]["brake"]["actuation"]["force"] = q(n(2), "N");
    let disc = &mut body["fitted"][0]["brake"]["disc"];
    disc["mass"] = q(n(3), "kg");
    disc["material"]["specific_heat"] = q(n(4), "J/(kg.K)");
    disc["material"]["conductivity"] = q(n(5), "W/(m.K)");
    disc["material"]["density"] = q(n(6), "kg/m3");
    match model % 4 {
        0 => disc["cooling"] = json!({"coefficient": q(n(7), "W/(m2.K)")}),
        1 => disc["cooling"] = json!({"model": "rotating_disc"}),
        2 => disc["cooling"] = json!({"model": "airstream"}),
        _ => {}
    }
    if model & 4 == 0 {
        let fade = json!([{"temperature": q(n(8), "K"), "factor": 1.0}, {"temperature": q(n(8) + n(9), "K"), "factor": (n(10) % 2.0).abs()}]);
        body["fitted"][0]["brake"]["lining"]["fade"] = fade;
    }
    body["ambient_temperature"] = q(n(11), "K");
    body["start_temperature"] = q(n(12), "K");
    let events: Vec<Value> = (0..3).map(|event| wild_event(&numbers[13 + 5 * event..])).collect();
    // Most wild speeds do not follow each other: one event alone is followed more often.
    body["events"] = json!(if repeats.is_multiple_of(3) { events } else { events[..1].to_vec() });
    body["repeats"] = json!(repeats);
    body["trace"] = json!({"points": 2 + repeats});
    body
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    /// Whatever the numbers: an answer as described or a problem, never a failure of the service, in bounded time.
    #[test]
    fn hostile_numbers_get_an_answer_or_a_problem(numbers in prop::collection::vec(wild(), 28), repeats in 1..40_u32, model in any::<u8>()) {
        let body = wild_duty(&numbers, repeats, model);
        let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build().unwrap();
        let (status, answer, lasted) = runtime.block_on(try_out(DUTY_CYCLE, &body));
        prop_assert!(status == 200 || status == 422, "{status}: {answer} to {body}");
        prop_assert!(lasted < Duration::from_secs(20), "{lasted:?} for {body}");
        if status == 200 {
            assert_conforms(DUTY_CYCLE, &answer);
        }
    }
}

/// Five stops on 12 % uphill with friction fading to a fiftieth: stopped by the slope, and then not held.
#[tokio::test]
async fn brakes_too_hot_to_hold_let_the_machine_go() {
    let mut body = with(&duty(), "/repeats", 5);
    body["events"][0]["grade"] = q(12.0, "%");
    let fade = |factor: f64| json!([{"temperature": q(30.0, "degC"), "factor": 1.0}, {"temperature": q(60.0, "degC"), "factor": factor}]);
    body["fitted"][0]["brake"]["lining"]["fade"] = fade(0.02);
    assert!(codes(&answer(DUTY_CYCLE, &body).await).contains(&"runs_back_before_brake"));
    body["fitted"][0]["brake"]["lining"]["fade"] = fade(0.9);
    assert!(!codes(&answer(DUTY_CYCLE, &body).await).contains(&"runs_back_before_brake"));
}

/// A published cycle ends with its last stop: the next event may start as slow as that ended.
#[tokio::test]
async fn what_comes_after_a_procedure_may_be_slower_than_it() {
    let mut body = duty();
    body["events"] = json!([
        {"kind": "procedure", "id": "us_571_121_fade"},
        {"kind": "stand", "time": q(60.0, "s")},
        {"kind": "procedure", "id": "us_571_135_heating_snubs", "max_speed": q(100.0, "km/h")},
        {"kind": "stop", "initial_speed": q(60.0, "km/h")},
    ]);
    let found = answer(DUTY_CYCLE, &body).await;
    assert_eq!(found["results"]["friction_cases"][0]["completed"], true);
}

#[tokio::test]
async fn a_run_knows_no_road_steeper_than_a_stop_does() {
    let mut body = duty();
    body["events"] = json!([{"kind": "run", "speed": q(10.0, "m/s"), "time": q(5.0, "s"), "grade": q(300.0, "%")}]);
    assert_faults(DUTY_CYCLE, &body, &[("#/events/0/grade", "out_of_range")]).await;
}
