//! Every check at its limit: just within, just beyond, exactly there, and with an input missing.

use std::collections::BTreeSet;

use brakewright::calc::finding::CheckCode;
use proptest::prelude::*;
use serde_json::{Value, json};

use super::common::{answer, q, warning, with, without};
use super::spec_check_requests::{
    SPEC_CHECK, check, check_of, checks, conveyor, hoist, number, one_hold, one_stop, used,
};

/// Which way a limit runs.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Way {
    Maximum,
    Minimum,
    /// A maximum that counts from the air, which has 20 degC in every request here.
    Temperature,
}

/// A check with the place of its limit.
struct Limit {
    code: &'static str,
    body: fn() -> Value,
    at: &'static str,
    way: Way,
}

const fn limit(code: &'static str, body: fn() -> Value, at: &'static str, way: Way) -> Limit {
    Limit { code, body, at, way }
}

const LIMITS: [Limit; 21] = [
    limit("stopping_distance", one_stop, "/duties/0/require/max_distance", Way::Maximum),
    limit("stopping_time", one_stop, "/duties/0/require/max_time", Way::Maximum),
    limit("mean_deceleration", one_stop, "/duties/0/require/min_mean_deceleration", Way::Minimum),
    limit(
        "mean_fully_developed_deceleration",
        one_stop,
        "/duties/0/require/min_mean_fully_developed_deceleration",
        Way::Minimum,
    ),
    limit(
        "peak_deceleration_minimum",
        one_stop,
        "/duties/0/require/min_peak_deceleration",
        Way::Minimum,
    ),
    limit("peak_deceleration", one_stop, "/duties/0/require/max_deceleration", Way::Maximum),
    limit("braking_ratio", one_stop, "/duties/0/require/min_braking_ratio", Way::Minimum),
    limit("pad_life", one_stop, "/duties/0/require/min_pad_life_stops", Way::Minimum),
    limit("pad_peak_pressure", one_stop, "/fitted/0/brake/lining/max_pressure", Way::Maximum),
    limit("rubbing_speed", one_stop, "/fitted/0/brake/lining/max_rubbing_speed", Way::Maximum),
    limit(
        "pressure_velocity",
        one_stop,
        "/fitted/0/brake/lining/max_pressure_velocity",
        Way::Maximum,
    ),
    limit("power_flux", one_stop, "/fitted/0/brake/lining/max_power_flux", Way::Maximum),
    limit("energy_flux", one_stop, "/fitted/0/brake/lining/max_energy_flux", Way::Maximum),
    limit(
        "disc_bulk_temperature",
        one_stop,
        "/fitted/0/brake/lining/max_temperature_continuous",
        Way::Temperature,
    ),
    limit(
        "surface_temperature",
        one_stop,
        "/fitted/0/brake/lining/max_temperature_peak",
        Way::Temperature,
    ),
    limit("line_pressure", one_stop, "/fitted/0/brake/actuation/max_line_pressure", Way::Maximum),
    limit(
        "operator_force",
        one_stop,
        "/fitted/0/brake/actuation/master_cylinder/max_operator_force",
        Way::Maximum,
    ),
    limit(
        "operator_stroke",
        one_stop,
        "/fitted/0/brake/actuation/master_cylinder/max_stroke",
        Way::Maximum,
    ),
    limit("air_pressure", conveyor, "/fitted/0/brake/actuation/max_air_pressure", Way::Maximum),
    limit(
        "release_pressure",
        hoist,
        "/fitted/0/brake/actuation/max_release_pressure",
        Way::Maximum,
    ),
    limit("holding_torque", one_hold, "/duties/0/require/min_holding_factor", Way::Minimum),
];

