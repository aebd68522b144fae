//! Taking JSON objects apart, noting every fault with its pointer.

use super::json::Json;
use crate::quantity::{Band, Dimension, read_band, read_quantity};
use crate::supply::Fault;
use std::cell::RefCell;

/// Faults found so far.
#[derive(Debug, Default)]
pub struct Faults {
    list: RefCell<Vec<Fault>>,
}

/// Most faults that are noted: more help nobody.
const FAULTS_MAXIMUM: usize = 200;

impl Faults {
    /// Notes a fault.
    pub fn note(&self, pointer: impl Into<String>, detail: impl Into<String>) {
        self.add(Fault::new(pointer, detail));
    }

    /// Notes a fault.
    pub fn add(&self, fault: Fault) {
        let mut list = self.list.borrow_mut();
        if list.len() < FAULTS_MAXIMUM {
            list.push(fault);
        }
    }

    /// Whether none was noted.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.list.borrow().is_empty()
    }

    /// All that were noted.
    #[must_use]
    pub fn into_vec(self) -> Vec<Fault> {
        self.list.into_inner()
    }

    /// A value where nothing was noted, the faults otherwise.
    ///
    /// # Errors
    /// The faults.
    pub fn settle<T>(self, value: Option<T>) -> Result<T, Vec<Fault>> {
        match value {
            Some(value) if self.is_empty() => Ok(value),
            _ => Err(self.into_vec()),
        }
    }
}

/// A value and where it stands.
#[derive(Clone, Debug)]
pub struct Place<'a> {
    /// The value.
    pub json: &'a Json,
    /// Its JSON Pointer.
    pub pointer: String,
    faults: &'a Faults,
}

/// An object being taken apart. Every field that is asked for counts as known; [`Fields::finish`] notes the others.
#[derive(Debug)]
pub struct Fields<'a> {
    entries: &'a [(String, Json)],
    pointer: String,
    faults: &'a Faults,
    known: Vec<&'static str>,
}

/// One reference token of a JSON Pointer (RFC 6901).
#[must_use]
pub fn token(key: &str) -> String {
    key.replace('~', "~0").replace('/', "~1")
}

impl<'a> Place<'a> {
    /// A value at a pointer.
    #[must_use]
    pub fn new(json: &'a Json, pointer: impl Into<String>, faults: &'a Faults) -> Self {
        Self {
            json,
            pointer: pointer.into(),
            faults,
        }
    }

    /// Notes a fault here.
    pub fn fault(&self, detail: impl Into<String>) {
        self.faults.note(self.pointer.clone(), detail);
    }

    fn expected(&self, what: &str) {
        self.fault(format!("must be {what}, not {}", self.json.kind()));
    }

