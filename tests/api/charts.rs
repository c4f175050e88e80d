//! Charts through the front door: which form is sent, and what is in the document.

use axum::body::Body;
use axum::http::Request;
use roxmltree::{Document, Node};
use serde_json::{Value, json};

use crate::support::client::{Answer, TestApp};

const SVG: &str = "image/svg+xml";

async fn asked(path: &str, accept: &str, body: &Value, expected: u16) -> Answer {
    let request = Request::post(path)
        .header("content-type", "application/json")
        .header("accept", accept)
        .body(Body::from(body.to_string()))
        .unwrap();
    TestApp::new().send(request, expected).await
}

async fn chart(path: &str, body: &Value) -> String {
    let answer = asked(path, SVG, body, 200).await;
    assert_eq!(answer.header("content-type"), SVG);
    String::from_utf8(answer.body.to_vec()).unwrap()
}

/// Invented data.
fn brake(friction: &Value) -> Value {
    json!({
        "pad": {"shape": "annular_sector", "inner_radius": {"value": 90, "unit": "mm"},
            "outer_radius": {"value": 130, "unit": "mm"}, "angle": {"value": 50, "unit": "deg"}},
        "lining": {"friction": friction,
            "max_temperature_continuous": {"value": 120, "unit": "degC"},
            "max_temperature_peak": {"value": 150, "unit": "degC"}},
        "disc": {"material": {"id": "gray_cast_iron"}, "construction": "solid",
            "outer_radius": {"value": 140, "unit": "mm"}, "inner_radius": {"value": 80, "unit": "mm"},
            "thickness": {"value": 12, "unit": "mm"}},
        "actuation": {"kind": "clamp_force", "force": {"value": 9, "unit": "kN"}},
    })
}

/// A vehicle with two entries and a range of friction.
fn vehicle() -> Value {
    let friction = json!({"low": 0.3, "nominal": 0.38, "high": 0.44});
    json!({
        "machine": {"kind": "vehicle", "mass": {"value": 1400, "unit": "kg"},
            "rolling_radius": {"value": 0.3, "unit": "m"}},
        "fitted": [{"brake": brake(&friction), "count": 2, "axle": "front"},
            {"brake": brake(&friction), "count": 2, "axle": "rear"}],
        "initial_speed": {"value": 20, "unit": "m/s"},
        "response": {"reaction_time": {"value": 0.7, "unit": "s"}, "dead_time": {"value": 0.1, "unit": "s"},
            "build_up_time": {"value": 0.3, "unit": "s"}},
    })
}

/// A shaft of which nothing but a torque is known.
fn shaft() -> Value {
    json!({
        "machine": {"kind": "shaft", "inertia": {"value": 40, "unit": "kg.m2"}},
        "fitted": [{"torque": {"value": 900, "unit": "N.m"}}],
        "initial_rotational_speed": {"value": 1480, "unit": "rpm"},
    })
}

/// The elements of a name.
fn elements<'a>(document: &'a Document<'_>, name: &'a str) -> impl Iterator<Item = Node<'a, 'a>> {
    document.descendants().filter(move |node| node.tag_name().name() == name)
}

fn words(document: &Document<'_>) -> Vec<String> {
    elements(document, "text")
        .map(|node| node.text().unwrap_or_default().trim().to_owned())
        .collect()
}

/// Curves are the lines of more than two points.
fn curves(document: &Document<'_>) -> Vec<Vec<(i32, i32)>> {
    let point = |text: &str| {
        let (x, y) = text.split_once(',').unwrap();
        (x.parse().unwrap(), y.parse().unwrap())
    };
    elements(document, "polyline")
        .map(|line| line.attribute("points").unwrap().split_whitespace().map(point).collect())
        .filter(|points: &Vec<_>| points.len() > 2)
        .collect()
}

#[tokio::test]
async fn a_chart_is_sent_to_those_who_prefer_one() {
    for (accept, expected) in [
        ("image/svg+xml", SVG),
        ("image/*", SVG),
        ("application/json;q=0.4, image/svg+xml;q=0.5", SVG),
        ("application/json, image/svg+xml", "application/json"),
        ("image/svg+xml;q=0.2, */*;q=0.5", "application/json"),
        ("*/*", "application/json"),
    ] {
        for path in ["/v1/stopping", "/v1/stop-energy"] {
            let answer = asked(path, accept, &shaft(), 200).await;
            assert_eq!(answer.header("content-type"), expected, "{accept}");
            assert_eq!(answer.header("vary"), "accept");
        }
    }
}