impl Limit {
    /// The request with the limit set so that the check uses `share` of it.
    fn used_by(&self, actual: &Value, share: f64) -> Value {
        let value = number(&actual["value"]);
        let unit = actual["unit"].as_str().unwrap();
        let limit = match self.way {
            Way::Maximum => value / share,
            Way::Minimum => value * share,
            Way::Temperature => 20.0 + (value - 20.0) / share,
        };
        let limit = if unit == "1" { json!(limit) } else { q(limit, unit) };
        with(&(self.body)(), self.at, limit)
    }

    async fn actual(&self) -> Value {
        check_of(&(self.body)(), self.code).await["actual"].clone()
    }
}

/// A check that no number limits: an input moves what it uses, in proportion or against it.
struct Effort {
    code: &'static str,
    body: fn() -> Value,
    at: &'static str,
    is_inverse: bool,
}

/// The front brakes alone, so that nothing but the front tires limits what they do.
fn front_only(body: &Value) -> Value {
    with(body, "/duties/0/uses", json!([{"fitted_index": 0}]))
}

fn front_stop() -> Value {
    front_only(&one_stop())
}

/// The front tires hold less than the front brakes.
fn slippery_hold() -> Value {
    with(&front_only(&one_hold()), "/machine/adhesion", 0.3)
}

const EFFORTS: [Effort; 4] = [
    Effort { code: "stops", body: hoist, at: "/machine/load_mass", is_inverse: false },
    Effort { code: "adhesion", body: one_stop, at: "/machine/adhesion", is_inverse: true },
    Effort {
        code: "rear_wheel_lift",
        body: front_stop,
        at: "/machine/geometry/center_of_gravity_height",
        is_inverse: false,
    },
    Effort {
        code: "holding_adhesion",
        body: slippery_hold,
        at: "/machine/adhesion",
        is_inverse: true,
    },
];

impl Effort {
    /// The request with the input moved so that the check uses `share`.
    async fn used_by(&self, share: f64) -> Value {
        let body = (self.body)();
        let found = used(&check_of(&body, self.code).await);
        let factor = if self.is_inverse { found / share } else { share / found };
        let given = body.pointer(self.at).unwrap();
        let moved = if given.is_object() {
            q(number(&given["value"]) * factor, given["unit"].as_str().unwrap())
        } else {
            json!(number(given) * factor)
        };
        with(&body, self.at, moved)
    }
}

/// The vehicle with rear pistons of this diameter, mm.
fn rear_pistons(diameter: f64) -> Value {
    with(&one_stop(), "/fitted/1/brake/actuation/piston_diameter", q(diameter, "mm"))
}

/// The rear pistons at which both axles lock together, mm, within 1e-4.
async fn balanced_pistons() -> f64 {
    let (mut small, mut large) = (22.0, 50.0);
    while large - small > 1e-4 * large {
        let middle = 0.5 * (small + large);
        let found = check_of(&rear_pistons(middle), "axle_lock_order").await;
        if used(&found) > 1.0 { large = middle } else { small = middle }
    }
    0.5 * (small + large)
}

#[test]
fn every_check_of_the_contract_stands_in_one_of_the_tables() {
    let limits = LIMITS.iter().map(|limit| limit.code);
    let efforts = EFFORTS.iter().map(|effort| effort.code);
    let tried: BTreeSet<&str> = limits.chain(efforts).chain(["axle_lock_order"]).collect();
    let known: BTreeSet<&str> = CheckCode::ALL.iter().map(|code| code.as_str()).collect();
    assert_eq!(tried, known);
}

#[tokio::test]
async fn a_limit_just_kept_is_near_and_one_just_passed_is_not_met() {
    for limit in &LIMITS {
        let actual = limit.actual().await;
        for (share, status, severity) in
            [(0.999, "near_limit", "near_limit"), (1.001, "not_met", "exceeded")]
        {
            let answer = answer(SPEC_CHECK, &limit.used_by(&actual, share)).await;
            let found = check(&answer, limit.code);
            assert_eq!(found["status"], status, "{found}");
            assert!((used(found) - share).abs() < 1e-9, "{found}");
            let warned = warning(&answer, limit.code);
            assert_eq!(warned["pointer"], format!("#{}", limit.at), "{warned}");
            assert_eq!(warned["severity"], severity, "{warned}");
            assert_eq!([&warned["actual"], &warned["limit"]], [&found["actual"], &found["limit"]]);
            let fails = answer["results"]["verdict"] == "fail";
            assert_eq!(fails, status == "not_met", "{}", limit.code);
        }
    }
}