    /// The object here.
    #[must_use]
    pub fn object(&self) -> Option<Fields<'a>> {
        let Json::Object(entries) = self.json else {
            self.expected("an object");
            return None;
        };
        for (index, (key, _)) in entries.iter().enumerate() {
            if entries[..index].iter().any(|(other, _)| other == key) {
                self.faults
                    .note(format!("{}/{}", self.pointer, token(key)), "is given twice");
            }
        }
        Some(Fields {
            entries,
            pointer: self.pointer.clone(),
            faults: self.faults,
            known: Vec::new(),
        })
    }

    /// The items of the array here.
    #[must_use]
    pub fn list(&self) -> Option<Vec<Place<'a>>> {
        let Json::Array(items) = self.json else {
            self.expected("an array");
            return None;
        };
        let at = |index: usize| format!("{}/{index}", self.pointer);
        Some(
            items
                .iter()
                .enumerate()
                .map(|(i, json)| Place::new(json, at(i), self.faults))
                .collect(),
        )
    }

    /// The string here.
    #[must_use]
    pub fn text(&self) -> Option<&'a str> {
        let Json::String(text) = self.json else {
            self.expected("a string");
            return None;
        };
        Some(text)
    }

    /// The whole number here, within `range`.
    #[must_use]
    pub fn integer(&self, range: std::ops::RangeInclusive<u64>) -> Option<u64> {
        let (low, high) = (*range.start(), *range.end());
        match self.json {
            Json::Number(value) if value.fract() == 0.0 && *value >= low as f64 && *value <= high as f64 => {
                Some(*value as u64)
            }
            Json::Number(_) => {
                self.fault(format!("must be a whole number from {low} to {high}"));
                None
            }
            _ => {
                self.expected("a whole number");
                None
            }
        }
    }

    /// The boolean here.
    #[must_use]
    pub fn boolean(&self) -> Option<bool> {
        let Json::Bool(value) = self.json else {
            self.expected("true or false");
            return None;
        };
        Some(*value)
    }

    fn quantity_text(&self, dimension: Dimension) -> Option<&'a str> {
        match self.json {
            Json::String(text) => Some(text),
            Json::Number(_) => {
                let (name, example) = (dimension.name(), dimension.example());
                self.fault(format!(
                    "a bare number has no unit; write the {name} as text with its unit, for example \"{example}\""
                ));
                None
            }
            _ => {
                self.expected(&format!(
                    "a {} as text, for example \"{}\"",
                    dimension.name(),
                    dimension.example()
                ));
                None
            }
        }
    }

    /// The quantity or band here.
    #[must_use]
    pub fn band(&self, dimension: Dimension) -> Option<Band> {
        let text = self.quantity_text(dimension)?;
        read_band(text, dimension)
            .map_err(|error| self.fault(error.to_string()))
            .ok()
    }

    /// The lone quantity here.
    #[must_use]
    pub fn quantity(&self, dimension: Dimension) -> Option<f64> {
        let text = self.quantity_text(dimension)?;
        read_quantity(text, dimension)
            .map_err(|error| self.fault(error.to_string()))
            .ok()
    }

    /// One of a list of words.
    #[must_use]
    pub fn word(&self, words: &[&'static str]) -> Option<&'static str> {
        let text = self.text()?;
        let found = words.iter().copied().find(|word| *word == text);
        if found.is_none() {
            self.fault(format!("must be one of {}", words.join(", ")));
        }
        found
    }
}

impl<'a> Fields<'a> {
    /// Where the object stands.
    #[must_use]
    pub fn pointer(&self) -> &str {
        &self.pointer
    }

    /// Notes a fault at a field.
    pub fn fault_at(&self, field: &str, detail: impl Into<String>) {
        self.faults.note(format!("{}/{}", self.pointer, token(field)), detail);
    }

    /// A field, where it is there.
    pub fn optional(&mut self, field: &'static str) -> Option<Place<'a>> {
        if !self.known.contains(&field) {
            self.known.push(field);
        }
        let (_, json) = self.entries.iter().find(|(key, _)| key == field)?;
        Some(Place::new(json, format!("{}/{field}", self.pointer), self.faults))
    }

    /// A field that must be there.
    pub fn required(&mut self, field: &'static str) -> Option<Place<'a>> {
        let found = self.optional(field);
        if found.is_none() {
            self.fault_at(field, "is missing");
        }
        found
    }

    /// A band that must be there.
    pub fn band(&mut self, field: &'static str, dimension: Dimension) -> Option<Band> {
        let found = self.optional(field);
        if found.is_none() {
            let (name, example) = (dimension.name(), dimension.example());
            self.fault_at(field, format!("is missing: a {name}, for example \"{example}\""));
        }
        found?.band(dimension)
    }

    /// A band with a default. `None` only where what is there is faulty.
    pub fn band_or(&mut self, field: &'static str, dimension: Dimension, default: Band) -> Option<Band> {
        match self.optional(field) {
            None => Some(default),
            Some(place) => place.band(dimension),
        }
    }

    /// A band that may be absent. The outer `None` means that what is there is faulty.
    pub fn band_if(&mut self, field: &'static str, dimension: Dimension) -> Option<Option<Band>> {
        match self.optional(field) {
            None => Some(None),
            Some(place) => place.band(dimension).map(Some),
        }
    }

    /// A whole number with a default.
    pub fn integer_or(
        &mut self,
        field: &'static str,
        range: std::ops::RangeInclusive<u64>,
        default: u64,
    ) -> Option<u64> {
        match self.optional(field) {
            None => Some(default),
            Some(place) => place.integer(range),
        }
    }

    /// Notes every field that nobody asked for.
    pub fn finish(self, thing: &str) {
        for (key, _) in self.entries {
            if self.known.iter().any(|known| known == key) {
                continue;
            }
            let shown: String = key.chars().take(60).collect();
            let near = self.known.iter().copied().find(|known| is_near(known, key));
            let advice = near.map_or_else(
                || format!("its fields are {}", self.known.join(", ")),
                |near| format!("did you mean {near}?"),
            );
            self.fault_at(key, format!("{shown:?} is not a field of {thing}; {advice}"));
        }
    }
}

/// Whether two words differ by two letters at the most: a slip of the finger.
fn is_near(known: &str, written: &str) -> bool {
    if known.len().abs_diff(written.len()) > 2 || written.len() > 60 {
        return false;
    }
    let (a, b): (Vec<char>, Vec<char>) = (known.chars().collect(), written.chars().collect());
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.iter().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, y) in b.iter().enumerate() {
            let best = (diagonal + usize::from(x != y)).min(row[j] + 1).min(row[j + 1] + 1);
            diagonal = row[j + 1];
            row[j + 1] = best;
        }
    }
    row[b.len()] <= 2
}
