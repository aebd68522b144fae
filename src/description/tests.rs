//! Every fault is found at its pointer and no other; what is written reads back to the same bits; the published schema
//! accepts what the reader accepts.

mod at;
mod faults;
mod round_trip;
mod schemas;
mod single_faults;
mod supplies;

use super::json::{self, Json};
use super::read_supply;
use crate::supply::{Fault, Supply};
use serde_json::{Value, json};

/// A supply with every part that a bridge can have, in the words of a description.
fn example() -> Value {
    json!({
        "name": "Kiln controller, 24 V rail",
        "line": {
            "voltage": "230 V ±10 %",
            "frequency": "50 Hz",
            "phases": 1,
            "resistance": "0.25 ohm",
            "inductance": "0.4 mH",
            "harmonics": [{"order": 5, "fraction": "3 %", "phase": "180 deg"}]
        },
        "transformer": {
            "primary_voltage": "230 V",
            "primary_resistance": "11 ohm",
            "primary_leakage_inductance": "0 H",
            "windings": [{
                "open_circuit_voltage": "20.5 V",
                "resistance": "0.21 ohm",
                "leakage_inductance": "60 uH"
            }],
            "rating": "60 VA",
            "core_loss": "1.9 W"
        },
        "outputs": [{
            "winding": 0,
            "rectifier": {
                "circuit": "bridge",
                "diode": {
                    "threshold_voltage": "0.78 V",
                    "slope_resistance": "18 mohm",
                    "ratings": {
                        "reverse_voltage": "100 V", "current_mean": "3 A", "current_rms": "4.7 A", "current_surge": "80 A"
                    }
                }
            },
            "rails": [{
                "filter": [
                    {"capacitor": {
                        "capacitance": "4700 uF ±20 %", "esr": "42 mohm", "count": 1,
                        "ratings": {"voltage": "35 V", "ripple_current": "3.1 A", "endurance": "5000 h", "temperature": "105 degC"}
                    }},
                    {
                        "series": {"resistance": "0.5 ohm", "inductance": "0 H"},
                        "capacitor": {"capacitance": "2200 uF", "esr": "60 mohm"}
                    }
                ],
                "load": {"kind": "current", "current": "1.2 A (0.05 A to 1.4 A)"}
            }]
        }],
        "surroundings": {"ambient": "25 degC (0 degC to 50 degC)"}
    })
}

fn tree(text: &str) -> Json {
    json::read(text.as_bytes()).expect("a JSON text")
}

fn read(value: &Value) -> Result<Supply, Vec<Fault>> {
    read_supply(&tree(&value.to_string()))
}

/// Puts `value` at a pointer whose parent exists; an index at the end of an array appends.
fn put(whole: &mut Value, pointer: &str, value: Value) {
    let (parent, key) = pointer.rsplit_once('/').expect("a pointer");
    match whole.pointer_mut(parent) {
        Some(Value::Object(object)) => {
            object.insert(key.to_owned(), value);
        }
        Some(Value::Array(items)) => {
            let index: usize = key.parse().expect("an index");
            items.splice(index..items.len().min(index + 1), [value]);
        }
        _ => panic!("nothing at {parent}"),
    }
}

/// Takes away what is at a pointer.
fn take(whole: &mut Value, pointer: &str) {
    let (parent, key) = pointer.rsplit_once('/').expect("a pointer");
    let object = whole.pointer_mut(parent).and_then(Value::as_object_mut);
    object.and_then(|o| o.remove(key)).expect("a field to take away");
}
