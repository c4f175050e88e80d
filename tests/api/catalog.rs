//! The catalog through the front door.

use std::collections::BTreeSet;

use axum::body::Body;
use axum::http::Request;
use brakewright::api::openapi::openapi_json;
use brakewright::calc::method_index;
use brakewright::calc::quantity::{Si, ThermodynamicTemperature, ZERO_CELSIUS};
use brakewright::data::{disc_materials, friction_codes, linings, procedures, rules, units};
use serde_json::{Map, Value, json};

use crate::support::client::TestApp;
use crate::support::close::assert_close;

/// Path, schema of a row, number of rows.
fn lists() -> [(&'static str, &'static str, usize); 7] {
    [
        ("linings", "LiningItem", linings::all().len()),
        ("friction-codes", "FrictionCodeItem", friction_codes::table().letters.len()),
        ("disc-materials", "DiscMaterialItem", disc_materials::all().len()),
        ("procedures", "ProcedureItem", procedures::all().len()),
        ("rules", "RuleItem", rules::all().len()),
        ("units", "UnitItem", units::all().len()),
        ("methods", "MethodItem", method_index::all().count()),
    ]
}

async fn items(path: &str) -> Vec<Value> {
    let list = TestApp::new().get(&format!("/v1/{path}"), 200).await.json();
    assert_eq!(list.as_object().unwrap().len(), 1);
    list["items"].as_array().unwrap().clone()
}

async fn item(path: &str, id: &str) -> Value {
    TestApp::new().get(&format!("/v1/{path}/{id}"), 200).await.json()
}

#[tokio::test]
async fn every_list_is_whole_and_each_row_says_where_it_comes_from() {
    for (path, _, count) in lists() {
        let items = items(path).await;
        assert_eq!(items.len(), count, "{path}");
        let ids: BTreeSet<&str> = items.iter().map(|item| item["id"].as_str().unwrap()).collect();
        assert_eq!(ids.len(), count, "{path}");
        for item in &items {
            for member in ["id", "name", "source"] {
                assert!(!item[member].as_str().unwrap().is_empty(), "{path}: {item}");
            }
            let provenance = item["provenance"].as_str().unwrap();
            assert!(["seen", "memory"].contains(&provenance), "{path}: {item}");
        }
    }
}

#[tokio::test]
async fn a_row_is_found_by_its_id_and_is_the_one_of_the_list() {
    for (path, ..) in lists() {
        for row in items(path).await {
            let id = row["id"].as_str().unwrap();
            let url_safe = |byte: u8| byte.is_ascii_alphanumeric() || b"._-".contains(&byte);
            assert!(id.bytes().all(url_safe), "{id} would have to be escaped");
            assert_eq!(item(path, id).await, row);
        }
    }
}

#[tokio::test]
async fn lists_and_rows_carry_a_tag_that_saves_sending_them_again() {
    let app = TestApp::new();
    for (path, ..) in lists() {
        let first = items(path).await[0]["id"].as_str().unwrap().to_owned();
        let urls = [format!("/v1/{path}"), format!("/v1/{path}/{first}")];
        let mut tags = BTreeSet::new();
        for url in &urls {
            let answer = app.get(url, 200).await;
            assert_eq!(answer.header("content-type"), "application/json");
            assert!(answer.header("cache-control").contains("max-age="), "{url}");
            let tag = answer.header("etag").to_owned();
            assert!(tag.starts_with('"') && tag.len() == 34, "{url}: {tag} is not strong");
            let asked = |tag: &str| {
                Request::get(url).header("if-none-match", tag).body(Body::empty()).unwrap()
            };
            let again = app.send(asked(&tag), 304).await;
            assert!(again.body.is_empty() && again.header("etag") == tag, "{url}");
            assert!(again.header("cache-control").contains("max-age="), "{url}");
            app.send(asked("\"other\""), 200).await;
            tags.insert(tag);
        }
        assert_eq!(tags.len(), 2, "{path}: a list and a row must not share a tag");
    }
}

