//! JSON in its canonical form (RFC 8785): members sorted, numbers as ECMAScript writes them, no spaces.
//!
//! Own code, because the crate for it (`serde_jcs`) took half of the time of a request: it keeps every member
//! in buffers of its own and writes each fragment of a text through a box. The tests hold the two against
//! each other.

use serde_json::{Map, Value};

/// The canonical form of a value.
///
/// Whole numbers are taken as doubles, as that form demands: `95` and `95.0` are the same.
#[must_use]
pub fn canonical(value: &Value) -> Vec<u8> {
    let mut text = Vec::with_capacity(1024);
    write(value, &mut text);
    text
}

fn write(value: &Value, text: &mut Vec<u8>) {
    match value {
        Value::Null => text.extend_from_slice(b"null"),
        Value::Bool(true) => text.extend_from_slice(b"true"),
        Value::Bool(false) => text.extend_from_slice(b"false"),
        Value::Number(number) => {
            // Without arbitrary precision every number is held as something that a double is near to.
            let double = number.as_f64().unwrap_or_default();
            text.extend_from_slice(ryu_js::Buffer::new().format(double).as_bytes());
        }
        Value::String(string) => write_string(string, text),
        Value::Array(items) => {
            write_list(b"[]", items.iter(), text, |item, text| write(item, text));
        }
        Value::Object(members) => {
            write_list(b"{}", sorted(members).into_iter(), text, |(name, value), text| {
                write_string(name, text);
                text.push(b':');
                write(value, text);
            });
        }
    }
}

/// Members in the order of the UTF-16 code units of their names.
fn sorted(members: &Map<String, Value>) -> Vec<(&String, &Value)> {
    let mut members: Vec<_> = members.iter().collect();
    members.sort_unstable_by(|one, other| one.0.encode_utf16().cmp(other.0.encode_utf16()));
    members
}

fn write_list<T>(
    [open, close]: &[u8; 2],
    items: impl Iterator<Item = T>,
    text: &mut Vec<u8>,
    write_item: impl Fn(T, &mut Vec<u8>),
) {
    text.push(*open);
    for (index, item) in items.enumerate() {
        if index > 0 {
            text.push(b',');
        }
        write_item(item, text);
    }
    text.push(*close);
}

/// A text with the escapes that RFC 8785 (3.2.2.2) asks for, which are those of `serde_json`.
fn write_string(string: &str, text: &mut Vec<u8>) {
    let written = serde_json::to_writer(&mut *text, string);
    debug_assert!(written.is_ok(), "a text can always be written to memory");
}
