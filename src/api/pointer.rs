//! Pointers into a request: RFC 6901, in the form of a URI fragment.

use std::fmt::Write as _;

/// Writes a pointer in fragment form, `#/pad/outer_radius`, from its member names and indexes.
///
/// `~` and `/` inside a name are escaped first (RFC 6901 section 3), then everything that a
/// fragment cannot hold is percent-encoded (section 6). No segments give `#`, the whole body.
#[must_use]
pub fn fragment<S: AsRef<str>>(segments: impl IntoIterator<Item = S>) -> String {
    let mut pointer = String::from("#");
    for segment in segments {
        pointer.push('/');
        for byte in segment.as_ref().bytes() {
            push_escaped(&mut pointer, byte);
        }
    }
    pointer
}

fn push_escaped(pointer: &mut String, byte: u8) {
    match byte {
        b'~' => pointer.push_str("~0"),
        b'/' => pointer.push_str("~1"),
        b if b.is_ascii_alphanumeric() || b"-._!$&'()*+,;=:@?".contains(&b) => {
            pointer.push(char::from(b));
        }
        other => {
            // Writing to a string cannot fail.
            let _ = write!(pointer, "%{other:02X}");
        }
    }
}
