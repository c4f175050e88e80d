//! JSON laid out for people: whatever is short enough stands on one line.

use serde_json::Value;

/// Longest line that is not broken, indentation included.
const WIDTH: usize = 110;

/// The document with short lists and objects on one line each, and a line end.
pub(crate) fn readable(document: &Value) -> String {
    let mut text = String::new();
    write(document, 0, 0, &mut text);
    text + "\n"
}

/// Writes a part that begins after `used` characters of its line.
fn write(part: &Value, indent: usize, used: usize, text: &mut String) {
    let line = one_line(part);
    // The document itself is always broken.
    if indent + used + line.len() <= WIDTH && (indent > 0 || is_empty(part)) {
        *text += &line;
        return;
    }
    match part {
        Value::Object(members) => {
            let members = members.iter().map(|(name, member)| (Some(name), member));
            block(members, ['{', '}'], indent, text);
        }
        Value::Array(items) => {
            block(items.iter().map(|item| (None, item)), ['[', ']'], indent, text);
        }
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => *text += &line,
    }
}

fn block<'a>(
    parts: impl Iterator<Item = (Option<&'a String>, &'a Value)>,
    [open, close]: [char; 2],
    indent: usize,
    text: &mut String,
) {
    text.push(open);
    for (index, (name, part)) in parts.enumerate() {
        *text += if index == 0 { "\n" } else { ",\n" };
        *text += &" ".repeat(indent + 2);
        let name = name.map_or(String::new(), |name| format!("{}: ", Value::from(name.as_str())));
        *text += &name;
        write(part, indent + 2, name.len(), text);
    }
    text.push('\n');
    *text += &" ".repeat(indent);
    text.push(close);
}

fn is_empty(part: &Value) -> bool {
    part.as_array().is_some_and(Vec::is_empty)
        || part.as_object().is_some_and(serde_json::Map::is_empty)
}

fn one_line(part: &Value) -> String {
    match part {
        Value::Object(members) => {
            let members = members.iter().map(|(name, member)| {
                format!("{}: {}", Value::from(name.as_str()), one_line(member))
            });
            format!("{{{}}}", members.collect::<Vec<_>>().join(", "))
        }
        Value::Array(items) => {
            format!("[{}]", items.iter().map(one_line).collect::<Vec<_>>().join(", "))
        }
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => part.to_string(),
    }
}
