//! What a mistyped name is taken for.

use brakewright::data::nearest::{LONGEST, nearest};

#[test]
fn a_slip_is_answered_with_the_name_that_was_meant() {
    let known = ["gray_cast_iron", "carbon_steel", "carbon_ceramic"];
    let meant = |name: &str| nearest(name, known);
    assert_eq!(meant("grey_cast_iron"), Some("gray_cast_iron"));
    assert_eq!(meant("Carbon-Steel"), Some("carbon_steel"));
    assert_eq!(meant("granite"), None);
    assert_eq!(meant(""), None);
    assert_eq!(nearest("anything", []), None);
}

/// The effort grows with the length, and the name comes from outside.
#[test]
fn a_name_that_is_very_long_is_not_compared() {
    let longest = "a".repeat(LONGEST);
    let longer = "a".repeat(LONGEST + 1);
    assert_eq!(nearest(&longest, [longest.as_str()]), Some(longest.as_str()));
    assert_eq!(nearest(&longer, [longer.as_str()]), None);
}
