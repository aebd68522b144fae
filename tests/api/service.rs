//! The service around the API: reference lists, health, metrics, files.

use crate::{TestApp, supply};
use axum::body::Body;
use axum::http::{Request, header};
use serde_json::json;

#[tokio::test]
async fn every_figure_of_an_answer_is_defined() {
    let app = TestApp::new();
    let defined = app.get("/v1/figures").await.json();
    let templates: Vec<(String, String)> = defined["figures"]
        .as_array()
        .unwrap()
        .iter()
        .map(|f| {
            for field in ["meaning", "definition", "source"] {
                assert!(f[field].as_str().unwrap().len() > 3, "{f}");
            }
            (
                f["pointer"].as_str().unwrap().to_owned(),
                f["unit"].as_str().unwrap().to_owned(),
            )
        })
        .collect();
    let mut body = json!({"supply": supply()});
    body["supply"]["outputs"][0]["rails"][0]["filter"][0]["series"] = json!({"inductance": "10 mH"});
    let figures = app.post("/v1/operating-point", &body).await.json()["figures"].clone();
    let mut found = Vec::new();
    leaves(&figures, String::new(), &mut found);
    for pointer in &found {
        let matches = |template: &str| {
            let (a, b): (Vec<&str>, Vec<&str>) = (template.split('/').collect(), pointer.split('/').collect());
            a.len() == b.len()
                && a.iter()
                    .zip(&b)
                    .all(|(x, y)| x == y || (x.starts_with('{') && y.parse::<usize>().is_ok()))
        };
        assert!(templates.iter().any(|(t, _)| matches(t)), "{pointer} is not defined");
    }
    let worst = app.post("/v1/worst-case", &body).await.json();
    let listed: Vec<String> = worst["figures"]
        .as_array()
        .unwrap()
        .iter()
        .map(|f| f["pointer"].as_str().unwrap().to_owned())
        .collect();
    let (mut a, mut b) = (found.clone(), listed);
    a.sort();
    b.sort();
    assert_eq!(a, b, "worst case and operating point list the same figures");
}

fn leaves(value: &serde_json::Value, at: String, out: &mut Vec<String>) {
    match value {
        serde_json::Value::Object(map) => map.iter().for_each(|(k, v)| leaves(v, format!("{at}/{k}"), out)),
        serde_json::Value::Array(list) => list
            .iter()
            .enumerate()
            .for_each(|(i, v)| leaves(v, format!("{at}/{i}"), out)),
        serde_json::Value::Number(_) => out.push(at),
        _ => {}
    }
}

#[tokio::test]
async fn every_policy_names_its_sources() {
    let app = TestApp::new();
    let list = app.get("/v1/policies").await.json();
    let policies = list["policies"].as_array().unwrap();
    assert!(policies.len() >= 2);
    for policy in policies {
        let name = policy["name"].as_str().unwrap();
        assert_eq!(&app.get(&format!("/v1/policies/{name}")).await.json(), policy);
        for rule in policy["rules"].as_array().unwrap() {
            assert!(rule["source"].as_str().unwrap().len() > 10, "{rule}");
            assert!(rule["factor"].as_str().unwrap().ends_with('%'));
        }
        // Rules can be sent back as they came.
        let body = json!({"supply": supply(), "inline_policy": {"name": name, "rules": policy["rules"]}});
        let (inline, named) = (
            app.post("/v1/derating", &body).await.json(),
            app.post("/v1/derating", &json!({"supply": supply(), "policy": name}))
                .await
                .json(),
        );
        assert_eq!(inline["checks"], named["checks"]);
    }
}

#[tokio::test]
async fn health_and_metrics_answer() {
    let app = TestApp::new();
    assert_eq!(app.get("/livez").await.json()["status"], "ok");
    assert_eq!(app.get("/readyz").await.json()["status"], "ok");
    assert_eq!(app.get("/metrics").await.status, 200);
}

#[tokio::test]
async fn request_ids_are_echoed_or_made() {
    let app = TestApp::new();
    let send = |id: &'static str| {
        Request::get("/livez")
            .header("x-request-id", id)
            .body(Body::empty())
            .unwrap()
    };
    assert_eq!(app.send(send("abc-123")).await.headers["x-request-id"], "abc-123");
    assert_ne!(app.send(send("<script>")).await.headers["x-request-id"], "<script>");
}

#[tokio::test]
async fn files_revalidate() {
    let app = TestApp::new();
    let first = app.get("/static/page.css").await;
    let tag = first.headers[header::ETAG].clone();
    let again = app
        .send(
            Request::get("/static/page.css")
                .header(header::IF_NONE_MATCH, tag)
                .body(Body::empty())
                .unwrap(),
        )
        .await;
    assert_eq!(again.status, 304);
    assert!(again.body.is_empty());
}

#[tokio::test]
async fn every_kind_of_problem_has_a_page() {
    let app = TestApp::new();
    for name in [
        "not-json",
        "invalid-request",
        "no-solution",
        "too-large",
        "overloaded",
        "internal",
    ] {
        let page = app.get(&format!("/problems/{name}")).await;
        assert_eq!(page.status, 200, "{name}");
        assert!(page.text().contains("<h1>"));
    }
}
