//! The net under the schema: what the JSON parser and the decoder themselves say.

use serde::de::DeserializeOwned;
use serde_json::Value;
use serde_json::error::Category;
use serde_path_to_error::{Path, Segment};

use crate::api::error_code::ShapeCode;
use crate::api::pointer;
use crate::api::problem::{ErrorItem, Problem, ProblemKind};
use crate::calc::fault::FaultCode;

/// Reads a body as JSON of any shape.
pub(super) fn parse(body: &[u8]) -> Result<Value, Problem> {
    let mut deserializer = serde_json::Deserializer::from_slice(body);
    let document = serde_path_to_error::deserialize(&mut deserializer).map_err(|error| {
        let place = pointer_of(error.path());
        unreadable(error.inner(), place)
    })?;
    deserializer.end().map_err(|error| unreadable(&error, pointer::fragment::<&str>([])))?;
    Ok(document)
}

/// A number that no double can hold is well-formed JSON: it is a wrong value, not a broken text.
fn unreadable(error: &serde_json::Error, pointer: String) -> Problem {
    let (line, column) = (error.line(), error.column());
    let reason = without_place(error);
    if reason == "number out of range" {
        let detail = "the number is too large for a double".to_owned();
        return Problem::invalid(
            vec![ErrorItem { pointer, code: FaultCode::OutOfRange.as_str(), detail }],
            1,
        );
    }
    let reason = match reason.as_str() {
        "recursion limit exceeded" => "objects and lists are nested deeper than 128 levels",
        other => other,
    };
    Problem::malformed(format!("{reason}, at line {line}, column {column}"), line, column)
}

/// Why the decoder refuses a body in which the schema finds no fault.
pub(super) fn reason<T: DeserializeOwned>(body: &[u8]) -> Problem {
    let mut deserializer = serde_json::Deserializer::from_slice(body);
    let outcome = serde_path_to_error::deserialize::<_, T>(&mut deserializer);
    let Err(error) = outcome else {
        return Problem::of_kind(ProblemKind::Internal); // it was refused a moment ago
    };
    let (pointer, inner) = (pointer_of(error.path()), error.into_inner());
    debug_assert_eq!(inner.classify(), Category::Data, "the text has been parsed before");
    let item = ErrorItem {
        pointer,
        code: ShapeCode::InvalidValue.as_str(),
        detail: without_place(&inner),
    };
    Problem::invalid(vec![item], 1)
}

fn pointer_of(path: &Path) -> String {
    pointer::fragment(path.iter().filter_map(|segment| match segment {
        Segment::Seq { index } => Some(index.to_string()),
        Segment::Map { key } => Some(key.clone()),
        Segment::Enum { .. } | Segment::Unknown => None,
    }))
}

/// The message without its " at line 1 column 2".
fn without_place(error: &serde_json::Error) -> String {
    let message = error.to_string();
    let place = format!(" at line {} column {}", error.line(), error.column());
    message.strip_suffix(&place).unwrap_or(&message).to_owned()
}
