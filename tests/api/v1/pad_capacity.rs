//! `POST /v1/pad-capacity`: what a pad carries, and every way to ask wrongly.

use std::f64::consts::PI;

use serde_json::json;

use super::common::{
    PAD_CAPACITY, answer, assert_both_unit_systems, assert_each, assert_faults, assert_is,
    assert_warns, case, codes, default_at, defaulted, lining, of, pad_capacity, q, sector, warning,
    with, without,
};
use crate::support::close::{assert_close, assert_within};

#[tokio::test]
async fn a_sector_at_its_limit_carries_what_a_hand_calculation_gives() {
    let answer = answer(PAD_CAPACITY, &pad_capacity()).await;
    let results = &answer["results"];
    // A = (pi/2)/2 · (150² − 100²) mm² = pi/4 · 12 500 mm² = 9817.477 mm².
    assert_is(&results["pad_area"], PI / 4.0 * 12_500.0, "mm2");
    // Uniform wear: r_e = (150 + 100)/2 mm; r_F = r_e · 2 sin(45 deg)/(pi/2) = 112.540 mm.
    assert_is(&results["effective_radius"], 125.0, "mm");
    assert_is(&results["pressure_center_radius"], 125.0 * 2.0 * 0.5_f64.sqrt() / (PI / 2.0), "mm");
    // F = theta p r_i (r_o − r_i) = pi/2 · 2 MPa · 100 mm · 50 mm = 15 707.96 N.
    let force = PI / 2.0 * 2.0 * 100.0 * 50.0;
    assert_is(&results["clamp_force"], force, "N");
    assert_is(&results["peak_pressure"], 2.0, "MPa");
    // Mean = F/A = 15 707.96 N/9817.477 mm² = 1.6 MPa.
    assert_is(&results["mean_pressure"], 1.6, "MPa");
    for (name, friction) in [("low", 0.3), ("nominal", 0.4), ("high", 0.5)] {
        let case = case(&answer, name);
        assert_eq!(case["coefficient"], friction);
        assert_is(&case["friction_force_per_face"], friction * force, "N");
        assert_is(&case["torque_per_face"], friction * force * 0.125, "N.m");
        assert_is(&case["torque"], 2.0 * friction * force * 0.125, "N.m");
    }
    assert_eq!(results["friction_cases"].as_array().unwrap().len(), 3);
    assert_eq!(answer["warnings"], json!([]), "the limit was asked for: no warning");
    assert_eq!(
        answer["record"]["methods"],
        json!(["pad.annular_sector.uniform_wear", "friction.torque"])
    );
}

#[tokio::test]
async fn the_sector_caliper_example_of_a_textbook_comes_out_in_its_own_units() {
    // Shigley, Mechanical Engineering Design, example 16-3 (from memory): sector 3.875 to 5.5 in over 108 deg,
    // friction 0.37, 13 000 lbf.in by two pads: F 3748 lbf, r_e 4.69 in, center 4.02 in, p_max 315 psi
    // (recomputed 3747.75, 4.6875, 4.0237, 315.751). Printed digits set the tolerances.
    let body = json!({
        "report_units": "us",
        "pad": {"shape": "annular_sector", "inner_radius": q(3.875, "in"), "outer_radius": q(5.5, "in"), "angle": q(108.0, "deg")},
        "lining": {"friction": {"nominal": 0.37}}, "clamp_force": q(3747.75, "lbf"),
    });
    let answer = answer(PAD_CAPACITY, &body).await;
    let results = &answer["results"];
    assert_within(of(&results["effective_radius"], "in"), 4.69, 0.005);
    assert_within(of(&results["pressure_center_radius"], "in"), 4.02, 0.005);
    assert_within(of(&results["peak_pressure"], "psi"), 315.751, 0.001);
    assert_within(of(&case(&answer, "nominal")["torque"], "lbf.in"), 13_000.0, 0.1);
}

