//! The closed set of fault codes of a request: those of its shape and those of its physics.

use std::borrow::Cow;

use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use crate::calc::fault::FaultCode;

/// What can be wrong with the shape of a request, before its physics is looked at.
pub const SHAPE: &[(&str, &str)] = &[
    ("wrong_type", "a value has another JSON type than asked for"),
    ("null_not_allowed", "null is given; leave the member out instead"),
    ("missing_member", "a required member is not there"),
    ("unknown_member", "a member that the request does not know"),
    ("unknown_unit", "a unit that the dimension does not have"),
    ("unknown_value", "a word that is not one of those allowed"),
    ("invalid_value", "a value that cannot be read"),
];

/// Every code of a fault, for the description.
#[must_use]
pub fn all() -> Vec<&'static str> {
    let shape = SHAPE.iter().map(|(code, _)| *code);
    shape.chain(FaultCode::ALL.iter().map(|code| code.as_str())).collect()
}

/// The schema of a fault's code.
#[derive(Debug, Clone, Copy)]
pub struct ErrorCode;

impl PartialSchema for ErrorCode {
    fn schema() -> RefOr<Schema> {
        ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(all()))
            .description(Some("What is wrong with a value of the request. A closed set."))
            .into()
    }
}

impl ToSchema for ErrorCode {
    fn name() -> Cow<'static, str> {
        Cow::Borrowed("ErrorCode")
    }
}
