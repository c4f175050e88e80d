//! `POST /v1/stop-energy`: the balance, the load of each brake and the heat of its disc, by hand.

use std::f64::consts::PI;

use serde_json::{Value, json};

use super::common::{
    G, STOP_ENERGY, STOPPING, answer, assert_both_unit_systems, assert_is, assert_warns, case,
    codes, conveyor, default_at, defaulted, disc, hoist, of, q, sector, shaft, stopping, warning,
    with, without,
};
use crate::support::close::assert_close;

async fn energy(body: &Value) -> Value {
    case(&answer(STOP_ENERGY, body).await, "nominal").clone()
}

/// The vehicle with two brakes that clamp 10 kN: 1000 N.m each, 6666.7 N, 40/9 m/s², 4.5 s from 20 m/s.
fn with_discs() -> Value {
    let mut disc = disc();
    disc["material"]["conductivity"] = q(40.0, "W/(m.K)");
    let brake = json!({
        "pad": sector(), "lining": {"friction": {"nominal": 0.4}}, "disc": disc,
        "actuation": {"kind": "clamp_force", "force": q(10.0, "kN")},
    });
    with(&stopping(), "/fitted/0", json!({"brake": brake, "axle": "all", "count": 2}))
}

/// Demands that the answer's own members close the balance.
fn assert_closes(case: &Value) {
    let [translation, rotation, outside, resistance, brakes] =
        ["kinetic_translation", "kinetic_rotation", "grade_or_load", "resistance", "brake_energy"]
            .map(|member| of(&case[member], "kJ"));
    let balance = translation + rotation + outside - resistance;
    assert_close(brakes, balance, 1e-6);
}

#[tokio::test]
async fn the_brakes_take_up_the_kinetic_energy_on_the_level() {
    let case = energy(&stopping()).await;
    // 1500 · 20²/2 J = 300 kJ in 3 s; highest power 10 000 N · 20 m/s.
    assert_eq!(case["reaches_final_speed"], true);
    assert_is(&case["kinetic_translation"], 300.0, "kJ");
    assert_is(&case["kinetic_rotation"], 0.0, "kJ");
    assert_is(&case["grade_or_load"], 0.0, "kJ");
    assert_is(&case["resistance"], 0.0, "kJ");
    assert_is(&case["brake_energy"], 300.0, "kJ");
    let entry = &case["fitted"][0];
    assert_eq!(entry["fitted_index"], 0);
    assert_is(&entry["energy"], 300.0, "kJ");
    assert_is(&entry["mean_power"], 100.0, "kW");
    assert_is(&entry["peak_power"], 200.0, "kW");
    for absent in
        ["energy_per_face", "energy_flux", "peak_power_flux", "rubbing_speed", "disc_share"]
    {
        assert!(entry.get(absent).is_none(), "{absent}: a known torque has no pads");
    }
}

#[tokio::test]
async fn turning_parts_slope_and_resistance_enter_the_balance() {
    let mut body = with(&stopping(), "/machine/rotating_mass_factor", 1.04);
    body["machine"]["rolling_resistance"] = json!(0.01);
    body["grade"] = q(-75.0, "%"); // sin 0.6, cos 0.8
    body["fitted"][0]["torque"] = q(6000.0, "N.m");
    let case = energy(&body).await;
    let (drive, rolling) = (0.6 * 1500.0 * G, 0.008 * 1500.0 * G);
    let way = 400.0 / 2.0 * 1.04 * 1500.0 / (20_000.0 - drive + rolling);
    assert_is(&case["kinetic_translation"], 300.0, "kJ");
    assert_close(of(&case["kinetic_rotation"], "kJ"), 12.0, 1e-12);
    assert_close(of(&case["grade_or_load"], "kJ"), drive * way / 1e3, 1e-12);
    assert_close(of(&case["resistance"], "kJ"), rolling * way / 1e3, 1e-12);
    assert_close(of(&case["brake_energy"], "kJ"), 20.0 * way, 1e-12);
    assert_closes(&case);
}

