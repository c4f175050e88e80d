//! `POST /v1/actuation-force`: what must press for a torque, by hand through every chain.
//!
//! The brake of `common` gives 2 · 0.4 · 0.125 m = 0.1 N.m per N, so 1000 N.m need 10 000 N of clamp force.

use std::f64::consts::PI;

use serde_json::{Value, json};

use super::common::{
    ACTUATION_FORCE, actuation_force, answer, assert_both_unit_systems, assert_each, assert_faults,
    assert_is, assert_warns, case, codes, defaulted, of, q, warning, with, without,
};
use crate::support::close::{assert_close, assert_within};

const CLAMP: f64 = 10_000.0; // N

fn pressed_by(actuation: Value) -> Value {
    with(&actuation_force(), "/brake/actuation", actuation)
}

fn hydraulic() -> Value {
    pressed_by(json!({
        "kind": "hydraulic", "piston_diameter": q(50.0, "mm"), "pistons_per_side": 2, "efficiency": 0.95,
        "threshold_pressure": q(0.05, "MPa"), "running_clearance": q(0.2, "mm"), "compliance": q(100.0, "mm3/MPa"),
        "master_cylinder": {"bore": q(20.0, "mm"), "lever_ratio": 5.0, "efficiency": 0.9},
    }))
}

fn cable() -> Value {
    pressed_by(
        json!({"kind": "cable", "lever_ratio": 4.0, "cable_efficiency": 0.8, "caliper_ratio": 10.0, "caliper_efficiency": 0.9}),
    )
}

fn pneumatic() -> Value {
    pressed_by(
        json!({"kind": "pneumatic", "chamber_area": q(120.0, "cm2"), "return_spring_force": q(400.0, "N"), "force_ratio": 3.0, "efficiency": 0.9}),
    )
}

fn spring() -> Value {
    pressed_by(json!({
        "kind": "spring", "spring_rate": q(800.0, "N/mm"), "pad_wear_travel": q(2.0, "mm"), "release_travel": q(1.5, "mm"),
        "force_ratio": 1.25, "efficiency": 0.8, "release_piston_diameter": q(60.0, "mm"),
    }))
}

#[tokio::test]
async fn a_clamp_force_alone_is_torque_over_faces_friction_and_radius() {
    let body = pressed_by(json!({"kind": "clamp_force"}));
    for body in [body, without(&actuation_force(), "/brake/actuation")] {
        let answer = answer(ACTUATION_FORCE, &body).await;
        let case = case(&answer, "nominal");
        assert_is(&case["clamp_force"], CLAMP, "N");
        // The pad has pi/4 · 12 500 mm²; peak = F/(pi/2 · 100 mm · 50 mm).
        assert_is(&case["mean_pressure"], CLAMP / (PI / 4.0 * 12_500.0), "MPa");
        assert_is(&case["peak_pressure"], CLAMP / (PI / 2.0 * 5000.0), "MPa");
        assert!(case.get("pressure_utilization").is_none(), "the lining names no limit");
        for absent in ["line_pressure", "operator_force", "air_pressure", "spring_force"] {
            assert!(case.get(absent).is_none(), "{absent}");
        }
        assert_eq!(codes(&answer), ["friction_range_not_given"]);
    }
}

#[tokio::test]
async fn a_hydraulic_chain_is_gone_back_to_the_pedal() {
    let answer = answer(ACTUATION_FORCE, &hydraulic()).await;
    let case = case(&answer, "nominal");
    // p = F/(2 · pi/4 · 50² mm² · 0.95) + 0.05 MPa = 10 000/3730.64 + 0.05 = 2.7305 MPa.
    let piston = PI / 4.0 * 2500.0; // mm²
    let pressure = CLAMP / (2.0 * piston * 0.95) + 0.05;
    assert_is(&case["line_pressure"], pressure, "MPa");
    // Pedal: p · pi/4 · 20² mm²/(5 · 0.9).
    let bore = PI / 4.0 * 400.0; // mm²
    assert_is(&case["operator_force"], pressure * bore / 4.5, "N");
    // Volume: 2 faces · 2 pistons · area · 0.2 mm + 100 mm³/MPa · p; travel: 5 · volume/bore.
    let volume = 4.0 * piston * 0.2 + 100.0 * pressure;
    assert_is(&case["fluid_volume"], volume, "mm3");
    assert_is(&case["operator_stroke"], 5.0 * volume / bore, "mm");
    assert_eq!(codes(&answer), ["friction_range_not_given"]);
    assert!(answer["record"]["methods"].to_string().contains("actuation.hydraulic"));
}

