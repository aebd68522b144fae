//! Refusals of bytes that never become a request: every one is a problem by RFC 9457.

use super::client::{SUPPLY, Service};
use mainstay::config::Limits;

const POINT: &str = "/v1/operating-point";

#[test]
fn addresses_that_do_not_exist_are_problems() {
    let service = Service::start();
    for path in [
        "/nope",
        "/v1",
        "/v1/policies/%00",
        "/v1/policies/..%2f..%2fetc",
        "/static/nope.js",
        "/problems/nope",
        "/docs/nope",
    ] {
        let answer = service.get(path);
        let problem = answer.problem(404, "not-found");
        assert_eq!(problem["instance"], path);
    }
}

#[test]
fn methods_that_do_not_exist_are_problems_with_allow() {
    let service = Service::start();
    for (method, path, allow) in [
        ("DELETE", POINT, "POST"),
        ("GET", "/v1/sweep", "POST"),
        ("POST", "/v1/figures", "GET, HEAD"),
        ("OPTIONS", "/v1/figures", "GET, HEAD"),
        ("PUT", "/v1/policies", "GET, HEAD"),
        ("POST", "/livez", "GET, HEAD"),
        ("TRACE", "/", "GET,HEAD"),
    ] {
        let answer = service.send(method, path, "", b"");
        answer.problem(405, "method-not-allowed");
        let spaced = |text: &str| text.replace(", ", ",");
        assert_eq!(
            answer.header("allow").map(spaced),
            Some(spaced(allow)),
            "{method} {path}"
        );
    }
}

#[test]
fn bodies_of_another_type_are_refused() {
    let service = Service::start();
    for headers in [
        "",
        "Content-Type: text/plain\r\n",
        "Content-Type: application/jsonp\r\n",
        "Content-Type: text/json\r\n",
    ] {
        service
            .send("POST", POINT, headers, b"{}")
            .problem(415, "unsupported-media-type");
    }
    let coded = "Content-Type: application/json\r\nContent-Encoding: gzip\r\n";
    service
        .send("POST", POINT, coded, b"{}")
        .problem(415, "unsupported-media-type");
    let whole = format!("{{\"supply\": {SUPPLY}}}");
    for kind in [
        "application/json; charset=utf-8",
        "APPLICATION/JSON",
        "application/supply+json",
    ] {
        let headers = format!("Content-Type: {kind}\r\n");
        assert_eq!(
            service.send("POST", POINT, &headers, whole.as_bytes()).status,
            200,
            "{kind}"
        );
    }
}

#[test]
fn what_is_not_json_is_refused_with_its_place() {
    let service = Service::start();
    let problem = service.post(POINT, "{\n  \"supply\": nope}").problem(400, "not-json");
    assert!(
        problem["detail"].as_str().unwrap().ends_with("at line 2, column 14"),
        "{problem}"
    );
    for text in [
        "",
        "{",
        "{\"a\": NaN}",
        "{\"a\": Infinity}",
        "{\"a\": 1e999}",
        "{} {}",
        "\u{feff}{}",
        "{\"a\": \"\\ud800\"}",
    ] {
        service.post(POINT, text).problem(400, "not-json");
    }
    let not_text = service.send(
        "POST",
        POINT,
        "Content-Type: application/json\r\n",
        b"{\"a\": \"\xff\xfe\"}",
    );
    not_text.problem(400, "not-json");
}

#[test]
fn nesting_is_bounded_and_its_refusal_is_short() {
    let service = Service::start();
    for depth in [33, 30_000] {
        let text = format!("{}{}", "[".repeat(depth), "]".repeat(depth));
        let answer = service.post(POINT, &text);
        answer.problem(400, "not-json");
        assert!(answer.body.len() < 1000, "{} bytes", answer.body.len());
    }
}

#[test]
fn large_bodies_are_refused_whether_announced_or_not() {
    let service = Service::within(Limits {
        body_maximum: 1000,
        ..Limits::default()
    });
    let text = format!("\"{}\"", "x".repeat(1000));
    service.post(POINT, &text).problem(413, "too-large");
    let chunked = format!(
        "POST {POINT} HTTP/1.1\r\nHost: mainstay\r\nConnection: close\r\nContent-Type: application/json\r\n\
         Transfer-Encoding: chunked\r\n\r\n{:x}\r\n{text}\r\n0\r\n\r\n",
        text.len()
    );
    service.raw(chunked.as_bytes()).problem(413, "too-large");
    assert_eq!(service.post(POINT, &format!("\"{}\"", "x".repeat(998))).status, 422);
}

#[test]
fn representations_that_do_not_exist_are_refused() {
    let service = Service::start();
    let headers = "Content-Type: application/json\r\nAccept: image/png\r\n";
    for path in [POINT, "/v1/sweep"] {
        service
            .send("POST", path, headers, b"{}")
            .problem(406, "not-acceptable");
    }
}

#[test]
fn answers_that_take_too_long_are_given_up() {
    let service = Service::within(Limits {
        request_seconds_maximum: 0,
        ..Limits::default()
    });
    // A search among thousands of candidates takes longer than the clock's first tick.
    let document: serde_json::Value = serde_json::from_str(include_str!("../../openapi/openapi.json")).unwrap();
    let search = &document["paths"]["/v1/design"]["post"]["requestBody"]["content"]["application/json"]["example"];
    let answer = service.post("/v1/design", &search.to_string());
    answer.problem(503, "too-slow");
    assert!(answer.header("retry-after").is_some_and(|s| s.parse::<u32>().is_ok()));
    assert_eq!(
        service.get("/livez").status,
        200,
        "health answers whatever else is slow"
    );
}

#[test]
fn metrics_name_the_route_and_never_the_address() {
    let service = Service::start();
    service.get("/v1/policies/marked-by-this-test");
    let metrics = service.get("/metrics");
    assert_eq!(
        metrics.header("content-type"),
        Some("text/plain; version=0.0.4; charset=utf-8")
    );
    let text = metrics.text();
    // One process has one recorder: it may belong to another test's service, and then this one's is empty.
    assert!(!text.contains("marked-by-this-test"));
    for line in text.lines().filter(|line| line.contains("http_route=")) {
        assert!(line.starts_with("http_server_request_duration_seconds_"), "{line}");
    }
}
