//! House headers, on every answer.

use super::client::{SUPPLY, Service};

const STRICT: &str = "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self' data:; connect-src 'self'; \
    form-action 'self'; base-uri 'none'; frame-ancestors 'none'";

#[test]
fn every_answer_bears_the_house_headers() {
    let service = Service::start();
    let point = format!("{{\"supply\": {SUPPLY}}}");
    let answers = [
        service.get("/"),
        service.get("/static/page.js"),
        service.get("/v1/figures"),
        service.get("/openapi.json"),
        service.get("/livez"),
        service.get("/metrics"),
        service.get("/docs/"),
        service.get("/nope"),
        service.send("DELETE", "/v1/figures", "", b""),
        service.post("/v1/operating-point", &point),
        service.post("/v1/operating-point", "{"),
    ];
    for answer in answers {
        assert_eq!(answer.header("x-content-type-options"), Some("nosniff"));
        assert_eq!(answer.header("referrer-policy"), Some("no-referrer"));
        assert_eq!(answer.header("cross-origin-opener-policy"), Some("same-origin"));
        assert_eq!(answer.header("cross-origin-resource-policy"), Some("same-origin"));
        assert!(answer.header("cache-control").is_some());
        assert!(answer.header("x-request-id").is_some_and(|id| !id.is_empty()));
        assert!(
            answer
                .header("content-security-policy")
                .is_some_and(|p| p.starts_with("default-src 'none'; "))
        );
        assert_eq!(answer.header("server"), None);
    }
}

#[test]
fn only_the_documentation_has_a_policy_of_its_own() {
    let service = Service::start();
    for path in ["/", "/static/page.css", "/v1/policies", "/problems/not-json", "/docsx"] {
        assert_eq!(
            service.get(path).header("content-security-policy"),
            Some(STRICT),
            "{path}"
        );
    }
    let docs = service.get("/docs/");
    let policy = docs.header("content-security-policy").unwrap();
    assert!(
        policy.contains("script-src 'self';") && !policy.contains("http"),
        "{policy}"
    );
}

#[test]
fn a_clients_name_for_its_request_is_kept_where_it_is_plain() {
    let service = Service::start();
    let named = |id: &str| {
        let answer = service.send("GET", "/livez", &format!("X-Request-Id: {id}\r\n"), b"");
        answer.header("x-request-id").unwrap().to_owned()
    };
    assert_eq!(named("job-17"), "job-17");
    for id in ["a b", "a\"b", &"x".repeat(65), "a;b"] {
        assert_ne!(named(id), id);
    }
    assert_ne!(named("a b"), named("a b"), "two requests, two names");
}

#[test]
fn large_answers_are_compressed_for_those_who_take_it() {
    let service = Service::start();
    let plain = service.get("/openapi.json");
    let packed = service.send("GET", "/openapi.json", "Accept-Encoding: gzip\r\n", b"");
    assert_eq!(packed.header("content-encoding"), Some("gzip"));
    assert!(packed.body.starts_with(&[0x1f, 0x8b]) && packed.body.len() * 4 < plain.body.len());
    assert_eq!(plain.header("content-encoding"), None);
}

#[test]
fn a_head_request_gets_the_length_and_no_body() {
    let service = Service::start();
    let (whole, head) = (service.get("/v1/figures"), service.send("HEAD", "/v1/figures", "", b""));
    assert_eq!(head.status, 200);
    assert_eq!(head.body, b"");
    assert_eq!(
        head.header("content-length"),
        Some(whole.body.len().to_string().as_str())
    );
}