#[tokio::test]
async fn the_hydraulic_chain_of_the_reference_comes_out() {
    // Verified in the reference from 400 N · 4.5, 0.9 · 0.95, bore 22.2 mm, piston 54 mm, p0 0.7 bar, 0.97:
    // 39.7597 bar, 8677.16 N; friction 0.38 at 0.11 m: 725.411 N.m. The pad: r_e 110 mm.
    let mut body = pressed_by(json!({
        "kind": "hydraulic", "piston_diameter": q(54.0, "mm"), "efficiency": 0.97, "threshold_pressure": q(0.7, "bar"),
        "master_cylinder": {"bore": q(22.2, "mm"), "lever_ratio": 4.5, "efficiency": 0.9 * 0.95},
    }));
    body["brake"]["pad"]["inner_radius"] = q(90.0, "mm");
    body["brake"]["pad"]["outer_radius"] = q(130.0, "mm");
    body["brake"]["lining"]["friction"]["nominal"] = json!(0.38);
    body["torque"] = q(725.411, "N.m");
    let answer = answer(ACTUATION_FORCE, &body).await;
    let case = case(&answer, "nominal");
    assert_within(of(&case["clamp_force"], "N"), 8677.16, 0.01);
    assert_within(of(&case["line_pressure"], "MPa"), 3.975_97, 1e-5);
    assert_within(of(&case["operator_force"], "N"), 400.0, 0.001);
}

#[tokio::test]
async fn without_master_cylinder_the_chain_ends_at_the_line_pressure() {
    let body = without(&hydraulic(), "/brake/actuation/master_cylinder");
    let answer = answer(ACTUATION_FORCE, &body).await;
    let case = case(&answer, "nominal");
    assert!(case["line_pressure"].is_object() && case["fluid_volume"].is_object());
    assert!(case.get("operator_force").is_none() && case.get("operator_stroke").is_none());
}

#[tokio::test]
async fn the_fluid_volume_needs_clearance_or_compliance() {
    let body = without(&hydraulic(), "/brake/actuation/running_clearance");
    let only_compliance = answer(ACTUATION_FORCE, &body).await;
    let case_of = case(&only_compliance, "nominal");
    let pressure = of(&case_of["line_pressure"], "MPa");
    assert_is(&case_of["fluid_volume"], 100.0 * pressure, "mm3");
    let neither = answer(ACTUATION_FORCE, &without(&body, "/brake/actuation/compliance")).await;
    assert!(case(&neither, "nominal").get("fluid_volume").is_none());
}

#[tokio::test]
async fn a_cable_chain_is_gone_back_to_the_lever() {
    let answer = answer(ACTUATION_FORCE, &cable()).await;
    // 10 000 N/(4 · 0.8 · 10 · 0.9) = 347.222 N.
    assert_is(&case(&answer, "nominal")["operator_force"], CLAMP / 28.8, "N");
}

#[tokio::test]
async fn an_air_chamber_is_gone_back_to_its_pressure() {
    let answer = answer(ACTUATION_FORCE, &pneumatic()).await;
    // (10 000/(3 · 0.9) + 400) N/12 000 mm² = 0.341 975 MPa.
    assert_is(&case(&answer, "nominal")["air_pressure"], (CLAMP / 2.7 + 400.0) / 12_000.0, "MPa");
}

