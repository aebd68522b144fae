//! Taking JSON objects apart, noting every fault with its pointer.
//!
//! Reading goes on behind a fault: what could not be read has a stand-in, and its pointer is in doubt, so that rules that
//! tie one value to another still judge those that are known ([`Faults::knows`]).

use super::json::Json;
use crate::quantity::{Band, Dimension, read_band, read_quantity};
use crate::supply::Fault;
use std::cell::{Cell, RefCell};
use std::collections::HashSet;

/// Faults found so far, and the pointers whose values are in doubt because of them.
#[derive(Debug, Default)]
pub struct Faults {
    list: RefCell<Vec<Fault>>,
    noted: Cell<usize>,
    /// In doubt with all that is below them.
    doubtful: RefCell<HashSet<String>>,
    /// In doubt themselves; what is below them was read.
    doubtful_alone: RefCell<HashSet<String>>,
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
        self.doubt(fault.pointer.clone());
        self.keep(fault);
    }

    /// Notes a fault of an object whose fields could be read.
    fn note_alone(&self, pointer: &str, detail: impl Into<String>) {
        self.doubtful_alone.borrow_mut().insert(pointer.to_owned());
        self.keep(Fault::new(pointer, detail));
    }

    fn keep(&self, fault: Fault) {
        self.noted.set(self.noted.get() + 1);
        let mut list = self.list.borrow_mut();
        if list.len() < FAULTS_MAXIMUM {
            list.push(fault);
        }
    }

    fn doubt(&self, pointer: String) {
        self.doubtful.borrow_mut().insert(pointer);
    }

    /// Whether the value at a pointer was read, or left out and has its default; not where it stands in for one that
    /// could not be read.
    #[must_use]
    pub fn knows(&self, pointer: &str) -> bool {
        if self.doubtful_alone.borrow().contains(pointer) {
            return false;
        }
        let doubtful = self.doubtful.borrow();
        let mut outer = Some(pointer);
        while let Some(here) = outer {
            if doubtful.contains(here) {
                return false;
            }
            outer = here.rfind('/').map(|at| &here[..at]);
        }
        true
    }

    /// Whether none was noted.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.noted.get() == 0
    }

    /// All that were noted, the first 200 of them.
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
    /// Known and refused; not named where the fields are listed.
    refused: Vec<&'static str>,
    is_object: bool,
    /// Whether a missing field is no fault of its own: the object is none, or a refused field stands for all others.
    excused: bool,
}

