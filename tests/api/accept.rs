//! Content negotiation by RFC 9110, 12.5.1; the header texts are those of its rules and example.

use axum::http::HeaderMap;
use brakewright::api::accept::choose;

const OFFERS: &[&str] = &["application/json", "image/svg+xml", "text/html"];

fn chosen(accept: &str) -> Option<&'static str> {
    let mut headers = HeaderMap::new();
    headers.insert("accept", accept.parse().unwrap());
    choose(&headers, OFFERS)
}

#[test]
fn without_the_header_the_first_offer_is_taken() {
    assert_eq!(choose(&HeaderMap::new(), OFFERS), Some("application/json"));
}

#[test]
fn wildcards_admit() {
    assert_eq!(chosen("*/*"), Some("application/json"));
    assert_eq!(chosen("application/*"), Some("application/json"));
    assert_eq!(chosen("image/*"), Some("image/svg+xml"));
    assert_eq!(chosen("audio/*"), None);
}

#[test]
fn the_higher_weight_wins_and_the_first_of_equals() {
    assert_eq!(chosen("text/html, application/json;q=0.9"), Some("text/html"));
    assert_eq!(chosen("text/html;q=0.5, application/json;q=0.5"), Some("application/json"));
    assert_eq!(chosen("text/html;q=0.333,image/svg+xml;q=0.334"), Some("image/svg+xml"));
}

#[test]
fn the_more_specific_range_overrides_the_wider_one() {
    assert_eq!(chosen("*/*, application/json;q=0"), Some("image/svg+xml"));
    assert_eq!(chosen("application/json;q=0, application/*"), None);
    assert_eq!(chosen("text/*;q=0.3, text/html;q=0.7, */*;q=0.5"), Some("text/html"));
}

#[test]
fn a_weight_of_zero_refuses() {
    assert_eq!(chosen("*/*;q=0"), None);
    assert_eq!(chosen("application/json;q=0.000"), None);
}

#[test]
fn names_are_compared_without_case_and_broken_ranges_are_passed_over() {
    assert_eq!(chosen("APPLICATION/Json"), Some("application/json"));
    assert_eq!(chosen("nonsense, text/html;q=high, image/svg+xml ; q=0.1"), Some("image/svg+xml"));
    assert_eq!(chosen(""), None);
}

#[test]
fn several_header_lines_are_one_list() {
    let mut headers = HeaderMap::new();
    headers.append("accept", "text/html;q=0.1".parse().unwrap());
    headers.append("accept", "image/svg+xml".parse().unwrap());
    assert_eq!(choose(&headers, OFFERS), Some("image/svg+xml"));
}
