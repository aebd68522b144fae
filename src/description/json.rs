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