/// Stands in for a band that could not be read; its pointer is in doubt, so that no rule judges it.
const STAND_IN: Band = Band::ZERO;

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

    /// Notes a fault of the object here, whose fields could be read.
    pub fn fault_of_whole(&self, detail: impl Into<String>) {
        self.faults.note_alone(&self.pointer, detail);
    }

    /// What `read` makes of this place; nothing where it noted a fault.
    pub fn whole<T>(&self, read: impl FnOnce(&Self) -> T) -> Option<T> {
        let before = self.faults.noted.get();
        let value = read(self);
        (self.faults.noted.get() == before).then_some(value)
    }

    /// The object here.
    #[must_use]
    pub fn object(&self) -> Option<Fields<'a>> {
        let fields = self.fields();
        fields.is_object.then_some(fields)
    }

    /// The object here; one without fields, where none is missed, in the place of anything else.
    #[must_use]
    pub fn fields(&self) -> Fields<'a> {
        let entries = match self.json {
            Json::Object(entries) => Some(entries.as_slice()),
            _ => None,
        };
        if entries.is_none() {
            self.expected("an object");
        }
        let fields = Fields {
            entries: entries.unwrap_or(&[]),
            pointer: self.pointer.clone(),
            faults: self.faults,
            known: Vec::new(),
            refused: Vec::new(),
            is_object: entries.is_some(),
            excused: entries.is_none(),
        };
        let (mut once, mut twice) = (HashSet::new(), HashSet::new());
        for (key, _) in fields.entries {
            if !once.insert(key) && twice.insert(key) {
                fields.fault_at(key, "is given twice");
            }
        }
        fields
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
                    "a bare number has no unit; write the {name} with its unit, for example \"{example}\""
                ));
                None
            }
            _ => {
                self.expected(&described(dimension));
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

    /// Whether there is an object at all.
    #[must_use]
    pub fn is_object(&self) -> bool {
        self.is_object
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
        self.needed(field, || "is missing".to_owned())
    }

    fn needed(&mut self, field: &'static str, detail: impl FnOnce() -> String) -> Option<Place<'a>> {
        let found = self.optional(field);
        if found.is_none() {
            if self.excused {
                self.faults.doubt(format!("{}/{field}", self.pointer));
            } else {
                self.fault_at(field, detail());
            }
        }
        found
    }

    /// Notes a field that this version does not know yet, where it is there; whatever is missing beside it is then no
    /// fault, since it would have stood for that.
    pub fn refuse(&mut self, field: &'static str, why: &str) {
        let found = self.optional(field);
        self.known.retain(|known| *known != field);
        self.refused.push(field);
        if let Some(place) = found {
            place.fault(why);
            self.excused = true;
        }
    }

    /// A band that must be there; a stand-in where it is not, or faulty.
    pub fn band(&mut self, field: &'static str, dimension: Dimension) -> Band {
        let found = self.needed(field, || format!("is missing: {}", described(dimension)));
        found.and_then(|place| place.band(dimension)).unwrap_or(STAND_IN)
    }

    /// A band with a default; a stand-in where what is there is faulty.
    pub fn band_or(&mut self, field: &'static str, dimension: Dimension, default: Band) -> Band {
        self.band_if(field, dimension).unwrap_or(default)
    }

    /// A band that may be absent; a stand-in where what is there is faulty.
    pub fn band_if(&mut self, field: &'static str, dimension: Dimension) -> Option<Band> {
        let place = self.optional(field)?;
        Some(place.band(dimension).unwrap_or(STAND_IN))
    }

    /// A whole number with a default. `None` only where what is there is faulty.
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
            if self.known.iter().chain(&self.refused).any(|known| known == key) {
                continue;
            }
            let shown: String = key.chars().take(60).collect();
            let mut advice = String::new();
            if let Some(near) = nearest(&self.known, key) {
                advice = format!("did you mean {near}? ");
                if !self.entries.iter().any(|(other, _)| other == near) {
                    // Its default is hardly what was meant.
                    self.faults.doubt(format!("{}/{near}", self.pointer));
                }
            }
            let fields = self.known.join(", ");
            self.fault_at(
                key,
                format!("{shown:?} is not a field of {thing}; {advice}its fields are {fields}"),
            );
        }
    }
}

/// A quantity as one is asked for it: `an inductance with its unit, for example "0.4 mH"`.
fn described(dimension: Dimension) -> String {
    let (name, example) = (dimension.name(), dimension.example());
    let article = if name.starts_with(['a', 'e', 'i', 'o']) {
        "an"
    } else {
        "a"
    };
    format!("{article} {name} as text with its unit, for example \"{example}\"")
}

/// The known word that was most probably meant: a slip of the finger in every third letter at the most, two in all.
fn nearest(known: &[&'static str], written: &str) -> Option<&'static str> {
    let near = known.iter().filter_map(|word| {
        let slips = slips(word, written)?;
        (slips <= (word.len() / 3).clamp(1, 2)).then_some((slips, *word))
    });
    near.min_by_key(|(slips, _)| *slips).map(|(_, word)| word)
}

/// How many letters were left out, added, changed or exchanged with their neighbour (optimal string alignment); nothing
/// where the lengths alone tell that they are too many.
fn slips(known: &str, written: &str) -> Option<usize> {
    if known.len().abs_diff(written.len()) > 2 {
        return None;
    }
    let (a, b): (Vec<char>, Vec<char>) = (known.chars().collect(), written.chars().collect());
    let mut rows = vec![vec![0; b.len() + 1]; a.len() + 1];
    for i in 0..=a.len() {
        for j in 0..=b.len() {
            if i == 0 || j == 0 {
                rows[i][j] = i + j;
                continue;
            }
            let changed = rows[i - 1][j - 1] + usize::from(a[i - 1] != b[j - 1]);
            let mut least = changed.min(rows[i - 1][j] + 1).min(rows[i][j - 1] + 1);
            if i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1] {
                least = least.min(rows[i - 2][j - 2] + 1);
            }
            rows[i][j] = least;
        }
    }
    Some(rows[a.len()][b.len()])
}