#[tokio::test]
async fn head_answers_like_get_without_a_body() {
    let app = TestApp::new();
    for url in ["/v1/linings", "/v1/methods/friction.torque"] {
        let get = app.get(url, 200).await;
        let head = app.send(Request::head(url).body(Body::empty()).unwrap(), 200).await;
        assert!(head.body.is_empty() && !get.body.is_empty());
        for name in ["etag", "cache-control", "content-type"] {
            assert_eq!(head.header(name), get.header(name), "{url} {name}");
        }
    }
}

#[tokio::test]
async fn an_unknown_id_is_answered_with_the_nearest_known_one() {
    let app = TestApp::new();
    let slips = [
        ("linings/sintered_metal_dri", "sintered_metal_dry"),
        ("disc-materials/grey_cast_iron", "gray_cast_iron"),
        ("procedures/us_571_135_heating_snub", "us_571_135_heating_snubs"),
        ("rules/cfr49_571_135_s75", "cfr49_571_135_s7_5"),
        ("units/length.inches", "length.inch"),
        ("methods/friction.torqe", "friction.torque"),
        ("friction-codes/f", "F"),
    ];
    for (path, meant) in slips {
        let problem = app.get(&format!("/v1/{path}"), 404).await.json();
        assert_eq!(problem["type"], "/problems/not_found");
        let detail = problem["detail"].as_str().unwrap();
        assert!(detail.contains(&format!("did you mean `{meant}`?")), "{detail}");
    }
    for path in
        ["linings/0", "units/%25", "methods/%C3%A9", &format!("linings/{}", "a".repeat(5000))]
    {
        let problem = app.get(&format!("/v1/{path}"), 404).await.json();
        assert!(!problem["detail"].as_str().unwrap().contains("did you mean"), "{problem}");
    }
    for (path, ..) in lists() {
        let post = Request::post(format!("/v1/{path}")).body(Body::empty()).unwrap();
        assert!(app.send(post, 405).await.header("allow").contains("GET"));
    }
}

#[test]
fn the_description_tells_of_tags_and_of_unchanged_answers() {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    for (path, schema, _) in lists() {
        for url in [format!("/v1/{path}"), format!("/v1/{path}/{{id}}")] {
            let operation = &document["paths"][&url]["get"];
            assert_eq!(operation["tags"], json!(["Catalog"]), "{url}");
            let found = &operation["responses"]["200"];
            assert!(found["headers"]["ETag"].is_object(), "{url}");
            assert!(found["headers"]["Cache-Control"].is_object(), "{url}");
            assert!(operation["responses"]["304"]["content"].is_null(), "{url}");
            assert!(operation["responses"]["304"]["description"].is_string(), "{url}");
            let body = &found["content"]["application/json"]["schema"]["$ref"];
            let name = body.as_str().unwrap().rsplit_once('/').unwrap().1;
            let expected =
                if url.ends_with('}') { schema.to_owned() } else { schema.replace("Item", "List") };
            assert_eq!(name, expected, "{url}");
        }
    }
}

/// What a row answers stands in its published schema, and what that demands is there.
#[tokio::test]
async fn every_row_has_the_published_shape() {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    for (path, schema, _) in lists() {
        let reference = json!({
            "$ref": format!("#/components/schemas/{schema}"), "components": document["components"],
        });
        let validator = jsonschema::draft202012::new(&reference).unwrap();
        let known = document["components"]["schemas"][schema]["properties"].as_object().unwrap();
        let mut met = BTreeSet::new();
        for row in items(path).await {
            let faults: Vec<String> =
                validator.iter_errors(&row).map(|fault| fault.to_string()).collect();
            assert!(faults.is_empty(), "{path}: {faults:?} in {row}");
            for member in row.as_object().unwrap().keys() {
                assert!(known.contains_key(member), "{path}: {member}");
                met.insert(member.clone());
            }
        }
        let never: Vec<_> = known.keys().filter(|member| !met.contains(*member)).collect();
        // No source gives these two; a supplier may.
        let expected =
            if path == "linings" { vec!["max_energy_flux", "specific_wear"] } else { vec![] };
        assert_eq!(never, expected, "{path}");
    }
}

