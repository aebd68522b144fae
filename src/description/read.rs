//! A supply from its description, a file a part of it.
//!
//! Every part is read to its end, stand-ins in the place of what is faulty, so that one answer holds all the faults: of
//! the shape, and of the rules that tie the values together as far as these are known.

mod filter;
mod line;
mod load;
mod output;
mod transformer;

use super::fields::{Faults, Fields, Place};
use super::json::Json;
use crate::quantity::Dimension as D;
use crate::supply::{Circuit, Diode, Fault, Line, Load, Parts, Supply, Surroundings};

/// Reads a supply.
///
/// # Errors
/// Every fault found (the first 200), with its pointer inside the supply: those of shape first, then those of range and of
/// rules between fields, which are judged also beside faults of shape where what they rest on could be read.
pub fn read_supply(json: &Json) -> Result<Supply, Vec<Fault>> {
    let faults = Faults::default();
    let parts = supply(&Place::new(json, "", &faults));
    if faults.is_empty() {
        return Supply::new(parts);
    }
    let further = parts.faults(&|pointer| faults.knows(pointer));
    further.into_iter().for_each(|fault| faults.add(fault));
    Err(faults.into_vec())
}

fn supply(place: &Place<'_>) -> Parts {
    let mut f = place.fields();
    let parts = Parts {
        name: f.optional("name").and_then(|place| name(&place)),
        line: f.required("line").map_or_else(line::unread, |place| line::line(&place)),
        transformer: f.optional("transformer").map(|place| transformer::transformer(&place)),
        outputs: each(f.required("outputs"), output::output),
        surroundings: f
            .optional("surroundings")
            .map_or_else(Surroundings::default, |place| whereabouts(&place)),
    };
    f.finish("a supply");
    parts
}

fn name(place: &Place<'_>) -> Option<String> {
    let text = place.text()?;
    if text.chars().count() > crate::bounds::NAME_MAXIMUM {
        place.fault(format!("must be at most {} characters", crate::bounds::NAME_MAXIMUM));
        return None;
    }
    if text.chars().any(char::is_control) {
        place.fault("must not contain control characters");
        return None;
    }
    Some(text.to_owned())
}

fn whereabouts(place: &Place<'_>) -> Surroundings {
    let mut f = place.fields();
    let ambient = f.band_or("ambient", D::Temperature, Surroundings::default().ambient);
    f.finish("the surroundings");
    Surroundings { ambient }
}

/// Reads every item of an array; `None` where one of them is faulty, all of them looked at.
pub fn read_each<T>(place: &Place<'_>, read: impl Fn(&Place<'_>) -> Option<T>) -> Option<Vec<T>> {
    let items: Vec<Option<T>> = place.list()?.iter().map(read).collect();
    items.into_iter().collect()
}

/// Reads every item of an array; none where there is no array.
fn each<T>(place: Option<Place<'_>>, read: impl Fn(&Place<'_>) -> T) -> Vec<T> {
    let items = place.and_then(|place| place.list()).unwrap_or_default();
    items.iter().map(read).collect()
}

/// Notes `"part"` in a component's place.
fn refuse_part(f: &mut Fields<'_>) {
    f.refuse("part", "this version keeps no parts list; give the component's values");
}

/// Reads a line; also part of a need.
pub fn line(place: &Place<'_>) -> Option<Line> {
    place.whole(line::line)
}

/// Reads the name of a circuit.
pub fn circuit(place: &Place<'_>) -> Option<Circuit> {
    let names: Vec<&'static str> = Circuit::ALL.iter().map(|c| c.name()).collect();
    let word = place.word(&names)?;
    Circuit::ALL.into_iter().find(|c| c.name() == word)
}

/// Reads a diode; also an assumption of a need.
pub fn diode(place: &Place<'_>) -> Option<Diode> {
    place.whole(output::diode)
}

/// Reads a load; also part of a need.
pub fn load(place: &Place<'_>) -> Option<Load> {
    place.whole(load::load)
}

/// Reads the surroundings; also part of a need.
pub fn surroundings(place: &Place<'_>) -> Option<Surroundings> {
    place.whole(whereabouts)
}