#[tokio::test]
async fn only_what_happens_from_the_first_torque_on_counts() {
    let mut body = with(&stopping(), "/drive_force", q(-1500.0, "N"));
    body["response"] = json!({"reaction_time": q(1.0, "s"), "dead_time": q(2.0, "s")});
    let case = energy(&body).await;
    // The retarder takes 1 m/s² for 2 s first: 18 m/s are left; then it does 1.5 of 11.5 parts of the work.
    assert_close(of(&case["kinetic_translation"], "kJ"), 243.0, 1e-12);
    assert_close(of(&case["brake_energy"], "kJ"), 243.0 * 10.0 / 11.5, 1e-12);
    assert_close(of(&case["grade_or_load"], "kJ"), -243.0 * 1.5 / 11.5, 1e-12);
    assert_closes(&case);
}

#[tokio::test]
async fn build_up_lowers_the_peak_of_power() {
    // Torque rises over the whole stop: P = k t (v0 − k t²/(2m)), highest where k t²/m = 2 v0/3.
    let body = with(&stopping(), "/response", json!({"build_up_time": q(60.0, "s")}));
    let case = energy(&body).await;
    let rate = 10_000.0_f64 / 60.0; // N/s
    let time = (2.0 * 20.0 * 1500.0 / (3.0 * rate)).sqrt();
    assert_close(of(&case["fitted"][0]["peak_power"], "kW"), rate * time * 40.0 / 3.0 / 1e3, 1e-9);
    assert_close(of(&case["brake_energy"], "kJ"), 300.0, 1e-12);
}

#[tokio::test]
async fn brakes_share_by_torque_and_speed() {
    let mut body = stopping();
    body["fitted"] = json!([
        {"torque": q(1000.0, "N.m"), "axle": "front", "count": 2},
        {"torque": q(250.0, "N.m"), "axle": "rear", "count": 2, "speed_ratio": 2},
    ]);
    let case = energy(&body).await;
    // 2 · 1000 and 2 · 250 · 2 N.m at the wheels: two to one; each pair in two.
    assert_is(&case["fitted"][0]["energy"], 100.0, "kJ");
    assert_is(&case["fitted"][1]["energy"], 50.0, "kJ");
}

#[tokio::test]
async fn a_limited_axle_takes_what_its_tires_hold() {
    let mut body = super::common::with_axles();
    body["fitted"] = json!([
        {"torque": q(0.3 * 4000.0, "N.m"), "axle": "front"}, {"torque": q(0.3 * 1e5, "N.m"), "axle": "rear"},
    ]);
    let case = energy(&body).await;
    // F_r = mu (m g l_f − h F_f)/(L + mu h), constant: the axles share 300 kJ as their forces.
    let rear = 0.8 * (1500.0 * G * 1.2 - 0.55 * 4000.0) / (2.6 + 0.44);
    assert_close(of(&case["fitted"][0]["energy"], "kJ"), 300.0 * 4000.0 / (4000.0 + rear), 1e-12);
    assert_close(of(&case["fitted"][1]["energy"], "kJ"), 300.0 * rear / (4000.0 + rear), 1e-12);
}

