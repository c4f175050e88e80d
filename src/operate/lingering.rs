//! A close that lets the client read its answer.
//!
//! A system that closes a connection on which bytes still arrive resets it, and many clients that are still sending
//! then report a broken connection instead of reading why they were refused. So what still comes is discarded for a
//! while (RFC 9112, 9.6).

use std::io;
use std::pin::Pin;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::task::{Context, Poll, ready};
use std::time::Duration;

use tokio::io::{AsyncRead, AsyncWrite, ReadBuf};
use tokio::time::Sleep;

/// What is discarded at most, in time and in bytes.
const LONGEST: Duration = Duration::from_secs(2);
const MOST: usize = 64 * 1024 * 1024;

/// How much is discarded at a time.
const PIECE: usize = 8 * 1024; // bytes

/// A stream whose close may linger.
#[derive(Debug)]
pub(super) struct Lingering<S> {
    stream: S,
    unread: Arc<AtomicBool>,
    is_shut: bool,
    discarded: usize,
    end: Option<Pin<Box<Sleep>>>,
}

impl<S> Lingering<S> {
    /// A stream whose close lingers if `unread` is set by then.
    pub(super) fn new(stream: S, unread: Arc<AtomicBool>) -> Self {
        Self { stream, unread, is_shut: false, discarded: 0, end: None }
    }
}

impl<S: AsyncRead + Unpin> AsyncRead for Lingering<S> {
    fn poll_read(
        mut self: Pin<&mut Self>,
        context: &mut Context<'_>,
        buffer: &mut ReadBuf<'_>,
    ) -> Poll<io::Result<()>> {
        Pin::new(&mut self.stream).poll_read(context, buffer)
    }
}

impl<S: AsyncRead + AsyncWrite + Unpin> AsyncWrite for Lingering<S> {
    fn poll_write(
        mut self: Pin<&mut Self>,
        context: &mut Context<'_>,
        bytes: &[u8],
    ) -> Poll<io::Result<usize>> {
        Pin::new(&mut self.stream).poll_write(context, bytes)
    }

    fn poll_write_vectored(
        mut self: Pin<&mut Self>,
        context: &mut Context<'_>,
        slices: &[io::IoSlice<'_>],
    ) -> Poll<io::Result<usize>> {
        Pin::new(&mut self.stream).poll_write_vectored(context, slices)
    }

    fn is_write_vectored(&self) -> bool {
        self.stream.is_write_vectored()
    }

    fn poll_flush(mut self: Pin<&mut Self>, context: &mut Context<'_>) -> Poll<io::Result<()>> {
        Pin::new(&mut self.stream).poll_flush(context)
    }

    fn poll_shutdown(mut self: Pin<&mut Self>, context: &mut Context<'_>) -> Poll<io::Result<()>> {
        if !self.is_shut {
            ready!(Pin::new(&mut self.stream).poll_shutdown(context))?;
            self.is_shut = true;
        }
        if !self.unread.load(Ordering::Relaxed) {
            return Poll::Ready(Ok(()));
        }
        let end = self.end.get_or_insert_with(|| Box::pin(tokio::time::sleep(LONGEST)));
        if end.as_mut().poll(context).is_ready() {
            return Poll::Ready(Ok(()));
        }
        while self.discarded < MOST {
            let mut piece = [0; PIECE];
            let mut buffer = ReadBuf::new(&mut piece);
            let read = ready!(Pin::new(&mut self.stream).poll_read(context, &mut buffer));
            let count = buffer.filled().len();
            if read.is_err() || count == 0 {
                break;
            }
            self.discarded += count;
        }
        Poll::Ready(Ok(()))
    }
}
