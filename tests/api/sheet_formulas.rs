//! What is typeset on the calculation sheet: equations, and the numbers put in.

use brakewright::api::sheet::mathml::equations;
use brakewright::api::sheet::value::{Figure, unit};
use brakewright::calc::case::spec_check::{Criterion, Sense};
use brakewright::calc::finding::CheckCode;
use brakewright::calc::method_index;
use scraper::{Html, Selector};
use serde_json::Value;

use super::sheet::{all, failing, sheet, words};
use crate::support::client::TestApp;

/// What is typeset, without the marks that only readers with ears meet.
fn typeset(text: &str) -> String {
    equations(text).into_string().replace("<mo>\u{2062}</mo>", "").replace("<mo>\u{2061}</mo>", "")
}

fn formula(text: &str) -> String {
    let typeset = typeset(text);
    let inside = typeset.strip_prefix("<p class=\"eq\"><math displaystyle=\"true\">");
    inside.and_then(|inside| inside.strip_suffix("</math></p>")).unwrap_or(&typeset).to_owned()
}

const BRACKETED: &str =
    "<mrow><mo fence=\"true\">(</mo><mi>a</mi><mo>+</mo><mi>b</mi><mo fence=\"true\">)</mo></mrow>";

#[test]
fn plain_equations_become_mathml() {
    for (plain, expected) in [
        ("r_e", "<msub><mi>r</mi><mi>e</mi></msub>".to_owned()),
        ("p_max", "<msub><mi>p</mi><mtext>max</mtext></msub>".to_owned()),
        ("r_o^2", "<msubsup><mi>r</mi><mi>o</mi><mn>2</mn></msubsup>".to_owned()),
        ("T1", "<msub><mi>T</mi><mn>1</mn></msub>".to_owned()),
        ("2.4e5", "<mrow><mn>2.4</mn><mo>×</mo><msup><mn>10</mn><mn>5</mn></msup></mrow>".to_owned()),
        ("a <= theta", "<mi>a</mi><mo>≤</mo><mi>θ</mi>".to_owned()),
        ("x (a + b)", format!("<mi>x</mi>{BRACKETED}")),
        ("h(a + b)", format!("<mrow><mi>h</mi>{BRACKETED}</mrow>")),
        (
            "x (a + b)/2",
            "<mi>x</mi><mfrac><mrow><mi>a</mi><mo>+</mo><mi>b</mi></mrow><mrow><mn>2</mn></mrow></mfrac>"
                .to_owned(),
        ),
        ("(a + b)^2", format!("<msup>{BRACKETED}<mn>2</mn></msup>")),
        (
            "dv/dt",
            "<mfrac><mrow><mrow><mi>d</mi><mi>v</mi></mrow></mrow><mrow><mrow><mi>d</mi><mi>t</mi></mrow></mrow></mfrac>"
                .to_owned(),
        ),
        ("sqrt(k)", "<msqrt><mi>k</mi></msqrt>".to_owned()),
        ("sum of F_i", "<mo>∑</mo><msub><mi>F</mi><mi>i</mi></msub>".to_owned()),
        ("T_(i-1)", "<msub><mi>T</mi><mrow><mi>i</mi><mo>−</mo><mn>1</mn></mrow></msub>".to_owned()),
    ] {
        assert_eq!(formula(plain), expected, "{plain}");
    }
}

#[test]
fn a_function_over_a_number_is_one_numerator() {
    // r_F = r_e 2 sin(theta/2)/theta: theta is below the sine, not below its argument alone.
    let typeset = formula("2 sin(theta/2)/theta");
    let numerator = "<mfrac><mrow><mrow><mi>sin</mi><mrow><mo fence=\"true\">(</mo><mfrac>";
    assert!(typeset.contains(numerator), "{typeset}");
    assert!(typeset.ends_with("<mrow><mi>θ</mi></mrow></mfrac>"), "{typeset}");
}

#[test]
fn words_stand_between_formulas_and_each_equation_on_its_line() {
    let math = |inside: &str| format!("<math displaystyle=\"true\">{inside}</math>");
    assert_eq!(
        typeset("F = x, not below 0; build-up of a pad"),
        format!(
            "<p class=\"eq\">{}, not below {}</p><p class=\"eq\">build-up of a pad</p>",
            math("<mi>F</mi><mo>=</mo><mi>x</mi>"),
            math("<mn>0</mn>")
        )
    );
}