#[tokio::test]
async fn the_round_pad_example_of_a_textbook_comes_out_but_for_its_table() {
    // Shigley, example 16-4 (from memory): R 0.5 in, e 2 in, 350 psi, friction 0.31: with the table of 1972
    // F 213 lbf and 127 lbf.in; exact integrals: F 207.82 lbf, r_e/e 0.99206, 127.824 lbf.in (verified).
    let body = json!({
        "report_units": "us", "faces": 2,
        "pad": {"shape": "round", "radius": q(0.5, "in"), "center_radius": q(2.0, "in")},
        "lining": {"friction": {"nominal": 0.31}, "max_pressure": q(350.0, "psi")},
    });
    let answer = answer(PAD_CAPACITY, &body).await;
    assert_within(of(&answer["results"]["clamp_force"], "lbf"), 207.82, 0.005);
    assert_within(of(&answer["results"]["effective_radius"], "in"), 2.0 * 0.992_06, 2e-5);
    assert_within(of(&case(&answer, "nominal")["torque_per_face"], "lbf.in"), 127.824, 0.001);
}

#[tokio::test]
async fn the_design_for_a_pad_angle_comes_out_under_uniform_pressure() {
    // Bhandari, Design of Machine Elements, example 12.12 (seen): 1500 N.m by two pads, 100 to 150 mm, friction
    // 0.35, mean pressure 2 MPa, uniform pressure: 77.543 16 deg, r_e 126.6667 mm, 16 917.29 N.
    let pad = with(&sector(), "/angle", q(77.543_16, "deg"));
    let body = json!({
        "pad": pad, "lining": {"friction": {"nominal": 0.35}, "max_pressure": q(2.0, "MPa")},
        "pressure_distribution": "uniform_pressure",
    });
    let answer = answer(PAD_CAPACITY, &body).await;
    assert_within(of(&answer["results"]["effective_radius"], "mm"), 126.6667, 5e-5);
    assert_within(of(&answer["results"]["clamp_force"], "N"), 16_917.29, 0.01);
    assert_within(of(&case(&answer, "nominal")["torque"], "N.m"), 1500.0, 0.001);
    assert_is(&answer["results"]["mean_pressure"], 2.0, "MPa");
}

#[tokio::test]
async fn an_outline_is_computed_in_its_unit_whichever_way_it_turns() {
    // The check polygon of the reference, verified by quadrature: 4107 mm², radii 100.171908 and 97.465631 mm,
    // force centers (97.903782, −2.894570) and (95.201490, −2.635402) mm.
    let points =
        [[70.0, -35.0], [118.0, -45.0], [131.0, 4.0], [115.0, 41.0], [92.0, 28.0], [68.0, 36.0]];
    let mut reversed = points;
    reversed.reverse();
    let in_metres = points.map(|point| point.map(|coordinate: f64| coordinate / 1000.0));
    for (points, unit) in [(points, "mm"), (reversed, "mm"), (in_metres, "m")] {
        for (distribution, radius, center) in [
            ("uniform_pressure", 100.171_908, 97.903_782_f64.hypot(2.894_570)),
            ("uniform_wear", 97.465_631, 95.201_490_f64.hypot(2.635_402)),
        ] {
            let body = json!({
                "pad": {"shape": "outline", "unit": unit, "points": points},
                "lining": {"friction": {"nominal": 0.4}}, "clamp_force": q(1000.0, "N"),
                "pressure_distribution": distribution,
            });
            let answer = answer(PAD_CAPACITY, &body).await;
            let results = &answer["results"];
            assert_close(of(&results["pad_area"], "mm2"), 4107.0, 1e-12);
            assert_within(of(&results["effective_radius"], "mm"), radius, 1e-6);
            assert_within(of(&results["pressure_center_radius"], "mm"), center, 1e-6);
        }
    }
}

#[tokio::test]
async fn a_full_ring_balances_about_the_axis() {
    let body = with(&pad_capacity(), "/pad/angle", q(360.0, "deg"));
    let answer = answer(PAD_CAPACITY, &body).await;
    assert_is(&answer["results"]["pad_area"], PI * 12_500.0, "mm2");
    assert!(of(&answer["results"]["pressure_center_radius"], "mm").abs() < 1e-9);
    assert_warns(&answer, "pad_unusually_wide", "info", "#/pad");
}

