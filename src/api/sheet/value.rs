//! Numbers, units and names as people read them.

use maud::{Markup, html};

use super::mathml;
use crate::api::measure::AnyAmount;
use crate::api::render::words::plain;

/// Significant digits of a number; whole digits before the point are all kept.
pub(super) const DIGITS: usize = 4;
/// Digits that tell any two numbers apart.
const ALL_DIGITS: usize = 17;

/// A number in digits, perhaps with a power of ten.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Figure {
    digits: String,
    exponent: Option<String>,
}

impl Figure {
    /// A number with four significant digits.
    #[must_use]
    pub fn of(value: f64) -> Self {
        Self::with(value, DIGITS)
    }

    /// Two numbers with four significant digits, or as many more as show that they differ.
    #[must_use]
    pub fn pair(one: f64, other: f64) -> [Self; 2] {
        let differs = |digits: &usize| Self::with(one, *digits) != Self::with(other, *digits);
        let digits = if one.to_bits() == other.to_bits() {
            DIGITS
        } else {
            (DIGITS..=ALL_DIGITS).find(differs).unwrap_or(DIGITS)
        };
        [Self::with(one, digits), Self::with(other, digits)]
    }

    fn with(value: f64, digits: usize) -> Self {
        let rounded = format!("{value:.*e}", digits.saturating_sub(1));
        let (mantissa, exponent) = rounded.split_once('e').unwrap_or((&rounded, "0"));
        let size: i32 = exponent.parse().unwrap_or_default();
        if (-3..6).contains(&size) {
            let before = usize::try_from(size + 1).unwrap_or(0);
            let after_zeros = usize::try_from(-size - 1).unwrap_or(0);
            let decimals = (digits + after_zeros).saturating_sub(before);
            let digits = trimmed(&format!("{value:.decimals$}"));
            return Self { digits, exponent: None };
        }
        Self { digits: trimmed(mantissa), exponent: Some(exponent.replace('-', "−")) }
    }

    /// In a text.
    #[must_use]
    pub fn html(&self) -> Markup {
        html! {
            (self.digits)
            @if let Some(exponent) = &self.exponent { "×10" sup { (exponent) } }
        }
    }

    /// In a formula.
    #[must_use]
    pub fn math(&self) -> Markup {
        if let Some(exponent) = &self.exponent {
            return mathml::power_of_ten(&self.digits, exponent);
        }
        html! { mn { (self.digits) } }
    }
}

/// Without idle zeros, with a proper minus sign.
fn trimmed(text: &str) -> String {
    let text =
        if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.') } else { text };
    if text == "-0" { "0".to_owned() } else { text.replace('-', "−") }
}

/// A unit's symbol as it is printed; nothing for a ratio.
#[must_use]
pub fn unit(symbol: &str) -> String {
    match symbol {
        "1" => String::new(),
        "degC" => "°C".to_owned(),
        "degF" => "°F".to_owned(),
        _ => in_print(symbol),
    }
}

/// Dots between units, and exponents that are whole.
fn in_print(symbol: &str) -> String {
    let letters: Vec<char> = symbol.chars().collect();
    let is_digit = |place: Option<&char>| place.is_some_and(char::is_ascii_digit);
    let is_point =
        |place: usize| letters.get(place) == Some(&'.') && is_digit(letters.get(place + 1));
    let print = |(place, letter): (usize, &char)| match letter {
        _ if is_point(place) || is_point(place + 1) || (place > 0 && is_point(place - 1)) => {
            *letter
        }
        '.' => '·',
        '2' => '²',
        '3' => '³',
        '4' => '⁴',
        _ => *letter,
    };
    letters.iter().enumerate().map(print).collect()
}

/// A number and its unit, kept on one line.
pub(super) fn amount(amount: &AnyAmount) -> Markup {
    measured(amount.value.0, amount.unit)
}

/// The same from its parts.
pub(super) fn measured(value: f64, symbol: &str) -> Markup {
    figure(&Figure::of(value), symbol)
}

/// A number in digits and its unit.
pub(super) fn figure(figure: &Figure, symbol: &str) -> Markup {
    let unit = unit(symbol);
    html! {
        span.n { (figure.html()) @if !unit.is_empty() { "\u{a0}" (unit) } }
    }
}

/// A number in digits and its unit, inside a formula.
pub(super) fn in_formula(figure: &Figure, symbol: &str) -> Markup {
    let unit = unit(symbol);
    html! {
        mrow { (figure.math()) @if !unit.is_empty() { mtext { "\u{a0}" (unit) } } }
    }
}

/// A name of a program in words.
pub(super) fn words(name: &str) -> String {
    plain(&name.replace('_', " "))
}

/// The same, as it begins a line.
pub(super) fn title(name: &str) -> String {
    capitalized(&words(name))
}

/// A sentence that begins with a capital.
pub(super) fn capitalized(text: &str) -> String {
    let mut letters = text.chars();
    let first = letters.next().map(|first| first.to_uppercase().to_string());
    first.unwrap_or_default() + letters.as_str()
}

/// A caller's own text, without what hides or turns letters.
pub(super) fn own(text: &str) -> String {
    plain(text)
}
