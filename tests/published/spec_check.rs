//! Specification checks through the front door against an outside recomputation (`tests/reference/spec_check.py`):
//! every check of every request of the corpus, whose data are invented.
//!
//! The reference solves the stops numerically and marches the temperatures by means of its own. It answers in coherent
//! SI. Where it holds a friction case or `hot` to be a tie, it leaves them out and they are not compared.

use std::collections::BTreeMap;
use std::fmt::Write as _;

use serde_json::Value;

use crate::support::client::TestApp;
use crate::support::si::si;

/// Relative, for what depends on no temperature.
const RELATIVE: f64 = 1e-5;
/// Of the rise above ambient; also of what hot friction decides.
const RISE: f64 = 1e-3;
/// The recomputation follows a test cycle stop by stop with the closed form, which leaves out what a disc loses during the
/// stop; the service follows it in time.
const SURFACE_OF_A_CYCLE: f64 = 0.03;
/// How near to a bound of its status a utilization is left unjudged.
const UNJUDGED: f64 = 1e-6;

const GROUPS: [(&str, &str); 5] = [
    ("vehicles", include_str!("../reference/spec_check/vehicles.json")),
    ("machines", include_str!("../reference/spec_check/machines.json")),
    ("actuations", include_str!("../reference/spec_check/actuations.json")),
    ("heat", include_str!("../reference/spec_check/heat.json")),
    ("limits", include_str!("../reference/spec_check/limits.json")),
];

/// What every code of the contract is called.
const CODES: [&str; 26] = [
    "stops",
    "stopping_distance",
    "stopping_time",
    "mean_deceleration",
    "mean_fully_developed_deceleration",
    "peak_deceleration_minimum",
    "peak_deceleration",
    "braking_ratio",
    "pad_peak_pressure",
    "rubbing_speed",
    "pressure_velocity",
    "power_flux",
    "energy_flux",
    "line_pressure",
    "operator_force",
    "operator_stroke",
    "release_pressure",
    "air_pressure",
    "adhesion",
    "rear_wheel_lift",
    "axle_lock_order",
    "disc_bulk_temperature",
    "surface_temperature",
    "holding_torque",
    "holding_adhesion",
    "pad_life",
];

/// A request, and what the reference makes of it.
struct Case {
    name: String,
    request: Value,
    expected: Value,
}

/// Which check: code, duty and fitted entry.
type Key = (String, u64, Option<u64>);

fn expected() -> Value {
    serde_json::from_str(include_str!("../reference/spec_check_expected.json")).unwrap()
}

fn cases_of(group: &str, text: &str, expected: &Value) -> Vec<Case> {
    let corpus: Value = serde_json::from_str(text).unwrap();
    let requests = corpus["cases"].as_array().unwrap();
    let expected = expected[group].as_array().unwrap();
    assert_eq!(requests.len(), expected.len(), "{group}");
    let pairs = requests.iter().zip(expected).map(|(case, expected)| {
        assert_eq!(case["name"], expected["name"], "{group}");
        Case {
            name: format!("{group}: {}", case["name"].as_str().unwrap()),
            request: case["request"].clone(),
            expected: expected.clone(),
        }
    });
    pairs.collect()
}

fn keyed(checks: &Value) -> BTreeMap<Key, &Value> {
    let checks = checks.as_array().unwrap();
    let keyed: BTreeMap<Key, &Value> = checks.iter().map(|check| (key(check), check)).collect();
    assert_eq!(keyed.len(), checks.len(), "a check is answered twice");
    keyed
}

fn key(check: &Value) -> Key {
    let code = check["code"].as_str().unwrap().to_owned();
    (code, check["duty_index"].as_u64().unwrap(), check["fitted_index"].as_u64())
}

impl Case {
    fn ambient(&self) -> f64 {
        let given = &self.request["ambient_temperature"];
        if given.is_null() { 20.0 } else { si(given) }
    }

    /// Whether the reference leaves open what else is found of a duty.
    fn is_open(&self, duty: u64) -> bool {
        let open = self.expected["open_duties"].as_array();
        open.is_some_and(|open| open.iter().any(|index| index == duty))
    }

    /// What deviates, a line each.
    fn compare(&self, results: &Value) -> String {
        let mut off = String::new();
        let (found, wanted) = (keyed(&results["checks"]), keyed(&self.expected["checks"]));
        for (key, wanted) in &wanted {
            match found.get(key) {
                Some(found) => self.compare_check(&mut off, key, found, wanted),
                None => writeln!(off, "{}: {key:?} is missing", self.name).unwrap(),
            }
        }
        for (key, found) in &found {
            if !wanted.contains_key(key) && !self.is_open(key.1) {
                writeln!(off, "{}: {key:?} is not expected: {found}", self.name).unwrap();
            }
        }
        for member in ["code", "duty_index", "fitted_index"] {
            let (found, wanted) =
                (&results["governing"][member], &self.expected["governing"][member]);
            if self.expected["governing"].is_object() && found != wanted {
                writeln!(off, "{}: governing {member} {found}, not {wanted}", self.name).unwrap();
            }
        }
        let (found, wanted) = (&results["verdict"], &self.expected["verdict"]);
        if found != wanted {
            writeln!(off, "{}: verdict {found}, not {wanted}", self.name).unwrap();
        }
        off
    }

