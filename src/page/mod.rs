//! HTTP: how do people ask? The form page and its files.

use crate::api::AppState;
use axum::Router;
use axum::extract::Path;
use axum::http::{HeaderMap, HeaderValue, StatusCode, header};
use axum::response::{IntoResponse, Response};
use axum::routing::get;

struct File {
    name: &'static str,
    kind: &'static str,
    text: &'static str,
}

const PAGE: File = File {
    name: "index.html",
    kind: "text/html; charset=utf-8",
    text: include_str!("../../static/index.html"),
};

const FILES: [File; 2] = [
    File {
        name: "page.js",
        kind: "text/javascript; charset=utf-8",
        text: include_str!("../../static/page.js"),
    },
    File {
        name: "page.css",
        kind: "text/css; charset=utf-8",
        text: include_str!("../../static/page.css"),
    },
];

/// The page and its files.
pub fn router() -> Router<AppState> {
    Router::new()
        .route("/", get(|headers: HeaderMap| async move { sent(&PAGE, &headers) }))
        .route("/static/{name}", get(file))
}

async fn file(Path(name): Path<String>, headers: HeaderMap) -> Response {
    match FILES.iter().find(|file| file.name == name) {
        Some(file) => sent(file, &headers),
        None => StatusCode::NOT_FOUND.into_response(),
    }
}

/// A file, or the word that the client's copy is still good.
fn sent(file: &File, headers: &HeaderMap) -> Response {
    let tag = format!("\"{}-{:016x}\"", env!("CARGO_PKG_VERSION"), hash(file.text));
    let known = headers
        .get(header::IF_NONE_MATCH)
        .and_then(|v| v.to_str().ok())
        .is_some_and(|v| v.contains(&tag));
    let mut response = if known {
        StatusCode::NOT_MODIFIED.into_response()
    } else {
        ([(header::CONTENT_TYPE, file.kind)], file.text).into_response()
    };
    let fields = response.headers_mut();
    fields.insert(header::CACHE_CONTROL, HeaderValue::from_static("no-cache"));
    if let Ok(value) = HeaderValue::from_str(&tag) {
        fields.insert(header::ETAG, value);
    }
    response
}

/// FNV-1a: tells two versions of a file apart.
fn hash(text: &str) -> u64 {
    text.bytes().fold(0xcbf2_9ce4_8422_2325, |hash, byte| {
        (hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3)
    })
}
