//! The published schema of a request type, rewritten so that validating it names each fault once.
//!
//! The rewritten schema accepts what the published one accepts, and more units. Some things differ:
//! a tagged union is decided by its tag, so that only the branch meant is searched; an `enum` stands
//! without `type`, so that a wrong value is one fault; the items of a list are searched only if the
//! list is not too long, so that an endless list is one fault.

use serde_json::{Map, Value, json};
use utoipa::ToSchema;

/// Given the published symbols of a unit, the other codes that are accepted in their place.
pub type MoreUnits = fn(&[&str]) -> Vec<String>;

/// The keyword under which a widened `enum` keeps what is published.
pub(super) const PUBLISHED: &str = "x-published";

/// The mark of a list in the description whose items are each refused alone.
pub const EACH_ALONE: &str = "x-each-refused-alone";

/// Where the schemas of a description are.
const SCHEMAS: &str = "#/components/schemas/";

/// The schema of `T` with everything it refers to, ready for a validator.
#[must_use]
pub fn validation_schema<T: ToSchema>(more_units: MoreUnits) -> Value {
    let mut schemas = vec![(T::name().into_owned(), T::schema())];
    T::schemas(&mut schemas);
    let published: Map<String, Value> = schemas
        .into_iter()
        .map(|(name, schema)| (name, serde_json::to_value(schema).unwrap_or_default()))
        .collect();
    let mut rewritten = published.clone();
    for schema in rewritten.values_mut() {
        rewrite(schema, &published, more_units);
    }
    json!({ "$ref": format!("{SCHEMAS}{}", T::name()), "components": { "schemas": rewritten } })
}

/// Rewrites a schema and all schemas inside it.
fn rewrite(schema: &mut Value, published: &Map<String, Value>, more_units: MoreUnits) {
    for_each_part(schema, &mut |part| rewrite(part, published, more_units));
    accept_more_units(schema, published, more_units);
    let Value::Object(schema) = schema else { return };
    if schema.contains_key(EACH_ALONE) {
        schema.shift_remove("items");
    }
    if schema.contains_key("enum") || schema.contains_key("const") {
        schema.shift_remove("type");
    }
    decide_by_tag(schema, published);
    guard_items(schema);
}

/// Calls `visit` with each schema directly inside `schema`.
fn for_each_part(schema: &mut Value, visit: &mut dyn FnMut(&mut Value)) {
    let Value::Object(schema) = schema else { return };
    for (keyword, part) in schema {
        match (keyword.as_str(), part) {
            ("properties" | "patternProperties" | "$defs", Value::Object(named)) => {
                named.values_mut().for_each(&mut *visit);
            }
            ("oneOf" | "anyOf" | "allOf" | "prefixItems", Value::Array(listed)) => {
                listed.iter_mut().for_each(&mut *visit);
            }
            ("items" | "additionalProperties" | "not", part) => visit(part),
            _ => {}
        }
    }
}

/// Widens the unit of a quantity, a schema with exactly the properties `value` and `unit`.
pub fn accept_more_units(
    schema: &mut Value,
    published: &Map<String, Value>,
    more_units: MoreUnits,
) {
    let Some(Value::Object(properties)) = schema.get_mut("properties") else { return };
    if properties.len() != 2 || !properties.contains_key("value") {
        return;
    }
    let Some(unit) = properties.get_mut("unit") else { return };
    let Some(symbols) = resolve(unit, published).get("enum").cloned() else { return };
    let plain: Vec<&str> =
        symbols.as_array().into_iter().flatten().filter_map(Value::as_str).collect();
    let more = more_units(&plain);
    let all: Vec<&str> = plain.iter().copied().chain(more.iter().map(String::as_str)).collect();
    *unit = json!({ "enum": all, PUBLISHED: plain });
}

/// Follows a `$ref`, also one that stands alone in an `allOf`, to the published schema.
fn resolve<'a>(schema: &'a Value, published: &'a Map<String, Value>) -> &'a Value {
    let only = match schema.get("allOf").and_then(Value::as_array).map(Vec::as_slice) {
        Some([only]) => only,
        _ => schema,
    };
    let target = only.get("$ref").and_then(Value::as_str);
    target.and_then(|target| published.get(target.strip_prefix(SCHEMAS)?)).unwrap_or(only)
}

/// Turns a `oneOf` with a discriminator into one `if`/`then` per tag.
fn decide_by_tag(schema: &mut Map<String, Value>, published: &Map<String, Value>) {
    let Some(branches) = branches(schema, published) else { return };
    let Some(Value::Object(discriminator)) = schema.shift_remove("discriminator") else { return };
    let Some(tag) = discriminator.get("propertyName").and_then(Value::as_str) else { return };
    schema.shift_remove("oneOf");
    let tags: Vec<&str> = branches.iter().map(|(value, _)| value.as_str()).collect();
    let allowed = json!({ tag: { "enum": tags } });
    let decided = branches.iter().map(|(value, branch)| {
        let meant = json!({ "type": "object", "required": [tag], "properties": { tag: { "const": value } } });
        json!({ "if": meant, "then": branch })
    });
    let decided = Value::Array(decided.collect());
    schema.insert("type".to_owned(), json!("object"));
    schema.insert("required".to_owned(), json!([tag]));
    schema.insert("properties".to_owned(), allowed);
    schema.insert("allOf".to_owned(), decided);
}

/// The branches of a tagged union, each with the value of the tag that means it.
fn branches(
    schema: &Map<String, Value>,
    published: &Map<String, Value>,
) -> Option<Vec<(String, Value)>> {
    let discriminator = schema.get("discriminator")?;
    let listed = schema.get("oneOf")?.as_array()?;
    if let Some(Value::Object(mapping)) = discriminator.get("mapping") {
        return Some(
            mapping
                .iter()
                .map(|(value, target)| (value.clone(), json!({ "$ref": target })))
                .collect(),
        );
    }
    let tag = discriminator.get("propertyName")?.as_str()?;
    listed.iter().map(|branch| Some((tag_of(branch, tag, published)?, branch.clone()))).collect()
}

/// The one value that a branch allows its tag.
fn tag_of(branch: &Value, tag: &str, published: &Map<String, Value>) -> Option<String> {
    let member = resolve(branch, published).get("properties")?.get(tag)?;
    let member = resolve(member, published);
    let value = member.get("const").or_else(|| member.get("enum")?.get(0))?;
    value.as_str().map(str::to_owned)
}

/// Lets the items of a bounded list be searched only if the list is not too long.
fn guard_items(schema: &mut Map<String, Value>) {
    let Some(most) = schema.get("maxItems").cloned() else { return };
    let Some(items) = schema.shift_remove("items") else { return };
    schema.insert("if".to_owned(), json!({ "maxItems": most }));
    schema.insert("then".to_owned(), json!({ "items": items }));
}
