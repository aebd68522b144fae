//! Every error of the service: RFC 9457 problem details, one schema, made in this file alone.

use super::AppState;
use crate::app::AppError;
use crate::supply::Fault;
use axum::Router;
use axum::extract::Path;
use axum::http::{HeaderValue, StatusCode, header};
use axum::response::{Html, IntoResponse, Response};
use axum::routing::get;
use serde::Serialize;
use utoipa::{IntoResponses, ToSchema};

/// Longest detail that is sent: what was wrong, not the request again.
const DETAIL_MAXIMUM: usize = 500;

/// One fault of a request.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, ToSchema)]
pub struct ProblemFault {
    /// Where: a JSON Pointer (RFC 6901) into the request body, written as a URI fragment.
    #[schema(example = "#/supply/line/voltage")]
    pub pointer: String,
    /// What is wrong, and what would be right.
    #[schema(example = "\"230\" has no unit; write a voltage with its unit, for example \"230 V\"")]
    pub detail: String,
}

/// An error, as RFC 9457 describes it.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, ToSchema)]
pub struct Problem {
    /// Which kind of problem; the address of a page about it.
    #[schema(example = "/problems/invalid-request")]
    pub r#type: String,
    /// The kind in words.
    #[schema(example = "The request cannot be understood")]
    pub title: String,
    /// The HTTP status, again.
    #[schema(example = 422, minimum = 400, maximum = 599)]
    pub status: u16,
    /// What happened this time.
    #[schema(example = "2 faults were found")]
    pub detail: String,
    /// The address that was asked for.
    #[schema(example = "/v1/operating-point")]
    pub instance: String,
    /// Every fault of the request's body; left out for other problems.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(required = false)]
    pub errors: Vec<ProblemFault>,
}

/// A kind of problem: its name in the address, its title, its status, what to do about it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Kind {
    name: &'static str,
    title: &'static str,
    status: StatusCode,
    advice: &'static str,
}

macro_rules! kinds {
    ($($constant:ident = $name:literal, $status:ident, $title:literal, $advice:literal;)+) => {
        impl Kind {
            $(
                #[doc = $title]
                pub const $constant: Self = Self {
                    name: $name,
                    title: $title,
                    status: StatusCode::$status,
                    advice: $advice,
                };
            )+
            const ALL: &'static [Self] = &[$(Self::$constant),+];
        }
    };
}

kinds! {
    NOT_JSON = "not-json", BAD_REQUEST, "The body is not JSON", "Send one JSON text, at most 32 levels deep, every number within the range of a double.";
    NOT_FOUND = "not-found", NOT_FOUND, "There is nothing at this address", "The addresses are listed in /openapi.json and at /docs.";
    METHOD = "method-not-allowed", METHOD_NOT_ALLOWED, "This address does not take that method", "The Allow header says which methods it takes.";
    NOT_ACCEPTABLE = "not-acceptable", NOT_ACCEPTABLE, "None of the acceptable representations exists", "The detail lists the media types that exist.";
    TIMEOUT = "request-timeout", REQUEST_TIMEOUT, "The request took too long to arrive", "Send the whole request without pauses.";
    TOO_LARGE = "too-large", PAYLOAD_TOO_LARGE, "The body is too large", "The bound is a setting of the service: --body-maximum.";
    MEDIA_TYPE = "unsupported-media-type", UNSUPPORTED_MEDIA_TYPE, "The body is not sent as JSON", "Send Content-Type: application/json, without a content encoding.";
    INVALID = "invalid-request", UNPROCESSABLE_ENTITY, "The request cannot be understood", "Every fault is listed under errors, each with its place in the body.";
    NO_SOLUTION = "no-solution", UNPROCESSABLE_ENTITY, "The circuit has no periodic solution", "The detail says why. Often a source without impedance meets capacitors without resistance, or values lie too far apart.";
    INTERNAL = "internal", INTERNAL_SERVER_ERROR, "The service failed", "This is a fault of the service. Its log has an entry with the request's id.";
    OVERLOADED = "overloaded", SERVICE_UNAVAILABLE, "The service is busy", "Try again after the seconds in Retry-After.";
    TOO_SLOW = "too-slow", SERVICE_UNAVAILABLE, "The answer took too long", "Ask for less at once, or raise --request-seconds-maximum.";
}

impl Problem {
    /// A problem of a kind.
    #[must_use]
    pub fn new(kind: Kind, detail: impl Into<String>) -> Self {
        let detail: String = detail.into();
        Self {
            r#type: format!("/problems/{}", kind.name),
            title: kind.title.to_owned(),
            status: kind.status.as_u16(),
            detail: detail.chars().take(DETAIL_MAXIMUM).collect(),
            instance: String::new(),
            errors: Vec::new(),
        }
    }

