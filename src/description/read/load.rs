//! The load of a rail.

use crate::description::fields::{Fields, Place};
use crate::description::json::Json;
use crate::quantity::{Band, Dimension as D};
use crate::supply::Load;

/// The kinds that are solved.
const KINDS: [&str; 4] = ["resistance", "current", "regulator", "open"];

pub(super) fn load(place: &Place<'_>) -> Load {
    let mut f = place.fields();
    let Some(kind) = f.required("kind").and_then(|place| kind(&place)) else {
        // Which fields belong to it is not known, hence none is called unknown.
        return Load::Open;
    };
    let (load, thing) = match kind {
        "resistance" => {
            let resistance = f.band("resistance", D::Resistance);
            (Load::Resistance { resistance }, "a resistance load")
        }
        "current" => {
            let current = f.band("current", D::Current);
            (Load::Current { current }, "a current load")
        }
        "regulator" => (regulator(&mut f), "a regulator load"),
        _ => (Load::Open, "an open load"),
    };
    f.finish(thing);
    load
}

fn kind(place: &Place<'_>) -> Option<&'static str> {
    if matches!(place.json, Json::String(text) if text == "power") {
        let solved = KINDS.join(", ");
        place.fault(format!(
            "this version solves no constant-power loads yet; it solves {solved}"
        ));
        return None;
    }
    place.word(&KINDS)
}

fn regulator(f: &mut Fields<'_>) -> Load {
    Load::Regulator {
        output_voltage: f.band("output_voltage", D::Voltage),
        output_current: f.band("output_current", D::Current),
        dropout: f.band("dropout", D::Voltage),
        quiescent_current: f.band_or("quiescent_current", D::Current, Band::ZERO),
    }
}
