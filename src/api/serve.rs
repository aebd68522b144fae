//! Accepting connections, with a bound on everything a peer can hold: the first byte, the header, the body, the number of
//! connections, the drain at the end.

use super::AppState;
use axum::Router;
use hyper_util::rt::{TokioIo, TokioTimer};
use hyper_util::server::graceful::GracefulShutdown;
use hyper_util::service::TowerToHyperService;
use std::future::Future;
use std::sync::Arc;
use std::sync::atomic::Ordering;
use std::time::Duration;
use tokio::net::{TcpListener, TcpStream};
use tokio::sync::Semaphore;
use tokio::time::timeout;

/// Seconds for a request's header, the silence before it included.
const HEADER_SECONDS: u64 = 10;
/// Seconds of a pause after which a refused or failing accept is tried again.
const ACCEPT_PAUSE_MS: u64 = 50;
/// Seconds that requests in hand have at the end.
const DRAIN_SECONDS: u64 = 8;

/// Serves until `shutdown` completes, then finishes the requests in hand within a bound.
pub async fn serve(listener: TcpListener, router: Router, state: AppState, shutdown: impl Future<Output = ()>) {
    let places = Arc::new(Semaphore::new(state.app.limits.connections_maximum));
    let graceful = GracefulShutdown::new();
    let mut shutdown = std::pin::pin!(shutdown);
    loop {
        let Ok(place) = Arc::clone(&places).acquire_owned().await else { break };
        let accepted = tokio::select! {
            accepted = listener.accept() => accepted,
            () = &mut shutdown => break,
        };
        match accepted {
            Ok((stream, _)) => {
                let connection = graceful.watch(connection(stream, router.clone()));
                tokio::spawn(async move {
                    let _place = place;
                    if let Err(error) = connection.await {
                        tracing::debug!(error = %error, "a connection ended early");
                    }
                });
            }
            Err(error) => {
                tracing::warn!(error = %error, "a connection could not be accepted");
                tokio::time::sleep(Duration::from_millis(ACCEPT_PAUSE_MS)).await;
            }
        }
    }
    state.draining.store(true, Ordering::Relaxed);
    drop(listener);
    if timeout(Duration::from_secs(DRAIN_SECONDS), graceful.shutdown()).await.is_err() {
        tracing::warn!("requests still in hand after {DRAIN_SECONDS} s were given up");
    }
}

fn connection(
    stream: TcpStream,
    router: Router,
) -> hyper::server::conn::http1::Connection<TokioIo<TcpStream>, TowerToHyperService<Router>> {
    let _ = stream.set_nodelay(true);
    hyper::server::conn::http1::Builder::new()
        .timer(TokioTimer::new())
        .header_read_timeout(Duration::from_secs(HEADER_SECONDS))
        .serve_connection(TokioIo::new(stream), TowerToHyperService::new(router))
}
