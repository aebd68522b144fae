//! Whether the service is alive and ready, and its metrics.

use super::AppState;
use super::problem::{Kind, PlainErrors, Problem};
use axum::Router;
use axum::extract::State;
use axum::http::header;
use axum::response::{IntoResponse, Response};
use axum::routing::get;
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// The state of the service.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, ToSchema)]
pub struct Health {
    /// `"ok"`.
    #[schema(example = "ok")]
    pub status: String,
    /// Version of the service.
    #[schema(example = "0.1.0")]
    pub version: String,
}

impl Health {
    fn ok() -> Self {
        Self {
            status: "ok".to_owned(),
            version: env!("CARGO_PKG_VERSION").to_owned(),
        }
    }
}

/// Documents the health routes; [`plain`] serves them, outside the bounds on load.
pub(super) fn router() -> OpenApiRouter<AppState> {
    let mut documented = OpenApiRouter::new()
        .routes(routes!(live))
        .routes(routes!(ready))
        .routes(routes!(metrics));
    OpenApiRouter::with_openapi(documented.to_openapi())
}

/// The health routes.
pub(super) fn plain() -> Router<AppState> {
    Router::new()
        .route("/livez", get(live))
        .route("/readyz", get(ready))
        .route("/metrics", get(metrics))
}

/// Alive
///
/// Answers as long as the process runs; needs nothing else.
#[utoipa::path(
    get, path = "/livez", operation_id = "getLivez", tag = "service",
    responses(
        (status = 200, description = "The process is alive.", body = Health, example = json!({"status": "ok", "version": "0.1.0"})),
        PlainErrors,
    )
)]
async fn live() -> axum::Json<Health> {
    axum::Json(Health::ok())
}

/// Ready
///
/// Answers 200 when requests are served, 503 while the service goes down.
#[utoipa::path(
    get, path = "/readyz", operation_id = "getReadyz", tag = "service",
    responses(
        (status = 200, description = "Requests are served.", body = Health, example = json!({"status": "ok", "version": "0.1.0"})),
        PlainErrors,
    )
)]
async fn ready(State(state): State<AppState>) -> Result<axum::Json<Health>, Problem> {
    if state.is_draining() {
        Err(Problem::new(Kind::OVERLOADED, "the service is going down"))
    } else {
        Ok(axum::Json(Health::ok()))
    }
}

/// Metrics
///
/// In the text format of Prometheus.
#[utoipa::path(
    get, path = "/metrics", operation_id = "getMetrics", tag = "service",
    responses(
        (status = 200, description = "Counters and histograms.", body = String, content_type = "text/plain",
         example = "http_server_request_duration_seconds_count{http_route=\"/livez\"} 1"),
        PlainErrors,
    )
)]
async fn metrics(State(state): State<AppState>) -> Response {
    let kind = [(header::CONTENT_TYPE, "text/plain; version=0.0.4; charset=utf-8")];
    (kind, state.metrics.render()).into_response()
}