#[tokio::test]
async fn a_spring_still_gives_the_torque_when_the_pads_are_worn() {
    let answer = answer(ACTUATION_FORCE, &spring()).await;
    let case = case(&answer, "nominal");
    // Worn: 10 000 N/(1.25 · 0.8) = 10 000 N; new: + 800 N/mm · 2 mm = 11 600 N.
    assert_is(&case["clamp_force"], CLAMP, "N");
    assert_is(&case["spring_force"], 11_600.0, "N");
    // Pads press hardest when new: 11 600 N · 1.25 · 0.8 on pi/2 · 5000 mm².
    assert_is(&case["peak_pressure"], 11_600.0 / (PI / 2.0 * 5000.0), "MPa");
    assert_is(&case["mean_pressure"], 11_600.0 / (PI / 4.0 * 12_500.0), "MPa");
    // Release, at new pads: (11 600 + 800 · 1.5) N/(pi/4 · 60² mm² · 0.8).
    assert_is(&case["release_pressure"], 12_800.0 / (PI / 4.0 * 3600.0 * 0.8), "MPa");
}

#[tokio::test]
async fn a_spring_without_rate_or_wear_says_what_is_not_considered() {
    for member in ["spring_rate", "pad_wear_travel"] {
        let body = without(&spring(), &format!("/brake/actuation/{member}"));
        let answer = answer(ACTUATION_FORCE, &body).await;
        assert_warns(&answer, "spring_wear_not_considered", "info", "#/brake/actuation");
        assert_is(&case(&answer, "nominal")["spring_force"], CLAMP, "N");
    }
}

#[tokio::test]
async fn lower_friction_needs_more_force_case_by_case() {
    let friction = json!({"low": 0.32, "nominal": 0.4, "high": 0.5});
    let body = with(&cable(), "/brake/lining/friction", friction);
    let answer = answer(ACTUATION_FORCE, &body).await;
    for (name, friction) in [("low", 0.32), ("nominal", 0.4), ("high", 0.5)] {
        // 1000 N.m/(2 · friction · 0.125 m).
        assert_is(&case(&answer, name)["clamp_force"], 4000.0 / friction, "N");
    }
}

#[tokio::test]
async fn the_use_of_the_lining_is_told_and_warned_of() {
    // Peak = 10 000 N/(pi/2 · 5000 mm²) = 1.2732 MPa.
    let peak = CLAMP / (PI / 2.0 * 5000.0);
    for (limit, severity) in [(1.5, None), (1.4, Some("near_limit")), (1.2, Some("exceeded"))] {
        let body = with(&actuation_force(), "/brake/lining/max_pressure", q(limit, "MPa"));
        let answer = answer(ACTUATION_FORCE, &body).await;
        let used = case(&answer, "nominal")["pressure_utilization"].as_f64().unwrap();
        assert_close(used, peak / limit, 1e-12);
        match severity {
            None => assert!(!codes(&answer).contains(&"pad_peak_pressure")),
            Some(severity) => {
                assert_warns(&answer, "pad_peak_pressure", severity, "#/brake/lining/max_pressure");
            }
        }
    }
}

#[tokio::test]
async fn of_the_friction_cases_the_worst_is_named() {
    let mut body = with(&actuation_force(), "/brake/lining/max_pressure", q(1.0, "MPa"));
    body["brake"]["lining"]["friction"] = json!({"low": 0.32, "nominal": 0.4, "high": 0.5});
    let answer = answer(ACTUATION_FORCE, &body).await;
    let warning = warning(&answer, "pad_peak_pressure");
    assert_eq!(warning["friction_case"], "low");
    assert_is(&warning["actual"], 12_500.0 / (PI / 2.0 * 5000.0), "MPa");
}