#[tokio::test]
async fn a_lining_has_everything_that_its_source_prints() {
    for (item, row) in items("linings").await.iter().zip(linings::all()) {
        assert_eq!(item["printed"].as_array().unwrap().len(), row.printed.len());
        for (member, text) in &row.printed {
            assert!(item[*member].is_object(), "{}: {member}", row.id);
            let printed = json!({"member": member, "text": text});
            assert!(item["printed"].as_array().unwrap().contains(&printed), "{}", row.id);
        }
        // A row with fade points would need a member for them.
        assert!(row.lining.parts().fade.is_empty());
        let cautions = item["cautions"].to_string();
        assert_eq!(cautions.contains("\"asbestos\""), row.contains_asbestos, "{}", row.id);
        assert_eq!(item["contains_asbestos"], row.contains_asbestos, "{}", row.id);
        assert_eq!(cautions.contains("values_from_memory"), item["provenance"] == "memory");
    }
}

/// Shigley, Table 16-3 (memory): sintered metal, dry: 0.29 to 0.33; 300 to 400 psi; 570 to 660 and 930 to 1020 degF;
/// 3600 ft/min. 300 psi = 2.068427187950 MPa, 570 degF = 298.8889 degC, 3600 ft/min = 18.288 m/s by definition.
#[tokio::test]
async fn a_lining_is_given_in_si_and_in_the_words_of_its_source() {
    let row = item("linings", "sintered_metal_dry").await;
    assert_eq!(row["friction"]["low"], 0.29);
    assert_eq!(row["friction"]["high"], 0.33);
    assert_close(row["friction"]["nominal"].as_f64().unwrap(), 0.31, 1e-15);
    let number = |member: &str, unit: &str| {
        assert_eq!(row[member]["unit"], unit);
        row[member]["value"].as_f64().unwrap()
    };
    assert_close(number("max_pressure", "MPa"), 2.068_427_187_950, 1e-12);
    assert_close(number("max_rubbing_speed", "m/s"), 18.288, 1e-15);
    assert_close(number("max_temperature_continuous", "degC"), 298.888_9, 1e-6);
    assert!(row["printed"].to_string().contains("300-400 psi"));
    // One printed value is one value: nothing is made up around it.
    assert_eq!(item("linings", "cermet").await["friction"], json!({"nominal": 0.32}));
}

/// The members of a request's lining that a row has, copied by hand.
fn copied(row: &Value) -> Value {
    const COPIED: [&str; 12] = [
        "friction",
        "max_pressure",
        "max_rubbing_speed",
        "max_pressure_velocity",
        "max_power_flux",
        "max_energy_flux",
        "max_temperature_continuous",
        "max_temperature_peak",
        "specific_wear",
        "conductivity",
        "density",
        "specific_heat",
    ];
    let members = row.as_object().unwrap().clone().into_iter();
    Value::Object(
        members.filter(|(name, _)| COPIED.contains(&name.as_str())).collect::<Map<_, _>>(),
    )
}

/// Asserts that two answers have the same words and the same numbers, but for the last digit of a conversion.
fn assert_alike(one: &Value, other: &Value) {
    match (one, other) {
        (Value::Number(one), Value::Number(other)) => {
            assert_close(one.as_f64().unwrap(), other.as_f64().unwrap(), 1e-14);
        }
        (Value::Object(one), Value::Object(other)) => {
            assert_eq!(one.keys().collect::<Vec<_>>(), other.keys().collect::<Vec<_>>());
            one.iter().for_each(|(name, part)| assert_alike(part, &other[name]));
        }
        (Value::Array(one), Value::Array(other)) => {
            assert_eq!(one.len(), other.len());
            one.iter().zip(other).for_each(|(one, other)| assert_alike(one, other));
        }
        (one, other) => assert_eq!(one, other),
    }
}

#[tokio::test]
async fn a_row_named_and_a_row_copied_give_the_same_numbers() {
    let app = TestApp::new();
    let mut compared = 0;
    for row in items("linings").await {
        let mut request = json!({
            "pad": {"shape": "annular_sector", "inner_radius": {"value": 80, "unit": "mm"},
                "outer_radius": {"value": 120, "unit": "mm"}, "angle": {"value": 50, "unit": "deg"}},
            "lining": {"id": row["id"]},
        });
        if row["max_pressure"].is_null() {
            request["clamp_force"] = json!({"value": 5, "unit": "kN"});
        }
        let named = app.post("/v1/pad-capacity", &request.to_string(), 200).await;
        request["lining"] = copied(&row);
        let by_hand = app.post("/v1/pad-capacity", &request.to_string(), 200).await;
        assert_alike(&named["results"], &by_hand["results"]);
        let cases = named["results"]["friction_cases"].as_array().unwrap().len();
        assert_eq!(cases, if row["friction"]["low"].is_null() { 1 } else { 3 });
        compared += 1;
    }
    assert_eq!(compared, linings::all().len());
}

