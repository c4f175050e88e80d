//! From slices of lines to the bytes of the answer: a few slices at a time, in order.

use axum::body::Bytes;
use futures_util::{Stream, StreamExt as _, future, stream};
use tokio::sync::{OwnedSemaphorePermit, mpsc};

use super::answer::{AnsweredSlice, Tally, answer_slice};
use super::lines::Read;
use crate::api::background;

/// What leaves next.
enum Next {
    Answers(AnsweredSlice),
    End,
}

/// The bytes of the answer. They stop without an `end` line if the body is cut off; then the connection is closed.
///
/// It works only while it is asked for more, and the body is read only while it works. `place` is given back at the end.
pub(super) fn answers(
    slices: mpsc::Receiver<Read>,
    place: OwnedSemaphorePermit,
) -> impl Stream<Item = Result<Bytes, axum::Error>> + Send {
    let slices = stream::unfold(slices, async |mut slices| {
        // A reader that is gone before the end was cut off.
        let read = slices.recv().await?;
        Some((read, slices))
    });
    let closed = stream::iter([Read::Cut(axum::Error::new("the body was not read to its end"))]);
    slices.chain(closed).map(next).buffered(background::pieces_at_once()).scan(
        (Tally::default(), place, false),
        |(tally, _, is_over), next| {
            if *is_over {
                return future::ready(None);
            }
            *is_over = !matches!(next, Ok(Next::Answers(_)));
            future::ready(Some(next.map(|next| match next {
                Next::Answers(slice) => {
                    tally.add(&slice.tally);
                    slice.text.into()
                }
                Next::End => tally.end_line().into(),
            })))
        },
    )
}

async fn next(read: Read) -> Result<Next, axum::Error> {
    match read {
        Read::Slice(lines) => {
            let answered = background::begin(move |wanted| answer_slice(lines, wanted)).await;
            answered.map(Next::Answers).map_err(|_| axum::Error::new("a slice cannot be answered"))
        }
        Read::End => Ok(Next::End),
        Read::Cut(error) => Err(error),
    }
}