#[tokio::test]
async fn what_cannot_be_sent_is_refused() {
    for accept in ["image/png", "image/svg+xml;q=0", "text/html"] {
        let answer = asked("/v1/stopping", accept, &shaft(), 406).await;
        assert_eq!(answer.header("vary"), "accept");
        let detail = answer.json()["detail"].as_str().unwrap().to_owned();
        assert!(detail.contains("application/json") && detail.contains(SVG), "{detail}");
    }
    // An endpoint without charts says so.
    let answer = asked("/v1/pad-capacity", SVG, &json!({}), 406).await;
    assert_eq!(answer.header("vary"), "");
}

#[tokio::test]
async fn bad_input_is_the_same_problem_in_either_form() {
    let mut body = vehicle();
    body["machine"]["mass"]["value"] = json!(-5);
    body["initial_sped"] = json!(3);
    for path in ["/v1/stopping", "/v1/stop-energy"] {
        let forms = ["application/json", SVG];
        let mut problems = Vec::new();
        for form in forms {
            let answer = asked(path, form, &body, 422).await;
            assert_eq!(answer.header("content-type"), "application/problem+json");
            problems.push(answer.json()["errors"].clone());
        }
        assert_eq!(problems[0], problems[1]);
    }
}

#[tokio::test]
async fn a_chart_is_a_document_that_names_itself_and_needs_nothing_else() {
    for path in ["/v1/stopping", "/v1/stop-energy"] {
        let text = chart(path, &vehicle()).await;
        let document = Document::parse(&text).unwrap();
        let root = document.root_element();
        assert_eq!(root.tag_name().namespace(), Some("http://www.w3.org/2000/svg"));
        assert_eq!(root.attribute("role"), Some("img"));
        assert!(root.attribute("viewBox").is_some() && root.attribute("width").is_none());
        let named: Vec<&str> = root.attribute("aria-labelledby").unwrap().split(' ').collect();
        for (id, tag) in named.iter().zip(["title", "desc"]) {
            let node = elements(&document, tag).next().unwrap();
            assert_eq!(node.attribute("id"), Some(*id));
            assert!(node.text().unwrap().len() > 10, "{tag} says nothing");
        }
        for forbidden in ["<script", "<image", "href", "url(", "@import", " on"] {
            let found = elements(&document, "style").map(|node| node.text().unwrap_or_default());
            assert!(found.into_iter().all(|sheet| !sheet.contains(forbidden)), "{forbidden}");
        }
        for node in document.descendants().filter(Node::is_element) {
            let name = node.tag_name().name();
            assert!(!["script", "image", "use", "a", "foreignObject"].contains(&name), "{name}");
            assert!(node.attributes().all(|attribute| !attribute.name().starts_with("on")));
        }
        assert!(text.contains("prefers-color-scheme:dark"));
    }
}

#[tokio::test]
async fn a_stop_is_drawn_once_for_each_friction_case_and_panel() {
    let text = chart("/v1/stopping", &vehicle()).await;
    let document = Document::parse(&text).unwrap();
    let curves = curves(&document);
    assert_eq!(curves.len(), 6);
    // Speed falls down the sheet, distance rises; time goes on.
    for (curve, is_speed) in curves.iter().zip([true, true, true, false, false, false]) {
        assert!(curve.windows(2).all(|pair| pair[0].0 <= pair[1].0));
        assert!(
            curve
                .windows(2)
                .all(|pair| (pair[0].1 <= pair[1].1) == is_speed || pair[0].1 == pair[1].1)
        );
    }
    // Low friction takes longest.
    let ends: Vec<i32> = curves.iter().map(|curve| curve.last().unwrap().0).collect();
    assert!(ends[0] > ends[1] && ends[1] > ends[2], "{ends:?}");
    let words = words(&document);
    for wanted in [
        "Speed, m/s",
        "Distance, m",
        "Time from the start, s",
        "reaction",
        "dead time",
        "build-up",
        "full braking",
    ] {
        assert!(words.iter().any(|word| word == wanted), "{wanted} is missing in {words:?}");
    }
}

/// The numbers of the key are those of the answer, to the four digits shown.
#[tokio::test]
async fn the_key_tells_the_distances_of_the_answer() {
    let text = chart("/v1/stopping", &vehicle()).await;
    let document = Document::parse(&text).unwrap();
    let answer = asked("/v1/stopping", "application/json", &vehicle(), 200).await.json();
    for case in answer["results"]["friction_cases"].as_array().unwrap() {
        let distance = case["total_distance"]["value"].as_f64().unwrap();
        let name = format!("{} friction: ", case["friction_case"].as_str().unwrap());
        let words = words(&document);
        let line = words.iter().find_map(|word| word.strip_prefix(&name)).unwrap();
        let shown: f64 = line.split(' ').next().unwrap().parse().unwrap();
        assert!((shown - distance).abs() <= 0.005, "{line} for {distance}");
    }
}

