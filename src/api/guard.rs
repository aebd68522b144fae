//! What stands around every route: request ids, logs, metrics, panics, overload, time, headers, the shape of errors.

use super::AppState;
use super::problem::{Kind, Problem};
use crate::clock;
use axum::Router;
use axum::body::Body;
use axum::error_handling::HandleErrorLayer;
use axum::extract::{MatchedPath, Request, State};
use axum::http::{HeaderName, HeaderValue, Method, StatusCode, header};
use axum::middleware::{Next, from_fn, from_fn_with_state};
use axum::response::{IntoResponse, Response};
use std::collections::BTreeMap;
use std::sync::Arc;
use std::time::Duration;
use tower::ServiceBuilder;
use tower_http::catch_panic::CatchPanicLayer;
use tower_http::compression::CompressionLayer;
use tower_http::timeout::RequestBodyDeadlineLayer;

/// Seconds in which a request's body must have arrived.
const BODY_SECONDS: u64 = 15;

const REQUEST_ID: HeaderName = HeaderName::from_static("x-request-id");

/// Everything an API answer or the page may load: itself.
const POLICY_PAGE: &str = "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self' data:; connect-src 'self'; \
    form-action 'self'; base-uri 'none'; frame-ancestors 'none'";
/// The API documentation's script writes styles into its elements.
const POLICY_DOCS: &str = "default-src 'none'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; \
    connect-src 'self'; font-src 'self' data:; base-uri 'none'; frame-ancestors 'none'";

/// Wraps the routes. From the outside: id and log, metrics, headers, panics, the shape of errors, and for all but the health
/// routes overload and time.
pub(super) fn guarded(routes: Router<AppState>, document: &utoipa::openapi::OpenApi, state: AppState) -> Router {
    let limits = state.app.limits;
    let methods = Arc::new(methods(document));
    let bounded = ServiceBuilder::new()
        .layer(HandleErrorLayer::new(|_| async {
            Problem::new(Kind::OVERLOADED, "too many requests are in hand")
        }))
        .load_shed()
        .concurrency_limit(limits.requests_maximum)
        .layer(from_fn_with_state(limits.request_seconds_maximum, timed))
        .layer(RequestBodyDeadlineLayer::new(Duration::from_secs(BODY_SECONDS)));
    routes
        .layer(bounded)
        .merge(super::health::plain())
        .fallback(|| async { Problem::new(Kind::NOT_FOUND, "there is nothing at this address") })
        .layer(
            ServiceBuilder::new()
                .layer(from_fn(identified))
                .layer(CompressionLayer::new())
                .layer(from_fn(headed))
                .layer(from_fn_with_state(methods, shaped))
                .layer(CatchPanicLayer::custom(|_| {
                    Problem::new(Kind::INTERNAL, "the service failed while answering").into_response()
                })),
        )
        .route_layer(from_fn(measured))
        .with_state(state)
}

/// Methods of every documented path template.
fn methods(document: &utoipa::openapi::OpenApi) -> BTreeMap<String, &'static str> {
    let allow = |item: &utoipa::openapi::PathItem| match (item.get.is_some(), item.post.is_some()) {
        (true, true) => "GET, HEAD, POST",
        (true, false) => "GET, HEAD",
        _ => "POST",
    };
    document.paths.paths.iter().map(|(path, item)| (path.clone(), allow(item))).collect()
}

/// Names the request, logs it, and says the name in the answer.
async fn identified(request: Request, next: Next) -> Response {
    let given = request.headers().get(&REQUEST_ID).and_then(|v| v.to_str().ok());
    let is_plain = |id: &str| !id.is_empty() && id.len() <= 64 && id.bytes().all(|b| b.is_ascii_alphanumeric() || b == b'-');
    let id = given.filter(|id| is_plain(id)).map_or_else(clock::request_id, str::to_owned);
    let (method, path) = (request.method().clone(), request.uri().path().to_owned());
    let begun = clock::now();
    let mut response = next.run(request).await;
    let (status, milliseconds) = (response.status().as_u16(), begun.elapsed().as_millis());
    tracing::info!(request.id = %id, http.request.method = %method, url.path = %path, http.response.status_code = status, duration_ms = milliseconds, "answered");
    if let Ok(value) = HeaderValue::from_str(&id) {
        response.headers_mut().insert(REQUEST_ID, value);
    }
    response
}