#[test]
fn every_equation_is_typeset_in_full() {
    let mut texts: Vec<&str> = method_index::all().map(|method| method.equation).collect();
    texts.extend(CheckCode::ALL.iter().map(|code| Criterion::of(*code).equation));
    for text in texts.into_iter().filter(|text| !text.is_empty()) {
        let page = Html::parse_fragment(&equations(text).into_string());
        assert_eq!(page.errors, Vec::<String>::new(), "{text}");
        let shown: String = page.root_element().text().collect();
        assert!(!shown.contains(['_', '^', ';', '*']), "{text}: {shown}");
        for name in ["theta", "lambda", "gamma", "integral of", "sqrt", "<="] {
            assert!(!shown.contains(name), "{text}: {shown}");
        }
        // Every sign of equality, digit and bracket that is not below a fraction line is still there.
        let count = |text: &str, sign: char| text.matches(sign).count();
        assert_eq!(
            count(&shown, '='),
            count(text, '=') - text.matches("<=").count(),
            "{text}: {shown}"
        );
        assert_eq!(count(&shown, '('), count(&shown, ')'), "{text}: {shown}");
        let fractions = page.select(&Selector::parse("mfrac").unwrap()).count();
        assert_eq!(fractions, count(text, '/'), "{text}: {shown}");
    }
}

#[test]
fn numbers_have_four_significant_digits() {
    for (value, expected) in [
        (0.0, "0"),
        (1.0, "1"),
        (-0.5, "−0.5"),
        (0.123_456, "0.1235"),
        (0.001_234_56, "0.001235"),
        (12.345_6, "12.35"),
        (9_851.2, "9851"),
        (123_456.7, "123457"),
        (1_234_567.0, "1.235×10<sup>6</sup>"),
        (0.000_123_4, "1.234×10<sup>−4</sup>"),
        (99.999_9, "100"),
        (0.999_99, "1"),
    ] {
        assert_eq!(Figure::of(value).html().into_string(), expected, "{value}");
    }
}

#[test]
fn numbers_that_differ_never_look_alike() {
    for (one, other) in [(1.000_01, 1.0), (25.000_4, 25.0), (0.1 + 0.2, 0.3), (2e9 + 1.0, 2e9)] {
        let [one, other] = Figure::pair(one, other).map(|figure| figure.html().into_string());
        assert_ne!(one, other);
    }
    assert_eq!(Figure::pair(2.0, 2.0)[0], Figure::of(2.0));
}

#[test]
fn units_are_printed_as_people_write_them() {
    for (symbol, expected) in [
        ("1", ""),
        ("degC", "°C"),
        ("N.m", "N·m"),
        ("m/s2", "m/s²"),
        ("W/(m2.K4)", "W/(m²·K⁴)"),
        ("W.s0.5/(m2.K)", "W·s0.5/(m²·K)"),
    ] {
        assert_eq!(unit(symbol), expected, "{symbol}");
    }
}

fn number(amount: &Value) -> Option<f64> {
    amount["value"].as_f64()
}

#[tokio::test]
async fn the_formula_of_each_check_gives_its_utilization() {
    let body = failing();
    let answer = TestApp::new().post("/v1/spec-check", &body.to_string(), 200).await;
    let air = body["ambient_temperature"]["value"].as_f64().unwrap();
    let mut seen = std::collections::BTreeSet::new();
    for check in answer["results"]["checks"].as_array().unwrap() {
        let code = check["code"].as_str().unwrap();
        let code = CheckCode::ALL.iter().find(|known| known.as_str() == code).unwrap();
        let (Some(actual), Some(limit)) = (number(&check["actual"]), number(&check["limit"]))
        else {
            continue;
        };
        let expected = match Criterion::of(*code).sense {
            Sense::AtMost | Sense::Effort => actual / limit,
            Sense::AtLeast => limit / actual,
            Sense::RiseAtMost => (actual - air) / (limit - air),
        };
        let used = check["utilization"].as_f64().unwrap();
        assert!((used - expected).abs() <= 1e-9 * expected.abs(), "{code:?}: {used}, {expected}");
        seen.insert(code.as_str());
    }
    assert!(seen.len() >= 18, "{seen:?}");
}

#[tokio::test]
async fn a_holding_factor_shows_the_forces_behind_it() {
    let page = sheet(&failing()).await;
    let formulas: Vec<String> = all(&page, ".formula").into_iter().map(words).collect();
    let holding = formulas.iter().find(|text| text.starts_with("Holding torque")).unwrap();
    // n = B/H = N over N = n
    assert!(holding.contains("n=BH="), "{holding}");
    assert_eq!(holding.matches("\u{a0}N").count() + holding.matches(" N").count(), 2, "{holding}");
}
