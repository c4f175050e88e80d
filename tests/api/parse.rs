//! Reading requests: places, faults, defaults, and objects of several kinds.

use std::collections::{BTreeSet, HashMap};

use brakewright::api::error_code::{self, ErrorCode, ShapeCode};
use brakewright::api::finite::to_json;
use brakewright::api::measure::{Length, Mass, Temperature, kind};
use brakewright::api::parse::{At, Reader};
use brakewright::api::problem::{ErrorItem, MOST_ERRORS, Problem};
use brakewright::calc::fault::{FaultCode, Faults};
use brakewright::calc::quantity::Si;
use brakewright::{only_word, tagged_union};
use serde::Deserialize;
use serde_json::{Value, json};
use utoipa::{PartialSchema, ToSchema};

fn body(problem: &Problem) -> Value {
    serde_json::from_slice(&problem.to_json()).unwrap()
}

#[test]
fn a_place_is_rendered_as_fragment_pointer() {
    let root = At::ROOT;
    assert_eq!(root.pointer(), "#");
    assert_eq!(root.member("fitted").index(0).member("brake").pointer(), "#/fitted/0/brake");
    // RFC 6901 section 6, seen in part: `#/a~1b`, `#/c%25d`, `#/e%5Ef`, `#/k%22l`, `#/%20`, `#/m~0n`.
    let rendered =
        ["a/b", "c%d", "e^f", "k\"l", " ", "m~n", ""].map(|name| root.member(name).pointer());
    assert_eq!(rendered, ["#/a~1b", "#/c%25d", "#/e%5Ef", "#/k%22l", "#/%20", "#/m~0n", "#/"]);
    assert_eq!(root.member("é").pointer(), "#/%C3%A9");
    assert_eq!(root.member("pad").below("outline/3"), "#/pad/outline/3");
    assert_eq!(root.member("pad").below(""), "#/pad");
}

#[test]
fn every_fault_is_found_in_its_place() {
    let (mut reader, root) = (Reader::new(), At::ROOT);
    let huge = Length::new(1e12, "km").unwrap();
    reader.quantity(&root.member("radius"), &huge);
    let absent = reader.optional::<kind::Mass>(&root.member("mass"), None);
    assert_eq!(absent, None);
    reader.ratio(&root.member("ratio"), Some(1e13), 1.0);
    let cold = Temperature::new(-300.0, "degC").unwrap();
    reader.quantity(&root.member("ambient_temperature"), &cold);
    let mut faults = Faults::new();
    faults.add("inner/radius", FaultCode::NotPositive, "must be above 0");
    faults.add("", FaultCode::Conflict, "not both");
    assert_eq!(reader.take::<f64>(&root.member("pad"), Err(faults)), None);
    assert_eq!(reader.required::<f64>(&root.member("speed"), None, "a stop needs it"), None);
    reader.not_applicable(&root.member("grade"), true, "belongs to vehicles");
    reader.not_applicable(&root.member("falls"), false, "belongs to hoists");
    let refusal = reader.finish(Some(1.0)).unwrap_err();
    let found: Vec<_> = refusal.errors().iter().map(|f| (f.pointer.as_str(), f.code)).collect();
    assert_eq!(
        found,
        [
            ("#/radius", "out_of_range"),
            ("#/ratio", "out_of_range"),
            ("#/ambient_temperature", "out_of_range"),
            ("#/pad/inner/radius", "not_positive"),
            ("#/pad", "conflict"),
            ("#/speed", "missing"),
            ("#/grade", "not_applicable"),
        ]
    );
    assert!(refusal.errors()[0].detail.contains("1e6 m"), "{}", refusal.errors()[0].detail);
    assert!(refusal.errors()[2].detail.contains("absolute zero"));
}

#[test]
fn a_place_has_one_fault_and_faults_beyond_the_list_are_counted() {
    let (mut reader, root) = (Reader::new(), At::ROOT);
    for index in (0..MOST_ERRORS + 7).chain(0..3) {
        reader.fault(&root.index(index), FaultCode::Conflict, "no");
    }
    let refusal = reader.finish::<()>(None).unwrap_err();
    assert_eq!(refusal.errors().len(), MOST_ERRORS);
    assert_eq!(body(&refusal)["error_count"], MOST_ERRORS + 7);
}

#[test]
fn every_default_is_recorded_and_given_values_are_not() {
    let (mut reader, root) = (Reader::new(), At::ROOT);
    let at = root.member("ambient_temperature");
    let taken = reader.or_default::<kind::Temperature>(&at, None, 20.0, "degC");
    assert_eq!(taken.si(), 293.15);
    let mass = Mass::new(3.0, "kg").unwrap();
    assert_eq!(reader.or_default(&root.member("mass"), Some(&mass), 0.0, "kg").si(), 3.0);
    assert_eq!(reader.ratio(&root.member("efficiency"), None, 0.9), 0.9);
    assert_eq!(reader.ratio(&root.member("ratio"), Some(2.0), 1.0), 2.0);
    assert_eq!(reader.count(&root.member("faces"), None, 2), 2);
    assert_eq!(reader.count(&root.member("falls"), Some(4), 1), 4);
    assert!(reader.word(&root.member("side"), None, true, "left"));
    let (value, defaults) = reader.finish(Some(7)).unwrap();
    assert_eq!(value, 7);
    let expected = json!([
        {"pointer": "#/ambient_temperature", "value": 20.0, "unit": "degC"},
        {"pointer": "#/efficiency", "value": 0.9},
        {"pointer": "#/faces", "value": 2},
        {"pointer": "#/side", "value": "left"},
    ]);
    assert_eq!(serde_json::to_value(&defaults).unwrap(), expected);
    assert!(to_json(&defaults).is_ok());
}

