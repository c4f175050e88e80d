//! Counts in requests: whole numbers, also when written as `2.0`. To JSON, and to the schema, that is the same number.
//!
//! A count beyond `u32` reads as the largest one: both lie beyond every limit, and the limit is what is to be told.

use std::fmt;

use serde::Deserializer;
use serde::de::{Error, Unexpected, Visitor};

/// Reads a count.
///
/// # Errors
/// Anything but a whole number from 0 on.
pub fn required<'de, D: Deserializer<'de>>(deserializer: D) -> Result<u32, D::Error> {
    deserializer.deserialize_any(CountVisitor)
}

/// Reads a count that may be left out.
///
/// # Errors
/// Anything but a whole number from 0 on. `null` reads as absence; the schema refuses it.
pub fn optional<'de, D: Deserializer<'de>>(deserializer: D) -> Result<Option<u32>, D::Error> {
    deserializer.deserialize_option(OptionalVisitor)
}

struct CountVisitor;

impl Visitor<'_> for CountVisitor {
    type Value = u32;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("a whole number")
    }

    fn visit_u64<E: Error>(self, number: u64) -> Result<u32, E> {
        Ok(u32::try_from(number).unwrap_or(u32::MAX))
    }

    fn visit_i64<E: Error>(self, number: i64) -> Result<u32, E> {
        u32::try_from(number).map_err(|_| E::invalid_value(Unexpected::Signed(number), &self))
    }

    fn visit_f64<E: Error>(self, number: f64) -> Result<u32, E> {
        if number < 0.0 || number.fract() != 0.0 {
            return Err(E::invalid_value(Unexpected::Float(number), &self));
        }
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "checked above; a larger one becomes the largest"
        )]
        let count = number as u32;
        Ok(count)
    }
}

struct OptionalVisitor;

impl<'de> Visitor<'de> for OptionalVisitor {
    type Value = Option<u32>;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        CountVisitor.expecting(formatter)
    }

    fn visit_none<E>(self) -> Result<Self::Value, E> {
        Ok(None)
    }

    fn visit_unit<E>(self) -> Result<Self::Value, E> {
        Ok(None)
    }

    fn visit_some<D: Deserializer<'de>>(self, deserializer: D) -> Result<Self::Value, D::Error> {
        required(deserializer).map(Some)
    }
}