/// EN 1993-1-2:2005, 3.4.1 (seen): c = 425 + 0.773 t − 1.69e-3 t² + 2.22e-6 t³ = 529.76 J/(kg.K) at 200 degC;
/// k = 54 − 0.0333 t = 47.34 W/(m.K) there.
#[tokio::test]
async fn a_disc_material_shows_its_curves_where_they_are_evaluated() {
    let steel = item("disc-materials", "carbon_steel").await;
    assert_eq!(steel["specific_heat_curve"]["form"], "formulas");
    let heat = &steel["specific_heat_curve"]["evaluated"][1];
    assert_eq!(heat["temperature"], json!({"value": 200.0, "unit": "degC"}));
    assert_close(heat["specific_heat"]["value"].as_f64().unwrap(), 529.76, 1e-12);
    let conductivity = &steel["conductivity_curve"]["evaluated"][1]["conductivity"];
    assert_eq!(conductivity["unit"], "W/(m.K)");
    assert_close(conductivity["value"].as_f64().unwrap(), 47.34, 1e-12);
    assert!(steel["specific_heat"].is_null(), "a curve has no single value to copy");
    assert_eq!(steel["from_memory"], json!(["emissivity"]));
    let iron = item("disc-materials", "gray_cast_iron").await;
    assert_eq!(iron["specific_heat"], json!({"value": 490.0, "unit": "J/(kg.K)"}));
    assert_eq!(iron["specific_heat_curve"]["form"], "constant");
    assert_eq!((&iron["emissivity"], &iron["emissivity_is_default"]), (&json!(0.55), &json!(true)));
    assert_eq!(
        item("disc-materials", "gray_cast_iron_200").await["specific_heat_curve"]["form"],
        "mean_values"
    );
}

#[tokio::test]
async fn every_disc_material_is_evaluated_at_the_temperatures_stated() {
    for (item, row) in items("disc-materials").await.iter().zip(disc_materials::all()) {
        for (index, celsius) in [20.0, 200.0, 400.0, 600.0].into_iter().enumerate() {
            let at = ThermodynamicTemperature::from_si(celsius + ZERO_CELSIUS);
            let point = &item["specific_heat_curve"]["evaluated"][index];
            assert_eq!(point["temperature"]["value"], celsius);
            let expected = row.material.specific_heat().at(at).si();
            assert_close(point["specific_heat"]["value"].as_f64().unwrap(), expected, 1e-14);
            let point = &item["conductivity_curve"]["evaluated"][index];
            let expected = row.material.conductivity().at(at).si();
            assert_close(point["conductivity"]["value"].as_f64().unwrap(), expected, 1e-14);
        }
    }
}

/// SAE J866, Table 1 (seen on a public page): F is over 0.35 but not over 0.45; C, H and Z lack a bound.
#[tokio::test]
async fn only_letters_with_two_bounds_may_come_first_and_requests_agree() {
    let app = TestApp::new();
    let letter = item("friction-codes", "F").await;
    assert_eq!((&letter["low"], &letter["high"]), (&json!(0.35), &json!(0.45)));
    for row in items("friction-codes").await {
        let first = row["id"].as_str().unwrap();
        let may_come_first = row["may_come_first"] == true;
        assert_eq!(may_come_first, !["C", "H", "Z"].contains(&first));
        let request = json!({
            "pad": {"shape": "round", "radius": {"value": 20, "unit": "mm"}, "center_radius": {"value": 100, "unit": "mm"}},
            "lining": {"friction_code": format!("{first}Z")}, "clamp_force": {"value": 1, "unit": "kN"},
        });
        let expected = if may_come_first { 200 } else { 422 };
        app.post("/v1/pad-capacity", &request.to_string(), expected).await;
    }
}

