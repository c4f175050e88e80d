//! The candidates of a selection, as they are written: a wrong one must not spoil the others.

use std::fmt;

use serde::Deserialize;
use serde::de::{Deserializer, IgnoredAny, SeqAccess, Visitor};
use serde_json::value::RawValue;
use utoipa::openapi::extensions::ExtensionsBuilder;
use utoipa::openapi::schema::{ArrayBuilder, Schema};
use utoipa::openapi::{Ref, RefOr};
use utoipa::{PartialSchema, ToSchema};

use super::{Candidate, MOST_CANDIDATES};
use crate::api::shape::EACH_ALONE;

/// The choices as they are written, one more than are taken at most. Each is read alone.
#[derive(Debug, Clone)]
pub struct Candidates(pub Vec<Box<RawValue>>);

impl PartialSchema for Candidates {
    fn schema() -> RefOr<Schema> {
        ArrayBuilder::new()
            .items(Ref::from_schema_name(Candidate::name()))
            .min_items(Some(1))
            .max_items(Some(MOST_CANDIDATES))
            .description(Some("1 to 10000 choices of brakes."))
            .extensions(Some(ExtensionsBuilder::new().add(EACH_ALONE, true).build()))
            .into()
    }
}

impl ToSchema for Candidates {
    fn schemas(schemas: &mut Vec<(String, RefOr<Schema>)>) {
        schemas.push((Candidate::name().into_owned(), Candidate::schema()));
        Candidate::schemas(schemas);
    }
}

impl<'de> Deserialize<'de> for Candidates {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_seq(CandidatesVisitor)
    }
}

struct CandidatesVisitor;

impl<'de> Visitor<'de> for CandidatesVisitor {
    type Value = Candidates;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("a list")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut list: A) -> Result<Candidates, A::Error> {
        let mut kept = Vec::new();
        while kept.len() <= MOST_CANDIDATES {
            let Some(candidate) = list.next_element()? else { return Ok(Candidates(kept)) };
            kept.push(candidate);
        }
        while list.next_element::<IgnoredAny>()?.is_some() {}
        Ok(Candidates(kept))
    }
}
