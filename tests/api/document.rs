//! The OpenAPI document: committed, complete, free of the shapes that client generators stumble over.

use crate::TestApp;
use mainstay::api;
use serde_json::Value;
use std::collections::HashSet;

fn document() -> Value {
    serde_json::from_str(&api::openapi::text(&api::documented().1)).unwrap()
}

fn operations(document: &Value) -> Vec<(String, String, Value)> {
    let mut out = Vec::new();
    for (path, item) in document["paths"].as_object().unwrap() {
        for (method, operation) in item.as_object().unwrap() {
            out.push((path.clone(), method.clone(), operation.clone()));
        }
    }
    out
}

#[test]
fn the_committed_document_is_the_served_one() {
    let committed = include_str!("../../openapi/openapi.json");
    let served = api::openapi::text(&api::documented().1);
    assert!(
        committed == served,
        "openapi/openapi.json differs: run `cargo run --release -- openapi > openapi/openapi.json`"
    );
    assert_eq!(document()["openapi"], "3.1.0");
}

#[tokio::test]
async fn it_is_served_as_json() {
    let answer = TestApp::new().get("/openapi.json").await;
    assert_eq!(answer.headers["content-type"], "application/json");
    assert_eq!(answer.json(), document());
}

#[test]
fn every_operation_is_named_described_and_has_an_example() {
    let document = document();
    let mut names = HashSet::new();
    for (path, method, operation) in operations(&document) {
        let name = operation["operationId"]
            .as_str()
            .unwrap_or_else(|| panic!("{method} {path}"));
        assert!(names.insert(name.to_owned()), "{name} twice");
        assert!(
            operation["summary"].is_string() && operation["description"].is_string(),
            "{name}"
        );
        let content = match &operation["requestBody"] {
            Value::Null => &operation["responses"]["200"]["content"],
            body => &body["content"],
        };
        let media: Vec<&Value> = content.as_object().unwrap().values().collect();
        assert!(media.iter().any(|m| !m["example"].is_null()), "{name} has no example");
        for (status, response) in operation["responses"].as_object().unwrap() {
            assert!(
                response["description"].as_str().is_some_and(|d| !d.is_empty()),
                "{name} {status}"
            );
        }
    }
    assert_eq!(names.len(), 11);
}

#[test]
fn every_property_is_described_and_no_schema_is_empty() {
    let document = document();
    let schemas = document["components"]["schemas"].as_object().unwrap();
    assert!(schemas.len() > 50);
    for (name, schema) in schemas {
        walk(name, schema);
        let variants = schema["oneOf"].as_array().cloned().unwrap_or_default();
        for object in variants.iter().chain([schema]) {
            let Some(properties) = object["properties"].as_object() else {
                continue;
            };
            for (field, property) in properties {
                // The tag of a variant describes itself: one word.
                let tag = field == "kind";
                let described = property["description"].is_string() || tag || described_by_reference(property, schemas);
                assert!(described, "{name}.{field} has no description");
            }
        }
    }
}

fn described_by_reference(property: &Value, schemas: &serde_json::Map<String, Value>) -> bool {
    let reference = property["$ref"]
        .as_str()
        .or_else(|| property["allOf"][0]["$ref"].as_str());
    reference
        .and_then(|r| schemas.get(r.rsplit('/').next()?))
        .is_some_and(|s| s["description"].is_string())
}

fn walk(name: &str, schema: &Value) {
    match schema {
        Value::Object(map) => {
            assert!(!map.contains_key("prefixItems"), "{name}: a tuple");
            if map.get("type").is_some_and(|t| t == "array") {
                assert!(
                    map.get("items")
                        .is_some_and(|i| i.as_object().is_some_and(|o| !o.is_empty())),
                    "{name}: an array of anything"
                );
            }
            map.values().for_each(|inner| walk(name, inner));
        }
        Value::Array(list) => list.iter().for_each(|inner| walk(name, inner)),
        _ => {}
    }
}

#[tokio::test]
async fn every_example_is_accepted() {
    let app = TestApp::new();
    for (path, method, operation) in operations(&document()) {
        if method == "post" {
            let example = &operation["requestBody"]["content"]["application/json"]["example"];
            let answer = app.post(&path, example).await;
            assert_eq!(answer.status, 200, "{path}: {}", answer.text());
        } else {
            let answer = app.get(&path.replace("{name}", "mil-std-975m")).await;
            assert_eq!(answer.status, 200, "{path}");
        }
    }
}

#[tokio::test]
async fn the_documentation_page_loads_nothing_from_elsewhere() {
    let app = TestApp::new();
    for path in ["/docs/", "/", "/static/page.js", "/static/page.css"] {
        let answer = app.get(path).await;
        assert_eq!(answer.status, 200, "{path}");
        let text = answer.text();
        for (at, _) in text.match_indices("://") {
            let from = text[..at]
                .rfind(|c: char| !c.is_ascii_alphabetic())
                .map_or(0, |i| i + 1);
            let link = &text[from..(at + 40).min(text.len())];
            assert!(link.starts_with("http://www.w3.org/2000/svg"), "{path} names {link}");
        }
    }
}