#[tokio::test]
async fn an_effort_just_within_what_there_is_is_near_and_one_just_beyond_is_not_met() {
    for effort in &EFFORTS {
        for (share, status) in [(0.999, "near_limit"), (1.001, "not_met")] {
            let found = check_of(&effort.used_by(share).await, effort.code).await;
            assert_eq!(found["status"], status, "{found}");
            assert!((used(&found) - share).abs() < 2e-3, "{found}");
        }
    }
    let balanced = balanced_pistons().await;
    for (factor, status) in [(0.999, "near_limit"), (1.001, "not_met")] {
        let found = check_of(&rear_pistons(balanced * factor), "axle_lock_order").await;
        assert_eq!(found["status"], status, "{found}");
    }
}

#[tokio::test]
async fn utilization_is_exactly_1_at_the_limit_whichever_way_it_runs() {
    for limit in &LIMITS {
        let actual = limit.actual().await;
        let found = check_of(&limit.used_by(&actual, 1.0), limit.code).await;
        // What was given in the request comes back as it was; all else is told with a rounded last digit.
        let is_given = ["operator_force", "air_pressure"].contains(&limit.code);
        if is_given {
            assert_eq!(used(&found), 1.0, "{found}");
            assert_eq!(found["status"], "near_limit", "{found}");
        } else {
            assert!((used(&found) - 1.0).abs() < 1e-12, "{found}");
        }
    }
}

#[tokio::test]
async fn near_limit_from_moves_the_border_between_met_and_near() {
    for limit in &LIMITS {
        let actual = limit.actual().await;
        let half = limit.used_by(&actual, 0.5);
        for (from, status) in [(0.5 - 1e-6, "near_limit"), (0.5 + 1e-6, "met"), (1.0, "met")] {
            let found = check_of(&with(&half, "/near_limit_from", from), limit.code).await;
            assert_eq!(found["status"], status, "{from}: {found}");
        }
        for (share, status) in [(0.9 + 1e-6, "near_limit"), (0.9 - 1e-6, "met")] {
            let found = check_of(&limit.used_by(&actual, share), limit.code).await;
            assert_eq!(found["status"], status, "{share}: {found}");
        }
        // A limit that is passed is passed, however near counts.
        let beyond = with(&limit.used_by(&actual, 1.001), "/near_limit_from", 1.0);
        assert_eq!(check_of(&beyond, limit.code).await["status"], "not_met");
    }
}

const TIRES: [&str; 9] = [
    "stopping_distance",
    "stopping_time",
    "mean_deceleration",
    "mean_fully_developed_deceleration",
    "peak_deceleration_minimum",
    "peak_deceleration",
    "braking_ratio",
    "adhesion",
    "axle_lock_order",
];

/// Demands that a check is not assessed and names exactly these inputs.
async fn assert_lacks(body: &Value, code: &str, missing: &[&str]) {
    let answer = answer(SPEC_CHECK, body).await;
    let found = check(&answer, code);
    assert_eq!(found["status"], "not_assessed", "{found}");
    assert_eq!(found["missing"], json!(missing), "{found}");
    assert!(found.get("utilization").is_none(), "{found}");
    assert_eq!(answer["results"]["verdict"], "incomplete", "{code}");
}

