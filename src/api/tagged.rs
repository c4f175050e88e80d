//! Unions that are told apart by a tag, in a form that client generators digest.
//!
//! Each variant is a named struct with a member that can hold only its tag; the union's schema refers to them and
//! names the tag as discriminator. Decoding reads the tag first, so an error speaks of the variant that was meant.

use std::borrow::Cow;
use std::fmt;

use serde::de::{self, IgnoredAny, MapAccess, Visitor};
use serde::{Deserialize, Deserializer};

/// Finds the text under `key` in an object, if it is there.
///
/// # Errors
/// The text is not an object.
pub fn tag_of(object: &str, key: &'static str) -> Result<Option<String>, serde_json::Error> {
    let mut deserializer = serde_json::Deserializer::from_str(object);
    deserializer.deserialize_map(TagVisitor(key))
}

struct TagVisitor(&'static str);

impl<'de> Visitor<'de> for TagVisitor {
    type Value = Option<String>;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(formatter, "an object with {}", self.0)
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Self::Value, A::Error> {
        let mut tag = None;
        while let Some(Name(name)) = map.next_key()? {
            if name == self.0 && tag.is_none() {
                tag = Some(map.next_value()?);
            } else {
                map.next_value::<IgnoredAny>()?;
            }
        }
        Ok(tag)
    }
}

/// A member name, borrowed where the text allows it.
#[derive(Deserialize)]
struct Name<'a>(#[serde(borrow)] Cow<'a, str>);

/// The error of a tag that is missing or not known.
#[must_use]
pub fn unknown_tag<E: de::Error>(
    key: &'static str,
    tag: Option<&str>,
    known: &'static [&'static str],
) -> E {
    match tag {
        Some(tag) => E::unknown_variant(tag, known),
        None => E::missing_field(key),
    }
}

/// Declares a member that can hold only one word.
#[macro_export]
macro_rules! only_word {
    ($($(#[$meta:meta])* $name:ident = $word:tt;)*) => {$(
        $(#[$meta])*
        #[derive(Debug, Clone, Copy, PartialEq, Eq, serde::Deserialize, utoipa::ToSchema)]
        pub enum $name {
            /// The only word.
            #[serde(rename = $word)]
            Only,
        }
    )*};
}

/// Declares a union of structs that are told apart by the member `$key`.
#[macro_export]
macro_rules! tagged_union {
    ($(#[doc = $doc:literal])* $name:ident by $key:literal { $($tag:literal => $variant:ident($type:ty),)* }) => {
        $(#[doc = $doc])*
        #[derive(Debug, Clone, PartialEq)]
        pub enum $name {
            $(#[doc = concat!("`", $tag, "`")] $variant($type),)*
        }

        impl<'de> serde::Deserialize<'de> for $name {
            fn deserialize<D: serde::Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
                use serde::de::Error as _;
                let raw = <&serde_json::value::RawValue>::deserialize(deserializer)?;
                let tag = $crate::api::tagged::tag_of(raw.get(), $key).map_err(D::Error::custom)?;
                match tag.as_deref() {
                    $(Some($tag) => serde_json::from_str(raw.get()).map(Self::$variant).map_err(D::Error::custom),)*
                    other => Err($crate::api::tagged::unknown_tag($key, other, &[$($tag),*])),
                }
            }
        }

        impl utoipa::PartialSchema for $name {
            fn schema() -> utoipa::openapi::RefOr<utoipa::openapi::schema::Schema> {
                use utoipa::ToSchema as _;
                use utoipa::openapi::schema::{Discriminator, OneOfBuilder};
                let reference = |name: &str| format!("#/components/schemas/{name}");
                let mapping = [$(($tag, reference(&<$type>::name()))),*];
                OneOfBuilder::new()
                    .description(Some(concat!($($doc, "\n"),*).trim()))
                    $(.item(utoipa::openapi::Ref::new(reference(&<$type>::name()))))*
                    .discriminator(Some(Discriminator::with_mapping($key, mapping)))
                    .into()
            }
        }

        impl utoipa::ToSchema for $name {
            fn schemas(
                schemas: &mut Vec<(String, utoipa::openapi::RefOr<utoipa::openapi::schema::Schema>)>,
            ) {
                $(
                    schemas.push((<$type>::name().into_owned(), <$type as utoipa::PartialSchema>::schema()));
                    <$type>::schemas(schemas);
                )*
            }
        }
    };
}
