//! The friction letters of SAE J866.
//!
//! The code identifies a lining by its friction in one small-sample test. It sets no requirement and does
//! not predict how a brake performs.

use std::sync::LazyLock;

use serde::Deserialize;

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::friction::Friction;
use crate::calc::method::Provenance;

/// The table's text.
pub const TEXT: &str = include_str!("friction_codes.toml");

/// The table of letters.
#[derive(Debug, Clone, Default, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FrictionLetters {
    /// Who published it.
    pub source: String,
    /// `seen` or `memory`.
    pub provenance: String,
    /// The letters, from low to high friction.
    #[serde(rename = "letter")]
    pub letters: Vec<FrictionLetter>,
}

impl FrictionLetters {
    /// How it was found; what is not marked seen counts as remembered.
    #[must_use]
    pub fn found(&self) -> Provenance {
        Provenance::named(&self.provenance).unwrap_or(Provenance::Memory)
    }
}

/// A letter and the friction it stands for.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FrictionLetter {
    /// The letter.
    pub letter: char,
    /// Over this coefficient.
    pub low: Option<f64>,
    /// But not over this one.
    pub high: Option<f64>,
}

/// Reads a table.
///
/// # Errors
/// Text that is not such a table.
pub fn parse(text: &str) -> Result<FrictionLetters, String> {
    toml::from_str(text).map_err(|error| error.to_string())
}

/// The table. A test proves that its text can be read.
#[must_use]
pub fn table() -> &'static FrictionLetters {
    static TABLE: LazyLock<FrictionLetters> = LazyLock::new(|| parse(TEXT).unwrap_or_default());
    &TABLE
}

/// The friction of a two-letter code: low, middle and high of the first letter; the second is not used.
///
/// # Errors
/// At the code itself: not two letters of the table in upper case, or a first letter without two bounds.
pub fn friction_code(code: &str) -> Result<Friction, Faults> {
    let find = |letter: char| table().letters.iter().find(|row| row.letter == letter);
    let mut letters = code.chars();
    let (Some(row), Some(_), None) =
        (letters.next().and_then(find), letters.next().and_then(find), letters.next())
    else {
        let detail = "must be two of the letters C, D, E, F, G, H, Z, in upper case";
        return refuse(FaultCode::UnknownId, detail.to_owned());
    };
    match (row.low, row.high) {
        (Some(low), Some(high)) => {
            // The published bounds are in order; a fault here would belong to the code as a whole.
            let mut faults = Faults::new();
            faults.part("", Friction::range(low, None, high)).ok_or(faults)
        }
        bounds => refuse(FaultCode::UnboundedFrictionCode, unbounded(row.letter, bounds)),
    }
}

fn refuse(code: FaultCode, detail: String) -> Result<Friction, Faults> {
    let mut faults = Faults::new();
    faults.add("", code, detail);
    Err(faults)
}

fn unbounded(letter: char, bounds: (Option<f64>, Option<f64>)) -> String {
    let meaning = match bounds {
        (None, Some(high)) => format!("stands for friction not over {high}, without a lower bound"),
        (Some(low), None) => format!("stands for friction over {low}, without an upper bound"),
        _ => "stands for unclassified friction".to_owned(),
    };
    format!("first letter {letter} {meaning}; give the friction itself")
}
