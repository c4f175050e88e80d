//! Who is let in: keys, shares, and what stays open to everybody.

use std::net::{IpAddr, Ipv4Addr};
use std::num::NonZeroU32;

use axum::body::Body;
use axum::http::{HeaderValue, Request};
use brakewright::api::guard::client::{Client, Peer};
use brakewright::api::guard::keys::{KeyRing, Keys, MOST_KEYS};
use brakewright::api::health::Readiness;
use brakewright::api::layers::LayerSettings;
use brakewright::api::router;

use crate::support::client::{Answer, TestApp, settings};

/// SHA-256 of `abc`, from FIPS 180-4's example (seen in its published test vectors).
const ABC: &str = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";

/// SHA-256 of the empty text, a common test vector (from memory).
const EMPTY: &str = "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855";

fn app(settings: &LayerSettings) -> TestApp {
    TestApp::of(router(settings, Readiness::default()))
}

fn with_keys(text: &str) -> (TestApp, KeyRing) {
    let ring = KeyRing::new(Keys::parse(text).unwrap());
    (app(&LayerSettings { keys: Some(ring.clone()), ..settings() }), ring)
}

fn limited(share: u32) -> LayerSettings {
    LayerSettings { rate_limit: NonZeroU32::new(share), ..settings() }
}

fn get(path: &str, credential: Option<&str>, from: [u8; 4]) -> Request<Body> {
    let mut request = Request::get(path).body(Body::empty()).unwrap();
    if let Some(credential) = credential {
        let value = HeaderValue::from_str(credential).unwrap();
        request.headers_mut().insert("authorization", value);
    }
    request.extensions_mut().insert(Peer(IpAddr::V4(Ipv4Addr::from(from))));
    request
}

const HERE: [u8; 4] = [192, 0, 2, 1];

async fn ask(app: &TestApp, credential: Option<&str>, expected: u16) -> Answer {
    app.send(get("/v1/units", credential, HERE), expected).await
}

#[tokio::test]
async fn a_request_without_a_key_in_force_is_told_how_to_send_one() {
    let (app, _) = with_keys(ABC);
    let answer = ask(&app, None, 401).await;
    assert_eq!(answer.json()["type"], "/problems/unauthorized");
    assert_eq!(answer.header("www-authenticate"), "Bearer realm=\"brakewright\"");
    for wrong in ["Bearer xyz", "Bearer ", "Bearer abc abc", "Basic abc", "abc", "Bearer"] {
        let answer = ask(&app, Some(wrong), 401).await;
        assert!(answer.header("www-authenticate").contains("error=\"invalid_token\""), "{wrong}");
        assert!(!String::from_utf8_lossy(&answer.body).contains("xyz"));
    }
    app.post("/v1/pad-capacity", "{}", 401).await;
    app.get("/v1/no-such-thing", 401).await;
}

#[tokio::test]
async fn a_key_in_force_opens_the_service_and_keeps_its_answers_out_of_shared_caches() {
    let (app, _) = with_keys(&format!("# keys\n\n{EMPTY} # nobody\n  {}\n", ABC.to_uppercase()));
    for right in ["Bearer abc", "bearer abc", "BEARER  abc"] {
        let answer = ask(&app, Some(right), 200).await;
        assert!(answer.header("cache-control").starts_with("private"));
    }
    let mut twice = get("/v1/units", Some("Bearer abc"), HERE);
    twice.headers_mut().append("authorization", HeaderValue::from_static("Bearer abc"));
    app.send(twice, 401).await;
}

#[tokio::test]
async fn health_and_what_explains_the_service_need_no_key() {
    let (app, _) = with_keys(ABC);
    for path in ["/health/live", "/health/ready", "/docs/", "/openapi.json", "/openapi-3.0.json"] {
        app.get(path, 200).await;
    }
    app.get("/problems/unauthorized", 200).await;
    for path in ["/health", "/v1/units/../../health/live", "//health/live", "/metrics"] {
        app.get(path, 401).await;
    }
}

#[tokio::test]
async fn keys_are_exchanged_without_a_new_start() {
    let (app, ring) = with_keys(ABC);
    ask(&app, Some("Bearer abc"), 200).await;
    ring.replace(Keys::parse(EMPTY).unwrap());
    ask(&app, Some("Bearer abc"), 401).await;
}

