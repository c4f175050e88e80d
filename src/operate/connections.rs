//! Connections: none may wait for ever, none may fill the memory, and none is dropped that was promised an answer.

use std::io;
use std::net::SocketAddr;
use std::pin::pin;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::time::Duration;

use axum::Router;
use axum::body::Body;
use axum::http::header::CONNECTION;
use axum::http::{HeaderValue, Request, Response};
use hyper::body::{Body as _, Incoming};
use hyper::server::conn::http1;
use hyper::service::service_fn;
use hyper_util::rt::{TokioIo, TokioTimer};
use tokio::net::{TcpListener, TcpSocket, TcpStream};
use tokio::sync::{OwnedSemaphorePermit, Semaphore, watch};
use tokio_io_timeout::TimeoutStream;
use tower::ServiceExt as _;

use super::lingering::Lingering;
use crate::api::guard::client::Peer;
use crate::api::metrics::{self, Present, Turned};

/// Room for the head of a request and for what is read and written at a time.
const BUFFER: usize = 64 * 1024; // bytes

/// The pause after the system could not hand over a connection, for example because it has no more files.
const PAUSE: Duration = Duration::from_millis(250);

/// Connections that may wait to be taken: the system makes clients of a full queue try again only after a second.
const QUEUE: u16 = 4096;

/// Time for one that waits in that queue to be handed over, and for a request already sent on it to be seen.
const MOMENT: Duration = Duration::from_millis(20);

/// Listens on an address.
pub(crate) fn listen(address: SocketAddr) -> io::Result<TcpListener> {
    let socket = if address.is_ipv4() { TcpSocket::new_v4() } else { TcpSocket::new_v6() }?;
    // So that a new start need not wait until the connections of the last one are forgotten.
    socket.set_reuseaddr(true)?;
    socket.bind(address)?;
    socket.listen(u32::from(QUEUE))
}

/// Serves routes over connections.
#[derive(Debug, Clone)]
pub(crate) struct Host {
    routes: Router,
    patience: Duration,
    most: u32,
    places: Arc<Semaphore>,
    stage: watch::Sender<Stage>,
}

/// How far the host is on its way out.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
enum Stage {
    /// It serves.
    Open,
    /// It answers what comes, and each answer ends its connection.
    Leaving,
    /// It waits for nothing more.
    Closing,
}

impl Host {
    /// A host for `most` connections at once. `patience` is the longest time for the head of a request to arrive, for
    /// a connection to lie idle, and for a client to take nothing of its answer.
    pub(crate) fn new(routes: Router, patience: Duration, most: u32) -> Self {
        let places = Arc::new(Semaphore::new(usize::try_from(most).unwrap_or(usize::MAX)));
        Self { routes, patience, most, places, stage: watch::Sender::new(Stage::Open) }
    }

    /// Takes connections until `closed` is ready, and then those that wait already.
    pub(crate) async fn take_until(&self, listener: TcpListener, closed: impl Future<Output = ()>) {
        let mut closed = pin!(closed);
        loop {
            let accepted = tokio::select! {
                () = &mut closed => break,
                accepted = listener.accept() => accepted,
            };
            match accepted {
                Ok((stream, peer)) => self.begin(stream, peer),
                Err(error) => {
                    tracing::error!(%error, "a connection could not be taken");
                    tokio::time::sleep(PAUSE).await;
                }
            }
        }
        // The system has opened these in our name: their clients may have sent already. It is not to be seen which came
        // late, so under a storm of clients the last ones find a closed door.
        for _ in 0..QUEUE {
            match tokio::time::timeout(MOMENT, listener.accept()).await {
                Ok(Ok((stream, peer))) => self.begin(stream, peer),
                Ok(Err(_)) | Err(_) => return,
            }
        }
    }

    /// From now on each answer ends its connection.
    pub(crate) fn leave(&self) {
        self.stage.send_replace(Stage::Leaving);
    }

    /// Closes what is idle and waits for the answers in progress.
    pub(crate) async fn finish(&self) {
        tokio::time::sleep(MOMENT).await;
        self.stage.send_replace(Stage::Closing);
        // All places are free when all connections are gone. The semaphore is never closed.
        let _ = self.places.acquire_many(self.most).await;
    }

    /// Serves a connection, or closes it if there are too many.
    fn begin(&self, stream: TcpStream, peer: SocketAddr) {
        match Arc::clone(&self.places).try_acquire_owned() {
            Ok(place) => {
                tokio::spawn(self.clone().serve(stream, peer, place));
            }
            Err(_) => metrics::count_turned_away(Turned::TooManyConnections),
        }
    }

    async fn serve(self, stream: TcpStream, peer: SocketAddr, _place: OwnedSemaphorePermit) {
        let _present = Present::connection();
        let mut stage = self.stage.subscribe();
        // Answers are short; without it they could wait for the client's acknowledgement.
        let _ = stream.set_nodelay(true);
        let mut stream = TimeoutStream::new(stream);
        stream.set_write_timeout(Some(self.patience));
        let unread = Arc::new(AtomicBool::new(false));
        let stream = Lingering::new(Box::pin(stream), Arc::clone(&unread));
        let service = service_fn(|request| self.answer(request, Peer(peer.ip()), &unread));
        let connection = http1::Builder::new()
            .timer(TokioTimer::new())
            .header_read_timeout(self.patience)
            .max_buf_size(BUFFER)
            .serve_connection(TokioIo::new(stream), service);
        let mut connection = pin!(connection);
        let closing = async {
            // Fails if the host is gone, which comes to the same.
            let _ = stage.wait_for(|stage| *stage == Stage::Closing).await;
        };
        tokio::select! {
            // What ends a connection before its time is the client's doing and changes nothing here.
            _ = connection.as_mut() => return,
            () = closing => {}
        }
        connection.as_mut().graceful_shutdown();
        let _ = connection.await;
    }

    async fn answer(
        &self,
        request: Request<Incoming>,
        peer: Peer,
        unread: &AtomicBool,
    ) -> Result<Response<Body>, std::convert::Infallible> {
        let has_body = !request.body().is_end_stream();
        let mut request = request.map(Body::new);
        request.extensions_mut().insert(peer);
        let mut response = self.routes.clone().oneshot(request).await?;
        // Whoever is refused may still be sending.
        let refused = response.status().is_client_error() || response.status().is_server_error();
        unread.store(has_body && refused, Ordering::Relaxed);
        if *self.stage.borrow() >= Stage::Leaving {
            response.headers_mut().insert(CONNECTION, HeaderValue::from_static("close"));
        }
        Ok(response)
    }
}
