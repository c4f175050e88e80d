//! The last gate of every answer: NaN, infinities and `null` never leave.

use std::fmt;
use std::io::{Error, Result as Written, Write};

use serde::ser::Error as _;
use serde::{Serialize, Serializer};
use serde_json::ser::Formatter;

/// An answer holds a number that is not finite: the calculation overflowed.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct NotFinite;

impl fmt::Display for NotFinite {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("a number of the answer is not finite")
    }
}

impl std::error::Error for NotFinite {}

/// A bare number of an answer. Writing one that is not finite fails instead of giving `null`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Finite(pub f64);

impl Serialize for Finite {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        if self.0.is_finite() {
            serializer.serialize_f64(self.0)
        } else {
            Err(S::Error::custom(NotFinite))
        }
    }
}

/// The JSON text of an answer.
///
/// # Errors
/// A number anywhere in `value` is not finite, or an absent member was not left out. Nothing else in an answer can
/// fail to be written.
pub fn to_json<T: Serialize + ?Sized>(value: &T) -> Result<Vec<u8>, NotFinite> {
    let mut bytes = Vec::with_capacity(1024);
    let mut serializer = serde_json::Serializer::with_formatter(&mut bytes, WithoutNull);
    value.serialize(&mut serializer).map_err(|_| NotFinite)?;
    Ok(bytes)
}

/// JSON has no NaN: the library writes `null` for one that is no [`Finite`], and that is where it is caught.
struct WithoutNull;

impl Formatter for WithoutNull {
    fn write_null<W: Write + ?Sized>(&mut self, _: &mut W) -> Written<()> {
        Err(Error::other(NotFinite))
    }
}