/// Counts and times the request by its route.
async fn measured(route: MatchedPath, request: Request, next: Next) -> Response {
    let method = match *request.method() {
        Method::GET => "GET",
        Method::POST => "POST",
        Method::HEAD => "HEAD",
        Method::OPTIONS => "OPTIONS",
        _ => "_OTHER",
    };
    let begun = clock::now();
    let response = next.run(request).await;
    let labels = [
        ("http_request_method", method.to_owned()),
        ("http_route", route.as_str().to_owned()),
        ("http_response_status_code", response.status().as_str().to_owned()),
    ];
    metrics::histogram!("http_server_request_duration_seconds", &labels).record(begun.elapsed().as_secs_f64());
    response
}

async fn timed(State(seconds): State<u64>, request: Request, next: Next) -> Response {
    match tokio::time::timeout(Duration::from_secs(seconds), next.run(request)).await {
        Ok(response) => response,
        Err(_) => Problem::new(Kind::TOO_SLOW, format!("no answer within {seconds} s")).into_response(),
    }
}

/// House headers.
async fn headed(request: Request, next: Next) -> Response {
    let docs = request.uri().path().starts_with("/docs");
    let mut response = next.run(request).await;
    let policy = if docs { POLICY_DOCS } else { POLICY_PAGE };
    let fixed = [
        (header::CONTENT_SECURITY_POLICY, policy),
        (header::X_CONTENT_TYPE_OPTIONS, "nosniff"),
        (header::REFERRER_POLICY, "no-referrer"),
        (HeaderName::from_static("cross-origin-opener-policy"), "same-origin"),
        (HeaderName::from_static("cross-origin-resource-policy"), "same-origin"),
    ];
    let headers = response.headers_mut();
    for (name, value) in fixed {
        headers.insert(name, HeaderValue::from_static(value));
    }
    headers.entry(header::CACHE_CONTROL).or_insert(HeaderValue::from_static("no-store"));
    headers.append(header::VARY, HeaderValue::from_static("accept"));
    response
}

/// Gives every error the shape of a problem, with its instance; also those of the framework, which have no body of ours.
async fn shaped(State(methods): State<Arc<BTreeMap<String, &'static str>>>, request: Request, next: Next) -> Response {
    let path = request.uri().path().to_owned();
    let mut response = next.run(request).await;
    let status = response.status();
    if !(status.is_client_error() || status.is_server_error()) {
        return response;
    }
    let mut problem = match response.extensions_mut().remove::<Problem>() {
        Some(problem) => problem,
        None if status == StatusCode::METHOD_NOT_ALLOWED => Problem::new(Kind::METHOD, "this address does not take that method"),
        None if status == StatusCode::NOT_FOUND => Problem::new(Kind::NOT_FOUND, "there is nothing at this address"),
        None if status == StatusCode::PAYLOAD_TOO_LARGE => Problem::new(Kind::TOO_LARGE, "the body is too large"),
        None if status.is_client_error() => Problem {
            status: status.as_u16(),
            ..Problem::new(Kind::INVALID, "the request cannot be understood")
        },
        None => Problem::new(Kind::INTERNAL, "the service failed while answering"),
    };
    problem.instance = path.chars().take(200).collect();
    let allow = response.headers().get(header::ALLOW).cloned();
    let mut shaped = problem.into_response();
    if status == StatusCode::METHOD_NOT_ALLOWED {
        let known = methods.get(&path).map(|text| HeaderValue::from_static(text));
        if let Some(value) = known.or(allow) {
            shaped.headers_mut().insert(header::ALLOW, value);
        }
    }
    let (parts, body) = shaped.into_parts();
    Response::from_parts(parts, Body::new(body))
}