#[tokio::test]
async fn both_unit_systems_tell_the_same() {
    let outline = json!({"shape": "outline", "unit": "mm", "points": [[80, -30], [120, -42], [120, 42], [80, 30]]});
    let round = json!({"shape": "round", "radius": q(20.0, "mm"), "center_radius": q(110.0, "mm")});
    for pad in [sector(), outline, round] {
        let body = with(&pad_capacity(), "/pad", pad);
        assert_both_unit_systems(PAD_CAPACITY, &body).await;
        let pressed = with(&body, "/clamp_force", q(30.0, "kN"));
        assert_both_unit_systems(PAD_CAPACITY, &pressed).await;
    }
}

#[tokio::test]
async fn a_limit_is_near_from_nine_tenths_on_and_exceeded_beyond_it() {
    // The peak of this pad is force/(pi/2 · 100 mm · 50 mm).
    let force_at = |peak: f64| q(PI / 2.0 * 5000.0 * peak, "N");
    for (peak, severity) in [
        (1.79, None),
        (1.81, Some("near_limit")),
        (1.9999, Some("near_limit")),
        (2.0001, Some("exceeded")),
    ] {
        let body = with(&pad_capacity(), "/clamp_force", force_at(peak));
        let answer = answer(PAD_CAPACITY, &body).await;
        let Some(severity) = severity else {
            assert_eq!(answer["warnings"], json!([]));
            continue;
        };
        assert_warns(&answer, "pad_peak_pressure", severity, "#/lining/max_pressure");
        let warning = warning(&answer, "pad_peak_pressure");
        assert_is(&warning["actual"], peak, "MPa");
        assert_is(&warning["limit"], 2.0, "MPa");
        assert!(warning.get("friction_case").is_none(), "pressure does not depend on friction");
    }
}

#[tokio::test]
async fn a_limit_of_a_catalog_row_is_the_lower_bound_and_points_at_the_row() {
    // Shigley, table 16-3 (from memory): sintered metal, dry: friction 0.29 to 0.33, 300 to 400 psi.
    let body =
        json!({"pad": sector(), "lining": {"id": "sintered_metal_dry"}, "report_units": "us"});
    let at_limit = answer(PAD_CAPACITY, &body).await;
    assert_is(&at_limit["results"]["peak_pressure"], 300.0, "psi");
    for (name, friction) in [("low", 0.29), ("nominal", 0.31), ("high", 0.33)] {
        assert_close(case(&at_limit, name)["coefficient"].as_f64().unwrap(), friction, 1e-15);
    }
    assert_warns(&at_limit, "value_from_memory", "info", "#/lining/id");
    assert!(at_limit["cautions"].to_string().contains("values_from_memory"));
    let pressed = answer(PAD_CAPACITY, &with(&body, "/clamp_force", q(30.0, "kN"))).await;
    assert_warns(&pressed, "pad_peak_pressure", "exceeded", "#/lining/id");
    let own =
        with(&with(&body, "/clamp_force", q(30.0, "kN")), "/lining/max_pressure", q(1.0, "MPa"));
    let own = answer(PAD_CAPACITY, &own).await;
    assert_warns(&own, "pad_peak_pressure", "exceeded", "#/lining/max_pressure");
}

#[tokio::test]
async fn an_asbestos_row_carries_its_caution() {
    let body = json!({"pad": sector(), "lining": {"id": "rigid_molded_asbestos_pads"}});
    let answer = answer(PAD_CAPACITY, &body).await;
    assert!(answer["cautions"].as_array().unwrap().iter().any(|known| known["code"] == "asbestos"));
}

#[tokio::test]
async fn a_friction_code_gives_a_range_and_says_that_it_is_no_rating() {
    // SAE J866, as a public page gives it (seen): F is over 0.35, but not over 0.45.
    let body =
        json!({"pad": sector(), "lining": {"friction_code": "FE"}, "clamp_force": q(10.0, "kN")});
    let answer = answer(PAD_CAPACITY, &body).await;
    for (name, friction) in [("low", 0.35), ("nominal", 0.4), ("high", 0.45)] {
        assert_close(case(&answer, name)["coefficient"].as_f64().unwrap(), friction, 1e-15);
    }
    assert_warns(&answer, "friction_code_is_not_a_rating", "info", "#/lining/friction_code");
}