    /// A request with faults.
    #[must_use]
    pub fn faulty(faults: Vec<Fault>) -> Self {
        let detail = match faults.len() {
            1 => "1 fault was found".to_owned(),
            count => format!("{count} faults were found"),
        };
        let errors = faults.into_iter().map(|fault| ProblemFault {
            pointer: format!("#{}", fragment(&fault.pointer)),
            detail: fault.detail.chars().take(DETAIL_MAXIMUM).collect(),
        });
        Self {
            errors: errors.collect(),
            ..Self::new(Kind::INVALID, detail)
        }
    }
}

/// A JSON Pointer with what a URI fragment may not hold escaped (RFC 6901, section 6).
fn fragment(pointer: &str) -> String {
    let plain = |b: u8| b.is_ascii_alphanumeric() || b"-._~!$&'()*+,;=:@/?".contains(&b);
    pointer
        .bytes()
        .fold(String::with_capacity(pointer.len()), |mut text, byte| {
            if plain(byte) {
                text.push(char::from(byte));
            } else {
                text.push_str(&format!("%{byte:02X}"));
            }
            text
        })
}

impl From<AppError> for Problem {
    fn from(error: AppError) -> Self {
        match error {
            AppError::NoSolution(reason) => Self::new(Kind::NO_SOLUTION, reason.to_string()),
            AppError::NotFinite { .. } => Self::new(Kind::NO_SOLUTION, error.to_string()),
            AppError::Lost => {
                tracing::error!(error = %error, "a computation was lost");
                Self::new(Kind::INTERNAL, "the computation ended without a result")
            }
        }
    }
}

impl IntoResponse for Problem {
    fn into_response(self) -> Response {
        let status = StatusCode::from_u16(self.status).unwrap_or(StatusCode::INTERNAL_SERVER_ERROR);
        let body = serde_json::to_vec(&self).unwrap_or_default();
        let mut response = (status, body).into_response();
        let headers = response.headers_mut();
        headers.insert(
            header::CONTENT_TYPE,
            HeaderValue::from_static("application/problem+json"),
        );
        if status == StatusCode::SERVICE_UNAVAILABLE {
            headers.insert(header::RETRY_AFTER, HeaderValue::from_static("2"));
        }
        // The guard fills in the instance: it knows the address.
        response.extensions_mut().insert(self);
        response
    }
}

/// The errors that every operation with a body may answer with.
#[derive(IntoResponses)]
pub enum BodyErrors {
    /// The body is not JSON.
    #[response(status = 400, content_type = "application/problem+json")]
    NotJson(Problem),
    /// The request took too long to arrive.
    #[response(status = 408, content_type = "application/problem+json")]
    Timeout(Problem),
    /// The body is too large.
    #[response(status = 413, content_type = "application/problem+json")]
    TooLarge(Problem),
    /// The body is not sent as JSON.
    #[response(status = 415, content_type = "application/problem+json")]
    MediaType(Problem),
    /// The request cannot be understood (every fault with its pointer), or the circuit has no periodic solution (`type` ends in
    /// `/no-solution`).
    #[response(status = 422, content_type = "application/problem+json")]
    Invalid(Problem),
    /// The service failed.
    #[response(status = 500, content_type = "application/problem+json")]
    Internal(Problem),
    /// The service is busy, or the answer took too long; try again after the seconds in `Retry-After`.
    #[response(status = 503, content_type = "application/problem+json")]
    Overloaded(Problem),
}

/// The errors that every operation without a body may answer with.
#[derive(IntoResponses)]
pub enum PlainErrors {
    /// The service failed.
    #[response(status = 500, content_type = "application/problem+json")]
    Internal(Problem),
    /// The service is busy; try again after the seconds in `Retry-After`.
    #[response(status = 503, content_type = "application/problem+json")]
    Overloaded(Problem),
}

/// Pages about the kinds of problem, at the addresses that `type` gives.
pub(super) fn router() -> Router<AppState> {
    Router::new().route("/problems/{name}", get(page))
}

async fn page(Path(name): Path<String>) -> Response {
    let Some(kind) = Kind::ALL.iter().find(|kind| kind.name == name) else {
        return Problem::new(Kind::NOT_FOUND, "there is no problem of that name").into_response();
    };
    let (title, status, advice) = (kind.title, kind.status.as_u16(), kind.advice);
    Html(format!(
        "<!doctype html><html lang=\"en\"><meta charset=\"utf-8\"><title>{title}</title>\
         <link rel=\"stylesheet\" href=\"/static/page.css\"><main><h1>{title}</h1><p>HTTP status {status}.</p><p>{advice}</p></main></html>"
    ))
    .into_response()
}
