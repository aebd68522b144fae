//! HTTP: how do programs ask? One file a resource: router, request and answer types, handlers.
//!
//! Handlers translate, [`crate::app`] decides. Every error leaves as a [`problem::Problem`]; every number that leaves is
//! finite.

pub mod answer;
pub mod derating;
pub mod design;
pub mod examples;
pub mod extract;
pub mod figures;
mod guard;
pub mod health;
mod negotiate;
pub mod openapi;
pub mod operating_point;
pub mod policies;
pub mod problem;
pub mod serve;
mod stall;
pub mod sweep;
pub mod worst_case;

use crate::app::App;
use axum::Router;
use metrics_exporter_prometheus::PrometheusHandle;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use utoipa_axum::router::OpenApiRouter;

/// What every handler may use.
#[derive(Clone)]
pub struct AppState {
    /// The application.
    pub app: Arc<App>,
    /// Renders the metrics.
    pub metrics: PrometheusHandle,
    /// Set while the service drains: no longer ready.
    pub draining: Arc<AtomicBool>,
}

impl AppState {
    /// Whether the service is going down.
    #[must_use]
    pub fn is_draining(&self) -> bool {
        self.draining.load(Ordering::Relaxed)
    }
}

/// Every documented route, and the document.
pub fn documented() -> (Router<AppState>, utoipa::openapi::OpenApi) {
    OpenApiRouter::with_openapi(openapi::base())
        .merge(operating_point::router())
        .merge(worst_case::router())
        .merge(design::router())
        .merge(sweep::router())
        .merge(derating::router())
        .merge(policies::router())
        .merge(figures::router())
        .merge(health::router())
        .split_for_parts()
}

/// The whole service: API, documentation and page, behind the guards of [`guard`].
pub fn service(state: AppState) -> Router {
    let (documented, document) = documented();
    let routes = documented
        .merge(openapi::router(&document))
        .merge(problem::router())
        .merge(crate::page::router());
    guard::guarded(routes, &document, state)
}
