//! What the fuzzer plays with: the path of an endpoint, a space, the media type of the answer, a line end, the body.

use crate::tree::Node;

#[derive(Debug)]
pub struct Input {
    pub path: String,
    /// The media type that is asked for.
    pub accept: String,
    pub body: Vec<u8>,
}

impl Input {
    pub fn read(bytes: &[u8]) -> Option<Self> {
        let end = bytes.iter().position(|byte| *byte == b'\n')?;
        let (path, accept) = std::str::from_utf8(&bytes[..end]).ok()?.split_once(' ')?;
        Some(Self {
            path: path.to_owned(),
            accept: accept.to_owned(),
            body: bytes[end + 1..].to_owned(),
        })
    }

    /// The body as JSON, or each line of it; none if it is not.
    pub fn documents(&self, takes_lines: bool) -> Option<Vec<Node>> {
        let text = std::str::from_utf8(&self.body).ok()?;
        if takes_lines {
            return text.lines().map(Node::read).collect();
        }
        Some(vec![Node::read(text)?])
    }

    /// The bytes of the same path with other documents.
    pub fn with(&self, documents: &[Node]) -> Vec<u8> {
        bytes(&self.path, &self.accept, documents)
    }
}

/// A request as the fuzzer keeps it.
pub fn bytes(path: &str, accept: &str, documents: &[Node]) -> Vec<u8> {
    let mut text = format!("{path} {accept}");
    for document in documents {
        text.push('\n');
        document.write(&mut text);
    }
    text.into_bytes()
}
