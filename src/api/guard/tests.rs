//! What the guards do for handlers that fail, dawdle or come in crowds; the routes here exist for that alone.

use super::*;
use crate::app::App;
use crate::config::Limits;
use axum::body::{Body, to_bytes};
use axum::http::HeaderMap;
use axum::http::Request as HttpRequest;
use axum::routing::get;
use std::sync::atomic::AtomicBool;
use tower::ServiceExt;

fn service(limits: Limits) -> Router {
    let recorder = metrics_exporter_prometheus::PrometheusBuilder::new().build_recorder();
    let state = AppState {
        app: Arc::new(App::new(limits).unwrap()),
        metrics: recorder.handle(),
        draining: Arc::new(AtomicBool::new(false)),
    };
    let slow = || async {
        tokio::time::sleep(Duration::from_millis(300)).await;
        "done"
    };
    let routes = Router::new()
        .route(
            "/panic",
            get(|| async {
                if true {
                    panic!("the secret of the handler")
                }
            }),
        )
        .route("/slow", get(slow))
        .route("/other", get(slow))
        .route("/long", get(|| async { "x".repeat(1000) }));
    guarded(routes, &crate::api::documented().1, state)
}

async fn answer(service: &Router, path: &str, headers: &[(&str, &str)]) -> (StatusCode, HeaderMap, String) {
    let mut request = HttpRequest::get(path);
    for (name, value) in headers {
        request = request.header(*name, *value);
    }
    let request = request.body(Body::empty()).unwrap();
    let (parts, body) = service.clone().oneshot(request).await.unwrap().into_parts();
    let bytes = to_bytes(body, 100_000).await.unwrap();
    (
        parts.status,
        parts.headers,
        String::from_utf8_lossy(&bytes).into_owned(),
    )
}

#[tokio::test]
async fn a_panic_is_a_problem_that_tells_nothing_of_the_inside() {
    let (status, headers, text) = answer(&service(Limits::default()), "/panic", &[]).await;
    assert_eq!(status, StatusCode::INTERNAL_SERVER_ERROR);
    assert_eq!(headers[header::CONTENT_TYPE], "application/problem+json");
    assert!(
        text.contains("/problems/internal") && text.contains("\"instance\":\"/panic\""),
        "{text}"
    );
    assert!(!text.contains("secret"), "{text}");
    assert!(headers.contains_key(header::CONTENT_SECURITY_POLICY) && headers.contains_key(REQUEST_ID));
}

#[tokio::test]
async fn the_bound_on_requests_in_hand_is_one_for_all_routes_and_spares_health() {
    let service = service(Limits {
        requests_maximum: 1,
        ..Limits::default()
    });
    let first = answer(&service, "/slow", &[]);
    let later = async {
        tokio::time::sleep(Duration::from_millis(50)).await;
        let begun = clock::now();
        let refused = answer(&service, "/other", &[]).await;
        let seconds = begun.elapsed().as_secs_f64();
        let live = answer(&service, "/livez", &[]).await;
        (refused, seconds, live)
    };
    let (first, ((status, headers, text), seconds, live)) = tokio::join!(first, later);
    assert_eq!(first.0, StatusCode::OK);
    assert_eq!(status, StatusCode::SERVICE_UNAVAILABLE);
    assert!(
        text.contains("/problems/overloaded") && headers.contains_key(header::RETRY_AFTER),
        "{text}"
    );
    assert!(seconds < 0.2, "refused after {seconds} s, not at once");
    assert_eq!(live.0, StatusCode::OK);
    let again = answer(&service, "/other", &[]).await;
    assert_eq!(again.0, StatusCode::OK, "a place that was given back serves again");
}

#[tokio::test]
async fn an_encoding_that_cannot_be_had_is_a_problem() {
    let service = service(Limits::default());
    let (status, headers, text) = answer(&service, "/long", &[("accept-encoding", "identity;q=0, br")]).await;
    assert_eq!(status, StatusCode::NOT_ACCEPTABLE);
    assert_eq!(headers[header::CONTENT_TYPE], "application/problem+json");
    assert!(text.contains("/problems/not-acceptable"), "{text}");
    let (status, headers, _) = answer(&service, "/long", &[("accept-encoding", "gzip")]).await;
    assert_eq!(
        (status, &headers[header::CONTENT_ENCODING]),
        (StatusCode::OK, &HeaderValue::from_static("gzip"))
    );
    assert_eq!(
        headers.get_all(header::VARY).iter().collect::<Vec<_>>(),
        ["accept, accept-encoding"]
    );
}

#[tokio::test]
async fn a_sound_trace_is_kept_and_any_other_is_dropped() {
    let service = service(Limits::default());
    let sound = "00-4bf92f3577b34da6a3ce929d0e0e4736-00f067aa0ba902b7-01";
    let (_, headers, _) = answer(&service, "/livez", &[("traceparent", sound)]).await;
    assert_eq!(headers[TRACE], sound);
    for broken in [
        "",
        "00",
        &sound.to_uppercase(),
        &sound.replace("4bf9", "xxxx"),
        &format!("ff{}", &sound[2..]),
        &format!("{sound}-1"),
    ] {
        assert_eq!(trace_id(broken), None, "{broken}");
        let (_, headers, _) = answer(&service, "/livez", &[("traceparent", broken)]).await;
        assert!(!headers.contains_key(TRACE), "{broken}");
    }
    assert_eq!(
        trace_id("00-00000000000000000000000000000000-00f067aa0ba902b7-01"),
        None
    );
}