#[test]
fn a_list_of_keys_with_a_fault_is_refused_without_repeating_it() {
    let cases = [
        ("", "it holds no key"),
        ("# nobody\n", "it holds no key"),
        ("\nsecret\n", "line 2: not the SHA-256"),
        (&ABC[1..], "line 1: not"),
        (&format!("{ABC}0"), "line 1: not"),
        (&ABC.replace('b', "g"), "line 1: not"),
        (&"ä".repeat(32), "line 1: not"),
        (&"x\n".repeat(9), "line 1, 2, 3, 4, 5 and others: not"),
        (&format!("{ABC}\n").repeat(MOST_KEYS + 1), "it holds 1001 keys; 1000 is the most"),
    ];
    for (text, sentence) in cases {
        let refusal = Keys::parse(text).unwrap_err();
        assert!(refusal.starts_with(sentence), "{refusal}");
        assert!(!refusal.contains("secret"));
    }
    assert_eq!(Keys::parse(&format!("{ABC}\n").repeat(MOST_KEYS)).unwrap().count(), MOST_KEYS);
    assert!(!format!("{:?}", Keys::parse(ABC).unwrap()).contains("ba78"));
}

#[tokio::test]
async fn a_client_beyond_its_share_is_told_when_to_come_again() {
    let app = app(&limited(3));
    for left in [2, 1, 0] {
        let answer = ask(&app, None, 200).await;
        assert_eq!(answer.header("ratelimit-policy"), "\"default\";q=3;w=60");
        let used = 3 - left;
        assert_eq!(answer.header("ratelimit"), format!("\"default\";r={left};t={}", used * 20));
    }
    let answer = ask(&app, None, 429).await;
    assert_eq!(answer.json()["type"], "/problems/too_many_requests");
    assert_eq!(answer.header("ratelimit"), "\"default\";r=0;t=60");
    let seconds: u32 = answer.header("retry-after").parse().unwrap();
    assert!((1..=20).contains(&seconds), "{seconds}");
    // Others are not concerned, and health is always answered.
    app.send(get("/v1/units", None, [192, 0, 2, 2]), 200).await;
    app.send(get("/health/live", None, HERE), 200).await;
}

#[tokio::test]
async fn a_share_belongs_to_the_key_and_not_to_the_address() {
    let ring = KeyRing::new(Keys::parse(&format!("{ABC}\n{EMPTY}")).unwrap());
    let app = app(&LayerSettings { keys: Some(ring), ..limited(1) });
    app.send(get("/v1/units", Some("Bearer abc"), HERE), 200).await;
    app.send(get("/v1/units", Some("Bearer abc"), [192, 0, 2, 2]), 429).await;
    // Whoever guesses keys uses the share of the address, not that of a holder.
    app.send(get("/v1/units", Some("Bearer wrong"), HERE), 401).await;
    app.send(get("/v1/units", Some("Bearer abe"), HERE), 429).await;
    app.send(get("/v1/units", Some("Bearer abf"), HERE), 429).await;
}

#[tokio::test]
async fn without_a_limit_nothing_is_said_of_one() {
    let answer = ask(&app(&settings()), None, 200).await;
    assert_eq!(answer.header("ratelimit").to_owned() + answer.header("ratelimit-policy"), "");
}

#[tokio::test]
async fn a_listed_page_can_read_that_it_is_turned_away() {
    let allowed_origins = vec![HeaderValue::from_static("https://shop.example")];
    let app = app(&LayerSettings { allowed_origins, ..limited(1) });
    for expected in [200, 429] {
        let mut request = get("/v1/units", None, HERE);
        request.headers_mut().insert("origin", HeaderValue::from_static("https://shop.example"));
        let answer = app.send(request, expected).await;
        assert_eq!(answer.header("access-control-allow-origin"), "https://shop.example");
        let exposed = answer.header("access-control-expose-headers");
        assert!(exposed.contains("ratelimit") && exposed.contains("retry-after"), "{exposed}");
    }
    // Asking whether one may ask is not counted.
    let preflight = Request::options("/v1/units")
        .header("origin", "https://shop.example")
        .header("access-control-request-method", "GET")
        .header("access-control-request-headers", "authorization");
    let answer = app.send(preflight.body(Body::empty()).unwrap(), 200).await;
    assert!(answer.header("access-control-allow-headers").contains("authorization"));
}

#[test]
fn an_address_stands_for_the_host_and_in_a_crowd_for_its_network() {
    let peer = |text: &str| Some(Peer(text.parse().unwrap()));
    assert_eq!(Client::at(peer("192.0.2.1")), Client::at(peer("::ffff:192.0.2.1")));
    assert_ne!(Client::at(peer("192.0.2.1")), Client::at(peer("192.0.2.2")));
    assert_eq!(Client::at(peer("2001:db8::1")), Client::at(peer("2001:db8::ffff:1")));
    assert_ne!(Client::at(peer("2001:db8::1")), Client::at(peer("2001:db8:0:1::1")));
    assert_eq!(Client::in_crowd(peer("192.0.2.1")), Client::in_crowd(peer("192.0.9.9")));
    assert_ne!(Client::in_crowd(peer("192.0.2.1")), Client::in_crowd(peer("192.1.2.1")));
}
