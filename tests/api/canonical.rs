//! The canonical form of JSON, against its standard and against an outside library.

use brakewright::api::canonical::canonical;
use proptest::prelude::*;
use serde_json::{Value, json};

fn text(value: &Value) -> String {
    String::from_utf8(canonical(value)).unwrap()
}

/// RFC 8785, 3.2.2: the sample object (from memory).
#[test]
fn the_sample_of_the_standard_comes_out() {
    let sample = r#"{
        "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
        "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
        "literals": [null, true, false]
    }"#;
    let expected = r#"{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}"#;
    assert_eq!(text(&serde_json::from_str(sample).unwrap()), expected);
}

/// RFC 8785, 3.2.3: members are sorted by UTF-16 code units (from memory).
#[test]
fn members_are_sorted_by_the_code_units_of_their_names() {
    let names = ["\u{20ac}", "\r", "\u{fb33}", "1", "\u{1f600}", "\u{80}", "\u{f6}"];
    let object: Value = names.iter().map(|name| ((*name).to_owned(), json!(0))).collect();
    let expected = concat!(
        r#"{"\r":0,"1":0,"#,
        "\"\u{80}\":0,\"\u{f6}\":0,\"\u{20ac}\":0,\"\u{1f600}\":0,\"\u{fb33}\":0}"
    );
    assert_eq!(text(&object), expected);
}

/// RFC 8785, appendix B: numbers as ECMAScript writes them (from memory).
#[test]
fn numbers_are_written_as_ecmascript_does() {
    let cases = [
        (0x0000_0000_0000_0000_u64, "0"),
        (0x8000_0000_0000_0000, "0"),
        (0x0000_0000_0000_0001, "5e-324"),
        (0x7fef_ffff_ffff_ffff, "1.7976931348623157e+308"),
        (0x4340_0000_0000_0000, "9007199254740992"),
        (0x444b_1ae4_d6e2_ef4e, "999999999999999700000"),
        (0x444b_1ae4_d6e2_ef50, "1e+21"),
        (0x3eb0_c6f7_a0b5_ed8d, "0.000001"),
    ];
    for (bits, expected) in cases {
        assert_eq!(text(&json!(f64::from_bits(bits))), expected);
    }
}

#[test]
fn a_whole_number_is_the_same_with_and_without_a_point() {
    for (whole, point) in
        [("95", "95.0"), ("-3", "-3.0"), ("18446744073709551615", "1.8446744073709552e19")]
    {
        let [whole, point] = [whole, point].map(|text| serde_json::from_str(text).unwrap());
        assert_eq!(text(&whole), text(&point));
    }
}

fn values() -> impl Strategy<Value = Value> {
    let number = prop_oneof![any::<f64>(), any::<i32>().prop_map(|whole| f64::from(whole) / 8.0)];
    let leaf = prop_oneof![
        Just(Value::Null),
        any::<bool>().prop_map(Value::from),
        number.prop_map(Value::from),
        any::<String>().prop_map(Value::from),
    ];
    leaf.prop_recursive(4, 64, 8, |inner| {
        prop_oneof![
            prop::collection::vec(inner.clone(), 0..8).prop_map(Value::from),
            prop::collection::vec((any::<String>(), inner), 0..8)
                .prop_map(|members| Value::Object(members.into_iter().collect())),
        ]
    })
}

proptest! {
    /// `serde_jcs` writes the same.
    #[test]
    fn an_outside_library_writes_the_same(value in values()) {
        prop_assert_eq!(text(&value), serde_jcs::to_string(&value).unwrap());
    }
}