#[tokio::test]
async fn a_unit_is_listed_with_its_codes_and_its_exact_factor() {
    let inch = item("units", "length.inch").await;
    let expected = json!({"dimension": "length", "symbol": "in", "ucum": "[in_i]", "recommendation_20": "INH",
        "systems": ["us"], "si_unit": "m", "factor": 0.0254, "exact_factor": "0.0254", "to_si": "value * factor"});
    for (member, value) in expected.as_object().unwrap() {
        assert_eq!(&inch[member], value, "{member}");
    }
    assert_eq!(item("units", "temperature.degree_fahrenheit").await["offset"], 459.67);
    assert_eq!(item("units", "grade.percent").await["to_si"], "atan(value * factor)");
}

/// Every symbol, code and factor of the list is one that requests are read by.
#[tokio::test]
async fn requests_take_every_length_by_each_of_its_names() {
    let app = TestApp::new();
    let lengths = items("units").await.into_iter().filter(|unit| unit["dimension"] == "length");
    let mut asked = 0;
    for unit in lengths {
        for member in ["symbol", "ucum", "recommendation_20"] {
            let metres = |metres: f64| json!({"value": metres / unit["factor"].as_f64().unwrap(), "unit": unit[member]});
            let request = json!({
                "pad": {"shape": "round", "radius": metres(0.02), "center_radius": metres(0.1)},
                "lining": {"friction": {"nominal": 0.4}}, "clamp_force": {"value": 1, "unit": "kN"},
            });
            let answer = app.post("/v1/pad-capacity", &request.to_string(), 200).await;
            let area = answer["results"]["pad_area"]["value"].as_f64().unwrap();
            // π·20² mm².
            assert_close(area, 1_256.637_061_435_917, 1e-12);
            asked += 1;
        }
    }
    assert_eq!(asked, 21);
}

#[tokio::test]
async fn every_method_that_an_answer_names_is_explained() {
    let app = TestApp::new();
    let length = |value: f64| json!({"value": value, "unit": "mm"});
    let pads = [
        json!({"shape": "annular_sector", "inner_radius": length(80.0), "outer_radius": length(120.0), "angle": {"value": 50, "unit": "deg"}}),
        json!({"shape": "round", "radius": length(20.0), "center_radius": length(100.0)}),
        json!({"shape": "outline", "unit": "mm", "points": [[80, -30], [120, -42], [120, 42], [80, 30]]}),
    ];
    let mut named = BTreeSet::new();
    for pad in pads {
        for distribution in ["uniform_wear", "uniform_pressure"] {
            let request = json!({"pad": pad, "lining": {"id": "cermet"}, "pressure_distribution": distribution});
            let answer = app.post("/v1/pad-capacity", &request.to_string(), 200).await;
            for id in answer["record"]["methods"].as_array().unwrap() {
                named.insert(id.as_str().unwrap().to_owned());
            }
        }
    }
    assert_eq!(named.len(), 7, "{named:?}");
    for id in named {
        let method = item("methods", &id).await;
        assert!(method["symbols"][0]["meaning"].is_string(), "{method}");
        assert!(method["equation"].as_str().unwrap().contains('='), "{method}");
    }
}

/// 49 CFR 571.135 S7.13 (seen): 15 snubs from 120 km/h or 80 % of the maximum speed to half of it, 3.0 m/s², 45 s.
#[tokio::test]
async fn a_procedure_is_listed_with_its_steps() {
    let snubs = item("procedures", "us_571_135_heating_snubs").await;
    let step = &snubs["steps"][0];
    assert_eq!((&step["kind"], &step["count"]), (&json!("stops"), &json!(15)));
    assert_close(step["initial_speed"]["value"].as_f64().unwrap(), 120.0 / 3.6, 1e-14);
    assert_eq!(step["share_of_max_speed"], 0.8);
    assert_eq!(step["final_share"], 0.5);
    assert_eq!(step["interval"], json!({"value": 45.0, "unit": "s"}));
    assert!(step["spacing"].is_null());
    for row in items("procedures").await {
        for step in row["steps"].as_array().unwrap() {
            let is_there = |member: &&&str| !step[**member].is_null();
            let stops = ["count", "initial_speed", "final_share", "deceleration"];
            let descent = ["speed", "grade", "distance"];
            let found =
                [stops.iter().filter(is_there).count(), descent.iter().filter(is_there).count()];
            let spaced = ["interval", "spacing"].iter().filter(is_there).count();
            assert_eq!(
                (found, spaced),
                if step["kind"] == "stops" { ([4, 0], 1) } else { ([0, 3], 0) },
                "{row}"
            );
        }
    }
}

