//! Texts in requests, no longer than their schema says.

use serde::de::Error;
use serde::{Deserialize, Deserializer};

/// Reads a text of at most `MOST` characters.
///
/// # Errors
/// No text, or a longer one.
pub fn required<'de, D: Deserializer<'de>, const MOST: usize>(
    deserializer: D,
) -> Result<String, D::Error> {
    no_longer(String::deserialize(deserializer)?, MOST)
}

/// Reads a text of at most `MOST` characters that may be left out.
///
/// # Errors
/// No text, or a longer one. `null` reads as absence; the schema refuses it.
pub fn optional<'de, D: Deserializer<'de>, const MOST: usize>(
    deserializer: D,
) -> Result<Option<String>, D::Error> {
    let text = Option::<String>::deserialize(deserializer)?;
    text.map(|text| no_longer(text, MOST)).transpose()
}

fn no_longer<E: Error>(text: String, most: usize) -> Result<String, E> {
    if text.chars().count() > most {
        return Err(E::custom(format_args!("must have at most {most} characters")));
    }
    Ok(text)
}