#[tokio::test]
async fn what_the_tires_do_is_not_judged_without_adhesion_and_geometry() {
    let grip = ["#/machine/adhesion"];
    let axles = ["#/machine/geometry"];
    for code in TIRES {
        assert_lacks(&without(&one_stop(), "/machine/adhesion"), code, &grip).await;
        assert_lacks(&without(&one_stop(), "/machine/geometry"), code, &axles).await;
    }
    let bare = without(&without(&one_stop(), "/machine/geometry"), "/machine/adhesion");
    assert_lacks(&bare, "stopping_distance", &[grip, axles].concat()).await;
    assert_lacks(&bare, "rear_wheel_lift", &axles).await;
    assert_lacks(&without(&one_hold(), "/machine/adhesion"), "holding_adhesion", &grip).await;
    assert_lacks(&without(&one_hold(), "/machine/geometry"), "holding_adhesion", &axles).await;
    // Lifting does not depend on adhesion, and one entry on all axles needs no axle loads.
    let found = check_of(&without(&one_stop(), "/machine/adhesion"), "rear_wheel_lift").await;
    assert_eq!(found["status"], "met");
    let mut all = bare.clone();
    all["fitted"].as_array_mut().unwrap().truncate(1);
    all["machine"]["adhesion"] = json!(0.8);
    all["fitted"][0]["axle"] = json!("all");
    for code in ["stopping_distance", "braking_ratio", "adhesion"] {
        assert_eq!(check_of(&all, code).await["status"], "met", "{code}");
    }
}

#[tokio::test]
async fn a_check_of_a_brake_that_lacks_an_input_says_which() {
    let at = |part: &str| format!("#/fitted/0/brake/{part}");
    for (body, code, member) in [
        (one_stop(), "pad_peak_pressure", "lining/max_pressure"),
        (one_stop(), "rubbing_speed", "lining/max_rubbing_speed"),
        (one_stop(), "disc_bulk_temperature", "lining/max_temperature_continuous"),
        (one_stop(), "surface_temperature", "lining/max_temperature_peak"),
        (one_stop(), "disc_bulk_temperature", "disc"),
        (one_stop(), "surface_temperature", "disc"),
        (one_stop(), "pad_life", "lining/specific_wear"),
        (one_stop(), "pad_life", "pad/wear_allowance"),
        (one_stop(), "operator_stroke", "actuation/running_clearance"),
        (hoist(), "release_pressure", "actuation/spring_rate"),
        (hoist(), "release_pressure", "actuation/release_travel"),
        (hoist(), "release_pressure", "actuation/release_piston_diameter"),
    ] {
        let body = without(&body, &format!("/fitted/0/brake/{member}"));
        // Wear travel means nothing without the rate.
        let body = if member.ends_with("spring_rate") {
            without(&body, "/fitted/0/brake/actuation/pad_wear_travel")
        } else {
            body
        };
        assert_lacks(&body, code, &[&at(member)]).await;
    }
    let ventilated = with(&one_stop(), "/fitted/0/brake/disc/construction", "ventilated");
    assert_lacks(&ventilated, "disc_bulk_temperature", &[&at("disc/mass")]).await;
    let mut repeated = without(&one_stop(), "/fitted/0/brake/disc/cooling");
    repeated["duties"] = json!([super::spec_check_requests::repeated()]);
    assert_lacks(&repeated, "disc_bulk_temperature", &[&at("disc/cooling")]).await;
    let mut bare = without(&one_stop(), "/fitted/0/brake/disc");
    bare = without(&bare, "/fitted/0/brake/lining/max_temperature_peak");
    let both = [at("lining/max_temperature_peak"), at("disc")];
    assert_lacks(&bare, "surface_temperature", &both.each_ref().map(String::as_str)).await;
}

