//! The examples of the description: the files in `examples/requests`, which the tests replay.

use serde_json::{Map, Value, json};

/// The example of each calculation: its path, the name of the file, and the file.
const EXAMPLES: [(&str, &str, &str); 7] = [
    (
        "/v1/pad-capacity",
        "hoist_caliper_at_its_limit",
        include_str!("../../examples/requests/pad-capacity/hoist_caliper_at_its_limit.json"),
    ),
    (
        "/v1/actuation-force",
        "tractor_front_brake",
        include_str!("../../examples/requests/actuation-force/tractor_front_brake.json"),
    ),
    (
        "/v1/stopping",
        "tractor_on_a_ramp",
        include_str!("../../examples/requests/stopping/tractor_on_a_ramp.json"),
    ),
    (
        "/v1/stop-energy",
        "tractor_on_a_ramp",
        include_str!("../../examples/requests/stop-energy/tractor_on_a_ramp.json"),
    ),
    (
        "/v1/selection",
        "tractor_front_calipers",
        include_str!("../../examples/requests/selection/tractor_front_calipers.json"),
    ),
    (
        "/v1/duty-cycle",
        "tractor_round_trip",
        include_str!("../../examples/requests/duty-cycle/tractor_round_trip.json"),
    ),
    (
        "/v1/spec-check",
        "ore_conveyor_holding_brake",
        include_str!("../../examples/requests/spec-check/ore_conveyor_holding_brake.json"),
    ),
];

/// Puts the examples into the description: a request that is ready to send, and its answer.
pub(super) fn insert(document: &mut Value) {
    for (path, name, text) in EXAMPLES {
        // The files are part of the program; a test proves that each is read.
        let example: Value = serde_json::from_str(text).unwrap_or_default();
        if let Some(operation) = document["paths"][path].get_mut("post") {
            put(&mut operation["requestBody"], name, &example, "request");
            put(&mut operation["responses"]["200"], name, &example, "response");
        }
    }
}

fn put(part: &mut Value, name: &str, example: &Value, member: &str) {
    let Some(Value::Object(content)) = part.pointer_mut("/content/application~1json") else {
        return;
    };
    let shown = json!({
        "summary": example["title"],
        "description": example["about"],
        "value": example[member],
    });
    content.insert("examples".to_owned(), Map::from_iter([(name.to_owned(), shown)]).into());
}
