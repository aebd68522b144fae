//! The published schemas against the reader.

use crate::description::{form, quantities as q};
use crate::quantity::{Dimension, QuantityError, TEXT_MAXIMUM, read_band};
use proptest::prelude::*;
use proptest::strategy::ValueTree;
use proptest::string::string_regex;
use proptest::test_runner::TestRunner;
use serde_json::Value;
use utoipa::openapi::{RefOr, Schema};
use utoipa::{PartialSchema, ToSchema};

fn value(schema: &RefOr<Schema>) -> Value {
    serde_json::to_value(schema).expect("a schema")
}

/// The quantities by name, dimension and schema.
fn quantities() -> Vec<(String, Dimension, Value)> {
    macro_rules! list {
        ($($name:ident),+) => {
            vec![$((q::$name::name().into_owned(), Dimension::$name, value(&q::$name::schema()))),+]
        };
    }
    list![
        Voltage,
        Current,
        Power,
        ApparentPower,
        Resistance,
        Inductance,
        Capacitance,
        Frequency,
        Ratio,
        Angle,
        Temperature,
        Time,
        Life
    ]
}

#[test]
fn a_text_of_a_pattern_is_refused_for_the_order_of_its_ends_alone() {
    let mut runner = TestRunner::deterministic();
    for (name, dimension, schema) in quantities() {
        let pattern = schema["pattern"].as_str().expect("a pattern");
        let inner = pattern
            .strip_prefix('^')
            .and_then(|p| p.strip_suffix('$'))
            .expect("anchors");
        let strategy = string_regex(inner).expect("a regular expression");
        let (mut tried, mut read) = (0, 0);
        for _ in 0..500 {
            let text = strategy.new_tree(&mut runner).expect("a text").current();
            if text.chars().count() > TEXT_MAXIMUM {
                continue;
            }
            tried += 1;
            match read_band(&text, dimension) {
                Ok(_) => read += 1,
                Err(QuantityError::Inverted { .. } | QuantityError::NominalOutside { .. }) => {}
                Err(error) => panic!("{name}: {text:?} is refused: {error}"),
            }
        }
        assert!(
            tried > 300 && 10 * read >= 7 * tried,
            "{name}: {read} of {tried} are read"
        );
    }
}

#[test]
fn the_examples_read() {
    for (name, dimension, schema) in quantities() {
        let examples = schema["examples"].as_array().expect("examples");
        assert!(!examples.is_empty(), "{name}");
        for example in examples {
            let text = example.as_str().expect("a text");
            assert!(read_band(text, dimension).is_ok(), "{name}: {text}");
        }
        assert_eq!(schema["type"], "string", "{name}");
        assert_eq!(schema["maxLength"], TEXT_MAXIMUM, "{name}");
        assert!(schema["description"].as_str().is_some_and(|d| !d.is_empty()), "{name}");
    }
}

/// Patterns go into clients that know neither looking behind nor Unicode classes.
#[test]
fn patterns_keep_to_what_all_dialects_know() {
    for (name, _, schema) in quantities() {
        let pattern = schema["pattern"].as_str().expect("a pattern");
        for dialect in ["(?<", "(?P", "(?=", "(?!", "\\p", "\\d", "\\u", "\\x", "(?i"] {
            assert!(!pattern.contains(dialect), "{name}: {dialect}");
        }
    }
}

fn assert_closed(name: &str, object: &Value) {
    assert_eq!(object["additionalProperties"], false, "{name} takes unknown fields");
    let properties = object["properties"].as_object().expect("properties");
    for (field, schema) in properties {
        assert!(!schema.to_string().contains("\"null\""), "{name}.{field} may be null");
        assert!(
            schema["description"].is_string() || schema["enum"].is_array(),
            "{name}.{field} is not described"
        );
    }
}

#[test]
fn every_object_is_closed_described_and_never_null() {
    let mut schemas = vec![(form::Supply::name().into_owned(), form::Supply::schema())];
    form::Supply::schemas(&mut schemas);
    let named = |name: &str| schemas.iter().find(|(n, _)| n == name).map(|(_, s)| value(s));
    for name in [
        "Supply",
        "Line",
        "Harmonic",
        "Transformer",
        "Winding",
        "Output",
        "Rectifier",
        "Diode",
        "DiodeRatings",
        "Rail",
        "Section",
        "Series",
        "Capacitor",
        "CapacitorRatings",
        "Surroundings",
    ] {
        assert_closed(name, &named(name).unwrap_or_else(|| panic!("{name} is not published")));
    }
    let load = named("Load").expect("Load");
    let variants = load["oneOf"].as_array().expect("variants");
    let titles: Vec<&str> = variants.iter().filter_map(|v| v["title"].as_str()).collect();
    assert_eq!(titles, ["ResistanceLoad", "CurrentLoad", "RegulatorLoad", "OpenLoad"]);
    variants.iter().for_each(|variant| assert_closed("Load", variant));
    let circuits = named("Circuit").expect("Circuit");
    let names: Vec<&str> = crate::supply::Circuit::ALL.iter().map(|c| c.name()).collect();
    assert_eq!(circuits["enum"], Value::from(names));
}
