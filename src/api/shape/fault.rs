//! Turns the violations of a schema into faults with pointer, code and sentence.

use jsonschema::ValidationError;
use jsonschema::error::ValidationErrorKind;
use jsonschema::paths::LocationSegment;
use serde_json::Value;

use super::schema::PUBLISHED;
use crate::api::error_code::ShapeCode;
use crate::api::pointer;
use crate::api::problem::{ErrorItem, MOST_ERRORS, Problem};
use crate::calc::fault::FaultCode;
use crate::data::nearest::{LONGEST, nearest};

/// The faults found: all counted, the first ones kept.
#[derive(Debug, Default)]
pub(super) struct Found {
    items: Vec<ErrorItem>,
    total: usize,
}

impl Found {
    pub(super) const fn total(&self) -> usize {
        self.total
    }

    pub(super) fn into_problem(self) -> Problem {
        Problem::invalid(self.items, self.total)
    }

    /// Adds what a violation of `schema` means.
    pub(super) fn add(&mut self, violation: &ValidationError<'_>, schema: &Value) {
        if let ValidationErrorKind::AdditionalProperties { unexpected } = violation.kind() {
            for name in unexpected {
                self.push(|| unknown_member(violation, schema, name));
            }
        } else if let Some(meant) = branch_meant(violation) {
            for inner in meant {
                self.add(inner, schema);
            }
        } else {
            self.push(|| fault(violation, schema));
        }
    }

    fn push(&mut self, item: impl FnOnce() -> ErrorItem) {
        self.total += 1;
        if self.items.len() < MOST_ERRORS {
            self.items.push(item());
        }
    }
}

/// The violations of the one branch of an untagged union whose type the value has.
fn branch_meant<'a>(violation: &'a ValidationError<'_>) -> Option<&'a [ValidationError<'static>]> {
    let (ValidationErrorKind::OneOfNotValid { context } | ValidationErrorKind::AnyOf { context }) =
        violation.kind()
    else {
        return None;
    };
    let fits = |branch: &&Vec<ValidationError<'static>>| {
        !branch.iter().any(|inner| {
            inner.kind().keyword() == "type" && inner.instance_path() == violation.instance_path()
        })
    };
    let mut fitting = context.iter().filter(fits);
    match (fitting.next(), fitting.next()) {
        (Some(only), None) => Some(only),
        _ => None,
    }
}

fn unknown_member(violation: &ValidationError<'_>, schema: &Value, name: &str) -> ErrorItem {
    let place = parent(violation, schema).get("properties").and_then(Value::as_object);
    let known: Vec<&str> =
        place.into_iter().flat_map(|place| place.keys().map(String::as_str)).collect();
    let advice = match nearest(name, known.iter().copied()) {
        Some(meant) => format!("did you mean `{meant}`?"),
        None if known.is_empty() => "no members are known here".to_owned(),
        None => format!("known here: {}", known.join(", ")),
    };
    ErrorItem {
        pointer: pointer_below(violation, Some(name)),
        code: ShapeCode::UnknownMember.as_str(),
        detail: format!("`{}` is not a member of this object; {advice}", shortened(name)),
    }
}

/// The fault of every violation that concerns one value.
fn fault(violation: &ValidationError<'_>, schema: &Value) -> ErrorItem {
    let limit = schema.pointer(violation.schema_path().as_str()).unwrap_or(&Value::Null);
    if let ValidationErrorKind::Required { property } = violation.kind() {
        let name = property.as_str().unwrap_or_default();
        return ErrorItem {
            pointer: pointer_below(violation, Some(name)),
            code: ShapeCode::MissingMember.as_str(),
            detail: format!("`{name}` is required"),
        };
    }
    let value: &Value = violation.instance();
    let (code, detail) = match violation.kind().keyword() {
        _ if value.is_null() => (
            ShapeCode::NullNotAllowed.as_str(),
            "null is not a value; leave the member out".to_owned(),
        ),
        "type" => {
            (ShapeCode::WrongType.as_str(), wrong_type(parent(violation, schema), limit, value))
        }
        "enum" | "const" => wrong_choice(violation, schema, limit),
        "minItems" => (FaultCode::WrongCount.as_str(), format!("must have at least {limit} items")),
        "maxItems" => (FaultCode::WrongCount.as_str(), format!("must have at most {limit} items")),
        "minimum" => (FaultCode::OutOfRange.as_str(), format!("must be at least {limit}")),
        "maximum" => (FaultCode::OutOfRange.as_str(), format!("must be at most {limit}")),
        "exclusiveMinimum" => (FaultCode::OutOfRange.as_str(), format!("must be above {limit}")),
        "exclusiveMaximum" => (FaultCode::OutOfRange.as_str(), format!("must be below {limit}")),
        "minLength" => {
            (FaultCode::OutOfRange.as_str(), format!("must have at least {limit} characters"))
        }
        "maxLength" => {
            (FaultCode::OutOfRange.as_str(), format!("must have at most {limit} characters"))
        }
        "oneOf" | "anyOf" => {
            (ShapeCode::WrongType.as_str(), "fits none of the forms allowed here".to_owned())
        }
        keyword => {
            (ShapeCode::InvalidValue.as_str(), format!("breaks the rule `{keyword}` of the schema"))
        }
    };
    ErrorItem { pointer: pointer_below(violation, None), code, detail }
}

