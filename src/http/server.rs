//! Connections: accept, time out, cap, drain.
//!
//! The framework's own loop installs no timer for a half-sent head and never gives up on one at shutdown; this one
//! does both.

use std::future::Future;
use std::net::{IpAddr, Ipv4Addr, SocketAddr};
use std::sync::Arc;
use std::time::Duration;

use axum::Router;
use axum::body::Body;
use axum::extract::Request;
use hyper::body::Incoming;
use hyper_util::rt::{TokioExecutor, TokioIo, TokioTimer};
use hyper_util::server::conn::auto;
use hyper_util::server::graceful::GracefulShutdown;
use tokio::net::{TcpListener, TcpStream};
use tokio::sync::{Notify, Semaphore};
use tokio::task::JoinSet;
use tokio_io_timeout::TimeoutStream;
use tower::ServiceExt;

use super::app::App;
use crate::config::Server as Settings;

/// How often metrics and rate counts are tidied.
const UPKEEP_INTERVAL: Duration = Duration::from_secs(5);

/// Pause after a failed accept, such as when no file handle is free.
const ACCEPT_PAUSE: Duration = Duration::from_millis(50);

/// Streams one HTTP/2 connection may have open.
const MAX_STREAMS: u32 = 64;

/// Address of the other end of the connection.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct Peer(pub IpAddr);

impl Default for Peer {
    fn default() -> Self {
        Self(IpAddr::V4(Ipv4Addr::LOCALHOST))
    }
}

/// Serves until `stop` is ready, then lets running requests finish within the configured time and cuts the rest.
pub async fn serve(listener: TcpListener, router: Router, app: App, stop: impl Future<Output = ()>) {
    let settings = app.config().server.clone();
    let graceful = GracefulShutdown::new();
    let mut connections = JoinSet::new();
    let upkeep = tokio::spawn(keep_up(app.clone()));
    accept_until(stop, &listener, &settings, |stream, peer, permit| {
        let watcher = graceful.watcher();
        let (router, settings) = (router.clone(), settings.clone());
        connections.spawn(async move {
            converse(stream, peer, router, &settings, watcher).await;
            drop(permit);
        });
        while connections.try_join_next().is_some() {}
    })
    .await;
    app.stop();
    drop(listener);
    drain(graceful, connections, settings.drain).await;
    upkeep.abort();
}

type Permit = tokio::sync::OwnedSemaphorePermit;

async fn accept_until(
    stop: impl Future<Output = ()>,
    listener: &TcpListener,
    settings: &Settings,
    mut open: impl FnMut(TcpStream, SocketAddr, Permit),
) {
    let places = Arc::new(Semaphore::new(settings.max_connections));
    tokio::pin!(stop);
    loop {
        let next = accept(listener, &places);
        tokio::select! {
            () = &mut stop => return,
            accepted = next => if let Some((stream, peer, permit)) = accepted { open(stream, peer, permit) },
        }
    }
}

/// Waits for a free place first: connections beyond the cap stay in the system's queue.
async fn accept(listener: &TcpListener, places: &Arc<Semaphore>) -> Option<(TcpStream, SocketAddr, Permit)> {
    let permit = Arc::clone(places).acquire_owned().await.ok()?;
    match listener.accept().await {
        Ok((stream, peer)) => Some((stream, peer, permit)),
        Err(error) => {
            tracing::warn!(%error, "a connection could not be accepted");
            tokio::time::sleep(ACCEPT_PAUSE).await;
            None
        }
    }
}

async fn converse(
    stream: TcpStream,
    peer: SocketAddr,
    router: Router,
    settings: &Settings,
    watcher: hyper_util::server::graceful::Watcher,
) {
    let first_request = Arc::new(Notify::new());
    let seen = Arc::clone(&first_request);
    let service = hyper::service::service_fn(move |mut request: Request<Incoming>| {
        seen.notify_one();
        request.extensions_mut().insert(Peer(peer.ip()));
        router.clone().oneshot(request.map(Body::new))
    });
    let _ = stream.set_nodelay(true);
    let mut stream = TimeoutStream::new(stream);
    stream.set_write_timeout(Some(settings.write_timeout));
    let builder = builder(settings);
    let connection = builder.serve_connection(TokioIo::new(Box::pin(stream)), service);
    let connection = watcher.watch(connection);
    tokio::select! {
        ended = connection => if let Err(error) = ended { tracing::debug!(%peer, error, "a connection broke") },
        () = too_late(settings.first_byte_timeout, &first_request) => tracing::debug!(%peer, "no request came"),
    }
}

/// Ready when no request has come in time; never once one has.
async fn too_late(limit: Duration, first_request: &Notify) {
    if tokio::time::timeout(limit, first_request.notified()).await.is_ok() {
        std::future::pending::<()>().await;
    }
}

fn builder(settings: &Settings) -> auto::Builder<TokioExecutor> {
    let mut builder = auto::Builder::new(TokioExecutor::new());
    builder
        .http1()
        .timer(TokioTimer::new())
        .header_read_timeout(settings.header_timeout);
    builder
        .http2()
        .timer(TokioTimer::new())
        .max_concurrent_streams(MAX_STREAMS)
        .keep_alive_interval(settings.header_timeout)
        .keep_alive_timeout(settings.header_timeout);
    builder
}

async fn drain(graceful: GracefulShutdown, mut connections: JoinSet<()>, limit: Duration) {
    let open = graceful.count();
    tracing::info!(open, "stopping; open connections may finish");
    if tokio::time::timeout(limit, graceful.shutdown()).await.is_err() {
        tracing::warn!(
            limit_s = limit.as_secs(),
            "some requests did not finish in time and are cut"
        );
    }
    connections.shutdown().await;
}

async fn keep_up(app: App) {
    let mut tick = tokio::time::interval(UPKEEP_INTERVAL);
    loop {
        tick.tick().await;
        app.metrics().run_upkeep();
        if let Some(limit) = app.rate_limit() {
            limit.forget_quiet();
        }
    }
}

/// Ready at SIGTERM or SIGINT; both are heard from this call on, before the future is first polled.
///
/// # Errors
/// The system's own, where a signal cannot be heard.
#[cfg(unix)]
pub fn stop_signal() -> std::io::Result<impl Future<Output = ()>> {
    use tokio::signal::unix::{SignalKind, signal};
    let (mut terminated, mut interrupted) = (signal(SignalKind::terminate())?, signal(SignalKind::interrupt())?);
    Ok(async move {
        tokio::select! {
            _ = terminated.recv() => {}
            _ = interrupted.recv() => {}
        }
    })
}

/// Ready at Ctrl-C.
///
/// # Errors
/// None here.
#[cfg(not(unix))]
pub fn stop_signal() -> std::io::Result<impl Future<Output = ()>> {
    Ok(async {
        let _ = tokio::signal::ctrl_c().await;
    })
}