/// The other limits are the caller's choice: without one there is no check, and nothing is missing.
#[tokio::test]
async fn a_limit_that_is_not_given_and_need_not_be_is_not_judged() {
    for limit in &LIMITS {
        let answer = answer(SPEC_CHECK, &without(&(limit.body)(), limit.at)).await;
        let first = checks(&answer, limit.code)
            .into_iter()
            .find(|check| check.get("fitted_index").is_none_or(|index| index == 0));
        let always = [
            "pad_peak_pressure",
            "rubbing_speed",
            "disc_bulk_temperature",
            "surface_temperature",
            "holding_torque",
        ];
        assert_eq!(first.is_some(), always.contains(&limit.code), "{}", limit.code);
    }
    let answer = answer(SPEC_CHECK, &without(&one_hold(), "/duties/0/require")).await;
    assert_eq!(check(&answer, "holding_torque")["limit"], q(1.0, "1"));
    for member in ["no_wheel_lock", "front_locks_first", "no_rear_wheel_lift"] {
        let at = format!("/duties/0/require/{member}");
        for body in [without(&one_stop(), &at), with(&one_stop(), &at, false)] {
            let answer = super::common::answer(SPEC_CHECK, &body).await;
            let code = match member {
                "no_wheel_lock" => "adhesion",
                "front_locks_first" => "axle_lock_order",
                _ => "rear_wheel_lift",
            };
            assert!(checks(&answer, code).is_empty(), "{code}");
        }
    }
}

#[tokio::test]
async fn the_disc_s_own_limit_counts_where_it_is_lower_and_never_hides_a_missing_one() {
    let at = "/fitted/0/brake/disc/material/max_temperature";
    let low = with(&one_stop(), at, q(25.0, "degC"));
    let answer = answer(SPEC_CHECK, &low).await;
    assert_eq!(check(&answer, "disc_bulk_temperature")["status"], "not_met");
    assert_eq!(warning(&answer, "disc_bulk_temperature")["pointer"], format!("#{at}"));
    let lacking = "/fitted/0/brake/lining/max_temperature_continuous";
    let kept = without(&with(&one_stop(), at, q(700.0, "degC")), lacking);
    assert_lacks(&kept, "disc_bulk_temperature", &[&format!("#{lacking}")]).await;
    let passed = without(&low, lacking);
    assert_eq!(check_of(&passed, "disc_bulk_temperature").await["status"], "not_met");
}

/// A limit that the air has reached already leaves nothing to use.
#[tokio::test]
async fn a_temperature_limit_that_is_not_above_the_air_is_not_met_and_governs() {
    let at = "/fitted/0/brake/lining/max_temperature_peak";
    let mut body = with(&one_stop(), at, q(20.0, "degC"));
    body["duties"][0]["require"]["max_distance"] = q(1.0, "m");
    let answer = answer(SPEC_CHECK, &body).await;
    let found = check(&answer, "surface_temperature");
    assert_eq!(found["status"], "not_met");
    assert!(found.get("utilization").is_none(), "{found}");
    let governing = json!({"code": "surface_temperature", "duty_index": 0, "fitted_index": 0});
    assert_eq!(answer["results"]["governing"], governing);
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    /// Flipping a limit across the actual value flips the status, wherever both lie.
    #[test]
    fn a_check_is_met_exactly_while_its_limit_is_not_used_up(
        place in 0..LIMITS.len(), share in 0.3_f64..3.0,
    ) {
        prop_assume!((share - 1.0).abs() > 1e-9);
        let limit = &LIMITS[place];
        let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build().unwrap();
        let (found, answer) = runtime.block_on(async {
            let actual = limit.actual().await;
            let answer = answer(SPEC_CHECK, &limit.used_by(&actual, share)).await;
            (check(&answer, limit.code).clone(), answer)
        });
        prop_assert_eq!(found["status"] == "not_met", share > 1.0, "{}: {}", share, found);
        prop_assert!((used(&found) - share).abs() < 1e-9, "{}: {}", share, found);
        prop_assert_eq!(answer["results"]["verdict"] == "fail", share > 1.0);
        if share > 1.0 {
            prop_assert_eq!(&answer["results"]["governing"]["code"], limit.code);
        }
    }
}