#[tokio::test]
async fn one_friction_value_gives_one_case_and_says_so() {
    let body = with(&pad_capacity(), "/lining/friction", json!({"nominal": 0.4}));
    let answer = answer(PAD_CAPACITY, &body).await;
    assert_eq!(answer["results"]["friction_cases"].as_array().unwrap().len(), 1);
    assert_eq!(case(&answer, "nominal")["coefficient"], 0.4);
    assert_warns(&answer, "friction_range_not_given", "info", "#/lining/friction");
}

#[tokio::test]
async fn a_range_without_nominal_takes_the_middle_and_records_it() {
    let body = with(&pad_capacity(), "/lining/friction", json!({"low": 0.25, "high": 0.5}));
    let answer = answer(PAD_CAPACITY, &body).await;
    assert_eq!(case(&answer, "nominal")["coefficient"], 0.375);
    assert_eq!(default_at(&answer, "#/lining/friction/nominal")["value"], 0.375);
}

#[tokio::test]
async fn every_default_is_on_record_and_a_value_given_is_not() {
    let open = answer(PAD_CAPACITY, &pad_capacity()).await;
    assert_eq!(defaulted(&open), ["#/faces", "#/pressure_distribution"]);
    assert_eq!(default_at(&open, "#/faces"), &json!({"pointer": "#/faces", "value": 2}));
    assert_eq!(default_at(&open, "#/pressure_distribution")["value"], "uniform_wear");
    let mut body = with(&pad_capacity(), "/faces", 4);
    body["pressure_distribution"] = json!("uniform_wear");
    let given = answer(PAD_CAPACITY, &body).await;
    assert_eq!(given["record"]["defaults"], json!([]));
    assert_is(
        &case(&given, "low")["torque"],
        2.0 * of(&case(&open, "low")["torque"], "N.m"),
        "N.m",
    );
}

#[tokio::test]
async fn strange_but_possible_values_are_computed_with_a_warning() {
    let sticky = with(&pad_capacity(), "/lining/friction", json!({"low": 0.7, "high": 0.81}));
    let sticky = answer(PAD_CAPACITY, &sticky).await;
    assert_warns(&sticky, "friction_unusually_high", "info", "#/lining/friction");
    let usual = with(&pad_capacity(), "/lining/friction", json!({"low": 0.7, "high": 0.8}));
    assert!(codes(&answer(PAD_CAPACITY, &usual).await).is_empty());
    let wide = answer(PAD_CAPACITY, &with(&pad_capacity(), "/pad/angle", q(120.1, "deg"))).await;
    assert_warns(&wide, "pad_unusually_wide", "info", "#/pad");
    let usual = answer(PAD_CAPACITY, &with(&pad_capacity(), "/pad/angle", q(119.9, "deg"))).await;
    assert!(codes(&usual).is_empty());
}

#[tokio::test]
async fn impossible_sectors_are_refused() {
    let cases = [
        ("/pad/inner_radius", q(0.0, "mm"), "#/pad/inner_radius", "not_positive"),
        ("/pad/inner_radius", q(-1.0, "mm"), "#/pad/inner_radius", "not_positive"),
        ("/pad/outer_radius", q(0.0, "mm"), "#/pad/outer_radius", "not_positive"),
        ("/pad/outer_radius", q(100.0, "mm"), "#/pad/outer_radius", "not_above_inner_radius"),
        ("/pad/outer_radius", q(99.0, "mm"), "#/pad/outer_radius", "not_above_inner_radius"),
        ("/pad/angle", q(0.0, "deg"), "#/pad/angle", "not_positive"),
        ("/pad/angle", q(-30.0, "deg"), "#/pad/angle", "not_positive"),
        ("/pad/angle", q(361.0, "deg"), "#/pad/angle", "out_of_range"),
        ("/pad/wear_allowance", q(0.0, "mm"), "#/pad/wear_allowance", "not_positive"),
        ("/pad/wear_allowance", q(-2.0, "mm"), "#/pad/wear_allowance", "not_positive"),
        ("/faces", json!(0), "#/faces", "out_of_range"),
        ("/faces", json!(1001), "#/faces", "out_of_range"),
        ("/clamp_force", q(0.0, "N"), "#/clamp_force", "not_positive"),
        ("/clamp_force", q(-5.0, "N"), "#/clamp_force", "not_positive"),
        ("/pad/outer_radius", q(1.1e6, "m"), "#/pad/outer_radius", "out_of_range"),
        ("/clamp_force", q(1e13, "N"), "#/clamp_force", "out_of_range"),
        ("/clamp_force", q(1e-31, "N"), "#/clamp_force", "out_of_range"),
    ];
    assert_each(PAD_CAPACITY, &pad_capacity(), &cases).await;
}