fn wrong_type(place: &Value, expected: &Value, value: &Value) -> String {
    let is_quantity = place.pointer("/properties/unit").is_some();
    if value.is_number() && is_quantity {
        return format!("a quantity needs its unit: write {{\"value\": {value}, \"unit\": ...}}");
    }
    let several = expected.as_array().map_or(std::slice::from_ref(expected), Vec::as_slice);
    let names: Vec<&str> = several.iter().filter_map(Value::as_str).map(type_name).collect();
    format!("must be {}, not {}", names.join(" or "), name_of(value))
}

/// A value that is none of those allowed: a text of the wrong kind is told from a wrong text.
fn wrong_choice(
    violation: &ValidationError<'_>,
    schema: &Value,
    allowed: &Value,
) -> (&'static str, String) {
    let allowed = parent(violation, schema).get(PUBLISHED).unwrap_or(allowed);
    let one = std::slice::from_ref(allowed);
    let allowed = allowed.as_array().map_or(one, Vec::as_slice);
    let texts: Vec<&str> = allowed.iter().filter_map(Value::as_str).collect();
    let value: &Value = violation.instance();
    let Some(text) = value.as_str() else {
        let listed = texts.join(", ");
        return (
            ShapeCode::WrongType.as_str(),
            format!("must be one of {listed}, not {}", name_of(value)),
        );
    };
    let is_unit = matches!(violation.instance_path().segments().last(),
        Some(LocationSegment::Property(name)) if name == "unit");
    let (code, noun) = if is_unit {
        (ShapeCode::UnknownUnit.as_str(), "unit")
    } else {
        (ShapeCode::UnknownValue.as_str(), "value")
    };
    let advice = match nearest(text, texts.iter().copied()) {
        Some(meant) if texts.len() > 1 => format!("did you mean `{meant}`? "),
        _ => String::new(),
    };
    let listed = texts.join(", ");
    let detail =
        format!("`{}` is not a {noun} known here; {advice}Use one of: {listed}", shortened(text));
    (code, if advice.is_empty() { detail.replace("; Use", "; use") } else { detail })
}

/// The schema that holds the keyword which was violated.
fn parent<'a>(violation: &ValidationError<'_>, schema: &'a Value) -> &'a Value {
    let keyword = violation.schema_path().as_str();
    let place = keyword.rsplit_once('/').map_or("", |(place, _)| place);
    schema.pointer(place).unwrap_or(&Value::Null)
}

fn pointer_below(violation: &ValidationError<'_>, member: Option<&str>) -> String {
    let path = violation.instance_path().segments().map(|segment| segment.to_string());
    pointer::fragment(path.chain(member.map(str::to_owned)))
}

fn shortened(name: &str) -> String {
    if name.len() <= LONGEST {
        return name.to_owned();
    }
    name.chars().take(LONGEST / 4).chain("...".chars()).collect()
}

fn type_name(keyword: &str) -> &str {
    match keyword {
        "array" => "a list",
        "boolean" => "true or false",
        "integer" => "a whole number",
        "number" => "a number",
        "object" => "an object",
        "string" => "a text",
        other => other,
    }
}

const fn name_of(value: &Value) -> &'static str {
    match value {
        Value::Null => "null",
        Value::Bool(_) => "true or false",
        Value::Number(_) => "a number",
        Value::String(_) => "a text",
        Value::Array(_) => "a list",
        Value::Object(_) => "an object",
    }
}