#[tokio::test]
async fn shaft_hoist_and_conveyor_balance() {
    let of_shaft = energy(&with(&shaft(), "/machine/driving_torque", q(24.0, "N.m"))).await;
    // 12 · 100²/2 J = 60 kJ; an overhauling torque makes it 60/(60 − 24) of that.
    assert_is(&of_shaft["kinetic_translation"], 0.0, "kJ");
    assert_is(&of_shaft["kinetic_rotation"], 60.0, "kJ");
    assert_close(of(&of_shaft["brake_energy"], "kJ"), 100.0, 1e-12);
    assert_close(of(&of_shaft["grade_or_load"], "kJ"), 40.0, 1e-12);
    // 1000 · 2²/2 J and 0.1 · 200²/2 J; the brake takes 20 000 N over the way v²/(2a).
    let of_hoist = energy(&with(&hoist(), "/machine/inertia", q(0.1, "kg.m2"))).await;
    assert_is(&of_hoist["kinetic_translation"], 2.0, "kJ");
    assert_close(of(&of_hoist["kinetic_rotation"], "kJ"), 2.0, 1e-12);
    let way = 4.0 / 2.0 * 2000.0 / (20_000.0 - 1000.0 * G);
    assert_close(of(&of_hoist["brake_energy"], "kJ"), 20.0 * way, 1e-12);
    assert_close(of(&of_hoist["grade_or_load"], "kJ"), G * way, 1e-12);
    let mut body = with(&conveyor(), "/machine/resistance", 0.02);
    body["machine"]["incline"] = q(-5.0, "deg");
    let of_conveyor = energy(&body).await;
    assert_is(&of_conveyor["kinetic_translation"], 6.75, "kJ"); // 1500 · 3²/2
    for case in [&of_shaft, &of_hoist, &of_conveyor] {
        assert_closes(case);
    }
}

#[tokio::test]
async fn the_flywheel_of_a_textbook_heats_its_drum_as_printed() {
    // Bhandari, Design of Machine Elements, example 12.14 (seen, with the misprint that its companion corrects):
    // 100 kg at a radius of gyration of 0.35 m from 500 rpm into 5 kg of 460 J/(kg.K): 7.300885 K.
    let mut disc = disc();
    disc["mass"] = q(5.0, "kg");
    disc["material"]["specific_heat"] = q(460.0, "J/(kg.K)");
    let body = json!({
        "machine": {"kind": "shaft", "inertia": q(100.0 * 0.35 * 0.35, "kg.m2")},
        "initial_rotational_speed": q(500.0, "rpm"),
        "fitted": [{"brake": {"pad": sector(), "lining": {"friction": {"nominal": 0.35}}, "disc": disc,
            "actuation": {"kind": "clamp_force", "force": q(1000.0, "N")}}}],
    });
    let case = energy(&body).await;
    assert!((of(&case["fitted"][0]["disc_bulk_rise"], "K") - 7.300_885).abs() < 5e-7);
}

#[tokio::test]
async fn pads_and_disc_are_loaded_as_a_hand_calculation_says() {
    let answer = answer(STOP_ENERGY, &with_discs()).await;
    let entry = &case(&answer, "nominal")["fitted"][0];
    let area = PI / 4.0 * 12_500.0; // mm²
    assert_close(of(&entry["energy"], "kJ"), 150.0, 1e-12);
    assert_close(of(&entry["energy_per_face"], "kJ"), 75.0, 1e-12);
    assert_close(of(&entry["energy_flux"], "J/mm2"), 75_000.0 / area, 1e-12);
    assert_close(of(&entry["mean_power"], "kW"), 150.0 / 4.5, 1e-12);
    // 1000 N.m at 20/0.3 rad/s.
    assert_close(of(&entry["peak_power"], "kW"), 200.0 / 3.0, 1e-12);
    assert_close(of(&entry["peak_power_flux"], "W/mm2"), 200_000.0 / 3.0 / 2.0 / area, 1e-12);
    // 20/0.3 rad/s at 0.15 m.
    assert_close(of(&entry["rubbing_speed"], "m/s"), 10.0, 1e-12);
    // All heat into the ring the pad sweeps: 7200 · 0.02 · pi (0.15² − 0.1²) = 5.655 kg of 500 J/(kg.K).
    assert_eq!(entry["disc_share"], 1.0);
    let swept = PI * (0.15 * 0.15 - 0.1 * 0.1); // m²
    let rise = 150_000.0 / (7200.0 * 0.02 * swept * 500.0);
    assert_close(of(&entry["disc_bulk_rise"], "K"), rise, 1e-12);
    // Slab of 10 mm with alpha 40/(7200 · 500): falling flux over 4.5 s is Fs = 0.5 of the reference's table:
    // peak 0.37812 q0 L/k (verified there against Crank-Nicolson, five digits printed).
    let flux = 200_000.0 / 3.0 / (2.0 * swept);
    let peak = 20.0 + 0.378_12 * flux * 0.01 / 40.0;
    assert_close(of(&entry["surface_peak_temperature"], "degC") - 20.0, peak - 20.0, 2e-5);
    assert_warns(&answer, "heat_partition_not_given", "info", "#/fitted/0/brake/lining");
    for id in ["energy.balance", "heat.swept_ring", "heat.bulk_rise", "heat.slab_surface"] {
        assert!(answer["record"]["methods"].as_array().unwrap().contains(&json!(id)), "{id}");
    }
}