#[tokio::test]
async fn impossible_round_pads_are_refused() {
    let round = json!({"shape": "round", "radius": q(20.0, "mm"), "center_radius": q(110.0, "mm")});
    let cases = [
        ("/pad/radius", q(0.0, "mm"), "#/pad/radius", "not_positive"),
        ("/pad/center_radius", q(-110.0, "mm"), "#/pad/center_radius", "not_positive"),
        ("/pad/radius", q(110.0, "mm"), "#/pad/radius", "pad_reaches_axis"),
        ("/pad/radius", q(120.0, "mm"), "#/pad/radius", "pad_reaches_axis"),
    ];
    assert_each(PAD_CAPACITY, &with(&pad_capacity(), "/pad", round), &cases).await;
}

#[tokio::test]
async fn impossible_outlines_are_refused() {
    let body = |points: serde_json::Value| {
        with(&pad_capacity(), "/pad", json!({"shape": "outline", "unit": "mm", "points": points}))
    };
    let many: Vec<[f64; 2]> = (0..1001).map(|index| [80.0 + f64::from(index), 1.0]).collect();
    for (points, code) in [
        (json!([[80, 0], [100, 0], [120, 0]]), "outline_without_area"),
        (json!([[-50, -50], [50, -50], [0, 80]]), "outline_contains_axis"),
        (json!([[0, -50], [50, 0], [0, 50]]), "outline_contains_axis"),
        (json!([[80, -30], [120, -42]]), "wrong_count"),
        (json!([]), "wrong_count"),
        (json!(many), "wrong_count"),
    ] {
        assert_faults(PAD_CAPACITY, &body(points), &[("#/pad/points", code)]).await;
    }
    // Named is the first corner of the first edge that crosses another.
    let crossing = body(json!([[80, -30], [120, 42], [120, -42], [80, 30]]));
    assert_faults(PAD_CAPACITY, &crossing, &[("#/pad/points/0", "outline_self_intersects")]).await;
    for (point, at, code) in [
        (json!([80]), "#/pad/points/1", "wrong_count"),
        (json!([80, 1, 2]), "#/pad/points/1", "wrong_count"),
        (json!([80, null]), "#/pad/points/1/1", "null_not_allowed"),
        (json!(["80", 1]), "#/pad/points/1/0", "wrong_type"),
        (json!({"x": 80, "y": 1}), "#/pad/points/1", "wrong_type"),
        (json!([1e10, 1]), "#/pad/points/1", "out_of_range"),
    ] {
        let points = json!([[80, -30], point, [120, 42]]);
        assert_faults(PAD_CAPACITY, &body(points), &[(at, code)]).await;
    }
    let unit = with(&body(json!([[80, -30], [120, -42], [120, 42]])), "/pad/unit", "kg");
    assert_faults(PAD_CAPACITY, &unit, &[("#/pad/unit", "unknown_unit")]).await;
}

