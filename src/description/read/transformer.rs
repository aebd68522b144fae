//! The transformer and its windings.

use super::{each, refuse_part};
use crate::description::fields::Place;
use crate::quantity::{Band, Dimension as D};
use crate::supply::{Transformer, Winding, WindingValues};

pub(super) fn transformer(place: &Place<'_>) -> Transformer {
    let mut f = place.fields();
    refuse_part(&mut f);
    f.refuse(
        "series",
        "this version solves every winding by itself and none in series; give their sum as one winding",
    );
    let transformer = Transformer {
        primary_voltage: f.band("primary_voltage", D::Voltage),
        primary_resistance: f.band_if("primary_resistance", D::Resistance),
        primary_leakage_inductance: f.band_or("primary_leakage_inductance", D::Inductance, Band::ZERO),
        windings: each(f.required("windings"), winding),
        regulation: f.band_if("regulation", D::Ratio),
        rating: f.band_if("rating", D::ApparentPower),
        core_loss: f.band_if("core_loss", D::Power),
    };
    f.finish("a transformer");
    transformer
}

fn winding(place: &Place<'_>) -> Winding {
    let mut f = place.fields();
    let measured = (
        f.band_if("open_circuit_voltage", D::Voltage),
        f.band_if("resistance", D::Resistance),
    );
    let rated = (
        f.band_if("rated_voltage", D::Voltage),
        f.band_if("rated_current", D::Current),
    );
    let leakage_inductance = f.band_or("leakage_inductance", D::Inductance, Band::ZERO);
    let is_object = f.is_object();
    f.finish("a winding");
    let values = match (measured, rated) {
        ((Some(open_circuit_voltage), Some(resistance)), (None, None)) => WindingValues::Measured {
            open_circuit_voltage,
            resistance,
        },
        ((None, None), (Some(rated_voltage), Some(rated_current))) => WindingValues::Nameplate {
            rated_voltage,
            rated_current,
        },
        _ => {
            if is_object {
                place.fault_of_whole(
                    "needs open_circuit_voltage and resistance, or rated_voltage and rated_current, and no other pair",
                );
            }
            unpaired(measured, rated)
        }
    };
    Winding {
        values,
        leakage_inductance,
    }
}

/// As much of an incomplete winding as one pair holds, so that what was given is held against its range. What was not given
/// stands at a value that every range accepts.
fn unpaired(measured: (Option<Band>, Option<Band>), rated: (Option<Band>, Option<Band>)) -> WindingValues {
    const FITTING: Band = Band::exactly(1.0);
    let given = |pair: (Option<Band>, Option<Band>)| usize::from(pair.0.is_some()) + usize::from(pair.1.is_some());
    if given(rated) > given(measured) {
        WindingValues::Nameplate {
            rated_voltage: rated.0.unwrap_or(FITTING),
            rated_current: rated.1.unwrap_or(FITTING),
        }
    } else {
        WindingValues::Measured {
            open_circuit_voltage: measured.0.unwrap_or(FITTING),
            resistance: measured.1.unwrap_or(FITTING),
        }
    }
}
