//! What stands around every route: request ids, logs, metrics, panics, overload, time, headers, the shape of errors.

#[cfg(test)]
mod tests;

use super::AppState;
use super::problem::{Kind, Problem};
use crate::clock;
use axum::Router;
use axum::error_handling::HandleErrorLayer;
use axum::extract::{MatchedPath, Request, State};
use axum::http::{HeaderName, HeaderValue, Method, StatusCode, header};
use axum::middleware::{Next, from_fn, from_fn_with_state};
use axum::response::{IntoResponse, Response};
use std::collections::BTreeMap;
use std::sync::Arc;
use std::time::Duration;
use tower::ServiceBuilder;
use tower::limit::GlobalConcurrencyLimitLayer;
use tower_http::catch_panic::CatchPanicLayer;
use tower_http::compression::CompressionLayer;
use tower_http::timeout::RequestBodyDeadlineLayer;
use tracing::Instrument;

const REQUEST_ID: HeaderName = HeaderName::from_static("x-request-id");
const TRACE: HeaderName = HeaderName::from_static("traceparent");
/// The route of requests that reach none, in metrics: never the address itself, of which there is no end.
const NO_ROUTE: &str = "none";

/// Everything an API answer or the page may load: itself.
const POLICY_PAGE: &str = "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self' data:; connect-src 'self'; \
    form-action 'self'; base-uri 'none'; frame-ancestors 'none'";
/// The API documentation's script adds one style sheet of its own, known by its hash; those of others stay shut out.
const POLICY_DOCS: &str = "default-src 'none'; script-src 'self'; style-src 'self' \
    'sha256-RL3ie0nH+Lzz2YNqQN83mnU0J1ot4QL7b99vMdIX99w='; img-src 'self' data:; connect-src 'self'; form-action 'none'; \
    base-uri 'none'; frame-ancestors 'none'";

/// Wraps the routes. From the outside: metrics, id and log, headers, the shape of errors, compression (inside the shape, as it refuses
/// encodings), panics, and for all but the health routes overload and time. The bound on requests in hand is one for all routes.
pub(super) fn guarded(routes: Router<AppState>, document: &utoipa::openapi::OpenApi, state: AppState) -> Router {
    let limits = state.app.limits;
    let methods = Arc::new(methods(document));
    let bounded = ServiceBuilder::new()
        .layer(HandleErrorLayer::new(|_| async {
            Problem::new(Kind::OVERLOADED, "too many requests are in hand")
        }))
        .load_shed()
        .layer(GlobalConcurrencyLimitLayer::new(limits.requests_maximum))
        .layer(from_fn_with_state(limits.request_seconds_maximum, timed))
        .layer(RequestBodyDeadlineLayer::new(Duration::from_secs(
            limits.body_seconds_maximum,
        )));
    routes
        .layer(bounded)
        .merge(super::health::plain())
        .fallback(|| async { Problem::new(Kind::NOT_FOUND, "there is nothing at this address") })
        .layer(CatchPanicLayer::custom(|_| {
            tracing::error!("a handler panicked");
            Problem::new(Kind::INTERNAL, "the service failed while answering").into_response()
        }))
        .layer(CompressionLayer::new())
        .layer(
            ServiceBuilder::new()
                .layer(from_fn(measured))
                .layer(from_fn(identified))
                .layer(from_fn(headed))
                .layer(from_fn_with_state(methods, shaped)),
        )
        .with_state(state)
}

/// Methods of every documented path template.
fn methods(document: &utoipa::openapi::OpenApi) -> BTreeMap<String, &'static str> {
    let allow = |item: &utoipa::openapi::PathItem| match (item.get.is_some(), item.post.is_some()) {
        (true, true) => "GET, HEAD, POST",
        (true, false) => "GET, HEAD",
        _ => "POST",
    };
    document
        .paths
        .paths
        .iter()
        .map(|(path, item)| (path.clone(), allow(item)))
        .collect()
}