#[tokio::test]
async fn a_chain_that_falls_short_says_by_how_much_and_at_which_maximum() {
    // Half of what is needed, or a little more or less where the chain has an offset.
    let line = CLAMP / (2.0 * PI / 4.0 * 2500.0 * 0.95);
    let pedal = (line / 2.0 + 0.05) * PI / 4.0 * 400.0 / 4.5;
    let cases = [
        (hydraulic(), "max_line_pressure", q(line / 2.0 + 0.05, "MPa"), "line_pressure"),
        (hydraulic(), "master_cylinder/max_operator_force", q(pedal, "N"), "operator_force"),
        (cable(), "max_operator_force", q(CLAMP / 57.6, "N"), "operator_force"),
        (
            pneumatic(),
            "max_air_pressure",
            q((CLAMP / 5.4 + 400.0) / 12_000.0, "MPa"),
            "air_pressure",
        ),
    ];
    for (body, member, maximum, check) in cases {
        let body = with(&body, &format!("/brake/actuation/{member}"), maximum.clone());
        let answer = answer(ACTUATION_FORCE, &body).await;
        let at = format!("#/brake/actuation/{member}");
        assert_warns(&answer, "demand_not_reached", "exceeded", &at);
        let short = warning(&answer, "demand_not_reached");
        assert_is(&short["actual"], 500.0, "N.m");
        assert_is(&short["limit"], 1000.0, "N.m");
        assert!(short["detail"].as_str().unwrap().contains("50.0 %"), "{short}");
        // The input that would be needed is told, and held against its maximum.
        assert_warns(&answer, check, "exceeded", &at);
        assert_eq!(warning(&answer, check)["limit"], maximum);
        assert_eq!(warning(&answer, check)["actual"], case(&answer, "nominal")[check]);
    }
}

#[tokio::test]
async fn a_maximum_that_suffices_is_no_shortfall() {
    let body = with(&cable(), "/brake/actuation/max_operator_force", q(500.0, "N"));
    let answer = answer(ACTUATION_FORCE, &body).await;
    assert_eq!(codes(&answer), ["friction_range_not_given"]);
}

#[tokio::test]
async fn stroke_and_release_pressure_are_held_against_their_maxima() {
    let at = "/brake/actuation/master_cylinder/max_stroke";
    let short = answer(ACTUATION_FORCE, &with(&hydraulic(), at, q(10.0, "mm"))).await;
    assert_warns(&short, "operator_stroke", "exceeded", &format!("#{at}"));
    // 12 800 N/(pi/4 · 3600 mm² · 0.8) = 5.659 MPa.
    let at = "/brake/actuation/max_release_pressure";
    for (limit, severity) in [(6.0, "near_limit"), (5.0, "exceeded")] {
        let answer = answer(ACTUATION_FORCE, &with(&spring(), at, q(limit, "MPa"))).await;
        assert_warns(&answer, "release_pressure", severity, &format!("#{at}"));
    }
}

#[tokio::test]
async fn a_chain_without_losses_is_remarked() {
    let answer = answer(ACTUATION_FORCE, &actuation_force()).await;
    assert_warns(&answer, "lossless_actuation", "info", "#/brake/actuation");
}

#[tokio::test]
async fn both_unit_systems_tell_the_same() {
    for body in [hydraulic(), cable(), pneumatic(), spring()] {
        assert_both_unit_systems(ACTUATION_FORCE, &body).await;
        let limited = with(&body, "/brake/lining/max_pressure", q(1.0, "MPa"));
        assert_both_unit_systems(ACTUATION_FORCE, &limited).await;
    }
}

#[tokio::test]
async fn every_default_is_on_record() {
    let open = answer(ACTUATION_FORCE, &actuation_force()).await;
    let of_chain = |members: &[&str]| {
        let mut at: Vec<String> =
            members.iter().map(|member| format!("#/brake/actuation/{member}")).collect();
        at.extend(["#/brake/faces".to_owned(), "#/brake/pressure_distribution".to_owned()]);
        at.sort();
        at
    };
    assert_eq!(
        defaulted(&open),
        of_chain(&["efficiency", "pistons_per_side", "threshold_pressure"])
    );
    let chains = [
        (json!({"kind": "clamp_force"}), vec![]),
        (
            json!({"kind": "cable"}),
            vec!["lever_ratio", "cable_efficiency", "caliper_ratio", "caliper_efficiency"],
        ),
        (
            json!({"kind": "pneumatic", "chamber_area": q(120.0, "cm2")}),
            vec!["efficiency", "force_ratio", "return_spring_force"],
        ),
        (json!({"kind": "spring"}), vec!["efficiency", "force_ratio"]),
        (
            json!({"kind": "hydraulic", "piston_diameter": q(50.0, "mm"), "master_cylinder": {"bore": q(20.0, "mm")}}),
            vec![
                "efficiency",
                "pistons_per_side",
                "threshold_pressure",
                "master_cylinder/efficiency",
                "master_cylinder/lever_ratio",
            ],
        ),
    ];
    for (chain, members) in chains {
        let answer = answer(ACTUATION_FORCE, &pressed_by(chain)).await;
        assert_eq!(defaulted(&answer), of_chain(&members));
    }
}

