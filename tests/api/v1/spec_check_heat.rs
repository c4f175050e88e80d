//! Hot linings where heat is not known, not over, or there from the start: judged on the safe side.

use serde_json::{Value, json};

use super::common::{answer, of, q, with, without};
use super::spec_check_requests::{
    SPEC_CHECK, check, check_of, fade, four_brakes, hoist, hold, repeated, spec, stop, used,
    vehicle,
};

/// The vehicle's brakes with linings that fade.
fn fading(duties: Vec<Value>) -> Value {
    let mut body = spec(vehicle(), four_brakes(), duties);
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["lining"]["fade"] = fade();
    }
    body
}

#[tokio::test]
async fn a_disc_whose_heat_is_not_known_leaves_no_lining_cold() {
    let mut body = fading(vec![stop(), repeated()]);
    let known = check_of(&body, "stopping_distance").await;
    for entry in 0..2 {
        body = without(&body, &format!("/fitted/{entry}/brake/disc/cooling"));
    }
    let unknown = check_of(&body, "stopping_distance").await;
    assert_eq!(unknown["hot"], true, "{unknown}");
    // The worst of the fade points, 0.6, is below what the known peak leaves.
    assert!(used(&unknown) > used(&known), "{unknown} {known}");
}

#[tokio::test]
async fn a_hot_start_fades_the_lining_too() {
    let body = fading(vec![stop()]);
    let cold = check_of(&body, "stopping_distance").await;
    assert!(cold.get("hot").is_none());
    let body = with(&body, "/duties/0/start_temperature", q(300.0, "degC"));
    let hot = check_of(&body, "stopping_distance").await;
    assert_eq!(hot["hot"], true);
    assert!(used(&hot) > used(&cold));
    let body = fading(vec![with(&hold(), "/start_temperature", q(400.0, "degC"))]);
    let factor = check_of(&body, "holding_torque").await;
    let cold = check_of(&fading(vec![hold()]), "holding_torque").await;
    // 0.6 is what is left at 400 degC.
    let share = of(&factor["actual"], "1") / of(&cold["actual"], "1");
    assert!((share - 0.6).abs() < 1e-9, "{share}");
}

#[tokio::test]
async fn a_dip_on_the_way_to_the_peak_counts() {
    let mut body = fading(vec![stop(), repeated()]);
    let points = |dip: f64| {
        json!([
            {"temperature": q(20.0, "degC"), "factor": 1.0},
            {"temperature": q(40.0, "degC"), "factor": dip},
            {"temperature": q(60.0, "degC"), "factor": 1.0},
        ])
    };
    body["fitted"][0]["brake"]["lining"]["fade"] = points(0.5);
    body["fitted"][1]["brake"]["lining"]["fade"] = points(0.5);
    let dip = check_of(&body, "stopping_distance").await;
    assert_eq!(dip["hot"], true, "{dip}");
}

#[tokio::test]
async fn downhill_the_lowest_friction_takes_up_the_most_energy() {
    let mut body = spec(vehicle(), four_brakes(), vec![with(&stop(), "/grade", q(-12.0, "%"))]);
    body["fitted"][0]["brake"]["lining"]["max_energy_flux"] = q(1e3, "J/mm2");
    let answer = answer(SPEC_CHECK, &body).await;
    assert_eq!(check(&answer, "energy_flux")["friction_case"], "low");
}

#[tokio::test]
async fn a_counterweight_does_not_balance_a_rule_away() {
    let mut body = hoist();
    let load = of(&body["machine"]["load_mass"], "kg");
    body["machine"]["counterweight_mass"] = q(1.25 * load, "kg");
    body["duties"] = json!([{"kind": "rule", "id": "wac_296_96_05150", "max_speed": q(0.5, "m/s"),
        "response": {}}]);
    let torque = check_of(&body, "holding_torque").await;
    assert!(used(&torque) > 0.0, "{torque}");
}

#[tokio::test]
async fn losses_of_the_drive_count_in_the_torque_that_hoists() {
    let mut body = hoist();
    body["duties"] = json!([{"kind": "rule", "id": "cfr29_1910_179_hoist_other"}]);
    body["machine"]["efficiency"] = json!(1.0);
    let without_losses = check_of(&body, "holding_torque").await;
    body["machine"]["efficiency"] = json!(0.8);
    let with_losses = check_of(&body, "holding_torque").await;
    assert!((used(&with_losses) / used(&without_losses) - 1.25).abs() < 1e-9, "{with_losses}");
}

#[tokio::test]
async fn a_light_machine_at_a_great_speed_is_soon_judged() {
    let mut body = spec(vehicle(), four_brakes(), vec![stop()]);
    body["machine"]["mass"] = q(0.31, "kg");
    body["machine"]["drag_area"] = q(0.6, "m2");
    body["duties"][0]["initial_speed"] = q(6000.0, "m/s");
    let begin = std::time::Instant::now();
    let _ = answer(SPEC_CHECK, &body).await;
    assert!(begin.elapsed().as_secs_f64() < 8.0, "{:?}", begin.elapsed());
}
