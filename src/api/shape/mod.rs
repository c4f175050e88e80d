//! What is wrong with the shape of a body, all of it at once.
//!
//! A body is first decoded into its type. Only when that fails it is held against the type's published
//! schema, which finds every fault in one pass and cannot disagree with the description.

mod duplicate;
mod fault;
mod net;
mod schema;

use std::any::TypeId;
use std::collections::HashMap;
use std::sync::{Arc, LazyLock, Mutex, PoisonError};

use jsonschema::Validator;
use serde::de::DeserializeOwned;
use serde_json::Value;
use utoipa::ToSchema;

use super::problem::Problem;

pub use schema::{EACH_ALONE, MoreUnits, accept_more_units, validation_schema};

/// Decodes a body, or says everything that is wrong with it.
///
/// `more_units` gives the codes that are accepted beside the published symbols of a unit.
///
/// # Errors
/// 400 if the text is not JSON or names a member twice; 422 with the faults if it is not a `T`.
pub fn decode<T>(body: &[u8], more_units: MoreUnits) -> Result<T, Problem>
where
    T: DeserializeOwned + ToSchema + 'static,
{
    match serde_json::from_slice(body) {
        Ok(value) if !mentions_null(body) => Ok(value),
        // To the decoder an optional member may be null; to the schema, and to clients, it may not.
        Ok(value) => explain::<T>(body, more_units).map_or(Ok(value), Err),
        Err(_) => {
            let found = explain::<T>(body, more_units);
            Err(found.unwrap_or_else(|| net::reason::<T>(body)))
        }
    }
}

/// Whether the letters occur, be it as a value or in a text.
fn mentions_null(body: &[u8]) -> bool {
    body.windows(4).any(|letters| letters == b"null")
}

/// Finds out what is wrong with `body`. The order matters: a later step relies on what an earlier one excludes.
fn explain<T: ToSchema + 'static>(body: &[u8], more_units: MoreUnits) -> Option<Problem> {
    let document: Value = match net::parse(body) {
        Ok(document) => document,
        Err(problem) => return Some(problem),
    };
    if let Some(pointer) = duplicate::first(body) {
        return Some(Problem::duplicate(pointer));
    }
    let found = shape_of::<T>(more_units)?.faults(&document);
    (found.total() > 0).then(|| found.into_problem())
}

/// The compiled schema of a request type.
#[derive(Debug)]
struct Shape {
    schema: Value,
    validator: Validator,
}

impl Shape {
    fn faults(&self, document: &Value) -> fault::Found {
        let mut found = fault::Found::default();
        for violation in self.validator.iter_errors(document) {
            found.add(&violation, &self.schema);
        }
        found
    }
}

/// Compiled schemas by request type: made at the first failure of a type, then kept.
static SHAPES: LazyLock<Mutex<HashMap<TypeId, Arc<Shape>>>> = LazyLock::new(Mutex::default);

fn shape_of<T: ToSchema + 'static>(more_units: MoreUnits) -> Option<Arc<Shape>> {
    let shapes = || SHAPES.lock().unwrap_or_else(PoisonError::into_inner);
    if let Some(shape) = shapes().get(&TypeId::of::<T>()) {
        return Some(Arc::clone(shape));
    }
    // Compiled outside the lock: meanwhile other types are served; at worst a type is compiled twice.
    let shape = Arc::new(compile::<T>(more_units)?);
    shapes().insert(TypeId::of::<T>(), Arc::clone(&shape));
    Some(shape)
}

fn compile<T: ToSchema>(more_units: MoreUnits) -> Option<Shape> {
    let schema = validation_schema::<T>(more_units);
    match jsonschema::draft202012::new(&schema) {
        Ok(validator) => Some(Shape { schema, validator }),
        Err(error) => {
            tracing::error!(schema = %T::name(), %error, "a request schema cannot be compiled");
            None
        }
    }
}