#[tokio::test]
async fn what_is_to_be_found_may_not_be_given() {
    let cases = [
        (pressed_by(json!({"kind": "clamp_force"})), "force", q(1.0, "N")),
        (hydraulic(), "line_pressure", q(1.0, "MPa")),
        (hydraulic(), "master_cylinder/operator_force", q(1.0, "N")),
        (cable(), "operator_force", q(1.0, "N")),
        (pneumatic(), "air_pressure", q(1.0, "MPa")),
        (spring(), "spring_force", q(1.0, "N")),
    ];
    for (body, member, value) in cases {
        let body = with(&body, &format!("/brake/actuation/{member}"), value);
        let at = format!("#/brake/actuation/{member}");
        assert_faults(ACTUATION_FORCE, &body, &[(&at, "not_applicable")]).await;
    }
}

/// Demands one fault of a chain with one member changed, at that member.
async fn refused(body: &Value, member: &str, value: Value, code: &str) {
    let (at, pointer) =
        (format!("/brake/actuation/{member}"), format!("#/brake/actuation/{member}"));
    assert_each(ACTUATION_FORCE, body, &[(&at, value, &pointer, code)]).await;
}

#[tokio::test]
async fn impossible_demands_and_chains_are_refused() {
    for value in [0.0, -1.0] {
        for (body, member, unit) in [
            (hydraulic(), "piston_diameter", "mm"),
            (hydraulic(), "max_line_pressure", "MPa"),
            (hydraulic(), "master_cylinder/bore", "mm"),
            (hydraulic(), "master_cylinder/max_operator_force", "N"),
            (hydraulic(), "master_cylinder/max_stroke", "mm"),
            (cable(), "max_operator_force", "N"),
            (pneumatic(), "chamber_area", "cm2"),
            (pneumatic(), "max_air_pressure", "MPa"),
            (spring(), "release_piston_diameter", "mm"),
            (spring(), "max_release_pressure", "MPa"),
        ] {
            refused(&body, member, q(value, unit), "not_positive").await;
        }
        for (body, member) in [
            (hydraulic(), "master_cylinder/lever_ratio"),
            (cable(), "lever_ratio"),
            (cable(), "caliper_ratio"),
            (pneumatic(), "force_ratio"),
            (spring(), "force_ratio"),
        ] {
            refused(&body, member, json!(value), "not_positive").await;
        }
        assert_each(
            ACTUATION_FORCE,
            &cable(),
            &[("/torque", q(value, "N.m"), "#/torque", "not_positive")],
        )
        .await;
    }
}

#[tokio::test]
async fn efficiencies_offsets_and_counts_out_of_range_are_refused() {
    for value in [0.0, -0.5, 1.001] {
        for (body, member) in [
            (hydraulic(), "efficiency"),
            (hydraulic(), "master_cylinder/efficiency"),
            (cable(), "cable_efficiency"),
            (cable(), "caliper_efficiency"),
            (pneumatic(), "efficiency"),
            (spring(), "efficiency"),
        ] {
            refused(&body, member, json!(value), "out_of_range").await;
        }
    }
    for (body, member, unit) in [
        (hydraulic(), "threshold_pressure", "MPa"),
        (hydraulic(), "running_clearance", "mm"),
        (hydraulic(), "compliance", "mm3/MPa"),
        (pneumatic(), "return_spring_force", "N"),
        (spring(), "spring_rate", "N/mm"),
        (spring(), "pad_wear_travel", "mm"),
        (spring(), "release_travel", "mm"),
    ] {
        refused(&body, member, q(-1.0, unit), "negative").await;
    }
    for value in [0, 101] {
        refused(&hydraulic(), "pistons_per_side", json!(value), "out_of_range").await;
    }
}

