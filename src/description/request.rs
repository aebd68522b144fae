//! What requests have in common: a supply, and ends chosen within its bands.

use super::fields::{Faults, Place};
use super::json::Json;
use super::read::read_supply;
use crate::quantity::{Band, End, read_quantity};
use crate::supply::{Fault, Supply};

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
    for (key, json) in entries {
        let pointer = format!("{}/{}", place.pointer, super::fields::token(key));
        let here = Place::new(json, pointer, faults);
        let Some(slot) = slots.iter().find(|slot| slot.pointer == *key) else {
            here.fault(format!("{} is not a quantity of this supply", quoted(key)));
            continue;
        };
        if values.iter().any(|(pointer, _)| pointer == key) {
            here.fault("is given twice");
            continue;
        }
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
            list.into_iter()
                .for_each(|fault: Fault| faults.add(fault.below(&place.pointer)));
            None
        }
    }
}

fn chosen(text: &str, dimension: crate::quantity::Dimension, band: &Band) -> Result<Band, String> {
    let end = [End::Low, End::Nominal, End::High]
        .into_iter()
        .find(|end| end.as_str() == text);
    if let Some(end) = end {
        return Ok(band.collapsed(end));
    }
    let value = read_quantity(text, dimension)
        .map_err(|error| format!("must be \"low\", \"nominal\", \"high\" or a quantity within the band: {error}"))?;
    if !band.contains(value) {
        return Err("lies outside the band that the supply gives".to_owned());
    }
    Band::point(value).map_err(|error| error.to_string())
}

/// A key as it is shown in a message.
#[must_use]
pub fn quoted(key: &str) -> String {
    let short: String = key.chars().take(80).collect();
    format!("{short:?}")
}
