//! What requests have in common: a supply, and ends chosen within its bands.

use super::fields::{Faults, Place};
use super::json::Json;
use super::read::read_supply;
use crate::quantity::{Band, Dimension, End, read_quantity, write_quantity};
use crate::supply::{Fault, Supply};
use std::collections::HashSet;

/// Reads the supply at a place, its faults with the place's pointer before them.
#[must_use]
pub fn supply(place: &Place<'_>, faults: &Faults) -> Option<Supply> {
    match read_supply(place.json) {
        Ok(supply) => Some(supply),
        Err(list) => {
            list.into_iter()
                .for_each(|fault| faults.add(fault.below(&place.pointer)));
            None
        }
    }
}

/// Reads an `at` of its own; see [`at`].
///
/// # Errors
/// Every fault found, with its pointer inside `at`: a key that is no quantity of the supply, a quantity of the wrong
/// dimension or outside its band.
pub fn read_at(json: &Json, supply: &Supply) -> Result<Supply, Vec<Fault>> {
    let faults = Faults::default();
    let collapsed = at(&Place::new(json, "", &faults), supply, &faults);
    faults.settle(collapsed)
}

/// Reads `at`: for some of a supply's quantities an end of the band, or a quantity within it. The supply with every band
/// collapsed: as told, all others nominal.
#[must_use]
pub fn at(place: &Place<'_>, supply: &Supply, faults: &Faults) -> Option<Supply> {
    let Json::Object(entries) = place.json else {
        place.fault(format!("must be an object of pointers, not {}", place.json.kind()));
        return None;
    };
    let slots = supply.slots();
    let mut values: Vec<(&str, Band)> = Vec::new();
    let mut seen = HashSet::new();
    for (key, json) in entries {
        let pointer = format!("{}/{}", place.pointer, super::fields::token(key));
        let here = Place::new(json, pointer, faults);
        if !seen.insert(key) {
            here.fault("is given twice");
            continue;
        }
        let Some(slot) = slots.iter().find(|slot| slot.pointer == *key) else {
            here.fault(format!("{} is not a quantity of this supply", quoted(key)));
            continue;
        };
        let Some(text) = here.text() else { continue };
        match chosen(text, slot.dimension, &slot.band) {
            Ok(band) => values.push((key, band)),
            Err(detail) => here.fault(detail),
        }
    }
    if !faults.is_empty() {
        return None;
    }
    let collapsed = supply.at_ends(|_| None);
    match collapsed.with(&values) {
        Ok(supply) => Some(supply),
        Err(list) => {
            for fault in list {
                let pointer = format!("{}/{}", place.pointer, super::fields::token(&fault.pointer));
                faults.note(pointer, fault.detail);
            }
            None
        }
    }
}

fn chosen(text: &str, dimension: Dimension, band: &Band) -> Result<Band, String> {
    let end = [End::Low, End::Nominal, End::High]
        .into_iter()
        .find(|end| end.as_str() == text);
    if let Some(end) = end {
        return Ok(band.collapsed(end));
    }
    let value = read_quantity(text, dimension)
        .map_err(|error| format!("must be \"low\", \"nominal\", \"high\" or a quantity within the band: {error}"))?;
    if !band.contains(value) {
        let [low, high] = [band.low(), band.high()].map(|end| write_quantity(end, dimension));
        return Err(format!("lies outside the band that the supply gives: {low} to {high}"));
    }
    Band::point(value).map_err(|error| error.to_string())
}

/// A key as it is shown in a message.
#[must_use]
pub fn quoted(key: &str) -> String {
    let short: String = key.chars().take(80).collect();
    format!("{short:?}")
}
