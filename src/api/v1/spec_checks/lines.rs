//! The lines of a body, as they arrive.

use axum::body::Bytes;
use futures_util::{Stream, StreamExt as _};
use tokio::sync::mpsc;
use tokio_util::bytes::BytesMut;
use tokio_util::codec::{Decoder as _, LinesCodec, LinesCodecError};

use crate::api::problem::{Problem, ProblemKind};

/// Longest line. The request of a line is no larger than one that comes alone may be.
pub const LONGEST_LINE: usize = 1024 * 1024; // bytes

/// Lines of a slice, and the bytes after which it takes no more. Few enough that a slice of common lines takes a few
/// milliseconds, so that others get their turn; enough that handing it over costs nothing beside it.
const MOST_LINES: usize = 16;
const ENOUGH_BYTES: usize = 64 * 1024;

/// A line that is not empty.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Line {
    /// Which line of the body, from 1.
    pub number: u64,
    /// Its text, or why it has none.
    pub text: Result<String, Problem>,
}

/// What comes next from a body.
#[derive(Debug)]
pub enum Read {
    /// A few lines.
    Slice(Vec<Line>),
    /// Nothing more: the body was complete.
    End,
    /// Nothing more: the client left, or paused too long.
    Cut(axum::Error),
}

/// Cuts bytes into lines.
#[derive(Debug)]
pub struct Splitter {
    codec: LinesCodec,
    bytes: BytesMut,
    number: u64,
}

impl Default for Splitter {
    fn default() -> Self {
        let codec = LinesCodec::new_with_max_length(LONGEST_LINE);
        Self { codec, bytes: BytesMut::new(), number: 0 }
    }
}

impl Splitter {
    /// Adds what has arrived.
    pub fn feed(&mut self, bytes: &[u8]) {
        self.bytes.extend_from_slice(bytes);
    }

    /// The next slice of lines; none if more bytes are needed. At the end of the body the rest is a line, too.
    pub fn slice(&mut self, is_end: bool) -> Option<Vec<Line>> {
        let (mut lines, mut bytes) = (Vec::new(), 0);
        while lines.len() < MOST_LINES && bytes < ENOUGH_BYTES {
            let Some(text) = self.next(is_end) else { break };
            self.number += 1;
            // Empty lines do not fill a slice: without lines there is none only if more bytes are needed.
            if text.as_ref().is_ok_and(|text| text.trim_ascii().is_empty()) {
                continue;
            }
            bytes += text.as_ref().map_or(0, String::len);
            lines.push(Line { number: self.number, text });
        }
        (!lines.is_empty()).then_some(lines)
    }

    fn next(&mut self, is_end: bool) -> Option<Result<String, Problem>> {
        let decoded = if is_end {
            self.codec.decode_eof(&mut self.bytes)
        } else {
            self.codec.decode(&mut self.bytes)
        };
        decoded.map_err(|error| unreadable(&error)).transpose()
    }
}

fn unreadable(error: &LinesCodecError) -> Problem {
    match error {
        LinesCodecError::MaxLineLengthExceeded => {
            let detail = format!("the line has more than {LONGEST_LINE} bytes; it was passed over");
            Problem::new(ProblemKind::PayloadTooLarge, detail)
        }
        LinesCodecError::Io(_) => Problem::malformed("the line is not UTF-8 text", 1, 1),
    }
}

/// Reads a body in a task of its own, no further than one slice ahead of who takes them.
///
/// The task waits for bytes at all times but when nobody takes slices, so a time limit on the body counts the pauses of
/// the client only. It ends when the receiver is dropped.
pub(super) fn read<S>(bytes: S) -> mpsc::Receiver<Read>
where
    S: Stream<Item = Result<Bytes, axum::Error>> + Send + Unpin + 'static,
{
    let (out, slices) = mpsc::channel(1);
    tokio::spawn(async move {
        tokio::select! {
            () = out.closed() => {}
            // Fails if nobody takes slices any more.
            _ = read_all(bytes, &out) => {}
        }
    });
    slices
}

async fn read_all<S>(
    mut bytes: S,
    out: &mpsc::Sender<Read>,
) -> Result<(), mpsc::error::SendError<Read>>
where
    S: Stream<Item = Result<Bytes, axum::Error>> + Send + Unpin + 'static,
{
    let mut splitter = Splitter::default();
    loop {
        let (is_end, last) = match bytes.next().await {
            Some(Ok(piece)) => {
                splitter.feed(&piece);
                (false, None)
            }
            Some(Err(error)) => (false, Some(Read::Cut(error))),
            None => (true, Some(Read::End)),
        };
        while let Some(slice) = splitter.slice(is_end) {
            out.send(Read::Slice(slice)).await?;
        }
        if let Some(last) = last {
            return out.send(last).await;
        }
    }
}