#[tokio::test]
async fn the_lining_takes_its_share_of_the_heat() {
    // Iron 48.5, 7200, 500 against a pad of 1.0, 2200, 1000: with one fifth covered the reference gives 0.9780
    // (from memory of the formula, verified); a pad over 72 deg covers one fifth.
    let mut body = with_discs();
    body["fitted"][0]["brake"]["pad"]["angle"] = q(72.0, "deg");
    body["fitted"][0]["brake"]["disc"]["material"]["conductivity"] = q(48.5, "W/(m.K)");
    let lining = &mut body["fitted"][0]["brake"]["lining"];
    lining["conductivity"] = q(1.0, "W/(m.K)");
    lining["density"] = q(2200.0, "kg/m3");
    lining["specific_heat"] = q(1000.0, "J/(kg.K)");
    let answer = answer(STOP_ENERGY, &body).await;
    let entry = &case(&answer, "nominal")["fitted"][0];
    assert!((entry["disc_share"].as_f64().unwrap() - 0.9780).abs() < 5e-5);
    let ratio = (1.0 * 2200.0 * 1000.0_f64 / (48.5 * 7200.0 * 500.0)).sqrt();
    assert_close(entry["disc_share"].as_f64().unwrap(), 1.0 / (1.0 + 0.2 * ratio), 1e-12);
    assert!(!codes(&answer).contains(&"heat_partition_not_given"));
    assert!(answer["record"]["methods"].as_array().unwrap().contains(&json!("heat.partition")));
}

#[tokio::test]
async fn two_brakes_on_one_disc_heat_it_together() {
    let one = energy(&with_discs()).await;
    let both = energy(&with(&with_discs(), "/fitted/0/brakes_per_disc", 2)).await;
    let [one, both] = [&one, &both].map(|case| of(&case["fitted"][0]["disc_bulk_rise"], "K"));
    assert_close(both, 2.0 * one, 1e-12);
}

#[tokio::test]
async fn a_disc_may_start_hot_and_its_given_mass_goes_before_the_computed_one() {
    let mut body = with(&with_discs(), "/start_temperature", q(212.0, "degF"));
    body["fitted"][0]["brake"]["disc"]["mass"] = q(6.0, "kg");
    body["fitted"][0]["brake"]["disc"]["construction"] = json!("ventilated");
    let hot = energy(&body).await;
    // 150 kJ/(6 kg · 500 J/(kg.K)) = 50 K.
    assert_close(of(&hot["fitted"][0]["disc_bulk_rise"], "K"), 50.0, 1e-12);
    let peak = of(&hot["fitted"][0]["surface_peak_temperature"], "degC");
    let cold = energy(&with(&body, "/start_temperature", q(20.0, "degC"))).await;
    let cold = of(&cold["fitted"][0]["surface_peak_temperature"], "degC");
    assert_close(peak - 100.0, cold - 20.0, 1e-9); // constant properties: the same rise
}

