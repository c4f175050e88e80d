//! Derives an OpenAPI 3.0 description from the 3.1 one, for generators that read nothing newer.
//!
//! Covers what our own schemas use; the differences are those that the OpenAPI Initiative lists in its
//! guide for upgrading from 3.0 to 3.1, taken backwards.

use serde_json::{Map, Value, json};

/// Media types of streams, which generators for 3.0 cannot read; operations that use one are left out.
const STREAMS: [&str; 2] = ["application/x-ndjson", "application/jsonl"];

/// The document in OpenAPI 3.0.3.
#[must_use]
pub fn from_31(mut document: Value) -> Value {
    if let Some(version) = document.get_mut("openapi") {
        *version = json!("3.0.3");
    }
    if let Some(Value::Object(license)) = document.pointer_mut("/info/license") {
        license.shift_remove("identifier"); // 3.1 only
    }
    if let Some(Value::Object(paths)) = document.get_mut("paths") {
        paths.retain(|_, item| !uses_stream(item));
        paths.values_mut().for_each(find_schemas);
    }
    if let Some(Value::Object(schemas)) = document.pointer_mut("/components/schemas") {
        schemas.values_mut().for_each(convert);
        let unions = schemas.iter().filter(|(_, schema)| schema.get("discriminator").is_some());
        let unions: Vec<Value> =
            unions.map(|(name, _)| json!(format!("#/components/schemas/{name}"))).collect();
        schemas.values_mut().for_each(|schema| refer_plainly(schema, &unions));
    }
    document
}

/// Undoes [`wrap_reference`] where a union is meant: inside an `allOf`, generators take the union for a base type
/// and drop its tag. What stood beside the reference is lost.
fn refer_plainly(schema: &mut Value, unions: &[Value]) {
    match schema {
        Value::Object(members) => {
            let target = members.get("allOf").and_then(|parts| parts.get(0)?.get("$ref")).cloned();
            if let Some(target) = target.filter(|target| unions.contains(target)) {
                *members = Map::from_iter([("$ref".to_owned(), target)]);
            }
            members.values_mut().for_each(|part| refer_plainly(part, unions));
        }
        Value::Array(items) => items.iter_mut().for_each(|item| refer_plainly(item, unions)),
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => {}
    }
}

fn uses_stream(item: &Value) -> bool {
    match item {
        Value::Object(members) => members.iter().any(|(name, part)| {
            name == "content" && STREAMS.iter().any(|stream| part.get(stream).is_some())
                || uses_stream(part)
        }),
        Value::Array(items) => items.iter().any(uses_stream),
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => false,
    }
}

/// Converts the schemas inside an operation: whatever is called `schema`, outside of examples.
fn find_schemas(part: &mut Value) {
    match part {
        Value::Object(members) => {
            for (name, member) in members {
                match name.as_str() {
                    "schema" => convert(member),
                    "example" | "examples" => {}
                    _ => find_schemas(member),
                }
            }
        }
        Value::Array(items) => items.iter_mut().for_each(find_schemas),
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => {}
    }
}

/// Converts a schema and all schemas inside it.
fn convert(schema: &mut Value) {
    let Value::Object(members) = schema else { return };
    for (keyword, part) in members.iter_mut() {
        match (keyword.as_str(), part) {
            ("properties", Value::Object(named)) => named.values_mut().for_each(convert),
            ("oneOf" | "anyOf" | "allOf", Value::Array(listed)) => {
                listed.iter_mut().for_each(convert);
            }
            ("items" | "additionalProperties" | "not", part) => convert(part),
            _ => {}
        }
    }
    null_type_to_nullable(members);
    null_branch_to_nullable(members);
    const_to_enum(members);
    first_example(members);
    exclusive_bound(members, "exclusiveMinimum", "minimum");
    exclusive_bound(members, "exclusiveMaximum", "maximum");
    wrap_reference(members);
    members.shift_remove("propertyNames");
}

/// `type: [x, null]` becomes `type: x, nullable: true`; other lists of types become `anyOf`.
fn null_type_to_nullable(schema: &mut Map<String, Value>) {
    let Some(Value::Array(types)) = schema.get("type").cloned() else { return };
    let named: Vec<&Value> = types.iter().filter(|name| *name != "null").collect();
    if named.len() < types.len() {
        schema.insert("nullable".to_owned(), json!(true));
    }
    if let [only] = named.as_slice() {
        schema.insert("type".to_owned(), (*only).clone());
    } else {
        schema.shift_remove("type");
        let branches: Vec<Value> = named.iter().map(|name| json!({ "type": name })).collect();
        schema.insert("anyOf".to_owned(), Value::Array(branches));
    }
}

/// A branch `type: null` becomes `nullable: true`; what remains alone becomes an `allOf`.
fn null_branch_to_nullable(schema: &mut Map<String, Value>) {
    for keyword in ["oneOf", "anyOf"] {
        let Some(Value::Array(branches)) = schema.get_mut(keyword) else { continue };
        let before = branches.len();
        branches.retain(|branch| branch.get("type") != Some(&json!("null")));
        let (after, rest) = (branches.len(), branches.clone());
        if after < before {
            schema.insert("nullable".to_owned(), json!(true));
        }
        if after < before && after == 1 {
            schema.shift_remove(keyword);
            schema.insert("allOf".to_owned(), Value::Array(rest));
        }
    }
}

fn const_to_enum(schema: &mut Map<String, Value>) {
    if let Some(value) = schema.shift_remove("const") {
        schema.insert("enum".to_owned(), json!([value]));
    }
}

fn first_example(schema: &mut Map<String, Value>) {
    if let Some(Value::Array(examples)) = schema.shift_remove("examples")
        && let Some(first) = examples.into_iter().next()
    {
        schema.insert("example".to_owned(), first);
    }
}

/// In 3.0 an exclusive bound is the bound with a boolean beside it.
fn exclusive_bound(schema: &mut Map<String, Value>, exclusive: &str, bound: &str) {
    if let Some(limit) = schema.get(exclusive).filter(|limit| limit.is_number()).cloned() {
        schema.insert(bound.to_owned(), limit);
        schema.insert(exclusive.to_owned(), json!(true));
    }
}

/// In 3.0 nothing beside a `$ref` counts, so the reference moves into an `allOf`.
fn wrap_reference(schema: &mut Map<String, Value>) {
    if schema.len() > 1
        && let Some(reference) = schema.shift_remove("$ref")
    {
        schema.insert("allOf".to_owned(), json!([{ "$ref": reference }]));
    }
}