#[test]
fn the_error_codes_are_one_closed_set() {
    let codes = error_code::all();
    let unique: BTreeSet<_> = codes.iter().collect();
    assert_eq!(unique.len(), codes.len());
    assert_eq!(codes.len(), ShapeCode::ALL.len() + FaultCode::ALL.len());
    let schema = serde_json::to_value(ErrorCode::schema()).unwrap();
    assert_eq!(schema["enum"], json!(codes));
    let item = serde_json::to_value(ErrorItem::schema()).unwrap();
    assert_eq!(item["properties"]["code"]["$ref"], "#/components/schemas/ErrorCode");
}

only_word! {
    /// A round one.
    RoundTag = "round";
    /// A square one.
    SquareTag = "square";
}

/// A round one.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub(super) struct Round {
    shape: RoundTag,
    radius: Length,
}

/// A square one.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub(super) struct Square {
    shape: SquareTag,
    side: Length,
}

tagged_union! {
    /// One of two.
    Plate by "shape" {
        "round" => Round(Round),
        "square" => Square(Square),
    }
}

#[derive(Debug, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
struct Stack {
    plates: Vec<Plate>,
    #[schema(nullable = false)]
    cover: Option<Plate>,
}

fn size(plate: &Plate) -> f64 {
    match plate {
        Plate::Round(round) => round.radius.quantity().si(),
        Plate::Square(square) => square.side.quantity().si(),
    }
}

fn plate_error(text: &str) -> String {
    let read = serde_json::from_str::<Plate>(text);
    read.map(|plate| size(&plate)).map_err(|error| error.to_string()).unwrap_err()
}

#[test]
fn a_union_is_decoded_by_its_tag_wherever_it_stands() {
    let text = br#"{"plates": [{"shape": "round", "radius": {"value": 1, "unit": "m"}},
        {"side": {"value": 2, "unit": "m"}, "shape": "square"}], "cover": {"shape": "squ\u0061re", "side": {"unit": "m", "value": 3}}}"#;
    let stack: Stack = serde_json::from_slice(text).unwrap();
    let sizes: Vec<_> = stack.plates.iter().chain(&stack.cover).map(size).collect();
    assert_eq!(sizes, [1.0, 2.0, 3.0]);
    let mut deserializer = serde_json::Deserializer::from_slice(text);
    assert!(serde_path_to_error::deserialize::<_, Stack>(&mut deserializer).is_ok());
}

#[test]
fn a_wrong_tag_is_refused_with_the_right_ones() {
    let error = plate_error(r#"{"shape": "oval"}"#);
    assert!(error.contains("unknown variant `oval`, expected `round` or `square`"), "{error}");
    let error = plate_error(r#"{"radius": 1}"#);
    assert!(error.contains("missing field `shape`"), "{error}");
    for text in ["null", "3", "[]", r#"{"shape": 3}"#, r#"{"shape": null}"#] {
        assert!(plate_error(text).contains("invalid type"), "{text}");
    }
    let twice = r#"{"shape": "round", "radius": {"value": 1, "unit": "m"}, "shape": "round"}"#;
    assert!(plate_error(twice).contains("duplicate field `shape`"));
    let stray = r#"{"shape": "round", "radius": {"value": 1, "unit": "m"}, "side": 3}"#;
    let error = plate_error(stray);
    assert!(error.contains("unknown field `side`"), "{error}");
}

#[test]
fn a_union_is_described_by_references_and_a_discriminator() {
    let mut schemas = vec![("Stack".to_owned(), Stack::schema())];
    Stack::schemas(&mut schemas);
    let schemas: HashMap<_, _> = schemas
        .into_iter()
        .map(|(name, schema)| (name, serde_json::to_value(schema).unwrap()))
        .collect();
    let reference = |name: &str| format!("#/components/schemas/{name}");
    assert_eq!(schemas["Stack"]["properties"]["plates"]["items"]["$ref"], reference("Plate"));
    let plate = &schemas["Plate"];
    assert_eq!(
        plate["oneOf"],
        json!([{"$ref": reference("Round")}, {"$ref": reference("Square")}])
    );
    let mapping = json!({"round": reference("Round"), "square": reference("Square")});
    assert_eq!(plate["discriminator"], json!({"propertyName": "shape", "mapping": mapping}));
    assert_eq!(schemas["Round"]["properties"]["shape"]["$ref"], reference("RoundTag"));
    assert_eq!(schemas["RoundTag"]["enum"], json!(["round"]));
    assert_eq!(schemas["Length"]["type"], "object");
}
