//! Quantities on the wire.

use brakewright::api::finite::{Finite, to_json};
use brakewright::api::measure::{
    Angle, AnyAmount, Grade, Length, LineCompliance, Pressure, ReportUnits, RotationalSpeed,
    SpecificWear, Temperature, TemperatureDifference, Torque,
};
use brakewright::calc::quantity::{self, Amount, Dimension, Si};
use proptest::prelude::*;
use serde::Deserialize;
use serde_json::{Value, json};
use utoipa::{PartialSchema, ToSchema};

fn length(text: &str) -> Result<f64, String> {
    let read = serde_json::from_str::<Length>(text);
    read.map(|length| length.quantity().si()).map_err(|error| error.to_string())
}

fn refused(text: &str, reason: &str) {
    let error = length(text).unwrap_err();
    assert!(error.contains(reason), "{text}: {error}");
}

#[test]
fn a_unit_is_named_by_symbol_ucum_or_recommendation_20() {
    // 1 in = 0.0254 m (1959, seen); 2 × 0.0254 = 0.0508.
    for unit in ["in", "[in_i]", "INH"] {
        assert_eq!(length(&json!({"value": 2, "unit": unit}).to_string()), Ok(0.0508));
    }
    assert_eq!(length(r#"{"unit": "mm", "value": 95}"#), Ok(0.095));
    assert_eq!(length(r#"{"unit": "m", "value": -1.5e-2}"#), Ok(-0.015));
    assert_eq!(length(r#"{"unit": "\u006dm", "value": 95}"#), Ok(0.095));
}

#[test]
fn a_wrong_shape_is_refused_with_the_reason() {
    refused(r#"{"value": 1}"#, "missing field `unit`");
    refused(r#"{"unit": "mm"}"#, "missing field `value`");
    refused("{}", "missing field `value`");
    refused(r#"{"value": 1, "unit": "mm", "units": "mm"}"#, "unknown field `units`");
    refused(r#"{"value": 1, "value": 1, "unit": "mm"}"#, "duplicate field `value`");
    refused(r#"{"value": 1, "unit": "mm", "unit": "mm"}"#, "duplicate field `unit`");
    refused(r#"{"value": "1", "unit": "mm"}"#, "invalid type: string");
    refused(r#"{"value": null, "unit": "mm"}"#, "invalid type: null");
    refused(r#"{"value": true, "unit": "mm"}"#, "invalid type: boolean");
    refused(r#"{"value": 1, "unit": null}"#, "invalid type: null");
    refused(r#"{"value": 1, "unit": 1}"#, "invalid type: integer");
    refused("null", "invalid type: null");
    refused("95", "invalid type: integer");
    refused(r#"[95, "mm"]"#, "invalid type: sequence");
    refused(r#"{"value": 1e999, "unit": "mm"}"#, "number out of range");
}

#[test]
fn a_unit_of_another_dimension_is_refused_and_the_right_ones_are_named() {
    for unit in ["MPa", "MM", "inch", "", "-", "N.m"] {
        refused(&json!({"value": 1, "unit": unit}).to_string(), "expected a unit of length");
    }
    let energy = json!({"value": 1, "unit": "J"});
    assert!(serde_json::from_value::<Torque>(energy).is_err());
    let celsius = json!({"value": 1, "unit": "degC"});
    assert!(serde_json::from_value::<TemperatureDifference>(celsius.clone()).is_err());
    assert!(serde_json::from_value::<Temperature>(celsius).is_ok());
    assert!(serde_json::from_value::<Angle>(json!({"value": 1, "unit": "%"})).is_err());
}

#[test]
fn a_code_is_answered_as_plain_symbol() {
    let speed: RotationalSpeed =
        serde_json::from_value(json!({"value": 60, "unit": "M46"})).unwrap();
    assert_eq!(serde_json::to_value(speed).unwrap(), json!({"value": 60.0, "unit": "rpm"}));
}

#[test]
fn a_way_travelled_is_reported_in_longer_units_than_a_part() {
    let one_foot = quantity::Length::from_si(0.3048);
    let units = |si, us| {
        let [si, us] = [si, us].map(|length: Length| length.unit().symbol);
        [si, us]
    };
    let [si, us] = [ReportUnits::Si, ReportUnits::Us];
    assert_eq!(units(Length::report(one_foot, si), Length::report(one_foot, us)), ["mm", "in"]);
    assert_eq!(
        units(Length::report_travel(one_foot.si(), si), Length::report_travel(one_foot.si(), us)),
        ["m", "ft"]
    );
    assert_eq!(Length::report_travel(one_foot.si(), us).value(), 1.0);
}

#[test]
fn an_amount_of_any_dimension_carries_its_unit() {
    let amount = Amount::new(Dimension::Ratio, 0.5);
    let json = serde_json::to_value(AnyAmount::report(amount, ReportUnits::Us)).unwrap();
    assert_eq!(json, json!({"value": 0.5, "unit": "1"}));
    let amount = Amount { dimension: Dimension::Temperature, si: 573.15 };
    let json = serde_json::to_value(AnyAmount::report(amount, ReportUnits::Si)).unwrap();
    assert_eq!(json, json!({"value": 300.0, "unit": "degC"}));
    let amount = Amount { dimension: Dimension::Travel, si: 3.0 };
    let json = serde_json::to_value(AnyAmount::report(amount, ReportUnits::Si)).unwrap();
    assert_eq!(json, json!({"value": 3.0, "unit": "m"}));
}

#[test]
fn the_units_of_an_answer_have_two_names() {
    let read = |text| serde_json::from_str::<ReportUnits>(text).ok();
    assert_eq!(read(r#""si""#), Some(ReportUnits::Si));
    assert_eq!(read(r#""us""#), Some(ReportUnits::Us));
    assert_eq!(read(r#""US""#), None);
    assert_eq!(read("null"), None);
    let schema = serde_json::to_value(ReportUnits::schema()).unwrap();
    assert_eq!(schema["enum"], json!(["si", "us"]));
}

#[test]
fn the_schema_lists_plain_symbols_with_names_for_generators() {
    let schema = serde_json::to_value(Torque::schema()).unwrap();
    assert_eq!(Torque::name(), "Torque");
    assert_eq!(schema["type"], "object");
    assert_eq!(schema["required"], json!(["value", "unit"]));
    assert_eq!(schema["additionalProperties"], false);
    assert_eq!(schema["properties"]["value"]["type"], "number");
    let unit = &schema["properties"]["unit"];
    assert_eq!(unit["type"], "string");
    assert_eq!(unit["enum"], json!(["N.m", "kN.m", "N.mm", "lbf.in", "lbf.ft"]));
    assert_eq!(unit["x-enum-varnames"][0], "NEWTON_METRE");
    let description = schema["description"].as_str().unwrap();
    for part in ["torque", "`lbf.ft` pound-force foot", "1e12 N.m"] {
        assert!(description.contains(part), "{description}");
    }
    assert!(unit["description"].as_str().unwrap().contains("GET /v1/units"));
}

#[test]
fn a_derived_schema_refers_to_the_alias() {
    #[derive(ToSchema, Deserialize)]
    #[expect(dead_code, reason = "only its description is looked at")]
    struct Part {
        radius: Length,
    }
    let schema = serde_json::to_value(Part::schema()).unwrap();
    assert_eq!(schema["properties"]["radius"]["$ref"], "#/components/schemas/Length");
}

#[test]
fn no_answer_holds_a_number_that_is_not_finite() {
    let torque = |si| Torque::report(quantity::Torque::from_si(si), ReportUnits::Si);
    for si in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        assert!(to_json(&vec![Some(torque(si))]).is_err());
        assert!(serde_json::to_value(torque(si)).is_err());
    }
    assert!(to_json(&[Finite(f64::NAN)]).is_err());
    assert!(to_json(&[f64::NAN]).is_err());
    assert!(to_json(&Value::Null).is_err());
    let json = to_json(&torque(1.5)).unwrap();
    assert_eq!(json, br#"{"value":1.5,"unit":"N.m"}"#);
}

#[test]
fn a_size_is_accepted_within_the_documented_bounds_only() {
    let accepted = |value, unit| {
        Length::new(value, unit).map(|length| Length::accepted().contains(length.quantity().si()))
    };
    assert_eq!(accepted(95.0, "mm"), Some(true));
    assert_eq!(accepted(0.0, "mm"), Some(true));
    assert_eq!(accepted(-95.0, "mm"), Some(true));
    assert_eq!(accepted(1e10, "m"), Some(false));
    assert_eq!(accepted(1e-10, "m"), Some(false));
    assert_eq!(accepted(1e306, "km"), Some(false)); // overflows to infinity
    assert_eq!(accepted(f64::MIN_POSITIVE, "mm"), Some(false));
    let kelvin = |value| Temperature::accepted().contains(value);
    assert_eq!((kelvin(-1.0), kelvin(293.15)), (false, true));
}

/// What a report loses: one rounding each way (2⁻⁵³ each), and the choice of a rounder number (2⁻⁵¹).
const ROUNDING: f64 = 7e-16;

macro_rules! comes_back {
    ($kind:ident, $quantity:ident, $si:expr, $room:expr) => {
        for report_units in [ReportUnits::Si, ReportUnits::Us] {
            let si: f64 = $si;
            let reported = $kind::report(quantity::$quantity::from_si(si), report_units);
            let json = serde_json::to_string(&reported).unwrap();
            let read: $kind = serde_json::from_str(&json).unwrap();
            let back = read.quantity().si();
            prop_assert!((back - si).abs() <= $room * si.abs(), "{json}: {si} {back}");
        }
    };
}

proptest! {
    #[test]
    fn a_reported_quantity_is_read_back(exponent in -9.0..9.0_f64, sign in prop::bool::ANY) {
        let si = libm::pow(10.0, exponent) * if sign { 1.0 } else { -1.0 };
        comes_back!(Length, Length, si, ROUNDING);
        comes_back!(Pressure, Pressure, si, ROUNDING);
        comes_back!(Torque, Torque, si, ROUNDING);
        comes_back!(RotationalSpeed, AngularVelocity, si, ROUNDING);
        comes_back!(SpecificWear, SpecificWear, si * 1e-12, ROUNDING);
        comes_back!(LineCompliance, LineCompliance, si * 1e-12, ROUNDING);
    }

    /// A subtraction of 459.67 amplifies the rounding at most twofold above 100 K.
    #[test]
    fn a_reported_temperature_is_read_back(kelvin in 100.0..3000.0_f64) {
        comes_back!(Temperature, ThermodynamicTemperature, kelvin, 4.0 * ROUNDING);
    }

    /// The tangent amplifies a rounding by 2a/sin 2a, below 1.6 up to 45 degrees.
    #[test]
    fn a_reported_grade_is_read_back(angle in -0.785..0.785_f64) {
        comes_back!(Grade, Angle, angle, 4.0 * ROUNDING);
    }
}
