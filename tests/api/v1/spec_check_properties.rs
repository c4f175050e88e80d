//! What holds for every specification check, whatever its numbers.

use proptest::prelude::*;
use serde_json::{Value, json};

use super::common::{answer, of, q, with};
use super::spec_check_requests::{
    SPEC_CHECK, check, fade, four_brakes, hold, one_hold, one_stop, repeated, spec, statuses, stop,
    used, vehicle,
};

fn asked(body: &Value) -> Value {
    let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build().unwrap();
    runtime.block_on(answer(SPEC_CHECK, body))
}

/// The vehicle whose driver presses the pedal with this force.
fn pressed(mut body: Value, newtons: f64) -> Value {
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["actuation"]["master_cylinder"]["operator_force"] =
            q(newtons, "N");
    }
    body
}

fn distance(answer: &Value) -> f64 {
    of(&check(answer, "stopping_distance")["actual"], "m")
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]

    /// Also beyond what the tires carry, where more force changes nothing.
    #[test]
    fn a_stronger_brake_never_stops_later(
        force in 60.0_f64..600.0, more in 1.001_f64..3.0, adhesion in 0.2_f64..1.0, grade in -8.0_f64..8.0,
    ) {
        let mut body = with(&one_stop(), "/machine/adhesion", adhesion);
        body["duties"][0]["grade"] = q(grade, "%");
        let [weak, strong] = [force, force * more].map(|force| asked(&pressed(body.clone(), force)));
        if check(&strong, "stopping_distance")["actual"].is_null() {
            prop_assert!(check(&weak, "stopping_distance")["actual"].is_null());
        } else if !check(&weak, "stopping_distance")["actual"].is_null() {
            prop_assert!(distance(&strong) <= distance(&weak) * (1.0 + 1e-9));
            prop_assert!(used(check(&strong, "stops")) <= used(check(&weak, "stops")));
        }
    }

    #[test]
    fn a_steeper_slope_is_never_easier_to_hold(
        grade in 1.0_f64..60.0, steeper in 1.001_f64..1.6, is_down in any::<bool>(), adhesion in 0.2_f64..1.0,
    ) {
        let sign = if is_down { -1.0 } else { 1.0 };
        let body = with(&one_hold(), "/machine/adhesion", adhesion);
        let [gentle, steep] = [grade, grade * steeper]
            .map(|grade| asked(&with(&body, "/duties/0/grade", q(sign * grade, "%"))));
        for code in ["holding_torque", "holding_adhesion"] {
            prop_assert!(used(check(&steep, code)) > used(check(&gentle, code)), "{}", code);
        }
        // The brakes do not feel which way the slope goes.
        let other = asked(&with(&body, "/duties/0/grade", q(-sign * grade, "%")));
        prop_assert_eq!(used(check(&other, "holding_torque")), used(check(&gentle, "holding_torque")));
    }

    /// Fewer brakes never stop earlier, and linings that fade never stop earlier hot.
    #[test]
    fn what_takes_brake_force_away_never_helps(
        force in 100.0_f64..300.0, entry in 0..2_u32, interval in 20.0_f64..120.0,
    ) {
        let body = pressed(one_stop(), force);
        let all = asked(&body);
        let some = asked(&with(&body, "/duties/0/uses", json!([{"fitted_index": entry}])));
        prop_assert!(distance(&some) >= distance(&all));
        let mut heated = body;
        heated["duties"].as_array_mut().unwrap().push(with(&repeated(), "/interval", q(interval, "s")));
        for entry in 0..2 {
            heated["fitted"][entry]["brake"]["lining"]["fade"] = fade();
        }
        prop_assert!(distance(&asked(&heated)) >= distance(&all));
    }

    #[test]
    fn the_verdict_is_what_the_checks_come_to(
        force in 20.0_f64..600.0, most in 20.0_f64..120.0, factor in 0.5_f64..6.0, near in 0.01_f64..1.0,
        lacking in prop::sample::subsequence(vec!["max_pressure", "max_rubbing_speed", "max_temperature_peak"], 0..3),
        is_waived in any::<bool>(), grip in prop::option::of(0.1_f64..1.0),
    ) {
        let mut body = pressed(spec(vehicle(), four_brakes(), vec![stop(), hold()]), force);
        body["near_limit_from"] = json!(near);
        body["duties"][0]["require"]["max_distance"] = q(most, "m");
        body["duties"][1]["require"]["min_holding_factor"] = json!(factor);
        match grip {
            Some(grip) => body["machine"]["adhesion"] = json!(grip),
            None => { body["machine"].as_object_mut().unwrap().shift_remove("adhesion"); }
        }
        for member in lacking {
            body["fitted"][1]["brake"]["lining"].as_object_mut().unwrap().shift_remove(member);
        }
        if is_waived {
            let waived = ["pad_peak_pressure", "rubbing_speed", "stopping_distance", "holding_torque"];
            let waivers = waived.map(|check| json!({"check": check, "reason": "a reason"}));
            body["waive"] = json!(waivers);
        }
        let answer = asked(&body);
        let found = statuses(&answer);
        let has = |wanted| found.iter().any(|(_, status)| *status == wanted);
        let verdict = if has("not_met") {
            "fail"
        } else if has("not_assessed") {
            "incomplete"
        } else {
            "pass"
        };
        prop_assert_eq!(&answer["results"]["verdict"], verdict);
        for check in answer["results"]["checks"].as_array().unwrap() {
            let status = check["status"].as_str().unwrap();
            let share = check["utilization"].as_f64();
            match status {
                "met" => prop_assert!(share.is_none_or(|used| used < near), "{}", check),
                "near_limit" => prop_assert!(share.is_some_and(|used| (near..=1.0).contains(&used)), "{}", check),
                "not_met" => prop_assert!(share.is_none_or(|used| used >= 1.0), "{}", check),
                _ => prop_assert!(share.is_none(), "{}", check),
            }
        }
    }
}
