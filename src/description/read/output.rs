//! An output: its rectifier with the diodes and column capacitors, its rails.

use super::{each, filter, load, refuse_part};
use crate::bounds;
use crate::description::fields::Place;
use crate::quantity::{Band, Dimension as D};
use crate::supply::{Circuit, Diode, DiodeRatings, Load, Output, Rail, Rectifier};

pub(super) fn output(place: &Place<'_>) -> Output {
    let mut f = place.fields();
    let winding = f.integer_or("winding", 0..=bounds::WINDINGS_MAXIMUM as u64 - 1, 0);
    let output = Output {
        winding: winding.and_then(|winding| usize::try_from(winding).ok()).unwrap_or(0),
        rectifier: f.required("rectifier").map_or_else(unread, |place| rectifier(&place)),
        rails: each(f.required("rails"), rail),
    };
    f.finish("an output");
    output
}

/// Stands in for a rectifier that is not there.
fn unread() -> Rectifier {
    Rectifier {
        circuit: Circuit::Bridge,
        diode: unread_diode(),
        stack: None,
        coupling: None,
    }
}

fn unread_diode() -> Diode {
    Diode {
        threshold_voltage: Band::ZERO,
        slope_resistance: Band::ZERO,
        ratings: DiodeRatings::default(),
    }
}

fn rectifier(place: &Place<'_>) -> Rectifier {
    let mut f = place.fields();
    let circuit = f.required("circuit").and_then(|place| super::circuit(&place));
    let rectifier = Rectifier {
        circuit: circuit.unwrap_or(Circuit::Bridge),
        diode: f.required("diode").map_or_else(unread_diode, |place| diode(&place)),
        stack: f.optional("stack").map(|place| filter::capacitor(&place)),
        coupling: f.optional("coupling").map(|place| filter::capacitor(&place)),
    };
    f.finish("a rectifier");
    rectifier
}

pub(super) fn diode(place: &Place<'_>) -> Diode {
    let mut f = place.fields();
    refuse_part(&mut f);
    f.refuse(
        "points",
        "this version solves straight-line diodes only; give threshold_voltage and slope_resistance",
    );
    let ratings = f.optional("ratings");
    let diode = Diode {
        threshold_voltage: f.band("threshold_voltage", D::Voltage),
        slope_resistance: f.band("slope_resistance", D::Resistance),
        ratings: ratings.map_or_else(DiodeRatings::default, |place| diode_ratings(&place)),
    };
    f.finish("a diode");
    diode
}

fn diode_ratings(place: &Place<'_>) -> DiodeRatings {
    let mut f = place.fields();
    let ratings = DiodeRatings {
        reverse_voltage: f.band_if("reverse_voltage", D::Voltage),
        current_mean: f.band_if("current_mean", D::Current),
        current_rms: f.band_if("current_rms", D::Current),
        current_surge: f.band_if("current_surge", D::Current),
    };
    f.finish("the ratings of a diode");
    ratings
}

fn rail(place: &Place<'_>) -> Rail {
    let mut f = place.fields();
    let rail = Rail {
        filter: each(f.optional("filter"), filter::section),
        load: f.required("load").map_or(Load::Open, |place| load::load(&place)),
    };
    f.finish("a rail");
    rail
}
