//! Accepting connections, with a bound on everything a peer can hold: the first byte, the header, the body, the answer that it does
//! not take, the number of connections, the drain at the end.

use super::AppState;
use super::stall::Stalling;
use crate::config::Limits;
use axum::Router;
use hyper::server::conn::http1::{self, Connection};
use hyper_util::rt::{TokioIo, TokioTimer};
use hyper_util::server::graceful::GracefulShutdown;
use hyper_util::service::TowerToHyperService;
use std::future::Future;
use std::sync::Arc;
use std::sync::atomic::Ordering;
use std::time::Duration;
use tokio::net::{TcpListener, TcpStream};
use tokio::sync::{OwnedSemaphorePermit, Semaphore};
use tokio::time::timeout;

/// Pause after which a failed accept is tried again.
const ACCEPT_PAUSE: Duration = Duration::from_millis(50);

/// Serves until `shutdown` completes, then finishes the requests in hand within a bound.
pub async fn serve(listener: TcpListener, router: Router, state: AppState, shutdown: impl Future<Output = ()>) {
    let limits = state.app.limits;
    let places = Arc::new(Semaphore::new(limits.connections_maximum));
    let graceful = GracefulShutdown::new();
    let mut shutdown = std::pin::pin!(shutdown);
    loop {
        // The end is heard while all places are taken, too.
        let (place, stream) = tokio::select! {
            accepted = accept(&listener, &places) => match accepted {
                Some(accepted) => accepted,
                None => continue,
            },
            () = &mut shutdown => break,
        };
        let connection = graceful.watch(connection(stream, router.clone(), &limits));
        tokio::spawn(async move {
            let _place = place;
            if let Err(error) = connection.await {
                tracing::debug!(error = %error, "a connection ended early");
            }
        });
    }
    state.draining.store(true, Ordering::Relaxed);
    drop(listener);
    let seconds = limits.drain_seconds_maximum;
    if timeout(Duration::from_secs(seconds), graceful.shutdown())
        .await
        .is_err()
    {
        tracing::warn!("requests still in hand after {seconds} s were given up");
    }
}

/// The next connection, once there is a place for it; nothing where it could not be accepted.
async fn accept(listener: &TcpListener, places: &Arc<Semaphore>) -> Option<(OwnedSemaphorePermit, TcpStream)> {
    let place = Arc::clone(places).acquire_owned().await.ok()?;
    match listener.accept().await {
        Ok((stream, _)) => Some((place, stream)),
        Err(error) => {
            tracing::warn!(error = %error, "a connection could not be accepted");
            tokio::time::sleep(ACCEPT_PAUSE).await;
            None
        }
    }
}

type Peer = TokioIo<Stalling<TcpStream>>;

fn connection(stream: TcpStream, router: Router, limits: &Limits) -> Connection<Peer, TowerToHyperService<Router>> {
    let _ = stream.set_nodelay(true);
    let stream = Stalling::new(stream, Duration::from_secs(limits.stall_seconds_maximum));
    http1::Builder::new()
        .timer(TokioTimer::new())
        .header_read_timeout(Duration::from_secs(limits.header_seconds_maximum))
        .serve_connection(TokioIo::new(stream), TowerToHyperService::new(router))
}
