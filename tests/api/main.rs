//! The API as its clients see it: in process, every route, every kind of error.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::new_without_default,
    missing_docs,
    unreachable_pub,
    reason = "a test that cannot go on fails; test crates export nothing"
)]

mod document;
mod errors;
mod service;
mod stories;

use axum::Router;
use axum::body::Body;
use axum::http::{HeaderMap, Request, StatusCode, header};
use http_body_util::BodyExt;
use mainstay::api::{self, AppState};
use mainstay::app::App;
use mainstay::config::Limits;
use mainstay::telemetry;
use serde_json::Value;
use std::sync::Arc;
use std::sync::atomic::AtomicBool;
use tower::ServiceExt;

/// The whole service in this process.
pub struct TestApp {
    router: Router,
}

/// An answer, read to its end.
pub struct Answer {
    pub status: StatusCode,
    pub headers: HeaderMap,
    pub body: Vec<u8>,
}

impl Answer {
    pub fn json(&self) -> Value {
        serde_json::from_slice(&self.body).unwrap_or_else(|e| panic!("{e}: {}", self.text()))
    }

    pub fn text(&self) -> String {
        String::from_utf8_lossy(&self.body).into_owned()
    }

    /// The pointers of a problem's faults.
    pub fn pointers(&self) -> Vec<String> {
        let problem = self.json();
        let errors = problem["errors"].as_array().cloned().unwrap_or_default();
        errors
            .iter()
            .map(|e| e["pointer"].as_str().unwrap().to_owned())
            .collect()
    }
}

impl TestApp {
    pub fn new() -> Self {
        Self::with(Limits::default())
    }

    pub fn with(limits: Limits) -> Self {
        let state = AppState {
            app: Arc::new(App::new(limits).unwrap()),
            metrics: telemetry::metrics().unwrap(),
            draining: Arc::new(AtomicBool::new(false)),
        };
        Self {
            router: api::service(state),
        }
    }

    /// Sends a request; checks what holds for every answer.
    pub async fn send(&self, request: Request<Body>) -> Answer {
        let path = request.uri().path().to_owned();
        let response = self.router.clone().oneshot(request).await.unwrap();
        let (parts, body) = response.into_parts();
        let answer = Answer {
            status: parts.status,
            headers: parts.headers,
            body: body.collect().await.unwrap().to_bytes().to_vec(),
        };
        for name in [
            "content-security-policy",
            "x-content-type-options",
            "referrer-policy",
            "cache-control",
            "x-request-id",
            "vary",
        ] {
            assert!(answer.headers.contains_key(name), "{path}: {name} is missing");
        }
        if answer.status.is_client_error() || answer.status.is_server_error() {
            assert_eq!(
                answer.headers[header::CONTENT_TYPE],
                "application/problem+json",
                "{path}"
            );
            let problem = answer.json();
            assert_eq!(problem["status"], answer.status.as_u16());
            assert_eq!(problem["instance"], path);
            for field in ["type", "title", "detail"] {
                assert!(
                    problem[field].as_str().is_some_and(|t| !t.is_empty()),
                    "{path}: {field}"
                );
            }
        }
        answer
    }

    pub async fn get(&self, path: &str) -> Answer {
        self.send(Request::get(path).body(Body::empty()).unwrap()).await
    }

    pub async fn post(&self, path: &str, body: &Value) -> Answer {
        self.post_for(path, body, "application/json").await
    }

    pub async fn post_for(&self, path: &str, body: &Value, accept: &str) -> Answer {
        let request = Request::post(path)
            .header(header::CONTENT_TYPE, "application/json")
            .header(header::ACCEPT, accept)
            .body(Body::from(body.to_string()));
        self.send(request.unwrap()).await
    }
}

/// The supply of the examples.
pub fn supply() -> Value {
    mainstay::api::examples::supply()
}