#[tokio::test]
async fn impossible_linings_are_refused() {
    let friction =
        |low: f64, nominal: f64, high: f64| json!({"low": low, "nominal": nominal, "high": high});
    let kelvin = |value: f64, factor: f64| json!({"temperature": q(value, "K"), "factor": factor});
    let cases = [
        ("/lining/friction", friction(0.45, 0.4, 0.5), "#/lining/friction/low", "not_in_order"),
        ("/lining/friction", friction(0.3, 0.6, 0.5), "#/lining/friction/high", "not_in_order"),
        ("/lining/friction", friction(0.0, 0.4, 0.5), "#/lining/friction/low", "out_of_range"),
        ("/lining/friction", friction(0.3, 0.4, 2.1), "#/lining/friction/high", "out_of_range"),
        ("/lining/friction", json!({"nominal": -0.4}), "#/lining/friction/nominal", "out_of_range"),
        ("/lining/friction", json!({"low": 0.3}), "#/lining/friction/high", "missing"),
        (
            "/lining/friction",
            json!({"nominal": 0.3, "high": 0.4}),
            "#/lining/friction/low",
            "missing",
        ),
        ("/lining/friction", json!({}), "#/lining/friction", "missing"),
        ("/lining/max_pressure", q(0.0, "MPa"), "#/lining/max_pressure", "not_positive"),
        ("/lining/max_rubbing_speed", q(-1.0, "m/s"), "#/lining/max_rubbing_speed", "not_positive"),
        (
            "/lining/max_temperature_peak",
            q(-274.0, "degC"),
            "#/lining/max_temperature_peak",
            "out_of_range",
        ),
        (
            "/lining/max_temperature_continuous",
            q(-460.0, "degF"),
            "#/lining/max_temperature_continuous",
            "out_of_range",
        ),
        ("/lining/specific_wear", q(0.0, "mm3/MJ"), "#/lining/specific_wear", "not_positive"),
        ("/lining/density", q(-1.0, "kg/m3"), "#/lining/density", "not_positive"),
        (
            "/lining/fade",
            json!([kelvin(400.0, 1.0), kelvin(400.0, 0.8)]),
            "#/lining/fade/1/temperature",
            "not_in_order",
        ),
        ("/lining/fade", json!([kelvin(400.0, 0.0)]), "#/lining/fade/0/factor", "out_of_range"),
        ("/lining/fade", json!([kelvin(400.0, 2.1)]), "#/lining/fade/0/factor", "out_of_range"),
        ("/lining/fade", json!([kelvin(-1.0, 1.0)]), "#/lining/fade/0/temperature", "out_of_range"),
        ("/lining/friction_code", json!("FF"), "#/lining/friction_code", "conflict"),
        ("/lining/id", json!("sintered_metal_dri"), "#/lining/id", "unknown_id"),
    ];
    assert_each(PAD_CAPACITY, &pad_capacity(), &cases).await;
    let open = without(&pad_capacity(), "/lining/friction");
    assert_faults(PAD_CAPACITY, &open, &[("#/lining", "missing")]).await;
    let both = with(&open, "/lining", json!({"id": "sintered_metal_dry", "friction_code": "FF"}));
    assert_faults(PAD_CAPACITY, &both, &[("#/lining/friction_code", "conflict")]).await;
}

#[tokio::test]
async fn a_friction_letter_without_two_bounds_is_refused_with_that_reason() {
    for code in ["CF", "HF", "ZF"] {
        let body = with(
            &pad_capacity(),
            "/lining",
            json!({"friction_code": code, "max_pressure": q(2.0, "MPa")}),
        );
        let at = "#/lining/friction_code";
        assert_faults(PAD_CAPACITY, &body, &[(at, "unbounded_friction_code")]).await;
    }
    for code in ["", "F", "FFF", "ff", "AB"] {
        let body = with(
            &pad_capacity(),
            "/lining",
            json!({"friction_code": code, "max_pressure": q(2.0, "MPa")}),
        );
        assert_faults(PAD_CAPACITY, &body, &[("#/lining/friction_code", "unknown_id")]).await;
    }
}

#[tokio::test]
async fn without_force_and_limit_there_is_nothing_to_compute() {
    let body = with(&pad_capacity(), "/lining", without(&lining(), "/max_pressure"));
    assert_faults(PAD_CAPACITY, &body, &[("#/clamp_force", "missing")]).await;
}

#[tokio::test]
async fn several_impossible_values_come_in_one_answer() {
    let mut body = pad_capacity();
    body["pad"]["angle"] = q(400.0, "deg");
    body["pad"]["inner_radius"] = q(0.0, "mm");
    body["lining"]["friction"] = json!({"low": 0.0, "high": 3.0});
    body["lining"]["max_pressure"] = q(-1.0, "MPa");
    body["faces"] = json!(0);
    body["clamp_force"] = q(-1.0, "N");
    let expected = [
        ("#/pad/angle", "out_of_range"),
        ("#/pad/inner_radius", "not_positive"),
        ("#/lining/friction/low", "out_of_range"),
        ("#/lining/friction/high", "out_of_range"),
        ("#/lining/max_pressure", "not_positive"),
        ("#/faces", "out_of_range"),
        ("#/clamp_force", "not_positive"),
    ];
    assert_faults(PAD_CAPACITY, &body, &expected).await;
}