#[tokio::test]
async fn units_are_those_asked_for() {
    let mut body = vehicle();
    body["report_units"] = json!("us");
    let stop = chart("/v1/stopping", &body).await;
    assert!(stop.contains("Speed, ft/s") && stop.contains("Distance, ft"));
    assert!(stop.contains("Stop from 65.62 ft/s"));
    let heat = chart("/v1/stop-energy", &body).await;
    assert!(heat.contains("temperature of the disc, degF") && !heat.contains("degC"));
    let turning = chart("/v1/stopping", &shaft()).await;
    assert!(turning.contains("Speed, rpm") && turning.contains("Angle, deg"));
}

#[tokio::test]
async fn a_stop_that_fails_says_so() {
    let mut weak = vehicle();
    weak["grade"] = json!({"value": -60, "unit": "%"});
    for entry in 0..2 {
        weak["fitted"][entry]["brake"]["actuation"]["force"]["value"] = json!(3);
    }
    let text = chart("/v1/stopping", &weak).await;
    let document = Document::parse(&text).unwrap();
    assert!(curves(&document).is_empty());
    assert!(
        words(&document)
            .join(" ")
            .contains("The machine does not stop: the brake force is too low.")
    );
    let heat = chart("/v1/stop-energy", &weak).await;
    assert!(heat.contains("the final speed is not reached"));
}

/// By hand: low friction holds 0.58 of the weight, nominal 0.73; the slope takes 0.69.
#[tokio::test]
async fn a_case_that_fails_is_told_beside_those_that_stop() {
    let mut steep = vehicle();
    steep["grade"] = json!({"value": -95, "unit": "%"});
    let text = chart("/v1/stopping", &steep).await;
    let document = Document::parse(&text).unwrap();
    assert_eq!(curves(&document).len(), 4, "{:?}", words(&document));
    assert!(words(&document).join(" ").contains("low friction: does not stop"));
}

#[tokio::test]
async fn heat_is_drawn_for_each_disc_with_its_limits() {
    let text = chart("/v1/stop-energy", &vehicle()).await;
    let document = Document::parse(&text).unwrap();
    // Two entries, bulk and surface, three cases.
    assert_eq!(curves(&document).len(), 12);
    let words = words(&document);
    for wanted in [
        "Entry 0, front: temperature of the disc, degC",
        "Entry 1, rear: temperature of the disc, degC",
        "lining peak (surface) 150",
        "lining continuous (bulk) 120",
    ] {
        assert!(words.iter().any(|word| word == wanted), "{wanted} is missing in {words:?}");
    }
    let none = chart("/v1/stop-energy", &shaft()).await;
    assert!(none.contains("no entry has a disc"));
}

#[tokio::test]
async fn the_highest_temperatures_are_those_of_the_answer() {
    let text = chart("/v1/stop-energy", &vehicle()).await;
    let answer = asked("/v1/stop-energy", "application/json", &vehicle(), 200).await.json();
    let cases = answer["results"]["friction_cases"].as_array().unwrap();
    let peak =
        |case: &Value| case["fitted"][0]["surface_peak_temperature"]["value"].as_f64().unwrap();
    let highest = cases.iter().map(peak).fold(f64::MIN, f64::max);
    let (_, after) = text.split_once("Highest surface: ").unwrap();
    let shown: f64 = after.split(' ').next().unwrap().parse().unwrap();
    assert!((shown - highest).abs() <= 0.05, "{shown} for {highest}");
}

/// The vehicle, stopped again and again by linings that fade.
fn duty() -> Value {
    let mut body = vehicle();
    let members = body.as_object_mut().unwrap();
    members.remove("initial_speed");
    members.remove("response");
    for entry in 0..2 {
        body["fitted"][entry]["brake"]["lining"]["fade"] = json!([
            {"temperature": {"value": 60, "unit": "degC"}, "factor": 1.0},
            {"temperature": {"value": 200, "unit": "degC"}, "factor": 0.6},
        ]);
    }
    let speed = json!({"value": 20, "unit": "m/s"});
    body["events"] = json!([
        {"kind": "run", "speed": speed, "time": {"value": 10, "unit": "s"}},
        {"kind": "stop", "initial_speed": speed},
    ]);
    body["repeats"] = json!(3);
    body
}