#[tokio::test]
async fn what_keeps_temperatures_from_being_computed_is_said() {
    let body = without(&with_discs(), "/fitted/0/brake/disc");
    let open = answer(STOP_ENERGY, &body).await;
    assert_warns(&open, "disc_not_given", "info", "#/fitted/0/brake/disc");
    let body = with(&with_discs(), "/fitted/0/brake/disc/construction", "ventilated");
    let vented = answer(STOP_ENERGY, &body).await;
    assert_warns(&vented, "disc_mass_not_given", "info", "#/fitted/0/brake/disc/mass");
    for answer in [&open, &vented] {
        let entry = &case(answer, "nominal")["fitted"][0];
        for absent in ["disc_share", "disc_bulk_rise", "surface_peak_temperature"] {
            assert!(entry.get(absent).is_none(), "{absent}");
        }
    }
}

#[tokio::test]
async fn limits_of_flux_energy_and_temperature_are_warned_of_where_they_came_from() {
    let at = |member: &str| format!("/fitted/0/brake/{member}");
    // Highest flux 3.3953 W/mm², energy 7.6394 J/mm²; bulk 20 + 53.05, surface 20 + 80.2 degC; ambient 20 degC.
    let limits = [
        ("power_flux", "lining/max_power_flux", q(3.5, "W/mm2"), "near_limit"),
        ("power_flux", "lining/max_power_flux", q(3.3, "W/mm2"), "exceeded"),
        ("energy_flux", "lining/max_energy_flux", q(8.0, "J/mm2"), "near_limit"),
        ("energy_flux", "lining/max_energy_flux", q(7.6, "J/mm2"), "exceeded"),
        (
            "disc_bulk_temperature",
            "lining/max_temperature_continuous",
            q(76.0, "degC"),
            "near_limit",
        ),
        ("disc_bulk_temperature", "lining/max_temperature_continuous", q(72.0, "degC"), "exceeded"),
        ("disc_bulk_temperature", "disc/material/max_temperature", q(72.0, "degC"), "exceeded"),
        ("disc_bulk_temperature", "lining/max_temperature_continuous", q(15.0, "degC"), "exceeded"),
    ];
    for (code, member, limit, severity) in limits {
        let body = with(&with_discs(), &at(member), limit.clone());
        let answer = answer(STOP_ENERGY, &body).await;
        assert_warns(&answer, code, severity, &format!("#{}", at(member)));
        assert_close(
            warning(&answer, code)["limit"]["value"].as_f64().unwrap(),
            limit["value"].as_f64().unwrap(),
            1e-12,
        );
    }
    // 53.05 K of 60 K are 88 %: no warning, although 73 degC are more than 90 % of 80 degC.
    let body = with(&with_discs(), &at("lining/max_temperature_continuous"), q(80.0, "degC"));
    assert!(!codes(&answer(STOP_ENERGY, &body).await).contains(&"disc_bulk_temperature"));
    // The lower of the two limits counts.
    let mut body = with(&with_discs(), &at("lining/max_temperature_continuous"), q(60.0, "degC"));
    body["fitted"][0]["brake"]["disc"]["material"]["max_temperature"] = q(70.0, "degC");
    let lower = answer(STOP_ENERGY, &body).await;
    let pointer = "#/fitted/0/brake/lining/max_temperature_continuous";
    assert_warns(&lower, "disc_bulk_temperature", "exceeded", pointer);
}

#[tokio::test]
async fn the_surface_is_held_against_the_peak_limit_of_a_row() {
    // Shigley, table 16-3 (from memory): woven cotton bears 170 degF for long and 230 degF (110 degC) at its peak.
    let mut body = with_discs();
    body["fitted"][0]["brake"]["lining"] =
        json!({"id": "woven_cotton", "friction": {"nominal": 0.4}});
    // The surface rises by 80.2 K, from 40 degC.
    body["start_temperature"] = q(40.0, "degC");
    let answer = answer(STOP_ENERGY, &body).await;
    assert_warns(&answer, "surface_temperature", "exceeded", "#/fitted/0/brake/lining/id");
    assert_close(
        warning(&answer, "surface_temperature")["limit"]["value"].as_f64().unwrap(),
        110.0,
        1e-12,
    );
}

