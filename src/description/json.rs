//! A JSON text as a plain tree, with what plain parsing would let pass noted: duplicate keys, depth, size.

use serde::de::{DeserializeSeed, Deserializer, MapAccess, SeqAccess, Visitor};
use std::fmt;

/// Deepest nesting that is read: the deepest request has ten levels.
pub const DEPTH_MAXIMUM: usize = 32;
/// Most entries of one array or object.
pub const ENTRIES_MAXIMUM: usize = 10_000;

/// A JSON value.
#[derive(Clone, Debug, PartialEq)]
pub enum Json {
    /// `null`.
    Null,
    /// `true` or `false`.
    Bool(bool),
    /// A finite number.
    Number(f64),
    /// A string.
    String(String),
    /// An array.
    Array(Vec<Json>),
    /// An object in the order written; a key that was given twice is there twice.
    Object(Vec<(String, Json)>),
}

impl Json {
    /// What it is, for error messages.
    #[must_use]
    pub fn kind(&self) -> &'static str {
        match self {
            Self::Null => "null",
            Self::Bool(_) => "a boolean",
            Self::Number(_) => "a number",
            Self::String(_) => "a string",
            Self::Array(_) => "an array",
            Self::Object(_) => "an object",
        }
    }
}

/// A text that is not JSON, or nested too deeply.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{detail} at line {line}, column {column}")]
pub struct NotJson {
    /// What is wrong.
    pub detail: String,
    /// Line, from 1.
    pub line: usize,
    /// Column, from 1; 0 at the beginning of a line.
    pub column: usize,
}

/// Reads a JSON text.
///
/// # Errors
/// [`NotJson`] with the place.
pub fn read(bytes: &[u8]) -> Result<Json, NotJson> {
    let mut deserializer = serde_json::Deserializer::from_slice(bytes);
    let value = Seed { depth: 0 }
        .deserialize(&mut deserializer)
        .and_then(|value| deserializer.end().map(|()| value));
    value.map_err(|error| {
        let text = error.to_string();
        let detail = text.split(" at line ").next().unwrap_or(&text);
        NotJson {
            detail: detail.chars().take(200).collect(),
            line: error.line(),
            column: error.column(),
        }
    })
}

#[derive(Clone, Copy)]
struct Seed {
    depth: usize,
}

impl<'de> DeserializeSeed<'de> for Seed {
    type Value = Json;

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<Json, D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl Seed {
    fn deeper<E: serde::de::Error>(self) -> Result<Self, E> {
        if self.depth >= DEPTH_MAXIMUM {
            return Err(E::custom(format!("nested more than {DEPTH_MAXIMUM} levels deep")));
        }
        Ok(Self { depth: self.depth + 1 })
    }
}

fn too_many<E: serde::de::Error>() -> E {
    E::custom(format!("more than {ENTRIES_MAXIMUM} entries in one array or object"))
}

impl<'de> Visitor<'de> for Seed {
    type Value = Json;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("a JSON value")
    }

    fn visit_unit<E>(self) -> Result<Json, E> {
        Ok(Json::Null)
    }

    fn visit_bool<E>(self, value: bool) -> Result<Json, E> {
        Ok(Json::Bool(value))
    }

    fn visit_i64<E>(self, value: i64) -> Result<Json, E> {
        Ok(Json::Number(value as f64))
    }

    fn visit_u64<E>(self, value: u64) -> Result<Json, E> {
        Ok(Json::Number(value as f64))
    }

    fn visit_f64<E: serde::de::Error>(self, value: f64) -> Result<Json, E> {
        if value.is_finite() {
            Ok(Json::Number(value))
        } else {
            Err(E::custom("number out of range"))
        }
    }

    fn visit_str<E>(self, value: &str) -> Result<Json, E> {
        Ok(Json::String(value.to_owned()))
    }

    fn visit_string<E>(self, value: String) -> Result<Json, E> {
        Ok(Json::String(value))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut access: A) -> Result<Json, A::Error> {
        let inner = self.deeper()?;
        let mut items = Vec::new();
        while let Some(item) = access.next_element_seed(inner)? {
            if items.len() >= ENTRIES_MAXIMUM {
                return Err(too_many());
            }
            items.push(item);
        }
        Ok(Json::Array(items))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut access: A) -> Result<Json, A::Error> {
        let inner = self.deeper()?;
        let mut entries = Vec::new();
        while let Some(key) = access.next_key::<String>()? {
            if entries.len() >= ENTRIES_MAXIMUM {
                return Err(too_many());
            }
            entries.push((key, access.next_value_seed(inner)?));
        }
        Ok(Json::Object(entries))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn refusal(text: &str) -> NotJson {
        read(text.as_bytes()).unwrap_err()
    }

    #[test]
    fn every_kind_of_value_is_read_in_the_order_written() {
        let json = read(br#" {"b": [null, true, -1, 2.5e-3, "\u00b5"], "a": {}} "#).unwrap();
        let items = vec![
            Json::Null,
            Json::Bool(true),
            Json::Number(-1.0),
            Json::Number(0.0025),
            Json::String("µ".to_owned()),
        ];
        let entries = vec![
            ("b".to_owned(), Json::Array(items)),
            ("a".to_owned(), Json::Object(vec![])),
        ];
        assert_eq!(json, Json::Object(entries));
    }

    #[test]
    fn a_key_given_twice_is_there_twice() {
        let Json::Object(entries) = read(br#"{"a": 1, "a": 2}"#).unwrap() else {
            panic!("not an object")
        };
        assert_eq!(entries.len(), 2);
        assert!(entries.iter().all(|(key, _)| key == "a"));
    }

    #[test]
    fn a_refusal_names_its_place() {
        let error = refusal("{\n  \"a\": nope\n}");
        assert_eq!((error.line, error.column), (2, 9), "{error}");
        assert!(error.to_string().ends_with("at line 2, column 9"));
    }

    #[test]
    fn numbers_without_a_finite_value_are_refused() {
        for text in ["1e999", "-1e999", "NaN", "Infinity", "[1e309]"] {
            refusal(text);
        }
        assert_eq!(read(b"1.7976931348623157e308").unwrap(), Json::Number(f64::MAX));
    }

    #[test]
    fn nesting_is_read_to_its_bound_and_no_deeper() {
        let nested = |depth: usize| format!("{}{}", "[".repeat(depth), "]".repeat(depth));
        assert!(read(nested(DEPTH_MAXIMUM).as_bytes()).is_ok());
        assert!(refusal(&nested(DEPTH_MAXIMUM + 1)).detail.contains("32 levels"));
        assert!(refusal(&nested(100_000)).detail.len() <= 200);
    }

    #[test]
    fn entries_are_read_to_their_bound_and_no_further() {
        let list = |count: usize| format!("[{}]", vec!["0"; count].join(","));
        assert!(read(list(ENTRIES_MAXIMUM).as_bytes()).is_ok());
        assert!(refusal(&list(ENTRIES_MAXIMUM + 1)).detail.contains("10000 entries"));
        let keys: Vec<String> = (0..=ENTRIES_MAXIMUM).map(|i| format!("\"{i}\":0")).collect();
        refusal(&format!("{{{}}}", keys.join(",")));
    }
}