/// Names the request, logs it, and says the name in the answer. A trace that the client began (W3C Trace Context) is kept.
async fn identified(request: Request, next: Next) -> Response {
    let id = given(&request, &REQUEST_ID)
        .filter(|id| is_plain(id))
        .unwrap_or_else(clock::request_id);
    let parent = given(&request, &TRACE).filter(|parent| trace_id(parent).is_some());
    let (method, path) = (request.method().clone(), request.uri().path().to_owned());
    let span = tracing::info_span!("request", request.id = %id, trace.id = parent.as_deref().and_then(trace_id));
    let begun = clock::now();
    let mut response = next.run(request).instrument(span.clone()).await;
    let (status, milliseconds) = (response.status().as_u16(), begun.elapsed().as_millis());
    span.in_scope(|| {
        tracing::info!(http.request.method = %method, url.path = %path, http.response.status_code = status, duration_ms = milliseconds, "answered");
    });
    for (name, value) in [(REQUEST_ID, Some(id)), (TRACE, parent)] {
        if let Some(value) = value.and_then(|value| HeaderValue::from_str(&value).ok()) {
            response.headers_mut().insert(name, value);
        }
    }
    response
}

/// A header's text.
fn given(request: &Request, name: &HeaderName) -> Option<String> {
    request.headers().get(name)?.to_str().ok().map(str::to_owned)
}

/// Whether a client's name for its request may stand in a log.
fn is_plain(id: &str) -> bool {
    !id.is_empty() && id.len() <= 64 && id.bytes().all(|b| b.is_ascii_alphanumeric() || b == b'-')
}

/// The trace that a `traceparent` names; none where it is not one of version 00 (W3C Trace Context, section 3.2).
fn trace_id(parent: &str) -> Option<&str> {
    let parts: Vec<&str> = parent.split('-').collect();
    let &[version, trace, span, flags] = parts.as_slice() else {
        return None;
    };
    let is_hex =
        |text: &str, length| text.len() == length && text.bytes().all(|b| matches!(b, b'0'..=b'9' | b'a'..=b'f'));
    let is_zero = |text: &str| text.bytes().all(|b| b == b'0');
    let sound = version == "00"
        && is_hex(trace, 32)
        && !is_zero(trace)
        && is_hex(span, 16)
        && !is_zero(span)
        && is_hex(flags, 2);
    sound.then_some(trace)
}

/// Counts and times the request by its route.
async fn measured(request: Request, next: Next) -> Response {
    let method = match *request.method() {
        Method::GET => "GET",
        Method::POST => "POST",
        Method::HEAD => "HEAD",
        Method::OPTIONS => "OPTIONS",
        _ => "_OTHER",
    };
    let route = request
        .extensions()
        .get::<MatchedPath>()
        .map_or(NO_ROUTE, MatchedPath::as_str)
        .to_owned();
    let begun = clock::now();
    let response = next.run(request).await;
    let labels = [
        ("http_request_method", method.to_owned()),
        ("http_route", route),
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
    let docs = request.uri().path();
    let docs = docs == "/docs" || docs.starts_with("/docs/");
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
    headers
        .entry(header::CACHE_CONTROL)
        .or_insert(HeaderValue::from_static("no-store"));
    headers.insert(header::VARY, HeaderValue::from_static("accept, accept-encoding"));
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
    let mut problem = response
        .extensions_mut()
        .remove::<Problem>()
        .unwrap_or_else(|| of_framework(status));
    problem.instance = path.chars().take(200).collect();
    let allow = response.headers().get(header::ALLOW).cloned();
    let mut shaped = problem.into_response();
    if status == StatusCode::METHOD_NOT_ALLOWED {
        let known = methods.get(&path).map(|text| HeaderValue::from_static(text));
        if let Some(value) = known.or(allow) {
            shaped.headers_mut().insert(header::ALLOW, value);
        }
    }
    shaped
}

/// What a bare status of the framework means.
fn of_framework(status: StatusCode) -> Problem {
    match status {
        StatusCode::METHOD_NOT_ALLOWED => Problem::new(Kind::METHOD, "this address does not take that method"),
        StatusCode::NOT_FOUND => Problem::new(Kind::NOT_FOUND, "there is nothing at this address"),
        StatusCode::PAYLOAD_TOO_LARGE => Problem::new(Kind::TOO_LARGE, "the body is too large"),
        StatusCode::NOT_ACCEPTABLE => Problem::new(
            Kind::NOT_ACCEPTABLE,
            "the content encodings that exist are gzip and identity",
        ),
        status if status.is_client_error() => Problem {
            status: status.as_u16(),
            ..Problem::new(Kind::INVALID, "the request cannot be understood")
        },
        _ => Problem::new(Kind::INTERNAL, "the service failed while answering"),
    }
}