#[tokio::test]
async fn a_duty_is_drawn_with_its_crossings_and_its_friction() {
    let text = chart("/v1/duty-cycle", &duty()).await;
    let document = Document::parse(&text).unwrap();
    // Two entries; bulk, surface and friction; three cases.
    assert_eq!(curves(&document).len(), 18);
    let answer = asked("/v1/duty-cycle", "application/json", &duty(), 200).await.json();
    assert!(answer["results"]["friction_cases"][0].get("trace").is_none());
    let cases = answer["results"]["friction_cases"].as_array().unwrap();
    let bulk_first = |case: &Value| {
        let crossings = case["fitted"][0]["crossings"].as_array().unwrap();
        let bulk = crossings.iter().find(|crossing| crossing["check"] == "disc_bulk_temperature");
        bulk.unwrap()["time"]["value"].as_f64().unwrap()
    };
    let first = cases.iter().map(bulk_first).fold(f64::INFINITY, f64::min);
    let words = words(&document);
    let note =
        words.iter().find_map(|word| word.strip_prefix("Bulk limit first passed at ")).unwrap();
    let shown: f64 = note.split(' ').next().unwrap().parse().unwrap();
    assert!((shown - first).abs() <= 0.005, "{note} for {first}");
    for wanted in ["bulk limit passed", "Entry 0, front: friction over that of the data sheet"] {
        assert!(words.iter().any(|word| word == wanted), "{wanted} is missing in {words:?}");
    }
    assert_eq!(text, chart("/v1/duty-cycle", &duty()).await);
}

#[tokio::test]
async fn a_duty_that_fails_says_where() {
    let mut body = duty();
    body["events"] = json!([
        {"kind": "stand", "time": {"value": 5, "unit": "s"}},
        {"kind": "stop", "initial_speed": {"value": 20, "unit": "m/s"}, "grade": {"value": -95, "unit": "%"}},
    ]);
    let text = chart("/v1/duty-cycle", &body).await;
    let document = Document::parse(&text).unwrap();
    let said = words(&document).join(" ");
    assert!(
        said.contains("low friction: ends in event 1, repeat 1: the final speed is not reached"),
        "{said}"
    );
    body["events"] = json!([]);
    asked("/v1/duty-cycle", SVG, &body, 422).await;
}

#[tokio::test]
async fn hostile_words_stay_words() {
    let mut body = vehicle();
    let hostile = "</text><script>alert(1)</script>&amp;]]>\u{1}\u{202E}\"'<!--";
    body["ref"] = json!(hostile);
    for path in ["/v1/stopping", "/v1/stop-energy"] {
        let text = chart(path, &body).await;
        let document = Document::parse(&text).unwrap();
        assert_eq!(elements(&document, "script").count(), 0);
        assert!(!text.contains("<script"));
        assert!(
            words(&document)
                .iter()
                .any(|word| word.starts_with("</text><script>alert(1)</script>&amp;]]>"))
        );
        assert!(!text.contains('\u{1}') && !text.contains('\u{202E}'));
    }
    body["ref"] = json!("long ".repeat(200));
    let text = chart("/v1/stopping", &body).await;
    assert!(text.contains('…') && !text.contains(&"long ".repeat(40)));
}

#[tokio::test]
async fn the_same_request_draws_the_same_bytes() {
    for path in ["/v1/stopping", "/v1/stop-energy"] {
        assert_eq!(chart(path, &vehicle()).await, chart(path, &vehicle()).await);
    }
}

/// From a thousandth of a second to a million of them, and from crawling to flying.
#[tokio::test]
async fn extreme_stops_still_have_axes() {
    for (inertia, torque, speed) in
        [(1e-6, 1e6, 1.0), (1e9, 1.0, 1e-3), (1.0, 1.0, 1e6), (1e-9, 1e9, 1e-9), (1e9, 1e3, 1e6)]
    {
        let mut body = shaft();
        body["machine"]["inertia"]["value"] = json!(inertia);
        body["fitted"][0]["torque"]["value"] = json!(torque);
        body["initial_rotational_speed"] = json!({"value": speed, "unit": "rad/s"});
        let text = chart("/v1/stopping", &body).await;
        let document = Document::parse(&text).unwrap();
        assert_eq!(curves(&document).len(), 2, "{inertia} {torque} {speed}");
        assert!(text.len() < 60_000);
        assert!(!text.contains("NaN") && !text.contains("inf "));
    }
}