    fn compare_check(&self, off: &mut String, key: &Key, found: &Value, wanted: &Value) {
        let mut note =
            |what: &str| writeln!(off, "{}: {key:?} {what}: {found}, not {wanted}", self.name);
        if found["status"] != wanted["status"] && !self.is_unjudged(wanted) {
            note("status").unwrap();
        }
        if pointers(found) != pointers(wanted) {
            note("missing").unwrap();
        }
        let hot = found["hot"].as_bool().unwrap_or(false);
        if wanted["hot"].as_bool().is_some_and(|wanted| wanted != hot) {
            note("hot").unwrap();
        }
        let case = &wanted["friction_case"];
        if case.is_string() && !found["friction_case"].is_null() && *case != found["friction_case"]
        {
            note("friction_case").unwrap();
        }
        for member in ["actual", "limit", "utilization"] {
            let is_thermal = hot || key.0.ends_with("_temperature");
            let tolerance = match () {
                () if self.is_surface_of_a_cycle(wanted) => SURFACE_OF_A_CYCLE,
                () if is_thermal => RISE,
                () => RELATIVE,
            };
            if !self.agrees(tolerance, member, &found[member], &wanted[member]) {
                note(member).unwrap();
            }
        }
    }

    /// Whether the utilization is too near to a bound to say which side it is on.
    fn is_unjudged(&self, check: &Value) -> bool {
        let near = self.request["near_limit_from"].as_f64().unwrap_or(0.9);
        let utilization = check["utilization"].as_f64();
        utilization.is_some_and(|used| [near, 1.0].iter().any(|at| (used - at).abs() < UNJUDGED))
    }

    /// Whether it is the surface temperature of a test cycle.
    fn is_surface_of_a_cycle(&self, check: &Value) -> bool {
        let duty = check["duty_index"].as_u64().and_then(|index| usize::try_from(index).ok());
        let kind = duty.map(|index| &self.request["duties"][index]["kind"]);
        check["code"] == "surface_temperature" && kind.is_some_and(|kind| kind == "procedure")
    }

    fn agrees(&self, tolerance: f64, member: &str, found: &Value, wanted: &Value) -> bool {
        let Some(wanted) = wanted.as_f64() else { return true };
        let is_temperature = found["unit"] == "degC";
        let found = if member == "utilization" {
            found.as_f64()
        } else {
            found.is_object().then(|| si(found))
        };
        let zero = if is_temperature { self.ambient() } else { 0.0 };
        found.is_some_and(|found| {
            (found - wanted).abs() <= tolerance * (wanted - zero).abs() + f64::EPSILON
        })
    }
}

fn pointers(check: &Value) -> Vec<&str> {
    let listed = check["missing"].as_array();
    let mut pointers: Vec<&str> = listed.into_iter().flatten().filter_map(Value::as_str).collect();
    pointers.sort_unstable();
    pointers
}

#[test]
fn the_corpus_holds_each_check_inside_and_outside_its_limit() {
    let expected = expected();
    let cases: Vec<Case> =
        GROUPS.iter().flat_map(|(group, text)| cases_of(group, text, &expected)).collect();
    let others = cases.iter().filter(|case| !case.name.starts_with("limits")).count();
    assert!(others >= 25, "{others}");
    for code in CODES {
        for (side, status) in [("inside", "near_limit"), ("outside", "not_met")] {
            let name = format!("limits: {code}, {side}");
            let case = cases.iter().find(|case| case.name == name);
            let case = case.unwrap_or_else(|| panic!("{name} is missing"));
            let checks = case.expected["checks"].as_array().unwrap();
            let judged =
                checks.iter().any(|check| check["code"] == code && check["status"] == status);
            assert!(judged, "{name}");
        }
    }
}

#[tokio::test]
async fn specification_checks_agree_with_an_outside_recomputation() {
    let (app, expected, mut off) = (TestApp::new(), expected(), String::new());
    for (group, text) in GROUPS {
        for case in cases_of(group, text, &expected) {
            let answer = app.post("/v1/spec-check", &case.request.to_string(), 200).await;
            off += &case.compare(&answer["results"]);
        }
    }
    assert!(off.is_empty(), "{} lines\n{off}", off.lines().count());
}
