//! The closed set of fault codes of a request: those of its shape and those of its physics.

use std::borrow::Cow;

use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use crate::calc::fault::FaultCode;

macro_rules! shape_codes {
    ($($name:ident = $code:literal, $meaning:literal;)*) => {
        /// What can be wrong with the shape of a request, before its physics is looked at.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum ShapeCode { $(#[doc = $meaning] $name,)* }

        impl ShapeCode {
            /// Every code, in the order of this table.
            pub const ALL: &'static [Self] = &[$(Self::$name,)*];

            /// The code that programs read.
            #[must_use]
            pub const fn as_str(self) -> &'static str {
                match self { $(Self::$name => $code,)* }
            }
        }
    };
}

shape_codes! {
    WrongType = "wrong_type", "A value has another JSON type than asked for.";
    NullNotAllowed = "null_not_allowed", "Null is given; leave the member out instead.";
    MissingMember = "missing_member", "A required member is not there.";
    UnknownMember = "unknown_member", "A member that the request does not know.";
    UnknownUnit = "unknown_unit", "A unit that the dimension does not have.";
    UnknownValue = "unknown_value", "A word that is not one of those allowed.";
    InvalidValue = "invalid_value", "A value that cannot be read.";
}

/// Every code of a fault, for the description.
#[must_use]
pub fn all() -> Vec<&'static str> {
    let shape = ShapeCode::ALL.iter().map(|code| code.as_str());
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