/// 49 CFR 571.135 S7.5 (seen): 0.10 V + 0.0060 V², V in km/h, pedal force 65 to 500 N; 393.52(d) row A(1) (seen):
/// 20 ft, 21 ft/s² and 65.2 % from 20 mph; 29 CFR 1910.179 (seen): 125 %.
#[tokio::test]
async fn a_rule_is_listed_with_its_tests() {
    let cold = item("rules", "cfr49_571_135_s7_5").await;
    assert_eq!(cold["machines"], json!(["vehicle"]));
    let newtons = |value: f64| json!({"value": value, "unit": "N"});
    assert_eq!(cold["foot_force"], json!({"min": newtons(65.0), "max": newtons(500.0)}));
    assert!(cold["hand_force"].is_null());
    let test = &cold["tests"][0];
    assert_eq!((&test["kind"], &test["clock"]), (&json!("stop"), &json!("control")));
    assert_close(test["initial_speed"]["value"].as_f64().unwrap(), 100.0 / 3.6, 1e-14);
    let formula = &test["max_distance_formula"];
    assert_eq!(formula["text"], "0.10 V + 0.0060 V2 [m, km/h]");
    assert_close(formula["time"]["value"].as_f64().unwrap(), 0.36, 1e-14);
    // The column of implied decelerations of the reference file: 6.43 m/s², here with its digits.
    let implied = 1.0 / (25.92 * 0.0060);
    assert_close(formula["deceleration"]["value"].as_f64().unwrap(), implied, 1e-14);
    let used = item("rules", "cfr49_393_52_a1_service").await;
    let test = &used["tests"][0];
    assert_close(test["max_distance"]["value"].as_f64().unwrap(), 20.0 * 0.3048, 1e-14);
    assert_close(test["min_peak_deceleration"]["value"].as_f64().unwrap(), 21.0 * 0.3048, 1e-14);
    assert_eq!(test["min_braking_ratio"], 0.652);
    let hoist = item("rules", "cfr29_1910_179_hoist_other").await;
    assert_eq!(hoist["tests"], json!([{"kind": "hold_load", "min_holding_factor": 1.25}]));
    assert_eq!(item("rules", "un_r13_parking").await["provenance"], "memory");
}

/// The members that each kind promises are there, and no others; every member is met somewhere.
#[tokio::test]
async fn the_members_of_a_rules_tests_are_those_of_its_kind() {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    let known = document["components"]["schemas"]["RuleTest"]["properties"].as_object().unwrap();
    let mut met = BTreeSet::new();
    for row in items("rules").await {
        for test in row["tests"].as_array().unwrap() {
            met.extend(test.as_object().unwrap().keys().cloned());
            let is_there = |member: &str| !test[member].is_null();
            let stop = ["initial_speed", "share_of_max_speed", "clock", "max_time", "max_distance"];
            let stop = stop.into_iter().any(is_there);
            let found = (
                stop,
                ["grade", "both_ways"].into_iter().all(is_there),
                is_there("min_holding_factor"),
                is_there("min_force_over_weight"),
            );
            let expected = match test["kind"].as_str().unwrap() {
                "stop" => (true, false, false, false),
                "hold_on_slope" => (false, true, false, false),
                "hold_load" => (false, false, true, false),
                _ => (false, false, false, true),
            };
            assert_eq!(found, expected, "{row}");
            let speed = is_there("initial_speed") || is_there("share_of_max_speed");
            assert_eq!((speed, is_there("clock")), (expected.0, expected.0), "{row}");
        }
    }
    let never: Vec<_> = known.keys().filter(|member| !met.contains(*member)).collect();
    assert!(never.is_empty(), "{never:?}");
}
