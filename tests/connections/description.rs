//! What clients read off the published description: one type of error, one type a name.

use serde_json::Value;
use std::collections::BTreeMap;
use std::path::Path;

fn document() -> Value {
    serde_json::from_str(include_str!("../../openapi/openapi.json")).unwrap()
}

fn each_operation(document: &Value, mut see: impl FnMut(&str, &str, &Value)) {
    for (path, item) in document["paths"].as_object().unwrap() {
        for (method, operation) in item.as_object().unwrap() {
            see(method, path, operation);
        }
    }
}

#[test]
fn every_error_is_the_one_problem() {
    each_operation(&document(), |method, path, operation| {
        let responses = operation["responses"].as_object().unwrap();
        for (status, response) in responses {
            let place = format!("{method} {path} {status}");
            assert!(
                response["description"].as_str().is_some_and(|d| !d.is_empty()),
                "{place} has no description"
            );
            if status.starts_with('4') || status.starts_with('5') {
                let content = response["content"].as_object().unwrap();
                assert_eq!(
                    content.keys().collect::<Vec<_>>(),
                    ["application/problem+json"],
                    "{place}"
                );
                let schema = &content["application/problem+json"]["schema"]["$ref"];
                assert_eq!(schema, "#/components/schemas/Problem", "{place}");
            }
        }
        let mut needed = vec!["500", "503"];
        if operation.get("requestBody").is_some() {
            needed.extend(["400", "408", "413", "415", "422"]);
        }
        for status in needed {
            assert!(
                responses.contains_key(status),
                "{method} {path} does not tell of {status}"
            );
        }
    });
}

/// Two Rust types of one name silently become one schema; the later wins. So the names are read from the sources.
#[test]
fn no_two_types_share_the_name_of_a_schema() {
    let mut seen: BTreeMap<String, String> = BTreeMap::new();
    let mut waiting = vec![Path::new(env!("CARGO_MANIFEST_DIR")).join("src")];
    while let Some(place) = waiting.pop() {
        if place.is_dir() {
            waiting.extend(std::fs::read_dir(&place).unwrap().map(|entry| entry.unwrap().path()));
            continue;
        }
        let text = std::fs::read_to_string(&place).unwrap();
        for name in schema_names(&text) {
            let here = place.display().to_string();
            if let Some(other) = seen.insert(name.clone(), here.clone()) {
                panic!("{name} is the name of a schema in {other} and in {here}");
            }
        }
    }
    let published = document();
    let known = published["components"]["schemas"].as_object().unwrap();
    assert!(
        seen.keys().filter(|name| known.contains_key(*name)).count() > 30,
        "{seen:?}"
    );
}

/// The names under which a file's types become schemas.
fn schema_names(text: &str) -> Vec<String> {
    let mut names = Vec::new();
    let mut renamed: Option<String> = None;
    let mut pending = false;
    for line in text.lines().map(str::trim) {
        if line.starts_with("#[derive(") {
            pending = line.contains("ToSchema");
            renamed = None;
        } else if let Some(rest) = line
            .split("as = ")
            .nth(1)
            .filter(|_| pending && line.starts_with("#[schema("))
        {
            renamed = Some(rest.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect());
        } else if let Some(name) = declared(line).filter(|_| pending) {
            names.push(renamed.take().unwrap_or(name));
            pending = false;
        }
    }
    names
}

/// The name of the type that a line declares.
fn declared(line: &str) -> Option<String> {
    let mut words = line
        .split(|c: char| !(c.is_alphanumeric() || c == '_'))
        .filter(|w| !w.is_empty());
    words
        .find(|w| matches!(*w, "struct" | "enum"))
        .and_then(|_| words.next())
        .map(str::to_owned)
}