/// A disc of a catalog material between two radii, mm.
fn disc(inner: f64, outer: f64) -> Value {
    json!({
        "material": {"id": "gray_cast_iron"}, "inner_radius": q(inner, "mm"), "outer_radius": q(outer, "mm"),
        "thickness": q(20.0, "mm"),
    })
}

#[tokio::test]
async fn a_disc_that_does_not_fit_is_refused() {
    let beyond = "pad_beyond_disc";
    for (inner, outer, at, code) in [
        (90.0, 149.0, "#/brake/pad", beyond),
        (101.0, 155.0, "#/brake/pad", beyond),
        (90.0, 80.0, "#/brake/disc/outer_radius", "not_above_inner_radius"),
        (-1.0, 155.0, "#/brake/disc/inner_radius", "negative"),
    ] {
        let body = with(&actuation_force(), "/brake/disc", disc(inner, outer));
        assert_faults(ACTUATION_FORCE, &body, &[(at, code)]).await;
    }
    // Exactly as large as the pad it fits, in any unit.
    let fitting = with(&actuation_force(), "/brake/disc", disc(100.0, 150.0));
    answer(ACTUATION_FORCE, &fitting).await;
    let inches = with(&fitting, "/brake/disc/outer_radius", q(150.0 / 25.4, "in"));
    answer(ACTUATION_FORCE, &inches).await;
    let material = ["density", "specific_heat", "conductivity"]
        .map(|member| format!("#/brake/disc/material/{member}"));
    let unknown = with(&fitting, "/brake/disc/material", json!({}));
    assert_faults(
        ACTUATION_FORCE,
        &unknown,
        &[0, 1, 2].map(|index: usize| (material[index].as_str(), "missing")),
    )
    .await;
}

#[tokio::test]
async fn impossible_discs_are_refused() {
    let fitting = with(&actuation_force(), "/brake/disc", disc(100.0, 150.0));
    assert_each(
        ACTUATION_FORCE,
        &fitting,
        &[
            ("/brake/faces", json!(3), "#/brake/faces", "out_of_range"),
            ("/brake/disc/thickness", q(0.0, "mm"), "#/brake/disc/thickness", "not_positive"),
            ("/brake/disc/mass", q(0.0, "kg"), "#/brake/disc/mass", "not_positive"),
            (
                "/brake/disc/material",
                json!({"id": "gray_cast_irn"}),
                "#/brake/disc/material/id",
                "unknown_id",
            ),
            (
                "/brake/disc/material/emissivity",
                json!(1.1),
                "#/brake/disc/material/emissivity",
                "out_of_range",
            ),
            (
                "/brake/disc/material/emissivity",
                json!(0),
                "#/brake/disc/material/emissivity",
                "out_of_range",
            ),
            ("/brake/disc/cooling", json!({}), "#/brake/disc/cooling", "missing"),
            (
                "/brake/disc/cooling",
                json!({"coefficient": q(0.0, "W/(m2.K)")}),
                "#/brake/disc/cooling/coefficient",
                "not_positive",
            ),
            (
                "/brake/disc/cooling",
                json!({"coefficient": q(40.0, "W/(m2.K)"), "model": "airstream"}),
                "#/brake/disc/cooling/model",
                "conflict",
            ),
        ],
    )
    .await;
}

#[tokio::test]
async fn several_impossible_values_come_in_one_answer() {
    let mut body = cable();
    body["torque"] = q(0.0, "N.m");
    body["brake"]["faces"] = json!(0);
    body["brake"]["pad"]["angle"] = q(0.0, "deg");
    body["brake"]["lining"]["friction"]["nominal"] = json!(3.0);
    body["brake"]["actuation"]["cable_efficiency"] = json!(2.0);
    body["brake"]["actuation"]["caliper_ratio"] = json!(0.0);
    let expected = [
        ("#/torque", "not_positive"),
        ("#/brake/faces", "out_of_range"),
        ("#/brake/pad/angle", "not_positive"),
        ("#/brake/lining/friction/nominal", "out_of_range"),
        ("#/brake/actuation/cable_efficiency", "out_of_range"),
        ("#/brake/actuation/caliper_ratio", "not_positive"),
    ];
    assert_faults(ACTUATION_FORCE, &body, &expected).await;
}