#[tokio::test]
async fn ambient_and_start_temperature_default_on_record() {
    let open = answer(STOP_ENERGY, &stopping()).await;
    for at in ["#/ambient_temperature", "#/start_temperature"] {
        let default = default_at(&open, at);
        assert_eq!((&default["value"], &default["unit"]), (&json!(20.0), &json!("degC")));
    }
    let warm =
        answer(STOP_ENERGY, &with(&stopping(), "/ambient_temperature", q(35.0, "degC"))).await;
    assert_eq!(default_at(&warm, "#/start_temperature")["value"], 35.0);
    assert!(!defaulted(&warm).contains(&"#/ambient_temperature"));
    let discs = answer(STOP_ENERGY, &with_discs()).await;
    for member in ["construction", "material/emissivity"] {
        let at = format!("#/fitted/0/brake/disc/{member}");
        assert!(defaulted(&discs).contains(&at.as_str()), "{at}");
    }
}

#[tokio::test]
async fn a_brake_too_weak_has_no_energies_but_a_reason_to_say_so() {
    let answer = answer(STOP_ENERGY, &with(&hoist(), "/fitted/0/torque", q(90.0, "N.m"))).await;
    let case = case(&answer, "nominal");
    assert_eq!(case["reaches_final_speed"], false);
    assert_eq!(case["fitted"], json!([]));
    for absent in ["kinetic_translation", "kinetic_rotation", "grade_or_load", "brake_energy"] {
        assert!(case.get(absent).is_none(), "{absent}");
    }
    assert_warns(&answer, "stops", "exceeded", "#/fitted");
}

#[tokio::test]
async fn a_stop_without_torque_costs_nothing() {
    let mut body = with(&hoist(), "/direction", "raising");
    body["initial_speed"] = q(0.5, "m/s");
    body["response"] = json!({"dead_time": q(0.1, "s")});
    let case = energy(&body).await;
    for member in ["kinetic_translation", "grade_or_load", "brake_energy"] {
        assert_is(&case[member], 0.0, "kJ");
    }
    assert_is(&case["fitted"][0]["mean_power"], 0.0, "kW");
}

#[tokio::test]
async fn a_held_deceleration_in_the_air_closes_the_balance() {
    let mut body = with(&stopping(), "/deceleration", q(5.0, "m/s2"));
    body["machine"]["drag_area"] = q(4.0, "m2");
    body["initial_speed"] = q(80.0, "m/s");
    body["response"] = json!({"build_up_time": q(0.3, "s")});
    assert_closes(&energy(&body).await);
}

#[tokio::test]
async fn the_stop_behind_the_energies_is_that_of_stopping() {
    let energy = answer(STOP_ENERGY, &with_discs()).await;
    let stop = answer(STOPPING, &with_discs()).await;
    let time = of(&case(&stop, "nominal")["braking_time"], "s");
    let entry = &case(&energy, "nominal")["fitted"][0];
    assert_close(of(&entry["mean_power"], "kW") * time, of(&entry["energy"], "kJ"), 1e-12);
    assert!(codes(&stop).iter().all(|code| codes(&energy).contains(code)));
}

#[tokio::test]
async fn both_unit_systems_tell_the_same() {
    let mut limited = with(&with_discs(), "/fitted/0/brake/lining/max_power_flux", q(3.3, "W/mm2"));
    limited["fitted"][0]["brake"]["lining"]["max_temperature_peak"] = q(100.0, "degC");
    limited["grade"] = q(-5.0, "%");
    limited["response"] = json!({"build_up_time": q(0.3, "s")});
    for body in [with_discs(), limited, shaft(), hoist(), conveyor()] {
        assert_both_unit_systems(STOP_ENERGY, &body).await;
    }
}
